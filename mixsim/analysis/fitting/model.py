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
    held
        Numbers that differ from the recipe: path, or `samples.NAME.` and path for those of one sample →
        number, or array along the first axis [SI].

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
        held: Mapping[str, Floats] | None = None,
    ) -> None:
        super().__init__(unknowns)
        self.samples = tuple(samples)
        self.held = dict(held or {})
        observations = [one for sample in self.samples for one in sample.observations]
        self.target = np.concatenate([one.values for one in observations])
        self.std, self.scaled = weighed(observations)
        self._priors = [(i, *u.prior) for i, u in enumerate(self.unknowns) if u.prior is not None]

    @property
    def count(self) -> int:
        """How many numbers speak: readings, and what is known beforehand."""
        return len(self.target) + len(self._priors)

    def holding(self, held: Mapping[str, Floats]) -> FitModel:
        """The same with other numbers of the recipe, by name; an unknown among them is one no more."""
        rest = [unknown for unknown in self.unknowns if unknown.name not in held]
        return FitModel(self.samples, rest, {**self.held, **held})

    def given(self, sample: Sample, values: Floats) -> dict[str, Floats]:
        """Leaves of one sample that differ from its recipe, at values of the unknowns [SI].

        What a sample sets stands: neither a shared unknown nor a shared number takes its place.
        """
        lead, own = values.ndim - 1, f"samples.{sample.name}."
        found = {}
        for name, value in self.held.items():
            path = name.removeprefix(own)
            if not path.startswith("samples.") and (path != name or path not in sample.changed):
                found[path] = _leading(value, lead)
        for i, unknown in enumerate(self.unknowns):
            shared = not unknown.sample and unknown.path not in sample.changed
            if shared or (unknown.sample and unknown.sample == sample.name):
                found[unknown.path] = values[..., i]
        return found

    def predicted(self, t: Floats) -> Floats:
        """What the mixture gives in place of the readings, shape (..., readings)."""
        values = self.values(t) if self.unknowns else np.empty((*t.shape[:-1], 0))
        columns = [sample.predicted(self.given(sample, values)) for sample in self.samples]
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
