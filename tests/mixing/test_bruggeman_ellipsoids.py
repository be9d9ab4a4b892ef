"""Bruggeman with grains that are not spheres: roots, branch, percolation, bounds."""

from __future__ import annotations

from itertools import pairwise
from typing import Any

import mpmath
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from mixsim.mixing import (
    DISC,
    NEEDLE,
    SPHERE,
    Depolarisation,
    aligned_grains,
    aligned_spheroid,
    bruggeman,
    ellipsoid_factors,
    hashin_shtrikman,
    ordered_grains,
    random_grains,
    random_spheroid,
    spheroid_factors,
    wiener,
)
from mixsim.mixing.bruggeman import percolation_threshold

passive = st.builds(complex, st.floats(-50, 50), st.floats(1e-3, 50))
positive = st.floats(0.1, 100)
ratio = st.floats(0.02, 50)
share = st.floats(0.01, 1)
TRIAXIAL = random_grains(ellipsoid_factors(5.0, 2.0, 1.0))
METAL, GLASS, WATER = -12.0 + 1.2j, 2.25 + 1e-3j, 60 + 40j


def kinds(phases: Any, fractions: Any, shapes: list[Depolarisation]) -> list[tuple[Any, float, float]]:
    """Every axis of every phase: permittivity, fraction, factor."""
    whole = zip(phases, fractions, shapes, strict=True)
    return [(e, f * float(w), float(n)) for e, f, shape in whole for n, w in shape]


def iterated(phases: Any, fractions: Any, shapes: list[Depolarisation]) -> complex:
    """Denjoy and Wolff in 25 digits: the map whose fixed point is sought, from inside the half-plane."""
    with mpmath.workdps(25):
        each = [(mpmath.mpc(e), mpmath.mpf(f), mpmath.mpf(n)) for e, f, n in kinds(phases, fractions, shapes)]
        scale = sum(f / n for _, f, n in each)
        z = mpmath.mpc(0, 1)
        for _ in range(4000):
            last, z = z, scale / sum(f / n / ((1 - n) * z + n * e) for e, f, n in each)
            if abs(z - last) < 1e-19 * abs(z):
                break
        return complex(z)


@pytest.mark.parametrize("f", [0.05, 0.2, 0.5, 0.9])
@pytest.mark.parametrize(
    "shapes",
    [
        pytest.param([SPHERE, random_spheroid(8.0)], id="rice"),
        pytest.param([SPHERE, random_spheroid(0.1)], id="flakes"),
        pytest.param([SPHERE, TRIAXIAL], id="three axes"),
        pytest.param([random_spheroid(3.0), TRIAXIAL], id="a host of grains too"),
        pytest.param([SPHERE, TRIAXIAL, random_spheroid(20.0)], id="three phases"),
    ],
)
@pytest.mark.parametrize("grain", [METAL, WATER, -2.0 + 0.05j, 12.0])
def test_branch_is_where_iteration_from_inside_ends(
    grain: complex, shapes: list[Depolarisation], f: float
) -> None:
    phases, fractions = [GLASS, grain], [1 - f, f]
    if len(shapes) == 3:
        phases, fractions = [GLASS, grain, WATER], [1 - f, 0.7 * f, 0.3 * f]
    z = bruggeman(phases, fractions=fractions, depolarisations=shapes)
    assert z == pytest.approx(iterated(phases, fractions, shapes), rel=1e-10)


@settings(deadline=None)
@given(st.lists(st.tuples(passive, ratio, share), min_size=2, max_size=4))
def test_a_passive_root_of_the_balance_with_the_right_ends(
    given_: list[tuple[complex, float, float]],
) -> None:
    phases = [e for e, _, _ in given_]
    fractions = np.array([w for _, _, w in given_]) / sum(w for _, _, w in given_)
    shapes = [random_spheroid(m) for _, m, _ in given_]
    z = bruggeman(phases, fractions=list(fractions), depolarisations=shapes)
    terms = [f * (e - z) / ((1 - n) * z + n * e) for e, f, n in kinds(phases, fractions, shapes)]
    assert z.imag > 0.0
    assert abs(sum(terms)) < 1e-10 * max(1.0, *map(abs, terms))
    assert bruggeman([phases[0]] * len(phases), fractions=list(fractions), depolarisations=shapes) == (
        pytest.approx(phases[0], rel=1e-12)
    )
    scaled = bruggeman([7 * e for e in phases], fractions=list(fractions), depolarisations=shapes)
    assert scaled == pytest.approx(7 * z, rel=1e-9)


@given(a=positive, b=positive, m=ratio, f=st.floats(0, 1))
def test_real_phases_stay_within_the_bounds(a: float, b: float, m: float, f: float) -> None:
    z = bruggeman([a, b], fractions=[1 - f, f], depolarisations=[SPHERE, random_spheroid(m)])
    low, high = hashin_shtrikman([a, b], fractions=[1 - f, f])
    assert z.imag == 0.0 and low * (1 - 1e-9) <= z.real <= high * (1 + 1e-9)
    aligned = bruggeman([a, b], fractions=[1 - f, f], depolarisations=[SPHERE, aligned_spheroid(m)])
    least, most = wiener([a, b], fractions=[1 - f, f])
    assert np.all(aligned.imag == 0.0)
    assert np.all((aligned.real >= least * (1 - 1e-9)) & (aligned.real <= most * (1 + 1e-9)))


def test_dilute_limit_is_that_of_a_lone_grain() -> None:
    f = 1e-7
    for shape in (TRIAXIAL, random_spheroid(0.05), random_grains(NEEDLE), random_grains(DISC)):
        z = bruggeman([GLASS, METAL], fractions=[1 - f, f], depolarisations=[SPHERE, shape])
        lone = sum(w * (METAL - GLASS) * GLASS / (GLASS + n * (METAL - GLASS)) for n, w in shape)
        assert (z - GLASS) / f == pytest.approx(lone, rel=1e-4)


def test_spheres_said_as_spheroids_and_axes_one_by_one() -> None:
    f = np.array([0.1, 0.4, 0.8])
    ball = bruggeman([GLASS, METAL], fractions=[1 - f, f], depolarisations=[SPHERE, random_spheroid(1.0)])
    np.testing.assert_allclose(ball, bruggeman([GLASS, METAL], fractions=[1 - f, f]), rtol=1e-11)
    factors = ellipsoid_factors(5.0, 2.0, 1.0)
    metal = -9.0 + np.linspace(1.0, 2.0, 4) * 1j
    together = bruggeman(
        [GLASS, metal], fractions=[0.8, 0.2], depolarisations=[SPHERE, aligned_grains(factors)]
    )
    assert together.shape == (3, 4)
    for along, factor in zip(together, factors, strict=True):
        # two kinds with one factor each: a quadratic, whose root in the half-plane numpy finds too
        for z, e in zip(along, metal, strict=True):
            host = np.polymul([-0.8, 0.8 * GLASS], [1 - factor, factor * e])
            grain = np.polymul([-0.2, 0.2 * e], [2 / 3, GLASS / 3])
            roots = np.roots(np.polyadd(host, grain))
            assert z == pytest.approx(roots[np.argmax(roots.imag)], rel=1e-12)


def test_needles_and_discs_are_the_ends_of_long_and_flat_spheroids() -> None:
    for kind, end in ((NEEDLE, 1e7), (DISC, 1e-7)):
        for turned in (random_grains, aligned_grains):
            cross, axis = spheroid_factors(end)
            near = turned((cross, cross, axis))
            for grain in (METAL, WATER, 4.0, -3.0):
                phases, fractions = [GLASS, grain], [0.85, 0.15]
                z = bruggeman(phases, fractions=fractions, depolarisations=[SPHERE, turned(kind)])
                long = bruggeman(phases, fractions=fractions, depolarisations=[SPHERE, near])
                np.testing.assert_allclose(z, long, rtol=1e-5)
    both = bruggeman(
        [GLASS, METAL, 3.0],
        fractions=[0.8, 0.1, 0.1],
        depolarisations=[SPHERE, random_grains(NEEDLE), random_grains(DISC)],
    )
    shapes = [SPHERE, random_spheroid(1e7), random_spheroid(1e-7)]
    long = bruggeman([GLASS, METAL, 3.0], fractions=[0.8, 0.1, 0.1], depolarisations=shapes)
    assert both == pytest.approx(long, rel=1e-5)


@pytest.mark.parametrize("m", [0.01, 0.3, 1.0, 5.0, 100.0])
def test_threshold_is_where_a_perfect_conductor_starts_to_conduct(m: float) -> None:
    shape = random_spheroid(m)
    threshold = float(percolation_threshold(shape))
    for step, conducts in ((0.999, False), (1.001, True)):
        f = step * threshold
        z = bruggeman([2.0, 1e60j], fractions=[1 - f, f], depolarisations=[SPHERE, shape])
        assert (z.imag > 1e40) == conducts
        if not conducts:
            # F = 0 with an infinite grain: f <1/N> = (1 − f)·3 (z − ε_h)/(2z + ε_h)
            pull = f * sum(w / n for n, w in shape) / (3 * (1 - f))
            assert z.real == pytest.approx(2.0 * (1 + pull) / (1 - 2 * pull), rel=1e-9)
    along = percolation_threshold(aligned_spheroid(m))
    assert along.shape == (3, 1)
    assert along[2, 0] == pytest.approx(1.5 / (1.5 + 1 / spheroid_factors(m)[1]), rel=1e-14)


def test_tiny_parts_beside_a_conductor_keep_their_digits() -> None:
    """Two conductors forty decades apart, rice in spheres: the plateau is Σ ε ∂σ/∂σ_k, by differences."""
    shape = random_spheroid(6.0)

    def sigma(host: float, grain: float) -> Any:
        return bruggeman([host, grain], fractions=[0.8, 0.2], depolarisations=[SPHERE, shape]).real

    for host, grain in ((1.0, 50.0), (1e-9, 1.0)):
        z = bruggeman(
            [3e-60 + 1j * host, 7e-60 + 1j * grain], fractions=[0.8, 0.2], depolarisations=[SPHERE, shape]
        )
        h = 1e-5
        slopes = [
            (sigma(host * (1 + h), grain) - sigma(host * (1 - h), grain)) / (2 * h * host),
            (sigma(host, grain * (1 + h)) - sigma(host, grain * (1 - h))) / (2 * h * grain),
        ]
        assert z.imag == pytest.approx(sigma(host, grain), rel=1e-12)
        assert z.real == pytest.approx(3e-60 * slopes[0] + 7e-60 * slopes[1], rel=1e-7)


def test_loss_free_metal_grains_are_the_limit_of_vanishing_loss() -> None:
    rng = np.random.default_rng(3)
    e = rng.normal(size=(3, 3000)) * 10
    f = rng.random((3, 3000)) + 0.02
    fractions = list(f / f.sum(axis=0))
    shapes = [SPHERE, random_spheroid(4.0), random_spheroid(0.2)]
    z = bruggeman(list(e), fractions=fractions, depolarisations=shapes)
    faint = bruggeman(list(e + 1e-9j), fractions=fractions, depolarisations=shapes)
    assert np.all(np.isfinite(z)) and np.all(z.imag >= 0.0)
    assert np.mean(np.abs(z - faint) > 1e-5 * np.abs(z)) < 0.01  # band edges go as the root of the loss


def test_order_and_batches_meet() -> None:
    order = np.linspace(-0.5, 1.0, 4)[:, None]
    metal = -9.0 + np.linspace(1.0, 2.0, 5) * 1j
    cross, axis = spheroid_factors(4.0)
    z = bruggeman(
        [2.0, metal],
        fractions=[0.85, 0.15],
        depolarisations=[SPHERE, ordered_grains((cross, cross, axis), order_parameter=order)],
    )
    assert z.shape == (4, 3, 5)
    aligned = bruggeman([2.0, metal], fractions=[0.85, 0.15], depolarisations=[SPHERE, aligned_spheroid(4.0)])
    np.testing.assert_allclose(z[3], aligned, rtol=1e-11)
    assert all(np.all(a.imag >= 0) for a, _ in pairwise(z))
