"""What the registers and the library hold, one entry in full."""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator, Mapping
from typing import TYPE_CHECKING, Any

from mixsim.dispersion import INDEX_MODELS, TERMS, IndexModel, Term
from mixsim.dispersion.laws import LAWS, Law
from mixsim.mixing import RULES, Rule, random_spheroid
from mixsim.observables import QUANTITIES, Quantity
from mixsim.parameter import Choice, Parameter
from mixsim.present.all_words import in_all_words
from mixsim.present.columns import described, paragraph, table, width
from mixsim.recipe import library
from mixsim.units import Leaf, accepted_units, dimension_named

if TYPE_CHECKING:
    from mixsim.recipe import Recipe


def entry(name: str) -> str | None:
    """Every entry of this name; None where there is none."""
    makers: list[tuple[Mapping[str, Any], Any]] = [
        (RULES, _rule),
        (TERMS, _term),
        (INDEX_MODELS, _index),
        (LAWS, _law),
        (QUANTITIES, _quantity),
    ]
    found = [make(register[name]) for register, make in makers if name in register]
    if (content := library.definition(name)) is not None:
        found.append(_material(name, content))
    return "\n\n".join(found) or None


def numbers(recipe: Recipe, *, wrapped: bool) -> str:
    """Every number of a recipe: path, as written, in SI, and what it must be; then its measured tables.

    Parameters
    ----------
    recipe
        The recipe.
    wrapped
        Whether each path stands on a line of its own where one line for each number is too wide.
    """
    rows = []
    for path, leaf in recipe.leaves.items():
        allowed = recipe.ranges[path].said() if recipe.ranges[path].bounded else ""
        rows.append((path, leaf.written, _in_si(leaf), allowed))
    headings = ("path", "as written", "in SI", "must be")
    shown = table(headings, rows, left=4)
    tables = "".join(f"\n\n{measured}" for measured in _tables(recipe))
    if not wrapped or max(map(len, shown.splitlines())) <= width():
        return shown + tables
    beneath = table(headings[1:], [row[1:] for row in rows], left=3).splitlines()
    pairs = zip([headings[0], *recipe.leaves], beneath, strict=True)
    return "\n".join(f"{path}\n  {line}" for path, line in pairs) + tables


def _tables(recipe: Recipe, under: str = "") -> Iterator[str]:
    """Each measured table in a sentence: where it stands, what it covers, and what holds beyond."""
    for name, held in recipe.tables.items():
        material = recipe.schema.materials[name]
        beyond = "a causal continuation" if material.extension is not None else "nothing"
        what = "ε" if held.permeability is None else "ε and μ"
        yield paragraph(
            f"{under}materials.{name}.table: {material.table}, {what} at {held.omega.size} rows from "
            f"{held.range_written}; beyond, {beyond}"
        )
    for name, part in recipe.parts.items():
        yield from _tables(part, f"{under}materials.{name}.recipe.")


def _in_si(leaf: Leaf) -> str:
    spread = f" ± {leaf.std:.2g}" if leaf.std else ""
    return f"{leaf.value:.6g}{spread} {dimension_named(leaf.dimension).si}".rstrip()


def _head(name: str, kind: str, facts: Iterable[tuple[str, str]]) -> str:
    return "\n".join([f"{name} ({kind})", *(paragraph(f"{key}: {value}") for key, value in facts if value)])


def _rule(rule: Rule) -> str:
    threshold = "" if rule.percolation is None else f"{rule.percolation:.4g} by volume, for spheres"
    if rule.threshold_of is not None:
        rods, flakes = (float(rule.threshold_of(random_spheroid(ratio))) for ratio in (10.0, 0.1))
        threshold += f"; {rods:.2g} for random rods of 10:1, {flakes:.2g} for random flakes of 1:10"
    head = _head(
        rule.name,
        "mixing rule",
        [
            ("for", rule.summary),
            ("equation", rule.equation),
            ("assumes", rule.assumptions),
            ("dilute limit", rule.dilute_limit),
            ("valid for", rule.valid_for),
            ("shapes", _shapes(rule)),
            ("a conducting phase percolates from", threshold),
            ("volumes", "must add up to one" if rule.additive_only else "may come from a measured density"),
            ("source", rule.source),
        ],
    )
    return f"{head}\n\n{_parameters(rule.parameters.values())}" if rule.parameters else head


def _shapes(rule: Rule) -> str:
    if not rule.takes_shapes:
        return "spheres"
    return f"any ellipsoid, turned at random{', aligned or in between' if rule.takes_aligned else ''}"


def _term(term: Term) -> str:
    ways = []
    for canonical, routes in term.canonical.items():
        given = ", or ".join(" with ".join((route.key, *route.also)) for route in routes)
        ways.append((f"{canonical} is given by", given))
    head = _head(
        term.name,
        "term of permittivity or permeability",
        [("for", term.summary), ("equation", term.equation), *ways, ("source", term.source)],
    )
    return f"{head}\n\n{_parameters(term.parameters.values())}"


def _law(law: Law) -> str:
    return _head(
        law.name,
        "law of a substance at its temperature",
        [("for", law.summary), ("equation", law.equation), ("source", law.source)],
    )


def _index(model: IndexModel) -> str:
    limits = "n² both as ω → 0 and as ω → ∞" if model.constant else "none; the material may state them"
    head = _head(
        model.name,
        "index model",
        [
            ("for", model.summary),
            ("equation", model.equation),
            ("limits", limits),
            ("exactly one of", ", ".join(model.one_of)),
            ("source", model.source),
        ],
    )
    return f"{head}\n\n{_parameters(model.parameters.values())}"


def _parameters(parameters: Iterable[Parameter | Choice]) -> str:
    rows, taking = [], dict[str, list[str]]()
    for p in parameters:
        if isinstance(p, Choice):
            default = "" if p.default is None else f"{p.default} if left out"
            rows.append((p.name, f"{p.meaning}: {', '.join(p.words)}", f'"{p.words[0]}"', default))
            continue
        default = "" if p.default is None else f"{p.default:g} if left out"
        meaning = f"{p.meaning}{' (a list)' if p.is_list else ''}"
        example = dimension_named(p.dimension).example
        if p.minimum is not None and math.isfinite(p.maximum):
            example = f"{0.25 * p.minimum + 0.75 * p.maximum:g}"
        rows.append((p.name, meaning, example, default))
        if accepted := ", ".join(accepted_units(p.dimension)):
            taking.setdefault(accepted, []).append(p.name)
    shown = table(("parameter", "meaning", "for example", "default"), rows, left=4)
    units = [paragraph(f"{', '.join(names)}: {units}") for units, names in taking.items()]
    return "\n".join([shown, "", *units]).rstrip()


def _quantity(quantity: Quantity) -> str:
    facts = [("is", quantity.summary), ("symbol", quantity.symbol), ("unit", quantity.unit or "none")]
    return _head(quantity.name, "quantity", facts)


def _material(name: str, content: Mapping[str, Any]) -> str:
    valid = content.get("valid")
    span = f"{valid['from']} to {valid['to']}" if valid else ""
    head = _head(
        name,
        "material of the library",
        [
            ("is", content["title"]),
            ("kind of evidence", content["kind"]),
            ("source", " ".join(content["source"].split())),
            ("checked against", content.get("check", "none")),
            ("holds", span),
        ],
    )
    skip = ("title", "kind", "source", "check", "valid")
    rows = [(path, value) for path, value in _flat(content, "") if path.split(".")[0] not in skip]
    shown = f"{head}\n\n{described(('key', 'value'), rows)}"
    words = in_all_words(name)
    return f"{shown}\n\n{words}" if words else shown


def _flat(node: Any, path: str) -> Iterable[tuple[str, str]]:
    if isinstance(node, Mapping):
        for key, value in node.items():
            yield from _flat(value, f"{path}.{key}" if path else key)
    else:
        yield path, ", ".join(map(str, node)) if isinstance(node, list) else str(node)
