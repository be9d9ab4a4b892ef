"""Monte Carlo propagation of distributions, with as many trials as the digits wanted need."""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.uncertainty.first_order import Answer
from mixsim.analysis.uncertainty.inputs import Correlation, Floats, Uncertain, draw

BLOCK = 10_000
MOST = 1_000_000
_FEWEST = 5  # blocks: the spread of two is too often small by chance


@dataclass(frozen=True)
class Trials:
    """What a Monte Carlo made of some answers.

    Attributes
    ----------
    mean, std
        Of each answer; NaN where no trial gave one.
    low, high
        Ends of the interval that holds `coverage` of its values, as many beyond either end.
    coverage
        That share.
    trials, seed
        How many, and what makes them the same again.
    stable
        Whether further trials would leave the digits that were asked for.
    lost
        Share of the trials without an answer.
    """

    mean: Floats
    std: Floats
    low: Floats
    high: Floats
    coverage: float
    trials: int
    seed: int
    stable: bool
    lost: float


def monte_carlo(
    function: Answer,
    inputs: Mapping[str, Uncertain],
    *,
    correlation: Correlation | None = None,
    seed: int = 0,
    coverage: float = 0.95,
    digits: int = 2,
    trials: int | None = None,
    block: int = BLOCK,
    most: int = MOST,
    progress: Callable[[int], None] | None = None,
) -> Trials:
    """Propagate the distributions of some numbers to answers.

    Parameters
    ----------
    function
        The answers, shape (M, answers), of M sets of values in one call.
    inputs
        Numbers by name.
    correlation
        Correlation coefficients by pairs of names.
    seed
        Of the draws.
    coverage
        Share of the values between the ends of the interval.
    digits
        Significant digits of the standard uncertainty that must stand.
    trials
        How many outright, rounded up to whole blocks; None: as many as the digits need.
    block
        Trials in one call of the function: what bounds the memory.
    most
        Trials after which it gives up on the digits.
    progress
        Called with the number of trials done after each block.

    Returns
    -------
    trials
        Mean, standard deviation and interval of each answer, averaged over the blocks.

    Notes
    -----
    Blocks of trials go on, at least five, until twice the standard deviation of the mean of their results
    lies below half the last of the digits: for estimate, standard uncertainty and both ends.

    References
    ----------
    JCGM 101:2008, 7.9.

    Examples
    --------
    >>> inputs = {name: Uncertain(0.0, 1.0, rectangular=True) for name in "abcd"}
    >>> found = monte_carlo(lambda x: sum(x.values())[:, None], inputs, seed=1)
    >>> print(f"{float(found.std[0]):.1f} {float(found.high[0]):.1f} {found.stable}")
    2.0 3.9 True
    """
    random = np.random.default_rng(seed)
    wanted = None if trials is None else max(1, math.ceil(trials / block))
    results: list[Floats] = []
    lost = 0.0
    stable = False
    while True:
        answers = np.asarray(function(draw(inputs, block, random, correlation)), dtype=float)
        summary, missing = _summary(answers, coverage)
        results.append(summary)
        lost += missing
        if progress is not None:
            progress(len(results) * block)
        if wanted is not None and len(results) >= wanted:
            stable = len(results) > 1 and _stable(results, digits)
            break
        if wanted is None:
            stable = len(results) >= _FEWEST and _stable(results, digits)
            if stable or len(results) * block >= most:
                break
    mean, std, low, high = np.mean(results, axis=0)
    # the spread between blocks belongs to the whole: without it the pooled deviation would be low
    if len(results) > 1:
        std = np.sqrt(np.mean([r[1] ** 2 for r in results], axis=0) + np.var([r[0] for r in results], axis=0))
    done = len(results) * block
    return Trials(mean, std, low, high, coverage, done, seed, stable, lost / len(results))


def coverage_interval(
    values: NDArray[np.float64], coverage: float = 0.95, *, shortest: bool = False
) -> tuple[float, float]:
    """Interval that holds a share of some values.

    Parameters
    ----------
    values
        Results of trials, shape (M,).
    coverage
        The share.
    shortest
        The shortest such interval, rather than the one with as many values beyond either end.

    Returns
    -------
    low, high
        Its ends.

    References
    ----------
    JCGM 101:2008, 7.7.

    Examples
    --------
    >>> values = np.arange(1001.0)
    >>> low, high = coverage_interval(values)
    >>> print(f"{low:.0f} {high:.0f}")
    25 975
    """
    ordered = np.sort(np.asarray(values, dtype=float))
    if not shortest:
        low, high = np.quantile(ordered, [0.5 - coverage / 2, 0.5 + coverage / 2])
        return float(low), float(high)
    held = max(1, round(coverage * len(ordered)))
    if held >= len(ordered):
        return float(ordered[0]), float(ordered[-1])
    widths = ordered[held:] - ordered[:-held]
    first = int(np.argmin(widths))
    return float(ordered[first]), float(ordered[first + held])


def _summary(answers: Floats, coverage: float) -> tuple[Floats, float]:
    """Mean, standard deviation and ends of each answer in one block, and the share of trials without one."""
    rows = answers.reshape(len(answers), -1)
    sound = np.isfinite(rows).all(axis=1)
    missing = 1.0 - float(sound.mean())
    if sound.sum() < 2:
        return np.full((4, rows.shape[1]), np.nan), missing
    kept = rows if missing == 0.0 else rows[sound]
    ends = np.quantile(kept, [0.5 - coverage / 2, 0.5 + coverage / 2], axis=0)
    return np.stack([kept.mean(axis=0), kept.std(axis=0, ddof=1), *ends]), missing


def _stable(results: list[Floats], digits: int) -> bool:
    """Whether the mean over the blocks holds the digits of the standard uncertainty."""
    blocks = np.asarray(results)
    with np.errstate(invalid="ignore"):
        doubt = 2.0 * blocks.std(axis=0, ddof=1) / math.sqrt(len(blocks))
        std = blocks[:, 1].mean(axis=0)
    moving = std > 0.0
    if not moving.any():
        return bool(np.isfinite(std).all())
    place = np.floor(np.log10(std[moving])) - (digits - 1)
    return bool(np.all(doubt[:, moving] <= 0.5 * 10.0**place))
