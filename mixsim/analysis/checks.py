"""What must hold of any spectrum, measured or modelled: no gain, Kramers–Kronig, clear windows."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any, Literal

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.plain import complex_parts, plain
from mixsim.dispersion import Completion, complete
from mixsim.units import kind_of_axis, show

Verdict = Literal["passed", "failed", "not applicable", "could not tell"]

ROUNDING = 1e-12  # of |ε|: a gain or a fall below it is rounding
CLEAR = 1e-9  # of |ε|: a loss below it is none
FEWEST = 8  # rows below which nothing can be said of noise
SIGMAS = 3.0  # of the misfit that noise and coarse rows let expect
TOLERANCE = 0.01  # of 1 + |ε|: how well two sources of good data agree anyway
JUMP = 0.25  # of 1 + |ε|: change of ε′ between two rows that leaves what lies between them open
EXTREME = 4.5  # standard deviations that one of some hundred noisy rows may lie off
_MEDIAN_OF_NORMAL = 0.6745  # of its size, in standard deviations
_SYMBOL = {"permittivity": "ε", "permeability": "μ"}


@dataclass(frozen=True)
class Finding:
    """One thing looked at.

    Attributes
    ----------
    name
        What was looked at, such as "passivity".
    of
        Material, table or mixture.
    verdict
        "passed", "failed", "not applicable" or "could not tell".
    numbers
        What was found, by names that end in their SI unit where there is one.
    why
        The verdict in a sentence or two.
    """

    name: str
    of: str
    verdict: Verdict
    numbers: Mapping[str, float]
    why: str

    def to_dict(self) -> dict[str, Any]:
        """As JSON holds it."""
        numbers = {name: plain(value) for name, value in self.numbers.items()}
        return {
            "name": self.name,
            "of": self.of,
            "verdict": self.verdict,
            "numbers": numbers,
            "why": self.why,
        }


@dataclass(frozen=True, eq=False)
class Subject:
    """A spectrum to look at.

    Attributes
    ----------
    of
        Material, table or mixture.
    quantity
        "permittivity" or "permeability".
    omega
        Angular frequency, ascending [rad/s].
    values
        Complex permittivity or permeability [-].
    unit
        Unit of the axis in which to speak.
    measured
        Whether these are rows with noise, and not a formula.
    """

    of: str
    quantity: str
    omega: NDArray[np.float64]
    values: NDArray[np.complex128]
    unit: str
    measured: bool = False

    @property
    def symbol(self) -> str:
        """ε or μ."""
        return _SYMBOL[self.quantity]

    @property
    def suffix(self) -> str:
        """What tells a finding on μ from the one on ε."""
        return " of μ" if self.quantity == "permeability" else ""

    def at(self, place: int) -> str:
        """A frequency as people write it."""
        return show(float(self.omega[place]), "spectral", self.unit)

    @property
    def span(self) -> str:
        """The band as people write it, the smaller number first."""
        return span(float(self.omega[0]), float(self.omega[-1]), self.unit)


@dataclass(frozen=True, eq=False)
class Examined:
    """A spectrum beside what Kramers–Kronig makes of its loss.

    Attributes
    ----------
    subject
        The spectrum.
    completion
        The causal spectrum nearest to it.
    """

    subject: Subject
    completion: Completion

    def to_dict(self) -> dict[str, Any]:
        """As JSON holds it."""
        found = self.completion
        return {
            "of": self.subject.of,
            "quantity": self.subject.quantity,
            "omega_rad_s": plain(found.compared),
            "given": complex_parts(found.given),
            "kramers_kronig": plain(found.given.real - found.residual.real),
            "expected_deviation": plain(found.doubt),
        }


def span(low: float, high: float, unit: str) -> str:
    """A band as people write it, the smaller number first; the ends ascend [rad/s]."""
    if low == high:
        return show(low, "spectral", unit)
    ends = [low, high] if kind_of_axis(unit) != "vacuum wavelength" else [high, low]
    return " to ".join(show(end, "spectral", unit) for end in ends)


def finite(subject: Subject) -> Finding | None:
    """A failure where the spectrum is not finite, which leaves nothing else to look at; or None."""
    lost = ~np.isfinite(subject.values)
    if not lost.any():
        return None
    first = subject.at(int(np.argmax(lost)))
    why = f"{subject.symbol} is not finite at {first}: a resonance without damping, or outside of its formula"
    return Finding("finite" + subject.suffix, subject.of, "failed", {"points": float(lost.sum())}, why)


def passivity(subject: Subject) -> Finding:
    """Whether there is gain: a negative loss beyond rounding, and beyond the scatter of rows."""
    loss, size = subject.values.imag, np.abs(subject.values)
    name, noise = "passivity" + subject.suffix, _noise(subject, loss)
    least = float(loss.min())
    gain = loss < -(ROUNDING * size + noise)
    numbers = {"lowest_loss": least, "rows_with_gain": float((loss < -ROUNDING * size).sum())}
    symbol = f"{subject.symbol}″"
    if gain.any():
        place = int(np.argmax(gain))
        numbers["first_gain_rad_s"] = float(subject.omega[place])
        why = f"{symbol} is negative first at {subject.at(place)} ({loss[place]:.3g}); lowest {least:.3g}"
        return Finding(name, subject.of, "failed", numbers, why)
    if numbers["rows_with_gain"]:
        why = f"{symbol} dips to {least:.2g}, no deeper than the scatter from row to row can take it"
        return Finding(name, subject.of, "passed", numbers, why)
    return Finding(name, subject.of, "passed", numbers, f"{symbol} ≥ 0, {subject.span}")


def allowed_misfit(examined: Examined) -> NDArray[np.float64]:
    """How far ε′ may lie off what its loss asks for, at each frequency compared, relative to 1 + |ε| [-]."""
    found = examined.completion
    return np.asarray(SIGMAS * found.doubt / (1.0 + np.abs(found.given)) + TOLERANCE)


def causality(subject: Subject) -> tuple[Finding, Examined | None]:
    """Whether some passive spectrum outside the band makes the data inside obey Kramers–Kronig."""
    name = "Kramers–Kronig" + subject.suffix
    if subject.omega.size < FEWEST:
        why = f"it takes at least {FEWEST} frequencies to tell; there are {subject.omega.size}"
        return Finding(name, subject.of, "could not tell", {}, why), None
    found = complete(subject.omega, subject.values, conducts=subject.quantity == "permittivity")
    size = 1.0 + np.abs(found.given)
    misfit = float(np.sqrt(np.mean(np.square(found.residual.real / size))))
    allowed = SIGMAS * found.expected + TOLERANCE
    numbers = {"misfit": misfit, "expected": found.expected, "allowed": allowed, "level": found.level}
    if subject.quantity == "permittivity":
        numbers["conductivity_s_per_m"] = found.conductivity
    part = f"{subject.symbol}′"
    off = f"{part} lies {100 * misfit:.2g} % of 1 + |{subject.symbol}| (rms) off what its loss asks for"
    examined = Examined(subject, found)
    if misfit <= allowed:
        why = f"{off}; {100 * allowed:.2g} % is allowed on a band that ends"
        return Finding(name, subject.of, "passed", numbers, why), examined
    if (coarse := _coarse(subject)) is not None:
        why = f"{off}, but the rows are too far apart to tell: a band near {coarse} is narrower"
        return Finding(name, subject.of, "could not tell", numbers, why), examined
    worst = int(np.argmax(np.abs(found.residual.real) / size))
    place = show(float(found.compared[worst]), "spectral", subject.unit)
    why = (
        f"{off}, most at {place} ({100 * allowed:.2g} % is allowed), and nothing passive outside the band "
        f"mends that: {part} and {subject.symbol}″ do not fit each other, or one has a wrong sign or offset"
    )
    return Finding(name, subject.of, "failed", numbers, why), examined


def clear_dispersion(subject: Subject) -> Finding:
    """Whether ε′ (so n) rises with frequency wherever nothing is lost, as it must between bands."""
    name, e = "clear windows", subject.values
    clear = e.imag <= CLEAR * np.abs(e)
    pairs = clear[1:] & clear[:-1] & ~_lone_falls(e)
    if not pairs.any():
        return Finding(name, subject.of, "not applicable", {}, "there is loss all over the band")
    slack = np.sqrt(2.0) * _noise(subject, e.real)[1:]
    rises = np.where(pairs, np.diff(e.real), np.inf)
    worst, allowed = int(np.argmin(rises)), ROUNDING * np.abs(e[1:]) + slack
    numbers = {"lowest_rise": float(rises.min()), "clear_share": float(pairs.mean())}
    if np.any(rises < -allowed):
        why = f"n falls with frequency near {subject.at(worst)}, where nothing is lost; no clear medium does"
        return Finding(name, subject.of, "failed", numbers, why)
    flat = bool(np.all(np.abs(rises[pairs]) <= ROUNDING * np.abs(e[1:][pairs])))
    word = "does not change" if flat else "rises"
    where = "all over the band" if pairs.all() else f"in {100 * pairs.mean():.0f} % of the band"
    return Finding(
        name, subject.of, "passed", numbers, f"n {word} with frequency where nothing is lost, {where}"
    )


def _noise(subject: Subject, values: NDArray[np.float64]) -> NDArray[np.float64]:
    """How far noise alone may take one row, at each row; nothing for a formula.

    Scatter is what a line through the neighbours leaves, relative to 1 + |ε|; a few rows tell it badly.
    """
    size, count = 1.0 + np.abs(subject.values), values.size
    if not subject.measured or count < FEWEST:
        return np.zeros(count)
    bends = (values[1:-1] - 0.5 * (values[:-2] + values[2:])) / size[1:-1]
    scatter = np.median(np.abs(bends)) / (_MEDIAN_OF_NORMAL * np.sqrt(1.5))
    return np.asarray(EXTREME * (1.0 + FEWEST / count) * scatter * size)


def narrow(subject: Subject) -> bool:
    """Whether a spectrum may have lines too narrow for its frequencies: a loss that jumps between two."""
    loss = subject.values.imag
    steps = np.abs(np.diff(loss))
    return bool(np.isfinite(loss).all() and np.any(steps > 0.1 * np.max(np.abs(loss))))


def _lone_falls(e: NDArray[np.complex128]) -> NDArray[np.bool_]:
    """Pairs of rows between which a line lies that none of them saw: a single fall of ε′ amid a rise."""
    rises, size = np.diff(e.real), 1.0 + np.maximum(np.abs(e[1:]), np.abs(e[:-1]))
    alone = np.zeros(rises.size, dtype=bool)
    alone[1:-1] = (rises[1:-1] < -JUMP * size[1:-1]) & (rises[:-2] > 0.0) & (rises[2:] > 0.0)
    return alone


def _coarse(subject: Subject) -> str | None:
    """Where a band is narrower than the distance of rows, or None.

    It shows as a peak of one row, or as a single fall of ε′ between two rows amid a rise.
    """
    e = subject.values
    loss = e.imag
    beside = np.maximum(np.maximum(loss[:-2], loss[2:]), 0.0)
    least = np.maximum(0.1 * np.max(np.abs(loss)), _noise(subject, loss))[1:-1]
    alone = (loss[1:-1] > 2.0 * beside) & (loss[1:-1] > least)
    odd = np.append(_lone_falls(e), False)
    odd[1:-1] |= alone
    return subject.at(int(np.argmax(odd))) if odd.any() else None
