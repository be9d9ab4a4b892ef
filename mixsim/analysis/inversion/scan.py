"""What a scan of readings over the ranges of the unknowns shows: valleys, crossings, edges."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]
Model = Callable[[Floats], Floats]


def valleys(cost: Floats, places: Floats) -> Floats:
    """Places of a grid whose cost is no higher than at any neighbour, lowest first, shape (S, U)."""
    filled = np.where(np.isfinite(cost), cost, np.inf)
    lowest = np.isfinite(filled)
    for axis in range(filled.ndim):
        for shift in (1, -1):
            moved = np.roll(filled, shift, axis=axis)
            edge = [slice(None)] * filled.ndim
            edge[axis] = slice(0, 1) if shift == 1 else slice(-1, None)
            moved[tuple(edge)] = np.inf
            lowest &= filled <= moved
    found = places[lowest]
    return np.asarray(found[np.argsort(filled[lowest], kind="stable")])


def crossings(model: Model, target: float, line: Floats, levels: Floats) -> Floats:
    """Places on lines of a grid where one reading is met exactly, by bisection of every bracket at once.

    Parameters
    ----------
    model
        Readings at scaled places; the first is the one meant.
    target
        The reading.
    line
        Scaled places along the last axis but one, shape (..., K, U).
    levels
        The reading there, shape (..., K).

    Returns
    -------
    places
        Shape (S, U), in the order of the lines. A jump through infinity is not among them.
    """
    excess = levels - target
    left, right = excess[..., :-1], excess[..., 1:]
    brackets = np.isfinite(left) & np.isfinite(right) & (left * right <= 0.0) & (left != 0.0)
    low: Floats = line[..., :-1, :][brackets]
    high: Floats = line[..., 1:, :][brackets]
    rising = (right > left)[brackets]
    for _ in range(60):
        middle = 0.5 * (low + high)
        above = model(middle)[..., 0] - target > 0.0
        go_left = (above == rising)[:, np.newaxis]
        low, high = np.where(go_left, low, middle), np.where(go_left, middle, high)
    found = 0.5 * (low + high)
    if not found.size:
        return found
    near = np.abs(model(found)[..., 0] - target) <= 1e-6 * abs(target)
    return found[near]


def towards_edges(model: Model, line: Floats, levels: Floats) -> tuple[Floats, Floats]:
    """A scan along one unknown with more points towards each place where a reading ceases to be.

    A static level rises without end towards a percolation threshold; even steps would cut it off.

    Parameters
    ----------
    model
        Readings at scaled places.
    line
        Scaled places, shape (K, 1).
    levels
        Readings there, shape (K, R); NaN where there is none.

    Returns
    -------
    line, levels
        With the points added, in order.
    """
    there = np.asarray(np.isfinite(levels).all(axis=-1))
    last = np.flatnonzero(there[:-1] != there[1:])
    if not last.size:
        return line, levels
    rising = there[last][:, np.newaxis]
    inner = np.where(rising, line[last], line[last + 1])
    outer = np.where(rising, line[last + 1], line[last])
    near, far = inner.copy(), outer.copy()
    for _ in range(60):
        middle = 0.5 * (near + far)
        found = np.asarray(np.isfinite(model(middle)).all(axis=-1))[:, np.newaxis]
        near, far = np.where(found, middle, near), np.where(found, far, middle)
    steps = np.geomspace(1.0, 1e-15, 200)
    more = (near[:, np.newaxis] + (inner - near)[:, np.newaxis] * steps[:, np.newaxis]).reshape(-1, 1)
    everything = np.concatenate([line, more, near])
    order = np.argsort(everything[:, 0], kind="stable")
    return everything[order], np.concatenate([levels, model(more), model(near)])[order]
