"""Whole processes: `mixsim predict` without a plot against the bare imports. Run by hand; prints ratios."""

from __future__ import annotations

import os
import subprocess
import sys
import time
from pathlib import Path

ROOT = Path(__file__).parents[2]
REPEATS = 15
RECIPE = ROOT / "configs" / "oxide-heat-mirror-film.toml"
COMMANDS = {
    "bare imports (numpy, pydantic, typer)": ["-c", "import numpy, pydantic, typer"],
    "mixsim predict": ["-m", "mixsim", "predict", str(RECIPE)],
    "mixsim predict --json": ["-m", "mixsim", "predict", str(RECIPE), "--json"],
    "import mixsim": ["-c", "import mixsim"],
}


def seconds(arguments: list[str]) -> float:
    # as installed: bytecode is kept, whatever the shell of the developer says
    kept = {name: value for name, value in os.environ.items() if name != "PYTHONDONTWRITEBYTECODE"}
    start = time.perf_counter()
    subprocess.run([sys.executable, *arguments], check=True, capture_output=True, cwd=ROOT, env=kept)
    return time.perf_counter() - start


def main() -> None:
    best = dict.fromkeys(COMMANDS, float("inf"))
    for _ in range(REPEATS):
        for name, arguments in COMMANDS.items():
            best[name] = min(best[name], seconds(arguments))
    bare = next(iter(best.values()))
    for name, elapsed in best.items():
        print(f"{name:40} {1000 * elapsed:7.0f} ms  {elapsed / bare:5.2f}×  (aim: at most 2)")


if __name__ == "__main__":
    main()
