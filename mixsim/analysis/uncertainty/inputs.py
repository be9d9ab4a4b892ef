"""Numbers with their doubt: where they come from, and draws of them."""

from __future__ import annotations

import math
from collections.abc import Collection, Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from mixsim.errors import Refusal
from mixsim.recipe import Recipe
from mixsim.recipe.agreement import of_mixture

Floats = NDArray[np.float64]
Correlation = Mapping[tuple[str, str], float]
"""Correlation coefficients by pairs of names; a pair that is not named is independent."""

_REACH = math.sqrt(3.0)  # half-width of a rectangular distribution over its standard deviation


@dataclass(frozen=True)
class Uncertain:
    """One number with its doubt.

    Attributes
    ----------
    value
        Best estimate.
    std
        Standard uncertainty, in the same unit.
    rectangular
        Whether it is known to lie within limits, none of its values likelier than another; else it is normal.
    minimum, maximum
        What it cannot lie outside of, whatever its uncertainty.
    """

    value: float
    std: float
    rectangular: bool = False
    minimum: float = -math.inf
    maximum: float = math.inf

    def moved(self, sides: Floats) -> Floats:
        """Values so many standard uncertainties away, held to what it can be."""
        return np.clip(self.value + self.std * sides, self.minimum, self.maximum)


def uncertain_leaves(recipe: Recipe, without: Collection[str] = ()) -> dict[str, Uncertain]:
    """Numbers of a recipe's mixture for which it states a ±, by path [SI].

    Parameters
    ----------
    recipe
        A checked recipe.
    without
        Paths to leave out, such as unknowns.

    Returns
    -------
    inputs
        Each with its distribution as written and the range that the schema allows.
    """
    found = {}
    for path, leaf in recipe.leaves.items():
        if not leaf.std or path in without or not of_mixture(path):
            continue
        allowed = recipe.ranges[path]
        least = float(np.nextafter(allowed.minimum, np.inf)) if allowed.exclusive else allowed.minimum
        found[path] = Uncertain(leaf.value, leaf.std, leaf.rectangular, least, allowed.maximum)
    return found


def draw(
    inputs: Mapping[str, Uncertain],
    count: int,
    random: np.random.Generator,
    correlation: Correlation | None = None,
) -> dict[str, Floats]:
    """Random values of some numbers.

    Parameters
    ----------
    inputs
        Numbers by name.
    count
        How many sets of them.
    random
        Where chance comes from.
    correlation
        Correlation coefficients by pairs of names.

    Returns
    -------
    values
        By name, each of shape (count,).

    Raises
    ------
    Refusal
        Where the correlations contradict each other.

    Notes
    -----
    Normal numbers with the correlations, each turned by its own distribution function into what it should be:
    rectangular between its limits, or normal, cut where the number cannot lie. Correlation coefficients are
    those of the normal numbers: exact for normal inputs, a few percent low for rectangular ones.

    References
    ----------
    JCGM 101:2008, 6.4.

    Examples
    --------
    >>> random = np.random.default_rng(1)
    >>> values = draw({"x": Uncertain(5.0, 1.0, rectangular=True)}, 10_000, random)["x"]
    >>> print(f"{values.min():.2f} {values.max():.2f} {values.std():.2f}")
    3.27 6.73 1.00
    """
    from scipy.special import ndtr, ndtri

    names = list(inputs)
    normal = random.standard_normal((len(names), count))
    if correlation:
        normal = _root(names, correlation) @ normal
    values = {}
    for name, sides in zip(names, normal, strict=True):
        number = inputs[name]
        if number.rectangular:
            values[name] = np.clip(
                number.value + number.std * _REACH * (2.0 * ndtr(sides) - 1.0), number.minimum, number.maximum
            )
            continue
        if number.std > 0.0:
            low, high = ((end - number.value) / number.std for end in (number.minimum, number.maximum))
            if low > -8.0 or high < 8.0:
                shares = ndtr([low, high])
                sides = np.clip(ndtri(shares[0] + (shares[1] - shares[0]) * ndtr(sides)), low, high)
        values[name] = number.moved(sides)
    return values


def matrix_of(names: Collection[str], correlation: Correlation) -> Floats:
    """Correlation matrix of some names in their order; a name that is not among them is refused."""
    places = {name: place for place, name in enumerate(names)}
    matrix = np.eye(len(places))
    for (first, second), value in correlation.items():
        for name in (first, second):
            if name not in places:
                raise Refusal(f"a correlation of {name!r}, which has no ±", f"one of {', '.join(places)}")
        matrix[places[first], places[second]] = matrix[places[second], places[first]] = value
    return matrix


def _root(names: Collection[str], correlation: Correlation) -> Floats:
    """Square root of the correlation matrix, one that stands full correlation."""
    matrix = matrix_of(names, correlation)
    levels, axes = np.linalg.eigh(matrix)
    if levels[0] < -1e-9:
        raise Refusal("correlations that contradict each other", "coefficients that can hold together")
    return np.asarray(axes * np.sqrt(np.clip(levels, 0.0, None)))
