"""A region of the complex plane between two circular arcs that share their ends."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[Any]
Extent = tuple[Array, Array, Array, Array]
"""Least and greatest real part, least and greatest imaginary part."""


@dataclass(frozen=True, eq=False)
class Lens:
    """One lens for each point of a batch.

    Attributes
    ----------
    first, second
        The two ends that the arcs share [-].
    bends
        For each arc the direction of (z − first)/(second − z), a number of modulus one, which is the same all
        along it: 1 is the straight line.

    Notes
    -----
    By the inscribed angle the argument ψ of (z − first)/(second − z) is constant along a circular arc, zero
    on the chord. A lens is what lies between two such angles, which stays exact where it has no width.
    NaN where there is no bound.
    """

    first: Array
    second: Array
    bends: tuple[Array, Array]

    def arcs(self, points: int = 181) -> tuple[Array, Array]:
        """Both arcs from the first end to the second, shape batch + (points,).

        Examples
        --------
        >>> half = Lens(np.array(-1.0), np.array(1.0), (np.array(1.0), np.array(1j)))
        >>> half.arcs(3)[1].round(12) + 0.0
        array([-1.+0.j,  0.+1.j,  1.+0.j])
        """
        share = np.linspace(0.0, 1.0, points)
        first, second = (np.asarray(end)[..., np.newaxis] for end in (self.first, self.second))

        def along(bend: Array) -> Array:
            weight = share * np.asarray(bend)[..., np.newaxis]
            return np.asarray(((1.0 - share) * first + weight * second) / (1.0 - share + weight))

        with np.errstate(invalid="ignore"):  # no bound: NaN
            return along(self.bends[0]), along(self.bends[1])

    def boundary(self, points: int = 181) -> Array:
        """The closed outline, shape batch + (2·points,)."""
        one, other = self.arcs(points)
        return np.concatenate([one, other[..., ::-1]], axis=-1)

    def outside(self, mixture: ArrayLike) -> Array:
        """How far a permittivity lies outside [-]; zero within.

        Parameters
        ----------
        mixture
            Permittivity to judge [-].

        Returns
        -------
        distance
            To first order that to the nearest arc, at most that to the nearest end [-]; NaN without a bound.
        """
        z = np.asarray(mixture, dtype=complex)
        below, above = z - self.first, self.second - z
        with np.errstate(divide="ignore", invalid="ignore"):
            angle = np.angle(below * np.conj(above))
            ends = np.sort(np.stack(np.broadcast_arrays(*(np.angle(bend) for bend in self.bends))), axis=0)
            within = (angle >= ends[0]) & (angle <= ends[1])
            turn = np.minimum((angle - ends[1]) % (2 * np.pi), (ends[0] - angle) % (2 * np.pi))
            across = turn * np.abs(below) * np.abs(above) / np.abs(self.second - self.first)
        nearest = np.minimum(np.abs(below), np.abs(above))
        across = np.where(np.isnan(across) & ~np.isnan(nearest), nearest, across)
        return np.where(within, 0.0, np.minimum(across, nearest))

    def extent(self) -> Extent:
        """Smallest upright box around the lens, exactly."""
        first, second = np.asarray(self.first, dtype=complex), np.asarray(self.second, dtype=complex)
        with np.errstate(all="ignore"):
            reaches = [self._reach(towards, first, second) for towards in (-1.0, 1.0, -1j, 1j)]
        return -reaches[0], reaches[1], -reaches[2], reaches[3]

    def _reach(self, towards: complex, first: Array, second: Array) -> Array:
        """Greatest component in a direction: of an end, or of an arc where it is parallel to the side."""

        def along(z: Array) -> Array:
            return np.asarray(np.real(z * np.conj(towards)))

        most = np.maximum(along(first), along(second))
        half = 0.5 * (second - first)
        for bend in self.bends:
            angle = np.angle(bend)
            centre = 0.5 * (first + second) - 1j * half / np.tan(angle)
            touched = centre + towards * np.abs(half / np.sin(angle))
            # the rest of the circle carries the opposite angle
            here = np.real((touched - first) * np.conj(second - touched) * np.conj(bend)) > 0.0
            most = np.where(here, np.fmax(most, along(touched)), most)
        return most
