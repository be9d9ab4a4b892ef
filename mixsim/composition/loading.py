"""Loading bases: volume, volume of solids, weight and phr to volume fractions of the whole mixture."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any, Literal, get_args

import numpy as np
from numpy.typing import ArrayLike, NDArray

Basis = Literal["volume_fraction", "volume_fraction_of_solids", "weight_fraction", "phr"]
BASES: tuple[Basis, ...] = get_args(Basis)


@dataclass(frozen=True, slots=True)
class Loading:
    """How much of one constituent, on one basis.

    Attributes
    ----------
    basis
        One of `BASES`.
    amount
        Amount on that basis; parts per hundred of host for ``phr`` [-].
    density
        Density of the constituent [kg/m^3]; may be None under a volume basis with additive volumes.
    coat_volume
        Volume of the coating of its grains over their own [-].
    coat_mass
        Mass of that coating per volume of the grains [kg/m^3]; may be None where the density may.
    """

    basis: Basis
    amount: ArrayLike
    density: ArrayLike | None
    coat_volume: ArrayLike = 0.0
    coat_mass: ArrayLike | None = 0.0


def volume_fractions(
    loadings: Sequence[Loading],
    *,
    host_density: ArrayLike | None = None,
    voids: ArrayLike = 0.0,
    mixture_density: ArrayLike | None = None,
) -> tuple[Any, ...]:
    """Volume fractions of host, of each constituent and of the voids.

    Parameters
    ----------
    loadings
        Constituents but the host, each on its own basis.
    host_density
        Density of the host [kg/m^3]; needed by a weight basis, phr or a measured mixture density.
    voids
        Volume fraction of voids in the whole mixture [-].
    mixture_density
        Measured density of the whole mixture, voids included [kg/m^3]. It replaces additive volumes:
        the partial volumes then need not add up to one.

    Returns
    -------
    fractions
        Host, constituents in order without their coatings, voids; each of the broadcast shape [-].

    Raises
    ------
    ValueError
        Where a density that the bases need is missing.

    Notes
    -----
    With m the mass per volume of mixture, V the volume given outright and M its mass,
    weight fractions w_k = m_k/m and phr p_k = 100 m_k/m_host, the solids volume 1 − v closes::

        1 − v = V + m Σ w_k (1 + c_k)/ρ_k + m_host (1/ρ_host + Σ p_k (1 + c_k)/(100 ρ_k))
        m = M + m Σ w_k (1 + s_k/ρ_k) + m_host (1 + Σ p_k (1 + s_k/ρ_k)/100)

    with c and s the volume and the mass of a coating per volume of grain; V and M hold those of theirs:
    two linear equations for m and m_host. With a measured density m = ρ and only the second is used.
    Valid for: any loadings; a fraction outside 0…1 is returned as it comes, never clipped.

    Examples
    --------
    45 vol% of a powder of 5 g/cm³ in a resin of 1 g/cm³ is 80.357 % by weight:

    >>> host, filler, voids = volume_fractions(
    ...     [Loading("weight_fraction", 0.8035714285714286, 5000.0)], host_density=1000.0)
    >>> round(float(filler), 9)
    0.45
    """
    v = np.asarray(voids, dtype=float)
    if all(item.basis in ("volume_fraction", "volume_fraction_of_solids") for item in loadings):
        given = [_given_volume(item, v) for item in loadings]
        if mixture_density is None:
            filled = (f * (1.0 + np.asarray(i.coat_volume)) for f, i in zip(given, loadings, strict=True))
            host = 1.0 - v - sum(filled, np.float64(0.0))
        else:
            given_mass = sum(
                (f * _mass(item) for f, item in zip(given, loadings, strict=True)), np.float64(0.0)
            )
            host = (np.asarray(mixture_density, dtype=float) - given_mass) / _density(host_density)
        return (host, *given, v)

    rho_h = _density(host_density)
    volume: Any = 0.0
    mass: Any = 0.0
    weights: Any = 0.0
    parts: Any = 0.0
    per_weight: Any = 0.0
    per_host: Any = 1.0 / rho_h
    for item in loadings:
        rho = _density(item.density)
        amount = np.asarray(item.amount, dtype=float)
        grown, heavy = 1.0 + np.asarray(item.coat_volume), _mass(item)
        if item.basis == "weight_fraction":
            weights, per_weight = weights + amount * (heavy / rho), per_weight + amount * (grown / rho)
        elif item.basis == "phr":
            parts, per_host = (
                parts + amount / 100.0 * (heavy / rho),
                per_host + amount / 100.0 * (grown / rho),
            )
        else:
            f = _given_volume(item, v)
            volume, mass = volume + f * grown, mass + f * heavy

    if mixture_density is None:
        host_share = (1.0 - weights) / (1.0 + parts)
        m = (1.0 - v - volume + per_host * mass / (1.0 + parts)) / (per_weight + per_host * host_share)
    else:
        m = np.asarray(mixture_density, dtype=float)
    m_host = (m * (1.0 - weights) - mass) / (1.0 + parts)

    fractions = []
    for item in loadings:
        if item.basis == "weight_fraction":
            fractions.append(np.asarray(item.amount) * m / _density(item.density))
        elif item.basis == "phr":
            fractions.append(np.asarray(item.amount) / 100.0 * m_host / _density(item.density))
        else:
            fractions.append(_given_volume(item, v))
    return (m_host / rho_h, *fractions, v)


def _given_volume(item: Loading, voids: NDArray[np.float64]) -> Any:
    amount = np.asarray(item.amount, dtype=float)
    return amount * (1.0 - voids) if item.basis == "volume_fraction_of_solids" else amount


def _mass(item: Loading) -> Any:
    """Mass of grains and their coating per volume of the grains."""
    return _density(item.density) + _density(item.coat_mass)


def _density(density: ArrayLike | None) -> Any:
    if density is None:
        raise ValueError("a density is needed to turn weight into volume")
    return np.asarray(density, dtype=float)
