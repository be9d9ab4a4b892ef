"""Plots of sweeps: curves, levels or maps, by what varies."""

from __future__ import annotations

from typing import Any

import numpy as np
import pytest

from mixsim.errors import Refusal
from mixsim.present.plots import figure
from mixsim.present.plots.sweep import MOST_CURVES


def panels(answer: Any) -> dict[str, Any]:
    """Panels by the label of their ordinate; a colour bar by the one of its abscissa."""
    return {axes.get_ylabel() or axes.get_xlabel(): axes for axes in figure(answer).axes}


def test_a_curve_for_each_value(answers: Any) -> None:
    answer = answers.sweep((answers.loading, "5 %", "25 %", 5))
    shown = panels(answer)
    assert set(shown) == {"ε′", "ε″", "ε′, limits", "highest ε″", "grain volume fraction / %"}
    assert [line.get_ydata().tolist() for line in shown["ε′"].lines] == answer.permittivity.real.tolist()
    assert len({line.get_color() for line in shown["ε″"].lines}) == 5
    bar = shown["grain volume fraction / %"]
    assert [text.get_text() for text in bar.get_xticklabels()] == ["5", "10", "15", "20", "25"]
    static, high = shown["ε′, limits"].lines
    assert (static.get_label(), high.get_label()) == ("static", "high-frequency")
    assert static.get_ydata().tolist() == answer.limits.static.real.tolist()
    assert shown["highest ε″"].get_xlabel() == "grain volume fraction / %"


def test_many_curves_are_thinned_and_keep_the_ends(answers: Any) -> None:
    answer = answers.sweep((answers.loading, "5 %", "25 %", 200))
    lines = panels(answer)["ε′"].lines
    assert len(lines) == MOST_CURVES
    assert lines[0].get_ydata().tolist() == answer.permittivity[0].real.tolist()
    assert lines[-1].get_ydata().tolist() == answer.permittivity[-1].real.tolist()


def test_magnetic_sweep_shows_both(answers: Any) -> None:
    answer = answers.sweep((answers.iron, "10 %", "30 %", 3), name="magnet")
    shown = panels(answer)
    assert {"ε′", "ε″", "μ′", "μ″"} < set(shown)
    assert [line.get_ydata().tolist() for line in shown["μ″"].lines] == answer.permeability.imag.tolist()


def test_at_one_frequency_against_the_value(answers: Any) -> None:
    answer = answers.sweep((answers.loading, "5 %", "25 %", 9), band='values = ["600 cm^-1"]')
    shown = panels(answer)
    assert set(shown) == {"ε′", "ε″"}
    at, static, high = shown["ε′"].lines
    assert at.get_xdata().tolist() == answer.vary[0].shown.tolist()
    assert at.get_ydata().tolist() == answer.permittivity[:, 0].real.tolist()
    assert [line.get_label() for line in (at, static, high)] == ["at 600 cm⁻¹", "static", "high-frequency"]
    assert shown["ε″"].get_xlabel() == "grain volume fraction / %"


def test_log_values_on_log_axes(answers: Any) -> None:
    shown = panels(answers.sweep((answers.plasma, "300 cm^-1", "3000 cm^-1", 9), log=True))
    assert shown["highest ε″"].get_xscale() == "log"
    ticks = [text.get_text() for text in shown["oxide lattice plasma / cm⁻¹"].get_xticklabels()]
    assert "1000" in ticks and not any("$" in tick for tick in ticks)


def test_two_numbers_make_maps(answers: Any) -> None:
    loading, plasma = (answers.loading, "1 %", "40 %", 12), (answers.plasma, "600 cm^-1", "2000 cm^-1", 8)
    answer = answers.sweep(loading, plasma)
    drawn = figure(answer)
    maps = [
        axes for axes in drawn.axes if axes.collections and axes.get_xlabel() == "grain volume fraction / %"
    ]
    assert len(maps) == 2
    assert maps[0].get_ylabel() == "oxide lattice plasma / cm⁻¹"
    place = len(answer.omega) // 2
    for axes, values in zip(maps, (answer.permittivity.real, answer.permittivity.imag), strict=True):
        assert axes.collections[0].get_array().reshape(8, 12).T.tolist() == values[..., place].tolist()
        numbers = [float(text.get_text()) for text in axes.texts]
        assert numbers and values[..., place].min() < min(numbers) < max(numbers) < values[..., place].max()
    bars = [axes.get_xlabel() for axes in drawn.axes if axes not in maps]
    at = f"{answer.axis.shown[place]:.5g} cm⁻¹"
    assert bars == [f"ε′ at {at}", f"ε″ at {at}"]


def test_numbers_of_crowded_lines_are_left_out() -> None:
    from matplotlib.figure import Figure

    from mixsim.present.plots.maps import APART, free_places

    axes = Figure().subplots()
    x = np.linspace(0.0, 1.0, 41)
    height = np.tanh((x - 0.5) * 40.0) + 5.0 * np.maximum(0.0, x - 0.6)
    steep = height[:, np.newaxis] + 0.01 * x
    lines = axes.contour(x, x, steep.T, levels=[-0.5, 0.0, 0.5, 2.0])
    places = free_places(axes, lines)
    assert len(places) == 1
    crowded, alone = lines.get_paths()[1].vertices, lines.get_paths()[3].vertices
    assert np.abs(alone - places[0]).max(axis=-1).min() < APART
    assert np.hypot(*(crowded - places[0]).T).min() > APART


def test_principal_axes_of_a_sweep_are_refused(answers: Any) -> None:
    with pytest.raises(Refusal, match=r"a plot of a sweep with principal axes; \.csv and \.npz"):
        figure(answers.sweep((answers.rod, "1 %", "9 %", 3), name="needles"))
