"""Power means of the phases: the power law with its exponent, and the rules that are cases of it.

Formulas of geometry unsaid: they fit measurements of powders, soils and suspensions over what they were
fitted to. Series and parallel are exact for layers.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from mixsim.mixing.depolarisation import Array, Depolarisation, only_spheres, same_length

_NOTHING = 1e-300  # stands for a phase whose permittivity is zero: its logarithm is finite
Low = tuple[Array, Array, Array]
"""Static limit, rate and plateau of a mixture as ω → 0, as `mixsim.mixture.static` says."""


def power_law(
    phases: Sequence[ArrayLike],
    *,
    fractions: Sequence[ArrayLike],
    depolarisations: Sequence[Depolarisation] | None = None,
    exponent: ArrayLike,
) -> Array:
    """Permittivity whose power is the mean of the powers of the phases.

    Parameters
    ----------
    phases
        Relative permittivity of each phase [-].
    fractions
        Volume fraction of each phase, adding up to one [-].
    depolarisations
        Spheres, or None [-].
    exponent
        From −1 (layers in series) over 0 (Lichtenecker), ⅓ (Looyenga) and ½ (the index adds) to 1 (layers
        in parallel) [-].

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
    ε^α = Σ f_k ε_k^α, each power taken with 0 ≤ arg ε_k ≤ π, so that a passive mixture comes out. Computed
    about the geometric mean G, which keeps its digits however small the exponent::

        ln ε = ln G + ln(1 + Σ f_k [(ε_k/G)^α − 1])/α,   ln G = Σ f_k ln ε_k

    At weak contrast ε = <ε> − ½(1 − α) f(1 − f) Δ²/<ε>: only α = ⅓ agrees with an isotropic mixture in
    three dimensions, and none with few spheres of high contrast.
    Valid for: the powders and the loadings to which an exponent was fitted.

    References
    ----------
    J. R. Birchak, C. G. Gardner, J. E. Hipp, J. M. Victor, "High dielectric constant microwave probes for
    sensing soil moisture", Proc. IEEE 62, 93 (1974).

    Examples
    --------
    >>> print(f"{power_law([1.0, 9.0], fractions=[0.5, 0.5], exponent=0.5):.3f}")
    4.000+0.000j
    """
    only_spheres(same_length(phases, fractions, depolarisations), rule="power-law")
    power = np.asarray(exponent, dtype=float)
    with np.errstate(all="ignore"):
        values, volumes = _complex(phases), _volumes(fractions)
        logs = [_log(value) for value in values]
        mean = _sum(f * log for f, log in zip(volumes, logs, strict=True))
        spread = _sum(f * np.expm1(power * (log - mean)) for f, log in zip(volumes, logs, strict=True))
        rise = np.log1p(spread) / np.where(power == 0.0, 1.0, power)
        return _passive(np.exp(mean + np.where(power == 0.0, 0.0, rise)), values)


def looyenga(
    phases: Sequence[ArrayLike],
    *,
    fractions: Sequence[ArrayLike],
    depolarisations: Sequence[Depolarisation] | None = None,
) -> Array:
    """Permittivity whose cube root is the mean of the cube roots of the phases, after Looyenga.

    Parameters
    ----------
    phases
        Relative permittivity of each phase [-].
    fractions
        Volume fraction of each phase, adding up to one [-].
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
    ε^⅓ = Σ f_k ε_k^⅓, from adding a little of one mixture to another that differs little. Exact to second
    order in the contrast for any isotropic mixture; too steep for few grains of high contrast.
    Valid for: powders and porous bodies of moderate contrast, at any loading. A conducting phase conducts
    through the mixture from the first trace on, as f³.

    References
    ----------
    H. Looyenga, "Dielectric constants of heterogeneous mixtures", Physica 31, 401 (1965).

    Examples
    --------
    >>> print(f"{looyenga([1.0, 10.0], fractions=[0.5, 0.5]):.6f}")
    3.923509+0.000000j
    """
    only_spheres(same_length(phases, fractions, depolarisations), rule="looyenga")
    with np.errstate(all="ignore"):
        values = _complex(phases)
        pairs = zip(_volumes(fractions), values, strict=True)
        root = _sum(f * np.exp(_log(value) / 3.0) for f, value in pairs)
        return _passive(root * root * root, values)


def lichtenecker(
    phases: Sequence[ArrayLike],
    *,
    fractions: Sequence[ArrayLike],
    depolarisations: Sequence[Depolarisation] | None = None,
) -> Array:
    """Geometric mean of the phases: their logarithms add, after Lichtenecker.

    Parameters
    ----------
    phases
        Relative permittivity of each phase [-].
    fractions
        Volume fraction of each phase, adding up to one [-].
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
    ln ε = Σ f_k ln ε_k. At weak contrast it is that of a mixture in two dimensions, so it leaves the
    Hashin–Shtrikman bounds of an isotropic mixture there.
    Valid for: interpolation among measurements of ceramics in polymers. It has no static limit where an
    insulator holds a conductor.

    References
    ----------
    K. Lichtenecker, "Die Dielektrizitätskonstante natürlicher und künstlicher Mischkörper",
    Phys. Z. 27, 115 (1926).

    Examples
    --------
    >>> print(f"{lichtenecker([1.0, 3.0], fractions=[0.5, 0.5]):.6f}")
    1.732051+0.000000j
    """
    only_spheres(same_length(phases, fractions, depolarisations), rule="lichtenecker")
    with np.errstate(all="ignore"):
        values = _complex(phases)
        logs = _sum(f * _log(e) for f, e in zip(_volumes(fractions), values, strict=True))
        return _passive(np.exp(logs), values)


def low_of_power_mean(
    rates: Sequence[Any], plateaus: Sequence[Any], *, fractions: Sequence[Any], exponent: Any
) -> Low:
    """Behaviour of a power mean as ω → 0, conductors included.

    Parameters
    ----------
    rates, plateaus
        Each phase as i·rate/ω + plateau [rad/s, -].
    fractions
        Volume fraction of each phase [-].
    exponent
        Of the mean [-].

    Returns
    -------
    static, rate, plateau
        Static limit [-], NaN where there is none; σ/ε₀ [rad/s]; real level beside the conduction [-],
        infinite where the permittivity rises without end.

    Notes
    -----
    The rate is the same mean of the rates. With α > 0 a phase that conducts makes the mixture conduct, and
    an insulating one beside it leaves a permittivity that rises as ω^(α−1); with α < 0 the conductors drop
    out; with α = 0 a mixture of both neither conducts nor has a limit.

    Examples
    --------
    >>> halves = {"fractions": [0.5, 0.5], "exponent": 1 / 3}
    >>> static, rate, plateau = low_of_power_mean([0.0, 8.0], [2.0, 5.0], **halves)
    >>> print(f"{rate:.3f} {plateau}")
    1.000 inf
    """
    power = np.asarray(exponent, dtype=float)
    flow = [np.asarray(rate, dtype=float) for rate in rates]
    level = _complex(plateaus)
    volumes = _volumes(fractions)
    with np.errstate(all="ignore"):
        inverse = 1.0 / np.where(power == 0.0, np.inf, power)

        def mean(terms: Any) -> Array:
            """Of the powers of the phases present: the mean itself."""
            total = _sum(np.where(f > 0.0, f * term, 0.0) for f, term in zip(volumes, terms, strict=True))
            return np.where(power == 0.0, np.exp(total), total**inverse)

        rate = mean(np.where(power == 0.0, np.log(r), r**power) for r in flow)
        conducting = _any((f > 0.0) & (r > 0.0) for f, r in zip(volumes, flow, strict=True))
        insulating = _any((f > 0.0) & (r == 0.0) for f, r in zip(volumes, flow, strict=True))
        drop = [
            np.where(r > 0.0, np.where(power == 0.0, np.nan, 0.0), _raised(e, power))
            for r, e in zip(flow, level, strict=True)
        ]
        static = np.where(insulating & (rate == 0.0), mean(drop), np.nan)
        slope = _sum(
            np.where(f > 0.0, f * e.real * (r / rate) ** (power - 1.0), 0.0)
            for f, r, e in zip(volumes, flow, level, strict=True)
        )
        endless = np.isinf(rate) | (insulating & conducting)
        plateau = np.where(rate > 0.0, np.where(endless & (power < 1.0), np.inf, slope), static.real)
        plateau = np.where(np.isnan(static) & (rate == 0.0), np.inf, plateau)
        lost = np.isnan(_sum((*flow, *level, *volumes)))
        static, rate, plateau = (np.where(lost, np.nan, part) for part in (static, rate, plateau))
    return static, rate, plateau


def power_law_low(
    rates: Sequence[Any],
    plateaus: Sequence[Any],
    *,
    fractions: Sequence[Any],
    depolarisations: Sequence[Depolarisation] | None = None,
    exponent: Any,
) -> Low:
    """`low_of_power_mean` as the register calls it."""
    return low_of_power_mean(rates, plateaus, fractions=fractions, exponent=exponent)


def looyenga_low(
    rates: Sequence[Any],
    plateaus: Sequence[Any],
    *,
    fractions: Sequence[Any],
    depolarisations: Sequence[Depolarisation] | None = None,
) -> Low:
    """`low_of_power_mean` with exponent ⅓."""
    return low_of_power_mean(rates, plateaus, fractions=fractions, exponent=1.0 / 3.0)


def lichtenecker_low(
    rates: Sequence[Any],
    plateaus: Sequence[Any],
    *,
    fractions: Sequence[Any],
    depolarisations: Sequence[Depolarisation] | None = None,
) -> Low:
    """`low_of_power_mean` with exponent 0."""
    return low_of_power_mean(rates, plateaus, fractions=fractions, exponent=0.0)


def fraction_from(mixture: ArrayLike, *, host: ArrayLike, inclusion: ArrayLike, exponent: ArrayLike) -> Array:
    """Volume fraction of one of two phases that gives this mixture under a power law.

    Parameters
    ----------
    mixture, host, inclusion
        Relative permittivities [-].
    exponent
        Of the power law [-].

    Returns
    -------
    fraction
        Volume fraction of `inclusion` [-]: real for positive permittivities, otherwise complex, the
        imaginary part measuring how far the three fail to agree; not finite where there is no contrast.

    Notes
    -----
    f = ((ε/ε_h)^α − 1)/((ε_i/ε_h)^α − 1), and ln(ε/ε_h)/ln(ε_i/ε_h) for α = 0.
    Valid for: two phases.

    Examples
    --------
    >>> print(f"{fraction_from(4.0, host=1.0, inclusion=9.0, exponent=0.5):.3f}")
    0.500
    """
    power = np.asarray(exponent, dtype=float)
    with np.errstate(all="ignore"):
        h, e, i = (_log(np.asarray(value)) for value in (host, mixture, inclusion))
        above, below = e - h, i - h
        fraction: Array = np.where(
            power == 0.0, above / below, np.expm1(power * above) / np.expm1(power * below)
        )
    return fraction[()]


def inclusion_from(mixture: ArrayLike, *, host: ArrayLike, fraction: ArrayLike, exponent: ArrayLike) -> Array:
    """Permittivity of one of two phases that gives this mixture under a power law.

    Parameters
    ----------
    mixture, host
        Relative permittivities [-].
    fraction
        Volume fraction of the phase looked for [-].
    exponent
        Of the power law [-].

    Returns
    -------
    inclusion
        Relative permittivity of that phase [-]; NaN where a real mixture lies so low that its power would
        have to be negative.

    Notes
    -----
    ε_i = ε_h (1 + [(ε/ε_h)^α − 1]/f)^(1/α), and ε_h (ε/ε_h)^(1/f) for α = 0.
    Valid for: two phases.

    Examples
    --------
    >>> print(f"{inclusion_from(4.0, host=1.0, fraction=0.5, exponent=0.5):.3f}")
    9.000
    """
    power, f = np.asarray(exponent, dtype=float), np.asarray(fraction)
    with np.errstate(all="ignore"):
        h, e = (_log(np.asarray(value)) for value in (host, mixture))
        rise = np.log1p(np.expm1(power * (e - h)) / f) / np.where(power == 0.0, 1.0, power)
        inclusion: Array = np.exp(h + np.where(power == 0.0, (e - h) / f, rise))
    return inclusion[()]


def looyenga_fraction(mixture: ArrayLike, *, host: ArrayLike, inclusion: ArrayLike) -> Array:
    """Volume fraction of one of two phases under Looyenga's rule [-]; see `fraction_from`, α = ⅓."""
    return fraction_from(mixture, host=host, inclusion=inclusion, exponent=1.0 / 3.0)


def looyenga_inclusion(mixture: ArrayLike, *, host: ArrayLike, fraction: ArrayLike) -> Array:
    """Permittivity of one of two phases under Looyenga's rule [-]; see `inclusion_from`, α = ⅓."""
    return inclusion_from(mixture, host=host, fraction=fraction, exponent=1.0 / 3.0)


def lichtenecker_fraction(mixture: ArrayLike, *, host: ArrayLike, inclusion: ArrayLike) -> Array:
    """Volume fraction of one of two phases under Lichtenecker's rule [-]; see `fraction_from`, α = 0."""
    return fraction_from(mixture, host=host, inclusion=inclusion, exponent=0.0)


def lichtenecker_inclusion(mixture: ArrayLike, *, host: ArrayLike, fraction: ArrayLike) -> Array:
    """Permittivity of one of two phases under Lichtenecker's rule [-]; see `inclusion_from`, α = 0."""
    return inclusion_from(mixture, host=host, fraction=fraction, exponent=0.0)


def _complex(phases: Sequence[ArrayLike]) -> list[Array]:
    return [np.asarray(phase, dtype=complex) for phase in phases]


def _volumes(fractions: Sequence[ArrayLike]) -> list[Array]:
    return [np.asarray(fraction, dtype=float) for fraction in fractions]


def _log(value: Array) -> Array:
    """Logarithm with the argument of a metal at π, not −π, also where its loss is −0.0 or noise."""
    if not np.iscomplexobj(value):
        if not np.any(value < 0.0):
            logarithm: Array = np.log(np.where(value == 0.0, _NOTHING, value))
            return logarithm
        value = value.astype(complex)
    logarithm = np.asarray(np.log(np.where(value == 0.0, _NOTHING, value)))
    turned = logarithm.imag < -0.5 * np.pi
    if turned.any():
        logarithm = np.where(turned, logarithm + 2j * np.pi, logarithm)
    return logarithm


def _raised(value: Array, power: Array) -> Array:
    """What is averaged: the power of a phase, or its logarithm where the exponent is zero."""
    logarithm = _log(value)
    return np.where(power == 0.0, logarithm, np.exp(power * logarithm))


def _sum(terms: Any) -> Array:
    first, *others = terms
    total: Array = np.asarray(first)
    for term in others:
        total = total + term
    return total


def _any(conditions: Any) -> Any:
    first, *others = conditions
    found = first
    for condition in others:
        found = found | condition
    return found


def _passive(mixture: Array, phases: Sequence[Array]) -> Array:
    """Take away a loss below zero that rounding left between passive phases."""
    result = np.asarray(mixture)
    if (result.imag < 0.0).any():
        lossy = np.logical_and.reduce(np.broadcast_arrays(*(phase.imag >= 0.0 for phase in phases)))
        np.maximum(result.imag, 0.0, out=result.imag, where=np.broadcast_to(lossy, result.shape))
    return result[()]
