"""Carlson's symmetric elliptic integrals, by duplication: sums of positive terms, in which nothing cancels.

They are here, and not taken from scipy, because a prediction starts without it.
"""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import NDArray

Array = NDArray[Any]

_ALIKE = 1e-3  # relative spread of the arguments from which the series are exact to rounding
_DUPLICATIONS = 200  # more than the most unlike arguments need: some forty


def carlson_d(x: Array, y: Array, z: Array) -> Array:
    """R_D(x, y, z) = (3/2) ∫₀^∞ dt / (√((t + x)(t + y)) (t + z)^(3/2)), x and y on the same footing.

    References
    ----------
    B. C. Carlson, Numer. Algorithms 10, 13 (1995), doi:10.1007/BF02198293.

    Examples
    --------
    >>> print(f"{carlson_d(np.array(0.0), np.array(2.0), np.array(1.0)):.13f}")
    1.7972103521034
    """
    mean = (x + y + 3.0 * z) / 5.0
    total, weight = np.zeros_like(mean), 1.0
    for _ in range(_DUPLICATIONS):
        roots = np.sqrt(x), np.sqrt(y), np.sqrt(z)
        shift = roots[0] * roots[1] + roots[0] * roots[2] + roots[1] * roots[2]
        total = total + weight / (roots[2] * (z + shift))
        weight /= 4.0
        x, y, z, mean = (0.25 * (value + shift) for value in (x, y, z, mean))
        spread = np.maximum(np.abs(mean - x), np.maximum(np.abs(mean - y), np.abs(mean - z)))
        if not np.any(spread > _ALIKE * mean):
            break
    u, v = 1.0 - x / mean, 1.0 - y / mean
    w = -(u + v) / 3.0
    e2 = u * v - 6.0 * w**2
    e3 = (3.0 * u * v - 8.0 * w**2) * w
    e4 = 3.0 * (u * v - w**2) * w**2
    e5 = u * v * w**3
    series = 1.0 - 3.0 * e2 / 14.0 + e3 / 6.0 + 9.0 * e2**2 / 88.0 - 3.0 * e4 / 22.0
    series += -9.0 * e2 * e3 / 52.0 + 3.0 * e5 / 26.0
    remainder: Array = 3.0 * total + weight * series / (mean * np.sqrt(mean))
    return remainder


def carlson_f(x: Array, y: Array, z: Array) -> Array:
    """R_F(x, y, z) = (1/2) ∫₀^∞ dt / √((t + x)(t + y)(t + z)).

    References
    ----------
    B. C. Carlson, Numer. Algorithms 10, 13 (1995), doi:10.1007/BF02198293.

    Examples
    --------
    >>> print(f"{carlson_f(np.array(1.0), np.array(2.0), np.array(0.0)):.13f}")
    1.3110287771461
    """
    mean = (x + y + z) / 3.0
    for _ in range(_DUPLICATIONS):
        roots = np.sqrt(x), np.sqrt(y), np.sqrt(z)
        shift = roots[0] * roots[1] + roots[0] * roots[2] + roots[1] * roots[2]
        x, y, z, mean = (0.25 * (value + shift) for value in (x, y, z, mean))
        spread = np.maximum(np.abs(mean - x), np.maximum(np.abs(mean - y), np.abs(mean - z)))
        if not np.any(spread > _ALIKE * mean):
            break
    u, v = 1.0 - x / mean, 1.0 - y / mean
    w = -(u + v)
    e2, e3 = u * v - w * w, u * v * w
    series: Array = 1.0 - e2 / 10.0 + e3 / 14.0 + e2 * e2 / 24.0 - 3.0 * e2 * e3 / 44.0
    series = series - 5.0 * e2**3 / 208.0 + 3.0 * e3 * e3 / 104.0
    integral: Array = series / np.sqrt(mean)
    return integral


def carlson_g(x: Array, y: Array, z: Array) -> Array:
    """R_G(x, y, z), the mean of √(x l² + y m² + z n²) over all directions (l, m, n); symmetric.

    Notes
    -----
    2 R_G = z R_F + (y − z)(z − x) R_D(x, y, z)/3 + √(xy/z), with z between the two others.

    References
    ----------
    B. C. Carlson, Numer. Algorithms 10, 13 (1995), doi:10.1007/BF02198293.

    Examples
    --------
    >>> print(f"{carlson_g(np.array(0.0), np.array(16.0), np.array(16.0)):.13f}")
    3.1415926535898
    """
    low, middle, high = np.sort(np.stack(np.broadcast_arrays(x, y, z)), axis=0)
    double = middle * carlson_f(low, high, middle) + np.sqrt(low * high / middle)
    integral: Array = 0.5 * (double + (high - middle) * (middle - low) / 3.0 * carlson_d(low, high, middle))
    return integral
