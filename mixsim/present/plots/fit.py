"""The plot of a fit: what was read beside what is fitted, and how far they are apart."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np

from mixsim.analysis import Fitted
from mixsim.analysis.fitting.answer import Met
from mixsim.errors import Refusal
from mixsim.observables import QUANTITIES
from mixsim.present.plots.beyond import said, shade
from mixsim.present.plots.style import (
    DASHES,
    FEW,
    MUTED,
    STRONG,
    headed,
    legend_below,
    spectral_axis,
)
from mixsim.units import spectral_to, written_unit

if TYPE_CHECKING:
    from matplotlib.figure import Figure

MOST_PANELS = 4
OPTICAL = 2e13  # rad/s from which an axis without a band is drawn in wavelength
USUAL = 2.0  # standard uncertainties within which most readings lie


def draw(figure: Figure, answer: Fitted) -> None:
    """Draw a fit: a column for each quantity, readings and fit above, what is left over below."""
    from matplotlib.lines import Line2D

    spectral = [met for met in answer.met if met.observation.omega is not None]
    quantities = list(dict.fromkeys(met.observation.quantity for met in spectral))
    if not quantities:
        allowed = "write .csv, .json or .npz"
        raise Refusal("a fit without readings at a frequency has no picture", allowed)
    quantities = quantities[:MOST_PANELS]
    samples = list(dict.fromkeys(met.observation.sample for met in spectral))
    unit, spacing = _axis(answer, spectral)
    grid: Any = figure.subplots(
        2, len(quantities), sharex=True, squeeze=False, gridspec_kw={"height_ratios": [2.2, 1.0]}
    )
    handles: dict[str, Any] = {}
    for column, quantity in enumerate(quantities):
        above, below = grid[0, column], grid[1, column]
        for met in spectral:
            if met.observation.quantity == quantity:
                handles |= _one(above, below, met, samples.index(met.observation.sample), unit)
        symbol, si = QUANTITIES[quantity].symbol, QUANTITIES[quantity].unit
        above.set_ylabel(f"{symbol} / {si}" if si else symbol)
        below.axhline(0.0, color=MUTED, lw=0.7)
        below.axhspan(-USUAL, USUAL, color=MUTED, alpha=0.12, lw=0)
        below.set_ylabel("off, in ±" if column == 0 else "")
        spectral_axis(below, unit, spacing)
    shade(grid[0], answer, unit)  # below, a band of grey means something else
    headed(figure, answer.recipe.schema.title or "fit", _below(answer) + said(answer))
    legend = legend_below(figure, list(handles.values()), list(handles))
    for handle in legend.legend_handles:
        if isinstance(handle, Line2D) and handle.get_marker() == ".":
            handle.set(markersize=7.0, alpha=1.0)  # those of the plot are too small to be recognised


def _one(above: Any, below: Any, met: Met, number: int, unit: str) -> dict[str, Any]:
    """One column of readings; returns what the legend names."""
    one = met.observation
    assert one.omega is not None
    x = spectral_to(one.omega, unit)
    colour, dashes = STRONG[number % len(STRONG)], ["-", *DASHES][number // len(STRONG) % (1 + len(DASHES))]
    few = len(x) <= 4 * FEW
    name = f"{one.sample}: " if one.sample else ""
    if few:
        std = None if np.isnan(one.std).any() else one.std
        read = above.errorbar(x, one.values, yerr=std, fmt="o", ms=3.5, color=colour, lw=0.9, alpha=0.75)
    else:
        (read,) = above.plot(x, one.values, ".", ms=2.0, color=colour, alpha=0.45, mew=0)
    order = np.argsort(x)
    mark = "_" if len(x) == 1 else None
    (fitted,) = above.plot(
        x[order], met.predicted[order], color=colour, lw=1.6, ls=dashes, marker=mark, ms=12
    )
    below.plot(x, met.standardised, "." if not few else "o", ms=2.0 if not few else 3.5, color=colour, mew=0)
    return {f"{name}read": read, f"{name}fitted": fitted}


def _axis(answer: Fitted, spectral: list[Met]) -> tuple[str, str]:
    """Unit and spacing of the axis: those of the recipe's band, or what suits the readings."""
    band = answer.recipe.schema.band
    omega = np.concatenate([met.observation.omega for met in spectral if met.observation.omega is not None])
    wide = float(omega.max() / omega.min()) > 20.0
    if band is not None:
        first = band.values[0] if band.values else band.from_
        if first is not None:
            return written_unit(first), "log" if wide else "linear"
    return ("nm" if omega.min() > OPTICAL else "GHz"), "log" if wide else "linear"


def _below(answer: Fitted) -> str:
    """Rule and quality."""
    quality = answer.quality
    if quality.reduced is not None:
        return f"{answer.rule} · reduced χ² {quality.reduced:.3g}"
    return f"{answer.rule}" if quality.noise is None else f"{answer.rule} · scatter {quality.noise:.3g}"
