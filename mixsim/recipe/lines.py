"""At which line of a TOML text each path was written, for messages."""

from __future__ import annotations

import contextlib
import re
from collections.abc import Mapping

import tomli

# kept as text: compiled when something is wrong, not at every start
_PART = r"""(?:"(?:\\.|[^"\\\n])*"|'[^'\n]*'|[A-Za-z0-9_-]+)"""
_DOT = r"[ \t]*\.[ \t]*"
_EQUALS = r"[ \t]*=[ \t]*"
_BETWEEN = r"(?:[ \t\r\n]|#[^\n]*)*"
_STRING = (
    r'"""(?:\\[\s\S]|[^\\])*?"""(?:"{0,2})'
    r"|'''[\s\S]*?'''(?:'{0,2})"
    r'|"(?:\\.|[^"\\\n])*"'
    r"|'[^'\n]*'"
)
_PLAIN = r"[^,\]}\n#]+"
_NAMED = ("materials", "inclusions", "dopants")


def lines_of(text: str) -> Mapping[str, int]:
    """Line of every key, table header and item of a list, by path, of a text that is sound TOML."""
    scan = _Scan(text)
    with contextlib.suppress(_Lost, RecursionError):  # what was found until then still serves
        scan.document()
    return scan.found


def line_of(path: str, lines: Mapping[str, int]) -> int | None:
    """Line of a path, or of the nearest table or value that holds it.

    A name that the file does not hold, such as that of a built-in material, has no line.
    """
    parts = path.split(".")
    least = 1 if parts[0] in _NAMED and len(parts) > 1 else 0
    for length in range(len(parts), least, -1):
        line = lines.get(".".join(parts[:length]))
        if line is not None:
            return line
    return None


class _Lost(Exception):
    """The scan does not know what it sees."""


class _Scan:
    """One walk through a TOML text that notes where each path begins."""

    def __init__(self, text: str) -> None:
        self.text = text
        self.at = 0
        self.found: dict[str, int] = {}

    def document(self) -> None:
        table: tuple[str, ...] = ()
        entries: dict[tuple[str, ...], int] = {}
        while True:
            self._take(_BETWEEN)
            start = self.at
            if header := self._take(r"\[\[?[ \t]*"):
                table = ()
                parts = self._key()
                for position, part in enumerate(parts, start=1):
                    table = (*table, part)
                    if position == len(parts) and header.startswith("[["):
                        entries[table] = entries.get(table, -1) + 1
                    if table in entries:
                        table = (*table, str(entries[table]))
                self._note(table, start)
                self._take(r"[ \t]*\]\]?")
            elif self.at < len(self.text):
                self._pair(table)
            else:
                return

    def _pair(self, table: tuple[str, ...]) -> None:
        start = self.at
        path = (*table, *self._key())
        self._note(path, start)
        self._take(_EQUALS)
        self._value(path)

    def _value(self, path: tuple[str, ...]) -> None:
        if self._take(r"\["):
            item = 0
            while self._next(r"\]"):
                self._note((*path, str(item)), self.at)
                self._value((*path, str(item)))
                item += 1
        elif self._take(r"\{"):
            while self._next(r"\}"):
                self._pair(path)
        elif not (self._take(_STRING) or self._take(_PLAIN)):
            raise _Lost

    def _next(self, end: str) -> bool:
        """Whether something follows before the end of a list or of an inline table."""
        self._take(_BETWEEN)
        self._take(",")
        self._take(_BETWEEN)
        return not self._take(end)

    def _key(self) -> tuple[str, ...]:
        parts = []
        while True:
            part = self._take(_PART)
            if not part:
                raise _Lost
            parts.append(part if part[0] not in "\"'" else next(iter(tomli.loads(f"{part} = 0"))))
            if not self._take(_DOT):
                return tuple(parts)

    def _note(self, path: tuple[str, ...], at: int) -> None:
        line = 1 + self.text.count("\n", 0, at)
        for length in range(1, len(path) + 1):
            self.found.setdefault(".".join(path[:length]), line)

    def _take(self, pattern: str) -> str:
        match = re.compile(pattern).match(self.text, self.at)
        if match is None:
            return ""
        self.at = match.end()
        return match[0]
