"""Wiener and Hashin–Shtrikman bounds: textbook numbers, order, refusals."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from mixsim.errors import Refusal
from mixsim.mixing import hashin_shtrikman, wiener
from mixsim.mixing.bruggeman import bruggeman


@pytest.mark.parametrize(
    ("f", "grain", "host", "expected"),
    [
        pytest.param(*row, id=f"textbook formula, computed: f={row[0]} {row[1]} in {row[2]}")
        for row in [
            (0.1, 10, 1, (1.098901, 1.9, 1.243243, 1.649485)),
            (0.3, 10, 1, (1.369863, 3.7, 1.870968, 3.076923)),
            (0.5, 10, 1, (1.818182, 5.5, 2.8, 4.705882)),
            (0.3, 80, 3, (4.217926, 26.1, 6.305246, 20.359613)),
            (0.5, 3, 1, (1.5, 2.0, 1.75, 1.875)),
        ]
    ],
)
def test_textbook_values(f: float, grain: float, host: float, expected: tuple[float, ...]) -> None:
    found = (*wiener([host, grain], [1 - f, f]), *hashin_shtrikman([host, grain], [1 - f, f]))
    assert found == pytest.approx(expected, abs=1e-6)


three = st.lists(st.floats(1e-3, 1e3), min_size=3, max_size=3)


@given(three, st.lists(st.floats(0.01, 1), min_size=3, max_size=3), st.sampled_from([2, 3]))
def test_bounds_nest_and_hold_bruggeman(phases: list[float], parts: list[float], dimensions: int) -> None:
    fractions = [part / sum(parts) for part in parts]
    low, high = wiener(phases, fractions)
    lower, upper = hashin_shtrikman(phases, fractions, dimensions=dimensions)
    z = bruggeman(phases, fractions=fractions, dimensions=dimensions)
    assert z.imag == 0.0
    chain = np.array([low, lower, z.real, upper, high])
    assert np.all(chain[:-1] <= chain[1:] * (1 + 1e-11))


def test_bounds_broadcast_forget_absent_phases_and_pass_nan() -> None:
    f = np.array([0.0, 0.2, np.nan])[:, None]
    phases = np.array([2.0, 3.0, 4.0, 5.0])
    lower, upper = hashin_shtrikman([1.0, phases, 1e6], [1 - f, f, 0.0])
    assert lower.shape == upper.shape == (3, 4)
    np.testing.assert_allclose(upper[1], hashin_shtrikman([1.0, phases], [0.8, 0.2])[1], rtol=1e-14)
    assert np.all(lower[0] == 1.0) and np.all(upper[0] == 1.0) and np.isnan(lower[2]).all()
    assert np.isnan(wiener([1.0, np.nan], [0.5, 0.5])).all()
    assert wiener([1.0 + 0j, 2.0], [0.5, 0.5])[1] == 1.5


@pytest.mark.parametrize("bounds", [wiener, hashin_shtrikman])
@pytest.mark.parametrize(("bad", "named"), [(2 + 1j, r"\(2\+1j\)"), (-1.0, "-1.0"), (0.0, "0.0")])
def test_complex_or_negative_phases_are_refused_by_value(bounds: object, bad: complex, named: str) -> None:
    with pytest.raises(Refusal, match=f"permittivity {named}; .*real positive"):
        bounds([1.0, bad], [0.5, 0.5])  # type: ignore[operator]
