"""The one evaluator: numbers of a recipe and a frequency axis to the response of the mixture."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field, replace
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from mixsim.composition import Loading, volume_fractions
from mixsim.errors import Refusal, nearest
from mixsim.mixing import SPHERE, Depolarisation, Rule, rule_named
from mixsim.mixture.blocks import Axes, blocks, numbers
from mixsim.mixture.constituent import Constituent, Kind
from mixsim.mixture.inputs import Input, Leafed, Values
from mixsim.mixture.response import Array, Composition, Limits, Response
from mixsim.mixture.spectra import VACUUM, held
from mixsim.mixture.static import LowFrequency, low_frequency
from mixsim.parameter import Choice, Parameter
from mixsim.units import VACUUM_PERMITTIVITY

HOST, VOIDS = "host", "voids"


@dataclass(frozen=True, eq=False)
class Mixture:
    """The mixture that a recipe describes, as a function of its numbers and a frequency axis.

    Attributes
    ----------
    defaults
        Every leaf of the recipe by its path, in SI.
    host, inclusions
        Constituents.
    voids
        Volume fraction of spheres of vacuum, or None.
    density
        Measured density of the mixture, or None where volumes add.
    rule
        The mixing rule.
    number_densities
        Ions per volume of host, by name of the dopant.
    given
        Parameters of rules, as far as the recipe gives them: numbers, or words.
    """

    defaults: Mapping[str, float]
    host: Constituent
    inclusions: tuple[Constituent, ...]
    voids: Input | None
    density: Input | None
    rule: Rule
    number_densities: Mapping[str, Input]
    given: Mapping[str, Leafed | str] = field(default_factory=dict)

    def response(self, values: Mapping[str, ArrayLike], omega: ArrayLike) -> Response:
        """Permittivity and permeability of the mixture.

        Parameters
        ----------
        values
            Leaves that differ from the recipe, path → number or array of any batch shape [SI]. Their shapes
            broadcast together: open axes (A, 1) and (1, B) make a grid.
        omega
            Angular frequencies, shape (N,) [rad/s].

        Returns
        -------
        response
            Both of shape batch + (N,), or batch + (3, N) where grains are aligned. A permeability of one
            takes no memory and cannot be written to.

        Raises
        ------
        Refusal
            Where a path is unknown, shapes do not fit or a table does not reach.

        Notes
        -----
        Computed in blocks of frequencies and batch that stay in the cache; in each window of frequencies,
        what does not depend on a varied leaf is computed once. Values are not held to the ranges of the
        recipe here: whoever varies them does that.
        """
        axis = _frequencies(omega)
        axes = self._axes(values)
        shape = (*axes.shape, axis.size)
        quantities = ("permittivity", "permeability") if self.magnetic else ("permittivity",)
        answers = {quantity: np.empty(shape, dtype=complex) for quantity in quantities}
        # a loss-free resonance is not finite: the answer says so, not numpy
        with np.errstate(all="ignore"):
            self._fill(axes, axis, answers)
        unity = np.broadcast_to(1.0 + 0.0j, shape)
        return Response(answers["permittivity"], answers.get("permeability", unity))

    def _fill(self, axes: Axes, axis: Array, answers: Mapping[str, Array]) -> None:
        """Evaluate block by block into arrays of the whole answer, by name of the quantity."""
        for window, rows in blocks(axes.batch, axis.size, principal=self.aligned):
            here = axis[window]
            held_here = {
                quantity: [
                    held(getattr(kind, quantity), axes.scalars, here, axes.varied) for kind in self.kinds
                ]
                for quantity in answers
            }
            for row in rows:
                x = axes.values(row)
                place: Any = (*row, ..., window)
                composed = self._composed(x)
                for quantity, spectra in held_here.items():
                    answers[quantity][place] = self._mixed([of(x) for of in spectra], composed)

    def limits(self, values: Mapping[str, ArrayLike]) -> Limits:
        """Exact static and high-frequency limits of the mixture, conductors included.

        Parameters
        ----------
        values
            As in `response`.

        Returns
        -------
        limits
            Of the batch shape, followed by (3,) where grains are aligned.

        Raises
        ------
        Refusal
            Where a path is unknown or shapes do not fit.
        """
        axes = self._axes(values)
        with np.errstate(all="ignore"):
            x = axes.values()
            low, high = self.ends("permittivity", x)
            static_permeability = high_permeability = np.asarray(1.0 + 0.0j)
            if self.magnetic:
                magnetic, high_permeability = self.ends("permeability", x)
                static_permeability = magnetic.static

        def full(limit: Any) -> Array:
            spread = np.broadcast_to(np.asarray(limit), (*axes.shape, 1))
            return spread[..., 0].copy()

        return Limits(
            static=full(low.static),
            high_frequency=full(high),
            conductivity=full(low.rate * VACUUM_PERMITTIVITY),
            plateau=full(low.plateau),
            static_permeability=full(static_permeability),
            high_frequency_permeability=full(high_permeability),
        )

    def composition(self, values: Mapping[str, ArrayLike]) -> Composition:
        """Volume and weight fractions, density, and concentrations of dopants.

        Parameters
        ----------
        values
            As in `response`.

        Returns
        -------
        composition
            Each of the batch shape.

        Raises
        ------
        Refusal
            Where a path is unknown or shapes do not fit.
        """
        axes = self._axes(values)
        x = axes.values()

        def full(number: Any) -> Array:
            spread = np.asarray(number, dtype=float)
            if spread.ndim:
                spread = spread.reshape(spread.shape[: -axes.trail])
            return np.broadcast_to(spread, axes.batch).copy()

        volumes = self._volumes(x)
        solid = [phase for phase in self.phases if phase.name != VOIDS]
        densities = [phase.density(x) if phase.density else None for phase in solid]
        weights = density = None
        if all(known is not None for known in densities):
            masses = {name: volumes[name] * rho for name, rho in zip(volumes, densities, strict=False)}
            total: Any = (
                sum(masses.values(), start=np.asarray(0.0)) if self.density is None else self.density(x)
            )
            if self.voids is not None:
                masses[VOIDS] = 0.0 * total
            with np.errstate(invalid="ignore", divide="ignore"):  # nothing but voids: 0/0
                weights = {name: full(mass / total) for name, mass in masses.items()}
            density = full(total)
        return Composition(
            volume_fractions={name: full(volume) for name, volume in volumes.items()},
            weight_fractions=weights,
            density=density,
            number_densities={name: full(number(x)) for name, number in self.number_densities.items()},
        )

    def spectrum(self, quantity: str, x: Values, omega: Any) -> Any:
        """ε or μ for numbers that broadcast with some angular frequencies [rad/s]: as a part of another."""
        return self.mixed([getattr(kind, quantity).at(x, omega) for kind in self.kinds], x)

    def mixed(self, phases: Sequence[Any], x: Values) -> Any:
        """What the rule makes of the phases that it is given, `kinds`, for some numbers."""
        return self._mixed(phases, self._composed(x))

    def ends(self, quantity: str, x: Values) -> tuple[LowFrequency, Array]:
        """Behaviour of ε or μ as ω → 0, and its limit as ω → ∞, for some numbers."""
        composed = self._composed(x)

        def mix(phases: Sequence[Any]) -> Array:
            return np.asarray(self._mixed(phases, composed), dtype=complex)

        spectra = [getattr(kind, quantity) for kind in self.kinds]
        rates, plateaus = zip(*(spectrum.low(x) for spectrum in spectra), strict=True)
        high = mix([spectrum.high(x) for spectrum in spectra])
        if self.rule.low is not None and len(rates) > 1:
            return LowFrequency(*self.rule.low(rates, plateaus, **composed)), high
        return low_frequency(mix, rates, plateaus), high

    def density_of(self, x: Values) -> Any:
        """Density for some numbers [kg/m³]; NaN where a constituent has none."""
        if self.density is not None:
            return self.density(x)
        volumes = self._volumes(x)
        solid = [phase for phase in self.phases if phase.name != VOIDS]
        each = {phase.name: np.nan if phase.density is None else phase.density(x) for phase in solid}
        return sum(volumes[name] * rho for name, rho in each.items())

    def constituents(self, omega: ArrayLike) -> Mapping[str, Response]:
        """Permittivity and permeability of host and inclusions on their own, at the recipe's numbers.

        Parameters
        ----------
        omega
            Angular frequencies, shape (N,) [rad/s].

        Returns
        -------
        responses
            By name, each of shape (N,).
        """
        axis, x = _frequencies(omega), self.defaults
        with np.errstate(all="ignore"):
            return {
                phase.name: Response(
                    np.asarray(phase.permittivity.at(x, axis)), np.asarray(phase.permeability.at(x, axis))
                )
                for phase in (self.host, *self.inclusions)
            }

    def with_rule(self, name: str) -> Mixture:
        """The same constituents under another rule.

        Raises
        ------
        Refusal
            Where there is no such rule, or it needs a parameter that the recipe does not give.
        """
        rule = rule_named(name)
        if lacking := self.lacking(rule):
            missing = " and ".join(lacking)
            raise Refusal(f"the rule {name} without {missing}", f"give {missing} in [mixing]")
        return replace(self, rule=rule)

    def lacking(self, rule: Rule) -> tuple[str, ...]:
        """Parameters that a rule needs and the recipe does not give."""
        return tuple(
            name
            for name, parameter in rule.parameters.items()
            if self._given(parameter) is None and (parameter.default is None or name in self.given)
        )

    def parameters(self, x: Values) -> dict[str, Any]:
        """What the rule takes of its own, at some values of the leaves."""
        values: dict[str, Any] = {}
        for name, parameter in self.rule.parameters.items():
            given = self._given(parameter)
            known = parameter.default if given is None else given
            values[name] = known(x) if isinstance(known, Leafed) else known
        return values

    def _given(self, parameter: Parameter | Choice) -> Leafed | str | None:
        """What the recipe gives for it; None also for a word that only another rule knows."""
        given = self.given.get(parameter.name)
        if isinstance(parameter, Choice):
            return parameter.meant(given) if isinstance(given, str) else None
        return given if isinstance(given, Leafed) else None

    @cached_property
    def phases(self) -> tuple[Constituent, ...]:
        """All that is made of one material: host, each inclusion and the layers of its grains, voids."""
        grains = (part for grain in self.inclusions for part in (grain, *grain.shells))
        return (self.host, *grains, *self._void)

    @cached_property
    def _void(self) -> tuple[Constituent, ...]:
        return () if self.voids is None else (Constituent(VOIDS, "vacuum", VACUUM, VACUUM),)

    @cached_property
    def kinds(self) -> tuple[Kind, ...]:
        """Phases in the order in which the rule is given them, host first."""
        return tuple(kind for kinds in self._by_part for kind in kinds)

    @cached_property
    def _by_part(self) -> tuple[tuple[Kind, ...], ...]:
        return tuple(part.kinds(self.host) for part in (self.host, *self.inclusions, *self._void))

    @property
    def magnetic(self) -> bool:
        """Whether anything in it has a permeability other than one, eddy currents included."""
        return any(kind.permeability is not VACUUM for kind in self.kinds)

    @property
    def aligned(self) -> bool:
        """Whether the answers have principal axes."""
        return any(grain.shape is not None and grain.shape.principal for grain in self.inclusions)

    def _axes(self, values: Mapping[str, ArrayLike]) -> Axes:
        for path in values:
            if path not in self.defaults:
                raise Refusal(f"unknown path {path!r}", "a path of the recipe", nearest(path, self.defaults))
        return Axes(self.defaults, values, principal=self.aligned)

    def _mixed(self, phases: Sequence[Any], composed: Mapping[str, Any]) -> Any:
        if len(phases) == 1 and self.density is None:
            return phases[0]  # it fills the volume, whatever the rule
        return self.rule.function(phases, **composed)

    def _composed(self, x: Values) -> Mapping[str, Any]:
        """What the rule is told beside the phases: fractions, depolarisations, its own parameters."""
        cores = zip(self._fractions(x), self._by_part, strict=True)
        fractions = tuple(core * kind.volume(x) for core, kinds in cores for kind in kinds)
        shapes: list[Depolarisation] = [
            SPHERE if kind.shape is None else kind.shape(x) for kind in self.kinds
        ]
        return {"fractions": fractions, "depolarisations": shapes, **self.parameters(x)}

    def _volumes(self, x: Values) -> dict[str, Any]:
        """Volume fraction of everything that is made of one material, by name."""
        found = {}
        for part, fraction in zip(
            (self.host, *self.inclusions, *self._void), self._fractions(x), strict=True
        ):
            growths = part.growths(x)
            found[part.name] = fraction
            for shell, inside, outside in zip(part.shells, growths, growths[1:], strict=False):
                found[shell.name] = fraction * (outside - inside)
        return found

    def _fractions(self, x: Values) -> tuple[Any, ...]:
        """Volume fractions of host, inclusions without their layers, and voids."""
        loadings = []
        for grain in self.inclusions:
            assert grain.basis is not None and grain.amount is not None
            density = grain.density(x) if grain.density else None
            loadings.append(Loading(grain.basis, grain.amount(x), density, *_coating(grain, x)))
        fractions = volume_fractions(
            loadings,
            host_density=self.host.density(x) if self.host.density else None,
            voids=0.0 if self.voids is None else self.voids(x),
            mixture_density=None if self.density is None else self.density(x),
        )
        return fractions if self.voids is not None else fractions[:-1]


def _coating(grain: Constituent, x: Values) -> tuple[Any, Any]:
    """Volume of its layers over that of its grains, and their mass per volume of grain, if known."""
    growths = grain.growths(x)
    mass: Any = 0.0
    for shell, inside, outside in zip(grain.shells, growths, growths[1:], strict=False):
        mass = None if mass is None or shell.density is None else mass + (outside - inside) * shell.density(x)
    return growths[-1] - 1.0, mass


def _frequencies(omega: ArrayLike) -> Array:
    axis = numbers("omega", omega)
    if axis.ndim != 1:
        raise Refusal(f"omega of shape {axis.shape}", "one axis of angular frequencies, shape (N,)")
    return axis
