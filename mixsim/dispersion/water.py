"""Liquid water at a temperature: density, static permittivity, and its relaxation."""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from mixsim.dispersion.terms.relaxation import debye
from mixsim.units import AVOGADRO, BOLTZMANN, VACUUM_PERMITTIVITY

Array = NDArray[Any]

_MOLAR_MASS = 0.018015268  # kg/mol
_CRITICAL_TEMPERATURE, _CRITICAL_DENSITY = 647.096, 322.0  # K, kg/m³
_DIPOLE, _POLARISABILITY = 6.138e-30, 1.636e-40  # C m, C² m²/J
_SERIES = (
    (0.978224486826, 1, 0.25),
    (-0.957771379375, 1, 1.0),
    (0.237511794148, 1, 2.5),
    (0.714692244396, 2, 1.5),
    (-0.298217036956, 3, 1.5),
    (-0.108863472196, 3, 2.5),
    (0.949327488264e-1, 4, 2.0),
    (-0.980469816509e-2, 5, 2.0),
    (0.165167634970e-4, 6, 5.0),
    (0.937359795772e-4, 7, 0.5),
    (-0.123179218720e-9, 10, 10.0),
)
# relaxation times that the Vogel–Fulcher–Tammann form goes through: °C, ps
_RELAXATION = ((0.0, 17.67), (25.0, 8.27), (50.0, 4.75))
_ZERO = 273.15


def water_density(*, temperature: ArrayLike) -> Array:
    """Density of liquid water at 101.325 kPa.

    Parameters
    ----------
    temperature
        Temperature [K].

    Returns
    -------
    density
        Density [kg/m^3].

    Notes
    -----
    With t in °C::

        ρ = (999.83952 + 16.945176 t − 7.9870401e-3 t² − 46.170461e-6 t³ + 105.56302e-9 t⁴
             − 280.54253e-12 t⁵) / (1 + 16.879850e-3 t)

    Valid for: 0 to 100 °C.

    References
    ----------
    G. S. Kell, J. Chem. Eng. Data 20, 97 (1975); coefficients from memory.

    Examples
    --------
    >>> print(f"{water_density(temperature=298.15):.3f}")
    997.045
    """
    t = np.asarray(temperature, dtype=float) - _ZERO
    series = (-280.54253e-12, 105.56302e-9, -46.170461e-6, -7.9870401e-3, 16.945176, 999.83952)
    return np.asarray(np.polyval(series, t) / (1.0 + 16.879850e-3 * t))[()]


def water_static(*, temperature: ArrayLike) -> Array:
    """Static permittivity of liquid water at 101.325 kPa.

    Parameters
    ----------
    temperature
        Temperature [K].

    Returns
    -------
    permittivity
        Static relative permittivity [-].

    Notes
    -----
    The release R8-97: with the Harris–Alder factor g(ρ, T), A = N_A μ² ρ g/(ε₀ k T M) and
    B = N_A α ρ/(3 ε₀ M)::

        ε = [1 + A + 5B + √(9 + 2A + 18B + A² + 10AB + 9B²)] / (4 − 4B)

    Valid for: 0 to 100 °C, where `water_density` holds.

    References
    ----------
    International Association for the Properties of Water and Steam, Release on the Static Dielectric Constant
    of Ordinary Water Substance, R8-97 (1997); coefficients as an open package has them.

    Examples
    --------
    >>> print(f"{water_static(temperature=298.15):.2f}")
    78.41
    """
    kelvin, rho = np.asarray(temperature, dtype=float), water_density(temperature=temperature)
    delta, tau = rho / _CRITICAL_DENSITY, _CRITICAL_TEMPERATURE / kelvin
    with np.errstate(invalid="ignore"):  # below 228 K, where it does not hold
        g = 1.0 + 0.196096504426e-2 * delta * (kelvin / 228.0 - 1.0) ** -1.2
    for factor, of_density, of_temperature in _SERIES:
        g = g + factor * delta**of_density * tau**of_temperature
    molecules = AVOGADRO * rho / _MOLAR_MASS
    a = molecules * _DIPOLE**2 * g / (VACUUM_PERMITTIVITY * BOLTZMANN * kelvin)
    b = molecules * _POLARISABILITY / (3.0 * VACUUM_PERMITTIVITY)
    root = np.sqrt(9.0 + 2.0 * a + 18.0 * b + a * a + 10.0 * a * b + 9.0 * b * b)
    return np.asarray((1.0 + a + 5.0 * b + root) / (4.0 - 4.0 * b))[()]


def water_level(*, temperature: ArrayLike) -> Array:
    """Permittivity of water above its main relaxation, well below its librations.

    Parameters
    ----------
    temperature
        Temperature [K].

    Returns
    -------
    permittivity
        Relative permittivity [-].

    Notes
    -----
    5.7 at 0 °C and 5.2 at 25 °C, straight between and beyond: known to a few tenths.

    References
    ----------
    U. Kaatze, J. Chem. Eng. Data 34, 371 (1989); values from memory.

    Examples
    --------
    >>> print(f"{water_level(temperature=298.15):.1f}")
    5.2
    """
    return np.asarray(5.7 - 0.02 * (np.asarray(temperature, dtype=float) - _ZERO))[()]


def water_relaxation_time(*, temperature: ArrayLike) -> Array:
    """Relaxation time of liquid water.

    Parameters
    ----------
    temperature
        Temperature [K].

    Returns
    -------
    relaxation_time
        Relaxation time [s].

    Notes
    -----
    ln τ = a + b/(T − T₀) through 17.67 ps at 0 °C, 8.27 ps at 25 °C and 4.75 ps at 50 °C.
    Valid for: 0 to 60 °C; to 2 % at 20 °C, where 9.36 ps is measured.

    References
    ----------
    U. Kaatze, J. Chem. Eng. Data 34, 371 (1989), values from memory; the form of Vogel, Fulcher and Tammann.

    Examples
    --------
    >>> print(f"{1e12 * water_relaxation_time(temperature=298.15):.2f}")
    8.27
    """
    (t1, y1), (t2, y2), (t3, y3) = ((_ZERO + t, np.log(1e-12 * tau)) for t, tau in _RELAXATION)
    # 1/(T − T₀) is a straight line of ln τ: T₀ from three points
    ratio = (y1 - y2) / (y2 - y3) * (t3 - t2) / (t2 - t1)
    pole = (t3 - ratio * t1) / (1.0 - ratio)
    slope = (y1 - y2) / (1.0 / (t1 - pole) - 1.0 / (t2 - pole))
    here = np.asarray(temperature, dtype=float) - pole
    return np.asarray(np.exp(y2 + slope * (1.0 / here - 1.0 / (t2 - pole))))[()]


def water(omega: ArrayLike, *, temperature: ArrayLike) -> Array:
    """Permittivity of liquid water from dc to microwaves.

    Parameters
    ----------
    omega
        Angular frequency [rad/s].
    temperature
        Temperature [K].

    Returns
    -------
    permittivity
        Complex relative permittivity [-].

    Notes
    -----
    One Debye relaxation from `water_static` to `water_level` with `water_relaxation_time`.
    Valid for: 0 to 60 °C, up to some 60 GHz; pure water, which conducts too little to matter.

    References
    ----------
    U. Kaatze, J. Chem. Eng. Data 34, 371 (1989).

    Examples
    --------
    >>> print(f"{water(2 * 3.141592653589793 * 10e9, temperature=298.15):.1f}")
    62.8+30.0j
    """
    level = water_level(temperature=temperature)
    step = water_static(temperature=temperature) - level
    time = water_relaxation_time(temperature=temperature)
    return np.asarray(level + debye(omega, step=step, relaxation_time=time))[()]


def water_terahertz_static(*, temperature: ArrayLike) -> Array:
    """Static permittivity of liquid water that belongs to `water_terahertz`.

    Parameters
    ----------
    temperature
        Temperature [K].

    Returns
    -------
    permittivity
        Static relative permittivity [-].

    Notes
    -----
    ε_s = 77.66 + 103.3 θ with θ = 300 K/T − 1.
    Valid for: 0 to 40 °C, where it lies within 0.2 of `water_static`.

    References
    ----------
    Recommendation ITU-R P.840-7, equation 6, coefficients as an open package has them.

    Examples
    --------
    >>> print(f"{water_terahertz_static(temperature=298.15):.2f}")
    78.30
    """
    return np.asarray(77.66 + 103.3 * _warmth(temperature))[()]


def water_terahertz_level(*, temperature: ArrayLike) -> Array:
    """Permittivity of water above both relaxations of `water_terahertz`.

    Parameters
    ----------
    temperature
        Temperature [K].

    Returns
    -------
    permittivity
        Relative permittivity, 3.52 at any temperature [-].

    References
    ----------
    Recommendation ITU-R P.840-7, equation 8.

    Examples
    --------
    >>> print(water_terahertz_level(temperature=298.15))
    3.52
    """
    return np.asarray(3.52 + 0.0 * np.asarray(temperature, dtype=float))[()]


def water_terahertz(omega: ArrayLike, *, temperature: ArrayLike) -> Array:
    """Permittivity of liquid water from dc to 1 THz, by two relaxations.

    Parameters
    ----------
    omega
        Angular frequency [rad/s].
    temperature
        Temperature [K].

    Returns
    -------
    permittivity
        Complex relative permittivity [-].

    Notes
    -----
    With ε_s of `water_terahertz_static`, ε₁ = 0.0671 ε_s, ε₂ of `water_terahertz_level`, θ = 300 K/T − 1::

        ε = ε₂ + (ε_s − ε₁)/(1 − if/f₁) + (ε₁ − ε₂)/(1 − if/f₂)
        f₁ = (20.20 − 146 θ + 316 θ²) GHz,   f₂ = 39.8 f₁

    Valid for: up to 1 THz, made for cloud near 0 °C; up to 40 °C it keeps within 2 % of `water` where that
    holds, and is 4 % away at 60 °C.

    References
    ----------
    Recommendation ITU-R P.840-7, equations 4 to 11, coefficients as an open package has them; after H. J.
    Liebe, G. A. Hufford, T. Manabe, Int. J. Infrared Millim. Waves 12, 659 (1991).

    Examples
    --------
    >>> print(f"{water_terahertz(2 * 3.141592653589793 * 1e12, temperature=298.15):.2f}")
    4.19+2.25j
    """
    warmth = _warmth(temperature)
    static, level = (of(temperature=temperature) for of in (water_terahertz_static, water_terahertz_level))
    between = 0.0671 * static
    first = 2e9 * np.pi * (20.20 + warmth * (-146.0 + 316.0 * warmth))
    slow = debye(omega, step=static - between, relaxation_time=1.0 / first)
    fast = debye(omega, step=between - level, relaxation_time=1.0 / (39.8 * first))
    return np.asarray(level + slow + fast)[()]


def _warmth(temperature: ArrayLike) -> Array:
    return np.asarray(300.0 / np.asarray(temperature, dtype=float) - 1.0)
