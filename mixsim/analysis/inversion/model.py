"""The readings as a function of the unknowns, each scaled to 0…1 over its range."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.inversion.answer import Reading
from mixsim.analysis.unknowns import Ranges, Unknown
from mixsim.mixture import HOST, Mixture

Floats = NDArray[np.float64]


class ReadingModel(Ranges):
    """What static and high-frequency readings the mixture gives for some values of the unknowns.

    Parameters
    ----------
    mixture
        The evaluator.
    unknowns
        Leaves and their ranges.
    readings
        Which limits are read.
    others
        Numbers of the recipe that differ from it, such as draws of those with a ±.
    """

    def __init__(
        self,
        mixture: Mixture,
        unknowns: Sequence[Unknown],
        readings: Sequence[Reading],
        others: Mapping[str, Floats] | None = None,
    ) -> None:
        super().__init__(unknowns)
        self.mixture, self.readings = mixture, tuple(readings)
        self.others = dict(others or {})

    def with_others(self, others: Mapping[str, Floats]) -> ReadingModel:
        """The same with other numbers of the recipe."""
        return ReadingModel(self.mixture, self.unknowns, self.readings, others)

    def __call__(self, t: Floats) -> Floats:
        """Readings at scaled places, shape (..., readings); NaN where there is no limit or no room."""
        return self.at(self.values(np.asarray(t, dtype=float)))

    def at(self, values: Floats) -> Floats:
        """Readings at values [SI], shape (..., readings)."""
        lead = values.ndim - 1
        given = {path: _leading(other, lead) for path, other in self.others.items()}
        given |= {u.path: values[..., i] for i, u in enumerate(self.unknowns)}
        limits = self.mixture.limits(given)
        levels = [np.real(getattr(limits, reading.kind)) for reading in self.readings]
        stacked = np.stack(levels, axis=-1)
        if self.mixture.density is None:
            room = self.mixture.composition(given).volume_fractions[HOST]
            stacked[room < -1e-12] = np.nan
        return stacked

    def phase_levels(self, t: Floats, kind: str) -> dict[str, Floats]:
        """Level of each phase on its own at scaled places; infinite where it conducts, by name."""
        values = self.values(t)
        x: dict[str, Any] = dict(self.mixture.defaults)
        x |= {u.path: values[..., i, np.newaxis] for i, u in enumerate(self.unknowns)}
        levels = {}
        for phase in self.mixture.phases:
            if kind == "static":
                rate, level = phase.permittivity.low(x)
                level = np.where(np.asarray(rate) > 0.0, np.inf, np.real(level))
            else:
                level = np.real(phase.permittivity.high(x))
            levels[phase.name] = np.broadcast_to(level, (*t.shape[:-1], 1))[..., 0]
        return levels


def _leading(other: Any, axes: int) -> Any:
    """A number of the recipe, or its draws along the first of some axes."""
    return np.reshape(other, (*np.shape(other), *[1] * (axes - np.ndim(other)))) if np.ndim(other) else other


def grid(unknowns: int, points: int) -> Floats:
    """Scaled places on a regular grid, shape (points, …, unknowns)."""
    axis = np.linspace(0.0, 1.0, points)
    return np.stack(np.meshgrid(*[axis] * unknowns, indexing="ij"), axis=-1)
