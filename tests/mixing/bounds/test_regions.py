"""Regions for lossy phases: printed forms, real limits, mixtures that must lie in them, distances."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

import mpmath
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import quad

from mixsim.mixing import bruggeman, maxwell_garnett
from mixsim.mixing.bounds import (
    hard_discs,
    hard_spheres,
    hashin_shtrikman,
    isotropic_region,
    many_phase_region,
    three_point_region,
    two_phase_region,
    wiener,
)

Region = Callable[..., Any]
DIELECTRIC, METAL = (2.0 + 0.01j, 5.0 + 2.0j), (2.25 + 0.001j, -10.0 + 1.0j)
share = st.floats(0.01, 0.99)
# any passive phase but those that point in opposite directions or nearly so
phase = st.builds(
    lambda size, angle: size * np.exp(1j * angle), st.floats(0.01, 100.0), st.floats(0.0, np.pi - 0.05)
)


def inside(region: Any, z: Any) -> bool:
    scale = np.max(np.abs(region.extent()))
    return bool(np.all(region.outside(z) <= 1e-9 * scale))


def coated(layers: list[complex], volumes: list[float], d: int = 3) -> complex:
    """Spheres (or fibres) of many coats, from the core outwards: Maxwell Garnett once for each coat."""
    core, volume = layers[0], volumes[0]
    for layer, more in zip(layers[1:], volumes[1:], strict=True):
        f = volume / (volume + more)
        b = (core - layer) / (core + (d - 1) * layer)
        core = layer * (1 + (d - 1) * f * b) / (1 - f * b)
        volume += more
    return core


@pytest.mark.parametrize("phases", [DIELECTRIC, METAL])
@pytest.mark.parametrize("d", [2, 3])
@pytest.mark.parametrize("f", [0.1, 0.6])
def test_isotropic_arcs_are_the_printed_ones(phases: tuple[complex, complex], d: int, f: float) -> None:
    """Bergman–Milton in the form with a parameter γ, transcribed with mpmath; and the ends of γ."""
    one, two = (mpmath.mpc(phase) for phase in phases)
    lens = isotropic_region(phases, fraction=f, dimensions=d)
    for step in (0.0, 0.25, 0.5, 0.9, 1.0):
        g = mpmath.mpf((f + step * (d - 1)) / d)
        above = (1 - f) * one + f * two - (1 - f) * f * (one - two) ** 2 / (d * (g * one + (1 - g) * two))
        g = mpmath.mpf(((d - 1) * f + step) / d)
        under = d * one * two * (g * two + (1 - g) * one)
        below = 1 / ((1 - f) / one + f / two - (d - 1) * (1 - f) * f * (one - two) ** 2 / under)
        for z, bend in ((complex(above), lens.bends[0]), (complex(below), lens.bends[1])):
            assert float(lens.outside(z)) < 1e-13 * abs(z)
            if 0.0 < step < 1.0:
                turn = (z - lens.first) / (lens.second - z)
                assert turn / abs(turn) == pytest.approx(bend, abs=1e-10)
            else:
                assert min(abs(z - lens.first), abs(z - lens.second)) < 1e-12 * abs(z)


def test_ends_are_coated_spheres_as_printed() -> None:
    lens = isotropic_region((2.0 + 0.01j, 5.0 + 2.0j), fraction=0.2)
    assert lens.first == pytest.approx(2.465116 + 0.206617j, abs=1e-6)
    assert isotropic_region((2.25, -10 + 1j), fraction=0.1).first == pytest.approx(
        4.133952 + 0.238727j, abs=1e-6
    )
    assert lens.second == pytest.approx(maxwell_garnett([5 + 2j, 2 + 0.01j], fractions=[0.2, 0.8]), rel=1e-13)


@pytest.mark.parametrize("phases", [DIELECTRIC, METAL])
def test_arcs_of_any_geometry_pass_through_the_phases(phases: tuple[complex, complex]) -> None:
    """Coated laminates: the second phase in layers of the first, along and across the field, and reversed."""
    f = 0.3
    lens = two_phase_region(phases, fraction=f)
    for bend, layer, kernel, p in ((0, phases[0], phases[1], f), (1, phases[1], phases[0], 1 - f)):
        for inner in np.linspace(p, 1.0, 7)[1:-1]:
            core = inner * kernel + (1 - inner) * layer  # along the field
            rest = p / inner  # its share of layers across the field
            z = 1 / (rest / core + (1 - rest) / layer)
            turn = (z - lens.first) / (lens.second - z)
            assert turn / abs(turn) == pytest.approx(complex(lens.bends[bend]), abs=1e-9)


@given(st.floats(0.1, 100.0), st.floats(0.1, 100.0), share, st.sampled_from([2, 3]))
def test_without_loss_the_regions_are_the_real_bounds(one: float, two: float, f: float, d: int) -> None:
    pair, room = ([one, two], [1 - f, f]), 1e-12 * max(one, two)
    for loss in (0.0, 1e-9):
        phases = one * (1 + 1j * loss), two * (1 + 0.5j * loss)
        any_way, same_way = (
            two_phase_region(phases, fraction=f),
            isotropic_region(phases, fraction=f, dimensions=d),
        )
        for region, real in ((any_way, wiener(*pair)), (same_way, hashin_shtrikman(*pair, dimensions=d))):
            assert np.array(region.extent()[:2]) == pytest.approx(np.array(real), abs=room + loss * room)
            assert loss or inside(region, 0.5 * (real[0] + real[1]))
            assert not inside(region, 1.01 * real[1]) and not inside(region, 0.99 * real[0])
    for dimensions, real in ((None, wiener(*pair)), (d, hashin_shtrikman(*pair, dimensions=d))):
        many = many_phase_region([one, two], fractions=[1 - f, f], dimensions=dimensions)
        assert np.array(many.extent()[:2]) == pytest.approx(np.array(real), rel=1e-5)


@given(phase, phase, share, share, share, st.sampled_from([2, 3]))
def test_mixtures_of_two_phases_lie_inside(
    one: complex, two: complex, f: float, outer: float, turn: float, d: int
) -> None:
    """Doubly coated spheres and symmetric spheres are isotropic; laminates of laminates are anything."""
    same_way = isotropic_region((one, two), fraction=f, dimensions=d)
    any_way = two_phase_region((one, two), fraction=f)
    three = coated([one, two, one], [(1 - f) * (1 - outer), f, (1 - f) * outer], d)
    back = coated([two, one, two], [f * (1 - outer), 1 - f, f * outer], d)
    symmetric = complex(bruggeman([one, two], fractions=[1 - f, f], dimensions=d))
    for z in (three, back, symmetric):
        assert inside(same_way, z) and inside(any_way, z)
    for corner in (same_way.first, same_way.second):
        assert inside(any_way, corner)
    # a laminate along the field and one across it, of different loadings, again in layers of both kinds
    low = turn * f
    high = (f - outer * low) / (1 - outer)
    if high <= 1.0:
        along, across = low * two + (1 - low) * one, 1 / (high / two + (1 - high) / one)
        assert inside(any_way, outer * along + (1 - outer) * across)
        assert inside(any_way, 1 / (outer / along + (1 - outer) / across))


@given(phase, phase, share, share)
def test_three_points_narrow_the_region(one: complex, two: complex, f: float, zeta: float) -> None:
    """Symmetric spheres have ζ₂ = f₂, coated spheres 0 and 1: they must lie in their own region."""
    narrow = three_point_region((one, two), fraction=f, three_point_parameter=zeta)
    assert inside(isotropic_region((one, two), fraction=f), narrow.boundary(21))
    own = three_point_region((one, two), fraction=f, three_point_parameter=f)
    assert inside(own, complex(bruggeman([one, two], fractions=[1 - f, f])))
    ends = isotropic_region((one, two), fraction=f)
    for corner, parameter in ((ends.first, 0.0), (ends.second, 1.0)):
        point = three_point_region((one, two), fraction=f, three_point_parameter=parameter)
        assert point.first == pytest.approx(corner, rel=1e-9)
        assert point.second == pytest.approx(corner, rel=1e-9)


def test_dilute_hard_spheres_and_fibres_have_the_parameter_of_their_pairs() -> None:
    """Slope of ζ₂: the field of one grain, squared, averaged over every other that does not overlap it."""
    spheres = 3.0 * quad(lambda s: s**2 / (s**2 - 1.0) ** 3, 2.0, np.inf)[0]
    fibres = 2.0 * quad(lambda s: s / (s**2 - 1.0) ** 2, 2.0, np.inf)[0]
    assert hard_spheres(1e-6) / 1e-6 == pytest.approx(spheres, abs=6e-6)
    assert hard_discs(1e-6) / 1e-6 == pytest.approx(fibres, abs=1e-6)
    assert np.isnan(hard_spheres(0.61)) and np.isnan(hard_discs([-0.1, 0.71])).all()


@given(st.lists(phase, min_size=3, max_size=4), st.randoms(use_true_random=False), st.data())
def test_mixtures_of_many_phases_lie_inside(phases: list[complex], random: Any, data: Any) -> None:
    parts = [random.uniform(0.05, 1.0) for _ in phases]
    f = [part / sum(parts) for part in parts]
    order = data.draw(st.permutations(range(len(phases))))
    d = data.draw(st.sampled_from([2, 3]))
    any_way = many_phase_region(phases, fractions=f)
    same_way = many_phase_region(phases, fractions=f, dimensions=d)
    layered = coated([phases[k] for k in order], [f[k] for k in order], d)
    symmetric = complex(bruggeman(phases, fractions=f, dimensions=d))
    for z in (layered, symmetric):
        assert inside(same_way, z) and inside(any_way, z)
    parallel = sum(s * e for s, e in zip(f, phases, strict=True))
    series = 1 / sum(s / e for s, e in zip(f, phases, strict=True))
    assert inside(any_way, parallel) and inside(any_way, series)
    assert inside(any_way, any_way.boundary(19)) and inside(same_way, same_way.boundary(19))
    # an absent phase changes nothing, wherever it points
    with_none = many_phase_region([*phases, -7.0], fractions=[*f, 0.0], dimensions=d)
    np.testing.assert_allclose(with_none.centre, same_way.centre, rtol=1e-12)


@given(phase, phase, share)
def test_two_of_many_phases_are_two_phases(one: complex, two: complex, f: float) -> None:
    lens, discs = (
        two_phase_region((one, two), fraction=f),
        many_phase_region([one, two], fractions=[1 - f, f]),
    )
    size = abs(one) + abs(two)
    reach = np.abs(np.array(lens.extent()) - np.array(discs.extent()))
    assert np.all(reach < 0.02 * np.max(np.abs(lens.boundary() - lens.first[..., None])) + 1e-6 * size)
    assert np.all(discs.outside(lens.boundary(41)) < 1e-9 * np.max(np.abs(lens.boundary())))


@given(phase, phase, share)
def test_extent_is_that_of_the_outline_and_distance_is_that_to_it(
    one: complex, two: complex, f: float
) -> None:
    lens = isotropic_region((one, two), fraction=f)
    line = lens.boundary(4001)
    box = np.array([line.real.min(), line.real.max(), line.imag.min(), line.imag.max()])
    size = float(np.max(np.abs(line - line[0])))
    assert np.array(lens.extent()) == pytest.approx(box, abs=2e-3 * size + 1e-9 * abs(line[0]))
    # step outwards from the middle of each arc
    for arc, bend in zip(lens.arcs(3), lens.bends, strict=True):
        if abs(np.angle(bend)) < 1e-3 or size < 1e-3:
            continue
        out = arc[1] - 0.5 * (lens.first + lens.second)
        step = 1e-5 * size * out / abs(out)
        assert float(lens.outside(arc[1] + step)) == pytest.approx(1e-5 * size, rel=1e-2)
        assert float(lens.outside(arc[1] - step)) == 0.0


def test_opposite_phases_leave_nothing_bounded() -> None:
    for region in (
        two_phase_region((2.0, -5.0), fraction=0.2),
        isotropic_region((2.0, -5.0), fraction=0.2),
        many_phase_region([2.0, -5.0, 3.0], fractions=[0.5, 0.2, 0.3]),
    ):
        assert np.isnan(region.outside(1.0)) and np.isnan(region.extent()).all()


def test_regions_broadcast_and_take_any_contrast() -> None:
    f = np.array([0.0, 0.2, 1.0])[:, None]
    phases = np.array([2.0 + 0.1j, 3.0, 1e12 + 1j, np.nan])
    lens = isotropic_region((1.0, phases), fraction=f)
    discs = many_phase_region([1.0, phases, 5.0], fractions=[0.9 * (1 - f), 0.9 * f, 0.1], dimensions=3)
    assert lens.outside(np.ones((3, 4))).shape == discs.outside(np.ones((3, 4))).shape == (3, 4)
    assert np.all(lens.outside(1.0)[0, :3] == 0.0) and np.all(lens.outside(phases)[2, :3] == 0.0)
    assert np.isnan(lens.outside(1.0)[:, 3]).all() and np.isnan(discs.outside(1.0)[1:, 3]).all()
    assert lens.extent()[0][1, 2] == pytest.approx(1.75, rel=1e-9)  # (1 + 2f)/(1 − f)
    assert lens.boundary(11).shape == (3, 4, 22) and discs.boundary(11).shape == (3, 4, 11)
