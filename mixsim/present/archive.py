"""Answers as numpy archives: plain arrays in SI, without pickles."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import numpy as np

from mixsim.analysis import Inversion, Prediction
from mixsim.observables import QUANTITIES


def write_npz(answer: Prediction | Inversion, file: Path) -> None:
    """Write the arrays of an answer; names are those of its JSON, paths of numbers stand in lists of text."""
    arrays = _inversion(answer) if isinstance(answer, Inversion) else _prediction(answer)
    with file.open("wb") as stream:
        np.savez_compressed(stream, **arrays)


def _prediction(answer: Prediction) -> dict[str, Any]:
    composition = answer.composition
    arrays: dict[str, Any] = {
        "convention": np.array("exp(-iwt)"),
        "omega_rad_s": answer.omega,
        "permittivity": answer.permittivity,
        "permeability": answer.permeability,
        "static": answer.limits.static,
        "high_frequency": answer.limits.high_frequency,
        "dc_conductivity_s_per_m": answer.limits.conductivity,
        "dc_plateau": answer.limits.plateau,
        "volume_fraction_names": np.array(list(composition.volume_fractions)),
        "volume_fraction": np.stack(list(composition.volume_fractions.values())),
        "vary_paths": np.array([item.path for item in answer.vary], dtype=str),
    }
    arrays |= {f"vary_{position}": item.values for position, item in enumerate(answer.vary)}
    arrays |= {name: answer.quantity(name) for name in QUANTITIES}
    return arrays


def _inversion(answer: Inversion) -> dict[str, Any]:
    def column(values: list[float | None]) -> Any:
        return np.array([np.nan if value is None else value for value in values])

    estimates = list(answer.estimates.values())
    ends = [estimate.interval or (None, None) for estimate in estimates]
    arrays = {
        "verdict": np.array(answer.verdict),
        "paths": np.array(list(answer.estimates)),
        "value": column([estimate.value for estimate in estimates]),
        "std": column([estimate.std for estimate in estimates]),
        "interval_low": column([low for low, _ in ends]),
        "interval_high": column([high for _, high in ends]),
        "readings": np.array([reading.kind for reading in answer.readings]),
        "measured": column([reading.value for reading in answer.readings]),
    }
    if answer.correlation is not None:
        arrays["correlation"] = answer.correlation
    if answer.family is not None:
        arrays["family"] = np.stack(list(answer.family.values()))
    return arrays
