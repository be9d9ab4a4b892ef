"""Relaxation of dipoles: one time, broadened, skewed, and spread over decades."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from mixsim.dispersion import descriptions
from mixsim.dispersion.registry import Route, Term
from mixsim.dispersion.terms.parts import Array, blank, floats, over
from mixsim.parameter import bounded, by_name, not_negative, positive

_STEP_AND_TIME = {
    "step": (Route("step"),),
    "relaxation_time": (
        Route("relaxation_time"),
        Route("relaxation_frequency", descriptions.relaxation_time_from_frequency),
    ),
}
_HOW_FAR_AND_HOW_FAST = (
    not_negative("step", "number", "static contribution"),
    positive("relaxation_time", "time", "relaxation time"),
    positive(
        "relaxation_frequency",
        "spectral",
        "relaxation frequency, 1/(2πτ), no peak of a skewed arc",
    ),
)


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
    canonical=_STEP_AND_TIME,
    parameters=by_name(*_HOW_FAR_AND_HOW_FAST),
    summary="relaxation of dipoles with one relaxation time",
    equation="Δ / (1 − iωτ)",
    source="P. Debye, Polar Molecules, 1929",
)


def havriliak_negami(
    omega: ArrayLike, *, step: ArrayLike, relaxation_time: ArrayLike, alpha: ArrayLike, beta: ArrayLike
) -> Array:
    """Relaxation broadened and skewed, after Havriliak and Negami.

    Parameters
    ----------
    omega
        Angular frequency ω [rad/s].
    step
        Static contribution Δ [-].
    relaxation_time
        Relaxation time τ [s].
    alpha
        Broadening, 0 for none [-].
    beta
        Skew, 1 for none [-].

    Returns
    -------
    contribution
        Complex contribution to the relative permittivity [-].

    Notes
    -----
    Δ / (1 + (−iωτ)^(1−α))^β with principal powers; α = 0 and β = 1 is Debye.

    Valid for: 0 ≤ α < 1 and 0 < β ≤ 1, at frequencies far below molecular resonances.

    References
    ----------
    S. Havriliak, S. Negami, Polymer 8, 161 (1967).

    Examples
    --------
    >>> complex(havriliak_negami(1.0, step=2.0, relaxation_time=1.0, alpha=0.0, beta=1.0))
    (1+1j)
    """
    w, height, time, a, b = floats(omega, step, relaxation_time, alpha, beta)
    flat, skewed = np.any(a != 0.0), np.any(b != 1.0)
    if not flat and not skewed:
        return debye(w, step=height, relaxation_time=time)
    denominator = blank(w, time, a, b)
    if flat:
        # (−iωτ)^(1−α) in polar form: one real power and no complex logarithm
        with np.errstate(invalid="ignore"):
            turn, power = -0.5 * np.pi * (1.0 - a), (w * time) ** (1.0 - a)
        np.multiply(power, np.cos(turn), out=denominator.real)
        np.multiply(power, np.sin(turn), out=denominator.imag)
        denominator.real += 1.0
    else:
        denominator.real = 1.0
        np.multiply(-time, w, out=denominator.imag)
    if skewed:
        with np.errstate(invalid="ignore", over="ignore"):
            denominator = np.asarray(denominator**b)
    return over(height, denominator)


def havriliak_negami_low(
    *, step: ArrayLike, relaxation_time: ArrayLike, alpha: ArrayLike, beta: ArrayLike
) -> tuple[Array, Array]:
    """Behaviour of `havriliak_negami` as ω → 0: i·rate/ω + plateau.

    Parameters
    ----------
    step, alpha, beta
        As in `havriliak_negami` [-].
    relaxation_time
        As in `havriliak_negami` [s].

    Returns
    -------
    rate, plateau
        0 [rad/s], and the step [-].

    Examples
    --------
    >>> [float(part) for part in havriliak_negami_low(step=2.0, relaxation_time=1.0, alpha=0.3, beta=0.8)]
    [0.0, 2.0]
    """
    height, time, a, b = floats(step, relaxation_time, alpha, beta)
    nothing = 0.0 * (height + time + a + b)
    return nothing, height + nothing


def cole_cole(omega: ArrayLike, *, step: ArrayLike, relaxation_time: ArrayLike, alpha: ArrayLike) -> Array:
    """Relaxation with a symmetric spread of times, after Cole and Cole.

    Parameters
    ----------
    omega
        Angular frequency ω [rad/s].
    step
        Static contribution Δ [-].
    relaxation_time
        Relaxation time τ [s].
    alpha
        Broadening, 0 for none [-].

    Returns
    -------
    contribution
        Complex contribution to the relative permittivity [-].

    Notes
    -----
    Δ / (1 + (−iωτ)^(1−α)): an arc of a circle in the plane of ε′ and ε″.

    Valid for: 0 ≤ α < 1, at frequencies far below molecular resonances.

    References
    ----------
    K. S. Cole, R. H. Cole, J. Chem. Phys. 9, 341 (1941).

    Examples
    --------
    >>> print(f"{cole_cole(1.0, step=2.0, relaxation_time=1.0, alpha=0.5):.4f}")
    1.0000+0.4142j
    """
    return havriliak_negami(omega, step=step, relaxation_time=relaxation_time, alpha=alpha, beta=1.0)


def cole_cole_low(*, step: ArrayLike, relaxation_time: ArrayLike, alpha: ArrayLike) -> tuple[Array, Array]:
    """Behaviour of `cole_cole` as ω → 0: i·rate/ω + plateau.

    Parameters
    ----------
    step, alpha
        As in `cole_cole` [-].
    relaxation_time
        As in `cole_cole` [s].

    Returns
    -------
    rate, plateau
        0 [rad/s], and the step [-].

    Examples
    --------
    >>> [float(part) for part in cole_cole_low(step=2.0, relaxation_time=1.0, alpha=0.3)]
    [0.0, 2.0]
    """
    return havriliak_negami_low(step=step, relaxation_time=relaxation_time, alpha=alpha, beta=1.0)


def cole_davidson(omega: ArrayLike, *, step: ArrayLike, relaxation_time: ArrayLike, beta: ArrayLike) -> Array:
    """Relaxation skewed towards high frequencies, after Davidson and Cole.

    Parameters
    ----------
    omega
        Angular frequency ω [rad/s].
    step
        Static contribution Δ [-].
    relaxation_time
        Relaxation time τ [s].
    beta
        Skew, 1 for none [-].

    Returns
    -------
    contribution
        Complex contribution to the relative permittivity [-].

    Notes
    -----
    Δ / (1 − iωτ)^β. The loss peak lies above 1/τ.

    Valid for: 0 < β ≤ 1, at frequencies far below molecular resonances.

    References
    ----------
    D. W. Davidson, R. H. Cole, J. Chem. Phys. 19, 1484 (1951).

    Examples
    --------
    >>> print(f"{cole_davidson(1.0, step=2.0, relaxation_time=1.0, beta=0.5):.4f}")
    1.5538+0.6436j
    """
    return havriliak_negami(omega, step=step, relaxation_time=relaxation_time, alpha=0.0, beta=beta)


def cole_davidson_low(*, step: ArrayLike, relaxation_time: ArrayLike, beta: ArrayLike) -> tuple[Array, Array]:
    """Behaviour of `cole_davidson` as ω → 0: i·rate/ω + plateau.

    Parameters
    ----------
    step, beta
        As in `cole_davidson` [-].
    relaxation_time
        As in `cole_davidson` [s].

    Returns
    -------
    rate, plateau
        0 [rad/s], and the step [-].

    Examples
    --------
    >>> [float(part) for part in cole_davidson_low(step=2.0, relaxation_time=1.0, beta=0.3)]
    [0.0, 2.0]
    """
    return havriliak_negami_low(step=step, relaxation_time=relaxation_time, alpha=0.0, beta=beta)


def wide_band_debye(omega: ArrayLike, *, step: ArrayLike, low: ArrayLike, high: ArrayLike) -> Array:
    """Relaxation spread evenly over decades: a loss that hardly changes, and is causal.

    Parameters
    ----------
    omega
        Angular frequency ω [rad/s].
    step
        Static contribution Δ [-].
    low, high
        Lowest and highest relaxation rate ω₁ and ω₂ [rad/s].

    Returns
    -------
    contribution
        Complex contribution to the relative permittivity [-].

    Notes
    -----
    Δ ln[(ω₂ − iω)/(ω₁ − iω)] / ln(ω₂/ω₁). Between the two the loss is near (π/2) Δ/ln(ω₂/ω₁), and ε′ falls
    by the same per e-fold of frequency over π/2.

    Either order of the two gives the same.

    Valid for: laminates and cables, whose loss tangent is level over decades.

    References
    ----------
    C. Svensson, G. E. Dermer, IEEE Trans. Adv. Packag. 24, 191 (2001); A. R. Djordjević et al.,
    IEEE Trans. Electromagn. Compat. 43, 662 (2001).

    Examples
    --------
    >>> print(f"{wide_band_debye(1.0, step=2.0, low=1e-3, high=1e3):.4f}")
    1.0000+0.2271j
    """
    w, height, first, second = floats(omega, step, low, high)
    least, most = np.minimum(first, second), np.maximum(first, second)
    square = w * w
    contribution = blank(w, height, least, most)
    with np.errstate(divide="ignore", invalid="ignore"):
        scale = height / np.log(most / least)
        # the modulus as log1p and the angle as one arctangent: neither cancels where both ends are far
        modulus = 0.5 * np.log1p((most - least) * (most + least) / (least * least + square))
        np.multiply(scale, modulus, out=contribution.real)
        np.multiply(scale, np.arctan2(w * (most - least), most * least + square), out=contribution.imag)
    return contribution[()]


def wide_band_debye_low(*, step: ArrayLike, low: ArrayLike, high: ArrayLike) -> tuple[Array, Array]:
    """Behaviour of `wide_band_debye` as ω → 0: i·rate/ω + plateau.

    Parameters
    ----------
    step
        As in `wide_band_debye` [-].
    low, high
        As in `wide_band_debye` [rad/s].

    Returns
    -------
    rate, plateau
        0 [rad/s], and the step [-].

    Examples
    --------
    >>> [float(part) for part in wide_band_debye_low(step=2.0, low=1e3, high=1e9)]
    [0.0, 2.0]
    """
    height, least, most = floats(step, low, high)
    nothing = 0.0 * (height + least + most)
    return nothing, height + nothing


_ALPHA = bounded("alpha", "broadening of the arc, 0 for none", least=0.0, most=0.99)
_BETA = bounded("beta", "skew of the arc, 1 for none", least=0.01, most=1.0)

COLE_COLE = Term(
    name="cole-cole",
    function=cole_cole,
    low=cole_cole_low,
    canonical={**_STEP_AND_TIME, "alpha": (Route("alpha"),)},
    parameters=by_name(*_HOW_FAR_AND_HOW_FAST, _ALPHA),
    summary="relaxation with a symmetric spread of times",
    equation="Δ / (1 + (−iωτ)^(1−α))",
    source="K. S. Cole, R. H. Cole, J. Chem. Phys. 9, 341 (1941)",
)
COLE_DAVIDSON = Term(
    name="cole-davidson",
    function=cole_davidson,
    low=cole_davidson_low,
    canonical={**_STEP_AND_TIME, "beta": (Route("beta"),)},
    parameters=by_name(*_HOW_FAR_AND_HOW_FAST, _BETA),
    summary="relaxation skewed towards high frequencies",
    equation="Δ / (1 − iωτ)^β",
    source="D. W. Davidson, R. H. Cole, J. Chem. Phys. 19, 1484 (1951)",
)
HAVRILIAK_NEGAMI = Term(
    name="havriliak-negami",
    function=havriliak_negami,
    low=havriliak_negami_low,
    canonical={**_STEP_AND_TIME, "alpha": (Route("alpha"),), "beta": (Route("beta"),)},
    parameters=by_name(*_HOW_FAR_AND_HOW_FAST, _ALPHA, _BETA),
    summary="relaxation broadened and skewed",
    equation="Δ / (1 + (−iωτ)^(1−α))^β",
    source="S. Havriliak, S. Negami, Polymer 8, 161 (1967)",
)
WIDE_BAND_DEBYE = Term(
    name="wide-band-debye",
    function=wide_band_debye,
    low=wide_band_debye_low,
    canonical={"step": (Route("step"),), "low": (Route("low"),), "high": (Route("high"),)},
    parameters=by_name(
        not_negative("step", "number", "static contribution"),
        positive("low", "spectral", "lowest relaxation rate, as a frequency"),
        positive("high", "spectral", "highest relaxation rate, as a frequency"),
    ),
    summary="a loss tangent level over decades, and causal",
    equation="Δ ln[(ω₂ − iω)/(ω₁ − iω)] / ln(ω₂/ω₁)",
    source="C. Svensson, G. E. Dermer, IEEE Trans. Adv. Packag. 24, 191 (2001)",
)
