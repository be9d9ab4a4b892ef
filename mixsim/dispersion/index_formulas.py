"""Formulas of the complex refractive index as functions of angular frequency.

At ω = 0 and ω → ∞ each is what it tends to, which may be infinite and says nothing of a material.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from mixsim.errors import Refusal
from mixsim.units import SPEED_OF_LIGHT

Array = NDArray[Any]


def constant(omega: ArrayLike, *, n: ArrayLike, k: ArrayLike = 0.0) -> Array:
    """Index that does not depend on frequency.

    Parameters
    ----------
    omega
        Angular frequency [rad/s].
    n
        Refractive index [-].
    k
        Extinction coefficient [-].

    Returns
    -------
    index
        n + ik at every frequency [-].

    Notes
    -----
    n + ik. Valid for: the frequency at which it was read, and near it.

    References
    ----------
    Common practice.

    Examples
    --------
    >>> complex(constant(1.0, n=1.5))
    (1.5+0j)
    """
    level = np.asarray(n, dtype=float) + _zeros(np.asarray(omega, dtype=float))
    return _complex(level, np.asarray(k, dtype=float))


def cauchy(omega: ArrayLike, *, a: ArrayLike, b: ArrayLike = 0.0, c: ArrayLike = 0.0) -> Array:
    """Cauchy's formula for a clear window.

    Parameters
    ----------
    omega
        Angular frequency [rad/s].
    a
        Index at long wavelengths [-].
    b
        Coefficient of 1/λ² [m^2].
    c
        Coefficient of 1/λ⁴ [m^4].

    Returns
    -------
    index
        Refractive index [-].

    Notes
    -----
    n = a + b/λ² + c/λ⁴, λ the vacuum wavelength. Valid for: a clear window, as fitted.

    References
    ----------
    A. L. Cauchy, Mémoire sur la dispersion de la lumière, 1836.

    Examples
    --------
    >>> omega = 2 * 3.141592653589793 * 299792458.0 / 589.3e-9
    >>> round(complex(cauchy(omega, a=1.478, b=0.0049e-12)).real, 5)
    1.49211
    """
    bent = _powers(_inverse_square_wavelength(omega), (b, c))
    return _complex(np.asarray(a, dtype=float) + bent, 0.0)


def sellmeier(
    omega: ArrayLike,
    *,
    strengths: Sequence[ArrayLike],
    resonance_wavelengths: Sequence[ArrayLike] | None = None,
    resonance_wavelengths_squared: Sequence[ArrayLike] | None = None,
) -> Array:
    """Sellmeier's formula, with resonances as wavelengths or as their squares.

    Parameters
    ----------
    omega
        Angular frequency [rad/s].
    strengths
        Strengths B_j, one by one; each broadcasts with omega [-].
    resonance_wavelengths
        Vacuum wavelengths λ_j of the resonances [m].
    resonance_wavelengths_squared
        Their squares, as many data sheets list them [m^2].

    Returns
    -------
    index
        Refractive index, principal complex root [-].

    Raises
    ------
    Refusal
        Unless exactly one list of resonances, as long as the strengths, is given.

    Notes
    -----
    n² = 1 + Σ B_j λ²/(λ² − λ_j²). Between a resonance and the zero above it n² is negative and the root
    purely imaginary; at a resonance it is infinite. Both lie outside the window of the fit, and the caller
    is to say so.

    Valid for: the window it was fitted in; its zero-frequency limit is not the static permittivity.

    References
    ----------
    W. Sellmeier, Ann. Phys. 223, 386 (1872).

    Examples
    --------
    >>> round(complex(sellmeier(0.0, strengths=[1.25], resonance_wavelengths=[1e-7])).real, 6)
    1.5
    """
    if resonance_wavelengths is not None and resonance_wavelengths_squared is None:
        squares = [np.asarray(length, dtype=float) ** 2 for length in resonance_wavelengths]
    elif resonance_wavelengths_squared is not None and resonance_wavelengths is None:
        squares = [np.asarray(square, dtype=float) for square in resonance_wavelengths_squared]
    else:
        count = "no list" if resonance_wavelengths is None else "two lists"
        raise Refusal(
            f"{count} of resonances for a sellmeier index",
            "give resonance_wavelengths or resonance_wavelengths_squared",
        )
    if len(squares) != len(strengths):
        found = f"{len(strengths)} strengths and {len(squares)} resonances"
        raise Refusal(found, "a sellmeier index pairs them one to one")
    inverse_square = _inverse_square_wavelength(omega)
    total: Array = 1.0 + _zeros(inverse_square)
    with np.errstate(divide="ignore", invalid="ignore"):
        for strength, square in zip(strengths, squares, strict=True):
            b = np.asarray(strength, dtype=float)
            share = b / (1.0 - _powers(inverse_square, (square,)))
            # a band without strength is none, even at its resonance
            total = total + (share if np.all(b) else np.where(b == 0.0, 0.0, share))
    return np.asarray(np.sqrt(_complex(total, 0.0)))[()]


def schott(omega: ArrayLike, *, coefficients: Sequence[ArrayLike]) -> Array:
    """Polynomial of n² in even powers of the wavelength, as older glass catalogues give it.

    Parameters
    ----------
    omega
        Angular frequency [rad/s].
    coefficients
        A₀ to A₅, for wavelengths in µm [-].

    Returns
    -------
    index
        Refractive index, principal complex root [-].

    Raises
    ------
    Refusal
        Unless there are six coefficients.

    Notes
    -----
    n² = A₀ + A₁λ² + A₂λ⁻² + A₃λ⁻⁴ + A₄λ⁻⁶ + A₅λ⁻⁸, λ in µm. Valid for: the window it was fitted in.

    References
    ----------
    Common form of glass catalogues.

    Examples
    --------
    >>> round(complex(schott(3e15, coefficients=[2.25, 0, 0, 0, 0, 0])).real, 6)
    1.5
    """
    a0, a1, a2, a3, a4, a5 = _counted(coefficients, 6, "schott")
    inverse = 1e-12 * _inverse_square_wavelength(omega)
    square = a0 + _powers(_reciprocal(inverse), (a1,)) + _powers(inverse, (a2, a3, a4, a5))
    return np.asarray(np.sqrt(_complex(np.asarray(square), 0.0)))[()]


def conrady(omega: ArrayLike, *, coefficients: Sequence[ArrayLike]) -> Array:
    """Conrady's formula for a few readings in the visible.

    Parameters
    ----------
    omega
        Angular frequency [rad/s].
    coefficients
        A, B and C, for wavelengths in µm [-].

    Returns
    -------
    index
        Refractive index [-].

    Raises
    ------
    Refusal
        Unless there are three coefficients.

    Notes
    -----
    n = A + B/λ + C/λ^3.5, λ in µm. Valid for: the visible, through three readings.

    References
    ----------
    A. E. Conrady, Applied Optics and Optical Design, Part II, 1960.

    Examples
    --------
    >>> round(complex(conrady(3e15, coefficients=[1.5, 0, 0])).real, 6)
    1.5
    """
    a, b, c = _counted(coefficients, 3, "conrady")
    inverse = 1e-6 * np.sqrt(_inverse_square_wavelength(omega))
    return _complex(np.asarray(a + _powers(inverse, (b, c), steps=(1.0, 2.5))), 0.0)


def herzberger(omega: ArrayLike, *, coefficients: Sequence[ArrayLike]) -> Array:
    """Herzberger's formula for infrared windows.

    Parameters
    ----------
    omega
        Angular frequency [rad/s].
    coefficients
        A to F, for wavelengths in µm [-].

    Returns
    -------
    index
        Refractive index [-].

    Raises
    ------
    Refusal
        Unless there are six coefficients.

    Notes
    -----
    n = A + BL + CL² + Dλ² + Eλ⁴ + Fλ⁶, L = 1/(λ² − 0.028), λ in µm. Valid for: the window it was fitted in.

    References
    ----------
    M. Herzberger, C. D. Salzberg, J. Opt. Soc. Am. 52, 420 (1962).

    Examples
    --------
    >>> round(complex(herzberger(3e14, coefficients=[3.4, 0, 0, 0, 0, 0])).real, 6)
    3.4
    """
    a, b, c, d, e, f = _counted(coefficients, 6, "herzberger")
    square = _reciprocal(1e-12 * _inverse_square_wavelength(omega))
    n = a + _powers(_reciprocal(square - 0.028), (b, c)) + _powers(square, (d, e, f))
    return _complex(np.asarray(n), 0.0)


def abbe(omega: ArrayLike, *, n: ArrayLike, abbe_number: ArrayLike) -> Array:
    """Index and Abbe number of a glass at the yellow helium line, as a two-term formula.

    Parameters
    ----------
    omega
        Angular frequency [rad/s].
    n
        Refractive index n_d at 587.5618 nm [-].
    abbe_number
        V_d = (n_d − 1)/(n_F − n_C) [-].

    Returns
    -------
    index
        Refractive index [-].

    Notes
    -----
    n = n_d + B (1/λ² − 1/λ_d²) with B from n_F − n_C between 486.1327 and 656.2725 nm: exact at n_d and in
    n_F − n_C, and without partial dispersion. Valid for: 430 to 700 nm, to some 1e-3.

    References
    ----------
    Definition of the Abbe number, ISO 7944.

    Examples
    --------
    >>> omega = 2 * 3.141592653589793 * 299792458.0 / 587.5618e-9
    >>> round(complex(abbe(omega, n=1.5168, abbe_number=64.17)).real, 6)
    1.5168
    """
    level, number = np.asarray(n, dtype=float), np.asarray(abbe_number, dtype=float)
    d, f, c = (1.0 / line**2 for line in (587.5618e-9, 486.1327e-9, 656.2725e-9))
    slope = (level - 1.0) / number / (f - c)
    return _complex(np.asarray(level + _powers(_inverse_square_wavelength(omega) - d, (slope,))), 0.0)


def _counted(coefficients: Sequence[ArrayLike], count: int, name: str) -> list[Array]:
    if len(coefficients) != count:
        raise Refusal(f"{len(coefficients)} coefficients", f"a {name} index takes {count}")
    return [np.asarray(item, dtype=float) for item in coefficients]


def _inverse_square_wavelength(omega: ArrayLike) -> Array:
    inverse = np.asarray(omega, dtype=float) / (2.0 * np.pi * SPEED_OF_LIGHT)
    with np.errstate(over="ignore"):
        return np.asarray(inverse * inverse)


def _zeros(x: Array) -> Array:
    """Zeros, NaN where x is: NaN in, NaN out."""
    return 0.0 * (np.where(np.isinf(x), 0.0, x) if np.isinf(x).any() else x)


def _reciprocal(x: Array) -> Array:
    with np.errstate(divide="ignore"):
        return np.asarray(1.0 / x)


def _powers(x: Array, coefficients: Sequence[ArrayLike], *, steps: Sequence[float] = ()) -> Array:
    """c₁x + c₂x² + … without a constant; at x = ∞ what its highest term gives, and 0 where there is none.

    `steps` from each power to the next, from 0 on, if they are not one.
    """
    held = [np.asarray(item, dtype=float) for item in coefficients]
    total: Array = np.zeros(())
    with np.errstate(over="ignore", invalid="ignore"):
        for c, step in zip(reversed(held), reversed(steps or [1.0] * len(held)), strict=True):
            total = (total + c) * (x if step == 1.0 else x**step)
        endless = np.isinf(x)
        if np.any(endless):
            leading: Array = np.zeros(())
            for c in held:
                leading = np.where(c == 0.0, leading, c)
            total = np.where(endless, np.where(leading == 0.0, 0.0, leading * np.inf), total)
    return np.asarray(total)


def _complex(real: Array, imaginary: ArrayLike) -> Array:
    out = np.empty(np.broadcast_shapes(np.shape(real), np.shape(imaginary)), dtype=complex)
    out.real, out.imag = real, imaginary
    return out[()]
