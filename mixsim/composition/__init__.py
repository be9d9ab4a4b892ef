"""From what a batch sheet says (weight, volume, phr, dopant concentration) to what physics needs."""

from mixsim.composition.concentration import (
    number_density_from_mole_fraction,
    number_density_from_weight_fraction,
)
from mixsim.composition.loading import BASES, Basis, Loading, volume_fractions

__all__ = [
    "BASES",
    "Basis",
    "Loading",
    "number_density_from_mole_fraction",
    "number_density_from_weight_fraction",
    "volume_fractions",
]
