"""Terms of a permittivity or permeability: pure functions of angular frequency.

The sign of loss is stated here once: time dependence exp(−iωt), so a passive term has a non-negative
imaginary part at ω > 0, and +0.0, never −0.0, where there is no loss: the root of a negative number
with −0.0 would be the growing wave.

Every term vanishes as ω → ∞. Its behaviour as ω → 0 stands beside it, as `<name>_low`.
"""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from mixsim.units import VACUUM_PERMITTIVITY

Array = NDArray[Any]


def lorentz(omega: ArrayLike, *, plasma: ArrayLike, resonance: ArrayLike, damping: ArrayLike) -> Array:
    """Lorentz oscillator.

    Parameters
    ----------
    omega
        Angular frequency ω [rad/s].
    plasma
        Plasma frequency ωp of the oscillators, strength included [rad/s].
    resonance
        Resonance frequency ω₀ [rad/s].
    damping
        Full width at half maximum Γ [rad/s].

    Returns
    -------
    contribution
        Complex contribution to the relative permittivity [-].

    Notes
    -----
    ωp² / (ω₀² − ω² − iΓω). Not finite at the resonance of a line without damping.

    Valid for: a band without inhomogeneous broadening; its wings, far from ω₀, overstate absorption.

    References
    ----------
    H. A. Lorentz, The Theory of Electrons, 1909.

    Examples
    --------
    >>> complex(lorentz(0.0, plasma=2.0, resonance=1.0, damping=0.1))
    (4+0j)
    """
    w, wp, w0, width = _floats(omega, plasma, resonance, damping)
    denominator = _blank(w, w0, width)
    np.subtract(w0, w, out=denominator.real)
    denominator.real *= w0 + w  # exact near the resonance, where ω₀² − ω² loses digits
    np.multiply(-width, w, out=denominator.imag)
    return _over(wp * wp, denominator)


def lorentz_low(*, plasma: ArrayLike, resonance: ArrayLike, damping: ArrayLike) -> tuple[Array, Array]:
    """Behaviour of `lorentz` as ω → 0: i·rate/ω + plateau.

    Parameters
    ----------
    plasma, resonance, damping
        As in `lorentz` [rad/s].

    Returns
    -------
    rate, plateau
        0 [rad/s], and the static step ωp²/ω₀² [-].

    Examples
    --------
    >>> [float(part) for part in lorentz_low(plasma=3.0, resonance=2.0, damping=0.4)]
    [0.0, 2.25]
    """
    wp, w0, width = _floats(plasma, resonance, damping)
    nothing = 0.0 * (wp + w0 + width)  # carries shape and NaN of what does not enter otherwise
    return nothing, (wp / w0) ** 2 + nothing


def drude(omega: ArrayLike, *, plasma: ArrayLike, damping: ArrayLike) -> Array:
    """Drude free carriers.

    Parameters
    ----------
    omega
        Angular frequency ω [rad/s].
    plasma
        Unscreened plasma frequency ωp [rad/s].
    damping
        Collision rate γ [rad/s].

    Returns
    -------
    contribution
        Complex contribution to the relative permittivity [-].

    Notes
    -----
    −ωp² / (ω² + iγω). Not finite at ω = 0, where `drude_low` tells how it diverges.

    Valid for: free carriers with one collision rate, below the absorption between bands.

    References
    ----------
    P. Drude, Ann. Phys. 306, 566 (1900).

    Examples
    --------
    >>> complex(drude(1.0, plasma=1.0, damping=1.0))
    (-0.5+0.5j)
    """
    w, wp, rate = _floats(omega, plasma, damping)
    denominator = _blank(w, rate)
    np.multiply(w, w, out=denominator.real)
    np.multiply(rate, w, out=denominator.imag)
    return _over(-wp * wp, denominator)


def drude_low(*, plasma: ArrayLike, damping: ArrayLike) -> tuple[Array, Array]:
    """Behaviour of `drude` as ω → 0: i·rate/ω + plateau.

    Parameters
    ----------
    plasma, damping
        As in `drude` [rad/s].

    Returns
    -------
    rate, plateau
        ωp²/γ [rad/s] and −ωp²/γ² [-]; infinite and 0 for carriers without collisions.

    Examples
    --------
    >>> [float(part) for part in drude_low(plasma=3.0, damping=2.0)]
    [4.5, -2.25]
    """
    wp, rate = _floats(plasma, damping)
    nothing = 0.0 * (wp + rate)
    lossless = (rate == 0) | (wp == 0)
    finite = np.where(lossless, 1.0, rate)
    conducts = np.where(lossless & (wp != 0), np.inf, wp * wp / finite)
    return conducts + nothing, np.where(lossless, 0.0, -((wp / finite) ** 2)) + nothing


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
    w, height, time = _floats(omega, step, relaxation_time)
    denominator = _blank(w, time)
    denominator.real = 1.0
    np.multiply(-time, w, out=denominator.imag)
    return _over(height, denominator)


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
    height, time = _floats(step, relaxation_time)
    nothing = 0.0 * (height + time)
    return nothing, height + nothing


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
    w, sigma = _floats(omega, conductivity)
    contribution = _blank(w, sigma)
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
    (sigma,) = _floats(conductivity)
    return sigma / VACUUM_PERMITTIVITY, 0.0 * sigma


def _floats(*values: ArrayLike) -> tuple[Array, ...]:
    return tuple(np.asarray(value, dtype=float) for value in values)


def _blank(*values: Array) -> Array:
    """Complex array to be filled part by part, which saves the passes of a + 1j*b."""
    return np.empty(np.broadcast_shapes(*(value.shape for value in values)), dtype=complex)


def _over(numerator: Array, denominator: Array) -> Array:
    """Real numerator over complex denominator, whose memory is used again where it fits."""
    fits = np.broadcast_shapes(numerator.shape, denominator.shape) == denominator.shape
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        ratio = np.asarray(np.divide(numerator, denominator, out=denominator if fits else None))
    ratio.imag += 0.0  # division leaves -0.0 where the denominator is real and negative
    return ratio[()]
