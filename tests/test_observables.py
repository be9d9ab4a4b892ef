"""Quantities that follow from ε and μ: branches, scalars, published relations."""

from __future__ import annotations

import cmath

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from mixsim.observables import QUANTITIES, complex_index
from mixsim.units import SPEED_OF_LIGHT, VACUUM_PERMITTIVITY

OMEGA = 3.2e15
CASES = [2.25 + 0j, 4 + 0.1j, -9 + 0j, -9 + 1.2j, 0.3 + 5j, 1e-9 + 1e-12j]


@pytest.mark.parametrize("permittivity", CASES)
@pytest.mark.parametrize("permeability", [1 + 0j, 1.5 + 0.2j, -2 + 0.3j])
def test_against_a_plain_transcription(permittivity: complex, permeability: complex) -> None:
    index = cmath.sqrt(permittivity) * cmath.sqrt(permeability)
    expected = {
        "permittivity_real": permittivity.real,
        "permittivity_imag": permittivity.imag,
        "permeability_real": permeability.real,
        "permeability_imag": permeability.imag,
        "index": index.real,
        "extinction": index.imag,
        "loss_tangent": permittivity.imag / permittivity.real,
        "magnetic_loss_tangent": permeability.imag / permeability.real,
        "absorption_coefficient": 2 * OMEGA * index.imag / SPEED_OF_LIGHT,
        "conductivity": OMEGA * VACUUM_PERMITTIVITY * permittivity.imag,
    }
    assert set(expected) == set(QUANTITIES)
    for name, value in expected.items():
        found = QUANTITIES[name].function(OMEGA, permittivity, permeability)
        assert float(found) == pytest.approx(value, rel=1e-14)


@given(st.floats(-50, 50), st.floats(0, 50), st.floats(-50, 50), st.floats(0, 50))
def test_passive_media_take_power_out_of_the_wave(a: float, b: float, c: float, d: float) -> None:
    index = complex_index(OMEGA, complex(a, b), complex(c, d))
    assert index.imag >= 0.0
    assert index**2 == pytest.approx(complex(a, b) * complex(c, d), rel=1e-9, abs=1e-12)


@pytest.mark.parametrize("name", QUANTITIES)
def test_arrays_broadcast_and_nan_stays_nan(name: str) -> None:
    omega = np.array([1e15, 2e15, 3e15])
    permittivity = np.array([[2 + 0.1j, complex(np.nan, np.nan), 3 + 0j], [1 + 0j, 4 + 2j, -3 + 1j]])
    permittivity.setflags(write=False)
    found = QUANTITIES[name].function(omega, permittivity, np.ones((2, 3), dtype=complex))
    assert found.shape == (2, 3)
    assert np.isnan(found[0, 1]) == ("magnetic" not in name and "permeability" not in name)
    single = QUANTITIES[name].function(omega[0], permittivity[0, 0], 1.0)
    assert float(single) == pytest.approx(found[0, 0])
