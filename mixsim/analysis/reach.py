"""Whether the measured tables of a recipe cover the frequencies that are asked for."""

from __future__ import annotations

from typing import Any

from numpy.typing import NDArray

from mixsim.dispersion import interpolate
from mixsim.errors import BadInput, Fault, Refusal
from mixsim.mixture import Mixture
from mixsim.recipe import Recipe


def within_tables(recipe: Recipe, mixture: Mixture, omega: NDArray[Any]) -> None:
    """Refuse frequencies that a table of the mixture does not cover, unless the recipe lets it be continued.

    Parameters
    ----------
    recipe, mixture
        The recipe and its evaluator.
    omega
        Angular frequencies [rad/s].

    Raises
    ------
    BadInput
        With one fault for each table that does not reach, those of recipes within the recipe too.
    """
    faults: list[Fault] = []
    for part in recipe.parts.values():
        try:
            within_tables(part, part.compile(), omega)
        except BadInput as found:
            faults += found.faults
    for name in dict.fromkeys(phase.material for phase in mixture.phases):
        table = recipe.tables.get(name)
        if table is None or recipe.schema.materials[name].extension is not None:
            continue
        try:
            interpolate(omega, table=table)
        except Refusal as refusal:
            faults.append(recipe.fault(f"materials.{name}.table", refusal.found, refusal.allowed))
    if faults:
        raise BadInput(faults)
