"""Options that several commands share, and what they mean."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path
from typing import Annotated

import typer

from mixsim.cli.status import SEPARATOR
from mixsim.errors import BadInput, Fault, Refusal
from mixsim.mixing import rule_named
from mixsim.recipe import COMMAND_LINE, Recipe, load, settings_of

RecipeFile = Annotated[Path, typer.Argument(metavar="RECIPE", help="The recipe, a TOML file.")]
Set = Annotated[
    list[str] | None,
    typer.Option("--set", metavar="PATH=VALUE", help="Change a key for this run; may be repeated."),
]
RuleName = Annotated[str | None, typer.Option("--rule", metavar="NAME", help="Use this mixing rule.")]
Json = Annotated[bool, typer.Option("--json", help="Put one JSON document on standard output.")]
Out = Annotated[
    list[str] | None,
    typer.Option(
        "--out",
        metavar="FILE",
        help="Write the answer to a file: .csv .json .npz .png .svg .pdf; may be repeated.",
    ),
]
AuditOut = Annotated[
    list[str] | None,
    typer.Option(
        "--out", metavar="FILE", help="Write it to a file: .csv .json .png .svg .pdf; may be repeated."
    ),
]
SheetOut = Annotated[
    list[str] | None,
    typer.Option("--out", metavar="FILE", help="Write the sheet to a file: .csv .json; may be repeated."),
]
Strict = Annotated[bool, typer.Option("--strict", help="Take cautions as errors.")]


def recipe_from(file: Path, settings: Sequence[str] | None, rule: str | None) -> Recipe:
    """The recipe with what the command line changes."""
    return load(file, changed_by(settings, rule))


def changed_by(settings: Sequence[str] | None, rule: str | None) -> dict[str, str]:
    """What the command line changes in a recipe, path → value.

    Raises
    ------
    BadInput
        Where a setting is malformed, or there is no such rule.
    """
    changed = settings_of(settings or ())
    if rule is not None:
        try:
            changed["mixing.rule"] = rule_named(rule).name
        except Refusal as refusal:
            fault = Fault(COMMAND_LINE, "--rule", refusal.found, refusal.allowed, refusal.suggestion)
            raise BadInput([fault]) from None
    return changed


def words(option: str, text: str, names: str) -> list[str]:
    """The words of one option that takes several.

    Raises
    ------
    BadInput
        Where there are too few.
    """
    found = text.split(SEPARATOR)
    if len(found) != len(names.split()) or not all(found):
        shown = " ".join(found) or "nothing"
        raise BadInput([Fault(COMMAND_LINE, option, f"{shown!r}", f"{option} takes {names}")])
    return found
