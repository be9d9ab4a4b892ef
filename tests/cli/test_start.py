"""What is loaded, and when."""

from __future__ import annotations

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


def test_public_names() -> None:
    assert mixsim.__all__ == [
        "BadInput",
        "MixsimError",
        "Recipe",
        "Refusal",
        "__version__",
        "audit",
        "invert",
        "load",
        "parse",
        "predict",
        "sweep",
    ]
    for name in mixsim.__all__:
        assert getattr(mixsim, name) is not None
    with pytest.raises(AttributeError, match="nothing"):
        _ = mixsim.nothing
    assert set(mixsim.__all__) <= set(dir(mixsim))
