"""What a recipe names but does not hold itself: library materials, inherited ones, measured tables."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from pathlib import Path
from typing import Any

from mixsim.dispersion import TERMS, Table, read_table
from mixsim.dispersion.extension import FEWEST
from mixsim.errors import Refusal
from mixsim.recipe import library
from mixsim.recipe.faults import Finding
from mixsim.recipe.layers import raw_shells

_DESCRIPTIONS = ("permittivity", "index", "table", "recipe")
_SAME = (
    {"infinity", "susceptibility"},
    {"resonance_wavelengths", "resonance_wavelengths_squared"},
)


def complete(raw: dict[str, Any]) -> list[Finding]:
    """Bring the materials that a recipe uses into it, in place; returns what was wrong."""
    materials = raw.setdefault("materials", {})
    inclusions = raw.get("inclusions")
    grains = (
        [node for node in inclusions.values() if isinstance(node, dict)]
        if isinstance(inclusions, dict)
        else []
    )
    used = [raw.get("host"), *grains, *(shell for grain in grains for _, shell in raw_shells(grain))]
    if not isinstance(materials, dict):
        return []
    for node in used:
        name = node.get("material") if isinstance(node, dict) else None
        if isinstance(name, str) and name not in materials and (content := library.definition(name)):
            materials[name] = content
    findings: list[Finding] = []
    completed = {name: _inherit(name, materials, findings, ()) for name in materials}
    materials.update(completed)
    return findings


def inherited(name: str, raw: Mapping[str, Any]) -> Any:
    """A material of the recipe or the library with what it is based on, the recipe untouched."""
    materials = raw.get("materials")
    known = materials if isinstance(materials, Mapping) else {}
    return _inherit(name, known, [], ()) if name in known else library.definition(name)


def once(findings: Iterable[Finding], raw: Mapping[str, Any]) -> list[Finding]:
    """Findings without those that a material has only because another, which has it too, is its base."""
    every = list(findings)
    said = {(path, refusal.found) for path, refusal in every}

    def comes_from_base(path: str, found: str) -> bool:
        kind, _, rest = path.partition(".")
        name, _, rest = rest.partition(".")
        materials = raw.get("materials")
        material = materials.get(name) if kind == "materials" and isinstance(materials, Mapping) else None
        base = material.get("based_on") if isinstance(material, Mapping) else None
        return rest != "" and base != name and (f"materials.{base}.{rest}", found) in said

    return [(path, refusal) for path, refusal in every if not comes_from_base(path, refusal.found)]


def _inherit(name: str, materials: Mapping[str, Any], findings: list[Finding], seen: tuple[str, ...]) -> Any:
    """A material with what it is based on; a base of its own name is the library's."""
    material = materials[name]
    base_name = material.get("based_on") if isinstance(material, dict) else None
    if not isinstance(base_name, str):
        return material
    if base_name in seen:
        circle = (*seen[seen.index(base_name) :], name)
        if base_name == seen[0] == next(other for other in materials if other in circle):  # said once
            found = f"a circle: {' → '.join((*circle, base_name))}"
            path = f"materials.{base_name}.based_on"
            findings.append((path, Refusal(found, "one of them must stand alone")))
        return material
    if base_name != name and base_name in materials:
        base = _inherit(base_name, materials, findings, (*seen, name))
    else:
        base = library.definition(base_name)
    if not isinstance(base, dict):
        return material
    given = [key for key in _DESCRIPTIONS if key in material]
    kept = {
        key: value for key, value in base.items() if key not in _DESCRIPTIONS or not given or key in given
    }
    kept.pop("check", None)  # it was of the material as it stood
    if given and given != ["index"]:
        own = ("static", "high_frequency", *(() if "table" in given else ("extension",)))
        kept = {key: value for key, value in kept.items() if key not in own}
    return _merged(kept, material)


def _merged(base: Mapping[str, Any], over: Mapping[str, Any]) -> dict[str, Any]:
    gone = _said_otherwise(base, over)
    merged = {key: value for key, value in base.items() if key not in gone}
    for key, value in over.items():
        below = merged.get(key)
        if isinstance(value, Mapping) and isinstance(below, Mapping):
            merged[key] = _merged(below, value)
        else:
            merged[key] = value
    return merged


def _said_otherwise(base: Mapping[str, Any], over: Mapping[str, Any]) -> set[str]:
    """Keys of an inherited table that the one on top gives in other words, with what only they need.

    Another model takes nothing over.
    """
    if over.get("model", base.get("model")) != base.get("model"):
        return set(base)
    gone = {key for words in _SAME for key in words if over.keys() & words} & base.keys()
    term = TERMS.get(str(base.get("model")))
    if term is None:
        return gone
    opened = False  # what the base took from a plasma that its terms share
    for name, routes in term.canonical.items():
        keys = {route.key for route in routes}
        gone |= (base.keys() & keys) if over.keys() & keys else set()
        opened |= bool(over.keys() & keys) and term.leaves_open(name, base)
    if not (gone - over.keys() or opened):
        return gone
    left = (base.keys() - gone) | over.keys()
    chosen = [route for routes in term.canonical.values() for route in routes if route.key in left]
    needed = {name for route in chosen for name in route.needs}
    return gone | (base.keys() & term.parameters.keys()) - needed


def tables(raw: Mapping[str, Any], folder: Path) -> tuple[dict[str, Table], list[Finding]]:
    """Measured spectra by the name of the material that holds them, and what was wrong with the others."""
    read: dict[str, Table] = {}
    findings: list[Finding] = []
    materials = raw.get("materials")
    for name, material in materials.items() if isinstance(materials, Mapping) else ():
        file = material.get("table") if isinstance(material, Mapping) else None
        if not isinstance(file, str):
            continue
        path = f"materials.{name}.table"
        try:
            read[name] = read_table(folder / file)
            if "extension" in material and (rows := read[name].omega.size) < FEWEST:
                found = f"extension of {file}, which has {rows} rows"
                findings.append((f"materials.{name}.extension", Refusal(found, f"at least {FEWEST} rows")))
            if read[name].permeability is not None and "permeability" in material:
                found = f"permeability beside {file}, which holds one"
                findings.append((f"materials.{name}.permeability", Refusal(found, "give one of them")))
        except FileNotFoundError:
            findings.append((path, Refusal(f"no such file {file!r}", "paths are relative to the recipe")))
        except Refusal as refusal:
            findings.append((path, Refusal(f"{file}: {refusal.found}", refusal.allowed, refusal.suggestion)))
        except (OSError, ValueError) as error:  # ValueError: a name that no file system takes
            reason = (getattr(error, "strerror", None) or "it cannot be read").lower()
            findings.append((path, Refusal(f"{file!r}: {reason}", "name a file that can be read")))
    return read, findings
