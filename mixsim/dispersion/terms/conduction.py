"""Conduction of charge."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from mixsim.dispersion.registry import Route, Term, by_name, not_negative
from mixsim.dispersion.terms.parts import Array, blank, floats
from mixsim.units import VACUUM_PERMITTIVITY


def conduction(omega: ArrayLike, *, conductivity: ArrayLike) -> Array:
    """Conduction of charge at a rate that does not depend on frequency.

    Parameters
    ----------
    omega
        Angular frequency ω [rad/s].
    conductivity
        Conductivity σ [S/m].

    Returns
    -------
    contribution
        Complex contribution to the relative permittivity [-].

    Notes
    -----
    iσ / (ε₀ω). Not finite at ω = 0, where `conduction_low` tells how it diverges.

    Valid for: frequencies far below the collision rate of the carriers.

    References
    ----------
    The Ampère–Maxwell law; common textbook form.

    Examples
    --------
    >>> round(complex(conduction(1e9, conductivity=1e-3)).imag, 6)
    0.112941
    """
    w, sigma = floats(omega, conductivity)
    contribution = blank(w, sigma)
    contribution.real = 0.0
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        np.divide(sigma / VACUUM_PERMITTIVITY, w, out=contribution.imag)
    return contribution[()]


def conduction_low(*, conductivity: ArrayLike) -> tuple[Array, Array]:
    """Behaviour of `conduction` as ω → 0: i·rate/ω + plateau.

    Parameters
    ----------
    conductivity
        As in `conduction` [S/m].

    Returns
    -------
    rate, plateau
        σ/ε₀ [rad/s], and 0 [-].

    Examples
    --------
    >>> f"{conduction_low(conductivity=8.8541878188e-12)[0]:.6f}"
    '1.000000'
    """
    (sigma,) = floats(conductivity)
    return sigma / VACUUM_PERMITTIVITY, 0.0 * sigma


CONDUCTION = Term(
    name="conduction",
    function=conduction,
    low=conduction_low,
    canonical={"conductivity": (Route("conductivity"),)},
    parameters=by_name(not_negative("conductivity", "conductivity", "dc conductivity")),
    summary="conduction of charge, below the collision rate of the carriers",
    equation="iσ / (ε₀ω)",
    source="Ampère–Maxwell law",
)
