"""Kramers–Kronig in closed form: the real part that belongs to a piecewise-linear loss.

The loss is an odd function of frequency, given at the nodes of a grid and linear between them. Below the
first node it falls linearly to zero at ω = 0, above the last to zero one more step (of the same ratio) up:
every sum is finite, and the static and the high-frequency limit are exact.
"""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from mixsim.errors import Refusal

Floats = NDArray[np.float64]

_BLOCK = 2_000_000  # numbers of a kernel held at once
_SMALL = 0.1  # ratio of node to frequency below which the kernel is summed as a series


def kramers_kronig(omega: ArrayLike, *, nodes: ArrayLike, loss: ArrayLike) -> NDArray[Any]:
    """Real part that belongs to a piecewise-linear loss.

    Parameters
    ----------
    omega
        Angular frequency at which it is wanted, zero and infinity included [rad/s].
    nodes
        Angular frequencies of the loss, ascending [rad/s].
    loss
        Imaginary part at the nodes [-].

    Returns
    -------
    real
        ε′ − ε∞, or μ′ − μ∞ [-].

    Raises
    ------
    Refusal
        Where the nodes do not ascend from above zero, or are not as many as the losses.

    Notes
    -----
    2/π P∫ s ε″(s)/(s² − ω²) ds with ε″ linear between nodes. Twice by parts, this is a sum over the kinks
    κ_j, the changes of slope: (ω/π) Σ κ_j F(ω_j/ω) with F(t) = ∫ ln|1 − u²| du from 0 to t
    = (1+t) ln(1+t) − (1−t) ln|1−t| − 2t, finite at the nodes themselves.

    Valid for: any real loss, not only of a passive medium.

    References
    ----------
    H. A. Kramers, Atti Congr. Int. Fis. Como 2, 545 (1927); R. de L. Kronig, J. Opt. Soc. Am. 12, 547 (1926).

    Examples
    --------
    >>> print(f"{kramers_kronig(0.0, nodes=[1.0, 2.0], loss=[1.0, 1.0]):.4f}")
    1.3238
    """
    w = np.asarray(omega, dtype=float)
    places, held = kinks(nodes, loss)
    flat = np.atleast_1d(w).ravel()
    out = np.empty(flat.shape)
    step = max(1, _BLOCK // places.size)
    for start in range(0, flat.size, step):
        out[start : start + step] = kernel(flat[start : start + step], places) @ held
    return out.reshape(w.shape)[()]


def kinks(nodes: ArrayLike, loss: ArrayLike) -> tuple[Floats, Floats]:
    """Where the slope of a piecewise-linear loss changes, and by how much.

    Parameters
    ----------
    nodes
        Angular frequencies, ascending [rad/s].
    loss
        Imaginary part there; a matrix has one column for each of several losses [-].

    Returns
    -------
    places, changes
        The nodes with the end of the upper flank [rad/s], and the change of slope at each [s/rad].

    Raises
    ------
    Refusal
        Where the nodes do not ascend from above zero, or are not as many as the losses.
    """
    s, f = np.asarray(nodes, dtype=float), np.asarray(loss, dtype=float)
    if s.ndim != 1 or s.size < 2 or f.shape[:1] != s.shape:
        raise Refusal(f"{s.size} nodes and losses of shape {f.shape}", "at least two nodes, a loss at each")
    if not (s[0] > 0.0 and np.all(np.diff(s) > 0.0)):
        raise Refusal("nodes that do not ascend from above zero", "each node above the one before")
    places = np.concatenate([s, [s[-1] * (s[-1] / s[-2])]])
    steps = np.diff(places, prepend=0.0)
    nothing = np.zeros((1, *f.shape[1:]))
    rises = np.diff(np.concatenate([nothing, f, nothing]), axis=0)
    slopes = rises / steps.reshape(-1, *[1] * (f.ndim - 1))
    return places, np.diff(slopes, axis=0, append=nothing)


def kernel(omega: Floats, places: Floats) -> Floats:
    """Real part at each frequency for a unit kink at each place, less what is linear in the place.

    What is linear in the place adds up to nothing over the kinks of one loss.

    Parameters
    ----------
    omega
        Angular frequencies, one axis [rad/s].
    places
        Angular frequencies of the kinks, one axis [rad/s].

    Returns
    -------
    kernel
        One row for each frequency, one column for each place [rad/s].
    """
    w, s = omega[:, np.newaxis], places[np.newaxis, :]
    level = w == 0.0
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        t = s / np.where(level, np.inf, w)
        away = np.abs(1.0 - t)
        logs = np.log(np.where(away == 0.0, 1.0, away))  # 0·ln 0 is zero at the node itself
        out = (1.0 + t) * np.log1p(t) - (1.0 - t) * logs - 2.0 * t
        small = t < _SMALL
        if small.any():
            out[small] = _series(t[small])
        out *= np.where(level | np.isinf(w), 0.0, w)
    if level.any():
        out[level[:, 0]] = 2.0 * places * np.log(places / places[-1])
    return np.asarray(out / np.pi)


def _series(t: Floats) -> Floats:
    """F(t) of `kramers_kronig` for small t, where its closed form loses digits."""
    square, total = t * t, np.zeros_like(t)
    for k in range(9, 0, -1):
        total = (total + 1.0 / (k * (2 * k + 1))) * square
    return -t * total
