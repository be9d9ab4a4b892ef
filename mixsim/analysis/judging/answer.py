"""What a judgement says: verdict, probability, budget, and what would decide."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from mixsim.analysis.caution import Caution
from mixsim.analysis.judging.budget import Source
from mixsim.analysis.judging.measurand import Measurand
from mixsim.analysis.plain import provenance
from mixsim.analysis.uncertainty.conformity import Decision
from mixsim.recipe import Recipe


@dataclass(frozen=True)
class Meaning:
    """One thing that a label may have meant.

    Attributes
    ----------
    meaning
        In words.
    value
        What the number judged would be, SI.
    off
        Its distance from what was found, in standard uncertainties.
    as_read
        Whether it is the label on the basis that is judged.
    """

    meaning: str
    value: float
    off: float
    as_read: bool


@dataclass(frozen=True)
class Judged:
    """The verdict on one piece.

    Attributes
    ----------
    sample
        Its name; empty where there is but one.
    decision
        "pass", "fail" or "undecided".
    value, std
        Of the number judged, SI; None where the readings do not tell it.
    probability
        That the true value lies within the limits, or None.
    budget
        Sources of doubt, largest first.
    by_rule
        Its value under each rule that applies.
    reasons
        In words: why undecided, what would decide.
    meanings
        What the label may have meant, likeliest first; empty without one.
    """

    sample: str
    decision: Decision
    value: float | None
    std: float | None
    probability: float | None
    budget: tuple[Source, ...]
    by_rule: Mapping[str, float]
    reasons: tuple[str, ...]
    meanings: tuple[Meaning, ...] = ()


@dataclass(frozen=True, eq=False)
class Judgement:
    """Verdicts on the pieces of a recipe.

    Attributes
    ----------
    recipe
        What was asked.
    rule
        Name of the mixing rule.
    measurand
        What was judged.
    lower, upper
        Limits, SI; None where there is none.
    coverage_factor
        Standard uncertainties in the guard band; 0 for simple acceptance.
    pieces
        One verdict for each.
    calibrators
        Samples of known loading that taught the rule and are not judged.
    estimates
        What the fit found, by name, value and standard uncertainty, SI.
    warnings
        Cautions.
    """

    recipe: Recipe
    rule: str
    measurand: Measurand
    lower: float | None
    upper: float | None
    coverage_factor: float
    pieces: tuple[Judged, ...]
    calibrators: tuple[str, ...]
    estimates: Mapping[str, tuple[float | None, float | None]]
    warnings: tuple[Caution, ...]

    @property
    def decision(self) -> Decision:
        """Of all pieces: one that fails fails them, one undecided leaves them so."""
        decisions = {piece.decision for piece in self.pieces}
        return "fail" if "fail" in decisions else "undecided" if "undecided" in decisions else "pass"

    def to_dict(self) -> dict[str, Any]:
        """As JSON holds it: SI, null where there is no value."""
        return {
            "title": self.recipe.schema.title,
            "rule": self.rule,
            "of": self.measurand.name,
            "lower": self.lower,
            "upper": self.upper,
            "coverage_factor": self.coverage_factor,
            "decision": self.decision,
            "pieces": [
                {
                    "sample": piece.sample,
                    "decision": piece.decision,
                    "value": piece.value,
                    "std": piece.std,
                    "probability": piece.probability,
                    "budget": [{"source": s.name, "std": s.std, "share": s.share} for s in piece.budget],
                    "by_rule": dict(piece.by_rule),
                    "reasons": list(piece.reasons),
                    "label": [{"meaning": m.meaning, "value": m.value, "off": m.off} for m in piece.meanings],
                }
                for piece in self.pieces
            ],
            "calibrators": list(self.calibrators),
            "estimates": {
                name: {"value": value, "std": std} for name, (value, std) in self.estimates.items()
            },
            "warnings": [caution.to_dict() for caution in self.warnings],
            "provenance": provenance(self.recipe),
        }
