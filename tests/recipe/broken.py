"""A sound recipe, changes that break it, and what each must draw: one message, at its place."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import pytest

from mixsim.errors import BadInput, Fault
from mixsim.recipe import parse

SOUND = """
title = "sound"

[band]
from = "400 nm"
to = "800 nm"

[host]
material = "matrix"

[inclusions.grain]
material = "filler"
volume_fraction = "10 %"

[dopants.ion]
number_density = "1e19 cm^-3"
terms.red = { model = "lorentz", strength = 1e-3, resonance = "2.05 eV", damping = "0.28 eV" }

[voids]
volume_fraction = "1 %"

[mixing]
rule = "maxwell-garnett"

[materials.matrix]
density = "1.2 g/cm^3"
permittivity.infinity = 2.25

[materials.filler]
density = "4.0 g/cm^3"
permittivity.infinity = 4.0
permittivity.terms.free = { model = "drude", plasma = "1.5 eV", damping = "0.1 eV" }
"""
VOIDS = '[voids]\nvolume_fraction = "1 %"\n'
LOADING = 'volume_fraction = "10 %"'
CONCENTRATION = 'number_density = "1e19 cm^-3"'
RED_TERM = 'terms.red = { model = "lorentz", strength = 1e-3, resonance = "2.05 eV", damping = "0.28 eV" }'
HOST_LEVEL = "permittivity.infinity = 2.25"
GRAIN, RED = "inclusions.grain", "dopants.ion.terms.red"
LEVEL, FREE = "materials.matrix.permittivity.infinity", "materials.filler.permittivity.terms.free"


@dataclass(frozen=True)
class Broken:
    """Changes to the sound recipe, and the one fault that they make.

    `at` stands in the line to which the message must point; None where it can point to none.
    """

    changes: Mapping[str, str]
    path: str
    found: str
    allowed: str
    suggestion: str | None
    at: str | None

    @property
    def text(self) -> str:
        text = SOUND
        for old, new in self.changes.items():
            assert old in text
            text = text.replace(old, new, 1) if old else text + new
        return text


def swap(
    old: str,
    new: str,
    path: str,
    found: str,
    allowed: str,
    suggestion: str | None = None,
    at: str | None = "",
) -> Broken:
    """Something else in the place of a text; the message points to the last line of it."""
    return Broken({old: new}, path, found, allowed, suggestion, new.splitlines()[-1] if at == "" else at)


def add(
    new: str, path: str, found: str, allowed: str, suggestion: str | None = None, at: str | None = ""
) -> Broken:
    """Something more at the end of the recipe."""
    return swap("", new, path, found, allowed, suggestion, at)


def faults_of(text: str, settings: Mapping[str, object] | None = None) -> tuple[Fault, ...]:
    with pytest.raises(BadInput) as refused:
        parse(text, file="job.toml", settings=settings)
    return refused.value.faults


def check(case: Broken) -> None:
    """One message, in one line, with file, line, path, what was found, what is allowed and the suggestion."""
    faults = faults_of(case.text)
    assert len(faults) == 1, [str(fault) for fault in faults]
    (fault,) = faults
    assert (fault.file, fault.path) == ("job.toml", case.path)
    assert case.found in fault.found
    assert fault.allowed
    assert case.allowed in fault.allowed
    assert fault.suggestion == case.suggestion
    place = "job.toml"
    if case.at is None:
        assert fault.line is None
    else:
        lines = [n for n, line in enumerate(case.text.splitlines(), start=1) if case.at in line]
        assert len(lines) == 1, "the case must say one line"
        assert fault.line == lines[0], str(fault)
        place = f"job.toml:{fault.line}"
    hint = f" (did you mean {case.suggestion!r}?)" if case.suggestion else ""
    assert str(fault) == f"{place}: {case.path}: {fault.found}; {fault.allowed}{hint}"
    assert "\n" not in str(fault)
    for foreign in ("Input", "input should", "True", "False", "None", "validation", "dict"):
        assert foreign not in str(fault)
