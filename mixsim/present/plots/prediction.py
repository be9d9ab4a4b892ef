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

ROOM = 0.08  # of the range, left free above and below
BEYOND = 3.0  # times the range of the mixture: what lies further out is clipped


def draw(figure: Figure, answer: Prediction) -> None:
    """Draw a prediction: real part above, loss below; a second column for the permeability."""
    quantities = ["permittivity", *(["permeability"] if answer.magnetic else [])]
    grid: Any = figure.subplots(2, len(quantities), sharex=True, squeeze=False)
    for column, quantity in enumerate(quantities):
        real_part(grid[0, column], answer, quantity)
        loss(grid[1, column], answer, quantity)
        spectral_axis(grid[1, column], answer.axis.unit, answer.axis.spacing)
    figure.suptitle(_title(answer), fontsize=10, color=INK)
    handles, labels = grid[0, 0].get_legend_handles_labels()
    figure.legend(handles, labels, loc="outside lower center", ncols=min(4, len(labels)))


def real_part(axes: Axes, answer: Prediction, quantity: str = "permittivity") -> Axes:
    """ε′ (or μ′) against frequency, with the static and high-frequency levels."""
    symbol = "ε′" if quantity == "permittivity" else "μ′"
    values = getattr(answer, quantity).real
    clipped = _curves(axes, answer, quantity, values, lambda z: z.real)
    suffix = "" if quantity == "permittivity" else "_permeability"
    for kind, word in (("static", "static"), ("high_frequency", "high-frequency")):
        level = np.atleast_1d(getattr(answer.limits, kind + suffix).real)
        for i, one in enumerate(dict.fromkeys(np.round(level[np.isfinite(level)], 12))):
            _level(axes, answer, float(one), f"{word} {one:.4g}", first=kind == "static", shift=i)
    axes.set_ylabel(symbol)
    _clip_note(axes, clipped)
    return axes


def loss(axes: Axes, answer: Prediction, quantity: str = "permittivity") -> Axes:
    """ε″ (or μ″) against frequency."""
    clipped = _curves(axes, answer, quantity, getattr(answer, quantity).imag, lambda z: z.imag)
    axes.set_ylabel("ε″" if quantity == "permittivity" else "μ″")
    _clip_note(axes, clipped)
    return axes


def _curves(axes: Axes, answer: Prediction, quantity: str, values: Any, part: Any) -> list[str]:
    """Mixture and references; the scale follows the mixture. Returns which references leave it."""
    x = answer.axis.shown
    marker = "o" if len(x) < 3 else None
    spectra = {"mixture": values} if values.ndim == 1 else {"mixture ⊥": values[0], "mixture ∥": values[2]}
    low, high = float(np.nanmin(values)), float(np.nanmax(values))
    reach = max(high - low, 0.02 * max(abs(low), abs(high)), 1e-12)
    clipped = []
    for number, (name, reference) in enumerate(answer.constituents.items()):
        curve = part(getattr(reference, quantity))
        if np.ptp(curve) == 0.0 and curve[0] in (0.0, 1.0) and quantity == "permeability":
            continue
        dashes = DASHES[number % len(DASHES)]
        axes.plot(x, curve, color=MUTED, lw=1.1, ls=dashes, label=_named(answer, name), marker=marker, ms=3)
        inside = (curve > low - BEYOND * reach) & (curve < high + BEYOND * reach)
        if inside.all():
            low, high = min(low, float(curve.min())), max(high, float(curve.max()))
        else:
            clipped.append(name)
    for number, (name, curve) in enumerate(spectra.items()):
        axes.plot(x, curve, color=STRONG[number], lw=2.0, label=name, marker=marker, ms=4, zorder=3)
    room = ROOM * max(high - low, 0.02 * max(abs(low), abs(high)), 1e-12)
    axes.set_ylim(low - room, high + 2.0 * room)
    axes.margins(x=0.01)
    return clipped


def _level(axes: Axes, answer: Prediction, level: float, text: str, *, first: bool, shift: int) -> None:
    """A short mark at the end of the band nearest to the limit, with its number."""
    low, high = axes.get_ylim()
    room = 0.06 * (high - low)
    axes.set_ylim(min(low, level - room), max(high, level + 2.5 * room))
    rising = answer.axis.omega[-1] > answer.axis.omega[0]
    left = first == rising
    span = (0.0, 0.22) if left else (0.78, 1.0)
    transform = axes.get_yaxis_transform()
    axes.plot(span, (level, level), transform=transform, color=INK, lw=0.9, zorder=2)
    axes.annotate(
        text,
        (span[0] if left else span[1], level),
        xycoords=transform,
        xytext=(2 if left else -2, 2 + 9 * shift),
        textcoords="offset points",
        ha="left" if left else "right",
        va="bottom",
        fontsize=8,
        color=INK,
    )


def _clip_note(axes: Axes, clipped: list[str]) -> None:
    if clipped:
        axes.text(
            0.99,
            0.98,
            f"{', '.join(clipped)}: beyond the scale",
            transform=axes.transAxes,
            ha="right",
            va="top",
            fontsize=8,
            color=MUTED,
        )


def _named(answer: Prediction, name: str) -> str:
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
