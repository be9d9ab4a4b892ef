"""At which line of a TOML text a path was written: a best effort for messages."""

from __future__ import annotations

import re
from collections.abc import Mapping

# kept as text: compiled when something is wrong, not at every start
_HEADER = r"^\s*(\[\[?)\s*([^\]]+?)\s*\]\]?\s*(?:#.*)?$"
_KEY = r"""^\s*((?:"[^"]*"|'[^']*'|[A-Za-z0-9_-]+)(?:\s*\.\s*(?:"[^"]*"|'[^']*'|[A-Za-z0-9_-]+))*)\s*="""
_PART = r""""([^"]*)"|'([^']*)'|([A-Za-z0-9_-]+)"""


def lines_of(text: str) -> Mapping[str, int]:
    """Line of every key and table header of a TOML text, by path."""
    found: dict[str, int] = {}
    table: tuple[str, ...] = ()
    entries: dict[str, int] = {}
    for number, line in enumerate(text.splitlines(), start=1):
        if header := re.match(_HEADER, line):
            table = _parts(header[2])
            if header[1] == "[[":
                name = ".".join(table)
                entries[name] = entries.get(name, -1) + 1
                table = (*table, str(entries[name]))
            for length in range(1, len(table) + 1):
                found.setdefault(".".join(table[:length]), number)
        elif key := re.match(_KEY, line):
            found.setdefault(".".join((*table, *_parts(key[1]))), number)
    return found


def line_of(path: str, lines: Mapping[str, int]) -> int | None:
    """Line of a path, or of the nearest table or inline value that holds it."""
    parts = path.split(".")
    for length in range(len(parts), 0, -1):
        line = lines.get(".".join(parts[:length]))
        if line is not None:
            return line
    return None


def _parts(key: str) -> tuple[str, ...]:
    return tuple(next(part for part in match if part) for match in re.findall(_PART, key))
