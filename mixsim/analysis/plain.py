"""Answers as plain JSON values: complex numbers in two parts, null where there is no value."""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import ArrayLike

import mixsim
from mixsim.recipe import Recipe


def plain(values: ArrayLike) -> Any:
    """Float or nested lists of floats; null in place of each NaN and infinity.

    Examples
    --------
    >>> plain([1.0, float("nan")])
    [1.0, None]
    """
    array = np.asarray(values, dtype=float)
    if np.isfinite(array).all():
        return array.tolist()
    blanked = array.astype(object)
    blanked[~np.isfinite(array)] = None
    return blanked.tolist()


def complex_parts(values: ArrayLike) -> Any:
    """Real and imaginary part; null as a whole for a single number that is none."""
    array = np.asarray(values, dtype=complex)
    if array.ndim == 0 and not np.isfinite(array):
        return None
    whole = np.where(np.isfinite(array), array, np.nan)
    return {"real": plain(whole.real), "imag": plain(np.where(np.isnan(whole), np.nan, whole.imag))}


def provenance(recipe: Recipe, seed: int | None = None) -> dict[str, Any]:
    """What made an answer."""
    return {"version": mixsim.__version__, "recipe": recipe.digest, "seed": seed}
