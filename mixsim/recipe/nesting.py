"""Materials that are recipes themselves: porous grains, hollow fillers, agglomerates."""

from __future__ import annotations

import re
from collections.abc import Callable, Mapping
from pathlib import Path
from typing import TYPE_CHECKING, Any

from mixsim.errors import BadInput, Fault, Refusal
from mixsim.recipe.agreement import of_mixture
from mixsim.recipe.completion import inherited
from mixsim.recipe.faults import Finding, faults_of
from mixsim.recipe.leaves import Number, join
from mixsim.recipe.syntax import text_of

if TYPE_CHECKING:
    from mixsim.recipe.recipe import Recipe
    from mixsim.units import Leaf

_INSIDE = re.compile(r"materials\.([^.]+)\.recipe\.(.+)")
_TEMPERATURE = "conditions.temperature"

Parse = Callable[..., "Recipe"]


def settings_inside(
    raw: Mapping[str, Any], settings: Mapping[str, Any]
) -> tuple[dict[str, Any], dict[str, dict[str, Any]]]:
    """What is set in a recipe itself, and what in the files of its materials, by their names."""
    own: dict[str, Any] = {}
    inside: dict[str, dict[str, Any]] = {}
    for path, value in settings.items():
        match = _INSIDE.fullmatch(path)
        content = inherited(match[1], raw) if match else None
        if match and isinstance(content, Mapping) and isinstance(content.get("recipe"), str):
            inside.setdefault(match[1], {})[match[2]] = value
        else:
            own[path] = value
    return own, inside


def parts(
    raw: Mapping[str, Any],
    settings: Mapping[str, Mapping[str, Any]],
    *,
    parse: Parse,
    file: str,
    folder: Path,
    text: str,
    within: tuple[str, ...],
) -> tuple[dict[str, Recipe], list[Finding], list[Fault]]:
    """Recipes of the materials that have one, by name, and what was wrong with the others.

    A recipe in a file of its own says itself what is wrong with it, and where; one that stands in the
    material is part of the outer file.
    """
    found: dict[str, Recipe] = {}
    findings: list[Finding] = []
    faults: list[Fault] = []
    materials = raw.get("materials")
    for name, material in materials.items() if isinstance(materials, Mapping) else ():
        content = material.get("recipe") if isinstance(material, Mapping) else None
        if not isinstance(content, str | Mapping):
            continue
        path = f"materials.{name}.recipe"
        given = {**_warmth(raw), **settings.get(name, {})}
        try:
            found[name] = (
                _of_file(folder / content, given, parse, within)
                if isinstance(content, str)
                else parse(
                    None, raw=_copied(content), file=file, folder=folder, settings=given, within=within
                )
            )
        except Refusal as refusal:
            findings.append((path, refusal))
        except BadInput as error:
            if isinstance(content, str):
                faults += error.faults
            else:
                inner = [
                    (join(path, fault.path), Refusal(fault.found, fault.allowed, fault.suggestion))
                    for fault in error.faults
                ]
                faults += faults_of(inner, file=file, text=text, settings={})
            continue
        if name in found and found[name].compile().aligned:
            allowed = "orientation = 'random' inside a material: it has one permittivity"
            findings.append((path, Refusal("aligned grains inside a material", allowed)))
    return found, findings, faults


def _of_file(place: Path, settings: Mapping[str, Any], parse: Parse, within: tuple[str, ...]) -> Recipe:
    here = str(place.resolve())
    if here in within:
        chain = " → ".join(Path(step).name for step in (*within[within.index(here) :], here))
        raise Refusal(f"a circle: {chain}", "a recipe does not contain itself")
    if not place.is_file():
        raise Refusal(f"no such file {place.name!r}", "paths are relative to the recipe")
    return parse(
        text_of(place), file=str(place), folder=place.parent, settings=settings, within=(*within, here)
    )


def _warmth(raw: Mapping[str, Any]) -> dict[str, Any]:
    """The temperature of the piece, which is that of all its parts."""
    conditions = raw.get("conditions")
    given = conditions.get("temperature") if isinstance(conditions, Mapping) else None
    return {} if given is None else {_TEMPERATURE: given}


def adopted(found: Mapping[str, Recipe], *, warm: bool) -> tuple[dict[str, Leaf], dict[str, Number]]:
    """The numbers of inner recipes by their outer paths, and what each may hold."""
    leaves: dict[str, Leaf] = {}
    allowed: dict[str, Number] = {}
    for name, part in found.items():
        for path, leaf in part.leaves.items():
            if of_mixture(path) and not (warm and path == _TEMPERATURE):
                leaves[f"materials.{name}.recipe.{path}"] = leaf
                allowed[f"materials.{name}.recipe.{path}"] = part.ranges[path]
    return leaves, allowed


def densities(found: Mapping[str, Recipe]) -> dict[str, str]:
    """Density of each inner recipe as it would be written, where its constituents have theirs."""
    written = {}
    for name, part in found.items():
        density = part.compile().composition({}).density
        if density is not None:
            written[name] = f"{float(density)!r} kg/m^3"
    return written


def _copied(node: Any) -> Any:
    if isinstance(node, Mapping):
        return {key: _copied(value) for key, value in node.items()}
    return [_copied(item) for item in node] if isinstance(node, list) else node
