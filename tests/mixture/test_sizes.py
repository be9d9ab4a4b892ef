"""What depends on the size of grains: damping by their surface, waves, distributions of diameter."""

from __future__ import annotations

import numpy as np
import pytest

import mixsim
from mixsim.mixing import dipole_grain, inside_factor, maxwell_garnett

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


LIGHT = 299792458.0
GRAIN = """
host.material = "resin"
inclusions.grain = {{ material = "{material}", volume_fraction = "10 %", diameter = "{diameter}", {more} }}
materials.resin.permittivity.infinity = 2.25
materials.iron.permittivity.infinity = 1.0
materials.iron.permittivity.terms.free = {{ model = "conduction", conductivity = "1e6 S/m" }}
materials.iron.permeability.infinity = 50.0
materials.copper.permittivity.infinity = 1.0
materials.copper.permittivity.terms.free = {{ model = "conduction", conductivity = "5.8e7 S/m" }}
materials.gold.permittivity.infinity = 9.0
materials.gold.permittivity.terms.free = {{ model = "drude", plasma = "9 eV", damping = "0.07 eV" }}
materials.salt.permittivity.infinity = 5.0
materials.salt.permittivity.terms.ions = {{ model = "conduction", conductivity = "2 S/m" }}
"""


def grains(material: str, diameter: str, more: str = 'waves = "inside"') -> mixsim.mixture.Mixture:  # type: ignore[name-defined]
    return mixsim.parse(GRAIN.format(material=material, diameter=diameter, more=more)).compile()


def test_eddy_currents_in_copper_spheres_are_those_of_the_textbook() -> None:
    """A conducting sphere in an even alternating field, by its dipole for any skin depth.

    α = −(3/2)[1 − 3/(k a)² + 3 cot(k a)/(k a)] in volumes, with k = (1 + i)/δ.
    """
    omega = 2 * np.pi * np.array([1e5, 1e6, 1e7, 1e8])
    radius = 25e-6
    mixture = grains("copper", "50 µm")
    found = mixture.response({}, omega)
    depth = np.sqrt(2 / (omega * 4e-7 * np.pi * 5.8e7))
    ka = (1 + 1j) * radius / depth
    dipole = -1.5 * (1 - 3 / ka**2 + 3 / ka / np.tan(ka))
    expected = (1 + 2 * 0.1 * dipole / 3) / (1 - 0.1 * dipole / 3)
    np.testing.assert_allclose(found.permeability, expected, rtol=1e-4)
    assert mixture.magnetic and np.all(found.permeability.imag > 0)


@pytest.mark.parametrize("waves", ["inside", "dipole"])
def test_waves_by_their_formulas(waves: str) -> None:
    omega = 2 * np.pi * np.geomspace(1e9, 3e10, 5)
    found = grains("iron", "40 µm", f'waves = "{waves}"').response({}, omega)
    metal = 1 + 1e6j / (8.8541878188e-12 * omega)
    half = omega * 20e-6 / LIGHT
    factor = inside_factor(np.sqrt(metal) * np.sqrt(50) * half)
    e, m = factor * metal, factor * 50.0
    if waves == "dipole":
        e = dipole_grain(e, host=2.25, size=1.5 * half)
        m = dipole_grain(m, host=1.0, size=1.5 * half)
    expected = maxwell_garnett([2.25, e], fractions=[0.9, 0.1])
    np.testing.assert_allclose(found.permittivity, expected, rtol=1e-9)
    expected = maxwell_garnett([1.0, m], fractions=[0.9, 0.1])
    np.testing.assert_allclose(found.permeability, expected, rtol=1e-9)


def test_far_below_the_skin_depth_there_are_no_waves() -> None:
    with_waves = grains("gold", "1 nm", 'waves = "dipole"').response({}, OMEGA)
    without = grains("gold", "1 nm", 'waves = "none"').response({}, OMEGA)
    np.testing.assert_allclose(with_waves.permittivity, without.permittivity, rtol=1e-3)
    np.testing.assert_allclose(with_waves.permeability, 1.0, atol=1e-4)


def test_larger_spheres_resonate_redder_and_scatter() -> None:
    omega = np.linspace(1.8, 3.2, 141) * EV
    places = [
        float(omega[np.argmax(grains("gold", d, 'waves = "dipole"').response({}, omega).permittivity.imag)])
        for d in ("2 nm", "50 nm", "80 nm")
    ]
    assert places[0] > places[1] > places[2]


@pytest.mark.parametrize("waves", ["inside", "dipole"])
def test_static_limits_with_waves(waves: str) -> None:
    """Iron in resin is a perfect conductor as ω → 0; a magnet it stays. Nothing is known at the other end."""
    mixture = grains("iron", "4 µm", f'waves = "{waves}"')
    limits = mixture.limits({})
    assert limits.static == pytest.approx(2.25 * 1.2 / 0.9, rel=1e-12)
    assert limits.static_permeability == pytest.approx((1 + 0.2 * 49 / 52) / (1 - 0.1 * 49 / 52), rel=1e-12)
    assert np.isnan(limits.high_frequency)
    low = mixture.response({}, np.array([1e-3]))
    assert low.permittivity[0] == pytest.approx(limits.static, rel=1e-9)
    assert low.permeability[0] == pytest.approx(limits.static_permeability, rel=1e-9)


def test_the_plateau_of_salt_water_drops_in_a_host_that_conducts() -> None:
    leak = (
        "materials.resin.permittivity.infinity = 2.25",
        "materials.resin.permittivity.infinity = 2.25\nmaterials.resin.permittivity.terms.leak = "
        '{ model = "conduction", conductivity = "1 S/m" }',
    )
    text = GRAIN.format(material="salt", diameter="30 mm", more='waves = "inside"').replace(*leak)
    mixture = mixsim.parse(text).compile()
    limits = mixture.limits({})
    assert limits.conductivity == pytest.approx((1 + 2 * 0.1 / 4) / (1 - 0.1 / 4), rel=1e-12)
    low = mixture.response({}, np.array([1e2])).permittivity[0]
    assert low.real == pytest.approx(limits.plateau, rel=1e-4)
    still = mixsim.parse(text.replace('"inside"', '"none"')).compile().limits({}).plateau
    assert limits.plateau < 0.9 * still


def test_a_distribution_of_diameters_damps_by_the_mean_of_its_polarisabilities() -> None:
    spread = TEXT.replace(
        'inclusions.large = { material = "metal", volume_fraction = "2 %", diameter = "40 nm" }', ""
    )
    spread = spread.replace('diameter = "4 nm"', 'diameter = "4 nm", diameter_spread = 0.4')
    found = mixsim.parse(spread).compile().response({}, OMEGA).permittivity
    places, weights = np.polynomial.hermite_e.hermegauss(30)
    each = [metal(4e-9 * np.exp(0.4 * z)) for z in places]
    mean = sum(w * (e - 2.25) / (e + 4.5) for w, e in zip(weights, each, strict=True)) / weights.sum()
    np.testing.assert_allclose(found, 2.25 * (1 + 0.02 * mean) / (1 - 0.01 * mean), rtol=1e-6)
    swept = mixsim.parse(spread).compile()
    batch = {"inclusions.small.diameter_spread": np.array([0.0, 0.4]), "inclusions.small.diameter": 5e-9}
    alone = TEXT.replace('"2 %", diameter = "40 nm"', '"0 %", diameter = "40 nm"').replace('"4 nm"', '"5 nm"')
    expected = mixsim.parse(alone).compile().response({}, OMEGA).permittivity
    np.testing.assert_allclose(swept.response(batch, OMEGA).permittivity[0], expected, rtol=1e-11)


def test_even_layers_on_grains_of_many_sizes() -> None:
    """<(1 + 2t/d)³> of a log-normal has a closed form: its moments are exp(n²s²/2)/d₀ⁿ."""
    text = GRAIN.format(
        material="salt",
        diameter="20 nm",
        more='diameter_spread = 0.3, coating = { material = "resin", thickness = "4 nm" }',
    )
    volumes = mixsim.parse(text).compile().composition({}).volume_fractions
    ratio, square = 8.0 / 20.0, 0.09
    moments = [
        3 * ratio * np.exp(square / 2),
        3 * ratio**2 * np.exp(2 * square),
        ratio**3 * np.exp(4.5 * square),
    ]
    assert volumes["grain.coating"] == pytest.approx(0.1 * sum(moments), rel=1e-4)
    assert sum(volumes.values()) == pytest.approx(1.0, rel=1e-14)
