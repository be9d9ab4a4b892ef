"""Keys, words, names and tables that the recipe does not know, or not there."""

from __future__ import annotations

import pytest
from broken import (
    CONCENTRATION,
    FREE,
    GRAIN,
    HOST_LEVEL,
    LOADING,
    RED,
    RED_TERM,
    SOUND,
    Broken,
    add,
    check,
    swap,
)

from mixsim.recipe import parse

DRUDE = 'free = { model = "drude", plasma = "1.5 eV", damping = "0.1 eV" }'
MATRIX = "materials.matrix"
SHAPE = f"{LOADING}\nshape = "

CASES: dict[str, Broken] = {
    # keys, at every level: the gap that a misspelt one leaves is not a second message
    "table": swap(
        "[voids]", "[viods]", "viods", "unknown key 'viods'", "a recipe takes title, band", "voids"
    ),
    "key of the band": swap("from =", "form =", "band.form", "'form'", "band takes from, to", "from"),
    "key of the host": swap(
        'material = "matrix"', 'materail = "matrix"', "host.materail", "'materail'", "host takes", "material"
    ),
    "key of an inclusion": swap(
        LOADING,
        'volume_fractoin = "10 %"',
        f"{GRAIN}.volume_fractoin",
        "unknown key 'volume_fractoin'",
        "volume_fraction_of_solids",
        "volume_fraction",
    ),
    "basis": swap(
        LOADING, 'wieght_fraction = "10 %"', f"{GRAIN}.wieght_fraction", "'wieght", "phr", "weight_fraction"
    ),
    "basis beside the right one": swap(
        LOADING,
        f'{LOADING}\nwieght_fraction = "10 %"',
        f"{GRAIN}.wieght_fraction",
        "unknown key",
        "phr",
        "weight_fraction",
    ),
    "key of a shape": swap(
        LOADING,
        SHAPE + '{ kind = "spheroid", aspect = 2.0 }',
        f"{GRAIN}.shape.aspect",
        "unknown key 'aspect'",
        "kind, aspect_ratio, aspect_ratio_spread, axes",
        "aspect_ratio",
    ),
    "key of a dopant": swap(
        CONCENTRATION,
        'number_desnity = "1e19 cm^-3"',
        "dopants.ion.number_desnity",
        "unknown key",
        "mole_fraction",
        "number_density",
    ),
    "key of a dopant's term": swap(
        "strength =", "strenght =", f"{RED}.strenght", "'strenght'", "plasma", "strength"
    ),
    "key of the voids": swap(
        '[voids]\nvolume_fraction = "1 %"',
        '[voids]\nvolume = "1 %"',
        "voids.volume",
        "unknown key 'volume'",
        "voids takes volume_fraction",
        "volume_fraction",
    ),
    "key of the mixing": swap("rule =", "role =", "mixing.role", "'role'", "rule, density", "rule"),
    "key of a material": swap(
        'density = "1.2', 'densty = "1.2', f"{MATRIX}.densty", "'densty'", "density, molar_mass", "density"
    ),
    "key of a permittivity": swap(
        HOST_LEVEL,
        "permittivity.infinty = 2.25",
        f"{MATRIX}.permittivity.infinty",
        "unknown key 'infinty'",
        "infinity, susceptibility, plasma, terms",
        "infinity",
    ),
    "key of a term": swap(
        'damping = "0.1', 'dampnig = "0.1', f"{FREE}.dampnig", "'dampnig'", "plasma, strength", "damping"
    ),
    "key model of a term": swap(
        'model = "drude"', 'modle = "drude"', f"{FREE}.modle", "unknown key 'modle'", "takes model", "model"
    ),
    "key of an index": swap(
        HOST_LEVEL,
        'index = { model = "sellmeier", strength = [1.0], resonance_wavelengths = ["1 µm"] }',
        f"{MATRIX}.index.strength",
        "unknown key 'strength'",
        "strengths, resonance_wavelengths",
        "strengths",
    ),
    "key of a validity": add(
        '[materials.more]\npermittivity.infinity = 2.0\nvalid = { from = "1 µm", too = "2 µm" }\n',
        "materials.more.valid.too",
        "unknown key 'too'",
        "from, to",
        "to",
    ),
    "key of the readings": add(
        "[measured]\nhigh_frequancy = 2.0\n",
        "measured.high_frequancy",
        "unknown key",
        "static, high_frequency",
        "high_frequency",
    ),
    "key far from all": swap(
        "[host]", "[host]\ncolour = 'red'", "host.colour", "unknown key 'colour'", "host takes material"
    ),
    "empty key": swap("[host]", '[host]\n"" = 1', "host.", "unknown key ''", "host takes material"),
    # words
    "model": swap("drude", "druude", f"{FREE}.model", "unknown model 'druude'", "lorentz, drude", "drude"),
    "model of a dopant's term": swap(
        '"lorentz"', '"lorenz"', f"{RED}.model", "unknown model 'lorenz'", "lorentz, drude", "lorentz"
    ),
    "model of a dopant's term far from all": swap(
        '"lorentz"', '"oscillator"', f"{RED}.model", "unknown model 'oscillator'", "lorentz, drude"
    ),
    "model of an index": swap(
        HOST_LEVEL,
        'index = { model = "cauchi", a = 1.5 }',
        f"{MATRIX}.index.model",
        "unknown model 'cauchi'",
        "constant, cauchy, sellmeier",
        "cauchy",
    ),
    "model that is no word": swap(
        '"drude"', "true", f"{FREE}.model", "unknown model true", "lorentz, drude", at="free = "
    ),
    "rule": swap(
        "maxwell-garnett", "maxwel-garnett", "mixing.rule", "'maxwel-", "bruggeman", "maxwell-garnett"
    ),
    "rule in capitals": swap(
        "maxwell-garnett", "Bruggeman", "mixing.rule", "unknown rule 'Bruggeman'", "lorentz-", "bruggeman"
    ),
    "material of the host": swap(
        'material = "matrix"',
        'material = "alumnia"',
        "host.material",
        "unknown material 'alumnia'",
        "define [materials.alumnia] or name a built-in one, see mixsim list materials",
        "alumina",
    ),
    "material of an inclusion": swap(
        'material = "filler"',
        'material = "fillr"',
        f"{GRAIN}.material",
        "unknown material 'fillr'",
        "define [materials.fillr]",
        "filler",
    ),
    "material far from all": swap(
        'material = "filler"', 'material = "zzz"', f"{GRAIN}.material", "'zzz'", "define [materials.zzz]"
    ),
    "base": swap(
        "[materials.matrix]",
        '[materials.matrix]\nbased_on = "acryllic"',
        f"{MATRIX}.based_on",
        "unknown material 'acryllic'",
        "built-in",
        "acrylic",
    ),
    "base of the one material used": swap(
        HOST_LEVEL, 'based_on = "fuller"', f"{MATRIX}.based_on", "'fuller'", "built-in", "filler"
    ),
    "shape": swap(
        LOADING,
        SHAPE + '{ kind = "spheriod" }',
        f"{GRAIN}.shape.kind",
        "unknown kind 'spheriod'",
        "one of sphere, spheroid",
        "spheroid",
    ),
    "orientation": swap(
        LOADING,
        f'{LOADING}\norientation = "alinged"',
        f"{GRAIN}.orientation",
        "unknown orientation 'alinged'",
        "one of random, aligned",
        "aligned",
    ),
    "contact": swap(
        LOADING,
        f'{LOADING}\ncontact = "touch"',
        f"{GRAIN}.contact",
        "unknown contact 'touch'",
        "insulated, touching",
        "touching",
    ),
    "spacing": swap(
        'to = "800 nm"',
        'to = "800 nm"\nspacing = "logarithmic"',
        "band.spacing",
        "unknown spacing 'logarithmic'",
        "linear, log",
        "log",
    ),
    "local field": swap(
        CONCENTRATION,
        f'{CONCENTRATION}\nlocal_field = "virtual"',
        "dopants.ion.local_field",
        "unknown local_field 'virtual'",
        "none, virtual-cavity",
        "virtual-cavity",
    ),
    "kind of a source": swap(
        HOST_LEVEL,
        f'{HOST_LEVEL}\nkind = "publishd"',
        f"{MATRIX}.kind",
        "unknown kind 'publishd'",
        "published, memory",
        "published",
    ),
    # names
    "name with a space": swap(
        "[inclusions.grain]",
        '[inclusions."my grain"]',
        "inclusions.my grain",
        "name 'my grain'",
        "letters, digits",
        "my-grain",
    ),
    "name with a dot": add(
        '[materials."glass.2"]\npermittivity.infinity = 2.0\n',
        "materials.glass.2",
        "name 'glass.2'",
        "letters, digits",
        "glass-2",
        at='"glass.2"',
    ),
    "empty name": add(
        '[materials.""]\npermittivity.infinity = 2.0\n',
        "materials.",
        "name ''",
        "letters, digits",
        at='[materials.""]',
    ),
    "material with a space": swap(
        'material = "matrix"', 'material = "my glass"', "host.material", "'my glass'", "letters", "my-glass"
    ),
    "inclusion named host": swap(
        "[inclusions.grain]", "[inclusions.host]", "inclusions.host", "called 'host'", "another name"
    ),
    "inclusion named voids": swap(
        "[inclusions.grain]", "[inclusions.voids]", "inclusions.voids", "called 'voids'", "another name"
    ),
    # tables, and what they must hold
    "no host": swap(
        '[host]\nmaterial = "matrix"\n',
        "",
        "host",
        "host is missing",
        "a recipe needs a table [host]",
        at=None,
    ),
    "no material of an inclusion": swap(
        'material = "filler"\n',
        "",
        f"{GRAIN}.material",
        "material is missing",
        "inclusions.grain needs material",
        at="[inclusions.grain]",
    ),
    "no kind of a shape": swap(
        LOADING,
        SHAPE + "{ aspect_ratio = 2.0 }",
        f"{GRAIN}.shape.kind",
        "kind is missing",
        "shape needs kind",
    ),
    "no terms of a dopant": swap(
        RED_TERM, "", "dopants.ion.terms", "terms is missing", "dopants.ion needs terms", at="[dopants.ion]"
    ),
    "empty terms of a dopant": swap(
        RED_TERM, "terms = {}", "dopants.ion.terms", "an empty table", "1 or more"
    ),
    "no model of a term": swap(
        'model = "drude", ', "", FREE, "model is missing", "lorentz, drude", at="free ="
    ),
    "text for the host": swap(
        '[band]\nfrom = "400 nm"\nto = "800 nm"\n\n[host]\nmaterial = "matrix"',
        'host = "matrix"',
        "host",
        "'matrix' where a table is needed",
        "host is a table that takes material",
    ),
    "text for the band": swap(
        '[band]\nfrom = "400 nm"\nto = "800 nm"\n',
        'band = "400 nm to 800 nm"\n',
        "band",
        "where a table is needed",
        "band is a table that takes from, to, points, spacing, values",
    ),
    "number for a permittivity": swap(
        HOST_LEVEL,
        "permittivity = 2.25",
        f"{MATRIX}.permittivity",
        "2.25 where a table is needed",
        "infinity, susceptibility, plasma, terms",
    ),
    "number for an index": swap(
        HOST_LEVEL, "index = 1.5", f"{MATRIX}.index", "1.5 where a table is needed", "a table with model"
    ),
    "number for a term": swap(DRUDE, "free = 3", FREE, "3 where a table is needed", "a table with model"),
    "number for terms": swap(
        f"permittivity.terms.{DRUDE}",
        "permittivity.terms = 3",
        "materials.filler.permittivity.terms",
        "3 where a table is needed",
        "[materials.filler.permittivity.terms.NAME]",
    ),
    "list of tables for one": swap(
        "[inclusions.grain]",
        "[[inclusions.grain]]",
        GRAIN,
        "a list of tables",
        "one table: [inclusions.grain]",
    ),
    "list of tables for named ones": swap(
        "[inclusions.grain]", "[[inclusions]]", "inclusions", "a list of tables", "[inclusions.NAME]"
    ),
    "number for a title": swap('title = "sound"', "title = 5", "title", "5 where a text is needed", "quotes"),
    "list for a material": swap(
        'material = "matrix"', 'material = ["matrix"]', "host.material", "where a text is needed", "quotes"
    ),
}


def test_the_sound_recipe_is_sound() -> None:
    parse(SOUND)


@pytest.mark.parametrize("name", CASES)
def test_one_message(name: str) -> None:
    check(CASES[name])
