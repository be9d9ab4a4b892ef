"""Conduction of charge, free and by hopping."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from mixsim.dispersion.registry import Route, Term
from mixsim.dispersion.terms.parts import Array, blank, floats
from mixsim.parameter import bounded, by_name, not_negative, positive
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
    of=("permittivity",),
)


def jonscher(
    omega: ArrayLike, *, amplitude: ArrayLike, exponent: ArrayLike, reference_frequency: ArrayLike
) -> Array:
    """Hopping of charge: Jonscher's power law, with the real part that causality asks for.

    Parameters
    ----------
    omega
        Angular frequency ω [rad/s].
    amplitude
        Modulus A of the contribution at the reference frequency [-].
    exponent
        Exponent n of the alternating conductivity [-].
    reference_frequency
        Reference frequency ω_r [rad/s].

    Returns
    -------
    contribution
        Complex contribution to the relative permittivity [-].

    Notes
    -----
    A (−iω/ω_r)^(n−1) with the principal power: σ′ ∝ ω^n and a loss tangent cot(nπ/2) of its own.

    Valid for: 0 < n < 1, between the frequencies of free conduction and of dipoles.

    References
    ----------
    A. K. Jonscher, Nature 267, 673 (1977).

    Examples
    --------
    >>> print(f"{jonscher(1.0, amplitude=2.0, exponent=0.5, reference_frequency=1.0):.4f}")
    1.4142+1.4142j
    """
    w, size, n, reference = floats(omega, amplitude, exponent, reference_frequency)
    with np.errstate(divide="ignore", over="ignore", invalid="ignore"):
        modulus = np.asarray(size * (w / reference) ** (n - 1.0))
    turn = 0.5 * np.pi * (1.0 - n)
    contribution = blank(modulus, turn)
    np.multiply(modulus, np.cos(turn), out=contribution.real)
    np.multiply(modulus, np.sin(turn), out=contribution.imag)
    return contribution[()]


def jonscher_low(
    *, amplitude: ArrayLike, exponent: ArrayLike, reference_frequency: ArrayLike
) -> tuple[Array, Array]:
    """Behaviour of `jonscher` as ω → 0: it rises without end, slower than conduction does.

    Parameters
    ----------
    amplitude, exponent
        As in `jonscher` [-].
    reference_frequency
        As in `jonscher` [rad/s].

    Returns
    -------
    rate, plateau
        0 [rad/s], and NaN, for there is no static level, unless the amplitude is 0 [-].

    Examples
    --------
    >>> [float(part) for part in jonscher_low(amplitude=2.0, exponent=0.5, reference_frequency=1.0)]
    [0.0, nan]
    """
    size, n, reference = floats(amplitude, exponent, reference_frequency)
    nothing = 0.0 * (size + n + reference)
    return nothing, np.where(size == 0.0, 0.0, np.nan) + nothing


JONSCHER = Term(
    name="jonscher",
    function=jonscher,
    low=jonscher_low,
    canonical={name: (Route(name),) for name in ("amplitude", "exponent", "reference_frequency")},
    parameters=by_name(
        not_negative("amplitude", "number", "modulus at the reference frequency"),
        bounded("exponent", "exponent of the alternating conductivity", least=0.01, most=0.99),
        positive("reference_frequency", "spectral", "where the amplitude holds"),
    ),
    summary="hopping of charge: a power law over decades",
    equation="A (−iω/ω_r)^(n−1)",
    source="A. K. Jonscher, Nature 267, 673 (1977)",
    of=("permittivity",),
)
