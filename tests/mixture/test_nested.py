"""Materials that are recipes: as the flat formula, at every depth, every number inside at work."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

import mixsim
from mixsim.errors import BadInput

GRAIN = """
host.material = "silica"
voids.volume_fraction = "30 %"
[materials]
silica = { density = "2.2 g/cm^3", permittivity.infinity = 3.8 }
"""
OUTER = """
band = { from = "1 GHz", to = "2 GHz", points = 3 }
host.material = "resin"
inclusions.filler = { material = "grain", volume_fraction = "20 %" }
materials.resin = { density = "1.2 g/cm^3", permittivity.infinity = 3.0 }
materials.grain.recipe = "grain.toml"
"""
ALIGNED = """
[inclusions.needles]
material = "silica"
volume_fraction = "1 %"
orientation = "aligned"
shape = { kind = "spheroid", aspect_ratio = 2 }
"""
PORES = "materials.grain.recipe.voids.volume_fraction"


def garnett(host: complex, grain: complex, f: float) -> complex:
    beta = (grain - host) / (grain + 2 * host)
    return host * (1 + 2 * f * beta) / (1 - f * beta)


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    (tmp_path / "grain.toml").write_text(GRAIN, encoding="utf-8")
    return tmp_path


def test_a_porous_grain_is_its_own_mixture(folder: Path) -> None:
    answer = mixsim.predict(mixsim.parse(OUTER, folder=folder))
    grain = garnett(3.8, 1.0, 0.3)
    assert answer.permittivity == pytest.approx(np.full(3, garnett(3.0, grain, 0.2)), rel=1e-14)
    assert answer.limits.static.real == pytest.approx(garnett(3.0, grain, 0.2).real, rel=1e-14)
    assert answer.composition.density == pytest.approx(0.8 * 1200 + 0.2 * 0.7 * 2200, rel=1e-14)


def test_a_recipe_in_its_place_is_the_same_as_one_in_a_file(folder: Path) -> None:
    inline = OUTER.replace(
        'materials.grain.recipe = "grain.toml"',
        """
        [materials.grain.recipe]
        host.material = "silica"
        voids.volume_fraction = "30 %"
        materials.silica = { density = "2.2 g/cm^3", permittivity.infinity = 3.8 }
        """,
    )
    ours, theirs = mixsim.parse(inline), mixsim.parse(OUTER, folder=folder)
    assert set(ours.leaves) == set(theirs.leaves)
    assert mixsim.predict(ours).permittivity.tolist() == mixsim.predict(theirs).permittivity.tolist()


@pytest.mark.parametrize("written", ["0 %", "55 %"])
def test_numbers_inside_are_set_and_swept_by_their_paths(folder: Path, written: str) -> None:
    porous = float(written.rstrip(" %")) / 100
    flat = garnett(3.0, garnett(3.8, 1.0, porous), 0.2)
    set_ = mixsim.predict(mixsim.parse(OUTER, folder=folder, settings={PORES: written}))
    assert set_.permittivity[0] == pytest.approx(flat, rel=1e-13)
    swept = mixsim.sweep(mixsim.parse(OUTER, folder=folder), {PORES: [0.1, porous]})
    assert swept.permittivity[1, 0] == pytest.approx(flat, rel=1e-13)
    assert swept.composition.density[1] == pytest.approx(set_.composition.density)
    grid = mixsim.sweep(
        mixsim.parse(OUTER, folder=folder),
        {PORES: [0.1, porous], "inclusions.filler.volume_fraction": [0.1, 0.2, 0.3]},
    )
    assert grid.permittivity[1, 1, 0] == pytest.approx(flat, rel=1e-13)


def test_an_uncertainty_inside_is_in_the_answer(folder: Path) -> None:
    recipe = mixsim.parse(OUTER, folder=folder, settings={PORES: "30 % ± 2 %"})
    pushed = mixsim.predict(recipe).pushed
    ends = [garnett(3.0, garnett(3.8, 1.0, f), 0.2).real for f in (0.32, 0.28)]
    assert pushed is not None and pushed.paths == (PORES,)
    assert pushed.real[0] == pytest.approx(abs(ends[0] - ends[1]) / 2, rel=1e-6)


def test_a_number_inside_is_found_from_a_reading(folder: Path) -> None:
    static = garnett(3.0, garnett(3.8, 1.0, 0.42), 0.2).real
    text = (
        OUTER
        + f'''
        measured.static = "{static!r} ± 0.001"
        unknowns."{PORES}" = ["0 %", "80 %"]
    '''
    )
    estimate = mixsim.invert(mixsim.parse(text, folder=folder)).estimates[PORES]
    assert estimate.value == pytest.approx(0.42, rel=1e-6)


def test_two_levels(folder: Path) -> None:
    """An agglomerate of porous grains, in a resin."""
    (folder / "agglomerate.toml").write_text(
        """
        host.material = "binder"
        inclusions.grain = { material = "grain", volume_fraction = "50 %" }
        materials.binder = { density = "1 g/cm^3", permittivity.infinity = 2.2 }
        materials.grain.recipe = "grain.toml"
        """,
        encoding="utf-8",
    )
    recipe = mixsim.parse(OUTER.replace("grain.toml", "agglomerate.toml"), folder=folder)
    deep = "materials.grain.recipe.materials.grain.recipe.voids.volume_fraction"
    assert deep in recipe.leaves
    for porous in (0.3, 0.5):
        inner = garnett(2.2, garnett(3.8, 1.0, porous), 0.5)
        answer = mixsim.sweep(recipe, {deep: [porous]}).permittivity[0, 0]
        assert answer == pytest.approx(garnett(3.0, inner, 0.2), rel=1e-13)


def test_a_conducting_shell_inside_keeps_the_static_limit(folder: Path) -> None:
    """A grain of conducting matter with voids conducts: a perfect conductor in the insulating resin."""
    (folder / "grain.toml").write_text(
        GRAIN.replace(
            "permittivity.infinity = 3.8",
            'permittivity = { infinity = 3.8, terms.dc = { model = "conduction", conductivity = "10 S/m" } }',
        ),
        encoding="utf-8",
    )
    limits = mixsim.predict(mixsim.parse(OUTER, folder=folder)).limits
    assert limits.static.real == pytest.approx(3.0 * (1 + 2 * 0.2) / (1 - 0.2), rel=1e-12)


def test_the_temperature_is_that_of_the_piece(folder: Path) -> None:
    warm = GRAIN.replace(
        "density =", 'temperature = "20 °C", temperature_coefficient = "1000 ppm/K", density ='
    )
    (folder / "grain.toml").write_text(warm, encoding="utf-8")
    recipe = mixsim.parse('conditions.temperature = "70 °C"' + OUTER, folder=folder)
    flat = garnett(3.0, garnett(3.8 * 1.05, 1.0, 0.3), 0.2)
    assert mixsim.predict(recipe).permittivity[0] == pytest.approx(flat, rel=1e-13)
    cold = mixsim.sweep(recipe, {"conditions.temperature": [293.15]}).permittivity[0, 0]
    assert cold == pytest.approx(garnett(3.0, garnett(3.8, 1.0, 0.3), 0.2), rel=1e-13)


def test_hollow_spheres_of_the_library() -> None:
    """A coated sphere: ε_w (1 + 2 f β)/(1 − f β); and its density is that of its wall."""
    recipe = mixsim.parse("""
        band.values = ["1 GHz"]
        host.material = "hollow-glass-sphere"
    """)
    answer = mixsim.predict(recipe)
    wall = 5.8 + 5.8j * 0.008
    assert answer.permittivity[0] == pytest.approx(garnett(wall, 1.0, 0.85), rel=1e-6)
    assert answer.composition.density == pytest.approx(375.0)
    denser = mixsim.parse(
        recipe.text, settings={"materials.hollow-glass-sphere.recipe.voids.volume_fraction": "60 %"}
    )
    assert mixsim.predict(denser).composition.density == pytest.approx(1000.0)


@pytest.mark.parametrize(
    ("inner", "outer", "found"),
    [
        (GRAIN, OUTER.replace("grain.toml", "gone.toml"), "no such file 'gone.toml'"),
        (GRAIN.replace("30 %", "130 %"), OUTER, "grain.toml:3: voids.volume_fraction"),
        (GRAIN + 'grain.recipe = "grain.toml"', OUTER, "a circle: grain.toml → grain.toml"),
        (GRAIN, OUTER + "materials.grain.permittivity.infinity = 2", "is given twice"),
        (GRAIN, OUTER + "materials.grain.permeability.infinity = 2", "permeability beside recipe"),
        (GRAIN, OUTER + "materials.grain.static = 2", "static beside recipe"),
        (GRAIN.replace("[materials]", ALIGNED + "\n[materials]"), OUTER, "aligned grains inside a material"),
    ],
)
def test_what_cannot_be_nested(folder: Path, inner: str, outer: str, found: str) -> None:
    (folder / "grain.toml").write_text(inner, encoding="utf-8")
    with pytest.raises(BadInput) as error:
        mixsim.parse(outer, folder=folder)
    assert found in str(error.value)


def test_a_fault_inside_stands_where_it_is() -> None:
    text = """
host.material = "a"
[materials.a.recipe]
host.material = "b"
voids.volume_fraction = "130 %"
[materials.a.recipe.materials.b]
permittivity.infinity = 2
"""
    with pytest.raises(BadInput, match=r"recipe:5: materials\.a\.recipe\.voids\.volume_fraction"):
        mixsim.parse(text)
