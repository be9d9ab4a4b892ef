"""The register of terms: each stands, with its entry, in the room of its family.

A new term is one function with its `_low` and its entry in one of those rooms, its test, and one name here.
"""

from __future__ import annotations

from collections.abc import Mapping

from mixsim.dispersion.registry import Term
from mixsim.dispersion.terms.conduction import CONDUCTION
from mixsim.dispersion.terms.oscillators import DRUDE, LORENTZ
from mixsim.dispersion.terms.relaxation import DEBYE

TERMS: Mapping[str, Term] = {term.name: term for term in (LORENTZ, DRUDE, DEBYE, CONDUCTION)}
