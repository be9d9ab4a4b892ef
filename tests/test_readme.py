"""What the README shows is what happens: its console blocks and its Python run, and print what it says."""

from __future__ import annotations

import re
import shlex
from itertools import pairwise
from pathlib import Path

import pytest
from typer.testing import CliRunner

from mixsim.cli import app

ROOT = Path(__file__).parents[1]
README = (ROOT / "README.md").read_text(encoding="utf-8")
EXIT = {"examples/filled-resin": 3}


def blocks(language: str) -> list[str]:
    return re.findall(rf"```{language}\n(.*?)```", README, flags=re.DOTALL)


def steps() -> list[tuple[str, list[str]]]:
    """Every mixsim command of the tour with the lines shown below it."""
    found: list[tuple[str, list[str]]] = []
    for block in blocks("console"):
        for line in block.splitlines():
            if line.startswith("$ "):
                found.append((line[2:], []))
            else:
                found[-1][1].append(line)
    return [step for step in found if step[0].startswith("mixsim ")]


def test_tour(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    for folder in ("configs", "examples"):
        (tmp_path / folder).symlink_to(ROOT / folder)
    monkeypatch.chdir(tmp_path)
    assert len(steps()) >= 7
    for command, shown in steps():
        result = CliRunner().invoke(app, shlex.split(command)[1:])
        expected = next((code for part, code in EXIT.items() if part in command), 0)
        assert result.exit_code == expected, result.output
        printed = [line.rstrip() for line in result.stdout.splitlines()]
        position = 0
        for before, line in pairwise(["", *shown]):
            if line == "...":
                continue
            assert line in printed[position:], (command, line, result.stdout)
            place = printed.index(line, position)
            assert before == "..." or place == position, (command, "lines are left out before", line)
            position = place + 1


def test_python(monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]) -> None:
    monkeypatch.chdir(ROOT)
    (code,) = blocks("python")
    exec(compile(code, "README.md", "exec"), {})
    assert capsys.readouterr().out.startswith("0.1319")


def test_toml_is_of_the_recipe_shown() -> None:
    (shown,) = blocks("toml")
    recipe = (ROOT / "examples/tin-oxide-film/recipe.toml").read_text(encoding="utf-8")
    for line in filter(None, shown.splitlines()):
        assert line in recipe
