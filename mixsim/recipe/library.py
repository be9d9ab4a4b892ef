"""The built-in materials: one file a material, read only when its name is used."""

from __future__ import annotations

import json
from collections.abc import Iterator
from functools import cache
from pathlib import Path
from typing import Any

import tomli

from mixsim.units import read

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


def band(content: dict[str, Any]) -> tuple[float, float]:
    """Ends of the band in which a built-in material holds, lower first [rad/s]."""
    low, high = sorted(read(content["valid"][end], "spectral").value for end in ("from", "to"))
    return low, high


def alone(name: str) -> str:
    """Recipe (TOML) of a built-in material by itself, over the band in which it holds."""
    content = definition(name) or {}
    title, valid = json.dumps(content["title"], ensure_ascii=False), content["valid"]
    return f"""
        title = {title}
        host.material = "{name}"
        band = {{ from = "{valid["from"]}", to = "{valid["to"]}", points = 401, spacing = "log" }}
    """
