"""One column of readings: real numbers, where they were read, and how unsure they are."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from mixsim.observables import QUANTITIES

Floats = NDArray[np.float64]

LIMITS = ("static", "high_frequency")
OF_PIECE = ("density", "ash")
NAMES = {
    **{name: quantity.symbol for name, quantity in QUANTITIES.items()},
    "static": "static ε′",
    "high_frequency": "high-frequency ε′",
    "density": "density",
    "ash": "ash",
}
"""Every quantity that may be read, with the symbol that stands for it."""


@dataclass(frozen=True, eq=False)
class Observation:
    """Readings of one quantity on one sample.

    Attributes
    ----------
    quantity
        A word of `QUANTITIES`, or "static", "high_frequency", "density" or "ash".
    values
        What was read, real, shape (N,) [SI].
    std
        Standard uncertainty of each, shape (N,) [SI]; NaN where none is known.
    omega
        Angular frequency of each, shape (N,) [rad/s]; None where it has none.
    source
        File or text that holds them.
    sample
        Name of the sample, or empty where there is but one.
    """

    quantity: str
    values: Floats
    std: Floats
    omega: Floats | None
    source: str
    sample: str = ""

    @property
    def label(self) -> str:
        """What it is, for a table."""
        return f"{self.sample}: {NAMES[self.quantity]}" if self.sample else NAMES[self.quantity]


def parts(values: NDArray[np.complex128]) -> Floats:
    """Complex numbers as real ones, all real parts first: the one place where that is done.

    Examples
    --------
    >>> print(parts(np.array([1 + 2j, 3 + 4j])))
    [1. 3. 2. 4.]
    """
    return np.concatenate([np.real(values), np.imag(values)], axis=-1)
