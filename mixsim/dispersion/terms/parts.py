"""What the formulas of all terms share.

The sign of loss is stated here once: time dependence exp(−iωt), so a passive term has a non-negative
imaginary part at ω > 0, and +0.0, never −0.0, where there is no loss: the root of a negative number
with −0.0 would be the growing wave.

Every term vanishes as ω → ∞. Its behaviour as ω → 0 stands beside it, as `<name>_low`: i·rate/ω + plateau.
"""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

Array = NDArray[Any]


def floats(*values: ArrayLike) -> tuple[Array, ...]:
    return tuple(np.asarray(value, dtype=float) for value in values)


def blank(*values: Array) -> Array:
    """Complex array to be filled part by part, which saves the passes of a + 1j*b."""
    return np.empty(np.broadcast_shapes(*(value.shape for value in values)), dtype=complex)


def over(numerator: Array, denominator: Array) -> Array:
    """Real numerator over complex denominator, whose memory is used again where it fits."""
    fits = np.broadcast_shapes(numerator.shape, denominator.shape) == denominator.shape
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        ratio = np.asarray(np.divide(numerator, denominator, out=denominator if fits else None))
    ratio.imag += 0.0  # division leaves -0.0 where the denominator is real and negative
    return ratio[()]
