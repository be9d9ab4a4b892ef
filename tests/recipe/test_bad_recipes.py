"""Broken recipes: one message each, with place, what was found, what is allowed and the nearest word."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path

import pytest

from mixsim.errors import BadInput, Fault
from mixsim.recipe import load, parse

SOUND = """
title = "sound"

[band]
from = "400 nm"
to = "800 nm"

[host]
material = "matrix"

[inclusions.grain]
material = "filler"
volume_fraction = "10 %"

[dopants.ion]
number_density = "1e19 cm^-3"
terms.red = { model = "lorentz", strength = 1e-3, resonance = "2.05 eV", damping = "0.28 eV" }

[voids]
volume_fraction = "1 %"

[mixing]
rule = "maxwell-garnett"

[materials.matrix]
density = "1.2 g/cm^3"
permittivity.infinity = 2.25

[materials.filler]
density = "4.0 g/cm^3"
permittivity.infinity = 4.0
permittivity.terms.free = { model = "drude", plasma = "1.5 eV", damping = "0.1 eV" }
"""


@dataclass(frozen=True)
class Broken:
    """One change to the sound recipe, and the one fault that it makes."""

    old: str
    new: str
    path: str
    found: str
    allowed: str
    suggestion: str | None = None


def swap(old: str, new: str, path: str, found: str, allowed: str, suggestion: str | None = None) -> Broken:
    return Broken(old, new, path, found, allowed, suggestion)


def also(new: str, path: str, found: str, allowed: str, suggestion: str | None = None) -> Broken:
    """Something more at the end of the recipe, in a table of its own."""
    return Broken("", new, path, found, allowed, suggestion)


FREE = 'free = { model = "drude", plasma = "1.5 eV", damping = "0.1 eV" }'
GRAIN, TERM = "inclusions.grain", "materials.filler.permittivity.terms.free"
RED = "dopants.ion.terms.red"

CASES = {
    # words
    "misspelt table": swap("[voids]", "[viods]", "viods", "unknown key 'viods'", "title, band", "voids"),
    "misspelt key": swap("rule =", "role =", "mixing.role", "unknown key 'role'", "takes rule", "rule"),
    "misspelt key of an inclusion": swap(
        'volume_fraction = "10 %"',
        'volume_fractoin = "10 %"',
        f"{GRAIN}.volume_fractoin",
        "unknown key",
        "volume_fraction_of_solids",
        "volume_fraction",
    ),
    "misspelt key of a term": swap(
        'damping = "0.1', 'dampnig = "0.1', f"{TERM}.dampnig", "unknown key 'dampnig'", "plasma", "damping"
    ),
    "misspelt model": swap("drude", "druude", f"{TERM}.model", "'druude'", "lorentz, drude", "drude"),
    "misspelt rule": swap(
        "maxwell-garnett", "maxwel-garnett", "mixing.rule", "'maxwel-garnett'", "bruggeman", "maxwell-garnett"
    ),
    "unknown material": swap(
        'material = "matrix"',
        'material = "alumnia"',
        "host.material",
        "'alumnia'",
        "[materials.alumnia]",
        "alumina",
    ),
    "unknown base": swap(
        "[materials.matrix]",
        '[materials.matrix]\nbased_on = "acryllic"',
        "materials.matrix.based_on",
        "unknown material 'acryllic'",
        "built-in",
        "acrylic",
    ),
    "unknown shape": swap(
        "[dopants.ion]",
        '[inclusions.grain.shape]\nkind = "spheriod"\n[dopants.ion]',
        f"{GRAIN}.shape.kind",
        "'spheriod'",
        "sphere, spheroid",
        "spheroid",
    ),
    "unknown orientation": swap(
        '"10 %"',
        '"10 %"\norientation = "alinged"',
        f"{GRAIN}.orientation",
        "'alinged'",
        "random, aligned",
        "aligned",
    ),
    "unknown contact": swap(
        '"10 %"',
        '"10 %"\ncontact = "touch"',
        f"{GRAIN}.contact",
        "'touch'",
        "insulated, touching",
        "touching",
    ),
    "unknown spacing": swap(
        '"800 nm"', '"800 nm"\nspacing = "logarithmic"', "band.spacing", "'logarithmic'", "linear, log", "log"
    ),
    "name with a blank": swap(
        "[inclusions.grain]",
        '[inclusions."my grain"]',
        "inclusions.my grain",
        "'my grain'",
        "letters, digits",
    ),
    "reserved name": swap(
        "[inclusions.grain]", "[inclusions.host]", "inclusions.host", "'host'", "another name"
    ),
    # quantities
    "wrong unit": swap('"1.5 eV"', '"1.5 kg"', f"{TERM}.plasma", "unit 'kg'", "eV"),
    "misspelt unit": swap('"400 nm"', '"400 mn"', "band.from", "'mn'", "nm", "nm"),
    "no unit": swap('"1.2 g/cm^3"', '"1.2"', "materials.matrix.density", "1.2", "g/cm^3"),
    "bare number": swap('plasma = "1.5 eV"', "plasma = 1.5", f"{TERM}.plasma", "1.5", "eV"),
    "unit where none belongs": swap(
        "infinity = 2.25", 'infinity = "2.25 nm"', "materials.matrix.permittivity.infinity", "'nm'", "plain"
    ),
    "no quantity at all": swap('"0.1 eV"', '"little"', f"{TERM}.damping", "'little'", "eV"),
    "decimal comma": swap('"1.5 eV"', '"1,5 eV"', f"{TERM}.plasma", "1,5", "point"),
    "not finite": swap(
        "infinity = 2.25", "infinity = nan", "materials.matrix.permittivity.infinity", "nan", ""
    ),
    "a switch for a number": swap(
        "infinity = 2.25", "infinity = true", "materials.matrix.permittivity.infinity", "True", "4.0"
    ),
    "a list for a number": swap(
        "infinity = 2.25", "infinity = [2.25]", "materials.matrix.permittivity.infinity", "[2.25]", "4.0"
    ),
    "negative uncertainty": swap(
        '"10 %"', '"10 % ± -1 %"', f"{GRAIN}.volume_fraction", "-1", "zero or a positive"
    ),
    "wavelength width without a resonance": swap(
        'damping = "0.1 eV"', 'damping = "20 nm"', f"{TERM}.damping", "'20 nm'", "frequency"
    ),
    # ranges
    "fraction above one": swap('"10 %"', '"140 %"', f"{GRAIN}.volume_fraction", "'140 %'", "at most 1"),
    "negative fraction": swap('"10 %"', '"-1 %"', f"{GRAIN}.volume_fraction", "'-1 %'", "at least 0"),
    "negative damping": swap('"0.1 eV"', '"-0.1 eV"', f"{TERM}.damping", "'-0.1 eV'", "at least 0"),
    "resonance at zero": swap('"2.05 eV"', '"0 eV"', f"{RED}.resonance", "'0 eV'", "above 0"),
    "negative level": swap(
        "infinity = 2.25", "infinity = -2.25", "materials.matrix.permittivity.infinity", "'-2.25'", "above 0"
    ),
    "fractions beyond one": swap('"10 %"', '"99.5 %"', "inclusions", "add up to 1.005", "at most 1"),
    "reversed band": swap('from = "400 nm"', 'from = "900 nm"', "band", "runs backwards", "smaller"),
    "band of one point": swap('from = "400 nm"', 'from = "800 nm"', "band", "single point", "values"),
    "one point": swap('"800 nm"', '"800 nm"\npoints = 1', "band.points", "1", "2"),
    "half a point": swap('"800 nm"', '"800 nm"\npoints = 2.5', "band.points", "2.5", "integer"),
    # one description of a thing, and all that it needs
    "two bases": swap(
        '"10 %"', '"10 %"\nweight_fraction = "20 %"', f"{GRAIN}.weight_fraction", "given twice", "one of them"
    ),
    "no loading": swap('volume_fraction = "10 %"\n', "", GRAIN, "the loading is not given", "phr"),
    "no host": swap('[host]\nmaterial = "matrix"\n', "", "host", "host is missing", "must be given"),
    "band without an end": swap('to = "800 nm"\n', "", "band", "to is missing", "from and to"),
    "values beside ends": swap(
        'to = "800 nm"', 'to = "800 nm"\nvalues = ["500 nm"]', "band.from", "beside values", "values, or from"
    ),
    "two descriptions of a band": swap(
        'plasma = "1.5 eV"',
        'plasma = "1.5 eV", carrier_density = "1e21 cm^-3", effective_mass = 0.4',
        TERM,
        "2 times, by plasma and carrier_density",
        "give one of them",
    ),
    "a description without its companion": swap(
        'plasma = "1.5 eV"', 'carrier_density = "1e21 cm^-3"', TERM, "without effective_mass", "needs"
    ),
    "neither permittivity nor index": swap(
        "permittivity.infinity = 2.25", "", "materials.matrix", "permittivity of matrix is not given", "table"
    ),
    "permittivity and index": swap(
        "permittivity.infinity = 2.25",
        'permittivity.infinity = 2.25\nindex = { model = "constant", n = 1.5 }',
        "materials.matrix.index",
        "given twice, by permittivity and index",
        "one of them",
    ),
    "level given twice": swap(
        "permittivity.infinity = 2.25",
        "permittivity = { infinity = 2.25, susceptibility = 1.25 }",
        "materials.matrix.permittivity.susceptibility",
        "given twice",
        "one of them",
    ),
    "static beside terms": swap(
        "infinity = 2.25",
        "infinity = 2.25\nstatic = 3.0",
        "materials.matrix.static",
        "beside permittivity",
        "index models and tables",
    ),
    "spheroid without aspect ratio": swap(
        '"10 %"',
        '"10 %"\nshape = { kind = "spheroid" }',
        f"{GRAIN}.shape",
        "aspect_ratio is missing",
        "needs",
    ),
    "sphere with aspect ratio": swap(
        '"10 %"',
        '"10 %"\nshape = { kind = "sphere", aspect_ratio = 2.0 }',
        f"{GRAIN}.shape.aspect_ratio",
        "a sphere with an aspect_ratio",
        "spheroid",
    ),
    "aligned spheres": swap(
        '"10 %"', '"10 %"\norientation = "aligned"', f"{GRAIN}.orientation", "aligned spheres", "spheroids"
    ),
    "dopant given twice": swap(
        'number_density = "1e19 cm^-3"',
        'number_density = "1e19 cm^-3"\nweight_fraction = "1 %"',
        "dopants.ion.weight_fraction",
        "given twice",
        "one of them",
    ),
    "dopant by weight without molar mass": swap(
        'number_density = "1e19 cm^-3"',
        'weight_fraction = "1 %"',
        "dopants.ion",
        "without molar_mass",
        "molar_mass",
    ),
    "dopant without concentration": swap(
        'number_density = "1e19 cm^-3"\n', "", RED, "neither concentration nor plasma", "number_density"
    ),
    "concentration that nothing uses": swap(
        "strength = 1e-3", "step = 1e-3", "dopants.ion.number_density", "used by none", "leave it out"
    ),
    "local field that nothing feels": swap(
        'number_density = "1e19 cm^-3"\nterms.red = { model = "lorentz", strength',
        'local_field = "virtual-cavity"\nterms.red = { model = "lorentz", step',
        "dopants.ion.local_field",
        "virtual-cavity",
        "concentration",
    ),
    "measured density with additive volumes": swap(
        'rule = "maxwell-garnett"',
        'rule = "bruggeman"\ndensity = "1.3 g/cm^3"',
        "mixing.density",
        "with the rule bruggeman",
        "lorentz-lorenz",
    ),
    "unknown path to find": also(
        '[unknowns]\n"inclusions.grian.volume_fraction" = ["0 %", "9 %"]\n',
        "unknowns.inclusions.grian.volume_fraction",
        "unknown path",
        "a path",
        f"{GRAIN}.volume_fraction",
    ),
    "shortened path to find": also(
        '[unknowns]\n"free.plasma" = ["1 eV", "2 eV"]\n',
        "unknowns.free.plasma",
        "unknown path",
        "a path",
        f"{TERM}.plasma",
    ),
    "empty range": also(
        f'[unknowns]\n"{GRAIN}.volume_fraction" = ["9 %", "9 %"]\n',
        f"unknowns.{GRAIN}.volume_fraction",
        "is empty",
        "differ",
    ),
    "range beyond what there is": also(
        f'[unknowns]\n"{GRAIN}.volume_fraction" = ["0 %", "120 %"]\n',
        f"unknowns.{GRAIN}.volume_fraction",
        "'120 %'",
        "at most 1",
    ),
    "readings the wrong way round": also(
        "[measured]\nstatic = 2.1\nhigh_frequency = 2.2\n",
        "measured.static",
        "below high_frequency",
        "passive",
    ),
    "sellmeier lists that do not pair": also(
        '[materials.glass.index]\nmodel = "sellmeier"\nstrengths = [1.0]\n'
        'resonance_wavelengths = ["1 µm", "2 µm"]\n',
        "materials.glass.index.resonance_wavelengths",
        "2 resonances for 1 strengths",
        "one to one",
    ),
    "sellmeier resonances in two ways": also(
        '[materials.glass.index]\nmodel = "sellmeier"\nstrengths = [1.0]\n'
        'resonance_wavelengths = ["1 µm"]\nresonance_wavelengths_squared = ["1 µm^2"]\n',
        "materials.glass.index.resonance_wavelengths_squared",
        "given twice",
        "one of them",
    ),
    "index without its number": also(
        '[materials.glass.index]\nmodel = "cauchy"\nb = "0.005 µm^2"\n',
        "materials.glass.index",
        "a is missing",
        "cauchy",
    ),
    "a circle of inheritance": also(
        '[materials.one]\nbased_on = "two"\n[materials.two]\nbased_on = "one"\n',
        "materials.one.based_on",
        "a circle",
        "stand alone",
    ),
}


def faults_of(text: str, **more: object) -> tuple[Fault, ...]:
    with pytest.raises(BadInput) as refused:
        parse(text, file="job.toml", **more)  # type: ignore[arg-type]
    return refused.value.faults


def test_the_sound_recipe_is_sound() -> None:
    parse(SOUND)
    assert len(CASES) >= 45


@pytest.mark.parametrize("name", CASES)
def test_one_fault_one_message(name: str) -> None:
    case = CASES[name]
    assert case.old in SOUND
    text = SOUND.replace(case.old, case.new, 1) if case.old else SOUND + case.new
    faults = faults_of(text)
    fault = next((fault for fault in faults if fault.path == case.path), None)
    assert fault is not None, [str(fault) for fault in faults]
    assert case.found in fault.found
    assert case.allowed in fault.allowed
    assert fault.suggestion == case.suggestion
    assert fault.file == "job.toml"
    assert (fault.line is None) == (name == "no host")
    assert len(faults) == ONE.get(name, 1), [str(fault) for fault in faults]
    place = "job.toml" if fault.line is None else f"job.toml:{fault.line}"
    assert str(fault).startswith(f"{place}: {case.path}: ")
    assert "\n" not in str(fault)


# where one cause leaves a second gap that a person would fix anyway
ONE = {
    "misspelt key of an inclusion": 2,  # … and so no loading is given
    "misspelt key of a term": 2,
    "values beside ends": 2,  # from and to
    "a circle of inheritance": 2,
}


def test_weight_without_density_names_the_material() -> None:
    text = SOUND.replace('volume_fraction = "10 %"', 'weight_fraction = "10 %"')
    for material, line in (("matrix", 'density = "1.2 g/cm^3"\n'), ("filler", 'density = "4.0 g/cm^3"\n')):
        (fault,) = faults_of(text.replace(line, ""))
        assert fault.path == f"materials.{material}"
        assert fault.found == "density is missing"
        assert "inclusions.grain.weight_fraction needs it" in fault.allowed


def test_weight_fractions_beyond_one_are_said_with_their_sum() -> None:
    more = '[inclusions.more]\nmaterial = "filler"\nweight_fraction = "70 %"\n'
    (fault,) = faults_of(SOUND.replace('volume_fraction = "10 %"', 'weight_fraction = "40 %"') + more)
    assert (fault.path, fault.found) == ("inclusions", "weight fractions add up to 1.1")


def test_spheroids_under_a_rule_of_spheres() -> None:
    text = SOUND.replace('"10 %"', '"10 %"\nshape = { kind = "spheroid", aspect_ratio = 2.0 }')
    (fault,) = faults_of(text.replace("maxwell-garnett", "bruggeman"))
    assert fault.path == "inclusions.grain.shape"
    assert "maxwell-garnett takes them" in fault.allowed


def test_a_text_where_a_table_belongs() -> None:
    (fault,) = faults_of(
        SOUND.replace('[voids]\nvolume_fraction = "1 %"\n', "").replace("title", 'voids = "1 %"\ntitle')
    )
    assert fault.path == "voids"
    assert "where a table is needed" in fault.found


def test_every_fault_of_a_file_in_one_pass_and_in_its_order() -> None:
    text = (
        SOUND.replace('"400 nm"', '"400 kg"')
        .replace('"10 %"', '"140 %"')
        .replace("druude", "drude")
        .replace("maxwell-garnett", "maxwell")
        .replace('"2.05 eV"', "2.05")
    )
    faults = faults_of(text)
    assert [fault.path for fault in faults] == [
        "band.from",
        "inclusions.grain.volume_fraction",
        "dopants.ion.terms.red.resonance",
        "mixing.rule",
    ]
    lines = [fault.line or 0 for fault in faults]
    assert lines == sorted(lines)


@pytest.mark.parametrize(
    ("settings", "path", "found", "allowed", "suggestion"),
    [
        (
            {"voids.volume": "1 %"},
            "voids.volume",
            "unknown key 'volume'",
            "volume_fraction",
            "volume_fraction",
        ),
        ({"voids.volume_fraction": "2"}, "voids.volume_fraction", "'2'", "at most 1", None),
        ({"host.material.density": "1"}, "host.material.density", "holds a value", "tables", None),
        ({"mixing.rule": "brugeman"}, "mixing.rule", "'brugeman'", "lorentz-lorenz", "bruggeman"),
        ({"unknowns.x.5": "1"}, "unknowns.x", "{'5': 1}", "list", None),
        ({"inclusions.grain.phr": "20"}, "inclusions.grain.phr", "given twice", "one of them", None),
    ],
)
def test_what_is_set_stands_on_the_command_line(
    settings: dict[str, str], path: str, found: str, allowed: str, suggestion: str | None
) -> None:
    faults = faults_of(SOUND, settings=settings)
    fault = faults[0]
    assert fault.path == path, [str(f) for f in faults]
    assert found in fault.found
    assert allowed in fault.allowed
    assert fault.suggestion == suggestion
    assert fault.file == ("command line" if path in settings else "job.toml")


def test_an_item_that_a_list_does_not_have() -> None:
    text = SOUND + '[unknowns]\n"voids.volume_fraction" = ["0 %", "9 %"]\n'
    (fault,) = faults_of(
        text.replace("[band]", "[band]").replace('to = "800 nm"', 'to = "800 nm"'),
        settings={"materials.filler.permittivity.terms.free.plasma.2": "1"},
    )
    assert "holds a value" in fault.found


@pytest.mark.parametrize(
    ("content", "found"),
    [
        (b"", "the file is empty"),
        (b"  \n\n", "the file is empty"),
        (b"\x00\x01\x02binary", "the file is binary"),
        (b'title = "\xff\xfe"', "the file is not UTF-8 text"),
    ],
)
def test_files_that_are_no_recipe(tmp_path: Path, content: bytes, found: str) -> None:
    file = tmp_path / "job.toml"
    file.write_bytes(content)
    with pytest.raises(BadInput) as refused:
        load(file)
    (fault,) = refused.value.faults
    assert (fault.file, fault.found) == (str(file), found)
    assert fault.allowed


def test_files_that_are_not_there(tmp_path: Path) -> None:
    for file, found in ((tmp_path / "none.toml", "no such file"), (tmp_path, "is a directory")):
        with pytest.raises(BadInput) as refused:
            load(file)
        (fault,) = refused.value.faults
        assert (fault.file, fault.found) == (str(file), found)


@pytest.mark.parametrize(
    ("text", "line"),
    [("[host]\nmaterial = \n", 2), ("[host]\nmaterial = 'a'\n[host]\n", 3), ("a = 1\na = 2\n", 2)],
)
def test_toml_that_does_not_parse(text: str, line: int) -> None:
    (fault,) = faults_of(text)
    assert fault.found.startswith("TOML syntax: ")
    assert fault.line == line


HEAD = "# convention: exp(-iwt)\nwavelength [nm], n, k\n"


@pytest.mark.parametrize(
    ("content", "found", "allowed"),
    [
        (None, "no such file 'filler.csv'", "relative to the recipe"),
        (b"", "line 1: it is empty", "convention"),
        (b"\x00\x01", "binary", ""),
        (b"wavelength [nm], n, k\n500, 1.5, 0\n600, 1.5, 0\n", "convention", "exp(-iwt)"),
        (HEAD.replace("[nm]", "[kg]").encode(), "kg", "nm"),
        (HEAD.encode() + b"500, 1.5, 0\n", "one row", "at least two"),
        (HEAD.encode() + b"500, 1.5, 0\n400, 1.5, 0\n600, 1.5, 0\n", "line 5", "rise or fall"),
        (HEAD.encode() + b"500, 1.5, 0\n500, 1.6, 0\n", "line 4", ""),
        (HEAD.encode() + b"500; 1,5; 0\n600; 1,5; 0\n", "line 3", ""),
        (HEAD.encode() + b"500, nan, 0\n600, 1.5, 0\n", "line 3", "leave out"),
        (HEAD.encode() + b"0, 1.5, 0\n600, 1.5, 0\n", "line 3", ""),
    ],
)
def test_tables_that_cannot_be_used(tmp_path: Path, content: bytes | None, found: str, allowed: str) -> None:
    if content is not None:
        (tmp_path / "filler.csv").write_bytes(content)
    old = SOUND[SOUND.index("permittivity.infinity = 4.0") :]
    file = tmp_path / "job.toml"
    file.write_text(SOUND.replace(old, 'table = "filler.csv"\n'))
    with pytest.raises(BadInput) as refused:
        load(file)
    (fault,) = refused.value.faults
    assert fault.path == "materials.filler.table"
    assert fault.line is not None
    assert "filler.csv" in fault.found
    assert found in fault.found
    assert allowed in fault.allowed
