"""CSV: what a spreadsheet opens, and what a material takes as a table."""

from __future__ import annotations

import csv
import io
from dataclasses import replace
from pathlib import Path
from typing import Any

import numpy as np
import pytest

import mixsim
from mixsim.dispersion import read_table
from mixsim.errors import Refusal
from mixsim.mixture import Response
from mixsim.present import comma_separated
from mixsim.present.files import write


def written(answer: Any, folder: Path) -> tuple[list[str], list[str], list[list[str]]]:
    """Comments, header and rows."""
    write(answer, folder / "answer.csv")
    lines = (folder / "answer.csv").read_text(encoding="utf-8").splitlines()
    comments = [line for line in lines if line.startswith("#")]
    header, *rows = csv.reader(io.StringIO("\n".join(lines[len(comments) :])))
    return comments, header, rows


def test_prediction_holds_every_digit(answers: Any, tmp_path: Path) -> None:
    answer = answers.prediction()
    comments, header, rows = written(answer, tmp_path)
    assert comments[0] == "# title: Test film"
    assert answer.recipe.digest in comments[1] and "rule maxwell-garnett" in comments[1]
    assert comments[2] == "# convention: exp(-iwt)"
    assert header == [
        "wavenumber [cm^-1]",
        "permittivity_real",
        "permittivity_imag",
        "n",
        "k",
        "loss_tangent",
        "absorption [1/m]",
        "conductivity [S/m]",
    ]
    table = np.array(rows, dtype=float)
    assert table[:, 0].tolist() == answer.axis.shown.tolist()
    assert (table[:, 1] + 1j * table[:, 2]).tolist() == answer.permittivity.tolist()
    assert table[:, 6].tolist() == answer.quantity("absorption_coefficient").tolist()


@pytest.mark.parametrize("band", ["wavenumber", "nm", "eV"])
@pytest.mark.parametrize("title", ["Test film", "Convention hall,\\nfilm of the roof"])
def test_a_written_prediction_is_a_measured_table(
    answers: Any, band: str, title: str, tmp_path: Path
) -> None:
    ends = {"nm": ("3300 nm", "33000 nm"), "eV": ("0.05 eV", "0.3 eV")}.get(band, ("300 cm^-1", "3000 cm^-1"))
    answer = answers.prediction("film", ("Test film", title), ("300 cm^-1", ends[0]), ("3000 cm^-1", ends[1]))
    comments, header, rows = written(answer, tmp_path)
    assert header[1:3] == ["permittivity_real", "permittivity_imag"]
    lines = [*comments, *(",".join(row) for row in [header, *rows])]
    (tmp_path / "measured.csv").write_text("\n".join(lines), encoding="utf-8")
    table = read_table(tmp_path / "measured.csv")
    order = np.argsort(answer.omega)
    assert table.omega == pytest.approx(answer.omega[order], rel=1e-13)
    assert table.permittivity.tolist() == answer.permittivity[order].tolist()
    (tmp_path / "again.toml").write_text(
        f'host.material = "film"\nmaterials.film.table = "measured.csv"\nband.values = ["{ends[0]}"]\n'
    )
    again = mixsim.predict(mixsim.load(tmp_path / "again.toml"))
    assert again.permittivity[0] == pytest.approx(answer.permittivity[0], rel=1e-9)


def test_a_written_magnetic_prediction_is_a_measured_table(answers: Any, tmp_path: Path) -> None:
    answer = answers.prediction("magnet")
    write(answer, tmp_path / "measured.csv")
    table = read_table(tmp_path / "measured.csv")
    assert table.permeability is not None
    assert table.permittivity.tolist() == answer.permittivity.tolist()
    assert table.permeability.tolist() == answer.permeability.tolist()
    text = 'host.material = "m"\nmaterials.m.table = "measured.csv"\nband.values = ["1 GHz", "4.6 GHz"]\n'
    again = mixsim.predict(mixsim.parse(text, folder=tmp_path))
    assert again.permeability == pytest.approx(answer.permeability[[0, 4]], rel=1e-9)


def test_what_holds_many_spectra_is_no_table(answers: Any, tmp_path: Path) -> None:
    write(answers.sweep((answers.loading, "1 %", "9 %", 3)), tmp_path / "swept.csv")
    with pytest.raises(Refusal, match="before the axis 'wavenumber'"):
        read_table(tmp_path / "swept.csv")
    write(answers.prediction("needles"), tmp_path / "aligned.csv")
    with pytest.raises(Refusal, match="'permittivity_real axis 1' is along one axis"):
        read_table(tmp_path / "aligned.csv")


@pytest.mark.parametrize("chunk", [7, 100, 16384])
def test_sweep_in_long_format(
    chunk: int, answers: Any, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(comma_separated, "_CHUNK", chunk)
    answer = answers.sweep((answers.loading, "1 %", "9 %", 3), (answers.plasma, "600 cm^-1", "900 cm^-1", 4))
    _, header, rows = written(answer, tmp_path)
    assert header[:3] == [f"{answers.loading} [%]", f"{answers.plasma} [cm^-1]", "wavenumber [cm^-1]"]
    table = np.array(rows, dtype=float).reshape(3, 4, 31, -1)
    assert table[:, 0, 0, 0] == pytest.approx([1.0, 5.0, 9.0])
    assert table[2, :, 5, 1] == pytest.approx([600.0, 700.0, 800.0, 900.0])
    assert table[1, 3, :, 2].tolist() == answer.axis.shown.tolist()
    assert table[..., 3].tolist() == answer.permittivity.real.tolist()


def test_sweep_at_one_frequency_has_one_row_a_value(answers: Any, tmp_path: Path) -> None:
    answer = answers.sweep((answers.loading, "1 %", "9 %", 5), band='values = ["600 cm^-1"]')
    _, _, rows = written(answer, tmp_path)
    assert [float(row[0]) for row in rows] == pytest.approx([1.0, 3.0, 5.0, 7.0, 9.0])


def test_missing_values_are_empty_cells(answers: Any, tmp_path: Path) -> None:
    answer = answers.prediction()
    permittivity = answer.permittivity.copy()
    permittivity[4] = 0.5j  # a loss tangent of 0.5/0
    _, header, rows = written(replace(answer, response=Response(permittivity, answer.permeability)), tmp_path)
    place = header.index("loss_tangent")
    assert [number for number, row in enumerate(rows) if row[place] == ""] == [4]
    assert rows[4][1:3] == ["0.0", "0.5"]


def test_permeability_only_where_magnetic(answers: Any, tmp_path: Path) -> None:
    answer = answers.prediction("magnet")
    _, header, rows = written(answer, tmp_path)
    assert header[1:5] == ["permittivity_real", "permittivity_imag", "permeability_real", "permeability_imag"]
    assert [float(row[4]) for row in rows] == answer.permeability.imag.tolist()


def test_a_column_for_each_principal_axis(answers: Any, tmp_path: Path) -> None:
    answer = answers.prediction("needles")
    _, header, rows = written(answer, tmp_path)
    assert header[1:4] == [f"permittivity_real axis {axis}" for axis in (1, 2, 3)]
    assert "absorption axis 3 [1/m]" in header
    assert [float(row[3]) for row in rows] == answer.permittivity[2].real.tolist()


def test_inversion_by_unknown_then_by_rule(answers: Any, tmp_path: Path) -> None:
    answer = answers.inversion()
    comments, header, rows = written(answer, tmp_path)
    assert "# answered, closed form" in comments or "# answered, least squares" in comments
    assert header[:7] == ["rule", "path", "value", "std", "95 % low", "95 % high", "unit"]
    assert [row[:2] for row in rows[:2]] == [
        [answer.rule, path] for path in (answers.loading, answers.plasma)
    ]
    estimate = answer.estimates[answers.loading]
    assert [float(cell) for cell in rows[0][2:6]] == [estimate.value, estimate.std, *estimate.interval]
    assert rows[0][7] == answer.recipe.show(answers.loading, estimate.value, estimate.std)
    assert [row[0] for row in rows[2:]] == [found.rule for found in answer.by_rule[1:] for _ in range(2)]
