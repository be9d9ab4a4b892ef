"""Waves in and around a sphere: eddy currents, skin effect, and what the dipole alone scatters."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from mixsim.mixing.depolarisation import Array

_NEAR = 1.0  # |θ| below which the series serves: its terms fall as (θ/π)²
_TERMS = 22


def _cotangent_series() -> list[float]:
    """Coefficients of (1 − θ cot θ)/θ² in powers of θ², highest first.

    Those of t = θ cot θ follow from θ t′ = t − t² − θ².
    """
    t = [1.0]
    for k in range(1, _TERMS + 1):
        mixed = sum(t[j] * t[k - j] for j in range(1, k))
        t.append(-(mixed + (k == 1)) / (2 * k + 1))
    return [-value for value in reversed(t[1:])]


_SERIES = _cotangent_series()


def _curvature(theta: Array) -> Array:
    """(1 − θ cot θ)/θ², 1/3 at zero."""
    square = theta * theta
    near = np.abs(theta) < _NEAR
    # the closed form has lost its digits near zero, and the series diverges far away
    far = np.where(near, 1.0 + 0j, theta)
    closed = (1.0 - far / np.tan(far)) / (far * far)
    series = np.polyval(_SERIES, np.where(near, square, 0.0))
    curved: Array = np.where(near, series, closed)
    return curved


def inside_factor(size: ArrayLike) -> Array:
    """By how much waves and currents inside a sphere change the ε and the μ that it shows.

    Parameters
    ----------
    size
        θ = √ε_i √μ_i ωd/(2c), complex; its imaginary part is radius over skin depth [-].

    Returns
    -------
    factor
        F [-]: a sphere of ε_i, μ_i much smaller than the wavelength outside acts as one of F ε_i, F μ_i.

    Notes
    -----
    F = 2 (sin θ − θ cos θ) / ((θ² − 1) sin θ + θ cos θ), here as 2s/(1 − s) with s = (1 − θ cot θ)/θ².
    One for θ → 0; for a thick conductor 2i/θ, so that F μ falls and the sphere expels the magnetic field.
    Valid for: spheres with π d n_host/λ ≪ 1, whatever θ.

    References
    ----------
    L. Lewin, "The electrical constants of a material loaded with spherical particles",
    J. IEE Part III 94, 65 (1947).

    Examples
    --------
    >>> print(f"{inside_factor(0.1):.6f} {inside_factor(100 + 100j):.6f}")
    1.001001+0.000000j 0.010001+0.009999j
    """
    theta = np.asarray(size, dtype=complex)
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        s = _curvature(theta)
        factor = np.asarray(2.0 * s / (1.0 - s))
    return factor[()]


def dipole_grain(inclusion: ArrayLike, *, host: ArrayLike, size: ArrayLike) -> Array:
    """Permittivity at which a small sphere would have the dipole that this one, not so small, has.

    Parameters
    ----------
    inclusion
        F ε_i of the sphere, `inside_factor` included [-]; for the magnetic dipole F μ_i.
    host
        Relative permittivity around it; for the magnetic dipole its permeability [-].
    size
        x = √ε_h √μ_h ωd/(2c) [-].

    Returns
    -------
    permittivity
        Equivalent relative permittivity [-]; its imaginary part holds what the sphere scatters.

    Notes
    -----
    With a₁ the first coefficient of the exact series of Mie, β = 3i a₁/(2x³) takes the place of
    (ε − ε_h)/(ε + 2ε_h). With e the ratio of the two permittivities and s = (1 − x cot x)/x²::

        β = P (e − Q)/(e − R),   Q = 2s/(1 − s),   R = −2 (1 − ix)/(1 − ix − x²)
        P = (3/2) (1 − s) (sin x/x) exp(−ix)/(1 − ix − x²)
        ε = ε_h [(e − R) + 2P (e − Q)]/[(e − R) − P (e − Q)]

    Valid for: lone spheres as far as the dipole alone carries the series; it leaves out higher multipoles
    and the interference of what different grains scatter.

    References
    ----------
    G. Mie, Ann. Phys. 330, 377 (1908); W. T. Doyle, "Optical properties of a suspension of metal spheres",
    Phys. Rev. B 39, 9852 (1989).

    Examples
    --------
    >>> print(f"{dipole_grain(-4.0, host=2.25, size=0.3):.3f}")
    -3.666+0.093j
    """
    around, x = np.asarray(host, dtype=complex), np.asarray(size, dtype=complex)
    e = np.asarray(inclusion, dtype=complex) / around
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        s = _curvature(x)
        outgoing = 1.0 - 1j * x - x * x
        sinc = np.where(x == 0.0, 1.0, np.sin(x) / np.where(x == 0.0, 1.0, x))
        p = 1.5 * (1.0 - s) * sinc * np.exp(-1j * x) / outgoing
        above = e + 2.0 * (1.0 - 1j * x) / outgoing
        rest = p * (e - 2.0 * s / (1.0 - s))
        grain = np.asarray(around * ((above + 2.0 * rest) / (above - rest)))
    return grain[()]
