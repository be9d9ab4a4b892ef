"""Commands that set a recipe against what was measured: fit, judge."""

from __future__ import annotations

import sys
from collections.abc import Callable
from pathlib import Path
from typing import Annotated, Literal

import typer

from mixsim.cli.deliver import MOST_DIGITS, check, deliver, whole
from mixsim.cli.options import Json, Out, RecipeFile, RuleName, Set, Strict, recipe_from, words
from mixsim.cli.status import ANSWERED, NO, UNDECIDED
from mixsim.errors import BadInput, Fault, Refusal
from mixsim.recipe import COMMAND_LINE
from mixsim.units import read

MOST_STARTS = 1000
_STATUS = {"pass": ANSWERED, "fail": NO, "undecided": UNDECIDED}


def fit(
    recipe: RecipeFile,
    data: Annotated[
        list[Path] | None, typer.Argument(metavar="DATA", help="Measured spectra (CSV) of one sample.")
    ] = None,
    free: Annotated[
        list[str] | None,
        typer.Option(
            "--free", metavar="PATH LOW HIGH", help="Find this number in a range; replaces [unknowns]."
        ),
    ] = None,
    noise: Annotated[
        str,
        typer.Option(
            "--noise", metavar="SHARE", help="Uncertainty of a spectrum without one, a share of its modulus."
        ),
    ] = "",
    prior: Annotated[
        bool, typer.Option("--prior", help="Fit the recipe's numbers with a ± too, that ± being known.")
    ] = False,
    loss: Annotated[
        Literal["linear", "soft_l1", "cauchy"],
        typer.Option("--loss", help="How residuals count; the last two bear with readings that are out."),
    ] = "linear",
    starts: Annotated[str, typer.Option("--starts", metavar="NUMBER", help="Places to start from.")] = "6",
    profile: Annotated[
        bool, typer.Option("--profile", help="Find each interval with the other unknowns fitted anew.")
    ] = False,
    compare_rules: Annotated[
        bool, typer.Option("--compare-rules", help="Fit the other rules that apply, and rank them.")
    ] = False,
    seed: Annotated[str, typer.Option("--seed", metavar="NUMBER", help="Of the places to start from.")] = "0",
    settings: Set = None,
    rule: RuleName = None,
    json: Json = False,
    out: Out = None,
    strict: Strict = False,
) -> int:
    """Numbers of the recipe from spectra and readings on samples.

    Exit status 3: the data cannot tell.
    """
    from mixsim.analysis import fit as ask
    from mixsim.analysis import freed

    check(out)
    loaded = recipe_from(recipe, settings, rule)
    answer = ask(
        loaded,
        data or (),
        free=[freed(loaded, *words("--free", text, "PATH LOW HIGH")) for text in free or ()],
        noise=_share(noise),
        prior=prior,
        loss=loss,
        starts=max(1, whole("--starts", starts, f"a whole number up to {MOST_STARTS}", most=MOST_STARTS)),
        profiled=profile,
        compare=compare_rules,
        seed=whole("--seed", seed, f"a whole number, 0 or above, of at most {MOST_DIGITS} digits"),
        progress=_progress(),
    )
    deliver(answer, "fit", json=json, out=out, strict=strict)
    return ANSWERED if answer.identifiable else UNDECIDED


def judge(
    recipe: RecipeFile,
    data: Annotated[
        list[Path] | None, typer.Argument(metavar="DATA", help="Measured spectra (CSV) of one sample.")
    ] = None,
    lot: Annotated[
        Path | None, typer.Option("--lot", metavar="FILE", help="A table (CSV) of readings, one row a piece.")
    ] = None,
    free: Annotated[
        list[str] | None,
        typer.Option(
            "--free", metavar="PATH LOW HIGH", help="Find this number in a range; replaces [unknowns]."
        ),
    ] = None,
    noise: Annotated[
        str,
        typer.Option(
            "--noise", metavar="SHARE", help="Uncertainty of a spectrum without one, a share of its modulus."
        ),
    ] = "",
    seed: Annotated[str, typer.Option("--seed", metavar="NUMBER", help="Of the places to start from.")] = "0",
    settings: Set = None,
    rule: RuleName = None,
    json: Json = False,
    out: Out = None,
    strict: Strict = False,
) -> int:
    """Whether a piece passes its limits, and how sure that is.

    Exit status 1: it fails; 3: undecided.
    """
    from mixsim.analysis import freed, judge_lot
    from mixsim.analysis import judge as ask

    check(out)
    loaded = recipe_from(recipe, settings, rule)
    unknowns = [freed(loaded, *words("--free", text, "PATH LOW HIGH")) for text in free or ()]
    number = whole("--seed", seed, f"a whole number, 0 or above, of at most {MOST_DIGITS} digits")
    if lot is not None:
        if data:
            allowed = "a lot holds its readings itself"
            raise BadInput([Fault(COMMAND_LINE, "DATA", f"{str(data[0])!r} beside --lot", allowed)])
        many = judge_lot(loaded, lot, free=unknowns)
        deliver(many, "lot", json=json, out=out, strict=strict)
        return _STATUS[many.decision]
    answer = ask(loaded, data or (), free=unknowns, noise=_share(noise), seed=number)
    deliver(answer, "judgement", json=json, out=out, strict=strict)
    return _STATUS[answer.decision]


def _share(text: str) -> float | None:
    if not text:
        return None
    try:
        value = read(text, "fraction").value
    except Refusal as refusal:
        fault = Fault(COMMAND_LINE, "--noise", refusal.found, refusal.allowed, refusal.suggestion)
        raise BadInput([fault]) from None
    if not 0.0 < value <= 1.0:
        raise BadInput([Fault(COMMAND_LINE, "--noise", repr(text), "a share above 0 and at most 1")])
    return value


def _progress() -> Callable[[int, int], None] | None:
    """Starts done, on one line of standard error where that is a terminal."""
    if not sys.stderr.isatty():
        return None

    def say(done: int, every: int) -> None:
        end = "\n" if done == every else ""
        print(f"\rmixsim: {done} of {every} starts", end=end, file=sys.stderr, flush=True)

    return say
