"""The plot of an inversion: readings beside the model, and what they leave open."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np

from mixsim.analysis import Inversion, Unknown
from mixsim.analysis.inversion.model import ReadingModel, grid
from mixsim.present.plots.style import (
    DASHED,
    DOTTED,
    INK,
    MUTED,
    STRONG,
    headed,
    legend_below,
    log_axis,
    note,
    path_label,
    with_raised,
)
from mixsim.units import to_unit, written_unit

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

WINDOW = 6.0  # standard uncertainties on either side of a sharp estimate
WIDE = 50.0  # ratio of the ends of a range from which its axis is logarithmic
REACH = 5  # lines that show what a model gives where it never meets a reading
NAMES = {"static": "static", "high_frequency": "high-frequency"}
SPREAD = "±1 standard uncertainty"


def draw(figure: Figure, answer: Inversion) -> None:
    """Draw an inversion of one or two unknowns."""
    model = ReadingModel(answer.recipe.compile(), answer.unknowns, answer.readings)
    axes = figure.subplots()
    (one_unknown if len(answer.unknowns) == 1 else two_unknowns)(axes, answer, model)
    headed(figure, answer.recipe.schema.title or "inversion", f"{answer.rule}: {answer.verdict}")
    legend_below(figure, *axes.get_legend_handles_labels())


def one_unknown(axes: Axes, answer: Inversion, model: ReadingModel) -> Axes:
    """Each reading with its ± against what the model gives over the range, and the estimate."""
    path = answer.unknowns[0].path
    places = grid(1, 401)
    with np.errstate(all="ignore"):
        levels = model(places)
    x = _shown(answer, path, model.values(places)[:, 0])
    for reading, level, colour in zip(answer.readings, levels.T, STRONG, strict=False):
        name = NAMES[reading.kind]
        axes.plot(x, level, color=colour, lw=1.8, label=f"{name}, model")
        axes.axhline(reading.value, color=colour, lw=1.0, ls=DASHED, label=f"{name}, read {reading.written}")
        if reading.std:
            low, high = reading.value - reading.std, reading.value + reading.std
            axes.axhspan(low, high, color=colour, alpha=0.18, lw=0)
    axes.margins(x=0.0)
    _scaled(axes, x)
    estimate = answer.estimates[path]
    if estimate.value is not None:
        said = answer.recipe.show(path, estimate.value, estimate.std)
        _place(axes, _one(answer, path, estimate.value), said)
        if estimate.std is not None:
            ends = np.array([estimate.value - estimate.std, estimate.value + estimate.std])
            axes.axvspan(*_shown(answer, path, ends), color=MUTED, alpha=0.25, lw=0, label=SPREAD)
    elif answer.solutions:
        for solution in answer.solutions:
            said = answer.recipe.show(path, solution[path])
            _place(axes, _one(answer, path, solution[path]), said, dashes=DOTTED)
    elif estimate.interval is not None:
        ends = _shown(answer, path, np.array(estimate.interval))
        axes.axvspan(*ends, color=MUTED, alpha=0.25, lw=0, label="values that the readings allow")
    axes.set_xlabel(path_label(path, _unit(answer, path)))
    axes.set_ylabel("ε′")
    return axes


def _place(axes: Axes, where: float, said: str, *, dashes: Any = "-") -> None:
    """A line across the panel at a value, with its number on the side where there is room."""
    axes.axvline(where, color=INK, lw=1.0, ls=dashes)
    place = (axes.transData + axes.transAxes.inverted()).transform((where, 1.0))[0]
    right = place < 0.7
    axes.annotate(
        with_raised(said),
        (where, 1.0),
        xycoords=axes.get_xaxis_transform(),
        xytext=(4 if right else -4, -3),
        textcoords="offset points",
        ha="left" if right else "right",
        va="top",
        **note(9.0),
    )


def two_unknowns(axes: Axes, answer: Inversion, model: ReadingModel) -> Axes:
    """Where each reading alone would be met, with its ±; and the estimate with its ellipses."""
    model = ReadingModel(model.mixture, _window(answer), answer.readings)
    first, second = (unknown.path for unknown in model.unknowns)
    places = grid(2, 161)
    with np.errstate(all="ignore"):
        levels = model(places)
    values = model.values(places)
    x = _shown(answer, first, values[:, 0, 0])
    y = _shown(answer, second, values[0, :, 1])
    axes.set_xlim(float(x.min()), float(x.max()))
    axes.set_ylim(float(y.min()), float(y.max()))
    _scaled(axes, x)
    _scaled(axes, y, ordinate=True)
    for position, reading in enumerate(answer.readings):
        level = np.ma.masked_invalid(levels[..., position]).T
        _reading(axes, x, y, level, reading, STRONG[position], "-" if position == 0 else DASHED)
    if answer.family is not None:
        pairs = [_shown(answer, path, answer.family[path]) for path in (first, second)]
        axes.plot(*pairs, "o", color=MUTED, mew=0, ms=6, alpha=0.3, label="pairs that fit equally", zorder=1)
    for number, solution in enumerate(answer.solutions):
        pair = [_one(answer, path, solution[path]) for path in (first, second)]
        label = None if number else "pairs that fit equally"
        axes.plot(*pair, "o", color=INK, mfc="white", ms=5, label=label, zorder=4)
    _estimate(axes, answer)
    axes.set_xlabel(path_label(first, _unit(answer, first)))
    axes.set_ylabel(path_label(second, _unit(answer, second)))
    return axes


def _reading(axes: Axes, x: Any, y: Any, level: Any, reading: Any, colour: str, dashes: Any) -> None:
    """The curve on which a reading alone is met; or the levels of a model that never meets it."""
    name = f"{NAMES[reading.kind]} {reading.written}"
    inside = level.compressed()
    if not inside.size:
        axes.plot([], [], color=colour, ls=dashes, label=f"{name}: the model has no such level")
        return
    low, high = float(inside.min()), float(inside.max())
    if low <= reading.value <= high and low < high:
        if reading.std:
            ends = [reading.value - reading.std, reading.value + reading.std]
            axes.contourf(x, y, level, levels=ends, colors=[colour], alpha=0.18)
        axes.contour(
            x, y, level, levels=[reading.value], colors=[colour], linewidths=1.6, linestyles=[dashes]
        )
        axes.plot([], [], color=colour, lw=1.6, ls=dashes, label=name)
        return
    axes.plot(
        [], [], color=colour, lw=0.8, ls=dashes, label=f"{name}: the model gives {low:.4g} to {high:.4g} here"
    )
    if low < high:
        steps = np.linspace(low, high, REACH + 2)[1:-1]
        lines = axes.contour(x, y, level, levels=steps, colors=[colour], linewidths=0.8, linestyles=[dashes])
        axes.clabel(lines, fontsize=8, fmt="%.4g")


def _window(answer: Inversion) -> list[Unknown]:
    """The ranges, or what of them lies around an estimate that is much sharper."""
    window = []
    for unknown in answer.unknowns:
        estimate = answer.estimates[unknown.path]
        low, high = unknown.low, unknown.high
        if estimate.value is not None and estimate.std is not None and answer.identifiable:
            low = max(low, estimate.value - WINDOW * estimate.std)
            high = min(high, estimate.value + WINDOW * estimate.std)
        window.append(Unknown(unknown.path, low, high))
    return window


def _estimate(axes: Axes, answer: Inversion) -> None:
    """The estimate, and the ellipses of one and two standard uncertainties."""
    paths = [unknown.path for unknown in answer.unknowns]
    estimates = [answer.estimates[path] for path in paths]
    if any(estimate.value is None for estimate in estimates):
        return
    centre = np.array([estimate.value for estimate in estimates], dtype=float)
    shown = [_one(answer, path, value) for path, value in zip(paths, centre.tolist(), strict=True)]
    stds = [estimate.std for estimate in estimates]
    said = [answer.recipe.show(p, float(v), s) for p, v, s in zip(paths, centre, stds, strict=True)]
    axes.plot(*shown, "o", color=INK, ms=5, label=with_raised(f"estimate {'; '.join(said)}"), zorder=4)
    if answer.correlation is None or any(std is None for std in stds):
        return
    turn = np.linspace(0.0, 2.0 * np.pi, 181)
    shape = np.linalg.cholesky(answer.correlation + 1e-12 * np.eye(2))
    for size, name in ((1.0, "1 and 2 standard uncertainties"), (2.0, None)):
        around = centre[:, np.newaxis] + np.array(stds, dtype=float)[:, np.newaxis] * size * (
            shape @ np.stack([np.cos(turn), np.sin(turn)])
        )
        ends = [_shown(answer, path, row) for path, row in zip(paths, around, strict=True)]
        axes.plot(*ends, color=INK, lw=1.0, label=name)


def _scaled(axes: Axes, values: Any, *, ordinate: bool = False) -> None:
    """A logarithmic axis where the range spans decades."""
    if values.min() > 0.0 and values.max() > WIDE * values.min():
        log_axis(axes, ordinate=ordinate)


def _unit(answer: Inversion, path: str) -> str:
    return written_unit(answer.recipe.leaves[path])


def _shown(answer: Inversion, path: str, values: Any) -> Any:
    """Values in the unit that the recipe uses at a path."""
    unit = _unit(answer, path)
    return to_unit(values, unit, answer.recipe.leaves[path].dimension) if unit else values


def _one(answer: Inversion, path: str, value: float) -> float:
    return float(_shown(answer, path, value))
