"""Fit numbers of a recipe to readings."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.caution import Caution
from mixsim.analysis.cautions import extended
from mixsim.analysis.fitting.answer import Fitted, Met, Quality, RuleFit
from mixsim.analysis.fitting.doubt import UNIFORM, Doubt, doubt_of, profile
from mixsim.analysis.fitting.model import FitModel
from mixsim.analysis.fitting.solve import STARTS, as_good, solve
from mixsim.analysis.inversion.answer import Estimate
from mixsim.analysis.least_squares import Fit, Loss, jacobian
from mixsim.analysis.observed.gather import samples_of
from mixsim.analysis.observed.samples import Sample
from mixsim.analysis.reach import within_tables
from mixsim.analysis.rules import applicable_rules
from mixsim.analysis.suspicion import suspicions
from mixsim.analysis.uncertainty.inputs import Uncertain, uncertain_leaves
from mixsim.analysis.unknowns import Unknown, of_samples, unknowns_of
from mixsim.errors import BadInput, Refusal
from mixsim.recipe import Recipe
from mixsim.units import dimension_named

Floats = NDArray[np.float64]

_PRIOR_REACH = 6.0  # standard uncertainties to either side within which a known number is looked for
_MISFIT = 2.0  # reduced sum of squares from which it is said
_OVERFIT = 0.25  # … or below which


def fit(
    recipe: Recipe,
    data: Sequence[str | Path] = (),
    *,
    free: Sequence[Unknown] | None = None,
    noise: float | None = None,
    prior: bool = False,
    loss: Loss = "linear",
    starts: int = STARTS,
    profiled: bool = False,
    compare: bool = False,
    seed: int = 0,
    progress: Callable[[int, int], None] | None = None,
) -> Fitted:
    """Unknown numbers of a recipe from any readings on one or several samples.

    Parameters
    ----------
    recipe
        A checked recipe.
    data
        Measured spectra (CSV) in place of those that it names.
    free
        Unknowns in place of those of the recipe.
    noise
        Standard uncertainty of a spectrum that states none, as a share of its modulus [-].
    prior
        Whether the other numbers of the recipe that state a ± are fitted too, their ± being known beforehand.
        Otherwise they are held, and their ± is in the answer.
    loss
        "linear" for plain least squares; "soft_l1" or "cauchy" where some readings are out.
    starts
        How many places to start from.
    profiled
        Whether to find the intervals with the other unknowns fitted anew: slower, and right where they are
        skewed.
    compare
        Whether to fit the same data under the other rules that apply.
    seed
        Of the places to start from.
    progress
        Called with the number of starts done, and of all.

    Returns
    -------
    fitted
        Estimates with uncertainty, what the data cannot tell apart, and how well they are met.

    Raises
    ------
    BadInput
        Where unknowns or readings are missing or cannot be used.

    Examples
    --------
    >>> import mixsim
    >>> recipe = mixsim.parse('''
    ...     host.material = "polyethylene"
    ...     inclusions.filler = { material = "alumina", volume_fraction = "20 %" }
    ...     measured.readings = [
    ...         { at = "1 GHz", permittivity = "3.12 ± 0.02" },
    ...         { at = "10 GHz", permittivity = "3.08 ± 0.02" },
    ...     ]
    ...     unknowns."inclusions.filler.volume_fraction" = ["0 %", "60 %"]
    ... ''')
    >>> answer = mixsim.fit(recipe)
    >>> estimate = answer.estimates["inclusions.filler.volume_fraction"]
    >>> print(answer.verdict, recipe.show(estimate.path, estimate.value, estimate.std))
    answered 19.95 ± 0.81 %
    """
    question = asked(recipe, data, free=free, noise=noise, prior=prior)
    fits = solved(question, starts=starts, seed=seed, loss=loss, progress=progress)
    answer = answered(question, fits, profiled=profiled, seed=seed)
    if not compare:
        return answer
    return replace(answer, by_rule=_by_rule(question, fits[0], answer.quality, loss, starts, seed))


@dataclass(frozen=True, eq=False)
class Asked:
    """What a fit is asked.

    Attributes
    ----------
    recipe
        A checked recipe.
    model
        Residuals of its samples as a function of the unknowns.
    """

    recipe: Recipe
    model: FitModel


def asked(
    recipe: Recipe,
    data: Sequence[str | Path] = (),
    *,
    free: Sequence[Unknown] | None = None,
    noise: float | None = None,
    prior: bool = False,
) -> Asked:
    """Readings and unknowns gathered and checked; as `fit`."""
    samples = samples_of(recipe, [Path(file) for file in data], noise)
    for sample in samples:
        within_tables(recipe, sample.mixture, sample.omega)
    model = _model(recipe, samples, _unknowns(recipe, free, prior))
    if prior:
        model = _model(recipe, samples, _felt(model))
    if len(model.unknowns) > model.count:
        found = f"{len(model.unknowns)} unknowns and {model.count} readings"
        allowed = "no more unknowns than readings; free fewer, or say what is known beforehand"
        raise BadInput([recipe.fault("unknowns", found, allowed)])
    return Asked(recipe, model)


def solved(
    question: Asked,
    *,
    starts: int = STARTS,
    seed: int = 0,
    loss: Loss = "linear",
    progress: Callable[[int, int], None] | None = None,
) -> list[Fit]:
    """Every distinct best fit, best first; as `fit`."""
    model = question.model
    with np.errstate(all="ignore"):
        return solve(model, _own(model), starts=starts, seed=seed, loss=loss, progress=progress)


def _unknowns(recipe: Recipe, free: Sequence[Unknown] | None, prior: bool) -> tuple[Unknown, ...]:
    own = () if free else of_samples(recipe)
    shared = () if own and not recipe.schema.unknowns else unknowns_of(recipe, free)
    unknowns = [*shared, *own]
    if prior:
        taken = {unknown.path for unknown in unknowns}
        for path, number in uncertain_leaves(recipe, without=taken).items():
            reach = _PRIOR_REACH * number.std
            low = max(number.minimum, number.value - reach)
            high = min(number.maximum, number.value + reach)
            unknowns.append(Unknown(path, low, high, "", (number.value, number.std)))
    return tuple(unknowns)


def _model(recipe: Recipe, samples: Sequence[Sample], unknowns: Sequence[Unknown]) -> FitModel:
    try:
        return FitModel(samples, unknowns)
    except Refusal as refusal:
        raise BadInput([recipe.fault("measured", refusal.found, refusal.allowed)]) from None


def _felt(model: FitModel) -> list[Unknown]:
    """Unknowns without those known beforehand that the readings do not feel."""
    slopes = np.nan_to_num(jacobian(model.predicted, _own(model)))
    return [u for i, u in enumerate(model.unknowns) if u.prior is None or slopes[:, i].any()]


def _own(model: FitModel) -> Floats:
    """The recipe's own values as a scaled place, those outside their range at its middle."""
    values = np.array([model.samples[0].mixture.defaults[u.path] for u in model.unknowns])
    lows = np.array([u.low for u in model.unknowns])
    highs = np.array([u.high for u in model.unknowns])
    inside = (values > lows) & (values < highs)
    middle = model.values(np.full(len(values), 0.5))
    return model.places(np.where(inside, values, middle))


def answered(question: Asked, fits: list[Fit], *, profiled: bool = False, seed: int = 0) -> Fitted:
    """What some fits say, with its doubt; as `fit`."""
    with np.errstate(all="ignore"):
        return _answered(question.recipe, question.model, fits, profiled, seed)


def _answered(recipe: Recipe, model: FitModel, fits: list[Fit], profiled: bool, seed: int) -> Fitted:
    best = fits[0]
    doubt = doubt_of(model, best, held_numbers(recipe, model))
    several = as_good(fits, doubt.scale)
    reasons = _reasons(model, best, doubt, several)
    quality = _quality(model, best, doubt)
    predicted = model.predicted(best.place)
    met, start = [], 0
    for sample in model.samples:
        for one in sample.observations:
            part = slice(start, start := start + len(one.values))
            off = (one.values - predicted[part]) / (model.std[part] * doubt.scale)
            met.append(Met(one, predicted[part], off))
    return Fitted(
        recipe=recipe,
        rule=model.samples[0].mixture.rule.name,
        unknowns=model.unknowns,
        verdict="undecided" if reasons else "answered",
        reasons=reasons,
        estimates=_estimates(recipe, model, best, doubt, profiled and not reasons),
        correlation=_correlation(doubt.covariance),
        combinations=doubt.combinations,
        quality=quality,
        met=tuple(met),
        shares=_shares(model, doubt),
        solutions=tuple(_named(model, found.place) for found in several) if len(several) > 1 else (),
        by_rule=(),
        profiled=profiled and not reasons,
        warnings=(*suspicions(recipe), *_extended(model), *_cautions(model, best, quality, met)),
        seed=seed,
    )


def held_numbers(recipe: Recipe, model: FitModel) -> dict[str, Uncertain]:
    """Numbers with a ± that are not fitted, by name: those of the recipe, and those set for one sample."""
    free = {unknown.path for unknown in model.unknowns}
    own = {(unknown.path, unknown.sample) for unknown in model.unknowns}
    everywhere = set.intersection(*(set(sample.uncertain) for sample in model.samples))
    held = uncertain_leaves(recipe, without=free | everywhere)
    for sample in model.samples:
        held |= {
            f"samples.{sample.name}.{path}": number
            for path, number in sample.uncertain.items()
            if (path, sample.name) not in own
        }
    return held


def _reasons(model: FitModel, best: Fit, doubt: Doubt, several: list[Fit]) -> tuple[str, ...]:
    reasons = []
    if len(several) > 1:
        reasons.append(f"{len(several)} sets of values meet the readings equally well: narrow the ranges")
    std = np.sqrt(np.diag(doubt.covariance))
    blind = np.abs(best.slopes).max(axis=0) <= 1e-12 * max(float(np.abs(best.slopes).max()), 1e-300)
    for i, unknown in enumerate(model.unknowns):
        if blind[i]:
            reasons.append(f"the readings do not depend on {unknown.name}")
        elif not std[i] <= UNIFORM:
            reasons.append(f"the readings narrow {unknown.name} no further than the range that was given")
    return tuple(reasons)


def _quality(model: FitModel, best: Fit, doubt: Doubt) -> Quality:
    """Reduced sum of squares or noise, and the information criteria."""
    n, k = model.count, len(model.unknowns)
    freedom = n - k
    square = float(np.sum(best.residual**2))
    if model.scaled:
        k += 1  # the size of the noise is found too
        level = n * float(np.log(max(square, 1e-300) / n))
    else:
        level = square
    room = n - k - 1
    return Quality(
        readings=n,
        unknowns=len(model.unknowns),
        reduced=doubt.explained / freedom if freedom > 0 and not model.scaled else None,
        noise=doubt.scale if model.scaled and freedom > 0 else None,
        aicc=level + 2 * k + (2 * k * (k + 1) / room if room > 0 else np.inf),
        bic=level + k * float(np.log(n)),
    )


def _estimates(
    recipe: Recipe, model: FitModel, best: Fit, doubt: Doubt, profiled: bool
) -> dict[str, Estimate]:
    values, slopes = model.values(best.place), np.abs(model.slopes(best.place))
    std = np.sqrt(np.diag(doubt.covariance))
    reach = _reach(model) * std
    low, high = (model.values(np.clip(best.place + side * reach, 0.0, 1.0)) for side in (-1.0, 1.0))
    ends = profile(model, best, doubt) if profiled else list(zip(low.tolist(), high.tolist(), strict=True))
    estimates = {}
    for i, unknown in enumerate(model.unknowns):
        known = bool(std[i] <= UNIFORM)
        estimates[unknown.name] = Estimate(
            unknown.path,
            float(values[i]) if known else None,
            float(std[i] * slopes[i]) if known and not best.held[i] else None,
            (min(ends[i]), max(ends[i])) if known else (unknown.low, unknown.high),
            dimension_named(recipe.leaves[unknown.path].dimension).si,
            "at the end of its range" if known and best.held[i] else "",
        )
    return estimates


def _reach(model: FitModel) -> float:
    """Standard uncertainties to either side that hold 95 %; more where few readings tell the noise."""
    from scipy.special import stdtrit

    freedom = model.count - len(model.unknowns)
    return float(stdtrit(freedom, 0.975)) if model.scaled and freedom > 0 else 1.959964


def _correlation(covariance: Floats) -> Floats | None:
    std = np.sqrt(np.diag(covariance))
    return np.asarray(covariance / np.outer(std, std)) if np.isfinite(std).all() and std.all() else None


def _shares(model: FitModel, doubt: Doubt) -> dict[str, dict[str, float]]:
    whole = np.diag(doubt.covariance)
    statistical = np.diag(doubt.statistical) / whole
    return {
        unknown.name: {
            "readings": float(statistical[i]),
            **{name: float(moved[i] ** 2 / whole[i]) for name, moved in doubt.moved.items()},
        }
        for i, unknown in enumerate(model.unknowns)
        if np.isfinite(statistical[i])
    }


def _named(model: FitModel, place: Floats) -> dict[str, float]:
    values = model.values(place)
    return {unknown.name: float(value) for unknown, value in zip(model.unknowns, values, strict=True)}


def _by_rule(
    question: Asked, best: Fit, quality: Quality, loss: Loss, starts: int, seed: int
) -> tuple[RuleFit, ...]:
    recipe, model = question.recipe, question.model
    mixture = model.samples[0].mixture
    found = [RuleFit(mixture.rule.name, _named(model, best.place), quality)]
    for name in applicable_rules(recipe, mixture):
        samples = [replace(sample, mixture=sample.mixture.with_rule(name)) for sample in model.samples]
        other = FitModel(samples, model.unknowns)
        with np.errstate(all="ignore"):
            fitted = solve(other, best.place, starts=starts, seed=seed, loss=loss)[0]
        found.append(
            RuleFit(name, _named(other, fitted.place), _quality(other, fitted, doubt_of(other, fitted, {})))
        )
    return tuple(sorted(found, key=lambda one: one.quality.aicc))


def _extended(model: FitModel) -> list[Caution]:
    found = (caution for sample in model.samples for caution in extended(sample.mixture, sample.omega))
    return list(dict.fromkeys(found))


def _cautions(model: FitModel, best: Fit, quality: Quality, met: Sequence[Met]) -> list[Caution]:
    found = []
    if quality.reduced is not None and quality.reduced > _MISFIT:
        worst = max(met, key=lambda one: float(np.nanmean(one.standardised**2)))
        found.append(
            Caution(
                "misfit",
                "",
                f"the readings are missed by more than their ± (reduced χ² {quality.reduced:.3g}, most by "
                f"{worst.observation.label}): the model lacks something, or ± is too small; the "
                f"uncertainties of the estimates hold for neither",
            )
        )
    if quality.reduced is not None and quality.reduced < _OVERFIT and model.count - quality.unknowns > 5:
        found.append(
            Caution(
                "misfit",
                "",
                f"the readings scatter less than their ± (reduced χ² {quality.reduced:.3g}): it is too "
                f"large, or they are not independent",
            )
        )
    for unknown, value in zip(model.unknowns, model.values(best.place), strict=True):
        if unknown.path.endswith("fraction") and value < 0.0:
            found.append(
                Caution(
                    "negative-fraction",
                    unknown.path,
                    "no fraction is negative: it speaks against the rule, or a number that the fit rests on",
                )
            )
    held = [u.name for u, end in zip(model.unknowns, best.held, strict=True) if end]
    if held:
        found.append(
            Caution(
                "held", held[0], f"the fit stands at the end of the range of {' and '.join(held)}: widen it"
            )
        )
    return found
