"""Solving readings for unknowns: scan, bounded least squares, covariance, Gauss–Newton in bulk."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]
Model = Callable[[Floats], Floats]

_STEP = 1e-5  # of a scaled range, for central differences
_SAME = 1e-4  # of a scaled range: solutions nearer than that are one
_STARTS = 12


def least_squares(model: Model, target: Floats, weight: Floats, starts: Floats) -> list[tuple[Floats, float]]:
    """Every distinct best fit inside 0…1 from some starts, best first.

    Parameters
    ----------
    model
        Readings at scaled places.
    target
        Readings to meet, shape (R,).
    weight
        One over the standard uncertainty of each, shape (R,).
    starts
        Scaled places, shape (S, U).

    Returns
    -------
    fits
        Scaled place and sum of squared weighted residuals.
    """
    from scipy.optimize import least_squares as bounded

    def residual(t: Floats) -> Floats:
        difference = (model(t) - target) * weight
        return np.where(np.isfinite(difference), difference, 1e9)

    def slope(t: Floats) -> Floats:
        return np.nan_to_num(jacobian(model, t) * weight[:, np.newaxis])

    chosen = starts[:_STARTS]
    near, _ = gauss_newton(model, np.broadcast_to(target, (len(chosen), len(target))), weight, chosen)
    fits: list[tuple[Floats, float]] = []
    for start in _apart([*near, *chosen[:1]]):
        inside = np.clip(start, 1e-9, 1.0 - 1e-9)
        tight = {"xtol": 1e-15, "ftol": 1e-15, "gtol": 1e-15, "max_nfev": 100}
        fit = bounded(residual, inside, bounds=(0.0, 1.0), jac=slope, **tight)
        fits.append((np.asarray(fit.x), 2.0 * float(fit.cost)))
    fits.sort(key=lambda item: item[1])
    kept = _apart([place for place, _ in fits])
    return [(place, next(cost for known, cost in fits if known is place)) for place in kept]


def _apart(places: list[Floats]) -> list[Floats]:
    """Places without those that stand by an earlier one."""
    distinct: list[Floats] = []
    for place in places:
        if all(np.max(np.abs(place - known)) > _SAME for known in distinct):
            distinct.append(place)
    return distinct


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


def jacobian(model: Model, t: Floats) -> Floats:
    """Derivatives of the readings by the scaled places, shape (..., R, U); one-sided at the ends."""
    columns = []
    for i in range(t.shape[-1]):
        step = np.zeros(t.shape[-1])
        step[i] = _STEP
        ahead, behind = np.clip(t + step, 0.0, 1.0), np.clip(t - step, 0.0, 1.0)
        run = (ahead - behind)[..., i]
        columns.append((model(ahead) - model(behind)) / run[..., np.newaxis])
    return np.stack(columns, axis=-1)


def covariance(jac: Floats, std: Floats, spread: Floats) -> Floats | None:
    """First-order covariance of the places of a weighted fit; None if singular.

    Parameters
    ----------
    jac
        Derivatives of the readings by the places, shape (R, U).
    std
        Standard uncertainties that weigh the readings, shape (R,).
    spread
        Covariance of readings less model, shape (R, R): that of the readings, and of what the model rests on.

    Notes
    -----
    A S Aᵀ with A = (Jᵀ W J)⁻¹ Jᵀ W and W = diag(1/σ²); (Jᵀ W J)⁻¹ where S is that of the readings alone.
    """
    if not (np.isfinite(jac).all() and np.isfinite(spread).all()):
        return None
    weighted = jac / std[:, np.newaxis]
    singular = np.linalg.svd(weighted, compute_uv=False)
    if singular[-1] <= 1e-9 * singular[0] or singular[-1] == 0.0:
        return None
    gain = np.linalg.pinv(weighted) / std
    return np.asarray(gain @ spread @ gain.T)


def gauss_newton(
    model: Model, targets: Floats, weight: Floats, start: Floats
) -> tuple[Floats, NDArray[np.bool_]]:
    """Best fit to each of many sets of readings at once.

    Parameters
    ----------
    model
        Readings at scaled places.
    targets
        Sets of readings, shape (M, R).
    weight
        One over the standard uncertainty of each reading, shape (R,).
    start
        Scaled place, shape (U,), or one for each set, shape (M, U).

    Returns
    -------
    places, inside
        Shape (M, U), held to 0…1; and whether the fit needed no holding.
    """
    t = np.broadcast_to(start, (len(targets), start.shape[-1])).copy()
    held: NDArray[np.bool_] = np.zeros(len(t), dtype=bool)
    for _ in range(12):
        jac = jacobian(model, t) * weight[:, np.newaxis]
        residual = (targets - model(t)) * weight
        sound = np.isfinite(jac).all(axis=(-2, -1)) & np.isfinite(residual).all(axis=-1)
        step = np.zeros_like(t)
        step[sound] = np.einsum("mur,mr->mu", np.linalg.pinv(jac[sound]), residual[sound])
        wanted = t + np.clip(step, -0.3, 0.3)
        t = np.clip(wanted, 0.0, 1.0)
        done = bool(np.max(np.abs(step)) < 1e-12)
        held = np.asarray((np.abs(wanted - t) > 1e-12).any(axis=-1) | ~sound)
        if done:
            break
    return t, ~held
