"""The plot of a sweep over one number: spectra, or levels at one frequency. Of two: a map."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np

from mixsim.analysis import Prediction
from mixsim.errors import Refusal
from mixsim.present.plots.beyond import said, shade
from mixsim.present.plots.maps import draw_maps
from mixsim.present.plots.style import (
    DASHED,
    DOTTED,
    MUTED,
    STRONG,
    headed,
    legend_above,
    log_axis,
    log_ticks,
    marker_of,
    no_loss,
    path_label,
    quantity_at,
    spectral_axis,
)

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

MOST_CURVES = 60  # of a sweep; more are thinned, ends kept
COLOURS = "cividis"  # even in lightness, also for the colour-blind
LIGHTEST = 0.86  # of them: the rest is too pale on white
LABELLED = 8  # values up to which each has its tick on the colour bar


def draw(figure: Figure, answer: Prediction) -> None:
    """Draw a sweep of one or two numbers."""
    if len(answer.vary) > 2:
        raise Refusal(
            f"a plot of {len(answer.vary)} varied numbers", "one or two; .csv and .npz hold them all"
        )
    if answer.permittivity.ndim > len(answer.vary) + 1:
        raise Refusal("a plot of a sweep with principal axes", ".csv and .npz hold all three")
    over_frequency = len(answer.vary) == 1 and len(answer.omega) > 1
    if len(answer.vary) == 2:
        draw_maps(figure, answer)
    elif over_frequency:
        _spectra(figure, answer)
    else:
        _against_value(figure, answer)
    title = answer.recipe.schema.title or "sweep"
    headed(figure, title, answer.rule + said(answer, shaded=over_frequency))


def _spectra(figure: Figure, answer: Prediction) -> None:
    """ε′ and ε″ for each value; beside them μ′ and μ″, else the limits against the value."""
    limits = np.isfinite(answer.limits.static) | np.isfinite(answer.limits.high_frequency)
    beside = bool(limits.any()) and not answer.magnetic
    ratios = (1.0, 1.0) if answer.magnetic else (1.0, 0.62) if beside else (1.0,)
    grid: Any = figure.subplots(2, len(ratios), squeeze=False, width_ratios=ratios, sharex="col")
    quantities = ("permittivity", "permeability") if answer.magnetic else ("permittivity",)
    for column, quantity in enumerate(quantities):
        for row, part in enumerate(("real", "imag")):
            curves(grid[row, column], answer, quantity, part)
        spectral_axis(grid[1, column], answer.axis.unit, answer.axis.spacing)
    shade(grid[:, : len(quantities)].flat, answer, answer.axis.unit)
    _bar(figure, list(grid[0, : len(quantities)]), answer)
    if beside:
        levels(grid[0, 1], answer)
        legend_above(grid[0, 1], columns=1).set_in_layout(False)  # it stands beside the colour bar
        peaks(grid[1, 1], answer)


def curves(axes: Axes, answer: Prediction, quantity: str, part: str) -> Axes:
    """One curve over the band for each value, coloured by it."""
    varied = answer.vary[0]
    norm, colours = _colours(answer)
    values = getattr(getattr(answer, quantity), part)
    count = len(varied.values)
    for i in sorted({round(k) for k in np.linspace(0, count - 1, min(count, MOST_CURVES))}):
        axes.plot(
            answer.axis.shown,
            values[i],
            color=colours(norm(varied.shown[i])),
            lw=1.4,
            marker=marker_of(len(answer.omega)),
            ms=3,
        )
    axes.set_ylabel(f"{'ε' if quantity == 'permittivity' else 'μ'}{'′' if part == 'real' else '″'}")
    axes.margins(x=0.01)
    if part == "imag" and not np.any(values):
        no_loss(axes)
    return axes


def _colours(answer: Prediction) -> Any:
    """From a value to its colour, in two steps as a colour bar wants them."""
    import matplotlib
    from matplotlib.colors import LinearSegmentedColormap, LogNorm, Normalize

    varied = answer.vary[0]
    norm = (LogNorm if varied.spacing == "log" else Normalize)(varied.shown.min(), varied.shown.max())
    whole = matplotlib.colormaps[COLOURS]
    return norm, LinearSegmentedColormap.from_list("cut", whole(np.linspace(0.0, LIGHTEST, 256)))


def _bar(figure: Figure, above: list[Axes], answer: Prediction) -> None:
    from matplotlib.cm import ScalarMappable
    from matplotlib.ticker import MaxNLocator

    varied = answer.vary[0]
    mappable = ScalarMappable(*_colours(answer))
    bar = figure.colorbar(mappable, ax=above, location="top", pad=0.04, aspect=30 * len(above))
    bar.set_label(path_label(varied.path, varied.unit))
    bar.outline.set_visible(False)
    if len(varied.values) <= LABELLED:
        bar.set_ticks(list(varied.shown), labels=[f"{value:.3g}" for value in varied.shown])
        bar.ax.minorticks_off()
    elif varied.spacing == "linear":
        bar.locator = MaxNLocator(5)
    else:
        log_ticks(bar.ax.xaxis, float(varied.shown.min()), float(varied.shown.max()))


def levels(axes: Axes, answer: Prediction) -> Axes:
    """Static and high-frequency permittivity against the varied value."""
    varied = answer.vary[0]
    for kind, name, colour, dashes in (
        ("static", "static", STRONG[0], "-"),
        ("high_frequency", "high-frequency", STRONG[1], DASHED),
    ):
        level = getattr(answer.limits, kind).real
        if np.isfinite(level).any():
            axes.plot(
                varied.shown,
                level,
                color=colour,
                ls=dashes,
                lw=1.8,
                label=name,
                marker=marker_of(len(level)),
                ms=3,
            )
    axes.set_ylabel("ε′, limits")
    return axes


def peaks(axes: Axes, answer: Prediction) -> Axes:
    """The highest ε″ of the band against the varied value."""
    varied = answer.vary[0]
    highest = answer.permittivity.imag.max(axis=-1)
    axes.plot(varied.shown, highest, color=STRONG[0], lw=1.8, marker=marker_of(len(highest)), ms=3)
    axes.set_ylabel("highest ε″")
    axes.set_xlabel(path_label(varied.path, varied.unit))
    if varied.spacing == "log":
        log_axis(axes)
    return axes


def _against_value(figure: Figure, answer: Prediction) -> None:
    """At one frequency: ε′ and ε″, and μ′ and μ″, against the varied value."""
    varied = answer.vary[0]
    quantities = ("permittivity", "permeability") if answer.magnetic else ("permittivity",)
    grid: Any = figure.subplots(2, len(quantities), sharex=True, squeeze=False)
    for column, quantity in enumerate(quantities):
        above, below = grid[:, column]
        against_value(above, answer, quantity, "real")
        against_value(below, answer, quantity, "imag")
        legend_above(above, columns=3 if len(quantities) == 1 else 1)
        below.set_xlabel(path_label(varied.path, varied.unit))
        if varied.spacing == "log":
            log_axis(below)


def against_value(axes: Axes, answer: Prediction, quantity: str, part: str) -> Axes:
    """One part at one frequency against the varied value; with ε′ or μ′ its limits."""
    varied = answer.vary[0]
    values = getattr(getattr(answer, quantity), part)[:, 0]
    marker = marker_of(len(values))
    at = quantity_at(float(answer.axis.shown[0]), answer.axis.unit)
    axes.plot(varied.shown, values, color=STRONG[0], lw=1.8, label=f"at {at}", marker=marker, ms=4)
    suffix = "" if quantity == "permittivity" else "_permeability"
    for kind, name, dashes in (("static", "static", DASHED), ("high_frequency", "high-frequency", DOTTED)):
        level = getattr(answer.limits, kind + suffix).real
        if part == "real" and np.isfinite(level).any():
            axes.plot(varied.shown, level, color=MUTED, ls=dashes, lw=1.2, label=name)
    axes.set_ylabel(f"{'ε' if quantity == 'permittivity' else 'μ'}{'′' if part == 'real' else '″'}")
    axes.margins(x=0.01)
    if part == "imag" and not np.any(values):
        no_loss(axes)
    return axes
