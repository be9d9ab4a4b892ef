"""The JSON Schema that editors read takes what the recipe takes."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import jsonschema
import pytest
import tomli

from mixsim.recipe import Schema, library

ROOT = Path(__file__).parents[2]
RECIPES = sorted([*ROOT.glob("configs/*.toml"), *ROOT.glob("examples/*/recipe.toml")])
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
    ],
)
def test_refuses_what_the_recipe_refuses(broken: str) -> None:
    assert errors(tomli.loads(broken))
