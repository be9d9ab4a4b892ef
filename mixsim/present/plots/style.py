"""What all plots share: size, type, colours and dashes that also read in black and white."""

from __future__ import annotations

import textwrap
from collections.abc import Sequence
from itertools import pairwise
from typing import TYPE_CHECKING, Any

from mixsim.present.columns import owned
from mixsim.units import kind_of_axis

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.axis import Axis
    from matplotlib.figure import Figure

WIDTH, HEIGHT, RESOLUTION = 6.3, 4.6, 200  # inches, inches, dots an inch
INK, MUTED = "#1d2733", "#6f7a86"
STRONG = ("#12436d", "#a8431f", "#5c9a6b")  # dark blue, rust, sage: apart in lightness as well as in hue
DASHED: Any = (0, (5, 2))
DOTTED: Any = (0, (1.5, 1.5))
DASHES: tuple[Any, ...] = (DASHED, DOTTED, (0, (7, 2, 1.5, 2)), (0, (3, 1, 1, 1, 1, 1)))
SMALL = 8.0  # points, of notes and legends
FEW = 12  # points of a curve up to which each is marked
SETTINGS: dict[Any, Any] = {
    "font.size": 9.0,
    "axes.titlesize": 10.0,
    "axes.labelsize": 9.0,
    "axes.edgecolor": MUTED,
    "axes.linewidth": 0.7,
    "axes.labelcolor": INK,
    "axes.spines.top": False,
    "axes.spines.right": False,
    "axes.formatter.useoffset": False,
    "axes.formatter.use_mathtext": True,
    "xtick.color": INK,
    "ytick.color": INK,
    "xtick.major.width": 0.7,
    "ytick.major.width": 0.7,
    "legend.fontsize": SMALL,
    "legend.frameon": False,
    "legend.labelcolor": INK,
    "lines.solid_capstyle": "round",
    "svg.hashsalt": "mixsim",
    "svg.fonttype": "path",
    "pdf.compression": 6,
}
_UNITS = {"cm^-1": "cm⁻¹", "s^-1": "s⁻¹"}
_TITLE_LETTERS = 84  # of a line that fits the width
_LEGEND_LETTERS, _HANDLE_LETTERS = 108, 9  # of a line, and taken by each handle
_NOTE = {"boxstyle": "square,pad=0.12", "facecolor": "white", "edgecolor": "none", "alpha": 0.8}


def settings() -> Any:
    """A context in which a figure is drawn and saved, whatever a person's own settings are."""
    from matplotlib import style

    return style.context(["default", SETTINGS])


def axis_label(unit: str) -> str:
    """Label of a spectral axis.

    Examples
    --------
    >>> axis_label("cm^-1")
    'wavenumber / cm⁻¹'
    """
    return f"{kind_of_axis(unit)} / {_UNITS.get(unit, unit)}"


def path_label(path: str, unit: str) -> str:
    """Label of a varied number: whose it is, what it is, and its unit.

    Examples
    --------
    >>> path_label("inclusions.oxide.volume_fraction", "%")
    'oxide volume fraction / %'
    """
    words = " ".join(owned(path)).replace("_", " ")
    return f"{words} / {_UNITS.get(unit, unit)}" if unit else words


def quantity_at(value: float, unit: str) -> str:
    """A number in its unit, for a label.

    Examples
    --------
    >>> quantity_at(894.4272, "cm^-1")
    '894.43 cm⁻¹'
    """
    return f"{value:.5g} {_UNITS.get(unit, unit)}"


def headed(figure: Figure, title: str, below: str) -> None:
    """Give a figure its title and the line below it, each wrapped to the width."""
    lines = [line for text in (title, below) for line in textwrap.wrap(text, _TITLE_LETTERS)]
    # a title is a person's text: a $ in it is a $
    figure.suptitle("\n".join(lines), fontsize=10, color=INK, parse_math=False)


def legend_below(figure: Figure, handles: Sequence[Any], labels: Sequence[str]) -> Any:
    """Put a legend below the panels, in as many columns as fit."""
    fitting = (n for n in range(4, 1, -1) if _letters(labels, n) <= _LEGEND_LETTERS)
    return figure.legend(handles, labels, loc="outside lower center", ncols=next(fitting, 1))


def _letters(labels: Sequence[str], columns: int) -> int:
    """Width of a legend in letters; its first columns take what does not divide evenly."""
    rows, over = divmod(len(labels), columns)
    ends = [rows * column + min(column, over) for column in range(columns + 1)]
    held = [labels[start:stop] for start, stop in pairwise(ends) if start < stop]
    return sum(max(map(len, column)) + _HANDLE_LETTERS for column in held)


def legend_above(axes: Axes, *, columns: int = 2) -> Any:
    """Put a legend above a panel, where it covers no curve."""
    return axes.legend(
        loc="lower left",
        bbox_to_anchor=(0.0, 1.0),
        ncols=columns,
        borderaxespad=0.2,
        handlelength=1.8,
        columnspacing=1.0,
    )


def written_out(number: float) -> str:
    """A number of an axis: in full, or as a power of ten where that would be long.

    Examples
    --------
    >>> written_out(20000.0), written_out(1e7), written_out(2e-6)
    ('20000', '10⁷', '2×10⁻⁶')
    """
    if 1e-4 <= abs(number) < 1e6 or number == 0.0:
        return f"{number:g}"
    mantissa, exponent = f"{number:.3e}".split("e")
    power = "10" + str(int(exponent)).translate(str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹"))
    return power if float(mantissa) == 1.0 else f"{float(mantissa):g}×{power}"


def log_ticks(axis: Axis, low: float, high: float) -> None:
    """Write the numbers of a logarithmic axis out."""
    from matplotlib.ticker import LogLocator, MaxNLocator, NullFormatter

    if high < 8.0 * low:
        axis.set_major_locator(MaxNLocator(5, steps=[1, 2, 5, 10]))
    else:
        axis.set_major_locator(LogLocator(subs=(1.0, 2.0, 5.0) if high < 300.0 * low else (1.0,)))
    axis.set_major_formatter(lambda number, _: written_out(number))
    axis.set_minor_formatter(NullFormatter())


def log_axis(axes: Axes, *, ordinate: bool = False) -> None:
    """Give an axes a logarithmic abscissa, or ordinate, whose numbers are written out."""
    if ordinate:
        axes.set_yscale("log")
        log_ticks(axes.yaxis, *sorted(axes.get_ylim()))
    else:
        axes.set_xscale("log")
        log_ticks(axes.xaxis, *sorted(axes.get_xlim()))


def spectral_axis(axes: Axes, unit: str, spacing: str) -> Axes:
    """Give an axes its spectral axis."""
    if spacing == "log":
        log_axis(axes)
    axes.set_xlabel(axis_label(unit))
    return axes


def marker_of(count: int) -> str | None:
    """Marker of a curve with so many points: few are shown as points, not only as the lines between."""
    return "o" if count <= FEW else None


def note(size: float = SMALL) -> dict[str, Any]:
    """Looks of a text among curves, readable where one runs below it."""
    return {"fontsize": size, "color": INK, "bbox": _NOTE, "zorder": 4}


def with_raised(text: str) -> str:
    """A shown quantity with raised exponents in its unit.

    Examples
    --------
    >>> with_raised("1179 ± 28 cm^-1")
    '1179 ± 28 cm⁻¹'
    """
    for plain, raised in _UNITS.items():
        text = text.replace(plain, raised)
    return text


def no_loss(axes: Axes) -> None:
    """Say that there is no loss, in place of a curve at zero on a scale that means nothing."""
    axes.set_ylim(-0.05, 1.0)
    axes.text(0.5, 0.5, "no loss in the model", transform=axes.transAxes, ha="center", color=MUTED)
