"""How grains lie: turned at random, aligned, in a plane, or in between; and grains of many shapes at once."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from mixsim.mixing.depolarisation import Depolarisation, Factors, spheroid_factors

_REACH, _STEP = 5.0, 0.25  # standard deviations; what lies beyond holds 6e-7 of the volume


def random_grains(factors: Factors) -> Depolarisation:
    """Depolarisation of grains turned at random: a third along each of their axes.

    Parameters
    ----------
    factors
        Depolarisation factors along the axes of one grain [-].

    Returns
    -------
    depolarisation
        Pairs of factor and weight [-]; two where the first two factors are one and the same.

    Examples
    --------
    >>> random_grains((0.25, 0.25, 0.5))
    ((0.25, 0.6666666666666666), (0.5, 0.3333333333333333))
    """
    first, second, third = factors
    if first is second:
        return ((first, 2.0 / 3.0), (third, 1.0 / 3.0))
    return ((first, 1.0 / 3.0), (second, 1.0 / 3.0), (third, 1.0 / 3.0))


def aligned_grains(factors: Factors) -> Depolarisation:
    """Depolarisation of grains whose axes lie along the principal axes of the mixture.

    Parameters
    ----------
    factors
        Depolarisation factors along the axes of one grain [-]; a batch carries a trailing frequency axis,
        shape (..., 1).

    Returns
    -------
    depolarisation
        One pair; its factor [-] has shape (..., 3, 1), so the phases it meets want shape (..., 1, N).

    Examples
    --------
    >>> ((factor, weight),) = aligned_grains((0.25, 0.25, 0.5))
    >>> factor.shape, weight
    ((3, 1), 1.0)
    """
    return ((_principal(*factors), 1.0),)


def in_plane_grains(factors: Factors) -> Depolarisation:
    """Depolarisation of grains turned at random about their third axis, which all have in common.

    Parameters
    ----------
    factors
        Depolarisation factors along the axes of one grain [-], the third being that normal to the plane;
        a batch carries a trailing frequency axis, shape (..., 1).

    Returns
    -------
    depolarisation
        Two pairs; their factors [-] have shape (..., 3, 1).

    Notes
    -----
    Fibres in a plane are grains whose first axis is the long one: factors (axis, cross, cross).

    Examples
    --------
    >>> pairs = in_plane_grains((0.0, 0.5, 0.5))
    >>> [float(sum(weight * factor[k, 0] for factor, weight in pairs)) for k in range(3)]
    [0.25, 0.25, 0.5]
    """
    first, second, third = factors
    return ((_principal(first, first, third), 0.5), (_principal(second, second, third), 0.5))


def ordered_grains(factors: Factors, *, order_parameter: ArrayLike) -> Depolarisation:
    """Depolarisation of grains whose symmetry axes are spread about the third principal axis.

    Parameters
    ----------
    factors
        Depolarisation factors of one grain, across, across and along its symmetry axis [-].
    order_parameter
        S = <3 cos²θ − 1>/2 of the angle between symmetry axis and third principal axis [-]: 1 aligned,
        0 random, −1/2 in the plane; a batch carries a trailing frequency axis, shape (..., 1).

    Returns
    -------
    depolarisation
        Two pairs; their weights [-] have shape (..., 3, 1).

    Notes
    -----
    Polarisability is a tensor of second rank, so of a distribution that is round about the third axis only
    <cos²θ> = (1 + 2S)/3 enters: along the third axis the symmetry axis has that weight, along the two
    others (1 − S)/3.
    Valid for: any distribution round about the third axis, exactly.

    Examples
    --------
    >>> (_, across), (_, along) = ordered_grains((0.5, 0.5, 0.0), order_parameter=1.0)
    >>> along[:, 0].tolist()
    [0.0, 0.0, 1.0]
    """
    cross, _, axis = factors
    order = np.asarray(order_parameter, dtype=float)
    along = _principal((1.0 - order) / 3.0, (1.0 - order) / 3.0, (1.0 + 2.0 * order) / 3.0)
    return ((_lifted(cross), 1.0 - along), (_lifted(axis), along))


def ratios_about(aspect_ratio: Any, *, aspect_ratio_spread: Any) -> Iterator[tuple[Any, float]]:
    """Aspect ratios that stand for a log-normal distribution of them.

    Parameters
    ----------
    aspect_ratio
        Median by volume [-].
    aspect_ratio_spread
        Standard deviation of its natural logarithm [-].

    Returns
    -------
    ratio, weight
        Aspect ratio and its share of the volume [-]; the shares add up to one.

    Notes
    -----
    Equal steps of the logarithm, which for an entire function times a Gaussian converge faster than any
    power. A grain with a sharp resonance has a pole near the axis: the error is then about
    exp(−2πd/h), with h = spread/4 and d the half width of the resonance in ln(aspect ratio).
    Valid for: resonances that the spread blurs over no more than some ten of their own widths.

    Examples
    --------
    >>> pairs = list(ratios_about(2.0, aspect_ratio_spread=0.3))
    >>> round(sum(weight for _, weight in pairs), 12), round(float(sum(r * w for r, w in pairs)), 4)
    (1.0, 2.0921)
    """
    for place, weight in log_normal_places(_STEP):
        yield value_at(median=aspect_ratio, spread=aspect_ratio_spread, place=place), weight


def log_normal_places(step: float) -> Iterator[tuple[float, float]]:
    """Places of a log-normal distribution, in standard deviations of the logarithm, and their shares.

    Parameters
    ----------
    step
        Between them [-].

    Returns
    -------
    place, share
        The shares add up to one [-].

    Examples
    --------
    >>> [(place, round(share, 3)) for place, share in log_normal_places(2.5)]
    [(-5.0, 0.0), (-2.5, 0.04), (0.0, 0.919), (2.5, 0.04), (5.0, 0.0)]
    """
    places = np.arange(-_REACH, _REACH + 0.5 * step, step)
    shares = np.exp(-0.5 * places**2)
    yield from zip(places.tolist(), (shares / shares.sum()).tolist(), strict=True)


def value_at(*, median: Any, spread: Any, place: Any) -> Any:
    """Value of a log-normal distribution at a place: median · exp(spread · place) [unit of the median]."""
    return median * np.exp(spread * place)


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
    return random_grains((cross, cross, axis))


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
    cross, axis = spheroid_factors(aspect_ratio)
    return aligned_grains((cross, cross, axis))


def _principal(first: Any, second: Any, third: Any) -> Any:
    """Three numbers or batches as one array with the principal axes second to last."""
    return np.stack(np.broadcast_arrays(*(np.atleast_1d(part) for part in (first, second, third))), axis=-2)


def _lifted(number: Any) -> Any:
    """A number that is the same along every principal axis, shaped to meet those that are not."""
    return np.asarray(number)[..., np.newaxis, :] if np.ndim(number) else number
