"""The closed form against principal values by quadrature, whole spectra, and its own limits."""

from __future__ import annotations

from itertools import pairwise

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import quad

from mixsim.dispersion import TERMS, kramers_kronig
from mixsim.errors import Refusal

NODES = np.array([1.0, 2.0, 2.5, 7.0])
LOSS = np.array([0.5, 1.0, 3.0, 0.2])
CORNERS = np.array([0.0, *NODES, 7.0 * 7.0 / 2.5])


def by_quadrature(omega: float) -> float:
    """2/π P∫ s ε″(s)/(s² − ω²) ds, the pole taken by Cauchy weights, the rest panel by panel."""

    def regular(s: float) -> float:
        return s * float(np.interp(s, CORNERS, [0.0, *LOSS, 0.0])) / (s + omega)

    near = 0.9 * min(abs(omega - corner) for corner in CORNERS)
    low, high = omega - near, omega + near
    total = quad(regular, low, high, weight="cauchy", wvar=omega, epsabs=1e-12)[0]
    ends = sorted({low, high, *(c for c in CORNERS if not low < c < high)})
    for a, b in pairwise(ends):
        if not (a >= low and b <= high):
            total += quad(lambda s: regular(s) / (s - omega), a, b, epsabs=1e-12)[0]
    return 2.0 / np.pi * float(total)


@pytest.mark.parametrize("omega", [0.3, 1.3, 2.2, 6.0, 11.0, 15.0])
def test_principal_value(omega: float) -> None:
    assert kramers_kronig(omega, nodes=NODES, loss=LOSS) == pytest.approx(by_quadrature(omega), abs=1e-10)


@pytest.mark.parametrize("node", NODES)
def test_finite_and_continuous_at_the_nodes(node: float) -> None:
    here = kramers_kronig(node, nodes=NODES, loss=LOSS)
    beside = kramers_kronig(node * (1.0 + 1e-9 * np.array([-1.0, 1.0])), nodes=NODES, loss=LOSS)
    np.testing.assert_allclose(beside, here, atol=1e-6)  # a kink of the loss is x ln|x| here


def test_ends() -> None:
    slow, fast = kramers_kronig([0.0, np.inf], nodes=NODES, loss=LOSS)
    static = sum(
        quad(lambda s: np.interp(s, CORNERS, [0.0, *LOSS, 0.0]) / s, a, b)[0] for a, b in pairwise(CORNERS)
    )
    assert slow == pytest.approx(2.0 / np.pi * static, rel=1e-10)
    assert fast == 0.0
    assert kramers_kronig(1e-9, nodes=NODES, loss=LOSS) == pytest.approx(slow, rel=1e-12)


def test_far_above_it_is_the_sum_rule_to_all_digits() -> None:
    """ε′ − ε∞ → −(2/π) ∫ s ε″ ds / ω²: the logarithms of the closed form cancel to their last digit there."""
    moment = sum(
        quad(lambda s: s * np.interp(s, CORNERS, [0.0, *LOSS, 0.0]), a, b)[0] for a, b in pairwise(CORNERS)
    )
    for omega in (1e4, 1e9, 1e15):
        found = kramers_kronig(omega, nodes=NODES, loss=LOSS) * omega**2
        assert found == pytest.approx(-2.0 / np.pi * moment, rel=1e-6)


@pytest.mark.parametrize(
    ("name", "parameters"),
    [
        ("lorentz", {"plasma": 2.0, "resonance": 1.0, "damping": 0.2}),
        ("debye", {"step": 3.0, "relaxation_time": 1.0}),
    ],
)
def test_whole_spectra(name: str, parameters: dict[str, float]) -> None:
    nodes = np.geomspace(1e-5, 1e5, 6001)
    omega = np.geomspace(0.01, 100.0, 37)
    exact = TERMS[name].function(omega, **parameters)
    loss = TERMS[name].function(nodes, **parameters).imag
    found = kramers_kronig(omega, nodes=nodes, loss=loss)
    np.testing.assert_allclose(found, exact.real, atol=1e-4 * np.abs(exact).max())


@given(
    steps=st.lists(st.floats(1e-3, 5.0), min_size=2, max_size=12),
    omega=st.floats(1e-4, 1e4),
    scale=st.floats(1e-12, 1e16),
)
def test_scale_and_sum(steps: list[float], omega: float, scale: float) -> None:
    """Only ratios of frequencies matter, and the real part of a sum is the sum."""
    nodes = np.cumsum(steps)
    loss = np.cos(np.arange(nodes.size))
    found = kramers_kronig(omega, nodes=nodes, loss=loss)
    parts = [kramers_kronig(omega, nodes=nodes, loss=loss * unit) for unit in np.eye(nodes.size)]
    room = 1e-9 * (1.0 + np.max(np.abs(parts)))
    assert sum(parts) == pytest.approx(found, abs=room)
    assert kramers_kronig(omega * scale, nodes=nodes * scale, loss=loss) == pytest.approx(found, abs=room)


def test_shapes_and_refusals() -> None:
    assert np.ndim(kramers_kronig(1.5, nodes=NODES, loss=LOSS)) == 0
    assert kramers_kronig(np.ones((2, 3)), nodes=NODES, loss=LOSS).shape == (2, 3)
    assert np.isnan(kramers_kronig(np.nan, nodes=NODES, loss=LOSS))
    for nodes, loss in (([1.0], [1.0]), ([1.0, 2.0], [1.0]), ([2.0, 1.0], [1.0, 1.0]), ([0.0, 1.0], [1, 1])):
        with pytest.raises(Refusal):
            kramers_kronig(1.0, nodes=nodes, loss=loss)
