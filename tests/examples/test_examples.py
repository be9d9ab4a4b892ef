"""The told jobs: every command of their READMEs runs and gives the answer that expected.toml holds."""

from __future__ import annotations

import json
import shlex
from pathlib import Path
from typing import Any

import pytest
import tomli
from typer.testing import CliRunner

from mixsim.cli import app

FOLDER = Path(__file__).parents[2] / "examples"
JOBS = sorted(path.parent for path in FOLDER.glob("*/README.md"))


def commands(job: Path) -> list[str]:
    """Lines of the console blocks that a reader types."""
    found, inside = [], False
    for line in (job / "README.md").read_text(encoding="utf-8").splitlines():
        if line.startswith("```"):
            inside = line.startswith("```console")
        elif inside and line.startswith("$ "):
            found.append(line[2:])
    return found


def expectations(job: Path) -> list[dict[str, Any]]:
    return tomli.loads((job / "expected.toml").read_text(encoding="utf-8"))["answers"]


def run(command: str, *more: str) -> Any:
    program, *arguments = shlex.split(command)
    assert program == "mixsim"
    return CliRunner().invoke(app, [*arguments, *more])


def look_up(answer: Any, keys: list[str | int]) -> Any:
    for key in keys:
        answer = answer[key]
    return answer


def test_there_are_jobs() -> None:
    assert len(JOBS) >= 2


@pytest.mark.parametrize("job", JOBS, ids=lambda job: job.name)
def test_commands_and_answers(job: Path, monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> None:
    for file in job.iterdir():
        (tmp_path / file.name).write_bytes(file.read_bytes())
    monkeypatch.chdir(tmp_path)
    typed, expected = commands(job), expectations(job)
    assert [entry["command"] for entry in expected] == typed
    for entry in expected:
        plain = run(entry["command"])
        assert plain.exit_code == entry["exit"], plain.output
        for file in entry.get("writes", []):
            assert (tmp_path / file).stat().st_size > 0
        if "values" not in entry:
            continue
        answer = json.loads(run(entry["command"], "--json").stdout)
        for wanted in entry["values"]:
            got = look_up(answer, wanted["at"])
            if "tolerance" in wanted:
                assert got == pytest.approx(wanted["value"], abs=wanted["tolerance"]), wanted["at"]
            else:
                assert got == wanted["value"], wanted["at"]


@pytest.mark.parametrize("job", JOBS, ids=lambda job: job.name)
def test_says_what_is_invented(job: Path) -> None:
    assert "invented" in (job / "README.md").read_text(encoding="utf-8")
    assert "invented" in (job / "recipe.toml").read_text(encoding="utf-8")
