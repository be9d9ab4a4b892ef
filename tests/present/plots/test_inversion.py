"""Plots of inversions: readings beside the model, estimates beside their doubt."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import numpy as np
import pytest

from mixsim.present.plots import figure
from mixsim.units import to_unit

PLASMA_ONLY = ('"inclusions.grain.volume_fraction" = ["0 %", "40 %"]', "")
STATIC_ONLY = ('high_frequency = "2.345 ± 0.002"', "")


def legend(drawn: Any) -> list[str]:
    (found,) = drawn.legends
    return [text.get_text() for text in found.get_texts()]


def lines(axes: Any) -> dict[str, Any]:
    return {line.get_label(): line for line in axes.lines}


def test_one_unknown_meets_its_reading_at_the_estimate(answers: Any) -> None:
    answer = answers.inversion(PLASMA_ONLY, STATIC_ONLY)
    estimate = answer.estimates[answers.plasma]
    drawn = figure(answer)
    (axes,) = drawn.axes
    assert axes.get_xlabel() == "oxide lattice plasma / cm⁻¹"
    assert legend(drawn) == ["static, model", "static, read 2.915 ± 0.010", "±1 standard uncertainty"]
    curve = lines(axes)["static, model"]
    assert curve.get_xdata()[[0, -1]] == pytest.approx([600.0, 2000.0])
    (said,) = axes.texts
    assert said.get_text() == answer.recipe.show(answers.plasma, estimate.value, estimate.std).replace(
        "cm^-1", "cm⁻¹"
    )
    assert np.interp(said.xy[0], curve.get_xdata(), curve.get_ydata()) == pytest.approx(2.915, abs=1e-4)


def test_impossible_reading_stands_off_the_curve(answers: Any) -> None:
    answer = answers.inversion(PLASMA_ONLY, STATIC_ONLY, ("2.915 ±", "9.0 ±"))
    assert answer.verdict == "impossible"
    drawn = figure(answer)
    (axes,) = drawn.axes
    curve, read = (lines(axes)[name] for name in ("static, model", "static, read 9.0 ± 0.010"))
    assert curve.get_ydata().max() < read.get_ydata()[0] < axes.get_ylim()[1]
    assert not axes.texts
    assert drawn.get_suptitle().endswith("maxwell-garnett: impossible")


def test_two_unknowns_have_ellipses_of_their_covariance(answers: Any) -> None:
    answer = answers.inversion()
    drawn = figure(answer)
    (axes,) = drawn.axes
    names = legend(drawn)
    assert names[:2] == ["static 2.915 ± 0.010", "high-frequency 2.345 ± 0.002"]
    assert names[2].startswith("estimate ") and names[3] == "1 and 2 standard uncertainties"
    loading = answer.estimates[answers.loading]
    ellipse = lines(axes)["1 and 2 standard uncertainties"].get_xdata() / 100.0
    assert [ellipse.min(), ellipse.max()] == pytest.approx(
        [loading.value - loading.std, loading.value + loading.std], rel=1e-3
    )
    # where loading is one std up, plasma is its correlation's share of one std up
    plasma = answer.estimates[answers.plasma]
    height = lines(axes)["1 and 2 standard uncertainties"].get_ydata()[np.argmax(ellipse)]
    share = plasma.value + answer.correlation[0, 1] * plasma.std
    assert abs(answer.correlation[0, 1]) > 0.3
    assert height == pytest.approx(to_unit(share, "cm^-1", "spectral"), rel=1e-3)
    low, high = (end / 100.0 for end in axes.get_xlim())
    assert loading.value - 6.1 * loading.std < low < loading.value < high < loading.value + 6.1 * loading.std


def test_without_uncertainty_there_is_no_ellipse(answers: Any) -> None:
    answer = answers.inversion(('"2.915 ± 0.010"', '"2.915"'), ('"2.345 ± 0.002"', '"2.345"'))
    names = legend(figure(answer))
    assert names[:2] == ["static 2.915", "high-frequency 2.345"]
    assert len(names) == 3 and names[2].startswith("estimate ")


def test_family_is_the_curve_of_its_reading(answers: Any) -> None:
    answer = answers.inversion(STATIC_ONLY)
    (axes,) = figure(answer).axes
    pairs = lines(axes)["pairs that fit equally"]
    assert pairs.get_xdata() == pytest.approx(100.0 * answer.family[answers.loading])
    contour = np.concatenate([c.get_paths()[0].vertices for c in axes.collections if c.get_paths()])
    for pair in pairs.get_xydata()[:: len(pairs.get_xydata()) // 5]:
        assert np.hypot(*((contour - pair) / [40.0, 1400.0]).T).min() < 0.02


def test_several_solutions_are_all_marked(answers: Any) -> None:
    answer = answers.inversion(PLASMA_ONLY, STATIC_ONLY)
    path = answers.plasma
    nothing = replace(answer.estimates[path], value=None, std=None, interval=None)
    values = [answer.unknowns[0].low * 1.2, answer.unknowns[0].low * 2.0]
    several = replace(
        answer, verdict="undecided", estimates={path: nothing}, solutions=tuple({path: v} for v in values)
    )
    (axes,) = figure(several).axes
    assert [text.get_text() for text in axes.texts] == ["720 cm⁻¹", "1200 cm⁻¹"]


def test_allowed_range_is_shaded_where_there_is_no_point(answers: Any) -> None:
    answer = answers.inversion(PLASMA_ONLY, STATIC_ONLY)
    path = answers.plasma
    unknown = answer.unknowns[0]
    nothing = replace(
        answer.estimates[path], value=None, std=None, interval=(unknown.low * 1.2, unknown.low * 2.0)
    )
    drawn = figure(replace(answer, verdict="undecided", estimates={path: nothing}))
    assert legend(drawn)[-1] == "values that the readings allow"


def test_two_unknowns_out_of_reach_say_what_the_model_gives(answers: Any) -> None:
    answer = answers.inversion(("2.915 ±", "40 ±"), ("2.345 ±", "30 ±"))
    assert answer.verdict == "impossible"
    names = legend(figure(answer))
    assert len(names) == 2
    assert names[0].startswith("static 40 ± 0.010: the model gives 2.")
