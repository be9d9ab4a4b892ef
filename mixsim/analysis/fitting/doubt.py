"""How sure a fit is: covariance, what the held numbers add, and which combinations the data fix."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.fitting.model import FitModel
from mixsim.analysis.least_squares import Fit, gauss_newton
from mixsim.analysis.uncertainty.first_order import halves, pairs
from mixsim.analysis.uncertainty.inputs import Uncertain

Floats = NDArray[np.float64]

UNIFORM = 12.0**-0.5  # standard deviation of not knowing anything, in scaled ranges
_ROUNDING = 1e-12  # scatter of readings without noise
_FIXED = 0.3  # relative standard uncertainty below which a combination counts as fixed
_SINGULAR = 1e-10  # share of the largest singular value below which the data say nothing
_HALF_WIDTH = 3.841459  # of 95 %, in squares of standard uncertainties
_SPAN, _STEPS = 4.5, 25  # profile: standard uncertainties to either side, and places


@dataclass(frozen=True, eq=False)
class Combination:
    """A product of powers of the unknowns, and how well the data fix it.

    Attributes
    ----------
    powers
        Exponent of each unknown by its name; the largest is 1.
    std
        Standard uncertainty of the logarithm of the product, its relative uncertainty where that is small;
        infinite where the data say nothing.
    fixed
        Whether that is little.
    """

    powers: Mapping[str, float]
    std: float
    fixed: bool


@dataclass(frozen=True, eq=False)
class Doubt:
    """Uncertainty of a fit.

    Attributes
    ----------
    scale
        Factor by which residuals exceed what weighs them, where that is but a ratio; else 1.
    covariance
        Of the scaled places, shape (U, U), what the held numbers add included; NaN where there is none.
    statistical
        The same from the noise of the readings alone.
    moved
        What one ± of each held number that is felt does to the scaled places, by its name, shape (U,).
    gain
        What takes residuals to scaled places, shape (U, count).
    explained
        Sum of squared residuals that is left when the held numbers may move within their ±.
    combinations
        Best fixed first.
    """

    scale: float
    covariance: Floats
    statistical: Floats
    moved: Mapping[str, Floats]
    gain: Floats
    explained: float
    combinations: tuple[Combination, ...]


def doubt_of(model: FitModel, found: Fit, held: Mapping[str, Uncertain]) -> Doubt:
    """First-order uncertainty of a fit.

    Parameters
    ----------
    model
        Residuals.
    found
        The fit.
    held
        Numbers of the recipe with a ±, not fitted, by path.

    Returns
    -------
    doubt
        Covariance s²(JᵀJ)⁻¹ of the scaled places, plus G E Eᵀ Gᵀ: E is what one ± of each held number does
        to the residuals, and G = J⁺ takes residuals to places.
    """
    freedom = model.count - len(model.unknowns)
    scatter = float(np.sqrt(found.cost / freedom)) if model.scaled and freedom > 0 else 1.0
    scale = max(scatter, _ROUNDING)
    left, singular, right = np.linalg.svd(found.slopes, full_matrices=False)
    seen = singular > _SINGULAR * max(float(singular[0]), 1e-300)
    with np.errstate(divide="ignore"):
        inverse = np.where(seen, 1.0 / singular, np.inf)
    if seen.all():
        gain = right.T @ (inverse[:, np.newaxis] * left.T)
        statistical = scale**2 * (right.T * inverse**2) @ right
    else:
        gain = np.full((len(model.unknowns), model.count), np.nan)
        statistical = np.full((len(model.unknowns),) * 2, np.nan)
    felt = _effects(model, found, held)
    moved = gain @ felt if felt.shape[1] else np.zeros((len(model.unknowns), 0))
    covariance = statistical + moved @ moved.T
    names = list(held)
    return Doubt(
        scale,
        covariance,
        statistical,
        {names[i]: moved[:, i] for i in range(len(held)) if felt[:, i].any()},
        gain,
        _explained(found, felt),
        _combinations(model, found, scale),
    )


def _explained(found: Fit, felt: Floats) -> float:
    """rᵀ(1 + E Eᵀ)⁻¹r: residuals against their own noise and that of the held numbers together."""
    square = float(np.sum(found.residual**2))
    if not felt.shape[1]:
        return square
    seen = felt.T @ found.residual
    within = np.eye(felt.shape[1]) + felt.T @ felt
    return max(square - float(seen @ np.linalg.solve(within, seen)), 0.0)


def _effects(model: FitModel, found: Fit, held: Mapping[str, Uncertain]) -> Floats:
    """What one ± of each held number does to the residuals, shape (count, held)."""
    if not held:
        return np.zeros((model.count, 0))
    moved = halves(model.holding(pairs(held)).residual(np.asarray(found.place)))
    return np.nan_to_num(moved).T


def _combinations(model: FitModel, found: Fit, scale: float) -> tuple[Combination, ...]:
    """Products of powers of the unknowns in the order in which the data fix them."""
    values, slopes = model.values(found.place), model.slopes(found.place)
    positive = (values > 0.0) & np.array([unknown.low >= 0.0 for unknown in model.unknowns])
    size = np.where(positive, values, [unknown.high - unknown.low for unknown in model.unknowns])
    _, singular, right = np.linalg.svd(found.slopes * (size / slopes), full_matrices=False)
    names = [unknown.name for unknown in model.unknowns]
    combinations = []
    for level, row in zip(singular, right, strict=True):
        std = scale / level if level > _SINGULAR * max(float(singular[0]), 1e-300) else np.inf
        lead = row[int(np.argmax(np.abs(row)))]
        powers = {name: float(p / lead) for name, p in zip(names, row, strict=True) if abs(p / lead) >= 0.05}
        # in units of the leading unknown: its exponent is one
        std /= abs(float(lead))
        combinations.append(Combination(powers, float(std), bool(std < _FIXED)))
    return tuple(combinations)


def profile(model: FitModel, found: Fit, doubt: Doubt) -> list[tuple[float, float]]:
    """Ends of the 95 % interval of each unknown [SI], the others fitted anew at each of its values.

    An end that lies beyond the range is the end of the range.
    """
    ends = []
    for index in range(len(model.unknowns)):
        std = float(np.sqrt(doubt.covariance[index, index]))
        reach = min(_SPAN * std, 1.0) if np.isfinite(std) else 1.0
        places = np.linspace(
            max(found.place[index] - reach, 0.0), min(found.place[index] + reach, 1.0), _STEPS
        )
        row = np.broadcast_to(found.place, (len(places), len(found.place))).copy()
        row[:, index] = places
        values = model.values(row)[:, index]
        costs = _costs(model, found, index, values) / doubt.scale**2 - found.cost / doubt.scale**2
        low, high = _crossings(values, costs, float(model.values(found.place)[index]))
        best = float(model.values(found.place)[index])
        # what the held numbers add is not in the readings' sum of squares
        added = doubt.covariance[index, index] - doubt.statistical[index, index]
        more = _HALF_WIDTH * max(float(added), 0.0) * float(model.slopes(found.place)[index]) ** 2
        ends.append((best - np.hypot(best - low, more**0.5), best + np.hypot(high - best, more**0.5)))
    return ends


def _costs(model: FitModel, found: Fit, index: int, values: Floats) -> Floats:
    """Least sum of squares with one unknown held at each of some values."""
    alone = model.holding({model.unknowns[index].name: values})
    if not alone.unknowns:
        return np.asarray(np.sum(alone.residual(np.empty((len(values), 0))) ** 2, axis=-1))
    start = np.delete(found.place, index)
    targets = np.zeros((len(values), model.count))
    places, _ = gauss_newton(lambda t: -alone.residual(t), targets, np.ones(model.count), start)
    return np.asarray(np.sum(alone.residual(places) ** 2, axis=-1))


def _crossings(values: Floats, excess: Floats, best: float) -> tuple[float, float]:
    """Where the excess of the sum of squares passes that of 95 %, on both sides of the best value."""
    ends = []
    for side in (values <= best, values >= best):
        x, y = values[side], excess[side]
        order = np.argsort(np.abs(x - best))
        x, y = x[order], y[order]
        above = np.flatnonzero(y > _HALF_WIDTH)
        if not above.size:
            ends.append(float(x[-1]))
            continue
        k = int(above[0])
        x0, y0 = (best, 0.0) if k == 0 else (float(x[k - 1]), float(y[k - 1]))
        # the excess is near a square: straight in its root
        a, b, c = np.sqrt(max(y0, 0.0)), np.sqrt(float(y[k])), np.sqrt(_HALF_WIDTH)
        ends.append(float(x0 + (x[k] - x0) * (c - a) / (b - a)))
    low, high = sorted(ends)
    return low, high
