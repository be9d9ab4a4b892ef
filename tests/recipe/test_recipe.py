"""Good recipes: numbers by path, what is set, what is inherited, what the library adds."""

from __future__ import annotations

from pathlib import Path

import pytest

import mixsim
from mixsim.recipe import library, load, parse
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


def test_a_number_of_the_library_can_be_set() -> None:
    recipe = parse(
        'host.material = "gold"', settings={"materials.gold.permittivity.terms.free.damping": "0.1 eV"}
    )
    plain = parse('host.material = "gold"')
    changed = {path for path, leaf in recipe.leaves.items() if leaf.value != plain.leaves[path].value}
    assert changed == {"materials.gold.permittivity.terms.free.damping"}
    assert recipe.digest != plain.digest


def test_a_definition_of_the_same_name_replaces_or_is_based_on() -> None:
    alone = parse('host.material = "gold"\nmaterials.gold.permittivity.infinity = 9.0\n')
    assert not [path for path in alone.leaves if "terms" in path]
    based = parse('host.material = "g"\n[materials.g]\nbased_on = "gold"\npermittivity.infinity = 9.0\n')
    assert based.leaves["materials.g.permittivity.infinity"].value == 9.0
    assert len([path for path in based.leaves if "terms" in path]) > 15


def test_another_description_or_model_takes_nothing_over() -> None:
    index = parse(
        'host.material = "g"\n[materials.g]\nbased_on = "gold"\nindex = { model = "constant", n = 1.5 }\n'
    )
    assert not [path for path in index.leaves if "permittivity" in path]
    assert index.leaves["materials.g.density"].value == 19300.0
    term = parse(
        'host.material = "g"\n[materials.g]\nbased_on = "gold"\n'
        'permittivity.terms.free = { model = "debye", step = 1.0, relaxation_time = "1 ps" }\n'
    )
    free = {path.rsplit(".", 1)[1] for path in term.leaves if ".free." in path}
    assert free == {"step", "relaxation_time"}
    level = parse(
        'host.material = "g"\n[materials.g]\nbased_on = "gold"\npermittivity = { susceptibility = 8.0 }\n'
    )
    assert "materials.g.permittivity.infinity" not in level.leaves


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
