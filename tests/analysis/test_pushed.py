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
