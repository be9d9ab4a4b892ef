"""Mixing rules: permittivities of the phases to that of the mixture. Knows no recipe."""

from __future__ import annotations

from mixsim.mixing.bounds import hashin_shtrikman, wiener
from mixsim.mixing.bruggeman import bruggeman
from mixsim.mixing.depolarisation import (
    SPHERE,
    Depolarisation,
    aligned_spheroid,
    random_spheroid,
    spheroid_factors,
)
from mixsim.mixing.lorentz_lorenz import lorentz_lorenz
from mixsim.mixing.maxwell_garnett import maxwell_garnett
from mixsim.mixing.registry import RULES, Rule, rule_named

__all__ = [
    "RULES",
    "SPHERE",
    "Depolarisation",
    "Rule",
    "aligned_spheroid",
    "bruggeman",
    "hashin_shtrikman",
    "lorentz_lorenz",
    "maxwell_garnett",
    "random_spheroid",
    "rule_named",
    "spheroid_factors",
    "wiener",
]
