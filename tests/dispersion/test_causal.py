"""Completion: true spectra are met to within their noise, impossible ones are not, whatever the band."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

import numpy as np
import pytest

from mixsim.dispersion import TERMS, complete, kramers_kronig
from mixsim.errors import Refusal
from mixsim.units.constants import VACUUM_PERMITTIVITY

LORENTZ, DEBYE, DRUDE = (TERMS[name].function for name in ("lorentz", "debye", "drude"))
SPECTRA: dict[str, Callable[[Any], Any]] = {
    "debye": lambda w: 3.0 + DEBYE(w, step=70.0, relaxation_time=1.0),
    "conducting": lambda w: 3.0 + DEBYE(w, step=7.0, relaxation_time=1.0) + 5j / w,
    "band": lambda w: 2.0 + LORENTZ(w, plasma=1.5, resonance=1.0, damping=0.3),
    "wing": lambda w: 2.0 + LORENTZ(w, plasma=15.0, resonance=12.0, damping=0.3),
    "clear": lambda w: 1.0 + 1.1 / (1.0 - (w / 15.0) ** 2) + 0.9 / (1.0 - (w / 0.05) ** 2) + 0j,
    "metal": lambda w: (
        3.7 + DRUDE(w, plasma=30.0, damping=0.05) + LORENTZ(w, plasma=5, resonance=3, damping=1)
    ),
    "loss-free metal": lambda w: 3.7 - 900.0 / w**2 + 0j,
    "level": lambda w: 2.2 + 0j * w,
}
BANDS = {"narrow": (0.9, 1.1, 40), "decade": (0.3, 3.0, 60), "wide": (0.1, 10.0, 200)}


@pytest.mark.parametrize("noise", [0.0, 1e-3, 2e-2])
@pytest.mark.parametrize("band", BANDS)
@pytest.mark.parametrize("name", SPECTRA)
def test_true_spectra_are_met(name: str, band: str, noise: float) -> None:
    low, high, count = BANDS[band]
    omega = np.geomspace(low, high, count)
    rng = np.random.default_rng(5)
    size = 1.0 + np.abs(SPECTRA[name](omega))
    scatter = noise * size * (rng.normal(size=count) + 1j * rng.normal(size=count))
    found = complete(omega, SPECTRA[name](omega) + scatter)
    assert found.misfit < 2.0 * found.expected + 1e-3
    # and the doubt is no excuse: it is that of the noise and of rows this far apart
    assert found.expected < 2.5 * noise + 2e-2


@pytest.mark.parametrize("band", BANDS)
@pytest.mark.parametrize("name", ["debye", "band", "level"])
def test_impossible_spectra_are_not(name: str, band: str) -> None:
    low, high, count = BANDS[band]
    omega = np.geomspace(low, high, count)
    true = SPECTRA[name](omega)
    impossible = [true - 1.2 * true.real.max()] if name != "debye" or band != "narrow" else []
    if np.any(true.imag > 0.0):
        impossible.append(true.conj())
    for data in impossible:
        found = complete(omega, data)
        assert found.misfit > 5.0 * found.expected + 5e-3


@pytest.mark.parametrize("name", SPECTRA)
def test_passive_and_causal_everywhere(name: str) -> None:
    omega = np.geomspace(0.2, 5.0, 80)
    found = complete(omega, SPECTRA[name](omega))
    everywhere = np.geomspace(1e-6, 1e6, 4001)
    value = found(everywhere)
    assert np.all(value.imag >= 0.0)
    assert np.all(found.loss >= 0.0) and found.conductivity >= 0.0 and found.level >= 1.0
    tail = kramers_kronig(everywhere, nodes=found.nodes, loss=found.loss)
    np.testing.assert_allclose(value.real, found.level + tail, rtol=1e-12)
    assert found.static == pytest.approx(float(found.level + tail[0]), rel=1e-3)


def test_conduction_is_found() -> None:
    """What a band hides of a conductor's loss below it does not become a relaxation."""
    omega = np.geomspace(0.01, 100.0, 200)
    found = complete(omega, SPECTRA["conducting"](omega))
    assert found.conductivity == pytest.approx(5.0 * VACUUM_PERMITTIVITY, rel=1e-2)
    assert found(100.0).real == pytest.approx(3.0, rel=1e-2)
    assert complete(omega, SPECTRA["conducting"](omega), conducts=False).conductivity == 0.0


@pytest.mark.parametrize("name", ["debye", "band", "wing", "metal"])
def test_joined_at_the_ends_and_near_the_truth_beyond(name: str) -> None:
    omega = np.geomspace(0.3, 3.0, 200)
    true = SPECTRA[name]
    found = complete(omega, true(omega), through_ends=True)
    ends = omega[[0, -1]]
    np.testing.assert_allclose(found(ends), true(ends), rtol=1e-4)
    near = np.array([0.27, 3.3])  # a tenth beyond either end
    np.testing.assert_allclose(found(near), true(near), atol=0.02 * np.abs(true(ends)).max())


def test_many_rows_in_little_memory() -> None:
    import tracemalloc

    omega = np.geomspace(0.1, 10.0, 20_000)
    true = SPECTRA["band"](omega)
    tracemalloc.start()
    found = complete(omega, true)
    _, peak = tracemalloc.get_traced_memory()
    tracemalloc.stop()
    assert peak < 150e6
    assert found.misfit < 1e-4
    assert found.compared.size <= 240 and found.compared[[0, -1]].tolist() == omega[[0, -1]].tolist()


def test_least_level_of_a_permeability() -> None:
    """μ∞ below one is refused only where the least level says so."""
    omega = np.geomspace(0.3, 3.0, 60)
    data = 0.5 + DEBYE(omega, step=10.0, relaxation_time=1.0)
    assert complete(omega, data, minimum=0.0, conducts=False).misfit < 1e-3
    assert complete(omega, 0.5 + 0j * omega, conducts=False).misfit > 0.1


def test_refusals() -> None:
    for omega, values in (
        ([1.0, 2.0], [1, 1]),
        ([1.0, 3.0, 2.0], [1, 1, 1]),
        ([1.0, 2.0, 3.0], [1, np.nan, 1]),
    ):
        with pytest.raises(Refusal):
            complete(omega, values)
