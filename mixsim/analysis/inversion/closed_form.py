"""Inversions that need no search: fraction and plasma frequency of one kind of sphere, and of a dopant.

With ε_s and ε∞ the readings, the rule solved for its second phase gives the permittivity of the grains;
what they hold beside a band is known, so that the band leaves ωp = ω₀ √(ε_s − rest)/√strength.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.inversion.answer import Reading
from mixsim.analysis.unknowns import Unknown
from mixsim.mixture import Constituent, Mixture
from mixsim.mixture.spectra import Spectrum

Floats = NDArray[np.float64]
_CONDUCTOR = 1e45  # stands for the infinite static permittivity of conducting grains


def closed_form(mixture: Mixture, unknowns: Sequence[Unknown], readings: Sequence[Reading]) -> Floats | None:
    """Values of the unknowns that give the readings exactly.

    Parameters
    ----------
    mixture
        The evaluator.
    unknowns
        One or two leaves.
    readings
        As many readings.

    Returns
    -------
    values
        In the order of the unknowns [SI]; NaN where the readings ask for what cannot be. None where there
        is no closed form for these unknowns.
    """
    read = {reading.kind: reading.value for reading in readings}
    paths = [unknown.path for unknown in unknowns]
    if len(read) != len(paths):
        return None
    loading, found = _fraction_path(mixture), {}
    with np.errstate(invalid="ignore", divide="ignore"):
        if loading in paths:
            # beside a band the high-frequency level alone tells the loading
            kind = next(iter(read)) if len(paths) == 1 else "high_frequency"
            found[loading] = _fraction(mixture, kind, read[kind])
        for path in paths:
            if path == loading:
                continue
            band = _plasma(mixture, path, read["static"], found) if "static" in read else None
            if band is None:
                return None
            found[path] = band
    return np.array([float(found[path]) for path in paths])


def _fraction_path(mixture: Mixture) -> str | None:
    """Path of the loading, where there is one kind of sphere, loaded by volume, and nothing else."""
    if len(mixture.inclusions) != 1 or mixture.voids is not None or mixture.density is not None:
        return None
    grain = mixture.inclusions[0]
    plain = grain.basis == "volume_fraction" and grain.plain
    return f"inclusions.{grain.name}.volume_fraction" if plain and mixture.rule.fraction_from else None


def _level(phase: Constituent, kind: str, x: Mapping[str, Any]) -> Any:
    if kind == "high_frequency":
        return phase.permittivity.high(x)
    rate, level = phase.permittivity.low(x)
    return np.where(np.asarray(rate) > 0.0, _CONDUCTOR, level)


def _fraction(mixture: Mixture, kind: str, value: float) -> Any:
    assert mixture.rule.fraction_from is not None
    x = mixture.defaults
    host, grain = (_level(phase, kind, x) for phase in (mixture.host, mixture.inclusions[0]))
    return np.real(mixture.rule.fraction_from(value, host=host, inclusion=grain, **mixture.parameters(x)))


def _plasma(mixture: Mixture, path: str, static: float, found: Mapping[str, Any]) -> Any:
    """Plasma frequency at a path from the static level; None where the closed form does not reach."""
    x = {**mixture.defaults, **found}
    if not path.endswith(".plasma"):
        return None
    if not mixture.inclusions and mixture.voids is None:
        return _band(mixture.host.permittivity, path, static, x)
    if _fraction_path(mixture) is None or mixture.rule.inclusion_from is None:
        return None
    grain, host = mixture.inclusions[0], _level(mixture.host, "static", x)
    if path in mixture.host.permittivity.paths or grain.amount is None or np.any(host == _CONDUCTOR):
        return None
    own = mixture.parameters(x)
    level = np.real(mixture.rule.inclusion_from(static, host=host, fraction=grain.amount(x), **own))
    return _band(grain.permittivity, path, level, x)


def _band(spectrum: Spectrum, path: str, level: Any, x: Mapping[str, Any]) -> Any:
    """The plasma frequency of one band that lifts a spectrum to a static level.

    The static level is rest + slope·ωp², both read off the spectrum itself, so that strength and local
    field are in it.
    """
    if path not in spectrum.paths:
        return None
    place = x[path] or 1.0
    rates, rests = zip(*(spectrum.low({**x, path: plasma}) for plasma in (0.0, place)), strict=True)
    if any(np.any(np.asarray(rate) != 0.0) for rate in rates) or np.any(np.isnan(rests)):
        return None
    slope = (np.real(rests[1]) - np.real(rests[0])) / place**2
    return np.sqrt((level - np.real(rests[0])) / slope)
