"""Recipes written in a line or two, and their answers from the one evaluator."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from mixsim.mixing import RULES
from mixsim.mixture import Mixture
from mixsim.parameter import Choice
from mixsim.recipe import parse
from mixsim.units import SPEED_OF_LIGHT

TURN = 2.0 * np.pi


def mixture(text: str) -> Mixture:
    """The mixture of a recipe given as text."""
    return parse(text).compile()


def permittivity(
    of: str | Mixture, omega: ArrayLike, values: Mapping[str, ArrayLike] | None = None
) -> np.ndarray[Any, Any]:
    """Permittivity at some angular frequencies; the shape is that of the answer."""
    compiled = mixture(of) if isinstance(of, str) else of
    return np.asarray(compiled.response(values or {}, np.atleast_1d(omega)).permittivity)


def mixing(rule: str) -> str:
    """TOML that chooses a rule, with the middle value or first word of each parameter of its own."""
    lines = [f'mixing.rule = "{rule}"']
    for name, parameter in RULES[rule].parameters.items():
        if isinstance(parameter, Choice):
            lines.append(f'mixing.{name} = "{parameter.words[0]}"')
        else:
            lines.append(
                f"mixing.{name} = {0.4 * (parameter.minimum or 0.0) + 0.6 * min(parameter.maximum, 5.0)}"
            )
    return "\n".join(lines) + "\n"


def pure(material: str, omega: ArrayLike) -> np.ndarray[Any, Any]:
    """Permittivity of one material of the library."""
    return permittivity(f'host = {{ material = "{material}" }}', omega)


def from_um(wavelength: ArrayLike) -> np.ndarray[Any, Any]:
    """Angular frequency of a vacuum wavelength in µm."""
    return TURN * SPEED_OF_LIGHT / (np.asarray(wavelength) * 1e-6)
