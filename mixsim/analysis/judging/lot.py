"""Judge a table of pieces at once: one row a piece, one verdict a row; a bad row stops nothing."""

from __future__ import annotations

import csv
import re
from collections import Counter
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.cautions import extended
from mixsim.analysis.fitting.fitting import Asked, asked
from mixsim.analysis.fitting.model import FitModel
from mixsim.analysis.judging.judging import Limits, continued, limits_of
from mixsim.analysis.judging.measurand import Measurand
from mixsim.analysis.least_squares import gauss_newton, jacobian
from mixsim.analysis.observed.observation import Observation
from mixsim.analysis.plain import provenance
from mixsim.analysis.uncertainty.conformity import conformance_probability, decide
from mixsim.analysis.uncertainty.first_order import halves, pairs
from mixsim.analysis.uncertainty.inputs import uncertain_leaves
from mixsim.analysis.unknowns import Unknown
from mixsim.errors import BadInput, Fault
from mixsim.recipe import Recipe
from mixsim.units import from_unit, written_unit

Floats = NDArray[np.float64]

_LOOKS = 400  # places over the ranges from which each piece starts at the nearest
_MISSED = 5.0  # standard uncertainties by which a fit may miss a reading before the row is refused
_AT_ONCE = 500  # pieces fitted in one go: bounds the memory


@dataclass(frozen=True)
class Row:
    """The verdict on one piece of a lot.

    Attributes
    ----------
    sample
        Its name in the table.
    decision
        "pass", "fail", "undecided", or "refused" where its row cannot be used.
    value, std
        Of the number judged, SI, or None.
    probability
        That the true value lies within the limits, or None.
    reason
        Why refused or undecided; empty else.
    """

    sample: str
    decision: str
    value: float | None
    std: float | None
    probability: float | None
    reason: str = ""


@dataclass(frozen=True, eq=False)
class Lot:
    """Verdicts on a table of pieces.

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
    rows
        One for each piece, in the order of the table.
    """

    recipe: Recipe
    rule: str
    measurand: Measurand
    lower: float | None
    upper: float | None
    rows: tuple[Row, ...]
    warnings: tuple[Any, ...] = ()

    @property
    def counts(self) -> dict[str, int]:
        """How many passed, failed, and so on."""
        found = Counter(row.decision for row in self.rows)
        return {word: found[word] for word in ("pass", "fail", "undecided", "refused")}

    @property
    def decision(self) -> str:
        """Of the whole lot: "fail" where any fails, else "undecided" where any is or cannot be used."""
        counts = self.counts
        if counts["fail"]:
            return "fail"
        return "undecided" if counts["undecided"] or counts["refused"] else "pass"

    def to_dict(self) -> dict[str, Any]:
        """As JSON holds it: SI, null where there is no value."""
        return {
            "title": self.recipe.schema.title,
            "rule": self.rule,
            "of": self.measurand.name,
            "lower": self.lower,
            "upper": self.upper,
            "decision": self.decision,
            "counts": self.counts,
            "rows": [
                {
                    "sample": row.sample,
                    "decision": row.decision,
                    "value": row.value,
                    "std": row.std,
                    "probability": row.probability,
                    "reason": row.reason,
                }
                for row in self.rows
            ],
            "provenance": provenance(self.recipe),
        }


def judge_lot(recipe: Recipe, file: str | Path, *, free: Sequence[Unknown] | None = None) -> Lot:
    """Judge every row of a table of readings.

    Parameters
    ----------
    recipe
        A checked recipe with `[acceptance]`, whose `[measured]` names the readings that the table holds: its
        numbers are those of one piece, and its ± holds for every row.
    file
        CSV with a column `sample` and one for each reading: `static`, `high_frequency`, `density`, `ash`
        or, of `readings`, `permittivity at 1 MHz` with the frequency as the recipe writes it. Numbers are in
        the unit in which the recipe writes that reading.
    free
        Unknowns in place of those of the recipe.

    Returns
    -------
    lot
        A verdict for each row; a row that cannot be used is refused with its reason.

    Raises
    ------
    BadInput
        Where the table as a whole cannot be used.

    Notes
    -----
    All pieces are fitted at once, each from the nearest of some places over the ranges. The uncertainty is
    first order, from the readings and from the numbers of the recipe with a ±; the choice of the rule is not
    in it.
    """
    limits = limits_of(recipe)
    question = asked(recipe, free=free)
    model = question.model
    if len(model.samples) != 1 or model.scaled:
        allowed = "one [measured] with a ± for each reading, which holds for every row"
        raise BadInput([recipe.fault("measured", "a lot is read as one piece is", allowed)])
    place = Path(file)
    names, values, faults = _read(place, recipe, model.samples[0].observations)
    verdicts = _verdicts(question, limits, values)
    rows = tuple(
        Row(name, "refused", None, None, None, fault) if fault else verdict_of(name, *verdict, limits)
        for name, fault, verdict in zip(names, faults, verdicts, strict=True)
    )
    rule = model.samples[0].mixture.rule.name
    (sample,) = model.samples
    said = dict.fromkeys((*extended(sample.mixture, sample.omega), *continued(recipe, [sample])))
    return Lot(recipe, rule, limits.measurand, limits.lower, limits.upper, rows, tuple(said))


def verdict_of(name: str, value: float, std: float, off: float, limits: Limits) -> Row:
    """The verdict on a number and its uncertainty; `off` is how far the fit misses the readings, in ±."""
    if not np.isfinite(value):
        return Row(name, "refused", None, None, None, "no value of the unknowns gives these readings")
    if off > _MISSED:
        reason = f"the readings are missed by {off:.2g} standard uncertainties"
        return Row(name, "refused", value, std, None, reason)
    guard = limits.coverage_factor * std
    decision = decide(value, lower=limits.lower, upper=limits.upper, guard=guard)
    chance = conformance_probability(value, std, lower=limits.lower, upper=limits.upper)
    return Row(name, decision, value, std, chance)


def _verdicts(question: Asked, limits: Limits, readings: Floats) -> list[tuple[float, float, float]]:
    """Value, standard uncertainty, and largest miss of each piece."""
    model = question.model
    held = uncertain_leaves(question.recipe, without={unknown.path for unknown in model.unknowns})
    weight = 1.0 / model.std
    with np.errstate(all="ignore"):
        random = np.random.default_rng(0)
        looks = random.random((_LOOKS * max(1, len(model.unknowns)), len(model.unknowns)))
        there = model.predicted(looks)
        found: list[tuple[float, float, float]] = []
        for start in range(0, len(readings), _AT_ONCE):
            targets = readings[start : start + _AT_ONCE]
            off = np.nansum(((there - targets[:, np.newaxis, :]) * weight) ** 2, axis=-1)
            off[:, ~np.isfinite(there).all(axis=-1)] = np.inf
            places, _ = gauss_newton(model.predicted, targets, weight, looks[np.argmin(off, axis=1)])
            found += _doubted(model, limits, places, targets, weight, held)
    return found


def _doubted(
    model: FitModel, limits: Limits, places: Floats, targets: Floats, weight: Floats, held: Mapping[str, Any]
) -> list[tuple[float, float, float]]:
    sample = model.samples[0]

    def value(t: Floats) -> Floats:
        found = limits.measurand.function(sample.mixture, model.given(sample, model.values(t)))
        return np.broadcast_to(found, t.shape[:-1])[..., np.newaxis]

    slopes = jacobian(model.predicted, places) * weight[:, np.newaxis]
    gain = np.linalg.pinv(np.nan_to_num(slopes))
    steep = jacobian(value, places)[:, 0, :]
    by_reading = np.einsum("mu,mur->mr", steep, gain)
    variance = np.sum(by_reading**2, axis=-1)
    for name, number in held.items():
        moved = model.holding(pairs({name: number}))
        here = places[np.newaxis]
        effect = -halves(moved.predicted(np.broadcast_to(here, (2, *places.shape)))) * weight
        directly = limits.measurand.function(sample.mixture, moved.given(sample, model.values(here)))
        step = halves(np.broadcast_to(directly, (2, len(places))))[0]
        variance = variance + (step + np.einsum("mr,mr->m", by_reading, effect[0])) ** 2
    off = np.abs((targets - model.predicted(places)) * weight).max(axis=-1)
    values = value(places)[..., 0]
    return list(zip(values.tolist(), np.sqrt(variance).tolist(), off.tolist(), strict=True))


def _read(file: Path, recipe: Recipe, wanted: Sequence[Observation]) -> tuple[list[str], Floats, list[str]]:
    """Names, readings (NaN where a cell cannot be used) and what is wrong with each row."""
    columns = {_heading(one): place for place, one in enumerate(wanted)}
    try:
        with file.open(encoding="utf-8-sig", newline="") as stream:
            rows = [row for row in csv.reader(stream) if row and not row[0].startswith("#")]
    except FileNotFoundError:
        raise _fault(file, "no such file", "a table of readings (CSV)") from None
    except (OSError, UnicodeDecodeError, csv.Error) as error:
        raise _fault(file, str(error), "a table of readings (CSV) in UTF-8") from None
    if not rows:
        raise _fault(file, "it is empty", "a header and one row for each piece")
    header = [cell.strip() for cell in rows[0]]
    for needed in ("sample", *columns):
        if needed not in header:
            raise _fault(file, f"no column {needed!r}", f"the columns are sample, {', '.join(columns)}")
    for name in header:
        if name not in columns and name != "sample":
            raise _fault(file, f"unknown column {name!r}", f"the columns are sample, {', '.join(columns)}")
    places = [header.index(name) for name in columns]
    scales = [_scale(recipe, one) for one in wanted]
    names, faults = [], []
    values = np.full((len(rows) - 1, len(columns)), np.nan)
    for number, row in enumerate(rows[1:]):
        cells = [cell.strip() for cell in row]
        label = cells[header.index("sample")] if len(cells) > header.index("sample") else ""
        names.append(label or f"row {number + 1}")
        fault = ""
        if len(cells) != len(header):
            fault = f"{len(cells)} cells under a header of {len(header)}"
        else:
            for column, place in enumerate(places):
                if re.fullmatch(r"[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d+)?", cells[place]):
                    values[number, column] = scales[column](float(cells[place]))
                else:
                    fault = f"{cells[place]!r} for {list(columns)[column]}"
        faults.append(fault)
    return names, values, faults


def _scale(recipe: Recipe, one: Observation) -> Callable[[float], float]:
    """From the unit in which the recipe writes a reading to SI."""
    measured = recipe.schema.measured
    if one.omega is None and measured is not None:
        leaf = getattr(measured, one.quantity)
        unit = written_unit(leaf)
        if unit:
            return lambda value: float(from_unit(value, unit, leaf.dimension))
    return lambda value: value


def _heading(one: Observation) -> str:
    """How the table calls a reading."""
    if one.omega is None:
        return one.quantity
    return f"{one.quantity.removesuffix('_real')} at {one.source.rpartition(' at ')[2]}"


def _fault(file: Path, found: str, allowed: str) -> BadInput:
    return BadInput([Fault(str(file), "", found, allowed)])
