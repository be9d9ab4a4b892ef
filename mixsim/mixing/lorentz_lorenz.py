"""Lorentz–Lorenz: the polarisabilities of the constituents add in vacuum."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import ArrayLike

from mixsim.mixing.depolarisation import SPHERE, Array, Depolarisation, only_spheres, same_length
from mixsim.mixing.maxwell_garnett import polarised_mean

_CLOSED = 8 * float(np.finfo(float).eps)  # partial volumes that add up to one within rounding leave no vacuum


def lorentz_lorenz(
    phases: Sequence[ArrayLike],
    *,
    fractions: Sequence[ArrayLike],
    depolarisations: Sequence[Depolarisation] | None = None,
) -> Array:
    """Permittivity of a solution or glass whose constituents keep their molar refraction.

    Parameters
    ----------
    phases
        Relative permittivity of each constituent when pure, host first [-].
    fractions
        Partial volume of each constituent per volume of the mixture [-]: (mass per volume of the mixture)
        over (density when pure). They need not add up to one: a solution that contracts exceeds it.
    depolarisations
        Spheres, or None [-].

    Returns
    -------
    permittivity
        Relative permittivity of the mixture, complex [-].

    Raises
    ------
    Refusal
        Where the arguments differ in number or a phase is not of spheres.

    Notes
    -----
    Computed without cancellation, as a mean in vacuum of the fraction v = 1 − Σ φ_k::

        (ε − 1)/(ε + 2) = Σ φ_k (ε_k − 1)/(ε_k + 2)
        ε = (v + Σ a_k ε_k)/(v + Σ a_k),   a_k = 3 φ_k/(ε_k + 2)

    Vacuum is the host, so the rule is not homogeneous: doubling every phase does not double the answer.
    Valid for: molecular mixtures of isotropic, weakly polar constituents at frequencies of light.

    References
    ----------
    H. A. Lorentz, Ann. Phys. 245, 641 (1880); L. Lorenz, Ann. Phys. 247, 70 (1880).

    Examples
    --------
    >>> index_squared = lorentz_lorenz([1.333**2, 1.4735**2], fractions=[0.5, 0.5])
    >>> print(f"{index_squared.real ** 0.5:.4f}")
    1.4015
    """
    shapes = same_length(phases, fractions, depolarisations)
    only_spheres(shapes, rule="lorentz-lorenz")
    volumes = [np.asarray(fraction, dtype=float) for fraction in fractions]
    vacuum = 1.0 - sum(volumes, start=np.asarray(0.0))
    vacuum = np.where(np.abs(vacuum) < _CLOSED, 0.0, vacuum)
    with np.errstate(divide="ignore", invalid="ignore", over="ignore", under="ignore"):
        return polarised_mean(
            [1.0, *phases], fractions=[vacuum, *volumes], depolarisations=[SPHERE] * (len(phases) + 1)
        )


def fraction_from(mixture: ArrayLike, *, host: ArrayLike, inclusion: ArrayLike) -> Array:
    """Partial volume of the second constituent that gives this mixture, where the two add up to one.

    Parameters
    ----------
    mixture, host, inclusion
        Relative permittivities [-].

    Returns
    -------
    fraction
        Partial volume of the inclusion [-]: real for real permittivities, otherwise complex; not finite
        where there is no contrast.

    Notes
    -----
    φ = (L − L_h)/(L_i − L_h) with L = (ε − 1)/(ε + 2), that is
    (ε − ε_h)/(ε_i − ε_h) · (ε_i + 2)/(ε + 2).
    Valid for: two constituents with additive volumes.

    Examples
    --------
    >>> print(f"{fraction_from(2.0, host=1.0, inclusion=4.0):.3f}")
    0.500
    """
    e, h, i = np.asarray(mixture), np.asarray(host), np.asarray(inclusion)
    with np.errstate(divide="ignore", invalid="ignore"):
        fraction: Array = (e - h) / (e + 2.0) * ((i + 2.0) / (i - h))
    return fraction


def inclusion_from(mixture: ArrayLike, *, host: ArrayLike, fraction: ArrayLike) -> Array:
    """Permittivity of the second constituent that gives this mixture, where the two volumes add up to one.

    Parameters
    ----------
    mixture, host
        Relative permittivities [-].
    fraction
        Partial volume of the inclusion [-].

    Returns
    -------
    inclusion
        Relative permittivity of the inclusion [-], as it comes.

    Notes
    -----
    L_i = L_h + (L − L_h)/φ and ε_i = (1 + 2 L_i)/(1 − L_i), cleared of its inner fractions.
    Valid for: two constituents with additive volumes.

    Examples
    --------
    >>> print(f"{inclusion_from(2.0, host=1.0, fraction=0.5):.3f}")
    4.000
    """
    e, h = np.asarray(mixture), np.asarray(host)
    excess, dilute = e - h, np.asarray(fraction) * (e + 2.0)
    with np.errstate(divide="ignore", invalid="ignore"):
        inclusion: Array = (h * dilute + 2.0 * excess) / (dilute - excess)
    return inclusion
