"""Depolarisation factors against the defining integral, a computed table and the limits."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import quad

from mixsim.errors import Refusal
from mixsim.mixing.depolarisation import (
    SPHERE,
    aligned_spheroid,
    only_spheres,
    random_spheroid,
    same_length,
    spheroid_factors,
)


def axis_by_quadrature(m: float) -> float:
    """N = (abc/2) ∫ ds / ((s + c²) √((s + a²)(s + b²)(s + c²))), a = b = 1, c = m, with s = tan²."""

    def integrand(t: float) -> float:
        s = np.tan(t) ** 2
        return m * np.tan(t) / np.cos(t) ** 2 / ((s + 1.0) * (s + m * m) ** 1.5)

    return quad(integrand, 0.0, np.pi / 2, epsabs=1e-14, epsrel=1e-13, limit=200)[0]


@pytest.mark.parametrize("m", [0.05, 0.3, 0.9, 0.952, 0.954, 0.9999, 1.0, 1.0001, 1.05, 1.06, 1.5, 4.0, 30.0])
def test_factors_are_the_defining_integral(m: float) -> None:
    cross, axis = spheroid_factors(m)
    assert axis == pytest.approx(axis_by_quadrature(m), abs=1e-12)
    assert 2 * cross + axis == pytest.approx(1.0, abs=1e-15)


@pytest.mark.parametrize(
    ("m", "axis"),
    [
        pytest.param(m, axis, id=f"closed form, computed: {m:g}")
        for m, axis in [
            (1.5, 0.232981), (2, 0.173564), (3, 0.108709), (5, 0.055821), (10, 0.020286), (20, 0.006749),
            (100, 0.000430), (1 / 1.5, 0.445906), (1 / 2, 0.527200), (1 / 3, 0.635389), (1 / 5, 0.750484),
            (1 / 10, 0.860804), (1 / 100, 0.984490), (1.0001, 1 / 3 - 4e-4 / 15),
        ]
    ],
)  # fmt: skip
def test_table(m: float, axis: float) -> None:
    assert spheroid_factors(m)[1] == pytest.approx(axis, abs=1e-6)


def test_series_and_closed_form_meet_and_both_factors_stay_monotonic() -> None:
    m = np.concatenate([np.linspace(0.93, 0.97, 4001), np.linspace(1.03, 1.07, 4001)])
    cross, axis = spheroid_factors(m)
    assert np.all(np.diff(axis[:4001]) < 0) and np.all(np.diff(axis[4001:]) < 0)
    assert np.all(np.diff(cross[:4001]) > 0) and np.all(np.diff(cross[4001:]) > 0)
    assert np.max(np.abs(np.diff(axis[:4001], n=3))) < 1e-12


def test_limits_needle_disc_and_their_approach() -> None:
    cross, axis = spheroid_factors([0.0, np.inf, 1.0, np.nan])
    np.testing.assert_array_equal(axis[:3], [1.0, 0.0, 1 / 3])
    np.testing.assert_allclose(cross[:3], [0.0, 0.5, 1 / 3], rtol=1e-15)
    assert np.isnan(axis[3]) and np.isnan(cross[3])
    # leading terms: a flake's edge π m/4, a whisker's tip (ln 2m − 1)/m²
    assert spheroid_factors(1e-8)[0] == pytest.approx(np.pi / 4 * 1e-8, rel=1e-7)
    assert spheroid_factors(1e8)[1] == pytest.approx((np.log(2e8) - 1) / 1e16, rel=1e-12)
    assert spheroid_factors(1e200)[1] >= 0.0


@given(st.floats(1e-6, 1e6))
def test_factors_lie_between_zero_and_one_and_order_by_shape(m: float) -> None:
    cross, axis = spheroid_factors(m)
    assert 0.0 < axis < 1.0 and 0.0 < cross <= 0.5
    assert (axis <= 1 / 3 + 1e-15) if m >= 1 else (axis >= 1 / 3 - 1e-15)


def test_builders_keep_weights_and_place_the_principal_axes() -> None:
    cross, axis = spheroid_factors(2.0)
    assert random_spheroid(2.0) == ((cross, 2 / 3), (axis, 1 / 3))
    ((factor, weight),) = aligned_spheroid(2.0)
    assert weight == 1.0
    np.testing.assert_array_equal(factor, [[cross], [cross], [axis]])
    ((factor, _),) = aligned_spheroid(np.array([[2.0], [0.5]]))
    assert factor.shape == (2, 3, 1)
    np.testing.assert_array_equal(factor[0], [[cross], [cross], [axis]])
    assert SPHERE == ((1 / 3, 1.0),)


def test_refusals() -> None:
    with pytest.raises(Refusal, match=r"aspect ratio -2\.0"):
        spheroid_factors([1.0, -2.0])
    with pytest.raises(Refusal, match="2 phases, 1 fractions"):
        same_length([1.0, 2.0], [1.0], None)
    with pytest.raises(Refusal, match="under bruggeman"):
        only_spheres([SPHERE, random_spheroid(2.0)], rule="bruggeman")
