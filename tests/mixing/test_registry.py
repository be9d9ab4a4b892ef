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

every_rule = pytest.mark.parametrize("rule", RULES.values(), ids=RULES)
passive = st.builds(complex, st.floats(-50, 50), st.floats(1e-3, 50))


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
    assert all(p.kind is p.KEYWORD_ONLY and p.default is not p.empty for p in list(parameters.values())[2:])


@every_rule
@pytest.mark.parametrize("count", [2, 3])
def test_shapes_read_only_inputs_and_nan(rule: Rule, count: int) -> None:
    omega = frozen(np.linspace(0.5, 3.0, 7))
    metal = frozen(4.0 - 9.0 / (omega * (omega + 0.3j)))
    f = frozen(np.linspace(0.0, 0.6, 5)[:, None])
    shapes = [SPHERE] * count
    phases = [2.25, metal, 1.0][:count]
    rest = [0.1] * (count - 2)
    grid = rule.function(phases, fractions=[1 - f - sum(rest), f, *rest], depolarisations=shapes)
    assert grid.shape == (5, 7) and grid.dtype == np.complex128
    for i, j in ((0, 0), (2, 3), (4, 6)):
        phases_there = [2.25, complex(metal[j]), 1.0][:count]
        fractions_there = [1 - f[i, 0] - sum(rest), f[i, 0], *rest]
        alone = rule.function(phases_there, fractions=fractions_there, depolarisations=shapes)
        assert isinstance(alone, np.complex128)
        assert alone == pytest.approx(grid[i, j], rel=1e-11)
    holed = metal.copy()
    holed[3] = np.nan
    row = rule.function(
        [2.25, holed, 1.0][:count], fractions=[0.6, 0.4 - sum(rest), *rest], depolarisations=shapes
    )
    assert np.isnan(row[3]) and np.isfinite(np.delete(row, 3)).all()
    gap = rule.function(phases, fractions=[np.nan, 0.3, *rest], depolarisations=shapes)
    assert np.isnan(gap).all()
    empty = rule.function(
        [2.25, metal[:0], 1.0][:count], fractions=[0.9 - sum(rest), 0.1, *rest], depolarisations=shapes
    )
    assert empty.shape == (0,)


@every_rule
def test_real_input_gives_complex_output_without_loss(rule: Rule) -> None:
    for phases, fractions in (([2, 5], [0.5, 0.5]), ([2, 5, 9.0], [0.25, 0.25, 0.5])):
        z = rule.function(phases, fractions=fractions)
        assert z.dtype == np.complex128 and z.imag == 0.0 and min(phases) < z.real < max(phases)


@every_rule
@given(a=passive, b=passive, c=passive, f=st.floats(0, 1), g=st.floats(0, 1))
def test_passive_phases_make_a_passive_mixture(
    rule: Rule, a: complex, b: complex, c: complex, f: float, g: float
) -> None:
    assert rule.function([a, b], fractions=[1 - f, f]).imag >= 0.0
    assert rule.function([a, b, c], fractions=[1 - f, f * g, f * (1 - g)]).imag >= 0.0


@every_rule
@given(a=passive, b=passive, f=st.floats(0, 1))
def test_pure_equal_and_scaled_phases(rule: Rule, a: complex, b: complex, f: float) -> None:
    assert rule.function([a, b], fractions=[1.0, 0.0]) == pytest.approx(a, rel=1e-10)
    assert rule.function([a, b], fractions=[0.0, 1.0]) == pytest.approx(b, rel=1e-10)
    assert rule.function([a, a, a], fractions=[1 - f, f / 2, f / 2]) == pytest.approx(a, rel=1e-10)
    if rule.homogeneous:
        once = rule.function([a, b], fractions=[1 - f, f])
        assert rule.function([3 * a, 3 * b], fractions=[1 - f, f]) == pytest.approx(3 * once, rel=1e-6)
    if rule.symmetric:
        swapped = rule.function([b, a], fractions=[f, 1 - f])
        assert swapped == pytest.approx(rule.function([a, b], fractions=[1 - f, f]), rel=1e-6)


@every_rule
def test_shapes_are_taken_or_refused(rule: Rule) -> None:
    metal = -9.0 + np.linspace(1.0, 2.0, 4) * 1j
    two, batch = [0.9, 0.1], np.array([[2.0], [0.5]])
    spheroids = [SPHERE, random_spheroid(batch)]
    if not rule.takes_shapes:
        with pytest.raises(Refusal, match=rule.name):
            rule.function([2.0, metal], fractions=two, depolarisations=spheroids)
        return
    z = rule.function([2.0, metal], fractions=two, depolarisations=spheroids)
    assert z.shape == (2, 4) and np.all(z.imag > 0)
    ball = rule.function([2.0, metal], fractions=two, depolarisations=[SPHERE, random_spheroid(1.0)])
    np.testing.assert_allclose(ball, rule.function([2.0, metal], fractions=two), rtol=1e-12)
    if rule.takes_aligned:
        for ratio, shape in ((2.0, (3, 4)), (batch, (2, 3, 4))):
            z = rule.function([2.0, metal], fractions=two, depolarisations=[SPHERE, aligned_spheroid(ratio)])
            assert z.shape == shape
            np.testing.assert_array_equal(z[..., 0, :], z[..., 1, :])
            assert np.all(z[..., 2, :] != z[..., 0, :])


@every_rule
def test_inverses_stand_beside_the_rule(rule: Rule) -> None:
    if rule.fraction_from is None or rule.inclusion_from is None:
        return
    f = np.array([0.1, 0.3, 0.7])
    z = rule.function([2.0, 9.0 + 1j], fractions=[1 - f, f])
    np.testing.assert_allclose(rule.fraction_from(z, host=2.0, inclusion=9.0 + 1j), f, rtol=1e-12)
    np.testing.assert_allclose(rule.inclusion_from(z, host=2.0, fraction=f), 9.0 + 1j, rtol=1e-11)


@every_rule
def test_miscounted_arguments_are_refused(rule: Rule) -> None:
    with pytest.raises(Refusal, match="host included"):
        rule.function([1.0, 2.0], fractions=[0.5])
    with pytest.raises(Refusal, match="host included"):
        rule.function([1.0, 2.0], fractions=[0.5, 0.5], depolarisations=[SPHERE])


def test_unknown_names_get_the_nearest() -> None:
    assert rule_named("bruggeman") is RULES["bruggeman"]
    with pytest.raises(Refusal, match="did you mean 'bruggeman'"):
        rule_named("bruggemann")
