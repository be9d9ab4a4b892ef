"""The principal axes of an answer, in words."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

import numpy as np

if TYPE_CHECKING:
    from mixsim.recipe import Recipe


@dataclass(frozen=True, slots=True)
class Principal:
    """One axis, or two that are alike.

    Attributes
    ----------
    sign
        Short name.
    said
        What it is, in words.
    index
        Its place among the three.
    """

    sign: str
    said: str
    index: int


def principal_axes(recipe: Recipe, values: Any, *, axis: int = -2) -> tuple[Principal, ...]:
    """The axes worth showing: two where the first two are alike, all three otherwise.

    Parameters
    ----------
    recipe
        What was asked; it says how the grains lie.
    values
        Answers with three principal axes.
    axis
        Where among the axes of the array they stand.
    """
    along = np.moveaxis(np.asarray(values), axis, 0)
    if not np.array_equal(along[0], along[1], equal_nan=True):
        return tuple(Principal(f"axis {i + 1}", f"along principal axis {i + 1}", i) for i in range(3))
    if any(inclusion.orientation == "in-plane" for inclusion in recipe.schema.inclusions.values()):
        return Principal("⊥", "⊥, in the plane of the grains", 0), Principal("∥", "∥, along its normal", 2)
    return Principal("⊥", "⊥, across the aligned axis", 0), Principal("∥", "∥, along the aligned axis", 2)
