"""The plot of a sweep over two numbers: maps with contour lines, in the middle of the band."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np

from mixsim.analysis import Prediction
from mixsim.present.plots.style import INK, SMALL, log_axis, path_label, quantity_at

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.colors import Colormap
    from matplotlib.figure import Figure

COLOURS = ("#f7f4ec", "#b7cfdd", "#5e92b6")  # even steps of lightness; ink stays readable on the darkest
LINES = 6
APART = 0.05  # of the panel, between a number and any other line


def draw_maps(figure: Figure, answer: Prediction) -> None:
    """Draw maps of ε′ and ε″; below them μ′ and μ″ of a magnetic mixture."""
    first, second = answer.vary
    place = len(answer.omega) // 2
    at = quantity_at(float(answer.axis.shown[place]), answer.axis.unit)
    rows = [("ε", answer.permittivity), *([("μ", answer.permeability)] if answer.magnetic else [])]
    grid: Any = figure.subplots(len(rows), 2, sharex=True, sharey=True, squeeze=False)
    for row, (symbol, spectra) in enumerate(rows):
        for column, (mark, values) in enumerate((("′", spectra.real), ("″", spectra.imag))):
            draw_map(figure, grid[row, column], answer, values[..., place], f"{symbol}{mark} at {at}")
    for axes in grid[-1]:
        axes.set_xlabel(path_label(first.path, first.unit))
    for axes in grid[:, 0]:
        axes.set_ylabel(path_label(second.path, second.unit))


def draw_map(figure: Figure, axes: Axes, answer: Prediction, values: Any, label: str) -> Axes:
    """A map of one number over both varied values, with its colour bar on top."""
    first, second = answer.vary
    shown = np.ma.masked_invalid(values).T
    mesh = axes.pcolormesh(
        first.shown, second.shown, shown, cmap=_colours(), shading="gouraud", rasterized=True
    )
    if first.spacing == "log":
        log_axis(axes)
    if second.spacing == "log":
        log_axis(axes, ordinate=True)
    bar = figure.colorbar(mesh, ax=axes, location="top", aspect=30, pad=0.02)
    bar.set_label(label)
    bar.outline.set_visible(False)
    if np.ptp(shown.compressed()) > 1e-9 * np.abs(shown).max():
        lines = axes.contour(
            first.shown, second.shown, shown, levels=LINES, colors=INK, linewidths=0.7, linestyles="-"
        )
        axes.clabel(lines, fontsize=SMALL, fmt="%.3g", manual=free_places(axes, lines))
    return axes


def free_places(axes: Axes, lines: Any) -> list[tuple[float, float]]:
    """For each contour line the place furthest from the others and from the edges, if far enough."""
    to_panel = axes.transData + axes.transAxes.inverted()
    drawn = [to_panel.transform(path.vertices) for path in lines.get_paths()]
    drawn = [points[np.isfinite(points).all(axis=-1)] for points in drawn]
    places = []
    for number, points in enumerate(drawn):
        if not len(points):
            continue
        room = np.minimum(points, 1.0 - points).min(axis=-1)
        for other in drawn[:number] + drawn[number + 1 :]:
            if len(other):
                away = np.hypot(*(points[:, np.newaxis] - other).transpose(2, 0, 1))
                room = np.minimum(room, away.min(axis=-1))
        if room.max() >= APART:
            x, y = to_panel.inverted().transform(points[np.argmax(room)])
            places.append((float(x), float(y)))
    return places


def _colours() -> Colormap:
    from matplotlib.colors import LinearSegmentedColormap

    return LinearSegmentedColormap.from_list("map", COLOURS)
