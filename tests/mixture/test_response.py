"""The evaluator: shapes, blocks, a naive transcription, and every number of every shipped recipe at work."""

from __future__ import annotations

import cmath
import math
from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

import mixsim
from mixsim.errors import Refusal
from mixsim.mixture import Mixture, blocks
from mixsim.mixture.spectra import TermSum

ROOT = Path(__file__).parents[2]
RECIPES = sorted([*ROOT.glob("configs/*.toml"), *ROOT.glob("examples/*/recipe.toml")])
OMEGA = np.linspace(2e14, 4e15, 50)
TEXT = """
host.material = "matrix"
[inclusions.grain]
material = "grain"
volume_fraction = "10 %"
{shape}
[voids]
volume_fraction = "2 %"
[materials.matrix]
permittivity.infinity = 2.25
[materials.grain]
permittivity.infinity = 4.0
permittivity.terms.free = {{ model = "drude", plasma = "1.5 eV", damping = "0.1 eV" }}
permeability.infinity = 1.0
permeability.terms.spin = {{ model = "lorentz", step = 2.0, resonance = "0.8 eV", damping = "0.2 eV" }}
"""
SPHEROID = 'shape = { kind = "spheroid", aspect_ratio = 3.0 }\norientation = "aligned"'
LOADING, PLASMA = "inclusions.grain.volume_fraction", "materials.grain.permittivity.terms.free.plasma"
RATIO = "inclusions.grain.shape.aspect_ratio"


def mixture(shape: str = "") -> Mixture:
    return mixsim.parse(TEXT.format(shape=shape)).compile()


@pytest.mark.parametrize("shape", ["", SPHEROID], ids=["spheres", "aligned"])
@pytest.mark.parametrize("batch", [(), (4,), (3, 1), (1, 5), (2, 3, 4)])
def test_shapes_and_every_element_by_itself(shape: str, batch: tuple[int, ...]) -> None:
    compiled, random = mixture(shape), np.random.default_rng(3)
    values = {LOADING: random.uniform(0.0, 0.3, batch), PLASMA: random.uniform(1e15, 4e15, batch[-1:])}
    values = {path: np.asarray(value) for path, value in values.items()}
    for value in values.values():
        value.setflags(write=False)
    before = {path: value.copy() for path, value in values.items()}
    full = np.broadcast_shapes(*(value.shape for value in values.values()))
    axes = (3,) if shape else ()
    answer = compiled.response(values, OMEGA)
    assert answer.permittivity.shape == answer.permeability.shape == (*full, *axes, OMEGA.size)
    limits, composition = compiled.limits(values), compiled.composition(values)
    assert limits.static.shape == (*full, *axes)
    assert composition.volume_fractions["grain"].shape == full
    for index in np.ndindex(full):
        one = {path: float(np.broadcast_to(value, full)[index]) for path, value in values.items()}
        alone = compiled.response(one, OMEGA)
        assert np.array_equal(answer.permittivity[index], alone.permittivity)
        assert np.array_equal(answer.permeability[index], alone.permeability)
        assert np.array_equal(limits.static[index], compiled.limits(one).static)
    assert all(np.array_equal(values[path], before[path]) for path in values)


@pytest.mark.parametrize("shape", ["", SPHEROID], ids=["spheres", "aligned"])
@pytest.mark.parametrize("batch", [(7,), (1, 7), (3, 2)])
def test_blocks_change_nothing(shape: str, batch: tuple[int, ...], monkeypatch: pytest.MonkeyPatch) -> None:
    compiled = mixture(shape)
    values = {LOADING: np.linspace(0.0, 0.3, math.prod(batch)).reshape(batch)}
    whole = compiled.response(values, OMEGA)
    for size in (1, 7, 50, 120):
        monkeypatch.setattr(blocks, "_BLOCK", size)
        parts = compiled.response(values, OMEGA)
        assert parts.permittivity == pytest.approx(whole.permittivity, rel=1e-13)
        assert parts.permeability == pytest.approx(whole.permeability, rel=1e-13)


def test_constants_keep_the_shape_and_nan_stays_nan() -> None:
    constant = mixsim.parse('host.material = "m"\nmaterials.m.permittivity.infinity = 2.0\n').compile()
    answer = constant.response({}, OMEGA)
    assert answer.permittivity.shape == answer.permeability.shape == OMEGA.shape
    assert np.all(answer.permeability == 1.0)
    missing = mixture().response({LOADING: [0.1, np.nan]}, OMEGA).permittivity
    assert np.isfinite(missing[0]).all()
    assert np.isnan(missing[1]).all()


def test_aligned_grains_polarise_most_along_their_axis() -> None:
    limits = mixture(SPHEROID).limits({})
    assert limits.static[0] == limits.static[1]
    assert limits.static[2].real > limits.static[0].real
    round_ = mixture(SPHEROID).limits({RATIO: 1.0}).static
    assert round_ == pytest.approx(np.full(3, mixture().limits({}).static), rel=1e-9)


def test_what_cannot_be_asked_is_refused() -> None:
    with pytest.raises(Refusal, match=r"inclusions\.grain\.volume_fraction"):
        mixture().response({"inclusions.grian.volume_fraction": 0.1}, OMEGA)
    with pytest.raises(Refusal, match="do not broadcast"):
        mixture().response({LOADING: np.zeros(3), PLASMA: np.ones(4)}, OMEGA)
    with pytest.raises(Refusal, match="one axis"):
        mixture().response({}, OMEGA.reshape(5, 10))


def test_what_does_not_vary_is_computed_once(monkeypatch: pytest.MonkeyPatch) -> None:
    seen: list[frozenset[str]] = []
    plain = TermSum.at
    monkeypatch.setattr(
        TermSum, "at", lambda self, x, omega: seen.append(self.paths) or plain(self, x, omega)
    )
    monkeypatch.setattr(blocks, "_BLOCK", 2 * OMEGA.size)
    mixture().response({PLASMA: np.linspace(1e15, 2e15, 10)}, OMEGA)
    varied = [paths for paths in seen if PLASMA in paths]
    assert len(varied) == 5  # once for each block of two
    assert len(seen) - len(varied) == 2  # host and permeability of the grain, once


EXEMPT = ("band.", "measured.", ".valid.", ".diameter", ".static", ".high_frequency", ".molar_mass")


@pytest.mark.parametrize("file", RECIPES, ids=lambda file: f"{file.parent.name}/{file.stem}")
def test_every_number_does_something_and_is_what_setting_it_gives(file: Path) -> None:
    recipe = mixsim.load(file)
    compiled = recipe.compile()
    omega = (
        np.geomspace(recipe.leaves["band.from"].value, recipe.leaves["band.to"].value, 5)
        if ("band.from" in recipe.leaves)
        else np.array([recipe.leaves["band.values.0"].value])
    )
    inside = omega * (1 + 1e-9 * np.array([1, 0, 0, 0, -1])[: omega.size])
    plain = compiled.response({}, inside), compiled.composition({}), compiled.limits({})
    for path, leaf in recipe.leaves.items():
        if any(word in path for word in EXEMPT):
            continue
        value = leaf.value * 1.01 if leaf.value else 0.01
        answer = compiled.response({path: value}, inside)
        densities = compiled.composition({path: value}).density, plain[1].density
        changed = (
            not np.array_equal(answer.permittivity, plain[0].permittivity)
            or not np.array_equal(answer.permeability, plain[0].permeability)
            or (densities[0] is not None and densities[0] != densities[1])
            or path.endswith("density")  # of a material none of whose loadings is by weight
        )
        assert changed, path
        fresh = recipe.leaves | {path: replace(leaf, value=value)}
        twin = replace(recipe, leaves=fresh).compile().response({}, inside)
        assert np.array_equal(twin.permittivity, answer.permittivity), path


def test_a_naive_transcription() -> None:
    """Two kinds of grain and voids in a doped host, in plain complex numbers, one frequency at a time."""
    text = """
        host.material = "glass"
        [inclusions.a]
        material = "metal"
        volume_fraction_of_solids = "3 %"
        [inclusions.b]
        material = "ceramic"
        volume_fraction = "12 %"
        shape = { kind = "spheroid", aspect_ratio = 2.0 }
        [voids]
        volume_fraction = "4 %"
        [dopants.ion]
        weight_fraction = "0.5 %"
        molar_mass = "74.93 g/mol"
        ions_per_formula = 2
        local_field = "virtual-cavity"
        terms.red = { model = "lorentz", strength = 0.01, resonance = "2.0 eV", damping = "0.2 eV" }
        [materials.glass]
        density = "2.5 g/cm^3"
        index = { model = "sellmeier", strengths = [1.2, 0.9], resonance_wavelengths = ["0.1 µm", "10 µm"] }
        [materials.metal]
        permittivity.susceptibility = 3.0
        [materials.metal.permittivity.terms.free]
        model = "drude"
        carrier_density = "1e22 cm^-3"
        effective_mass = 1.1
        damping = "0.1 eV"
        [materials.ceramic]
        index = { model = "cauchy", a = 2.0, b = "0.01 µm^2" }
    """
    light, ev = 299792458.0, 1.602176634e-19 * 2 * math.pi / 6.62607015e-34
    square = 1.602176634e-19**2 / (8.8541878188e-12 * 9.1093837139e-31)
    prolate = math.sqrt(1 - 1 / 4.0)
    along = (1 - prolate**2) / prolate**2 * (math.atanh(prolate) / prolate - 1)

    def glass(w: float) -> float:
        um = 2e6 * math.pi * light / w
        return 1 + 1.2 * um**2 / (um**2 - 0.01) + 0.9 * um**2 / (um**2 - 100.0)

    ions = 0.005 * 2500.0 * 6.02214076e23 * 2 / 0.07493
    felt = ((glass(2.0 * ev) + 2) / 3) ** 2
    f_a, f_b, f_v = 0.03 * 0.96, 0.12, 0.04
    for w in (1.5e15, 2.9e15, 3.04e15, 4.0e15):
        h = glass(w) + square * ions * 0.01 * felt / ((2.0 * ev) ** 2 - w * w - 0.2j * ev * w)
        metal = 4.0 - square * 1e28 / 1.1 / (w * w + 0.1j * ev * w)
        um = 2e6 * math.pi * light / w
        ceramic = (2.0 + 0.01 / um**2) ** 2
        above: complex = 0.0
        below: complex = 1.0 - f_a - f_b - f_v
        for f, e, factors in (
            (f_a, metal, (1 / 3,) * 3),
            (f_b, ceramic, (along, (1 - along) / 2, (1 - along) / 2)),
            (f_v, 1.0, (1 / 3,) * 3),
        ):
            field = sum(h / (h + n * (e - h)) for n in factors) / 3
            above += f * e * field
            below += f * field
        expected = (above + (1.0 - f_a - f_b - f_v) * h) / below
        found = mixsim.parse(text).compile().response({}, np.array([w])).permittivity[0]
        assert cmath.isclose(found, expected, rel_tol=1e-11)


SHARED = """
host.material = "m"
[materials.m.permittivity]
infinity = 1.0
plasma = "9 eV"
[materials.m.permittivity.terms]
free = { model = "drude", strength = 0.7, damping = "0.05 eV" }
band = { model = "lorentz", strength = 0.3, resonance = "3 eV", damping = "0.9 eV" }
own = { model = "lorentz", step = 0.5, resonance = "5 eV", damping = "0.9 eV" }
"""


def test_terms_share_a_plasma_frequency_that_they_do_not_give() -> None:
    """The generalised form: one ωp, strengths; a term that gives its own keeps it."""
    each = SHARED.replace('plasma = "9 eV"\n', "").replace("strength", 'plasma = "9 eV", strength')
    shared, apart = mixsim.parse(SHARED).compile(), mixsim.parse(each).compile()
    assert np.array_equal(shared.response({}, OMEGA).permittivity, apart.response({}, OMEGA).permittivity)
    doubled = shared.response({"materials.m.permittivity.plasma": 2.0}, OMEGA).permittivity
    assert not np.array_equal(doubled, shared.response({}, OMEGA).permittivity)


def test_a_plasma_frequency_that_no_term_shares_is_refused() -> None:
    with pytest.raises(mixsim.BadInput, match="no term shares"):
        mixsim.parse(
            'host.material = "m"\nmaterials.m.permittivity = { infinity = 2.0, plasma = "9 eV", terms = '
            '{ a = { model = "lorentz", step = 0.5, resonance = "5 eV", damping = "0.9 eV" } } }\n'
        )


@pytest.mark.parametrize(
    ("model", "quantity"), [("drude", "permeability"), ("landau-lifshitz-gilbert", "permittivity")]
)
def test_terms_stand_only_where_physics_allows_them(model: str, quantity: str) -> None:
    text = f"""
        host.material = "m"
        materials.m.permittivity.infinity = 2.0
        materials.m.permeability.infinity = 1.0
        materials.m.{quantity}.terms.t.model = "{model}"
    """
    with pytest.raises(mixsim.BadInput, match=f"a {model} term in the {quantity}"):
        mixsim.parse(text)
