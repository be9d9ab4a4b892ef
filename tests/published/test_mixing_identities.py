"""Limits that any right mixing rule meets: percolation, weak contrast, dilute slope, bounds."""

from __future__ import annotations

import evaluator
import numpy as np
import pytest
import reference
from hypothesis import given
from hypothesis import strategies as st

from mixsim.mixing import RULES, hashin_shtrikman, wiener
from mixsim.mixing.bruggeman import bruggeman

HOST, GRAIN, FRACTION = (
    "materials.matrix.permittivity.infinity",
    "materials.grain.permittivity.infinity",
    "inclusions.grain.volume_fraction",
)
DILUTE = [name for name, rule in RULES.items() if rule.dilute_exact]
BOUNDED = [name for name, rule in RULES.items() if rule.bounds != "none" and rule.densest is None]
ISOTROPIC = [name for name in BOUNDED if RULES[name].bounds == "hashin-shtrikman"]


def two_phases(rule: str, *, host: object, grain: object, fraction: object) -> np.ndarray:
    text = f"""
        host = {{ material = "matrix" }}
        inclusions.grain = {{ material = "grain", volume_fraction = 0.1 }}
        {evaluator.mixing(rule)}
        materials.matrix.permittivity.infinity = 1.0
        materials.grain.permittivity.infinity = 2.0
    """
    values = {HOST: np.asarray(host), GRAIN: np.asarray(grain), FRACTION: np.asarray(fraction)}
    return evaluator.permittivity(text, 1e9, values)[..., 0]


@pytest.mark.parametrize("rule", DILUTE)
@reference.case("mixing-identities", "dilute slope of spheres")
def test_dilute_slope(ref: reference.Row, rule: str) -> None:
    f = 1e-6
    mixed = two_phases(rule, host=ref["host"], grain=ref["inclusion"], fraction=f).real
    assert (mixed - ref["host"]) / f == pytest.approx(ref["slope"], abs=1e-4)


@pytest.mark.parametrize("rule", [*ISOTROPIC, "rayleigh-cubic"])
@reference.case("mixing-identities", "weak contrast")
def test_weak_contrast_in_three_dimensions(ref: reference.Row, rule: str) -> None:
    f, contrast = ref["fraction"], ref["contrast"]
    mean = 1 + f * contrast
    mixed = two_phases(rule, host=1.0, grain=1.0 + contrast, fraction=f).real
    coefficient = (mean - mixed) * mean / (f * (1 - f) * contrast**2)
    assert coefficient == pytest.approx(ref["coefficient_three_dimensions"], abs=ref["tolerance"])


@reference.case("mixing-identities", "weak contrast")
def test_weak_contrast_in_two_dimensions(ref: reference.Row) -> None:
    f, contrast = ref["fraction"], ref["contrast"]
    mean = 1 + f * contrast
    mixed = bruggeman([1.0, 1.0 + contrast], fractions=[1 - f, f], dimensions=2).real
    coefficient = (mean - mixed) * mean / (f * (1 - f) * contrast**2)
    assert coefficient == pytest.approx(ref["coefficient_two_dimensions"], abs=1.2 * ref["tolerance"])


@reference.case("mixing-identities", "percolation of two-phase effective medium")
def test_both_sides_of_percolation(ref: reference.Row) -> None:
    assert RULES["bruggeman"].percolation == pytest.approx(ref["threshold_three_dimensions"])
    above = np.array([0.34, 0.4, 0.6, 0.9])
    conducting = two_phases("bruggeman", host=1e-12, grain=1.0, fraction=above).real
    assert conducting == pytest.approx((3 * above - 1) / 2, rel=1e-8)
    below = np.array([0.05, 0.1, 0.2, 0.3])
    insulating = two_phases("bruggeman", host=1.0, grain=1e12, fraction=below).real
    assert insulating == pytest.approx(1 / (1 - 3 * below), rel=1e-9)
    at_threshold = two_phases("bruggeman", host=1.0, grain=1e12, fraction=1 / 3).real
    assert at_threshold == pytest.approx(np.sqrt(1e12 / 2), rel=1e-5)
    half = ref["threshold_two_dimensions"]
    assert bruggeman([1e-12, 1.0], fractions=[1 - half, half], dimensions=2).real == pytest.approx(1e-6)
    assert bruggeman([1e-12, 1.0], fractions=[0.4, 0.6], dimensions=2).real == pytest.approx(0.2)


@reference.case("mixing-identities", "percolation of two-phase effective medium")
def test_conductor_limits_of_the_evaluator(ref: reference.Row) -> None:
    """Static limit of real conducting grains: 1/(1 − 3f) below the threshold, none from there on."""
    text = """
        host = { material = "matrix" }
        inclusions.grain = { material = "grain", volume_fraction = 0.1 }
        mixing.rule = "bruggeman"
        materials.matrix.permittivity.infinity = 2.0
        materials.grain.permittivity.infinity = 5.0
        materials.grain.permittivity.terms.free = { model = "drude", plasma = "1 eV", damping = "0.1 eV" }
    """
    compiled = evaluator.mixture(text)
    below = np.array([0.1, 0.2, 0.3])
    assert compiled.limits({FRACTION: below}).static.real == pytest.approx(2.0 / (1 - 3 * below), rel=1e-12)
    above = compiled.limits({FRACTION: np.array(ref["threshold_three_dimensions"] + 0.01)}).static
    assert above is None or np.all(np.isnan(above))


@reference.case("mixing-identities", "checkerboard")
def test_checkerboard(ref: reference.Row) -> None:
    mixed = bruggeman(ref["phases"], fractions=[0.5, 0.5], dimensions=2)
    assert mixed == pytest.approx(ref["permittivity"], rel=1e-14)


@reference.case("mixing-identities", "nearly half and half")
def test_printed_digits(ref: reference.Row) -> None:
    phases = {"host": ref["host"], "grain": ref["inclusion"], "fraction": ref["fraction"]}
    assert two_phases("maxwell-garnett", **phases).real == pytest.approx(ref["maxwell_garnett"], abs=1e-6)
    assert two_phases("bruggeman", **phases).real == pytest.approx(ref["bruggeman"], abs=1e-6)
    fractions = np.array(ref["fraction"])
    pair = [ref["host"], ref["inclusion"]], [1 - fractions, fractions]
    assert hashin_shtrikman(*pair)[1] == pytest.approx(ref["hashin_shtrikman_upper"], abs=1e-6)
    assert np.stack(wiener(*pair)) == pytest.approx(
        np.array([ref["wiener_lower"], ref["wiener_upper"]]), abs=1e-6
    )


@reference.case("mixing-identities", "hard spheres, three-point bounds")
def test_hard_spheres_lie_between_the_two_rules(ref: reference.Row) -> None:
    phases = {"host": ref["host"], "grain": ref["inclusion"], "fraction": ref["fraction"]}
    garnett, symmetric = (two_phases(rule, **phases).real for rule in ("maxwell-garnett", "bruggeman"))
    assert garnett == pytest.approx(ref["lower"], abs=0.03)
    assert garnett < ref["lower"] < ref["upper"] < symmetric


level = st.floats(0.1, 200.0)


@pytest.mark.parametrize("rule", BOUNDED)
@given(host=level, grain=level, fraction=st.floats(0.0, 1.0))
def test_inside_the_bounds(rule: str, host: float, grain: float, fraction: float) -> None:
    """The bounds that the register says a rule obeys; Maxwell Garnett is the bound of its own host."""
    mixed = two_phases(rule, host=host, grain=grain, fraction=fraction).real
    room = 1e-9 * max(host, grain)
    narrow = hashin_shtrikman([host, grain], [1 - fraction, fraction])
    wide = wiener([host, grain], [1 - fraction, fraction])
    obeyed = narrow if RULES[rule].bounds == "hashin-shtrikman" else wide
    assert obeyed[0] - room <= mixed <= obeyed[1] + room
    assert wide[0] - room <= narrow[0] <= narrow[1] + room <= wide[1] + 2 * room
    if rule == "maxwell-garnett":
        assert mixed == pytest.approx(narrow[0] if host < grain else narrow[1], rel=1e-9)
