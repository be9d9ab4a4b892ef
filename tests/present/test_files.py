"""Files: the suffix decides, whole or not at all, the same bytes for the same answer."""

from __future__ import annotations

import errno
import json
import os
import subprocess
import sys
import tempfile
from pathlib import Path
from typing import Any

import numpy as np
import pytest

from mixsim.errors import BadInput
from mixsim.present import comma_separated
from mixsim.present.files import SUFFIXES, check, write

BEGINS = {
    ".csv": b"# title: Test film\n",
    ".json": b'{"title": "Test film"',
    ".npz": b"PK",
    ".png": b"\x89PNG",
    ".svg": b"<?xml",
    ".pdf": b"%PDF",
}


@pytest.mark.parametrize(
    ("name", "found", "suggestion"),
    [
        ("film.pgn", "'.pgn'", ".png"),
        ("film.xlsx", "'.xlsx'", None),
        ("film", "no suffix", None),
        ("nowhere/film.csv", "there is no folder", None),
        ("folder.csv", "it is a folder", None),
        ("x" * 300 + ".csv", "too long", None),
    ],
)
def test_refused_before_anything_is_computed(
    name: str, found: str, suggestion: str | None, tmp_path: Path
) -> None:
    (tmp_path / "folder.csv").mkdir()
    with pytest.raises(BadInput) as refused:
        check(tmp_path / name)
    (fault,) = refused.value.faults
    assert (fault.file, fault.path, fault.suggestion) == ("command line", "--out", suggestion)
    assert found in fault.found
    if "suffix" in found or found.startswith("'."):
        assert all(suffix in fault.allowed for suffix in SUFFIXES)


def test_folder_that_cannot_be_written_to(
    answers: Any, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    def denied(**_: object) -> None:
        raise PermissionError(errno.EACCES, "Permission denied")

    answer = answers.prediction()
    monkeypatch.setattr(tempfile, "mkstemp", denied)  # the folder was locked after the check
    with pytest.raises(BadInput, match="permission denied"):
        write(answer, tmp_path / "film.csv")
    monkeypatch.setattr(os, "access", lambda *_: False)
    with pytest.raises(BadInput, match="cannot be written to"):
        check(tmp_path / "film.csv")


@pytest.mark.parametrize("suffix", SUFFIXES)
def test_suffix_decides_and_bytes_repeat(answers: Any, suffix: str, tmp_path: Path) -> None:
    import matplotlib

    first, second = tmp_path / f"first{suffix}", tmp_path / f"second{suffix.upper()}"
    write(answers.prediction(), first)
    with matplotlib.rc_context({"font.size": 23.0, "lines.linewidth": 9.0, "axes.grid": True}):
        write(answers.prediction(), second)
    assert first.read_bytes().startswith(BEGINS[suffix])
    assert first.read_bytes() == second.read_bytes()


@pytest.mark.parametrize("kind", ["sweep", "inversion"])
@pytest.mark.parametrize("suffix", SUFFIXES)
def test_every_answer_has_every_format(answers: Any, kind: str, suffix: str, tmp_path: Path) -> None:
    answer = answers.inversion() if kind == "inversion" else answers.sweep((answers.loading, "1 %", "9 %", 3))
    file = tmp_path / f"answer{suffix}"
    write(answer, file)
    assert file.read_bytes().startswith(BEGINS[suffix])


def test_json_is_one_document(answers: Any, tmp_path: Path) -> None:
    answer = answers.sweep((answers.loading, "1 %", "9 %", 3))
    write(answer, tmp_path / "sweep.json")
    text = (tmp_path / "sweep.json").read_text(encoding="utf-8")
    assert json.loads(text) == answer.to_dict()
    assert text.endswith("}\n")


@pytest.mark.parametrize("trouble", [OSError(errno.ENOSPC, "No space left on device"), KeyboardInterrupt()])
def test_failure_midway_leaves_the_old_file_and_nothing_else(
    trouble: BaseException, answers: Any, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    written: list[int] = []

    def halfway(_: object) -> Any:
        yield [["wavelength [nm]"]] * 50_000  # more than a buffer holds
        written.extend(file.stat().st_size for file in tmp_path.iterdir() if file.name != "film.csv")
        raise trouble

    file = tmp_path / "film.csv"
    file.write_text("old")
    answer = answers.prediction()
    monkeypatch.setattr(comma_separated, "_prediction", halfway)
    with pytest.raises(BadInput if isinstance(trouble, OSError) else KeyboardInterrupt):
        write(answer, file)
    assert written and written[0] > 0
    assert [(path.name, path.read_text()) for path in tmp_path.iterdir()] == [("film.csv", "old")]


def test_existing_file_is_replaced_with_usual_permissions(answers: Any, tmp_path: Path) -> None:
    file, link = tmp_path / "film.json", tmp_path / "latest.json"
    file.write_text("old " * 100_000)
    link.symlink_to(file)
    before = os.umask(0o027)
    try:
        write(answers.prediction(), link)
    finally:
        os.umask(before)
    assert json.loads(file.read_text())["title"] == "Test film"
    assert link.is_symlink()
    assert file.stat().st_mode & 0o777 == 0o640
    assert len(list(tmp_path.iterdir())) == 2


def test_three_varied_numbers_have_no_picture(answers: Any, tmp_path: Path) -> None:
    infinity = "materials.oxide.permittivity.infinity"
    answer = answers.sweep(
        (answers.loading, "1 %", "9 %", 2),
        (answers.plasma, "600 cm^-1", "900 cm^-1", 2),
        (infinity, "3", "5", 2),
    )
    with pytest.raises(BadInput, match=r"--out: .*a plot of 3 varied numbers; one or two; \.csv and \.npz"):
        write(answer, tmp_path / "sweep.png")
    assert not list(tmp_path.iterdir())
    write(answer, tmp_path / "sweep.npz")
    with np.load(tmp_path / "sweep.npz", allow_pickle=False) as held:
        assert held["permittivity"].shape == (2, 2, 2, 31)


def test_matplotlib_waits_for_a_picture() -> None:
    code = "import mixsim.present.files, mixsim.present.plots, sys; print('matplotlib' in sys.modules)"
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert done.stdout.strip() == "False"
