"""The constants against an independent table of them."""

from __future__ import annotations

import pytest
import scipy.constants as table

from mixsim import units


@pytest.mark.parametrize(
    ("ours", "theirs", "tolerance"),
    [
        pytest.param(units.SPEED_OF_LIGHT, table.c, 0, id="speed of light-exact"),
        pytest.param(units.ELEMENTARY_CHARGE, table.e, 0, id="elementary charge-exact"),
        pytest.param(units.PLANCK, table.h, 0, id="planck-exact"),
        pytest.param(units.REDUCED_PLANCK, table.hbar, 1e-15, id="reduced planck-exact"),
        pytest.param(units.AVOGADRO, table.N_A, 0, id="avogadro-exact"),
        pytest.param(units.BOLTZMANN, table.k, 0, id="boltzmann-exact"),
        pytest.param(units.VACUUM_PERMITTIVITY, table.epsilon_0, 1e-9, id="permittivity-scipy CODATA"),
        pytest.param(units.VACUUM_PERMEABILITY, table.mu_0, 1e-9, id="permeability-scipy CODATA"),
        # Older scipy carries CODATA 2018, whose electron mass lies 1.4e-9 below that of 2022.
        pytest.param(units.ELECTRON_MASS, table.m_e, 2e-9, id="electron mass-scipy CODATA"),
    ],
)
def test_agrees_with_the_table(ours: float, theirs: float, tolerance: float) -> None:
    assert ours == pytest.approx(theirs, rel=tolerance, abs=0)


def test_light_travels_at_the_speed_that_the_vacuum_allows() -> None:
    product = units.VACUUM_PERMITTIVITY * units.VACUUM_PERMEABILITY * units.SPEED_OF_LIGHT**2
    assert product == pytest.approx(1, rel=3e-10)
