"""Coated grains: the homogeneous grain that a core with its shells equals, and the volumes of its layers."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from mixsim.mixing.carlson import carlson_g
from mixsim.mixing.depolarisation import Array

_NEWTON = 60  # more than the flattest grain needs


def coated_grain(
    core: ArrayLike, shell: ArrayLike, *, fraction: ArrayLike, core_factor: ArrayLike, outer_factor: ArrayLike
) -> Array:
    """Permittivity, along one axis, of the homogeneous grain that a coated one equals.

    Parameters
    ----------
    core, shell
        Relative permittivities [-]; a core of several layers is itself such a grain.
    fraction
        Volume of the core over that of the coated grain [-].
    core_factor, outer_factor
        Depolarisation factors of the core and of the coated grain along the axis [-]; 1/3 of spheres.

    Returns
    -------
    permittivity
        Relative permittivity [-] of a grain of the outer size, which has the same dipole in any surroundings.

    Notes
    -----
    With v the fraction and m = N_core − v N_outer, which is not negative for confocal surfaces::

        ε = ε_s [(1 − m − v) ε_s + (m + v) ε_c] / [(1 − m) ε_s + m ε_c]

    No term cancels, so it stands any contrast. Several layers are worked outwards from the core.
    Valid for: concentric spheres, and ellipsoids with confocal surfaces, exactly, in the quasi-static limit.

    References
    ----------
    C. F. Bohren and D. R. Huffman, "Absorption and Scattering of Light by Small Particles", Wiley (1983),
    section 5.4, solved for the equivalent permittivity.

    Examples
    --------
    A perfectly conducting core under an insulating shell:

    >>> print(f"{coated_grain(1e60j, 2.0, fraction=0.5, core_factor=1/3, outer_factor=1/3):.3f}")
    8.000+0.000j
    """
    inner, outer = np.asarray(core, dtype=complex), np.asarray(shell, dtype=complex)
    v = np.asarray(fraction, dtype=float)
    m = np.maximum(np.asarray(core_factor) - v * np.asarray(outer_factor), 0.0)  # below by rounding only
    with np.errstate(divide="ignore", invalid="ignore", over="ignore", under="ignore"):
        grain = np.asarray(
            outer * (((1.0 - m - v) * outer + (m + v) * inner) / ((1.0 - m) * outer + m * inner))
        )
    grain.imag += 0.0  # division leaves -0.0 where nothing is lost and ε′ < 0
    return grain[()]


def growth_of_sphere(diameter: ArrayLike, *, thickness: ArrayLike) -> Array:
    """Volume of a coated sphere over that of its core.

    Parameters
    ----------
    diameter
        Of the core [m].
    thickness
        Of all layers together [m].

    Returns
    -------
    growth
        (1 + 2t/d)³ [-].

    Examples
    --------
    >>> float(growth_of_sphere(2e-8, thickness=1e-8))
    8.0
    """
    growth: Array = (1.0 + 2.0 * np.asarray(thickness) / np.asarray(diameter)) ** 3
    return growth


def growth_of_ellipsoid(
    diameter: ArrayLike, *, thickness: ArrayLike, first: ArrayLike, second: ArrayLike, third: ArrayLike
) -> Array:
    """Volume of an evenly coated ellipsoid over that of its core.

    Parameters
    ----------
    diameter
        Of the sphere of the core's volume [m].
    thickness
        Of all layers together [m].
    first, second, third
        Axes of the core, in any one unit: only their ratios matter [-].

    Returns
    -------
    growth
        Ratio of the volumes [-].

    Notes
    -----
    Steiner's formula for a body grown by t on all sides, with S its surface and b its mean breadth::

        V(t) = V + S t + 2π b t² + (4π/3) t³,   S = 4π R_G(a²b², b²c², c²a²),   b = 2 R_G(a², b², c²)

    Valid for: layers of even thickness.

    References
    ----------
    B. C. Carlson, "Numerical computation of real or complex elliptic integrals",
    Numer. Algorithms 10, 13 (1995), doi:10.1007/BF02198293, for R_G.

    Examples
    --------
    >>> print(f"{growth_of_ellipsoid(2e-8, thickness=1e-8, first=1, second=1, third=1):.6f}")
    8.000000
    """
    axes = [np.asarray(axis, dtype=float) for axis in (first, second, third)]
    size = np.cbrt(axes[0] * axes[1] * axes[2])
    x, y, z = ((axis / size) ** 2 for axis in axes)
    t = 2.0 * np.asarray(thickness) / np.asarray(diameter)  # in units of the radius of that sphere
    surface, breadth = carlson_g(x * y, y * z, z * x), carlson_g(x, y, z)
    growth: Array = 1.0 + t * (3.0 * surface + t * (3.0 * breadth + t))
    return growth


def confocal_axes(
    growth: ArrayLike, *, first: ArrayLike, second: ArrayLike, third: ArrayLike
) -> tuple[Array, Array, Array]:
    """Axes of the ellipsoid, confocal with another, that holds a given number of times its volume.

    Parameters
    ----------
    growth
        Ratio of the volumes, one or more [-].
    first, second, third
        Axes of the inner one, in any one unit: only their ratios matter [-].

    Returns
    -------
    axes
        Axes of the outer one, in units of the radius of the sphere of the inner volume [-].

    Notes
    -----
    √(a² + ξ), √(b² + ξ), √(c² + ξ) with (a² + ξ)(b² + ξ)(c² + ξ) = growth², of which the left side is convex
    and grows with ξ: Newton from above, where it lies at ξ = growth^(2/3), falls to the root.
    Valid for: any axes.

    Examples
    --------
    >>> print(*(f"{axis:.4f}" for axis in confocal_axes(8.0, first=1, second=1, third=1)))
    2.0000 2.0000 2.0000
    """
    axes = [np.asarray(axis, dtype=float) for axis in (first, second, third)]
    size = np.cbrt(axes[0] * axes[1] * axes[2])
    a, b, c = ((axis / size) ** 2 for axis in axes)
    volume = np.asarray(growth, dtype=float)
    xi = np.broadcast_arrays(np.cbrt(volume * volume), a, b, c)[0].copy()
    for _ in range(_NEWTON):
        p, q, r = a + xi, b + xi, c + xi
        step = (p * q * r - volume * volume) / (p * q + q * r + r * p)
        xi = np.maximum(xi - step, 0.0)
        if not np.any(np.abs(step) > 1e-15 * (xi + np.minimum(a, np.minimum(b, c)))):
            break
    outer = np.sqrt(a + xi), np.sqrt(b + xi), np.sqrt(c + xi)
    return outer[0][()], outer[1][()], outer[2][()]
