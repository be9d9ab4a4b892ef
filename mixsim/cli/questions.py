"""Commands that ask a recipe: predict, sweep, invert, audit."""

from __future__ import annotations

import sys
from collections.abc import Sequence
from typing import TYPE_CHECKING, Annotated

import typer

from mixsim.cli.options import Json, Out, RecipeFile, RuleName, Set, Strict, changed_by, recipe_from, words
from mixsim.cli.status import ANSWERED, NO, UNDECIDED
from mixsim.errors import BadInput, Fault, Refusal
from mixsim.recipe import COMMAND_LINE
from mixsim.units import Leaf, read

POINTS = "POINTS is a whole number, at least 2 and at most 10000000"
MOST_DIGITS = 18  # of a whole number that no memory could serve anyway
MOST_POINTS = 10_000_000  # on one axis, as for the band of a recipe

if TYPE_CHECKING:
    from mixsim.analysis import Audit, Caution, Inversion, Prediction


def predict(
    recipe: RecipeFile,
    settings: Set = None,
    rule: RuleName = None,
    json: Json = False,
    out: Out = None,
    strict: Strict = False,
) -> int:
    """Permittivity and permeability of the mixture over its band."""
    from mixsim.analysis import predict as ask

    _check(out)
    answer = ask(recipe_from(recipe, settings, rule))
    _deliver(answer, "prediction", json=json, out=out, strict=strict)
    return ANSWERED


def sweep(
    recipe: RecipeFile,
    vary: Annotated[
        list[str] | None,
        typer.Option(
            "--vary", metavar="PATH FROM TO POINTS", help="Vary a number, ends included; repeated, a grid."
        ),
    ] = None,
    log: Annotated[bool, typer.Option("--log", help="Space the values by a constant ratio.")] = False,
    settings: Set = None,
    rule: RuleName = None,
    json: Json = False,
    out: Out = None,
    strict: Strict = False,
) -> int:
    """The same for every combination of some numbers of the recipe."""
    from mixsim.analysis import sweep as ask
    from mixsim.analysis import varied

    _check(out)
    loaded = recipe_from(recipe, settings, rule)
    axes = []
    for text in vary or ():
        path, start, stop, points = words("--vary", text, "PATH FROM TO POINTS")
        axes.append(
            varied(loaded, path, start, stop, _whole("--vary", points, POINTS, most=MOST_POINTS), log=log)
        )
    answer = ask(loaded, axes)
    _deliver(answer, "sweep", json=json, out=out, strict=strict)
    return ANSWERED


def invert(
    recipe: RecipeFile,
    static: Annotated[
        str, typer.Option("--static", metavar="TEXT", help="Low-frequency reading, such as '2.70 ± 0.01'.")
    ] = "",
    high_frequency: Annotated[
        str, typer.Option("--high-frequency", metavar="TEXT", help="Reading above all bands.")
    ] = "",
    free: Annotated[
        list[str] | None,
        typer.Option(
            "--free", metavar="PATH LOW HIGH", help="Find this number in a range; replaces [unknowns]."
        ),
    ] = None,
    seed: Annotated[str, typer.Option("--seed", metavar="NUMBER", help="Of the Monte Carlo.")] = "0",
    settings: Set = None,
    rule: RuleName = None,
    json: Json = False,
    out: Out = None,
    strict: Strict = False,
) -> int:
    """What went in, from what was read on a sample.

    Readings are the static and the high-frequency permittivity.

    Exit status 1: no value gives the reading; 3: the readings cannot tell.
    """
    from mixsim.analysis import freed
    from mixsim.analysis import invert as ask

    _check(out)
    loaded = recipe_from(recipe, settings, rule)
    unknowns = [freed(loaded, *words("--free", text, "PATH LOW HIGH")) for text in free or ()]
    answer = ask(
        loaded,
        static=_reading("--static", static),
        high_frequency=_reading("--high-frequency", high_frequency),
        free=unknowns,
        seed=_whole("--seed", seed, f"a whole number, 0 or above, of at most {MOST_DIGITS} digits"),
    )
    _deliver(answer, "inversion", json=json, out=out, strict=strict)
    return {"answered": ANSWERED, "impossible": NO, "undecided": UNDECIDED}[answer.verdict]


def audit(
    recipe: RecipeFile,
    settings: Set = None,
    rule: RuleName = None,
    json: Json = False,
    strict: Strict = False,
) -> int:
    """Everything that is wrong with a recipe, nothing computed.

    Exit status 1: it cannot be used.
    """
    from mixsim.analysis import audit as ask

    answer = ask(recipe, changed_by(settings, rule))
    _print(answer, "audit", json=json)
    return ANSWERED if answer.passed and not (strict and answer.warnings) else NO


def _whole(option: str, text: str, allowed: str, *, most: int | None = None) -> int:
    readable = text.isdecimal() and len(text) <= MOST_DIGITS
    if not readable or (most is not None and int(text) > most):
        raise BadInput([Fault(COMMAND_LINE, option, repr(text), allowed)])
    return int(text)


def _reading(option: str, text: str) -> Leaf | None:
    if not text:
        return None
    try:
        return read(text, "number")
    except Refusal as refusal:
        fault = Fault(COMMAND_LINE, option, refusal.found, refusal.allowed, refusal.suggestion)
        raise BadInput([fault]) from None


def _check(files: Sequence[str] | None) -> None:
    """Refuse files that could not be written, before anything is computed."""
    if files:
        from mixsim.present.files import check

        for file in files:
            check(file)


def _deliver(
    answer: Prediction | Inversion, table: str, *, json: bool, out: Sequence[str] | None, strict: bool
) -> None:
    """Write the files, then print; or, under `strict`, refuse an answer with cautions."""
    if strict and answer.warnings:
        raise BadInput([_as_fault(caution, answer.recipe.file) for caution in answer.warnings])
    if out:
        from mixsim.present.files import PLOTS, write

        # pictures first: only they can be refused for what the answer is, and then nothing is written
        for name in sorted(dict.fromkeys(out), key=lambda name: not name.lower().endswith(PLOTS)):
            write(answer, name)
            print(f"mixsim: wrote {name}", file=sys.stderr)
    _print(answer, table, json=json)


def _print(answer: Prediction | Inversion | Audit, table: str, *, json: bool) -> None:
    """Print one JSON document, or the table of that name in `mixsim.present.tables`."""
    if json:
        from mixsim.present.json_text import json_text

        sys.stdout.write(json_text(answer))
    else:
        from mixsim.present import tables

        print(getattr(tables, table)(answer))


def _as_fault(caution: Caution, file: str) -> Fault:
    return Fault(
        file, caution.path, f"caution, {caution.kind}: {caution.message}", "--strict takes no cautions"
    )
