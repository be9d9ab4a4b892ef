"""Depolarisation factors of grains: sphere and spheroid, randomly turned or aligned."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from mixsim.errors import Refusal

Array = NDArray[Any]

Depolarisation = tuple[tuple[Any, float], ...]
"""Pairs (factor, weight) of one phase, the weights adding up to one.

The mean over the pairs is the mean over the principal axes of a randomly turned grain. Aligned grains
have one pair, whose factor holds the three principal axes at the second-to-last position, shape (..., 3, 1).
"""

SPHERE: Depolarisation = ((1.0 / 3.0, 1.0),)
"""The sphere: a third along every axis."""

_SERIES_WITHIN = 0.1
# N_axis = 1/3 − Σ 2 x^k/((2k+1)(2k+3)), highest power first: 15 terms leave 0.1^16/600 at the edge
_SERIES = (*(-2.0 / ((2 * k + 1) * (2 * k + 3)) for k in range(15, 0, -1)), 1.0 / 3.0)


def spheroid_factors(aspect_ratio: ArrayLike) -> tuple[Array, Array]:
    """Depolarisation factors of a spheroid, across and along its symmetry axis.

    Parameters
    ----------
    aspect_ratio
        Symmetry axis over cross axis [-]: above one prolate (a grain of rice), below one oblate (a flake);
        0 is the disc and infinity the needle.

    Returns
    -------
    cross, axis
        Factor across and along the symmetry axis [-]; 2 cross + axis = 1.

    Raises
    ------
    Refusal
        Where an aspect ratio is negative.

    Notes
    -----
    With m the aspect ratio::

        prolate  N_axis = [m arcosh(m)/√(m² − 1) − 1] / (m² − 1)
        oblate   N_axis = [1 − m arccos(m)/√(1 − m²)] / (1 − m²)
        near 1   N_axis = 1/3 − Σ_k 2 x^k / ((2k + 1)(2k + 3)),   x = 1 − 1/m²

    The closed forms lose digits near the sphere, so the series serves there.
    Valid for: every aspect ratio from 0 to infinity, to 1e-12.

    References
    ----------
    J. A. Osborn, "Demagnetizing factors of the general ellipsoid", Phys. Rev. 67, 351 (1945).

    Examples
    --------
    >>> cross, axis = spheroid_factors(2.0)
    >>> print(f"{cross:.6f} {axis:.6f}")
    0.413218 0.173564
    """
    ratio = np.asarray(aspect_ratio, dtype=float)
    if np.any(ratio < 0.0):
        raise Refusal(f"aspect ratio {float(np.nanmin(ratio))!r}", "an aspect ratio is not negative")
    flat = ratio.ravel()
    cross, axis = np.full_like(flat, np.nan), np.full_like(flat, np.nan)

    with np.errstate(divide="ignore", over="ignore"):
        squareness = 1.0 - 1.0 / flat**2
    near = np.abs(squareness) < _SERIES_WITHIN
    axis[near] = np.polyval(_SERIES, squareness[near])
    cross[near] = 0.5 * (1.0 - axis[near])

    prolate = ~near & (flat > 1.0) & np.isfinite(flat)
    m = flat[prolate]
    inverse = 1.0 / m
    rest = (1.0 - inverse) * (1.0 + inverse)
    axis[prolate] = inverse * inverse / rest * (np.arccosh(m) / np.sqrt(rest) - 1.0)
    cross[prolate] = 0.5 * (1.0 - axis[prolate])

    oblate = ~near & (flat < 1.0)
    m = flat[oblate]
    rest = (1.0 - m) * (1.0 + m)
    turn = np.arccos(m) / np.sqrt(rest)
    axis[oblate] = (1.0 - m * turn) / rest
    # not (1 − axis)/2: a flake's cross factor is small and would keep few digits
    cross[oblate] = 0.5 * m * (turn - m) / rest

    needle = np.isposinf(flat)
    axis[needle], cross[needle] = 0.0, 0.5
    return cross.reshape(ratio.shape)[()], axis.reshape(ratio.shape)[()]


def random_spheroid(aspect_ratio: ArrayLike) -> Depolarisation:
    """Depolarisation of spheroids turned at random: two thirds across, one third along the axis.

    Parameters
    ----------
    aspect_ratio
        Symmetry axis over cross axis [-].

    Returns
    -------
    depolarisation
        Two pairs of factor and weight [-].

    Examples
    --------
    >>> [(round(float(factor), 4), round(weight, 4)) for factor, weight in random_spheroid(2.0)]
    [(0.4132, 0.6667), (0.1736, 0.3333)]
    """
    cross, axis = spheroid_factors(aspect_ratio)
    return ((cross, 2.0 / 3.0), (axis, 1.0 / 3.0))


def aligned_spheroid(aspect_ratio: ArrayLike) -> Depolarisation:
    """Depolarisation of spheroids whose symmetry axes all lie along the third principal axis.

    Parameters
    ----------
    aspect_ratio
        Symmetry axis over cross axis [-]; a batch carries a trailing frequency axis, shape (..., 1).

    Returns
    -------
    depolarisation
        One pair; its factor [-] has shape (..., 3, 1), so the phases it meets want shape (..., 1, N).

    Examples
    --------
    >>> ((factor, weight),) = aligned_spheroid(2.0)
    >>> factor.shape, weight
    ((3, 1), 1.0)
    """
    cross, axis = spheroid_factors(np.atleast_1d(np.asarray(aspect_ratio, dtype=float)))
    return ((np.stack([cross, cross, axis], axis=-2), 1.0),)


def same_length(
    phases: Sequence[ArrayLike],
    fractions: Sequence[ArrayLike],
    depolarisations: Sequence[Depolarisation] | None,
) -> Sequence[Depolarisation]:
    """Depolarisations of all phases (spheres where none are given), after counting the arguments of a rule.

    Parameters
    ----------
    phases, fractions
        Permittivity [-] and volume fraction [-] of each phase, host first.
    depolarisations
        One for each phase (that of the host is not used) [-], or None for spheres.

    Returns
    -------
    depolarisations
        One for each phase [-].

    Raises
    ------
    Refusal
        Where the three differ in number.

    Examples
    --------
    >>> len(same_length([2.0, 3.0], [0.9, 0.1], None))
    2
    """
    shapes = [SPHERE] * len(phases) if depolarisations is None else depolarisations
    if not (len(phases) == len(fractions) == len(shapes) and len(phases) > 0):
        raise Refusal(
            f"{len(phases)} phases, {len(fractions)} fractions and {len(shapes)} depolarisations",
            "a rule takes one fraction and one depolarisation for each phase, host included",
        )
    return shapes


def only_spheres(depolarisations: Sequence[Depolarisation], *, rule: str, dimensions: int = 3) -> None:
    """Refuse grains that are not spheres (in two dimensions: round fibres), for a rule that knows no others.

    Parameters
    ----------
    depolarisations
        One for each phase [-].
    rule
        Name of the rule, for the message.
    dimensions
        3 for spheres, 2 for fibres seen across [-].

    Raises
    ------
    Refusal
        Where a factor is neither that of the sphere nor one over the dimensions.

    Examples
    --------
    >>> only_spheres([SPHERE, SPHERE], rule="bruggeman")
    """
    for depolarisation in depolarisations:
        if depolarisation is SPHERE:
            continue
        for factor, _ in depolarisation:
            off = np.minimum(np.abs(factor - 1.0 / 3.0), np.abs(factor - 1.0 / dimensions))
            if np.any(off > 1e-9):
                raise Refusal(f"grains that are not spheres under {rule}", f"{rule} takes spheres only")
