"""Parameters of public formulas are named as the table in DEVELOPERS.md says, with their units."""

from __future__ import annotations

import inspect
import re
from collections.abc import Callable, Iterator
from pathlib import Path
from typing import Any

import pytest

from mixsim import composition, mixing, observables
from mixsim.dispersion import (
    INDEX_MODELS,
    TERMS,
    descriptions,
    infinity_from_pair,
    interpolate,
    kramers_kronig,
    step_from_pair,
    thermo_optic,
)
from mixsim.dispersion.laws import LAWS
from mixsim.mixing import RULES

DEVELOPERS = (Path(__file__).parents[1] / "DEVELOPERS.md").read_text(encoding="utf-8")
UNIT = re.compile(r"\[[^\[\]]+\]")


def formulas() -> Iterator[Callable[..., Any]]:
    for term in TERMS.values():
        yield from (term.function, term.low)
        routes = [route for ways in term.canonical.values() for route in ways]
        routes += term.in_grains.values()
        yield from (route.function for route in routes if route.function is not None)
    yield from (model.function for model in INDEX_MODELS.values())
    yield from (descriptions.width_from_wavelength, interpolate, infinity_from_pair, step_from_pair)
    yield descriptions.oscillators_from_absorption_peak
    for law in LAWS.values():
        yield from (law.function, law.static, law.high)
    yield from (kramers_kronig, thermo_optic.index_of_air, thermo_optic.thermo_optic_shift)
    for rule in RULES.values():
        given = (rule.function, rule.fraction_from, rule.inclusion_from)
        yield from (function for function in given if function is not None)
    yield from (mixing.wiener, mixing.hashin_shtrikman, mixing.hard_spheres, mixing.hard_discs)
    yield from (mixing.two_phase_region, mixing.isotropic_region, mixing.three_point_region)
    yield mixing.many_phase_region
    yield from (mixing.spheroid_factors, mixing.ellipsoid_factors)
    yield from (mixing.coated_grain, mixing.growth_of_sphere, mixing.growth_of_ellipsoid)
    yield from (mixing.inside_factor, mixing.dipole_grain, mixing.value_at)
    yield from (mixing.confocal_axes, mixing.in_plane_grains, mixing.ordered_grains, mixing.ratios_about)
    yield composition.number_density_from_weight_fraction
    yield composition.number_density_from_mole_fraction
    yield from (q.function for q in observables.QUANTITIES.values())


FORMULAS = {f"{f.__module__.removeprefix('mixsim.')}.{f.__name__}": f for f in formulas()}


def known() -> set[str]:
    table = DEVELOPERS.split("## Nomenclature")[1].split("## ")[0]
    rows = [line.split("|")[2] for line in table.splitlines() if line.startswith("|")]
    return {name for row in rows for name in re.findall(r"`(\w+)`", row)}


def test_names_are_those_of_the_table() -> None:
    used = {name for formula in FORMULAS.values() for name in inspect.signature(formula).parameters}
    assert used - known() == set()
    assert known() - used == set(), "the table names what no formula takes"


@pytest.mark.parametrize("name", FORMULAS)
def test_docstring_says_what_and_in_which_unit(name: str) -> None:
    text = inspect.getdoc(FORMULAS[name])
    assert text
    first, _, rest = text.partition("\n")
    assert first.endswith((".", ":", "]"))
    if not rest:
        assert UNIT.search(text), "a one-line docstring carries its unit"
        return
    parameters = rest.split("Parameters\n")[1].split("Returns\n")[0]
    for parameter in inspect.signature(FORMULAS[name]).parameters:
        entry = re.search(rf"^(?:.*, )?{parameter}(?:,.*)?\n((?:    .*\n?)+)", parameters, re.MULTILINE)
        assert entry, parameter
        assert UNIT.search(entry[1]) or "None" in entry[1] or "spectrum" in entry[1], parameter
    assert "Returns\n" in rest
