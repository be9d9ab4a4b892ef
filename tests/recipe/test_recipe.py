"""Good recipes: numbers by path, what is set, what is inherited, what the library adds."""

from __future__ import annotations

from pathlib import Path

import pytest

import mixsim
from mixsim.recipe import library, load, parse
from mixsim.recipe.leaves import Span
from mixsim.units import SPEED_OF_LIGHT

ROOT = Path(__file__).parents[2]
RECIPES = sorted([*ROOT.glob("configs/*.toml"), *ROOT.glob("examples/*/recipe.toml")])
TEXT = """
[band]
from = "400 nm"
to = "800 nm"
[host]
material = "acrylic"
[inclusions.ato]
material = "ato"
volume_fraction = "4.0 % ± 0.2 %"
[materials.ato]
density = "6.6 ± 0.1 g/cm^3"
permittivity.susceptibility = 3.0
permittivity.terms.carriers = { model = "drude", plasma = "1.55 eV", damping = "0.12 eV" }
"""


def test_every_number_by_its_path_in_si() -> None:
    leaves = parse(TEXT).leaves
    assert leaves["band.from"].value == pytest.approx(2e9 * 3.141592653589793 * SPEED_OF_LIGHT / 400)
    fraction = leaves["inclusions.ato.volume_fraction"]
    assert (fraction.value, fraction.std, fraction.written) == (0.04, 0.002, "4.0 % ± 0.2 %")
    assert leaves["materials.ato.density"].value == 6600.0
    assert leaves["materials.acrylic.density"].written
    assert not [path for path in leaves if "acrylic" in path and "permittivity" in path]
    assert not [path for path in leaves if "from_" in path]
    density = leaves["materials.ato.density"]
    assert (density.std, density.dimension) == (100.0, "density")
    assert [path for path in leaves if path.startswith("materials.ato")] == [
        "materials.ato.density",
        "materials.ato.permittivity.susceptibility",
        "materials.ato.permittivity.terms.carriers.plasma",
        "materials.ato.permittivity.terms.carriers.damping",
    ]


@pytest.mark.parametrize("file", RECIPES, ids=lambda file: f"{file.parent.name}/{file.stem}")
def test_shipped_recipes_load_and_every_number_has_a_range(file: Path) -> None:
    recipe = load(file)
    assert recipe.leaves.keys() == recipe.ranges.keys()
    for path, leaf in recipe.leaves.items():
        assert recipe.ranges[path].holds(leaf.value)
        assert recipe.ranges[path].dimension in (leaf.dimension, "rate")


@pytest.mark.parametrize("name", library.names())
def test_materials_of_the_library_load(name: str) -> None:
    assert parse(f'host.material = "{name}"').schema.materials[name].title


def test_items_of_lists_count_from_zero() -> None:
    leaves = parse('host.material = "fused-silica"').leaves
    assert leaves["materials.fused-silica.index.strengths.2"].value == 0.8974794


def test_what_is_set_is_checked_and_replaces() -> None:
    recipe = parse(TEXT, settings={"inclusions.ato.volume_fraction": "7 %", "mixing.rule": "bruggeman"})
    assert recipe.leaves["inclusions.ato.volume_fraction"].value == 0.07
    assert recipe.schema.mixing.rule == "bruggeman"
    listed = parse(TEXT, settings={"unknowns": '{ "inclusions.ato.volume_fraction" = ["0 %", "9 %"] }'})
    assert listed.schema.unknowns
    item = parse(
        'host.material = "fused-silica"', settings={"materials.fused-silica.index.strengths.2": "0.9"}
    )
    assert item.leaves["materials.fused-silica.index.strengths.2"].value == 0.9
    assert item.leaves["materials.fused-silica.index.strengths.1"].value == 0.4079426


def gold(text: str, settings: dict[str, str] | None = None) -> dict[str, float]:
    """Numbers of a material that is based on gold, without the name of the material."""
    recipe = parse(f'host.material = "g"\n[materials.g]\nbased_on = "gold"\n{text}', settings=settings)
    return {path.removeprefix("materials.g."): leaf.value for path, leaf in recipe.leaves.items()}


FREE = "permittivity.terms.free"


def test_a_number_of_the_library_can_be_set() -> None:
    recipe = parse('host.material = "gold"', settings={f"materials.gold.{FREE}.damping": "0.1 eV"})
    plain = parse('host.material = "gold"')
    changed = {path for path, leaf in recipe.leaves.items() if leaf.value != plain.leaves[path].value}
    assert changed == {f"materials.gold.{FREE}.damping"}
    assert recipe.digest != plain.digest
    assert recipe.schema.materials["gold"].based_on == "gold"


def test_a_material_of_the_library_can_be_set_in_other_words() -> None:
    index = parse(
        'host.material = "gold"', settings={"materials.gold.index": '{ model = "constant", n = 2 }'}
    )
    assert "materials.gold.index.n" in index.leaves
    assert not [path for path in index.leaves if "permittivity" in path]
    carriers = {
        f"materials.gold.{FREE}.carrier_density": "5.9e22 cm^-3",
        f"materials.gold.{FREE}.effective_mass": "1",
    }
    assert f"materials.gold.{FREE}.strength" not in parse('host.material = "gold"', settings=carriers).leaves


def test_an_item_of_an_inherited_list_can_be_set() -> None:
    text = 'host.material = "g"\nmaterials.g.based_on = "fused-silica"\n'
    plain, path = parse(text).leaves, "materials.g.index.strengths.1"
    changed = parse(text, settings={path: "0.5"}).leaves
    assert {p: leaf.value for p, leaf in changed.items() if leaf != plain[p]} == {path: 0.5}


def test_tables_that_are_not_there_can_be_set() -> None:
    grain = {"inclusions.more.material": "silver", "inclusions.more.volume_fraction": "1 %"}
    more = parse(
        TEXT,
        settings={
            **grain,
            "voids.volume_fraction": "2 %",
            "materials.m.index": '{ model = "constant", n = 1 }',
        },
    )
    assert more.leaves["voids.volume_fraction"].value == 0.02
    assert more.schema.inclusions["more"].material == "silver"
    assert more.leaves["materials.m.index.n"].value == 1.0


def test_a_range_to_find_can_be_set_by_its_path() -> None:
    setting = {"unknowns.inclusions.ato.volume_fraction": '["0 %", "9 %"]'}
    assert parse(TEXT, settings=setting).schema.unknowns == {
        "inclusions.ato.volume_fraction": Span("0 %", "9 %")
    }


@pytest.mark.parametrize(
    ("written", "value"),
    [("2.5", 2.5), ('"2.5 ± 0.1"', 2.5), ("2.5 ± 0.1", 2.5), ("+/-", None)],
)
def test_what_is_set_is_toml_or_else_text(written: str, value: float | None) -> None:
    path = "materials.ato.permittivity.susceptibility"
    if value is None:
        with pytest.raises(mixsim.BadInput):
            parse(TEXT, settings={path: written})
    else:
        assert parse(TEXT, settings={path: written}).leaves[path].value == value


def test_a_definition_of_the_same_name_replaces_or_is_based_on() -> None:
    alone = parse('host.material = "gold"\nmaterials.gold.permittivity.infinity = 9.0\n')
    assert not [path for path in alone.leaves if "terms" in path]
    based = parse('host.material = "g"\n[materials.g]\nbased_on = "gold"\npermittivity.infinity = 9.0\n')
    assert based.leaves["materials.g.permittivity.infinity"].value == 9.0
    assert len([path for path in based.leaves if "terms" in path]) > 15
    assert based.schema.materials["g"].source and not based.schema.materials["g"].check


def test_a_change_of_one_number_keeps_the_rest() -> None:
    plain, changed = gold(""), gold(f"{FREE}.damping = '0.1 eV'\ndensity = '19 g/cm^3'")
    assert plain.keys() == changed.keys()
    assert {path for path in plain if plain[path] != changed[path]} == {f"{FREE}.damping", "density"}


def test_another_description_drops_the_inherited_one() -> None:
    index = gold('index = { model = "constant", n = 1.5 }')
    assert not [path for path in index if path.startswith("permittivity")]
    assert index["density"] == 19300.0


def test_another_model_takes_nothing_over() -> None:
    changed = gold(f'{FREE} = {{ model = "debye", step = 1.0, relaxation_time = "1 ps" }}')
    assert {path for path in changed if path.startswith(FREE)} == {f"{FREE}.step", f"{FREE}.relaxation_time"}


def test_the_level_in_other_words_keeps_the_terms() -> None:
    changed, plain = gold("permittivity.susceptibility = 8.0"), gold("")
    assert changed.keys() ^ plain.keys() == {"permittivity.infinity", "permittivity.susceptibility"}


def test_a_term_in_other_words_drops_only_what_they_replace() -> None:
    changed = gold(f"{FREE} = {{ carrier_density = '5.9e22 cm^-3', effective_mass = 1.0 }}")
    own = {path.rsplit(".", 1)[1] for path in changed if path.startswith(f"{FREE}.")}
    assert own == {"carrier_density", "effective_mass", "damping"}
    assert changed["permittivity.terms.band1.strength"] == gold("")["permittivity.terms.band1.strength"]


def test_a_term_may_leave_the_shared_plasma_of_its_base() -> None:
    own = gold(f"{FREE}.plasma = '8 eV'")
    assert own.keys() - gold("").keys() == {f"{FREE}.plasma"}
    assert own[f"{FREE}.strength"] == 0.76
    other = gold(f"{FREE} = {{ conductivity = '4e7 S/m', collision_time = '12 fs' }}")
    assert {f"{FREE}.strength", f"{FREE}.damping"} & other.keys() == set()


def test_a_base_may_have_a_base() -> None:
    text = 'host.material = "c"\nmaterials.c.based_on = "b"\n[materials.b]\nbased_on = "gold"\n'
    leaves = parse(text + 'density = "1 g/cm^3"\n').leaves
    assert leaves["materials.c.density"].value == 1000.0
    assert "materials.c.permittivity.terms.free.strength" in leaves


def test_tables_lie_beside_the_recipe(tmp_path: Path) -> None:
    (tmp_path / "data").mkdir()
    (tmp_path / "data" / "m.csv").write_text(
        "# convention: exp(-iwt)\nwavelength [nm], n, k\n500,1.5,0\n600,1.4,0\n"
    )
    (tmp_path / "r.toml").write_text('host.material = "m"\nmaterials.m.table = "data/m.csv"\n')
    assert load(tmp_path / "r.toml").tables["m"].source == "m.csv"


def test_numbers_of_options_are_held_to_dimension_and_range() -> None:
    recipe = parse(TEXT)
    path = "materials.ato.permittivity.terms.carriers.plasma"
    assert recipe.read(path, "800 nm", option="--vary").dimension == "spectral"
    for path_, found in (("band.from", "no number of the mixture"), ("ato.density", "unknown path")):
        with pytest.raises(mixsim.BadInput, match=found):
            recipe.read(path_, "500 nm", option="--vary")
    for written, found in (("2", "2"), ("-1 eV", "out of range"), ("3 kg", "kg")):
        with pytest.raises(mixsim.BadInput) as refused:
            recipe.read(path, written, option="--vary")
        (fault,) = refused.value.faults
        assert (fault.file, fault.path) == ("command line", "--vary")
        assert found in fault.found
        assert path in fault.found


def test_values_are_shown_in_the_unit_of_the_recipe() -> None:
    recipe = parse(TEXT)
    assert recipe.show("inclusions.ato.volume_fraction", 0.05, 0.002) == "5.0 ± 0.2 %"
    assert recipe.show("materials.ato.density", 6500.0) == "6.5 g/cm^3"


def test_the_digest_follows_text_and_settings() -> None:
    assert parse(TEXT).digest == parse(TEXT).digest
    assert parse(TEXT).digest != parse(TEXT + "# x\n").digest
    assert parse(TEXT).digest != parse(TEXT, settings={"title": "other"}).digest
