"""Grains as they lie, against averages over turned tensors."""

from __future__ import annotations

from typing import Any

import numpy as np
import pytest
from scipy.integrate import quad
from scipy.spatial.transform import Rotation

from mixsim.mixing import (
    NEEDLE,
    SPHERE,
    Depolarisation,
    aligned_grains,
    aligned_spheroid,
    ellipsoid_factors,
    in_plane_grains,
    maxwell_garnett,
    ordered_grains,
    random_grains,
    random_spheroid,
    ratios_about,
    spheroid_factors,
)

FACTORS = ellipsoid_factors(3.0, 2.0, 1.0)
GRAIN, HOST = -7.0 + 2.0j, 2.25


def polarised(factors: Any) -> np.ndarray:
    """Field inside over field around, along the axes of a grain."""
    return np.diag([HOST / (HOST + n * (GRAIN - HOST)) for n in factors])


def turned(factors: Any, turns: np.ndarray, weights: np.ndarray) -> np.ndarray:
    """Mean of that tensor over turned grains: its diagonal, the rest having been found to vanish."""
    tensors = turns @ polarised(factors) @ np.swapaxes(turns, -1, -2)
    mean = np.einsum("n,nij->ij", weights, tensors)
    np.testing.assert_allclose(mean - np.diag(np.diag(mean)), 0.0, atol=1e-12)
    return np.diag(mean)


def of_pairs(depolarisation: Depolarisation) -> np.ndarray:
    total = sum(weight * (HOST / (HOST + factor * (GRAIN - HOST))) for factor, weight in depolarisation)
    return np.broadcast_to(np.ravel(total), 3)


def by_angles(polar: np.ndarray, weight: np.ndarray, rolls: int = 8) -> tuple[np.ndarray, np.ndarray]:
    """Every turn with these polar angles, at equal steps of the two other Euler angles."""
    round_about = np.arange(rolls) * 2 * np.pi / rolls
    a, t, c = np.meshgrid(round_about, polar, round_about, indexing="ij")
    angles = np.stack([a.ravel(), t.ravel(), c.ravel()], axis=-1)
    spread = np.broadcast_to(weight[None, :, None], a.shape).ravel()
    return Rotation.from_euler("ZYZ", angles).as_matrix(), spread / spread.sum()


def test_random_grains() -> None:
    cosine, weight = np.polynomial.legendre.leggauss(6)
    expected = turned(FACTORS, *by_angles(np.arccos(cosine), weight))
    np.testing.assert_allclose(of_pairs(random_grains(FACTORS)), expected, rtol=1e-12)


def test_aligned_and_in_plane_grains() -> None:
    np.testing.assert_allclose(of_pairs(aligned_grains(FACTORS)), np.diag(polarised(FACTORS)), rtol=1e-15)
    turns = Rotation.from_euler("Z", np.arange(7)[:, None] * 2 * np.pi / 7).as_matrix()
    expected = turned(FACTORS, turns, np.full(7, 1 / 7))
    np.testing.assert_allclose(of_pairs(in_plane_grains(FACTORS)), expected, rtol=1e-12)


@pytest.mark.parametrize("concentration", [-6.0, 0.0, 2.0, 40.0])
def test_ordered_grains(concentration: float) -> None:
    """Symmetry axes with a density exp(κ cos²θ), of which only <cos²θ> may matter."""
    cross, axis = spheroid_factors(4.0)
    factors = cross, cross, axis
    cosine, weight = np.polynomial.legendre.leggauss(60)
    weight = weight * np.exp(concentration * (cosine**2 - 1.0))
    order = 1.5 * np.sum(weight * cosine**2) / weight.sum() - 0.5
    expected = turned(factors, *by_angles(np.arccos(cosine), weight))
    np.testing.assert_allclose(of_pairs(ordered_grains(factors, order_parameter=order)), expected, rtol=1e-12)


def test_ordered_grains_hold_the_other_orientations() -> None:
    cross, _, axis = NEEDLE
    for order, other in (
        (1.0, aligned_grains(NEEDLE)),
        (0.0, random_grains(NEEDLE)),
        (-0.5, in_plane_grains((axis, cross, cross))),
    ):
        ordered = of_pairs(ordered_grains(NEEDLE, order_parameter=order))
        np.testing.assert_allclose(ordered, of_pairs(other), rtol=1e-14)


def test_batches_and_principal_axes() -> None:
    ratio, order = np.array([[2.0], [0.5]]), np.array([[0.3], [0.9]])
    cross, axis = spheroid_factors(ratio)
    metal = -9.0 + np.linspace(1.0, 2.0, 4) * 1j
    for pairs in (
        aligned_spheroid(ratio),
        in_plane_grains((axis, cross, cross)),
        ordered_grains((cross, cross, axis), order_parameter=order),
        ordered_grains((cross, cross, axis), order_parameter=0.5),
        ordered_grains(NEEDLE, order_parameter=order),
    ):
        z = maxwell_garnett([2.0, metal], fractions=[0.9, 0.1], depolarisations=[SPHERE, pairs])
        assert z.shape == (2, 3, 4)
        np.testing.assert_array_equal(z[:, 0], z[:, 1])
    assert [weight for _, weight in random_spheroid(2.0)] == [2 / 3, 1 / 3]
    ((factor, weight),) = aligned_spheroid(2.0)
    assert weight == 1.0
    np.testing.assert_array_equal(factor, np.array([*spheroid_factors(2.0)])[[0, 0, 1], None])


@pytest.mark.parametrize("spread", [0.0, 0.3, 0.8])
def test_a_distribution_of_aspect_ratios(spread: float) -> None:
    """Moments of the log-normal, and a polarisability against adaptive quadrature."""
    pairs = list(ratios_about(3.0, aspect_ratio_spread=spread))
    assert sum(w for _, w in pairs) == pytest.approx(1.0, abs=1e-14)
    assert sum(w * r for r, w in pairs) == pytest.approx(3.0 * np.exp(spread**2 / 2), rel=2e-4)
    assert sum(w * np.log(r) for r, w in pairs) == pytest.approx(np.log(3.0), rel=1e-13)

    def polarisability(ratio: Any) -> Any:
        return HOST / (HOST + spheroid_factors(ratio)[1] * (-7.0 + 5.0j - HOST))

    def weighed(place: float) -> Any:
        return np.exp(-0.5 * place**2) / np.sqrt(2 * np.pi) * polarisability(3.0 * np.exp(spread * place))

    expected = quad(weighed, -8.0, 8.0, complex_func=True, epsabs=1e-10, limit=200)[0]
    found = sum(w * polarisability(r) for r, w in pairs)
    assert found == pytest.approx(expected, rel=1e-5)
