"""Uncertainty of a solution, from the ± of readings and recipe: first order, and a Monte Carlo beside it."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.inversion.answer import MonteCarlo
from mixsim.analysis.inversion.decide import Solution
from mixsim.analysis.inversion.model import ReadingModel
from mixsim.analysis.least_squares import covariance, gauss_newton, jacobian
from mixsim.analysis.uncertainty.first_order import effects
from mixsim.analysis.uncertainty.inputs import Uncertain, draw, uncertain_leaves
from mixsim.recipe import Recipe

Floats = NDArray[np.float64]

_UNIFORM = 12.0**-0.5  # standard deviation of not knowing anything, in scaled ranges
_DRAWS = 2000


@dataclass(frozen=True)
class Doubt:
    """Uncertainty of a solution.

    Attributes
    ----------
    std
        One standard uncertainty of each unknown [SI]; NaN for one that the readings do not see.
    correlation
        Matrix of correlation coefficients.
    monte_carlo
        The check.
    weak
        Why the readings do not narrow an unknown, or empty.
    note
        Why there is no uncertainty, or empty.
    pushed
        Numbers of the recipe whose ± is in it.
    """

    std: Floats | None
    correlation: Floats | None
    monte_carlo: MonteCarlo | None
    weak: str
    note: str
    pushed: tuple[str, ...] = ()


def doubt_of(recipe: Recipe, model: ReadingModel, solution: Solution, seed: int) -> Doubt:
    """First-order uncertainties of a solution and their check by Monte Carlo."""
    if solution.place is None or solution.verdict == "impossible":
        return Doubt(None, None, None, "", "")
    known = solution.known or (True,) * len(model.unknowns)
    if not all(known):
        index = int(np.argmax(known))
        alone = ReadingModel(model.mixture, [model.unknowns[index]], model.readings)
        part = doubt_of(recipe, alone, replace(solution, place=solution.place[[index]], known=()), seed)
        if part.std is None:
            return part
        std = np.full(len(known), np.nan)
        std[index] = part.std[0]
        return Doubt(std, None, part.monte_carlo, "", part.note)
    if solution.held:
        return Doubt(None, None, None, "", "at the end of its range, which the reading passes by a little")
    lacking = [reading.kind for reading in model.readings if not reading.std]
    if lacking:
        note = f"no ± stated with {' and '.join(lacking)}"
        return Doubt(None, None, None, "", note)
    stds = np.array([reading.std for reading in model.readings], dtype=float)
    numbers, effects = _numbers(recipe, model, solution.place)
    spread = np.diag(stds**2) + effects @ effects.T
    cov = covariance(jacobian(model, solution.place), stds, spread)
    if cov is None:
        return Doubt(None, None, None, "the readings change too little to tell the unknowns apart", "")
    scaled = np.sqrt(np.diag(cov))
    weak = ""
    for i, unknown in enumerate(model.unknowns):
        if scaled[i] > _UNIFORM:
            weak = f"the readings narrow {unknown.path} no further than the range that was given"
    std = scaled * model.slopes(solution.place)
    check = _monte_carlo(model, solution.place, stds, std, numbers, seed)
    return Doubt(std, cov / np.outer(scaled, scaled), check, weak, "", tuple(numbers))


def _numbers(recipe: Recipe, model: ReadingModel, place: Floats) -> tuple[dict[str, Uncertain], Floats]:
    """Numbers of the recipe with a ± that the readings feel, and what one ± of each does to the readings."""
    inputs = uncertain_leaves(recipe, without=[unknown.path for unknown in model.unknowns])
    if not inputs:
        return {}, np.zeros((len(model.readings), 0))
    moved = effects(lambda x: model.with_others(x)(place), inputs)
    felt = np.asarray(np.isfinite(moved).all(axis=1) & moved.any(axis=1))
    found = {path: number for (path, number), matters in zip(inputs.items(), felt, strict=True) if matters}
    return found, moved[felt].T


def _monte_carlo(
    model: ReadingModel,
    place: Floats,
    stds: Floats,
    std: Floats,
    numbers: dict[str, Uncertain],
    seed: int,
) -> MonteCarlo:
    random = np.random.default_rng(seed)
    centre = np.array([reading.value for reading in model.readings])
    targets = centre + stds * random.standard_normal((_DRAWS, len(stds)))
    others = draw(numbers, _DRAWS, random)
    places, inside = gauss_newton(model.with_others(others), targets, 1.0 / stds, place)
    values = model.values(places)
    ends = np.percentile(values, [2.5, 97.5], axis=0)
    spread = values.std(axis=0, ddof=1)
    outside = float(1.0 - inside.mean())
    shift = np.abs(values.mean(axis=0) - model.values(place))
    agrees = bool(np.all(np.abs(spread / std - 1.0) < 0.1) and np.all(shift < 0.25 * std) and outside < 0.025)
    paths = [unknown.path for unknown in model.unknowns]
    return MonteCarlo(
        draws=_DRAWS,
        seed=seed,
        std={path: float(s) for path, s in zip(paths, spread, strict=True)},
        interval={path: (float(a), float(b)) for path, a, b in zip(paths, *ends, strict=True)},
        outside=outside,
        agrees=agrees,
    )
