"""Every material of the library under audit: nothing fails, and what cannot be told is known."""

from __future__ import annotations

import pytest

import mixsim
from mixsim.recipe import library

# magnetic grades of common practice, whose saturation nobody states
OPEN = {("nickel-zinc-ferrite", "Snoek product"), ("carbonyl-iron", "Snoek product")}


@pytest.mark.parametrize("letters", ["abc", "defghijklm", "nopqrs", "tuvwxyz"])
def test_verdicts(letters: str) -> None:
    names = [name for name in library.names() if name[0] in letters]
    assert names
    for name in names:
        answer = mixsim.audit(name)
        failed = [f"{name}, {f.name}: {f.why}" for f in answer.findings if f.verdict == "failed"]
        assert not failed
        unsure = {(name, f.name) for f in answer.findings if f.verdict == "could not tell"}
        # an index formula has no levels unless its file states them
        assert {pair for pair in unsure if pair[1] != "levels"} <= OPEN
        assert {"passivity", "Kramers–Kronig", "range"} <= {f.name for f in answer.findings}
