"""Quantities that follow from permittivity and permeability at a frequency, and their register.

A new quantity is one function, its test and one entry of `QUANTITIES`. Each takes the angular frequency
[rad/s], the permittivity and the permeability [-], which broadcast.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from mixsim.units import SPEED_OF_LIGHT, VACUUM_PERMITTIVITY

Array = NDArray[Any]


def permittivity_real(omega: ArrayLike, permittivity: ArrayLike, permeability: ArrayLike) -> Array:
    """Real part of the permittivity, ε′ [-]."""
    return np.real(np.asarray(permittivity))


def permittivity_imag(omega: ArrayLike, permittivity: ArrayLike, permeability: ArrayLike) -> Array:
    """Imaginary part of the permittivity, ε″ [-], positive where power is lost."""
    return np.imag(np.asarray(permittivity))


def permeability_real(omega: ArrayLike, permittivity: ArrayLike, permeability: ArrayLike) -> Array:
    """Real part of the permeability, μ′ [-]."""
    return np.real(np.asarray(permeability))


def permeability_imag(omega: ArrayLike, permittivity: ArrayLike, permeability: ArrayLike) -> Array:
    """Imaginary part of the permeability, μ″ [-], positive where power is lost."""
    return np.imag(np.asarray(permeability))


def complex_index(omega: ArrayLike, permittivity: ArrayLike, permeability: ArrayLike) -> Array:
    """Complex refractive index n + ik.

    Parameters
    ----------
    omega
        Angular frequency [rad/s]; does not enter.
    permittivity, permeability
        Relative, complex [-].

    Returns
    -------
    index
        n + ik [-].

    Notes
    -----
    √ε·√μ with principal roots, not √(εμ), which would reverse the wave where ε′ < 0 and μ′ < 0.
    Valid for: passive media in the convention exp(−iωt).

    References
    ----------
    Common textbook form.

    Examples
    --------
    >>> print(complex_index(1.0, -1.0 + 0.0j, -1.0 + 0.0j))
    (-1+0j)
    """
    root = np.sqrt(np.asarray(permittivity, dtype=complex)) * np.sqrt(np.asarray(permeability, dtype=complex))
    return np.asarray(root)[()]


def refractive_index(omega: ArrayLike, permittivity: ArrayLike, permeability: ArrayLike) -> Array:
    """Refractive index n, the real part of `complex_index` [-]."""
    return np.real(complex_index(omega, permittivity, permeability))


def extinction(omega: ArrayLike, permittivity: ArrayLike, permeability: ArrayLike) -> Array:
    """Extinction coefficient k, the imaginary part of `complex_index` [-]."""
    return np.imag(complex_index(omega, permittivity, permeability))


def loss_tangent(omega: ArrayLike, permittivity: ArrayLike, permeability: ArrayLike) -> Array:
    """Loss tangent.

    Parameters
    ----------
    omega
        Angular frequency [rad/s]; does not enter.
    permittivity, permeability
        Relative, complex [-]; the permeability does not enter.

    Returns
    -------
    loss_tangent
        ε″/ε′ [-]; not finite where ε′ vanishes.

    Examples
    --------
    >>> float(loss_tangent(1.0, 4.0 + 0.02j, 1.0))
    0.005
    """
    e = np.asarray(permittivity, dtype=complex)
    with np.errstate(divide="ignore", invalid="ignore"):
        return np.asarray(e.imag / e.real)[()]


def magnetic_loss_tangent(omega: ArrayLike, permittivity: ArrayLike, permeability: ArrayLike) -> Array:
    """Magnetic loss tangent μ″/μ′ [-], as `loss_tangent` of the permeability."""
    return loss_tangent(omega, permeability, permittivity)


def absorption_coefficient(omega: ArrayLike, permittivity: ArrayLike, permeability: ArrayLike) -> Array:
    """Absorption coefficient of the power of a plane wave.

    Parameters
    ----------
    omega
        Angular frequency [rad/s].
    permittivity, permeability
        Relative, complex [-].

    Returns
    -------
    absorption_coefficient
        α = 2ωk/c, to base e [1/m].

    Notes
    -----
    The transmittance of a thickness d is exp(−αd) without reflections. Scattering is not in it.

    Examples
    --------
    >>> f"{absorption_coefficient(3e15, (1.5 + 1e-6j) ** 2, 1.0):.4f}"
    '20.0138'
    """
    k = extinction(omega, permittivity, permeability)
    return np.asarray(2.0 * np.asarray(omega, dtype=float) * k / SPEED_OF_LIGHT)[()]


def conductivity(omega: ArrayLike, permittivity: ArrayLike, permeability: ArrayLike) -> Array:
    """Effective conductivity of all dielectric loss.

    Parameters
    ----------
    omega
        Angular frequency [rad/s].
    permittivity, permeability
        Relative, complex [-]; the permeability does not enter.

    Returns
    -------
    conductivity
        σ = ωε₀ε″ [S/m].

    Examples
    --------
    >>> f"{conductivity(1e10, 2.0 + 0.1j, 1.0):.6f}"
    '0.008854'
    """
    loss = np.imag(np.asarray(permittivity, dtype=complex))
    return np.asarray(np.asarray(omega, dtype=float) * VACUUM_PERMITTIVITY * loss)[()]


@dataclass(frozen=True, slots=True)
class Quantity:
    """One quantity by its name.

    Attributes
    ----------
    name
        Word in answers.
    symbol, unit
        As shown.
    function
        ``function(omega, permittivity, permeability)``.
    summary
        What it is.
    """

    name: str
    symbol: str
    unit: str
    function: Callable[[ArrayLike, ArrayLike, ArrayLike], Array]
    summary: str


QUANTITIES: Mapping[str, Quantity] = {
    quantity.name: quantity
    for quantity in (
        Quantity("permittivity_real", "ε′", "", permittivity_real, "real part of the permittivity"),
        Quantity(
            "permittivity_imag", "ε″", "", permittivity_imag, "imaginary part of the permittivity, loss"
        ),
        Quantity("permeability_real", "μ′", "", permeability_real, "real part of the permeability"),
        Quantity(
            "permeability_imag", "μ″", "", permeability_imag, "imaginary part of the permeability, loss"
        ),
        Quantity("index", "n", "", refractive_index, "refractive index, real part of √ε·√μ"),
        Quantity("extinction", "k", "", extinction, "extinction coefficient, imaginary part of √ε·√μ"),
        Quantity("loss_tangent", "tan δ", "", loss_tangent, "dielectric loss tangent ε″/ε′"),
        Quantity("magnetic_loss_tangent", "tan δμ", "", magnetic_loss_tangent, "magnetic loss tangent μ″/μ′"),
        Quantity(
            "absorption_coefficient", "α", "1/m", absorption_coefficient, "absorption of power, 2ωk/c, base e"
        ),
        Quantity("conductivity", "σ", "S/m", conductivity, "conductivity of all dielectric loss, ωε₀ε″"),
    )
}
