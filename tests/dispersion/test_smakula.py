"""Bands given by their peak absorption: right to first order in their strength, with Smakula's constants."""

from __future__ import annotations

import math

import numpy as np
import pytest

import mixsim
from mixsim.dispersion.descriptions import oscillators_from_absorption_peak
from mixsim.errors import BadInput
from mixsim.units import ELEMENTARY_CHARGE, REDUCED_PLANCK

EV = ELEMENTARY_CHARGE / REDUCED_PLANCK


def test_constant_of_the_equation() -> None:
    """N f = 1.288e17 n/(n² + 2)² α W for Lorentz bands, in cm and eV; 0.8728e17 for Gauss [memory]."""
    found = oscillators_from_absorption_peak(absorption_peak=100.0, damping=EV, background_index=1.49)
    constant = found * 1e-6 * (1.49**2 + 2) ** 2 / 1.49
    assert constant == pytest.approx(1.288e17, rel=1e-3)
    assert constant / math.sqrt(math.pi * math.log(2.0)) == pytest.approx(0.8728e17, rel=1e-3)


def peak(term: str, host: str = "") -> float:
    """Absorption at the peak of a doped glass of index 1.5, less that of the glass [1/cm]."""
    recipe = mixsim.parse(f"""
        band.values = ["2 eV"]
        host.material = "glass"
        dopants.ion.terms.line = {{ {term} }}
        materials.glass.index = {{ model = "constant", n = 1.5 }}
        {host}
    """)
    return float(mixsim.predict(recipe).quantity("absorption_coefficient")[0]) / 100.0


@pytest.mark.parametrize(
    "shape",
    [
        'model = "lorentz", resonance = "2 eV", damping = "0.1 eV"',
        'model = "lorentz", resonance = "620 nm", damping = "30 nm"',
        'model = "gaussian", resonance = "2 eV", width = "0.1 eV"',
    ],
    ids=["lorentz", "lorentz in wavelength", "gaussian"],
)
def test_the_peak_comes_back_to_first_order(shape: str) -> None:
    """The error is at least of second order: fourfold less when the line halves, or better."""
    strong, weak = (peak(f'{shape}, absorption_peak = "{alpha} 1/cm"') for alpha in (4000, 2000))
    if "nm" in shape:
        assert weak == pytest.approx(2000, rel=2e-3)
        return
    assert abs(weak - 2000) < 2000 * 2e-3
    assert 3.5 < (strong - 4000) / (weak - 2000) < 9.0


def test_a_dopant_takes_the_index_of_its_host() -> None:
    line = 'model = "lorentz", resonance = "2 eV", damping = "0.1 eV", absorption_peak = "5 1/cm"'
    assert peak(line) == pytest.approx(5.0, rel=1e-6)
    assert peak(f"{line}, background_index = 1.5") == pytest.approx(peak(line), rel=1e-12)


def test_equivalent_to_a_plasma_frequency() -> None:
    text = """
        band.values = ["2.02 eV"]
        host.material = "glass"
        materials.glass.permittivity = {{ infinity = 2.25, terms.line = {{ model = "lorentz", {} }} }}
    """
    plasma = np.sqrt(299792458.0 * 1.5 * 1e4 * 0.1 * EV) / EV
    ours, theirs = (
        mixsim.predict(
            mixsim.parse(text.format(f'resonance = "2 eV", damping = "0.1 eV", {words}'))
        ).permittivity
        for words in ('absorption_peak = "100 1/cm", background_index = 1.5', f'plasma = "{plasma} eV"')
    )
    assert ours == pytest.approx(theirs, rel=1e-12)


def test_a_term_of_a_material_needs_its_index() -> None:
    with pytest.raises(BadInput, match="background_index"):
        mixsim.parse("""
            host.material = "glass"
            [materials.glass.permittivity]
            infinity = 2.25
            [materials.glass.permittivity.terms]
            line = { model = "lorentz", resonance = "2 eV", damping = "1 eV", absorption_peak = "1 1/cm" }
        """)
