"""What stands in a volume of the mixture."""

from __future__ import annotations

import numpy as np
import pytest

import mixsim

TEXT = """
host.material = "h"
inclusions.a = { material = "a", volume_fraction = "20 %" }
inclusions.b = { material = "b", phr = 30 }
voids.volume_fraction = "5 %"
materials.h = { density = "1.2 g/cm^3", permittivity.infinity = 3.0 }
materials.a = { density = "4.0 g/cm^3", permittivity.infinity = 8.0 }
materials.b = { density = "2.0 g/cm^3", permittivity.infinity = 5.0 }
"""


def test_masses_and_volumes_close() -> None:
    held = mixsim.parse(TEXT).compile().composition({"voids.volume_fraction": np.array([0.0, 0.05])})
    volumes, weights = held.volume_fractions, held.weight_fractions
    assert list(volumes) == ["host", "a", "b", "voids"]
    assert weights is not None
    assert held.density is not None
    assert sum(volumes.values()) == pytest.approx([1.0, 1.0])
    assert sum(weights.values()) == pytest.approx([1.0, 1.0])
    assert weights["b"] / weights["host"] == pytest.approx([0.3, 0.3])
    assert weights["voids"].tolist() == [0.0, 0.0]
    masses = 1200 * volumes["host"] + 4000 * volumes["a"] + 2000 * volumes["b"]
    assert held.density == pytest.approx(masses)


def test_without_every_density_there_is_no_weight() -> None:
    text = 'host.material = "h"\nmaterials.h.permittivity.infinity = 3.0\n'
    held = mixsim.parse(text).compile().composition({})
    assert held.weight_fractions is None
    assert held.density is None


def test_a_measured_density_is_that_of_the_mixture() -> None:
    held = mixsim.load("configs/glycerol-coolant.toml").compile().composition({})
    assert held.density == pytest.approx(1099.3)
    assert held.weight_fractions is not None
    assert held.weight_fractions["glycerol"] == pytest.approx(0.4)
    assert sum(held.volume_fractions.values()) > 1.0


def test_dopants_by_number() -> None:
    text = """
        host.material = "h"
        materials.h = { density = "2.5 g/cm^3", permittivity.infinity = 2.25 }
        [dopants.ion]
        weight_fraction = "1 %"
        molar_mass = "0.05 kg/mol"
        terms.t = { model = "lorentz", strength = 0.1, resonance = "2 eV", damping = "0.1 eV" }
    """
    held = mixsim.parse(text).compile().composition({"dopants.ion.weight_fraction": np.array([0.0, 0.02])})
    assert held.number_densities["ion"] == pytest.approx([0.0, 0.02 * 2500 / 0.05 * 6.02214076e23])


def test_another_rule_leaves_the_composition() -> None:
    mixture = mixsim.parse(TEXT).compile()
    other = mixture.with_rule("bruggeman")
    assert other.rule.name == "bruggeman"
    assert other.composition({}).density == mixture.composition({}).density
    assert other.limits({}).static != mixture.limits({}).static
