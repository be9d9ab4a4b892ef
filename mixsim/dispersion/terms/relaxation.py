"""Relaxation of dipoles."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from mixsim.dispersion import descriptions
from mixsim.dispersion.registry import Route, Term, by_name, not_negative, positive
from mixsim.dispersion.terms.parts import Array, blank, floats, over


def debye(omega: ArrayLike, *, step: ArrayLike, relaxation_time: ArrayLike) -> Array:
    """Debye relaxation.

    Parameters
    ----------
    omega
        Angular frequency ω [rad/s].
    step
        Static contribution Δ [-].
    relaxation_time
        Relaxation time τ [s].

    Returns
    -------
    contribution
        Complex contribution to the relative permittivity [-].

    Notes
    -----
    Δ / (1 − iωτ).

    Valid for: dipoles with one relaxation time, at frequencies far below molecular resonances.

    References
    ----------
    P. Debye, Polar Molecules, 1929.

    Examples
    --------
    >>> complex(debye(1.0, step=2.0, relaxation_time=1.0))
    (1+1j)
    """
    w, height, time = floats(omega, step, relaxation_time)
    denominator = blank(w, time)
    denominator.real = 1.0
    np.multiply(-time, w, out=denominator.imag)
    return over(height, denominator)


def debye_low(*, step: ArrayLike, relaxation_time: ArrayLike) -> tuple[Array, Array]:
    """Behaviour of `debye` as ω → 0: i·rate/ω + plateau.

    Parameters
    ----------
    step
        As in `debye` [-].
    relaxation_time
        As in `debye` [s].

    Returns
    -------
    rate, plateau
        0 [rad/s], and the step [-].

    Examples
    --------
    >>> [float(part) for part in debye_low(step=2.0, relaxation_time=1e-12)]
    [0.0, 2.0]
    """
    height, time = floats(step, relaxation_time)
    nothing = 0.0 * (height + time)
    return nothing, height + nothing


DEBYE = Term(
    name="debye",
    function=debye,
    low=debye_low,
    canonical={
        "step": (Route("step"),),
        "relaxation_time": (
            Route("relaxation_time"),
            Route("relaxation_frequency", descriptions.relaxation_time_from_frequency),
        ),
    },
    parameters=by_name(
        not_negative("step", "number", "static contribution"),
        positive("relaxation_time", "time", "relaxation time"),
        positive("relaxation_frequency", "spectral", "relaxation frequency, 1/(2πτ)"),
    ),
    summary="relaxation of dipoles with one relaxation time",
    equation="Δ / (1 − iωτ)",
    source="P. Debye, Polar Molecules, 1929",
)
