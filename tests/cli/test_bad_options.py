"""Broken options, readings and outputs: exit 2, one message on stderr, nothing on stdout, nothing written."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest

from mixsim.cli import questions

from .conftest import Run

LOADING = "inclusions.filler.volume_fraction"
PREDICT, SWEEP, INVERT = ["predict", "recipe.toml"], ["sweep", "recipe.toml"], ["invert", "recipe.toml"]

# ruff: noqa: E501 – one case a line
CASES: dict[str, tuple[list[str], list[str]]] = {
    "unknown command": (["predic"], ["no such command 'predic'", "did you mean 'predict'?"]),
    "unknown option": (
        [*PREDICT, "--jsn"], ["no such option: --jsn", "mixsim predict --help", "did you mean '--json'?"],
    ),
    "unknown option of the program": (["--verison"], ["--verison", "did you mean '--version'?"]),
    "a value for a switch": ([*PREDICT, "--json=3"], ["'--json' does not take a value", "mixsim predict --help"]),
    "no recipe": (["predict"], ["missing argument", "RECIPE"]),
    "two recipes": ([*PREDICT, "other.toml"], ["unexpected extra argument", "other.toml"]),
    "recipe not there": (["predict", "none.toml"], ["none.toml: no such file", "TOML"]),
    "a folder for a recipe": (["predict", "."], [".: is a directory"]),
    "set without a value": ([*PREDICT, "--set", LOADING], ["--set", LOADING, "PATH=VALUE"]),
    "set without a path": ([*PREDICT, "--set", "=3"], ["--set", "PATH=VALUE"]),
    "set of a broken path": ([*PREDICT, "--set", "a..b=3"], ["--set", "'a..b=3'"]),
    "set of an unknown key": ([*PREDICT, "--set", "mixing.role=3"], ["mixing.role", "mean 'rule'"]),
    "set out of range": ([*PREDICT, "--set", f"{LOADING}=140%"], ["command line", LOADING, "'140%'", "at most 1"]),
    "set in a wrong unit": ([*PREDICT, "--set", "band.from=3kg"], ["band.from", "'kg'", "GHz"]),
    "unknown rule": ([*PREDICT, "--rule", "brugeman"], ["--rule", "'brugeman'", "did you mean 'bruggeman'"]),
    "nothing varies": (SWEEP, ["--vary", "nothing varies", "PATH FROM TO POINTS"]),
    "three words": ([*SWEEP, "--vary", LOADING, "0%", "9%"], ["--vary", "PATH FROM TO POINTS"]),
    "unknown path": ([*SWEEP, "--vary", "inclusions.filer.volume_fraction", "0%", "9%", "3"], ["--vary", LOADING]),
    "shortened path": ([*SWEEP, "--vary", "band.plasma", "1eV", "2eV", "3"], ["terms.band.plasma'?"]),
    "points in words": ([*SWEEP, "--vary", LOADING, "0%", "9%", "few"], ["'few'", "at least 2"]),
    "points beyond any memory": ([*SWEEP, "--vary", LOADING, "0%", "9%", "9" * 10], ["at most 10000000"]),
    "points of many digits": ([*SWEEP, "--vary", LOADING, "0%", "9%", "9" * 5000], ["at most 10000000"]),
    "an equals sign and too few": ([*SWEEP, f"--vary={LOADING}", "0%", "9%"], ["PATH FROM TO POINTS"]),
    "one point": ([*SWEEP, "--vary", LOADING, "0%", "9%", "1"], ["1 points", "at least 2"]),
    "a range of nothing": ([*SWEEP, "--vary", LOADING, "9%", "9%", "3"], ["the two ends differ"]),
    "a log axis from zero": ([*SWEEP, "--log", "--vary", LOADING, "0%", "9%", "3"], ["above zero"]),
    "varied twice": (
        [*SWEEP, "--vary", LOADING, "0%", "9%", "3", "--vary", LOADING, "0%", "9%", "3"], ["varies twice"],
    ),
    "no room for the host": (
        [*SWEEP, "--set", "voids.volume_fraction=50%", "--vary", LOADING, "0%", "90%", "4"], ["add up to 1.4"],
    ),
    "too large": (
        [*SWEEP, "--set", "band.points=9000", "--vary", LOADING, "0%", "90%", "90000"], ["8.1e+08", "at most"],
    ),
    "a reading in words": ([*INVERT, "--static", "high"], ["--static", "'high'"]),
    "a reading with a unit": ([*INVERT, "--static", "4.1 nm"], ["--static", "nm"]),
    "a reading below zero": ([*INVERT, "--static", "-4"], ["--static", "above zero"]),
    "readings the wrong way round": (
        [*INVERT, "--static", "2.1", "--high-frequency", "2.2"], ["--static", "below high_frequency"],
    ),
    "a free path unknown": ([*INVERT, "--free", "inclusions.filler.volum", "0", "1"], ["--free", LOADING]),
    "a free range of nothing": ([*INVERT, "--free", LOADING, "5%", "5%"], ["--free", "is empty"]),
    "two words": ([*INVERT, "--free", LOADING, "5%"], ["--free", "PATH LOW HIGH"]),
    "a seed in words": ([*INVERT, "--seed", "x"], ["--seed", "'x'"]),
    "a seed of many digits": ([*INVERT, "--seed", "9" * 5000], ["--seed", "at most 18 digits"]),
    "a negative seed": ([*INVERT, "--seed", "-1"], ["--seed", "-1"]),
    "unknown suffix": ([*PREDICT, "--out", "film.xls"], ["'film.xls'", "'.xls'", ".csv"]),
    "near suffix": ([*PREDICT, "--out", "film.pgn"], ["did you mean '.png'?"]),
    "no suffix": ([*PREDICT, "--out", "film"], ["no suffix", ".png"]),
    "no such folder": ([*PREDICT, "--out", "none/film.png"], ["no folder 'none'"]),
    "a folder for a file": ([*PREDICT, "--out", "folder.png"], ["it is a folder"]),
    "second file bad": ([*PREDICT, "--out", "good.csv", "--out", "bad.xls"], ["'bad.xls'"]),
    "three varied in a plot": (
        [*SWEEP, "--out", "s.png", "--vary", LOADING, "0%", "9%", "3",
         "--vary", "materials.filler.permittivity.infinity", "2", "3", "2",
         "--vary", "materials.resin.permittivity.infinity", "2", "3", "2"], ["'s.png'", "3 varied", ".npz"],
    ),
    "a good file before a picture of three varied": (
        [*SWEEP, "--out", "s.csv", "--out", "s.png", "--vary", LOADING, "0%", "9%", "3",
         "--vary", "materials.filler.permittivity.infinity", "2", "3", "2",
         "--vary", "materials.resin.permittivity.infinity", "2", "3", "2"], ["'s.png'", "3 varied"],
    ),
    "unknown draft": (["draft", "doped-gls"], ["'doped-gls'", "did you mean 'doped-glass'?"]),
    "a draft over a file": (["draft", "doped-glass", "--out", "recipe.toml"], ["there already", "never overwritten"]),
    "a draft of another kind of file": (["draft", "doped-glass", "--out", "a.txt"], ["'.txt'", ".toml"]),
    "unknown list": (["list", "rule"], ["'rule'", "rules, models", "did you mean 'rules'?"]),
    "materials of no such evidence": (["list", "materials", "--evidence", "guess"], ["--evidence", "'guess'", "memory"]),
    "materials at no place": (["list", "materials", "--at", "3 kg"], ["--at", "'kg'"]),
    "rules at a place": (["list", "rules", "--at", "3 nm"], ["--at", "list materials"]),
    "nothing with a word": (["list", "rules", "--text", "xyz"], ["no rules like that"]),
    "a filter without a kind": (["list", "--evidence", "practice"], ["--evidence", "mixsim list materials"]),
    "a material misspelt": (["show", "goold", "--out", "b.png"], ["'goold'", "did you mean 'gold'?"]),
    "a rule drawn": (["show", "bruggeman", "--out", "b.png"], ["'bruggeman' has no spectrum"]),
    "unknown name": (["show", "brugeman"], ["'brugeman'", "did you mean 'bruggeman'?"]),
    "a recipe to show that is not there": (["show", "none.toml"], ["none.toml: no such file"]),
    "an audit of nothing": (["audit", "none.toml"], ["none.toml: no such file"]),
}  # fmt: skip


@pytest.mark.parametrize("name", CASES)
def test_one_message_and_nothing_else(run: Run, name: str) -> None:
    Path("folder.png").mkdir()
    before = sorted(Path().iterdir())
    arguments, said = CASES[name]
    result = run(*arguments)
    assert result.exit_code == 2, result.output
    assert result.stdout == ""
    lines = result.stderr.splitlines()
    assert len(lines) == 1, lines
    assert lines[0].startswith("mixsim: ")
    for part in said:
        assert part in lines[0]
    assert sorted(Path().iterdir()) == before


def test_there_are_enough_of_them() -> None:
    assert len(CASES) >= 40


def test_every_fault_of_a_recipe_on_a_line_of_its_own(run: Run) -> None:
    result = run(*PREDICT, "--set", "band.from=3kg", "--set", f"{LOADING}=9", "--set", "mixing.rule=x")
    assert result.exit_code == 2
    assert len(result.stderr.splitlines()) == 3


def test_an_unwritable_folder_is_said_and_an_old_file_stays(
    run: Run, monkeypatch: pytest.MonkeyPatch
) -> None:
    Path("film.csv").write_text("old")

    def full(*_: Any, **__: Any) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr("mixsim.present.comma_separated.write_csv", full)
    result = run(*PREDICT, "--out", "film.csv")
    assert result.exit_code == 2
    assert "'film.csv': no space left on device" in result.stderr
    assert Path("film.csv").read_text() == "old"
    assert sorted(p.name for p in Path().iterdir()) == ["film.csv", "recipe.toml"]


def test_interruption_and_internal_faults(run: Run, monkeypatch: pytest.MonkeyPatch) -> None:
    def interrupted(*_: Any) -> None:
        raise KeyboardInterrupt

    def broken(*_: Any) -> None:
        raise ZeroDivisionError("by a bug")

    monkeypatch.setattr(questions, "recipe_from", interrupted)
    result = run(*PREDICT)
    assert result.exit_code == 130
    assert "Traceback" not in result.output
    monkeypatch.setattr(questions, "recipe_from", broken)
    result = run(*PREDICT)
    assert result.exit_code == 70
    assert result.stderr.startswith("mixsim: internal fault, please report it: ZeroDivisionError: by a bug")
    assert "Traceback" not in result.stderr
    monkeypatch.setenv("MIXSIM_TRACEBACK", "1")
    assert "Traceback" in run(*PREDICT).stderr


def test_an_answer_beyond_the_memory_is_bad_input(run: Run, monkeypatch: pytest.MonkeyPatch) -> None:
    def full(*_: Any) -> None:
        raise MemoryError

    monkeypatch.setattr(questions, "recipe_from", full)
    result = run(*PREDICT)
    assert result.exit_code == 2
    assert result.stderr == (
        "mixsim: command line: the answer does not fit into memory; ask for fewer points or values\n"
    )


def test_an_option_that_is_nothing_like_another_gets_no_suggestion(run: Run) -> None:
    assert "did you mean" not in run("audit", "recipe.toml", "--out", "x.csv").stderr
