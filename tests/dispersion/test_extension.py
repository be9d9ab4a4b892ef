"""Tables continued beyond their ends: tied to the truth near them, passive and joined, and said to be so."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

import mixsim
from mixsim.dispersion import kramers_kronig
from mixsim.dispersion.extension import Extension
from mixsim.dispersion.table import Table
from mixsim.errors import BadInput
from mixsim.units.constants import VACUUM_PERMITTIVITY

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


@pytest.mark.parametrize("name", SPECTRA)
def test_it_obeys_kramers_kronig_with_the_data(name: str) -> None:
    """What it answers, sampled far and wide: its real part is that of its loss, to 3e-3 of 1 + |ε|."""
    extension = Extension(table_of(name, 0.3, 3.0))
    grid = np.geomspace(1e-5, 1e5, 6001)
    answered = extension(grid)
    charge = extension.completion.conductivity / VACUUM_PERMITTIVITY
    seen = slice(1200, 4801, 30)  # 1e-3 to 1e3
    rebuilt = kramers_kronig(grid[seen], nodes=grid, loss=answered.imag - charge / grid)
    off = answered.real[seen] - rebuilt
    level = np.median(off)
    assert level >= 1.0
    assert np.max(np.abs(off - level) / (1.0 + np.abs(answered[seen]))) < 3e-3


def test_a_permeability_is_continued_above_zero_without_a_charge() -> None:
    omega = np.geomspace(0.5, 4.0, 120)
    truth = lambda w: 1.0 + 2.0 / (1.0 - 1j * w)  # noqa: E731
    table = Table(omega, 10.0 + 0j * omega, "rad/s", (), "exp(-iwt)", "text", truth(omega))
    extension = Extension(table, magnetic=True)
    assert extension.completion.conductivity == 0.0
    near = np.array([0.5 / 1.3, 4.0 * 1.3])
    assert extension(near) == pytest.approx(truth(near), abs=0.03)
    wide = extension(np.geomspace(1e-3, 1e3, 200))
    assert np.all(wide.imag >= 0.0) and np.all(np.isfinite(wide))
    assert extension(np.array([9.0, 9.0])) == pytest.approx(extension(9.0))


RECIPE = """
    band = { from = "0.5 GHz", to = "8 GHz", points = 9 }
    host.material = "measured"
    materials.measured = { table = "m.csv", extension = "causal" }
"""


def written(folder: Path, wrong: float = 1.0) -> None:
    """A relaxation from 1 to 4 GHz; its loss may be wrong by a factor."""
    x = np.linspace(1.0, 4.0, 40)
    e = 3.0 + 20.0 / (1.0 - 1j * x / 2.0)
    rows = [f"{a!r}, {b.real!r}, {wrong * b.imag!r}" for a, b in zip(x.tolist(), e.tolist(), strict=True)]
    head = ["# convention: exp(-iwt)", "frequency [GHz], permittivity_real, permittivity_imag"]
    (folder / "m.csv").write_text("\n".join([*head, *rows]), encoding="utf-8")


def said(text: str, folder: Path) -> list[tuple[str, str]]:
    """Path and message of what is said of continued tables."""
    answer = mixsim.predict(mixsim.parse(text, folder=folder))
    return [(c.path, c.message) for c in answer.warnings if c.kind == "extended"]


def test_a_recipe_asks_for_it_and_every_answer_says_so(tmp_path: Path) -> None:
    written(tmp_path)
    answer = mixsim.predict(mixsim.parse(RECIPE, folder=tmp_path))
    (caution,) = [caution for caution in answer.warnings if caution.kind == "extended"]
    assert "was measured from 1 GHz to 4 GHz" in caution.message
    assert np.all(answer.permittivity.imag > 0.0)
    with pytest.raises(BadInput, match="lies outside the table"):
        mixsim.predict(mixsim.parse(RECIPE.replace(', extension = "causal"', ""), folder=tmp_path))
    inside = RECIPE.replace("0.5 GHz", "1 GHz").replace("8 GHz", "4 GHz")
    kinds = {c.kind for c in mixsim.predict(mixsim.parse(inside, folder=tmp_path)).warnings}
    assert "extended" not in kinds


DOPED = """
    dopants.dye.terms.b = { model = "lorentz", step = 0.1, resonance = "3 GHz", damping = "1 GHz" }
"""
WARMED = """
    conditions.temperature = "40 °C"
    [materials.measured]
    table = "m.csv"
    extension = "causal"
    temperature = "20 °C"
    temperature_coefficient = "100 ppm/K"
"""


@pytest.mark.parametrize("text", [RECIPE + DOPED, RECIPE.rpartition("materials.")[0] + WARMED])
def test_it_is_said_whatever_is_done_to_the_material(text: str, tmp_path: Path) -> None:
    written(tmp_path)
    ((path, _),) = said(text, tmp_path)
    assert path == "materials.measured"


def test_it_is_said_of_a_material_in_a_recipe_of_its_own(tmp_path: Path) -> None:
    written(tmp_path)
    (tmp_path / "grain.toml").write_text(RECIPE, encoding="utf-8")
    outer = """
        band = { from = "0.5 GHz", to = "8 GHz", points = 9 }
        host.material = "paraffin"
        inclusions.g = { material = "grain", volume_fraction = "10 %" }
        materials.grain.recipe = "grain.toml"
    """
    ((path, _),) = said(outer, tmp_path)
    assert path == "materials.grain.recipe.materials.measured"


def test_data_that_cannot_be_causal_tell_nothing_beyond(tmp_path: Path) -> None:
    written(tmp_path, wrong=0.2)
    ((_, message),) = said(RECIPE, tmp_path)
    assert "means little" in message and "miss Kramers" in message


def test_a_verdict_beyond_the_table_says_so(tmp_path: Path) -> None:
    written(tmp_path)
    text = """
        host.material = "measured"
        inclusions.g = { material = "alumina", volume_fraction = "10 %", contact = "insulated" }
        materials.measured = { table = "m.csv", extension = "causal" }
        measured.readings = [{ at = "2 GHz", permittivity = "12.4 ± 0.1" }]
        unknowns."inclusions.g.volume_fraction" = ["0 %", "30 %"]
        acceptance = { of = "permittivity", at = "8 GHz", lower = 2.0, model_uncertainty = "none" }
    """
    judged = mixsim.judge(mixsim.parse(text, folder=tmp_path))
    assert [c.path for c in judged.warnings if c.kind == "extended"] == ["materials.measured"]
    within = mixsim.judge(mixsim.parse(text.replace("8 GHz", "3 GHz"), folder=tmp_path))
    assert "extended" not in [c.kind for c in within.warnings]


def test_a_fit_beyond_the_table_is_refused_where_the_table_stands(tmp_path: Path) -> None:
    written(tmp_path)
    text = """
        host.material = "paraffin"
        inclusions.g = { material = "measured", volume_fraction = "10 %", contact = "insulated" }
        materials.measured.table = "m.csv"
        measured.readings = [{ at = "8 GHz", permittivity = "2.6 ± 0.1" }]
        unknowns."inclusions.g.volume_fraction" = ["0 %", "30 %"]
    """
    with pytest.raises(BadInput, match=r"recipe:4: materials.measured.table: 8 GHz lies outside"):
        mixsim.fit(mixsim.parse(text, folder=tmp_path))
    continued = text + '    materials.measured.extension = "causal"'
    fitted = mixsim.fit(mixsim.parse(continued, folder=tmp_path))
    assert "extended" in [caution.kind for caution in fitted.warnings]


def test_an_audit_does_not_blame_the_table_for_it(tmp_path: Path) -> None:
    written(tmp_path)
    for asked, verdict in (
        (RECIPE, "could not tell"),
        (RECIPE.replace(', extension = "causal"', ""), "failed"),
    ):
        (tmp_path / "r.toml").write_text(asked, encoding="utf-8")
        (found,) = [f for f in mixsim.audit(tmp_path / "r.toml").findings if f.name == "range"]
        assert found.verdict == verdict


def test_what_cannot_be_continued_is_refused_where_it_stands(tmp_path: Path) -> None:
    written(tmp_path)
    file = tmp_path / "m.csv"
    file.write_text("\n".join(file.read_text(encoding="utf-8").splitlines()[:4]), encoding="utf-8")
    with pytest.raises(BadInput, match=r":4: materials.measured.extension: .*which has 2 rows"):
        mixsim.parse(RECIPE, folder=tmp_path)
    without_table = """
        host.material = "other"
        materials.measured = { table = "m.csv", extension = "causal" }
        materials.other = { based_on = "measured", permittivity.infinity = 2.0 }
    """
    written(tmp_path)
    assert mixsim.parse(without_table, folder=tmp_path).schema.materials["other"].extension is None
    with pytest.raises(BadInput, match=r"materials.other.extension: extension without table"):
        mixsim.parse(without_table.replace("2.0 }", '2.0, extension = "causal" }'), folder=tmp_path)


def test_an_extension_of_no_table() -> None:
    with pytest.raises(BadInput, match="extension without table"):
        mixsim.parse("""
            host.material = "a"
            materials.a = { permittivity.infinity = 2.0, extension = "causal" }
        """)
