"""Every number from outside names its source and what kind of source that is."""

from __future__ import annotations

import pytest
import reference

from mixsim.recipe import library

SUBJECTS = sorted(file.stem for file in reference.FOLDER.glob("*.toml"))


@pytest.mark.parametrize("subject", SUBJECTS)
def test_each_entry_says_where_it_comes_from(subject: str) -> None:
    entries = reference.rows(subject)
    assert entries
    assert len({entry["id"] for entry in entries}) == len(entries)
    for entry in entries:
        assert entry["kind"] in reference.KINDS, entry["id"]
        assert len(entry["source"]) > 10, entry["id"]


@pytest.mark.parametrize("name", library.names())
def test_each_material_says_where_it_comes_from(name: str) -> None:
    content = library.definition(name)
    assert content is not None
    assert content["kind"] in reference.KINDS
    assert content["title"]
    assert content["source"]
