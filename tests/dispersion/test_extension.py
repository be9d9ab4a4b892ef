"""Tables continued beyond their ends: tied to the truth near them, passive and joined, and said to be so."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

import mixsim
from mixsim.dispersion.extension import Extension
from mixsim.dispersion.table import Table
from mixsim.errors import BadInput

SPECTRA = {
    "relaxation": lambda w: 3.0 + 20.0 / (1.0 - 1j * w),
    "band": lambda w: 2.0 + 1.5 / (1.0 - w**2 - 0.3j * w),
    "carriers": lambda w: 4.0 - 9.0 / (w * (w + 0.2j)),
}


def table_of(truth: object, low: float, high: float) -> Table:
    omega = np.geomspace(low, high, 150)
    return Table(omega, SPECTRA[str(truth)](omega), "rad/s", (), "exp(-iwt)", "text")


@pytest.mark.parametrize("name", SPECTRA)
def test_near_the_ends_it_is_near_the_truth(name: str) -> None:
    """Within a factor of 1.3 beyond either end: 5 % of 1 + |ε|. The band holds most of what there is."""
    table = table_of(name, 0.15, 6.0)
    extension = Extension(table)
    near = np.concatenate([np.geomspace(0.15 / 1.3, 0.15, 20), np.geomspace(6.0, 6.0 * 1.3, 20)])
    truth = SPECTRA[name](near)
    assert np.max(np.abs(extension(near) - truth) / (1.0 + np.abs(truth))) < 0.05


@pytest.mark.parametrize("name", SPECTRA)
def test_it_is_joined_and_passive(name: str) -> None:
    table = table_of(name, 0.3, 3.0)
    extension = Extension(table)
    for end in (0.3, 3.0):
        left, right = extension(np.array([end * (1 - 1e-9), end * (1 + 1e-9)]))
        assert left == pytest.approx(right, rel=1e-5)
    far = extension(np.geomspace(1e-4, 1e4, 400))
    assert np.all(far.imag >= 0.0)
    assert extension(table.omega) == pytest.approx(table.permittivity)


RECIPE = """
    band = { from = "0.5 GHz", to = "8 GHz", points = 9 }
    host.material = "measured"
    materials.measured = { table = "m.csv", extension = "causal" }
"""


def test_a_recipe_asks_for_it_and_every_answer_says_so(tmp_path: Path) -> None:
    x = np.linspace(1.0, 4.0, 40)
    e = 3.0 + 20.0 / (1.0 - 1j * x / 2.0)
    rows = [f"{a!r}, {b.real!r}, {b.imag!r}" for a, b in zip(x.tolist(), e.tolist(), strict=True)]
    head = ["# convention: exp(-iwt)", "frequency [GHz], permittivity_real, permittivity_imag"]
    (tmp_path / "m.csv").write_text("\n".join([*head, *rows]), encoding="utf-8")
    answer = mixsim.predict(mixsim.parse(RECIPE, folder=tmp_path))
    (caution,) = [caution for caution in answer.warnings if caution.kind == "extended"]
    assert "was measured from 1 GHz to 4 GHz" in caution.message
    assert np.all(answer.permittivity.imag > 0.0)
    with pytest.raises(BadInput, match="lies outside the table"):
        mixsim.predict(mixsim.parse(RECIPE.replace(', extension = "causal"', ""), folder=tmp_path))
    inside = RECIPE.replace("0.5 GHz", "1 GHz").replace("8 GHz", "4 GHz")
    kinds = {c.kind for c in mixsim.predict(mixsim.parse(inside, folder=tmp_path)).warnings}
    assert "extended" not in kinds


def test_an_extension_of_no_table() -> None:
    with pytest.raises(BadInput, match="extension without table"):
        mixsim.parse("""
            host.material = "a"
            materials.a = { permittivity.infinity = 2.0, extension = "causal" }
        """)
