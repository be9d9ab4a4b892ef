"""Numbers of a recipe that are looked for: which, in what ranges, and how those are gone through."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from mixsim.errors import BadInput, Fault
from mixsim.recipe import COMMAND_LINE, Recipe
from mixsim.units import read

Floats = NDArray[np.float64]

_WIDE = 50.0  # ratio of the ends from which a range is gone through by ratio


@dataclass(frozen=True)
class Unknown:
    """One leaf to find.

    Attributes
    ----------
    path
        Of the leaf.
    low, high
        Range in which to look [SI].
    """

    path: str
    low: float
    high: float


class Ranges:
    """The ranges of some unknowns, each scaled to 0…1: evenly, or by ratio where it is wide.

    Parameters
    ----------
    unknowns
        Leaves and their ranges.
    """

    def __init__(self, unknowns: Sequence[Unknown]) -> None:
        self.unknowns = tuple(unknowns)
        self._log = [u.low > 0.0 and u.high / u.low > _WIDE for u in unknowns]

    def values(self, t: Floats) -> Floats:
        """Values of the unknowns [SI] at scaled places, shape (..., unknowns)."""
        columns = [
            u.low * (u.high / u.low) ** t[..., i] if log else u.low + (u.high - u.low) * t[..., i]
            for i, (u, log) in enumerate(zip(self.unknowns, self._log, strict=True))
        ]
        return np.stack(columns, axis=-1)

    def places(self, values: Floats) -> Floats:
        """Scaled places of some values [SI], shape (..., unknowns)."""
        columns = [
            np.log(values[..., i] / u.low) / np.log(u.high / u.low)
            if log
            else (values[..., i] - u.low) / (u.high - u.low)
            for i, (u, log) in enumerate(zip(self.unknowns, self._log, strict=True))
        ]
        return np.stack(columns, axis=-1)

    def slopes(self, t: Floats) -> Floats:
        """Derivatives of the values by their scaled places, shape (..., unknowns)."""
        values = self.values(t)
        columns = [
            values[..., i] * np.log(u.high / u.low) if log else np.full(t.shape[:-1], u.high - u.low)
            for i, (u, log) in enumerate(zip(self.unknowns, self._log, strict=True))
        ]
        return np.stack(columns, axis=-1)


def unknowns_of(recipe: Recipe, free: Sequence[Unknown] | None) -> tuple[Unknown, ...]:
    """The unknowns given, else those of the recipe.

    Raises
    ------
    BadInput
        Where there is none, or one stands twice.
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
