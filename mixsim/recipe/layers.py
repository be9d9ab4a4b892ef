"""Layers around the grains of an inclusion: where they stand in a recipe, and how much they add."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

from mixsim.mixing import growth_of_ellipsoid, growth_of_sphere, log_normal_places, value_at
from mixsim.recipe.schema import Coating, Inclusion, Material

SIZE_STEP = 0.5  # between the sizes of a distribution, in standard deviations: what depends on size is smooth


def shells_of(inclusion: Inclusion) -> tuple[tuple[str, Coating], ...]:
    """Layers of an inclusion from the core outwards, each with its path below the inclusion."""
    given = inclusion.coating
    if given is None:
        return ()
    if not isinstance(given, list):
        return (("coating", given),)
    return tuple((f"coating.{place}", shell) for place, shell in enumerate(given))


def raw_shells(inclusion: Mapping[str, Any]) -> Iterator[tuple[str, Mapping[str, Any]]]:
    """The same of a recipe as parsed, as far as they are tables."""
    given = inclusion.get("coating")
    if isinstance(given, Mapping):
        yield "coating", given
    elif isinstance(given, list):
        yield from ((f"coating.{i}", shell) for i, shell in enumerate(given) if isinstance(shell, Mapping))


def coating_of(inclusion: Inclusion, materials: Mapping[str, Material]) -> tuple[float, float | None]:
    """Volume of all layers over that of the core, and their mass per volume of core [kg/m^3], if known."""
    inside, total, volume = 1.0, 0.0, 0.0  # of the mean grain, where there are grains of many sizes
    mass: float | None = 0.0
    for _, shell in shells_of(inclusion):
        assert inclusion.diameter is not None
        total += shell.thickness.value
        outside = _growth(inclusion, total)
        density = materials[shell.material].density
        mass = None if mass is None or density is None else mass + (outside - inside) * density.value
        volume, inside = outside - 1.0, outside
    return volume, mass


def _growth(inclusion: Inclusion, thickness: float) -> float:
    assert inclusion.diameter is not None
    shape, diameter = inclusion.shape, inclusion.diameter.value
    spread = inclusion.diameter_spread
    if spread is not None:
        places = log_normal_places(SIZE_STEP)
        sizes = [
            (value_at(median=diameter, spread=spread.value, place=place), share) for place, share in places
        ]
    else:
        sizes = [(diameter, 1.0)]
    if shape.kind == "sphere":
        return sum(share * float(growth_of_sphere(size, thickness=thickness)) for size, share in sizes)
    axes = (1.0, 1.0, shape.aspect_ratio.value) if shape.aspect_ratio else [a.value for a in shape.axes or ()]
    first, second, third = axes
    of_core = {"first": first, "second": second, "third": third}
    return sum(s * float(growth_of_ellipsoid(size, thickness=thickness, **of_core)) for size, s in sizes)
