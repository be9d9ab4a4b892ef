"""One constituent: what it is made of, how much of it there is, and what of it a rule is given."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any

import numpy as np

from mixsim.composition import Basis
from mixsim.mixture.coats import Coat, CoatedAxis
from mixsim.mixture.inputs import Input, Values
from mixsim.mixture.shapes import Shape
from mixsim.mixture.spectra import Spectrum
from mixsim.mixture.waves import Wave, Waves


@dataclass(frozen=True, eq=False)
class Size:
    """Grains of one size among those of a constituent: their share of its volume, and what they are."""

    share: float
    diameter: Input | None
    permittivity: Spectrum


@dataclass(frozen=True, eq=False)
class Constituent:
    """One phase of the mixture.

    Attributes
    ----------
    name
        "host", the name of the inclusion, or "voids".
    material
        Name of its material.
    permittivity, permeability
        What it is.
    density
        Density, where its material has one.
    basis, amount
        Its loading; None for host and voids.
    shape
        Shape of its grains and how they lie; None for spheres.
    diameter
        Of the sphere of a grain's volume, where it is given.
    shells
        Layers around its grains, from the core outwards.
    thickness
        Of such a layer; None for all that is none.
    sizes
        Its grains by size; none where they are all alike.
    waves
        Which waves in and around its grains count.
    """

    name: str
    material: str
    permittivity: Spectrum
    permeability: Spectrum
    density: Input | None = None
    basis: Basis | None = None
    amount: Input | None = None
    shape: Shape | None = None
    diameter: Input | None = None
    shells: tuple[Constituent, ...] = ()
    thickness: Input | None = None
    sizes: tuple[Size, ...] = ()
    waves: Waves = "none"

    @property
    def plain(self) -> bool:
        """Whether its grains are spheres without a coating and far smaller than any wave."""
        return self.shape is None and not self.shells and self.waves == "none"

    def growths(self, x: Values) -> list[Any]:
        """Volume out to the end of each of its layers over that of the cores, and first 1 for itself."""
        if not self.shells:
            return [np.asarray(1.0)]
        each = [(size.share, self._coat(size).growths(x)) for size in self._by_size]
        grown = [sum(share * layers[i] for share, layers in each) for i in range(len(self.shells))]
        return [np.asarray(1.0), *grown]

    def kinds(self, host: Constituent) -> tuple[Kind, ...]:
        """What a rule is given for it: itself, or the homogeneous grains that it equals.

        One for each size, and for each axis of a coated grain.
        """
        return tuple(kind for size in self._by_size for kind in self._kinds_of(size, host))

    @property
    def _by_size(self) -> tuple[Size, ...]:
        return self.sizes or (Size(1.0, self.diameter, self.permittivity),)

    def _kinds_of(self, size: Size, host: Constituent) -> Iterator[Kind]:
        if self.waves != "none":
            assert size.diameter is not None
            wave = Wave(
                size.permittivity,
                self.permeability,
                host.permittivity,
                host.permeability,
                size.diameter,
                self.waves,
            )
            yield Kind(wave, wave.magnetic, None, size.share)
            return
        if not self.shells:
            yield Kind(size.permittivity, self.permeability, self.shape, size.share)
            return
        coat = self._coat(size)
        for place in range(coat.kinds):
            axis = CoatedAxis(coat, place)
            yield Kind(
                axis.spectrum(size.permittivity, [shell.permittivity for shell in self.shells]),
                axis.spectrum(self.permeability, [shell.permeability for shell in self.shells]),
                None if self.shape is None else axis,
                size.share,
                coat,
            )

    def _coat(self, size: Size) -> Coat:
        assert size.diameter is not None
        thicknesses = tuple(shell.thickness for shell in self.shells if shell.thickness is not None)
        return Coat(size.diameter, thicknesses, self.shape)


@dataclass(frozen=True, eq=False)
class Kind:
    """One phase as a rule is given it.

    Attributes
    ----------
    permittivity, permeability
        Of the homogeneous grain.
    shape
        Its shape and how it lies; None for spheres.
    share
        Of the volume of the cores of its constituent.
    coat
        What makes it larger than the core; None where nothing does.
    """

    permittivity: Spectrum
    permeability: Spectrum
    shape: Shape | CoatedAxis | None
    share: float
    coat: Coat | None = None

    def volume(self, x: Values) -> Any:
        """Its volume, coating included, over that of all cores of its constituent."""
        return self.share if self.coat is None else self.share * self.coat.growths(x)[-1]
