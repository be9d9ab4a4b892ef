"""Uncertainty in one place: inputs with their doubt, first order, Monte Carlo, conformity."""

from mixsim.analysis.uncertainty.conformity import (
    Decision,
    acceptance_zone,
    conformance_probability,
    decide,
    risks,
)
from mixsim.analysis.uncertainty.first_order import FirstOrder, effects, first_order
from mixsim.analysis.uncertainty.inputs import Uncertain, draw, uncertain_leaves
from mixsim.analysis.uncertainty.trials import Trials, coverage_interval, monte_carlo

__all__ = [
    "Decision",
    "FirstOrder",
    "Trials",
    "Uncertain",
    "acceptance_zone",
    "conformance_probability",
    "coverage_interval",
    "decide",
    "draw",
    "effects",
    "first_order",
    "monte_carlo",
    "risks",
    "uncertain_leaves",
]
