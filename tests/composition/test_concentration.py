"""Dopant concentrations against counting formula units in a litre."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from mixsim.composition import number_density_from_mole_fraction, number_density_from_weight_fraction

AVOGADRO = 6.02214076e23


def test_weight_fraction_by_counting() -> None:
    """1 g of Co2O3 (165.86 g/mol, two ions) in 100 g of doped glass of 2.5 g/cm^3."""
    volume = 100.0 / 2.5 * 1e-6
    ions = 2 * 1.0 / 165.86 * AVOGADRO
    found = number_density_from_weight_fraction(
        weight_fraction=0.01, density=2500.0, molar_mass=0.16586, ions_per_formula=2.0
    )
    assert float(found) == pytest.approx(ions / volume, rel=1e-12)


def test_mole_fraction_by_counting() -> None:
    """2 mol of the dopant with 98 mol of the host, density of the doped host."""
    mass = 2 * 0.0749 + 98 * 0.0601
    found = number_density_from_mole_fraction(
        mole_fraction=0.02, density=2200.0, molar_mass=0.0749, host_molar_mass=0.0601
    )
    assert float(found) == pytest.approx(2 * AVOGADRO / (mass / 2200.0), rel=1e-12)


@given(
    st.floats(1e-6, 1.0),
    st.floats(0.02, 0.5),
    st.floats(0.02, 0.5),
    st.floats(500.0, 8000.0),
    st.floats(1.0, 4.0),
)
def test_both_ways_to_count_agree(
    x: float, molar: float, host_molar: float, density: float, ions: float
) -> None:
    """x moles of compound beside 1 − x of host: their mass, its volume, and the ions in it."""
    compound, host = x * molar, (1.0 - x) * host_molar
    by_hand = x * AVOGADRO * ions / ((compound + host) / density)
    by_moles = number_density_from_mole_fraction(
        mole_fraction=x, density=density, molar_mass=molar, host_molar_mass=host_molar, ions_per_formula=ions
    )
    by_weight = number_density_from_weight_fraction(
        weight_fraction=compound / (compound + host), density=density, molar_mass=molar, ions_per_formula=ions
    )
    assert float(by_moles) == pytest.approx(by_hand, rel=1e-12)
    assert float(by_weight) == pytest.approx(by_hand, rel=1e-12)


def test_concentrations_broadcast() -> None:
    found = number_density_from_mole_fraction(
        mole_fraction=np.array([[0.0], [0.1]]),
        density=np.array([2000.0, 2500.0, 3000.0]),
        molar_mass=0.1,
        host_molar_mass=0.06,
    )
    assert found.shape == (2, 3)
    assert np.all(found[0] == 0.0)
