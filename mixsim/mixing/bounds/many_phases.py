"""A region that holds the complex permittivity of a mixture of any number of phases."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from mixsim.mixing.bounds.discs import Discs
from mixsim.mixing.bounds.lens import Array
from mixsim.mixing.depolarisation import same_length

_TURNS = 65  # directions from which the phases are looked at
_EDGE = 7.0  # towards the last possible ones: to 1 − tanh 7 = 2e-6 of them, where rounding is still 1e-10
_OPPOSITE = 1e-12  # rad from opposite directions, where nothing is bounded any more
_Matrix = tuple[Any, Any, Any]  # p, q, r of the symmetric matrix [[p, q], [q, r]]


def many_phase_region(
    phases: Sequence[ArrayLike],
    *,
    fractions: Sequence[ArrayLike],
    dimensions: int | None = None,
) -> Discs:
    """Region that holds the permittivity of a mixture of any number of phases.

    Parameters
    ----------
    phases
        Relative permittivity of each phase, complex [-].
    fractions
        Volume fraction of each phase [-]; an absent phase does not widen the region.
    dimensions
        None where nothing is known of the geometry; 3 where the mixture is the same in every direction, 2
        where it is so across aligned fibres [-].

    Returns
    -------
    discs
        One disc for each of 65 turns θ of the phases (twice as many with `dimensions`), each of them
        rigorous; NaN where the phases do not lie in one open half of the complex plane.

    Notes
    -----
    Turned by θ so that a_k = Re e^{iθ}ε_k > 0, with b_k the imaginary part, the fields (D′, E″) make
    (E′, D″) through a positive matrix of determinant one, for which there is a minimum principle::

        L_k = [[1, b_k], [b_k, a_k² + b_k²]]/a_k,   L ≤ Σ f_k L_k

    L ≤ [[p, q], [q, r]] is the disc p(a² + b²) − 2qb + r ≤ (1 + pr − q²) a. Of two phases the outermost
    discs are the arcs of `two_phase_region`. With `dimensions` d the comparison of Hashin and Shtrikman
    is made with this matrix, with any L₀ ≥ L_k and Γ = diag((d − 1)/p₀, 1/r₀)/d::

        L ≤ L₀ + [(Σ f_k ((L_k − L₀)⁻¹ + Γ)⁻¹)⁻¹ − Γ]⁻¹

    Without loss the region shrinks to the intervals of `wiener` and `hashin_shtrikman`, to 1e-5 of ε.
    Valid for: phases within one open half of the complex plane; grains far below the wavelength.

    References
    ----------
    A. V. Cherkaev, L. V. Gibiansky, "Variational principles for complex conductivity, viscoelasticity, and
    similar problems in media with complex moduli", J. Math. Phys. 35, 127 (1994), from memory; Z. Hashin,
    S. Shtrikman, J. Appl. Phys. 33, 3125 (1962). That the two are put together is this module's own, and
    held to both limits, to coated spheres and to laminates by its tests.

    Examples
    --------
    >>> discs = many_phase_region([1.0, 4.0 + 1j, 9.0 + 0.1j], fractions=[0.5, 0.3, 0.2], dimensions=3)
    >>> print(", ".join(f"{end:.3f}" for end in discs.extent()))
    2.251, 3.155, 0.097, 0.389
    """
    same_length(phases, fractions, None)
    arrays = np.broadcast_arrays(*phases, *fractions)
    values = np.stack(arrays[: len(phases)]).astype(complex)
    shares = np.stack(arrays[len(phases) :]).astype(float)
    with np.errstate(all="ignore"):
        parallel = np.sum(shares * values, axis=0)
        series = 1.0 / np.sum(np.where(shares > 0.0, shares / values, 0.0), axis=0)
        turn = _turns(values, shares)
        turned = values[..., np.newaxis] * np.exp(1j * turn)
        f = shares[..., np.newaxis]
        # an absent phase may point anywhere: it takes the place of the first that is there
        there = np.take_along_axis(turned, np.argmax(f > 0.0, axis=0)[np.newaxis], axis=0)
        turned = np.where(f > 0.0, turned, there)
        a, b = turned.real, turned.imag
        each = 1.0 / a, b / a, np.abs(turned) ** 2 / a
        p, q, _ = (np.sum(f * part, axis=0) for part in each)
        found = [_disc(p, q, _excess(turned, f), turn)]
        if dimensions is not None:
            p, q, r = _compared(each, f, dimensions)
            found.append(_disc(p, q, np.maximum(p * r - q * q - 1.0, 0.0), turn))
        centre, radius = (np.concatenate(parts, axis=-1) for parts in zip(*found, strict=True))
        within = parallel + series
        if dimensions is not None:
            within = _coated(values, shares, dimensions) + _coated(values[::-1], shares[::-1], dimensions)
    return Discs(centre, radius, 0.5 * within)


def _coated(values: Array, shares: Array, d: int) -> Array:
    """Spheres of as many coats as there are phases, one way to be isotropic: Maxwell Garnett for each."""
    core, volume = values[0], shares[0]
    for layer, more in zip(values[1:], shares[1:], strict=True):
        inner = np.where(volume > 0.0, volume / (volume + more), 0.0)
        contrast = (core - layer) / (core + (d - 1) * layer)
        core = layer * (1.0 + (d - 1) * inner * contrast) / (1.0 - inner * contrast)
        volume = volume + more
    return np.asarray(core)


def _turns(values: Array, shares: Array) -> Array:
    """Angles that turn all phases present into the right half of the plane, shape batch + (turns,)."""
    angles = np.angle(np.where(values.imag == 0.0, values.real, values))  # −0 is no gain
    lost = np.any((values == 0.0) & (shares > 0.0), axis=0)
    least = np.min(np.where(shares > 0.0, angles, np.inf), axis=0)
    greatest = np.max(np.where(shares > 0.0, angles, -np.inf), axis=0)
    room = np.where(lost, np.nan, 0.5 * (np.pi - (greatest - least)))
    room = np.where(room > _OPPOSITE, room, np.nan)
    steps = np.tanh(np.linspace(-_EDGE, _EDGE, _TURNS))
    return np.asarray(-0.5 * (least + greatest)[..., np.newaxis] + room[..., np.newaxis] * steps)


def _compared(each: Any, f: Array, d: int) -> _Matrix:
    """Hashin–Shtrikman bound with a comparison medium above all phases."""
    p, q, r = each
    middle = 0.5 * (q.max(axis=0) + q.min(axis=0))
    apart = 0.5 * (q.max(axis=0) - q.min(axis=0))
    scale = np.sqrt(p.max(axis=0) / r.max(axis=0))
    above = p.max(axis=0) + apart * scale, middle, r.max(axis=0) + apart / scale
    wide: _Matrix = ((d - 1) / (d * above[0]), 0.0, 1.0 / (d * above[2]))
    # (M⁻¹ + Γ)⁻¹ = M (1 + ΓM)⁻¹ also where M is singular
    parts = [_eased(tuple(x - y for x, y in zip(one, above, strict=True)), wide) for one in _each(each)]
    mean: Any = tuple(
        sum((f[k] * parts[k][i] for k in range(len(parts))), start=np.asarray(0.0)) for i in range(3)
    )
    back = _eased(mean, tuple(-x for x in wide))
    return tuple(x + y for x, y in zip(back, above, strict=True))


def _each(parts: Any) -> list[_Matrix]:
    return [tuple(part[k] for part in parts) for k in range(len(parts[0]))]


def _eased(matrix: Any, wide: Any) -> _Matrix:
    """(M⁻¹ + Γ)⁻¹ for symmetric M and diagonal Γ."""
    p, q, r = matrix
    g, _, h = wide
    determinant = p * r - q * q
    scale = 1.0 + g * p + h * r + g * h * determinant
    return (p + h * determinant) / scale, q / scale, (r + g * determinant) / scale


def _excess(turned: Array, f: Array) -> Array:
    """pr − q² − 1 of Σ f_k L_k, without cancellation: Σ f_j f_k |ε_j − ε_k|²/(a_j a_k) over the pairs."""
    total: Any = np.zeros(turned.shape[1:])
    for k in range(1, len(turned)):
        for j in range(k):
            apart = np.abs(turned[j] - turned[k]) ** 2 / (turned[j].real * turned[k].real)
            total = total + f[j] * f[k] * apart
    return np.asarray(total)


def _disc(p: Array, q: Array, excess: Array, turn: Array) -> tuple[Array, Array]:
    """Centre and radius of the disc in which L ≤ [[p, q], [q, r]], turned back; excess is pr − q² − 1."""
    centre = (1.0 + 0.5 * excess + 1j * q) / p
    return centre * np.exp(-1j * turn), 0.5 * excess / p
