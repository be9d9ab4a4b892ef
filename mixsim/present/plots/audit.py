"""The plot of an audit: a spectrum and what Kramers–Kronig makes of its loss, its loss, and what is left."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np

from mixsim.analysis.auditing import Audit
from mixsim.analysis.checks import TOLERANCE, Examined, allowed_misfit
from mixsim.errors import Refusal
from mixsim.present.plots.style import (
    DASHED,
    INK,
    MUTED,
    STRONG,
    headed,
    legend_below,
    marker_of,
    no_loss,
    spectral_axis,
)
from mixsim.units import spectral_to

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

WIDE = 10.0  # ratio of the ends of a band from which its axis is logarithmic
MOST = 2  # columns that can be read side by side
_STEEP = 100.0  # ratio of sizes from which a part is drawn on a scale that is linear only near zero


def draw(figure: Figure, answer: Audit) -> None:
    """Draw the subject: real part and its reconstruction, loss, and the residual in three panels.

    Raises
    ------
    Refusal
        Where no spectrum was looked at.
    """
    shown = _chosen(answer)
    if not shown:
        raise Refusal("no spectrum to draw", "an audit of a material, a table, or a recipe with a band")
    grid: Any = figure.subplots(3, len(shown), sharex="col", squeeze=False, height_ratios=(3, 2, 2))
    for column, examined in enumerate(shown):
        real_part(grid[0, column], examined)
        loss(grid[1, column], examined)
        residual(grid[2, column], examined)
        if len(shown) > 1:
            grid[0, column].set_title(
                f"{examined.subject.of}, {examined.subject.symbol}", fontsize=9, color=INK
            )
    failed = [finding.name for finding in answer.findings if finding.verdict == "failed"]
    word = f"failed: {', '.join(dict.fromkeys(failed))}" if failed else "nothing failed"
    headed(figure, f"audit of {answer.file}", word)
    legends = [panel.get_legend_handles_labels() for panel in (grid[0, 0], grid[2, 0])]
    legend_below(figure, *([item for legend in legends for item in legend[part]] for part in (0, 1)))


def real_part(axes: Axes, examined: Examined) -> Axes:
    """Draw ε′ (or μ′) as it is, and as its loss asks for."""
    found, subject = examined.completion, examined.subject
    x = spectral_to(found.compared, subject.unit)
    given = found.given.real
    points = {"marker": "o", "ms": 2.5, "ls": "none"} if subject.measured else {"lw": 2.0}
    axes.plot(x, given, color=STRONG[0], label="measured" if subject.measured else "model", **points)
    rebuilt = given - found.residual.real
    axes.plot(x, rebuilt, color=STRONG[1], lw=1.3, ls=DASHED, label="Kramers–Kronig of the loss", zorder=3)
    _scaled(axes, given)
    low, high = axes.get_ylim()
    least = TOLERANCE * (1.0 + float(np.max(np.abs(given))))  # a residual of nothing is not to look like one
    if high - low < least:
        middle = 0.5 * (low + high)
        axes.set_ylim(middle - least, middle + least)
    return _labelled(axes, f"{subject.symbol}′")


def loss(axes: Axes, examined: Examined) -> Axes:
    """Draw ε″ (or μ″)."""
    subject = examined.subject
    x, values = spectral_to(subject.omega, subject.unit), subject.values.imag
    if np.any(values):
        axes.plot(x, values, color=STRONG[0], lw=1.5, marker=marker_of(len(x)), ms=3)
        _scaled(axes, values)
    else:
        no_loss(axes)
    return _labelled(axes, f"{subject.symbol}″")


def residual(axes: Axes, examined: Examined) -> Axes:
    """Draw what is left of the real part, relative to 1 + |ε|, with what noise and coarse rows let expect."""
    found, subject = examined.completion, examined.subject
    x, size = spectral_to(found.compared, subject.unit), 1.0 + np.abs(found.given)
    allowed = 100.0 * allowed_misfit(examined)
    axes.fill_between(
        x,
        -allowed,
        allowed,
        color=MUTED,
        alpha=0.25,
        lw=0,
        label=f"allowed: noise, coarse rows, {100.0 * TOLERANCE:.0f} %",
    )
    axes.plot(x, 100.0 * found.residual.real / size, color=STRONG[0], lw=1.2)
    axes.axhline(0.0, color=MUTED, lw=0.7)
    span = (float(subject.omega[-1] / subject.omega[0])) > WIDE
    spectral_axis(axes, subject.unit, "log" if span else "linear")
    return _labelled(axes, "residual / %")


def _chosen(answer: Audit) -> list[Examined]:
    """The subject itself, which comes last, in ε and μ; of a recipe without a mixture, its first material."""
    if not answer.spectra:
        return []
    of = answer.spectra[-1].subject.of
    return [spectrum for spectrum in answer.spectra if spectrum.subject.of == of][:MOST]


def _labelled(axes: Axes, label: str) -> Axes:
    axes.set_ylabel(label)
    axes.margins(x=0.01)
    return axes


def _scaled(axes: Axes, values: Any) -> None:
    """Part that spans orders of magnitude: linear near zero, logarithmic beyond."""
    sizes = np.abs(values[values != 0.0])
    if sizes.size and sizes.max() > _STEEP * np.median(sizes):
        axes.set_yscale("symlog", linthresh=float(np.median(sizes)))
