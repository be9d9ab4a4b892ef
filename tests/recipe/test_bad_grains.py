"""Shapes and orientations that contradict themselves: one message each."""

from __future__ import annotations

import pytest
from broken import GRAIN, LOADING, Broken, check, swap


def grain(keys: str, path: str, found: str, allowed: str, suggestion: str | None = None) -> Broken:
    """Keys beside the loading of the sound recipe's grain."""
    at = path.rsplit(".", 1)[-1] if ".shape" not in path else "shape ="
    return swap(LOADING, f"{LOADING}\n{keys}", f"{GRAIN}{path}", found, allowed, suggestion, at=at)


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
}


@pytest.mark.parametrize("name", CASES)
def test_one_message(name: str) -> None:
    check(CASES[name])
