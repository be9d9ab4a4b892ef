"""Dopant concentrations: weight and mole fraction to number of ions per volume of host."""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from mixsim.units import AVOGADRO


def number_density_from_weight_fraction(
    *,
    weight_fraction: ArrayLike,
    density: ArrayLike,
    molar_mass: ArrayLike,
    ions_per_formula: ArrayLike = 1.0,
) -> Any:
    """Ions per volume of host from the weight fraction of the compound that brings them.

    Parameters
    ----------
    weight_fraction
        Mass of the compound over mass of the doped host [-].
    density
        Density of the doped host [kg/m^3].
    molar_mass
        Molar mass of the compound [kg/mol].
    ions_per_formula
        Absorbing ions in one formula unit of it [-].

    Returns
    -------
    number_density
        Ions per volume [1/m^3].

    Notes
    -----
    N = w ρ N_A ν / M. Valid for: concentrations at which the density of the host still holds.

    References
    ----------
    Definition of the mole; Avogadro constant from the SI (2019).

    Examples
    --------
    >>> f"{number_density_from_weight_fraction(weight_fraction=0.01, density=2500.0, molar_mass=0.0749):.3e}"
    '2.010e+26'
    """
    w, rho, m, nu = (
        np.asarray(v, dtype=float) for v in (weight_fraction, density, molar_mass, ions_per_formula)
    )
    return w * rho * AVOGADRO * nu / m


def number_density_from_mole_fraction(
    *,
    mole_fraction: ArrayLike,
    density: ArrayLike,
    molar_mass: ArrayLike,
    host_molar_mass: ArrayLike,
    ions_per_formula: ArrayLike = 1.0,
) -> Any:
    """Ions per volume of host from the mole fraction of the compound that brings them.

    Parameters
    ----------
    mole_fraction
        Moles of the compound over moles of the doped host [-].
    density
        Density of the doped host [kg/m^3].
    molar_mass, host_molar_mass
        Molar masses of compound and undoped host [kg/mol].
    ions_per_formula
        Absorbing ions in one formula unit of the compound [-].

    Returns
    -------
    number_density
        Ions per volume [1/m^3].

    Notes
    -----
    w = x M / (x M + (1 − x) M_host), then N = w ρ N_A ν / M.
    Valid for: concentrations at which the density of the host still holds.

    References
    ----------
    Definition of the mole; Avogadro constant from the SI (2019).

    Examples
    --------
    >>> density = number_density_from_mole_fraction(
    ...     mole_fraction=0.01, density=2500.0, molar_mass=0.075, host_molar_mass=0.06)
    >>> f"{density:.3e}"
    '2.503e+26'
    """
    x, m, mh = (np.asarray(v, dtype=float) for v in (mole_fraction, molar_mass, host_molar_mass))
    return number_density_from_weight_fraction(
        weight_fraction=x * m / (x * m + (1.0 - x) * mh),
        density=density,
        molar_mass=molar_mass,
        ions_per_formula=ions_per_formula,
    )
