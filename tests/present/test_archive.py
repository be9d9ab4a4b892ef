"""Archives: every array under the name that JSON gives it, without pickles."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import numpy as np
import pytest

from mixsim.present.files import write


def held(answer: Any, folder: Path) -> dict[str, Any]:
    write(answer, folder / "answer.npz")
    with np.load(folder / "answer.npz", allow_pickle=False) as archive:
        return dict(archive)


@pytest.mark.parametrize("name", ["film", "magnet", "needles"])
def test_prediction_by_the_names_of_its_json(name: str, answers: Any, tmp_path: Path) -> None:
    answer = answers.prediction(name)
    arrays, shown = held(answer, tmp_path), answer.to_dict()
    for key in ("title", "rule", "convention"):
        assert str(arrays[key]) == shown[key]
    for key, values in shown.items():
        if isinstance(values, list) and key != "warnings":
            assert arrays[key].tolist() == values
        elif isinstance(values, dict) and set(values) == {"real", "imag"}:
            assert arrays[key].real.tolist() == values["real"]
            assert arrays[key].imag.tolist() == values["imag"]
    assert arrays["index_k"].tolist() == shown["index"]["k"]
    volumes = dict(zip(arrays["volume_fraction_names"], arrays["volume_fraction"].tolist(), strict=True))
    assert volumes == shown["composition"]["volume_fraction"]
    assert arrays["vary_paths"].tolist() == []


def test_sweep_holds_what_varies(answers: Any, tmp_path: Path) -> None:
    answer = answers.sweep((answers.loading, "1 %", "9 %", 3), (answers.plasma, "600 cm^-1", "900 cm^-1", 4))
    arrays = held(answer, tmp_path)
    assert arrays["vary_paths"].tolist() == [answers.loading, answers.plasma]
    assert arrays["vary__0"] == pytest.approx([0.01, 0.05, 0.09])
    assert arrays["vary__1"].tolist() == answer.vary[1].values.tolist()
    assert arrays["permittivity"].tolist() == answer.permittivity.tolist()
    assert arrays["static"].shape == (3, 4)
    assert arrays["volume_fraction"].shape == (2, 3, 4)


def test_inversion_in_the_order_of_its_paths(answers: Any, tmp_path: Path) -> None:
    answer = answers.inversion()
    arrays = held(answer, tmp_path)
    estimates = [answer.estimates[path] for path in arrays["paths"]]
    assert arrays["value"].tolist() == [estimate.value for estimate in estimates]
    assert arrays["std"].tolist() == [estimate.std for estimate in estimates]
    assert arrays["interval_high"].tolist() == [estimate.interval[1] for estimate in estimates]
    assert arrays["correlation"].tolist() == answer.correlation.tolist()
    assert arrays["measured"].tolist() == [2.915, 2.345]


def test_family_and_missing_numbers(answers: Any, tmp_path: Path) -> None:
    answer = answers.inversion(('high_frequency = "2.345 ± 0.002"', ""))
    arrays = held(answer, tmp_path)
    assert str(arrays["verdict"]) == "undecided"
    assert np.isnan(arrays["value"]).all()
    assert arrays["family"].tolist() == [answer.family[path].tolist() for path in arrays["paths"]]
