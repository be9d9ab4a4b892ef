"""How an answer leaves a command: files first, then one table or one JSON document; or a refusal."""

from __future__ import annotations

import sys
from collections.abc import Sequence
from typing import TYPE_CHECKING, Any

from mixsim.errors import BadInput, Fault
from mixsim.recipe import COMMAND_LINE

MOST_DIGITS = 18  # of a whole number that no memory could serve anyway
_ROOMS = {
    "fit": "fit_table",
    "judgement": "verdicts",
    "lot": "verdicts",
    "weighed": "weigh_sheet",
}  # where a table stands that has a room of its own

if TYPE_CHECKING:
    from mixsim.analysis import Caution


def whole(option: str, text: str, allowed: str, *, most: int | None = None) -> int:
    """A whole number that an option gives."""
    readable = text.isdecimal() and len(text) <= MOST_DIGITS
    if not readable or (most is not None and int(text) > most):
        raise BadInput([Fault(COMMAND_LINE, option, repr(text), allowed)])
    return int(text)


def check(files: Sequence[str] | None) -> None:
    """Refuse files that could not be written, before anything is computed."""
    if files:
        from mixsim.present.files import check

        for file in files:
            check(file)


def deliver(answer: Any, table: str, *, json: bool, out: Sequence[str] | None, strict: bool) -> None:
    """Write the files, then print; or, under `strict`, refuse an answer with cautions."""
    if strict and answer.warnings:
        raise BadInput([_as_fault(caution, answer.recipe.file) for caution in answer.warnings])
    written(answer, out)
    printed(answer, table, json=json)


def written(answer: Any, out: Sequence[str] | None) -> None:
    """Write the files."""
    if out:
        from mixsim.present.files import PLOTS, write

        # pictures first: only they can be refused for what the answer is, and then nothing is written
        for name in sorted(dict.fromkeys(out), key=lambda name: not name.lower().endswith(PLOTS)):
            write(answer, name)
            print(f"mixsim: wrote {name}", file=sys.stderr)


def printed(answer: Any, table: str, *, json: bool) -> None:
    """Print one JSON document, or the table of that name in `mixsim.present.tables`."""
    if json:
        from mixsim.present.json_text import json_text

        sys.stdout.write(json_text(answer))
    else:
        from importlib import import_module

        print(getattr(import_module(f"mixsim.present.{_ROOMS.get(table, 'tables')}"), table)(answer))


def _as_fault(caution: Caution, file: str) -> Fault:
    return Fault(
        file, caution.path, f"caution, {caution.kind}: {caution.message}", "--strict takes no cautions"
    )
