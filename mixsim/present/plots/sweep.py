"""The plot of a sweep: spectra, levels or a map, by what varies."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np

from mixsim.analysis import Prediction
from mixsim.errors import Refusal
from mixsim.present.plots.style import INK, MUTED, STRONG, log_axis, path_label, quantity_at, spectral_axis

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

MOST_CURVES = 60  # of a sweep; more are thinned, ends kept
COLOURS = "cividis"  # even in lightness, also for the colour-blind
LIGHTEST = 0.86  # of that map: the rest is too pale on white


def draw(figure: Figure, answer: Prediction) -> None:
    """Draw a sweep of one or two numbers."""
    if len(answer.vary) > 2:
        raise Refusal(
            f"a plot of {len(answer.vary)} varied numbers", "one or two; .csv and .npz hold them all"
        )
    if answer.permittivity.ndim > len(answer.vary) + 1:
        raise Refusal("a plot of a sweep with principal axes", ".csv and .npz hold all three")
    if len(answer.vary) == 2:
        _maps(figure, answer)
    elif len(answer.omega) == 1:
        _against_value(figure, answer)
    else:
        _spectra(figure, answer)
    title = answer.recipe.schema.title or "sweep"
    figure.suptitle(f"{title}\n{answer.rule}", fontsize=10, color=INK)


def _spectra(figure: Figure, answer: Prediction) -> None:
    """ε′ and ε″ for each value, and the limits against the value."""
    import matplotlib
    from matplotlib.cm import ScalarMappable
    from matplotlib.colors import LinearSegmentedColormap, LogNorm, Normalize

    varied = answer.vary[0]
    limits = np.isfinite(answer.limits.static) | np.isfinite(answer.limits.high_frequency)
    ratios = (1.0, 0.62) if limits.any() else (1.0,)
    grid: Any = figure.subplots(2, len(ratios), squeeze=False, width_ratios=ratios, sharex="col")
    norm: Any = (LogNorm if varied.spacing == "log" else Normalize)(varied.shown.min(), varied.shown.max())
    whole = matplotlib.colormaps[COLOURS]
    colours = LinearSegmentedColormap.from_list("cut", whole(np.linspace(0.0, LIGHTEST, 256)))
    count = len(varied.values)
    for i in sorted({round(k) for k in np.linspace(0, count - 1, min(count, MOST_CURVES))}):
        style = {"color": colours(norm(varied.shown[i])), "lw": 1.4}
        grid[0, 0].plot(answer.axis.shown, answer.permittivity[i].real, **style)
        grid[1, 0].plot(answer.axis.shown, answer.permittivity[i].imag, **style)
    grid[0, 0].set_ylabel("ε′")
    grid[1, 0].set_ylabel("ε″")
    spectral_axis(grid[1, 0], answer.axis.unit, answer.axis.spacing)
    grid[1, 0].margins(x=0.01)
    bar = figure.colorbar(ScalarMappable(norm, colours), ax=grid[:, 0], pad=0.02, aspect=30)
    bar.set_label(path_label(varied.path, varied.unit))
    bar.outline.set_visible(False)
    if count <= 8:
        bar.set_ticks(list(varied.shown), labels=[f"{value:.4g}" for value in varied.shown])
    if limits.any():
        levels(grid[0, 1], answer)
        peaks(grid[1, 1], answer)


def levels(axes: Axes, answer: Prediction) -> Axes:
    """Static and high-frequency permittivity against the varied value."""
    varied = answer.vary[0]
    for kind, name, colour, dashes in (
        ("static", "static", STRONG[0], "-"),
        ("high_frequency", "high-frequency", STRONG[1], (0, (5, 2))),
    ):
        level = getattr(answer.limits, kind).real
        if np.isfinite(level).any():
            axes.plot(varied.shown, level, color=colour, ls=dashes, lw=1.8, label=name)
    axes.set_ylabel("ε′, limits")
    axes.margins(y=0.22)
    axes.legend(loc="upper left", handlelength=1.8, borderaxespad=0.1)
    return axes


def peaks(axes: Axes, answer: Prediction) -> Axes:
    """The highest ε″ of the band against the varied value."""
    varied = answer.vary[0]
    axes.plot(varied.shown, answer.permittivity.imag.max(axis=-1), color=STRONG[0], lw=1.8)
    axes.set_ylabel("highest ε″")
    axes.set_xlabel(path_label(varied.path, varied.unit))
    if varied.spacing == "log":
        log_axis(axes)
    return axes


def _against_value(figure: Figure, answer: Prediction) -> None:
    """At one frequency: ε′ and ε″ against the varied value."""
    varied = answer.vary[0]
    above, below = figure.subplots(2, 1, sharex=True)
    at = quantity_at(float(answer.axis.shown[0]), answer.axis.unit)
    above.plot(varied.shown, answer.permittivity[:, 0].real, color=STRONG[0], lw=1.8, label=f"at {at}")
    for kind, name, dashes in (
        ("static", "static", (0, (5, 2))),
        ("high_frequency", "high-frequency", (0, (1.5, 1.5))),
    ):
        level = getattr(answer.limits, kind).real
        if np.isfinite(level).any():
            above.plot(varied.shown, level, color=MUTED, ls=dashes, lw=1.2, label=name)
    above.set_ylabel("ε′")
    above.legend(loc="best")
    below.plot(varied.shown, answer.permittivity[:, 0].imag, color=STRONG[0], lw=1.8)
    below.set_ylabel("ε″")
    below.set_xlabel(path_label(varied.path, varied.unit))
    if varied.spacing == "log":
        log_axis(below)
    below.margins(x=0.01)


def _maps(figure: Figure, answer: Prediction) -> None:
    """Two numbers: ε′ and ε″ in the middle of the band."""
    first, second = answer.vary
    place = len(answer.omega) // 2
    at = quantity_at(float(answer.axis.shown[place]), answer.axis.unit)
    grid: Any = figure.subplots(1, 2, sharey=True)
    for axes, symbol, values in (
        (grid[0], "ε′", answer.permittivity[..., place].real),
        (grid[1], "ε″", answer.permittivity[..., place].imag),
    ):
        mesh = axes.pcolormesh(
            first.shown, second.shown, values.T, cmap=COLOURS, shading="gouraud", rasterized=True
        )
        if np.ptp(values) > 0.0:
            lines = axes.contour(
                first.shown, second.shown, values.T, levels=6, colors="white", linewidths=0.8
            )
            axes.clabel(lines, fontsize=8, fmt="%.3g")
        bar = figure.colorbar(mesh, ax=axes, location="top", aspect=30, pad=0.02)
        bar.set_label(f"{symbol} at {at}")
        bar.outline.set_visible(False)
        axes.set_xlabel(path_label(first.path, first.unit))
        if first.spacing == "log":
            log_axis(axes)
            axes.set_yscale("log")
    grid[0].set_ylabel(path_label(second.path, second.unit))
