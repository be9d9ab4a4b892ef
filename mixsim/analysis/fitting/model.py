"""Weighted residuals of all samples as a function of the unknowns, each scaled to 0…1 over its range."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.observed.noise import weighed
from mixsim.analysis.observed.samples import Sample
from mixsim.analysis.unknowns import Ranges, Unknown

Floats = NDArray[np.float64]


class FitModel(Ranges):
    """What the samples' readings lack of the mixture's, in units of their uncertainty.

    Parameters
    ----------
    samples
        Pieces and what was read on them.
    unknowns
        Leaves to find, of one sample or shared.
    others
        Numbers of the recipe that differ from it, path → number or array along the first axis.
    fixed
        Unknowns that are held, name → number or array along the first axis [SI].

    Attributes
    ----------
    target, std
        Every reading and its standard uncertainty, shape (readings,).
    scaled
        Whether that is but a ratio, the size of the noise being left to the residuals.
    """

    def __init__(
        self,
        samples: Sequence[Sample],
        unknowns: Sequence[Unknown],
        others: Mapping[str, Floats] | None = None,
        fixed: Mapping[str, Floats] | None = None,
    ) -> None:
        super().__init__(unknowns)
        self.samples = tuple(samples)
        self.others, self.fixed = dict(others or {}), dict(fixed or {})
        observations = [one for sample in self.samples for one in sample.observations]
        self.target = np.concatenate([one.values for one in observations])
        self.std, self.scaled = weighed(observations)
        self._priors = [(i, *u.prior) for i, u in enumerate(self.unknowns) if u.prior is not None]

    @property
    def count(self) -> int:
        """How many numbers speak: readings, and what is known beforehand."""
        return len(self.target) + len(self._priors)

    def with_others(self, others: Mapping[str, Floats]) -> FitModel:
        """The same with other numbers of the recipe."""
        return FitModel(self.samples, self.unknowns, others, self.fixed)

    def holding(self, index: int, values: Floats) -> FitModel:
        """The same with one unknown held at each of some values [SI], which stand along the first axis."""
        held = self.unknowns[index]
        rest = [unknown for i, unknown in enumerate(self.unknowns) if i != index]
        return FitModel(self.samples, rest, self.others, {**self.fixed, held.name: values})

    def predicted(self, t: Floats) -> Floats:
        """What the mixture gives in place of the readings, shape (..., readings)."""
        values = self.values(t) if self.unknowns else np.empty((*t.shape[:-1], 0))
        lead = values.ndim - 1
        columns = []
        for sample in self.samples:
            given = {path: _leading(other, lead) for path, other in self.others.items()}
            for name, value in self.fixed.items():
                path = name.removeprefix(f"samples.{sample.name}.")
                if not path.startswith("samples."):
                    given[path] = _leading(value, lead)
            given |= {
                u.path: values[..., i]
                for i, u in enumerate(self.unknowns)
                if not u.sample or u.sample == sample.name
            }
            columns.append(sample.predicted(given))
        shape = np.broadcast_shapes(*(column.shape[:-1] for column in columns))
        return np.concatenate([np.broadcast_to(c, (*shape, c.shape[-1])) for c in columns], axis=-1)

    def residual(self, t: Floats) -> Floats:
        """Measured less predicted in standard uncertainties, then what is known beforehand."""
        off = (self.target - self.predicted(t)) / self.std
        if not self._priors:
            return off
        values = self.values(t)
        known = [(value - values[..., i]) / std for i, value, std in self._priors]
        shape = off.shape[:-1]
        rows = [np.broadcast_to(row, shape)[..., np.newaxis] for row in known]
        return np.concatenate([off, *rows], axis=-1)


def _leading(other: Floats, axes: int) -> Floats:
    """A number, or an array along the first of some axes."""
    missing = axes - np.ndim(other)
    return np.reshape(other, (*np.shape(other), *[1] * missing)) if np.ndim(other) and missing > 0 else other
