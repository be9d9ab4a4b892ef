"""What is judged: one number of the piece, as a function of the numbers of its mixture."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from mixsim.composition import BASES
from mixsim.errors import BadInput, Refusal
from mixsim.mixture import HOST, Composition, Mixture
from mixsim.observables import QUANTITIES
from mixsim.recipe import Recipe
from mixsim.recipe.agreement import of_mixture, path_or_nearest
from mixsim.units import Leaf, read, show, written_unit

Floats = NDArray[np.float64]
Given = Mapping[str, Any]

_ALIAS = {"permittivity": "permittivity_real", "permeability": "permeability_real"}
_DIMENSION = {"S/m": "conductivity"}
_SOLIDS = "solids"


@dataclass(frozen=True, eq=False)
class Measurand:
    """One number of a piece.

    Attributes
    ----------
    name
        As the recipe says it.
    dimension, unit
        What it is counted in; the unit is empty for plain numbers.
    function
        ``function(mixture, given)``: its value for leaves that differ from the recipe, of their batch shape.
    note
        What a reader may confuse it with, or empty.
    """

    name: str
    dimension: str
    unit: str
    function: Callable[[Mixture, Given], Floats]
    note: str = ""

    def read(self, text: str | float) -> Leaf:
        """A limit or a label as written."""
        return read(text, self.dimension)

    def show(self, value: float, std: float | None = None) -> str:
        """A value in the unit of the recipe."""
        return show(value, self.dimension, self.unit or None, std)


def measurand_of(recipe: Recipe, name: str, at: Leaf | None, *, path: str = "acceptance.of") -> Measurand:
    """What a word of the recipe names.

    Parameters
    ----------
    recipe
        A checked recipe.
    name
        Path of a number, `inclusions.NAME.BASIS` on any basis, "solids.volume_fraction", "density", "static",
        "high_frequency", or a quantity of a frequency.
    at
        That frequency.
    path
        Where the word stands.

    Raises
    ------
    BadInput
        Where it names nothing, or a frequency is missing or superfluous.
    """
    found = _loading(recipe, name) or _leaf(recipe, name) or _level(recipe, name, at)
    if found is None:
        known = [*(p for p in recipe.leaves if of_mixture(p)), *_ALIAS, *QUANTITIES, "density", "static"]
        allowed = "a path, an inclusion's loading on any basis, or a quantity (mixsim list quantities)"
        raise BadInput([recipe.fault(path, f"unknown {name!r}", allowed, path_or_nearest(name, known))])
    spectral = _ALIAS.get(name, name) in QUANTITIES
    if at is not None and not spectral:
        allowed = "it is for a quantity of a frequency; leave it out"
        raise BadInput([recipe.fault(path.replace("of", "at"), f"at beside {name}", allowed)])
    return found


def _leaf(recipe: Recipe, name: str) -> Measurand | None:
    if name not in recipe.leaves or not of_mixture(name):
        return None
    leaf = recipe.leaves[name]

    def value(mixture: Mixture, given: Given) -> Floats:
        return np.asarray(given.get(name, mixture.defaults[name]), dtype=float)

    return Measurand(name, leaf.dimension, written_unit(leaf), value)


def _loading(recipe: Recipe, name: str) -> Measurand | None:
    """A loading on a basis, whichever basis the recipe gives it on."""
    words = name.split(".")
    if name == f"{_SOLIDS}.volume_fraction":
        return Measurand(name, "fraction", "%", _of_composition(lambda c: 1.0 - _voids(c)))
    if len(words) != 3 or words[0] != "inclusions" or words[1] not in recipe.schema.inclusions:
        return None
    grain, basis = words[1], words[2]
    if basis not in BASES:
        return None
    inclusion = recipe.schema.inclusions[grain]
    given = getattr(inclusion, basis)
    unit = written_unit(given) if given is not None else ("" if basis == "phr" else "%")
    dimension = "number" if basis == "phr" else "fraction"

    def volume(c: Composition) -> Floats:
        return c.volume_fractions[grain]

    def of_solids(c: Composition) -> Floats:
        return np.asarray(c.volume_fractions[grain] / (1.0 - _voids(c)))

    def weight(c: Composition) -> Floats:
        return _weights(c)[grain]

    def phr(c: Composition) -> Floats:
        return np.asarray(100.0 * _weights(c)[grain] / _weights(c)[HOST])

    notes = {
        "volume_fraction": "of the whole mixture, voids included",
        "volume_fraction_of_solids": "of the solids, voids left out",
        "weight_fraction": "of the solids, by weight",
        "phr": "parts by weight per hundred of host",
    }
    functions = {
        "volume_fraction": volume,
        "volume_fraction_of_solids": of_solids,
        "weight_fraction": weight,
        "phr": phr,
    }
    return Measurand(name, dimension, unit, _of_composition(functions[basis]), notes[basis])


def _level(recipe: Recipe, name: str, at: Leaf | None) -> Measurand | None:
    if name == "density":

        def density(c: Composition) -> Floats:
            if c.density is None:
                raise Refusal("a density of the mixture", "every constituent needs its density")
            return c.density

        return Measurand(name, "density", "g/cm^3", _of_composition(density))
    if name in ("static", "high_frequency"):
        return Measurand(name, "number", "", lambda m, g: np.real(getattr(m.limits(g), name)))
    quantity = QUANTITIES.get(_ALIAS.get(name, name))
    if quantity is None:
        return None
    if at is None:
        allowed = 'such as at = "10 GHz"'
        raise BadInput([recipe.fault("acceptance", f"{name} without at", allowed)])
    omega = np.array([at.value])

    def value(mixture: Mixture, given: Given) -> Floats:
        response = mixture.response(given, omega)
        found = quantity.function(omega, response.permittivity, response.permeability)
        return np.asarray(np.real(found))[..., 0]

    dimension = _DIMENSION.get(quantity.unit, "number")
    return Measurand(
        f"{name} at {at.written}", dimension, quantity.unit if dimension != "number" else "", value
    )


def _of_composition(function: Callable[[Composition], Floats]) -> Callable[[Mixture, Given], Floats]:
    return lambda mixture, given: np.asarray(function(mixture.composition(given)), dtype=float)


def _voids(composition: Composition) -> Any:
    return composition.volume_fractions.get("voids", 0.0)


def _weights(composition: Composition) -> Mapping[str, Floats]:
    if composition.weight_fractions is None:
        raise Refusal("a loading by weight", "every constituent needs its density")
    return composition.weight_fractions
