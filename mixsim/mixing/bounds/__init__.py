"""Rigorous bounds on the permittivity of a mixture: intervals without loss, regions of the plane with it."""

from __future__ import annotations

from mixsim.mixing.bounds.discs import Discs
from mixsim.mixing.bounds.lens import Lens
from mixsim.mixing.bounds.many_phases import many_phase_region
from mixsim.mixing.bounds.real import hashin_shtrikman, wiener
from mixsim.mixing.bounds.two_phases import (
    hard_discs,
    hard_spheres,
    isotropic_region,
    three_point_region,
    two_phase_region,
)

__all__ = [
    "Discs",
    "Lens",
    "hard_discs",
    "hard_spheres",
    "hashin_shtrikman",
    "isotropic_region",
    "many_phase_region",
    "three_point_region",
    "two_phase_region",
    "wiener",
]
