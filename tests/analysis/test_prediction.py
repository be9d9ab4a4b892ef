"""Predictions and sweeps: the band as written, the grid as asked, JSON that holds."""

from __future__ import annotations

import json
from pathlib import Path

import numpy as np
import pytest

import mixsim
from mixsim.analysis import Prediction, axis_of, varied
from mixsim.units import SPEED_OF_LIGHT

CONFIGS = sorted((Path(__file__).parents[2] / "configs").glob("*.toml"))
FILM = """
title = "film"
host.material = "matrix"
inclusions.grain = { material = "grain", volume_fraction = "10 %" }
materials.matrix.permittivity.infinity = 2.25
materials.grain.permittivity.infinity = 4.0
materials.grain.permittivity.terms.free = { model = "drude", plasma = "1.5 eV", damping = "0.1 eV" }
"""
LOADING, PLASMA = "inclusions.grain.volume_fraction", "materials.grain.permittivity.terms.free.plasma"


def film(band: str) -> mixsim.Recipe:
    return mixsim.parse(FILM + f"[band]\n{band}\n")


@pytest.mark.parametrize(
    ("band", "unit", "first", "last", "count"),
    [
        ('from = "400 nm"\nto = "800 nm"', "nm", 400.0, 800.0, 401),
        ('from = "1 GHz"\nto = "100 GHz"\npoints = 3\nspacing = "log"', "GHz", 1.0, 100.0, 3),
        ('from = "0.5 eV"\nto = "400 nm"\npoints = 5', "eV", 0.5, 3.0996, 5),
        ('values = ["589.3 nm", "2 eV"]', "nm", 589.3, 619.921, 2),
    ],
)
def test_band_in_the_unit_and_order_written(
    band: str, unit: str, first: float, last: float, count: int
) -> None:
    axis = axis_of(film(band))
    assert axis.unit == unit
    assert len(axis.omega) == count
    assert axis.shown[[0, -1]] == pytest.approx([first, last], rel=1e-5)
    steps = np.diff(np.log(axis.shown) if 'spacing = "log"' in band else axis.shown)
    assert steps == pytest.approx(np.full(count - 1, steps[0]))


def test_no_band_is_refused() -> None:
    with pytest.raises(mixsim.BadInput) as refused:
        mixsim.predict(mixsim.parse(FILM))
    (fault,) = refused.value.faults
    assert (fault.path, fault.found) == ("band", "no band to evaluate over")


@pytest.mark.parametrize("file", CONFIGS, ids=lambda file: file.stem)
def test_json_is_valid_and_holds_what_the_arrays_hold(file: Path) -> None:
    prediction = mixsim.predict(mixsim.load(file))
    held = json.loads(json.dumps(prediction.to_dict(), allow_nan=False))
    count = len(prediction.omega)
    assert held["convention"] == "exp(-iwt)"
    assert held["permittivity"]["real"] == prediction.permittivity.real.tolist()
    assert held["frequency_hz"][0] == pytest.approx(prediction.omega[0] / (2 * np.pi))
    assert held["wavelength_m"][0] * held["frequency_hz"][0] == pytest.approx(SPEED_OF_LIGHT)
    for name in (
        "loss_tangent",
        "absorption_coefficient_per_m",
        "conductivity_s_per_m",
        "magnetic_loss_tangent",
    ):
        assert np.shape(held[name])[-1] == count
    assert sum(held["composition"]["volume_fraction"].values()) == pytest.approx(1.0, abs=0.02)
    assert held["provenance"]["version"] == mixsim.__version__
    assert "vary" not in held


def test_limits_that_are_not_there_are_null() -> None:
    host = FILM.replace("materials.matrix.permittivity.infinity = 2.25", "").replace(
        '"matrix"', '"borosilicate-crown"'
    )
    held = mixsim.predict(mixsim.parse(host + 'band.values = ["600 nm"]\n')).to_dict()
    assert held["static"] is None
    assert held["high_frequency"] is None


def grid(recipe: mixsim.Recipe) -> Prediction:
    return mixsim.sweep(
        recipe, [varied(recipe, LOADING, "1 %", "20 %", 3), varied(recipe, PLASMA, "1 eV", "2 eV", 4)]
    )


def test_sweep_is_a_grid_of_predictions() -> None:
    text = 'from = "500 nm"\nto = "2500 nm"\npoints = 7'
    swept = grid(film(text))
    assert swept.permittivity.shape == (3, 4, 7)
    assert swept.limits.static.shape == (3, 4)
    for i, loading in enumerate(("1 %", "10.5 %", "20 %")):
        for j, plasma in enumerate(("1 eV", "1.3333333333333333 eV", "1.6666666666666665 eV", "2 eV")):
            one = mixsim.parse(FILM + f"[band]\n{text}\n", settings={LOADING: loading, PLASMA: plasma})
            alone = mixsim.predict(one)
            assert swept.permittivity[i, j] == pytest.approx(alone.permittivity, rel=1e-12)
            assert swept.limits.static[i, j] == pytest.approx(alone.limits.static, rel=1e-12)
    held = swept.to_dict()
    assert held["vary"][LOADING] == pytest.approx([0.01, 0.105, 0.2])
    assert np.shape(held["permittivity"]["real"]) == (3, 4, 7)
    assert np.shape(held["composition"]["volume_fraction"]["grain"]) == (3, 4)
    json.dumps(held, allow_nan=False)


def test_sweep_of_given_values() -> None:
    recipe = film('values = ["1 eV"]')
    swept = mixsim.sweep(recipe, {LOADING: [0.2, 0.05], PLASMA: np.array([1e15])})
    assert swept.permittivity.shape == (2, 1, 1)
    assert swept.vary[0].shown.tolist() == [20.0, 5.0]
    for values, found in (([0.1, 1.2], "1.2 is out of range"), (0.1, "shape"), ([], "shape")):
        with pytest.raises(mixsim.BadInput, match=found):
            mixsim.sweep(recipe, {LOADING: values})


def test_values_are_spaced_in_the_unit_written() -> None:
    recipe = film('values = ["1 eV"]')
    linear = varied(recipe, PLASMA, "400 nm", "800 nm", 5)
    assert linear.unit == "nm"
    assert linear.shown == pytest.approx([400, 500, 600, 700, 800])
    log = varied(recipe, LOADING, "0.1 %", "10 %", 3, log=True)
    assert log.values == pytest.approx([0.001, 0.01, 0.1])


@pytest.mark.parametrize(
    ("path", "start", "stop", "points", "log", "found"),
    [
        ("inclusions.grain.volume_fractoin", "0 %", "1 %", 3, False, "unknown path"),
        (LOADING, "0 %", "140 %", 3, False, "out of range"),
        (LOADING, "0 nm", "1 %", 3, False, "nm"),
        (LOADING, "1 %", "2 %", 1, False, "1 points"),
        (LOADING, "2 %", "2 %", 3, False, "from 2 %"),
        (LOADING, "0 %", "2 %", 3, True, "log axis"),
        (PLASMA, "1", "2", 3, False, "unit"),
    ],
)
def test_sweeps_that_cannot_be_asked(
    path: str, start: str, stop: str, points: int, log: bool, found: str
) -> None:
    with pytest.raises(mixsim.BadInput) as refused:
        varied(film('values = ["1 eV"]'), path, start, stop, points, log=log)
    (fault,) = refused.value.faults
    assert (fault.file, fault.path) == ("command line", "--vary")
    assert found in str(fault)


def test_sweep_without_room_for_the_host_is_refused_with_the_sum() -> None:
    recipe = mixsim.parse(FILM + 'voids.volume_fraction = "30 %"\nband.values = ["1 eV"]\n')
    with pytest.raises(mixsim.BadInput, match=r"add up to 1\.1; the sum is at most 1"):
        mixsim.sweep(recipe, [varied(recipe, LOADING, "0 %", "80 %", 3)])


def test_sweep_too_large_for_memory_is_refused() -> None:
    recipe = film('from = "400 nm"\nto = "800 nm"\npoints = 2000')
    with pytest.raises(mixsim.BadInput, match="at most 4e"):
        mixsim.sweep(recipe, [varied(recipe, LOADING, "0 %", "80 %", 30_000)])


def test_a_table_that_does_not_reach_is_an_error(tmp_path: Path) -> None:
    (tmp_path / "grain.csv").write_text(
        "# convention: exp(-iwt)\nwavelength [nm], n, k\n500,1.5,0\n600,1.4,0\n"
    )
    text = 'host.material = "polystyrene"\ninclusions.g = { material = "g", volume_fraction = 0.1 }\n'
    (tmp_path / "r.toml").write_text(text + 'materials.g.table = "grain.csv"\nband.values = ["700 nm"]\n')
    with pytest.raises(mixsim.BadInput, match=r"700 nm lies outside the table grain\.csv"):
        mixsim.predict(mixsim.load(tmp_path / "r.toml"))
