"""A material whose table holds its permeability too."""

from __future__ import annotations

from pathlib import Path

import pytest

import mixsim
from mixsim.errors import BadInput

TABLE = """# convention: exp(-iwt)
frequency [GHz], permittivity_real, permittivity_imag, permeability_real, permeability_imag
1, 12, 0.5, 4.0, 0.5
2, 11, 0.6, 3.0, 1.0
4, 10, 0.7, 1.5, 1.5
"""
RECIPE = """
    band = { from = "1 GHz", to = "4 GHz", points = 5 }
    host.material = "epoxy"
    inclusions.ferrite = { material = "ferrite", volume_fraction = "30 %" }
    materials.ferrite.table = "ferrite.csv"
"""


def test_a_magnetic_table_makes_a_magnetic_mixture(tmp_path: Path) -> None:
    (tmp_path / "ferrite.csv").write_text(TABLE, encoding="utf-8")
    recipe = mixsim.parse(RECIPE, folder=tmp_path)
    answer = mixsim.predict(recipe)
    assert answer.magnetic
    grain, f = 4.0 + 0.5j, 0.3
    beta = (grain - 1.0) / (grain + 2.0)
    assert answer.permeability[0] == pytest.approx((1 + 2 * f * beta) / (1 - f * beta), rel=1e-12)
    assert mixsim.predict(recipe).to_dict()["static_permeability"] is None


def test_a_permeability_is_given_once(tmp_path: Path) -> None:
    (tmp_path / "ferrite.csv").write_text(TABLE, encoding="utf-8")
    with pytest.raises(BadInput, match="permeability beside ferrite"):
        mixsim.parse(RECIPE + "materials.ferrite.permeability.infinity = 2.0", folder=tmp_path)
