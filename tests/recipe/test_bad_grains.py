"""Shapes and orientations that contradict themselves: one message each."""

from __future__ import annotations

import pytest
from broken import GRAIN, LOADING, Broken, check, swap

SIZE, SILICA = 'diameter = "20 nm"', '{ material = "fused-silica", thickness = "2 nm" }'


def grain(
    keys: str, path: str, found: str, allowed: str, suggestion: str | None = None, at: str | None = ""
) -> Broken:
    """Keys beside the loading of the sound recipe's grain; `path` below the grain, or a whole one."""
    if at == "":
        at = path.split(".")[1]
    where = path if path and not path.startswith(".") else f"{GRAIN}{path}"
    return swap(LOADING, f"{LOADING}\n{keys}", where, found, allowed, suggestion, at=at)


CASES: dict[str, Broken] = {
    "spheroid without aspect ratio": swap(
        LOADING,
        f'{LOADING}\nshape = {{ kind = "spheroid" }}',
        f"{GRAIN}.shape",
        "aspect_ratio is missing",
        "cross axis",
    ),
    "sphere with aspect ratio": swap(
        LOADING,
        f'{LOADING}\nshape = {{ kind = "sphere", aspect_ratio = 2.0 }}',
        f"{GRAIN}.shape.aspect_ratio",
        "a sphere with aspect_ratio",
        "kind = 'spheroid'",
    ),
    "ellipsoid without axes": grain(
        'shape = { kind = "ellipsoid" }', ".shape", "axes is missing", "axes = [a, b, c]"
    ),
    "two axes": grain(
        'shape = { kind = "ellipsoid", axes = [1.0, 2.0] }', ".shape.axes", "a list of 2", "it holds 3"
    ),
    "four axes": grain(
        'shape = { kind = "ellipsoid", axes = [1, 2, 3, 4] }', ".shape.axes", "a list of 4", "it holds 3"
    ),
    "needle with axes": grain(
        'shape = { kind = "needle", axes = [1, 2, 3] }', ".shape.axes", "a needle with axes", "'ellipsoid'"
    ),
    "ellipsoid with a spread": grain(
        'shape = { kind = "ellipsoid", axes = [1, 2, 3], aspect_ratio_spread = 0.1 }',
        ".shape.aspect_ratio_spread",
        "an ellipsoid with aspect_ratio_spread",
        "kind = 'spheroid'",
    ),
    "order of ellipsoids": grain(
        'order_parameter = 0.5\nshape = { kind = "ellipsoid", axes = [1, 2, 3] }',
        ".order_parameter",
        "order_parameter of an ellipsoid",
        "symmetry axes",
    ),
    "order of spheres": grain(
        "order_parameter = 0.5", ".order_parameter", "order_parameter of a sphere", "symmetry axes"
    ),
    "order beside orientation": grain(
        'order_parameter = 0.5\norientation = "aligned"\nshape = { kind = "needle" }',
        ".order_parameter",
        "order_parameter beside orientation",
        "give one of them",
    ),
    "discs in a plane": grain(
        'orientation = "in-plane"\nshape = { kind = "disc" }',
        ".orientation",
        "discs with their axes in a plane",
        "lie flat are 'aligned'",
        "aligned",
    ),
    "flakes in a plane": grain(
        'orientation = "in-plane"\nshape = { kind = "spheroid", aspect_ratio = 0.1 }',
        ".orientation",
        "flakes of aspect ratio 0.1",
        "ellipsoid's axes",
        "aligned",
    ),
    "aligned spheres": swap(
        LOADING,
        f'{LOADING}\norientation = "aligned"',
        f"{GRAIN}.orientation",
        "aligned spheres",
        "no orientation",
    ),
    "coating without a diameter": grain(
        f"coating = {SILICA}", "", "a coating without a diameter", "of equal volume", at="[inclusions.grain]"
    ),
    "coating of an unknown material": grain(
        f'{SIZE}\ncoating = {{ material = "fused-silca", thickness = "2 nm" }}',
        ".coating.material",
        "unknown material 'fused-silca'",
        "built-in",
        "fused-silica",
    ),
    "key of one layer": grain(
        f'{SIZE}\ncoating = {{ material = "matrix", thicknes = "2 nm" }}',
        ".coating.thicknes",
        "unknown key 'thicknes'",
        "takes material, thickness",
        "thickness",
    ),
    "key of a layer among others": grain(
        f'{SIZE}\ncoating = [{SILICA}, {{ material = "matrix", thicknes = "2 nm" }}]',
        ".coating.1.thicknes",
        "unknown key 'thicknes'",
        "takes material, thickness",
        "thickness",
    ),
    "layer without a table": grain(
        f'{SIZE}\ncoating = [{SILICA}, "matrix"]',
        ".coating.1",
        "'matrix' where a table is needed",
        "coating.1 is a table that takes material, thickness",
    ),
    "spread without a diameter": grain(
        "diameter_spread = 0.2", ".diameter_spread", "diameter_spread without a diameter", "the median"
    ),
    "waves without a diameter": grain(
        'waves = "inside"', ".waves", "waves without a diameter", "give diameter"
    ),
    "waves in coated grains": grain(
        f'{SIZE}\ncoating = {SILICA}\nwaves = "dipole"',
        ".waves",
        "waves in coated grains",
        "spheres of one material",
    ),
    "waves in spheroids": grain(
        f'{SIZE}\nshape = {{ kind = "spheroid", aspect_ratio = 2 }}\nwaves = "dipole"',
        ".waves",
        "waves in grains that are not spheres",
        "spheres of one material",
    ),
    "word for waves": grain(
        f'{SIZE}\nwaves = "dipoles"',
        ".waves",
        "unknown waves 'dipoles'",
        "one of none, inside, dipole",
        "dipole",
    ),
    "no layers": grain(f"{SIZE}\ncoating = []", ".coating", "an empty list", "1 or more"),
    "layer without size": grain(
        f'{SIZE}\ncoating = {{ material = "matrix", thickness = "0 nm" }}',
        ".coating.thickness",
        "'0 nm' is out of range",
        "above 0",
    ),
    "coated needles": grain(
        f'{SIZE}\ncoating = {SILICA}\nshape = {{ kind = "needle" }}',
        ".coating",
        "a coating on a needle",
        "no size",
        at="coating =",
    ),
    "spread of coated grains": grain(
        f"{SIZE}\ncoating = {SILICA}\n"
        'shape = { kind = "spheroid", aspect_ratio = 2, aspect_ratio_spread = 0.2 }',
        ".shape.aspect_ratio_spread",
        "a spread of coated grains",
        "one aspect ratio",
    ),
    "coating that leaves no room": grain(
        'diameter = "5 nm"\ncoating = { material = "matrix", thickness = "5 nm" }',
        "inclusions",
        "volume fractions of coated inclusions and voids add up to 2.71",
        "at most 1",
        at="[inclusions.grain]",
    ),
    "layer without density": swap(
        LOADING,
        f'weight_fraction = "5 %"\n{SIZE}\ncoating = {{ material = "light", thickness = "1 nm" }}\n'
        "[materials.light]\npermittivity.infinity = 2.0",
        "materials.light",
        "density is missing",
        "inclusions.grain.weight_fraction needs it",
        at="[materials.light]",
    ),
}


@pytest.mark.parametrize("name", CASES)
def test_one_message(name: str) -> None:
    check(CASES[name])
