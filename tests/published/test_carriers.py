"""Plasma frequency, mobility, scattering time: the carriers of a conducting oxide and of metals."""

from __future__ import annotations

import evaluator
import numpy as np
import pytest
import reference

from mixsim.dispersion import descriptions
from mixsim.units import ELECTRON_MASS, ELEMENTARY_CHARGE, REDUCED_PLANCK, SPEED_OF_LIGHT

OXIDE = """
    host = {{ material = "oxide" }}
    materials.oxide.permittivity.infinity = {infinity}
    [materials.oxide.permittivity.terms.carriers]
    model = "drude"
    {lines}
"""


def oxide(infinity: float = 3.9, **parameters: object) -> str:
    return OXIDE.format(infinity=infinity, lines="\n".join(f"{key} = {v!r}" for key, v in parameters.items()))


@pytest.mark.parametrize("end", [0, 1], ids=["low end", "high end"])
@reference.case("conducting-oxide", "indium tin oxide, ends of the series")
def test_carriers_mobility_and_plasma_frequency_agree(ref: reference.Row, end: int) -> None:
    """The oxide said by carriers and mobility, and by plasma frequency and damping, is the same oxide: it
    catches angular against plain frequency, cm against m, a mass left out, a mobility read as a rate."""
    mass, mobility, tau = ref["effective_mass"], ref["mobility_cm2_v_s"][end], ref["collision_time_fs"][end]
    by_carriers = oxide(
        carrier_density=f"{ref['carrier_density_cm3'][end]} cm^-3",
        effective_mass=mass,
        mobility=f"{mobility} cm^2/V/s",
    )
    by_plasma = oxide(plasma=f"{ref['plasma_trad_s'][end]} Trad/s", collision_time=f"{tau} fs")
    omega = 1e12 * np.array([500.0, 1000.0, 1500.0])
    electronic = 3.9
    ours = evaluator.permittivity(by_carriers, omega) - electronic
    theirs = evaluator.permittivity(by_plasma, omega) - electronic
    assert ours == pytest.approx(theirs, rel=2 * ref["tolerance"])  # ω_p enters squared
    plasma = descriptions.plasma_from_carriers(
        carrier_density=1e6 * ref["carrier_density_cm3"][end], effective_mass=mass
    )
    assert plasma == pytest.approx(1e12 * ref["plasma_trad_s"][end], rel=ref["tolerance"])
    scattering = 1e-4 * mobility * mass * ELECTRON_MASS / ELEMENTARY_CHARGE
    assert scattering == pytest.approx(1e-15 * tau, rel=ref["tolerance"])
    low, high = ref["collision_time_printed_fs"]
    assert low <= 1e15 * scattering <= high


@reference.case("conducting-oxide", "screened plasma wavelength")
def test_screened_and_unscreened_are_two_numbers(ref: reference.Row) -> None:
    """ε′ of the oxide crosses zero at the screened plasma wavelength, 1.97 times that of its carriers."""
    series = reference.row("conducting-oxide", "indium tin oxide, ends of the series")
    for end in (0, 1):
        text = oxide(ref["infinity"], plasma=f"{series['plasma_trad_s'][end]} Trad/s", damping="1e-6 eV")
        grid = np.linspace(1200.0, 3000.0, 18001)
        level = evaluator.permittivity(text, evaluator.from_um(grid / 1000)).real
        crossing = np.interp(0.0, -level, grid)
        assert crossing == pytest.approx(ref["screened_nm"][end], rel=ref["tolerance"])
        unscreened = 2e9 * np.pi * SPEED_OF_LIGHT / (1e12 * series["plasma_trad_s"][end])
        assert unscreened == pytest.approx(ref["unscreened_nm"][end], rel=ref["tolerance"])


@reference.case("free-electrons", "1e24 carriers per cubic metre", "silver", "aluminium")
def test_plasma_energy_of_free_electrons(ref: reference.Row) -> None:
    plasma = descriptions.plasma_from_carriers(carrier_density=ref["carrier_density_m3"], effective_mass=1.0)
    energy = 1e3 * plasma * REDUCED_PLANCK / ELEMENTARY_CHARGE
    assert energy == pytest.approx(ref["plasma_mev"], rel=3e-4)


@reference.case("free-electrons", "gold in the infrared")
def test_gold_in_the_infrared(ref: reference.Row) -> None:
    text = oxide(1.0, plasma=f"{ref['plasma_cm1']} cm^-1", damping=f"{ref['damping_cm1']} cm^-1")
    wavenumber = 100 * evaluator.TURN * SPEED_OF_LIGHT
    at, turn = evaluator.permittivity(text, wavenumber * np.array([ref["at_cm1"], ref["damping_cm1"]]))
    assert at == pytest.approx(complex(ref["real"], ref["imag"]), abs=2e-3)
    assert (1 - turn.real, turn.imag) == pytest.approx((ref["at_damping"], ref["at_damping"]), abs=0.1)
    conductivity = evaluator.mixture(text).limits({}).conductivity
    assert conductivity == pytest.approx(ref["conductivity_s_m"], rel=2e-3)
