"""The readings that an inversion is asked about, from the recipe or in its place."""

from __future__ import annotations

from collections.abc import Sequence

from mixsim.analysis.inversion.answer import Reading
from mixsim.analysis.unknowns import Unknown
from mixsim.errors import BadInput, Fault
from mixsim.recipe import COMMAND_LINE, Recipe
from mixsim.units import Leaf

MOST_UNKNOWNS = 2
KINDS = ("static", "high_frequency")


def readings_of(recipe: Recipe, *, static: Leaf | None, high_frequency: Leaf | None) -> tuple[Reading, ...]:
    """The readings given, else those of the recipe.

    Raises
    ------
    BadInput
        Where there is none, or the static one lies below the other.
    """
    measured = recipe.schema.measured
    given: dict[str, Leaf | None] = {"static": static, "high_frequency": high_frequency}
    if measured is not None:
        for kind in KINDS:
            given[kind] = given[kind] or getattr(measured, kind)
    found = {kind: leaf for kind, leaf in given.items() if leaf is not None}
    if not found:
        allowed = 'give static or high_frequency, such as static = "2.70 ± 0.01"'
        raise BadInput([recipe.fault("measured", "no reading to invert", allowed)])
    for kind, leaf in found.items():
        if leaf.value <= 0.0:
            raise BadInput([_fault(recipe, kind, given, f"{leaf.written!r}", "a reading is above zero")])
        if leaf.std == 0.0:
            allowed = "leave ± out where it is not known"
            raise BadInput([_fault(recipe, kind, given, f"{leaf.written!r} has no uncertainty", allowed)])
    if len(found) == 2 and found["static"].value < found["high_frequency"].value:
        said = (
            f"static {found['static'].written!r} is below high_frequency {found['high_frequency'].written!r}"
        )
        allowed = "a passive medium has its static level at or above the other"
        raise BadInput([_fault(recipe, "static", given, said, allowed)])
    return tuple(Reading(kind, leaf.value, leaf.std, leaf.written) for kind, leaf in found.items())


def _fault(recipe: Recipe, kind: str, given: dict[str, Leaf | None], found: str, allowed: str) -> Fault:
    measured = recipe.schema.measured
    in_recipe = measured is not None and getattr(measured, kind) is given[kind]
    if in_recipe:
        return recipe.fault(f"measured.{kind}", found, allowed)
    return Fault(COMMAND_LINE, "--" + kind.replace("_", "-"), found, allowed)


def few_enough(recipe: Recipe, unknowns: Sequence[Unknown]) -> None:
    """Refuse more unknowns than two readings can tell."""
    if len(unknowns) > MOST_UNKNOWNS:
        found = f"{len(unknowns)} unknowns: {', '.join(unknown.path for unknown in unknowns)}"
        raise BadInput([recipe.fault("unknowns", found, "static and high_frequency tell two at most")])
