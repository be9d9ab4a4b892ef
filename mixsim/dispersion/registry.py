"""What a register says of a term: its pure function, its parameters, and the words that may give them."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass, field
from typing import Any

from mixsim.errors import Refusal, nearest
from mixsim.parameter import Parameter


@dataclass(frozen=True, slots=True)
class Route:
    """One way to give a canonical parameter.

    Attributes
    ----------
    key
        Parameter whose presence chooses this way.
    function
        Pure function of `needs`, by their names; None where `key` is the canonical parameter itself.
    also
        Other parameters that it reads; they may have defaults, and may be read elsewhere too.
    """

    key: str
    function: Callable[..., Any] | None = None
    also: tuple[str, ...] = ()

    @property
    def needs(self) -> tuple[str, ...]:
        """Every parameter that this way reads."""
        return (self.key, *self.also)


@dataclass(frozen=True, slots=True)
class Term:
    """One registered term.

    Attributes
    ----------
    name
        Word in the recipe.
    function
        ``function(omega, **canonical parameters)``: contribution to ε or μ.
    low
        ``low(**canonical parameters)`` as (rate, plateau): value → i·rate/ω + plateau as ω → 0.
    canonical
        For each parameter of these two, the ways to give it.
    parameters
        Every parameter that a recipe may write, by name.
    summary, equation, source
        What a person wants to know of it, as text.
    of
        Which of ε and μ physics allows it for.
    in_grains
        Canonical parameters that the size of a grain changes, and how: from themselves, from the `diameter`
        of the grain, and from parameters that only grains need. Such a route is taken where its key is given.
    """

    name: str
    function: Callable[..., Any]
    low: Callable[..., tuple[Any, Any]]
    canonical: Mapping[str, tuple[Route, ...]]
    parameters: Mapping[str, Parameter]
    summary: str
    equation: str
    source: str
    of: tuple[str, ...] = ("permittivity", "permeability")
    in_grains: Mapping[str, Route] = field(default_factory=dict)

    def resolve(self, given: Iterable[str]) -> Mapping[str, Route]:
        """The way in which each canonical parameter is given.

        Parameters
        ----------
        given
            Names of the parameters that are given.

        Returns
        -------
        routes
            One way for each canonical parameter, in the order of `canonical`.

        Raises
        ------
        Refusal
            Where a parameter is unknown, missing, given in two ways, or used by none of the ways chosen.

        Examples
        --------
        >>> from mixsim.dispersion import TERMS
        >>> routes = TERMS["lorentz"].resolve({"step", "resonance", "damping"})
        >>> routes["plasma"].key, routes["plasma"].function.__name__
        ('step', 'plasma_from_step')
        """
        names = set(given)
        for name in sorted(names - set(self.parameters)):
            allowed = f"a {self.name} term takes {', '.join(self.parameters)}"
            raise Refusal(f"unknown parameter {name!r}", allowed, nearest(name, self.parameters))
        chosen = {canonical: self._chosen(canonical, names) for canonical in self.canonical}
        for route in chosen.values():
            missing = [name for name in self._required(route) if name not in names]
            if missing:
                absent = " and ".join(missing)
                raise Refusal(
                    f"{route.key} is given without {absent}", f"{route.key} needs {absent} beside it"
                )
        used = {name for route in chosen.values() for name in route.needs}
        for route in self.in_grains.values():
            beside = [name for name in route.needs if name in self.parameters and name not in self.canonical]
            if route.key in names:
                if lacking := " and ".join(name for name in beside if name not in names):
                    raise Refusal(f"{route.key} is given without {lacking}", f"it needs {lacking} beside it")
                used.update(beside)
        for name in self.parameters:
            if name in names - used:
                raise Refusal(
                    f"{name} has no part in a {self.name} term given by "
                    + ", ".join(dict.fromkeys(route.key for route in chosen.values())),
                    f"leave it out, or give it with {' or '.join(self._companions(name))}",
                )
        return chosen

    def leaves_open(self, canonical: str, given: Iterable[str]) -> bool:
        """Whether a term has a canonical parameter and is not told it, in whichever description.

        Examples
        --------
        >>> from mixsim.dispersion import TERMS
        >>> TERMS["lorentz"].leaves_open("plasma", ["strength", "resonance", "damping"])
        True
        """
        return not {route.key for route in self.canonical.get(canonical, ())}.intersection(given) and (
            canonical in self.canonical
        )

    def _chosen(self, canonical: str, names: set[str]) -> Route:
        routes = self.canonical[canonical]
        taken = [route for route in routes if route.key in names]
        if not taken:
            ways = ", or ".join(" with ".join((r.key, *self._required(r))) for r in routes)
            raise Refusal(f"{canonical} of a {self.name} term is not given", f"give {ways}")
        if len(taken) > 1:
            both = " and ".join(route.key for route in taken)
            raise Refusal(
                f"{canonical} of a {self.name} term is given {len(taken)} times, by {both}",
                "they exclude each other: give one of them",
            )
        return taken[0]

    def _required(self, route: Route) -> tuple[str, ...]:
        return tuple(name for name in route.also if self.parameters[name].default is None)

    def _companions(self, name: str) -> list[str]:
        routes = [route for ways in self.canonical.values() for route in ways]
        routes += self.in_grains.values()
        return list(dict.fromkeys(route.key for route in routes if name in route.also))
