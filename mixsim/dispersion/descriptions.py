"""The words of data sheets turned into the parameters of the terms: one formula each.

Each takes the parameters of one `Route` of the register, by their names there.
"""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from mixsim.errors import Refusal
from mixsim.units import ELECTRON_MASS, ELEMENTARY_CHARGE, SPEED_OF_LIGHT, VACUUM_PERMITTIVITY

Array = NDArray[Any]

_PLASMA_SQUARED_PER_DENSITY = ELEMENTARY_CHARGE**2 / (VACUUM_PERMITTIVITY * ELECTRON_MASS)


def plasma_scaled(*, plasma: ArrayLike, strength: ArrayLike) -> Array:
    """Plasma frequency of a term that holds the share `strength` of a common one squared.

    Parameters
    ----------
    plasma
        Plasma frequency that the share refers to [rad/s].
    strength
        Share of its square [-].

    Returns
    -------
    plasma
        √strength · plasma [rad/s].

    Examples
    --------
    >>> float(plasma_scaled(plasma=2.0, strength=0.25))
    1.0
    """
    return np.asarray(np.asarray(plasma, dtype=float) * np.sqrt(np.asarray(strength, dtype=float)))[()]


def plasma_from_step(*, step: ArrayLike, resonance: ArrayLike) -> Array:
    """Plasma frequency from the static step: ωp = ω₀ √Δε.

    Parameters
    ----------
    step
        Static contribution Δε of the band [-].
    resonance
        Resonance frequency ω₀ [rad/s].

    Returns
    -------
    plasma
        Plasma frequency ωp [rad/s].

    Examples
    --------
    >>> float(plasma_from_step(step=4.0, resonance=3.0))
    6.0
    """
    return np.asarray(np.asarray(resonance, dtype=float) * np.sqrt(np.asarray(step, dtype=float)))[()]


def plasma_from_number_density(*, number_density: ArrayLike, strength: ArrayLike) -> Array:
    """Plasma frequency of isolated oscillators: ωp² = N e² f / (ε₀ mₑ).

    Parameters
    ----------
    number_density
        Oscillators per volume N [m^-3].
    strength
        Oscillator strength f [-].

    Returns
    -------
    plasma
        Plasma frequency ωp [rad/s].

    Examples
    --------
    >>> f"{plasma_from_number_density(number_density=1e24, strength=1.0):.5e}"
    '5.64146e+13'
    """
    density = np.asarray(number_density, dtype=float) * np.asarray(strength, dtype=float)
    return np.asarray(np.sqrt(_PLASMA_SQUARED_PER_DENSITY * density))[()]


def plasma_from_absorption_peak(
    *, absorption_peak: ArrayLike, damping: ArrayLike, background_index: ArrayLike
) -> Array:
    """Plasma frequency of a weak Lorentz band from its peak absorption: ωp² = c n α γ.

    Parameters
    ----------
    absorption_peak
        Absorption coefficient at the peak, base e, of the band alone α [1/m].
    damping
        Full width at half maximum γ [rad/s].
    background_index
        Refractive index of the medium at the band n [-].

    Returns
    -------
    plasma
        Plasma frequency of the band as it appears in its medium ωp [rad/s].

    Notes
    -----
    At the peak ε″ = ωp²/(γω₀), k = ε″/(2n) and α = 2ω₀k/c. Isolated absorbers feel the Lorentz field of their
    medium: behind this ωp² stands N f e²/(ε₀mₑ) ((n² + 2)/3)², see `oscillators_from_absorption_peak`.
    Valid for: a line so weak that it does not move the index, k ≪ n; the error grows with its strength.

    References
    ----------
    A. Smakula, Z. Phys. 59, 603 (1930).

    Examples
    --------
    >>> plasma = plasma_from_absorption_peak(absorption_peak=1000.0, damping=3e14, background_index=1.5)
    >>> f"{float(plasma):.4e}"
    '1.1615e+13'
    """
    peak, width, n = (np.asarray(v, dtype=float) for v in (absorption_peak, damping, background_index))
    return np.asarray(np.sqrt(SPEED_OF_LIGHT * n * peak * width))[()]


def amplitude_from_absorption_peak(
    *, absorption_peak: ArrayLike, resonance: ArrayLike, background_index: ArrayLike
) -> Array:
    """Height of a weak band in ε″ from its peak absorption: A = c n α/ω₀.

    Parameters
    ----------
    absorption_peak
        Absorption coefficient at the peak, base e, of the band alone α [1/m].
    resonance
        Centre of the band ω₀ [rad/s].
    background_index
        Refractive index of the medium at the band n [-].

    Returns
    -------
    amplitude
        Height of the imaginary part A [-].

    Notes
    -----
    As `plasma_from_absorption_peak`, for a band of any shape.

    Examples
    --------
    >>> height = amplitude_from_absorption_peak(absorption_peak=1e3, resonance=3e15, background_index=1.5)
    >>> f"{float(height):.4e}"
    '1.4990e-04'
    """
    peak, centre, n = (np.asarray(v, dtype=float) for v in (absorption_peak, resonance, background_index))
    return np.asarray(SPEED_OF_LIGHT * n * peak / centre)[()]


def oscillators_from_absorption_peak(
    *, absorption_peak: ArrayLike, damping: ArrayLike, background_index: ArrayLike
) -> Array:
    """Smakula's equation: density of absorbers times their oscillator strength.

    Parameters
    ----------
    absorption_peak
        Absorption coefficient at the peak, base e, of the band alone α [1/m].
    damping
        Full width at half maximum of a Lorentz band γ [rad/s].
    background_index
        Refractive index of the medium at the band n [-].

    Returns
    -------
    number_density
        N f [m^-3].

    Notes
    -----
    N f = (ε₀ mₑ c/e²) · 9n/(n² + 2)² · α γ, with the local field of Lorentz. A Gaussian band of the same
    height and width has 0.6777 of it, the ratio of their areas: 1/√(π ln 2).
    Valid for: weak lines.

    References
    ----------
    A. Smakula, Z. Phys. 59, 603 (1930).

    Examples
    --------
    >>> eV = 1.602176634e-19 / 1.054571817e-34
    >>> found = oscillators_from_absorption_peak(
    ...     absorption_peak=1e3, damping=0.2 * eV, background_index=1.49
    ... )
    >>> f"{found:.2e}"
    '2.16e+22'
    """
    peak, width, n = (np.asarray(v, dtype=float) for v in (absorption_peak, damping, background_index))
    field = 9.0 * n / (n * n + 2.0) ** 2
    return np.asarray(SPEED_OF_LIGHT / _PLASMA_SQUARED_PER_DENSITY * field * peak * width)[()]


def plasma_from_carriers(*, carrier_density: ArrayLike, effective_mass: ArrayLike) -> Array:
    """Plasma frequency of free carriers: ωp² = n e² / (ε₀ m* mₑ).

    Parameters
    ----------
    carrier_density
        Carriers per volume n [m^-3].
    effective_mass
        Effective mass m* in electron masses [-].

    Returns
    -------
    plasma
        Unscreened plasma frequency ωp [rad/s].

    Examples
    --------
    >>> f"{plasma_from_carriers(carrier_density=2.79e26, effective_mass=0.35):.3e}"
    '1.593e+15'
    """
    density = np.asarray(carrier_density, dtype=float) / np.asarray(effective_mass, dtype=float)
    return np.asarray(np.sqrt(_PLASMA_SQUARED_PER_DENSITY * density))[()]


def plasma_from_conductivity(*, conductivity: ArrayLike, collision_time: ArrayLike) -> Array:
    """Plasma frequency from the dc conductivity: ωp² = σ / (ε₀ τ).

    Parameters
    ----------
    conductivity
        Conductivity σ at ω = 0 [S/m].
    collision_time
        Time between collisions τ [s].

    Returns
    -------
    plasma
        Unscreened plasma frequency ωp [rad/s].

    Examples
    --------
    >>> f"{plasma_from_conductivity(conductivity=1e5, collision_time=1e-14):.4e}"
    '1.0627e+15'
    """
    time = np.asarray(collision_time, dtype=float)
    return np.asarray(np.sqrt(np.asarray(conductivity, dtype=float) / (VACUUM_PERMITTIVITY * time)))[()]


def damping_from_mobility(*, mobility: ArrayLike, effective_mass: ArrayLike) -> Array:
    """Collision rate from the mobility: γ = e / (µ m* mₑ).

    Parameters
    ----------
    mobility
        Mobility µ [m^2/V/s].
    effective_mass
        Effective mass m* in electron masses [-].

    Returns
    -------
    damping
        Collision rate γ [rad/s].

    Examples
    --------
    >>> f"{damping_from_mobility(mobility=32.7e-4, effective_mass=0.35):.3e}"
    '1.537e+14'
    """
    mass = np.asarray(effective_mass, dtype=float) * ELECTRON_MASS
    return np.asarray(ELEMENTARY_CHARGE / (np.asarray(mobility, dtype=float) * mass))[()]


def damping_from_collision_time(*, collision_time: ArrayLike) -> Array:
    """Collision rate from the time between collisions: γ = 1/τ.

    Parameters
    ----------
    collision_time
        Time between collisions τ [s].

    Returns
    -------
    damping
        Collision rate γ [rad/s].

    Examples
    --------
    >>> float(damping_from_collision_time(collision_time=0.5))
    2.0
    """
    return np.asarray(1.0 / np.asarray(collision_time, dtype=float))[()]


def damping_in_grain(
    *, damping: ArrayLike, fermi_velocity: ArrayLike, surface_scattering: ArrayLike, diameter: ArrayLike
) -> Array:
    """Collision rate in a grain, whose surface stops carriers too: γ = γ_bulk + A v_F/R.

    Parameters
    ----------
    damping
        Collision rate γ_bulk of the bulk [rad/s].
    fermi_velocity
        Fermi velocity v_F [m/s].
    surface_scattering
        A [-], of order one: 3/4 for diffuse scattering in a sphere, 1 for a quantum box.
    diameter
        Of the sphere of the grain's volume, 2R [m].

    Returns
    -------
    damping
        Collision rate γ [rad/s].

    Notes
    -----
    Valid for: grains of more than a few hundred atoms.

    References
    ----------
    U. Kreibig and M. Vollmer, "Optical Properties of Metal Clusters", Springer (1995).

    Examples
    --------
    >>> silver = {"fermi_velocity": 1.4e6, "surface_scattering": 1.0}
    >>> print(f"{damping_in_grain(damping=1e14, diameter=2e-8, **silver):.3g}")
    2.4e+14
    """
    radius = 0.5 * np.asarray(diameter, dtype=float)
    speed = np.asarray(surface_scattering, dtype=float) * np.asarray(fermi_velocity, dtype=float)
    return np.asarray(np.asarray(damping, dtype=float) + speed / radius)[()]


def relaxation_time_from_frequency(*, relaxation_frequency: ArrayLike) -> Array:
    """Relaxation time from the relaxation frequency: τ = 1/(2πν).

    Parameters
    ----------
    relaxation_frequency
        Relaxation frequency as an angular frequency 2πν [rad/s].

    Returns
    -------
    relaxation_time
        Relaxation time τ [s].

    Examples
    --------
    >>> float(relaxation_time_from_frequency(relaxation_frequency=4.0))
    0.25
    """
    return np.asarray(1.0 / np.asarray(relaxation_frequency, dtype=float))[()]


def width_from_wavelength(width: ArrayLike, *, resonance: ArrayLike) -> Array:
    """Angular width of a band whose full width is given in vacuum wavelength.

    Parameters
    ----------
    width
        Full width at half maximum Δ in vacuum wavelength [m].
    resonance
        Resonance frequency ω₀ [rad/s].

    Returns
    -------
    width
        ω(λ₀ − Δ/2) − ω(λ₀ + Δ/2) [rad/s].

    Raises
    ------
    Refusal
        Where the width reaches twice the wavelength λ₀ of the resonance, so that no band remains.

    Notes
    -----
    With λ₀ = 2πc/ω₀ and ω(λ) = 2πc/λ. Valid for: Δ < 2λ₀.

    Examples
    --------
    >>> resonance = 2 * 3.141592653589793 * 299792458.0 / 600e-9
    >>> f"{width_from_wavelength(40e-9, resonance=resonance):.4e}"
    '2.0953e+14'
    """
    half = np.asarray(width, dtype=float) / 2.0
    turn = 2.0 * np.pi * SPEED_OF_LIGHT
    centre = turn / np.asarray(resonance, dtype=float)
    excess = np.broadcast_to(np.abs(half) >= centre, np.broadcast_shapes(half.shape, centre.shape))
    if excess.any():
        first = np.unravel_index(int(np.argmax(excess)), excess.shape)
        full = 2.0 * float(np.broadcast_to(half, excess.shape)[first])
        about = float(np.broadcast_to(centre, excess.shape)[first])
        raise Refusal(
            f"a width of {full * 1e9:.6g} nm about {about * 1e9:.6g} nm",
            f"it must be below twice the wavelength of the resonance, {2e9 * about:.6g} nm",
        )
    return np.asarray(2.0 * turn * half / ((centre - half) * (centre + half)))[()]
