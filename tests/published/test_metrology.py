"""Worked examples of the guides to uncertainty (JCGM 100, 101) and to conformity (JCGM 106)."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np
import pytest
import reference
from scipy.special import ndtr

from mixsim.analysis.uncertainty import (
    Uncertain,
    conformance_probability,
    coverage_interval,
    draw,
    first_order,
    monte_carlo,
    risks,
)

Values = Mapping[str, np.ndarray]
GAUGE = {
    "standard": Uncertain(50.000623e6, 25.0),  # nm
    "difference": Uncertain(215.0, np.sqrt(5.8**2 + 3.9**2 + 6.7**2)),
    "expansion": Uncertain(11.5e-6, 1.2e-6),
    "temperature": Uncertain(-0.1, 0.41),
    "expansion difference": Uncertain(0.0, 0.58e-6),
    "temperature difference": Uncertain(0.0, 0.029),
}


def length(x: Values) -> np.ndarray:
    warmth = x["expansion difference"] * x["temperature"] + x["expansion"] * (x["temperature difference"])
    return (x["standard"] * (1.0 - warmth) + x["difference"])[:, np.newaxis]


@reference.case("metrology", "end gauge")
def test_end_gauge(ref: reference.Row) -> None:
    """First order misses what two products of small numbers add; the Monte Carlo has it."""
    assert first_order(length, GAUGE).std[0] == pytest.approx(ref["std_nm"], abs=0.1)
    trials = monte_carlo(length, GAUGE, seed=1, trials=400_000)
    assert trials.std[0] == pytest.approx(ref["std_second_order_nm"], abs=0.15)


@reference.case("metrology", "resistance and reactance")
def test_correlated_readings(ref: reference.Row) -> None:
    """Correlations belong in: without them the uncertainty of the resistance is 0.19 in place of 0.07."""
    inputs = {name: Uncertain(*ref[name]) for name in ("volt", "ampere", "radian")}
    correlation = {tuple(pair.split(",")): value for pair, value in ref["correlation"].items()}

    def impedance(x: Values) -> np.ndarray:
        modulus = x["volt"] / x["ampere"]
        parts = [modulus * np.cos(x["radian"]), modulus * np.sin(x["radian"]), modulus]
        return np.stack(parts, axis=-1)

    doubt = first_order(impedance, inputs, correlation)
    centre = impedance({name: np.array([number.value]) for name, number in inputs.items()})[0]
    assert centre == pytest.approx(ref["value"], abs=2e-3)
    assert doubt.std == pytest.approx(ref["std"], abs=1e-4)
    matrix = doubt.covariance / np.outer(doubt.std, doubt.std)
    assert [matrix[0, 1], matrix[0, 2], matrix[1, 2]] == pytest.approx(
        ref["correlation_of_results"], abs=2e-4
    )
    trials = monte_carlo(impedance, inputs, correlation=correlation, seed=2, trials=200_000)
    assert trials.std == pytest.approx(ref["std"], rel=0.01)


@reference.case("metrology", "four rectangular numbers")
def test_four_rectangular_numbers(ref: reference.Row) -> None:
    inputs = {name: Uncertain(0.0, 1.0, rectangular=True) for name in "abcd"}
    trials = monte_carlo(lambda x: sum(x.values())[:, np.newaxis], inputs, seed=3, trials=500_000)
    assert (trials.high[0] - trials.low[0]) / 2 == pytest.approx(ref["half_width"], abs=0.02)
    assert trials.std[0] == pytest.approx(2.0, rel=5e-3)


@reference.case("metrology", "mass calibration")
def test_mass_calibration(ref: reference.Row) -> None:
    """Its two most doubtful numbers enter as a product: first order reports three quarters of the doubt."""

    def limits(low: float, high: float) -> Uncertain:
        return Uncertain((low + high) / 2, (high - low) / np.sqrt(12.0), rectangular=True)

    inputs = {
        "reference": Uncertain(100_000.0, 0.050),
        "added": Uncertain(1.234, 0.020),
        "air": limits(1.10, 1.30),
        "weight": limits(7000.0, 9000.0),
        "standard": limits(7950.0, 8050.0),
    }

    def excess(x: Values) -> np.ndarray:
        lift = 1.0 + (x["air"] - 1.2) * (1.0 / x["weight"] - 1.0 / x["standard"])
        return ((x["reference"] + x["added"]) * lift - 100_000.0)[:, np.newaxis]

    assert first_order(excess, inputs).std[0] == pytest.approx(ref["std_first_order"], abs=1e-4)
    trials = monte_carlo(excess, inputs, seed=4, trials=400_000)
    assert trials.mean[0] == pytest.approx(ref["value"], abs=1e-3)
    assert trials.std[0] == pytest.approx(ref["std"], abs=4e-4)
    assert [trials.low[0], trials.high[0]] == pytest.approx(ref["interval"], abs=2e-3)


@reference.case("metrology", "comparison loss, 0", "comparison loss, 0.010", "comparison loss, 0.050")
def test_comparison_loss(ref: reference.Row) -> None:
    """A sum of squares near zero: the shortest interval begins at what cannot be passed."""
    inputs = {"first": Uncertain(ref["first"], 0.005), "second": Uncertain(0.0, 0.005)}
    drawn = draw(inputs, 400_000, np.random.default_rng(5))
    loss = drawn["first"] ** 2 + drawn["second"] ** 2
    assert loss.mean() == pytest.approx(ref["value"], rel=0.01)
    assert loss.std() == pytest.approx(ref["std"], rel=0.01)
    shortest = coverage_interval(loss, shortest=True)
    assert shortest == pytest.approx(ref["shortest_interval"], abs=0.03 * (ref["value"] + ref["std"]))


@reference.case("metrology", "breakdown voltage", "lower limit", "two limits")
def test_probability_of_conformity(ref: reference.Row) -> None:
    found = conformance_probability(
        ref["estimate"], ref["std"], lower=ref.get("lower"), upper=ref.get("upper")
    )
    assert found == pytest.approx(ref["probability"], abs=6e-4)


@reference.case("metrology", "resistors")
def test_risks_of_user_and_maker(ref: reference.Row) -> None:
    """Against the printed figures, and against plain trials of items and measurements."""
    lower, upper = ref["limits"]
    for guard, consumer, producer in zip(ref["guard"], ref["consumer"], ref["producer"], strict=True):
        found = risks(
            lower=lower,
            upper=upper,
            guard=guard,
            process_mean=0.0,
            process_std=ref["process_std"],
            std=ref["std"],
        )
        assert found == pytest.approx((consumer, producer), abs=6e-6)


def test_a_limit_far_off_keeps_the_tail() -> None:
    """Nine uncertainties below the lower limit: one less a number near one would be no more than noise."""
    found = conformance_probability(0.0, 1.0, lower=9.0, upper=None)
    assert found == pytest.approx(float(ndtr(-9.0)), rel=1e-12)
