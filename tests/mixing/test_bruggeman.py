"""Bruggeman: textbook numbers, the branch against iteration and all roots, percolation, loss-free metals."""

from __future__ import annotations

import mpmath
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from mixsim.errors import Refusal
from mixsim.mixing import SPHERE, random_spheroid
from mixsim.mixing.bruggeman import bruggeman, fraction_from, inclusion_from

fraction = st.floats(0.0, 1.0)
passive = st.builds(complex, st.floats(-50, 50), st.floats(1e-3, 50))
dims = st.sampled_from([2, 3])


def two(host: complex, grain: complex, f: float, dimensions: int = 3) -> complex:
    return bruggeman([host, grain], fractions=[1 - f, f], dimensions=dimensions)


def split(host: complex, grain: complex, f: float, dimensions: int = 3) -> complex:
    """The same mixture said as three phases: it takes the general path."""
    return bruggeman([host, grain, grain], fractions=[1 - f, f / 4, 3 * f / 4], dimensions=dimensions)


def parts_of(weights: list[float]) -> list[float]:
    return [weight / sum(weights) for weight in weights]


@pytest.mark.parametrize("rule", [two, split])
@pytest.mark.parametrize(
    ("f", "grain", "host", "expected"),
    [
        pytest.param(*row, id=f"textbook formula, computed: f={row[0]} {row[1]} in {row[2]}")
        for row in [
            (0.1, 10, 1, 1.274159), (0.3, 10, 1, 2.261208), (0.5, 10, 1, 4.0), (0.3, 80, 3, 9.842288),
            (0.2, 5 + 2j, 2 + 0.01j, 2.474736 + 0.231330j), (0.1, -10 + 1j, 2.25, 2.750934 + 1.814682j),
            (0.34, 1, 1e-12, 0.01), (0.40, 1, 1e-12, 0.1), (0.30, 1, 1e-12, 1e-11),
            (0.1, 1e12, 1, 1.428571), (0.2, 1e12, 1, 2.5), (0.3, 1e12, 1, 10.0), (1 / 3, 1e6, 1, 707.3569),
        ]
    ],
)  # fmt: skip
def test_textbook_values(rule: object, f: float, grain: complex, host: complex, expected: complex) -> None:
    assert rule(host, grain, f) == pytest.approx(expected, abs=1e-6, rel=1e-6)  # type: ignore[operator]


def test_dilute_slope_second_order_and_weak_contrast() -> None:
    f = 1e-6
    assert (two(1.0, 10.0, f).real - 1) / f == pytest.approx(2.25, abs=1e-4)
    f = 1e-4
    assert (two(1.0, 10.0, f).real - 1 - 2.25 * f) / f**2 == pytest.approx(4.21875, rel=2e-3)
    f, contrast = 0.3, 1e-3
    mean = 1 + f * contrast
    for dimensions, coefficient in ((3, 0.33329), (2, 0.49990)):
        dip = (mean - two(1.0, 1.0 + contrast, f, dimensions).real) * mean / (f * (1 - f) * contrast**2)
        assert dip == pytest.approx(coefficient, abs=1e-4)


@given(passive, passive, fraction)
def test_two_dimensions_are_reciprocal_as_keller_found(a: complex, b: complex, f: float) -> None:
    product = two(a, b, f, 2) * two(b, a, f, 2)
    assert product == pytest.approx(a * b, rel=1e-9)


def test_checkerboard_of_keller_and_dykhne() -> None:
    assert two(1.0, 10.0, 0.5, 2) == pytest.approx(np.sqrt(10.0), rel=1e-15)
    assert split(1.0, 10.0, 0.5, 2) == pytest.approx(np.sqrt(10.0), rel=1e-14)


@given(passive, passive, fraction, dims)
def test_passive_with_the_right_ends_and_scaling(a: complex, b: complex, f: float, d: int) -> None:
    for rule in (two, split):
        assert rule(a, b, f, d).imag >= 0.0
        assert rule(a, b, 0.0, d) == pytest.approx(a, rel=1e-12)
        assert rule(a, b, 1.0, d) == pytest.approx(b, rel=1e-12)
        assert rule(a, a, f, d) == pytest.approx(a, rel=1e-12)
        assert rule(7 * a, 7 * b, f, d) == pytest.approx(7 * rule(a, b, f, d), rel=1e-6)
    assert two(a.conjugate(), b.conjugate(), f, d) == pytest.approx(two(a, b, f, d).conjugate(), rel=1e-12)


def iterated(phases: list[complex], fractions: list[float], dimensions: int) -> complex:
    """Denjoy and Wolff: from anywhere inside the upper half-plane the plain iteration finds the root."""
    with mpmath.workdps(25):
        z = mpmath.mpc(0, 1)
        for _ in range(4000):
            last = z
            total = sum(
                f / (mpmath.mpc(e) + (dimensions - 1) * z) for f, e in zip(fractions, phases, strict=True)
            )
            z = 1 / (dimensions * total)
            if abs(z - last) < 1e-19 * abs(z):
                break
        return complex(z)


METAL, RESONANT, GLASS, WATER = -12.0 + 1.2j, 2 + 9 / (4 - 3.9 - 0.3j), 2.25 + 1e-3j, 60 + 40j


@pytest.mark.parametrize("f", [0.15, 0.33, 0.5, 0.8])
@pytest.mark.parametrize("dimensions", [2, 3])
@pytest.mark.parametrize(
    "phases",
    [
        pytest.param([GLASS, METAL], id="metal"),
        pytest.param([METAL, RESONANT], id="metal, resonance"),
        pytest.param([-1.0 + 2j, -3.0 + 0.4j], id="two metals"),
        pytest.param([GLASS, METAL, RESONANT], id="three"),
        pytest.param([WATER, METAL, GLASS, -4 + 0.5j], id="four"),
    ],
)
def test_branch_is_where_iteration_from_inside_ends(phases: list[complex], f: float, dimensions: int) -> None:
    fractions = [1 - f, *[f / (len(phases) - 1)] * (len(phases) - 1)]
    z = bruggeman(phases, fractions=fractions, dimensions=dimensions)
    assert z == pytest.approx(iterated(phases, fractions, dimensions), rel=1e-11)


@pytest.mark.parametrize("d", [2, 3])
def test_proof_of_the_branch_holds_in_numbers(d: int) -> None:
    rng = np.random.default_rng(11)
    f1, (e1, e2) = (
        rng.random(20000),
        10 ** rng.uniform(-3, 3, (2, 20000)) * np.exp(1j * rng.uniform(0, np.pi, (2, 20000))),
    )
    f2 = 1 - f1
    b, m = (d * f1 - 1) * e1 + (d * f2 - 1) * e2, (1 + (d - 2) * f1) * e1 + (1 + (d - 2) * f2) * e2
    square = b * b + 4 * (d - 1) * e1 * e2
    np.testing.assert_allclose(
        m * m - square,
        4 * (d - 1) * f1 * f2 * (e1 - e2) ** 2,
        rtol=0,
        atol=1e-12 * np.abs(e1 - e2).max() ** 2,
    )
    z = bruggeman([e1, e2], fractions=[f1, f2], dimensions=d)
    s = 2 * (d - 1) * z - b
    assert np.all((s / m).real > 0) and np.all(z.imag > 0)
    slope = d * (d - 1) * z * z * (f1 / (e1 + (d - 1) * z) ** 2 + f2 / (e2 + (d - 1) * z) ** 2)
    np.testing.assert_allclose(1 - slope, 2 / d * s / (m + s), rtol=1e-5)
    assert np.all(np.abs(slope) < 1)


def loop_roots(phases: list[complex], fractions: list[float]) -> complex:
    """Naive: the polynomial Σ f_k (ε_k − z) Π (ε_j + 2z), all its roots, the one inside the half-plane."""
    polynomial = np.zeros(1, dtype=complex)
    for k, f in enumerate(fractions):
        product = np.array([-f, f * phases[k]])
        for j, other in enumerate(phases):
            if j != k:
                product = np.polymul(product, [2.0, other])
        polynomial = np.polyadd(polynomial, product)
    roots = np.roots(polynomial)
    return roots[np.argmax(roots.imag)]


@given(st.lists(passive, min_size=3, max_size=5), st.lists(st.floats(0.02, 1), min_size=5, max_size=5))
def test_many_phases_are_the_root_inside_the_half_plane(phases: list[complex], weights: list[float]) -> None:
    fractions = parts_of(weights[: len(phases)])
    z = bruggeman(phases, fractions=fractions)
    residual = sum(f * (e - z) / (e + 2 * z) for f, e in zip(fractions, phases, strict=True))
    assert z.imag > 0 and abs(residual) < 1e-9
    # where the polynomial itself is well enough conditioned to tell
    naive = loop_roots(phases, fractions)
    if naive.imag > 1e-3:
        assert z == pytest.approx(naive, rel=1e-5)


def random_pairs(kind: str, count: int = 4000) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    rng = np.random.default_rng(5)
    signed = rng.normal(size=(2, count)) * 10
    loss = 1j * 10 ** rng.uniform(-12, 0, (2, count))
    turn = np.exp(1j * rng.uniform(0, np.pi, (2, count)))
    e = {
        "dielectric": 10 ** rng.uniform(-2, 4, (2, count)) + 0j,
        "lossy": 10 ** rng.uniform(-2, 4, (2, count)) * turn,
        "loss-free metal": signed + 0j,
        "faint loss": signed + loss,
        "contrast": 10 ** rng.uniform(-20, 20, (2, count)) * turn,
    }[kind]
    return e[0], e[1], rng.random(count)


@pytest.mark.parametrize("kind", ["dielectric", "lossy", "loss-free metal", "faint loss", "contrast"])
def test_general_path_agrees_with_the_closed_form(kind: str) -> None:
    a, b, f = random_pairs(kind)
    closed, general = two(a, b, f), split(a, b, f)
    np.testing.assert_allclose(general, closed, rtol=1e-9)
    assert np.all(closed.imag >= -1e-11 * np.abs(closed))
    if kind == "dielectric":
        assert np.all(closed.imag == 0.0) and np.all(general.imag == 0.0)


@pytest.mark.parametrize("f", [0.05, 0.2, 0.5, 0.7, 0.95])
@pytest.mark.parametrize("metal", [-0.01, -0.5, -2.0, -4.5, -30.0, -1e6])
@pytest.mark.parametrize("rule", [two, split])
def test_loss_free_metal_is_the_limit_of_vanishing_loss(rule: object, metal: float, f: float) -> None:
    z = rule(2.25, metal, f)  # type: ignore[operator]
    lossy = iterated([2.25, metal * (1 - 1e-4j)], [1 - f, f], 3)
    assert z == pytest.approx(lossy, rel=5e-3, abs=1e-6)
    assert z.imag >= 0.0
    assert rule(2.25 + 0j, complex(metal, -0.0), f) == z  # type: ignore[operator]
    faint = rule(2.25, metal * (1 - 1e-13j), f)  # type: ignore[operator]
    assert faint == pytest.approx(z, rel=1e-9)


def test_three_loss_free_phases_with_a_metal_trap_are_the_limit_too() -> None:
    rng = np.random.default_rng(2)
    phases = rng.normal(size=(4, 1500)) * 8
    weights = rng.random((4, 1500)) + 0.02
    fractions = list(weights / weights.sum(axis=0))
    z = bruggeman(list(phases), fractions=fractions)
    faint = bruggeman(list(phases + 1e-9j), fractions=fractions)
    assert np.all(z.imag >= 0.0) and np.all(np.isfinite(z))
    assert (
        np.mean(np.abs(z - faint) > 1e-6 * np.abs(z)) < 0.005
    )  # a few at band edges, as the square root of the loss
    np.testing.assert_allclose(faint, z, rtol=2e-3)
    real = z.imag == 0.0
    slope = 6 * z**2 * sum(f / (e + 2 * z) ** 2 for f, e in zip(fractions, phases, strict=True))
    assert 0.2 < real.mean() < 0.95
    assert np.all(slope[real].real < 1.0) and np.all(np.abs(slope) <= 1 + 1e-9)


@pytest.mark.parametrize("rule", [two, split])
@pytest.mark.parametrize("f", [0.05, 0.3, 0.34, 0.4, 0.9])
def test_tiny_parts_beside_a_conducting_phase_keep_their_digits(rule: object, f: float) -> None:
    """The static limit: insulator 3e-60, conductor i − 5e-60; above threshold Re z is a derivative."""
    z = rule(3e-60, 1j - 5e-60, f)  # type: ignore[operator]
    if f < 1 / 3:
        assert z.real == pytest.approx(3e-60 / (1 - 3 * f), rel=1e-12) and abs(z.imag) < 1e-100
    else:
        # z² · 2 − b z − ε₁ε₂ = 0 to first order about z = i(3f − 1)/2
        sigma = (3 * f - 1) / 2
        slope = ((2 - 3 * f) * 3 * sigma + (3 * f - 1) * -5 * sigma + 3) / (4 * sigma - (3 * f - 1))
        assert z.imag == pytest.approx(sigma, rel=1e-12)
        assert z.real == pytest.approx(1e-60 * slope, rel=1e-9)


@pytest.mark.parametrize("rule", [two, split])
def test_contrast_of_forty_decades(rule: object) -> None:
    for a, b in ((1.0, 1e40), (1 + 0.1j, -1e40 + 1e30j), (1e-20, 1e20j)):
        below, above = (rule(a, b, f) for f in (0.2, 0.6))  # type: ignore[operator]
        assert below == pytest.approx(a * 2.5, rel=1e-12)
        assert above == pytest.approx(b * 0.4, rel=1e-12)


@pytest.mark.parametrize("scale", [1e-170, 1e-100, 1e100, 1e170])
def test_scale_of_both_phases_does_not_matter(scale: float) -> None:
    f = np.array([0.1, 0.4, 0.8])
    for a, b in ((1.0, 1j), (2.25, -4.0), (3.0, 1e-60)):
        together = two(np.array([a, scale * a]), np.array([b, scale * b]), f[:, None])
        np.testing.assert_allclose(together[:, 1] / scale, together[:, 0], rtol=1e-12)


@pytest.mark.parametrize("other", [1.0, 2j, -4.0, -4 + 1j])
def test_a_phase_of_zero_blocks_below_the_threshold(other: complex) -> None:
    for void in (0.0, 5e-324):
        below, above = split(void, other, 0.2), split(void, other, 0.6)
        assert below == 0.0
        assert above == pytest.approx(0.4 * other, rel=1e-12)
    assert split(0.0, 0.0, 0.4) == 0.0
    assert bruggeman([0.0, 1.0, 3.0], fractions=[0.8, 0.1, 0.1]) == 0.0


def test_two_insulators_beside_a_conductor_as_beside_a_perfect_one() -> None:
    f = [0.5, 0.3, 0.2]
    static = bruggeman([3e-60, 5e-60, 1j - 4e-60], fractions=f)
    assert static.real * 1e60 == pytest.approx(bruggeman([3.0, 5.0, 1e40], fractions=f).real, rel=1e-12)
    assert abs(static.imag) < 1e-100


def test_very_threshold_of_a_huge_contrast_stays_between_the_bounds() -> None:
    for f, d in (([0.3, 0.5, 0.2], 2), ([1 / 3, 1 / 3, 1 / 3], 3)):
        for contrast in (1e12, 1e40, 1e100):
            z = bruggeman([2.25, contrast, 3.0], fractions=f, dimensions=d)
            assert z.imag == 0.0 and 2.25 < z.real < contrast


def test_absent_phases_do_not_matter() -> None:
    expected = two(2.25, -4.0, 0.3)
    for absent in (-1.0, 1e30, 0.0, 5j):
        z = bruggeman([2.25, absent, -4.0], fractions=[0.7, 0.0, 0.3])
        assert z == pytest.approx(expected, rel=1e-12)
    assert bruggeman([2.0, -4.0, 3.0], fractions=[0.5, 0.0, 0.5]).imag == 0.0


def test_slightly_active_measured_phases_still_answer() -> None:
    noisy = [2.25 - 1e-4j, 6.0 - 2e-3j, 9.0 + 1e-3j]
    z = bruggeman(noisy, fractions=[0.5, 0.3, 0.2])
    assert abs(z.imag) < 2e-3
    assert bruggeman([noisy[0], noisy[1]], fractions=[0.5, 0.5]).imag == pytest.approx(-9.6e-4, abs=3e-4)


@settings(max_examples=60)
@given(passive, passive, st.floats(0.02, 0.98), dims)
def test_inverses_undo_the_rule(a: complex, b: complex, f: float, d: int) -> None:
    z = two(a, b, f, d)
    if 0.01 < abs((a - b) / a) < 1e3:
        assert fraction_from(z, host=a, inclusion=b, dimensions=d) == pytest.approx(f, rel=1e-6)
        assert inclusion_from(z, host=a, fraction=f, dimensions=d) == pytest.approx(b, rel=1e-4)


def test_inverses_of_real_readings_are_real() -> None:
    assert isinstance(fraction_from(2.0, host=1.0, inclusion=10.0), float)
    assert fraction_from(2.0, host=1.0, inclusion=10.0) == pytest.approx(0.2593, abs=5e-5)
    assert not np.isfinite(fraction_from(3.0, host=3.0, inclusion=3.0))


def test_refusals() -> None:
    with pytest.raises(Refusal, match="bruggeman takes spheres only"):
        shapes = [SPHERE, random_spheroid(2.0)]
        bruggeman([1.0, 2.0], fractions=[0.5, 0.5], depolarisations=shapes, dimensions=2)
    with pytest.raises(Refusal, match="4 dimensions"):
        bruggeman([1.0, 2.0], fractions=[0.5, 0.5], dimensions=4)
