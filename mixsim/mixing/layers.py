"""Layers: in series, with the field across them, and in parallel, with the field along them."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import ArrayLike

from mixsim.mixing.depolarisation import Array, Depolarisation, only_spheres, same_length
from mixsim.mixing.rule import Rule


def series(
    phases: Sequence[ArrayLike],
    *,
    fractions: Sequence[ArrayLike],
    depolarisations: Sequence[Depolarisation] | None = None,
) -> Array:
    """Permittivity of a stack of layers with the field across them, as capacitors in series.

    Parameters
    ----------
    phases
        Relative permittivity of each phase [-].
    fractions
        Volume fraction of each phase, adding up to one [-].
    depolarisations
        Spheres, or None: a layer has no grains [-].

    Returns
    -------
    permittivity
        Relative permittivity of the stack, complex [-].

    Raises
    ------
    Refusal
        Where the arguments differ in number or a shape is given.

    Notes
    -----
    1/ε = Σ f_k/ε_k. The least permittivity that loss-free phases can have (Wiener).
    Valid for: layers thin against the wavelength; an upper bound of what barriers between grains do.

    References
    ----------
    O. Wiener, Abh. Math.-Phys. Kl. Königl. Sächs. Ges. Wiss. 32 (1912).

    Examples
    --------
    >>> print(f"{series([1.0, 10.0], fractions=[0.5, 0.5]):.6f}")
    1.818182+0.000000j
    """
    only_spheres(same_length(phases, fractions, depolarisations), rule="series")
    total: Array = np.asarray(0.0)
    with np.errstate(all="ignore"):
        for phase, fraction in zip(phases, fractions, strict=True):
            total = total + np.asarray(fraction, dtype=float) / np.asarray(phase, dtype=complex)
        mixture = np.asarray(1.0 / total)
    mixture.imag += 0.0  # division leaves -0.0 where nothing is lost
    return mixture[()]


def parallel(
    phases: Sequence[ArrayLike],
    *,
    fractions: Sequence[ArrayLike],
    depolarisations: Sequence[Depolarisation] | None = None,
) -> Array:
    """Permittivity of layers or fibres with the field along them, as capacitors in parallel.

    Parameters
    ----------
    phases
        Relative permittivity of each phase [-].
    fractions
        Volume fraction of each phase, adding up to one [-].
    depolarisations
        Spheres, or None: a layer has no grains [-].

    Returns
    -------
    permittivity
        Relative permittivity of the stack, complex [-].

    Raises
    ------
    Refusal
        Where the arguments differ in number or a shape is given.

    Notes
    -----
    ε = Σ f_k ε_k. The greatest permittivity that loss-free phases can have (Wiener).
    Valid for: layers and long fibres of any cross section, the field along them.

    References
    ----------
    O. Wiener, Abh. Math.-Phys. Kl. Königl. Sächs. Ges. Wiss. 32 (1912).

    Examples
    --------
    >>> print(f"{parallel([1.0, 10.0], fractions=[0.5, 0.5]):.3f}")
    5.500+0.000j
    """
    only_spheres(same_length(phases, fractions, depolarisations), rule="parallel")
    total: Array = np.asarray(0.0)
    for phase, fraction in zip(phases, fractions, strict=True):
        total = total + np.asarray(fraction, dtype=float) * np.asarray(phase, dtype=complex)
    return total[()]


def series_fraction(mixture: ArrayLike, *, host: ArrayLike, inclusion: ArrayLike) -> Array:
    """Volume fraction of one of two layers in series [-]: (1/ε − 1/ε_h)/(1/ε_i − 1/ε_h)."""
    e, h, i = np.asarray(mixture), np.asarray(host), np.asarray(inclusion)
    with np.errstate(all="ignore"):
        fraction: Array = (e - h) / e * (i / (i - h))
    return fraction


def series_inclusion(mixture: ArrayLike, *, host: ArrayLike, fraction: ArrayLike) -> Array:
    """Permittivity of one of two layers in series [-]: f/(1/ε − (1 − f)/ε_h)."""
    e, h, f = np.asarray(mixture), np.asarray(host), np.asarray(fraction)
    with np.errstate(all="ignore"):
        inclusion: Array = f * e / (1.0 - (1.0 - f) * (e / h))
    return inclusion


def parallel_fraction(mixture: ArrayLike, *, host: ArrayLike, inclusion: ArrayLike) -> Array:
    """Volume fraction of one of two layers in parallel [-]: (ε − ε_h)/(ε_i − ε_h)."""
    e, h, i = np.asarray(mixture), np.asarray(host), np.asarray(inclusion)
    with np.errstate(all="ignore"):
        fraction: Array = (e - h) / (i - h)
    return fraction


def parallel_inclusion(mixture: ArrayLike, *, host: ArrayLike, fraction: ArrayLike) -> Array:
    """Permittivity of one of two layers in parallel [-]: (ε − (1 − f) ε_h)/f."""
    e, h, f = np.asarray(mixture), np.asarray(host), np.asarray(fraction)
    with np.errstate(all="ignore"):
        inclusion: Array = (e - (1.0 - f) * h) / f
    return inclusion


LAYER_RULES = (
    Rule(
        name="series",
        function=series,
        summary="layers with the field across them",
        equation="1/ε = Σ f_k/ε_k",
        assumptions="flat layers, or barriers that interrupt every path of the field",
        dilute_limit="not that of grains: ε_h (1 + f (1 − ε_h/ε_i))",
        valid_for="laminates seen across; the least value of loss-free phases (Wiener)",
        source="O. Wiener, Abh. Math.-Phys. Kl. Königl. Sächs. Ges. Wiss. 32 (1912)",
        takes_shapes=False,
        takes_aligned=False,
        symmetric=True,
        additive_only=True,
        homogeneous=True,
        fraction_from=series_fraction,
        inclusion_from=series_inclusion,
        percolation=None,
        bounds="wiener",
        dilute_exact=False,
        ordered=True,
    ),
    Rule(
        name="parallel",
        function=parallel,
        summary="layers or fibres with the field along them",
        equation="ε = Σ f_k ε_k",
        assumptions="every phase runs through unbroken along the field",
        dilute_limit="not that of grains: ε_h + f (ε_i − ε_h)",
        valid_for="laminates and fibre bundles seen along; the greatest value of loss-free phases (Wiener)",
        source="O. Wiener, Abh. Math.-Phys. Kl. Königl. Sächs. Ges. Wiss. 32 (1912)",
        takes_shapes=False,
        takes_aligned=False,
        symmetric=True,
        additive_only=True,
        homogeneous=True,
        fraction_from=parallel_fraction,
        inclusion_from=parallel_inclusion,
        percolation=0.0,
        bounds="wiener",
        dilute_exact=False,
        ordered=True,
    ),
)
