"""Waves in spheres against the exact series, from spherical Bessel functions of a library."""

from __future__ import annotations

from typing import Any

import mpmath
import numpy as np
import pytest
from scipy.special import spherical_jn, spherical_yn

from mixsim.mixing.waves import dipole_grain, inside_factor

SPHERES = [
    (4.0 + 0j, 1.0 + 0j),
    (-12.0 + 1.2j, 1.0 + 0j),
    (3.0 + 5e3j, 1.0 + 0j),
    (12.0 + 0.3j, 8.0 + 4.0j),
    (80.0 + 20j, 1.0 + 0j),
]


def mie(order: int, e: complex, m: complex, x: Any) -> tuple[Any, Any]:
    """a_n and b_n of a sphere of relative ε and μ, size parameter x, as the textbooks print them."""
    index = np.sqrt(e) * np.sqrt(m)
    inner = index * x

    def psi(z: Any) -> tuple[Any, Any]:
        value, slope = spherical_jn(order, z), spherical_jn(order, z, derivative=True)
        return z * value, value + z * slope

    def xi(z: Any) -> tuple[Any, Any]:
        value = spherical_jn(order, z) + 1j * spherical_yn(order, z)
        slope = spherical_jn(order, z, derivative=True) + 1j * spherical_yn(order, z, derivative=True)
        return z * value, value + z * slope

    (p, dp), (q, dq), (h, dh) = psi(inner), psi(x), xi(x)
    electric = (index * p * dq - m * q * dp) / (index * p * dh - m * h * dp)
    magnetic = (m * p * dq - index * q * dp) / (m * p * dh - index * h * dp)
    return electric, magnetic


def of_dipole(grain: Any, host: complex, x: Any) -> Any:
    """a₁ of a small sphere of this permittivity."""
    return 2 * x**3 / 3j * (grain - host) / (grain + 2 * host)


@pytest.mark.parametrize(("e", "m"), SPHERES)
@pytest.mark.parametrize("host", [1.0 + 0j, 2.25 + 0.4j])
def test_dipoles_are_those_of_the_exact_series(e: complex, m: complex, host: complex) -> None:
    free = np.array([1e-3, 0.02, 0.1, 0.5, 1.0, 2.0])
    x = np.sqrt(host) * free
    factor = inside_factor(np.sqrt(e) * np.sqrt(m) * free)
    a, b = mie(1, e / host, m, x)
    electric, magnetic = (
        dipole_grain(factor * e, host=host, size=x),
        dipole_grain(factor * m, host=1.0, size=x),
    )
    np.testing.assert_allclose(of_dipole(electric, host, x)[1:], a[1:], rtol=1e-8)
    np.testing.assert_allclose(of_dipole(magnetic, 1.0, x)[2:], b[2:], rtol=1e-6)


@pytest.mark.parametrize(
    "size", [1e-6, 0.3, 0.999, 1.001, 2 + 0.5j, 30 + 30j, 0.5j, 900 + 900j, 1e5 * (1 + 1j)]
)
def test_factor_against_its_printed_form_in_fifty_digits(size: complex) -> None:
    with mpmath.workdps(50):
        t = mpmath.mpc(size)
        sine, cosine = mpmath.sin(t), mpmath.cos(t)
        expected = complex(2 * (sine - t * cosine) / ((t * t - 1) * sine + t * cosine))
    assert inside_factor(size) == pytest.approx(expected, rel=1e-12)


def test_ends_of_the_factor() -> None:
    theta = 1e-3 * (1 + 1j)
    assert inside_factor(theta) - 1 == pytest.approx(theta**2 / 10, rel=1e-6)
    assert inside_factor(0.0) == pytest.approx(1.0, rel=1e-15)
    thick = 1e4 * (1 + 1j)
    assert inside_factor(thick) == pytest.approx(2j / thick, rel=1e-3)
    holed = inside_factor(np.array([np.nan, 1.0]))
    assert np.isnan(holed[0]) and np.isfinite(holed[1])


def test_small_spheres_are_quasi_static() -> None:
    for e, _ in SPHERES:
        assert dipole_grain(e, host=2.25, size=0.0) == pytest.approx(e, rel=1e-14)
        assert dipole_grain(e, host=2.25, size=1e-5) == pytest.approx(e, rel=1e-7 * max(1.0, abs(e)))


@pytest.mark.parametrize("e", [2.5 + 0j, -6.0 + 0.5j, 9.0 + 1.0j])
def test_energy_is_kept_and_loss_is_extinction(e: complex) -> None:
    """Re a₁ is what a sphere takes from the wave, |a₁|² what it scatters: equal where it has no loss."""
    x = np.array([0.05, 0.3, 1.0])
    factor = inside_factor(np.sqrt(e) * x)
    for own in (factor * e, factor):
        grain = dipole_grain(own, host=1.0, size=x)
        a = of_dipole(grain, 1.0, x)
        assert np.all(grain.imag > 0.0)
        if e.imag == 0.0:
            np.testing.assert_allclose(a.real, np.abs(a) ** 2, rtol=1e-6)
        else:
            assert np.all(a.real > np.abs(a) ** 2)


@pytest.mark.parametrize("e", [-6.0 + 0.5j, -2.4 + 0.2j, 4.0 + 0.1j, 2.5 + 0j, 30 + 1j, 1e3j, 9.0 + 0j])
def test_where_even_the_dipole_stops(e: complex) -> None:
    """Two hundredths of the extinction are left to higher orders at x = 0.6, and ever more beyond 1.5."""

    def left(x: float) -> float:
        orders = [sum((2 * n + 1) * part.real for part in mie(n, e, 1.0, x)) for n in range(1, 12)]
        return 1 - orders[0] / sum(orders)

    assert abs(left(0.3)) < 0.02 and abs(left(0.6)) < 0.02
    assert left(1.5) > 0.027


def test_but_not_where_the_quadrupole_resonates() -> None:
    """At ε = −3/2 of the host even a small metal sphere has a quadrupole to speak of."""
    orders = [sum((2 * n + 1) * part.real for part in mie(n, -1.6 + 0.1j, 1.0, 0.3)) for n in range(1, 12)]
    assert 0.05 < 1 - orders[0] / sum(orders) < 0.2
