"""Invert static and high-frequency permittivity to one or two numbers of a recipe."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.caution import Caution
from mixsim.analysis.inversion import explain
from mixsim.analysis.inversion.answer import Estimate, Inversion, Reading, Residual, RuleAnswer
from mixsim.analysis.inversion.asked import few_enough, readings_of
from mixsim.analysis.inversion.decide import Solution, solve
from mixsim.analysis.inversion.doubt import Doubt, doubt_of
from mixsim.analysis.inversion.model import ReadingModel
from mixsim.analysis.rules import applicable_rules, lacking_rules
from mixsim.analysis.suspicion import suspicions
from mixsim.analysis.unknowns import Unknown, unknowns_of
from mixsim.errors import BadInput
from mixsim.mixture import Mixture
from mixsim.recipe import Recipe
from mixsim.units import Leaf, dimension_named

Floats = NDArray[np.float64]

_APART = 0.01  # share by which a reading without ± may be missed before it is said
_DISAGREE = 3.0  # standard uncertainties between readings before it is said


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
    Uncertainties are those of the readings, and of the numbers of the recipe that state a ±: first order,
    and a Monte Carlo beside it.

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
    answered 19.95 ± 0.86 %
    """
    readings = readings_of(recipe, static=static, high_frequency=high_frequency)
    unknowns = unknowns_of(recipe, free)
    few_enough(recipe, unknowns)
    mixture = recipe.compile()
    if mixture.aligned:
        allowed = "a reading would have to say along which axis; orientation = 'random' has one level"
        raise BadInput([recipe.fault("inclusions", "aligned grains have a level for each axis", allowed)])
    _limits_known(recipe, mixture, readings)
    with np.errstate(all="ignore"):
        solution = solve(recipe, mixture, unknowns, readings)
        model = ReadingModel(mixture, unknowns, readings)
        checked = doubt_of(recipe, model, solution, seed)
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
        pushed=checked.pushed,
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
                base = "" if f"[{path}]" in recipe.text else f'based_on = "{phase.material}" and '
                faults.append(recipe.fault(path, found, f"give [{path}] {base}{word}"))
    if faults:
        raise BadInput(list(dict.fromkeys(faults)))


def _estimates(recipe: Recipe, model: ReadingModel, solution: Solution, doubt: Doubt) -> dict[str, Estimate]:
    estimates = {}
    for i, unknown in enumerate(model.unknowns):
        path = unknown.path
        known = (
            solution.place is not None
            and solution.verdict != "impossible"
            and (not solution.known or solution.known[i])
        )
        settled = known and solution.place is not None and not doubt.weak
        value = float(model.values(solution.place)[i]) if settled and solution.place is not None else None
        std = float(doubt.std[i]) if settled and doubt.std is not None else None
        interval: tuple[float, float] | None = None
        if settled and doubt.monte_carlo is not None:
            interval = doubt.monte_carlo.interval.get(path)
        elif (not settled or solution.held) and solution.verdict != "impossible" and not solution.others:
            ends = solution.allowed or tuple((0.0, 1.0) for _ in model.unknowns)
            places = np.array([[pair[end] for pair in ends] for end in (0, 1)])
            low, high = sorted(float(v) for v in model.values(places)[:, i])
            interval = (low, high)
        unit = dimension_named(recipe.leaves[path].dimension).si
        estimates[path] = Estimate(path, value, std, interval, unit, doubt.note if known else "")
    return estimates


def _residuals(model: ReadingModel, solution: Solution) -> tuple[Residual, ...]:
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
    own: Solution,
) -> tuple[RuleAnswer, ...]:
    solutions = {mixture.rule.name: own}
    for name in applicable_rules(recipe, mixture):
        solutions[name] = solve(recipe, mixture.with_rule(name), unknowns, readings)
    model = ReadingModel(mixture, unknowns, readings)
    answers = [
        RuleAnswer(name, _named(model, solution.place))
        if solution.verdict == "answered" and solution.place is not None
        else RuleAnswer(name, None, solution.reasons[0])
        for name, solution in solutions.items()
    ]
    for name, missing in lacking_rules(recipe, mixture).items():
        needed = " and ".join(f"mixing.{parameter}" for parameter in missing)
        answers.append(RuleAnswer(name, None, f"left out: it needs {needed}"))
    return tuple(answers)


def _family(model: ReadingModel, solution: Solution) -> dict[str, Floats] | None:
    if solution.family is None:
        return None
    values = model.values(solution.family)
    return {unknown.path: values[:, i] for i, unknown in enumerate(model.unknowns)}


def _named(model: ReadingModel, place: Floats) -> dict[str, float]:
    values = model.values(np.asarray(place))
    return {unknown.path: float(value) for unknown, value in zip(model.unknowns, values, strict=True)}


def _cautions(solution: Solution, doubt: Doubt, residuals: Sequence[Residual]) -> list[Caution]:
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
    apart = [r for r in residuals if r.standardised is None and abs(r.measured / r.predicted - 1.0) > _APART]
    if apart:
        said = ", ".join(f"{explain.NAMES[r.kind]} {r.measured:.4g} against {r.predicted:.4g}" for r in apart)
        found.append(
            Caution(
                "readings-disagree", "measured", f"the readings are not met: {said}; state ± to judge that"
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
