"""Maxwell Garnett: separate grains of any number of kinds in a host, spheres or ellipsoids."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import ArrayLike

from mixsim.mixing.depolarisation import Array, Depolarisation, same_length

_RESONANT = 1e-100  # stands for the vanishing denominator of a loss-free grain at its own resonance


def maxwell_garnett(
    phases: Sequence[ArrayLike],
    *,
    fractions: Sequence[ArrayLike],
    depolarisations: Sequence[Depolarisation] | None = None,
) -> Array:
    """Permittivity of separate grains in a host, after Maxwell Garnett.

    Parameters
    ----------
    phases
        Relative permittivity of each phase, host first [-].
    fractions
        Volume fraction of each phase, host included [-].
    depolarisations
        Depolarisation factors and weights of each phase [-]; that of the host is not used. None: spheres.

    Returns
    -------
    permittivity
        Relative permittivity of the mixture, complex [-]. Aligned grains give the three principal axes at
        the second-to-last position.

    Raises
    ------
    Refusal
        Where phases, fractions and depolarisations differ in number.

    Notes
    -----
    With A the field inside a grain over the field around it, and < > the mean over its principal axes::

        A_k = ε_h / (ε_h + N_k (ε_k − ε_h))
        ε = ε_h + Σ f_k (ε_k − ε_h) <A_k> / (1 − Σ f_k <N_k (ε_k − ε_h)/(ε_h + N_k (ε_k − ε_h))>)
          = (f_h ε_h + Σ f_k ε_k <A_k>) / (f_h + Σ f_k <A_k>)

    The second line is what is computed: no term cancels, so it stands any contrast. One kind of sphere
    leaves the usual (ε − ε_h)/(ε + 2ε_h) = f (ε_i − ε_h)/(ε_i + 2ε_h).
    Valid for: grains apart from each other and small against the wavelength; exact to first order in f,
    low where a strong filler comes near touching (against a cubic array of perfectly conducting spheres
    0.3 % at f = 0.2, 8 % at f = 0.4).

    References
    ----------
    J. C. Maxwell Garnett, "Colours in metal glasses and in metallic films",
    Phil. Trans. R. Soc. Lond. A 203, 385 (1904).

    Examples
    --------
    >>> print(f"{maxwell_garnett([1.0, 10.0], fractions=[0.5, 0.5]):.3f}")
    2.800+0.000j
    """
    shapes = same_length(phases, fractions, depolarisations)
    with np.errstate(divide="ignore", invalid="ignore", over="ignore", under="ignore"):
        if len(phases) == 2 and len(shapes[1]) == 1:
            return _one_kind(phases[0], phases[1], fractions[0], fractions[1], shapes[1][0][0])
        return polarised_mean(phases, fractions=fractions, depolarisations=shapes)


def _one_kind(
    host: ArrayLike, grain: ArrayLike, f_host: ArrayLike, f_grain: ArrayLike, factor: Array
) -> Array:
    """Two phases, one factor: a ratio of weighted means, regular at the resonance of a lone grain."""
    outside, inside = np.asarray(host, dtype=complex), np.asarray(grain, dtype=complex)
    apart, filled = np.asarray(f_host, dtype=float), np.asarray(f_grain, dtype=float)
    share = factor * apart
    upper = apart - share  # (1 − f)(1 − N), the weight of the host above the line
    mixture = np.asarray(
        outside
        * (((filled + share) * inside + upper * outside) / (share * inside + (filled + upper) * outside))
    )
    mixture.imag += 0.0  # division leaves -0.0 where nothing is lost and ε′ < 0
    return mixture[()]


def polarised_mean(
    phases: Sequence[ArrayLike], *, fractions: Sequence[ArrayLike], depolarisations: Sequence[Depolarisation]
) -> Array:
    """Mean of the phases, each weighted by its volume and by the field inside its grains.

    Parameters
    ----------
    phases
        Relative permittivity of each phase, host first [-].
    fractions
        Volume fraction of each phase, host included [-].
    depolarisations
        Depolarisation factors and weights of each phase [-]; that of the host is not used.

    Returns
    -------
    permittivity
        Relative permittivity of the mixture, complex [-].

    Notes
    -----
    The last equation of `maxwell_garnett`; the caller silences the warnings of numpy.
    Valid for: any number of phases; the fractions add up to one.

    Examples
    --------
    >>> from mixsim.mixing.depolarisation import SPHERE
    >>> print(polarised_mean([1.0, 4.0], fractions=[0.5, 0.5], depolarisations=[SPHERE, SPHERE]))
    (2+0j)
    """
    host = np.asarray(phases[0], dtype=complex)
    below: Array = np.asarray(fractions[0], dtype=float)
    above: Array = below * host
    for phase, fraction, depolarisation in zip(phases[1:], fractions[1:], depolarisations[1:], strict=True):
        inside = np.asarray(phase, dtype=complex)
        weight: Array = np.asarray(0.0)
        for factor, share in depolarisation:
            local = (1.0 - factor) * host + factor * inside
            weight = weight + share * (host / np.where(local == 0.0, _RESONANT * host + _RESONANT**3, local))
        weight = np.asarray(fraction, dtype=float) * weight
        above = above + weight * inside
        below = below + weight
    mixture = np.asarray(above / below)
    mixture.imag += 0.0  # division leaves -0.0 where nothing is lost and ε′ < 0
    return mixture[()]


def fraction_from(mixture: ArrayLike, *, host: ArrayLike, inclusion: ArrayLike) -> Array:
    """Volume fraction of one kind of sphere that gives this mixture.

    Parameters
    ----------
    mixture, host, inclusion
        Relative permittivities [-].

    Returns
    -------
    fraction
        Volume fraction of the spheres [-]: real for real permittivities, otherwise complex, the imaginary
        part measuring how far the three fail to agree; not finite where there is no contrast.

    Notes
    -----
    f = (ε − ε_h)(ε_i + 2ε_h) / ((ε + 2ε_h)(ε_i − ε_h)), returned as it comes, also outside 0…1.
    Valid for: two phases of spheres.

    Examples
    --------
    >>> print(f"{fraction_from(2.8, host=1.0, inclusion=10.0):.3f}")
    0.500
    """
    e, h, i = np.asarray(mixture), np.asarray(host), np.asarray(inclusion)
    with np.errstate(divide="ignore", invalid="ignore"):
        fraction: Array = (e - h) / (e + 2.0 * h) * ((i + 2.0 * h) / (i - h))
    return fraction


def inclusion_from(mixture: ArrayLike, *, host: ArrayLike, fraction: ArrayLike) -> Array:
    """Permittivity of the spheres that gives this mixture.

    Parameters
    ----------
    mixture, host
        Relative permittivities [-].
    fraction
        Volume fraction of the spheres [-].

    Returns
    -------
    inclusion
        Relative permittivity of the spheres [-], as it comes: a mixture above the ceiling
        ε_h (1 + 2f)/(1 − f) of the rule asks for a negative one, and no dielectric does that.

    Notes
    -----
    ε_i = ε_h [2(ε − ε_h) + f(ε + 2ε_h)] / [f(ε + 2ε_h) − (ε − ε_h)].
    Valid for: two phases of spheres.

    Examples
    --------
    >>> print(f"{inclusion_from(2.8, host=1.0, fraction=0.5):.3f}")
    10.000
    """
    e, h = np.asarray(mixture), np.asarray(host)
    rise, dilute = e - h, np.asarray(fraction) * (e + 2.0 * h)
    with np.errstate(divide="ignore", invalid="ignore"):
        inclusion: Array = h * ((dilute + 2.0 * rise) / (dilute - rise))
    return inclusion
