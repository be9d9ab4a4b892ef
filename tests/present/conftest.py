"""Answers to be written and drawn; every number is invented."""

from __future__ import annotations

import pytest

import mixsim
from mixsim.analysis import Inversion, Prediction, varied

FILM = """
title = "Test film"
host.material = "binder"
inclusions.grain = { material = "oxide", volume_fraction = "10 %" }
[materials.binder]
permittivity.infinity = 2.2
permittivity.terms.slow = { model = "debye", step = 0.3, relaxation_frequency = "1 GHz" }
[materials.oxide]
permittivity.infinity = 4.0
[materials.oxide.permittivity.terms.lattice]
model = "lorentz"
plasma = "1300 cm^-1"
resonance = "500 cm^-1"
damping = "40 cm^-1"
[band]
from = "300 cm^-1"
to = "3000 cm^-1"
points = 31
spacing = "log"
[measured]
static = "2.915 ± 0.010"
high_frequency = "2.345 ± 0.002"
[unknowns]
"inclusions.grain.volume_fraction" = ["0 %", "40 %"]
"materials.oxide.permittivity.terms.lattice.plasma" = ["600 cm^-1", "2000 cm^-1"]
"""
NEEDLES = """
title = "Aligned needles"
host.material = "matrix"
[inclusions.rod]
material = "metal"
volume_fraction = "10 %"
shape = { kind = "spheroid", aspect_ratio = 5 }
orientation = "aligned"
[materials]
matrix.permittivity.infinity = 2.25
metal.permittivity.infinity = 4.0
metal.permittivity.terms.free = { model = "drude", plasma = "1.5 eV", damping = "0.1 eV" }
[band]
from = "0.2 eV"
to = "1.5 eV"
points = 21
"""
MAGNET = """
title = "Absorber"
host.material = "rubber"
inclusions.iron = { material = "powder", volume_fraction = "30 %" }
[materials]
rubber.permittivity.infinity = 3.0
powder.permittivity.infinity = 10.0
powder.permeability.infinity = 1.0
powder.permeability.terms.spin = { model = "debye", step = 2.0, relaxation_frequency = "3 GHz" }
[band]
from = "1 GHz"
to = "10 GHz"
points = 11
"""
RECIPES = {"film": FILM, "needles": NEEDLES, "magnet": MAGNET}
LOADING, PLASMA = "inclusions.grain.volume_fraction", "materials.oxide.permittivity.terms.lattice.plasma"
IRON, ROD = "inclusions.iron.volume_fraction", "inclusions.rod.volume_fraction"
BAND = 'from = "300 cm^-1"\nto = "3000 cm^-1"\npoints = 31\nspacing = "log"'


class Answers:
    """Makes answers by name."""

    loading, plasma, iron, rod = LOADING, PLASMA, IRON, ROD

    def recipe(self, name: str = "film", *changes: tuple[str, str]) -> mixsim.Recipe:
        text = RECIPES[name]
        for old, new in changes:
            assert old in text
            text = text.replace(old, new)
        return mixsim.parse(text)

    def prediction(self, name: str = "film", *changes: tuple[str, str]) -> Prediction:
        return mixsim.predict(self.recipe(name, *changes))

    def sweep(
        self, *vary: tuple[str, str, str, int], name: str = "film", log: bool = False, band: str = ""
    ) -> Prediction:
        recipe = self.recipe(name, *([(BAND, band)] if band else []))
        return mixsim.sweep(recipe, [varied(recipe, *item, log=log) for item in vary])

    def inversion(self, *changes: tuple[str, str]) -> Inversion:
        return mixsim.invert(self.recipe("film", *changes))


@pytest.fixture(scope="session")
def answers() -> Answers:
    return Answers()
