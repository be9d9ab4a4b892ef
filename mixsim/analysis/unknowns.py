"""Numbers of a recipe that are looked for: which, in what ranges, and how those are gone through."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from mixsim.errors import BadInput, Fault
from mixsim.recipe import COMMAND_LINE, Recipe
from mixsim.recipe.leaves import Span
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
    sample
        The one sample that it belongs to, or empty where all share it.
    prior
        What is known of it beforehand, value and standard uncertainty [SI], or None.
    """

    path: str
    low: float
    high: float
    sample: str = ""
    prior: tuple[float, float] | None = None

    @property
    def name(self) -> str:
        """Its path, with the sample that it belongs to in front."""
        return f"samples.{self.sample}.{self.path}" if self.sample else self.path


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
        unknowns += [_of_span(recipe, path, span) for path, span in recipe.schema.unknowns.items()]
    if not unknowns:
        allowed = 'give a range, such as "inclusions.ato.volume_fraction" = ["0 %", "30 %"]'
        raise BadInput([recipe.fault("unknowns", "nothing to find", allowed)])
    paths = [unknown.path for unknown in unknowns]
    if len(set(paths)) < len(paths):
        raise BadInput([Fault(COMMAND_LINE, "--free", f"{paths[0]} is freed twice", "once each")])
    return tuple(unknowns)


def of_samples(recipe: Recipe) -> tuple[Unknown, ...]:
    """The unknowns that single samples of a recipe have for themselves."""
    return tuple(
        _of_span(recipe, path, span, sample.name)
        for sample in recipe.schema.samples
        for path, span in sample.unknowns.items()
    )


def _of_span(recipe: Recipe, path: str, span: Span, sample: str = "") -> Unknown:
    dimension = recipe.leaves[path].dimension
    low, high = sorted(read(end, dimension).value for end in (span.low, span.high))
    known = None if span.prior is None else read(span.prior, dimension)
    prior = (known.value, known.std) if known is not None and known.std else None
    return Unknown(path, low, high, sample, prior)


def freed(
    recipe: Recipe, path: str, low: str | float, high: str | float, *, option: str = "--free"
) -> Unknown:
    """An unknown with its range as they would stand in the recipe.

    Raises
    ------
    BadInput
        Where path or range cannot be used.
    """
    ends = sorted(recipe.read(path, end, option=option, to_find=True).value for end in (low, high))
    if ends[0] == ends[1]:
        found = f"{path}: range {low} to {high} is empty"
        raise BadInput([Fault(COMMAND_LINE, option, found, "the two ends differ")])
    return Unknown(path, ends[0], ends[1])
