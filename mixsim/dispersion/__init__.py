"""Dispersion: terms, index models and measured tables as functions of angular frequency."""

from __future__ import annotations

from mixsim.dispersion.causal import Completion, complete
from mixsim.dispersion.data_sheet import infinity_from_pair, step_from_pair
from mixsim.dispersion.descriptions import width_from_wavelength
from mixsim.dispersion.index import INDEX_MODELS, IndexModel
from mixsim.dispersion.kramers_kronig import kramers_kronig
from mixsim.dispersion.registry import Route, Term
from mixsim.dispersion.table import Table, interpolate, interpolate_permeability, read_table
from mixsim.dispersion.terms import TERMS

__all__ = [
    "INDEX_MODELS",
    "TERMS",
    "Completion",
    "IndexModel",
    "Route",
    "Table",
    "Term",
    "complete",
    "infinity_from_pair",
    "interpolate",
    "interpolate_permeability",
    "kramers_kronig",
    "read_table",
    "step_from_pair",
    "width_from_wavelength",
]
