"""Invert static and high-frequency permittivity to one or two numbers of a recipe."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis import explain
from mixsim.analysis.caution import Caution
from mixsim.analysis.closed_form import closed_form
from mixsim.analysis.inversion import (
    Estimate,
    Inversion,
    MonteCarlo,
    Reading,
    Residual,
    RuleAnswer,
    Unknown,
    Verdict,
)
from mixsim.analysis.reading_model import ReadingModel, grid
from mixsim.analysis.readings import readings_of, unknowns_of
from mixsim.analysis.rules import applicable_rules
from mixsim.analysis.solver import covariance, crossings, gauss_newton, jacobian, least_squares, valleys
from mixsim.analysis.suspicion import suspicions
from mixsim.errors import BadInput, Fault
from mixsim.mixture import Mixture
from mixsim.recipe import Recipe
from mixsim.units import Leaf, dimension_named

Floats = NDArray[np.float64]

_POINTS = {1: 2001, 2: 161}  # of the scan, for each number of unknowns
_BLIND = 1e-9  # share of a reading below which it does not depend on an unknown
_EXACT = 1e-7  # share of a reading to which a fit must meet it where no uncertainty is stated
_REACH = 2.0  # standard uncertainties by which a reading may lie out of reach
_DISAGREE = 3.0  # … or two readings apart, before it is said
_EDGE = 1e-6  # of a scaled range: nearer than that to its end, a fit is held there
_UNIFORM = 12.0**-0.5  # standard deviation of not knowing anything, in scaled ranges
_DRAWS = 2000
_NORMAL = 1.959964  # half-width of 95 % of a normal distribution


@dataclass(frozen=True)
class _Solution:
    """What one rule makes of the readings; places are scaled."""

    verdict: Verdict
    place: Floats | None
    reasons: tuple[str, ...] = ()
    others: tuple[Floats, ...] = ()
    method: str = "least squares"
    family: Floats | None = None
    allowed: tuple[tuple[float, float], ...] = ()
    known: tuple[bool, ...] = ()
    held: bool = False


def invert(
    recipe: Recipe,
    *,
    static: Leaf | None = None,
    high_frequency: Leaf | None = None,
    free: Sequence[Unknown] | None = None,
    seed: int = 0,
) -> Inversion:
    """Unknown numbers of a recipe from the static and high-frequency permittivity of a sample.

    Parameters
    ----------
    recipe
        A checked recipe.
    static, high_frequency
        Readings in place of those of the recipe [-].
    free
        Unknowns in place of those of the recipe.
    seed
        Of the Monte Carlo.

    Returns
    -------
    inversion
        Estimates with uncertainty, or why there are none.

    Raises
    ------
    BadInput
        Where reading, unknown or limit is missing, or the static reading is below the other.

    Notes
    -----
    Closed form where there is one; bounded least squares on the exact limits of the mixture elsewhere.
    Uncertainties are those of the readings alone: first order, (JᵀWJ)⁻¹, and a Monte Carlo beside it.

    Examples
    --------
    >>> import mixsim
    >>> recipe = mixsim.parse('''
    ...     host.material = "polyethylene"
    ...     inclusions.filler = { material = "alumina", volume_fraction = "20 %" }
    ...     measured.static = "3.10 ± 0.02"
    ...     unknowns."inclusions.filler.volume_fraction" = ["0 %", "60 %"]
    ... ''')
    >>> answer = mixsim.invert(recipe)
    >>> estimate = answer.estimates["inclusions.filler.volume_fraction"]
    >>> print(answer.verdict, recipe.show(estimate.path, estimate.value, estimate.std))
    answered 19.95 ± 0.45 %
    """
    readings = readings_of(recipe, static=static, high_frequency=high_frequency)
    unknowns = unknowns_of(recipe, free)
    mixture = recipe.compile()
    if mixture.aligned:
        allowed = "a reading would have to say along which axis; orientation = 'random' has one level"
        raise BadInput(
            [Fault(recipe.file, "inclusions", "aligned grains have a level for each axis", allowed)]
        )
    _limits_known(recipe, mixture, readings)
    with np.errstate(all="ignore"):
        solution = _solve(recipe, mixture, unknowns, readings)
        model = ReadingModel(mixture, unknowns, readings)
        checked = _doubt(model, solution, seed)
        residuals = _residuals(model, solution)
        by_rule = _by_rule(recipe, mixture, unknowns, readings, solution)
    if checked.weak and solution.verdict == "answered":
        solution = replace(solution, verdict="undecided", reasons=(*solution.reasons, checked.weak))
    return Inversion(
        recipe=recipe,
        rule=mixture.rule.name,
        readings=readings,
        unknowns=unknowns,
        verdict=solution.verdict,
        reasons=solution.reasons,
        estimates=_estimates(recipe, model, solution, checked),
        correlation=checked.correlation if solution.verdict == "answered" else None,
        residuals=residuals,
        family=_family(model, solution),
        solutions=tuple(_named(model, place) for place in solution.others),
        by_rule=by_rule,
        monte_carlo=checked.monte_carlo if solution.verdict == "answered" else None,
        method=solution.method,
        warnings=(*suspicions(recipe), *_cautions(solution, checked, residuals)),
        seed=seed,
    )


def _limits_known(recipe: Recipe, mixture: Mixture, readings: Sequence[Reading]) -> None:
    """Refuse a reading of a limit that a constituent does not have."""
    x, faults = mixture.defaults, []
    for reading in readings:
        for phase in mixture.phases:
            spectrum = phase.permittivity
            level = spectrum.low(x)[1] if reading.kind == "static" else spectrum.high(x)
            if np.any(np.isnan(level)):
                path, word = f"materials.{phase.material}", reading.kind
                found = f"{phase.material} has no {word} level: it is known over a band only"
                faults.append(Fault(recipe.file, path, found, f"state {word} of the material"))
    if faults:
        raise BadInput(list(dict.fromkeys(faults)))


def _solve(
    recipe: Recipe, mixture: Mixture, unknowns: Sequence[Unknown], readings: Sequence[Reading]
) -> _Solution:
    """The answer of one rule."""
    model = ReadingModel(mixture, unknowns, readings)
    places = grid(len(unknowns), _POINTS[len(unknowns)])
    surface = model(places)
    everywhere = tuple((0.0, 1.0) for _ in unknowns)
    if not np.isfinite(surface).any():
        reason = "the mixture conducts over the whole range, so that there is no static level to read"
        return _Solution("undecided", None, (reason,), allowed=everywhere)

    seen = _seen(surface, readings)
    if not seen.any(axis=0).all():
        return _partly_blind(recipe, model, seen)
    for position, reading in enumerate(readings):
        if seen[position].any() and _out_of_reach(surface[..., position], reading):
            reasons = explain.impossible(recipe, model, position, surface[..., position])
            return _Solution("impossible", None, reasons)
    active = [position for position in range(len(readings)) if seen[position].any()]
    if len(active) < len(unknowns):
        return _curve(model, places, surface, active[0])
    exact = closed_form(mixture, unknowns, readings)
    if exact is not None and all(u.low <= v <= u.high for u, v in zip(unknowns, exact, strict=True)):
        return _Solution("answered", model.places(exact), method="closed form")
    return _fitted(recipe, model, places, surface, active)


def _seen(surface: Floats, readings: Sequence[Reading]) -> NDArray[np.bool_]:
    """Whether each reading depends on each unknown, shape (readings, unknowns)."""
    rows = []
    for position, reading in enumerate(readings):
        level = surface[..., position]
        spans = []
        for axis in range(level.ndim):
            with np.errstate(invalid="ignore"):
                top, bottom = np.fmax.reduce(level, axis=axis), np.fmin.reduce(level, axis=axis)
            spans.append(np.nanmax(top - bottom) > _BLIND * abs(reading.value))
        rows.append(spans)
    return np.array(rows)


def _partly_blind(recipe: Recipe, model: ReadingModel, seen: NDArray[np.bool_]) -> _Solution:
    """Say which unknown the readings cannot see, and answer the other one alone if there is one."""
    visible = [bool(np.any(column)) for column in seen.T]
    reasons = tuple(
        explain.blind(model, unknown)
        for unknown, shown in zip(model.unknowns, visible, strict=True)
        if not shown
    )
    allowed = tuple((0.0, 1.0) for _ in model.unknowns)
    if not any(visible):
        return _Solution("undecided", None, reasons, allowed=allowed, known=tuple(visible))
    index = visible.index(True)
    alone = _solve(recipe, model.mixture, [model.unknowns[index]], model.readings)
    if alone.verdict != "answered" or alone.place is None:
        return replace(
            alone,
            place=None,
            reasons=(*alone.reasons, *reasons),
            allowed=allowed,
            others=(),
            family=None,
            known=tuple(visible),
        )
    place = np.full(len(model.unknowns), 0.5)
    place[index] = alone.place[0]
    return _Solution("undecided", place, reasons, method=alone.method, allowed=allowed, known=tuple(visible))


def _out_of_reach(level: Floats, reading: Reading) -> bool:
    low, high = float(np.nanmin(level)), float(np.nanmax(level))
    room = _REACH * reading.std if reading.std else _EXACT * abs(reading.value)
    return reading.value < low - room or reading.value > high + room


def _curve(model: ReadingModel, places: Floats, surface: Floats, active: int) -> _Solution:
    """One reading and two unknowns: every pair that fits."""
    reading, level = model.readings[active], surface[..., active]
    alone = ReadingModel(model.mixture, model.unknowns, [reading])
    along = [
        crossings(alone, reading.value, lines, levels)
        for lines, levels in ((places, level), (places.swapaxes(0, 1), level.swapaxes(0, 1)))
    ]
    family = max(along, key=len)
    family = family[np.lexsort(family.T[::-1])]
    room = _NORMAL * (reading.std or 0.0)
    fitting = places[np.abs(level - reading.value) <= room]
    every = np.concatenate([family, fitting]) if len(fitting) else np.concatenate(along)
    allowed = tuple((float(every[:, i].min()), float(every[:, i].max())) for i in range(len(model.unknowns)))
    if not len(family):
        family = every
    return _Solution("undecided", None, (explain.curve(model),), family=family, allowed=allowed)


def _fitted(
    recipe: Recipe, model: ReadingModel, places: Floats, surface: Floats, active: Sequence[int]
) -> _Solution:
    """Bounded least squares from every valley of the scan."""
    target = np.array([reading.value for reading in model.readings])
    weight = _weights(model.readings)
    cost = np.sum(((surface - target) * weight)[..., active] ** 2, axis=-1)
    starts = valleys(cost, places)
    if len(model.unknowns) == 1 == len(active):
        met = crossings(model, target[0], places, surface[..., 0]) if len(model.readings) == 1 else starts
        starts = met if len(met) else starts
    fits = least_squares(model, target, weight, starts)
    best, least = fits[0]
    exact = len(active) == len(model.unknowns)
    room = 1e-12 if not exact else _meets(model, target, weight)
    others = [place for place, cost in fits if cost <= least + max(room, 1e-6 * least)]
    if len(others) > 1:
        values = [model.values(place) for place in others]
        reason = explain.several(recipe, [u.path for u in model.unknowns], values)
        spans = tuple((min(p[i] for p in others), max(p[i] for p in others)) for i in range(len(best)))
        return _Solution("undecided", None, (reason,), others=tuple(others), allowed=spans)
    if exact and least > room:
        if any(reading.std is None for reading in model.readings) or least > _REACH**2:
            worst = int(np.argmax(np.abs((model(best) - target) * weight)))
            return _Solution(
                "impossible", None, explain.impossible(recipe, model, worst, surface[..., worst])
            )
        best = np.where(np.abs(best - best.round()) < _EDGE, best.round(), best)
        offset = np.abs(surface - target) * weight
        fitting = places[(offset <= _NORMAL).all(axis=-1)]
        every = np.vstack([fitting.reshape(-1, len(best)), best])
        spans = tuple((float(low), float(high)) for low, high in zip(every.min(0), every.max(0), strict=True))
        return _Solution("answered", best, allowed=spans, held=True)
    return _Solution("answered", best)


def _weights(readings: Sequence[Reading]) -> Floats:
    """One over the uncertainty of each reading, or over the reading where none is stated."""
    stated = all(reading.std for reading in readings)
    return np.array([1.0 / (r.std if stated and r.std else abs(r.value)) for r in readings])


def _meets(model: ReadingModel, target: Floats, weight: Floats) -> float:
    """Sum of squares below which a fit meets the readings."""
    return float(np.sum((_EXACT * target * weight) ** 2))


@dataclass(frozen=True)
class _Doubt:
    """Uncertainty of a solution."""

    std: Floats | None
    correlation: Floats | None
    monte_carlo: MonteCarlo | None
    weak: str
    note: str


def _doubt(model: ReadingModel, solution: _Solution, seed: int) -> _Doubt:
    """First-order uncertainties of a solution and their check by Monte Carlo."""
    if solution.place is None:
        return _Doubt(None, None, None, "", "")
    known = solution.known or (True,) * len(model.unknowns)
    if not all(known):
        index = int(np.argmax(known))
        alone = ReadingModel(model.mixture, [model.unknowns[index]], model.readings)
        part = _doubt(alone, replace(solution, place=solution.place[[index]], known=()), seed)
        if part.std is None:
            return part
        std = np.full(len(known), np.nan)
        std[index] = part.std[0]
        return _Doubt(std, None, part.monte_carlo, "", part.note)
    if solution.held:
        return _Doubt(None, None, None, "", "at the end of its range, which the reading passes by a little")
    lacking = [reading.kind for reading in model.readings if not reading.std]
    if lacking:
        note = f"no ± stated with {' and '.join(lacking)}"
        return _Doubt(None, None, None, "", note)
    stds = np.array([reading.std for reading in model.readings], dtype=float)
    cov = covariance(jacobian(model, solution.place), stds)
    if cov is None:
        return _Doubt(None, None, None, "the readings change too little to tell the unknowns apart", "")
    scaled = np.sqrt(np.diag(cov))
    weak = ""
    for i, unknown in enumerate(model.unknowns):
        if scaled[i] > _UNIFORM:
            weak = f"the readings narrow {unknown.path} no further than the range that was given"
    std = scaled * model.slopes(solution.place)
    return _Doubt(
        std, cov / np.outer(scaled, scaled), _monte_carlo(model, solution.place, stds, std, seed), weak, ""
    )


def _monte_carlo(model: ReadingModel, place: Floats, stds: Floats, std: Floats, seed: int) -> MonteCarlo:
    random = np.random.default_rng(seed)
    centre = np.array([reading.value for reading in model.readings])
    targets = centre + stds * random.standard_normal((_DRAWS, len(stds)))
    places, inside = gauss_newton(model, targets, 1.0 / stds, place)
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


def _estimates(
    recipe: Recipe, model: ReadingModel, solution: _Solution, doubt: _Doubt
) -> dict[str, Estimate]:
    estimates = {}
    for i, unknown in enumerate(model.unknowns):
        path = unknown.path
        known = solution.place is not None and (not solution.known or solution.known[i])
        settled = known and solution.place is not None and not doubt.weak
        value = float(model.values(solution.place)[i]) if settled and solution.place is not None else None
        std = float(doubt.std[i]) if settled and doubt.std is not None else None
        interval: tuple[float, float] | None = None
        if settled and doubt.monte_carlo is not None:
            interval = doubt.monte_carlo.interval.get(path)
        elif (not settled or solution.held) and solution.verdict != "impossible":
            ends = solution.allowed or tuple((0.0, 1.0) for _ in model.unknowns)
            places = np.array([[pair[end] for pair in ends] for end in (0, 1)])
            low, high = sorted(float(v) for v in model.values(places)[:, i])
            interval = (low, high)
        unit = dimension_named(recipe.leaves[path].dimension).si
        estimates[path] = Estimate(path, value, std, interval, unit, doubt.note if known else "")
    return estimates


def _residuals(model: ReadingModel, solution: _Solution) -> tuple[Residual, ...]:
    if solution.place is None:
        return ()
    predicted = model(solution.place)
    return tuple(
        Residual(r.kind, r.value, float(p), (r.value - float(p)) / r.std if r.std else None)
        for r, p in zip(model.readings, predicted, strict=True)
    )


def _by_rule(
    recipe: Recipe,
    mixture: Mixture,
    unknowns: Sequence[Unknown],
    readings: Sequence[Reading],
    own: _Solution,
) -> tuple[RuleAnswer, ...]:
    solutions = {mixture.rule.name: own}
    for name in applicable_rules(recipe, mixture):
        solutions[name] = _solve(recipe, mixture.with_rule(name), unknowns, readings)
    model = ReadingModel(mixture, unknowns, readings)
    return tuple(
        RuleAnswer(name, _named(model, solution.place))
        if solution.verdict == "answered" and solution.place is not None
        else RuleAnswer(name, None, solution.reasons[0])
        for name, solution in solutions.items()
    )


def _family(model: ReadingModel, solution: _Solution) -> dict[str, Floats] | None:
    if solution.family is None:
        return None
    values = model.values(solution.family)
    return {unknown.path: values[:, i] for i, unknown in enumerate(model.unknowns)}


def _named(model: ReadingModel, place: Floats) -> dict[str, float]:
    values = model.values(np.asarray(place))
    return {unknown.path: float(value) for unknown, value in zip(model.unknowns, values, strict=True)}


def _cautions(solution: _Solution, doubt: _Doubt, residuals: Sequence[Residual]) -> list[Caution]:
    found = []
    if solution.verdict != "answered":
        return []
    check = doubt.monte_carlo
    if check is not None and not check.agrees:
        found.append(
            Caution(
                "nonlinear",
                "unknowns",
                f"the Monte Carlo does not confirm the first-order uncertainties "
                f"({check.outside:.1%} of its draws left the ranges): trust the intervals, which are its own",
            )
        )
    off = [r for r in residuals if r.standardised is not None and abs(r.standardised) > _DISAGREE]
    if off:
        said = ", ".join(f"{explain.NAMES[r.kind]} {r.standardised:+.1f}" for r in off)
        found.append(
            Caution(
                "readings-disagree",
                "measured",
                f"the readings contradict each other under this rule (in standard uncertainties: {said})",
            )
        )
    return found
