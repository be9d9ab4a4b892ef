"""What an inversion is asked: the readings and the unknowns, from the recipe or in its place."""

from __future__ import annotations

from collections.abc import Sequence

from mixsim.analysis.inversion.answer import Reading, Unknown
from mixsim.errors import BadInput, Fault
from mixsim.recipe import COMMAND_LINE, Recipe
from mixsim.units import Leaf, read

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


def unknowns_of(recipe: Recipe, free: Sequence[Unknown] | None) -> tuple[Unknown, ...]:
    """The unknowns given, else those of the recipe.

    Raises
    ------
    BadInput
        Where there is none, or more than two readings can tell.
    """
    unknowns = list(free or ())
    if not unknowns:
        for path, limits in recipe.schema.unknowns.items():
            low, high = sorted(read(limit, recipe.leaves[path].dimension).value for limit in limits)
            unknowns.append(Unknown(path, low, high))
    if not unknowns:
        allowed = 'give a range, such as "inclusions.ato.volume_fraction" = ["0 %", "30 %"]'
        raise BadInput([recipe.fault("unknowns", "nothing to find", allowed)])
    paths = [unknown.path for unknown in unknowns]
    if len(set(paths)) < len(paths):
        raise BadInput([Fault(COMMAND_LINE, "--free", f"{paths[0]} is freed twice", "once each")])
    if len(paths) > MOST_UNKNOWNS:
        found = f"{len(paths)} unknowns: {', '.join(paths)}"
        raise BadInput([recipe.fault("unknowns", found, "static and high_frequency tell two at most")])
    return tuple(unknowns)


def freed(
    recipe: Recipe, path: str, low: str | float, high: str | float, *, option: str = "--free"
) -> Unknown:
    """An unknown with its range as they would stand in the recipe.

    Raises
    ------
    BadInput
        Where path or range cannot be used.
    """
    ends = sorted(recipe.read(path, end, option=option).value for end in (low, high))
    if ends[0] == ends[1]:
        found = f"{path}: range {low} to {high} is empty"
        raise BadInput([Fault(COMMAND_LINE, option, found, "the two ends differ")])
    return Unknown(path, ends[0], ends[1])
