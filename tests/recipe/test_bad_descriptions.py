"""Things described twice, by halves or not at all, and what does not go together."""

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
    VOIDS,
    Broken,
    add,
    check,
    faults_of,
    swap,
)

from mixsim.recipe import parse

MATRIX = "materials.matrix"
HOST_DENSITY, FILLER_DENSITY = 'density = "1.2 g/cm^3"\n', 'density = "4.0 g/cm^3"\n'
PLASMA = 'plasma = "1.5 eV"'
STEP_TERM = 'terms.red = { model = "lorentz", step = 1e-3, resonance = "2.05 eV", damping = "0.28 eV" }'
BOTH_RESONANCES = 'resonance_wavelengths = ["1 µm"]\nresonance_wavelengths_squared = ["1 µm^2"]\n'
MOLES = 'mole_fraction = "1 %"\nmolar_mass = "100 g/mol"'


def sellmeier(rest: str, key: str, found: str, allowed: str, at: str = "") -> Broken:
    text = f'[materials.glass.index]\nmodel = "sellmeier"\nstrengths = [1.0]\n{rest}'
    return add(text, f"materials.glass.index{key}", found, allowed, at=at)


def dense(changes: dict[str, str], path: str, found: str, allowed: str, at: str) -> Broken:
    return Broken(changes, path, found, allowed, None, at)


CASES: dict[str, Broken] = {
    # loadings
    "two bases": swap(
        LOADING,
        f'{LOADING}\nweight_fraction = "20 %"',
        f"{GRAIN}.weight_fraction",
        "the loading is given twice, by volume_fraction and weight_fraction",
        "give one of them",
    ),
    "three bases": swap(
        LOADING,
        f'{LOADING}\nweight_fraction = "20 %"\nphr = 20',
        f"{GRAIN}.weight_fraction",
        "3 times, by volume_fraction and weight_fraction and phr",
        "give one of them",
        at="weight_fraction =",
    ),
    "no loading": swap(
        LOADING, "", GRAIN, "the loading is not given", "weight_fraction, phr", at="[inclusions.grain]"
    ),
    "weight without density of the filler": dense(
        {LOADING: 'weight_fraction = "10 %"', FILLER_DENSITY: ""},
        "materials.filler",
        "density is missing",
        "inclusions.grain.weight_fraction needs it",
        "[materials.filler]",
    ),
    "phr without density of the host": dense(
        {LOADING: "phr = 10", HOST_DENSITY: ""},
        MATRIX,
        "density is missing",
        "inclusions.grain.phr needs it",
        "[materials.matrix]",
    ),
    "measured density without density of the host": dense(
        {'"maxwell-garnett"': '"lorentz-lorenz"\ndensity = "1.3 g/cm^3"', HOST_DENSITY: "", VOIDS: ""},
        MATRIX,
        "density is missing",
        "mixing.density needs it",
        "[materials.matrix]",
    ),
    "voids beside a measured density": swap(
        'rule = "maxwell-garnett"',
        'rule = "lorentz-lorenz"\ndensity = "1.3 g/cm^3"',
        "voids",
        "voids beside a measured density",
        "how much is missing",
        at="[voids]",
    ),
    # one term, one description
    "plasma and step": dense(
        {f"{CONCENTRATION}\n": "", "strength = 1e-3": 'plasma = "1 eV", step = 0.1'},
        RED,
        "plasma of a lorentz term is given 2 times, by plasma and step",
        "give one of them",
        "terms.red",
    ),
    "plasma and carriers": swap(
        PLASMA,
        f'{PLASMA}, carrier_density = "1e21 cm^-3", effective_mass = 0.4',
        FREE,
        "given 2 times, by plasma and carrier_density",
        "give one of them",
    ),
    "damping and mobility": swap(
        PLASMA,
        'carrier_density = "1e21 cm^-3", effective_mass = 0.4, mobility = "30 cm^2/V/s"',
        FREE,
        "damping of a drude term is given 2 times, by damping and mobility",
        "give one of them",
    ),
    "carriers without mass": swap(
        PLASMA, 'carrier_density = "1e21 cm^-3"', FREE, "given without effective_mass", "beside it"
    ),
    "mass without carriers": swap(
        PLASMA,
        f"{PLASMA}, effective_mass = 0.4",
        FREE,
        "effective_mass has no part",
        "carrier_density or mobility",
    ),
    "conductivity without collision time": swap(
        PLASMA, 'conductivity = "100 S/m"', FREE, "conductivity is given without collision_time", "beside it"
    ),
    "no plasma": swap(
        f"{PLASMA}, ", "", FREE, "plasma of a drude term is not given", "conductivity with", at="free ="
    ),
    # one level, one response
    "level twice": swap(
        HOST_LEVEL,
        "permittivity = { infinity = 2.25, susceptibility = 1.25 }",
        f"{MATRIX}.permittivity.susceptibility",
        "given twice, by infinity and susceptibility",
        "give one of them",
    ),
    "no level": swap(
        HOST_LEVEL,
        "permittivity.terms = {}",
        f"{MATRIX}.permittivity",
        "the level above all resonances is not given",
        "infinity, susceptibility",
    ),
    "permittivity and index": swap(
        HOST_LEVEL,
        f'{HOST_LEVEL}\nindex = {{ model = "constant", n = 1.5 }}',
        f"{MATRIX}.index",
        "given twice, by permittivity and index",
        "give one of them",
    ),
    "neither permittivity nor index": swap(
        HOST_LEVEL,
        "",
        MATRIX,
        "the permittivity of matrix is not given",
        "permittivity, index, table",
        at="[materials.matrix]",
    ),
    "static beside a permittivity": swap(
        HOST_LEVEL,
        f"{HOST_LEVEL}\nstatic = 3.0",
        f"{MATRIX}.static",
        "static beside permittivity",
        "limits of their own",
    ),
    # index models
    "lists that do not pair": sellmeier(
        'resonance_wavelengths = ["1 µm", "2 µm"]\n',
        ".resonance_wavelengths",
        "2 resonances for 1 strengths",
        "one to one",
    ),
    "resonances in two ways": sellmeier(
        BOTH_RESONANCES,
        ".resonance_wavelengths_squared",
        "the list of resonances is given twice",
        "one of them",
    ),
    "no resonances": sellmeier(
        "", "", "the list of resonances is not given", "_squared", "[materials.glass.index]"
    ),
    "index without its number": add(
        '[materials.glass.index]\nmodel = "cauchy"\nb = "0.005 µm^2"\n',
        "materials.glass.index",
        "a is missing",
        "a cauchy index needs a",
        at="[materials.glass.index]",
    ),
    # rules
    "spheroids under a rule of spheres": dense(
        {
            LOADING: f'{LOADING}\nshape = {{ kind = "spheroid", aspect_ratio = 2.0 }}',
            "maxwell-garnett": "lorentz-lorenz",
        },
        f"{GRAIN}.shape",
        "grains that are not spheres with the rule lorentz-lorenz",
        "maxwell-garnett, bruggeman take them",
        "shape =",
    ),
    "measured density with additive volumes": swap(
        'rule = "maxwell-garnett"',
        'rule = "bruggeman"\ndensity = "1.3 g/cm^3"',
        "mixing.density",
        "a measured density with the rule bruggeman",
        "only lorentz-lorenz",
    ),
    # dopants
    "concentration twice": swap(
        CONCENTRATION,
        f'{CONCENTRATION}\nweight_fraction = "1 %"',
        "dopants.ion.weight_fraction",
        "the concentration is given twice, by number_density and weight_fraction",
        "give one of them",
    ),
    "weight without molar mass": swap(
        CONCENTRATION,
        'weight_fraction = "1 %"',
        "dopants.ion",
        "weight_fraction without molar_mass",
        "give molar_mass",
        at="[dopants.ion]",
    ),
    "weight without density of the host": dense(
        {CONCENTRATION: 'weight_fraction = "1 %"\nmolar_mass = "100 g/mol"', HOST_DENSITY: ""},
        MATRIX,
        "density is missing",
        "dopants.ion.weight_fraction needs the density of the host",
        "[materials.matrix]",
    ),
    "moles without molar mass of the host": swap(
        CONCENTRATION,
        MOLES,
        MATRIX,
        "molar_mass is missing",
        "needs the molar mass of the host",
        at="[materials.matrix]",
    ),
    "moles without molar mass": dense(
        {CONCENTRATION: 'mole_fraction = "1 %"', HOST_DENSITY: f'{HOST_DENSITY}molar_mass = "60 g/mol"\n'},
        "dopants.ion",
        "mole_fraction without molar_mass",
        "give molar_mass",
        "[dopants.ion]",
    ),
    "molar mass beside a number density": swap(
        CONCENTRATION,
        f'{CONCENTRATION}\nmolar_mass = "100 g/mol"',
        "dopants.ion.molar_mass",
        "molar_mass without weight_fraction",
        "leave it out",
    ),
    "neither concentration nor plasma": swap(
        CONCENTRATION,
        "",
        RED,
        "neither concentration nor plasma",
        "or plasma or step of the term",
        at="terms.red",
    ),
    "concentration that nothing uses": swap(
        RED_TERM,
        STEP_TERM,
        "dopants.ion.number_density",
        "number_density is used by none of the terms",
        "oscillator strength",
        at="number_density",
    ),
    "local field that nothing feels": dense(
        {CONCENTRATION: 'local_field = "virtual-cavity"', RED_TERM: STEP_TERM},
        "dopants.ion.local_field",
        "virtual-cavity has nothing to act on",
        "strengths that come from the concentration",
        "local_field",
    ),
    # inheritance
    "circle": add(
        '[materials.one]\nbased_on = "two"\n[materials.two]\nbased_on = "one"\n',
        "materials.one.based_on",
        "a circle: one → two → one",
        "stand alone",
        at='based_on = "two"',
    ),
    "circle with a tail": add(
        '[materials]\ntail.based_on = "one"\none.based_on = "two"\ntwo.based_on = "one"\n',
        "materials.one.based_on",
        "a circle: one → two → one",
        "stand alone",
        at='based_on = "two"',
    ),
    "circle of one": add(
        '[materials.one]\nbased_on = "one"\n',
        "materials.one.based_on",
        "one is based on itself, and no built-in material is called so",
        "another material",
    ),
    "fault of a base, said there only": dense(
        {
            "infinity = 4.0": "infinity = -4.0",
            "": '[materials.heir]\nbased_on = "filler"\ndensity = "5 g/cm^3"\n',
        },
        "materials.filler.permittivity.infinity",
        "'-4.0' is out of range",
        "above 0",
        "infinity = -4.0",
    ),
}


@pytest.mark.parametrize("name", CASES)
def test_one_message(name: str) -> None:
    check(CASES[name])


def test_a_term_that_is_misspelt_in_an_heir_is_one_that_it_inherits() -> None:
    text = 'host.material = "g"\n[materials.g]\nbased_on = "gold"\n'
    text += 'permittivity.terms.fre = { damping = "0.1 eV" }\n'
    (fault,) = faults_of(text)
    assert (fault.path, fault.found) == ("materials.g.permittivity.terms.fre", "model is missing")
    assert (fault.suggestion, fault.line) == ("free", 4)


def test_a_built_in_material_has_no_line() -> None:
    text = 'host.material = "vacuum"\n[inclusions.grain]\nmaterial = "own"\nphr = 3\n'
    text += '[materials.own]\ndensity = "1 g/cm^3"\npermittivity.infinity = 2.0\n'
    (fault,) = faults_of(text)
    assert (fault.path, fault.found, fault.line) == ("materials.vacuum", "density is missing", None)


def test_a_material_that_nothing_uses_is_allowed() -> None:
    spare = parse(SOUND + "[materials.spare]\npermittivity.infinity = 3.0\n")
    assert "materials.spare.permittivity.infinity" in spare.leaves
