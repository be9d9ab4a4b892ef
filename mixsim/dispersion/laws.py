"""The register of laws: substances whose permittivity is known at every temperature.

A new law is three pure functions of the temperature, their tests and one entry of `LAWS`.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Any

from mixsim.dispersion.water import (
    water,
    water_level,
    water_static,
    water_terahertz,
    water_terahertz_level,
    water_terahertz_static,
)


@dataclass(frozen=True, slots=True)
class Law:
    """One substance.

    Attributes
    ----------
    name
        Word in the recipe.
    function
        ``function(omega, temperature=…)``: complex permittivity.
    static, high
        ``(temperature=…)``: its limits.
    summary, equation, source
        What a person wants to know of it, as text.
    """

    name: str
    function: Callable[..., Any]
    static: Callable[..., Any]
    high: Callable[..., Any]
    summary: str
    equation: str
    source: str


LAWS: Mapping[str, Law] = {
    law.name: law
    for law in (
        Law(
            name="water",
            function=water,
            static=water_static,
            high=water_level,
            summary="liquid water, 0 to 60 °C, from dc to some 60 GHz",
            equation="ε∞(T) + (ε_s(T) − ε∞(T))/(1 − iωτ(T)), ε_s of the release R8-97",
            source="IAPWS R8-97; G. S. Kell, J. Chem. Eng. Data 20, 97 (1975); U. Kaatze, J. Chem. Eng. "
            "Data 34, 371 (1989), from memory",
        ),
        Law(
            name="water-terahertz",
            function=water_terahertz,
            static=water_terahertz_static,
            high=water_terahertz_level,
            summary="liquid water, 0 to 40 °C, from dc to 1 THz",
            equation="ε₂ + (ε_s(T) − ε₁(T))/(1 − if/f₁(T)) + (ε₁(T) − ε₂)/(1 − if/f₂(T))",
            source="Recommendation ITU-R P.840-7; after H. J. Liebe, G. A. Hufford, T. Manabe, Int. J. "
            "Infrared Millim. Waves 12, 659 (1991)",
        ),
    )
}
