"""A sound recipe in an empty folder, and the program run in this process."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest
from typer.testing import CliRunner

from mixsim.cli import app

SOUND = """
title = "Filled resin, invented"
[band]
from = "1 GHz"
to = "10 GHz"
points = 5
[host]
material = "resin"
[inclusions.filler]
material = "filler"
volume_fraction = "20 %"
[materials.resin]
density = "1.2 g/cm^3"
permittivity.infinity = 2.9
permittivity.terms.dipoles = { model = "debye", step = 0.4, relaxation_frequency = "2 GHz" }
[materials.filler]
density = "4.0 g/cm^3"
permittivity.infinity = 3.1
[materials.filler.permittivity.terms.band]
model = "lorentz"
plasma = "1100 cm^-1"
resonance = "440 cm^-1"
damping = "60 cm^-1"
[measured]
static = "4.10 ± 0.03"
[unknowns]
"inclusions.filler.volume_fraction" = ["0 %", "60 %"]
"""

Run = Callable[..., Any]


@pytest.fixture
def run(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Run:
    """`run("predict", "recipe.toml")` in a folder that holds recipe.toml."""
    monkeypatch.chdir(tmp_path)
    monkeypatch.setenv("COLUMNS", "80")
    (tmp_path / "recipe.toml").write_text(SOUND, encoding="utf-8")
    return lambda *arguments: CliRunner().invoke(app, [str(argument) for argument in arguments])
