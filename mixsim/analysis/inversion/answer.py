"""What an inversion answers: estimates with their doubt, or why there are none."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any, Literal

from numpy.typing import NDArray

from mixsim.analysis.caution import Caution
from mixsim.analysis.plain import plain, provenance
from mixsim.analysis.unknowns import Unknown
from mixsim.recipe import Recipe

Verdict = Literal["answered", "impossible", "undecided"]


@dataclass(frozen=True)
class Reading:
    """One measured permittivity.

    Attributes
    ----------
    kind
        "static" or "high_frequency".
    value
        ε′ as read [-].
    std
        One standard uncertainty [-], or None where none is stated.
    written
        As written.
    """

    kind: str
    value: float
    std: float | None
    written: str


@dataclass(frozen=True)
class Estimate:
    """What is known of one unknown, in SI.

    Attributes
    ----------
    path
        Of the leaf.
    value
        Estimate, or None where the data give no point.
    std
        One standard uncertainty from the readings, or None where there is none (see `note`).
    interval
        95 % interval, or the values that the data allow where there is no point; or None.
    unit
        SI unit of these numbers; empty for plain numbers and fractions.
    note
        Why something is missing, or empty.
    """

    path: str
    value: float | None
    std: float | None
    interval: tuple[float, float] | None
    unit: str
    note: str = ""


@dataclass(frozen=True)
class Residual:
    """One reading beside what the answer predicts.

    Attributes
    ----------
    kind
        Of the reading.
    measured, predicted
        ε′ as read and as the estimates give it [-].
    standardised
        Their difference in standard uncertainties, or None where none is stated.
    """

    kind: str
    measured: float
    predicted: float
    standardised: float | None


@dataclass(frozen=True)
class MonteCarlo:
    """The readings drawn at random and inverted each.

    Attributes
    ----------
    draws, seed
        How many, and what makes them the same again.
    std
        Standard deviation of the answers by path [SI].
    interval
        2.5 % and 97.5 % points of the answers by path [SI].
    outside
        Share of the draws without an answer inside the ranges.
    agrees
        Whether it confirms the first-order uncertainties.
    """

    draws: int
    seed: int
    std: Mapping[str, float]
    interval: Mapping[str, tuple[float, float]]
    outside: float
    agrees: bool


@dataclass(frozen=True)
class RuleAnswer:
    """The answer under one mixing rule.

    Attributes
    ----------
    rule
        Its name.
    values
        Estimates by path [SI]; None where it gives none.
    reason
        Why not, or empty.
    """

    rule: str
    values: Mapping[str, float] | None
    reason: str = ""


@dataclass(frozen=True)
class Inversion:
    """Unknown numbers of a recipe from what was read on a sample.

    Attributes
    ----------
    recipe
        What was asked.
    rule
        Name of the mixing rule.
    readings, unknowns
        What was read, and what is looked for.
    verdict
        "answered"; "impossible" where no value of the unknowns gives the reading; "undecided" where the
        data cannot tell.
    reasons
        In words: why impossible or undecided, and what to do.
    estimates
        One for each unknown.
    correlation
        Matrix of correlation coefficients in the order of the estimates, or None.
    residuals
        One for each reading, or none.
    family
        Pairs of values that fit equally, path → array, where the data leave a curve; else None.
    solutions
        Every set of values that fits, where there are several.
    by_rule
        The answer under the recipe's rule, then under each other applicable one.
    monte_carlo
        Check of the uncertainties, or None where there are none.
    method
        "closed form" or "least squares".
    warnings
        Cautions.
    seed
        Of the Monte Carlo.
    pushed
        Numbers of the recipe whose ± is in the uncertainties, beside that of the readings.
    """

    recipe: Recipe
    rule: str
    readings: tuple[Reading, ...]
    unknowns: tuple[Unknown, ...]
    verdict: Verdict
    reasons: tuple[str, ...]
    estimates: Mapping[str, Estimate]
    correlation: NDArray[Any] | None
    residuals: tuple[Residual, ...]
    family: Mapping[str, NDArray[Any]] | None
    solutions: tuple[Mapping[str, float], ...]
    by_rule: tuple[RuleAnswer, ...]
    monte_carlo: MonteCarlo | None
    method: str
    warnings: tuple[Caution, ...]
    seed: int
    pushed: tuple[str, ...] = ()

    @property
    def identifiable(self) -> bool:
        """Whether the data give one answer."""
        return self.verdict == "answered"

    def to_dict(self) -> dict[str, Any]:
        """As JSON holds it: SI, null where there is no value."""
        check = self.monte_carlo
        return {
            "title": self.recipe.schema.title,
            "rule": self.rule,
            "verdict": self.verdict,
            "identifiable": self.identifiable,
            "reasons": list(self.reasons),
            "readings": {r.kind: {"value": r.value, "std": r.std} for r in self.readings},
            "estimates": {
                path: {
                    "value": estimate.value,
                    "std": estimate.std,
                    "interval": None if estimate.interval is None else list(estimate.interval),
                    "unit": estimate.unit,
                    "note": estimate.note,
                }
                for path, estimate in self.estimates.items()
            },
            "correlation": None
            if self.correlation is None
            else {"paths": list(self.estimates), "matrix": plain(self.correlation)},
            "residuals": {
                r.kind: {"measured": r.measured, "predicted": r.predicted, "standardised": r.standardised}
                for r in self.residuals
            },
            "family": None
            if self.family is None
            else {path: plain(values) for path, values in self.family.items()},
            "solutions": [dict(solution) for solution in self.solutions],
            "by_rule": {
                answer.rule: {
                    "values": None if answer.values is None else dict(answer.values),
                    "reason": answer.reason,
                }
                for answer in self.by_rule
            },
            "monte_carlo": None
            if check is None
            else {
                "draws": check.draws,
                "std": dict(check.std),
                "interval": {path: list(ends) for path, ends in check.interval.items()},
                "outside": check.outside,
                "agrees": check.agrees,
            },
            "method": self.method,
            "uncertainty_from": ["readings", *self.pushed],
            "warnings": [caution.to_dict() for caution in self.warnings],
            "provenance": provenance(self.recipe, self.seed),
        }
