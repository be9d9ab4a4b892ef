"""Dopant concentrations against counting formula units in a litre."""

from __future__ import annotations

import pytest

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
