"""Commands that ask a recipe: predict, sweep, invert, audit."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from mixsim.cli.deliver import MOST_DIGITS, check, deliver, printed, whole, written
from mixsim.cli.options import (
    AuditOut,
    Json,
    Out,
    RecipeFile,
    RuleName,
    Set,
    SheetOut,
    Strict,
    changed_by,
    recipe_from,
    words,
)
from mixsim.cli.status import ANSWERED, NO, UNDECIDED
from mixsim.errors import BadInput, Fault, Refusal
from mixsim.recipe import COMMAND_LINE
from mixsim.units import Leaf, read

POINTS = "POINTS is a whole number, at least 2 and at most 10000000"
MOST_POINTS = 10_000_000  # on one axis, as for the band of a recipe


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

    check(out)
    answer = ask(recipe_from(recipe, settings, rule))
    deliver(answer, "prediction", json=json, out=out, strict=strict)
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

    check(out)
    loaded = recipe_from(recipe, settings, rule)
    axes = []
    for text in vary or ():
        path, start, stop, points = words("--vary", text, "PATH FROM TO POINTS")
        axes.append(
            varied(loaded, path, start, stop, whole("--vary", points, POINTS, most=MOST_POINTS), log=log)
        )
    answer = ask(loaded, axes)
    deliver(answer, "sweep", json=json, out=out, strict=strict)
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

    check(out)
    loaded = recipe_from(recipe, settings, rule)
    unknowns = [freed(loaded, *words("--free", text, "PATH LOW HIGH")) for text in free or ()]
    answer = ask(
        loaded,
        static=_reading("--static", static),
        high_frequency=_reading("--high-frequency", high_frequency),
        free=unknowns,
        seed=whole("--seed", seed, f"a whole number, 0 or above, of at most {MOST_DIGITS} digits"),
    )
    deliver(answer, "inversion", json=json, out=out, strict=strict)
    return {"answered": ANSWERED, "impossible": NO, "undecided": UNDECIDED}[answer.verdict]


def weigh(
    recipe: RecipeFile,
    settings: Set = None,
    json: Json = False,
    out: SheetOut = None,
    strict: Strict = False,
) -> int:
    """Grams of each stock and constituent for a batch.

    Exit status 1: the stocks cannot make the mixture.
    """
    from mixsim.analysis import weigh as ask
    from mixsim.present.atomic import check_place

    for file in out or ():
        check_place(Path(file), (".csv", ".json"))
    answer = ask(recipe_from(recipe, settings, None))
    deliver(answer, "weighed", json=json, out=out, strict=strict)
    return ANSWERED if answer.reached else NO


def audit(
    subject: Annotated[
        str,
        typer.Argument(
            metavar="RECIPE|TABLE|MATERIAL",
            help="A recipe (.toml), a measured table (.csv), or a material of the library.",
        ),
    ],
    settings: Set = None,
    rule: RuleName = None,
    json: Json = False,
    out: AuditOut = None,
    strict: Strict = False,
) -> int:
    """What is wrong with a recipe, a table or a material.

    Faults of a recipe; whether spectra are passive and causal, and more.

    Exit status 1: it cannot be used, or something failed.
    """
    from mixsim.analysis import audit as ask

    check(out)
    answer = ask(subject, changed_by(settings, rule))
    # a recipe with faults has no picture, and they must be read all the same
    files = [name for name in out or () if not answer.faults or name.lower().endswith((".csv", ".json"))]
    written(answer, files)
    printed(answer, "audit", json=json)
    return ANSWERED if answer.passed and not (strict and answer.warnings) else NO


def _reading(option: str, text: str) -> Leaf | None:
    if not text:
        return None
    try:
        return read(text, "number")
    except Refusal as refusal:
        fault = Fault(COMMAND_LINE, option, refusal.found, refusal.allowed, refusal.suggestion)
        raise BadInput([fault]) from None
