"""The dimensions that a leaf of a recipe can have, and the units that each accepts."""

from __future__ import annotations

import functools
import math
import re
import unicodedata
from collections.abc import Mapping
from dataclasses import dataclass
from types import MappingProxyType
from typing import TYPE_CHECKING, Final, TypeVar

from mixsim.errors import Refusal, nearest
from mixsim.units.constants import ELEMENTARY_CHARGE, REDUCED_PLANCK, SPEED_OF_LIGHT

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    Numbers = TypeVar("Numbers", float, NDArray[np.float64])
else:
    Numbers = TypeVar("Numbers")

_TURN: Final = 2 * math.pi


@dataclass(frozen=True, slots=True)
class Unit:
    """One accepted unit: SI value = value × factor / per + offset, or 2πc over that for a wavelength.

    Factor and divisor are kept apart because powers of ten are exact in binary only when they are
    not fractions: 22 / 1e9 is the float nearest to 22e-9, 22 * 1e-9 is not.

    Attributes
    ----------
    symbol
        Spelling that mixsim prints.
    factor, per
        Numerator and denominator of the conversion to SI.
    offset
        SI value of zero in this unit (degrees Celsius); not applied to differences.
    reciprocal
        True for a vacuum wavelength on the spectral axis.
    aliases
        Other accepted spellings.
    kind
        What an axis in this unit shows, for labels.
    """

    symbol: str
    factor: float = 1.0
    per: float = 1.0
    offset: float = 0.0
    reciprocal: bool = False
    aliases: tuple[str, ...] = ()
    kind: str = ""

    def to_si(self, value: Numbers) -> Numbers:
        """SI value of a value in this unit."""
        scaled = value * self.factor / self.per
        return _TURN * SPEED_OF_LIGHT / scaled if self.reciprocal else scaled + self.offset

    def from_si(self, value: Numbers) -> Numbers:
        """Value in this unit of an SI value."""
        scaled = _TURN * SPEED_OF_LIGHT / value if self.reciprocal else value - self.offset
        return scaled * self.per / self.factor

    def std_to_si(self, std: float, at: float) -> float:
        """SI standard uncertainty, to first order, of one in this unit about the SI value `at`."""
        scaled = std * self.factor / self.per
        return scaled * at / (_TURN * SPEED_OF_LIGHT) * at if self.reciprocal else scaled

    def std_from_si(self, std: float, at: float) -> float:
        """Standard uncertainty in this unit, to first order, of an SI one about the SI value `at`."""
        scaled = std / at * (_TURN * SPEED_OF_LIGHT) / at if self.reciprocal else std
        return scaled * self.per / self.factor


@dataclass(frozen=True, slots=True)
class Dimension:
    """What a number measures.

    Attributes
    ----------
    name
        Name by which the code refers to it.
    si
        SI unit of the stored value; empty for a dimensionless one.
    said
        The same in a message, with its article.
    example
        A quantity as it may be written.
    units
        Accepted units, in the order in which messages list them.
    bare
        Whether a number without a unit is accepted.
    shown
        Symbols, smallest first, among which `show` picks where the caller names no unit.
    also
        What else may be written in this place, to end the message with.
    """

    name: str
    si: str
    said: str
    example: str
    units: tuple[Unit, ...]
    bare: bool = False
    shown: tuple[str, ...] = ()
    also: str = ""

    @property
    def symbols(self) -> tuple[str, ...]:
        """Preferred spellings of the accepted units."""
        return tuple(unit.symbol for unit in self.units)

    def takes(self) -> str:
        """The accepted units as half a sentence."""
        names = ", ".join(self.symbols)
        if self.bare:
            names = f"a bare number or {names}" if names else "no unit"
        return f"{self.said} takes {names}" + (f", {self.also}" if self.also else "")


_WAVELENGTHS: Final = (
    Unit("nm", per=1e9, reciprocal=True, kind="vacuum wavelength"),
    Unit("µm", per=1e6, reciprocal=True, kind="vacuum wavelength"),
    Unit("mm", per=1e3, reciprocal=True, kind="vacuum wavelength"),
    Unit("m", reciprocal=True, kind="vacuum wavelength"),
)
_LINEAR_SPECTRAL: Final = (
    *(
        Unit(f"{prefix}Hz", _TURN * power, kind="frequency")
        for prefix, power in (("", 1.0), ("k", 1e3), ("M", 1e6), ("G", 1e9), ("T", 1e12), ("P", 1e15))
    ),
    Unit("eV", ELEMENTARY_CHARGE, REDUCED_PLANCK, kind="photon energy"),
    Unit("meV", ELEMENTARY_CHARGE, 1e3 * REDUCED_PLANCK, kind="photon energy"),
    Unit("keV", 1e3 * ELEMENTARY_CHARGE, REDUCED_PLANCK, kind="photon energy"),
    Unit("cm^-1", 100 * _TURN * SPEED_OF_LIGHT, aliases=("1/cm",), kind="wavenumber"),
    Unit("rad/s", kind="angular frequency"),
    Unit("Grad/s", 1e9, kind="angular frequency"),
    Unit("Trad/s", 1e12, kind="angular frequency"),
    Unit("s^-1", aliases=("1/s",), kind="angular frequency"),
)
_HERTZ: Final = ("Hz", "kHz", "MHz", "GHz", "THz", "PHz")

_ALL: Final = (
    Dimension("number", "", "a plain number", "4.0", (), bare=True),
    Dimension(
        "fraction",
        "",
        "a fraction",
        "4.0 %",
        (Unit("%", per=100.0), Unit("ppm", per=1e6)),
        bare=True,
        shown=("%",),
    ),
    Dimension(
        "length",
        "m",
        "a length",
        "22 nm",
        (Unit("nm", per=1e9), Unit("µm", per=1e6), Unit("mm", per=1e3), Unit("cm", per=100.0), Unit("m")),
        shown=("nm", "µm", "mm", "m"),
    ),
    Dimension(
        "spectral",
        "rad/s",
        "a place on the spectral axis",
        "1550 nm",
        (*_LINEAR_SPECTRAL, *_WAVELENGTHS),
        shown=_HERTZ,
    ),
    Dimension(
        "rate",
        "rad/s",
        "a rate or width",
        "0.12 eV",
        _LINEAR_SPECTRAL,
        shown=_HERTZ,
        also="or nm, µm, mm, m for a width in wavelength",
    ),
    Dimension(
        "wavelength width",
        "m",
        "a width in wavelength",
        "40 nm",
        (Unit("nm", per=1e9), Unit("µm", per=1e6), Unit("mm", per=1e3), Unit("m")),
        shown=("nm", "µm", "mm", "m"),
    ),
    Dimension(
        "area",
        "m^2",
        "an area",
        "0.0049 µm^2",
        (Unit("nm^2", per=1e18), Unit("µm^2", per=1e12), Unit("mm^2", per=1e6), Unit("m^2")),
        shown=("µm^2",),
    ),
    Dimension(
        "fourth power of length",
        "m^4",
        "a fourth power of a length",
        "1.2e-4 µm^4",
        (Unit("nm^4", per=1e36), Unit("µm^4", per=1e24)),
        shown=("µm^4",),
    ),
    Dimension(
        "time",
        "s",
        "a time",
        "8.3 ps",
        (
            Unit("s"),
            Unit("ms", per=1e3),
            Unit("µs", per=1e6),
            Unit("ns", per=1e9),
            Unit("ps", per=1e12),
            Unit("fs", per=1e15),
        ),
        shown=("fs", "ps", "ns", "µs", "ms", "s"),
    ),
    Dimension(
        "density",
        "kg/m^3",
        "a density",
        "1.18 g/cm^3",
        (
            Unit("g/cm^3", 1e3),
            Unit("kg/m^3"),
            Unit("g/mL", 1e3, aliases=("g/ml",)),
            Unit("mg/cm^3"),
            Unit("kg/L", 1e3, aliases=("kg/l",)),
        ),
        shown=("g/cm^3",),
    ),
    Dimension(
        "number density",
        "m^-3",
        "a number density",
        "2.0e19 cm^-3",
        (
            Unit("cm^-3", 1e6, aliases=("1/cm^3",)),
            Unit("m^-3", aliases=("1/m^3",)),
            Unit("nm^-3", 1e27, aliases=("1/nm^3",)),
        ),
        shown=("cm^-3",),
    ),
    Dimension(
        "molar mass",
        "kg/mol",
        "a molar mass",
        "60.08 g/mol",
        (Unit("g/mol", per=1e3), Unit("kg/mol")),
        shown=("g/mol",),
    ),
    Dimension(
        "conductivity",
        "S/m",
        "a conductivity",
        "0.5 S/m",
        (Unit("S/m"), Unit("S/cm", 100.0), Unit("mS/m", per=1e3), Unit("µS/cm", per=1e4)),
        shown=("S/m",),
    ),
    Dimension(
        "mobility",
        "m^2/V/s",
        "a mobility",
        "30 cm^2/V/s",
        (
            Unit("cm^2/V/s", per=1e4, aliases=("cm^2/(V s)", "cm^2 V^-1 s^-1")),
            Unit("m^2/V/s", aliases=("m^2/(V s)", "m^2 V^-1 s^-1")),
        ),
        shown=("cm^2/V/s",),
    ),
    Dimension(
        "velocity",
        "m/s",
        "a velocity",
        "1.4e6 m/s",
        (Unit("m/s"), Unit("km/s", 1e3), Unit("cm/s", per=1e2)),
        shown=("m/s",),
    ),
    Dimension("electron masses", "", "a mass in electron masses", "0.35", (), bare=True),
    Dimension(
        "temperature",
        "K",
        "a temperature",
        "20 °C",
        (Unit("K"), Unit("°C", offset=273.15, aliases=("degC",))),
        shown=("K",),
    ),
    Dimension(
        "temperature coefficient",
        "1/K",
        "a change per kelvin",
        "110 ppm/K",
        (
            Unit("1/K", aliases=("K^-1", "1/°C", "°C^-1")),
            Unit("ppm/K", per=1e6, aliases=("ppm/°C",)),
            Unit("%/K", per=1e2, aliases=("%/°C",)),
        ),
        shown=("ppm/K",),
    ),
    Dimension(
        "absorption",
        "1/m",
        "an absorption coefficient, base e",
        "10 1/cm",
        (Unit("1/m", aliases=("m^-1",)), Unit("1/cm", 1e2, aliases=("cm^-1",)), Unit("1/mm", 1e3)),
        shown=("1/cm",),
    ),
    Dimension(
        "mass",
        "kg",
        "a mass",
        "250 g",
        (Unit("kg"), Unit("g", per=1e3), Unit("mg", per=1e6), Unit("t", 1e3)),
        shown=("mg", "g", "kg"),
    ),
    Dimension(
        "volume",
        "m^3",
        "a volume",
        "40 cm^3",
        (
            Unit("m^3"),
            Unit("L", per=1e3, aliases=("l",)),
            Unit("cm^3", per=1e6, aliases=("mL", "ml")),
            Unit("mm^3", per=1e9),
        ),
        shown=("cm^3", "L"),
    ),
    Dimension(
        "surface",
        "m^2",
        "a surface",
        "1 m^2",
        (Unit("m^2"), Unit("cm^2", per=1e4), Unit("mm^2", per=1e6)),
        shown=("cm^2", "m^2"),
    ),
    Dimension(
        "angle",
        "rad",
        "an angle",
        "45 deg",
        (Unit("deg", math.pi, 180.0, aliases=("°",)), Unit("rad")),
        shown=("deg",),
    ),
)

DIMENSIONS: Final[Mapping[str, Dimension]] = MappingProxyType({entry.name: entry for entry in _ALL})
"""Every dimension by its name."""


def dimension_named(name: str) -> Dimension:
    """Dimension of a name that the code (never a recipe) gives.

    Examples
    --------
    >>> dimension_named("density").si
    'kg/m^3'
    """
    try:
        return DIMENSIONS[name]
    except KeyError:
        raise LookupError(f"no dimension {name!r}; known: {', '.join(DIMENSIONS)}") from None


def accepted_units(dimension: str) -> tuple[str, ...]:
    """Preferred spellings of the units that a dimension accepts; a rate also takes widths in wavelength.

    Examples
    --------
    >>> accepted_units("molar mass")
    ('g/mol', 'kg/mol')
    """
    symbols = dimension_named(dimension).symbols
    return symbols + DIMENSIONS["wavelength width"].symbols if dimension == "rate" else symbols


def find_unit(spelling: str, dimension: Dimension) -> Unit | None:
    """Unit of a spelling, or None where the dimension does not accept it.

    Examples
    --------
    >>> find_unit("um", DIMENSIONS["length"]).symbol
    'µm'
    >>> find_unit("cm⁻¹", DIMENSIONS["spectral"]).symbol
    'cm^-1'
    """
    return _spellings(dimension).get(_canonical(spelling))


def unit_named(spelling: str, dimension: Dimension) -> Unit:
    """Unit of a spelling; raises Refusal, with what is accepted, where there is none."""
    unit = find_unit(spelling, dimension)
    if unit is None:
        raise wrong_unit(spelling, dimension)
    return unit


def wrong_unit(spelling: str, dimension: Dimension, written: str | None = None) -> Refusal:
    """Refusal of a unit, naming the dimension that it belongs to, what is accepted and the nearest one."""
    home = next((entry.said for entry in _ALL if find_unit(spelling, entry)), None)
    shortened = spelling if len(spelling) <= 30 else f"{spelling[:29]}…"
    found = f"unit {shortened!r}" + (f" (for {home})" if home else "")
    if written is not None:
        found += f" in {written}"
    return Refusal(found, dimension.takes(), _suggest(spelling, dimension))


def _suggest(spelling: str, dimension: Dimension) -> str | None:
    """Unit that differs in case, in the order of letters or by a forgotten ^-1, else the nearest spelling."""
    key = _canonical(spelling)
    known = dict(_spellings(dimension))
    if dimension.name == "rate":
        known |= _spellings(DIMENSIONS["wavelength width"])
    for other, unit in known.items():
        if other.lower() == key.lower():
            return unit.symbol
    turned = [unit.symbol for other, unit in known.items() if sorted(other) == sorted(key)]
    if len(turned) == 1:
        return turned[0]
    if f"{key}-1" in known:
        return known[f"{key}-1"].symbol
    close = nearest(key, known)
    return known[close].symbol if close else None


@functools.cache
def _spellings(dimension: Dimension) -> Mapping[str, Unit]:
    return {_canonical(name): unit for unit in dimension.units for name in (unit.symbol, *unit.aliases)}


def _canonical(spelling: str) -> str:
    """One form for all spellings of a unit: plain digits for superscripts, u for µ, no ^, no idle blanks."""
    text = unicodedata.normalize("NFKC", spelling).replace("\N{MINUS SIGN}", "-")
    text = text.replace("\N{GREEK SMALL LETTER MU}", "u")
    text = re.sub(r"\^(?=-?\d)", "", re.sub(r"[·⋅]", " ", text))
    return re.sub(r" ?([/()]) ?", r"\1", " ".join(text.split()))
