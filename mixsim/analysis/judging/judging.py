"""Judge pieces: what was read on them, set against their limits."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from pathlib import Path

import numpy as np

from mixsim.analysis.caution import Caution
from mixsim.analysis.cautions import extended
from mixsim.analysis.fitting.answer import Fitted
from mixsim.analysis.fitting.doubt import UNIFORM, Doubt, doubt_of
from mixsim.analysis.fitting.fitting import Asked, answered, asked, held_numbers, solved
from mixsim.analysis.fitting.model import FitModel
from mixsim.analysis.fitting.solve import solve
from mixsim.analysis.judging.answer import Judged, Judgement, Meaning
from mixsim.analysis.judging.budget import DISAGREEMENT, RULES, Source, budget, contributions_of
from mixsim.analysis.judging.label import meanings_of
from mixsim.analysis.judging.measurand import Measurand, measurand_of
from mixsim.analysis.least_squares import Fit, jacobian
from mixsim.analysis.observed.samples import Sample
from mixsim.analysis.rules import applicable_rules
from mixsim.analysis.uncertainty.conformity import acceptance_zone, conformance_probability, decide
from mixsim.analysis.uncertainty.inputs import Uncertain
from mixsim.analysis.unknowns import Unknown
from mixsim.errors import BadInput, Refusal
from mixsim.recipe import Recipe

COVERAGE = 2.0
_MATCHES = 2.0  # standard uncertainties within which a label holds


@dataclass(frozen=True, eq=False)
class Limits:
    """What a piece must be, SI.

    Attributes
    ----------
    measurand
        What is judged.
    lower, upper
        Limits; None where there is none.
    coverage_factor
        Standard uncertainties in the guard band; 0 for simple acceptance.
    spread
        Whether the choice of the rule is a source of doubt.
    """

    measurand: Measurand
    lower: float | None
    upper: float | None
    coverage_factor: float
    spread: bool


def judge(
    recipe: Recipe,
    data: Sequence[str | Path] = (),
    *,
    free: Sequence[Unknown] | None = None,
    noise: float | None = None,
    seed: int = 0,
) -> Judgement:
    """Whether each piece passes, in the light of how sure that is.

    Parameters
    ----------
    recipe
        A checked recipe with `[acceptance]`, and with readings in `[measured]` or `[[samples]]`.
    data
        Measured spectra (CSV) in place of those that it names.
    free, noise, seed
        As in `fit`.

    Returns
    -------
    judgement
        For each piece a verdict, its probability, the sources of its doubt, and what would decide.

    Raises
    ------
    BadInput
        Where limits, readings or unknowns are missing or cannot be used.

    Notes
    -----
    Guarded acceptance and rejection: pass within the limits less the guard band, fail beyond the limits and
    the guard band, undecided between. The uncertainty is first order, from the readings, from every number of
    the recipe with a ±, and from the spread of the rules that apply, taken as rectangular. Readings that
    contradict each other widen it by their scatter over their ±, as is common practice.

    References
    ----------
    JCGM 106:2012, 8.3; JCGM 100:2008, 5.1 and 4.3.7.

    Examples
    --------
    >>> import mixsim
    >>> recipe = mixsim.parse('''
    ...     host.material = "polyethylene"
    ...     inclusions.filler = { material = "alumina", volume_fraction = "20 %", contact = "insulated" }
    ...     measured.static = "3.10 ± 0.01"
    ...     unknowns."inclusions.filler.volume_fraction" = ["0 %", "60 %"]
    ...     [acceptance]
    ...     of = "inclusions.filler.volume_fraction"
    ...     lower = "18 %"
    ...     upper = "22 %"
    ...     model_uncertainty = "none"
    ... ''')
    >>> judgement = mixsim.judge(recipe)
    >>> print(judgement.decision, f"{judgement.pieces[0].probability:.3f}")
    pass 0.990
    """
    limits = limits_of(recipe)
    question = asked(recipe, data, free=free, noise=noise)
    fits = solved(question, seed=seed)
    fitted = answered(question, fits, seed=seed)
    model, best = question.model, fits[0]
    held = held_numbers(recipe, model)
    doubt = doubt_of(model, best, held)
    pieces = [sample for sample in model.samples if not sample.calibrates]
    if not pieces:
        allowed = "at least one sample without calibrates"
        raise BadInput([recipe.fault("samples", "every sample calibrates, none is left to judge", allowed)])
    others = _other_rules(question, best, limits, seed) if limits.spread else {}
    try:
        verdicts = tuple(
            _judged(recipe, limits, model, sample, best, doubt, held, fitted, others) for sample in pieces
        )
    except Refusal as refusal:
        raise BadInput([recipe.fault("acceptance.of", refusal.found, refusal.allowed)]) from None
    return Judgement(
        recipe=recipe,
        rule=fitted.rule,
        measurand=limits.measurand,
        lower=limits.lower,
        upper=limits.upper,
        coverage_factor=limits.coverage_factor,
        pieces=verdicts,
        calibrators=tuple(sample.name for sample in model.samples if sample.calibrates),
        estimates={name: (found.value, found.std) for name, found in fitted.estimates.items()},
        warnings=tuple(
            dict.fromkeys((*fitted.warnings, *continued(recipe, pieces), *_cautions(limits, verdicts)))
        ),
    )


def continued(recipe: Recipe, pieces: Sequence[Sample]) -> Iterator[Caution]:
    """Tables that the frequency of what is judged lies beyond."""
    acceptance = recipe.schema.acceptance
    if acceptance is not None and acceptance.at is not None:
        for piece in pieces:
            yield from extended(piece.mixture, np.array([acceptance.at.value]))


def limits_of(recipe: Recipe) -> Limits:
    """The limits of a recipe, read.

    Raises
    ------
    BadInput
        Where there are none, or they cannot be used.
    """
    given = recipe.schema.acceptance
    if given is None:
        allowed = 'such as of = "density", lower = "1.8 g/cm^3", upper = "1.9 g/cm^3"'
        raise BadInput([recipe.fault("acceptance", "no limits to judge by", allowed)])
    measurand = measurand_of(recipe, given.of, given.at)
    ends: dict[str, float | None] = {}
    for key in ("lower", "upper"):
        text = getattr(given, key)
        try:
            ends[key] = None if text is None else measurand.read(text).value
        except Refusal as refusal:
            fault = recipe.fault(f"acceptance.{key}", refusal.found, refusal.allowed, refusal.suggestion)
            raise BadInput([fault]) from None
    lower, upper = ends["lower"], ends["upper"]
    if lower is None and upper is None:
        raise BadInput([recipe.fault("acceptance", "neither lower nor upper", "give one of them, or both")])
    if lower is not None and upper is not None and lower > upper:
        found = f"lower {given.lower!r} is above upper {given.upper!r}"
        raise BadInput([recipe.fault("acceptance.lower", found, "lower is the smaller one")])
    factor = COVERAGE if given.coverage_factor is None else given.coverage_factor.value
    if given.decision == "simple":
        if given.coverage_factor is not None:
            found = "a coverage factor beside simple acceptance"
            raise BadInput(
                [recipe.fault("acceptance.coverage_factor", found, "leave it out, or say guarded")]
            )
        factor = 0.0
    return Limits(measurand, lower, upper, factor, given.model_uncertainty == "rule-spread")


def _other_rules(question: Asked, best: Fit, limits: Limits, seed: int) -> dict[str, tuple[FitModel, Fit]]:
    """The same data fitted under each other rule that applies and meets them as well."""
    model = question.model
    found = {}
    for name in applicable_rules(question.recipe, model.samples[0].mixture):
        samples = [replace(sample, mixture=sample.mixture.with_rule(name)) for sample in model.samples]
        other = FitModel(samples, model.unknowns)
        with np.errstate(all="ignore"):
            fit = solve(other, best.place, starts=3, seed=seed)[0]
        # a rule that misses the readings, or only meets them at the end of a range, is no alternative
        if not fit.held.any() and fit.cost <= 4.0 * max(best.cost, float(model.count)):
            found[name] = (other, fit)
    return found


def _judged(
    recipe: Recipe,
    limits: Limits,
    model: FitModel,
    sample: Sample,
    best: Fit,
    doubt: Doubt,
    held: Mapping[str, Uncertain],
    fitted: Fitted,
    others: Mapping[str, tuple[FitModel, Fit]],
) -> Judged:
    measurand = limits.measurand
    value = _value(measurand, model, sample, best)
    if not fitted.identifiable and not _told(measurand, model, sample, best, doubt):
        return Judged(sample.name, "undecided", None, None, None, (), {}, fitted.reasons)
    contributions = contributions_of(measurand, model, sample, best, doubt, held)
    if fitted.quality.reduced is not None and fitted.quality.reduced > 1.0:
        # readings that contradict each other widen the answer by the ratio of their scatter to their ±
        read = np.linalg.norm([v for name, v in contributions.items() if name not in held])
        contributions[DISAGREEMENT] = float(read * np.sqrt(fitted.quality.reduced - 1.0))
    by_rule = {sample.mixture.rule.name: value}
    for name, (other, fit) in others.items():
        piece = next(one for one in other.samples if one.name == sample.name)
        by_rule[name] = _value(measurand, other, piece, fit)
    if len(by_rule) > 1:
        # any of the rules may be right: rectangular from the farthest one on either side
        contributions[RULES] = max(abs(found - value) for found in by_rule.values()) / np.sqrt(3.0)
    sources = budget(contributions)
    std = float(np.sqrt(sum(source.std**2 for source in sources)))
    guard = limits.coverage_factor * std
    decision = decide(value, lower=limits.lower, upper=limits.upper, guard=guard)
    label = recipe.schema.measured.label if recipe.schema.measured is not None else None
    meanings: tuple[Meaning, ...] = ()
    if label is not None and std > 0.0:
        try:
            meanings = meanings_of(recipe, sample.mixture, measurand, label, value, std)
        except Refusal as refusal:
            raise BadInput([recipe.fault("measured.label", refusal.found, refusal.allowed)]) from None
    return Judged(
        sample.name,
        decision,
        value,
        std,
        conformance_probability(value, std, lower=limits.lower, upper=limits.upper),
        sources,
        by_rule,
        _reasons(limits, value, std, decision, sources),
        meanings,
    )


def _value(measurand: Measurand, model: FitModel, sample: Sample, found: Fit) -> float:
    given = model.given(sample, model.values(found.place))
    return float(measurand.function(sample.mixture, given))


def _told(measurand: Measurand, model: FitModel, sample: Sample, best: Fit, doubt: Doubt) -> bool:
    """Whether the number judged is told although not every unknown is: it may rest on a product of them."""
    if not np.isfinite(doubt.covariance).all():
        return False

    def value(t: np.ndarray) -> np.ndarray:
        return measurand.function(sample.mixture, model.given(sample, model.values(t)))[..., np.newaxis]

    slope = jacobian(value, best.place)[0]
    spread = float(np.sqrt(slope @ doubt.covariance @ slope))
    return bool(spread < UNIFORM * float(np.abs(slope).sum()))


def _reasons(
    limits: Limits, value: float, std: float, decision: str, sources: Sequence[Source]
) -> tuple[str, ...]:
    """Why undecided, and what would decide."""
    reasons = []
    show = limits.measurand.show
    guard = limits.coverage_factor * std
    if acceptance_zone(lower=limits.lower, upper=limits.upper, guard=guard) is None:
        assert limits.lower is not None and limits.upper is not None
        most = (limits.upper - limits.lower) / 2.0 / limits.coverage_factor
        reasons.append(
            f"this method cannot support this specification: a ± of {show(std)} leaves nothing between the "
            f"limits and their guard bands; it would have to be below {show(most)}"
        )
    if decision == "undecided":
        near = [abs(end - value) for end in (limits.lower, limits.upper) if end is not None]
        if limits.coverage_factor > 0.0:
            needed = min(near) / limits.coverage_factor
            reasons.append(f"a ± of {show(needed)} or less, in place of {show(std)}, would decide")
        if sources:
            first = sources[0]
            reasons.append(f"most of it comes from {first.name} ({first.share:.0%} of the variance)")
    return tuple(reasons)


def _cautions(limits: Limits, verdicts: Sequence[Judged]) -> list[Caution]:
    """A label that does not hold on the basis judged, and does on another."""
    found = []
    for piece in verdicts:
        as_read = [meaning for meaning in piece.meanings if meaning.as_read]
        if not as_read or as_read[0].off <= _MATCHES or piece.meanings[0].off > _MATCHES:
            continue
        best, show = piece.meanings[0], limits.measurand.show
        found.append(
            Caution(
                "label",
                "measured.label",
                f"the label does not hold {as_read[0].meaning}; it does {best.meaning}, which is "
                f"{show(best.value)} here",
            )
        )
    return found
