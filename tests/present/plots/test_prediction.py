"""Plots of predictions: what is drawn, at which scale, and what is said."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import numpy as np
import pytest
from matplotlib.backends.backend_agg import FigureCanvasAgg

import mixsim
from mixsim.present.plots import figure

CONFIGS = Path(__file__).parents[3] / "configs"
GOLD = """
[band]
from = "500 nm"
to = "800 nm"
points = 31
[host]
material = "glass"
[inclusions.colloid]
material = "metal"
volume_fraction = "50 ppm"
[materials]
glass.permittivity.infinity = 2.25
metal.permittivity.infinity = 9.0
metal.permittivity.terms.free = { model = "drude", plasma = "9 eV", damping = "0.07 eV" }
"""


def curves(axes: Any) -> dict[str, Any]:
    """The curves of a panel that stand in the legend, by name."""
    return {line.get_label(): line for line in axes.lines if line.get_gid()}


def notes(axes: Any) -> list[str]:
    return [text.get_text() for text in axes.texts]


def test_two_panels_share_the_band(answers: Any) -> None:
    answer = answers.prediction()
    above, below = figure(answer).axes
    assert (above.get_ylabel(), below.get_ylabel()) == ("ε′", "ε″")
    assert below.get_xlabel() == "wavenumber / cm⁻¹"
    assert above.get_xscale() == below.get_xscale() == "log"
    assert list(curves(above)) == ["mixture", "host (binder)", "grain (oxide)"]
    assert curves(above)["mixture"].get_ydata().tolist() == answer.permittivity.real.tolist()
    assert curves(below)["mixture"].get_ydata().tolist() == answer.permittivity.imag.tolist()
    assert curves(above)["mixture"].get_linewidth() > 1.5 * curves(above)["host (binder)"].get_linewidth()
    dashes = {str(line.get_linestyle()) + str(line._dash_pattern) for line in curves(above).values()}
    assert len(dashes) == 3  # told apart without colour
    assert notes(above) == [
        f"static {answer.limits.static.real:.4g}",
        f"high-frequency {answer.limits.high_frequency.real:.4g}",
    ]


@pytest.mark.parametrize(
    ("band", "label"),
    [
        ('from = "400 nm"\nto = "800 nm"', "vacuum wavelength / nm"),
        ('from = "1 GHz"\nto = "9 GHz"', "frequency / GHz"),
        ('from = "1 eV"\nto = "2 eV"', "photon energy / eV"),
    ],
)
def test_axis_in_the_unit_of_the_band(band: str, label: str, answers: Any) -> None:
    old = 'from = "300 cm^-1"\nto = "3000 cm^-1"\npoints = 31\nspacing = "log"'
    _, below = figure(answers.prediction("film", (old, band + "\npoints = 5"))).axes
    assert below.get_xlabel() == label
    assert below.get_xscale() == "linear"


def test_a_metal_does_not_flatten_the_mixture() -> None:
    answer = mixsim.predict(mixsim.parse(GOLD))
    drawn = figure(answer)
    metal = answer.constituents["colloid"].permittivity.real
    low, high = drawn.axes[0].get_ylim()
    assert metal.max() < -4.0
    assert 0.5 < low < answer.permittivity.real.min() and answer.permittivity.real.max() < high < 4.0
    (legend,) = drawn.legends
    assert [text.get_text() for text in legend.get_texts()] == [
        "mixture",
        "host (glass)",
        "colloid (metal), partly off scale",
    ]


def test_a_material_alone_is_one_curve_with_its_doubt_in_view() -> None:
    text = 'materials.foam.permittivity.infinity = "2.5 ± 0.5"\nhost.material = "foam"\n'
    text += 'band.values = ["1 GHz", "2 GHz"]'
    drawn = figure(mixsim.predict(mixsim.parse(text)))
    low, high = drawn.axes[0].get_ylim()
    assert low < 2.0 and high > 3.0
    assert [text.get_text() for text in drawn.legends[0].get_texts()] == ["foam"]
    assert "maxwell-garnett" not in drawn.get_suptitle()


def test_loss_over_many_decades_is_read_on_a_logarithmic_scale() -> None:
    """Conduction falls as 1/ω: on a linear scale only its first decade would be seen."""
    answer = mixsim.predict(mixsim.parse(mixsim.recipe.library.alone("sea-water")))
    above, below = figure(answer).axes
    assert (above.get_yscale(), below.get_yscale()) == ("linear", "log")
    low, high = below.get_ylim()
    assert low < answer.permittivity.imag.min() and answer.permittivity.imag.max() < high
    written = [label.get_text() for label in below.get_xticklabels()]
    assert "10⁶" in written and not [label for label in written if "e+" in label]


def test_a_far_limit_is_an_arrow(answers: Any) -> None:
    answer = answers.prediction("film", ("step = 0.3", "step = 30.0"))
    static, high = notes(figure(answer).axes[0])
    assert static == f"static {answer.limits.static.real:.4g} ↑"
    assert high.startswith("high-frequency") and "↑" not in high


def test_no_note_where_there_is_no_limit() -> None:
    index = GOLD.replace(
        "glass.permittivity.infinity = 2.25",
        'glass.index = { model = "cauchy", a = 1.48, b = "0.0049 µm^2" }',
    )
    above, _ = figure(mixsim.predict(mixsim.parse(index))).axes
    assert notes(above) == []


def test_magnetic_mixture_has_panels_for_permeability(answers: Any) -> None:
    answer = answers.prediction("magnet")
    axes = figure(answer).axes
    assert sorted(panel.get_ylabel() for panel in axes) == ["ε′", "ε″", "μ′", "μ″"]
    panels = {panel.get_ylabel(): panel for panel in axes}
    assert curves(panels["μ″"])["mixture"].get_ydata().tolist() == answer.permeability.imag.tolist()
    assert list(curves(panels["μ′"])) == ["mixture", "iron (powder)"]  # the rubber is not magnetic
    assert notes(panels["μ′"])[0] == f"static {answer.limits.static_permeability.real:.4g}"
    assert notes(panels["ε″"]) == ["no loss in the model"]


def test_principal_axes_are_told_apart(answers: Any) -> None:
    answer = answers.prediction("needles")
    above, _ = figure(answer).axes
    drawn = curves(above)
    assert drawn["mixture ⊥"].get_ydata().tolist() == answer.permittivity[0].real.tolist()
    assert drawn["mixture ∥"].get_ydata().tolist() == answer.permittivity[2].real.tolist()
    assert drawn["mixture ⊥"].get_color() != drawn["mixture ∥"].get_color()
    across, _, along = answer.limits.high_frequency.real
    assert f"high-frequency ⊥ {across:.4g}, ∥ {along:.4g}" in notes(above)  # too close for two notes


@pytest.mark.parametrize("name", ["embedded-capacitor", "porous-silica-coating", "ceramic-laminate"])
def test_notes_keep_off_the_mixture(name: str) -> None:
    drawn = figure(mixsim.predict(mixsim.load(CONFIGS / f"{name}.toml")))
    renderer = FigureCanvasAgg(drawn).get_renderer()
    above = drawn.axes[0]
    curve = above.transData.transform(curves(above)["mixture"].get_xydata())
    curve = curve[np.argsort(curve[:, 0])]
    assert len(above.texts) == 2
    for text in above.texts:
        ends = text.get_window_extent(renderer)
        x = np.linspace(ends.x0, ends.x1, 50)
        y = np.interp(x, *curve.T, left=np.nan, right=np.nan)
        assert not np.any((y > ends.y0) & (y < ends.y1)), text.get_text()


def test_the_doubt_of_the_permeability_is_drawn(answers: Any) -> None:
    unsure = ('volume_fraction = "30 %"', 'volume_fraction = "30 ± 2 %"')
    answer = answers.prediction("magnet", unsure)
    panels = {axes.get_ylabel(): axes for axes in figure(answer).axes}
    for label, part in (("μ′", "real"), ("μ″", "imag")):
        (band,) = [c for c in panels[label].collections if c.get_gid() == "unsure-0"]
        (path,) = band.get_paths()
        place = np.isclose(path.vertices[:, 0], answer.axis.shown[4])
        value = getattr(answer.permeability, part)[4]
        std = getattr(answer.pushed, f"permeability_{part}")[4]
        assert std > 0.0
        ends = path.vertices[place, 1]
        assert (ends.min(), ends.max()) == pytest.approx((value - std, value + std))
