"""The ± of a recipe's own numbers pushed through to the answer, to first order."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from mixsim.mixture import Mixture
from mixsim.recipe import Recipe
from mixsim.recipe.agreement import of_mixture

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
        Of the limits [-]; NaN where there is none.
    """

    paths: tuple[str, ...]
    real: Floats
    imag: Floats
    static: Floats
    high_frequency: Floats


def stated(recipe: Recipe) -> dict[str, float]:
    """Standard uncertainties that the recipe states for numbers of the mixture, by path [SI]."""
    return {path: leaf.std for path, leaf in recipe.leaves.items() if leaf.std and of_mixture(path)}


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
    spreads = stated(recipe)
    if not spreads:
        return None
    count = len(spreads)
    values: dict[str, Any] = {}
    for place, (path, std) in enumerate(spreads.items()):
        centre, allowed = recipe.leaves[path].value, recipe.ranges[path]
        column = np.full(2 * count, centre)
        least = np.nextafter(allowed.minimum, np.inf) if allowed.exclusive else allowed.minimum
        column[2 * place : 2 * place + 2] = np.clip([centre + std, centre - std], least, allowed.maximum)
        values[path] = column
    response, limits = mixture.response(values, omega).permittivity, mixture.limits(values)

    def spread(answers: Any) -> Any:
        halves = 0.5 * (answers[0::2] - answers[1::2])
        return np.sqrt(np.sum(halves**2, axis=0))

    halves = 0.5 * (response[0::2] - response[1::2])
    felt = np.any(halves != 0.0, axis=tuple(range(1, halves.ndim)))
    felt |= np.any((limits.static[0::2] != limits.static[1::2]).reshape(count, -1), axis=-1)
    paths = tuple(path for path, matters in zip(spreads, felt, strict=True) if matters)
    if not paths:
        return None
    return Pushed(
        paths,
        spread(response.real),
        spread(response.imag),
        spread(limits.static.real),
        spread(limits.high_frequency.real),
    )
