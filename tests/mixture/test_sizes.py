"""Numbers that depend on the size of the grains: damping by their surface."""

from __future__ import annotations

import numpy as np
import pytest

import mixsim
from mixsim.mixing import maxwell_garnett

EV = 1.602176634e-19 * 2 * np.pi / 6.62607015e-34
OMEGA = np.linspace(2.5, 4.0, 7) * EV
TEXT = """
host.material = "glass"
inclusions.small = { material = "metal", volume_fraction = "1 %", diameter = "4 nm" }
inclusions.large = { material = "metal", volume_fraction = "2 %", diameter = "40 nm" }
materials.glass.permittivity.infinity = 2.25
materials.metal.permittivity.infinity = 4.0
[materials.metal.permittivity.terms.free]
model = "drude"
plasma = "9 eV"
damping = "0.02 eV"
fermi_velocity = "1.4e6 m/s"
surface_scattering = 0.8
"""


def metal(diameter: float) -> np.ndarray:
    damping = 0.02 * EV + 0.8 * 1.4e6 / (diameter / 2)
    return 4.0 - (9 * EV) ** 2 / (OMEGA**2 + 1j * damping * OMEGA)


def test_one_metal_in_two_sizes_is_two_phases() -> None:
    mixture = mixsim.parse(TEXT).compile()
    expected = maxwell_garnett([2.25, metal(4e-9), metal(40e-9)], fractions=[0.97, 0.01, 0.02])
    np.testing.assert_allclose(mixture.response({}, OMEGA).permittivity, expected, rtol=1e-12)
    sizes = np.array([2e-9, 4e-9, 8e-9])
    swept = mixture.response({"inclusions.small.diameter": sizes}, OMEGA).permittivity
    for size, found in zip(sizes, swept, strict=True):
        expected = maxwell_garnett([2.25, metal(size), metal(40e-9)], fractions=[0.97, 0.01, 0.02])
        np.testing.assert_allclose(found, expected, rtol=1e-12)
    alone = mixture.constituents(OMEGA)
    np.testing.assert_allclose(alone["small"].permittivity, metal(4e-9), rtol=1e-12)


def test_the_same_metal_as_a_host_has_its_bulk_damping() -> None:
    host = mixsim.parse(
        TEXT.split("inclusions.small")[0].replace("glass", "metal") + TEXT[TEXT.index("materials.glass") :]
    )
    found = host.compile().response({}, OMEGA).permittivity
    np.testing.assert_allclose(found, metal(np.inf), rtol=1e-12)


@pytest.mark.parametrize(
    ("old", "new", "path", "found", "allowed"),
    [
        (
            ', diameter = "4 nm"',
            "",
            "inclusions.small",
            "diameter is missing",
            "terms.free.fermi_velocity needs it",
        ),
        (
            "surface_scattering = 0.8",
            "",
            "materials.metal.permittivity.terms.free",
            "fermi_velocity is given without surface_scattering",
            "surface_scattering beside it",
        ),
        (
            'fermi_velocity = "1.4e6 m/s"',
            "",
            "materials.metal.permittivity.terms.free",
            "surface_scattering has no part",
            "with fermi_velocity",
        ),
        (
            '"1.4e6 m/s"',
            '"1.4e6 Hz"',
            "materials.metal.permittivity.terms.free.fermi_velocity",
            "Hz",
            "m/s",
        ),
    ],
)
def test_what_is_missing_is_said(old: str, new: str, path: str, found: str, allowed: str) -> None:
    with pytest.raises(mixsim.BadInput) as refused:
        mixsim.parse(TEXT.replace(old, new, 1))
    (fault,) = refused.value.faults
    assert fault.path == path
    assert found in fault.found
    assert allowed in fault.allowed
