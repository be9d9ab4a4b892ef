"""Depolarisation factors against print and against their defining integral."""

from __future__ import annotations

import mpmath
import numpy as np
import pytest
import reference

from mixsim.mixing import ellipsoid_factors, spheroid_factors


def by_quadrature(aspect_ratio: float, *, cross: bool = False) -> float:
    """N_i = (a b c/2) ∫ ds / ((s + a_i²) √((s + a²)(s + b²)(s + c²))) for semi-axes 1, 1, m; 30 digits."""
    with mpmath.workdps(30):
        m2 = mpmath.mpf(aspect_ratio) ** 2
        own = 1 if cross else m2

        def integrand(s: mpmath.mpf) -> mpmath.mpf:
            return 1 / ((s + own) * (s + 1) * mpmath.sqrt(s + m2))

        edges = [0, *sorted({mpmath.mpf(1), m2}), mpmath.inf]
        return float(mpmath.mpf(aspect_ratio) / 2 * mpmath.quad(integrand, edges))


@reference.case("depolarisation", "prolate", "oblate")
def test_print_and_quadrature(ref: reference.Row) -> None:
    cross, axis = spheroid_factors(np.array(ref["aspect_ratio"]))
    assert axis == pytest.approx(ref["axis"], abs=ref["tolerance"])
    assert 2 * cross + axis == pytest.approx(1.0, rel=1e-14)
    assert axis == pytest.approx([by_quadrature(m) for m in ref["aspect_ratio"]], rel=1e-12)
    assert cross == pytest.approx([by_quadrature(m, cross=True) for m in ref["aspect_ratio"]], rel=1e-12)


@reference.case("depolarisation", "ellipsoids")
def test_ellipsoids(ref: reference.Row) -> None:
    for axes, factors in zip(ref["axes"], ref["factors"], strict=True):
        assert ellipsoid_factors(*axes) == pytest.approx(factors, abs=ref["tolerance"])


@pytest.mark.parametrize("away", [1e-12, 1e-8, 1e-4, 1e-3, 1e-2, -1e-8, -1e-3])
def test_no_digits_are_lost_near_the_sphere(away: float) -> None:
    _, axis = spheroid_factors(1 + away)
    assert axis == pytest.approx(by_quadrature(1 + away), rel=1e-13)
