"""The ± of a recipe in its predictions, against the textbook sum of squares and a Monte Carlo."""

from __future__ import annotations

import numpy as np
import pytest

import mixsim

TEXT = """
host.material = "matrix"
inclusions.grain = { material = "grain", volume_fraction = "20 ± 1 %" }
materials.matrix.permittivity.infinity = "2.5 ± 0.05"
materials.grain.permittivity.infinity = 6.0
band = { from = "0.5 eV", to = "3 eV", points = 21 }
[materials.grain.permittivity.terms.b]
model = "lorentz"
step = "4 ± 0.2"
resonance = "2 eV"
damping = "0.4 eV"
"""
PATHS = (
    "inclusions.grain.volume_fraction",
    "materials.matrix.permittivity.infinity",
    "materials.grain.permittivity.terms.b.step",
)


def test_against_derivatives_of_the_closed_form() -> None:
    """Maxwell Garnett at dc: the three partial derivatives, by hand."""
    h, e, f = 2.5, 10.0, 0.2

    def mixed(h: float, e: float, f: float) -> float:
        return h * (1 + 3 * f * (e - h) / (e + 2 * h - f * (e - h)))

    parts = []
    for point, std in (((0, 0, 1), 0.01), ((1, 0, 0), 0.05), ((0, 1, 0), 0.2)):
        step = 1e-6 * np.array(point)
        slope = (mixed(*(np.array([h, e, f]) + step)) - mixed(*(np.array([h, e, f]) - step))) / 2e-6
        parts.append(slope * std)
    pushed = mixsim.predict(mixsim.parse(TEXT)).pushed
    assert pushed is not None
    assert pushed.paths == PATHS
    assert float(pushed.static) == pytest.approx(np.sqrt(np.sum(np.square(parts))), rel=1e-3)


def test_spectra_against_random_draws() -> None:
    recipe = mixsim.parse(TEXT)
    pushed = mixsim.predict(recipe).pushed
    assert pushed is not None
    random = np.random.default_rng(5)
    values = {
        p: recipe.leaves[p].value + (recipe.leaves[p].std or 0) * random.standard_normal(4000) for p in PATHS
    }
    drawn = recipe.compile().response(values, mixsim.predict(recipe).omega).permittivity
    assert pushed.real == pytest.approx(drawn.real.std(axis=0), rel=0.1)
    assert pushed.imag == pytest.approx(drawn.imag.std(axis=0), rel=0.1)


MAGNET = """
host.material = "rubber"
inclusions.iron = { material = "powder", volume_fraction = "30 ± 2 %" }
band = { from = "1 GHz", to = "10 GHz", points = 21 }
[materials]
rubber.permittivity.infinity = 3.0
powder.permittivity.infinity = 10.0
powder.permeability.infinity = 1.0
powder.permeability.terms.spin = { model = "debye", step = "2 ± 0.1", relaxation_frequency = "3 GHz" }
"""


def test_permeability_against_random_draws() -> None:
    recipe = mixsim.parse(MAGNET)
    answer = mixsim.predict(recipe)
    assert answer.pushed is not None
    step = "materials.powder.permeability.terms.spin.step"
    assert answer.pushed.paths == ("inclusions.iron.volume_fraction", step)
    random = np.random.default_rng(6)
    values = {
        p: recipe.leaves[p].value + (recipe.leaves[p].std or 0) * random.standard_normal(4000)
        for p in answer.pushed.paths
    }
    drawn = recipe.compile().response(values, answer.omega).permeability
    assert answer.pushed.permeability_real == pytest.approx(drawn.real.std(axis=0), rel=0.1)
    assert answer.pushed.permeability_imag == pytest.approx(drawn.imag.std(axis=0), rel=0.1)
    # Maxwell Garnett at dc: μ_s = (1 + 2fβ)/(1 − fβ), β = (μ − 1)/(μ + 2), its two derivatives by hand
    f, mu = 0.3, 3.0
    beta = (mu - 1.0) / (mu + 2.0)
    slope = 3.0 / (1.0 - f * beta) ** 2
    expected = np.hypot(slope * beta * 0.02, slope * f * 3.0 / (mu + 2.0) ** 2 * 0.1)
    assert float(answer.pushed.static_permeability) == pytest.approx(expected, rel=1e-3)
    said = answer.to_dict()["standard_uncertainty"]
    assert said["permeability"]["real"] == answer.pushed.permeability_real.tolist()


def test_without_magnets_nothing_is_unsure_of_the_permeability() -> None:
    pushed = mixsim.predict(mixsim.parse(TEXT)).pushed
    assert pushed is not None
    assert pushed.permeability_real.shape == pushed.real.shape and not np.any(pushed.permeability_real)


def test_what_only_a_missing_limit_could_feel_is_not_named() -> None:
    text = """
        host.material = "glass"
        band.values = ["500 nm"]
        materials.glass = { density = "2.5 ± 0.1 g/cm^3", index = { model = "cauchy", a = 1.5 } }
    """
    assert mixsim.predict(mixsim.parse(text)).pushed is None


def test_only_what_matters_is_named_and_nothing_without_it() -> None:
    exact = TEXT.replace(" ± 1", "").replace(" ± 0.05", "").replace(" ± 0.2", "")
    assert mixsim.predict(mixsim.parse(exact)).pushed is None
    idle = exact.replace("band =", 'materials.grain.density = "4.0 ± 0.1 g/cm^3"\nband =')
    assert mixsim.predict(mixsim.parse(idle)).pushed is None
    assert mixsim.predict(mixsim.parse(exact)).to_dict()["standard_uncertainty"] is None
    held = mixsim.predict(mixsim.parse(TEXT)).to_dict()["standard_uncertainty"]
    assert held["from"] == list(PATHS)


def test_ends_outside_the_range_are_moved_to_it() -> None:
    text = TEXT.replace("20 ± 1 %", "0.5 ± 1 %")
    pushed = mixsim.predict(mixsim.parse(text)).pushed
    assert pushed is not None
    assert np.isfinite(pushed.real).all()
