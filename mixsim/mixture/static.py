"""The static limit of a mixture, exact also where constituents conduct."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

Array = NDArray[Any]

_HIGH = 1e60  # stands for σ/ω of the best finite conductor as ω → 0, against levels of order one
_CONDUCTS = 1e15  # what only a conductor exceeds, or a mixture at its threshold, where it is √_HIGH


@dataclass(frozen=True, eq=False)
class LowFrequency:
    """Behaviour of a mixture as ω → 0: i·rate/ω + plateau.

    Attributes
    ----------
    static
        Limit [-]; NaN where the mixture conducts.
    rate
        σ/ε₀ [rad/s]; infinite where carriers without collisions percolate.
    plateau
        Real level beside the conduction [-]; infinite at a percolation threshold.
    """

    static: Array
    rate: Array
    plateau: Array


def low_frequency(
    mix: Callable[[Sequence[Any]], Any], rates: Sequence[Any], plateaus: Sequence[Any]
) -> LowFrequency:
    """Low-frequency behaviour of a mixture from that of its constituents.

    Parameters
    ----------
    mix
        The rule, as a function of the permittivities of the phases.
    rates
        σ/ε₀ of each phase [rad/s]; may be infinite.
    plateaus
        Level of each phase beside its conduction [-].

    Returns
    -------
    behaviour
        That of the mixture.

    Notes
    -----
    As ω → 0 each phase is i·rate_k/ω + plateau_k. The rules are evaluated once, at an ω so low that a
    conductor stands 60 decades above any level; they keep real and imaginary parts of any contrast to full
    precision, so the two parts of the answer are the exact rate/ω and plateau. A rule that is homogeneous
    makes the plateau Σ plateau_k ∂rate/∂rate_k. An insulating mixture of perfect conductors comes out real.
    Carriers without collisions, of infinite rate, stand 60 decades higher still. At the very threshold of
    conductors in an insulator both parts rise as ω^(−1/2): no static limit, no conductivity, no plateau.
    Valid for: conductivities within 40 decades of each other; a lesser one counts as none.

    Examples
    --------
    >>> from mixsim.mixing import maxwell_garnett
    >>> def mix(phases): return maxwell_garnett(phases, fractions=[0.9, 0.1])
    >>> print(f"{low_frequency(mix, [0.0, 1e12], [2.0, 5.0]).static:.6f}")  # 2 (1 + 2 f)/(1 − f)
    2.666667+0.000000j
    """
    conducting = [bool(np.any(np.asarray(rate) != 0.0)) for rate in rates]
    if not any(conducting):
        static = np.asarray(mix(plateaus), dtype=complex)
        return LowFrequency(static, np.zeros(static.shape), static.real)

    finite = [np.where(np.isinf(rate), 0.0, rate) for rate in rates]
    best = np.maximum.reduce(np.broadcast_arrays(*finite))
    unit = np.where(best > 0.0, best, 1.0)
    levels = [
        np.where(np.isinf(rate), _HIGH * _HIGH, _HIGH * (size / unit))
        for rate, size in zip(rates, finite, strict=True)
    ]
    phases = [_complex(np.real(p), np.imag(p) + level) for level, p in zip(levels, plateaus, strict=True)]
    mixture = np.asarray(mix(phases), dtype=complex)
    insulating = (np.where(rate == 0.0, np.abs(p), 1.0) for rate, p in zip(rates, plateaus, strict=True))
    scale = np.maximum.reduce(np.broadcast_arrays(*insulating, 1.0))
    grows = mixture.imag > _CONDUCTS * scale
    critical = grows & (mixture.imag < _CONDUCTS * np.abs(mixture.real))
    lossless = np.logical_and.reduce(np.broadcast_arrays(*(np.imag(p) == 0.0 for p in plateaus)))
    settled = _complex(mixture.real, np.where(lossless, 0.0, mixture.imag))
    rate = np.where(grows & ~critical, mixture.imag / _HIGH * unit, 0.0)
    rate = np.where(mixture.imag > _CONDUCTS * _HIGH, np.inf, rate)
    rate = np.where(np.isnan(mixture), np.nan, rate)
    plateau = np.where(critical, np.inf, mixture.real)
    return LowFrequency(np.where(grows, np.nan, settled), rate, plateau)


def _complex(real: Any, imaginary: Any) -> Array:
    out = np.empty(np.broadcast_shapes(np.shape(real), np.shape(imaginary)), dtype=complex)
    out.real, out.imag = real, imaginary
    return out
