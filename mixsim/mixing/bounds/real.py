"""Rigorous bounds on the permittivity of a loss-free mixture."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import ArrayLike

from mixsim.errors import Refusal
from mixsim.mixing.depolarisation import Array, same_length


def wiener(phases: Sequence[ArrayLike], fractions: Sequence[ArrayLike]) -> tuple[Array, Array]:
    """Bounds that hold whatever the geometry: layers in series and in parallel.

    Parameters
    ----------
    phases
        Relative permittivity of each phase, real and positive [-].
    fractions
        Volume fraction of each phase [-].

    Returns
    -------
    lower, upper
        Least and greatest permittivity that the mixture can have in any direction [-].

    Raises
    ------
    Refusal
        Where a permittivity is complex, zero or negative.

    Notes
    -----
    1/Σ (f_k/ε_k) ≤ ε ≤ Σ f_k ε_k.
    Valid for: loss-free phases; two-phase bounds with loss are regions of the complex plane.

    References
    ----------
    O. Wiener, "Die Theorie des Mischkörpers für das Feld der stationären Strömung",
    Abh. Math.-Phys. Kl. Königl. Sächs. Ges. Wiss. 32 (1912).

    Examples
    --------
    >>> lower, upper = wiener([1.0, 10.0], [0.5, 0.5])
    >>> print(f"{lower:.6f} {upper:.6f}")
    1.818182 5.500000
    """
    same_length(phases, fractions, None)
    values = [_positive(phase) for phase in phases]
    volumes = [np.asarray(fraction, dtype=float) for fraction in fractions]
    zero: Array = np.asarray(0.0)
    series = sum((f / e for e, f in zip(values, volumes, strict=True)), start=zero)
    parallel = sum((f * e for e, f in zip(values, volumes, strict=True)), start=zero)
    return 1.0 / series, parallel


def hashin_shtrikman(
    phases: Sequence[ArrayLike], fractions: Sequence[ArrayLike], *, dimensions: int = 3
) -> tuple[Array, Array]:
    """Bounds that hold for a mixture which looks the same in every direction.

    Parameters
    ----------
    phases
        Relative permittivity of each phase, real and positive [-].
    fractions
        Volume fraction of each phase [-]; an absent phase does not widen the bounds.
    dimensions
        3, or 2 for aligned fibres with the field across them [-].

    Returns
    -------
    lower, upper
        Bounds on the permittivity of the mixture [-].

    Raises
    ------
    Refusal
        Where a permittivity is complex, zero or negative.

    Notes
    -----
    With ε₀ the least (lower) or the greatest (upper) permittivity among the phases present, d dimensions::

        ε = [Σ f_k/(ε_k + (d − 1) ε₀)]⁻¹ − (d − 1) ε₀
          = Σ f_k ε_k/(ε_k + (d − 1) ε₀) / Σ f_k/(ε_k + (d − 1) ε₀)

    For two phases they are Maxwell Garnett with the one or the other as host, which coated spheres reach.
    Valid for: loss-free phases, statistically isotropic.

    References
    ----------
    Z. Hashin, S. Shtrikman, "A variational approach to the theory of the effective magnetic permeability
    of multiphase materials", J. Appl. Phys. 33, 3125 (1962).

    Examples
    --------
    >>> lower, upper = hashin_shtrikman([1.0, 10.0], [0.5, 0.5])
    >>> print(f"{lower:.6f} {upper:.6f}")
    2.800000 4.705882
    """
    same_length(phases, fractions, None)
    values = np.broadcast_arrays(*[_positive(phase) for phase in phases], *fractions)[: len(phases)]
    volumes = [np.asarray(fraction, dtype=float) for fraction in fractions]
    present = list(zip(values, volumes, strict=True))
    least, greatest = np.full(values[0].shape, np.inf), np.zeros(values[0].shape)
    for e, f in present:
        least = np.where(f > 0.0, np.minimum(least, e), least)
        greatest = np.where(f > 0.0, np.maximum(greatest, e), greatest)

    def bound(reference: Array) -> Array:
        weights = [f / (e + (dimensions - 1) * reference) for e, f in present]
        zero: Array = np.asarray(0.0)
        above = sum((w * e for w, e in zip(weights, values, strict=True)), start=zero)
        return above / sum(weights, start=zero)

    with np.errstate(invalid="ignore"):  # no phase present at all: NaN
        return bound(least), bound(greatest)


def _positive(phase: ArrayLike) -> Array:
    value = np.asarray(phase)
    if np.iscomplexobj(value):
        if np.any(value.imag != 0.0):
            raise Refusal(
                f"permittivity {complex(value.flat[int(np.argmax(value.imag != 0.0))])}",
                "these bounds hold for real positive permittivities",
            )
        value = value.real
    value = value.astype(float)
    if np.any(value <= 0.0):
        raise Refusal(
            f"permittivity {float(np.nanmin(value))!r}", "these bounds hold for real positive permittivities"
        )
    return value
