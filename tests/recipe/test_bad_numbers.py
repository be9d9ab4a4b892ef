"""Quantities that cannot be read, numbers out of range, and sums, bands and ranges that cannot be."""

from __future__ import annotations

import pytest
from broken import (
    FREE,
    GRAIN,
    HOST_LEVEL,
    LEVEL,
    LOADING,
    RED,
    VOIDS,
    Broken,
    add,
    check,
    swap,
)

PLASMA, DAMPING = f"{FREE}.plasma", f"{FREE}.damping"
AMOUNT = f"{GRAIN}.volume_fraction"
MORE = '[inclusions.more]\nmaterial = "filler"\n'
GLASS = "[materials.glass]\n"
SELLMEIER = f'{GLASS}[materials.glass.index]\nmodel = "sellmeier"\n'
END = 'to = "800 nm"'
DOPED = (
    'weight_fraction = "60 %"\nmolar_mass = "100 g/mol"\n'
    'terms.x = { model = "lorentz", strength = 0.1, resonance = "3 eV", damping = "0.1 eV" }\n'
)


def level(written: str, found: str, allowed: str) -> Broken:
    return swap(HOST_LEVEL, f"permittivity.infinity = {written}", LEVEL, found, allowed)


def unknown(path: str, ends: str, found: str, allowed: str, suggestion: str | None = None) -> Broken:
    return add(f'[unknowns]\n"{path}" = {ends}\n', f"unknowns.{path}", found, allowed, suggestion)


CASES: dict[str, Broken] = {
    # quantities
    "mass for a frequency": swap(
        '"1.5 eV"',
        '"1.5 kg"',
        PLASMA,
        "unit 'kg' (for a mass) in '1.5 kg'",
        "spectral axis takes Hz",
        None,
        "free =",
    ),
    "misspelt unit": swap('"400 nm"', '"400 mn"', "band.from", "unit 'mn' in '400 mn'", "nm", "nm"),
    "text without a unit": swap(
        '"1.2 g/cm^3"', '"1.2"', "materials.matrix.density", "no unit in '1.2'", "g/cm^3"
    ),
    "bare number where a unit is needed": swap(
        'plasma = "1.5 eV"', "plasma = 1.5", PLASMA, "no unit in 1.5", "takes Hz", None, "free ="
    ),
    "unit where none belongs": level('"2.25 nm"', "unit 'nm' (for a length)", "takes no unit"),
    "no quantity at all": swap('"0.1 eV"', '"little"', DAMPING, "'little' is not a number", "'0.12 eV'"),
    "empty text": level('""', "empty text", "'4.0'"),
    "two decimal points": level('"2.2.5"', "'2.2.5' is not a number", "one decimal point"),
    "decimal comma": swap('"1.5 eV"', '"1,5 eV"', PLASMA, "'1,5 eV' is not a number", "no comma"),
    "two uncertainties": level('"2.2 ± 0.1 ± 0.1"', "more than one ±", "one uncertainty"),
    "negative uncertainty": swap(
        '"10 %"', '"10 % ± -1 %"', AMOUNT, "negative uncertainty", "zero or a positive"
    ),
    "coverage of nothing": level('"2.2 ± 0.1 (k=0)"', "coverage factor '0'", "positive"),
    "not a number": level("nan", "nan is not a finite number", "'4.0'"),
    "infinite": level("inf", "inf is not a finite number", "'4.0'"),
    "infinite and negative": level("-inf", "-inf is not a finite number", "'4.0'"),
    "infinite text": swap('"1.5 eV"', '"inf eV"', PLASMA, "'inf eV' is not a number", "'1550 nm'"),
    "too large": swap('"1.5 eV"', '"1e999 eV"', PLASMA, "too large", "exponent"),
    "switch for a number": level("true", "true where a number is needed", "'4.0'"),
    "list for a number": level("[2.25]", "[2.25] where a number is needed", "'4.0'"),
    "table for a number": level("{ value = 2.25 }", "{value = 2.25} where a number is needed", "'4.0'"),
    "date for a number": level("2020-01-01", "2020-01-01 where a number is needed", "'4.0'"),
    "wavelength width without a resonance": swap(
        'damping = "0.1 eV"', 'damping = "20 nm"', DAMPING, "width '20 nm' in wavelength", "needs a resonance"
    ),
    "wavelength width with ± and none": swap(
        'damping = "0.1 eV"',
        'damping = "2e-8 m ± 1e-9 m (k=2)"',
        DAMPING,
        "width '2e-8 m",
        "needs a resonance",
    ),
    "wavelength width beyond its band": swap(
        '"0.28 eV"', '"1300 nm"', f"{RED}.damping", "a width of 1300 nm about 604.801 nm", "1209.6 nm"
    ),
    "item of a list": add(
        f'{SELLMEIER}strengths = [1.0, 2.0]\nresonance_wavelengths = [\n  "1 µm",\n  "2 kg",\n]\n',
        "materials.glass.index.resonance_wavelengths.1",
        "unit 'kg'",
        "µm",
        at='"2 kg"',
    ),
    "number for a list": add(
        f'{SELLMEIER}strengths = 1.0\nresonance_wavelengths = ["1 µm"]\n',
        "materials.glass.index.strengths",
        "1.0 where a list is needed",
        "[ and ]",
        at="strengths = 1.0",
    ),
    "empty list": add(
        f'{SELLMEIER}strengths = []\nresonance_wavelengths = ["1 µm"]\n',
        "materials.glass.index.strengths",
        "an empty list",
        "1 or more",
        at="strengths = []",
    ),
    # ranges
    "fraction above one": swap(
        '"10 %"', '"140 %"', AMOUNT, "'140 %' is out of range", "at least 0 and at most 1"
    ),
    "bare percent": swap(
        '"10 %"', "10", AMOUNT, "'10' is out of range", "at most 1", "10 %", at="volume_fraction = 10"
    ),
    "negative fraction": swap('"10 %"', '"-1 %"', AMOUNT, "'-1 %' is out of range", "at least 0"),
    "negative phr": swap(LOADING, "phr = -3", f"{GRAIN}.phr", "'-3' is out of range", "at least 0"),
    "negative damping": swap('"0.1 eV"', '"-0.1 eV"', DAMPING, "'-0.1 eV' is out of range", "at least 0"),
    "resonance at zero": swap('"2.05 eV"', '"0 eV"', f"{RED}.resonance", "'0 eV' is out of range", "above 0"),
    "negative resonance": swap(
        '"2.05 eV"', '"-2 eV"', f"{RED}.resonance", "'-2 eV' is out of range", "above 0"
    ),
    "negative level": level("-2.25", "'-2.25' is out of range", "above 0"),
    "density of nothing": swap(
        '"1.2 g/cm^3"', '"0 g/cm^3"', "materials.matrix.density", "'0 g/cm^3' is out of range", "above 0"
    ),
    "flat spheroid": swap(
        LOADING,
        f'{LOADING}\nshape = {{ kind = "spheroid", aspect_ratio = 0 }}',
        f"{GRAIN}.shape.aspect_ratio",
        "'0' is out of range",
        "above 0",
    ),
    # sums, each said
    "fractions with voids": swap(
        '"10 %"',
        '"99.5 %"',
        "inclusions",
        "inclusions and voids add up to 1.005",
        "at most 1",
        at="[inclusions.grain]",
    ),
    "fractions without voids": Broken(
        {'[voids]\nvolume_fraction = "1 %"\n': "", "": f'{MORE}volume_fraction = "95 %"\n'},
        "inclusions",
        "volume fractions of inclusions add up to 1.05",
        "at most 1",
        None,
        "[inclusions.grain]",
    ),
    "voids over a full mixture": swap(
        '"1 %"',
        '"95 %"',
        "inclusions",
        "inclusions and voids add up to 1.05",
        "at most 1",
        at="[inclusions.grain]",
    ),
    "fractions of solids and of the whole": Broken(
        {LOADING: 'volume_fraction_of_solids = "60 %"', "": f'{MORE}volume_fraction = "50 %"\n'},
        "inclusions",
        "inclusions and voids add up to 1.104",  # 0.6 × 0.99 + 0.5 + 0.01
        "at most 1",
        None,
        "[inclusions.grain]",
    ),
    "fractions by weight and by volume": Broken(
        # solids 0.99 = f_w + 0.5 + f_h, f_w 4 = 0.95 (4 f_w + 0.5 × 4 + 1.2 f_h)
        {LOADING: 'weight_fraction = "95 %"', "": f'{MORE}volume_fraction = "50 %"\n'},
        "inclusions",
        "inclusions and voids add up to 2.34478",
        "at most 1",
        None,
        "[inclusions.grain]",
    ),
    "weight fractions": Broken(
        {LOADING: 'weight_fraction = "40 %"', "": f'{MORE}weight_fraction = "70 %"\n'},
        "inclusions",
        "weight fractions add up to 1.1",
        "at most 1",
        None,
        "[inclusions.grain]",
    ),
    "measured density below that of the inclusions": Broken(
        {'rule = "maxwell-garnett"': 'rule = "lorentz-lorenz"\ndensity = "0.3 g/cm^3"', VOIDS: ""},
        "mixing.density",
        "the inclusions alone weigh more than '0.3 g/cm^3'",  # the filler alone: 0.1 × 4 g/cm^3
        "the host included",
        None,
        'density = "0.3 g/cm^3"',
    ),
    "weight fractions of dopants": Broken(
        {"": f"[dopants.one]\n{DOPED}[dopants.two]\n{DOPED}"},
        "dopants",
        "weight fractions of dopants add up to 1.2",
        "at most 1",
        None,
        "[dopants.ion]",
    ),
    # the band
    "reversed band": swap(
        'from = "400 nm"',
        'from = "900 nm"',
        "band",
        "'900 nm' to '800 nm' runs backwards",
        "smaller",
        at="[band]",
    ),
    "reversed band in frequency": Broken(
        {'"400 nm"': '"9 GHz"', '"800 nm"': '"8 GHz"'}, "band", "runs backwards", "smaller", None, "[band]"
    ),
    "band of one point": swap(
        'from = "400 nm"', 'from = "800 nm"', "band", "is a single point", "goes into values", at="[band]"
    ),
    "band without an end": swap(
        f"{END}\n", "", "band", "to is missing", "from and to, or values", at="[band]"
    ),
    "values beside ends": swap(
        END,
        f'{END}\nvalues = ["500 nm"]',
        "band.from",
        "from and to beside values",
        "or from and to",
        at="from =",
    ),
    "no values": swap(f'from = "400 nm"\n{END}', "values = []", "band.values", "an empty list", "1 or more"),
    "value without a list": swap(
        f'from = "400 nm"\n{END}', 'values = "500 nm"', "band.values", "where a list is needed", "[ and ]"
    ),
    "value of zero wavelength": swap(
        f'from = "400 nm"\n{END}',
        'values = ["0 nm"]',
        "band.values.0",
        "zero wavelength '0 nm'",
        "not be zero",
    ),
    "one point": swap(END, f"{END}\npoints = 1", "band.points", "1 is out of range", "at least 2"),
    "no end of points": swap(
        END, f"{END}\npoints = 99000000", "band.points", "out of range", "at most 10000000"
    ),
    "half a point": swap(
        END, f"{END}\npoints = 2.5", "band.points", "2.5 where a whole number", "such as 401"
    ),
    "points in quotes": swap(
        END, f'{END}\npoints = "401"', "band.points", "'401' where a whole", "without quotes"
    ),
    "points true": swap(END, f"{END}\npoints = true", "band.points", "true where a whole number", "401"),
    "reversed validity": add(
        f'{GLASS}index = {{ model = "constant", n = 1.5 }}\nvalid = {{ from = "2 µm", to = "1 µm" }}\n',
        "materials.glass.valid",
        "'2 µm' to '1 µm' runs backwards",
        "smaller",
    ),
    # what is measured, and to be found
    "readings the wrong way round": add(
        "[measured]\nhigh_frequency = 2.2\nstatic = 2.1\n",
        "measured.static",
        "static '2.1' is below high_frequency '2.2'",
        "passive",
    ),
    "levels the wrong way round": add(
        f'{GLASS}index = {{ model = "constant", n = 1.5 }}\nhigh_frequency = 2.2\nstatic = 2.1\n',
        "materials.glass.static",
        "static '2.1' is below high_frequency '2.2'",
        "passive",
    ),
    "misspelt path": unknown(
        "inclusions.grian.volume_fraction",
        '["0 %", "9 %"]',
        "unknown path",
        "of a number in the recipe",
        AMOUNT,
    ),
    "shortened path": unknown("free.plasma", '["1 eV", "2 eV"]', "unknown path", "of a number", PLASMA),
    "path of a word": unknown("mixing.rule", "[1, 2]", "unknown path", "of a number"),
    "path of the band": unknown(
        "band.from", '["1 nm", "2 nm"]', "no number of the mixture", "not one of the band"
    ),
    "path without quotes": add(
        '[unknowns]\nvoids.volume_fraction = ["0 %", "9 %"]\n',
        "unknowns.voids",
        "a path without quotes",
        '"a.b.c" = [low, high]',
    ),
    "range in a wrong unit": unknown("voids.volume_fraction", '["1 nm", "2 nm"]', "unit 'nm'", "%, ppm"),
    "empty range": unknown(AMOUNT, '["9 %", "9 %"]', "'9 %' to '9 %' is empty", "differ"),
    "range beyond what there is": unknown(AMOUNT, '["0 %", "120 %"]', "'120 %' is out of range", "at most 1"),
    "one end": unknown(AMOUNT, '["9 %"]', "['9 %'] where a range is needed", "two ends"),
    "three ends": unknown(AMOUNT, '["1 %", "2 %", "3 %"]', "where a range is needed", "two ends"),
    "text for a range": unknown(AMOUNT, '"0 to 9 %"', "'0 to 9 %' where a range is needed", "two ends"),
    "switches for ends": unknown(AMOUNT, "[false, true]", "false as the end of a range", "two ends"),
    "list of unknowns": Broken(
        {"[band]": 'unknowns = ["voids"]\n[band]'},
        "unknowns",
        "['voids'] where a table is needed",
        '"PATH" = [low, high]',
        None,
        "unknowns =",
    ),
}


@pytest.mark.parametrize("name", CASES)
def test_one_message(name: str) -> None:
    check(CASES[name])
