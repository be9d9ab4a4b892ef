"""Conformity with limits in the light of an uncertainty: probability, guard bands, risks."""

from __future__ import annotations

import itertools
import math
from collections.abc import Callable
from typing import Literal

from mixsim.errors import Refusal

Decision = Literal["pass", "fail", "undecided"]

_ROOT_TURN = math.sqrt(2.0 * math.pi)


def conformance_probability(
    estimate: float, std: float, *, lower: float | None, upper: float | None
) -> float:
    """Probability that the true value lies within the limits.

    Parameters
    ----------
    estimate
        Measured value, in the unit of the limits.
    std
        Its standard uncertainty.
    lower, upper
        Limits; None where there is none.

    Returns
    -------
    probability
        Φ((upper − y)/u) − Φ((lower − y)/u).

    Raises
    ------
    Refusal
        Where the uncertainty is negative.

    Notes
    -----
    Valid for: a normal distribution of what the true value may be, and no other knowledge of it.

    References
    ----------
    JCGM 106:2012, 7.2 to 7.4.

    Examples
    --------
    >>> print(f"{conformance_probability(13.6, 1.8, lower=12.5, upper=16.3):.4f}")
    0.6626
    """
    from scipy.special import ndtr

    if std < 0.0:
        raise Refusal(f"standard uncertainty {std!r}", "it is not negative")
    if std == 0.0:
        return float((lower is None or estimate >= lower) and (upper is None or estimate <= upper))
    below_upper = 1.0 if upper is None else float(ndtr((upper - estimate) / std))
    below_lower = 0.0 if lower is None else float(ndtr((lower - estimate) / std))
    if lower is not None and estimate < lower:  # differences of tails, not of numbers near one
        return float(
            ndtr((estimate - lower) / std) - (0 if upper is None else ndtr((estimate - upper) / std))
        )
    return below_upper - below_lower


def acceptance_zone(*, lower: float | None, upper: float | None, guard: float) -> tuple[float, float] | None:
    """Measured values that are accepted when each limit is moved by a guard band.

    Parameters
    ----------
    lower, upper
        Limits; None where there is none.
    guard
        Width of the guard band: above zero it protects the user, below zero the maker.

    Returns
    -------
    zone
        Its ends, or None where nothing would be accepted: the method cannot support the specification.

    References
    ----------
    JCGM 106:2012, 8.3.

    Examples
    --------
    >>> acceptance_zone(lower=3.6, upper=4.4, guard=0.3)
    (3.9, 4.1000000000000005)
    >>> acceptance_zone(lower=3.6, upper=4.4, guard=0.5) is None
    True
    """
    low = -math.inf if lower is None else lower + guard
    high = math.inf if upper is None else upper - guard
    return (low, high) if low <= high else None


def decide(estimate: float, *, lower: float | None, upper: float | None, guard: float = 0.0) -> Decision:
    """Pass, fail, or undecided within a guard band of a limit.

    Parameters
    ----------
    estimate
        Measured value, in the unit of the limits.
    lower, upper
        Limits; None where there is none.
    guard
        Width of the guard band on both sides of each limit; 0 is simple acceptance.

    Returns
    -------
    decision
        "pass" within the limits less the guard band, "fail" beyond the limits and the guard band (guarded
        rejection), "undecided" between.

    References
    ----------
    JCGM 106:2012, 8.2 and 8.3.

    Examples
    --------
    >>> [decide(value, lower=3.6, upper=4.4, guard=0.3) for value in (4.0, 4.3, 4.8)]
    ['pass', 'undecided', 'fail']
    """
    zone = acceptance_zone(lower=lower, upper=upper, guard=guard)
    if zone is not None and zone[0] <= estimate <= zone[1]:
        return "pass"
    below = lower is not None and estimate < lower - guard
    above = upper is not None and estimate > upper + guard
    return "fail" if below or above else "undecided"


def risks(
    *,
    lower: float | None,
    upper: float | None,
    guard: float,
    process_mean: float,
    process_std: float,
    std: float,
) -> tuple[float, float]:
    """Share of all items that are accepted although they do not conform, and the reverse.

    Parameters
    ----------
    lower, upper
        Limits; None where there is none.
    guard
        Width of the guard band inside each limit.
    process_mean, process_std
        Of what the process makes.
    std
        Standard uncertainty of the measurement.

    Returns
    -------
    consumer, producer
        Global risk of the user, and of the maker [-].

    Raises
    ------
    Refusal
        Where a standard deviation is not above zero.

    Notes
    -----
    Integral over the true value, normal as the process makes it, of the probability that its measured value,
    normal about it, falls on the other side.
    Valid for: a process and a measurement that are both normal.

    References
    ----------
    JCGM 106:2012, 9.5.

    Examples
    --------
    >>> consumer, producer = risks(
    ...     lower=-0.2, upper=0.2, guard=0.0, process_mean=0.0, process_std=0.12, std=0.04
    ... )
    >>> print(f"{consumer:.5f} {producer:.5f}")
    0.01894 0.03721
    """
    from scipy.integrate import quad
    from scipy.special import ndtr

    for name, value in (("process_std", process_std), ("std", std)):
        if not value > 0.0:
            raise Refusal(f"{name} {value!r}", "it is above zero")
    zone = acceptance_zone(lower=lower, upper=upper, guard=guard)

    def accepted(true: float) -> float:
        if zone is None:
            return 0.0
        return float(ndtr((zone[1] - true) / std) - ndtr((zone[0] - true) / std))

    def made(true: float) -> float:
        return math.exp(-0.5 * ((true - process_mean) / process_std) ** 2) / process_std / _ROOT_TURN

    def share(chance: Callable[[float], float], low: float, high: float) -> float:
        """Integral over the true values between two ends, in pieces about where it changes."""
        ends = [max(low, process_mean - 10.0 * process_std), min(high, process_mean + 10.0 * process_std)]
        turns = [end for end in zone or () if math.isfinite(end)]
        places = [turn + shift * std for turn in turns for shift in (-3.0, 0.0, 3.0)]
        inside = sorted(place for place in places if ends[0] < place < ends[1])
        if ends[0] >= ends[1]:
            return 0.0
        pieces = itertools.pairwise([ends[0], *inside, ends[1]])
        return sum(float(quad(lambda t: made(t) * chance(t), *piece)[0]) for piece in pieces)

    low, high = -math.inf if lower is None else lower, math.inf if upper is None else upper
    consumer = share(accepted, -math.inf, low) + share(accepted, high, math.inf)
    return consumer, share(lambda true: 1.0 - accepted(true), low, high)
