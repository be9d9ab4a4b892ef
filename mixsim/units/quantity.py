"""Quantities as people write them, `VALUE [unit] [± U [unit]] [(k=2)|(limits)]`, read and shown."""

from __future__ import annotations

import math
import numbers
import re
from dataclasses import dataclass
from typing import TYPE_CHECKING, Final, overload

from mixsim.errors import Refusal
from mixsim.units.dimensions import (
    DIMENSIONS,
    Dimension,
    Unit,
    dimension_named,
    find_unit,
    unit_named,
    wrong_unit,
)

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

_NUMBER: Final = re.compile(r"[+-]?(?:[0-9]+\.?[0-9]*|\.[0-9]+)(?:[eE][+-]?[0-9]+)?")
_TRAILER: Final = re.compile(r"\(([^()]*)\)$")
_COVERAGE: Final = re.compile(r"k\s*=\s*(\S+)")
_QUALIFIERS: Final = "± U may be followed by (k=2) or (limits)"
_RELATIVE: Final = ("%", "ppm")


@dataclass(frozen=True, slots=True)
class Leaf:
    """One number of a recipe.

    Attributes
    ----------
    value
        Value in the SI unit of the dimension.
    std
        One standard uncertainty in the same unit, or None where none was stated.
    dimension
        Name of the dimension.
    written
        The text (or number) as it stood in the recipe.
    """

    value: float
    std: float | None
    dimension: str
    written: str

    @property
    def rectangular(self) -> bool:
        """Whether ± was given as limits, none of the values between likelier than another."""
        return self.std is not None and re.search(r"\(\s*limits\s*\)\s*$", self.written) is not None


def read(written: str | int | float, dimension: str) -> Leaf:
    """Leaf of a quantity as written in a recipe.

    Parameters
    ----------
    written
        Text such as `"1.868 ± 0.003 g/cm^3"`, or a number where the dimension accepts a bare one.
    dimension
        Name of the dimension that belongs in this place.

    Returns
    -------
    Leaf
        Value and standard uncertainty in SI units. A rate that is written in a wavelength unit has the
        dimension "wavelength width".

    Raises
    ------
    Refusal
        Where the text is no such quantity: malformed, not finite, or in a unit that does not belong.

    Notes
    -----
    U is one standard uncertainty; `(k=K)` divides it by K and `(limits)` by √3 (half-width of a rectangular
    distribution). One unit serves both numbers, or each has its own. To first order, ω = 2πc/λ gives
    u(ω) = ω u(λ)/λ.

    Examples
    --------
    >>> read("4.0 % ± 0.2 %", "fraction")
    Leaf(value=0.04, std=0.002, dimension='fraction', written='4.0 % ± 0.2 %')
    """
    wanted = dimension_named(dimension)
    if isinstance(written, str):
        return _read_text(written, wanted)
    if isinstance(written, bool) or not isinstance(written, numbers.Real):
        raise Refusal(
            f"{_clip(repr(written))} is not a quantity", f"{wanted.said} is written like {wanted.example!r}"
        )
    try:
        value = float(written)
    except OverflowError:
        value = math.inf
    if not math.isfinite(value):
        raise Refusal(f"{_clip(str(written))} is not a finite number", wanted.takes())
    if not wanted.bare:
        raise _no_unit(str(written), wanted)
    return Leaf(value, None, wanted.name, str(written))


def written_unit(leaf: Leaf) -> str:
    """Unit in which a leaf was written, in mixsim's spelling; empty for a bare number.

    Examples
    --------
    >>> written_unit(read("1.55 um", "spectral"))
    'µm'
    """
    text, _ = _split_qualifier(_plain(leaf.written))
    for part in text.split("±"):
        match = _NUMBER.match(part.strip())
        unit = part.strip()[match.end() :].strip() if match else ""
        if unit:
            return unit_named(unit, dimension_named(leaf.dimension)).symbol
    return ""


def show(value: float, dimension: str, unit: str | None = None, std: float | None = None) -> str:
    """Text of an SI value for people, which `read` understands.

    Parameters
    ----------
    value
        Value [SI unit of the dimension].
    dimension
        Name of the dimension.
    unit
        Accepted unit to show it in; a customary one where none is given.
    std
        Standard uncertainty [SI unit of the dimension].

    Returns
    -------
    str
        Six significant digits; or, with an uncertainty, that to two significant digits and the value to
        the same place. A second digit that is zero in both is left out.

    Raises
    ------
    Refusal
        Where the dimension does not accept the unit.

    Examples
    --------
    >>> show(0.04, "fraction", "%", std=0.002)
    '4.0 ± 0.2 %'
    >>> show(2.2e-8, "length")
    '22 nm'
    """
    wanted = dimension_named(dimension)
    chosen = unit_named(unit, wanted) if unit else _customary(value, wanted)
    if chosen is None:
        return _digits(value, std)
    # An infinite wavelength (ω = 0) has no first-order uncertainty.
    spread = None if std is None or (chosen.reciprocal and value == 0) else chosen.std_from_si(std, value)
    number = _digits(to_unit(value, chosen.symbol, dimension), spread)
    return f"{number} {chosen.symbol}"


@overload
def to_unit(value: float, unit: str, dimension: str) -> float: ...
@overload
def to_unit(value: NDArray[np.float64], unit: str, dimension: str) -> NDArray[np.float64]: ...
def to_unit(value: float | NDArray[np.float64], unit: str, dimension: str) -> float | NDArray[np.float64]:
    """Value in a unit of SI values, float or array; ω = 0 has an infinite wavelength.

    Examples
    --------
    >>> to_unit(1180.0, "g/cm^3", "density")
    1.18
    """
    chosen = unit_named(unit, dimension_named(dimension))
    if isinstance(value, numbers.Real):
        plain = float(value)
        return math.inf if chosen.reciprocal and plain == 0 else chosen.from_si(plain)
    import numpy as np

    with np.errstate(divide="ignore"):
        return chosen.from_si(np.asarray(value, dtype=np.float64))


@overload
def from_unit(value: float, unit: str, dimension: str) -> float: ...
@overload
def from_unit(value: NDArray[np.float64], unit: str, dimension: str) -> NDArray[np.float64]: ...
def from_unit(value: float | NDArray[np.float64], unit: str, dimension: str) -> float | NDArray[np.float64]:
    """SI values, float or array, of values in a unit; a wavelength of zero has an infinite ω.

    Examples
    --------
    >>> from_unit(22.0, "nm", "length")
    2.2e-08
    """
    chosen = unit_named(unit, dimension_named(dimension))
    if isinstance(value, numbers.Real):
        plain = float(value)
        return math.inf if chosen.reciprocal and plain == 0 else chosen.to_si(plain)
    import numpy as np

    with np.errstate(divide="ignore"):
        return chosen.to_si(np.asarray(value, dtype=np.float64))


@overload
def spectral_to(value: float, unit: str) -> float: ...
@overload
def spectral_to(value: NDArray[np.float64], unit: str) -> NDArray[np.float64]: ...
def spectral_to(value: float | NDArray[np.float64], unit: str) -> float | NDArray[np.float64]:
    """Angular frequency in rad/s, float or array, converted to any spectral unit.

    Examples
    --------
    >>> round(spectral_to(1.2153e15, "nm"))
    1550
    """
    return to_unit(value, unit, "spectral")


@overload
def spectral_from(value: float, unit: str) -> float: ...
@overload
def spectral_from(value: NDArray[np.float64], unit: str) -> NDArray[np.float64]: ...
def spectral_from(value: float | NDArray[np.float64], unit: str) -> float | NDArray[np.float64]:
    """Angular frequency in rad/s of a float or array in any spectral unit.

    Examples
    --------
    >>> f"{spectral_from(1.0, 'eV'):.4e}"
    '1.5193e+15'
    """
    return from_unit(value, unit, "spectral")


def kind_of_axis(unit: str) -> str:
    """What a spectral axis in a unit shows, for its label.

    Examples
    --------
    >>> kind_of_axis("nm")
    'vacuum wavelength'
    """
    return unit_named(unit, DIMENSIONS["spectral"]).kind


def _read_text(written: str, wanted: Dimension) -> Leaf:
    text, shrink = _split_qualifier(_plain(written))
    if not text:
        raise Refusal("empty text", f"{wanted.said} is written like {wanted.example!r}")
    value_text, *rest = text.split("±")
    if len(rest) > 1:
        raise Refusal(f"more than one ± in {_quote(written)}", "one uncertainty per value")
    value, unit_text = _split_number(value_text, written, wanted)
    spread, spread_unit_text = _split_number(rest[0], written, wanted, "uncertainty") if rest else (None, "")
    if spread is not None and spread < 0:
        raise Refusal(f"negative uncertainty in {_quote(written)}", "± takes zero or a positive number")
    if spread is None and shrink is not None:
        raise Refusal(f"no ± before the parenthesis of {_quote(written)}", _QUALIFIERS)
    if (
        wanted.name != "fraction"
        and spread_unit_text.startswith(_RELATIVE)
        and find_unit(spread_unit_text, wanted) is None
    ):
        raise Refusal(
            f"relative uncertainty in {_quote(written)}",
            "give ± in the unit of the value; % is understood for fractions only",
        )

    name = unit_text or spread_unit_text
    if not name:
        if not wanted.bare:
            raise _no_unit(_quote(written), wanted)
        return Leaf(value, None if spread is None else spread / (shrink or 1.0), wanted.name, str(written))
    unit = find_unit(name, wanted)
    if unit is None and wanted.name == "rate":
        unit = find_unit(name, DIMENSIONS["wavelength width"])
        wanted = DIMENSIONS["wavelength width"] if unit else wanted
    if unit is None:
        raise wrong_unit(name, wanted, _quote(written))
    if unit.reciprocal and value * unit.factor / unit.per == 0:
        raise Refusal(f"zero wavelength {_quote(written)}", "a vacuum wavelength must not be zero")
    si = unit.to_si(value)
    std = None
    if spread is not None:
        spread_unit = find_unit(spread_unit_text, wanted) if spread_unit_text else unit
        if spread_unit is None:
            other = {"rate": "wavelength width", "wavelength width": "rate"}.get(wanted.name)
            if other and find_unit(spread_unit_text, DIMENSIONS[other]):
                raise Refusal(
                    f"a rate and a width in wavelength mixed in {_quote(written)}",
                    "give ± in the unit of the value",
                )
            raise wrong_unit(spread_unit_text, wanted, _quote(written))
        if spread_unit.reciprocal and si == 0:
            raise Refusal(
                f"uncertainty in wavelength about zero in {_quote(written)}",
                "give ± in a frequency, energy or wavenumber unit",
            )
        std = spread_unit.std_to_si(spread / (shrink or 1.0), si)
    if not math.isfinite(si) or (std is not None and not math.isfinite(std)):
        raise _too_large(written)
    return Leaf(si, std, wanted.name, str(written))


def _split_qualifier(text: str) -> tuple[str, float | None]:
    """Text without its trailing (k=K) or (limits), and what the uncertainty has to be divided by."""
    match = _TRAILER.search(text)
    if match is None or text[: match.start()].rstrip().endswith("/"):  # …/(V s) belongs to a unit
        return text, None
    content = match[1].strip()
    if content == "limits":
        return text[: match.start()].rstrip(), math.sqrt(3)
    coverage = _COVERAGE.fullmatch(content)
    if coverage is None:
        lowered = content.lower()
        suggestion = f"({lowered})" if lowered == "limits" or _COVERAGE.fullmatch(lowered) else None
        raise Refusal(f"{match[0]!r} in {_quote(text)}", _QUALIFIERS, suggestion)
    factor = float(coverage[1]) if _NUMBER.fullmatch(coverage[1]) else math.nan
    if not 0 < factor < math.inf:
        raise Refusal(f"coverage factor {coverage[1]!r} in {_quote(text)}", "k takes a positive number")
    return text[: match.start()].rstrip(), factor


def _split_number(part: str, written: str, wanted: Dimension, what: str = "value") -> tuple[float, str]:
    """Number at the start of a part of the text, and the unit that follows it."""
    part = part.strip()
    like = f"{wanted.said} is written like {wanted.example!r}"
    if not part:
        side = "before" if what == "value" else "after"
        raise Refusal(f"no {what} {side} ± in {_quote(written)}", like)
    match = _NUMBER.match(part)
    if match is None:
        raise Refusal(f"{_quote(part)} is not a number", like)
    unit = part[match.end() :]
    if re.match(r"[.,][0-9]", unit):
        raise Refusal(f"{_quote(part)} is not a number", "one decimal point and no comma")
    unit = unit.strip()
    if re.match(r"[0-9]", unit) and not unit.startswith("1/"):
        raise Refusal(f"{_quote(part)} is not a number", "digits without blanks between them")
    if unit.startswith(("+-", "+ -", "-+")):
        raise Refusal(f"{unit[:2]!r} in {_quote(written)}", "an uncertainty follows ± or +/-", "+/-")
    number = float(match[0])
    if not math.isfinite(number):
        raise _too_large(written)
    return number, unit


def _plain(written: str) -> str:
    """Text with the plain forms of ± and minus, and single blanks."""
    text = written.replace("+/-", "±").replace("\N{MINUS SIGN}", "-")
    return " ".join(text.split())


def _no_unit(written: str, wanted: Dimension) -> Refusal:
    return Refusal(f"no unit in {_clip(written)}", wanted.takes())


def _too_large(written: str) -> Refusal:
    return Refusal(f"{_quote(written)} is too large for a finite number", "check the exponent")


def _quote(text: str) -> str:
    return _clip(repr(str(text)))


def _clip(text: str) -> str:
    return text if len(text) <= 60 else f"{text[:56]}…{text[-1]}"


def _customary(value: float, wanted: Dimension) -> Unit | None:
    """Largest customary unit in which the value is at least one, else the smallest."""
    choices = [unit_named(symbol, wanted) for symbol in wanted.shown]
    if not choices:
        return None
    fitting = [unit for unit in choices if abs(unit.from_si(value)) >= 1 - 1e-9]
    if fitting:
        return fitting[-1]
    return choices[len(choices) - 1 if value == 0 else 0]


def _digits(value: float, std: float | None) -> str:
    if std is None or not math.isfinite(value) or not math.isfinite(std) or std == 0:
        number = _exponent(f"{value:.6g}")
        return number if std is None else f"{number} ± {_exponent(f'{std:.6g}')}"
    size = max(abs(value), abs(std))
    # Past these sizes both numbers share one power of ten, so that their places can be compared.
    shift = math.floor(math.log10(size)) if size >= 1e6 or size < 1e-4 else 0
    tail = f"e{shift}" if shift else ""
    value, std = _shifted(value, shift), _shifted(std, shift)
    places = 1 - int(f"{std:.1e}".partition("e")[2])
    first = f"{round(value, places):.{max(places, 0)}f}"
    second = f"{round(std, places):.{max(places, 0)}f}"
    if places > 0 and first.endswith("0") and second.endswith("0"):
        first, second = first[:-1].rstrip("."), second[:-1].rstrip(".")
    return f"{first}{tail} ± {second}{tail}"


def _shifted(value: float, shift: int) -> float:
    """Value over a power of ten, without passing through one that floats cannot hold."""
    return value / 10.0**shift if shift > 0 else value * 10.0 ** min(-shift, 300)


def _exponent(number: str) -> str:
    """2e+19 as 2e19, 4e-05 as 4e-5."""
    return re.sub(r"e([+-])0*(\d)", lambda m: "e" + m[1].replace("+", "") + m[2], number)
