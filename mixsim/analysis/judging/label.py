"""What a label may have meant: the usual slips, tried and ranked by how well they fit what was found."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from mixsim.analysis.judging.answer import Meaning
from mixsim.analysis.judging.measurand import Measurand
from mixsim.composition import BASES, Loading, volume_fractions
from mixsim.mixture import Mixture
from mixsim.recipe import Recipe
from mixsim.recipe.agreement import loading_of
from mixsim.units import read

_WORDS = {
    "volume_fraction": "by volume of the whole, voids included",
    "volume_fraction_of_solids": "by volume of the solids",
    "weight_fraction": "by weight of the solids",
    "phr": "parts by weight per hundred of host",
}
_FAR = 1e3  # standard uncertainties: further off, a number says nothing


def meanings_of(
    recipe: Recipe,
    mixture: Mixture,
    measurand: Measurand,
    label: str | float,
    value: float,
    std: float,
) -> tuple[Meaning, ...]:
    """Every basis that a label may stand for, likeliest first.

    Parameters
    ----------
    recipe, mixture
        With one inclusion that the label is about: the one judged, or the only one.
    measurand
        What is judged.
    label
        As the bag says it, such as "40 %".
    value, std
        What was found, SI.

    Returns
    -------
    meanings
        Each with what the number judged would be, and its distance from what was found. Empty where the label
        is about no loading.
    """
    names = [name for name in recipe.schema.inclusions if f"inclusions.{name}." in measurand.name]
    if not names and len(recipe.schema.inclusions) == 1:
        names = list(recipe.schema.inclusions)
    if not names:
        return ()
    amount = read(label, "fraction").value
    found = []
    for meaning, volume in _volumes(recipe, mixture, names[0], amount):
        if not 0.0 <= volume <= 1.0:
            continue
        path = _path(recipe, names[0], volume, mixture)
        would = float(measurand.function(mixture, path))
        off = min(abs(would - value) / std, _FAR)
        found.append(Meaning(meaning, would, off, abs(would - amount) <= 1e-9))
    return tuple(sorted(found, key=lambda one: one.off))


def _volumes(recipe: Recipe, mixture: Mixture, name: str, amount: float) -> Iterator[tuple[str, float]]:
    """Volume fraction of the whole that a label means on each basis, with the slips of weighing."""
    x = mixture.defaults
    grain = next(inclusion for inclusion in mixture.inclusions if inclusion.name == name)
    rho = None if grain.density is None else float(grain.density(x))
    host = None if mixture.host.density is None else float(mixture.host.density(x))
    voids = 0.0 if mixture.voids is None else float(mixture.voids(x))
    for basis in BASES:
        if basis in ("weight_fraction", "phr") and (rho is None or host is None):
            continue
        size = 100.0 * amount if basis == "phr" else amount
        loading = Loading(basis, size, rho)
        fractions = volume_fractions([loading], host_density=host, voids=voids)
        yield _WORDS[basis], float(fractions[1])
        if basis != "phr":
            other = volume_fractions([Loading(basis, 1.0 - amount, rho)], host_density=host, voids=voids)
            yield f"of the host, not of {name}, {_WORDS[basis]}", float(other[1])


def _path(recipe: Recipe, name: str, volume: float, mixture: Mixture) -> dict[str, float]:
    """The leaf of the recipe's own basis that gives a volume fraction of the whole."""
    basis, _ = loading_of(recipe.schema.inclusions[name])
    path = f"inclusions.{name}.{basis}"
    low, high = 0.0, 1e4 if basis == "phr" else 1.0
    for _ in range(80):  # monotone: bisection needs no inverse of each basis
        middle = 0.5 * (low + high)
        here = float(mixture.composition({path: middle}).volume_fractions[name])
        low, high = (middle, high) if np.isnan(here) or here < volume else (low, middle)
    return {path: 0.5 * (low + high)}
