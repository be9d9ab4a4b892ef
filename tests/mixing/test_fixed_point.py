"""The general self-consistent root: what the theory says of it, for phases that no plain Newton survives."""

from __future__ import annotations

import numpy as np
import pytest

from mixsim.mixing import fixed_point as module
from mixsim.mixing.fixed_point import fixed_point

COUNT = 10000
THIRD = np.asarray(1 / 3)


def draw(kind: str, phases: int) -> tuple[np.ndarray, np.ndarray]:
    rng = np.random.default_rng(8)
    shape = (phases, COUNT)
    turn = np.exp(1j * rng.uniform(0, np.pi, shape))
    e = {
        "sixty decades": 10 ** rng.uniform(-30, 30, shape) * turn,
        "loss-free, sixteen decades": 10 ** rng.uniform(-8, 8, shape) * rng.choice([-1, 1], shape) + 0j,
        "resonances": rng.normal(size=shape) * 10 + 1j * 10 ** rng.uniform(-6, 1, shape),
    }[kind]
    weights = rng.random(shape)
    return e, weights / weights.sum(axis=0)


def holds(z: np.ndarray, e: np.ndarray, f: np.ndarray) -> None:
    residual = sum(f * (e - z) / (e + 2 * z))
    slope = 6 * z**2 * sum(f / (e + 2 * z) ** 2)
    assert np.max(np.abs(residual)) < 1e-8  # nearly a double root costs half the digits, at a few points
    assert np.quantile(np.abs(residual), 0.999) < 1e-11
    assert np.all(z.imag >= -1e-12 * np.abs(z))
    assert np.max(np.abs(slope)) < 1 + 1e-6


@pytest.mark.parametrize("phases", [3, 6])
@pytest.mark.parametrize("kind", ["sixty decades", "loss-free, sixteen decades", "resonances"])
def test_root_is_the_attracting_one_of_the_half_plane(kind: str, phases: int) -> None:
    e, f = draw(kind, phases)
    holds(fixed_point(list(e), fractions=list(f), factors=[THIRD] * phases), e, f)


@pytest.mark.parametrize(
    ("kind", "phases"), [("loss-free, sixteen decades", 4), ("resonances", 4), ("sixty decades", 2)]
)
def test_all_roots_of_the_polynomial_lead_to_the_same(kind: str, phases: int) -> None:
    e, f = (array[:, :2000] for array in draw(kind, phases))
    floor, real = np.zeros(2000), np.full(2000, kind.startswith("loss-free"))
    with np.errstate(all="ignore"):
        third = np.full((phases, 1), 1 / 3)
        grains = module._Grains(e, f, third, (f / third).sum(axis=0), (f / (1 - third)).sum(axis=0))
        z = module._among_all_roots(grains, floor, real)
    holds(z, e, f)
    np.testing.assert_allclose(
        z, fixed_point(list(e), fractions=list(f), factors=[THIRD] * phases), rtol=1e-6
    )


def test_blocks_join_and_nan_stays_where_it_is() -> None:
    values = np.full(40000, 4.0 + 0j)
    values[[5, 20000, 39999]] = np.nan
    thirds = [THIRD] * 3
    z = fixed_point([np.asarray(1 + 0j), values, values], fractions=thirds, factors=thirds)
    assert np.flatnonzero(np.isnan(z)).tolist() == [5, 20000, 39999]
    assert np.nanmax(np.abs(z - (1 + np.sqrt(3)))) < 1e-14
