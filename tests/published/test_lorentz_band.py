"""How a permittivity curve reads: steps, strengths, and where it rises and falls."""

from __future__ import annotations

import evaluator
import numpy as np
import pytest
import reference
from hypothesis import given
from hypothesis import strategies as st

UNIT = 1e15  # rad/s; any one frequency
BANDS = """
    host = {{ material = "matrix" }}
    materials.matrix.permittivity.infinity = {infinity!r}
    [materials.matrix.permittivity.terms]
    {lines}
"""


def bands(*terms: tuple[float, float, float], infinity: float = 1.0) -> str:
    """Recipe of Lorentz bands given by plasma, resonance and damping, in units of UNIT."""
    lines = [
        f'b{i} = {{ model = "lorentz", plasma = "{p * UNIT!r} rad/s", resonance = "{r * UNIT!r} rad/s", '
        f'damping = "{d * UNIT!r} rad/s" }}'
        for i, (p, r, d) in enumerate(terms)
    ]
    return BANDS.format(infinity=infinity, lines="\n    ".join(lines))


@reference.case("lorentz-sum-rule", "one band")
def test_static_step_and_f_sum(ref: reference.Row) -> None:
    """ε_s − ε∞ = ω_p²/ω0² = (2/π)∫ε″dω/ω, and ∫ω ε″ dω = (π/2) ω_p²; a finite window misses what it says."""
    plasma, resonance = ref["plasma"], ref["resonance"]
    text = bands((plasma, resonance, ref["damping"]))
    limits = evaluator.mixture(text).limits({})
    assert limits.static == pytest.approx(ref["static"], rel=1e-12)
    assert limits.static - limits.high_frequency == pytest.approx((plasma / resonance) ** 2, rel=1e-12)

    def share(start: float, stop: float) -> tuple[float, float]:
        x = np.linspace(start, stop, 200_001)[1:]
        loss = evaluator.permittivity(text, UNIT * x).imag
        step = 2 / np.pi * np.trapezoid(loss / x, x)
        return step / (ref["static"] - 1), np.trapezoid(loss * x, x) / ref["f_sum"]

    for part in ref["windows"]:
        static_share, f_share = share(part["from"], part["to"])
        assert static_share == pytest.approx(part["static_share"], abs=6e-4)
        assert f_share == pytest.approx(part["f_share"], abs=6e-4)
    tail = plasma**2 * ref["damping"] / 2000  # ∫ω ε″ beyond x0 is ω_p² Γ/x0
    assert share(0.0, 2000.0)[1] == pytest.approx(1 - tail / ref["f_sum"], abs=1e-4)


term = st.tuples(st.floats(0.1, 3.0), st.floats(0.2, 20.0), st.floats(0.01, 0.9)).map(
    lambda t: (t[0], t[1], t[2] * t[1])
)


@reference.case("lorentz-sum-rule", "normal dispersion")
@given(terms=st.lists(term, min_size=1, max_size=4))
def test_permittivity_rises_but_inside_a_band(
    ref: reference.Row, terms: list[tuple[float, float, float]]
) -> None:
    """One band falls only where |ω² − ω0²| < Γ ω0 (the extremes of its ε′ lie at the ends), so a sum of bands
    rises wherever no band is. Common practice of reading a curve; exact for Lorentz bands."""
    x = np.geomspace(1e-2, 1e2, 2001)
    falls = np.zeros(x.size, dtype=bool)
    for _, resonance, damping in terms:
        falls |= np.abs(x**2 - resonance**2) < 1.02 * damping * resonance
    level = evaluator.permittivity(bands(*terms), UNIT * x).real
    clear = ~(falls[1:] | falls[:-1])
    assert np.all(np.diff(level)[clear] > -1e-12)
    if len(terms) == 1:
        inside = np.abs(x**2 - terms[0][1] ** 2) < 0.98 * terms[0][2] * terms[0][1]
        assert np.all(np.diff(level)[inside[1:] & inside[:-1]] < 0)


@reference.case("lorentz-sum-rule", "normal dispersion")
def test_each_band_leaves_its_step_behind(ref: reference.Row) -> None:
    """Between well-parted bands the level is ε∞ plus the steps of all bands above it."""
    terms = [(0.5, 0.5, 0.02), (300.0, 200.0, 5.0), (6e4, 1e5, 2e3)]
    steps = [(p / r) ** 2 for p, r, _ in terms]
    text = bands(*terms, infinity=2.0)
    levels = evaluator.permittivity(text, UNIT * np.array([1e-2, 10.0, 4e3, 1e8])).real
    expected = [2 + sum(steps), 2 + sum(steps[1:]), 2 + steps[2], 2.0]
    assert levels == pytest.approx(expected, rel=6e-3)
    limits = evaluator.mixture(text).limits({})
    assert limits.static == pytest.approx(expected[0], rel=1e-12)
    assert limits.high_frequency == pytest.approx(2.0, rel=1e-12)
