"""Refractive indices in air, and at another temperature than they were measured at."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from mixsim.units import SPEED_OF_LIGHT

Array = NDArray[Any]

_CATALOGUE_AIR = 288.15 / 293.15  # density of air at 20 °C over that at 15 °C, at one pressure


def index_of_air(omega: ArrayLike) -> Array:
    """Refractive index of dry air at 20 °C and 101.325 kPa, to which glass catalogues refer.

    Parameters
    ----------
    omega
        Angular frequency [rad/s].

    Returns
    -------
    index
        Refractive index against vacuum [-].

    Notes
    -----
    ::

        (n − 1) 10⁸ = 5 792 105/(238.0185 − σ²) + 167 917/(57.362 − σ²),   σ = 1/λ in µm⁻¹

    at 15 °C with 450 ppm of carbon dioxide; n − 1 goes with the density of the air to 20 °C.
    Valid for: 0.23 to 1.7 µm, to 1e-8 at 15 °C; the step to 20 °C adds 1e-7 of (n − 1) at most.

    References
    ----------
    P. E. Ciddor, "Refractive index of air", Appl. Opt. 35, 1566 (1996), equation 1, coefficients as an
    open collection of optical constants has them.

    Examples
    --------
    >>> print(f"{index_of_air(2 * 3.141592653589793 * 299792458.0 / 589.3e-9):.7f}")
    1.0002724
    """
    wavenumber = np.asarray(omega, dtype=float) / (2.0 * np.pi * SPEED_OF_LIGHT) * 1e-6
    square = wavenumber * wavenumber
    excess = 5_792_105.0 / (238.0185 - square) + 167_917.0 / (57.362 - square)
    return np.asarray(1.0 + 1e-8 * excess * _CATALOGUE_AIR)[()]


def thermo_optic_shift(
    omega: ArrayLike,
    *,
    index: ArrayLike,
    temperature_difference: ArrayLike,
    thermo_optic: Sequence[ArrayLike],
) -> Array:
    """Change of the absolute index of a glass with temperature, by its six catalogue constants.

    Parameters
    ----------
    omega
        Angular frequency [rad/s].
    index
        Absolute refractive index at the temperature of the catalogue [-].
    temperature_difference
        Temperature less that of the catalogue, ΔT [K].
    thermo_optic
        D₀, D₁, D₂, E₀, E₁ and λ_TK, for wavelengths in µm [-].

    Returns
    -------
    shift
        To be added to the index [-].

    Notes
    -----
    ::

        Δn = (n² − 1)/(2n) · [D₀ ΔT + D₁ ΔT² + D₂ ΔT³ + (E₀ ΔT + E₁ ΔT²)/(λ² − λ_TK²)]

    Valid for: the temperatures of the catalogue, as a rule −100 to 140 °C, in the clear window.

    References
    ----------
    Common form of glass catalogues, from memory.

    Examples
    --------
    >>> constants = [1.86e-6, 1.31e-8, -1.37e-11, 4.34e-7, 6.27e-10, 0.170]
    >>> omega = 2 * 3.141592653589793 * 299792458.0 / 546.1e-9
    >>> shift = thermo_optic_shift(omega, index=1.519, temperature_difference=20, thermo_optic=constants)
    >>> print(f"{shift / 20:.2e}")
    1.62e-06
    """
    d0, d1, d2, e0, e1, pole = (np.asarray(constant, dtype=float) for constant in thermo_optic)
    n, step = np.asarray(index), np.asarray(temperature_difference, dtype=float)
    with np.errstate(divide="ignore", invalid="ignore"):
        inverse = (np.asarray(omega, dtype=float) / (2e6 * np.pi * SPEED_OF_LIGHT)) ** 2
        # 1/(λ² − λ_TK²), finite where λ is not
        resonance = inverse / (1.0 - inverse * pole * pole)
        change = step * (d0 + step * (d1 + step * d2)) + step * (e0 + step * e1) * resonance
        return np.asarray((n * n - 1.0) / (2.0 * n) * change)[()]
