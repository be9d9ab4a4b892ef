"""Commands that need no recipe: draft, list, show, schema."""

from __future__ import annotations

import json
import sys
from collections.abc import Iterator, Sequence
from pathlib import Path
from typing import Annotated, Any

import typer

from mixsim.cli.status import ANSWERED
from mixsim.errors import BadInput, Fault, Refusal, nearest
from mixsim.recipe import COMMAND_LINE

Rows = Iterator[Sequence[str]]
KINDS = ("rules", "models", "materials", "quantities")


def draft(
    kind: Annotated[str, typer.Argument(metavar="KIND", help="Kind of recipe; without it, lists them.")] = "",
    out: Annotated[str, typer.Option("--out", metavar="FILE", help="Write it to a new file (.toml).")] = "",
) -> int:
    """A commented starter recipe of a kind."""
    from mixsim.recipe import drafts

    if not kind:
        from mixsim.present.columns import described

        print(described(["kind", "for"], [(name, drafts.purpose(name)) for name in drafts.names()]))
        return ANSWERED
    if kind not in drafts.names():
        allowed = f"one of {', '.join(drafts.names())}"
        fault = Fault(COMMAND_LINE, "draft", f"unknown kind {kind!r}", allowed, nearest(kind, drafts.names()))
        raise BadInput([fault])
    if not out:
        sys.stdout.write(drafts.text(kind))
        return ANSWERED
    from mixsim.present.atomic import new_text

    new_text(Path(out), drafts.text(kind), suffix=".toml")
    print(f"mixsim: wrote {out}", file=sys.stderr)
    return ANSWERED


def list_(
    kind: Annotated[
        str, typer.Argument(metavar="KIND", help="rules, models, materials or quantities; without it, these.")
    ] = "",
    text: Annotated[
        str, typer.Option("--text", metavar="WORD", help="Only entries with this word, in any case.")
    ] = "",
    evidence: Annotated[
        str, typer.Option("--evidence", metavar="WORD", help="Only materials of this kind of evidence.")
    ] = "",
    at: Annotated[
        str, typer.Option("--at", metavar="PLACE", help="Only materials that hold there, such as '10 GHz'.")
    ] = "",
) -> int:
    """What there is: rules, models, materials or quantities."""
    from mixsim.present.columns import described

    filters = {"--text": text, "--evidence": evidence, "--at": at}
    given = [option for option, value in filters.items() if value]
    if not kind and not given:
        print("\n".join(KINDS))
        return ANSWERED
    if not kind:
        raise BadInput([Fault(COMMAND_LINE, given[0], "without a kind", "mixsim list materials, for one")])
    if kind not in KINDS:
        fault = Fault(COMMAND_LINE, "list", repr(kind), f"one of {', '.join(KINDS)}", nearest(kind, KINDS))
        raise BadInput([fault])
    if kind != "materials" and given[-1:] not in ([], ["--text"]):
        raise BadInput([Fault(COMMAND_LINE, given[-1], f"with list {kind}", "it is for list materials")])
    columns = {"rules": ("rule", "what it does"), "models": ("model", "what it describes")}
    columns |= {"materials": ("material", "what it is"), "quantities": ("quantity", "what it is")}
    rows = _materials(evidence, at) if kind == "materials" else _listed(kind)
    found = [row for row in rows if text.lower() in " ".join(row).lower()]
    if not found:
        raise BadInput([Fault(COMMAND_LINE, "list", f"no {kind} like that", f"mixsim list {kind} shows all")])
    print(described(columns[kind], found))
    return ANSWERED


def show(
    name: Annotated[
        str,
        typer.Argument(
            metavar="NAME", help="A rule, model, material or quantity; or a recipe, for its numbers."
        ),
    ],
    out: Annotated[
        str,
        typer.Option("--out", metavar="FILE", help="Write the spectrum of a material: a table or a plot."),
    ] = "",
) -> int:
    """One of them in full; or every number of a recipe with its path."""
    if out:
        _write_material(name, out)
    if name.endswith(".toml") or Path(name).is_file():
        return _show_recipe(name)
    from mixsim.present import entries

    text = entries.entry(name)
    if text is None:
        known = [entry for kind in KINDS for entry, _ in _listed(kind)]
        allowed = "a rule, model, material or quantity (mixsim list shows them), or a recipe"
        raise BadInput([Fault(COMMAND_LINE, "show", f"unknown name {name!r}", allowed, nearest(name, known))])
    print(text)
    return ANSWERED


def schema(
    out: Annotated[str, typer.Option("--out", metavar="FILE", help="Write it to a file (.json).")] = "",
) -> int:
    """JSON Schema of a recipe, for editors."""
    from mixsim.recipe.schema import Schema

    document: dict[str, Any] = {"$schema": "https://json-schema.org/draft/2020-12/schema"}
    document |= Schema.model_json_schema(by_alias=True) | {"title": "mixsim recipe"}
    text = json.dumps(document, indent=2, ensure_ascii=False) + "\n"
    if out:
        from mixsim.present.atomic import whole_text

        whole_text(Path(out), text, suffix=".json")
        print(f"mixsim: wrote {out}", file=sys.stderr)
    else:
        sys.stdout.write(text)
    return ANSWERED


def _listed(kind: str) -> Rows:
    if kind == "rules":
        from mixsim.mixing import RULES

        yield from ((rule.name, rule.summary) for rule in RULES.values())
    elif kind == "models":
        from mixsim.dispersion import INDEX_MODELS, TERMS
        from mixsim.dispersion.laws import LAWS

        yield from ((term.name, f"term: {term.summary}") for term in TERMS.values())
        yield from ((model.name, f"index: {model.summary}") for model in INDEX_MODELS.values())
        yield from ((law.name, f"law: {law.summary}") for law in LAWS.values())
    elif kind == "materials":
        from mixsim.recipe import library

        yield from ((name, str(content["title"])) for name, content in library.definitions())
    else:
        from mixsim.observables import QUANTITIES

        for quantity in QUANTITIES.values():
            unit = f" [{quantity.unit}]" if quantity.unit else ""
            yield quantity.name, f"{quantity.summary}{unit}"


def _materials(evidence: str, at: str) -> Rows:
    """Materials of one kind of evidence, or that hold at a place of the spectrum."""
    from typing import get_args

    from mixsim.recipe import library
    from mixsim.recipe.schema import Material
    from mixsim.units import read

    kinds = get_args(get_args(Material.model_fields["kind"].annotation)[0])
    if evidence and evidence not in kinds:
        allowed = f"one of {', '.join(kinds)}"
        fault = Fault(COMMAND_LINE, "--evidence", repr(evidence), allowed, nearest(evidence, kinds))
        raise BadInput([fault])
    try:
        place = read(at, "spectral").value if at else None
    except Refusal as refusal:
        raise BadInput(
            [Fault(COMMAND_LINE, "--at", refusal.found, refusal.allowed, refusal.suggestion)]
        ) from None
    for name, content in library.definitions():
        low, high = library.band(content)
        if (not evidence or content["kind"] == evidence) and (place is None or low <= place <= high):
            # by what it was held, not how close: show tells that
            by = "; ".join(check.split(",")[0] for check in content.get("check", "none").split("; "))
            yield name, f"{content['title']} ({content['kind']}; checked: {by})"


def _write_material(name: str, out: str) -> None:
    """Spectrum of a library material over the band in which it holds."""
    from mixsim.analysis import predict
    from mixsim.present.files import check, write
    from mixsim.recipe import library, parse

    check(out)
    if name not in library.names():
        allowed = "a material of the library (mixsim list materials)"
        fault = Fault(
            COMMAND_LINE, "--out", f"{name!r} has no spectrum", allowed, nearest(name, library.names())
        )
        raise BadInput([fault])
    write(predict(parse(library.alone(name))), out)
    print(f"mixsim: wrote {out}", file=sys.stderr)


def _show_recipe(name: str) -> int:
    from mixsim.present.entries import numbers
    from mixsim.recipe import load

    # one line for each number where another program reads
    print(numbers(load(name), wrapped=sys.stdout.isatty()))
    return ANSWERED
