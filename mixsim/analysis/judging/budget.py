"""How sure one number of a piece is: each source of doubt and its share."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.fitting.doubt import Doubt
from mixsim.analysis.fitting.model import FitModel
from mixsim.analysis.judging.measurand import Measurand
from mixsim.analysis.least_squares import Fit, jacobian
from mixsim.analysis.observed.samples import Sample
from mixsim.analysis.uncertainty.first_order import halves, pairs
from mixsim.analysis.uncertainty.inputs import Uncertain

Floats = NDArray[np.float64]

RULES = "choice of the rule"
DISAGREEMENT = "disagreement of the readings"


@dataclass(frozen=True)
class Source:
    """One source of doubt.

    Attributes
    ----------
    name
        A column of readings, the path of a number, or the choice of the rule.
    std
        What one of its standard uncertainties does to the number judged, in its SI unit.
    share
        Of the variance.
    """

    name: str
    std: float
    share: float


def budget(contributions: Mapping[str, float]) -> tuple[Source, ...]:
    """Sources by their contributions, largest first; those that do nothing are left out."""
    whole = sum(value**2 for value in contributions.values())
    found = [
        Source(name, abs(value), value**2 / whole) for name, value in contributions.items() if value**2 > 0.0
    ]
    return tuple(sorted(found, key=lambda source: -source.share))


def contributions_of(
    measurand: Measurand,
    model: FitModel,
    sample: Sample,
    found: Fit,
    doubt: Doubt,
    held: Mapping[str, Uncertain],
) -> dict[str, float]:
    """What each source of doubt does to the number judged, by its name.

    Parameters
    ----------
    measurand
        What is judged.
    model, found, doubt
        The fit that it rests on.
    sample
        The piece.
    held
        Numbers with a ± that were not fitted, by name.

    Returns
    -------
    contributions
        Of each column of readings: √Σ(∂y/∂t · G)² s² over its readings. Of each held number: ∂y/∂h u(h)
        directly, and through the unknowns that move with it.
    """

    def value(t: Floats) -> Floats:
        return measurand.function(sample.mixture, model.given(sample, model.values(t)))[..., np.newaxis]

    if model.unknowns:
        slope = np.nan_to_num(jacobian(value, found.place)[0])
        per_reading = slope @ np.nan_to_num(doubt.gain) * doubt.scale
    else:
        slope, per_reading = np.zeros(0), np.zeros(model.count)
    contributions: dict[str, float] = {}
    start = 0
    for piece in model.samples:
        for one in piece.observations:
            part = per_reading[start : start + len(one.values)]
            start += len(one.values)
            contributions[one.label] = float(
                np.hypot(contributions.get(one.label, 0.0), np.linalg.norm(part))
            )
    if start < len(per_reading):
        contributions["what was known beforehand"] = float(np.linalg.norm(per_reading[start:]))
    if held:
        moved = model.holding(pairs(held))
        values = model.values(found.place)
        directly = measurand.function(sample.mixture, moved.given(sample, values))
        steps = halves(np.broadcast_to(directly, (2 * len(held),)))
        for place, name in enumerate(held):
            through = float(slope @ doubt.moved[name]) if name in doubt.moved else 0.0
            contributions[name] = float(steps[place]) + through
    return contributions
