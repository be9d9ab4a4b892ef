"""The values of shared/published, with their sources, for tests."""

from __future__ import annotations

from functools import cache
from pathlib import Path
from typing import Any

import pytest
import tomli

FOLDER = Path(__file__).parents[2] / "shared" / "published"
KINDS = ("published", "memory", "practice", "invented")
Row = dict[str, Any]


@cache
def rows(subject: str) -> tuple[Row, ...]:
    """Every entry of one subject, defaults of the file filled in."""
    content = tomli.loads((FOLDER / f"{subject}.toml").read_text(encoding="utf-8"))
    return tuple({**content.get("defaults", {}), **entry} for entry in content["values"])


def row(subject: str, name: str) -> Row:
    """The one entry of this id."""
    found = [entry for entry in rows(subject) if entry["id"] == name]
    assert len(found) == 1, f"{subject} holds {len(found)} entries {name!r}"
    return found[0]


def said(entry: Row) -> str:
    """Id, source and kind of an entry, for the id of a test."""
    return f"{entry['id']} [{entry['kind']}: {entry['source']}]"


def case(subject: str, *names: str) -> Any:
    """Marks a test as checked against some entries of one subject, which it is given one by one."""
    entries = [row(subject, name) for name in names] or list(rows(subject))
    return pytest.mark.parametrize("ref", [pytest.param(entry, id=said(entry)) for entry in entries])
