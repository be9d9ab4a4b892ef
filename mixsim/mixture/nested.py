"""A material that is a mixture itself: its permittivity, permeability and density as those of its recipe."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from functools import cached_property
from typing import Any, Literal

import numpy as np

from mixsim.mixture.inputs import Values
from mixsim.mixture.mixture import Mixture
from mixsim.mixture.spectra import Here, held

_SHARED = "conditions.temperature"


class Inside(Mapping[str, Any]):
    """The numbers of an inner recipe, which stand in the outer one under a path of their own.

    Parameters
    ----------
    x
        Numbers of the outer recipe.
    under
        Path of the inner one, with a dot at its end.
    warm
        Whether the temperature is that of the outer one.
    """

    def __init__(self, x: Values, under: str, warm: bool) -> None:
        self._x, self._under, self._warm = x, under, warm

    def __getitem__(self, path: str) -> Any:
        return self._x[path if self._warm and path == _SHARED else self._under + path]

    def __iter__(self) -> Iterator[str]:
        return (path.removeprefix(self._under) for path in self._x if path.startswith(self._under))

    def __len__(self) -> int:
        return sum(1 for _ in self)


@dataclass(frozen=True, eq=False)
class Mixed:
    """What a mixture of its own is to the mixture that holds it.

    Attributes
    ----------
    mixture
        The inner one.
    under
        Path of its numbers in the outer recipe, with a dot at its end.
    warm
        Whether its temperature is that of the outer one.
    quantity
        Which of its two responses is meant.
    """

    mixture: Mixture
    under: str
    warm: bool
    quantity: Literal["permittivity", "permeability"] = "permittivity"

    @cached_property
    def paths(self) -> frozenset[str]:
        return frozenset(
            path if self.warm and path == _SHARED else self.under + path for path in self.mixture.defaults
        )

    def inside(self, x: Values) -> Inside:
        """The numbers of the inner recipe."""
        return Inside(x, self.under, self.warm)

    def at(self, x: Values, omega: Any) -> Any:
        return self.mixture.spectrum(self.quantity, self.inside(x), omega)

    def low(self, x: Values) -> tuple[Any, Any]:
        behaviour, _ = self.mixture.ends(self.quantity, self.inside(x))
        insulating = np.asarray(behaviour.rate == 0.0)
        return behaviour.rate, np.where(insulating, behaviour.static, behaviour.plateau)

    def high(self, x: Values) -> Any:
        return self.mixture.ends(self.quantity, self.inside(x))[1]

    def held(self, x: Values, omega: Any, varied: frozenset[str]) -> Here:
        """As `spectra.held`: what depends on nothing that varies is computed now."""
        moving = frozenset(path.removeprefix(self.under) for path in varied)
        spectra = [
            held(getattr(kind, self.quantity), self.inside(x), omega, moving) for kind in self.mixture.kinds
        ]
        return lambda x: self.mixture.mixed([of(self.inside(x)) for of in spectra], self.inside(x))


@dataclass(frozen=True, eq=False)
class InnerDensity:
    """Density of an inner mixture."""

    of: Mixed

    @property
    def paths(self) -> frozenset[str]:
        return self.of.paths

    def __call__(self, x: Values) -> Any:
        return self.of.mixture.density_of(self.of.inside(x))
