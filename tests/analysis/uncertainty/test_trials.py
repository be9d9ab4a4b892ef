"""Draws and trials: distributions, limits that cannot be passed, when to stop."""

from __future__ import annotations

import numpy as np
import pytest

import mixsim
from mixsim.analysis.uncertainty import Uncertain, draw, monte_carlo, uncertain_leaves
from mixsim.errors import Refusal


def test_a_number_stays_where_it_can_lie() -> None:
    """A loss of 0.01 ± 0.02 is not negative; what is drawn is the normal distribution cut at zero."""
    number = Uncertain(0.01, 0.02, minimum=0.0)
    values = draw({"loss": number}, 200_000, np.random.default_rng(0))["loss"]
    assert values.min() >= 0.0
    # mean of a normal distribution cut at zero: μ + σ φ(α)/(1 − Φ(α)), α = −μ/σ
    assert values.mean() == pytest.approx(0.01 + 0.02 * 0.50916, rel=0.01)


def test_correlated_numbers() -> None:
    inputs = {"a": Uncertain(1.0, 0.1), "b": Uncertain(5.0, 2.0), "c": Uncertain(0.0, 1.0)}
    drawn = draw(inputs, 100_000, np.random.default_rng(1), {("a", "b"): 0.8, ("b", "c"): -0.3})
    matrix = np.corrcoef([drawn[name] for name in "abc"])
    assert [matrix[0, 1], matrix[1, 2], matrix[0, 2]] == pytest.approx([0.8, -0.3, 0.0], abs=0.02)


def test_correlations_that_cannot_hold_together() -> None:
    inputs = {name: Uncertain(0.0, 1.0) for name in "abc"}
    impossible = {("a", "b"): 1.0, ("b", "c"): 1.0, ("a", "c"): -1.0}
    with pytest.raises(Refusal, match="contradict each other"):
        draw(inputs, 10, np.random.default_rng(0), impossible)


def test_more_digits_take_more_trials() -> None:
    inputs = {"x": Uncertain(0.0, 0.3)}
    two = monte_carlo(lambda x: x["x"][:, None], inputs, digits=1, block=1000)
    three = monte_carlo(lambda x: x["x"][:, None], inputs, digits=2, block=1000)
    never = monte_carlo(lambda x: x["x"][:, None], inputs, digits=4, block=1000, most=20_000)
    assert two.stable and three.stable and two.trials < three.trials
    assert not never.stable and never.trials == 20_000


def test_trials_without_an_answer_are_counted() -> None:
    inputs = {"x": Uncertain(0.0, 1.0)}
    found = monte_carlo(lambda x: np.sqrt(np.where(x["x"] < 0, np.nan, x["x"]))[:, None], inputs)
    assert found.lost == pytest.approx(0.5, abs=0.01)
    assert np.isfinite(found.std).all()


def test_limits_in_a_recipe_are_a_rectangular_distribution() -> None:
    recipe = mixsim.parse("""
        host.material = "polyethylene"
        inclusions.filler = { material = "alumina", volume_fraction = "20 % ± 1 % (limits)" }
        voids.volume_fraction = "1 % ± 2 % (k=2)"
    """)
    inputs = uncertain_leaves(recipe)
    filler, voids = inputs["inclusions.filler.volume_fraction"], inputs["voids.volume_fraction"]
    assert filler.rectangular and filler.std == pytest.approx(0.01 / np.sqrt(3.0))
    assert not voids.rectangular and voids.std == pytest.approx(0.01) and voids.minimum == 0.0
