"""Tables continued beyond their ends, in every plot over frequency."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import numpy as np
import pytest

import mixsim
from mixsim.analysis import varied
from mixsim.present.plots import figure

LOADING = "inclusions.grain.volume_fraction"
RECIPE = """
host.material = "rubber"
inclusions.grain = { material = "grain", volume_fraction = "20 %", contact = "insulated" }
materials.rubber.permittivity.infinity = 3.0
materials.grain = { table = "grain.csv", extension = "causal" }
band = { from = "0.5 GHz", to = "6 GHz", points = 12 }
measured.readings = [
    { at = "0.5 GHz", permittivity = "4.4 ± 0.1" },
    { at = "2 GHz", permittivity = "4.2 ± 0.1" },
    { at = "6 GHz", permittivity = "3.9 ± 0.1" },
]
unknowns."inclusions.grain.volume_fraction" = ["0 %", "50 %"]
"""


@pytest.fixture
def recipe(tmp_path: Path) -> mixsim.Recipe:
    x = np.linspace(1.0, 4.0, 30)
    e = 3.0 + 10.0 / (1.0 - 1j * x / 2.0)
    rows = [f"{a!r}, {b.real!r}, {b.imag!r}" for a, b in zip(x.tolist(), e.tolist(), strict=True)]
    head = ["# convention: exp(-iwt)", "frequency [GHz], permittivity_real, permittivity_imag"]
    (tmp_path / "grain.csv").write_text("\n".join([*head, *rows]), encoding="utf-8")
    return mixsim.parse(RECIPE, folder=tmp_path)


def shaded(axes: Any) -> list[tuple[float, float]]:
    """Spans of the abscissa that are shaded."""
    spans = [patch.get_extents() for patch in axes.patches if patch.get_gid() == "beyond"]
    to_data = axes.transData.inverted()
    return [tuple(to_data.transform(span)[:, 0].tolist()) for span in spans]


@pytest.mark.parametrize("kind", ["predict", "sweep", "fit"])
def test_both_sides_are_shaded_and_said(kind: str, recipe: mixsim.Recipe) -> None:
    answer: Any = mixsim.predict(recipe)
    if kind == "sweep":
        answer = mixsim.sweep(recipe, [varied(recipe, LOADING, "1 %", "9 %", 3)])
    elif kind == "fit":
        answer = mixsim.fit(recipe)
    drawn = figure(answer)
    assert "shaded: grain beyond its table" in drawn.get_suptitle()
    panels = [axes for axes in drawn.axes if shaded(axes)]
    assert len(panels) == (1 if kind == "fit" else 2)  # below a fit, grey is the usual scatter
    for axes in panels:
        (left, low), (high, right) = shaded(axes)
        assert (low, high) == pytest.approx((1.0, 4.0))
        assert (left, right) == pytest.approx(axes.get_xlim())


def test_a_sweep_at_one_frequency_says_it_in_words(recipe: mixsim.Recipe) -> None:
    text = RECIPE.replace('from = "0.5 GHz", to = "6 GHz", points = 12', 'values = ["6 GHz"]')
    here = mixsim.parse(text, folder=recipe.folder)
    drawn = figure(mixsim.sweep(here, [varied(here, LOADING, "1 %", "9 %", 3)]))
    assert drawn.get_suptitle().endswith("· grain beyond its table")


def test_within_the_table_nothing_is_shaded(recipe: mixsim.Recipe) -> None:
    text = RECIPE.replace('"0.5 GHz", to = "6 GHz"', '"1 GHz", to = "4 GHz"')
    drawn = figure(mixsim.predict(mixsim.parse(text, folder=recipe.folder)))
    assert "beyond" not in drawn.get_suptitle()
    assert not any(shaded(axes) for axes in drawn.axes)
