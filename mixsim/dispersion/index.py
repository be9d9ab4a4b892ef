"""Index models: complex refractive index as a function of angular frequency, and their register.

A new index model is one function, its test and one entry of `INDEX_MODELS`.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from mixsim.dispersion.registry import Parameter, by_name, not_negative, positive
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
    # 0·ω rather than a filled array: NaN in, NaN out.
    level = np.asarray(n, dtype=float) + 0.0 * np.asarray(omega, dtype=float)
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
    square = _inverse_square_wavelength(omega)
    fourth = np.asarray(c, dtype=float) * square
    return _complex(np.asarray(a, dtype=float) + (np.asarray(b, dtype=float) + fourth) * square, 0.0)


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
    total: Array = 1.0 + 0.0 * inverse_square
    with np.errstate(divide="ignore"):
        for strength, square in zip(strengths, squares, strict=True):
            total = total + np.asarray(strength, dtype=float) / (1.0 - square * inverse_square)
    return np.asarray(np.sqrt(_complex(total, 0.0)))[()]


def _inverse_square_wavelength(omega: ArrayLike) -> Array:
    inverse = np.asarray(omega, dtype=float) / (2.0 * np.pi * SPEED_OF_LIGHT)
    return np.asarray(inverse * inverse)


def _complex(real: Array, imaginary: ArrayLike) -> Array:
    out = np.empty(np.broadcast_shapes(np.shape(real), np.shape(imaginary)), dtype=complex)
    out.real, out.imag = real, imaginary
    return out[()]


@dataclass(frozen=True, slots=True)
class IndexModel:
    """One registered index model.

    Attributes
    ----------
    name
        Word in the recipe.
    function
        ``function(omega, **parameters)``: complex refractive index.
    parameters
        Every parameter that a recipe may write, by name.
    one_of
        Parameters of which exactly one must be given.
    constant
        Whether its square is its limit both at ω → 0 and at ω → ∞; the others have no limits.
    summary, equation, source
        What a person wants to know of it, as text.
    """

    name: str
    function: Callable[..., Any]
    parameters: Mapping[str, Parameter]
    summary: str
    equation: str
    source: str
    one_of: tuple[str, ...] = ()
    constant: bool = False

    @property
    def required(self) -> tuple[str, ...]:
        """Parameters that must always be given."""
        return tuple(
            p.name for p in self.parameters.values() if p.default is None and p.name not in self.one_of
        )

    @property
    def lists(self) -> tuple[str, ...]:
        """Parameters that take a list."""
        return tuple(p.name for p in self.parameters.values() if p.is_list)


_RESONANCES = ("resonance_wavelengths", "resonance_wavelengths_squared")

INDEX_MODELS: Mapping[str, IndexModel] = {
    model.name: model
    for model in (
        IndexModel(
            name="constant",
            function=constant,
            parameters=by_name(
                positive("n", "number", "refractive index"),
                not_negative("k", "number", "extinction coefficient", default=0.0),
            ),
            summary="one index at every frequency",
            equation="n + ik",
            source="common practice",
            constant=True,
        ),
        IndexModel(
            name="cauchy",
            function=cauchy,
            parameters=by_name(
                positive("a", "number", "index at long wavelengths"),
                Parameter("b", "area", None, False, 0.0, "coefficient of 1/λ²"),
                Parameter("c", "fourth power of length", None, False, 0.0, "coefficient of 1/λ⁴"),
            ),
            summary="power series in 1/λ² for a clear window",
            equation="n = a + b/λ² + c/λ⁴",
            source="A. L. Cauchy, Mémoire sur la dispersion de la lumière, 1836",
        ),
        IndexModel(
            name="sellmeier",
            function=sellmeier,
            parameters=by_name(
                Parameter("strengths", "number", None, False, None, "strengths B_j", is_list=True),
                Parameter(
                    _RESONANCES[0], "length", 0.0, False, None, "resonance wavelengths λ_j", is_list=True
                ),
                Parameter(_RESONANCES[1], "area", 0.0, False, None, "their squares λ_j²", is_list=True),
            ),
            one_of=_RESONANCES,
            summary="loss-free resonances on either side of a clear window",
            equation="n² = 1 + Σ B_j λ²/(λ² − λ_j²)",
            source="W. Sellmeier, Ann. Phys. 223, 386 (1872)",
        ),
    )
}
