"""Answers as numpy archives: plain arrays in SI, without pickles.

Names are those of the JSON answer, joined by underscores where they nest; complex numbers stay whole.
Texts are arrays of text. Missing numbers are NaN.
"""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path
from typing import Any

import numpy as np

from mixsim.analysis import Fitted, Inversion, Judgement, Lot, Prediction
from mixsim.analysis.plain import provenance
from mixsim.analysis.prediction import CONVENTION
from mixsim.units import SPEED_OF_LIGHT


def write_npz(answer: Prediction | Inversion | Fitted | Judgement | Lot, file: Path) -> None:
    """Write the arrays of an answer."""
    arrays = _inversion(answer) if isinstance(answer, Inversion) else _others(answer)
    with file.open("wb") as stream:
        np.savez_compressed(stream, **arrays)


def _others(answer: Prediction | Fitted | Judgement | Lot) -> dict[str, Any]:
    if isinstance(answer, Judgement | Lot):
        return _verdicts(answer)
    return _fitted(answer) if isinstance(answer, Fitted) else _prediction(answer)


def _verdicts(answer: Judgement | Lot) -> dict[str, Any]:
    pieces = answer.pieces if isinstance(answer, Judgement) else answer.rows
    return _origin(answer) | {
        "of": np.array(answer.measurand.name),
        "limits": _column([answer.lower, answer.upper]),
        "samples": np.array([piece.sample for piece in pieces]),
        "decision": np.array([piece.decision for piece in pieces]),
        "value": _column([piece.value for piece in pieces]),
        "std": _column([piece.std for piece in pieces]),
        "probability": _column([piece.probability for piece in pieces]),
    }


def _origin(answer: Prediction | Inversion | Fitted | Judgement | Lot) -> dict[str, Any]:
    origin = provenance(answer.recipe)
    return {
        "title": np.array(answer.recipe.schema.title or ""),
        "rule": np.array(answer.rule),
        "version": np.array(origin["version"]),
        "recipe": np.array(origin["recipe"]),
    }


def _prediction(answer: Prediction) -> dict[str, Any]:
    limits, composition = answer.limits, answer.composition
    arrays: dict[str, Any] = _origin(answer) | {
        "convention": np.array(CONVENTION),
        "omega_rad_s": answer.omega,
        "frequency_hz": answer.omega / (2.0 * np.pi),
        "wavelength_m": 2.0 * np.pi * SPEED_OF_LIGHT / answer.omega,
        "permittivity": answer.permittivity,
        "permeability": answer.permeability,
        "index_n": answer.quantity("index"),
        "index_k": answer.quantity("extinction"),
        "loss_tangent": answer.quantity("loss_tangent"),
        "magnetic_loss_tangent": answer.quantity("magnetic_loss_tangent"),
        "absorption_coefficient_per_m": answer.quantity("absorption_coefficient"),
        "conductivity_s_per_m": answer.quantity("conductivity"),
        "static": limits.static,
        "high_frequency": limits.high_frequency,
        "static_permeability": limits.static_permeability,
        "high_frequency_permeability": limits.high_frequency_permeability,
        "dc_conductivity_s_per_m": limits.conductivity,
        "dc_plateau": limits.plateau,
        "vary_paths": np.array([item.path for item in answer.vary], dtype=str),
    }
    arrays |= {f"vary__{position}": item.values for position, item in enumerate(answer.vary)}
    arrays |= _by_name("volume_fraction", composition.volume_fractions)
    if composition.weight_fractions is not None:
        arrays |= _by_name("weight_fraction", composition.weight_fractions)
    if composition.density is not None:
        arrays["density_kg_per_m3"] = composition.density
    if composition.number_densities:
        arrays |= _by_name("number_density_per_m3", composition.number_densities)
    return arrays


def _by_name(key: str, values: Mapping[str, Any]) -> dict[str, Any]:
    """Numbers of several constituents, stacked, with their names beside."""
    return {f"{key}_names": np.array(list(values)), key: np.stack(list(values.values()))}


def _column(values: list[float | None]) -> Any:
    return np.array([np.nan if value is None else value for value in values], dtype=float)


def _estimated(answer: Inversion | Fitted) -> dict[str, Any]:
    """What an inversion and a fit have in common."""
    estimates = list(answer.estimates.values())
    ends = [estimate.interval or (None, None) for estimate in estimates]
    arrays = _origin(answer) | {
        "verdict": np.array(answer.verdict),
        "paths": np.array(list(answer.estimates)),
        "value": _column([estimate.value for estimate in estimates]),
        "std": _column([estimate.std for estimate in estimates]),
        "interval_low": _column([low for low, _ in ends]),
        "interval_high": _column([high for _, high in ends]),
        "unit": np.array([estimate.unit for estimate in estimates]),
    }
    if answer.correlation is not None:
        arrays["correlation"] = answer.correlation
    if answer.solutions:
        arrays["solutions"] = np.array([[s[path] for path in answer.estimates] for s in answer.solutions])
    return arrays


def _fitted(answer: Fitted) -> dict[str, Any]:
    arrays = _estimated(answer) | {
        "samples": np.array([met.observation.sample for met in answer.met]),
        "quantities": np.array([met.observation.quantity for met in answer.met]),
    }
    for place, met in enumerate(answer.met):
        one = met.observation
        if one.omega is not None:
            arrays[f"omega_rad_s__{place}"] = one.omega
        arrays[f"measured__{place}"], arrays[f"measured_std__{place}"] = one.values, one.std
        arrays[f"fitted__{place}"] = met.predicted
    return arrays


def _inversion(answer: Inversion) -> dict[str, Any]:
    arrays = _estimated(answer) | {
        "readings": np.array([reading.kind for reading in answer.readings]),
        "measured": _column([reading.value for reading in answer.readings]),
        "measured_std": _column([reading.std for reading in answer.readings]),
    }
    if answer.family is not None:
        arrays["family"] = np.stack([answer.family[path] for path in answer.estimates])
    return arrays
