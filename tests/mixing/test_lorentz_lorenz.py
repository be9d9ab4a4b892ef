"""Lorentz–Lorenz: glycerol in water, the printed sum, extremes and inverses."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from mixsim.errors import Refusal
from mixsim.mixing import SPHERE, random_spheroid
from mixsim.mixing.lorentz_lorenz import fraction_from, inclusion_from, lorentz_lorenz

passive = st.builds(complex, st.floats(-20, 20), st.floats(1e-2, 20))


@pytest.mark.parametrize(
    ("weight", "n", "density"),
    [
        pytest.param(*row, id=f"glycerol-water, CRC Handbook (memory): {row[0]:.0%}")
        for row in [
            (0.1, 1.3448, 1.0221), (0.3, 1.3707, 1.0727), (0.5, 1.3981, 1.1263), (0.7, 1.4279, 1.1813),
            (0.9, 1.4584, 1.2351),
        ]
    ],
)  # fmt: skip
def test_glycerol_in_water_with_the_measured_density(weight: float, n: float, density: float) -> None:
    partial = [(1 - weight) * density / 0.9982, weight * density / 1.2611]
    z = lorentz_lorenz([1.3330**2, 1.4735**2], fractions=partial)
    assert np.sqrt(z.real) == pytest.approx(n, abs=5e-4)


@given(st.lists(passive, min_size=1, max_size=4), st.floats(0.2, 1.1))
def test_is_the_printed_sum(phases: list[complex], total: float) -> None:
    fractions = [total / len(phases)] * len(phases)
    p = sum(f * (e - 1) / (e + 2) for e, f in zip(phases, fractions, strict=True))
    z = lorentz_lorenz(phases, fractions=fractions)
    assert z == pytest.approx((1 + 2 * p) / (1 - p), rel=1e-9)


def test_extremes_and_its_silent_host() -> None:
    assert lorentz_lorenz([2.25, 1e150], fractions=[0.7, 0.3]) == pytest.approx(
        (0.7 * 3 * 2.25 / 4.25 + 0.9) / (0.7 * 3 / 4.25), rel=1e-12
    )
    assert lorentz_lorenz([2.25, 1e150], fractions=[0.0, 1.0]) == pytest.approx(1e150, rel=1e-12)
    assert lorentz_lorenz([2.0], fractions=[0.0]) == 1.0
    assert lorentz_lorenz([2.0, 8.0], fractions=[0.5, 0.5]) != pytest.approx(
        2 * lorentz_lorenz([1.0, 4.0], fractions=[0.5, 0.5]), rel=0.05
    )


@given(passive, passive, st.floats(0.05, 1.0))
def test_inverses_undo_the_rule(host: complex, grain: complex, f: float) -> None:
    z = lorentz_lorenz([host, grain], fractions=[1 - f, f])
    if abs(grain - host) > 0.1 and abs(z) < 1e3:
        assert fraction_from(z, host=host, inclusion=grain) == pytest.approx(f, rel=1e-6)
        assert inclusion_from(z, host=host, fraction=f) == pytest.approx(grain, rel=1e-5)


def test_other_shapes_are_refused() -> None:
    with pytest.raises(Refusal, match="lorentz-lorenz takes spheres only"):
        lorentz_lorenz([1.0, 2.0], fractions=[0.5, 0.5], depolarisations=[SPHERE, random_spheroid(3.0)])
