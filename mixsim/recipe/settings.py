"""What the command line changes in a recipe before it is checked."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import tomli

from mixsim.errors import BadInput, Fault, Refusal
from mixsim.recipe import library
from mixsim.recipe.faults import Finding

COMMAND_LINE = "command line"
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


def apply(raw: dict[str, Any], path: str, value: Any) -> list[Finding]:
    """Put a value at a path of the recipe as parsed from TOML.

    A number of a library material is set in a copy of it, which stands in the recipe from then on.

    Returns
    -------
    findings
        Empty, or why the path cannot hold a value.
    """
    parts = path.split(".")
    if parts[0] == "materials" and len(parts) > 2 and parts[1] not in raw.get("materials", {}):
        raw.setdefault("materials", {})[parts[1]] = library.definition(parts[1]) or {}
    node: Any = raw
    for position, part in enumerate(parts[:-1]):
        if isinstance(node, list):
            node = node[int(part)] if part.isdigit() and int(part) < len(node) else None
        else:
            node = node.setdefault(part, {})
        if not isinstance(node, dict | list):
            here = ".".join(parts[: position + 1])
            found = f"{here} is no item of its list" if node is None else f"{here} holds a value"
            return [(path, Refusal(found, "a path leads through tables to a key"))]
    last = parts[-1]
    if isinstance(node, dict):
        node[last] = parsed(value)
    elif last.isdigit() and int(last) < len(node):
        node[int(last)] = parsed(value)
    else:
        return [(path, Refusal(f"no item {last!r}", f"the list has {len(node)}, counted from 0"))]
    return []


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
    except tomli.TOMLDecodeError:
        return value
