"""The self-consistent permittivity of any number of kinds of ellipsoid.

Newton steps towards the fixed point, each answer checked against what the theory says of it, and all roots
of the polynomial where the check fails.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import NamedTuple

import numpy as np

from mixsim.mixing.depolarisation import Array

_BLOCK = 49152  # numbers of all kinds a pass: bounds the memory and keeps it in the cache
_STEPS = 60
_SETTLED = 1e-12  # relative step after which only the last refinements are left
_REFINEMENTS = 1  # carries parts of the answer far smaller than the rest to full precision too
_RESIDUAL = 1e-12
_ROUNDING = 1e-12
_VOID = (
    1e-250  # of the largest phase: as good as zero, and its inverse square would leave the range of floats
)
_STANDS_FOR_VOID, _VOID_MIXTURE = 1e-140, 1e-125  # what stands in for it, and below which the answer is zero
_HALVINGS = 80
_CLIMB = 16  # from the precision of an eigenvalue to that of its tiny parts
_ENDLESS = 1e200  # stands for the infinite Σ f/N of needles, and for that of discs
_THIN = 1e-13  # stands for 1 − N of discs in the polynomial


class _Grains(NamedTuple):
    """Kinds of grain on the first axis, points on the second, which is of length one where all are alike.

    Permittivities `e`, fractions `f`, depolarisation factors `n`, and the scales Σ f/N and Σ f/(1 − N) of
    the two maps.
    """

    e: Array
    f: Array
    n: Array
    touching: Array
    apart: Array

    def at(self, points: Array) -> _Grains:
        return _Grains(*(part if part.shape[-1] == 1 else part[..., points] for part in self))


def fixed_point(phases: Sequence[Array], *, fractions: Sequence[Array], factors: Sequence[Array]) -> Array:
    """Root of z = G(z) in the upper half-plane, or its limit for vanishing loss.

    Parameters
    ----------
    phases
        Relative permittivity of each kind of grain, complex [-].
    fractions
        Volume fraction of each kind, adding up to one [-].
    factors
        Depolarisation factor of each kind along the field [-].

    Returns
    -------
    permittivity
        Relative permittivity of the mixture [-]; NaN where a phase or a fraction is, or where no root
        passes the check (seen once in 100 000 draws of eight phases spread over sixty decades).

    Notes
    -----
    With F(z) = Σ f_k (ε_k − z)/D_k and D_k = (1 − N_k) z + N_k ε_k, F = 0 can be written in two ways::

        z = G(z) = Σ (f_k/N_k) / Σ (f_k/N_k)/D_k                       = z/(1 − F/Σ (f_k/N_k))
        z = H(z) = z Σ (f_k/(1 − N_k)) ε_k/D_k / Σ (f_k/(1 − N_k))      = z (1 + F/Σ (f_k/(1 − N_k)))

    D is a mean, so G maps the half-plane above every phase into itself, and H, which is G of the inverses
    with 1 − N for N, does so too. So at most one root lies in the upper half-plane, and it attracts,
    |1 + z F′/S| < 1 with either sum for S (Denjoy and Wolff); where all phases are real it is the root
    with z F′ < 0. Newton for z − G is z ← z − z F (1 − F/S)/(z F′ + F (1 − F/S)), which stands needles
    and discs as it comes. The roots of the polynomial are those of Σ q_k/(p_k + z) = 1 with
    c = 1/(1 − N), p = c N ε, q = c² f ε/Σ c f: eigenvalues of a diagonal matrix plus one of rank one.
    Where all phases are real and positive, z F is concave and Newton from the arithmetic mean, which no
    root exceeds, falls monotonically to the root, on the real axis.
    Valid for: any passive phases, and phases whose measured loss dips below zero a little.

    Examples
    --------
    >>> third = np.asarray(1.0 / 3.0)
    >>> phases = [np.asarray(value + 0j) for value in (1.0, 4.0, 4.0)]
    >>> print(f"{fixed_point(phases, fractions=[third] * 3, factors=[third] * 3):.6f}")
    2.732051+0.000000j
    """
    count = len(phases)
    given = [list(phases), list(fractions), list(factors)]
    shape = np.broadcast_shapes(*(value.shape for values in given for value in values))
    size, block = int(np.prod(shape)), max(256, _BLOCK // count)
    result = np.full(size, np.nan + 0j)
    views = [[value if value.size == 1 else np.broadcast_to(value, shape) for value in v] for v in given]
    for start in range(0, size, block):
        here = slice(start, min(start + block, size))
        e, f, n = (_rows(row, here, always=place == 0) for place, row in enumerate(views))
        known = np.asarray(
            np.isfinite(e).all(axis=0) & np.isfinite(f).all(axis=0) & np.isfinite(n).all(axis=0)
        )
        with np.errstate(divide="ignore", invalid="ignore", over="ignore", under="ignore"):
            grains = _Grains(e, f, n, _scale(f, n), _scale(f, 1.0 - n))
            if known.all():
                result[here] = _solve(grains)
            else:
                result[here][known] = _solve(grains.at(known))
    return result.reshape(shape)[()]


def _rows(values: Sequence[Array], here: slice, *, always: bool) -> Array:
    """One row for each kind; a single column where no kind differs from point to point."""
    if not always and all(value.size == 1 for value in values):
        return np.array([[float(value.flat[0])] for value in values])
    rows = np.empty((len(values), here.stop - here.start), dtype=complex if always else float)
    for row, value in zip(rows, values, strict=True):
        row[:] = value.flat[0] if value.size == 1 else value.flat[here]
    return rows


def _scale(f: Array, n: Array) -> Array:
    parts = np.where(f > 0.0, f / n, 0.0)
    scale: Array = np.minimum(parts.sum(axis=0), _ENDLESS)
    return scale


def _solve(grains: _Grains) -> Array:
    e = grains.e
    scale = np.abs(np.where(grains.f > 0.0, e, 0.0)).max(axis=0)
    void = np.abs(e) <= _VOID * scale
    if not void.any():
        return _solve_filled(grains)
    scale = np.where(scale > 0.0, scale, 1.0)
    z = _solve_filled(grains._replace(e=np.where(void, _STANDS_FOR_VOID, e / scale)))
    z = np.where(void.any(axis=0) & (np.abs(z) < _VOID_MIXTURE), 0.0, z)
    return z * scale


def _solve_filled(grains: _Grains) -> Array:
    e, f = grains.e, grains.f
    present = f > 0.0
    floor = np.minimum(np.where(present, e.imag, 0.0).min(axis=0), 0.0)  # noise of measured phases
    real = ((e.imag == 0.0) | ~present).all(axis=0)
    positive = ((e.real > 0.0) | ~present).all(axis=0)
    mean = (f * e).sum(axis=0)
    lifted = mean.real + 1j * np.maximum(mean.imag, 0.3 * (f * np.abs(e)).sum(axis=0))
    z = _newton(np.where(positive, mean, lifted), grains, floor)
    trapped = np.flatnonzero(real & ~positive)
    z[trapped] = _onto_axis(z[trapped], grains.at(trapped))
    right = _right(z, grains, floor)
    # at the very threshold of a huge contrast rounding may carry Newton past zero
    beyond = np.flatnonzero(real & positive & ~(right & (z.real > 0.0)))
    z[beyond] = _between_bounds(grains.at(beyond))
    right[beyond] = True
    failed = np.flatnonzero(~right)
    for k in range(len(e)):
        # phases many decades apart: the root may lie at the scale of any of them
        if failed.size == 0:
            break
        near = grains.at(failed)
        again = _newton(1j * np.abs(near.e[k]), near, floor[failed])
        again = np.where(real[failed], _onto_axis(again, near), again)
        sound = _right(again, near, floor[failed])
        z[failed[sound]] = again[sound]
        failed = failed[~sound]
    if failed.size:
        z[failed] = _among_all_roots(grains.at(failed), floor[failed], real[failed])
    return z


def _balance(z: Array, grains: _Grains) -> tuple[Array, Array]:
    """F(z) and z F′(z)."""
    e, f, n = grains.e, grains.f, grains.n
    local = (1.0 - n) * z
    local += n * e
    inverse = np.reciprocal(local, out=local)
    weighted = f * inverse
    inverse *= weighted
    weighted *= e - z
    inverse *= e
    return weighted.sum(axis=0), -z * inverse.sum(axis=0)


def _step(z: Array, grains: _Grains) -> tuple[Array, Array]:
    """Newton's next point, and F here."""
    total, slope = _balance(z, grains)
    bent = total * (1.0 - total / grains.touching)
    return z - z * (bent / (slope + bent)), total


def _image(z: Array, total: Array, grains: _Grains) -> Array:
    """G(z) or H(z), whichever goes further."""
    touching, apart = grains.touching, grains.apart
    image: Array = np.where(touching <= apart, z / (1.0 - total / touching), z * (1.0 + total / apart))
    return image


def _newton(start: Array, grains: _Grains, floor: Array) -> Array:
    z = start.copy()
    active = np.arange(z.size)
    left = np.full(z.size, _REFINEMENTS + 1)
    for _ in range(_STEPS):
        if active.size == 0:
            break
        # fancy indexing copies: spare it while every point is still on its way
        some = active.size < z.size
        here, kinds = (z[active], grains.at(active)) if some else (z, grains)
        new, total = _step(here, kinds)
        lowest = (floor[active] if some else floor) - _ROUNDING * np.abs(new)
        astray = ~(new.imag >= lowest)  # NaN compares false: the plain step serves there too
        if astray.any():
            new[astray] = _image(here[astray], total[astray], kinds.at(astray))
        settled = np.abs(new - here) <= _SETTLED * np.abs(new)
        z[active] = new
        left[active] -= settled
        active = active[(left[active] > 0) & np.isfinite(new)]
    return z


def _rounding(z: Array, grains: _Grains) -> Array:
    """Size of the terms of F, against which its zero is judged."""
    e, f, n = grains.e, grains.f, grains.n
    size: Array = (f * ((np.abs(e) + np.abs(z)) / np.abs((1.0 - n) * z + n * e))).sum(axis=0)
    return size


def _right(z: Array, grains: _Grains, floor: Array) -> Array:
    total, slope = _balance(z, grains)
    scale = np.minimum(grains.touching, grains.apart)
    right: Array = (
        (np.abs(total) <= _RESIDUAL * _rounding(z, grains))
        & (z.imag >= floor - _ROUNDING * np.abs(z))
        & (np.abs(scale + slope) <= scale * (1.0 + 1e-6))
    )
    return right


def _onto_axis(z: Array, grains: _Grains) -> Array:
    """Of loss-free phases, take away the imaginary part that only rounding left."""
    x = z.real + 0j
    for _ in range(3):
        x, _ = _step(x, grains)
    total, slope = _balance(x, grains)
    sound = (
        (np.abs(z.imag) <= 1e-6 * np.abs(z))
        & (np.abs(x - z) <= 1e-5 * np.abs(z))
        & (np.abs(total) <= 1e-14 * _rounding(x, grains))
        & (slope.real <= 1e-6 * np.minimum(grains.touching, grains.apart))
    )
    return np.where(sound, x, z)


def _between_bounds(grains: _Grains) -> Array:
    """Root between the least and the greatest of positive phases, where F falls."""
    e = grains.e.real
    present = grains.f > 0.0
    low = np.log(np.where(present, e, np.inf).min(axis=0))
    high = np.log(np.where(present, e, 0.0).max(axis=0))
    for _ in range(_HALVINGS):
        middle = 0.5 * (low + high)
        z = np.exp(middle)
        rising = (grains.f * ((e - z) / ((1.0 - grains.n) * z + grains.n * e))).sum(axis=0) > 0.0
        low, high = np.where(rising, middle, low), np.where(rising, high, middle)
    root: Array = np.exp(0.5 * (low + high)) + 0j
    return root


def _among_all_roots(grains: _Grains, floor: Array, real: Array) -> Array:
    scale = np.abs(grains.e).max(axis=0)
    scale = np.where(scale > 0.0, scale, 1.0)
    grains = grains._replace(e=grains.e / scale)
    floor = floor / scale
    best = np.full(grains.e.shape[1], np.nan + 0j)
    merit = np.full(grains.e.shape[1], np.inf)
    size = np.minimum(grains.touching, grains.apart)
    for root in _eigenvalues(grains):
        z = root
        for _ in range(_CLIMB):
            new, _ = _step(z, grains)
            z = np.where(np.isfinite(new), new, z)
        z = np.where(real, _onto_axis(z, grains), z)
        total, slope = _balance(z, grains)
        inside = z.imag >= floor - 1e-10 * np.abs(z)
        pull = np.abs(1.0 + slope / size)
        better = inside & (pull < np.minimum(merit, 1.0 + 1e-6))
        better &= np.abs(total) <= _RESIDUAL * _rounding(z, grains)
        best, merit = np.where(better, z, best), np.where(better, pull, merit)
    return best * scale


def _eigenvalues(grains: _Grains) -> Array:
    """All z of Σ q_k/(p_k + z) = 1, the kinds on the first axis."""
    spread = 1.0 / np.maximum(1.0 - grains.n, _THIN)
    p = (spread * grains.n * grains.e).T
    q = (spread * spread * grains.f / (spread * grains.f).sum(axis=0) * grains.e).T
    size = p.shape[-1]
    matrix = np.broadcast_to(q[:, :, None], (*q.shape, size)).copy()
    index = np.arange(size)
    matrix[:, index, index] -= p
    eigenvalues: Array = np.linalg.eigvals(matrix).T
    return eigenvalues
