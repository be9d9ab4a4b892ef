"""Where a formula takes each of its numbers from: a leaf of the recipe, a constant, or another formula."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from functools import cached_property
from typing import Any, Protocol

Values = Mapping[str, Any]
"""Every leaf by its path: a float, or an array that broadcasts with the frequency axis."""


class Input(Protocol):
    """One number (or array of numbers) as a function of the leaves."""

    @property
    def paths(self) -> frozenset[str]:
        """Leaves that it depends on."""

    def __call__(self, x: Values) -> Any:
        """Its value."""


@dataclass(frozen=True, eq=False)
class Fixed:
    """A number that no leaf holds, such as a default."""

    value: float
    paths: frozenset[str] = frozenset()

    def __call__(self, x: Values) -> Any:
        return self.value


@dataclass(frozen=True, eq=False)
class Leafed:
    """The leaf at a path."""

    path: str

    @property
    def paths(self) -> frozenset[str]:
        return frozenset({self.path})

    def __call__(self, x: Values) -> Any:
        return x[self.path]


@dataclass(frozen=True, eq=False)
class Derived:
    """A pure function of other inputs, by their keywords."""

    function: Callable[..., Any]
    inputs: Mapping[str, Input]

    @cached_property
    def paths(self) -> frozenset[str]:
        return paths_of(self.inputs.values())

    def __call__(self, x: Values) -> Any:
        return self.function(**{name: given(x) for name, given in self.inputs.items()})


def paths_of(parts: Any) -> frozenset[str]:
    """Every leaf that some parts, each with its `paths`, depend on."""
    return frozenset().union(*(part.paths for part in parts))
