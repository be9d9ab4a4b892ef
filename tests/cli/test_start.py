"""What is loaded, and when."""

from __future__ import annotations

import json
import os
import subprocess
import sys
from pathlib import Path

import pytest

import mixsim

ROOT = Path(__file__).parents[2]


def python(code: str) -> str:
    done = subprocess.run([sys.executable, "-c", code], cwd=ROOT, capture_output=True, text=True, check=True)
    return done.stdout.strip()


def test_import_loads_nothing_heavy() -> None:
    code = (
        "import sys, mixsim; "
        "print([m for m in ('scipy', 'matplotlib', 'typer', 'numpy') if m in sys.modules])"
    )
    assert python(code) == "[]"


def test_predict_loads_neither_scipy_nor_matplotlib() -> None:
    code = (
        "import sys, io, mixsim.cli as c\n"
        "sys.argv = ['mixsim', 'predict', 'configs/ceramic-laminate.toml']\n"
        "out, sys.stdout = sys.stdout, io.StringIO()\n"
        "try: c.main()\n"
        "except SystemExit as end: code = end.code\n"
        "sys.stdout = out\n"
        "print(code, [m for m in ('scipy', 'matplotlib', 'rich', 'tomlkit') if m in sys.modules])"
    )
    assert python(code) == "0 []"


def test_module_and_script_are_the_same_program() -> None:
    done = subprocess.run(
        [sys.executable, "-m", "mixsim", "--version"], capture_output=True, text=True, check=True
    )
    assert done.stdout == f"mixsim {mixsim.__version__}\n"


def test_output_that_nobody_reads_is_no_fault() -> None:
    command = (
        f"{sys.executable} -m mixsim show configs/gold-ruby-glass.toml | head -1; exit ${{PIPESTATUS[0]}}"
    )
    done = subprocess.run(["bash", "-c", command], cwd=ROOT, capture_output=True, text=True, check=False)
    assert done.stderr == ""
    assert done.returncode == 0


@pytest.mark.parametrize("encoding", ["ascii", "latin-1", "cp1252"])
def test_pipes_are_utf8_whatever_the_locale(encoding: str, tmp_path: Path) -> None:
    def run(*arguments: str) -> subprocess.CompletedProcess[bytes]:
        program = [sys.executable, "-m", "mixsim", *arguments]
        return subprocess.run(
            program,
            cwd=ROOT,
            capture_output=True,
            check=False,
            env=os.environ | {"PYTHONIOENCODING": encoding},
        )

    drafted = run("draft", "filled-resin")
    assert (drafted.returncode, drafted.stderr) == (0, b"")
    recipe = tmp_path / "recipe.toml"
    recipe.write_bytes(drafted.stdout)
    assert "± 0.03" in recipe.read_text(encoding="utf-8")
    table = run("predict", str(recipe))
    assert "ε′" in table.stdout.decode("utf-8")
    assert json.loads(run("predict", str(recipe), "--json").stdout.decode("utf-8"))["title"]


@pytest.mark.parametrize(("closed", "status"), [(">&-", 2), ("2>&-", 0)])
def test_closed_streams(closed: str, status: int) -> None:
    command = f"{sys.executable} -m mixsim predict configs/porous-silica-coating.toml --json {closed}"
    done = subprocess.run(["bash", "-c", command], cwd=ROOT, capture_output=True, text=True, check=False)
    assert done.returncode == status
    assert done.stderr == ("mixsim: standard output: it is closed\n" if status else "")
    assert status or json.loads(done.stdout)


def test_public_names() -> None:
    assert mixsim.__all__ == [
        "BadInput",
        "MixsimError",
        "Recipe",
        "Refusal",
        "__version__",
        "audit",
        "fit",
        "invert",
        "judge",
        "load",
        "parse",
        "predict",
        "sweep",
        "weigh",
    ]
    for name in mixsim.__all__:
        assert getattr(mixsim, name) is not None
    with pytest.raises(AttributeError, match="nothing"):
        _ = mixsim.nothing
    assert set(mixsim.__all__) <= set(dir(mixsim))
