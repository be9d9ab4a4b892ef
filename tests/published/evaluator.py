"""Recipes written in a line or two, and their answers from the one evaluator."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from mixsim.mixture import Mixture
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


def pure(material: str, omega: ArrayLike) -> np.ndarray[Any, Any]:
    """Permittivity of one material of the library."""
    return permittivity(f'host = {{ material = "{material}" }}', omega)


def from_um(wavelength: ArrayLike) -> np.ndarray[Any, Any]:
    """Angular frequency of a vacuum wavelength in µm."""
    return TURN * SPEED_OF_LIGHT / (np.asarray(wavelength) * 1e-6)
