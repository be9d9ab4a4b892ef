"""The terms of a material in every description that a data sheet may give.

A factor of 2π, or a screened plasma frequency taken for an unscreened one, shows when all of them stand side
by side.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

import numpy as np

from mixsim.mixture.spectra import BoundTerm, TermSum
from mixsim.present.columns import table
from mixsim.recipe import parse
from mixsim.units import ELECTRON_MASS, ELEMENTARY_CHARGE, VACUUM_PERMITTIVITY, to_unit

UNITS = ("eV", "THz", "cm^-1", "nm", "rad/s")
LONG = 1e6  # nm from which a wavelength is better read in mm


def in_all_words(name: str) -> str:
    """Spectral numbers of the terms of a library material in every unit, and what follows from them.

    Parameters
    ----------
    name
        Of the material.

    Returns
    -------
    text
        Empty where the material has no terms.
    """
    mixture = parse(f'host.material = "{name}"').compile()
    parts = []
    for quantity, symbol in (("permittivity", "ε"), ("permeability", "μ")):
        spectrum = getattr(mixture.host, quantity)
        if isinstance(spectrum, TermSum) and spectrum.terms:
            parts.append(_response(spectrum, mixture.defaults, symbol))
    return "\n\n".join(parts)


def _response(spectrum: TermSum, x: Mapping[str, Any], symbol: str) -> str:
    level = float(spectrum.level(x))
    spectral, plain = [], []
    for term in spectrum.terms:
        word = _word(term)
        values = {key: float(given(x)) for key, given in term.inputs.items()}
        for key, value, is_place in _frequencies(term, values, level):
            # a width has no wavelength of its own
            shown = [_in(value, unit) if is_place or unit != "nm" else "" for unit in UNITS]
            spectral.append([word, key, *shown])
        plain += [[word, key, text] for key, text in _consequences(term, values, electric=symbol == "ε")]
    lines = [f"terms of {symbol} in every unit, {symbol}∞ = {level:.6g}"]
    if spectral:
        lines.append(table(["term", "", *UNITS], spectral, left=2))
    if plain:
        lines.append(table(["", "", ""], plain, left=3))
    return "\n".join(lines)


def _word(term: BoundTerm) -> str:
    """Name that the material gives the term, from the path of any of its numbers."""
    for path in sorted(term.paths):
        words = path.split(".")
        if "terms" in words:
            return words[words.index("terms") + 1]
    return term.term.name


def _frequencies(
    term: BoundTerm, values: Mapping[str, float], level: float
) -> Iterator[tuple[str, float, bool]]:
    """Numbers of a term that are places on the spectrum, or (third part false) widths there."""
    for key, value in values.items():
        parameter = term.term.parameters[key]
        if parameter.dimension in ("spectral", "rate") and value > 0.0:
            yield key, value, parameter.dimension == "spectral"
        if key == "plasma" and value > 0.0 and term.term.name == "drude":
            yield "screened by ε∞", value / np.sqrt(level), True
    if "relaxation_time" in values:
        yield "relaxation", 1.0 / values["relaxation_time"], True


def _consequences(
    term: BoundTerm, values: Mapping[str, float], *, electric: bool
) -> Iterator[tuple[str, str]]:
    """What else a data sheet would say of a term."""
    rate, plateau = (float(part) for part in term.term.low(**values))
    if rate == 0.0 and np.isfinite(plateau):
        yield "static step", f"{plateau:.5g}"
    elif 0.0 < rate < np.inf:
        yield "dc conductivity", f"{rate * VACUUM_PERMITTIVITY:.5g} S/m"
    if "plasma" in values and electric:
        density = values["plasma"] ** 2 * VACUUM_PERMITTIVITY * ELECTRON_MASS / ELEMENTARY_CHARGE**2
        yield "density × strength / mass", f"{density / 1e6:.4g} cm^-3"
    if term.term.name == "drude" and values["damping"] > 0.0:
        yield "collision time", f"{1e15 / values['damping']:.4g} fs"
    if "relaxation_time" in values:
        yield "relaxation time", f"{1e12 * values['relaxation_time']:.5g} ps"


def _in(value: float, unit: str) -> str:
    shown = float(to_unit(value, unit, "spectral"))
    if unit == "nm" and shown >= LONG:
        return f"{shown / 1e6:.4g} mm" if shown < 1e3 * LONG else f"{shown / 1e9:.4g} m"
    return f"{shown:.5g}"
