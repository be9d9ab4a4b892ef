"""One contract for every mixing rule of the registry."""

from __future__ import annotations

import inspect
from dataclasses import fields

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from mixsim.errors import Refusal
from mixsim.mixing import RULES, SPHERE, Rule, aligned_spheroid, random_spheroid, rule_named
from mixsim.parameter import Choice

every_rule = pytest.mark.parametrize("rule", RULES.values(), ids=RULES)
passive = st.builds(complex, st.floats(-50, 50), st.floats(1e-3, 50))


def own(rule: Rule) -> dict[str, object]:
    """A value for each parameter of a rule: the first word, the middle of a range."""
    values: dict[str, object] = {}
    for name, parameter in rule.parameters.items():
        if isinstance(parameter, Choice):
            values[name] = parameter.words[0]
        else:
            values[name] = 0.4 * (parameter.minimum or 0.0) + 0.6 * min(parameter.maximum, 5.0)
    return values


def mixed(rule: Rule, phases: object, fractions: object, **shapes: object) -> np.ndarray:
    return rule.function(phases, fractions=fractions, **shapes, **own(rule))


def counts(rule: Rule) -> list[int]:
    return [count for count in (2, 3) if count <= (rule.most_phases or count)]


def densest(rule: Rule) -> float:
    return rule.densest(**own(rule)) if rule.densest else 1.0


def frozen(values: object) -> np.ndarray:
    array = np.array(values)
    array.setflags(write=False)
    return array


@every_rule
def test_entries_are_complete_and_functions_have_the_common_signature(rule: Rule) -> None:
    assert RULES[rule.name] is rule
    for field in fields(Rule):
        value = getattr(rule, field.name)
        assert not isinstance(value, str) or (value and value == value.strip()), field.name
    parameters = inspect.signature(rule.function).parameters
    assert list(parameters)[:3] == ["phases", "fractions", "depolarisations"]
    assert all(p.kind is p.KEYWORD_ONLY for p in list(parameters.values())[1:])
    assert list(parameters)[3:] == [*rule.parameters, *(["dimensions"] if rule.name == "bruggeman" else [])]
    assert set(rule.needed) <= {n for n, p in parameters.items() if p.default is p.empty}


def test_a_parameter_means_the_same_in_every_rule() -> None:
    """One field of the recipe serves them all; words may differ."""
    seen: dict[str, object] = {}
    for rule in RULES.values():
        for name, parameter in rule.parameters.items():
            like = type(parameter) if isinstance(parameter, Choice) else parameter
            assert seen.setdefault(name, like) == like, name


@pytest.mark.parametrize(
    ("rule", "count"), [(rule, count) for rule in RULES.values() for count in counts(rule)]
)
def test_shapes_read_only_inputs_and_nan(rule: Rule, count: int) -> None:
    omega = frozen(np.linspace(0.5, 3.0, 7))
    metal = frozen(4.0 - 9.0 / (omega * (omega + 0.3j)))
    f = frozen(np.linspace(0.0, min(0.6, densest(rule)), 5)[:, None])
    shapes = [SPHERE] * count
    phases = [2.25, metal, 1.0][:count]
    rest = [0.1] * (count - 2)
    grid = mixed(rule, phases, fractions=[1 - f - sum(rest), f, *rest], depolarisations=shapes)
    assert grid.shape == (5, 7) and grid.dtype == np.complex128
    for i, j in ((0, 0), (2, 3), (4, 6)):
        phases_there = [2.25, complex(metal[j]), 1.0][:count]
        fractions_there = [1 - f[i, 0] - sum(rest), f[i, 0], *rest]
        alone = mixed(rule, phases_there, fractions=fractions_there, depolarisations=shapes)
        assert isinstance(alone, np.complex128)
        assert alone == pytest.approx(grid[i, j], rel=1e-11)
    holed = metal.copy()
    holed[3] = np.nan
    row = mixed(
        rule, [2.25, holed, 1.0][:count], fractions=[0.6, 0.4 - sum(rest), *rest], depolarisations=shapes
    )
    assert np.isnan(row[3]) and np.isfinite(np.delete(row, 3)).all()
    gap = mixed(rule, phases, fractions=[np.nan, 0.3, *rest], depolarisations=shapes)
    assert np.isnan(gap).all()
    empty = mixed(
        rule, [2.25, metal[:0], 1.0][:count], fractions=[0.9 - sum(rest), 0.1, *rest], depolarisations=shapes
    )
    assert empty.shape == (0,)


@every_rule
def test_real_input_gives_complex_output_without_loss(rule: Rule) -> None:
    for phases, fractions in (([2, 5], [0.5, 0.5]), ([2, 5, 9.0], [0.25, 0.25, 0.5])):
        if len(phases) in counts(rule):
            z = mixed(rule, phases, fractions=fractions)
            assert z.dtype == np.complex128 and z.imag == 0.0 and min(phases) < z.real < max(phases)


@pytest.mark.parametrize("rule", [rule for rule in RULES.values() if rule.passive], ids=lambda r: r.name)
@given(a=passive, b=passive, c=passive, f=st.floats(0, 1), g=st.floats(0, 1))
def test_passive_phases_make_a_passive_mixture(
    rule: Rule, a: complex, b: complex, c: complex, f: float, g: float
) -> None:
    f *= densest(rule)
    assert mixed(rule, [a, b], fractions=[1 - f, f]).imag >= 0.0
    if 3 in counts(rule):
        assert mixed(rule, [a, b, c], fractions=[1 - f, f * g, f * (1 - g)]).imag >= 0.0


@every_rule
@given(a=passive, b=passive, f=st.floats(0, 1))
def test_pure_equal_and_scaled_phases(rule: Rule, a: complex, b: complex, f: float) -> None:
    f *= densest(rule)
    assert mixed(rule, [a, b], fractions=[1.0, 0.0]) == pytest.approx(a, rel=1e-10)
    if rule.densest is None:
        assert mixed(rule, [a, b], fractions=[0.0, 1.0]) == pytest.approx(b, rel=1e-10)
    assert mixed(rule, [a, a], fractions=[1 - f, f]) == pytest.approx(a, rel=1e-10)
    if 3 in counts(rule):
        assert mixed(rule, [a, a, a], fractions=[1 - f, f / 2, f / 2]) == pytest.approx(a, rel=1e-10)
    if rule.homogeneous:
        once = mixed(rule, [a, b], fractions=[1 - f, f])
        assert mixed(rule, [3 * a, 3 * b], fractions=[1 - f, f]) == pytest.approx(3 * once, rel=1e-6)
    if rule.symmetric:
        swapped = mixed(rule, [b, a], fractions=[f, 1 - f])
        assert swapped == pytest.approx(mixed(rule, [a, b], fractions=[1 - f, f]), rel=1e-6)


@every_rule
def test_shapes_are_taken_or_refused(rule: Rule) -> None:
    metal = -9.0 + np.linspace(1.0, 2.0, 4) * 1j
    two, batch = [0.9, 0.1], np.array([[2.0], [0.5]])
    spheroids = [SPHERE, random_spheroid(batch)]
    if not rule.takes_shapes:
        with pytest.raises(Refusal, match=rule.name):
            mixed(rule, [2.0, metal], fractions=two, depolarisations=spheroids)
        return
    z = mixed(rule, [2.0, metal], fractions=two, depolarisations=spheroids)
    assert z.shape == (2, 4) and np.all(z.imag > 0)
    ball = mixed(rule, [2.0, metal], fractions=two, depolarisations=[SPHERE, random_spheroid(1.0)])
    np.testing.assert_allclose(ball, mixed(rule, [2.0, metal], fractions=two), rtol=1e-12)
    if rule.takes_aligned:
        for ratio, shape in ((2.0, (3, 4)), (batch, (2, 3, 4))):
            z = mixed(rule, [2.0, metal], fractions=two, depolarisations=[SPHERE, aligned_spheroid(ratio)])
            assert z.shape == shape
            np.testing.assert_array_equal(z[..., 0, :], z[..., 1, :])
            assert np.all(z[..., 2, :] != z[..., 0, :])


@every_rule
def test_inverses_stand_beside_the_rule(rule: Rule) -> None:
    if rule.fraction_from is None or rule.inclusion_from is None:
        return
    f = np.array([0.1, 0.3, 0.7])
    z = mixed(rule, [2.0, 9.0 + 1j], fractions=[1 - f, f])
    given = own(rule)
    np.testing.assert_allclose(rule.fraction_from(z, host=2.0, inclusion=9.0 + 1j, **given), f, rtol=1e-12)
    np.testing.assert_allclose(rule.inclusion_from(z, host=2.0, fraction=f, **given), 9.0 + 1j, rtol=1e-11)


@every_rule
def test_miscounted_arguments_are_refused(rule: Rule) -> None:
    with pytest.raises(Refusal, match="host included"):
        mixed(rule, [1.0, 2.0], fractions=[0.5])
    with pytest.raises(Refusal, match="host included"):
        mixed(rule, [1.0, 2.0], fractions=[0.5, 0.5], depolarisations=[SPHERE])


def test_unknown_names_get_the_nearest() -> None:
    assert rule_named("bruggeman") is RULES["bruggeman"]
    with pytest.raises(Refusal, match="did you mean 'bruggeman'"):
        rule_named("bruggemann")
