"""The plain layout of a measured table: its text, taken apart line by line and checked.

The layout, separated by commas, semicolons or tabs::

    # convention: exp(-iwt)
    wavelength [nm], n, k
    400, 1.470, 0.0001
    500, 1.465, 0.0001

The first column is the axis (`wavelength`, `frequency`, `photon_energy`, `wavenumber` or
`angular_frequency`) with its unit in brackets, rising or falling throughout. The others are `n` and
perhaps `k`, or `permittivity_real` with `permittivity_imag`, `loss_tangent` or `conductivity [S/m]`, which
stands for the whole loss; beside them perhaps `permeability_real` with `permeability_imag` or
`magnetic_loss_tangent`. Where both parts of the permittivity stand, columns that follow from them (`n`, `k`,
`loss_tangent`, …) are skipped, so that a written prediction is a table too. Decimals take a point; between
semicolons or tabs a comma will do, throughout.

Beside a column may stand its standard uncertainty, as `u(n)`, in the same unit.

The convention line is never guessed. Under exp(+iwt) `k`, `permittivity_imag` and `permeability_imag` of a
lossy medium stand in the file as negative numbers, and their sign is turned on reading; loss tangents and
`conductivity` are positive for a lossy medium under either convention and are never turned.
"""

from __future__ import annotations

import csv
import re
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from mixsim.errors import Refusal, nearest
from mixsim.units import accepted_units, from_unit, kind_of_axis

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
    ("permittivity_real", "conductivity"),
)
MAGNETIC_SETS = (
    ("permeability_real", "permeability_imag"),
    ("permeability_real", "magnetic_loss_tangent"),
)
DIMENSIONS = {"conductivity": "conductivity"}  # of the columns that have one
_WHOLE = COLUMN_SETS[2]  # what the derived ones follow from
_DERIVED = ("n", "k", "loss_tangent", "magnetic_loss_tangent", "absorption", "conductivity")
_COLUMNS = tuple(dict.fromkeys(name for names in (*COLUMN_SETS, *MAGNETIC_SETS) for name in names))
_UNITS = {kind: [u for u in accepted_units("spectral") if kind_of_axis(u) == kind] for kind in AXES.values()}
_HEADING = r"(?P<name>[^\[\]]*?)\s*(?:\[\s*(?P<unit>[^\]]*?)\s*\])?"
_NUMBER = r"[+-]?(?:[0-9]+\.?[0-9]*|\.[0-9]+)(?:[eE][+-]?[0-9]+)?"
_ALONG = r"(\w+) axis [123]"  # of a prediction with principal axes
_STATED = r"(?i)#\s*convention\b"
_CONVENTION = r"(?i)#\s*convention\s*[:=]?\s*exp\s*\(([+-])[ij](?:w|ω|omega)t\)"
_SIGNS = "'# convention: exp(-iwt)' (lossy k above 0) or '# convention: exp(+iwt)' (lossy k below 0)"
_POINT = "decimals take a point (1.47, not 1,47)"
_COMMA = r"[+-]?[0-9]*,[0-9]+(?:[eE][+-]?[0-9]+)?"

Row = tuple[int, list[str]]


@dataclass(frozen=True, eq=False)
class Content:
    """What the text of a table holds, before any physics.

    Attributes
    ----------
    sign
        1 where the file states exp(−iωt), −1 where it states exp(+iωt).
    unit
        Unit of the axis as written.
    columns
        Names of the other columns as written.
    units
        Their units as written, empty where they have none.
    rows
        Cells of each row, with the number of its line.
    values
        The same as numbers, shape (rows, 1 + columns).
    """

    sign: int
    unit: str
    columns: tuple[str, ...]
    units: tuple[str, ...]
    rows: list[Row]
    values: NDArray[np.float64]


def parse(text_or_path: str | Path) -> Content:
    """Take the text of a table apart; a `Refusal` names the line that is wrong."""
    text = _decoded(text_or_path.read_bytes()) if isinstance(text_or_path, Path) else _textual(text_or_path)
    lines = list(enumerate(re.split(r"\r\n|\r|\n", text.removeprefix("\ufeff")), start=1))
    if not any(line.strip() for _, line in lines):
        raise Refusal("line 1: it is empty", "a table has a convention line, a header and at least two rows")
    header, *rows = _cells([(number, line) for number, line in lines if _holds_data(line)])
    sign = _sign(lines, header)
    rows = _without_derived(header, rows)
    header = (header[0], _kept(header[1], header[1]))
    unit, columns, units = _header(*header)
    if len(rows) < 2:
        number = rows[0][0] if rows else header[0]
        count = "one row" if rows else "no rows"
        raise Refusal(f"line {number}: {count} below the header", "a table needs at least two")
    values = np.array([_numbers(number, cells, (unit, *columns)) for number, cells in rows])
    return Content(sign, unit, columns, units, rows, values)


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
    return rows if separator == "," else _with_points(rows)


def _with_points(rows: Sequence[Row]) -> list[Row]:
    """Decimal commas turned into points; both in one table are refused: 1,500 may be a thousand."""
    numbers = (cell for _, cells in rows[1:] for cell in cells if re.fullmatch(_NUMBER, cell))
    pointed = next((cell for cell in numbers if "." in cell), None)
    turned = [rows[0]]
    for number, cells in rows[1:]:
        commas = [cell for cell in cells if re.fullmatch(_COMMA, cell)]
        if commas and pointed:
            found = f"line {number}: {commas[0]!r} has a decimal comma, and {pointed!r} elsewhere a point"
            raise Refusal(found, "one decimal sign throughout, and none between thousands")
        turned.append((number, [cell.replace(",", ".") if cell in commas else cell for cell in cells]))
    return turned


def _without_derived(header: Row, rows: Sequence[Row]) -> list[Row]:
    """Rows without the columns that follow from both parts of the permittivity; their cells are counted."""
    count = len(header[1])
    for number, cells in rows:
        if len(cells) != count:
            found = f"line {number}: {len(cells)} cells ({', '.join(cells)}) below a header of {count}"
            raise Refusal(found, f"one cell a column; {_POINT}")
    return [(number, _kept(header[1], cells)) for number, cells in rows]


def _kept(headings: Sequence[str], cells: Sequence[str]) -> list[str]:
    """Cells of the columns that are read."""
    names = [name.partition("[")[0].strip() for name in headings]
    if not set(_WHOLE) <= set(names):
        return list(cells)
    magnetic = "permeability_real" in names and "permeability_imag" not in names
    skipped = {name for name in _DERIVED if not (magnetic and name == "magnetic_loss_tangent")}
    return [cell for name, cell in zip(names, cells, strict=True) if name not in skipped]


def _header(number: int, cells: Sequence[str]) -> tuple[str, tuple[str, ...], tuple[str, ...]]:
    """Unit of the axis, and names and units of the other columns."""
    if all(re.fullmatch(_NUMBER, cell) for cell in cells):
        raise Refusal(f"line {number}: no header row above the numbers", "such as 'wavelength [nm], n, k'")
    names, units = zip(*(_heading(number, cell) for cell in cells), strict=True)
    if names[0] not in AXES and (later := [name for name in names[1:] if name in AXES]):
        found = f"line {number}: {names[0]!r} before the axis {later[0]!r}"
        raise Refusal(found, "a table holds one spectrum, its axis first; a sweep holds one for each value")
    if names[0] not in AXES:
        raise Refusal(
            f"line {number}: first column {names[0]!r} is not an axis",
            f"one of {', '.join(AXES)}, with its unit in brackets, as in 'wavelength [nm]'",
            nearest(names[0], AXES),
        )
    unit = _axis_unit(number, names[0], units[0])
    for position, (heading, given) in enumerate(zip(names[1:], units[1:], strict=True), start=1):
        name = doubted(heading) or heading
        if name != heading and name in _COLUMNS and name not in names[1:]:
            found = f"line {number}: {heading!r} without {name!r}"
            raise Refusal(found, "an uncertainty stands beside its column")
        if (along := re.fullmatch(_ALONG, name)) and along[1] in _COLUMNS:
            found = f"line {number}: {name!r} is along one axis of aligned grains"
            raise Refusal(found, f"a table holds one spectrum: keep one axis, and call it {along[1]!r}")
        if name not in _COLUMNS:
            allowed = f"columns are {', '.join(_COLUMNS)}"
            raise Refusal(f"line {number}: unknown column {name!r}", allowed, nearest(name, _COLUMNS))
        if heading in names[1:position]:
            raise Refusal(f"line {number}: column {heading!r} stands twice", "each column stands once")
        _column_unit(number, name, given)
    held = [name for name in names[1:] if doubted(name) is None]
    magnetic = {name for names in MAGNETIC_SETS for name in names}
    electric = set(held) - magnetic
    known = not set(held) & magnetic or any(set(held) & magnetic == set(names) for names in MAGNETIC_SETS)
    if not known or not any(electric == set(columns) for columns in COLUMN_SETS):
        sets = "; or ".join(" and ".join(columns) for columns in COLUMN_SETS)
        sets += "; beside them perhaps " + " or ".join(" and ".join(names) for names in MAGNETIC_SETS)
        shown = ", ".join(held) or "nothing"
        raise Refusal(f"line {number}: {shown} beside the axis", f"a table holds {sets}")
    return unit, names[1:], units[1:]


def doubted(heading: str) -> str | None:
    """Column whose standard uncertainty a heading says it holds, or None."""
    match = re.fullmatch(r"u\(\s*(.*?)\s*\)", heading)
    return match[1] if match else None


def _heading(number: int, cell: str) -> tuple[str, str]:
    heading = re.fullmatch(_HEADING, cell)
    if heading is None:
        raise Refusal(
            f"line {number}: heading {cell!r}", "a name and its unit in brackets: 'wavelength [nm]'"
        )
    return heading["name"], heading["unit"] or ""


def _column_unit(number: int, name: str, unit: str) -> None:
    if name not in DIMENSIONS:
        if unit not in ("", "-", "1"):
            raise Refusal(f"line {number}: unit {unit!r} for column {name!r}", "it has no unit")
        return
    accepted = accepted_units(DIMENSIONS[name])
    try:
        from_unit(1.0, unit, DIMENSIONS[name])
    except Refusal:
        found = f"unit {unit!r} for column {name!r}" if unit else f"no unit for {name!r}"
        better = f"{name} [{nearest(unit, accepted) or accepted[0]}]"
        raise Refusal(f"line {number}: {found}", f"it takes {', '.join(accepted)}", better) from None


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
    for cell in cells:
        if re.fullmatch(_NUMBER, cell):
            continue
        if re.fullmatch(_COMMA, cell):
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
    for heading, cell, value in zip(headings, cells, values, strict=True):
        if doubted(heading) is not None and not value > 0.0:
            raise Refusal(f"line {number}: {cell!r} for {heading}", "an uncertainty is above zero")
    return values


def check_order(omega: NDArray[np.float64], rows: Sequence[Row]) -> None:
    """Refuse a point of the axis that stands twice, or out of order."""
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
