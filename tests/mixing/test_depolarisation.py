"""Depolarisation factors against the defining integral, a computed table and the limits."""

from __future__ import annotations

import itertools
from typing import Any

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import quad
from scipy.special import elliprd

from mixsim.errors import Refusal
from mixsim.mixing.depolarisation import (
    SPHERE,
    ellipsoid_factors,
    only_spheres,
    same_length,
    spheroid_factors,
)
from mixsim.mixing.orientation import random_spheroid


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


def by_quadrature(axes: tuple[float, float, float]) -> list[float]:
    """The defining integral of each axis, with s = exp(t): its parts spread over the decades of the axes."""
    product = float(np.prod(axes))

    def factor(own: float) -> float:
        def integrand(t: float) -> float:
            s = np.exp(t)
            roots = np.prod([np.sqrt(s + axis * axis) for axis in axes])
            return 0.5 * product * s / ((s + own * own) * roots)

        edges = [-60.0, *sorted({2 * np.log(axis) for axis in axes}), 60.0]
        parts = itertools.pairwise(edges)
        return sum(quad(integrand, *part, epsabs=1e-14, epsrel=1e-12, limit=200)[0] for part in parts)

    return [factor(axis) for axis in axes]


@pytest.mark.parametrize(
    "axes", [(3.0, 2.0, 1.0), (1.0, 1.02, 0.99), (1.0, 30.0, 900.0), (1e-3, 1.0, 1.0), (7.0, 7.0, 1e-4)]
)
def test_ellipsoids_are_the_defining_integral_and_a_library_of_elliptic_integrals(axes: Any) -> None:
    factors = ellipsoid_factors(*axes)
    assert factors == pytest.approx(by_quadrature(axes), rel=1e-9)
    squares = [axis * axis for axis in axes]
    turns = [(squares[1], squares[2], squares[0]), (squares[2], squares[0], squares[1]), tuple(squares)]
    library = [np.prod(axes) / 3.0 * elliprd(*turn) for turn in turns]
    assert factors == pytest.approx(library, rel=3e-15)


@given(st.floats(-50, 50), st.floats(-50, 50), st.floats(-3, 3))
def test_ellipsoids_add_up_scale_and_fall_with_the_axis(first: float, second: float, size: float) -> None:
    axes = np.array([10.0**first, 10.0**second, 1.0])
    factors = np.array(ellipsoid_factors(*axes))
    assert factors.sum() == pytest.approx(1.0, rel=1e-13)
    np.testing.assert_allclose(ellipsoid_factors(*(axes * 10.0**size)), factors, rtol=1e-12)
    order = np.argsort(axes)
    assert np.all(np.diff(factors[order]) <= 1e-15)


@pytest.mark.parametrize("ratio", [1e-6, 0.05, 0.999, 1.0, 1 + 1e-7, 1.05, 20.0, 1e5])
def test_ellipsoids_hold_spheroids(ratio: float) -> None:
    cross, axis = spheroid_factors(ratio)
    assert ellipsoid_factors(1.0, 1.0, ratio) == pytest.approx((cross, cross, axis), rel=1e-11)


def test_ellipsoids_near_the_sphere_and_in_batches() -> None:
    """To first order N_a = 1/3 − 4/15 (δ_a − mean δ): the next order is some δ²."""
    strain = np.array([[3e-8], [-1e-9], [2e-9]])
    factors = np.array(ellipsoid_factors(*(1.0 + strain)))
    expected = 1 / 3 - 0.4 * (strain - strain.mean())
    np.testing.assert_allclose(factors, expected, rtol=0, atol=1e-15)
    assert ellipsoid_factors([1.0, 2.0], 2.0, [[3.0], [4.0], [5.0]])[0].shape == (3, 2)
    assert np.isnan(ellipsoid_factors(np.nan, 1.0, 2.0)).all()


def test_refusals() -> None:
    with pytest.raises(Refusal, match=r"aspect ratio -2\.0"):
        spheroid_factors([1.0, -2.0])
    with pytest.raises(Refusal, match=r"the axes \(1\.0, 0\.0, 2\.0\)"):
        ellipsoid_factors(1.0, [3.0, 0.0], 2.0)
    with pytest.raises(Refusal, match="1e100 apart"):
        ellipsoid_factors(1.0, 1.0, 1e101)
    with pytest.raises(Refusal, match="2 phases, 1 fractions"):
        same_length([1.0, 2.0], [1.0], None)
    with pytest.raises(Refusal, match="under bruggeman"):
        only_spheres([SPHERE, random_spheroid(2.0)], rule="bruggeman")
