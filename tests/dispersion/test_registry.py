"""One contract for everything that the two registers hold, and the choice between descriptions."""

from __future__ import annotations

import inspect
import re
from collections.abc import Callable, Mapping
from typing import Any

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

import mixsim.dispersion
from mixsim.dispersion import INDEX_MODELS, TERMS, Term
from mixsim.errors import Refusal
from mixsim.parameter import Parameter
from mixsim.units import dimension_named

OMEGA = np.array([1.0e14, 0.9e15, 2.2e15, 3.0e15, 4.7e15])
TYPICAL: dict[str, Any] = {
    "plasma": 2.4e15,
    "strength": 0.6,
    "resonance": 2.0e15,
    "damping": 1.8e14,
    "step": 1.7,
    "relaxation_time": 5e-16,
    "conductivity": 3e4,
    "amplitude": 0.9,
    "width": 3e14,
    "gap": 1.1e15,
    "alpha": 0.2,
    "beta": 0.6,
    "low": 2e13,
    "high": 5e16,
    "exponent": 0.6,
    "reference_frequency": 1e15,
    "saturation": 3e15,
    "gilbert_damping": 0.05,
    "n": 1.5,
    "k": 0.02,
    "a": 1.478,
    "b": 4.9e-15,
    "c": 1e-29,
    "abbe_number": 55.0,
    "strengths": [0.7, 0.9],
    "resonance_wavelengths": [9e-8, 9.9e-6],
    "resonance_wavelengths_squared": [8.1e-15, 9.801e-11],
}
COEFFICIENTS = {
    "schott": [2.27, -1.0e-2, 1.06e-2, 2.1e-4, -7.6e-6, 4.9e-7],
    "conrady": [1.5, 0.01, 0.0005],
    "herzberger": [3.4, 0.16, -0.12, 1e-6, -5e-9, 0.0],
}
EVERY: dict[str, tuple[Callable[..., Any], dict[str, Any]]] = {
    **{name: (t.function, {key: TYPICAL[key] for key in t.canonical}) for name, t in TERMS.items()},
    **{
        f"{name} {choice}".strip(): (
            m.function,
            {
                key: COEFFICIENTS[name] if key == "coefficients" else TYPICAL[key]
                for key in m.parameters
                if key not in m.one_of or key == choice
            },
        )
        for name, m in INDEX_MODELS.items()
        for choice in (m.one_of or ("",))
    },
}
every_function = pytest.mark.parametrize(("function", "typical"), EVERY.values(), ids=EVERY)
every_term = pytest.mark.parametrize("term", TERMS.values(), ids=TERMS)
ENTRIES = [*TERMS.values(), *INDEX_MODELS.values()]


def frozen(values: Any) -> np.ndarray:
    array = np.array(values, dtype=float)
    array.setflags(write=False)
    return array


@every_function
def test_scalars_rows_grids_and_read_only_input(
    function: Callable[..., Any], typical: dict[str, Any]
) -> None:
    row = function(frozen(OMEGA), **typical)
    assert row.shape == OMEGA.shape and row.dtype == np.complex128 and np.isfinite(row).all()
    for w, value in zip(OMEGA, row, strict=True):
        alone = function(float(w), **typical)
        assert isinstance(alone, np.complex128) and alone == pytest.approx(value, rel=1e-12)
    assert function(np.empty(0), **typical).shape == (0,)
    for name, value in typical.items():
        factors = frozen([[0.5], [1.0], [1.5]])
        many = [factors * item for item in value] if isinstance(value, list) else factors * value
        grid = function(frozen(OMEGA), **{**typical, name: many})
        assert grid.shape == (3, len(OMEGA))
        np.testing.assert_allclose(grid[1], row, rtol=1e-12)
        half = [0.5 * item for item in value] if isinstance(value, list) else 0.5 * value
        np.testing.assert_allclose(grid[0], function(OMEGA, **{**typical, name: half}), rtol=1e-12)


@every_function
def test_nan_in_nan_out_and_nowhere_else(function: Callable[..., Any], typical: dict[str, Any]) -> None:
    holed = OMEGA.copy()
    holed[2] = np.nan
    row = function(holed, **typical)
    assert np.isnan(row[2]) and np.isfinite(np.delete(row, 2)).all()
    for name, value in typical.items():
        gap = [np.nan, *value[1:]] if isinstance(value, list) else np.nan
        assert np.isnan(function(OMEGA, **{**typical, name: gap})).all(), name


@every_term
def test_low_broadcasts_and_carries_nan(term: Term) -> None:
    typical = {key: TYPICAL[key] for key in term.canonical}
    alone = term.low(**typical)
    for name, value in typical.items():
        rate, plateau = term.low(**{**typical, name: frozen([[value], [np.nan]])})
        for batch, single in zip((rate, plateau), alone, strict=True):
            assert np.shape(single) == () and np.shape(batch) == (2, 1)
            assert batch[0, 0] == pytest.approx(single, rel=1e-12, nan_ok=True)
            assert np.isnan(batch[1, 0])


WITHOUT_STATIC_LIMIT = ("brendel-bormann", "jonscher")
positive = st.floats(1e-12, 1e12)


@every_term
@given(data=st.data(), omega=positive)
def test_terms_are_passive(term: Term, data: st.DataObject, omega: float) -> None:
    values = {}
    for name in term.canonical:
        parameter = term.parameters[name]
        if np.isfinite(parameter.maximum):
            values[name] = data.draw(st.floats(parameter.minimum, parameter.maximum), label=name)
            continue
        zero = st.just(0.0) if parameter.minimum == 0.0 and not parameter.exclusive else st.nothing()
        values[name] = data.draw(positive | zero, label=name)
    value = term.function(omega, **values)
    if np.isfinite(value):
        assert value.imag >= 0.0 and not np.signbit(value.imag)
    else:
        assert values.get("low", 0.0) == values.get("high", 1.0) or values.get("resonance") == omega
        assert "high" in values or values.get("damping", values.get("gilbert_damping")) == 0.0
    rate, plateau = term.low(**values)
    assert rate >= 0.0
    assert np.isfinite(plateau) or term.name in WITHOUT_STATIC_LIMIT


@pytest.mark.parametrize("entry", ENTRIES, ids=lambda entry: entry.name)
def test_entries_agree_with_their_functions(entry: Any) -> None:
    own = entry.canonical if isinstance(entry, Term) else entry.parameters
    for function in [entry.function, getattr(entry, "low", entry.function)]:
        signature = inspect.signature(function).parameters
        assert set(signature) - {"omega"} == set(own)
        assert all(p.kind is p.KEYWORD_ONLY for name, p in signature.items() if name != "omega")
        assert all(
            p.default is p.empty for name, p in signature.items() if name in getattr(entry, "required", ())
        )
    assert next(iter(inspect.signature(entry.function).parameters)) == "omega"
    for name, parameter in entry.parameters.items():
        assert parameter.name == name and parameter.meaning
        assert dimension_named(parameter.dimension).name == parameter.dimension
    for text in (entry.name, entry.summary, entry.equation, entry.source):
        assert text and text == text.strip() and "\n" not in text


@every_term
def test_routes_read_what_their_functions_take(term: Term) -> None:
    for canonical, routes in term.canonical.items():
        assert canonical in [route.key for route in routes]
        for route in routes:
            assert set(route.needs) <= set(term.parameters)
            if route.function is None:
                assert route.key == canonical and not route.also
            else:
                signature = inspect.signature(route.function).parameters
                assert set(signature) == set(route.needs)
                assert all(p.kind is p.KEYWORD_ONLY and p.default is p.empty for p in signature.values())


def documented(function: Callable[..., Any]) -> dict[str, str]:
    """Unit of each entry under Parameters."""
    doc = inspect.cleandoc(function.__doc__ or "")
    block = doc.split("Parameters\n----------\n")[1].split("\n\n")[0]
    units: dict[str, str] = {}
    for names, text in re.findall(r"^(\w[\w, ]*)\n((?: {4}.*\n?)+)", block, re.MULTILINE):
        found = re.search(r"\[([^\]]+)\]\.?\s*$", text)
        units.update(dict.fromkeys(names.split(", "), found[1] if found else ""))
    return units


@pytest.mark.parametrize("entry", ENTRIES, ids=lambda entry: entry.name)
def test_docstrings_state_the_units_of_the_register(entry: Any) -> None:
    routes = [r.function for ways in getattr(entry, "canonical", {}).values() for r in ways if r.function]
    for function in [entry.function, *([entry.low] if isinstance(entry, Term) else []), *routes]:
        units = documented(function)
        parameters: Mapping[str, Parameter] = entry.parameters
        for name in inspect.signature(function).parameters:
            si = "rad/s" if name == "omega" else dimension_named(parameters[name].dimension).si or "-"
            assert units[name] == si, (function.__name__, name)
        assert ">>>" in (function.__doc__ or "")
    doc = entry.function.__doc__ or ""
    assert "Valid for:" in doc and "References" in doc


@pytest.mark.parametrize(
    ("name", "given_names", "found", "allowed"),
    [
        ("lorentz", "damping resonance", "plasma of a lorentz term is not given", "plasma, or step"),
        ("lorentz", "plasma damping", "resonance of a lorentz term is not given", "give resonance"),
        ("lorentz", "step damping", "resonance of a lorentz term is not given", "give resonance"),
        ("lorentz", "plasma step resonance damping", "2 times, by plasma and step", "exclude each other"),
        ("lorentz", "step strength resonance damping", "strength has no part", "plasma or number_density"),
        (
            "lorentz",
            "strenght plasma resonance damping",
            "unknown parameter 'strenght'",
            "did you mean 'strength'",
        ),
        ("drude", "plasma", "damping of a drude term is not given", "mobility with effective_mass"),
        ("drude", "carrier_density damping", "carrier_density is given without effective_mass", "beside it"),
        ("drude", "plasma mobility", "mobility is given without effective_mass", "beside it"),
        ("drude", "conductivity damping", "conductivity is given without collision_time", "beside it"),
        ("drude", "conductivity collision_time damping", "2 times, by damping and collision_time", "exclude"),
        (
            "drude",
            "plasma damping effective_mass",
            "effective_mass has no part",
            "carrier_density or mobility",
        ),
        ("debye", "step", "relaxation_time of a debye term is not given", "or relaxation_frequency"),
        ("debye", "step relaxation_time relaxation_frequency", "2 times, by relaxation_time and", "exclude"),
        ("conduction", "", "conductivity of a conduction term is not given", "give conductivity"),
    ],
)
def test_resolve_refuses(name: str, given_names: str, found: str, allowed: str) -> None:
    with pytest.raises(Refusal) as caught:
        TERMS[name].resolve(given_names.split())
    assert found in caught.value.found
    assert allowed in str(caught.value)


def test_resolve_chooses_the_way_that_is_given() -> None:
    routes = TERMS["drude"].resolve({"conductivity", "collision_time"})
    assert {key: route.needs for key, route in routes.items()} == {
        "plasma": ("conductivity", "collision_time"),
        "damping": ("collision_time",),
    }
    assert TERMS["lorentz"].resolve({"plasma", "resonance", "damping"})["plasma"].also == ("strength",)


def test_public_names() -> None:
    assert mixsim.dispersion.__all__ == sorted(mixsim.dispersion.__all__, key=lambda n: (not n.isupper(), n))
    assert all(hasattr(mixsim.dispersion, name) for name in mixsim.dispersion.__all__)
