"""Maxwell Garnett against textbook numbers, the naive sum over phases and its exact limits."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from mixsim.mixing import SPHERE, aligned_spheroid, hashin_shtrikman, random_spheroid, spheroid_factors
from mixsim.mixing.maxwell_garnett import fraction_from, inclusion_from, maxwell_garnett

positive = st.floats(1e-3, 1e3)
fraction = st.floats(0.0, 1.0)
passive = st.builds(complex, st.floats(-50, 50), st.floats(1e-3, 50))


@pytest.mark.parametrize(
    ("f", "grain", "host", "expected"),
    [
        pytest.param(*row, id=f"textbook formula, computed: f={row[0]} {row[1]} in {row[2]}")
        for row in [
            (0.1, 10, 1, 1.243243), (0.3, 10, 1, 1.870968), (0.5, 10, 1, 2.8), (0.3, 80, 3, 6.305246),
            (0.5, 3, 1, 1.75), (0.2, 5 + 2j, 2 + 0.01j, 2.465116 + 0.206617j),
            (0.1, -10 + 1j, 2.25, 4.133952 + 0.238727j),
        ]
    ],
)  # fmt: skip
def test_textbook_values(f: float, grain: complex, host: complex, expected: complex) -> None:
    assert maxwell_garnett([host, grain], fractions=[1 - f, f]) == pytest.approx(expected, abs=1e-6)


def test_dilute_slope_second_order_and_weak_contrast() -> None:
    f, beta = 1e-5, 9 / 12
    rise = maxwell_garnett([1.0, 10.0], fractions=[1 - f, f]).real - 1
    assert rise / f == pytest.approx(2.25, abs=1e-4)
    f = 1e-3
    rise = maxwell_garnett([1.0, 10.0], fractions=[1 - f, f]).real - 1
    assert (rise - 3 * beta * f) / f**2 == pytest.approx(3 * beta**2, rel=2e-3)
    f, contrast = 0.3, 1e-3
    mean = 1 + f * contrast
    z = maxwell_garnett([1.0, 1.0 + contrast], fractions=[1 - f, f]).real
    assert (mean - z) * mean / (f * (1 - f) * contrast**2) == pytest.approx(0.33336, abs=1e-4)


def naive(phases: list[complex], fractions: list[float], factors: list[list[tuple[float, float]]]) -> complex:
    """The equation of the docstring as it is printed, phase by phase."""
    host, above, below = phases[0], 0j, 1.0 + 0j
    for e, f, pairs in zip(phases[1:], fractions[1:], factors[1:], strict=True):
        for factor, weight in pairs:
            local = host + factor * (e - host)
            above += f * weight * (e - host) * host / local
            below -= f * weight * factor * (e - host) / local
    return host + above / below


@given(
    st.lists(passive, min_size=3, max_size=3),
    st.lists(st.floats(0.05, 1), min_size=3, max_size=3),
    st.floats(0.1, 9),
)
def test_many_phases_and_shapes_are_the_printed_sum(
    phases: list[complex], parts: list[float], m: float
) -> None:
    fractions = [part / sum(parts) for part in parts]
    cross, axis = (float(factor) for factor in spheroid_factors(m))
    pairs = [[(1 / 3, 1.0)], [(1 / 3, 1.0)], [(cross, 2 / 3), (axis, 1 / 3)]]
    z = maxwell_garnett(phases, fractions=fractions, depolarisations=[SPHERE, SPHERE, random_spheroid(m)])
    assert z == pytest.approx(naive(phases, fractions, pairs), rel=1e-7)
    # only of spheres: several kinds of metallic grain, not all spheres, can turn loss into gain
    assert maxwell_garnett(phases, fractions=fractions).imag >= 0.0


@given(passive, passive, fraction, st.floats(0.1, 9))
def test_splitting_a_phase_in_two_changes_nothing(host: complex, grain: complex, f: float, m: float) -> None:
    for shape in (SPHERE, random_spheroid(m)):
        whole = maxwell_garnett([host, grain], fractions=[1 - f, f], depolarisations=[SPHERE, shape])
        halves = maxwell_garnett(
            [host, grain, grain], fractions=[1 - f, f / 4, 3 * f / 4], depolarisations=[SPHERE, shape, shape]
        )
        assert halves == pytest.approx(whole, rel=1e-9)


def test_needles_and_discs_reach_the_wiener_bounds() -> None:
    f = 0.3
    along_needles, across_discs = (
        maxwell_garnett([1.0, 10.0], fractions=[1 - f, f], depolarisations=[SPHERE, aligned_spheroid(m)])[
            2, 0
        ]
        for m in (np.inf, 0.0)
    )
    assert along_needles == pytest.approx(3.7, rel=1e-14)  # parallel
    assert across_discs == pytest.approx(1.369863, abs=1e-6)  # series


@given(positive, positive, fraction)
def test_equals_the_hashin_shtrikman_bound_of_its_host(host: float, grain: float, f: float) -> None:
    lower, upper = hashin_shtrikman([host, grain], [1 - f, f])
    z = maxwell_garnett([host, grain], fractions=[1 - f, f]).real
    if 0 < f < 1:
        assert z == pytest.approx(lower if host <= grain else upper, rel=1e-11)
    assert lower * (1 - 1e-11) <= z <= upper * (1 + 1e-11)


@given(
    positive, st.lists(positive, min_size=2, max_size=2), st.lists(st.floats(0.01, 1), min_size=3, max_size=3)
)
def test_three_loss_free_phases_stay_within_the_bounds(
    host: float, grains: list[float], parts: list[float]
) -> None:
    fractions = [part / sum(parts) for part in parts]
    lower, upper = hashin_shtrikman([host, *grains], fractions)
    z = maxwell_garnett([host, *grains], fractions=fractions).real
    assert lower * (1 - 1e-11) <= z <= upper * (1 + 1e-11)


@pytest.mark.parametrize("third", [False, True])
def test_conducting_grains_saturate_and_extremes_stay_finite(third: bool) -> None:
    f = 0.3
    split = [1 - f, f / 2, f / 2] if third else [1 - f, f]
    for host in (2.0, 1e-60, 1e-120):
        for grain in (1e150, 1e150j, -1e150):
            phases = [host, grain, grain][: len(split)]
            z = maxwell_garnett(phases, fractions=split)
            assert z == pytest.approx(host * (1 + 2 * f) / (1 - f), rel=1e-12)
    assert maxwell_garnett([1e20, 1.0], fractions=[0.0, 1.0]) == pytest.approx(1.0, rel=1e-14)


def test_tiny_parts_beside_a_conducting_phase_keep_their_digits() -> None:
    """ε_k = i σ_k + t e_k with t = 1e-60: the real part over t is Σ e_k ∂σ/∂σ_k, here by a difference."""
    f, small, step = 0.3, 1e-60, 1e-6
    for conductivities in ((1.0, 0.0), (1.0, 0.2), (0.1, 3.0)):
        phases = [1j * sigma + small * e for sigma, e in zip(conductivities, (3.0, 5.0), strict=True)]
        z = maxwell_garnett(phases, fractions=[1 - f, f])
        nudged = [
            maxwell_garnett(
                [s + h * e for s, e in zip(conductivities, (3.0, 5.0), strict=True)], fractions=[1 - f, f]
            )
            for h in (step, -step)
        ]
        assert z.real / small == pytest.approx((nudged[0] - nudged[1]).real / (2 * step), rel=1e-8)


def test_loss_free_grains_at_their_own_resonance() -> None:
    """A lone sphere resonates at −2; the mixture is regular there, and without bound at its own resonance."""
    assert maxwell_garnett([1.0, -2.0], fractions=[0.7, 0.3]) == pytest.approx(-2.0, rel=1e-12)
    beside = maxwell_garnett([1.0, -2.0 + 1e-12j, 1.5], fractions=[0.7, 0.2, 0.1])
    assert maxwell_garnett([1.0, -2.0, 1.5], fractions=[0.7, 0.2, 0.1]) == pytest.approx(beside, abs=1e-9)
    shapes = [SPHERE, random_spheroid(np.inf), SPHERE]  # factor 1/2 across: resonant at −1 exactly
    beside, there = (
        maxwell_garnett([1.0, grain, 1.5], fractions=[0.7, 0.2, 0.1], depolarisations=shapes)
        for grain in (-1.0 + 1e-12j, -1.0)
    )
    assert there == pytest.approx(beside, abs=1e-9)
    assert not abs(maxwell_garnett([1.0, -5.0], fractions=[0.5, 0.5])) < 1e14


@given(passive, passive, st.floats(0.01, 0.95))
def test_inverses_undo_the_rule(host: complex, grain: complex, f: float) -> None:
    z = maxwell_garnett([host, grain], fractions=[1 - f, f])
    if abs(grain - host) > 1e-2 * abs(host):
        assert fraction_from(z, host=host, inclusion=grain) == pytest.approx(f, rel=1e-7)
        if abs(grain) < 100 * abs(host):
            assert inclusion_from(z, host=host, fraction=f) == pytest.approx(grain, rel=1e-6)


def test_inverses_say_no_by_their_value() -> None:
    assert isinstance(fraction_from(2.8, host=1.0, inclusion=10.0), float)
    assert np.isnan(fraction_from(3.0, host=3.0, inclusion=3.0)) or np.isinf(
        fraction_from(3.0, host=3.0, inclusion=3.0)
    )
    # 9.499 at 25 vol% in a host of 3 lies above the ceiling 6.0 of separate grains (Polymers 13 (2021) 1391)
    assert inclusion_from(9.499, host=3.0, fraction=0.25) < 0.0
    assert fraction_from(2.0, host=1.0, inclusion=10.0) == pytest.approx(1 / 3, rel=1e-12)
