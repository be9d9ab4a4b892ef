"""The JSON Schema that editors read takes what the recipe takes."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import jsonschema
import pytest
import tomli

from mixsim.errors import BadInput
from mixsim.recipe import Schema, library, parse

ROOT = Path(__file__).parents[2]
PLACES = ("configs/*.toml", "examples/*/recipe.toml", "mixsim/recipe/drafts/*.toml")
RECIPES = sorted(file for place in PLACES for file in ROOT.glob(place))
VALIDATOR = jsonschema.Draft202012Validator(Schema.model_json_schema(by_alias=True))


def errors(content: dict[str, Any]) -> list[str]:
    return [error.message for error in VALIDATOR.iter_errors(content)]


@pytest.mark.parametrize("file", RECIPES, ids=lambda file: f"{file.parent.name}/{file.stem}")
def test_takes_every_shipped_recipe(file: Path) -> None:
    assert errors(tomli.loads(file.read_text(encoding="utf-8"))) == []


def test_takes_every_material_of_the_library() -> None:
    assert errors({"host": {"material": "gold"}, "materials": dict(library.definitions())}) == []


@pytest.mark.parametrize(
    "broken",
    [
        "title = 'no host'",
        "host = { material = 'a', colour = 'red' }",
        "host.material = 'a'\nmaterials.a.permittivity.terms.t = { model = 'druude' }",
        "host.material = 'a'\ninclusions.i = { material = 'a', volume_fraction = [0.1] }",
        "host.material = 'a'\nband.points = 'many'",
        "host.material = 'a'\nmaterials.a = { density = 1.2, permittivity.infinity = 2 }",
        "host.material = 'a'\nmaterials.a.permittivity.terms.t = { model = 'drude', plsma = '1 eV' }",
        "host.material = 'air'\nunknowns = { 'voids.volume_fraction' = ['0 %'] }",
    ],
)
def test_refuses_what_the_recipe_refuses(broken: str) -> None:
    assert errors(tomli.loads(broken))
    with pytest.raises(BadInput):
        parse(broken)


@pytest.mark.parametrize(
    "sound",
    [
        "host.material = 'a'\nmaterials.a.permittivity.infinity = '2.25 ± 0.01'",
        "host.material = 'air'\nvoids.volume_fraction = 0.01\n"
        "unknowns = { 'voids.volume_fraction' = [0, '9 %'] }",
        "host.material = 'a'\nmaterials.a.based_on = 'gold'\n"
        "materials.a.permittivity.terms.free.damping = '0.1 eV'",
    ],
)
def test_takes_numbers_in_quotes_and_changes_of_inherited_terms(sound: str) -> None:
    assert errors(tomli.loads(sound)) == []
    parse(sound)
