"""The axes of an evaluation: the band of a recipe, and the values that a sweep goes through."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from mixsim.errors import BadInput, Fault
from mixsim.recipe import COMMAND_LINE, Recipe
from mixsim.units import from_unit, spectral_from, spectral_to, to_unit, written_unit

Floats = NDArray[np.float64]
MOST_POINTS = 10_000_000


@dataclass(frozen=True)
class Axis:
    """The frequency axis of an answer.

    Attributes
    ----------
    omega
        Angular frequencies in the order of the band as written [rad/s].
    unit
        Unit of the band as written.
    shown
        The axis in that unit.
    spacing
        "linear" or "log" in that unit.
    """

    omega: Floats
    unit: str
    shown: Floats
    spacing: str


@dataclass(frozen=True)
class Varied:
    """One leaf and the values that it goes through.

    Attributes
    ----------
    path
        Of the leaf.
    values
        In SI.
    unit
        Unit to show them in; empty for bare numbers.
    shown
        The values in that unit.
    spacing
        "linear" or "log" in that unit.
    """

    path: str
    values: Floats
    unit: str
    shown: Floats
    spacing: str = "linear"


def axis_of(recipe: Recipe) -> Axis:
    """The frequency axis that the band of a recipe describes.

    Raises
    ------
    BadInput
        Where the recipe has no band.
    """
    band = recipe.schema.band
    if band is None:
        allowed = 'give [band] with from and to, or values, such as values = ["589.3 nm"]'
        raise BadInput([recipe.fault("band", "no band to evaluate over", allowed)])
    if band.values is not None:
        unit = written_unit(band.values[0])
        omega = np.array([leaf.value for leaf in band.values])
        return Axis(omega, unit, spectral_to(omega, unit), "linear")
    assert band.from_ is not None and band.to is not None
    unit = written_unit(band.from_)
    first, last = (spectral_to(leaf.value, unit) for leaf in (band.from_, band.to))
    spacing = band.spacing or "linear"
    shown = spaced(first, last, band.points or 401, log=spacing == "log")
    omega = spectral_from(shown, unit)
    return Axis(omega, unit, shown, spacing)


def varied(
    recipe: Recipe,
    path: str,
    start: str | float,
    stop: str | float,
    points: int,
    *,
    log: bool = False,
    option: str = "--vary",
) -> Varied:
    """Values for one leaf from one end to the other, ends included, evenly spaced in the unit written.

    Parameters
    ----------
    recipe
        The recipe.
    path
        Of the leaf.
    start, stop
        The ends as they would stand in the recipe.
    points
        How many values.
    log
        Whether they are spaced by a constant ratio.
    option
        Name in messages.

    Raises
    ------
    BadInput
        Where path, ends or number cannot be used.
    """
    first, last = (recipe.read(path, end, option=option) for end in (start, stop))

    def refuse(found: str, allowed: str) -> BadInput:
        return BadInput([Fault(COMMAND_LINE, option, f"{path}: {found}", allowed)])

    if points > MOST_POINTS:
        raise refuse(f"{points} points", f"at most {MOST_POINTS}")
    if points < 2:
        raise refuse(f"{points} points", "at least 2, for both ends are among them")
    if first.value == last.value:
        raise refuse(f"from {first.written} to {last.written}", "the two ends differ")
    unit = written_unit(first) or written_unit(last) or written_unit(recipe.leaves[path])
    if not unit:
        ends = [first.value, last.value]
    else:
        ends = [float(to_unit(end.value, unit, end.dimension)) for end in (first, last)]
    if log and min(ends) <= 0.0:
        raise refuse(f"from {first.written} to {last.written} on a log axis", "both ends are above zero")
    shown = spaced(ends[0], ends[1], points, log=log)
    values: Any = from_unit(shown, unit, first.dimension) if unit else shown
    return Varied(path, np.asarray(values), unit, shown, "log" if log else "linear")


def through(recipe: Recipe, path: str, values: ArrayLike) -> Varied:
    """Given values for one leaf, held to its range.

    Parameters
    ----------
    recipe
        The recipe.
    path
        Of the leaf.
    values
        In SI.

    Raises
    ------
    BadInput
        Where the path is unknown or a value lies outside the range of the leaf.
    """
    here, numbers = recipe.leaf(path, option="vary"), np.asarray(values, dtype=float)
    allowed = recipe.ranges[path]
    if numbers.ndim != 1 or not numbers.size:
        found = f"{path}: values of shape {numbers.shape}"
        raise BadInput([recipe.fault("vary", found, "one list of numbers for each path")])
    for value in numbers.tolist():
        if not allowed.holds(value):
            found = f"{path}: {value:g} is out of range"
            raise BadInput([recipe.fault("vary", found, f"must be {allowed.said()}")])
    unit = written_unit(here)
    shown = np.asarray(to_unit(numbers, unit, here.dimension)) if unit else numbers
    return Varied(path, numbers, unit, shown)


def spaced(start: float, stop: float, points: int, *, log: bool) -> Floats:
    """Points between two ends, both included."""
    return np.geomspace(start, stop, points) if log else np.linspace(start, stop, points)
