"""What must hold of spectra: true ones with noise pass on any band, impossible ones fail."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

import numpy as np
import pytest

from mixsim.analysis.checks import Subject, causality, clear_dispersion, finite, passivity
from mixsim.dispersion import TERMS

LORENTZ, DEBYE, DRUDE = (TERMS[name].function for name in ("lorentz", "debye", "drude"))
SPECTRA: dict[str, Callable[[Any], Any]] = {
    "debye": lambda w: 3.0 + DEBYE(w, step=70.0, relaxation_time=1.0),
    "conducting": lambda w: 3.0 + DEBYE(w, step=7.0, relaxation_time=1.0) + 5j / w,
    "band": lambda w: 2.0 + LORENTZ(w, plasma=1.5, resonance=1.0, damping=0.3),
    "two bands": lambda w: (
        2.0
        + LORENTZ(w, plasma=2.0, resonance=0.7, damping=0.2)
        + LORENTZ(w, plasma=4.0, resonance=4.0, damping=0.6)
    ),
    "wing": lambda w: 2.0 + LORENTZ(w, plasma=15.0, resonance=12.0, damping=0.3),
    "clear": lambda w: 1.0 + 1.1 / (1.0 - (w / 15.0) ** 2) + 0.9 / (1.0 - (w / 0.05) ** 2) + 0j,
    "metal": lambda w: 3.7 + DRUDE(w, plasma=9.0, damping=0.3) + LORENTZ(w, plasma=5, resonance=3, damping=1),
    "loss-free metal": lambda w: 3.7 - 900.0 / w**2 + 0j,
    "level": lambda w: 2.2 + 0j * w,
    "level loss tangent": lambda w: 4.4 + 0.09j + 0.0 * w,
}
BANDS = {"narrow": (0.9, 1.1, 40), "decade": (0.3, 3.0, 60), "few": (0.5, 2.0, 12), "wide": (0.1, 10.0, 300)}
NOISES = (0.0, 1e-3, 1e-2, 5e-2)


def subject(omega: Any, values: Any, *, quantity: str = "permittivity") -> Subject:
    return Subject("sample", quantity, omega, np.asarray(values, dtype=complex), "rad/s", measured=True)


def noisy(name: str, band: str, noise: float, seed: int) -> tuple[Any, Any]:
    low, high, count = BANDS[band]
    omega = np.geomspace(low, high, count)
    true = SPECTRA[name](omega)
    rng = np.random.default_rng(seed)
    scatter = noise * (1.0 + np.abs(true)) * (rng.normal(size=count) + 1j * rng.normal(size=count))
    return omega, true + scatter


@pytest.mark.parametrize("noise", NOISES)
@pytest.mark.parametrize("band", BANDS)
@pytest.mark.parametrize("name", SPECTRA)
def test_good_data_on_a_finite_band_do_not_fail(name: str, band: str, noise: float) -> None:
    for seed in range(3):
        seen = subject(*noisy(name, band, noise, seed))
        finding, examined = causality(seen)
        assert finding.verdict == "passed", finding.why
        assert examined is not None
        assert passivity(seen).verdict == "passed"


@pytest.mark.parametrize("noise", NOISES[:3])
@pytest.mark.parametrize("band", ["decade", "wide"])
@pytest.mark.parametrize("name", ["debye", "conducting", "band", "two bands", "metal"])
def test_a_wrong_sign_of_k_fails_twice(name: str, band: str, noise: float) -> None:
    omega, values = noisy(name, band, noise, 1)
    seen = subject(omega, values.conj())
    assert causality(seen)[0].verdict == "failed"
    gain = passivity(seen)
    assert gain.verdict == "failed" and gain.numbers["first_gain_rad_s"] >= omega[0]


@pytest.mark.parametrize("noise", NOISES[:3])
@pytest.mark.parametrize("band", ["narrow", "decade", "wide"])
@pytest.mark.parametrize("name", ["band", "two bands", "clear", "level"])
def test_an_impossible_shift_fails(name: str, band: str, noise: float) -> None:
    """ε′ pushed so far down that no level of one or more, and no carriers, leave it there."""
    omega, values = noisy(name, band, noise, 2)
    shifted = values - 3.0 - np.max(SPECTRA[name](omega).real)
    if band == "narrow" and name != "level":
        return  # over a tenth of a decade −C/ω² looks like a level within the noise
    assert causality(subject(omega, shifted))[0].verdict == "failed"


@pytest.mark.parametrize("noise", NOISES[:3])
@pytest.mark.parametrize("name", ["band", "two bands"])
def test_n_and_k_of_two_sources_that_do_not_fit_fail(name: str, noise: float) -> None:
    """Bands that lie a tenth apart, and bands of which one source saw but half the strength."""
    omega, values = noisy(name, "wide", noise, 3)
    elsewhere = SPECTRA[name](omega * 1.1)
    index, other = np.sqrt(values), np.sqrt(elsewhere)
    mixed = (index.real + 1j * other.imag) ** 2
    assert causality(subject(omega, mixed))[0].verdict == "failed"
    half = values.real + 0.5j * values.imag
    assert causality(subject(omega, half))[0].verdict == "failed"


@pytest.mark.parametrize("quantity", ["permittivity", "permeability"])
def test_both_quantities(quantity: str) -> None:
    omega, values = noisy("debye", "wide", 1e-3, 4)
    finding, _ = causality(subject(omega, values, quantity=quantity))
    assert finding.verdict == "passed"
    assert finding.name.endswith("of μ") == (quantity == "permeability")
    assert ("conductivity_s_per_m" in finding.numbers) == (quantity == "permittivity")


def test_what_cannot_be_told() -> None:
    omega = np.geomspace(0.1, 10.0, 40)
    sharp = 2.0 + LORENTZ(omega, plasma=0.3, resonance=0.5 * (omega[20] + omega[21]), damping=0.005)
    finding, _ = causality(subject(omega, sharp))
    assert finding.verdict == "could not tell" and "too far apart" in finding.why
    few, examined = causality(subject(omega[:7], sharp[:7]))
    assert (few.verdict, examined) == ("could not tell", None)
    lost = finite(subject(omega, np.where(omega > 1.0, np.inf, 1.0)))
    assert lost is not None and lost.verdict == "failed" and lost.numbers["points"] == 20


def test_gain_names_its_first_frequency() -> None:
    omega = np.linspace(1.0, 2.0, 101)
    values = 2.0 + 1j * (0.01 - 0.05 * (omega > 1.505))
    finding = passivity(subject(omega, values))
    assert finding.verdict == "failed"
    assert finding.numbers["first_gain_rad_s"] == pytest.approx(1.51)
    assert finding.numbers["lowest_loss"] == pytest.approx(-0.04)


def test_clear_windows() -> None:
    omega = np.linspace(1.0, 2.0, 50)
    assert clear_dispersion(subject(omega, SPECTRA["clear"](omega))).verdict == "passed"
    assert "does not change" in clear_dispersion(subject(omega, SPECTRA["level"](omega))).why
    falling = 2.25 - 0.1 * (omega - 1.0)
    finding = clear_dispersion(subject(omega, falling))
    assert finding.verdict == "failed" and "falls" in finding.why
    assert clear_dispersion(subject(omega, SPECTRA["band"](omega))).verdict == "not applicable"
    rng = np.random.default_rng(6)
    rough = 2.25 + 0.01 * omega + 1e-3 * rng.normal(size=omega.size)
    assert clear_dispersion(subject(omega, rough)).verdict == "passed"
