"""Indices in air and at other temperatures; what a recipe makes of them."""

from __future__ import annotations

import numpy as np
import pytest

import mixsim
from mixsim.dispersion.thermo_optic import index_of_air, thermo_optic_shift
from mixsim.errors import BadInput
from mixsim.units import spectral_from

CROWN = [1.86e-6, 1.31e-8, -1.37e-11, 4.34e-7, 6.27e-10, 0.170]
BAND = 'band.values = ["546.1 nm"]'


def index_at(text: str, **settings: object) -> float:
    recipe = mixsim.parse(f"{BAND}\nhost.material = 'glass'\n{text}", settings=settings)
    return float(mixsim.predict(recipe).quantity("index")[0])


def test_air_against_the_formula_of_its_density() -> None:
    """At 15 °C the printed formula is 1.000 277 7 at 546.1 nm; 20 °C is 1.7 % thinner air."""
    omega = spectral_from(0.5461, "µm")
    sigma2 = 0.5461**-2
    standard = 1e-8 * (5792105 / (238.0185 - sigma2) + 167917 / (57.362 - sigma2))
    assert index_of_air(omega) - 1.0 == pytest.approx(standard * 288.15 / 293.15, rel=1e-12)
    assert standard == pytest.approx(2.779e-4, rel=2e-3)


def test_six_constants_against_their_derivative() -> None:
    """dn/dT = (n² − 1)/(2n) [D₀ + 2D₁ΔT + 3D₂ΔT² + (E₀ + 2E₁ΔT)/(λ² − λ_TK²)], by differences."""
    wavelength, n, step, h = 0.6328, 1.515, 35.0, 1e-3
    omega = spectral_from(wavelength, "µm")
    d0, d1, d2, e0, e1, pole = CROWN
    slope = d0 + 2 * d1 * step + 3 * d2 * step**2 + (e0 + 2 * e1 * step) / (wavelength**2 - pole**2)
    ends = [
        thermo_optic_shift(omega, index=n, temperature_difference=step + side * h, thermo_optic=CROWN)
        for side in (1, -1)
    ]
    assert (ends[0] - ends[1]) / (2 * h) == pytest.approx((n * n - 1) / (2 * n) * slope, rel=1e-7)
    assert np.isfinite(thermo_optic_shift(0.0, index=n, temperature_difference=step, thermo_optic=CROWN))


def test_an_index_in_air_is_higher_against_vacuum() -> None:
    air = index_of_air(spectral_from(0.5461, "µm"))
    model = 'materials.glass.index = { model = "constant", n = 1.5, reference = "air" }'
    assert index_at(model) == pytest.approx(1.5 * air, rel=1e-14)
    # the formula is asked for the shorter wavelength that the light has in air
    cauchy = 'materials.glass.index = { model = "cauchy", a = 1.5, b = "0.005 µm^2"'
    inside = 1.5 + 0.005 / (0.5461 / air) ** 2
    assert index_at(cauchy + ', reference = "air" }') == pytest.approx(inside * air, rel=1e-13)
    assert index_at(cauchy + ', reference = "vacuum" }') == index_at(cauchy + " }")


def test_temperature_moves_an_index() -> None:
    """PMMA-like: −1.05e-4 per kelvin over 30 K; and the catalogue's constants over 20 K."""
    plain = 'materials.glass = { temperature = "20 °C", index = { model = "constant", n = 1.49, '
    assert index_at(
        plain + 'dn_dt = "-105 ppm/K" } }', **{"conditions.temperature": "50 °C"}
    ) == pytest.approx(1.49 - 30 * 105e-6, rel=1e-12)
    six = f"thermo_optic = {CROWN} }} }}"
    warm = index_at(plain + six, **{"conditions.temperature": "40 °C"})
    shift = thermo_optic_shift(
        spectral_from(0.5461, "µm"), index=1.49, temperature_difference=20.0, thermo_optic=CROWN
    )
    assert warm == pytest.approx(1.49 + shift, rel=1e-12)
    assert index_at(plain + six) == pytest.approx(1.49, rel=1e-14)


def test_temperature_moves_a_permittivity_its_limits_and_its_conduction() -> None:
    text = """
        band.values = ["1 MHz"]
        conditions.temperature = "70 °C"
        host.material = "ceramic"
        [materials.ceramic]
        temperature = "20 °C"
        temperature_coefficient = "-800 ppm/K"
        permittivity.infinity = 60.0
        permittivity.terms.slow = { model = "debye", step = 40.0, relaxation_time = "1 ns" }
    """
    answer = mixsim.predict(mixsim.parse(text))
    factor = 1.0 - 50 * 800e-6
    cold = mixsim.predict(mixsim.parse(text, settings={"conditions.temperature": "20 °C"}))
    assert answer.permittivity[0] == pytest.approx(factor * cold.permittivity[0], rel=1e-13)
    assert answer.limits.static.real == pytest.approx(100.0 * factor)
    assert answer.limits.high_frequency.real == pytest.approx(60.0 * factor)
    swept = mixsim.sweep(mixsim.parse(text), {"conditions.temperature": [293.15, 343.15]})
    assert swept.permittivity[:, 0] == pytest.approx(
        [cold.permittivity[0], answer.permittivity[0]], rel=1e-13
    )


def test_the_uncertainty_of_a_temperature_is_a_difference() -> None:
    """± 3 °C is ± 3 K, not ± 276 K."""
    text = """
        band.values = ["1 MHz"]
        conditions.temperature = "50 °C ± 3 °C"
        host.material = "ceramic"
        [materials.ceramic]
        temperature = "20 °C"
        temperature_coefficient = "1000 ppm/K"
        permittivity.infinity = 10.0
    """
    pushed = mixsim.predict(mixsim.parse(text)).pushed
    assert pushed is not None and pushed.real[0] == pytest.approx(0.03)


def test_what_does_not_move_with_temperature_is_said() -> None:
    head = f"{BAND}\nconditions.temperature = '60 °C'\nhost.material = 'epoxy'\n"
    text = head + "materials.epoxy = { based_on = 'epoxy', {} }"
    plain = mixsim.predict(mixsim.parse(text.replace("{}", "temperature = '20 °C'")))
    (caution,) = [caution for caution in plain.warnings if caution.kind == "temperature"]
    assert "epoxy (20 °C)" in caution.message
    narrow = "temperature = '20 °C', valid_temperature = { from = '0 °C', to = '40 °C' }"
    kinds = {caution.kind for caution in mixsim.predict(mixsim.parse(text.replace("{}", narrow))).warnings}
    assert {"temperature", "out-of-range"} <= kinds


@pytest.mark.parametrize(
    ("text", "found"),
    [
        ('temperature_coefficient = "1 ppm/K", permittivity.infinity = 2', "without temperature"),
        (
            'temperature = "20 °C", temperature_coefficient = "1 ppm", permittivity.infinity = 2',
            "a change per kelvin",
        ),
        (
            'temperature = "20 °C", index = { model = "constant", n = 1, dn_dt = "1 1/K", '
            "thermo_optic = [1,1,1,1,1,1] }",
            "given 2 times",
        ),
        (
            'temperature = "20 °C", index = { model = "constant", n = 1, thermo_optic = [1,1] }',
            "thermo_optic",
        ),
        ('temperature = "-300 °C", permittivity.infinity = 2', "must be above 0"),
        (
            'valid_temperature = { from = "40 °C", to = "0 °C" }, permittivity.infinity = 2',
            "from is the lower one",
        ),
        ('index = { model = "constant", n = 1, reference = "water" }', "reference"),
    ],
)
def test_what_cannot_be_used(text: str, found: str) -> None:
    with pytest.raises(BadInput) as error:
        mixsim.parse(f"host.material = 'glass'\nmaterials.glass = {{ {text} }}")
    assert found in str(error.value)
