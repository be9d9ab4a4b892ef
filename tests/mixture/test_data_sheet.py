"""A data sheet's pair at one frequency: met exactly, causal, or said not to be."""

from __future__ import annotations

import numpy as np
import pytest

import mixsim

PAIR = """
host.material = "laminate"
materials.laminate.permittivity = {{ value = 6.15, loss_tangent = 0.0025, at = "10 GHz", {more} }}
band = {{ from = "1 GHz", to = "20 GHz", points = 39 }}
"""
GIGAHERTZ = 2e9 * np.pi


def compiled(more: str) -> mixsim.mixture.Mixture:  # type: ignore[name-defined]
    return mixsim.parse(PAIR.format(more=more)).compile()


@pytest.mark.parametrize("more", ["", 'low = "10 kHz", high = "10 THz"'])
def test_the_pair_is_met_and_the_loss_is_level_around_it(more: str) -> None:
    mixture = compiled('model = "wide-band-debye"' + (f", {more}" if more else ""))
    (there,) = mixture.response({}, np.array([10 * GIGAHERTZ])).permittivity
    assert there == pytest.approx(6.15 * (1 + 0.0025j), rel=1e-12)
    around = mixture.response({}, GIGAHERTZ * np.array([1.0, 3.0, 20.0])).permittivity
    assert around.imag / around.real == pytest.approx(np.full(3, 0.0025), rel=0.04)
    assert np.all(np.diff(around.real) < 0)
    limits = mixture.limits({})
    assert limits.static.real > 6.15 > limits.high_frequency.real > 1.0


def test_slope_is_what_causality_asks_of_a_level_loss() -> None:
    """dε′/dln ω = −(2/π) ε″, the local Kramers–Kronig relation of a loss without slope."""
    mixture = compiled('model = "wide-band-debye"')
    ends = mixture.response({}, 10 * GIGAHERTZ * np.array([0.99, 1.01])).permittivity
    slope = (ends[1].real - ends[0].real) / np.log(1.01 / 0.99)
    assert slope == pytest.approx(-2 / np.pi * 6.15 * 0.0025, rel=0.02)


def test_the_constant_pair_is_flagged_over_a_wide_band() -> None:
    text = PAIR.format(more='model = "constant"')
    predicted = mixsim.predict(mixsim.parse(text))
    assert predicted.permittivity == pytest.approx(np.full(39, 6.15 * (1 + 0.0025j)))
    assert [caution.kind for caution in predicted.warnings] == ["not-causal"]
    narrow = text.replace('"1 GHz"', '"18 GHz"')
    assert mixsim.predict(mixsim.parse(narrow)).warnings == ()


@pytest.mark.parametrize(
    ("pair", "found"),
    [
        ('value = 6.15, loss_tangent = 0.0025, at = "10 GHz"', "value without model"),
        ('value = 6.15, loss_tangent = 0.0025, model = "wide-band-debye"', "value without at"),
        ('value = 6.15, at = "10 GHz", model = "constant"', "value without loss_tangent"),
        ('value = 6.15, infinity = 2.0, loss_tangent = 0.1, model = "constant"', "infinity beside value"),
        ('value = 6.15, loss_tangent = 0.1, model = "constant", low = "1 kHz"', "low without"),
        ("infinity = 2.0, loss_tangent = 0.1", "loss_tangent without value"),
        ('value = 6.15, loss_tangent = -0.1, model = "constant"', "out of range"),
        ('value = 6.15, loss_tangent = 0.1, model = "wide-band"', "'wide-band'"),
    ],
)
def test_pairs_that_are_none(pair: str, found: str) -> None:
    with pytest.raises(mixsim.BadInput) as refused:
        mixsim.parse(f'host.material = "m"\nmaterials.m.permittivity = {{ {pair} }}\n')
    (fault,) = refused.value.faults
    assert found in fault.found
    assert fault.allowed
