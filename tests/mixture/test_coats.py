"""Coated grains of a recipe, through the evaluator: fields, fractions, weights, limits."""

from __future__ import annotations

import numpy as np
import pytest

import mixsim
from mixsim.mixing import bruggeman, coated_grain, confocal_axes, ellipsoid_factors, growth_of_ellipsoid
from mixsim.mixture import Mixture

TEXT = """
host.material = "resin"
mixing.rule = "{rule}"
[inclusions.grain]
material = "metal"
{loading}
diameter = "20 nm"
{keys}
[materials.resin]
density = "1.2 g/cm^3"
permittivity.infinity = 2.25
[materials.metal]
density = "10 g/cm^3"
permittivity.infinity = 4.0
permittivity.terms.free = {{ model = "drude", plasma = "3 eV", damping = "0.3 eV" }}
[materials.oxide]
density = "4 g/cm^3"
permittivity.infinity = 6.0
permittivity.terms.band = {{ model = "lorentz", step = 1, resonance = "5 eV", damping = "0.5 eV" }}
[materials.salt]
density = "2 g/cm^3"
permittivity.infinity = 5.0
permittivity.terms.ions = {{ model = "conduction", conductivity = "0.2 S/m" }}
"""
ONE = 'coating = { material = "oxide", thickness = "4 nm" }'
TWO = 'coating = [{ material = "oxide", thickness = "4 nm" }, { material = "resin", thickness = "1 nm" }]'
SPHEROID, ELLIPSOID = '{ kind = "spheroid", aspect_ratio = 3.0 }', '{ kind = "ellipsoid", axes = [3, 2, 1] }'
EV = 1.602176634e-19 * 2 * np.pi / 6.62607015e-34
OMEGA = np.linspace(1e15, 4e15, 5)
METAL = 4.0 - (3 * EV) ** 2 / (OMEGA**2 + 0.3j * EV * OMEGA)
OXIDE = 6.0 + (5 * EV) ** 2 / ((5 * EV) ** 2 - OMEGA**2 - 0.5j * EV * OMEGA)


def compiled(
    keys: str,
    loading: str = 'volume_fraction = "5 %"',
    rule: str = "maxwell-garnett",
    old: str = "",
    new: str = "",
) -> Mixture:
    return mixsim.parse(TEXT.format(keys=keys, loading=loading, rule=rule).replace(old, new)).compile()


def response(keys: str, rule: str = "maxwell-garnett") -> np.ndarray:
    return compiled(keys, rule=rule).response({}, OMEGA).permittivity


def test_coated_spheres() -> None:
    """Each layer by the mean of Maxwell Garnett, and once more in the resin."""
    for keys, radii in ((ONE, [10, 14]), (TWO, [10, 14, 15])):
        grain: np.ndarray = METAL
        for shell, inner, outer in zip([OXIDE, 2.25], radii, radii[1:], strict=False):
            ratio = (inner / outer) ** 3 * (grain - shell) / (grain + 2 * shell)
            grain = shell * (1 + 2 * ratio) / (1 - ratio)
        lone = 0.05 * (radii[-1] / 10) ** 3 * (grain - 2.25) / (grain + 4.5)
        np.testing.assert_allclose(response(keys), 2.25 * (1 + 2 * lone) / (1 - lone), rtol=1e-12)


def of_axes(axes: tuple[float, float, float]) -> tuple[list[np.ndarray], tuple[float, ...], float]:
    """Equivalent grains along three axes, their outer factors and their growth."""
    first, second, third = axes
    sizes = {"first": first, "second": second, "third": third}
    growth = float(growth_of_ellipsoid(20e-9, thickness=4e-9, **sizes))
    inner, outer = ellipsoid_factors(*axes), ellipsoid_factors(*confocal_axes(growth, **sizes))
    pairs = zip(inner, outer, strict=True)
    grains = [
        coated_grain(METAL, OXIDE, fraction=1 / growth, core_factor=a, outer_factor=b) for a, b in pairs
    ]
    return grains, tuple(float(n) for n in outer), growth


def garnett(growth: float, axes: list[tuple[float, np.ndarray, float]]) -> np.ndarray:
    """Maxwell Garnett of a coated grain with these weights, permittivities and factors of its axes."""
    filled = 0.05 * growth
    fields = [(w, grain, 2.25 / (2.25 + n * (grain - 2.25))) for w, grain, n in axes]
    above = (1 - filled) * 2.25 + filled * sum(w * grain * a for w, grain, a in fields)
    return above / ((1 - filled) + filled * sum(w * a for w, _, a in fields))


@pytest.mark.parametrize(("shape", "axes"), [(SPHEROID, (1.0, 1.0, 3.0)), (ELLIPSOID, (3.0, 2.0, 1.0))])
def test_coated_ellipsoids(shape: str, axes: tuple[float, float, float]) -> None:
    grains, factors, growth = of_axes(axes)
    each = list(zip(grains, factors, strict=True))
    random = garnett(growth, [(1 / 3, *one) for one in each])
    np.testing.assert_allclose(response(f"{ONE}\nshape = {shape}"), random, rtol=1e-12)
    aligned = [garnett(growth, [(1.0, *one)]) for one in each]
    found = response(f'{ONE}\nshape = {shape}\norientation = "aligned"')
    np.testing.assert_allclose(found, aligned, rtol=1e-12)
    a, b, c = each if shape == ELLIPSOID else (each[2], each[0], each[0])
    plane = garnett(growth, [(0.5, *a), (0.5, *b)])
    found = response(f'{ONE}\nshape = {shape}\norientation = "in-plane"')
    np.testing.assert_allclose(found, [plane, plane, garnett(growth, [(1.0, *c)])], rtol=1e-12)
    if shape == SPHEROID:
        found = response(f"{ONE}\nshape = {shape}\norder_parameter = 0.4")
        w = 1.8 / 3
        along = garnett(growth, [(1 - w, *each[0]), (w, *each[2])])
        across = garnett(growth, [(0.8, *each[0]), (0.2, *each[2])])
        np.testing.assert_allclose(found, [across, across, along], rtol=1e-12)


def test_bruggeman_takes_each_axis_as_a_kind_of_its_own() -> None:
    grains, factors, growth = of_axes((3.0, 2.0, 1.0))
    filled = 0.05 * growth
    shapes = [((1 / 3, 1.0),), *(((n, 1.0),) for n in factors)]
    fractions = [1 - filled, *[filled / 3] * 3]
    expected = bruggeman([2.25, *grains], fractions=fractions, depolarisations=shapes)
    found = response(f"{ONE}\nshape = {ELLIPSOID}", "bruggeman")
    np.testing.assert_allclose(found, expected, rtol=1e-11)


@pytest.mark.parametrize(
    "keys",
    [TWO, f'{TWO}\nshape = {SPHEROID}\norientation = "aligned"', f"{TWO}\nshape = {ELLIPSOID}\n"],
    ids=["spheres", "aligned", "three axes"],
)
def test_batches_are_the_points_one_by_one(keys: str) -> None:
    mixture = compiled(keys)
    paths = [
        "inclusions.grain.diameter",
        "inclusions.grain.coating.0.thickness",
        "materials.oxide.permittivity.infinity",
        "materials.metal.permittivity.terms.free.plasma",
    ]
    ends = [(15e-9, 30e-9), (1e-9, 6e-9), (5.0, 7.0), (2.5 * EV, 3.5 * EV)]
    grid = np.meshgrid(*ends, indexing="ij", sparse=True)
    batch = dict(zip(paths, grid, strict=True))
    together, limits = mixture.response(batch, OMEGA).permittivity, mixture.limits(batch).high_frequency
    whole = np.broadcast_arrays(*grid)
    for place in np.ndindex(2, 2, 2, 2):
        alone = {path: float(values[place]) for path, values in zip(paths, whole, strict=True)}
        np.testing.assert_allclose(together[place], mixture.response(alone, OMEGA).permittivity, rtol=1e-12)
        np.testing.assert_allclose(limits[place], mixture.limits(alone).high_frequency, rtol=1e-12)


@pytest.mark.parametrize(
    "loading",
    [
        'volume_fraction = "5 %"',
        'volume_fraction_of_solids = "5 %"',
        'weight_fraction = "20 %"',
        "phr = 30",
    ],
)
def test_layers_take_volume_and_weigh(loading: str) -> None:
    """Grams in a litre, counted by hand from the fractions found."""
    mixture = compiled(f'{TWO}\n[voids]\nvolume_fraction = "2 %"', loading)
    found = mixture.composition({})
    volumes = {name: float(value) for name, value in found.volume_fractions.items()}
    core = volumes["grain"]
    assert list(volumes) == ["host", "grain", "grain.coating.0", "grain.coating.1", "voids"]
    assert sum(volumes.values()) == pytest.approx(1.0, rel=1e-14)
    assert volumes["grain.coating.0"] == pytest.approx(core * (1.4**3 - 1), rel=1e-13)
    assert volumes["grain.coating.1"] == pytest.approx(core * (1.5**3 - 1.4**3), rel=1e-13)
    grams = {"host": 1200, "grain": 10000, "grain.coating.0": 4000, "grain.coating.1": 1200, "voids": 0}
    masses = {name: volumes[name] * rho for name, rho in grams.items()}
    total = sum(masses.values())
    assert found.density == pytest.approx(total, rel=1e-13)
    assert found.weight_fractions is not None
    for name, mass in masses.items():
        assert found.weight_fractions[name] == pytest.approx(mass / total, rel=1e-12)
    expected = {
        "volume_fraction": (core, 0.05),
        "volume_fraction_of_solids": (core / 0.98, 0.05),
        "weight_fraction": (masses["grain"] / total, 0.2),
        "phr": (100 * masses["grain"] / masses["host"], 30.0),
    }[loading.split(" ")[0]]
    assert expected[0] == pytest.approx(expected[1], rel=1e-13)


@pytest.mark.parametrize(
    "keys", [ONE, f"{ONE}\nshape = {SPHEROID}", f'{ONE}\nshape = {SPHEROID}\norientation = "aligned"']
)
@pytest.mark.parametrize("shell", ["oxide", "salt", "metal"])
@pytest.mark.parametrize("core", ["metal", "oxide"])
def test_static_limits_are_those_of_a_very_low_frequency(core: str, shell: str, keys: str) -> None:
    """Conductors under insulators, insulators under conductors, and one conductor under another."""
    made = keys.replace('material = "oxide"', f'material = "{shell}"')
    mixture = compiled(made, old='material = "metal"\nvolume', new=f'material = "{core}"\nvolume')
    limits = mixture.limits({})
    low = mixture.response({}, np.array([1e-3])).permittivity[..., 0]
    assert np.all(limits.static.imag == 0.0) and not np.any(limits.conductivity)
    np.testing.assert_allclose(low, limits.static, rtol=1e-8)
    high = mixture.response({}, np.array([1e30])).permittivity[..., 0]
    np.testing.assert_allclose(high, limits.high_frequency, rtol=1e-8)


def test_a_conducting_host_conducts_around_coated_grains_and_through_salt() -> None:
    leak = ('permittivity.infinity = 2.25', 'permittivity.infinity = 2.25\npermittivity.terms.leak = '
            '{ model = "conduction", conductivity = "1e-3 S/m" }')  # fmt: skip
    salted = compiled(ONE.replace("oxide", "salt"), old=leak[0], new=leak[1]).limits({})
    low = compiled(ONE.replace("oxide", "salt"), old=leak[0], new=leak[1]).response({}, np.array([1.0, 2.0]))
    rate = low.permittivity.imag * np.array([1.0, 2.0]) * 8.8541878188e-12
    assert salted.conductivity == pytest.approx(rate[0], rel=1e-9)
    assert salted.plateau == pytest.approx(low.permittivity.real[0], rel=1e-9)
    closed = compiled(ONE, old=leak[0], new=leak[1]).limits({})
    filled = 0.05 * 1.4**3
    assert closed.conductivity == pytest.approx(1e-3 * 2 * (1 - filled) / (2 + filled), rel=1e-12)


def test_a_magnetic_core_under_a_plain_shell() -> None:
    magnetic = "permeability.infinity = 9.0\npermittivity.infinity = 4.0\n"
    mixture = compiled(ONE, old="permittivity.infinity = 4.0\n", new=magnetic)
    v, filled = 1.4**-3, 0.05 * 1.4**3
    ratio = v * 8 / 11
    grain = (1 + 2 * ratio) / (1 - ratio)
    lone = filled * (grain - 1) / (grain + 2)
    np.testing.assert_allclose(
        mixture.response({}, OMEGA).permeability, (1 + 2 * lone) / (1 - lone), rtol=1e-13
    )
    assert compiled(ONE).magnetic is False
