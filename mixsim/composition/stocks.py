"""What is to be taken off the shelf: masses of stocks that bring given masses of substances."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

Floats = NDArray[np.float64]

_MET = 1e-9  # share of the whole within which a target counts as met
_NONE = 1e-12  # share of the whole below which nothing is taken


@dataclass(frozen=True, eq=False)
class Taken:
    """Masses to take.

    Attributes
    ----------
    masses
        Of each stock [kg].
    brought
        Mass of each substance that they bring [kg].
    met
        Whether that is what was wanted.
    """

    masses: Floats
    brought: Floats
    met: bool


def take(wanted: ArrayLike, contents: ArrayLike) -> Taken:
    """Masses of stocks that bring what is wanted, or as nearly as they can.

    Parameters
    ----------
    wanted
        Mass of each substance, shape (substances,) [kg].
    contents
        Weight fraction of each substance in each stock, shape (substances, stocks) [-].

    Returns
    -------
    taken
        Non-negative masses; those of least squares where no masses bring exactly what is wanted.

    Notes
    -----
    Valid for: masses that add, nothing being lost but solvent.

    References
    ----------
    C. L. Lawson, R. J. Hanson, Solving Least Squares Problems, 1974, chapter 23.

    Examples
    --------
    A paste with 30 % of filler, and neat resin:

    >>> taken = take([0.75, 0.25], [[1.0, 0.5], [0.0, 0.3]])
    >>> taken.masses.round(6).tolist(), taken.met
    ([0.333333, 0.833333], True)
    """
    from scipy.optimize import nnls

    goal, matrix = np.asarray(wanted, dtype=float), np.asarray(contents, dtype=float)
    whole = float(goal.sum())
    masses, _ = nnls(matrix, goal / whole)
    masses[masses < _NONE] = 0.0
    brought = matrix @ masses
    met = bool(np.max(np.abs(brought - goal / whole)) <= _MET)
    return Taken(masses * whole, brought * whole, met)


def spread(wanted: ArrayLike, contents: ArrayLike, taken: NDArray[np.float64]) -> Floats:
    """Masses of the same stocks for other masses wanted and other contents, in one call.

    Parameters
    ----------
    wanted
        Mass of each substance, shape (M, substances) [kg].
    contents
        Weight fractions, shape (M, substances, stocks) [-].
    taken
        Masses of a solution, shape (stocks,); a stock of which nothing is taken is left out here too.

    Returns
    -------
    masses
        Least-squares masses, shape (M, stocks) [kg].
    """
    goal, matrix = np.asarray(wanted, dtype=float), np.asarray(contents, dtype=float)
    used = taken > 0.0
    masses = np.zeros((goal.shape[0], matrix.shape[-1]))
    masses[:, used] = np.einsum("msu,ms->mu", np.linalg.pinv(matrix[..., used]).swapaxes(-1, -2), goal)
    return masses
