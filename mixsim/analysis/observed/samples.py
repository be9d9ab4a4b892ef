"""Samples: the evaluator asked for what was read on each."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.observed.observation import LIMITS, Observation
from mixsim.analysis.uncertainty.inputs import Uncertain
from mixsim.errors import Refusal
from mixsim.mixture import HOST, Mixture
from mixsim.observables import QUANTITIES

Floats = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Sample:
    """One piece: how it is made, and what was read on it.

    Attributes
    ----------
    name
        Of the sample; empty where there is but one.
    mixture
        The evaluator of its recipe.
    observations
        What was read.
    ash_yield
        Mass left of each constituent after burn-off over its mass, path of the leaf or number, by name.
    uncertain
        Numbers that differ on this sample and state a ±, by path.
    changed
        Paths of all that differ on this sample.
    calibrates
        Whether it is one whose loading is known.
    """

    name: str
    mixture: Mixture
    observations: tuple[Observation, ...]
    ash_yield: Mapping[str, str | float]
    uncertain: Mapping[str, Uncertain]
    changed: frozenset[str]
    calibrates: bool

    @cached_property
    def count(self) -> int:
        """How many numbers were read."""
        return sum(len(one.values) for one in self.observations)

    @cached_property
    def omega(self) -> Floats:
        """Every angular frequency at which something was read, ascending [rad/s]."""
        axes = [one.omega for one in self.observations if one.omega is not None]
        return np.unique(np.concatenate(axes)) if axes else np.empty(0)

    @cached_property
    def _places(self) -> list[NDArray[np.intp] | None]:
        return [
            None if one.omega is None else np.searchsorted(self.omega, one.omega) for one in self.observations
        ]

    def predicted(self, given: Mapping[str, Any]) -> Floats:
        """What the mixture gives in place of the readings.

        Parameters
        ----------
        given
            Leaves that differ from the recipe of the sample, path → number or array of one batch shape [SI].

        Returns
        -------
        predicted
            Batch shape + (count,); NaN where there is no such level, or no room for the host.
        """
        shape = np.broadcast_shapes(*(np.shape(value) for value in given.values()))
        kinds = {one.quantity for one in self.observations}
        response = self.mixture.response(given, self.omega) if self.omega.size else None
        limits = self.mixture.limits(given) if kinds & set(LIMITS) else None
        composition = self.mixture.composition(given)
        columns = []
        for one, places in zip(self.observations, self._places, strict=True):
            if one.quantity in LIMITS:
                assert limits is not None
                columns.append(np.real(getattr(limits, one.quantity))[..., np.newaxis])
            elif one.quantity == "density":
                assert composition.density is not None
                columns.append(composition.density[..., np.newaxis])
            elif one.quantity == "ash":
                columns.append(self._ash(given, composition.weight_fractions)[..., np.newaxis])
            else:
                assert response is not None and places is not None and one.omega is not None
                e, m = response.permittivity[..., places], response.permeability[..., places]
                columns.append(np.real(QUANTITIES[one.quantity].function(one.omega, e, m)))
        out = np.concatenate([np.broadcast_to(c, (*shape, c.shape[-1])) for c in columns], axis=-1)
        if self.mixture.density is None:
            room = composition.volume_fractions[HOST]
            out[np.broadcast_to(room, shape) < -1e-12] = np.nan
        return out

    def _ash(self, given: Mapping[str, Any], weights: Mapping[str, Floats] | None) -> Floats:
        if weights is None:
            raise Refusal("ash without densities", "every constituent needs its density")
        total: Any = 0.0
        for name, weight in weights.items():
            held = self.ash_yield.get(name, 0.0)
            share = held if isinstance(held, float) else given.get(held, self.mixture.defaults[held])
            total = total + weight * share
        return np.asarray(total, dtype=float)
