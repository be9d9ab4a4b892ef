"""What must hold between the keys of an inclusion: one loading, a shape with its numbers, how grains lie."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

from mixsim.composition import BASES
from mixsim.errors import Refusal
from mixsim.recipe.faults import Finding
from mixsim.recipe.raw import one_of, table

_NEEDS = {
    "spheroid": ("aspect_ratio", "symmetry axis over cross axis"),
    "ellipsoid": ("axes", "axes = [a, b, c]"),
}
_TAKES = {"spheroid": ("aspect_ratio", "aspect_ratio_spread"), "ellipsoid": ("axes",)}
_KINDS = ("sphere", "spheroid", "ellipsoid", "needle", "disc")


def of_inclusion(name: str, inclusion: Mapping[str, Any]) -> Iterator[Finding]:
    """Contradictions and gaps of one inclusion."""
    path = f"inclusions.{name}"
    if name in ("host", "voids"):
        yield path, Refusal(f"an inclusion called {name!r}", "answers call a phase so; choose another name")
    yield from one_of(path, inclusion, tuple(BASES), "the loading")
    shape = table(inclusion, "shape")
    yield from _shape(f"{path}.shape", shape)
    kind = shape.get("kind", "sphere")
    if kind in _KINDS:
        yield from _orientation(path, str(kind), inclusion)
    yield from _coating(path, shape, inclusion)
    yield from _size(path, inclusion)


def is_round(inclusion: Mapping[str, Any]) -> bool:
    """Whether the grains of an inclusion are spheres."""
    return str(table(inclusion, "shape").get("kind", "sphere")) == "sphere"


def _shape(path: str, shape: Mapping[str, Any]) -> Iterator[Finding]:
    kind = shape.get("kind")
    if kind not in _KINDS:
        return
    key, meaning = _NEEDS.get(kind, ("", ""))
    if key and key not in shape:
        yield path, Refusal(f"{key} is missing", f"{_a(kind)} needs {meaning}")
    for other in ("aspect_ratio", "aspect_ratio_spread", "axes"):
        if other in shape and other not in _TAKES.get(kind, ()):
            meant = next(kind for kind, keys in _TAKES.items() if other in keys)
            yield (
                f"{path}.{other}",
                Refusal(f"{_a(kind)} with {other}", f"leave it out, or say kind = '{meant}'"),
            )


def _orientation(path: str, kind: str, inclusion: Mapping[str, Any]) -> Iterator[Finding]:
    orientation = inclusion.get("orientation", "random")
    if "order_parameter" in inclusion:
        where = f"{path}.order_parameter"
        if "orientation" in inclusion:
            yield where, Refusal("order_parameter beside orientation", "give one of them")
        elif kind in ("sphere", "ellipsoid"):
            allowed = "it orders symmetry axes: those of spheroids, needles, discs"
            yield where, Refusal(f"order_parameter of {_a(kind)}", allowed)
    if orientation in ("aligned", "in-plane") and kind == "sphere":
        yield (
            f"{path}.orientation",
            Refusal(f"{orientation} spheres", "spheres have no orientation; leave it out"),
        )
    if orientation == "in-plane" and kind == "disc":
        allowed = "discs that lie flat are 'aligned': their axes all lie along the third principal axis"
        yield f"{path}.orientation", Refusal("discs with their axes in a plane", allowed, "aligned")


def _coating(path: str, shape: Mapping[str, Any], inclusion: Mapping[str, Any]) -> Iterator[Finding]:
    if "coating" not in inclusion:
        return
    if "diameter" not in inclusion:
        yield path, Refusal("a coating without a diameter", "give diameter of the core, of equal volume")
    kind = shape.get("kind")
    if kind in ("needle", "disc"):
        allowed = "an endless grain has no size; give a spheroid's aspect_ratio"
        yield f"{path}.coating", Refusal(f"a coating on {_a(str(kind))}", allowed)
    if "aspect_ratio_spread" in shape:
        allowed = "coated grains take one aspect ratio"
        yield f"{path}.shape.aspect_ratio_spread", Refusal("a spread of coated grains", allowed)


def _size(path: str, inclusion: Mapping[str, Any]) -> Iterator[Finding]:
    """A spread of sizes, and waves, need a diameter; waves are known of plain spheres only."""
    waves = inclusion.get("waves", "none")
    for key, given in (("diameter_spread", "diameter_spread" in inclusion), ("waves", waves != "none")):
        if given and "diameter" not in inclusion:
            yield f"{path}.{key}", Refusal(f"{key} without a diameter", "give diameter, the median by volume")
    if waves in ("inside", "dipole") and (not is_round(inclusion) or "coating" in inclusion):
        what = "coated grains" if is_round(inclusion) else "grains that are not spheres"
        yield f"{path}.waves", Refusal(f"waves in {what}", "they are known of spheres of one material")


def _a(kind: str) -> str:
    return f"an {kind}" if kind.startswith("e") else f"a {kind}"
