"""Audit of a recipe: everything that is wrong with it, nothing computed."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import asdict, dataclass
from pathlib import Path
from typing import Any

from mixsim.analysis.caution import Caution
from mixsim.analysis.suspicion import suspicions
from mixsim.errors import BadInput, Fault
from mixsim.recipe import load


@dataclass(frozen=True)
class Audit:
    """What was found in a recipe.

    Attributes
    ----------
    file
        The recipe.
    faults
        What makes it unusable.
    warnings
        What a careful colleague would ask about.
    numbers
        How many numbers it holds, library materials included.
    """

    file: str
    faults: tuple[Fault, ...]
    warnings: tuple[Caution, ...]
    numbers: int

    @property
    def passed(self) -> bool:
        """Whether it can be used."""
        return not self.faults

    def to_dict(self) -> dict[str, Any]:
        """As JSON holds it."""
        return {
            "file": self.file,
            "passed": self.passed,
            "numbers": self.numbers,
            "faults": [asdict(fault) for fault in self.faults],
            "warnings": [caution.to_dict() for caution in self.warnings],
        }


def audit(path: str | Path, settings: Mapping[str, Any] | None = None) -> Audit:
    """Everything wrong with a recipe, without computing anything.

    Parameters
    ----------
    path
        The recipe.
    settings
        Values to set before, path → text or number.

    Returns
    -------
    audit
        Every fault that one pass can see, and the cautions that need no computing.

    Raises
    ------
    BadInput
        Where there is no such file to audit.
    """
    file = Path(path)
    try:
        recipe = load(file, settings)
    except BadInput as error:
        if not file.is_file():
            raise
        return Audit(str(path), error.faults, (), 0)
    return Audit(str(path), (), suspicions(recipe), len(recipe.leaves))
