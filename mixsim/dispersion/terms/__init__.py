"""The register of terms: each stands, with its entry, in the room of its family.

A new term is one function with its `_low` and its entry in one of those rooms, its test, and one name here.
"""

from __future__ import annotations

from collections.abc import Mapping

from mixsim.dispersion.registry import Term
from mixsim.dispersion.terms.broadened import BRENDEL_BORMANN, GAUSSIAN, TAUC_LORENTZ
from mixsim.dispersion.terms.conduction import CONDUCTION, JONSCHER
from mixsim.dispersion.terms.magnetic import LANDAU_LIFSHITZ_GILBERT
from mixsim.dispersion.terms.oscillators import DRUDE, LORENTZ
from mixsim.dispersion.terms.relaxation import (
    COLE_COLE,
    COLE_DAVIDSON,
    DEBYE,
    HAVRILIAK_NEGAMI,
    WIDE_BAND_DEBYE,
)

TERMS: Mapping[str, Term] = {
    term.name: term
    for term in (
        LORENTZ,
        DRUDE,
        GAUSSIAN,
        BRENDEL_BORMANN,
        TAUC_LORENTZ,
        DEBYE,
        COLE_COLE,
        COLE_DAVIDSON,
        HAVRILIAK_NEGAMI,
        WIDE_BAND_DEBYE,
        CONDUCTION,
        JONSCHER,
        LANDAU_LIFSHITZ_GILBERT,
    )
}
