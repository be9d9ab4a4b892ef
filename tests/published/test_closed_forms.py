"""Maxwell Garnett in closed form: a band stays one band, conducting grains make one relaxation.

With h the permittivity of a constant host, f the fraction of spheres and g(ω) their permittivity,

    ε = h + 3 f h (g − h)/((1 − f) g + (2 + f) h).                                                      (1)

*A Lorentz or Drude grain.* Let g = e + P²/D with D = ω0² − ω² − iΓω (Drude: ω0 = 0, Γ = γ) and
B = (1 − f) e + (2 + f) h. Multiplying (1) above and below by D,

    ε = h + 3 f h [(e − h) D + P²] / [B D + (1 − f) P²].

The fraction is a constant plus a constant over D + (1 − f)P²/B. Since (1 − f)(e − h) = B − 3h, the
remainder of the division is P² [B − (1 − f)(e − h)]/B = 3 h P²/B, so that

    ε = ε∞ + Ω_p² / (Ω0² − ω² − iΓω),
    ε∞ = h + 3 f h (e − h)/B,   Ω0² = ω0² + (1 − f) P²/B,   Ω_p² = 9 f h² P²/B²:

one Lorentz band with the damping of the grain and a shifted resonance. For a Drude grain Ω0 is that
shift alone.

*A conducting grain (Maxwell–Wagner).* Let g = e + iσ/(ε0 ω). Multiplying (1) above and below by −iω,

    ε = h + 3 f h [(e − h)(−iω) + σ/ε0] / [B (−iω) + (1 − f) σ/ε0] = ε∞ + Δ/(1 − iωτ),
    τ = ε0 B/((1 − f) σ),   Δ = ε_s − ε∞ = 9 f h²/((1 − f) B),   ε_s = h (1 + 2 f)/(1 − f):

one Debye relaxation, whose static limit is that of perfect conductors and knows nothing of σ or e.
"""

from __future__ import annotations

import evaluator
import numpy as np
import pytest

from mixsim.units import VACUUM_PERMITTIVITY

RECIPE = """
    host = {{ material = "matrix" }}
    inclusions.grain = {{ material = "grain", volume_fraction = 0.1 }}
    materials.matrix.permittivity.infinity = 2.0
    materials.grain.permittivity.infinity = 4.0
    materials.grain.permittivity.terms.it = {{ {term} }}
"""
LORENTZ = 'model = "lorentz", plasma = "2 eV", resonance = "3 eV", damping = "0.1 eV"'
DRUDE = 'model = "drude", plasma = "2 eV", damping = "0.1 eV"'
CONDUCTION = 'model = "conduction", conductivity = "1 S/m"'
TERM = "materials.grain.permittivity.terms.it"
EXACT = 1e-12


def draws(count: int = 50) -> dict[str, np.ndarray]:
    """Host, grain level, fraction and their values by path, drawn once, as columns against frequency."""
    random = np.random.default_rng(1904)
    return {
        "materials.matrix.permittivity.infinity": random.uniform(1.0, 10.0, count),
        "materials.grain.permittivity.infinity": random.uniform(1.0, 20.0, count),
        "inclusions.grain.volume_fraction": random.uniform(0.001, 0.9, count),
    }


def column(values: dict[str, np.ndarray]) -> tuple[np.ndarray, ...]:
    return tuple(array[:, None] for array in values.values())


@pytest.mark.parametrize("term", ["lorentz", "drude"])
def test_a_band_in_a_constant_host_is_one_shifted_band(term: str) -> None:
    random = np.random.default_rng(1909)
    values = draws()
    h, e, f = column(values)
    plasma, damping = random.uniform(1e14, 5e15, (2, 50))
    resonance = random.uniform(1e14, 5e15, 50) if term == "lorentz" else np.zeros(50)
    values |= {f"{TERM}.plasma": plasma, f"{TERM}.damping": damping}
    if term == "lorentz":
        values[f"{TERM}.resonance"] = resonance
    omega = np.geomspace(1e13, 1e17, 301)
    compiled = evaluator.mixture(RECIPE.format(term=LORENTZ if term == "lorentz" else DRUDE))
    ours = evaluator.permittivity(compiled, omega, values)

    p2, w2, width = plasma[:, None] ** 2, resonance[:, None] ** 2, damping[:, None]
    b = (1 - f) * e + (2 + f) * h
    level = h + 3 * f * h * (e - h) / b
    shifted, strength = w2 + (1 - f) * p2 / b, 9 * f * h**2 * p2 / b**2
    band = level + strength / (shifted - omega**2 - 1j * width * omega)
    # relative to the terms of the sum: where they cancel, ε′ crosses zero and no digits are promised
    size = level + np.abs(band - level)
    assert np.max(np.abs(ours - band) / size) < EXACT

    limits = compiled.limits(values)
    assert limits.static == pytest.approx((level + strength / shifted)[:, 0], rel=EXACT)
    assert limits.high_frequency == pytest.approx(level[:, 0], rel=EXACT)


def test_conducting_spheres_in_an_insulator_are_one_relaxation() -> None:
    random = np.random.default_rng(1914)
    values = draws()
    h, e, f = column(values)
    conductivity = 10.0 ** random.uniform(-9, 7, 50)
    values[f"{TERM}.conductivity"] = conductivity
    b = (1 - f) * e + (2 + f) * h
    time = VACUUM_PERMITTIVITY * b / ((1 - f) * conductivity[:, None])
    level, step = h + 3 * f * h * (e - h) / b, 9 * f * h**2 / ((1 - f) * b)
    omega = np.geomspace(1e-3, 1e20, 300)
    compiled = evaluator.mixture(RECIPE.format(term=CONDUCTION))
    ours = evaluator.permittivity(compiled, omega, values)
    debye = level + step / (1 - 1j * omega * time)
    assert np.max(np.abs(ours / debye - 1)) < EXACT
    limits = compiled.limits(values)
    assert limits.static == pytest.approx((h * (1 + 2 * f) / (1 - f))[:, 0], rel=EXACT)
    assert limits.static == pytest.approx((level + step)[:, 0], rel=EXACT)


def test_static_limit_of_metallic_grains_knows_nothing_of_their_plasma_frequency() -> None:
    values = draws()
    h, _, f = column(values)
    compiled = evaluator.mixture(RECIPE.format(term=DRUDE))
    expected = (h * (1 + 2 * f) / (1 - f))[:, 0]
    for plasma in (1e14, 1e16):
        static = compiled.limits({**values, f"{TERM}.plasma": np.full(50, plasma)}).static
        assert static == pytest.approx(expected, rel=EXACT)
