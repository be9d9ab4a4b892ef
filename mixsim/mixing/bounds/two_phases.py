"""Regions that hold the complex permittivity of a mixture of any two phases: bounds of Bergman and Milton.

All of them are said in one number y for each mixture, in which everything but the loading is left out::

    ε = (ε₁ε₂ + y <ε>)/(t + y),   <ε> = f₁ε₁ + f₂ε₂,   t = f₁ε₂ + f₂ε₁

Without knowledge of the geometry y lies in the wedge between the directions of ε₁ and ε₂. Of an isotropic
mixture in d dimensions y/(d − 1) lies where the permittivity of some mixture of the two would, of unknown
loading; and with the three-point parameter ζ, where that of loading ζ would.
"""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from mixsim.mixing.bounds.lens import Array, Lens

_OPPOSITE = 1e-12  # rad from opposite directions, where nothing is bounded any more


def two_phase_region(phases: tuple[ArrayLike, ArrayLike], *, fraction: ArrayLike) -> Lens:
    """Region that holds the permittivity of two phases in any geometry, along a principal axis.

    Parameters
    ----------
    phases
        Relative permittivity of each phase, complex [-].
    fraction
        Volume fraction of the second phase [-].

    Returns
    -------
    lens
        Between layers along the field and layers across it; NaN where the phases point in opposite
        directions (a loss-free metal in a loss-free dielectric), which leaves nothing bounded.

    Notes
    -----
    Two arcs join the means f₁ε₁ + f₂ε₂ and 1/(f₁/ε₁ + f₂/ε₂); extended, one passes through ε₁ and the
    other through ε₂. Without loss they shrink to the interval of `wiener`.
    Valid for: any two phases that do not point in opposite directions; grains far below the wavelength.

    References
    ----------
    D. J. Bergman, "Exactly solvable microscopic geometries and rigorous bounds for the complex dielectric
    constant of a two-component composite material", Phys. Rev. Lett. 44, 1285 (1980); G. W. Milton, "Bounds
    on the complex permittivity of a two-component composite material", J. Appl. Phys. 52, 5286 (1981).
    From memory.

    Examples
    --------
    >>> lens = two_phase_region((1.0, 4.0 + 1.0j), fraction=0.5)
    >>> print(f"{lens.first:.4f} {lens.second:.4f}")
    2.5000+0.5000j 1.6154+0.0769j
    """
    first, second, share = _phases(phases, fraction)
    swapped = (1.0 - share) * second + share * first
    with np.errstate(divide="ignore", invalid="ignore"):
        return Lens(
            (1.0 - share) * first + share * second,
            first * second / swapped,
            (_direction(swapped / first), _direction(swapped / second)),
        )


def isotropic_region(
    phases: tuple[ArrayLike, ArrayLike], *, fraction: ArrayLike, dimensions: int = 3
) -> Lens:
    """Region that holds the permittivity of two phases, where the mixture is the same in every direction.

    Parameters
    ----------
    phases
        Relative permittivity of each phase, complex [-].
    fraction
        Volume fraction of the second phase [-].
    dimensions
        3, or 2 for aligned fibres with the field across them [-].

    Returns
    -------
    lens
        Its ends are coated spheres, Maxwell Garnett with the first and with the second phase as host; NaN as
        in `two_phase_region`.

    Notes
    -----
    One arc, with γ from f₂/d to (f₂ + d − 1)/d::

        ε = <ε> − f₁f₂ (ε₁ − ε₂)² / (d [γε₁ + (1 − γ)ε₂])

    The other, with γ from (d − 1)f₂/d to 1 − (d − 1)f₁/d::

        1/ε = <1/ε> − (d − 1) f₁f₂ (ε₁ − ε₂)² / (d ε₁ε₂ [γε₂ + (1 − γ)ε₁])

    Without loss they shrink to the interval of `hashin_shtrikman`.
    Valid for: any two phases that do not point in opposite directions; statistically isotropic. Of one of
    the arcs a tighter, attained form is known in three dimensions (C. Kern, O. D. Miller, G. W. Milton,
    Phys. Rev. Applied 14, 054068 (2020)); the arcs here hold all the same.

    References
    ----------
    G. W. Milton, "Bounds on the complex dielectric constant of a composite material", Appl. Phys. Lett. 37,
    300 (1980); D. J. Bergman, Phys. Rev. Lett. 44, 1285 (1980). From memory.

    Examples
    --------
    >>> lens = isotropic_region((2.0 + 0.01j, 5.0 + 2.0j), fraction=0.2)
    >>> print(f"{lens.first:.6f}")
    2.465116+0.206617j
    """
    first, second, share = _phases(phases, fraction)
    rest = dimensions - 1.0
    with np.errstate(divide="ignore", invalid="ignore"):
        bends = np.ones_like(first), _direction(first / second)
    return _from_y(Lens(rest * first, rest * second, bends), first, second, share)


def three_point_region(
    phases: tuple[ArrayLike, ArrayLike],
    *,
    fraction: ArrayLike,
    three_point_parameter: ArrayLike,
    dimensions: int = 3,
) -> Lens:
    """Region that holds the permittivity of two phases in an isotropic arrangement whose triplets are known.

    Parameters
    ----------
    phases
        Relative permittivity of each phase, complex [-].
    fraction
        Volume fraction of the second phase [-].
    three_point_parameter
        ζ₂ of the second phase, from the correlations of three points, 0 to 1 [-]; `hard_spheres` gives one.
    dimensions
        3, or 2 for aligned fibres with the field across them [-].

    Returns
    -------
    lens
        Within that of `isotropic_region`; NaN as in `two_phase_region`.

    Notes
    -----
    y/(d − 1) lies where `two_phase_region` would put a mixture of loading ζ₂. Without loss the ends are
    those of Beran's bounds::

        ε = <ε> − f₁f₂ (ε₁ − ε₂)² / (t + (d − 1) <ε>_ζ),   and the same with 1/<1/ε>_ζ

    Valid for: any two phases that do not point in opposite directions; statistically isotropic.

    References
    ----------
    M. Beran, Nuovo Cimento 38, 771 (1965); G. W. Milton, J. Appl. Phys. 52, 5294 (1981). From memory.

    Examples
    --------
    >>> lens = three_point_region((1.0, 10.0), fraction=0.3, three_point_parameter=hard_spheres(0.3))
    >>> print(f"{lens.second.real:.4f} {lens.first.real:.4f}")
    1.8928 2.0584
    """
    first, second, share = _phases(phases, fraction)
    inner = two_phase_region((first, second), fraction=three_point_parameter)
    rest = dimensions - 1.0
    return _from_y(Lens(rest * inner.first, rest * inner.second, inner.bends), first, second, share)


def hard_spheres(fraction: ArrayLike) -> Array:
    """Three-point parameter of equal hard spheres at random.

    Parameters
    ----------
    fraction
        Volume fraction of the spheres [-].

    Returns
    -------
    three_point_parameter
        ζ₂ of the spheres [-]; NaN beyond 0.6.

    Notes
    -----
    ζ₂ = 0.21068 f − 0.04693 f². Valid for: f up to 0.5 virtually exactly; to 0.6 as an extrapolation.

    References
    ----------
    C. A. Miller, S. Torquato, "Effective conductivity of hard-sphere dispersions", J. Appl. Phys. 68, 5486
    (1990). Coefficients from memory.

    Examples
    --------
    >>> print(f"{hard_spheres(0.3):.5f}")
    0.05898
    """
    f = np.asarray(fraction, dtype=float)
    return np.where((f >= 0.0) & (f <= 0.6), 0.21068 * f - 0.04693 * f**2, np.nan)[()]


def hard_discs(fraction: ArrayLike) -> Array:
    """Three-point parameter of equal hard aligned fibres at random, with the field across them.

    Parameters
    ----------
    fraction
        Volume fraction of the fibres [-].

    Returns
    -------
    three_point_parameter
        ζ₂ of the fibres [-]; NaN beyond 0.7.

    Notes
    -----
    ζ₂ = f/3 − 0.05707 f². Valid for: f up to about 0.7.

    References
    ----------
    S. Torquato, F. Lado, "Bounds on the conductivity of a random array of cylinders", Proc. R. Soc. Lond. A
    417, 59 (1988). Coefficients from memory.

    Examples
    --------
    >>> print(f"{hard_discs(0.3):.5f}")
    0.09486
    """
    f = np.asarray(fraction, dtype=float)
    return np.where((f >= 0.0) & (f <= 0.7), f / 3.0 - 0.05707 * f**2, np.nan)[()]


def _phases(phases: tuple[ArrayLike, ArrayLike], fraction: ArrayLike) -> tuple[Any, Any, Any]:
    """Both phases and the loading in one shape; NaN where nothing is bounded."""
    first, second, share = np.broadcast_arrays(*phases, fraction)
    first, second = first.astype(complex), second.astype(complex)
    turn = np.abs(np.angle(first * np.conj(second)))
    lost = (turn > np.pi - _OPPOSITE) | (first == 0.0) | (second == 0.0)
    return np.where(lost, np.nan, first), np.where(lost, np.nan, second), share


def _direction(value: Array) -> Array:
    return np.asarray(value / np.abs(value))


def _from_y(lens: Lens, first: Array, second: Array, share: Array) -> Lens:
    """The permittivities whose y lies in a lens: the map is a homography, so that arcs stay arcs."""
    mean = (1.0 - share) * first + share * second
    swapped = (1.0 - share) * second + share * first
    with np.errstate(divide="ignore", invalid="ignore"):
        ends = [(first * second + y * mean) / (swapped + y) for y in (lens.first, lens.second)]
        turned = _direction((lens.second + swapped) / (lens.first + swapped))
    return Lens(ends[0], ends[1], (turned * lens.bends[0], turned * lens.bends[1]))
