"""Shape and orientation of the grains of one constituent as a function of the leaves."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Any, Literal

import numpy as np

from mixsim.mixing import (
    DISC,
    NEEDLE,
    Depolarisation,
    Factors,
    aligned_grains,
    ellipsoid_factors,
    in_plane_grains,
    ordered_grains,
    random_grains,
    ratios_about,
    spheroid_factors,
)
from mixsim.mixture.inputs import Input, Values, paths_of

Kind = Literal["spheroid", "ellipsoid", "needle", "disc"]
Orientation = Literal["random", "aligned", "in-plane", "ordered"]


@dataclass(frozen=True, eq=False)
class Shape:
    """Grains that are not spheres.

    Attributes
    ----------
    kind
        What they are.
    orientation
        How they lie; "ordered" takes an order parameter.
    numbers
        `aspect_ratio`, `aspect_ratio_spread`, `axes.0` to `axes.2` and `order_parameter`, as far as given.
    """

    kind: Kind
    orientation: Orientation
    numbers: Mapping[str, Input]

    @cached_property
    def paths(self) -> frozenset[str]:
        return paths_of(self.numbers.values())

    @property
    def principal(self) -> bool:
        """Whether the mixture has principal axes by them."""
        return self.orientation != "random"

    def __call__(self, x: Values) -> Depolarisation:
        """Depolarisation factors and weights."""
        given = self._given(x)
        pairs: list[tuple[Any, Any]] = []
        for factors, share in _grains(self.kind, given):
            pairs.extend((factor, weight * share) for factor, weight in self._turned(factors, given))
        return tuple(pairs)

    @property
    def axes_apart(self) -> int:
        """How many of the three axes of a grain may differ."""
        return 3 if self.kind == "ellipsoid" else 2

    def axes(self, x: Values) -> tuple[Any, Any, Any]:
        """The three axes of a grain, in no unit; a spheroid's symmetry axis is the third."""
        if self.kind == "ellipsoid":
            first, second, third = (self.numbers[f"axes.{i}"](x) for i in range(3))
            return first, second, third
        return 1.0, 1.0, self.numbers["aspect_ratio"](x)

    def of_axes(self, x: Values, axes: Sequence[Any]) -> Depolarisation:
        """Depolarisation of other ellipsoids that lie as these do."""
        drop = self.principal
        first, second, third = ellipsoid_factors(*(_batch(axis, drop=drop) for axis in axes))
        if self.kind == "spheroid":
            second = first
        return self._turned((first, second, third), self._given(x))

    def _given(self, x: Values) -> Mapping[str, Any]:
        return {name: _batch(number(x), drop=self.principal) for name, number in self.numbers.items()}

    def _turned(self, factors: Factors, given: Mapping[str, Any]) -> Depolarisation:
        if self.orientation == "in-plane" and self.kind != "ellipsoid":
            cross, _, axis = factors
            factors = axis, cross, cross  # the symmetry axis lies in the plane
        return _TURNED[self.orientation](factors, given)


_TURNED: Mapping[Orientation, Callable[[Factors, Mapping[str, Any]], Depolarisation]] = {
    "random": lambda factors, _: random_grains(factors),
    "aligned": lambda factors, _: aligned_grains(factors),
    "in-plane": lambda factors, _: in_plane_grains(factors),
    "ordered": lambda factors, given: ordered_grains(factors, order_parameter=given["order_parameter"]),
}


def _grains(kind: Kind, given: Mapping[str, Any]) -> Iterator[tuple[Factors, float]]:
    """Factors of every kind of grain that the distribution holds, each with its share."""
    if kind == "needle":
        yield NEEDLE, 1.0
    elif kind == "disc":
        yield DISC, 1.0
    elif kind == "ellipsoid":
        yield ellipsoid_factors(*(given[f"axes.{i}"] for i in range(3))), 1.0
    else:
        ratio = given["aspect_ratio"]
        spread = given.get("aspect_ratio_spread")
        ratios = [(ratio, 1.0)] if spread is None else ratios_about(ratio, aspect_ratio_spread=spread)
        for each, share in ratios:
            cross, axis = spheroid_factors(each)
            yield (cross, cross, axis), share


def _batch(number: Any, *, drop: bool) -> Any:
    """A number as the builders of principal axes take it: they put the axes where one of size one stands."""
    array = np.asarray(number)
    return array[..., 0] if drop and array.ndim else array
