"""Coated grains against the field solved layer by layer, and layers against quadrature."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import quad
from scipy.special import elliprf, elliprg

from mixsim.mixing import (
    coated_grain,
    confocal_axes,
    ellipsoid_factors,
    growth_of_ellipsoid,
    growth_of_sphere,
    maxwell_garnett,
)
from mixsim.mixing.carlson import carlson_f, carlson_g

passive = st.builds(complex, st.floats(-50, 50), st.floats(1e-3, 50))
AXES = {"first": 3.0, "second": 2.0, "third": 1.0}


def onion(layers: list[complex], radii: list[float], around: complex) -> complex:
    """Equivalent permittivity of a layered sphere: A r + B/r² in each layer, all conditions at once."""
    count = len(layers)
    matrix, right = np.zeros((2 * count, 2 * count), dtype=complex), np.zeros(2 * count, dtype=complex)
    # unknowns A_0, (A_j, B_j) of the shells, and the dipole B outside, for a field of one
    for j, radius in enumerate(radii):
        inner, outer = layers[j], layers[j + 1] if j + 1 < count else around
        for row, (grows, falls) in ((2 * j, (radius, radius**-2)), (2 * j + 1, (1.0, -2.0 * radius**-3))):
            left, beyond = (1.0, 1.0) if row % 2 == 0 else (inner, outer)
            matrix[row, 0 if j == 0 else 2 * j - 1] += left * grows
            if j:
                matrix[row, 2 * j] += left * falls
            if j + 1 < count:
                matrix[row, 2 * j + 1] -= beyond * grows
                matrix[row, 2 * j + 2] -= beyond * falls
            else:
                matrix[row, 2 * count - 1] -= beyond * falls
                right[row] += beyond * grows
    dipole = -np.linalg.solve(matrix, right)[-1] / radii[-1] ** 3
    return around * (1 + 2 * dipole) / (1 - dipole)


@given(st.lists(st.tuples(passive, st.floats(0.05, 2.0)), min_size=2, max_size=5))
def test_layered_spheres_are_the_solved_field_in_any_surroundings(
    given_: list[tuple[complex, float]],
) -> None:
    layers, radii = [e for e, _ in given_], list(np.cumsum([t for _, t in given_]))
    grain = layers[0]
    for shell, inner, outer in zip(layers[1:], radii, radii[1:], strict=False):
        v = (inner / outer) ** 3
        grain = coated_grain(grain, shell, fraction=v, core_factor=1 / 3, outer_factor=1 / 3)
    assert grain.imag > 0.0
    for around in (1.0, 2.25 + 0.1j):
        assert grain == pytest.approx(onion(layers, radii, around), rel=1e-7)


@given(passive, passive, st.floats(0.01, 1.0))
def test_a_coated_sphere_is_maxwell_garnett_of_its_own_volume(
    core: complex, shell: complex, v: float
) -> None:
    grain = coated_grain(core, shell, fraction=v, core_factor=1 / 3, outer_factor=1 / 3)
    assert grain == pytest.approx(maxwell_garnett([shell, core], fractions=[1 - v, v]), rel=1e-10)


@given(core=passive, shell=passive, around=passive, growth=st.floats(1.001, 50))
def test_confocal_ellipsoids_have_the_published_polarisability(
    core: complex, shell: complex, around: complex, growth: float
) -> None:
    """Bohren and Huffman, equation 5.35, as printed: α/V of a coated ellipsoid in a surrounding."""
    v = 1 / growth
    for n1, n2 in zip(
        ellipsoid_factors(3, 2, 1), ellipsoid_factors(*confocal_axes(growth, **AXES)), strict=True
    ):
        grain = coated_grain(core, shell, fraction=v, core_factor=n1, outer_factor=n2)
        inner = shell + (core - shell) * (n1 - v * n2)
        upper = (shell - around) * inner + v * shell * (core - shell)
        lower = inner * (around + (shell - around) * n2) + v * n2 * shell * (core - shell)
        alone = (grain - around) / (around + n2 * (grain - around))
        assert alone == pytest.approx(upper / lower, rel=1e-6)
        assert grain.imag > 0.0


def test_one_layer_said_as_two_and_a_layer_of_the_core() -> None:
    metal, glass = -12.0 + 1.2j, 2.1
    whole = ellipsoid_factors(*confocal_axes(6.0, **AXES))
    half = ellipsoid_factors(*confocal_axes(2.5, **AXES))
    for n0, n1, n2 in zip(ellipsoid_factors(3, 2, 1), half, whole, strict=True):
        at_once = coated_grain(metal, glass, fraction=1 / 6, core_factor=n0, outer_factor=n2)
        inner = coated_grain(metal, glass, fraction=1 / 2.5, core_factor=n0, outer_factor=n1)
        assert coated_grain(inner, glass, fraction=2.5 / 6, core_factor=n1, outer_factor=n2) == pytest.approx(
            at_once, rel=1e-13
        )
        same = coated_grain(metal, metal, fraction=1 / 6, core_factor=n0, outer_factor=n2)
        assert same == pytest.approx(metal, rel=1e-14)


def test_any_contrast_keeps_its_parts() -> None:
    """A conductor in an insulator, i 1e60 + 5 in 3, and the other way round: parts of either kind exact."""
    v, m = 0.4, 0.6 / 3
    core = coated_grain(5 + 1e60j, 3.0, fraction=v, core_factor=1 / 3, outer_factor=1 / 3)
    assert core.real == pytest.approx(3 * (m + v) / m, rel=1e-14) and abs(core.imag) < 1e-50
    shell = coated_grain(3.0, 5 + 1e60j, fraction=v, core_factor=1 / 3, outer_factor=1 / 3)
    sigma = (1 - m - v) / (1 - m)
    assert shell.imag == pytest.approx(1e60 * sigma, rel=1e-14)
    assert shell.real == pytest.approx(5 * sigma + 3 * ((m + v) / (1 - m) - (1 - m - v) * m / (1 - m) ** 2))


@given(st.floats(-3, 3), st.floats(-3, 3), st.floats(1e-6, 1e3))
def test_confocal_surfaces(first: float, second: float, more: float) -> None:
    axes = np.array([10.0**first, 10.0**second, 1.0])
    inner = axes / np.cbrt(axes.prod())
    outer = np.array(confocal_axes(1.0 + more, first=axes[0], second=axes[1], third=axes[2]))
    assert np.prod(outer) == pytest.approx(1.0 + more, rel=1e-12)
    grown = outer**2 - inner**2
    np.testing.assert_allclose(grown, grown.mean(), rtol=1e-6, atol=1e-13 * inner.max() ** 2)


@pytest.mark.parametrize("m", [0.02, 0.5, 1.0, 3.0, 200.0])
def test_even_layers_on_spheroids_by_closed_forms_and_quadrature(m: float) -> None:
    """Surface by its closed form, mean breadth by its integral over directions."""
    e = np.sqrt(abs(1 - 1 / m**2)) if m > 1 else np.sqrt(1 - m**2)
    surface = 2 * np.pi * (1 + (1.0 if m == 1 else m / e * np.arcsin(e)))
    if m < 1:
        surface = 2 * np.pi * (1 + m**2 / e * np.arctanh(e))
    breadth = 2 * quad(lambda u: np.sqrt(1 - u * u + (m * u) ** 2), 0, 1)[0]
    volume = 4 / 3 * np.pi * m
    size = np.cbrt(m)
    for t in (1e-6, 0.1, 3.0):
        expected = 1 + (surface * t + 2 * np.pi * breadth * t**2 + 4 / 3 * np.pi * t**3) / volume
        found = growth_of_ellipsoid(2 * size, thickness=t, first=1.0, second=1.0, third=m)
        assert found - 1 == pytest.approx(expected - 1, rel=1e-8)
        if m == 1.0:
            assert found == pytest.approx(growth_of_sphere(2.0, thickness=t), rel=1e-14)


def test_integrals_are_those_of_a_library() -> None:
    x, y, z = 10 ** np.random.default_rng(4).uniform(-8, 8, (3, 500))
    np.testing.assert_allclose(carlson_f(x, y, z), elliprf(x, y, z), rtol=3e-15)
    np.testing.assert_allclose(carlson_g(x, y, z), elliprg(x, y, z), rtol=3e-15)
