"""Lets the tests of this folder share `broken`, and holds the recipe to printing nothing."""

from __future__ import annotations

import sys
from collections.abc import Iterator
from pathlib import Path

import pytest

sys.path.insert(0, str(Path(__file__).parent))


@pytest.fixture(autouse=True)
def nothing_is_printed(capfd: pytest.CaptureFixture[str]) -> Iterator[None]:
    yield
    assert capfd.readouterr() == ("", "")
