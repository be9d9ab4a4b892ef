"""Every shape and orientation of a recipe, through the evaluator, against polarisabilities written out."""

from __future__ import annotations

import numpy as np
import pytest

import mixsim
from mixsim.mixing import ellipsoid_factors, spheroid_factors

TEXT = """
    host.material = "glass"
    [inclusions.grain]
    material = "metal"
    volume_fraction = "10 %"
    {keys}
    [materials.glass]
    permittivity.infinity = 2.25
    [materials.metal]
    permittivity.infinity = 4.0
    permittivity.terms.free = {{ model = "drude", plasma = "3 eV", damping = "0.3 eV" }}
"""
OMEGA = np.linspace(1e15, 4e15, 5)
CROSS, AXIS = spheroid_factors(3.0)
FIRST, SECOND, THIRD = ellipsoid_factors(3.0, 2.0, 1.0)
EV = 1.602176634e-19 * 2 * np.pi / 6.62607015e-34


def garnett(mean: object) -> np.ndarray:
    """Maxwell Garnett by `mean` of the field inside over that around, written for one axis."""
    metal = 4.0 - (3 * EV) ** 2 / (OMEGA**2 + 0.3j * EV * OMEGA)

    def field(n: float) -> np.ndarray:
        return 2.25 / (2.25 + n * (metal - 2.25))

    inside = mean(field)  # type: ignore[operator]
    return (0.9 * 2.25 + 0.1 * metal * inside) / (0.9 + 0.1 * inside)


SPHEROID = 'shape = { kind = "spheroid", aspect_ratio = 3.0 }'
ELLIPSOID = 'shape = { kind = "ellipsoid", axes = [6, 4, 2.0] }'
NEEDLE, DISC = 'shape = { kind = "needle" }', 'shape = { kind = "disc" }'
RANDOM = {
    SPHEROID: lambda a: (2 * a(CROSS) + a(AXIS)) / 3,
    ELLIPSOID: lambda a: (a(FIRST) + a(SECOND) + a(THIRD)) / 3,
    NEEDLE: lambda a: (2 * a(0.5) + a(0.0)) / 3,
    DISC: lambda a: (2 * a(0.0) + a(1.0)) / 3,
}
LYING = {
    f'{SPHEROID}\norientation = "aligned"': (CROSS, CROSS, AXIS),
    f'{ELLIPSOID}\norientation = "aligned"': (FIRST, SECOND, THIRD),
    f'{NEEDLE}\norientation = "aligned"': (0.5, 0.5, 0.0),
    f'{DISC}\norientation = "aligned"': (0.0, 0.0, 1.0),
    f"{DISC}\norder_parameter = 1.0": (0.0, 0.0, 1.0),
    f'{SPHEROID}\norientation = "in-plane"': ((CROSS, AXIS), (CROSS, AXIS), CROSS),
    f'{ELLIPSOID}\norientation = "in-plane"': ((FIRST, SECOND), (FIRST, SECOND), THIRD),
    f"{NEEDLE}\norder_parameter = -0.5": ((0.5, 0.0), (0.5, 0.0), 0.5),
}


def response(keys: str, values: dict[str, object] | None = None) -> np.ndarray:
    compiled = mixsim.parse(TEXT.format(keys=keys)).compile()
    return compiled.response(values or {}, OMEGA).permittivity  # type: ignore[arg-type]


@pytest.mark.parametrize("keys", RANDOM)
def test_random_grains(keys: str) -> None:
    np.testing.assert_allclose(response(keys), garnett(RANDOM[keys]), rtol=1e-12)


@pytest.mark.parametrize("keys", LYING)
def test_grains_that_lie(keys: str) -> None:
    expected = []
    for given in LYING[keys]:
        factors = np.atleast_1d(given)
        expected.append(garnett(lambda a, factors=factors: sum(a(n) for n in factors) / len(factors)))
    np.testing.assert_allclose(response(keys), expected, rtol=1e-12)


@pytest.mark.parametrize(
    ("keys", "path", "numbers"),
    [
        (f'{SPHEROID}\norientation = "in-plane"', "shape.aspect_ratio", [1.5, 8.0]),
        (f'{ELLIPSOID}\norientation = "aligned"', "shape.axes.1", [0.5, 4.0, 9.0]),
        (ELLIPSOID, "shape.axes.2", [0.5, 9.0]),
        (f"{NEEDLE}\norder_parameter = 0.2", "order_parameter", [-0.5, 0.0, 0.7]),
        (SPHEROID.replace(" }", ", aspect_ratio_spread = 0.1 }"), "shape.aspect_ratio_spread", [0.0, 0.4]),
    ],
)
def test_batches_are_the_points_one_by_one(keys: str, path: str, numbers: list[float]) -> None:
    where = f"inclusions.grain.{path}"
    compiled = mixsim.parse(TEXT.format(keys=keys)).compile()
    loading = np.array([[0.05], [0.2]])
    batch = {where: np.array(numbers), "inclusions.grain.volume_fraction": loading}
    together = compiled.response(batch, OMEGA).permittivity
    limits = compiled.limits(batch)
    for i, j in np.ndindex(2, len(numbers)):
        alone = {where: numbers[j], "inclusions.grain.volume_fraction": loading[i, 0]}
        np.testing.assert_allclose(together[i, j], compiled.response(alone, OMEGA).permittivity, rtol=1e-13)
        np.testing.assert_allclose(limits.static[i, j], compiled.limits(alone).static, rtol=1e-13)


def test_no_spread_is_one_shape_and_a_spread_blurs() -> None:
    with_none = SPHEROID.replace(" }", ", aspect_ratio_spread = 0 }")
    np.testing.assert_allclose(response(with_none), response(SPHEROID), rtol=1e-13)
    blurred = response(SPHEROID.replace(" }", ", aspect_ratio_spread = 0.5 }"))
    assert np.max(np.abs(blurred - response(SPHEROID))) > 0.1


def test_static_limits_of_conducting_grains_that_reach_through() -> None:
    """Perfect conductors: 1 + f/(1 − f) <1/N>; needles and discs conduct at any loading."""
    metal = {"materials.metal.permittivity.terms.free.damping": 3e14}
    compiled = mixsim.parse(TEXT.format(keys=ELLIPSOID)).compile()
    inverse = (1 / FIRST + 1 / SECOND + 1 / THIRD) / 3
    assert compiled.limits(metal).static == pytest.approx(2.25 * (1 + inverse / 9), rel=1e-12)
    sigma = 8.8541878188e-12 * (3 * EV) ** 2 / 3e14
    for kind, share in (("needle", 1 / 3), ("disc", 2 / 3)):
        through = mixsim.parse(TEXT.format(keys=f'shape = {{ kind = "{kind}" }}')).compile().limits(metal)
        assert np.isnan(through.static)
        inside = 0.1 * share  # f <A>: the axes along which the field enters unhindered
        assert through.conductivity == pytest.approx(sigma * inside / (0.9 + inside), rel=1e-9)
