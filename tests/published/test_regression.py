"""Certified data sets of non-linear regression through the fitting core: values and standard deviations."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
import pytest
import reference

from mixsim.analysis.least_squares import fit

Floats = np.ndarray
Model = Callable[[Floats, list[Floats]], Floats]
MODELS: dict[str, Model] = {
    "Misra1a": lambda x, b: b[0] * (1 - np.exp(-b[1] * x)),
    "BoxBOD": lambda x, b: b[0] * (1 - np.exp(-b[1] * x)),
    "MGH09": lambda x, b: b[0] * (x**2 + x * b[1]) / (x**2 + x * b[2] + b[3]),
    "MGH10": lambda x, b: b[0] * np.exp(b[1] / (x + b[2])),
    "Rat42": lambda x, b: b[0] / (1 + np.exp(b[1] - b[2] * x)),
    "Eckerle4": lambda x, b: b[0] / b[1] * np.exp(-0.5 * ((x - b[2]) / b[1]) ** 2),
    "Thurber": lambda x, b: (
        (b[0] + b[1] * x + b[2] * x**2 + b[3] * x**3) / (1 + b[4] * x + b[5] * x**2 + b[6] * x**3)
    ),
    "Rat43": lambda x, b: b[0] / (1 + np.exp(b[1] - b[2] * x)) ** (1 / b[3]),
}


@reference.case("nonlinear-regression")
def test_certified_values_and_standard_deviations(ref: reference.Row) -> None:
    """From the nearer start of each set; ranges from an eighth to eight times the certified value."""
    x, y = np.array(ref["x"]), np.array(ref["y"])
    certified, start = np.array(ref["value"]), np.array(ref["start"])
    reach = np.array([max(8.0, 1.1 * s / c, 1.1 * c / s) for s, c in zip(start, certified, strict=True)])
    low, high = certified / reach, certified * reach

    def values(t: Floats) -> Floats:
        return low * (high / low) ** t

    def residual(t: Floats) -> Floats:
        b = values(t)[..., np.newaxis]
        return MODELS[ref["id"]](x, [b[..., i, :] for i in range(len(certified))]) - y

    with np.errstate(all="ignore"):
        found = fit(residual, np.log(start / low) / np.log(high / low))
    freedom = len(x) - len(certified)
    covariance = np.linalg.inv(found.slopes.T @ found.slopes) * found.cost / freedom
    std = np.sqrt(np.diag(covariance)) * np.abs(values(found.place) * np.log(high / low))
    assert found.cost == pytest.approx(ref["sum_of_squares"], rel=1e-8)
    assert values(found.place) == pytest.approx(certified, rel=2e-6)
    assert std == pytest.approx(np.array(ref["std"]), rel=1e-4)
