"""A region of the complex plane that many discs have in common."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from mixsim.mixing.bounds.lens import Array, Extent


@dataclass(frozen=True, eq=False)
class Discs:
    """One such region for each point of a batch.

    Attributes
    ----------
    centre, radius
        Of the discs, shape batch + (discs,) [-]; NaN where there is no bound.
    within
        A point that lies in all of them [-].
    """

    centre: Array
    radius: Array
    within: Array

    def outside(self, mixture: ArrayLike) -> Array:
        """How far a permittivity lies outside the disc that it misses most [-]; zero within all.

        Parameters
        ----------
        mixture
            Permittivity to judge [-].

        Returns
        -------
        distance
            At most that to the region [-]; NaN without a bound.
        """
        z = np.asarray(mixture, dtype=complex)[..., np.newaxis]
        return np.asarray(np.max(np.maximum(np.abs(z - self.centre) - self.radius, 0.0), axis=-1))

    def extent(self) -> Extent:
        """Upright box around the region, each side that of the disc which reaches least far there."""
        return (
            np.max(self.centre.real - self.radius, axis=-1),
            np.min(self.centre.real + self.radius, axis=-1),
            np.max(self.centre.imag - self.radius, axis=-1),
            np.min(self.centre.imag + self.radius, axis=-1),
        )

    def boundary(self, points: int = 362) -> Array:
        """The closed outline, seen from the point within, shape batch + (points,)."""
        ray = np.exp(2j * np.pi * np.linspace(0.0, 1.0, points))
        off = (self.within[..., np.newaxis] - self.centre)[..., np.newaxis]
        along = np.real(off * np.conj(ray))
        room = self.radius[..., np.newaxis] ** 2 - np.abs(off) ** 2
        reach = np.min(-along + np.sqrt(np.maximum(room + along**2, 0.0)), axis=-2)
        return np.asarray(self.within[..., np.newaxis] + np.maximum(reach, 0.0) * ray)
