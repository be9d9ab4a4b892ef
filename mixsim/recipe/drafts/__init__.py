"""Commented starter recipes, one of each kind that people make."""

from __future__ import annotations

from functools import cache
from pathlib import Path

_FOLDER = Path(__file__).parent


@cache
def names() -> tuple[str, ...]:
    """Kinds of starter recipe."""
    return tuple(sorted(file.stem for file in _FOLDER.glob("*.toml")))


def text(kind: str) -> str:
    """The starter recipe of a kind, which must be one of `names`."""
    return (_FOLDER / f"{kind}.toml").read_text(encoding="utf-8")


def purpose(kind: str) -> str:
    """What a kind is for: the first line of its recipe."""
    return text(kind).splitlines()[0].removeprefix("# ").rstrip(".")
