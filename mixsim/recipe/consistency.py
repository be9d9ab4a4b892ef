"""What must hold between the keys of a recipe: one description of a thing, and all that it needs.

Works on the recipe as parsed, before any number is read, so that its findings stand beside those of
the schema in one pass.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator, Mapping
from typing import Any

from mixsim.dispersion import TERMS
from mixsim.errors import Refusal, nearest
from mixsim.mixing import RULES, Rule
from mixsim.parameter import Choice, Parameter
from mixsim.recipe import library
from mixsim.recipe.constituents import of_material, of_term
from mixsim.recipe.faults import Finding
from mixsim.recipe.grains import is_round, of_inclusion
from mixsim.recipe.layers import raw_shells
from mixsim.recipe.leaves import join
from mixsim.recipe.raw import table, tables
from mixsim.recipe.schema import NAME_PATTERN

CONCENTRATIONS = ("number_density", "weight_fraction", "mole_fraction")


def contradictions(raw: Mapping[str, Any]) -> Iterator[Finding]:
    """Every contradiction and gap, with its path."""
    if isinstance(raw.get("band"), Mapping):
        yield from _band(raw["band"])
    for name, material in tables(raw, "materials"):
        yield from of_material(name, material)
    for name, inclusion in tables(raw, "inclusions"):
        yield from of_inclusion(name, inclusion)
    for name, dopant in tables(raw, "dopants"):
        yield from _dopant(f"dopants.{name}", dopant, raw)
    yield from _sizes(raw)
    yield from _names(raw)
    yield from _rule(raw)
    yield from _densities(raw)


def _band(band: Mapping[str, Any]) -> Iterator[Finding]:
    if "values" in band:
        beside = [key for key in ("from", "to", "points", "spacing") if key in band]
        if beside:
            found = f"{' and '.join(beside)} beside values"
            yield f"band.{beside[0]}", Refusal(found, "a band gives values, or from and to")
    else:
        for key in ("from", "to"):
            if key not in band:
                yield "band", Refusal(f"{key} is missing", "a band gives from and to, or values")


def _dopant(path: str, dopant: Mapping[str, Any], raw: Mapping[str, Any]) -> Iterator[Finding]:
    present = [key for key in CONCENTRATIONS if key in dopant]
    if len(present) > 1:
        found = f"the concentration is given twice, by {' and '.join(present)}"
        yield join(path, present[1]), Refusal(found, "give one of them")
        return
    weighed = [key for key in present if key != "number_density"]
    if weighed and "molar_mass" not in dopant:
        yield path, Refusal(f"{weighed[0]} without molar_mass", "give molar_mass of the compound weighed in")
    for key in ("molar_mass", "ions_per_formula"):
        if key in dopant and not weighed:
            yield f"{path}.{key}", Refusal(f"{key} without weight_fraction or mole_fraction", "leave it out")
    host = _host(raw)
    where = f"materials.{_host_name(raw)}"
    if weighed and host is not None and "density" not in host:
        yield where, Refusal("density is missing", f"{path}.{present[0]} needs the density of the host")
    if "mole_fraction" in present and host is not None and "molar_mass" not in host:
        yield (
            where,
            Refusal("molar_mass is missing", f"{path}.mole_fraction needs the molar mass of the host"),
        )
    # a term that is not understood may well use the concentration
    terms = table(dopant, "terms")
    used = not terms or any(
        not isinstance(term, Mapping) or str(term.get("model")) not in TERMS for term in terms.values()
    )
    for name, content in tables(dopant, "terms"):
        if content.get("model") == "lorentz" and not (
            {"plasma", "step", "number_density", "absorption_peak"} & set(content)
        ):
            if not present:
                allowed = f"give {', '.join(CONCENTRATIONS)} of the dopant, or plasma or step of the term"
                yield f"{path}.terms.{name}", Refusal("neither concentration nor plasma frequency", allowed)
            used = True
        yield from of_term(f"{path}.terms.{name}", content, ("number_density", "background_index"))
    if present and not used:
        found = f"{present[0]} is used by none of the terms"
        yield (
            join(path, present[0]),
            Refusal(found, "leave it out, or give a lorentz term its oscillator strength"),
        )
    if not used and dopant.get("local_field") == "virtual-cavity":
        allowed = "it acts on strengths that come from the concentration; plasma and step are felt already"
        yield f"{path}.local_field", Refusal("virtual-cavity has nothing to act on", allowed)


def _sizes(raw: Mapping[str, Any]) -> Iterator[Finding]:
    """Grains of a material whose terms depend on their size have one."""
    for name, inclusion in tables(raw, "inclusions"):
        material = str(inclusion.get("material"))
        permittivity = table(table(table(raw, "materials"), material), "permittivity")
        for term, content in tables(permittivity, "terms"):
            known = TERMS.get(str(content.get("model")))
            routes = known.in_grains.values() if known is not None else ()
            for key in (route.key for route in routes if route.key in content):
                if "diameter" not in inclusion:
                    reason = f"materials.{material}.permittivity.terms.{term}.{key} needs it"
                    yield f"inclusions.{name}", Refusal("diameter is missing", reason)


def _names(raw: Mapping[str, Any]) -> Iterator[Finding]:
    known = (*table(raw, "materials"), *library.names())
    uses = [("host.material", table(raw, "host").get("material"))]
    uses += [
        (f"inclusions.{name}.material", node.get("material")) for name, node in tables(raw, "inclusions")
    ]
    uses += [
        (f"inclusions.{name}.{key}.material", shell.get("material"))
        for name, node in tables(raw, "inclusions")
        for key, shell in raw_shells(node)
    ]
    uses += [(f"materials.{name}.based_on", node.get("based_on")) for name, node in tables(raw, "materials")]
    for path, name in uses:
        if not isinstance(name, str) or not re.match(NAME_PATTERN, name):
            continue  # the schema says so itself
        if path == f"materials.{name}.based_on" and name not in library.names():
            found = f"{name} is based on itself, and no built-in material is called so"
            yield path, Refusal(found, "name another material")
        elif name not in known:
            yield path, unknown_material(name, known)


def unknown_material(name: str, known: Iterable[str]) -> Refusal:
    """The refusal of a material that nobody defines."""
    allowed = f"define [materials.{name}] or name a built-in one, see mixsim list materials"
    return Refusal(f"unknown material {name!r}", allowed, nearest(name, known))


def _rule(raw: Mapping[str, Any]) -> Iterator[Finding]:
    mixing = table(raw, "mixing")
    name = mixing.get("rule", "maxwell-garnett")
    if not isinstance(name, str):
        return
    rule = RULES.get(name)
    if rule is None:
        yield (
            "mixing.rule",
            Refusal(f"unknown rule {name!r}", f"known are {', '.join(RULES)}", nearest(name, RULES)),
        )
        return
    yield from _parameters(mixing, rule)
    phases = 1 + len(table(raw, "inclusions")) + ("voids" in raw)
    if rule.most_phases is not None and phases > rule.most_phases:
        allowed = f"{name} takes {rule.most_phases} phases, host and voids included"
        yield "mixing.rule", Refusal(f"{phases} phases with the rule {name}", allowed)
    if "density" in mixing and rule.additive_only:
        free = ", ".join(n for n, r in RULES.items() if not r.additive_only)
        yield (
            "mixing.density",
            Refusal(
                f"a measured density with the rule {name}",
                f"only {free} takes partial volumes that do not add up to one",
            ),
        )
    if "density" in mixing and "voids" in raw and not rule.additive_only:
        allowed = "the density of the mixture says how much is missing already"
        yield "voids", Refusal("voids beside a measured density", allowed)
    for inclusion, node in tables(raw, "inclusions"):
        if not is_round(node) and not rule.takes_shapes:
            able = ", ".join(n for n, r in RULES.items() if r.takes_shapes)
            yield (
                f"inclusions.{inclusion}.shape",
                Refusal(f"grains that are not spheres with the rule {name}", f"{able} take them"),
            )


def _parameters(mixing: Mapping[str, Any], rule: Rule) -> Iterator[Finding]:
    """What a rule takes of its own: all that it needs, and nothing that only other rules take."""
    takes = f"{rule.name} takes {', '.join(rule.parameters) or 'no parameter of its own'}"
    every = {name for other in RULES.values() for name in other.parameters}
    for key in mixing:
        if key in every and key not in rule.parameters:
            owners = ", ".join(n for n, r in RULES.items() if key in r.parameters)
            yield (
                f"mixing.{key}",
                Refusal(f"{key} with the rule {rule.name}", f"{takes}; {key} is for {owners}"),
            )
    for name in rule.needed:
        if name not in mixing:
            needed = rule.parameters[name]
            allowed = f"the rule {rule.name} needs it: {needed.meaning}{_one_of(needed)}"
            yield "mixing", Refusal(f"{name} is missing", allowed)
    for name, parameter in rule.parameters.items():
        word = mixing.get(name)
        if isinstance(parameter, Choice) and isinstance(word, str) and parameter.meant(word) is None:
            allowed = f"with the rule {rule.name} one of {', '.join(parameter.words)}"
            found = f"unknown {name} {word!r}"
            yield f"mixing.{name}", Refusal(found, allowed, nearest(word, parameter.words))


def _one_of(parameter: Parameter | Choice) -> str:
    return f", one of {', '.join(parameter.words)}" if isinstance(parameter, Choice) else ""


def _densities(raw: Mapping[str, Any]) -> Iterator[Finding]:
    by_weight = [
        f"inclusions.{name}.{key}"
        for name, node in tables(raw, "inclusions")
        for key in ("weight_fraction", "phr")
        if key in node
    ]
    reason = by_weight[0] if by_weight else "mixing.density" if "density" in table(raw, "mixing") else ""
    if not reason:
        return
    grains = [node for _, node in tables(raw, "inclusions")]
    used = [_host_name(raw), *(node.get("material") for node in grains)]
    used += [shell.get("material") for node in grains for _, shell in raw_shells(node)]
    for name in dict.fromkeys(name for name in used if isinstance(name, str)):
        material = table(table(raw, "materials"), name) or library.definition(name)
        if material and "density" not in material:
            yield f"materials.{name}", Refusal("density is missing", f"{reason} needs it")


def _host_name(raw: Mapping[str, Any]) -> str:
    return str(table(raw, "host").get("material", ""))


def _host(raw: Mapping[str, Any]) -> Mapping[str, Any] | None:
    name = _host_name(raw)
    return table(table(raw, "materials"), name) or library.definition(name)
