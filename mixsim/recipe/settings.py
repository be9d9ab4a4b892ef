"""What the command line changes in a recipe before it is checked."""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from typing import Any

import tomli

from mixsim.errors import BadInput, Fault, Refusal, nearest
from mixsim.mixing import RULES
from mixsim.recipe import library
from mixsim.recipe.completion import inherited
from mixsim.recipe.consistency import unknown_material
from mixsim.recipe.faults import Finding

COMMAND_LINE = "command line"
# what makes a new name whole
_WHOLE = {
    "inclusions": ("material",),
    "dopants": ("terms",),
    "materials": ("permittivity", "index", "table", "recipe", "based_on"),
}
_FORM = "PATH=VALUE, for example voids.volume_fraction=2%"


def settings_of(texts: Sequence[str]) -> dict[str, str]:
    """Every `PATH=VALUE` of a command, path → value, the last one of a path winning.

    Raises
    ------
    BadInput
        Where one is not of that form.

    Examples
    --------
    >>> settings_of(["voids.volume_fraction=2%"])
    {'voids.volume_fraction': '2%'}
    """
    return dict(_setting(text) for text in texts)


def _setting(text: str) -> tuple[str, str]:
    path, sign, value = text.partition("=")
    if not sign or not all(path.strip().split(".")):
        raise BadInput([Fault(COMMAND_LINE, "--set", repr(text), _FORM)])
    return path.strip(), value.strip()


def apply(raw: dict[str, Any], path: str, value: Any, settings: Mapping[str, Any]) -> list[Finding]:
    """Put a value at a path of the recipe as parsed from TOML.

    A library material of which something is set stands in the recipe from then on, based on itself.

    Parameters
    ----------
    raw
        The recipe, changed in place.
    path
        Where to put the value; a name that is not there yet is made.
    value
        Text of the command line, or a value.
    settings
        All that is set, path → value: a new name needs more than one.

    Returns
    -------
    findings
        Empty, or why the path cannot hold a value.
    """
    parts = path.split(".")
    if parts[0] == "unknowns" and len(parts) > 1:  # its keys are paths themselves
        parts = ["unknowns", ".".join(parts[1:])]
    if (stray := _stray(raw, parts, settings)) is not None:
        return [(path, stray)]
    known: Any = None  # what a material takes over, to find the items of its lists
    if parts[0] == "materials" and len(parts) > 2:
        known = {"materials": {parts[1]: inherited(parts[1], raw)}}
        named = raw.setdefault("materials", {})
        if isinstance(named, dict) and parts[1] not in named and known["materials"][parts[1]] is not None:
            named[parts[1]] = {"based_on": parts[1]}
    node: Any = raw
    for position, part in enumerate(parts[:-1]):
        known = known.get(part) if isinstance(known, Mapping) else None
        if isinstance(node, list):
            node = node[int(part)] if _is_item(part, node) else None
        else:
            node = node.setdefault(part, list(known) if isinstance(known, list) else {})
        if not isinstance(node, dict | list):
            here = ".".join(parts[: position + 1])
            found = f"{here} is no item of its list" if node is None else f"{here} holds a value"
            return [(path, Refusal(found, "a path leads through tables to a key"))]
    last = parts[-1]
    if isinstance(node, dict):
        node[last] = parsed(value)
    elif _is_item(last, node):
        node[int(last)] = parsed(value)
    else:
        return [(path, Refusal(f"no item {last!r}", f"the list has {len(node)}, counted from 0"))]
    return []


def drop_foreign_parameters(raw: Mapping[str, Any], settings: Mapping[str, Any]) -> None:
    """Take out of a recipe, in place, what its former rule took and the one set does not."""
    mixing = raw.get("mixing")
    rule = RULES.get(str(mixing.get("rule"))) if isinstance(mixing, dict) else None
    if rule is None or not isinstance(mixing, dict):
        return
    for name in {name for other in RULES.values() for name in other.parameters} - rule.parameters.keys():
        if f"mixing.{name}" not in settings:
            mixing.pop(name, None)


def _is_item(part: str, items: Sequence[Any]) -> bool:
    return re.fullmatch(r"[0-9]{1,9}", part) is not None and int(part) < len(items)


def _stray(raw: Mapping[str, Any], parts: Sequence[str], settings: Mapping[str, Any]) -> Refusal | None:
    """Why a path leads nowhere: it names what the recipe does not hold, and nothing set makes it whole."""
    named = raw.get(parts[0], {})
    if parts[0] not in _WHOLE or len(parts) < 3 or not isinstance(named, Mapping) or parts[1] in named:
        return None
    start = f"{parts[0]}.{parts[1]}"
    if any(f"{path}.".startswith(f"{start}.{key}.") for path in settings for key in _WHOLE[parts[0]]):
        return None
    if parts[0] == "materials":
        if parts[1] in library.names():
            return None
        return unknown_material(parts[1], (*named, *library.names()))
    meant = nearest(parts[1], named)
    suggestion = ".".join((parts[0], meant, *parts[2:])) if meant else None
    held = ", ".join(f"{parts[0]}.{name}" for name in named) or "none"
    return Refusal(f"no {start} in the recipe", f"it holds {held}", suggestion)


def parsed(value: Any) -> Any:
    """A value of the command line: as TOML where it is TOML, else as text.

    Examples
    --------
    >>> parsed("2.25"), parsed("3 nm"), parsed("[1, 2]")
    (2.25, '3 nm', [1, 2])
    """
    if not isinstance(value, str):
        return value
    try:
        return tomli.loads(f"value = {value}")["value"]
    except (ValueError, RecursionError):  # no TOML, or more of it than Python reads
        return value
