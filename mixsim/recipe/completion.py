"""What a recipe names but does not hold itself: library materials, inherited ones, measured tables."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path
from typing import Any

from mixsim.dispersion import Table, read_table
from mixsim.errors import Refusal
from mixsim.recipe import library
from mixsim.recipe.faults import Finding

_DESCRIPTIONS = ("permittivity", "index", "table")


def complete(raw: dict[str, Any]) -> list[Finding]:
    """Bring the materials that a recipe uses into it, in place; returns what was wrong."""
    materials = raw.setdefault("materials", {})
    inclusions = raw.get("inclusions")
    used = [raw.get("host"), *(inclusions.values() if isinstance(inclusions, dict) else ())]
    if not isinstance(materials, dict):
        return []
    for node in used:
        name = node.get("material") if isinstance(node, dict) else None
        if isinstance(name, str) and name not in materials and (content := library.definition(name)):
            materials[name] = content
    findings: list[Finding] = []
    inherited = {name: _inherit(name, materials, findings, ()) for name in materials}
    materials.update(inherited)
    return findings


def _inherit(name: str, materials: Mapping[str, Any], findings: list[Finding], seen: tuple[str, ...]) -> Any:
    """A material with what it is based on; a base of its own name is the library's."""
    material = materials[name]
    base_name = material.get("based_on") if isinstance(material, dict) else None
    if not isinstance(base_name, str):
        return material
    if base_name in seen:
        chain = " → ".join((*seen, name, base_name))
        findings.append(
            (f"materials.{name}.based_on", Refusal(f"a circle: {chain}", "one of them must stand alone"))
        )
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
    if given and given != ["index"]:
        kept = {key: value for key, value in kept.items() if key not in ("static", "high_frequency")}
    return _merged(kept, material)


def _merged(base: Mapping[str, Any], over: Mapping[str, Any]) -> dict[str, Any]:
    merged = dict(base)
    for key, value in over.items():
        inherited = merged.get(key)
        if isinstance(value, Mapping) and isinstance(inherited, Mapping) and not _replaces(inherited, value):
            merged[key] = _merged(inherited, value)
        else:
            merged[key] = value
    return merged


def _replaces(inherited: Mapping[str, Any], value: Mapping[str, Any]) -> bool:
    """Another model, or another way to give the level, takes nothing over from the inherited one."""
    levels = {"infinity", "susceptibility"}
    return value.get("model", inherited.get("model")) != inherited.get("model") or bool(
        levels & value.keys() and levels & inherited.keys() - value.keys()
    )


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
        except FileNotFoundError:
            findings.append((path, Refusal(f"no such file {file!r}", "paths are relative to the recipe")))
        except OSError as error:
            reason = (error.strerror or "it cannot be read").lower()
            findings.append((path, Refusal(f"{file!r}: {reason}", "name a file that can be read")))
        except Refusal as refusal:
            findings.append((path, Refusal(f"{file}: {refusal.found}", refusal.allowed, refusal.suggestion)))
    return read, findings
