"""Numbers of a recipe that are allowed and yet look mistaken."""

from __future__ import annotations

from collections.abc import Iterator

from mixsim.analysis.caution import Caution
from mixsim.recipe import Recipe
from mixsim.units import Leaf, read, show, written_unit

DENSEST = 23e3  # kg/m^3; osmium has 22.6e3, handbook value from memory
APART = 10.0  # factor between a suspect number and every other of the recipe
MISTAKEN = {"cm^-1": "nm", "nm": "cm^-1", "eV": "meV", "meV": "eV", "THz": "GHz", "GHz": "THz"}


def suspicions(recipe: Recipe) -> tuple[Caution, ...]:
    """Cautions that need no computing."""
    return (*_units(recipe), *_densities(recipe))


def _densities(recipe: Recipe) -> Iterator[Caution]:
    """Denser than any element: g/cm^3 was written where kg/m^3 was meant."""
    for path, leaf in recipe.leaves.items():
        if leaf.dimension == "density" and leaf.value > DENSEST:
            shown, meant = show(leaf.value, "density", "g/cm^3"), f"{leaf.value / 1e6:.4g} g/cm^3"
            yield Caution("unit-suspect", path, f"{shown} is denser than any element; is {meant} meant?")


def _units(recipe: Recipe) -> Iterator[Caution]:
    """A place on the spectrum far from all others, that another unit would put among them."""
    places = {
        path: leaf
        for path, leaf in recipe.leaves.items()
        if leaf.dimension == "spectral" and _written_here(recipe, path) and not path.startswith("unknowns")
    }
    for path, leaf in places.items():
        others = [other.value for known, other in places.items() if known != path]
        # a band may be as wide as it likes: its own other end, in the same unit, is no witness
        owner = path.rpartition(".")[0]
        if all(
            known.startswith(f"{owner}.") and written_unit(other) == written_unit(leaf)
            for known, other in places.items()
        ):
            continue
        unit = written_unit(leaf)
        if not others or unit not in MISTAKEN or not path.endswith((".resonance", ".from", ".to")):
            continue
        nearest = min(max(leaf.value / other, other / leaf.value) for other in others)
        meant = read(leaf.written.replace(unit, MISTAKEN[unit]), "spectral") if unit in leaf.written else leaf
        if nearest > APART and min(others) / 1.5 <= meant.value <= 1.5 * max(others):
            elsewhere = f"{show(min(others), 'spectral', 'nm')} and {show(max(others), 'spectral', 'nm')}"
            wavelength = show(leaf.value, "spectral", "nm")
            yield Caution(
                "unit-suspect",
                path,
                f"{leaf.written!r} is a wavelength of {wavelength}, while every other number of the recipe "
                f"lies between {elsewhere}: is {meant.written!r} meant?",
            )


def _written_here(recipe: Recipe, path: str) -> bool:
    """Whether a number stands in the recipe itself, and is not of the library."""
    leaf: Leaf = recipe.leaves[path]
    return leaf.written in recipe.text or path in recipe.settings
