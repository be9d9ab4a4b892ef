"""Indices that change with temperature, against pages of one author at two temperatures."""

from __future__ import annotations

import numpy as np
import open_data
import pytest
from evaluator import from_um, permittivity

from mixsim.recipe import library
from mixsim.units import SPEED_OF_LIGHT, read

# pages with their temperatures [°C], and the share by which our one slope may miss theirs; that of water
# falls where its band begins, below 190 nm, and the source of the material says so
WARM: dict[str, tuple[tuple[str, str], tuple[str, float], tuple[str, float], float]] = {
    "cyclohexane": (("organic", "cyclohexane"), ("Kerl-293K", 20.0), ("Kerl-333K", 60.0), 0.06),
    "silicon": (("main", "Si"), ("Li-293K", 20.0), ("Li-350K", 77.0), 0.15),
    "germanium": (("main", "Ge"), ("Li-293K", 20.0), ("Li-350K", 77.0), 0.20),
    "water-visible": (("main", "H2O"), ("Daimon-19.0C", 19.0), ("Daimon-24.0C", 24.0), 0.15),
}


def common(name: str, *pages: tuple[str, str, str]) -> np.ndarray:
    """Wavelengths [µm] that the material and every page cover, away from the ends of single precision."""
    content = library.definition(name)
    assert content is not None
    own = (read(content["valid"][end], "spectral").value for end in ("from", "to"))
    windows = [
        sorted(2e6 * np.pi * SPEED_OF_LIGHT / omega for omega in own),
        *(open_data.window(*p) for p in pages),
    ]
    low, high = max(low for low, _ in windows), min(high for _, high in windows)
    return np.geomspace(max(low * 1.0001, 0.19), high * 0.9999, 60)


@pytest.mark.parametrize("name", WARM, ids=lambda name: f"{name} [published: open pages at two temperatures]")
def test_warmth_moves_an_index_as_measured(name: str) -> None:
    book, (cold_page, cold), (warm_page, warm), share = WARM[name]
    pages = [(*book, cold_page), (*book, warm_page)]
    wavelength = common(name, *pages)
    host = f'host = {{ material = "{name}" }}\nconditions.temperature = "20 °C"'
    kelvin = 273.15 + np.array([[cold], [warm]])
    swept = permittivity(host, from_um(wavelength), {"conditions.temperature": kelvin})
    ours = np.diff(np.sqrt(swept).real, axis=0)[0]
    theirs = open_data.index(*pages[1], wavelength) - open_data.index(*pages[0], wavelength)
    assert np.max(np.abs(ours / theirs - 1.0)) < share
