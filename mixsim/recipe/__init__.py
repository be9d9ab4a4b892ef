"""The recipe: schema, paths, library, faults."""

from __future__ import annotations

from mixsim.recipe.agreement import loading_of
from mixsim.recipe.layers import SIZE_STEP, shells_of
from mixsim.recipe.recipe import Recipe, load, parse
from mixsim.recipe.schema import Coating, Schema
from mixsim.recipe.settings import COMMAND_LINE, settings_of

__all__ = [
    "COMMAND_LINE",
    "SIZE_STEP",
    "Coating",
    "Recipe",
    "Schema",
    "load",
    "loading_of",
    "parse",
    "settings_of",
    "shells_of",
]
