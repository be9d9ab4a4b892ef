"""The mixture: the one path from the numbers of a recipe and a frequency axis to a response."""

from __future__ import annotations

from mixsim.mixture.compiler import compile_recipe
from mixsim.mixture.constituent import Constituent
from mixsim.mixture.mixture import HOST, VOIDS, Mixture
from mixsim.mixture.response import Composition, Limits, Response

__all__ = [
    "HOST",
    "VOIDS",
    "Composition",
    "Constituent",
    "Limits",
    "Mixture",
    "Response",
    "compile_recipe",
]
