"""Quantities as people write them: what is understood, what is refused and in which words."""

from __future__ import annotations

import math

import pytest

from mixsim.errors import Refusal
from mixsim.units import REDUCED_PLANCK, SPEED_OF_LIGHT, Leaf, read, show, written_unit

EV = 1.602176634e-19 / REDUCED_PLANCK
WAVELENGTH = 2 * math.pi * SPEED_OF_LIGHT


@pytest.mark.parametrize(
    ("written", "dimension", "value", "std"),
    [
        # the grammar
        ("22 nm", "length", 22e-9, None),
        ("22nm", "length", 22e-9, None),
        ("  22   nm ", "length", 22e-9, None),
        ("1.868 ± 0.003 g/cm^3", "density", 1868, 3),
        ("1.868 g/cm^3 ± 0.003", "density", 1868, 3),
        ("1.868 g/cm^3 ± 3 mg/cm^3", "density", 1868, 3),
        ("1.868 +/- 0.003 g/cm3", "density", 1868, 3),
        ("1.868±0.003g/cm³", "density", 1868, 3),
        ("4.0 % ± 0.2 %", "fraction", 0.04, 0.002),
        ("4.0 ± 0.2 %", "fraction", 0.04, 0.002),
        ("4.0 % ± 0.2", "fraction", 0.04, 0.002),
        ("4 % ± 2000 ppm", "fraction", 0.04, 0.002),
        ("0.04 ± 0.002", "fraction", 0.04, 0.002),
        ("150 ppm", "fraction", 150e-6, None),
        ("4.255 ± 0.020 (k=2)", "number", 4.255, 0.010),
        ("4.255 ± 0.030 ( k = 3 )", "number", 4.255, 0.010),
        ("4.255 ± 0.0196 (k=1.96)", "number", 4.255, 0.010),
        ("4.255 ± 0.020 (limits)", "number", 4.255, 0.020 / math.sqrt(3)),
        ("22 nm ± 2 nm (limits)", "length", 22e-9, 2e-9 / math.sqrt(3)),
        ("30 ± 4 cm^2/(V s) (k=2)", "mobility", 30e-4, 2e-4),
        ("5 ± 0", "number", 5, 0),
        # numbers
        (4, "number", 4, None),
        (0.04, "fraction", 0.04, None),
        ("4.255", "number", 4.255, None),
        ("0.35", "electron masses", 0.35, None),
        ("-1.2e-3", "number", -1.2e-3, None),
        ("−2", "number", -2, None),
        ("+.5", "number", 0.5, None),
        ("5.", "number", 5, None),
        ("2.0e19 cm^-3", "number density", 2e25, None),
        ("2.0E+19 1/cm^3", "number density", 2e25, None),
        # spellings
        ("3 um", "length", 3e-6, None),
        ("3 \u00b5m", "length", 3e-6, None),
        ("3 \u03bcm", "length", 3e-6, None),
        ("0.0049 µm²", "area", 0.0049e-12, None),
        ("1.2e-4 um4", "fourth power of length", 1.2e-28, None),
        ("5 nm^-3", "number density", 5e27, None),
        ("590 cm⁻¹", "spectral", 590 * 100 * WAVELENGTH, None),
        ("590 cm-1", "spectral", 590 * 100 * WAVELENGTH, None),
        ("590 1/cm", "spectral", 590 * 100 * WAVELENGTH, None),
        ("1.2e15 rad / s", "spectral", 1.2e15, None),
        ("30 cm²/V/s", "mobility", 30e-4, None),
        ("30 cm^2/(V·s)", "mobility", 30e-4, None),
        ("50 µS/cm", "conductivity", 5e-3, None),
        ("60.08 g/mol", "molar mass", 0.06008, None),
        ("8.3 ps", "time", 8.3e-12, None),
        ("1 t", "mass", 1000, None),
        ("45 deg", "angle", math.pi / 4, None),
        ("45°", "angle", math.pi / 4, None),
        ("20 ± 0.5 °C", "temperature", 293.15, 0.5),
        ("20 degC ± 0.5 K", "temperature", 293.15, 0.5),
        # the spectral axis: first order through the reciprocal
        ("1.55 eV ± 0.02 eV", "spectral", 1.55 * EV, 0.02 * EV),
        ("1550 ± 3.1 nm", "spectral", WAVELENGTH / 1550e-9, WAVELENGTH / 1550e-9 * 0.002),
        ("1550 nm ± 0.01 eV", "spectral", WAVELENGTH / 1550e-9, 0.01 * EV),
        ("2.05 eV ± 1 nm", "spectral", 2.05 * EV, (2.05 * EV) ** 2 / WAVELENGTH * 1e-9),
        ("0.12 ± 0.01 eV", "rate", 0.12 * EV, 0.01 * EV),
    ],
)
def test_understood(written: str | float, dimension: str, value: float, std: float | None) -> None:
    leaf = read(written, dimension)
    assert leaf.value == pytest.approx(value, rel=1e-12)
    assert leaf.std == (None if std is None else pytest.approx(std, rel=1e-12))
    assert (leaf.dimension, leaf.written) == (dimension, str(written))


def test_decimal_fractions_of_a_unit_are_the_nearest_floats() -> None:
    assert read("22 nm", "length") == Leaf(22e-9, None, "length", "22 nm")
    assert read("29 %", "fraction").value == 0.29


def test_a_rate_in_a_wavelength_unit_is_a_width() -> None:
    assert read("40 nm ± 2 nm", "rate") == Leaf(40e-9, 2e-9, "wavelength width", "40 nm ± 2 nm")


@pytest.mark.parametrize(
    ("written", "dimension", "found", "allowed", "suggestion"),
    [
        # no unit where one is needed
        (22, "length", "no unit in 22", "nm, µm, mm, cm, m", None),
        ("22", "length", "no unit in '22'", "nm, µm, mm, cm, m", None),
        ("22 ± 1", "length", "no unit in '22 ± 1'", "nm, µm, mm, cm, m", None),
        (1.55, "rate", "no unit in 1.55", "a width in wavelength", None),
        # a unit where none, or another, belongs
        ("4 nm", "number", "unit 'nm' (for a length) in '4 nm'", "a plain number takes no unit", None),
        ("4 %", "number", "unit '%' (for a fraction)", "a plain number takes no unit", None),
        ("0.35 kg", "electron masses", "unit 'kg'", "a mass in electron masses takes no unit", None),
        ("4 nm", "fraction", "unit 'nm'", "a bare number or %, ppm", None),
        ("22 kg", "length", "unit 'kg' (for a mass) in '22 kg'", "a length takes nm, µm, mm, cm, m", None),
        ("590 cm", "spectral", "unit 'cm' (for a length)", "cm^-1, rad/s", "cm^-1"),
        ("22 parsec", "length", "unit 'parsec' in", "nm, µm", None),
        ("22 nm nm", "length", "unit 'nm nm'", "nm, µm", None),
        ("22 nm ± 1 kg", "length", "unit 'kg'", "nm, µm", None),
        ("22 nm ± 1 meV", "rate", "mixed", "in the unit of the value", None),
        ("0.1 eV ± 1 nm", "rate", "mixed", "in the unit of the value", None),
        # wrong in case, or nearly right
        ("10 ghz", "spectral", "unit 'ghz'", "GHz", "GHz"),
        ("10 mHz", "spectral", "unit 'mHz'", "MHz", "MHz"),
        ("1.5 ev", "rate", "unit 'ev'", "eV", "eV"),
        ("22 NM", "length", "unit 'NM'", "nm", "nm"),
        ("22 NM", "rate", "unit 'NM'", "nm", "nm"),
        ("1.18 G/CM^3", "density", "unit 'G/CM^3'", "g/cm^3", "g/cm^3"),
        ("1.18 g/cm^2", "density", "unit 'g/cm^2'", "g/cm^3", "g/cm^3"),
        ("20 C", "temperature", "unit 'C'", "K, °C", "°C"),
        # not a number
        (True, "number", "True is not a quantity", "like '4.0'", None),
        ([1, 2], "number", "[1, 2] is not a quantity", "like '4.0'", None),
        (None, "length", "None is not a quantity", "like '22 nm'", None),
        (math.nan, "number", "nan is not a finite number", "a plain number takes no unit", None),
        (math.inf, "fraction", "inf is not a finite number", "a bare number or", None),
        (10**400, "number", "is not a finite number", "a plain number", None),
        ("nan", "number", "'nan' is not a number", "like '4.0'", None),
        ("inf nm", "length", "'inf nm' is not a number", "like '22 nm'", None),
        ("1e999 nm", "length", "too large", "exponent", None),
        ("1e300 PHz", "spectral", "too large", "exponent", None),
        ("", "length", "empty text", "like '22 nm'", None),
        ("  ", "length", "empty text", "like '22 nm'", None),
        ("nm", "length", "'nm' is not a number", "like '22 nm'", None),
        ("some", "number", "'some' is not a number", "like '4.0'", None),
        ("4,0 %", "fraction", "'4,0 %' is not a number", "no comma", None),
        ("1.2.3 nm", "length", "'1.2.3 nm' is not a number", "one decimal point", None),
        ("10 000 Hz", "spectral", "'10 000 Hz' is not a number", "without blanks", None),
        ("10³ nm", "length", "unit '³ nm'", "nm, µm", "nm"),
        ("٣ nm", "length", "is not a number", "like '22 nm'", None),
        ("(4.0 ± 0.2) %", "fraction", "'(4.0' is not a number", "like '4.0 %'", None),
        # uncertainties
        ("22 ±", "length", "no uncertainty after ±", "like '22 nm'", None),
        ("22 nm ± (k=2)", "length", "no uncertainty after ±", "like '22 nm'", None),
        ("± 1 nm", "length", "no value before ±", "like '22 nm'", None),
        ("22 ± nm", "length", "'nm' is not a number", "like '22 nm'", None),
        ("22 ± -1 nm", "length", "negative uncertainty", "zero or a positive number", None),
        ("22 ± 1 ± 2 nm", "length", "more than one ±", "one uncertainty", None),
        ("22 +- 1 nm", "length", "'+-' in", "± or +/-", "+/-"),
        ("22 ± nan nm", "length", "'nan nm' is not a number", "like '22 nm'", None),
        ("1.868 g/cm^3 ± 0.2 %", "density", "relative uncertainty", "unit of the value", None),
        ("1.868 ± 0.2 % g/cm^3", "density", "relative uncertainty", "unit of the value", None),
        ("4.2 ± 5 %", "number", "relative uncertainty", "fractions only", None),
        ("4.2 (k=2)", "number", "no ± before", "(k=2) or (limits)", None),
        ("4.2 ± 0.1 (k=0)", "number", "coverage factor '0'", "positive", None),
        ("4.2 ± 0.1 (k=-2)", "number", "coverage factor '-2'", "positive", None),
        ("4.2 ± 0.1 (k=two)", "number", "coverage factor 'two'", "positive", None),
        ("4.2 ± 0.1 (K=2)", "number", "'(K=2)'", "(k=2) or (limits)", "(k=2)"),
        ("4.2 ± 0.1 (Limits)", "number", "'(Limits)'", "(k=2) or (limits)", "(limits)"),
        ("4.255(20)", "number", "'(20)'", "(k=2) or (limits)", None),
        # where the axis has no such place
        ("0 nm", "spectral", "zero wavelength '0 nm'", "must not be zero", None),
        ("1e-320 nm", "spectral", "zero wavelength", "must not be zero", None),
        ("0 Hz ± 1 nm", "spectral", "uncertainty in wavelength about zero", "frequency", None),
    ],
)
def test_refused(written: object, dimension: str, found: str, allowed: str, suggestion: str | None) -> None:
    with pytest.raises(Refusal) as caught:
        read(written, dimension)  # type: ignore[arg-type]
    assert found in caught.value.found
    assert allowed in caught.value.allowed
    assert caught.value.suggestion == suggestion


@pytest.mark.parametrize("written", ["7" * 5000 + " nm", "22 " + "n" * 5000, "22 nm\n± 1\x00", "(" * 300])
def test_a_refusal_is_one_short_line(written: str) -> None:
    with pytest.raises(Refusal) as caught:
        read(written, "length")
    message = str(caught.value)
    assert message.isprintable()
    assert len(message) < 250


@pytest.mark.parametrize(
    ("written", "dimension", "unit"),
    [
        ("1.55 um", "spectral", "µm"),
        ("590 1/cm", "spectral", "cm^-1"),
        ("4.0 ± 0.2 %", "fraction", "%"),
        ("0.04", "fraction", ""),
        (4, "number", ""),
        ("40 nm", "rate", "nm"),
        ("30 ± 4 cm^2/(V s) (k=2)", "mobility", "cm^2/V/s"),
    ],
)
def test_unit_as_written(written: str | float, dimension: str, unit: str) -> None:
    assert written_unit(read(written, dimension)) == unit


@pytest.mark.parametrize(
    ("written", "dimension", "unit", "text"),
    [
        ("4.0 ± 0.2 %", "fraction", "%", "4.0 ± 0.2 %"),
        ("4.03 ± 0.2 %", "fraction", "%", "4.03 ± 0.20 %"),
        ("4.0312 ± 0.0996 %", "fraction", "%", "4.03 ± 0.10 %"),
        ("1.55 eV", "spectral", "eV", "1.55 eV"),
        ("1.55 eV", "spectral", None, "374.788 THz"),
        ("1550 ± 3.1 nm", "spectral", "nm", "1550.0 ± 3.1 nm"),
        ("1.868 ± 0.003 g/cm^3", "density", "g/cm^3", "1.868 ± 0.003 g/cm^3"),
        ("1868 ± 3 kg/m^3", "density", None, "1.868 ± 0.003 g/cm^3"),
        ("4.255 ± 0.020 (k=2)", "number", None, "4.255 ± 0.010"),
        ("1.4584637", "number", None, "1.45846"),
        ("12345.6 ± 560", "number", None, "12350 ± 560"),
        ("40 ± 10", "number", None, "40 ± 10"),
        ("2.0e19 ± 1e18 cm^-3", "number density", None, "2.0e19 ± 0.1e19 cm^-3"),
        ("2.0e19 cm^-3", "number density", None, "2e19 cm^-3"),
        ("3e-7 ± 1.2e-8", "number", None, "3.00e-7 ± 0.12e-7"),
        ("4e-5", "number", None, "4e-5"),
        ("0.9999 ± 0", "number", None, "0.9999 ± 0"),
        ("22 nm", "length", None, "22 nm"),
        ("0.5 nm", "length", None, "0.5 nm"),
        ("3000 nm", "length", None, "3 µm"),
        ("0 nm", "length", None, "0 m"),
        ("250 g", "mass", None, "250 g"),
        ("20 ± 0.5 °C", "temperature", "°C", "20.0 ± 0.5 °C"),
        ("0 ± 3 Hz", "spectral", "nm", "inf nm"),
    ],
)
def test_shown(written: str, dimension: str, unit: str | None, text: str) -> None:
    leaf = read(written, dimension)
    assert show(leaf.value, dimension, unit, std=leaf.std) == text


def test_what_is_not_finite_is_shown_as_such() -> None:
    assert show(math.nan, "fraction", "%") == "nan %"
    assert show(0.04, "fraction", "%", std=math.inf) == "4 ± inf %"


def test_shown_in_a_unit_that_does_not_belong_is_refused() -> None:
    with pytest.raises(Refusal, match=r"unit 'kg'.*a length takes nm"):
        show(1.0, "length", "kg")
