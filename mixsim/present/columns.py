"""Text in columns: aligned, wrapped to the width of the terminal; loads almost nothing."""

from __future__ import annotations

import shutil
import textwrap
from collections.abc import Iterable, Sequence

GAP = "  "
NARROWEST = 24  # to which the last column may be wrapped


def owned(path: str) -> list[str]:
    """The words of a path that tell a reader whose number it is, without those of the recipe's layout.

    Examples
    --------
    >>> owned("materials.tin-oxide.permittivity.terms.lattice.plasma")
    ['tin-oxide', 'lattice', 'plasma']
    >>> owned("voids.volume_fraction")
    ['voids', 'volume_fraction']
    """
    words = path.split(".")
    if words[0] in ("inclusions", "materials", "dopants"):
        words = words[1:]
    return [word for word in words if word not in ("permittivity", "terms", "shape", "index")] or words


def width() -> int:
    """Width of the terminal, 80 where there is none."""
    return shutil.get_terminal_size((80, 24)).columns


def table(headings: Sequence[str], rows: Iterable[Sequence[str]], *, left: int = 1) -> str:
    """Rows under their headings.

    Parameters
    ----------
    headings
        One for each column; a heading may have several lines. All empty: none is shown.
    rows
        Cells.
    left
        How many columns, from the first, are aligned to the left; the others to the right.

    Returns
    -------
    text
        One line for each row, without trailing blanks.

    Examples
    --------
    >>> print(table(["phase", "volume"], [["host", "96 %"], ["oxide", "4 %"]]))
    phase  volume
    host     96 %
    oxide     4 %
    """
    cells = [list(row) for row in rows]
    tops = [heading.split("\n") for heading in headings]
    height = max(map(len, tops))
    head = [[(["", *[""] * height, *top])[-height + line] for top in tops] for line in range(height)]
    everything = [*(head if any(headings) else []), *cells]
    widths = [max(len(row[i]) for row in everything) for i in range(len(headings))]
    lines = []
    for row in everything:
        shown = [
            cell.ljust(size) if i < left else cell.rjust(size)
            for i, (cell, size) in enumerate(zip(row, widths, strict=True))
        ]
        lines.append(GAP.join(shown).rstrip())
    return "\n".join(lines)


def described(headings: Sequence[str], rows: Iterable[Sequence[str]]) -> str:
    """Rows whose last column is prose, wrapped to the terminal.

    Examples
    --------
    >>> print(described(["rule", "for"], [["bruggeman", "phases on the same footing"]]))
    rule       for
    bruggeman  phases on the same footing
    """
    cells = [list(row) for row in rows]
    before = [max(len(row[i]) for row in [headings, *cells]) for i in range(len(headings) - 1)]
    room = max(NARROWEST, width() - sum(before) - len(GAP) * len(before))
    spread = []
    for *first, prose in cells:
        parts = textwrap.wrap(prose, room) or [""]
        spread += [[*first, parts[0]], *([*[""] * len(first), part] for part in parts[1:])]
    return table(headings, spread, left=len(headings))


def paragraph(text: str, *, indent: str = "") -> str:
    """Prose wrapped to the terminal; later lines are indented a little."""
    return textwrap.fill(
        text, width(), initial_indent=indent, subsequent_indent=f"{indent}  ", break_on_hyphens=False
    )
