"""Every material of the library under audit: what fails is known and marked, all else is told."""

from __future__ import annotations

import pytest

import mixsim
from mixsim.recipe import library

# contacts between grains included; moments that turn in a plane: their files say so
FAIL = {("carbonyl-iron", "Snoek product"), ("cobalt-hexaferrite", "Snoek product")}


@pytest.mark.parametrize("letters", ["abc", "defghijklm", "nopqrs", "tuvwxyz"])
def test_verdicts(letters: str) -> None:
    names = [name for name in library.names() if name[0] in letters]
    assert names
    for name in names:
        answer = mixsim.audit(name)
        failed = {(name, f.name): f.why for f in answer.findings if f.verdict == "failed"}
        assert failed.keys() == {pair for pair in FAIL if pair[0] == name}, failed
        assert answer.passed == (not failed)
        unsure = {(name, f.name) for f in answer.findings if f.verdict == "could not tell"}
        # an index formula has no levels unless its file states them
        assert {finding for _, finding in unsure} <= {"levels"}
        assert {"passivity", "Kramers–Kronig", "range"} <= {f.name for f in answer.findings}
