"""What a fit answers: estimates with their doubt, what the data cannot tell apart, how well they are met."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any, Literal

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.caution import Caution
from mixsim.analysis.fitting.doubt import Combination
from mixsim.analysis.inversion.answer import Estimate
from mixsim.analysis.observed.observation import Observation
from mixsim.analysis.plain import plain, provenance
from mixsim.analysis.unknowns import Unknown
from mixsim.recipe import Recipe

Floats = NDArray[np.float64]
Verdict = Literal["answered", "undecided"]


@dataclass(frozen=True, eq=False)
class Met:
    """One column of readings beside what the fit gives.

    Attributes
    ----------
    observation
        What was read.
    predicted
        What the mixture gives there.
    standardised
        Measured less predicted in standard uncertainties.
    """

    observation: Observation
    predicted: Floats
    standardised: Floats


@dataclass(frozen=True)
class Quality:
    """How well a fit meets its readings.

    Attributes
    ----------
    readings, unknowns
        How many there are.
    reduced
        Sum of squared residuals over the degrees of freedom, near one where the stated ± are right, those of
        the held numbers included; None where there is no freedom, or no ± was stated.
    noise
        Standard deviation of the residuals where no ± was stated, as it weighs a permittivity; else None.
    aicc, bic
        Corrected Akaike and Bayesian information criteria: lower is better, by a few is much.
    """

    readings: int
    unknowns: int
    reduced: float | None
    noise: float | None
    aicc: float
    bic: float


@dataclass(frozen=True)
class RuleFit:
    """The same data under another rule.

    Attributes
    ----------
    rule
        Its name.
    values
        Estimates by name [SI].
    quality
        How well it meets the readings.
    """

    rule: str
    values: Mapping[str, float]
    quality: Quality


@dataclass(frozen=True, eq=False)
class Fitted:
    """Numbers of a recipe from readings.

    Attributes
    ----------
    recipe
        What was asked.
    rule
        Name of the mixing rule.
    unknowns
        What is looked for.
    verdict
        "answered", or "undecided" where the data do not narrow an unknown or several answers fit.
    reasons
        Why undecided.
    estimates
        One for each unknown, by name.
    correlation
        Matrix of correlation coefficients in their order, or None.
    combinations
        Products of powers of the unknowns, best fixed first.
    quality
        How well the readings are met.
    met
        Each column of readings beside what the fit gives.
    shares
        Share of the readings' noise and of each held number in the variance of each estimate.
    solutions
        Values by name of every fit that the data cannot tell from the best, where there are several.
    by_rule
        The same data under the rules that apply, best first; empty where not asked for.
    profiled
        Whether the intervals were found with the other unknowns fitted anew.
    warnings
        Cautions.
    seed
        Of the places from which it started.
    """

    recipe: Recipe
    rule: str
    unknowns: tuple[Unknown, ...]
    verdict: Verdict
    reasons: tuple[str, ...]
    estimates: Mapping[str, Estimate]
    correlation: Floats | None
    combinations: tuple[Combination, ...]
    quality: Quality
    met: tuple[Met, ...]
    shares: Mapping[str, Mapping[str, float]]
    solutions: tuple[Mapping[str, float], ...]
    by_rule: tuple[RuleFit, ...]
    profiled: bool
    warnings: tuple[Caution, ...]
    seed: int

    @property
    def identifiable(self) -> bool:
        """Whether the data give one answer."""
        return self.verdict == "answered"

    def to_dict(self) -> dict[str, Any]:
        """As JSON holds it: SI, null where there is no value."""
        return {
            "title": self.recipe.schema.title,
            "rule": self.rule,
            "verdict": self.verdict,
            "identifiable": self.identifiable,
            "reasons": list(self.reasons),
            "estimates": {
                name: {
                    "value": estimate.value,
                    "std": estimate.std,
                    "interval": None if estimate.interval is None else list(estimate.interval),
                    "unit": estimate.unit,
                    "note": estimate.note,
                }
                for name, estimate in self.estimates.items()
            },
            "correlation": None
            if self.correlation is None
            else {"paths": list(self.estimates), "matrix": plain(self.correlation)},
            "combinations": [
                {
                    "powers": dict(one.powers),
                    "std": one.std if np.isfinite(one.std) else None,
                    "fixed": one.fixed,
                }
                for one in self.combinations
            ],
            "quality": _quality(self.quality),
            "residuals": [
                {
                    "sample": met.observation.sample,
                    "quantity": met.observation.quantity,
                    "source": met.observation.source,
                    "omega_rad_s": None if met.observation.omega is None else plain(met.observation.omega),
                    "measured": plain(met.observation.values),
                    "predicted": plain(met.predicted),
                    "standardised": plain(met.standardised),
                }
                for met in self.met
            ],
            "shares": {name: dict(shares) for name, shares in self.shares.items()},
            "solutions": [dict(solution) for solution in self.solutions],
            "by_rule": [
                {"rule": one.rule, "values": dict(one.values), "quality": _quality(one.quality)}
                for one in self.by_rule
            ],
            "profiled": self.profiled,
            "warnings": [caution.to_dict() for caution in self.warnings],
            "provenance": provenance(self.recipe, self.seed),
        }


def _quality(quality: Quality) -> dict[str, Any]:
    return {
        "readings": quality.readings,
        "unknowns": quality.unknowns,
        "reduced_chi_squared": quality.reduced,
        "noise": quality.noise,
        "aicc": quality.aicc,
        "bic": quality.bic,
    }
