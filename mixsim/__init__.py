"""Permittivity and permeability of dielectric mixtures from one recipe: predict, sweep, invert.

A recipe is a tree of named numbers; one function maps them and a frequency axis to the response of the
mixture, and every analysis asks that function::

    recipe = mixsim.load("recipe.toml")
    prediction = mixsim.predict(recipe)
    response = recipe.compile().response({"inclusions.ato.volume_fraction": [0.02, 0.04]}, omega)

Everything is loaded when it is first used, so that importing mixsim stays fast.
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from mixsim.analysis import audit, fit, invert, judge, predict, sweep, weigh
    from mixsim.errors import BadInput, MixsimError, Refusal
    from mixsim.recipe import Recipe, load, parse

__version__ = "0.1.0"

_HOMES = {
    "BadInput": "mixsim.errors",
    "MixsimError": "mixsim.errors",
    "Recipe": "mixsim.recipe",
    "Refusal": "mixsim.errors",
    "audit": "mixsim.analysis",
    "fit": "mixsim.analysis",
    "invert": "mixsim.analysis",
    "judge": "mixsim.analysis",
    "load": "mixsim.recipe",
    "parse": "mixsim.recipe",
    "predict": "mixsim.analysis",
    "sweep": "mixsim.analysis",
    "weigh": "mixsim.analysis",
}

__all__ = [
    "BadInput",
    "MixsimError",
    "Recipe",
    "Refusal",
    "__version__",
    "audit",
    "fit",
    "invert",
    "judge",
    "load",
    "parse",
    "predict",
    "sweep",
    "weigh",
]


def __getattr__(name: str) -> Any:
    if name not in _HOMES:
        raise AttributeError(f"module 'mixsim' has no attribute {name!r}")
    return getattr(import_module(_HOMES[name]), name)


def __dir__() -> list[str]:
    return sorted([*globals(), *_HOMES])
