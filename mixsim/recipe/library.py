"""The built-in materials: one file a material, read only when its name is used."""

from __future__ import annotations

from collections.abc import Iterator
from functools import cache
from pathlib import Path
from typing import Any

import tomli

_FOLDER = Path(__file__).parent.parent / "materials"


@cache
def names() -> tuple[str, ...]:
    """Names of the built-in materials, in alphabetical order."""
    return tuple(sorted(file.stem for file in _FOLDER.glob("*.toml")))


def definition(name: str) -> dict[str, Any] | None:
    """Content of a built-in material as it stands in its file, or None where there is none."""
    if name not in names():
        return None
    return tomli.loads((_FOLDER / f"{name}.toml").read_text(encoding="utf-8"))


def definitions() -> Iterator[tuple[str, dict[str, Any]]]:
    """Every built-in material with its content."""
    for name in names():
        content = definition(name)
        if content is not None:
            yield name, content
