"""What all plots share: size, type, colours and dashes that also read in black and white."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from mixsim.units import kind_of_axis

if TYPE_CHECKING:
    from matplotlib.axes import Axes

WIDTH, HEIGHT, RESOLUTION = 6.3, 4.6, 200  # inches, inches, dots an inch
INK, MUTED, LINE = "#1d2733", "#6f7a86", "#c9ced4"
STRONG = ("#12436d", "#a8431f")  # dark blue and rust: far apart in lightness as well as in hue
DASHES: tuple[Any, ...] = ((0, (5, 2)), (0, (1.5, 1.5)), (0, (7, 2, 1.5, 2)), (0, (3, 1, 1, 1, 1, 1)))
SETTINGS: dict[Any, Any] = {
    "font.size": 9.0,
    "axes.titlesize": 10.0,
    "axes.labelsize": 9.0,
    "axes.edgecolor": MUTED,
    "axes.linewidth": 0.7,
    "axes.labelcolor": INK,
    "axes.spines.top": False,
    "axes.spines.right": False,
    "xtick.color": INK,
    "ytick.color": INK,
    "xtick.major.width": 0.7,
    "ytick.major.width": 0.7,
    "legend.fontsize": 8.0,
    "legend.frameon": False,
    "lines.solid_capstyle": "round",
    "svg.hashsalt": "mixsim",
    "svg.fonttype": "path",
    "pdf.compression": 6,
}
_UNITS = {"cm^-1": "cm⁻¹", "s^-1": "s⁻¹"}


def axis_label(unit: str) -> str:
    """Label of a spectral axis.

    Examples
    --------
    >>> axis_label("cm^-1")
    'wavenumber / cm⁻¹'
    """
    return f"{kind_of_axis(unit)} / {_UNITS.get(unit, unit)}"


def path_label(path: str, unit: str) -> str:
    """Label of a varied number: the last two words of its path, and its unit.

    Examples
    --------
    >>> path_label("inclusions.oxide.volume_fraction", "%")
    'oxide volume fraction / %'
    """
    words = " ".join(path.split(".")[-2:]).replace("_", " ")
    return f"{words} / {_UNITS.get(unit, unit)}" if unit else words


def log_axis(axes: Axes) -> None:
    """Give an axes a logarithmic abscissa whose numbers are written out."""
    from matplotlib.ticker import LogLocator, NullFormatter

    axes.set_xscale("log")
    low, high = axes.get_xlim()
    steps = (1.0, 2.0, 5.0) if high < 300.0 * low else (1.0,)
    axes.xaxis.set_major_locator(LogLocator(subs=steps))
    axes.xaxis.set_major_formatter("{x:g}")
    axes.xaxis.set_minor_formatter(NullFormatter())


def quantity_at(value: float, unit: str) -> str:
    """A number in its unit, for a label.

    Examples
    --------
    >>> quantity_at(894.4272, "cm^-1")
    '894.43 cm⁻¹'
    """
    return f"{value:.5g} {_UNITS.get(unit, unit)}"


def spectral_axis(axes: Axes, unit: str, spacing: str) -> Axes:
    """Give an axes its spectral axis."""
    if spacing == "log":
        log_axis(axes)
    axes.set_xlabel(axis_label(unit))
    return axes
