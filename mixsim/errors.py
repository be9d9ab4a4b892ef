"""Everything that mixsim raises on purpose, and how a fault reads."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass


class MixsimError(Exception):
    """Base of every exception that mixsim raises on purpose."""


class Refusal(MixsimError, ValueError):
    """A value that cannot be used: what was found, what would be right, the nearest known word.

    Layers below the recipe raise it; they do not know in which file or at which path the value
    stood. The recipe adds both and turns it into a `Fault`.
    """

    def __init__(self, found: str, allowed: str, suggestion: str | None = None) -> None:
        self.found = found
        self.allowed = allowed
        self.suggestion = suggestion
        super().__init__(_sentence(found, allowed, suggestion))


@dataclass(frozen=True, slots=True)
class Fault:
    """One thing wrong with the input, and where.

    Attributes
    ----------
    file
        File (or "command line") in which the value stood.
    path
        Path in the recipe, name of the option, or empty for the file as a whole.
    found, allowed
        What stood there, and what would be right.
    suggestion
        Nearest known word, if there is one.
    line
        Line in the file, counted from 1, where known.
    """

    file: str
    path: str
    found: str
    allowed: str
    suggestion: str | None = None
    line: int | None = None

    def __str__(self) -> str:
        place = self.file if self.line is None else f"{self.file}:{self.line}"
        where = f"{place}: {self.path}" if self.path else place
        return f"{where}: {_sentence(self.found, self.allowed, self.suggestion)}"


class BadInput(MixsimError):
    """The input cannot be used; carries every fault that was seen in one pass (exit status 2)."""

    def __init__(self, faults: Sequence[Fault]) -> None:
        self.faults = tuple(faults)
        super().__init__("\n".join(str(fault) for fault in self.faults))


def nearest(word: str, known: Iterable[str]) -> str | None:
    """Known word nearest to a misspelt one, or None where nothing is near.

    Examples
    --------
    >>> nearest("bruggemann", ["bruggeman", "looyenga"])
    'bruggeman'
    >>> nearest("logarithmic", ["linear", "log"])
    'log'
    """
    import difflib  # needed only where something is misspelt

    lowered = {candidate.lower(): candidate for candidate in known}
    start = word.lower()
    begun = [
        known
        for known in lowered
        if min(len(known), len(start)) > 2 and (start.startswith(known) or known.startswith(start))
    ]
    if len(begun) == 1:
        return lowered[begun[0]]
    close = difflib.get_close_matches(word.lower(), lowered, n=1, cutoff=0.6)
    return lowered[close[0]] if close else None


def _sentence(found: str, allowed: str, suggestion: str | None) -> str:
    text = f"{found}; {allowed}" if allowed else found
    return f"{text} (did you mean {suggestion!r}?)" if suggestion else text
