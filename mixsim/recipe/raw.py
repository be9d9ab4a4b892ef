"""Tables of a recipe as parsed, before any of it is known to be right."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

from mixsim.errors import Refusal
from mixsim.recipe.faults import Finding
from mixsim.recipe.leaves import join


def table(raw: Mapping[str, Any], key: str) -> Mapping[str, Any]:
    """Table at a key, empty where there is none."""
    value = raw.get(key)
    return value if isinstance(value, Mapping) else {}


def tables(raw: Mapping[str, Any], key: str) -> Iterator[tuple[str, Mapping[str, Any]]]:
    """Tables at a key by their names."""
    for name, value in table(raw, key).items():
        if isinstance(value, Mapping):
            yield name, value


def one_of(path: str, node: Mapping[str, Any], keys: tuple[str, ...], what: str) -> Iterator[Finding]:
    """The finding where not exactly one of some keys is given."""
    present = [key for key in keys if key in node]
    if len(present) > 1:
        times = "twice" if len(present) == 2 else f"{len(present)} times"
        yield (
            join(path, present[1]),
            Refusal(f"{what} is given {times}, by {' and '.join(present)}", "give one of them"),
        )
    elif not present:
        yield path, Refusal(f"{what} is not given", f"give one of {', '.join(keys)}")
