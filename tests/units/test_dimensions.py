"""Units: spellings, conversion there and back, and the spectral axis against independent constants."""

from __future__ import annotations

import math
import subprocess
import sys

import numpy as np
import pytest
import scipy.constants as table
from hypothesis import given, settings
from hypothesis import strategies as st

from mixsim.errors import Refusal
from mixsim.units import (
    DIMENSIONS,
    Dimension,
    Unit,
    accepted_units,
    dimension_named,
    from_unit,
    kind_of_axis,
    read,
    show,
    spectral_from,
    spectral_to,
    to_unit,
)

EVERY_UNIT = [
    pytest.param(entry, unit, id=f"{entry.name}-{unit.symbol}")
    for entry in DIMENSIONS.values()
    for unit in entry.units
]
MAGNITUDES = st.floats(1e-6, 1e6) | st.floats(-1e6, -1e-6)


@pytest.mark.parametrize(("entry", "unit"), EVERY_UNIT)
@given(value=MAGNITUDES)
@settings(max_examples=25, deadline=None)
def test_text_there_and_back(entry: Dimension, unit: Unit, value: float) -> None:
    leaf = read(f"{value!r} {unit.symbol}", entry.name)
    # Zero Celsius lies at 273.15 K, so only differences of that size keep their digits.
    floor = 1e-12 * abs(unit.offset)
    assert to_unit(leaf.value, unit.symbol, entry.name) == pytest.approx(value, rel=1e-12, abs=floor)
    again = read(show(leaf.value, entry.name, unit.symbol), entry.name)
    assert to_unit(again.value, unit.symbol, entry.name) == pytest.approx(value, rel=6e-6, abs=floor)


@pytest.mark.parametrize(("entry", "unit"), EVERY_UNIT)
@given(value=MAGNITUDES, relative=st.floats(1e-6, 0.9))
@settings(max_examples=25, deadline=None)
def test_uncertainty_there_and_back(entry: Dimension, unit: Unit, value: float, relative: float) -> None:
    spread = abs(value) * relative
    leaf = read(f"{value!r} ± {spread!r} {unit.symbol}", entry.name)
    assert leaf.std is not None
    again = read(show(leaf.value, entry.name, unit.symbol, std=leaf.std), entry.name)
    # Two digits of the uncertainty are kept, and the value to their place.
    in_unit = abs(to_unit(again.value, unit.symbol, entry.name) - value)
    assert in_unit <= 0.051 * spread + 1e-12 * abs(unit.offset)
    written = show(again.value, entry.name, unit.symbol, std=leaf.std).partition("±")[2]
    assert float(written.split()[0]) == pytest.approx(
        spread, rel=0.051 + (relative if unit.reciprocal else 0)
    )


@pytest.mark.parametrize(
    ("text", "omega"),
    [
        ("1 Hz", 2 * math.pi),
        ("1 kHz", 2e3 * math.pi),
        ("1 MHz", 2e6 * math.pi),
        ("1 GHz", 2e9 * math.pi),
        ("1 THz", 2e12 * math.pi),
        ("1 PHz", 2e15 * math.pi),
        ("1 eV", table.e / table.hbar),
        ("1 meV", 1e-3 * table.e / table.hbar),
        ("1 keV", 1e3 * table.e / table.hbar),
        ("1 cm^-1", 200 * math.pi * table.c),
        ("1 nm", 2e9 * math.pi * table.c),
        ("1 µm", 2e6 * math.pi * table.c),
        ("1 mm", 2e3 * math.pi * table.c),
        ("1 m", 2 * math.pi * table.c),
        ("1 rad/s", 1.0),
        ("1 Grad/s", 1e9),
        ("1 Trad/s", 1e12),
        ("1 s^-1", 1.0),
    ],
)
def test_spectral_units_against_scipy_constants(text: str, omega: float) -> None:
    assert read(text, "spectral").value == pytest.approx(omega, rel=1e-9)


@given(omega=st.floats(1e6, 1e19))
def test_one_place_on_the_axis_has_four_names(omega: float) -> None:
    frequency, energy = spectral_to(omega, "Hz"), spectral_to(omega, "eV")
    wavenumber, wavelength = spectral_to(omega, "cm^-1"), spectral_to(omega, "nm")
    assert energy * table.e == pytest.approx(table.h * frequency, rel=1e-9)
    assert wavenumber * 100 * table.c == pytest.approx(frequency, rel=1e-9)
    assert wavelength * 1e-9 * frequency == pytest.approx(table.c, rel=1e-9)
    assert spectral_from(wavelength, "nm") == pytest.approx(omega, rel=1e-12)


@pytest.mark.parametrize("unit", DIMENSIONS["spectral"].symbols)
def test_arrays_convert_like_floats(unit: str) -> None:
    omega = np.array([[1e9, 2e12], [3e15, 4e16]])
    omega.flags.writeable = False
    there = spectral_to(omega, unit)
    assert there.tolist() == [[spectral_to(w, unit) for w in row] for row in omega.tolist()]
    np.testing.assert_allclose(spectral_from(there, unit), omega, rtol=1e-14)


def test_zero_frequency_has_an_infinite_wavelength() -> None:
    assert spectral_to(0.0, "nm") == math.inf
    assert spectral_to(np.array([0.0, 1.0]), "µm")[0] == math.inf
    assert spectral_from(0.0, "nm") == math.inf


def test_other_dimensions_convert_arrays_too() -> None:
    assert to_unit(np.array([0.04, 1.0]), "%", "fraction").tolist() == [4.0, 100.0]
    assert from_unit(np.array([0.0, 25.0]), "degC", "temperature").tolist() == [273.15, 298.15]


@pytest.mark.parametrize(
    ("unit", "kind"),
    [
        ("GHz", "frequency"),
        ("eV", "photon energy"),
        ("cm-1", "wavenumber"),
        ("um", "vacuum wavelength"),
        ("rad/s", "angular frequency"),
        ("1/s", "angular frequency"),
    ],
)
def test_kind_of_axis(unit: str, kind: str) -> None:
    assert kind_of_axis(unit) == kind


def test_unknown_unit_of_an_axis_is_refused() -> None:
    with pytest.raises(Refusal, match=r"'ghz'.*GHz.*did you mean 'GHz'"):
        kind_of_axis("ghz")


def test_unknown_dimension_is_a_fault_of_the_caller() -> None:
    with pytest.raises(LookupError, match="no dimension 'lenght'"):
        dimension_named("lenght")


def test_a_rate_accepts_widths_in_wavelength() -> None:
    assert {"eV", "cm^-1", "nm"} <= set(accepted_units("rate"))
    assert accepted_units("number") == ()


@pytest.mark.parametrize(("entry", "unit"), EVERY_UNIT)
def test_every_alias_is_the_unit(entry: Dimension, unit: Unit) -> None:
    for alias in unit.aliases:
        assert read(f"3 {alias}", entry.name).value == read(f"3 {unit.symbol}", entry.name).value


@pytest.mark.parametrize("entry", DIMENSIONS.values(), ids=lambda entry: entry.name)
def test_the_example_in_messages_can_be_read(entry: Dimension) -> None:
    assert read(entry.example, entry.name).dimension == entry.name
    assert set(entry.shown) <= set(entry.symbols)


def test_units_load_no_heavy_library() -> None:
    check = (
        "import sys, mixsim.units.quantity; "
        "sys.exit(' '.join({'scipy', 'matplotlib', 'typer'} & set(sys.modules)) or 0)"
    )
    outcome = subprocess.run([sys.executable, "-c", check], capture_output=True, text=True, check=False)
    assert outcome.returncode == 0, outcome.stderr
