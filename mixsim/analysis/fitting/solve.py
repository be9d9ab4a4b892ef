"""The best values of the unknowns: from the recipe's own, and from places spread over the ranges."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.fitting.model import FitModel
from mixsim.analysis.least_squares import Fit, Loss, distinct, fit

Floats = NDArray[np.float64]

STARTS = 6
_LOOKS = 48  # places looked at for each unknown, of which the best are starts
_AT_ONCE = 2_000_000  # numbers in one call of the evaluator
_AS_GOOD = (
    1.0  # by which the sum of squares may be worse, in the noise, and a fit still stand beside the best
)


def solve(
    model: FitModel,
    own: Floats,
    *,
    starts: int = STARTS,
    seed: int = 0,
    loss: Loss = "linear",
    progress: Callable[[int, int], None] | None = None,
) -> list[Fit]:
    """Every distinct best fit, best first.

    Parameters
    ----------
    model
        Residuals.
    own
        Scaled place of the recipe's own values, shape (U,), held to 0…1.
    starts
        How many places to start from, that one included.
    seed
        Of the places that are looked at.
    loss
        How residuals count that lie far out.
    progress
        Called with the number of starts done, and of all.

    Returns
    -------
    fits
        At least one.
    """
    places = [own]
    if starts > 1:
        places += list(_promising(model, seed, starts - 1))
    found = []
    for done, place in enumerate(places):
        found.append(fit(model.residual, place, loss=loss, tolerance=1e-13))
        if progress is not None:
            progress(done + 1, len(places))
    return distinct(found)


def as_good(fits: list[Fit], scale: float) -> list[Fit]:
    """Fits that the data cannot tell from the best; `scale` is the noise of the residuals."""
    best = fits[0].cost
    return [found for found in fits if found.cost <= best + _AS_GOOD * scale**2 + 1e-9 * best]


def _promising(model: FitModel, seed: int, count: int) -> Floats:
    """Places with the least sum of squares among some that fill the ranges evenly."""
    from scipy.stats.qmc import LatinHypercube

    unknowns = len(model.unknowns)
    looks = LatinHypercube(d=unknowns, rng=np.random.default_rng(seed)).random(_LOOKS * unknowns)
    step = max(1, _AT_ONCE // model.count)
    costs = np.concatenate([_cost(model, looks[i : i + step]) for i in range(0, len(looks), step)])
    return np.asarray(looks[np.argsort(costs, kind="stable")[:count]])


def _cost(model: FitModel, places: Floats) -> Floats:
    squares = np.sum(model.residual(places) ** 2, axis=-1)
    return np.where(np.isfinite(squares), squares, np.inf)
