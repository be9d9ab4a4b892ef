"""Water at its temperature against published attenuation and spectra of other hands."""

from __future__ import annotations

from typing import Any

import numpy as np
import open_data
import pytest
import reference
from evaluator import TURN

from mixsim.dispersion.laws import LAWS

NARROW, WIDE = LAWS["water"].function, LAWS["water-terahertz"].function


@reference.case("water", "attenuation of cloud at 0 °C")
def test_attenuation_of_cloud(ref: reference.Row) -> None:
    frequency = np.array(ref["frequency_ghz"])
    wet = WIDE(TURN * 1e9 * frequency, temperature=273.15)
    ratio = (2.0 + wet.real) / wet.imag
    attenuation = 0.819 * frequency / (wet.imag * (1.0 + ratio**2))
    assert attenuation == pytest.approx(ref["attenuation"], abs=ref["tolerance"])


@pytest.mark.parametrize(
    ("law", "page", "celsius", "ends", "share"),
    [
        (NARROW, "Segelstein", 25.0, (0.1, 60.0), 0.026),
        (WIDE, "Segelstein", 25.0, (0.1, 60.0), 0.026),
        (WIDE, "Segelstein", 25.0, (60.0, 1000.0), 0.11),
        (WIDE, "Asfar-H2O", 19.0, (200.0, 1050.0), 0.065),
    ],
    ids=lambda value: f"{value} [published: open data]" if isinstance(value, str) else None,
)
def test_measured_spectra(
    law: Any, page: str, celsius: float, ends: tuple[float, float], share: float
) -> None:
    """Shares of |ε|: the collections join several authors, some per cent apart, and smooth between them."""
    wavelength, measured = open_data.table("main", "H2O", page)
    frequency = 299_792.458 / wavelength
    inside = (frequency > ends[0]) & (frequency < ends[1])
    assert inside.sum() >= 8
    ours = law(TURN * 1e9 * frequency[inside], temperature=273.15 + celsius)
    assert np.max(np.abs(ours - measured[inside]) / np.abs(measured[inside])) < share


def test_one_relaxation_does_not_reach_the_terahertz() -> None:
    """Why `water` ends at 60 GHz: at 1 THz it has a third less loss than is measured."""
    wavelength, measured = open_data.table("main", "H2O", "Segelstein")
    place = int(np.argmin(np.abs(wavelength - 299.792458)))
    omega = TURN * 299_792_458e6 / wavelength[place]
    assert NARROW(omega, temperature=298.15).imag < 0.67 * measured[place].imag
    assert WIDE(omega, temperature=298.15).imag == pytest.approx(measured[place].imag, rel=0.03)


@pytest.mark.parametrize("celsius", [0.0, 20.0, 40.0])
def test_the_two_laws_agree_where_both_hold(celsius: float) -> None:
    omega = TURN * np.geomspace(1e8, 60e9, 60)
    narrow, wide = (law(omega, temperature=273.15 + celsius) for law in (NARROW, WIDE))
    assert np.max(np.abs(wide / narrow - 1.0)) < 0.02


@pytest.mark.parametrize("law", LAWS.values(), ids=LAWS)
def test_limits_broadcasting_and_passivity(law: Any) -> None:
    """Exact limits at every temperature; batch axes lead, frequency is last; it always loses."""
    kelvin = np.linspace(273.15, 333.15, 7)[:, None]
    omega = TURN * np.geomspace(1e3, 1e12, 50)
    answer = law.function(omega, temperature=kelvin)
    assert answer.shape == (7, 50)
    assert np.all(answer.imag > 0.0)
    ends = (
        law.function(np.array([0.0]), temperature=kelvin),
        law.function(np.array([1e30]), temperature=kelvin),
    )
    assert ends[0] == pytest.approx(law.static(temperature=kelvin), rel=1e-14)
    assert ends[1].real == pytest.approx(law.high(temperature=kelvin), rel=1e-14)
    assert np.isnan(law.function(1e9, temperature=np.nan))
    assert law.function(1e10, temperature=kelvin[2, 0]) == pytest.approx(
        law.function(1e10, temperature=kelvin)[2, 0]
    )
