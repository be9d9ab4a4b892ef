"""What the register says of a mixing rule."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from typing import Literal

from mixsim.mixing.depolarisation import Array
from mixsim.parameter import Choice, Parameter

RuleFunction = Callable[..., Array]


@dataclass(frozen=True, slots=True)
class Rule:
    """One mixing rule.

    Attributes
    ----------
    name
        Word in the recipe.
    function
        ``function(phases, *, fractions, depolarisations, **own parameters)``, host first.
    summary, equation, assumptions, dilute_limit, valid_for, source
        What a person wants to know of it, as text.
    takes_shapes
        Whether grains may be other than spheres.
    takes_aligned
        Whether such grains may be aligned, so that the answer has principal axes.
    symmetric
        Whether no phase is the host.
    additive_only
        Whether the fractions must add up to one.
    homogeneous
        Whether scaling every phase scales the answer; not so where vacuum is the silent host.
    fraction_from
        ``(mixture, *, host, inclusion)``: closed-form fraction of the second of two phases
        of spheres, or None.
    inclusion_from
        ``(mixture, *, host, fraction)``: closed-form permittivity of that phase, or None.
    percolation
        Fraction from which spheres of a conducting phase conduct through the mixture [-], or None where
        they never do below one. The parameter `threshold` of a rule comes before it.
    parameters
        Numbers and words of its own that a recipe gives in ``[mixing]``, by name.
    most_phases
        Greatest number of phases, host and voids included, or None.
    bounds
        Rigorous bounds that it obeys wherever they apply: those of an isotropic mixture, those of any
        mixture, or none.
    dilute_exact
        Whether few spheres in a host come out right: ε_h (1 + 3 f (ε_i − ε_h)/(ε_i + 2 ε_h)).
    passive
        Whether passive phases always make a passive mixture.
    ordered
        Whether its structure is its own, layers or a lattice: no alternative for grains at random.
    densest
        ``(**own parameters)``: greatest fraction of inclusions that the structure has room for, or None.
    threshold_of
        ``(depolarisation)``: the percolation threshold of grains of other shapes, or None.
    low
        ``(rates, plateaus, *, fractions, depolarisations, **own parameters)``: static limit, rate and plateau
        as ω → 0; None where the function itself, at a huge contrast, keeps every digit of both parts.
    """

    name: str
    function: RuleFunction
    summary: str
    equation: str
    assumptions: str
    dilute_limit: str
    valid_for: str
    source: str
    takes_shapes: bool
    takes_aligned: bool
    symmetric: bool
    additive_only: bool
    homogeneous: bool
    fraction_from: RuleFunction | None
    inclusion_from: RuleFunction | None
    percolation: float | None
    parameters: Mapping[str, Parameter | Choice] = field(default_factory=dict)
    most_phases: int | None = None
    bounds: Literal["hashin-shtrikman", "wiener", "none"] = "hashin-shtrikman"
    dilute_exact: bool = True
    passive: bool = True
    ordered: bool = False
    densest: Callable[..., float] | None = None
    threshold_of: Callable[..., Array] | None = None
    low: Callable[..., tuple[Array, Array, Array]] | None = None

    @property
    def needed(self) -> tuple[str, ...]:
        """Parameters that have no default."""
        return tuple(name for name, parameter in self.parameters.items() if parameter.default is None)
