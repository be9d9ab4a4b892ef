"""Least squares over scaled unknowns: bounded, from several starts, in bulk; and what slopes say of doubt."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]
Model = Callable[[Floats], Floats]
"""Scaled places, shape (..., U), to what is read there, shape (..., R)."""

Loss = Literal["linear", "soft_l1", "cauchy"]

_STEP = 1e-5  # of a scaled range, for central differences
_SAME = 1e-4  # of a scaled range: solutions nearer than that are one
_STARTS = 12
_HELD = 1e-6  # of a scaled range: nearer than that to its end, a fit is held there
_LOST = 1e9  # stands for a residual where the model has no value


@dataclass(frozen=True, eq=False)
class Fit:
    """One best fit inside the ranges.

    Attributes
    ----------
    place
        Scaled place, shape (U,).
    cost
        Sum of squared residuals, in the loss that was asked for.
    residual
        Residuals there, shape (R,).
    slopes
        Their derivatives by the scaled places, shape (R, U).
    held
        Which unknowns stand at an end of their range, shape (U,).
    """

    place: Floats
    cost: float
    residual: Floats
    slopes: Floats
    held: NDArray[np.bool_]


def fit(residual: Model, start: Floats, *, loss: Loss = "linear", tolerance: float = 1e-15) -> Fit:
    """The best fit inside 0…1 that is reached from a start.

    Parameters
    ----------
    residual
        Weighted residuals at scaled places.
    start
        Scaled place, shape (U,).
    loss
        "linear" for plain squares; the others count what lies far out for less.
    tolerance
        Relative change of cost, place and gradient at which it stops.

    Returns
    -------
    fit
        Where it stopped.
    """
    from scipy.optimize import least_squares as bounded

    def sound(t: Floats) -> Floats:
        found = residual(t)
        return np.where(np.isfinite(found), found, _LOST)

    def slope(t: Floats) -> Floats:
        return np.nan_to_num(jacobian(residual, t))

    inside = np.clip(start, 1e-9, 1.0 - 1e-9)
    stop = {"xtol": tolerance, "ftol": tolerance, "gtol": tolerance, "max_nfev": 200}
    found = bounded(sound, inside, bounds=(0.0, 1.0), jac=slope, loss=loss, **stop)
    place = np.asarray(found.x)
    held = np.asarray(np.minimum(place, 1.0 - place) < _HELD)
    return Fit(place, 2.0 * float(found.cost), residual(place), slope(place), held)


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
    chosen = starts[:_STARTS]
    near, _ = gauss_newton(model, np.broadcast_to(target, (len(chosen), len(target))), weight, chosen)
    fits = [fit(lambda t: (model(t) - target) * weight, start) for start in apart([*near, *chosen[:1]])]
    return [(found.place, found.cost) for found in distinct(fits)]


def distinct(fits: list[Fit]) -> list[Fit]:
    """Fits that stand apart from each other, best first."""
    ordered = sorted(fits, key=lambda found: found.cost)
    kept = apart([found.place for found in ordered])
    return [next(found for found in ordered if found.place is place) for place in kept]


def apart(places: list[Floats]) -> list[Floats]:
    """Places without those that stand by an earlier one."""
    kept: list[Floats] = []
    for place in places:
        if all(np.max(np.abs(place - known)) > _SAME for known in kept):
            kept.append(place)
    return kept


def jacobian(model: Model, t: Floats) -> Floats:
    """Derivatives of the readings by the scaled places, shape (..., R, U); one-sided at the ends.

    All differences are taken in one call of the model.
    """
    unknowns = t.shape[-1]
    steps = _STEP * np.concatenate([np.eye(unknowns), -np.eye(unknowns)])
    places = np.clip(t[..., np.newaxis, :] + steps, 0.0, 1.0)
    levels = model(places)
    run = np.einsum("...uu->...u", places[..., :unknowns, :] - places[..., unknowns:, :])
    slopes = (levels[..., :unknowns, :] - levels[..., unknowns:, :]) / run[..., np.newaxis]
    return np.swapaxes(slopes, -1, -2)


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
