"""Descriptions: every way to give a term gives the same term."""

from __future__ import annotations

import numpy as np
import pytest

from mixsim.dispersion import TERMS, descriptions, width_from_wavelength
from mixsim.errors import Refusal
from mixsim.units import (
    ELECTRON_MASS,
    ELEMENTARY_CHARGE,
    SPEED_OF_LIGHT,
    VACUUM_PERMITTIVITY,
    read,
    spectral_from,
)

PLASMA, RESONANCE, DAMPING, MASS, TIME = 2.4e15, 3.1e15, 1.8e14, 0.35, 8.27e-12
DENSITY = PLASMA**2 * VACUUM_PERMITTIVITY * ELECTRON_MASS / ELEMENTARY_CHARGE**2
LIGHT = 299_792_458.0
LINE = {"resonance": RESONANCE, "damping": DAMPING}

SHAPES = {
    "cole-cole": {"alpha": 0.2},
    "cole-davidson": {"beta": 0.6},
    "havriliak-negami": {"alpha": 0.2, "beta": 0.6},
}
PLAIN = {  # terms with one way to give each number
    "wide-band-debye": {"step": 0.4, "low": 1e4, "high": 1e12},
    "jonscher": {"amplitude": 2.0, "exponent": 0.6, "reference_frequency": 1e6},
    "landau-lifshitz-gilbert": {"saturation": 5e10, "resonance": 2e10, "gilbert_damping": 0.02},
    "gaussian": {"amplitude": 0.3, "resonance": RESONANCE, "width": 4e14},
    "tauc-lorentz": {"amplitude": 1e17, "resonance": 5e15, "damping": 2e15, "gap": 2e15},
}

# One term and the numbers of each other data sheet, worked out here from the plain definitions.
SAME = [
    ("lorentz", {"plasma": PLASMA, **LINE}),
    ("lorentz", {"plasma": 2 * PLASMA, "strength": 0.25, **LINE}),
    ("lorentz", {"step": (PLASMA / RESONANCE) ** 2, **LINE}),
    (
        "lorentz",
        {"absorption_peak": PLASMA**2 / (LIGHT * 1.5 * DAMPING), "background_index": 1.5, **LINE},
    ),
    (
        "gaussian",
        {
            "absorption_peak": 0.3 * RESONANCE / (LIGHT * 1.5),
            "background_index": 1.5,
            "resonance": RESONANCE,
            "width": 4e14,
        },
    ),
    ("lorentz", {"number_density": DENSITY, **LINE}),
    ("lorentz", {"number_density": 4 * DENSITY, "strength": 0.25, **LINE}),
    ("drude", {"plasma": PLASMA, "damping": DAMPING}),
    ("drude", {"plasma": PLASMA / 3, "strength": 9.0, "damping": DAMPING}),
    ("drude", {"plasma": PLASMA, "collision_time": 1 / DAMPING}),
    ("drude", {"carrier_density": DENSITY * MASS, "effective_mass": MASS, "damping": DAMPING}),
    (
        "drude",
        {
            "carrier_density": DENSITY * MASS,
            "effective_mass": MASS,
            "mobility": ELEMENTARY_CHARGE / (DAMPING * MASS * ELECTRON_MASS),
        },
    ),
    (
        "drude",
        {
            "conductivity": VACUUM_PERMITTIVITY * PLASMA**2 / DAMPING,
            "collision_time": 1 / DAMPING,
        },
    ),
    ("debye", {"step": 73.16, "relaxation_time": TIME}),
    ("debye", {"step": 73.16, "relaxation_frequency": spectral_from(1 / (2 * np.pi * TIME), "Hz")}),
    ("conduction", {"conductivity": 0.3}),
    *[
        (name, {"step": 2.0, **time, **shape})
        for name, shape in SHAPES.items()
        for time in (
            {"relaxation_time": TIME},
            {"relaxation_frequency": spectral_from(1 / (2 * np.pi * TIME), "Hz")},
        )
    ],
    ("brendel-bormann", {"plasma": 2 * PLASMA, "strength": 0.25, "width": 3e14, **LINE}),
    ("brendel-bormann", {"number_density": DENSITY, "width": 3e14, **LINE}),
    *PLAIN.items(),
]
CANONICAL = {
    "lorentz": {"plasma": PLASMA, **LINE},
    "drude": {"plasma": PLASMA, "damping": DAMPING},
    "debye": {"step": 73.16, "relaxation_time": TIME},
    "conduction": {"conductivity": 0.3},
    "brendel-bormann": {"plasma": PLASMA, "width": 3e14, **LINE},
    **{name: {"step": 2.0, "relaxation_time": TIME, **shape} for name, shape in SHAPES.items()},
    **PLAIN,
}


@pytest.mark.parametrize(("name", "given"), SAME, ids=[f"{n}: {', '.join(g)}" for n, g in SAME])
def test_equivalent_descriptions_agree(name: str, given: dict[str, float]) -> None:
    term = TERMS[name]
    defaults = {key: p.default for key, p in term.parameters.items() if p.default is not None}
    values = {**defaults, **given}
    canonical = {}
    for key, route in term.resolve(given).items():
        inputs = {needed: values[needed] for needed in route.needs}
        canonical[key] = route.function(**inputs) if route.function else inputs[route.key]
    assert canonical == pytest.approx(CANONICAL[name], rel=1e-12)
    omega = np.geomspace(1e9, 1e16, 7)
    np.testing.assert_allclose(
        term.function(omega, **canonical), term.function(omega, **CANONICAL[name]), rtol=1e-12
    )


def test_every_route_of_the_register_is_compared() -> None:
    compared = {(name, key) for name, given in SAME for key in given}
    of_grains = {
        (name, key)
        for name, term in TERMS.items()
        for route in term.in_grains.values()
        for key in route.needs
    }
    every = {(name, key) for name, term in TERMS.items() for key in term.parameters}
    assert compared == every - {(name, key) for name, key in of_grains if key not in TERMS[name].canonical}


def test_a_surface_stops_carriers_as_well() -> None:
    """1.39e6 m/s through a grain of 10 nm radius: 1.39e14 1/s beside 1e14 1/s of the bulk, for A = 1."""
    found = descriptions.damping_in_grain(
        damping=1e14, fermi_velocity=1.39e6, surface_scattering=[0.0, 0.75, 1.0], diameter=20e-9
    )
    assert found == pytest.approx([1e14, 2.0425e14, 2.39e14], rel=1e-14)


def test_width_in_wavelength_is_the_difference_of_its_two_ends() -> None:
    def ends(centre: float, width: float) -> float:
        return spectral_from(centre - width / 2, "nm") - spectral_from(centre + width / 2, "nm")

    resonance = spectral_from(np.array([500.0, 600.0]), "nm")
    width = np.array([[1e-3], [40.0], [900.0]])
    value = width_from_wavelength(width * 1e-9, resonance=resonance)
    truth = [[ends(centre, float(full)) for centre in (500.0, 600.0)] for full in width[:, 0]]
    np.testing.assert_allclose(value, truth, rtol=1e-9)
    narrow = 2 * np.pi * SPEED_OF_LIGHT * 1e-12 / (500e-9) ** 2
    assert value[0, 0] == pytest.approx(narrow, rel=1e-9)
    leaf = read("40 nm", "rate")
    assert leaf.dimension == "wavelength width"
    assert width_from_wavelength(leaf.value, resonance=resonance[1]) == pytest.approx(value[1, 1])


def test_width_in_wavelength_must_leave_a_band() -> None:
    resonance = spectral_from(np.array([300.0, 600.0]), "nm")
    with pytest.raises(Refusal, match=r"700 nm about 300 nm; .* 600 nm"):
        width_from_wavelength(700e-9, resonance=resonance)
    assert np.isnan(width_from_wavelength(np.nan, resonance=resonance)).all()
