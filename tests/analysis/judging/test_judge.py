"""Verdicts: probability, guard bands, budget, labels, lots; and what is refused."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from scipy.special import ndtr

import mixsim
from mixsim.analysis import Judgement, judge_lot
from mixsim.errors import BadInput

LOADING = "inclusions.oxide.volume_fraction"
PIECE = """
    title = "Invented filled resin"
    host.material = "resin"
    inclusions.oxide = {{ material = "oxide", volume_fraction = "20 %" }}
    voids.volume_fraction = "2 %"
    [materials]
    resin = {{ density = "1.2 g/cm^3", permittivity.infinity = 3.0 }}
    oxide = {{ density = "4 g/cm^3", permittivity.infinity = 10.0 }}
    [measured]
    density = "{density} ± {std} g/cm^3"
    {label}
    [unknowns]
    "inclusions.oxide.volume_fraction" = ["0 %", "60 %"]
    [acceptance]
    {acceptance}
"""
LIMITS = 'lower = "23 %"\nupper = "27 %"\nmodel_uncertainty = "none"'


def density_of(loading: float) -> float:
    """Of the piece, 2 % of it voids [g/cm³]."""
    return (0.98 - loading) * 1.2 + loading * 4.0


def judged(
    loading: float, std: float, acceptance: str = f'of = "{LOADING}"\n{LIMITS}', label: str = ""
) -> Judgement:
    """Verdict on a piece of which the density was read."""
    text = PIECE.format(density=density_of(loading), std=std, acceptance=acceptance, label=label)
    return mixsim.judge(mixsim.parse(text))


@pytest.mark.parametrize(
    ("loading", "decision"),
    [(0.25, "pass"), (0.264, "undecided"), (0.275, "undecided"), (0.29, "fail"), (0.22, "fail")],
)
def test_guarded_verdicts(loading: float, decision: str) -> None:
    """± of 0.28 % in density is 0.4 % of loading: the guard band is 0.8 % on both sides of each limit."""
    std = 0.4 * 2.8 / 100
    answer = judged(loading, std)
    (piece,) = answer.pieces
    assert piece.value == pytest.approx(loading, abs=1e-9)
    assert piece.std == pytest.approx(0.004, rel=1e-6)
    expected = ndtr((0.27 - loading) / 0.004) - ndtr((0.23 - loading) / 0.004)
    assert piece.probability == pytest.approx(expected, abs=1e-6)
    assert answer.decision == decision


def test_simple_acceptance_has_no_guard_band() -> None:
    acceptance = f'of = "{LOADING}"\n{LIMITS}\ndecision = "simple"'
    assert judged(0.269, 0.02, acceptance).decision == "pass"
    assert judged(0.271, 0.02, acceptance).decision == "fail"


def test_a_method_that_cannot_support_the_specification() -> None:
    """± of 1.2 % needs 2.4 % on each side of limits that lie 4 % apart."""
    answer = judged(0.25, 1.2 * 2.8 / 100)
    assert answer.decision == "undecided"
    assert "cannot support this specification" in answer.pieces[0].reasons[0]


def test_solids_and_total_are_not_confused() -> None:
    """25.5 % of the whole with 2 % voids is 26.02 % of the solids."""
    of_solids = judged(0.255, 0.001, f'of = "inclusions.oxide.volume_fraction_of_solids"\n{LIMITS}')
    assert of_solids.pieces[0].value == pytest.approx(0.255 / 0.98, abs=1e-9)
    by_weight = judged(
        0.255,
        0.001,
        'of = "inclusions.oxide.weight_fraction"\nlower = "50 %"\nmodel_uncertainty = "none"',
    )
    assert by_weight.pieces[0].value == pytest.approx(0.255 * 4.0 / density_of(0.255), abs=1e-9)


def test_every_number_with_an_uncertainty_is_in_the_budget() -> None:
    """Against Gauss's law by hand: f = (ρ − 0.98 ρ_h)/(ρ_f − ρ_h)."""
    text = PIECE.format(
        density=density_of(0.25), std=0.01, acceptance=f'of = "{LOADING}"\n{LIMITS}', label=""
    )
    text = text.replace('"1.2 g/cm^3"', '"1.2 ± 0.02 g/cm^3"').replace('"4 g/cm^3"', '"4 ± 0.05 g/cm^3"')
    (piece,) = mixsim.judge(mixsim.parse(text)).pieces
    by_hand = {
        "density": 0.01 / 2.8,
        "materials.resin.density": 0.02 * (-0.98 + 0.25) / 2.8,
        "materials.oxide.density": -0.05 * 0.25 / 2.8,
    }
    found = {source.name: source.std for source in piece.budget}
    assert found == pytest.approx({name: abs(value) for name, value in by_hand.items()}, rel=1e-3)
    assert piece.std == pytest.approx(np.sqrt(sum(value**2 for value in by_hand.values())), rel=1e-3)
    assert sum(source.share for source in piece.budget) == pytest.approx(1.0)


def test_the_choice_of_the_rule_is_a_source_of_doubt() -> None:
    text = """
        host.material = "polyethylene"
        inclusions.filler = { material = "alumina", volume_fraction = "20 %" }
        measured.static = "3.10 ± 0.001"
        unknowns."inclusions.filler.volume_fraction" = ["0 %", "60 %"]
        acceptance = { of = "inclusions.filler.volume_fraction", upper = "30 %" }
    """
    (piece,) = mixsim.judge(mixsim.parse(text)).pieces
    others = [abs(value - piece.value) for value in piece.by_rule.values()]
    (rules,) = [source for source in piece.budget if source.name == "choice of the rule"]
    assert rules.std == pytest.approx(max(others) / np.sqrt(3.0))
    assert rules.std > 0.0


def test_readings_that_contradict_each_other_widen_the_answer() -> None:
    text = PIECE.format(
        density=density_of(0.25),
        std=0.01,
        acceptance=f'of = "{LOADING}"\n{LIMITS}',
        label="static = '4.9 ± 0.01'",
    )
    (piece,) = mixsim.judge(mixsim.parse(text)).pieces
    assert piece.budget[0].name == "disagreement of the readings"


def test_a_label_in_weight_that_was_read_as_volume() -> None:
    """53 % by weight of the solids is near 25 % by volume: the label holds by weight, and not by volume."""
    weight = 0.25 * 4.0 / density_of(0.25)
    answer = judged(0.25, 0.005, label=f'label = "{100 * weight} %"')
    assert answer.pieces[0].meanings[0].meaning == "by weight of the solids"
    (caution,) = [caution for caution in answer.warnings if caution.kind == "label"]
    assert "does not hold by volume of the whole" in caution.message
    right = judged(0.25, 0.005, label='label = "25 %"')
    assert not [caution for caution in right.warnings if caution.kind == "label"]


def test_a_sample_that_calibrates_is_not_judged() -> None:
    text = """
        host.material = "resin"
        inclusions.oxide = { material = "oxide", volume_fraction = "20 %" }
        [materials]
        resin = { density = "1.2 g/cm^3", permittivity.infinity = 3.0 }
        oxide = { density = "4 g/cm^3", permittivity.infinity = 10.0 }
        [unknowns]
        "materials.oxide.permittivity.infinity" = [5.0, 20.0]
        [acceptance]
        of = "inclusions.oxide.volume_fraction"
        upper = "30 %"
        model_uncertainty = "none"
        [[samples]]
        name = "retained"
        calibrates = true
        set = { "inclusions.oxide.volume_fraction" = "25.0 % ± 0.2 %" }
        high_frequency = "4.25 ± 0.01"
        [[samples]]
        name = "new"
        high_frequency = "4.10 ± 0.01"
        unknowns."inclusions.oxide.volume_fraction" = ["0 %", "60 %"]
    """
    answer = mixsim.judge(mixsim.parse(text))
    assert [piece.sample for piece in answer.pieces] == ["new"]
    assert answer.calibrators == ("retained",)
    sources = {source.name: source.share for source in answer.pieces[0].budget}
    assert sources["samples.retained.inclusions.oxide.volume_fraction"] > 0.05
    with pytest.raises(BadInput, match="every sample calibrates"):
        mixsim.judge(mixsim.parse(text.replace('name = "new"', 'name = "new"\ncalibrates = true')))


def test_a_lot_is_judged_row_by_row(tmp_path: Path) -> None:
    """As each piece is by itself; bad rows are refused by themselves."""
    recipe = mixsim.parse(
        PIECE.format(density=1.9, std=0.01, acceptance=f'of = "{LOADING}"\n{LIMITS}', label="")
    )
    loadings = [0.25, 0.267, 0.30]
    rows = [f"p{i},{density_of(loading)!r}" for i, loading in enumerate(loadings)]
    file = tmp_path / "lot.csv"
    file.write_text(
        "\n".join(["sample,density", *rows, "short", "words,heavy", "gold,19.3"]), encoding="utf-8"
    )
    lot = judge_lot(recipe, file)
    assert [row.decision for row in lot.rows] == [
        "pass",
        "undecided",
        "fail",
        "refused",
        "refused",
        "refused",
    ]
    for row, loading in zip(lot.rows, loadings, strict=False):
        (alone,) = judged(loading, 0.01).pieces
        assert (row.value, row.std, row.probability) == pytest.approx(
            (alone.value, alone.std, alone.probability), rel=1e-5
        )
    assert "'heavy' for density" in lot.rows[4].reason and "missed by" in lot.rows[5].reason
    assert lot.counts == {"pass": 1, "fail": 1, "undecided": 1, "refused": 3}


@pytest.mark.parametrize(
    ("acceptance", "found"),
    [
        (f'of = "{LOADING}"', "neither lower nor upper"),
        (f'of = "{LOADING}"\nlower = "30 %"\nupper = "20 %"', "is above upper"),
        (f'of = "{LOADING}"\nlower = "3 kg"', "acceptance.lower"),
        ('of = "inclusions.oxyde.volume_fraction"\nlower = 1', "did you mean"),
        ('of = "permittivity"\nlower = 1', "permittivity without at"),
        ('of = "density"\nat = "1 GHz"\nlower = "1 g/cm^3"', "at beside density"),
        (
            f'of = "{LOADING}"\nlower = 0\ndecision = "simple"\ncoverage_factor = 2',
            "beside simple acceptance",
        ),
    ],
)
def test_limits_that_cannot_be_used(acceptance: str, found: str) -> None:
    with pytest.raises(BadInput) as error:
        judged(0.25, 0.01, acceptance)
    assert found in str(error.value)


@pytest.mark.parametrize(
    ("text", "found"),
    [
        ("", "it is empty"),
        ("sample,static\na,3", "no column 'density'"),
        ("sample,density,colour\na,1.9,red", "unknown column 'colour'"),
        (None, "no such file"),
    ],
)
def test_lots_that_cannot_be_read(tmp_path: Path, text: str | None, found: str) -> None:
    file = tmp_path / "lot.csv"
    if text is not None:
        file.write_text(text, encoding="utf-8")
    recipe = mixsim.parse(
        PIECE.format(density=1.9, std=0.01, acceptance=f'of = "{LOADING}"\n{LIMITS}', label="")
    )
    with pytest.raises(BadInput, match=found):
        judge_lot(recipe, file)
