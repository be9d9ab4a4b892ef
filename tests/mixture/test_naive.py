"""The evaluator against plain complex numbers, which share no line of code with it."""

from __future__ import annotations

import cmath
import math

import numpy as np
import pytest

import mixsim


def test_a_naive_transcription() -> None:
    """Two kinds of grain and voids in a doped host, in plain complex numbers, one frequency at a time."""
    text = """
        host.material = "glass"
        [inclusions.a]
        material = "metal"
        volume_fraction_of_solids = "3 %"
        [inclusions.b]
        material = "ceramic"
        volume_fraction = "12 %"
        shape = { kind = "spheroid", aspect_ratio = 2.0 }
        [voids]
        volume_fraction = "4 %"
        [dopants.ion]
        weight_fraction = "0.5 %"
        molar_mass = "74.93 g/mol"
        ions_per_formula = 2
        local_field = "virtual-cavity"
        terms.red = { model = "lorentz", strength = 0.01, resonance = "2.0 eV", damping = "0.2 eV" }
        [dopants.counted]
        number_density = "3e20 cm^-3"
        terms.green = { model = "lorentz", strength = 0.02, resonance = "2.4 eV", damping = "0.3 eV" }
        [dopants.molar]
        mole_fraction = "0.8 %"
        molar_mass = "81.4 g/mol"
        terms.blue = { model = "lorentz", strength = 0.03, resonance = "2.8 eV", damping = "0.1 eV" }
        terms.given = { model = "lorentz", step = 1e-4, resonance = "1.6 eV", damping = "0.1 eV" }
        [materials.glass]
        density = "2.5 g/cm^3"
        molar_mass = "60.1 g/mol"
        index = { model = "sellmeier", strengths = [1.2, 0.9], resonance_wavelengths = ["0.1 µm", "10 µm"] }
        [materials.metal]
        permittivity.susceptibility = 3.0
        [materials.metal.permittivity.terms.free]
        model = "drude"
        carrier_density = "1e22 cm^-3"
        effective_mass = 1.1
        damping = "0.1 eV"
        [materials.ceramic]
        index = { model = "cauchy", a = 2.0, b = "0.01 µm^2" }
    """
    light, ev = 299792458.0, 1.602176634e-19 * 2 * math.pi / 6.62607015e-34
    square = 1.602176634e-19**2 / (8.8541878188e-12 * 9.1093837139e-31)
    prolate = math.sqrt(1 - 1 / 4.0)
    along = (1 - prolate**2) / prolate**2 * (math.atanh(prolate) / prolate - 1)

    def glass(w: float) -> float:
        um = 2e6 * math.pi * light / w
        return 1 + 1.2 * um**2 / (um**2 - 0.01) + 0.9 * um**2 / (um**2 - 100.0)

    avogadro = 6.02214076e23
    by_weight = 0.005 * 2500.0 * avogadro * 2 / 0.07493
    by_mole = 0.008 * 2500.0 * avogadro / (0.008 * 0.0814 + 0.992 * 0.0601)
    felt = ((glass(2.0 * ev) + 2) / 3) ** 2
    bands = (  # squared plasma frequency, resonance, damping
        (square * by_weight * 0.01 * felt, 2.0 * ev, 0.2 * ev),
        (square * 3e26 * 0.02, 2.4 * ev, 0.3 * ev),
        (square * by_mole * 0.03, 2.8 * ev, 0.1 * ev),
        (1e-4 * (1.6 * ev) ** 2, 1.6 * ev, 0.1 * ev),
    )
    compiled = mixsim.parse(text).compile()
    f_a, f_b, f_v = 0.03 * 0.96, 0.12, 0.04
    for w in (1.5e15, 2.9e15, 3.04e15, 4.0e15):
        h: complex = glass(w)
        for strength, resonance, damping in bands:
            h += strength / (resonance**2 - w * w - 1j * damping * w)
        metal = 4.0 - square * 1e28 / 1.1 / (w * w + 0.1j * ev * w)
        um = 2e6 * math.pi * light / w
        ceramic = (2.0 + 0.01 / um**2) ** 2
        above: complex = 0.0
        below: complex = 1.0 - f_a - f_b - f_v
        for f, e, factors in (
            (f_a, metal, (1 / 3,) * 3),
            (f_b, ceramic, (along, (1 - along) / 2, (1 - along) / 2)),
            (f_v, 1.0, (1 / 3,) * 3),
        ):
            field = sum(h / (h + n * (e - h)) for n in factors) / 3
            above += f * e * field
            below += f * field
        expected = (above + (1.0 - f_a - f_b - f_v) * h) / below
        found = compiled.response({}, np.array([w])).permittivity[0]
        assert cmath.isclose(found, expected, rel_tol=1e-11)
    densities = compiled.composition({}).number_densities
    assert densities == pytest.approx({"ion": by_weight, "counted": 3e26, "molar": by_mole}, rel=1e-12)
