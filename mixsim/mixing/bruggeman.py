"""Bruggeman's symmetric effective medium: phases of spheres or ellipsoids, none of which is the host.

The quadratic of two phases of spheres is solved in closed form; all else goes to `mixsim.mixing.fixed_point`.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from mixsim.errors import Refusal
from mixsim.mixing.depolarisation import SPHERE, Array, Depolarisation, only_spheres, same_length
from mixsim.mixing.fixed_point import fixed_point

_BLOCK = 8192  # points a pass: the temporaries of the closed form then stay in the cache
_SQUARABLE = 1e-140, 1e140  # squares of phases between: safe even for phases many decades below the larger
_TIE = 1e-9  # cosine between S and M below which the loss has all but vanished


def bruggeman(
    phases: Sequence[ArrayLike],
    *,
    fractions: Sequence[ArrayLike],
    depolarisations: Sequence[Depolarisation] | None = None,
    dimensions: int = 3,
) -> Array:
    """Permittivity of a mixture whose phases all stand on the same footing, after Bruggeman.

    Parameters
    ----------
    phases
        Relative permittivity of each phase [-].
    fractions
        Volume fraction of each phase, adding up to one [-].
    depolarisations
        Depolarisation factors and weights of each phase [-]. None: spheres.
    dimensions
        3 for grains of any shape, 2 for aligned round fibres with the field across them [-].

    Returns
    -------
    permittivity
        Relative permittivity of the mixture, complex [-]; its imaginary part is exactly zero where every
        phase is real and positive. Aligned grains give the three principal axes at the second-to-last
        position.

    Raises
    ------
    Refusal
        Where the arguments differ in number, dimensions is neither 2 nor 3, or 2 with grains that are not
        round fibres.

    Notes
    -----
    The permittivity z solves, in d dimensions::

        Σ f_k (ε_k − z)/(ε_k + (d − 1) z) = 0,   that is   z = G(z) = 1/(d Σ f_k/(ε_k + (d − 1) z))

    G maps the upper half-plane into itself, so at most one root lies there, and it is the physical one.
    For two phases::

        z = (b + S)/(2(d − 1)),   b = (d f₁ − 1) ε₁ + (d f₂ − 1) ε₂,   S² = b² + 4(d − 1) ε₁ε₂

    and S is the square root with Re(S/M) ≥ 0, where M = m₁ε₁ + m₂ε₂, m_k = 1 + (d − 2) f_k.

    Proof. Expanding, M² − S² = 4(d − 1) f₁f₂ (ε₁ − ε₂)². Suppose Re(S/M) = 0, or M = 0. Then
    S² = −τ²M² with τ real (or M = 0 at once), so (1 + τ²) M² = 4(d − 1) f₁f₂ (ε₁ − ε₂)², that is
    M = ±c (ε₁ − ε₂) with 0 ≤ c ≤ 2√((d − 1) f₁f₂), and (m₁ ∓ c) ε₁ = −(m₂ ± c) ε₂. Since f₁ + f₂ = 1,
    m₁ = (d − 1) f₁ + f₂ ≥ 2√((d − 1) f₁f₂) ≥ c and likewise m₂ ≥ c: so ε₁/ε₂ is real and not positive.
    Where both phases have loss (ε″ > 0) that never happens. Those pairs form a convex set, on which S can
    therefore be followed continuously without vanishing while Re(S/M) keeps its sign. At ε₁ = ε₂ = ε
    the root z = ε belongs to S = M = dε, sign plus. On the way z stays in the upper half-plane, because a
    real z would make G(z) complex. So plus is the physical sign for all such pairs; for loss-free phases
    it gives the limit of vanishing loss: 1 − G′(z) = (2/d) S/(M + S), so G′ < 1 on the real axis, which for
    spheres is 6 z² Σ f_k/(ε_k + 2z)² < 1. A tie, S imaginary and M real, is left only for a real negative
    ε₁/ε₂, and there the root with Im z > 0 is taken. ∎

    Ellipsoids, N being the factors of the phase and < > the mean over the axes of its grains as they lie::

        Σ f_k (ε_k − z) <1/(z + N_k (ε_k − z))> = 0

    the symmetric form, in which the grains of each phase, the host's too, polarise in the mixture, each by
    its own shape; the host's are spheres unless said otherwise. The other published form, of Polder and
    van Santen, has z = ε_h + Σ f_k (ε_k − ε_h) <z/(z + N_k (ε_k − z))> and the host as what is left; both
    are one for spheres, and agree to first order in f. Principal axes are solved one by one, with the factors
    that the grain has in an isotropic surrounding.

    Where b and S oppose each other the root comes from the product of the two, z = 2 ε₁ε₂/(S − b).
    Valid for: grains of all phases that touch at random, small against the wavelength. The phase of
    highest conductivity percolates at f = 1/d, twice what random hard spheres show (0.16 in 3-D).

    References
    ----------
    D. A. G. Bruggeman, "Berechnung verschiedener physikalischer Konstanten von heterogenen Substanzen",
    Ann. Phys. 416, 636 (1935).
    T. G. Mackay and A. Lakhtakia, arXiv:1201.5818 (2012), on the formalisms of that name for ellipsoids.

    Examples
    --------
    >>> print(f"{bruggeman([1.0, 10.0], fractions=[0.5, 0.5]):.3f}")
    4.000+0.000j

    A loss-free metal in glass absorbs all the same, by its coupled resonances:

    >>> print(f"{bruggeman([2.25, -4.0], fractions=[0.7, 0.3]):.3f}")
    0.719+1.996j
    """
    if dimensions not in (2, 3):
        raise Refusal(f"{dimensions!r} dimensions", "bruggeman knows 3 (spheres) and 2 (fibres seen across)")
    shapes = same_length(phases, fractions, depolarisations)
    if dimensions == 2:
        only_spheres(shapes, rule="bruggeman", dimensions=2)
        shapes = [((0.5, 1.0),)] * len(shapes)
    values = [np.asarray(phase, dtype=complex) for phase in phases]
    volumes = [np.asarray(fraction, dtype=float) for fraction in fractions]
    with np.errstate(divide="ignore", invalid="ignore", over="ignore", under="ignore"):
        if len(values) == 2 and all(shape is SPHERE or dimensions == 2 for shape in shapes):
            return _two_phases([*values, *volumes], dimensions)
        kinds = [
            (value, volume * np.asarray(weight), np.asarray(factor, dtype=float))
            for value, volume, shape in zip(values, volumes, shapes, strict=True)
            for factor, weight in shape
        ]
        each, shares, factors = zip(*kinds, strict=True)
        return fixed_point(each, fractions=shares, factors=factors)


def percolation_threshold(depolarisation: Depolarisation) -> Array:
    """Fraction from which conducting grains among insulating spheres conduct through the mixture.

    Parameters
    ----------
    depolarisation
        Depolarisation factors and weights of the conducting grains [-].

    Returns
    -------
    threshold
        Volume fraction [-]; that along each principal axis, shape (..., 3, 1), where grains are aligned.

    Notes
    -----
    There z vanishes beside the conductors and is infinite beside the insulators. The balance of the rule
    becomes f <1/N> = (1 − f) <1/(1 − N)>, and the last mean is 3/2 for spheres::

        f_c = (3/2) / (3/2 + <1/N>)

    Valid for: one phase that conducts; several by the mean of 1/f_c, weighted with their fractions.

    Examples
    --------
    >>> from mixsim.mixing import random_spheroid
    >>> print(f"{percolation_threshold(random_spheroid(10.0)):.4f}")
    0.0777
    """
    with np.errstate(divide="ignore"):
        reach = sum((weight / np.asarray(factor) for factor, weight in depolarisation), start=np.asarray(0.0))
        threshold: Array = 1.5 / (1.5 + reach)
    return threshold


def _two_phases(operands: list[Array], dimensions: int) -> Array:
    access: Any = [["readonly"]] * 4 + [["writeonly", "allocate"]]
    kinds: Any = [complex, complex, float, float, complex]
    blocks = np.nditer(
        [*operands, None],
        flags=["external_loop", "buffered", "zerosize_ok"],
        op_flags=access,
        op_dtypes=kinds,
        order="C",
        buffersize=_BLOCK,
    )
    with blocks:
        for e1, e2, f1, f2, mixture in blocks:
            mixture[...] = _closed_form(e1, e2, f1, f2, dimensions)
        result: Array = blocks.operands[4]
    return result[()]


def _closed_form(e1: Array, e2: Array, f1: Array, f2: Array, d: int) -> Array:
    product = (4 * (d - 1) * e1) * e2
    b = (d * f1 - 1.0) * e1 + (d * f2 - 1.0) * e2
    m = (1.0 + (d - 2) * f1) * e1 + (1.0 + (d - 2) * f2) * e2
    s = np.sqrt(b * b + product)
    side = _dot(s, m)
    np.negative(s, out=s, where=side < 0.0)
    z = _root(b, s, product, d)
    below = z.imag < 0.0
    if below.any():
        # rounding can spoil the sign only where S and M are all but at right angles: there Im z decides
        tied = below & (np.abs(side) <= _TIE * np.abs(s) * np.abs(m))
        other = _root(b[tied], -s[tied], product[tied], d)
        z[tied] = np.where(other.imag > z[tied].imag, other, z[tied])
    least, most = _SQUARABLE
    np.abs(side, out=side)
    if not (side.min() > least and side.max() < most):
        _mend(z, side, e1, e2, f1, f2, d)
    # no root of passive phases lies below the lower of their losses: what does is rounding
    lowest = np.minimum(e1.imag, e2.imag)
    np.maximum(z.imag, lowest, out=z.imag, where=lowest >= 0.0)
    return z


def _mend(z: Array, side: Array, e1: Array, e2: Array, f1: Array, f2: Array, d: int) -> None:
    """Answer anew, in units of the larger phase, where squares may leave the range of floats."""
    least, most = _SQUARABLE
    doubtful = np.flatnonzero(~((side > least) & (side < most)))
    larger = np.maximum(np.abs(e1[doubtful]), np.abs(e2[doubtful]))
    apart = ((larger < least**0.5) | (larger > most**0.5)) & (larger > 0.0) & np.isfinite(larger)
    if apart.any():
        there, unit = doubtful[apart], np.exp2(np.floor(np.log2(larger[apart])))
        z[there] = unit * _closed_form(e1[there] / unit, e2[there] / unit, f1[there], f2[there], d)


def _root(b: Array, s: Array, product: Array, d: int) -> Array:
    z: Array = b + s
    np.divide(product, s - b, out=z, where=_dot(b, s) < 0.0)
    z /= 2 * (d - 1)
    return z


def _dot(a: Array, b: Array) -> Array:
    """Real part of a times the conjugate of b."""
    real: Array = a.real * b.real + a.imag * b.imag
    return real


def fraction_from(mixture: ArrayLike, *, host: ArrayLike, inclusion: ArrayLike, dimensions: int = 3) -> Array:
    """Volume fraction of one of two phases that gives this mixture.

    Parameters
    ----------
    mixture, host, inclusion
        Relative permittivities of the mixture, of the other phase and of this one [-].
    dimensions
        3 for spheres, 2 for fibres seen across [-].

    Returns
    -------
    fraction
        Volume fraction of `inclusion` [-]: real for real permittivities, otherwise complex, the imaginary
        part measuring how far the three fail to agree; not finite where there is no contrast.

    Notes
    -----
    f = (ε_h − ε)(ε_i + (d − 1) ε) / (d ε (ε_h − ε_i)), returned as it comes, also outside 0…1.
    Valid for: two phases of spheres.

    Examples
    --------
    >>> print(f"{fraction_from(4.0, host=1.0, inclusion=10.0):.3f}")
    0.500
    """
    z, h, i = np.asarray(mixture), np.asarray(host), np.asarray(inclusion)
    with np.errstate(divide="ignore", invalid="ignore"):
        fraction: Array = (h - z) / (h - i) * ((i + (dimensions - 1) * z) / (dimensions * z))
    return fraction


def inclusion_from(mixture: ArrayLike, *, host: ArrayLike, fraction: ArrayLike, dimensions: int = 3) -> Array:
    """Permittivity of one of two phases that gives this mixture.

    Parameters
    ----------
    mixture, host
        Relative permittivities of the mixture and of the other phase [-].
    fraction
        Volume fraction of the phase looked for [-].
    dimensions
        3 for spheres, 2 for fibres seen across [-].

    Returns
    -------
    inclusion
        Relative permittivity of that phase [-], as it comes; a negative real part or a negative loss says
        that no ordinary dielectric does it.

    Notes
    -----
    With p = (1 − f)(ε_h − ε) and q = f (ε_h + (d − 1) ε), ε_i = ε (q − (d − 1) p)/(q + p).
    Valid for: two phases of spheres.

    Examples
    --------
    >>> print(f"{inclusion_from(4.0, host=1.0, fraction=0.5):.3f}")
    10.000
    """
    z, h, f = np.asarray(mixture), np.asarray(host), np.asarray(fraction)
    p, q = (1.0 - f) * (h - z), f * (h + (dimensions - 1) * z)
    with np.errstate(divide="ignore", invalid="ignore"):
        inclusion: Array = z * ((q - (dimensions - 1) * p) / (q + p))
    return inclusion
