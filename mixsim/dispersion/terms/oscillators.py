"""Bound and free oscillators: Lorentz and Drude."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from mixsim.dispersion import descriptions
from mixsim.dispersion.registry import Route, Term
from mixsim.dispersion.terms.parts import Array, blank, floats, over
from mixsim.parameter import by_name, not_negative, positive


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
    w, wp, w0, width = floats(omega, plasma, resonance, damping)
    denominator = blank(w, w0, width)
    np.subtract(w0, w, out=denominator.real)
    denominator.real *= w0 + w  # exact near the resonance, where ω₀² − ω² loses digits
    np.multiply(-width, w, out=denominator.imag)
    return over(wp * wp, denominator)


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
    wp, w0, width = floats(plasma, resonance, damping)
    nothing = 0.0 * (wp + w0 + width)  # carries shape and NaN of what does not enter otherwise
    return nothing, (wp / w0) ** 2 + nothing


LORENTZ = Term(
    name="lorentz",
    function=lorentz,
    low=lorentz_low,
    canonical={
        "plasma": (
            Route("plasma", descriptions.plasma_scaled, also=("strength",)),
            Route("step", descriptions.plasma_from_step, also=("resonance",)),
            Route("number_density", descriptions.plasma_from_number_density, also=("strength",)),
            Route(
                "absorption_peak",
                descriptions.plasma_from_absorption_peak,
                also=("damping", "background_index"),
            ),
        ),
        "resonance": (Route("resonance"),),
        "damping": (Route("damping"),),
    },
    parameters=by_name(
        not_negative("plasma", "spectral", "plasma frequency"),
        not_negative(
            "strength",
            "number",
            "multiplies plasma²; with number_density, the oscillator strength",
            default=1.0,
        ),
        not_negative("step", "number", "static contribution"),
        not_negative("absorption_peak", "absorption", "peak absorption of a weak band, base e"),
        positive("background_index", "number", "index of the medium at the band, beside absorption_peak"),
        not_negative("number_density", "number density", "oscillators per volume"),
        positive("resonance", "spectral", "resonance frequency"),
        not_negative("damping", "rate", "full width at half maximum"),
    ),
    summary="bound oscillators: an absorption band and the step that it leaves below it",
    equation="ωp² / (ω₀² − ω² − iΓω)",
    source="H. A. Lorentz, The Theory of Electrons, 1909",
)


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
    w, wp, rate = floats(omega, plasma, damping)
    denominator = blank(w, rate)
    np.multiply(w, w, out=denominator.real)
    np.multiply(rate, w, out=denominator.imag)
    return over(-wp * wp, denominator)


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
    wp, rate = floats(plasma, damping)
    nothing = 0.0 * (wp + rate)
    lossless = (rate == 0) | (wp == 0)
    finite = np.where(lossless, 1.0, rate)
    conducts = np.where(lossless & (wp != 0), np.inf, wp * wp / finite)
    return conducts + nothing, np.where(lossless, 0.0, -((wp / finite) ** 2)) + nothing


DRUDE = Term(
    name="drude",
    function=drude,
    low=drude_low,
    canonical={
        "plasma": (
            Route("plasma", descriptions.plasma_scaled, also=("strength",)),
            Route("carrier_density", descriptions.plasma_from_carriers, also=("effective_mass",)),
            Route("conductivity", descriptions.plasma_from_conductivity, also=("collision_time",)),
        ),
        "damping": (
            Route("damping"),
            Route("mobility", descriptions.damping_from_mobility, also=("effective_mass",)),
            Route("collision_time", descriptions.damping_from_collision_time),
        ),
    },
    parameters=by_name(
        not_negative("plasma", "spectral", "plasma frequency, unscreened"),
        not_negative("strength", "number", "multiplies plasma²", default=1.0),
        not_negative("carrier_density", "number density", "free carriers per volume"),
        positive("effective_mass", "electron masses", "effective mass in electron masses"),
        not_negative("conductivity", "conductivity", "dc conductivity"),
        not_negative("damping", "rate", "collision rate"),
        positive("mobility", "mobility", "mobility of the carriers"),
        positive("collision_time", "time", "time between collisions"),
        positive(
            "fermi_velocity", "velocity", "of the carriers: in grains adds A v_F/R to the collision rate"
        ),
        not_negative("surface_scattering", "number", "A, of order one, beside fermi_velocity"),
    ),
    summary="free carriers with one collision rate",
    equation="−ωp² / (ω² + iγω)",
    source="P. Drude, Ann. Phys. 306, 566 (1900)",
    of=("permittivity",),
    in_grains={
        "damping": Route(
            "fermi_velocity",
            descriptions.damping_in_grain,
            also=("surface_scattering", "damping", "diameter"),
        )
    },
)
