"""A measured table beyond its ends, where somebody asks for it: continued as causality lets it be."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property, lru_cache
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from mixsim.dispersion.causal import Completion, complete
from mixsim.dispersion.table import Table, interpolate, interpolate_permeability

FEWEST = 3  # rows of a table that can be continued
_HELD, _LONGEST = 16, 65536  # axes whose values are kept, and how long one may be


@dataclass(frozen=True, eq=False)
class Extension:
    """A measured table and its causal continuation.

    Inside the table its own interpolation holds. Outside stands a spectrum that obeys Kramers–Kronig with the
    data, is passive, and meets their ends. It is one of many: near the ends it can hardly be otherwise, far
    from them it is no more than possible.

    Attributes
    ----------
    table
        What was measured.
    magnetic
        Whether its permeability is meant.
    """

    table: Table
    magnetic: bool = False

    @cached_property
    def completion(self) -> Completion:
        """The spectrum that causality completes, found when it is first needed."""
        if self.magnetic and self.table.permeability is not None:
            return complete(
                self.table.omega, self.table.permeability, minimum=0.0, conducts=False, through_ends=True
            )
        return complete(self.table.omega, self.table.permittivity, through_ends=True)

    def __call__(self, omega: ArrayLike) -> NDArray[Any]:
        """Complex permittivity (or permeability) [-] at any angular frequency above zero [rad/s]."""
        w = np.asarray(omega, dtype=float)
        low, high = float(self.table.omega[0]), float(self.table.omega[-1])
        inside = interpolate_permeability if self.magnetic else interpolate
        out = np.asarray(inside(np.clip(w, low, high), table=self.table), dtype=complex).copy()
        for beyond, end in ((w < low, low), (w > high, high)):
            if np.any(beyond):
                # what the completion misses of the end is carried on: the two meet there
                step = inside(end, table=self.table) - self.completion(end)
                out[beyond] = self._completed(np.ascontiguousarray(w[beyond])) + np.real(step)
        return out[()]

    def _completed(self, w: NDArray[np.float64]) -> NDArray[Any]:
        """The completion beyond the table; every rule asks for it on the same axis."""
        return self.completion(w) if w.size > _LONGEST else self._kept(w.tobytes())

    @cached_property
    def _kept(self) -> Callable[[bytes], NDArray[Any]]:
        completion = self.completion
        return lru_cache(_HELD)(lambda axis: np.asarray(completion(np.frombuffer(axis))))

    def beyond(self, omega: ArrayLike) -> bool:
        """Whether any of some angular frequencies lies outside the table [rad/s]."""
        w = np.asarray(omega, dtype=float)
        low, high = float(self.table.omega[0]), float(self.table.omega[-1])
        return bool(np.any((w < low * (1 - 1e-12)) | (w > high * (1 + 1e-12))))
