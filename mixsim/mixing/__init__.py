"""Mixing rules: permittivities of the phases to that of the mixture. Knows no recipe."""

from __future__ import annotations

from mixsim.mixing.bounds import (
    Discs,
    Lens,
    hard_discs,
    hard_spheres,
    hashin_shtrikman,
    isotropic_region,
    many_phase_region,
    three_point_region,
    two_phase_region,
    wiener,
)
from mixsim.mixing.bruggeman import bruggeman
from mixsim.mixing.coated import coated_grain, confocal_axes, growth_of_ellipsoid, growth_of_sphere
from mixsim.mixing.depolarisation import (
    DISC,
    NEEDLE,
    SPHERE,
    Depolarisation,
    Factors,
    ellipsoid_factors,
    spheroid_factors,
)
from mixsim.mixing.lorentz_lorenz import lorentz_lorenz
from mixsim.mixing.maxwell_garnett import maxwell_garnett
from mixsim.mixing.orientation import (
    aligned_grains,
    aligned_spheroid,
    in_plane_grains,
    log_normal_places,
    ordered_grains,
    random_grains,
    random_spheroid,
    ratios_about,
    value_at,
)
from mixsim.mixing.registry import RULES, rule_named
from mixsim.mixing.rule import Rule
from mixsim.mixing.waves import dipole_grain, inside_factor

__all__ = [
    "DISC",
    "NEEDLE",
    "RULES",
    "SPHERE",
    "Depolarisation",
    "Discs",
    "Factors",
    "Lens",
    "Rule",
    "aligned_grains",
    "aligned_spheroid",
    "bruggeman",
    "coated_grain",
    "confocal_axes",
    "dipole_grain",
    "ellipsoid_factors",
    "growth_of_ellipsoid",
    "growth_of_sphere",
    "hard_discs",
    "hard_spheres",
    "hashin_shtrikman",
    "in_plane_grains",
    "inside_factor",
    "isotropic_region",
    "log_normal_places",
    "lorentz_lorenz",
    "many_phase_region",
    "maxwell_garnett",
    "ordered_grains",
    "random_grains",
    "random_spheroid",
    "ratios_about",
    "rule_named",
    "spheroid_factors",
    "three_point_region",
    "two_phase_region",
    "value_at",
    "wiener",
]
