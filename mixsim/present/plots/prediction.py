"""The plot of a prediction: ε′ and ε″ of the mixture, with host and inclusions for reference."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import TYPE_CHECKING, Any

import numpy as np

from mixsim.analysis import Prediction
from mixsim.present.plots.beyond import said, shade
from mixsim.present.plots.levels import mark_levels
from mixsim.present.plots.style import (
    DASHES,
    MUTED,
    STRONG,
    headed,
    legend_below,
    log_axis,
    marker_of,
    no_loss,
    spectral_axis,
)
from mixsim.present.principal import principal_axes
from mixsim.units import show

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

ROOM = 0.07  # of the range, left free above and below
BEYOND = 2.0  # times the range of the mixture: what lies further out runs off the scale
STEEP = 100.0  # times its median: greatest loss from which a logarithmic scale shows more
FLAT = 0.35  # of its size: range of a mixture that hardly changes


def draw(figure: Figure, answer: Prediction) -> None:
    """Draw a prediction: real part above, loss below; a second column for the permeability."""
    quantities = ["permittivity", *(["permeability"] if answer.magnetic else [])]
    grid: Any = figure.subplots(2, len(quantities), sharex=True, squeeze=False)
    for column, quantity in enumerate(quantities):
        loss(grid[1, column], answer, quantity)
        spectral_axis(grid[1, column], answer.axis.unit, answer.axis.spacing)
        real_part(grid[0, column], answer, quantity, width=1.0 / len(quantities))
    shade(grid.flat, answer, answer.axis.unit)
    headed(figure, answer.recipe.schema.title or "prediction", _made_of(answer) + said(answer))
    cut = {name for axes in grid.flat for name in _off_scale(axes)}
    lines = {line.get_gid(): line for line in grid[0, 0].lines if line.get_gid()}
    labels = [line.get_label() + (", partly off scale" if gid in cut else "") for gid, line in lines.items()]
    legend_below(figure, list(lines.values()), labels)


def real_part(axes: Axes, answer: Prediction, quantity: str = "permittivity", *, width: float = 1.0) -> Axes:
    """Draw ε′ (or μ′), with the static and high-frequency levels."""
    _curves(axes, answer, quantity, "real", FLAT)
    axes.set_ylabel("ε′" if quantity == "permittivity" else "μ′")
    suffix = "" if quantity == "permittivity" else "_permeability"
    return mark_levels(axes, answer, suffix=suffix, width=width)


def loss(axes: Axes, answer: Prediction, quantity: str = "permittivity") -> Axes:
    """Draw ε″ (or μ″)."""
    _curves(axes, answer, quantity, "imag", 0.0)
    axes.set_ylabel("ε″" if quantity == "permittivity" else "μ″")
    values = getattr(answer, quantity).imag
    if not np.any(values):
        no_loss(axes)
    elif answer.axis.spacing == "log" and values.min() > 0.0 and values.max() > STEEP * np.median(values):
        axes.set_ylim(values.min() / 2.0, values.max() * 2.0)
        log_axis(axes, ordinate=True)
    return axes


def _band(axes: Axes, x: Any, values: Any, std: Any, places: Sequence[int] | None) -> None:
    """One standard uncertainty on either side of the mixture, from the ± of the recipe."""
    drawn = (...,) if places is None else places
    for number, axis in enumerate(drawn):
        ends = values[axis] - std[axis], values[axis] + std[axis]
        axes.fill_between(x, *ends, color=STRONG[number], alpha=0.2, lw=0, gid=f"unsure-{number}")


def _curves(axes: Axes, answer: Prediction, quantity: str, part: str, flat: float) -> None:
    """Mixture and references; the scale follows the mixture."""
    x, values = answer.axis.shown, getattr(getattr(answer, quantity), part)
    marker = marker_of(len(x))
    whole = answer.recipe.schema.host.material if _pure(answer) else "mixture"
    spectra, places = {whole: values}, None
    if values.ndim == 2:
        principal = principal_axes(answer.recipe, answer.permittivity)
        spectra = {f"mixture {item.sign}": values[item.index] for item in principal}
        places = [item.index for item in principal]
    for number, (name, curve) in enumerate(spectra.items()):
        axes.plot(
            x,
            curve,
            color=STRONG[number],
            lw=2.0,
            label=name,
            gid=f"mixture-{number}",
            marker=marker,
            ms=4,
            zorder=3,
        )
    low, high = float(np.min(values)), float(np.max(values))
    if answer.pushed is not None:
        std = getattr(answer.pushed, part if quantity == "permittivity" else f"{quantity}_{part}")
        _band(axes, x, values, std, places)
        low, high = float(np.min(values - std)), float(np.max(values + std))
    reach = max(high - low, flat * 0.5 * abs(high + low))
    ends = low - BEYOND * reach, high + BEYOND * reach
    references = {} if _pure(answer) else answer.constituents
    for number, (name, reference) in enumerate(references.items()):
        curve = getattr(getattr(reference, quantity), part)
        if quantity == "permeability" and not np.any(reference.permeability != 1.0):
            continue
        dashes = DASHES[number % len(DASHES)]
        label = _named(answer, name)
        axes.plot(
            x, curve, color=MUTED, lw=1.1, ls=dashes, label=label, gid=f"of-{name}", marker=marker, ms=3
        )
        if curve.min() > ends[0] and curve.max() < ends[1]:
            low, high = min(low, float(curve.min())), max(high, float(curve.max()))
    room = ROOM * (high - low) or 0.01 * (abs(high) or 1.0)
    axes.set_ylim(low - room, high + room)
    axes.margins(x=0.01)


def _off_scale(axes: Axes) -> Iterator[str]:
    """Marks of the curves that leave a panel."""
    low, high = axes.get_ylim()
    for line in axes.lines:
        y = np.asarray(line.get_ydata(), dtype=float)
        if line.get_gid() and (y.min() < low or y.max() > high):
            yield str(line.get_gid())


def _named(answer: Prediction, name: str) -> str:
    """Name of a constituent and its material."""
    schema = answer.recipe.schema
    material = schema.host.material if name == "host" else schema.inclusions[name].material
    return name if name == material else f"{name} ({material})"


def _pure(answer: Prediction) -> bool:
    """Whether the host is all there is: no inclusions, no dopants, no voids."""
    held = {*answer.constituents, *answer.composition.volume_fractions, *answer.composition.number_densities}
    return held == {"host"}


def _made_of(answer: Prediction) -> str:
    """Rule and loading, or the material alone."""
    if _pure(answer):
        return answer.recipe.schema.host.material
    volumes = [
        f"{name} {_short(float(volume))}"
        for name, volume in answer.composition.volume_fractions.items()
        if name != "host"
    ]
    return f"{answer.rule} · {', '.join(volumes)} by volume" if volumes else str(answer.rule)


def _short(fraction: float) -> str:
    """A fraction with four digits, in ppm where it is small."""
    unit = "ppm" if 0.0 < abs(fraction) < 1e-4 else "%"
    number, _ = show(fraction, "fraction", unit).rsplit(" ", 1)
    return f"{float(number):.4g} {unit}"
