"""Measured tables: a CSV of our own plain layout, read and interpolated.

The layout, separated by commas, semicolons or tabs::

    # convention: exp(-iwt)
    wavelength [nm], n, k
    400, 1.470, 0.0001
    500, 1.465, 0.0001

The first column is the axis (`wavelength`, `frequency`, `photon_energy`, `wavenumber` or
`angular_frequency`) with its unit in brackets, rising or falling throughout. The others are `n` and
perhaps `k`, or `permittivity_real` with `permittivity_imag` or `loss_tangent`. Decimals take a point.

The convention line is never guessed. Under exp(+iwt) `k` and `permittivity_imag` of a lossy medium
stand in the file as negative numbers, and their sign is turned on reading; `loss_tangent` is positive
for a lossy medium under either convention and is never turned.
"""

from __future__ import annotations

import csv
import re
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from mixsim.errors import Refusal, nearest
from mixsim.units import accepted_units, kind_of_axis, show, spectral_from

AXES = {
    "wavelength": "vacuum wavelength",
    "frequency": "frequency",
    "photon_energy": "photon energy",
    "wavenumber": "wavenumber",
    "angular_frequency": "angular frequency",
}
COLUMN_SETS = (
    ("n",),
    ("n", "k"),
    ("permittivity_real", "permittivity_imag"),
    ("permittivity_real", "loss_tangent"),
)
_COLUMNS = tuple(dict.fromkeys(name for names in COLUMN_SETS for name in names))
_UNITS = {kind: [u for u in accepted_units("spectral") if kind_of_axis(u) == kind] for kind in AXES.values()}
_HEADING = r"(?P<name>[^\[\]]*?)\s*(?:\[\s*(?P<unit>[^\]]*?)\s*\])?"
_NUMBER = r"[+-]?(?:[0-9]+\.?[0-9]*|\.[0-9]+)(?:[eE][+-]?[0-9]+)?"
_STATED = r"(?i)#\s*convention\b"
_CONVENTION = r"(?i)#\s*convention\s*[:=]?\s*exp\s*\(([+-])[ij](?:w|ω|omega)t\)"
_SIGNS = "'# convention: exp(-iwt)' (lossy k above 0) or '# convention: exp(+iwt)' (lossy k below 0)"
_SLACK = 1e-12  # the end of a band, written in nm or eV, comes back from rad/s with its last digits changed
_POINT = "decimals take a point (1.47, not 1,47)"

Row = tuple[int, list[str]]


@dataclass(frozen=True, eq=False)
class Table:
    """A measured spectrum, in SI and in the convention exp(−iωt).

    Attributes
    ----------
    omega
        Angular frequency, ascending [rad/s].
    permittivity
        Complex relative permittivity [-].
    unit
        Unit of the axis as written.
    columns
        Names of the other columns as written.
    convention
        Time dependence as the file states it, `exp(-iwt)` or `exp(+iwt)`.
    source
        Name of the file, or "text".
    """

    omega: NDArray[np.float64]
    permittivity: NDArray[np.complex128]
    unit: str
    columns: tuple[str, ...]
    convention: str
    source: str

    @property
    def range_written(self) -> str:
        """Range covered, in the unit of the axis as written, smaller number first."""
        ends = [float(self.omega[0]), float(self.omega[-1])]
        if kind_of_axis(self.unit) == AXES["wavelength"]:
            ends.reverse()
        return " to ".join(show(end, "spectral", self.unit) for end in ends)


def read_table(text_or_path: str | Path) -> Table:
    """Read a measured spectrum.

    Parameters
    ----------
    text_or_path
        A `Path` of a CSV file in the layout of this module, or the content of one as `str`.

    Returns
    -------
    table
        Its content in SI and in the convention exp(−iωt).

    Raises
    ------
    Refusal
        Naming the line, counted from 1, what it holds and what would be right.
    OSError
        Where the file cannot be opened.

    Examples
    --------
    >>> table = read_table("# convention: exp(-iwt)\\nfrequency [GHz], n\\n1, 2.0\\n2, 1.5\\n")
    >>> table.range_written, table.permittivity.real.tolist()
    ('1 GHz to 2 GHz', [4.0, 2.25])
    """
    if isinstance(text_or_path, Path):
        source, text = text_or_path.name, _decoded(text_or_path.read_bytes())
    else:
        source, text = "text", _textual(text_or_path)
    lines = list(enumerate(re.split(r"\r\n|\r|\n", text.removeprefix("\ufeff")), start=1))
    if not any(line.strip() for _, line in lines):
        raise Refusal("line 1: it is empty", "a table has a convention line, a header and at least two rows")
    header, *rows = _cells([(number, line) for number, line in lines if _holds_data(line)])
    sign = _sign(lines, header)
    unit, columns = _header(*header)
    if len(rows) < 2:
        number = rows[0][0] if rows else header[0]
        count = "one row" if rows else "no rows"
        raise Refusal(f"line {number}: {count} below the header", "a table needs at least two")
    values = np.array([_numbers(number, cells, (unit, *columns)) for number, cells in rows])
    with np.errstate(over="ignore", divide="ignore", invalid="ignore"):
        omega = spectral_from(values[:, 0], unit)
        permittivity = _permittivity(dict(zip(columns, values[:, 1:].T, strict=True)), sign)
    for (number, cells), w, value in zip(rows, omega.tolist(), permittivity.tolist(), strict=True):
        if not (0 < w < np.inf and np.isfinite(value)):
            raise Refusal(f"line {number}: {', '.join(cells)}", "too large or too small to be a permittivity")
    _ordered(omega, rows)
    if omega[0] > omega[-1]:
        omega, permittivity = omega[::-1].copy(), permittivity[::-1].copy()
    omega.setflags(write=False)
    permittivity.setflags(write=False)
    return Table(omega, permittivity, unit, columns, "exp(-iwt)" if sign > 0 else "exp(+iwt)", source)


def interpolate(omega: ArrayLike, *, table: Table) -> NDArray[Any]:
    """Permittivity of a measured spectrum, monotone between its points.

    Parameters
    ----------
    omega
        Angular frequency [rad/s].
    table
        The spectrum, as `read_table` gives it.

    Returns
    -------
    permittivity
        Complex relative permittivity [-].

    Raises
    ------
    Refusal
        Outside the range of the table, which is never extrapolated.

    Notes
    -----
    Piecewise cubic Hermite interpolation in ω of real and imaginary part each. Between two rows the value
    stays between theirs, so a passive table stays passive.

    Valid for: spectra sampled more finely than their narrowest band.

    References
    ----------
    F. N. Fritsch, R. E. Carlson, SIAM J. Numer. Anal. 17, 238 (1980); slopes of F. N. Fritsch, J. Butland,
    SIAM J. Sci. Stat. Comput. 5, 300 (1984).

    Examples
    --------
    >>> table = read_table("# convention: exp(-iwt)\\nfrequency [GHz], n\\n1, 2.0\\n2, 1.5\\n")
    >>> print(f"{interpolate(1.5 * 2e9 * 3.141592653589793, table=table):.3f}")
    3.125+0.000j
    """
    from scipy.interpolate import PchipInterpolator

    w = np.asarray(omega, dtype=float)
    low, high = float(table.omega[0]), float(table.omega[-1])
    outside = w[(w < low * (1 - _SLACK)) | (w > high * (1 + _SLACK))]
    if outside.size:
        asked = show(float(outside[0]), "spectral", table.unit)
        raise Refusal(f"{asked} lies outside the table {table.source}", f"it covers {table.range_written}")
    inside = np.clip(w, low, high)
    rows = np.stack([table.permittivity.real, table.permittivity.imag], axis=-1)
    with np.errstate(over="ignore"):  # a step so small that its slope is as good as zero
        value = PchipInterpolator(table.omega, rows)(inside)
    left = np.clip(np.searchsorted(table.omega, inside, side="right") - 1, 0, len(rows) - 2)
    # Rounding of the cubic can leave the rows' interval by an ulp, and a loss of zero would turn negative.
    value = np.clip(value, np.minimum(rows[left], rows[left + 1]), np.maximum(rows[left], rows[left + 1]))
    return _complex(value[..., 0], value[..., 1])[()]


def _decoded(content: bytes) -> str:
    try:
        return _textual(content.decode("utf-8-sig"))
    except UnicodeDecodeError as error:
        line = 1 + content[: error.start].count(b"\n")
        raise Refusal(f"line {line}: it is not UTF-8 text", "a table is plain text saved as UTF-8") from None


def _textual(text: str) -> str:
    if "\x00" in text:
        line = 1 + text[: text.index("\x00")].count("\n")
        raise Refusal(f"line {line}: it is binary, not text", "a table is plain text saved as UTF-8")
    return text


def _holds_data(line: str) -> bool:
    return bool(line.strip()) and not line.lstrip().startswith("#")


def _sign(lines: Sequence[tuple[int, str]], header: Row) -> int:
    """1 where the file states exp(-iwt), -1 where it states exp(+iwt)."""
    stated: dict[int, int] = {}
    for number, line in lines:
        text = line.strip()
        if not re.match(_STATED, text):
            continue
        found = re.fullmatch(_CONVENTION, re.sub(r"\s+", "", text.replace("\N{MINUS SIGN}", "-")))
        if found is None:
            raise Refusal(f"line {number}: convention {text!r} is not understood", f"write {_SIGNS}")
        stated[1 if found[1] == "-" else -1] = number
    if len(stated) == 2:
        raise Refusal(f"line {max(stated.values())}: both conventions are stated", f"write {_SIGNS}")
    if not stated:
        raise Refusal(f"line {header[0]}: no convention is stated above the header", f"add {_SIGNS}")
    return next(iter(stated))


def _cells(lines: Sequence[tuple[int, str]]) -> list[Row]:
    """Cells of each line, by the separator that the header uses."""
    if not lines:
        raise Refusal("line 1: comments only", "a table has a header and at least two rows below them")
    header = lines[0][1]
    separator = max(",;\t", key=header.count)
    rows = []
    for number, line in lines:
        try:
            cells = next(csv.reader([line], delimiter=separator, skipinitialspace=True))
        except csv.Error as error:
            raise Refusal(f"line {number}: {error}", "cells between separators, one row a line") from None
        rows.append((number, [cell.strip() for cell in cells]))
    return rows


def _header(number: int, cells: Sequence[str]) -> tuple[str, tuple[str, ...]]:
    """Unit of the axis, and names of the other columns."""
    if all(re.fullmatch(_NUMBER, cell) for cell in cells):
        raise Refusal(f"line {number}: no header row above the numbers", "such as 'wavelength [nm], n, k'")
    names, units = zip(*(_heading(number, cell) for cell in cells), strict=True)
    if names[0] not in AXES:
        raise Refusal(
            f"line {number}: first column {names[0]!r} is not an axis",
            f"one of {', '.join(AXES)}, with its unit in brackets, as in 'wavelength [nm]'",
            nearest(names[0], AXES),
        )
    unit = _axis_unit(number, names[0], units[0])
    for position, (name, given) in enumerate(zip(names[1:], units[1:], strict=True), start=1):
        if name not in _COLUMNS:
            allowed = f"columns are {', '.join(_COLUMNS)}"
            raise Refusal(f"line {number}: unknown column {name!r}", allowed, nearest(name, _COLUMNS))
        if name in names[1:position]:
            raise Refusal(f"line {number}: column {name!r} stands twice", "each column stands once")
        if given not in ("", "-", "1"):
            raise Refusal(f"line {number}: unit {given!r} for column {name!r}", "it has no unit")
    if not any(set(names[1:]) == set(columns) for columns in COLUMN_SETS):
        sets = "; or ".join(" and ".join(columns) for columns in COLUMN_SETS)
        held = ", ".join(names[1:]) or "nothing"
        raise Refusal(f"line {number}: {held} beside the axis", f"a table holds {sets}")
    return unit, names[1:]


def _heading(number: int, cell: str) -> tuple[str, str]:
    heading = re.fullmatch(_HEADING, cell)
    if heading is None:
        raise Refusal(
            f"line {number}: heading {cell!r}", "a name and its unit in brackets: 'wavelength [nm]'"
        )
    return heading["name"], heading["unit"] or ""


def _axis_unit(number: int, name: str, unit: str) -> str:
    accepted = _UNITS[AXES[name]]
    if not unit:
        raise Refusal(
            f"line {number}: no unit for {name!r}", f"write it in brackets: '{name} [{accepted[0]}]'"
        )
    try:
        kind = kind_of_axis(unit)
    except Refusal as refusal:
        suggestion = refusal.suggestion if refusal.suggestion in accepted else nearest(unit, accepted)
        found = f"line {number}: {refusal.found} for {name!r}"
        raise Refusal(found, f"it takes {', '.join(accepted)}", suggestion) from None
    if kind != AXES[name]:
        found = f"line {number}: unit {unit!r}, of a {kind}, for {name!r}"
        right = next(axis for axis, meant in AXES.items() if meant == kind)
        raise Refusal(found, f"it takes {', '.join(accepted)}", f"{right} [{unit}]")
    return unit


def _numbers(number: int, cells: Sequence[str], headings: Sequence[str]) -> list[float]:
    if len(cells) != len(headings):
        raise Refusal(
            f"line {number}: {len(cells)} cells ({', '.join(cells)}) below a header of {len(headings)}",
            f"one cell a column; {_POINT}",
        )
    for cell in cells:
        if re.fullmatch(_NUMBER, cell):
            continue
        if re.fullmatch(r"[+-]?[0-9]*,[0-9]+(?:[eE][+-]?[0-9]+)?", cell):
            raise Refusal(f"line {number}: {cell!r} has a decimal comma", _POINT, cell.replace(",", "."))
        if cell.lower().lstrip("+-") in ("nan", "inf", "infinity"):
            raise Refusal(f"line {number}: {cell!r} is not finite", "leave out the rows that hold no reading")
        found = repr(cell) if cell else "an empty cell"
        raise Refusal(f"line {number}: {found} where a number is needed", f"a number such as 1.47; {_POINT}")
    values = [float(cell) for cell in cells]
    if values[0] <= 0:
        raise Refusal(f"line {number}: {cells[0]!r} on the axis", "it must be above 0")
    if "n" in headings and (n := cells[headings.index("n")]).startswith("-"):
        raise Refusal(f"line {number}: {n!r} for n", "an index is not negative")
    return values


def _ordered(omega: NDArray[np.float64], rows: Sequence[Row]) -> None:
    steps = np.diff(omega)
    twice = np.flatnonzero(steps == 0)
    if twice.size:
        number, cells = rows[twice[0] + 1]
        raise Refusal(f"line {number}: {cells[0]!r} stands twice on the axis", "each point stands once")
    rising = np.sign(steps)
    against = np.flatnonzero(rising != (np.sign(rising.sum()) or rising[0]))
    if against.size:
        number, cells = rows[against[0] + 1]
        raise Refusal(
            f"line {number}: {cells[0]!r} is out of order", "rows rise or fall along the axis throughout"
        )


def _permittivity(columns: dict[str, NDArray[np.float64]], sign: int) -> NDArray[np.complex128]:
    if "n" in columns:
        n, k = columns["n"], sign * columns.get("k", np.zeros_like(columns["n"]))
        return _complex(n * n - k * k, 2.0 * n * k)
    real = columns["permittivity_real"]
    if "loss_tangent" in columns:
        return _complex(real, real * columns["loss_tangent"])
    return _complex(real, sign * columns["permittivity_imag"])


def _complex(real: NDArray[np.float64], imaginary: NDArray[np.float64]) -> NDArray[np.complex128]:
    out = np.empty(real.shape, dtype=np.complex128)
    out.real = real
    out.imag = imaginary + 0.0  # never -0.0: the root of a loss-free metal would be the growing wave
    return out
