"""Marks of the static and high-frequency levels, at the ends of the band nearest to them."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

import numpy as np

from mixsim.analysis import Prediction
from mixsim.present.plots.style import INK, note
from mixsim.present.principal import principal_axes

if TYPE_CHECKING:
    from matplotlib.axes import Axes

MARK = 0.2  # length of a mark, of the width of the panel
LETTER, LINE = 0.0115, 0.09  # a letter and a line of a note, of a panel of full width and half height
ROOM = 0.13  # left for a note above and below, of the height
KINDS = (("static", "static"), ("high_frequency", "high-frequency"))


@dataclass(frozen=True)
class Level:
    """One level, or several that lie too close to be written apart.

    Attributes
    ----------
    values
        Of the levels [-].
    text
        What is written beside.
    left
        Whether it belongs to the left end.
    """

    values: tuple[float, ...]
    text: str
    left: bool


def mark_levels(axes: Axes, answer: Prediction, *, suffix: str = "", width: float = 1.0) -> Axes:
    """Mark each limit by a short line with its number, or by an arrow towards one that is far away.

    Parameters
    ----------
    axes
        Panel of ε′ or μ′, its curves drawn and its scales set.
    answer
        The prediction.
    suffix
        "_permeability" for those of μ′.
    width
        Width of the panel, of the figure.

    Returns
    -------
    axes
        The same, its ordinate widened where a level or a note needs the room.
    """
    low, high = axes.get_ylim()
    reach = high - low
    numbers = _numbers(answer, suffix)
    near = [v for found in numbers.values() for _, v in found if low - reach < v < high + reach]
    bottom, top = min([low, *near]), max([high, *near])
    room = ROOM * (top - bottom)
    axes.set_ylim(bottom - (room if near and min(near) < bottom + room else 0.0), top + room)
    rising = answer.axis.omega[-1] >= answer.axis.omega[0]
    for kind, word in KINDS:
        left = (kind == "static") == rising
        for level in _levels(numbers[kind], word, left, LINE * (top - bottom)):
            inside = [v for v in level.values if v in near]
            if inside:
                _mark(axes, level, width)
            else:
                _aside(axes, level, up=level.values[0] > high)
    return axes


def _numbers(answer: Prediction, suffix: str) -> dict[str, list[tuple[str, float]]]:
    """Levels of each kind, by principal axis where there are any."""
    found = {}
    for kind, _ in KINDS:
        values = getattr(answer.limits, kind + suffix).real
        named = [("", values)]
        if np.ndim(values):
            principal = principal_axes(answer.recipe, answer.permittivity)
            named = [(item.sign, values[item.index]) for item in principal]
        found[kind] = [(name, float(value)) for name, value in named if np.isfinite(value)]
    return found


def _levels(numbers: list[tuple[str, float]], word: str, left: bool, close: float) -> list[Level]:
    if len(numbers) == 2 and abs(numbers[0][1] - numbers[1][1]) < close:
        text = ", ".join(f"{name} {value:.4g}" for name, value in numbers)
        return [Level((numbers[0][1], numbers[1][1]), f"{word} {text}", left)]
    return [
        Level((value,), " ".join(filter(None, (word, name, f"{value:.4g}"))), left) for name, value in numbers
    ]


def _mark(axes: Axes, level: Level, width: float) -> None:
    span = (0.0, MARK) if level.left else (1.0 - MARK, 1.0)
    transform = axes.get_yaxis_transform()
    for value in level.values:
        axes.plot(span, (value, value), transform=transform, color=INK, lw=0.9, zorder=2)
    above = _above_is_free(axes, level, width)
    axes.annotate(
        level.text,
        (0.0 if level.left else 1.0, max(level.values) if above else min(level.values)),
        xycoords=transform,
        xytext=(3 if level.left else -3, 2 if above else -2),
        textcoords="offset points",
        ha="left" if level.left else "right",
        va="bottom" if above else "top",
        **note(),
    )


def _above_is_free(axes: Axes, level: Level, width: float) -> bool:
    """Whether fewer curves run through the note above the mark than through the one below."""
    length = min(1.0, LETTER * len(level.text) / width)
    x = np.linspace(0.0, length, 60) if level.left else np.linspace(1.0 - length, 1.0, 60)
    to_panel = axes.transData + axes.transAxes.inverted()
    crossed = {True: 0, False: 0}
    for line in axes.lines:
        if line.get_transform() != axes.transData:
            continue
        y = _followed(to_panel, line, x)
        for above in (True, False):
            edge = to_panel.transform((1.0, (max if above else min)(level.values)))[1]
            bottom, top = (edge, edge + LINE) if above else (edge - LINE, edge)
            crossed[above] += int(np.count_nonzero((y > bottom) & (y < top)))
    return crossed[True] <= crossed[False]


def _followed(to_panel: Any, line: Any, x: Any) -> Any:
    """Height of a curve at places across the panel; NaN where it does not run."""
    points = to_panel.transform(line.get_xydata())
    points = points[np.argsort(points[:, 0])]
    return np.interp(x, points[:, 0], points[:, 1], left=np.nan, right=np.nan)


def _aside(axes: Axes, level: Level, *, up: bool) -> None:
    axes.text(
        0.01 if level.left else 0.99,
        0.97 if up else 0.03,
        f"{level.text} {'↑' if up else '↓'}",
        transform=axes.transAxes,
        ha="left" if level.left else "right",
        va="top" if up else "bottom",
        **note(),
    )
