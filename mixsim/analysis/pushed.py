"""The ± of a recipe's own numbers pushed through to the answer, to first order."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.uncertainty.first_order import halves, pairs
from mixsim.analysis.uncertainty.inputs import uncertain_leaves
from mixsim.mixture import Mixture
from mixsim.recipe import Recipe

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class Pushed:
    """One standard uncertainty of a prediction, from the ± of the recipe.

    Attributes
    ----------
    paths
        Numbers with a ± that the mixture feels.
    real, imag
        Of ε′ and ε″ over frequency [-], with principal axes where the answer has them.
    static, high_frequency
        Of the limits of ε [-]; NaN where there is none.
    permeability_real, permeability_imag
        Of μ′ and μ″ over frequency [-], zero where nothing is magnetic.
    static_permeability, high_frequency_permeability
        Of the limits of μ [-]; NaN where there is none.
    """

    paths: tuple[str, ...]
    real: Floats
    imag: Floats
    static: Floats
    high_frequency: Floats
    permeability_real: Floats
    permeability_imag: Floats
    static_permeability: Floats
    high_frequency_permeability: Floats


def pushed(recipe: Recipe, mixture: Mixture, omega: Floats) -> Pushed | None:
    """Push every stated ± through the evaluator.

    Parameters
    ----------
    recipe, mixture
        The recipe and its evaluator.
    omega
        Angular frequencies [rad/s].

    Returns
    -------
    pushed
        None where the recipe states none that matters.

    Notes
    -----
    u² = Σ ((y(x_k + u_k) − y(x_k − u_k))/2)², the numbers taken as independent; an end outside the range of a
    number is moved to it. Valid for: ± small enough that the answer is straight over them.

    References
    ----------
    JCGM 100:2008, 5.1.
    """
    inputs = uncertain_leaves(recipe)
    if not inputs:
        return None
    values = pairs(inputs)
    response, limits = mixture.response(values, omega), mixture.limits(values)
    permittivity, permeability = response.permittivity, response.permeability
    if not mixture.magnetic:
        permeability = permeability[:, ..., :1]  # one everywhere, broadcast back below

    def spread(answers: Any) -> Any:
        return np.sqrt(np.sum(halves(answers) ** 2, axis=0))

    parts = (permittivity, permeability, limits.static, limits.static_permeability)
    # where there is no limit, nothing is felt in it
    moved = [np.nan_to_num(halves(part)).reshape(len(inputs), -1) for part in parts]
    felt = np.any([np.any(part != 0.0, axis=-1) for part in moved], axis=0)
    paths = tuple(path for path, matters in zip(inputs, felt, strict=True) if matters)
    if not paths:
        return None
    magnetic_real, magnetic_imag = (
        np.broadcast_to(spread(part), permittivity.shape[1:])
        for part in (permeability.real, permeability.imag)
    )
    return Pushed(
        paths,
        spread(permittivity.real),
        spread(permittivity.imag),
        spread(limits.static.real),
        spread(limits.high_frequency.real),
        magnetic_real,
        magnetic_imag,
        spread(limits.static_permeability.real),
        spread(limits.high_frequency_permeability.real),
    )
