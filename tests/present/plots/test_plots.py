"""Every plot: nothing clipped, nothing too small, titles as written."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest
from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.figure import Figure
from matplotlib.text import Text

import mixsim
from mixsim.present.plots import figure
from mixsim.present.plots.style import settings

CONFIGS = sorted((Path(__file__).parents[3] / "configs").glob("*.toml"))
SMALLEST = 8.0  # points


def examine(drawn: Figure) -> None:
    """No text leaves the paper, none is smaller than a report bears."""
    with settings():
        renderer = FigureCanvasAgg(drawn).get_renderer()
        drawn.draw(renderer)
        box = drawn.get_tightbbox(renderer)
        width, height = drawn.get_size_inches()
        assert box.x0 > -0.01 and box.y0 > -0.01
        assert box.x1 < width + 0.01 and box.y1 < height + 0.01
        for axes in drawn.axes:
            if (legend := axes.get_legend()) is not None:
                inside = legend.get_window_extent(renderer)
                assert inside.x1 <= width * drawn.dpi + 1 and inside.y1 <= height * drawn.dpi + 1
        texts = [text for text in drawn.findobj(Text) if text.get_text() and text.get_visible()]
        assert min(text.get_fontsize() for text in texts) >= SMALLEST


@pytest.mark.parametrize("file", CONFIGS, ids=lambda file: file.stem)
def test_recipes_fit_the_paper(file: Path) -> None:
    examine(figure(mixsim.predict(mixsim.load(file))))


@pytest.mark.parametrize("name", ["film", "magnet", "needles"])
def test_predictions_fit_the_paper(name: str, answers: Any) -> None:
    examine(figure(answers.prediction(name)))


@pytest.mark.parametrize("log", [False, True])
@pytest.mark.parametrize("points", [3, 30])
def test_sweeps_fit_the_paper(points: int, log: bool, answers: Any) -> None:
    loading = (answers.loading, "1 %", "30 %", points)
    examine(figure(answers.sweep(loading, log=log)))
    examine(figure(answers.sweep(loading, log=log, band='values = ["600 cm^-1"]')))
    examine(figure(answers.sweep(loading, (answers.plasma, "600 cm^-1", "2000 cm^-1", points), log=log)))
    examine(figure(answers.sweep((answers.iron, "5 %", "40 %", points), name="magnet", log=log)))


@pytest.mark.parametrize(
    "changes",
    [
        (),
        (('"2.915 ± 0.010"', '"2.915"'), ('"2.345 ± 0.002"', '"2.345"')),
        (('high_frequency = "2.345 ± 0.002"', ""),),
        (("2.915 ±", "40 ±"), ("2.345 ±", "30 ±")),
        (('"inclusions.grain.volume_fraction" = ["0 %", "40 %"]', ""),),
    ],
    ids=["answered", "no-uncertainty", "one-reading", "impossible", "one-unknown"],
)
def test_inversions_fit_the_paper(changes: tuple[tuple[str, str], ...], answers: Any) -> None:
    examine(figure(answers.inversion(*changes)))


@pytest.mark.parametrize("title", ["glass of $x_$", "a title that goes on and on " * 8])
def test_title_is_shown_as_written(title: str, answers: Any) -> None:
    drawn = figure(answers.prediction("film", ("Test film", title)))
    examine(drawn)
    shown = " ".join(drawn.get_suptitle().split())
    assert shown == f"{title.strip()} maxwell-garnett · grain 10 % by volume"
