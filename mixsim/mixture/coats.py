"""Coated grains as a function of the leaves: each axis of one equals a homogeneous grain of that size."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np

from mixsim.mixing import (
    SPHERE,
    Depolarisation,
    coated_grain,
    confocal_axes,
    growth_of_ellipsoid,
    growth_of_sphere,
)
from mixsim.mixture.inputs import Input, Values, paths_of
from mixsim.mixture.shapes import Shape
from mixsim.mixture.spectra import VACUUM, Here, Spectrum, held
from mixsim.mixture.static import low_frequency


@dataclass(frozen=True, eq=False)
class Coat:
    """Sizes of a grain and of the layers around it.

    Attributes
    ----------
    diameter
        Of the sphere of the core's volume.
    thicknesses
        Of the layers, from the core outwards.
    shape
        Shape of the core and how it lies; None for spheres.
    """

    diameter: Input
    thicknesses: tuple[Input, ...]
    shape: Shape | None

    @property
    def kinds(self) -> int:
        """How many homogeneous grains one coated grain makes: one for each way in which an axis lies."""
        if self.shape is None:
            return 1
        return {"aligned": 1, "in-plane": 2, "ordered": 2}.get(self.shape.orientation, self.shape.axes_apart)

    @cached_property
    def paths(self) -> frozenset[str]:
        shape = () if self.shape is None else (self.shape,)
        return paths_of((self.diameter, *self.thicknesses, *shape))

    def growths(self, x: Values) -> list[Any]:
        """Volume out to the end of each layer over that of the core."""
        diameter, total, grown = self.diameter(x), np.asarray(0.0), []
        axes = None if self.shape is None else self.shape.axes(x)
        for thickness in self.thicknesses:
            total = total + thickness(x)
            if axes is None:
                grown.append(growth_of_sphere(diameter, thickness=total))
            else:
                first, second, third = axes
                sizes = {"first": first, "second": second, "third": third}
                grown.append(growth_of_ellipsoid(diameter, thickness=total, **sizes))
        return grown

    def surfaces(self, x: Values) -> list[Depolarisation]:
        """Depolarisation of the core and of each surface outwards, all confocal."""
        if self.shape is None:
            return [SPHERE] * (1 + len(self.thicknesses))
        first, second, third = self.shape.axes(x)
        found = [self.shape.of_axes(x, (first, second, third))]
        for growth in self.growths(x):
            outer = confocal_axes(growth, first=first, second=second, third=third)
            found.append(self.shape.of_axes(x, outer))
        return found


@dataclass(frozen=True, eq=False)
class CoatedAxis:
    """One axis of a coated grain: depolarisation of the outer surface, and the equivalent spectra."""

    coat: Coat
    place: int

    def __call__(self, x: Values) -> Depolarisation:
        return (self.coat.surfaces(x)[-1][self.place],)

    def spectrum(self, core: Spectrum, shells: Sequence[Spectrum]) -> Spectrum:
        """ε or μ of the homogeneous grain along this axis."""
        if core is VACUUM and all(shell is VACUUM for shell in shells):
            return VACUUM
        return Coated(core, tuple(shells), self.coat, self.place)


@dataclass(frozen=True, eq=False)
class Coated:
    """ε or μ, along one axis, of the homogeneous grain that a coated one equals."""

    core: Spectrum
    shells: tuple[Spectrum, ...]
    coat: Coat
    place: int

    @cached_property
    def paths(self) -> frozenset[str]:
        return paths_of((self.core, *self.shells, self.coat))

    def at(self, x: Values, omega: Any) -> Any:
        return self._whole(x, [part.at(x, omega) for part in (self.core, *self.shells)])

    def low(self, x: Values) -> tuple[Any, Any]:
        rates, plateaus = zip(*(part.low(x) for part in (self.core, *self.shells)), strict=True)
        low = low_frequency(lambda parts: self._whole(x, parts), rates, plateaus)
        level = np.where(np.isnan(low.static), low.plateau, low.static)
        unlossy = level.real if np.all(level.imag == 0.0) else level
        return np.where(np.isnan(low.rate), 0.0, low.rate), unlossy

    def high(self, x: Values) -> Any:
        return self._whole(x, [part.high(x) for part in (self.core, *self.shells)])

    def held(self, x: Values, omega: Any, varied: frozenset[str]) -> Here:
        """As a function of the leaves that vary; layers that do not depend on them are computed now."""
        parts = [held(part, x, omega, varied) for part in (self.core, *self.shells)]
        return lambda x: self._whole(x, [part(x) for part in parts])

    def _whole(self, x: Values, parts: Sequence[Any]) -> Any:
        grain, inside = parts[0], np.asarray(1.0)
        factors = [surface[self.place][0] for surface in self.coat.surfaces(x)]
        layers = zip(parts[1:], self.coat.growths(x), factors[:-1], factors[1:], strict=True)
        for shell, growth, core_factor, outer_factor in layers:
            fraction = inside / growth
            grain = coated_grain(
                grain, shell, fraction=fraction, core_factor=core_factor, outer_factor=outer_factor
            )
            inside = growth
        return grain
