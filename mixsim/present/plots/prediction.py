"""The plot of a prediction: ε′ and ε″ of the mixture, with host and inclusions for reference."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np

from mixsim.analysis import Prediction
from mixsim.present.plots.style import DASHES, INK, MUTED, STRONG, spectral_axis
from mixsim.units import show

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

ROOM = 0.07  # of the range, left free above and below
BEYOND = 2.0  # times the range of the mixture: what lies further out runs off the scale
FLAT = 0.35  # of its size: range of a mixture that hardly changes


def draw(figure: Figure, answer: Prediction) -> None:
    """Draw a prediction: real part above, loss below; a second column for the permeability."""
    quantities = ["permittivity", *(["permeability"] if answer.magnetic else [])]
    grid: Any = figure.subplots(2, len(quantities), sharex=True, squeeze=False)
    cut: set[str] = set()
    for column, quantity in enumerate(quantities):
        cut |= real_part(grid[0, column], answer, quantity)
        cut |= loss(grid[1, column], answer, quantity)
        spectral_axis(grid[1, column], answer.axis.unit, answer.axis.spacing)
    figure.suptitle(_title(answer), fontsize=10, color=INK)
    handles, names = grid[0, 0].get_legend_handles_labels()
    labels = [_named(answer, name) + (", partly off scale" if name in cut else "") for name in names]
    figure.legend(handles, labels, loc="outside lower center", ncols=3)


def real_part(axes: Axes, answer: Prediction, quantity: str = "permittivity") -> set[str]:
    """Draw ε′ (or μ′) with the static and high-frequency levels; returns the references that run off."""
    values = getattr(answer, quantity).real
    cut = _curves(axes, answer, quantity, values, "real", FLAT)
    axes.set_ylabel("ε′" if quantity == "permittivity" else "μ′")
    _levels(axes, answer, "" if quantity == "permittivity" else "_permeability")
    return cut


def loss(axes: Axes, answer: Prediction, quantity: str = "permittivity") -> set[str]:
    """Draw ε″ (or μ″); returns the references that run off."""
    values = getattr(answer, quantity).imag
    cut = _curves(axes, answer, quantity, values, "imag", 0.0)
    axes.set_ylabel("ε″" if quantity == "permittivity" else "μ″")
    if not np.any(values):
        axes.set_ylim(-0.05, 1.0)
        axes.text(0.5, 0.5, "no loss in the model", transform=axes.transAxes, ha="center", color=MUTED)
    return cut


def _curves(axes: Axes, answer: Prediction, quantity: str, values: Any, part: str, flat: float) -> set[str]:
    """Mixture and references; the scale follows the mixture."""
    x = answer.axis.shown
    marker = "o" if len(x) < 3 else None
    spectra = {"mixture": values} if values.ndim == 1 else {"mixture ⊥": values[0], "mixture ∥": values[2]}
    for number, (name, curve) in enumerate(spectra.items()):
        axes.plot(x, curve, color=STRONG[number], lw=2.0, label=name, marker=marker, ms=4, zorder=3)
    low, high = float(np.nanmin(values)), float(np.nanmax(values))
    reach = max(high - low, flat * 0.5 * abs(high + low))
    ends = low - BEYOND * reach, high + BEYOND * reach
    cut = set()
    for number, (name, reference) in enumerate(answer.constituents.items()):
        curve = getattr(getattr(reference, quantity), part)
        if quantity == "permeability" and not np.ptp(curve):
            continue
        dashes = DASHES[number % len(DASHES)]
        axes.plot(x, curve, color=MUTED, lw=1.1, ls=dashes, label=name, marker=marker, ms=3)
        if curve.min() > ends[0] and curve.max() < ends[1]:
            low, high = min(low, float(curve.min())), max(high, float(curve.max()))
        elif curve.min() < low or curve.max() > high:
            cut.add(name)
    room = ROOM * (high - low) or 0.01 * (abs(high) or 1.0)
    axes.set_ylim(low - room, high + room)
    axes.margins(x=0.01)
    return cut


def _levels(axes: Axes, answer: Prediction, suffix: str) -> None:
    """A short mark at the end of the band nearest to each limit, or an arrow towards it, with its number."""
    low, high = axes.get_ylim()
    marks = []
    for kind, word in (("static", "static"), ("high_frequency", "high-frequency")):
        values = np.atleast_1d(getattr(answer.limits, kind + suffix).real)
        marks += [(kind, word, float(v)) for v in dict.fromkeys(np.round(values[np.isfinite(values)], 12))]
    near = [v for _, _, v in marks if low - (high - low) < v < high + (high - low)]
    bottom, top = min([low, *near]), max([high, *near])
    room = 0.13 * (top - bottom)
    axes.set_ylim(bottom - (room if near and min(near) < low + room else 0.0), top + room)
    rising = answer.axis.omega[-1] > answer.axis.omega[0]
    for kind, word, level in marks:
        left = (kind == "static") == rising
        if level in near:
            _mark(axes, level, f"{word} {level:.4g}", left=left)
        else:
            up = level > high
            _aside(axes, f"{word} {level:.4g} {'↑' if up else '↓'}", left=left, up=up)


def _mark(axes: Axes, level: float, text: str, *, left: bool) -> None:
    span = (0.0, 0.2) if left else (0.8, 1.0)
    transform = axes.get_yaxis_transform()
    axes.plot(span, (level, level), transform=transform, color=INK, lw=0.9, zorder=2)
    place = (span[0] if left else span[1], level)
    axes.annotate(
        text,
        place,
        xycoords=transform,
        xytext=(2 if left else -2, 2),
        textcoords="offset points",
        ha="left" if left else "right",
        va="bottom",
        fontsize=8,
        color=INK,
        zorder=4,
    )


def _aside(axes: Axes, text: str, *, left: bool, up: bool) -> None:
    place = (0.01 if left else 0.99, 0.97 if up else 0.03)
    axes.text(
        *place,
        text,
        transform=axes.transAxes,
        ha="left" if left else "right",
        va="top" if up else "bottom",
        fontsize=8,
        color=INK,
    )


def _named(answer: Prediction, name: str) -> str:
    if name not in answer.constituents:
        return name
    material = answer.recipe.schema.host.material
    if name != "host":
        material = answer.recipe.schema.inclusions[name].material
    return name if name == material else f"{name} ({material})"


def _title(answer: Prediction) -> str:
    title = answer.recipe.schema.title or "prediction"
    volumes = [
        f"{name} {show(float(volume), 'fraction', '%')}"
        for name, volume in answer.composition.volume_fractions.items()
        if name != "host"
    ]
    loading = f" · {', '.join(_short(text) for text in volumes)} by volume" if volumes else ""
    return f"{title}\n{answer.rule}{loading}"


def _short(text: str) -> str:
    """A shown fraction with four digits."""
    name, number, unit = text.rsplit(" ", 2)
    return f"{name} {float(number):.4g} {unit}"
