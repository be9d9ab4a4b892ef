"""First-order uncertainty of any answer: what one standard uncertainty of each input does to it."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.uncertainty.inputs import Correlation, Floats, Uncertain, matrix_of

Answer = Callable[[Mapping[str, Floats]], NDArray[np.float64]]
"""Values by name, each of shape (M,), to answers of shape (M, …)."""


@dataclass(frozen=True)
class FirstOrder:
    """Uncertainty of some answers to first order.

    Attributes
    ----------
    names
        Of the inputs.
    effects
        What one standard uncertainty of each input does to each answer, shape (inputs, answers).
    covariance
        Of the answers, shape (answers, answers).
    """

    names: tuple[str, ...]
    effects: Floats
    covariance: Floats

    @property
    def std(self) -> Floats:
        """Standard uncertainty of each answer."""
        return np.sqrt(np.diag(self.covariance))

    @property
    def shares(self) -> Floats:
        """Share of each input in the variance of each answer, correlations left out; NaN where none."""
        squares = self.effects**2
        with np.errstate(invalid="ignore", divide="ignore"):
            return np.asarray(squares / squares.sum(axis=0))


def effects(function: Answer, inputs: Mapping[str, Uncertain]) -> Floats:
    """What one standard uncertainty of each input does to each answer.

    Parameters
    ----------
    function
        The answer, which takes all its trial values in one call.
    inputs
        Numbers by name.

    Returns
    -------
    effects
        Half the difference between the answers at x + u and x − u, shape (inputs, …) after that of an answer.

    Notes
    -----
    An end outside what a number can be is moved there.

    References
    ----------
    JCGM 100:2008, 5.1.3, note 2.

    Examples
    --------
    >>> inputs = {"length": Uncertain(2.0, 0.1), "width": Uncertain(3.0, 0.2)}
    >>> print(effects(lambda x: x["length"] * x["width"], inputs).round(6))
    [0.3 0.4]
    """
    return halves(function(pairs(inputs)))


def pairs(inputs: Mapping[str, Uncertain]) -> dict[str, Floats]:
    """Values by name for one call of an answer: each input in turn one uncertainty up, then down."""
    values = {}
    for place, (name, number) in enumerate(inputs.items()):
        column = np.full(2 * len(inputs), number.value)
        column[2 * place : 2 * place + 2] = number.moved(np.array([1.0, -1.0]))
        values[name] = column
    return values


def halves(answers: NDArray[np.float64]) -> Floats:
    """Half the differences of answers that stand as `pairs` set them."""
    return np.asarray(0.5 * (answers[0::2] - answers[1::2]))


def first_order(
    function: Answer, inputs: Mapping[str, Uncertain], correlation: Correlation | None = None
) -> FirstOrder:
    """First-order uncertainty of some answers.

    Parameters
    ----------
    function
        The answers, shape (M, answers), of M sets of values in one call.
    inputs
        Numbers by name.
    correlation
        Correlation coefficients by pairs of names.

    Returns
    -------
    doubt
        Effects and covariance: Eᵀ R E with the effects E and the correlations R.

    Raises
    ------
    Refusal
        Where a correlation names a number without a ±.

    Notes
    -----
    Valid for: answers that are straight over the uncertainties; the Monte Carlo says whether they are.

    References
    ----------
    JCGM 100:2008, 5.1 and 5.2; JCGM 102:2011, 6.2.

    Examples
    --------
    >>> inputs = {"a": Uncertain(1.0, 0.3), "b": Uncertain(1.0, 0.3)}
    >>> doubt = first_order(lambda x: (x["a"] - x["b"])[:, None], inputs, {("a", "b"): 1.0})
    >>> print(f"{float(doubt.std[0]):.3f}")
    0.000
    """
    moved = effects(function, inputs)
    moved = moved.reshape(len(inputs), -1)
    matrix = matrix_of(list(inputs), correlation or {})
    return FirstOrder(tuple(inputs), moved, np.asarray(moved.T @ matrix @ moved))
