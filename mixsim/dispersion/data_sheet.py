"""A data sheet's one-frequency pair, permittivity and loss tangent, as a causal spectrum.

The pair and two far frequencies between which the loss tangent is level make a wide-band Debye spectrum.
"""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from mixsim.dispersion.terms.relaxation import wide_band_debye

Array = NDArray[Any]


def step_from_pair(
    *, value: ArrayLike, loss_tangent: ArrayLike, at: ArrayLike, low: ArrayLike, high: ArrayLike
) -> Array:
    """Static step of the wide-band Debye spectrum that goes through a data sheet's pair.

    Parameters
    ----------
    value
        ε′ at the frequency of the data sheet [-].
    loss_tangent
        ε″/ε′ there [-].
    at
        That frequency [rad/s].
    low, high
        Lowest and highest relaxation rate [rad/s].

    Returns
    -------
    step
        Δ = ε′ tan δ / Im g with g the spectrum for Δ = 1 [-].

    Notes
    -----
    Valid for: `low` and `high` far outside the band of use, decades below and above `at`.

    References
    ----------
    A. R. Djordjević et al., IEEE Trans. Electromagn. Compat. 43, 662 (2001).

    Examples
    --------
    >>> pair = {"value": 4.4, "loss_tangent": 0.02, "at": 6.28e9, "low": 6.28e3, "high": 6.28e12}
    >>> print(f"{step_from_pair(**pair):.4f}")
    1.1617
    """
    loss = np.asarray(value, dtype=float) * np.asarray(loss_tangent, dtype=float)
    return np.asarray(loss / np.imag(wide_band_debye(at, step=1.0, low=low, high=high)))[()]


def infinity_from_pair(
    *, value: ArrayLike, loss_tangent: ArrayLike, at: ArrayLike, low: ArrayLike, high: ArrayLike
) -> Array:
    """Level above all resonances of the wide-band Debye spectrum through a data sheet's pair.

    Parameters
    ----------
    value
        ε′ at the frequency of the data sheet [-].
    loss_tangent
        ε″/ε′ there [-].
    at
        That frequency [rad/s].
    low, high
        Lowest and highest relaxation rate [rad/s].

    Returns
    -------
    infinity
        ε∞ = ε′ − Δ Re g [-].

    Notes
    -----
    Valid for: as `step_from_pair`; a large loss over many decades would leave less than one.

    Examples
    --------
    >>> pair = {"value": 4.4, "loss_tangent": 0.02, "at": 6.28e9, "low": 6.28e3, "high": 6.28e12}
    >>> print(f"{infinity_from_pair(**pair):.4f}")
    4.0128
    """
    pair = {"value": value, "loss_tangent": loss_tangent, "at": at, "low": low, "high": high}
    share = np.real(wide_band_debye(at, step=1.0, low=low, high=high))
    return np.asarray(np.asarray(value, dtype=float) - step_from_pair(**pair) * share)[()]
