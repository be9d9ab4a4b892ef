"""Precession of magnetisation."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from mixsim.dispersion.registry import Route, Term
from mixsim.dispersion.terms.parts import Array, floats
from mixsim.parameter import by_name, not_negative, positive


def landau_lifshitz_gilbert(
    omega: ArrayLike, *, saturation: ArrayLike, resonance: ArrayLike, gilbert_damping: ArrayLike
) -> Array:
    """Susceptibility across an effective field, after Landau, Lifshitz and Gilbert.

    Parameters
    ----------
    omega
        Angular frequency ω [rad/s].
    saturation
        ω_m = γ µ₀ M_s of the saturation magnetisation [rad/s].
    resonance
        ω₀ = γ µ₀ H_eff of the effective field, anisotropy and shape included [rad/s].
    gilbert_damping
        Damping α [-].

    Returns
    -------
    contribution
        Complex contribution to the relative permeability [-].

    Notes
    -----
    ω_m (ω₀ − iαω) / [(ω₀ − iαω)² − ω²], the diagonal element of the Polder tensor with damping.
    γ/2π is 28 GHz/T for a g-factor of two.

    Valid for: single-domain grains, driven across their field; the mean over directions is two thirds of it.

    References
    ----------
    T. L. Gilbert, IEEE Trans. Magn. 40, 3443 (2004).

    Examples
    --------
    >>> complex(landau_lifshitz_gilbert(0.0, saturation=4.0, resonance=2.0, gilbert_damping=0.1))
    (2+0j)
    """
    w, wm, w0, alpha = floats(omega, saturation, resonance, gilbert_damping)
    damped = np.empty(np.broadcast_shapes(w.shape, w0.shape, alpha.shape), dtype=complex)
    damped.real = w0
    np.multiply(-alpha, w, out=damped.imag)
    with np.errstate(divide="ignore", invalid="ignore"):
        # (a − ω)(a + ω) rather than a² − ω²: exact near the resonance
        contribution = np.asarray(wm * damped / ((damped - w) * (damped + w)))
    contribution.imag += 0.0  # division leaves -0.0 where nothing is lost
    return contribution[()]


def landau_lifshitz_gilbert_low(
    *, saturation: ArrayLike, resonance: ArrayLike, gilbert_damping: ArrayLike
) -> tuple[Array, Array]:
    """Behaviour of `landau_lifshitz_gilbert` as ω → 0: i·rate/ω + plateau.

    Parameters
    ----------
    saturation, resonance
        As in `landau_lifshitz_gilbert` [rad/s].
    gilbert_damping
        As in `landau_lifshitz_gilbert` [-].

    Returns
    -------
    rate, plateau
        0 [rad/s], and ω_m/ω₀ [-].

    Examples
    --------
    >>> parts = landau_lifshitz_gilbert_low(saturation=4.0, resonance=2.0, gilbert_damping=0.1)
    >>> [float(part) for part in parts]
    [0.0, 2.0]
    """
    wm, w0, alpha = floats(saturation, resonance, gilbert_damping)
    nothing = 0.0 * (wm + w0 + alpha)
    return nothing, wm / w0 + nothing


LANDAU_LIFSHITZ_GILBERT = Term(
    name="landau-lifshitz-gilbert",
    function=landau_lifshitz_gilbert,
    low=landau_lifshitz_gilbert_low,
    canonical={name: (Route(name),) for name in ("saturation", "resonance", "gilbert_damping")},
    parameters=by_name(
        not_negative("saturation", "spectral", "γ µ₀ M_s as a frequency, 28 GHz for each tesla"),
        positive("resonance", "spectral", "γ µ₀ H_eff as a frequency"),
        not_negative("gilbert_damping", "number", "Gilbert damping"),
    ),
    summary="precession of magnetisation in an effective field",
    equation="ω_m (ω₀ − iαω) / [(ω₀ − iαω)² − ω²]",
    source="T. L. Gilbert, IEEE Trans. Magn. 40, 3443 (2004)",
    of=("permeability",),
)
