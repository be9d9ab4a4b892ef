"""Units: constants, dimensions, quantities as people write them. Loads only the standard library."""

from __future__ import annotations

from mixsim.units.constants import (
    AVOGADRO,
    BOLTZMANN,
    ELECTRON_MASS,
    ELEMENTARY_CHARGE,
    PLANCK,
    REDUCED_PLANCK,
    SPEED_OF_LIGHT,
    VACUUM_PERMEABILITY,
    VACUUM_PERMITTIVITY,
)
from mixsim.units.dimensions import DIMENSIONS, Dimension, Unit, accepted_units, dimension_named
from mixsim.units.quantity import (
    Leaf,
    from_unit,
    kind_of_axis,
    read,
    show,
    spectral_from,
    spectral_to,
    to_unit,
    written_unit,
)

__all__ = [
    "AVOGADRO",
    "BOLTZMANN",
    "DIMENSIONS",
    "ELECTRON_MASS",
    "ELEMENTARY_CHARGE",
    "PLANCK",
    "REDUCED_PLANCK",
    "SPEED_OF_LIGHT",
    "VACUUM_PERMEABILITY",
    "VACUUM_PERMITTIVITY",
    "Dimension",
    "Leaf",
    "Unit",
    "accepted_units",
    "dimension_named",
    "from_unit",
    "kind_of_axis",
    "read",
    "show",
    "spectral_from",
    "spectral_to",
    "to_unit",
    "written_unit",
]
