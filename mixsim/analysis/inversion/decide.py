"""What one mixing rule makes of the readings: an answer, a curve of answers, or why there is none."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.inversion import explain
from mixsim.analysis.inversion.answer import Reading, Verdict
from mixsim.analysis.inversion.closed_form import closed_form
from mixsim.analysis.inversion.model import ReadingModel, grid
from mixsim.analysis.inversion.scan import crossings, towards_edges, valleys
from mixsim.analysis.least_squares import least_squares
from mixsim.analysis.unknowns import Unknown
from mixsim.mixture import Mixture
from mixsim.recipe import Recipe

Floats = NDArray[np.float64]

_POINTS = {1: 2001, 2: 161}  # of the scan, for each number of unknowns
_BLIND = 1e-9  # share of a reading below which it does not depend on an unknown
_EXACT = 1e-7  # share of a reading to which a fit must meet it where no uncertainty is stated
_REACH = 2.0  # standard uncertainties by which a reading may lie out of reach
_CONTRADICTION = 5.0  # … or two readings apart from what one unknown can give
_EDGE = 1e-6  # of a scaled range: nearer than that to its end, a fit is held there
_NORMAL = 1.959964  # half-width of 95 % of a normal distribution


@dataclass(frozen=True)
class Solution:
    """What one rule makes of the readings; places are scaled to the ranges.

    Attributes
    ----------
    verdict, reasons
        Whether there is an answer, and why not.
    place
        The answer, or what is known of it.
    others
        Every answer, where several fit.
    method
        "closed form" or "least squares".
    family
        Places that fit equally, on a curve.
    allowed
        Span of each unknown that the readings leave.
    known
        Which unknowns the readings see; empty: all.
    held
        Whether the place stands at the end of its range, which a reading passes by a little.
    """

    verdict: Verdict
    place: Floats | None
    reasons: tuple[str, ...] = ()
    others: tuple[Floats, ...] = ()
    method: str = "least squares"
    family: Floats | None = None
    allowed: tuple[tuple[float, float], ...] = ()
    known: tuple[bool, ...] = ()
    held: bool = False


def solve(
    recipe: Recipe, mixture: Mixture, unknowns: Sequence[Unknown], readings: Sequence[Reading]
) -> Solution:
    """The answer of one rule."""
    model = ReadingModel(mixture, unknowns, readings)
    places = grid(len(unknowns), _POINTS[len(unknowns)])
    surface = model(places)
    if len(unknowns) == 1:
        places, surface = towards_edges(model, places, surface)
    everywhere = tuple((0.0, 1.0) for _ in unknowns)
    if not np.isfinite(surface).any():
        reason = "the mixture conducts over the whole range, so that there is no static level to read"
        return Solution("undecided", None, (reason,), allowed=everywhere)

    seen = _seen(surface, readings)
    if not seen.any(axis=0).all():
        return _partly_blind(recipe, model, seen)
    for position, reading in enumerate(readings):
        if seen[position].any() and _out_of_reach(surface[..., position], reading):
            reasons = explain.impossible(recipe, model, position, surface[..., position])
            return Solution("impossible", None, reasons)
    active = [position for position in range(len(readings)) if seen[position].any()]
    if len(active) < len(unknowns):
        return _curve(model, places, surface, active[0])
    exact = closed_form(mixture, unknowns, readings)
    if exact is not None and all(u.low <= v <= u.high for u, v in zip(unknowns, exact, strict=True)):
        return Solution("answered", model.places(exact), method="closed form")
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


def _partly_blind(recipe: Recipe, model: ReadingModel, seen: NDArray[np.bool_]) -> Solution:
    """Say which unknown the readings cannot see, and answer the other one alone if there is one."""
    visible = [bool(np.any(column)) for column in seen.T]
    reasons = tuple(
        explain.blind(model, unknown)
        for unknown, shown in zip(model.unknowns, visible, strict=True)
        if not shown
    )
    allowed = tuple((0.0, 1.0) for _ in model.unknowns)
    if not any(visible):
        return Solution("undecided", None, reasons, allowed=allowed, known=tuple(visible))
    index = visible.index(True)
    alone = solve(recipe, model.mixture, [model.unknowns[index]], model.readings)
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
    return Solution("undecided", place, reasons, method=alone.method, allowed=allowed, known=tuple(visible))


def _out_of_reach(level: Floats, reading: Reading) -> bool:
    low, high = float(np.nanmin(level)), float(np.nanmax(level))
    if level.ndim > 1 and np.isnan(level).any():
        high = np.inf  # towards a percolation threshold it rises without end, between the points of a scan
    room = _REACH * reading.std if reading.std else _EXACT * abs(reading.value)
    return reading.value < low - room or reading.value > high + room


def _curve(model: ReadingModel, places: Floats, surface: Floats, active: int) -> Solution:
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
    return Solution("undecided", None, (explain.curve(model),), family=family, allowed=allowed)


def _fitted(
    recipe: Recipe, model: ReadingModel, places: Floats, surface: Floats, active: Sequence[int]
) -> Solution:
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
        return Solution("undecided", None, (reason,), others=tuple(others), allowed=spans)
    if exact and least > room:
        if any(reading.std is None for reading in model.readings) or least > _REACH**2:
            worst = int(np.argmax(np.abs((model(best) - target) * weight)))
            return Solution("impossible", None, explain.impossible(recipe, model, worst, surface[..., worst]))
        best = np.where(np.abs(best - best.round()) < _EDGE, best.round(), best)
        offset = np.abs(surface - target) * weight
        fitting = places[(offset <= _NORMAL).all(axis=-1)]
        every = np.vstack([fitting.reshape(-1, len(best)), best])
        spans = tuple((float(low), float(high)) for low, high in zip(every.min(0), every.max(0), strict=True))
        return Solution("answered", best, allowed=spans, held=True)
    if not exact and all(reading.std for reading in model.readings) and least > _CONTRADICTION**2:
        return Solution("impossible", best, explain.contradiction(model, best))
    return Solution("answered", best)


def _weights(readings: Sequence[Reading]) -> Floats:
    """One over the uncertainty of each reading, or over the reading where none is stated."""
    stated = all(reading.std for reading in readings)
    return np.array([1.0 / (r.std if stated and r.std else abs(r.value)) for r in readings])


def _meets(model: ReadingModel, target: Floats, weight: Floats) -> float:
    """Sum of squares below which a fit meets the readings."""
    return float(np.sum((_EXACT * target * weight) ** 2))
