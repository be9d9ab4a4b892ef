"""The self-consistent permittivity of any number of phases of spheres.

Newton steps towards the fixed point, each answer checked against what the theory says of it, and all roots
of the polynomial where the check fails.
"""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from mixsim.mixing.depolarisation import Array

_BLOCK = 16384  # points a pass: bounds the memory and keeps it in the cache
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


def fixed_point(phases: Sequence[Array], *, fractions: Sequence[Array], dimensions: int) -> Array:
    """Root of z = G(z) in the upper half-plane, or its limit for vanishing loss.

    Parameters
    ----------
    phases
        Relative permittivity of each phase, complex [-].
    fractions
        Volume fraction of each phase, adding up to one [-].
    dimensions
        3 for spheres, 2 for fibres seen across [-].

    Returns
    -------
    permittivity
        Relative permittivity of the mixture [-]; NaN where a phase or a fraction is, or where no root
        passes the check (seen once in 100 000 draws of eight phases spread over sixty decades).

    Notes
    -----
    G(z) = 1/(d Σ f_k/(ε_k + (d − 1) z)) maps the half-plane above every phase into itself; its one fixed
    point there attracts, |G′| < 1 (Denjoy and Wolff). The roots of the polynomial are, with w = (d − 1) z,
    the w of Σ d f_k ε_k/(ε_k + w) = 1: eigenvalues of a diagonal matrix plus one of rank one.
    Where all phases are real and positive, z − G(z) is convex and Newton from the arithmetic mean falls
    monotonically to the root, on the real axis.
    Valid for: any passive phases, and phases whose measured loss dips below zero: G also keeps the
    half-plane above the lowest ε″.

    Examples
    --------
    >>> third = np.asarray(1.0 / 3.0)
    >>> phases = [np.asarray(value + 0j) for value in (1.0, 4.0, 4.0)]
    >>> print(f"{fixed_point(phases, fractions=[third] * 3, dimensions=3):.6f}")
    2.732051+0.000000j
    """
    count = len(phases)
    shape = np.broadcast_shapes(*(value.shape for value in (*phases, *fractions)))
    size = int(np.prod(shape))
    values = [np.broadcast_to(value, shape).reshape(size) for value in phases]
    volumes = [np.broadcast_to(value, shape).reshape(size) for value in fractions]
    result = np.full(size, np.nan + 0j)
    e, f = np.empty((count, _BLOCK), dtype=complex), np.empty((count, _BLOCK))
    for start in range(0, size, _BLOCK):
        stop = min(start + _BLOCK, size)
        for k in range(count):
            e[k, : stop - start] = values[k][start:stop]
            f[k, : stop - start] = volumes[k][start:stop]
        block_e, block_f = e[:, : stop - start], f[:, : stop - start]
        known = np.isfinite(block_e).all(axis=0) & np.isfinite(block_f).all(axis=0)
        if known.all():
            result[start:stop] = _solve(block_e, block_f, dimensions)
        else:
            result[start:stop][known] = _solve(block_e[:, known], block_f[:, known], dimensions)
    return result.reshape(shape)[()]


def _solve(e: Array, f: Array, d: int) -> Array:
    scale = np.abs(np.where(f > 0.0, e, 0.0)).max(axis=0)
    void = np.abs(e) <= _VOID * scale
    if not void.any():
        return _solve_filled(e, f, d)
    scale = np.where(scale > 0.0, scale, 1.0)
    z = _solve_filled(np.where(void, _STANDS_FOR_VOID, e / scale), f, d)
    z = np.where(void.any(axis=0) & (np.abs(z) < _VOID_MIXTURE), 0.0, z)
    return z * scale


def _solve_filled(e: Array, f: Array, d: int) -> Array:
    present = f > 0.0
    floor = np.minimum(np.where(present, e.imag, 0.0).min(axis=0), 0.0)  # noise of measured phases
    real = ((e.imag == 0.0) | ~present).all(axis=0)
    positive = ((e.real > 0.0) | ~present).all(axis=0)
    mean = (f * e).sum(axis=0)
    lifted = mean.real + 1j * np.maximum(mean.imag, 0.3 * (f * np.abs(e)).sum(axis=0))
    z = _newton(np.where(positive, mean, lifted), e, f, floor, d)
    trapped = np.flatnonzero(real & ~positive)
    z[trapped] = _onto_axis(z[trapped], e[:, trapped], f[:, trapped], d)
    right = _right(z, e, f, floor, d)
    # at the very threshold of a huge contrast rounding may carry Newton past zero
    beyond = np.flatnonzero(real & positive & ~(right & (z.real > 0.0)))
    z[beyond] = _between_bounds(e[:, beyond].real, f[:, beyond], d)
    right[beyond] = True
    failed = np.flatnonzero(~right)
    for k in range(len(e)):
        # phases many decades apart: the root may lie at the scale of any of them
        if failed.size == 0:
            break
        near = e[:, failed], f[:, failed]
        again = _newton(1j * np.abs(e[k, failed]), *near, floor[failed], d)
        again = np.where(real[failed], _onto_axis(again, *near, d), again)
        sound = _right(again, *near, floor[failed], d)
        z[failed[sound]] = again[sound]
        failed = failed[~sound]
    if failed.size:
        z[failed] = _among_all_roots(e[:, failed], f[:, failed], floor[failed], real[failed], d)
    return z


def _map(z: Array, e: Array, f: Array, d: int) -> tuple[Array, Array]:
    """G(z) and its derivative."""
    inverse = 1.0 / (e + (d - 1) * z)
    weighted = f * inverse
    image = 1.0 / (d * weighted.sum(axis=0))
    weighted *= inverse
    return image, (d * (d - 1)) * weighted.sum(axis=0) * image * image


def _newton(start: Array, e: Array, f: Array, floor: Array, d: int) -> Array:
    z = start.copy()
    active = np.arange(z.size)
    left = np.full(z.size, _REFINEMENTS + 1)
    for _ in range(_STEPS):
        if active.size == 0:
            break
        # fancy indexing copies: spare it while every point is still on its way
        some = active.size < z.size
        here = z[active] if some else z
        image, slope = _map(here, e[:, active] if some else e, f[:, active] if some else f, d)
        new = here - (here - image) / (1.0 - slope)
        lowest = (floor[active] if some else floor) - _ROUNDING * np.abs(new)
        new = np.where(new.imag >= lowest, new, image)  # NaN compares false: the plain step serves there too
        settled = np.abs(new - here) <= _SETTLED * np.abs(new)
        z[active] = new
        left[active] -= settled
        active = active[(left[active] > 0) & np.isfinite(new)]
    return z


def _right(z: Array, e: Array, f: Array, floor: Array, d: int) -> Array:
    image, slope = _map(z, e, f, d)
    right: Array = (
        (np.abs(z - image) <= _RESIDUAL * np.abs(z))
        & (z.imag >= floor - _ROUNDING * np.abs(z))
        & (np.abs(slope) <= 1.0 + 1e-6)
    )
    return right


def _onto_axis(z: Array, e: Array, f: Array, d: int) -> Array:
    """Of loss-free phases, take away the imaginary part that only rounding left."""
    x = z.real + 0j
    for _ in range(3):
        image, slope = _map(x, e, f, d)
        x = x - (x - image) / (1.0 - slope)
    image, slope = _map(x, e, f, d)
    sound = (
        (np.abs(z.imag) <= 1e-6 * np.abs(z))
        & (np.abs(x - z) <= 1e-5 * np.abs(z))
        & (np.abs(x - image) <= 1e-14 * np.abs(x))
        & (slope.real <= 1.0 + 1e-6)
    )
    return np.where(sound, x, z)


def _between_bounds(e: Array, f: Array, d: int) -> Array:
    """Root between the least and the greatest of positive phases, where Σ f (e − z)/(e + (d − 1) z) falls."""
    present = f > 0.0
    low = np.log(np.where(present, e, np.inf).min(axis=0))
    high = np.log(np.where(present, e, 0.0).max(axis=0))
    for _ in range(_HALVINGS):
        middle = 0.5 * (low + high)
        z = np.exp(middle)
        rising = (f * ((e - z) / (e + (d - 1) * z))).sum(axis=0) > 0.0
        low, high = np.where(rising, middle, low), np.where(rising, high, middle)
    root: Array = np.exp(0.5 * (low + high)) + 0j
    return root


def _among_all_roots(e: Array, f: Array, floor: Array, real: Array, d: int) -> Array:
    scale = np.abs(e).max(axis=0)
    scale = np.where(scale > 0.0, scale, 1.0)
    e = e / scale
    floor = floor / scale
    roots = _eigenvalues(e, f * d) / (d - 1)
    best = np.full(e.shape[1], np.nan + 0j)
    merit = np.full(e.shape[1], np.inf)
    for root in roots:
        z = root
        for _ in range(_CLIMB):
            image, slope = _map(z, e, f, d)
            step = (z - image) / (1.0 - slope)
            z = np.where(np.isfinite(step), z - step, z)
        z = np.where(real, _onto_axis(z, e, f, d), z)
        image, slope = _map(z, e, f, d)
        inside = z.imag >= floor - 1e-10 * np.abs(z)
        attracting = np.abs(slope) < np.minimum(merit, 1.0 + 1e-6)
        better = inside & attracting & (np.abs(z - image) <= _RESIDUAL * np.abs(z))
        best, merit = np.where(better, z, best), np.where(better, np.abs(slope), merit)
    return best * scale


def _eigenvalues(diagonal: Array, weights: Array) -> Array:
    """All w of Σ weight_k x_k/(x_k + w) = 1, the phases on the first axis."""
    x, product = diagonal.T, (weights * diagonal).T
    size = x.shape[-1]
    matrix = np.broadcast_to(product[:, :, None], (*product.shape, size)).copy()
    index = np.arange(size)
    matrix[:, index, index] -= x
    eigenvalues: Array = np.linalg.eigvals(matrix).T
    return eigenvalues
