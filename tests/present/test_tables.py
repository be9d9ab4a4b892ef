"""Tables on a terminal: what they say is what the answer holds, and 80 columns hold it."""

from __future__ import annotations

import re
from pathlib import Path
from typing import Any

import numpy as np
import pytest

import mixsim
from mixsim.present import entries, phrases, tables

ROOT = Path(__file__).parents[2]
PLACES = ("configs/*.toml", "examples/*/recipe.toml", "mixsim/recipe/drafts/*.toml")
RECIPES = sorted(file for place in PLACES for file in ROOT.glob(place))
STATIC = "2.915 ± 0.010"
CONDUCTING = """
title = "Conducting"
host.material = "matrix"
inclusions.grain = { material = "metal", volume_fraction = "40 %" }
mixing.rule = "bruggeman"
[materials]
matrix.permittivity.infinity = 2.25
metal.permittivity.infinity = 4.0
metal.permittivity.terms.free = { model = "drude", plasma = "1.5 eV", damping = "0.1 eV" }
[band]
from = "0.2 eV"
to = "1.5 eV"
points = 21
"""


@pytest.fixture(autouse=True)
def narrow(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("COLUMNS", "80")


def widest(text: str) -> int:
    return max(map(len, text.splitlines()))


def rows(block: str) -> list[list[str]]:
    """Cells of the lines that begin with a number."""
    return [line.split() for line in block.splitlines() if re.match(r" *-?[\d.]+ ", line)]


def spectra(text: str) -> list[list[list[str]]]:
    """The spectra of a prediction's table, one for each principal axis shown."""
    return [rows(block) for block in text.split("\n\n") if "ε″" in block and len(rows(block)) > 1]


@pytest.mark.parametrize("file", RECIPES, ids=lambda file: f"{file.parent.name}/{file.stem}")
def test_every_shipped_recipe_fits_a_narrow_terminal(file: Path) -> None:
    text = tables.prediction(mixsim.predict(mixsim.load(file)))
    assert widest(text) <= 80
    # ± is explained where it is shown, and only there
    levels = text.split("\n\n")[2]
    assert ("± is one standard uncertainty" in levels) == bool(re.search(r"\d ± \d", levels))


@pytest.mark.parametrize("name", ["film", "needles", "magnet"])
def test_rows_hold_ends_highest_loss_and_the_numbers_of_the_answer(answers: Any, name: str) -> None:
    answer = answers.prediction(name)
    text = tables.prediction(answer)
    assert widest(text) <= 80
    aligned = answer.permittivity.ndim == 2
    shown = spectra(text)
    assert len(shown) == (2 if aligned else 1)
    for axis, block in zip((0, 2), shown, strict=False):
        e = answer.permittivity[axis] if aligned else answer.permittivity
        assert 9 <= len(block) <= tables.ROWS + 1
        assert [float(block[0][0]), float(block[-1][0])] == pytest.approx(
            answer.axis.shown[[0, -1]], rel=1e-4
        )
        for cells in block:
            at = int(np.argmin(abs(answer.axis.shown - float(cells[0]))))
            assert [float(cells[1]), float(cells[2])] == pytest.approx(
                [e[at].real, e[at].imag], rel=6e-4, abs=1e-12
            )
        marked = [float(cells[0]) for cells in block if "←" in cells]
        if np.any(e.imag > 0.0):
            assert marked == pytest.approx([answer.axis.shown[np.argmax(e.imag)]], rel=1e-4)
        else:
            assert marked == []


def test_aligned_grains_have_their_loss_marked_along_each_axis(answers: Any) -> None:
    answer = answers.prediction("needles")
    highest = [int(np.argmax(answer.permittivity[axis].imag)) for axis in (0, 2)]
    assert highest[0] != highest[1]  # or the test would not tell
    across, along = spectra(tables.prediction(answer))
    for block, place in ((across, highest[0]), (along, highest[1])):
        (marked,) = (float(cells[0]) for cells in block if "←" in cells)
        assert marked == pytest.approx(answer.axis.shown[place], rel=1e-4)


def test_permeability_stands_beside_permittivity_where_grains_are_magnetic(answers: Any) -> None:
    answer = answers.prediction("magnet")
    text = tables.prediction(answer)
    assert "static permeability" in text
    first = spectra(text)[0][0]
    assert float(first[3]) == pytest.approx(answer.permeability[0].real, rel=1e-3)
    assert float(first[4]) == pytest.approx(answer.permeability[0].imag, rel=1e-3)
    rods = (
        'volume_fraction = "30 %", orientation = "aligned", shape = { kind = "spheroid", aspect_ratio = 4 }'
    )
    answer = answers.prediction("magnet", ('volume_fraction = "30 %"', rods))
    across, along = spectra(tables.prediction(answer))
    for block, axis in ((across, 0), (along, 2)):
        m = answer.permeability[axis][0]
        assert [float(cell) for cell in block[0][3:5]] == pytest.approx([m.real, m.imag], rel=1e-3)


def test_a_level_that_is_not_there_says_where_the_reason_stands() -> None:
    text = tables.prediction(mixsim.predict(mixsim.parse(CONDUCTING)))
    assert re.search(r"^static permittivity +none: see no-limit below$", text, re.MULTILINE)
    assert "\ncaution, no-limit: " in text
    assert re.search(r"^conductivity at dc +[\d.]+ S/m$", text, re.MULTILINE)


@pytest.mark.parametrize(
    ("value", "shown"),
    [
        (0.0, "0"),
        (-0.0, "0"),
        (1.23456, "1.235"),
        (9999.6, "10000"),
        (19003.2, "19000"),
        (-23351.0, "-23350"),
        (2.5e7, "2.5e+07"),
        (0.000012345, "1.234e-05"),
        (float("nan"), "–"),
        (2.5 + 0j, "2.5"),
        (2.5 + 0.25j, "2.5 + 0.25i"),
    ],
)
def test_numbers(value: complex, shown: str) -> None:
    assert phrases.number(np.asarray(value)[()]) == shown


def test_a_sweep_has_a_row_for_each_value_with_its_peak(answers: Any) -> None:
    answer = answers.sweep((answers.loading, "2 %", "10 %", 5))
    text = tables.sweep(answer)
    assert widest(text) <= 80
    shown = rows(text)
    assert [cells[0] for cells in shown] == ["2", "4", "6", "8", "10"]
    middle = len(answer.omega) // 2
    for place, cells in enumerate(shown):
        e = answer.permittivity[place]
        peak = int(np.argmax(e.imag))
        held = [
            answer.limits.static[place].real,
            answer.limits.high_frequency[place].real,
            e[middle].real,
            e[middle].imag,
            e[peak].imag,
            answer.axis.shown[peak],
        ]
        assert [float(cell) for cell in cells[1:]] == pytest.approx(held, rel=6e-4)


def test_a_grid_shows_pairs_up_to_a_limit_and_says_how_to_get_the_rest(answers: Any) -> None:
    few = tables.sweep(
        answers.sweep((answers.loading, "2 %", "10 %", 3), (answers.plasma, "900 cm^-1", "1000 cm^-1", 2))
    )
    assert [cells[:2] for cells in rows(few)] == [[f, p] for f in ("2", "6", "10") for p in ("900", "1000")]
    assert "--out" not in few
    many = tables.sweep(answers.sweep((answers.loading, "0 %", "40 %", 41)))
    assert len(rows(many.split("\n\n")[1])) == tables.MOST_ROWS
    assert "40 of 41 rows; --out sweep.csv writes them all" in many


def test_an_aligned_sweep_has_both_axes(answers: Any) -> None:
    answer = answers.sweep((answers.rod, "0 %", "10 %", 3), name="needles")
    last = rows(tables.sweep(answer))[-1]
    assert [float(last[1]), float(last[4])] == pytest.approx(answer.limits.static[-1, [0, 2]].real, rel=6e-4)


def test_an_inversion_says_estimates_in_the_units_of_the_recipe(answers: Any) -> None:
    answer = answers.inversion()
    text = tables.inversion(answer)
    assert widest(text) <= 80
    loading, plasma = answer.estimates[answers.loading], answer.estimates[answers.plasma]
    found = re.search(
        rf"^{answers.loading}\n  ([\d.]+) ± ([\d.]+) %; 95 % from ([\d.]+) % to ([\d.]+) %$",
        text,
        re.MULTILINE,
    )
    assert found is not None
    assert float(found[1]) == pytest.approx(100 * loading.value, abs=float(found[2]) / 10)
    assert [float(found[3]), float(found[4])] == pytest.approx(100 * np.array(loading.interval), rel=1e-3)
    assert re.search(rf"^{answers.plasma}\n  \d+ ± \d+ cm\^-1; 95 %", text, re.MULTILINE)
    assert plasma.std > 0
    assert f"correlation of the two {answer.correlation[0, 1]:+.2f}" in text
    assert "(seed 0) confirms the ±" in text
    assert "under each rule that could apply" in text


def test_an_undecided_inversion_says_what_to_measure_and_which_pairs_fit(answers: Any) -> None:
    answer = answers.inversion(('high_frequency = "2.345 ± 0.002"\n', ""))
    assert answer.verdict == "undecided"
    text = tables.inversion(answer)
    assert "undecided: the readings cannot tell" in text
    assert "give a second reading" in text.replace("\n    ", " ")
    assert text.count("allowed are ") == 2
    pairs = text.split("pairs that fit\n")[1].split("\n\n")[0].splitlines()
    assert len([line for line in pairs if "%" in line]) >= 5


def test_an_impossible_inversion_gives_reasons_and_no_number(answers: Any) -> None:
    answer = answers.inversion((STATIC, "40 ± 0.1"))
    assert answer.verdict == "impossible"
    text = tables.inversion(answer)
    assert "impossible: no value in the ranges gives this reading\n  " in text
    for reason in answer.reasons:
        assert reason in re.sub(r"\n +", " ", text)
    assert "95 % from" not in text


def test_an_audit_lists_every_fault_then_cautions(tmp_path: Path) -> None:
    file = tmp_path / "recipe.toml"
    file.write_text(CONDUCTING, encoding="utf-8")
    text = tables.audit(mixsim.audit(file))
    assert re.match(r".*recipe\.toml: sound, \d+ numbers", text)
    file.write_text(
        CONDUCTING.replace('"bruggeman"', '"brugeman"').replace("40 %", "140 %"), encoding="utf-8"
    )
    text = tables.audit(mixsim.audit(file))
    assert text.splitlines()[0].endswith("recipe.toml: 2 faults")
    assert "'bruggeman'" in text and "'140 %'" in text


def test_numbers_of_a_recipe_stand_below_their_paths_where_a_line_is_too_long(answers: Any) -> None:
    recipe = answers.recipe()
    text = entries.numbers(recipe, wrapped=True)
    assert widest(text) <= 80
    lines = text.splitlines()
    assert lines[2::2] == list(recipe.leaves)
    assert lines[3 + 2 * list(recipe.leaves).index(answers.loading)].split()[:3] == ["10", "%", "0.1"]
    one = entries.numbers(recipe, wrapped=False).splitlines()
    assert len(one) == len(recipe.leaves) + 1


def test_tables_of_a_recipe_stand_below_its_numbers(tmp_path: Path) -> None:
    (tmp_path / "m.csv").write_text("# convention: exp(-iwt)\nfrequency [GHz], n\n1, 2\n2, 2\n3, 2\n")
    text = 'host.material = "m"\nmaterials.m.table = "m.csv"\n'
    said = entries.numbers(mixsim.parse(text, folder=tmp_path), wrapped=False)
    assert said.endswith("materials.m.table: m.csv, ε at 3 rows from 1 GHz to 3 GHz; beyond, nothing")
    text += 'materials.m.extension = "causal"\n'
    said = entries.numbers(mixsim.parse(text, folder=tmp_path), wrapped=False)
    assert " ".join(said.split()).endswith("from 1 GHz to 3 GHz; beyond, a causal continuation")
