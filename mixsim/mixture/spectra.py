"""Permittivity (or permeability) of one constituent as a function of the leaves and of frequency.

Each kind answers three questions: its value at some frequencies, its behaviour as ω → 0, written
i·rate/ω + plateau, and its limit as ω → ∞. Where a limit is not known it is NaN: an index formula is never
extrapolated to dc in silence.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass
from functools import cached_property
from typing import Any, Protocol, runtime_checkable

import numpy as np

from mixsim.dispersion import IndexModel, Table, Term, interpolate, interpolate_permeability
from mixsim.dispersion.extension import Extension
from mixsim.dispersion.laws import Law
from mixsim.dispersion.thermo_optic import index_of_air, thermo_optic_shift
from mixsim.mixture.inputs import Fixed, Input, Values, paths_of

UNKNOWN = float("nan")

Here = Callable[[Values], Any]
"""A spectrum at some frequencies: what is left of it is a function of the leaves."""


class Spectrum(Protocol):
    """What one constituent is, for ε or for μ."""

    @property
    def paths(self) -> frozenset[str]:
        """Leaves that it depends on."""

    def at(self, x: Values, omega: Any) -> Any:
        """Complex value at angular frequencies [rad/s]."""

    def low(self, x: Values) -> tuple[Any, Any]:
        """Rate [rad/s] and plateau as ω → 0."""

    def high(self, x: Values) -> Any:
        """Limit as ω → ∞."""


@runtime_checkable
class Holding(Protocol):
    """A spectrum that knows itself which of its parts may be computed once."""

    def held(self, x: Values, omega: Any, varied: frozenset[str]) -> Here:
        """As the function of that name."""


@dataclass(frozen=True, eq=False)
class Level:
    """The same at every frequency: vacuum, or a data sheet's pair that is taken to hold all over the band."""

    value: Input

    @property
    def paths(self) -> frozenset[str]:
        return self.value.paths

    def at(self, x: Values, omega: Any) -> Any:
        return np.asarray(self.value(x) + 0.0 * omega, dtype=complex)

    def low(self, x: Values) -> tuple[Any, Any]:
        return 0.0, self.value(x)

    def high(self, x: Values) -> Any:
        return self.value(x)


VACUUM = Level(Fixed(1.0))


@dataclass(frozen=True, eq=False)
class BoundTerm:
    """A registered term and where it takes each canonical parameter from."""

    term: Term
    inputs: Mapping[str, Input]

    @cached_property
    def paths(self) -> frozenset[str]:
        return paths_of(self.inputs.values())

    def at(self, x: Values, omega: Any) -> Any:
        """Contribution at angular frequencies [rad/s]."""
        return self.term.function(omega, **self._parameters(x))

    def low(self, x: Values) -> tuple[Any, Any]:
        """Rate [rad/s] and plateau of the contribution as ω → 0."""
        rate, plateau = self.term.low(**self._parameters(x))
        return rate, plateau

    def _parameters(self, x: Values) -> dict[str, Any]:
        return {name: given(x) for name, given in self.inputs.items()}


@dataclass(frozen=True, eq=False)
class TermSum:
    """A level above all resonances, and terms: their polarisations add."""

    level: Input
    terms: tuple[BoundTerm, ...]

    @cached_property
    def paths(self) -> frozenset[str]:
        return paths_of((self.level, *self.terms))

    def at(self, x: Values, omega: Any) -> Any:
        if not self.terms:
            return Level(self.level).at(x, omega)
        return _sum(self.level(x), (term.at(x, omega) for term in self.terms))

    def low(self, x: Values) -> tuple[Any, Any]:
        return _low_sum((0.0, self.level(x)), self.terms, x)

    def high(self, x: Values) -> Any:
        return self.level(x)


@dataclass(frozen=True, eq=False)
class Doped:
    """A host and the terms of isolated absorbers in it: polarisations add, and take no volume."""

    host: Spectrum
    terms: tuple[BoundTerm, ...]

    @cached_property
    def paths(self) -> frozenset[str]:
        return paths_of((self.host, *self.terms))

    def at(self, x: Values, omega: Any) -> Any:
        return _sum(self.host.at(x, omega), (term.at(x, omega) for term in self.terms))

    def low(self, x: Values) -> tuple[Any, Any]:
        return _low_sum(self.host.low(x), self.terms, x)

    def high(self, x: Values) -> Any:
        return self.host.high(x)


@dataclass(frozen=True, eq=False)
class Index:
    """An index model: ε = n²/μ, with limits only where the material states them or the index is constant."""

    model: IndexModel
    inputs: Mapping[str, Input | tuple[Input, ...]]
    permeability: Spectrum | None
    static: Input | None
    high_frequency: Input | None
    in_air: bool = False
    warming: IndexWarming | None = None

    @cached_property
    def paths(self) -> frozenset[str]:
        lists = [given if isinstance(given, tuple) else (given,) for given in self.inputs.values()]
        stated: list[Any] = [self.static, self.high_frequency, self.permeability, self.warming]
        stated = [given for given in stated if given]
        return paths_of([*(item for items in lists for item in items), *stated])

    def at(self, x: Values, omega: Any) -> Any:
        index = self._index(x, omega)
        square = index * index
        return square if self.permeability is None else square / self.permeability.at(x, omega)

    def low(self, x: Values) -> tuple[Any, Any]:
        if self.static is not None:
            return 0.0, self.static(x)
        if not self.model.constant:
            return 0.0, UNKNOWN
        return 0.0, self._square(x, None if self.permeability is None else self.permeability.low(x)[1])

    def high(self, x: Values) -> Any:
        if self.high_frequency is not None:
            return self.high_frequency(x)
        if not self.model.constant:
            return UNKNOWN
        return self._square(x, None if self.permeability is None else self.permeability.high(x))

    def _square(self, x: Values, permeability: Any) -> Any:
        square = self._index(x, 1.0) ** 2
        return square if permeability is None else square / permeability

    def _index(self, x: Values, omega: Any) -> Any:
        numbers = {
            name: [item(x) for item in given] if isinstance(given, tuple) else given(x)
            for name, given in self.inputs.items()
        }
        if not self.in_air:
            index = np.asarray(self.model.function(omega, **numbers))
        else:  # the wavelength in air is shorter, and so is that in the glass
            air = index_of_air(omega)
            index = np.asarray(self.model.function(omega * air, **numbers)) * air
        return index if self.warming is None else index + self.warming.shift(x, omega, index)


@dataclass(frozen=True, eq=False)
class IndexWarming:
    """How an index changes with temperature.

    Attributes
    ----------
    difference
        Temperature less that of the description [K].
    dn_dt
        Change of the index per kelvin [1/K], or None where the six constants of a glass catalogue say it.
    thermo_optic
        Those, or empty.
    """

    difference: Input
    dn_dt: Input | None = None
    thermo_optic: tuple[Input, ...] = ()

    @cached_property
    def paths(self) -> frozenset[str]:
        return paths_of([self.difference, *self.thermo_optic, *([self.dn_dt] if self.dn_dt else [])])

    def shift(self, x: Values, omega: Any, index: Any) -> Any:
        """What is to be added to the index."""
        step = self.difference(x)
        if self.dn_dt is not None:
            return self.dn_dt(x) * step
        constants = [constant(x) for constant in self.thermo_optic]
        return thermo_optic_shift(omega, index=index, temperature_difference=step, thermo_optic=constants)


@dataclass(frozen=True, eq=False)
class Warmed:
    """A spectrum that grows with temperature by one relative coefficient at every frequency.

    Attributes
    ----------
    base
        At the temperature of the description.
    coefficient
        Relative change per kelvin [1/K].
    difference
        Temperature less that of the description [K].
    """

    base: Spectrum
    coefficient: Input
    difference: Input

    @cached_property
    def paths(self) -> frozenset[str]:
        return paths_of((self.base, self.coefficient, self.difference))

    def factor(self, x: Values) -> Any:
        """1 + α ΔT."""
        return 1.0 + self.coefficient(x) * self.difference(x)

    def at(self, x: Values, omega: Any) -> Any:
        return self.base.at(x, omega) * self.factor(x)

    def low(self, x: Values) -> tuple[Any, Any]:
        rate, plateau = self.base.low(x)
        return rate * self.factor(x), plateau * self.factor(x)

    def high(self, x: Values) -> Any:
        return self.base.high(x) * self.factor(x)


@dataclass(frozen=True, eq=False)
class Measured:
    """A measured table: interpolated inside its range, without limits unless stated.

    Outside it is refused, or continued by its extension where the recipe asks for one.
    """

    table: Table
    static: Input | None = None
    high_frequency: Input | None = None
    magnetic: bool = False
    extension: Extension | None = None

    @cached_property
    def paths(self) -> frozenset[str]:
        return paths_of(given for given in (self.static, self.high_frequency) if given)

    def at(self, x: Values, omega: Any) -> Any:
        if self.extension is not None:
            return self.extension(omega)
        value = interpolate_permeability if self.magnetic else interpolate
        return value(omega, table=self.table)

    def low(self, x: Values) -> tuple[Any, Any]:
        return 0.0, UNKNOWN if self.static is None else self.static(x)

    def high(self, x: Values) -> Any:
        return UNKNOWN if self.high_frequency is None else self.high_frequency(x)


@dataclass(frozen=True, eq=False)
class LocalPlasma:
    """Plasma frequency of an absorber as its host's field lets it appear.

    Notes
    -----
    The virtual cavity (Lorentz field) multiplies ωp² by ((ε′_host(ω₀) + 2)/3)².
    Valid for: dilute absorbers whose band is narrow against the dispersion of the host.
    """

    plasma: Input
    resonance: Input
    host: Spectrum

    @cached_property
    def paths(self) -> frozenset[str]:
        return paths_of((self.plasma, self.resonance, self.host))

    def __call__(self, x: Values) -> Any:
        around = np.real(self.host.at(x, self.resonance(x)))
        return self.plasma(x) * (around + 2.0) / 3.0


def described(spectrum: Spectrum) -> Spectrum:
    """What a material is by its own description, without the dopants and the warmth added to it."""
    while isinstance(spectrum, Doped | Warmed):
        spectrum = spectrum.host if isinstance(spectrum, Doped) else spectrum.base
    return spectrum


@dataclass(frozen=True, eq=False)
class LocalIndex:
    """Refractive index of a host where an absorber in it has its band."""

    resonance: Input
    host: Spectrum

    @cached_property
    def paths(self) -> frozenset[str]:
        return paths_of((self.resonance, self.host))

    def __call__(self, x: Values) -> Any:
        return np.real(np.sqrt(np.asarray(self.host.at(x, self.resonance(x)), dtype=complex)))


@dataclass(frozen=True, eq=False)
class Lawful:
    """A substance whose permittivity is known at every temperature."""

    law: Law
    temperature: Input

    @property
    def paths(self) -> frozenset[str]:
        return self.temperature.paths

    def at(self, x: Values, omega: Any) -> Any:
        return self.law.function(omega, temperature=self.temperature(x))

    def low(self, x: Values) -> tuple[Any, Any]:
        return 0.0, self.law.static(temperature=self.temperature(x))

    def high(self, x: Values) -> Any:
        return self.law.high(temperature=self.temperature(x))


def held(part: Spectrum | BoundTerm, x: Values, omega: Any, varied: frozenset[str]) -> Here:
    """A spectrum at some frequencies as a function of the leaves that vary.

    What depends on none of them is computed now: all of it, or those of its terms.
    """
    if not part.paths & varied:
        known = part.at(x, omega)
        return lambda _: known
    if isinstance(part, Holding):
        return part.held(x, omega, varied)
    if isinstance(part, TermSum) and part.terms:
        start: Here = part.level
    elif isinstance(part, Doped):
        start = held(part.host, x, omega, varied)
    elif isinstance(part, Warmed):
        base = held(part.base, x, omega, varied)
        return lambda x: base(x) * part.factor(x)
    else:
        return lambda x: part.at(x, omega)
    terms = [held(term, x, omega, varied) for term in part.terms]
    return lambda x: _sum(start(x), (term(x) for term in terms))


def _sum(start: Any, terms: Iterable[Any]) -> Any:
    """Sum of polarisations; writes to no array that it was given."""
    first, *others = terms
    total = np.asarray(start + first)
    for term in others:
        if total.ndim and np.broadcast_shapes(total.shape, np.shape(term)) == total.shape:
            total += term  # in the cache, and without another array
        else:
            total = total + term
    return total


def _low_sum(start: tuple[Any, Any], terms: Iterable[BoundTerm], x: Values) -> tuple[Any, Any]:
    """Sum of behaviours as ω → 0."""
    rate, plateau = start
    for term in terms:
        more_rate, more_plateau = term.low(x)
        rate, plateau = rate + more_rate, plateau + more_plateau
    return rate, plateau
