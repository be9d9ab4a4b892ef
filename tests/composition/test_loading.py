"""Loading bases: the same mixture said in each way comes out the same."""

from __future__ import annotations

from typing import Any

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from mixsim.composition import Loading, volume_fractions

densities = st.floats(500.0, 20000.0)
parts = st.lists(st.tuples(st.floats(0.001, 0.3), densities), min_size=1, max_size=3)


def said_otherwise(
    basis: str, volumes: list[float], rhos: list[float], host: float, host_rho: float, voids: float
) -> list[Any]:
    """The same amounts on another basis, by the definition of each in words."""
    masses = [f * rho for f, rho in zip(volumes, rhos, strict=True)]
    total = sum(masses) + host * host_rho
    return {
        "volume_fraction": volumes,
        "volume_fraction_of_solids": [f / (1.0 - voids) for f in volumes],
        "weight_fraction": [mass / total for mass in masses],
        "phr": [100.0 * mass / (host * host_rho) for mass in masses],
    }[basis]


@given(parts, densities, st.floats(0.0, 0.1), st.data())
def test_every_mix_of_bases_gives_the_same_volumes(
    constituents: list[tuple[float, float]], host_rho: float, voids: float, data: st.DataObject
) -> None:
    volumes, rhos = [f for f, _ in constituents], [rho for _, rho in constituents]
    volumes = [f * 0.85 / max(0.85, sum(volumes)) for f in volumes]
    host = 1.0 - voids - sum(volumes)
    names = ("volume_fraction", "volume_fraction_of_solids", "weight_fraction", "phr")
    loadings = []
    for i, rho in enumerate(rhos):
        basis = data.draw(st.sampled_from(names))
        amount = said_otherwise(basis, volumes, rhos, host, host_rho, voids)[i]
        loadings.append(Loading(basis, amount, rho))  # type: ignore[arg-type]
    found = volume_fractions(loadings, host_density=host_rho, voids=voids)
    assert [float(f) for f in found] == pytest.approx([host, *volumes, voids], rel=1e-9, abs=1e-12)
    assert float(sum(found)) == pytest.approx(1.0)


def test_measured_density_takes_the_place_of_additive_volumes() -> None:
    """40 % by weight of glycerol at a measured 1.0993 g/cm^3: partial volumes m_k/ρ_k, which exceed one."""
    host, solute, voids = volume_fractions(
        [Loading("weight_fraction", 0.4, 1261.1)], host_density=998.2, mixture_density=1099.3
    )
    assert float(solute) == pytest.approx(0.4 * 1099.3 / 1261.1)
    assert float(host) == pytest.approx(0.6 * 1099.3 / 998.2)
    assert float(host + solute + voids) > 1.0


def test_measured_density_with_volumes_given_outright() -> None:
    host, filler, _ = volume_fractions(
        [Loading("volume_fraction", 0.3, 4000.0)], host_density=1200.0, mixture_density=1950.0
    )
    assert float(filler) == 0.3
    assert float(host) == pytest.approx((1950.0 - 1200.0) / 1200.0)


def test_arrays_broadcast_and_nothing_is_clipped() -> None:
    amounts = np.array([[0.0], [0.5], [1.2]])
    host, filler, _ = volume_fractions(
        [Loading("volume_fraction", amounts, None)], voids=np.array([0.0, 0.1])
    )
    assert host.shape == (3, 2)
    assert host[2, 1] == pytest.approx(-0.3)
    assert np.all(filler == amounts)


def test_a_missing_density_is_said() -> None:
    with pytest.raises(ValueError, match="density"):
        volume_fractions([Loading("phr", 20.0, None)], host_density=1000.0)
    with pytest.raises(ValueError, match="density"):
        volume_fractions([Loading("phr", 20.0, 4000.0)])
