"""The plot of an inversion: readings beside the model, and what they leave open."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np

from mixsim.analysis import Inversion, Unknown
from mixsim.analysis.reading_model import ReadingModel, grid
from mixsim.present.plots.style import INK, MUTED, STRONG, path_label
from mixsim.units import to_unit, written_unit

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

WINDOW = 6.0  # standard uncertainties on either side of a sharp estimate
NAMES = {"static": "static", "high_frequency": "high-frequency"}


def draw(figure: Figure, answer: Inversion) -> None:
    """Draw an inversion of one or two unknowns."""
    model = ReadingModel(answer.recipe.compile(), answer.unknowns, answer.readings)
    axes = figure.subplots()
    if len(answer.unknowns) == 1:
        one_unknown(axes, answer, model)
    else:
        two_unknowns(axes, answer, model)
    title = answer.recipe.schema.title or "inversion"
    axes.legend(loc="best")
    figure.suptitle(f"{title}\n{answer.rule}: {answer.verdict}", fontsize=10, color=INK)


def one_unknown(axes: Axes, answer: Inversion, model: ReadingModel) -> Axes:
    """Each reading with its ± against what the model gives over the range, and the estimate."""
    unknown = answer.unknowns[0]
    places = grid(1, 401)
    with np.errstate(all="ignore"):
        levels = model(places)
    x = _shown(answer, unknown.path, model.values(places)[:, 0])
    for reading, level, colour in zip(answer.readings, levels.T, STRONG, strict=False):
        name = NAMES[reading.kind]
        axes.plot(x, level, color=colour, lw=1.8, label=f"{name}, model")
        axes.axhline(reading.value, color=colour, lw=1.0, ls=(0, (5, 2)), label=f"{name}, read")
        if reading.std:
            low, high = reading.value - reading.std, reading.value + reading.std
            axes.axhspan(low, high, color=colour, alpha=0.15, lw=0)
    estimate = answer.estimates[unknown.path]
    if estimate.value is not None:
        centre = _shown(answer, unknown.path, np.array([estimate.value]))[0]
        axes.axvline(centre, color=INK, lw=1.0)
        said = answer.recipe.show(unknown.path, estimate.value, estimate.std)
        axes.annotate(
            said,
            (centre, 1.0),
            xycoords=axes.get_xaxis_transform(),
            xytext=(3, -3),
            textcoords="offset points",
            va="top",
            fontsize=9,
            color=INK,
        )
        if estimate.std is not None:
            ends = np.array([estimate.value - estimate.std, estimate.value + estimate.std])
            axes.axvspan(*_shown(answer, unknown.path, ends), color=MUTED, alpha=0.2, lw=0)
    axes.set_xlabel(path_label(unknown.path, _unit(answer, unknown.path)))
    axes.set_ylabel("ε′")
    axes.margins(x=0.0)
    return axes


def two_unknowns(axes: Axes, answer: Inversion, model: ReadingModel) -> Axes:
    """Where each reading alone would be met, with its ±; and the estimate with its ellipses."""
    model = ReadingModel(model.mixture, _window(answer), answer.readings)
    first, second = model.unknowns
    places = grid(2, 161)
    with np.errstate(all="ignore"):
        levels = model(places)
    values = model.values(places)
    x = _shown(answer, first.path, values[:, 0, 0])
    y = _shown(answer, second.path, values[0, :, 1])
    for position, (reading, colour) in enumerate(zip(answer.readings, STRONG, strict=False)):
        level = np.ma.masked_invalid(levels[..., position]).T
        if not np.ptp(level.compressed()) > 0.0 or not level.min() < reading.value < level.max():
            continue
        if reading.std:
            ends = [reading.value - reading.std, reading.value + reading.std]
            axes.contourf(x, y, level, levels=ends, colors=[colour], alpha=0.18)
        dashes: Any = "-" if position == 0 else (0, (5, 2))
        axes.contour(
            x, y, level, levels=[reading.value], colors=[colour], linewidths=1.6, linestyles=[dashes]
        )
        axes.plot([], [], color=colour, lw=1.6, ls=dashes, label=f"{NAMES[reading.kind]} {reading.written}")
    estimates = [answer.estimates[unknown.path] for unknown in answer.unknowns]
    if all(estimate.value is not None for estimate in estimates):
        _estimate(axes, answer)
    axes.set_xlim(float(x.min()), float(x.max()))
    axes.set_ylim(float(y.min()), float(y.max()))
    axes.set_xlabel(path_label(first.path, _unit(answer, first.path)))
    axes.set_ylabel(path_label(second.path, _unit(answer, second.path)))
    return axes


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
    centre = np.array([estimate.value for estimate in estimates], dtype=float)
    shown = [_shown(answer, path, np.array([v]))[0] for path, v in zip(paths, centre, strict=True)]
    axes.plot(*shown, "o", color=INK, ms=5, label="estimate")
    stds = [estimate.std for estimate in estimates]
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


def _unit(answer: Inversion, path: str) -> str:
    return written_unit(answer.recipe.leaves[path])


def _shown(answer: Inversion, path: str, values: Any) -> Any:
    """Values in the unit that the recipe uses at a path."""
    unit = _unit(answer, path)
    return to_unit(values, unit, answer.recipe.leaves[path].dimension) if unit else values
