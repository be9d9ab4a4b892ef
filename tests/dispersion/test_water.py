"""Liquid water at a temperature, against an installed package and printed values; and in a recipe."""

from __future__ import annotations

import chemicals
import numpy as np
import pytest

import mixsim
from mixsim.dispersion.water import water, water_density, water_relaxation_time, water_static
from mixsim.errors import BadInput

GHZ = 2e9 * np.pi


@pytest.mark.parametrize("celsius", range(0, 101, 10), ids=lambda t: f"{t} °C [IAPWS R8-97 in chemicals]")
def test_static_level(celsius: float) -> None:
    """The same release by another hand, at our density: 2e-5 is the older constants that it uses."""
    kelvin = 273.15 + celsius
    rho = float(water_density(temperature=kelvin))
    assert water_static(temperature=kelvin) == pytest.approx(
        chemicals.permittivity_IAPWS(kelvin, rho), rel=2e-5
    )


@pytest.mark.parametrize("celsius", [0, 25, 60, 99], ids=lambda t: f"{t} °C [IAPWS-95 in chemicals]")
def test_density(celsius: float) -> None:
    expected = chemicals.iapws95_rho(273.15 + celsius, 101325.0)
    assert water_density(temperature=273.15 + celsius) == pytest.approx(expected, rel=2e-4)


@pytest.mark.parametrize(
    ("celsius", "static", "picoseconds"),
    [(0, 87.91, 17.67), (20, 80.21, 9.36), (25, 78.36, 8.27)],
    ids=lambda value: f"{value} [memory: Kaatze 1989]",
)
def test_printed_values(celsius: float, static: float, picoseconds: float) -> None:
    kelvin = 273.15 + celsius
    assert water_static(temperature=kelvin) == pytest.approx(static, rel=2e-3)
    assert water_relaxation_time(temperature=kelvin) == pytest.approx(1e-12 * picoseconds, rel=0.02)


def test_limits_are_those_of_the_formula() -> None:
    assert water(1.0, temperature=298.15).real == pytest.approx(float(water_static(temperature=298.15)))
    assert water(1e20, temperature=298.15) == pytest.approx(5.2, abs=1e-4)


def test_temperature_moves_the_water_of_a_recipe() -> None:
    text = """
        band.values = ["10 GHz"]
        host.material = "water"
    """
    plain = mixsim.predict(mixsim.parse(text))
    assert plain.permittivity[0] == pytest.approx(water(10 * GHZ, temperature=298.15), rel=1e-13)
    assert plain.limits.static.real == pytest.approx(78.4, abs=0.1)
    swept = mixsim.sweep(
        mixsim.parse(text, settings={"conditions.temperature": "25 °C"}),
        {"conditions.temperature": [283.15, 313.15]},
    )
    expected = [water(10 * GHZ, temperature=kelvin) for kelvin in (283.15, 313.15)]
    assert swept.permittivity[:, 0] == pytest.approx(expected, rel=1e-13)
    assert swept.limits.static.real[0] > swept.limits.static.real[1]
    hot = mixsim.predict(mixsim.parse(text, settings={"conditions.temperature": "80 °C"}))
    assert "out-of-range" in {caution.kind for caution in hot.warnings}


@pytest.mark.parametrize(
    ("text", "found"),
    [
        ('permittivity.law = "water"', "law without temperature"),
        ('temperature = "25 °C", permittivity = { law = "water", infinity = 2 }', "infinity beside law"),
        ('temperature = "25 °C", permittivity.law = "oil"', "permittivity.law"),
    ],
)
def test_laws_that_cannot_be_used(text: str, found: str) -> None:
    with pytest.raises(BadInput) as error:
        mixsim.parse(f"host.material = 'a'\nmaterials.a = {{ {text} }}")
    assert found in str(error.value)
