"""Audit of recipes, tables and materials: the flow, and what models must fulfil."""

from __future__ import annotations

import json
from pathlib import Path

import numpy as np
import pytest

import mixsim
from mixsim.analysis import Audit, Finding
from mixsim.errors import BadInput
from mixsim.units.constants import ELECTRON_MASS, ELEMENTARY_CHARGE, VACUUM_PERMITTIVITY

GOOD = """
title = "filled resin"
host.material = "resin"
band = { from = "1 GHz", to = "20 GHz", points = 60, spacing = "log" }
[inclusions.grain]
material = "filler"
volume_fraction = "30 %"
[materials.resin]
density = "1.2 g/cm^3"
permittivity.infinity = 2.5
permittivity.terms.slow = { model = "debye", step = 0.5, relaxation_frequency = "5 GHz" }
[materials.filler]
permittivity.infinity = 9.0
"""


def table(folder: Path, values: np.ndarray, name: str = "sample.csv") -> Path:
    frequency = np.geomspace(1.0, 100.0, values.size)
    rows = [f"{f!r},{e.real!r},{e.imag!r}" for f, e in zip(frequency.tolist(), values.tolist(), strict=True)]
    head = "# convention: exp(-iwt)\nfrequency [GHz], permittivity_real, permittivity_imag\n"
    (folder / name).write_text(head + "\n".join(rows) + "\n", encoding="utf-8")
    return folder / name


def debye(count: int = 120) -> np.ndarray:
    return 4.0 + 10.0 / (1.0 - 1j * np.geomspace(1.0, 100.0, count) / 20.0)


def found(answer: Audit, name: str, of: str | None = None) -> Finding:
    (finding,) = (f for f in answer.findings if f.name == name and of in (None, f.of))
    return finding


def material(lines: str, *, low: str = "1 GHz", high: str = "100 GHz") -> str:
    return f"""
        host.material = "m"
        band = {{ from = "{low}", to = "{high}" }}
        [materials.m]
        valid = {{ from = "{low}", to = "{high}" }}
        {lines}
    """


def audited(folder: Path, text: str) -> Audit:
    (folder / "r.toml").write_text(text, encoding="utf-8")
    return mixsim.audit(folder / "r.toml")


def test_a_recipe_is_looked_at_part_by_part_and_as_a_whole(tmp_path: Path) -> None:
    answer = audited(tmp_path, GOOD)
    assert answer.passed and answer.kind == "recipe"
    assert list(dict.fromkeys(f.of for f in answer.findings)) == ["resin", "filler", "mixture"]
    assert found(answer, "Kramers–Kronig", "mixture").verdict == "passed"
    assert found(answer, "range", "resin").verdict == "could not tell"
    assert answer.spectra[-1].subject.of == "mixture"
    document = json.loads(json.dumps(answer.to_dict(), allow_nan=False))
    assert document["passed"] is True and document["kind"] == "recipe"
    assert len(document["spectra"][-1]["kramers_kronig"]) == 60
    aligned = GOOD.replace(
        '"30 %"', '"30 %"\nshape = {kind="spheroid", aspect_ratio=3}\norientation="aligned"'
    )
    axes = audited(tmp_path, aligned)
    assert {"mixture ⊥", "mixture ∥"} <= {f.of for f in axes.findings} and axes.passed


def test_a_broken_recipe_is_not_computed(tmp_path: Path) -> None:
    answer = audited(tmp_path, GOOD.replace("30 %", "130 %"))
    assert not answer.passed and answer.faults and not answer.findings


def test_a_good_table_passes_and_a_spoilt_one_fails(tmp_path: Path) -> None:
    good = mixsim.audit(table(tmp_path, debye()))
    assert good.passed and good.kind == "table" and good.numbers == 120
    spoilt = mixsim.audit(table(tmp_path, debye().real + 0.5j * debye().imag))
    assert found(spoilt, "Kramers–Kronig").verdict == "failed"
    assert found(spoilt, "passivity").verdict == "passed" and not spoilt.passed


def test_the_permeability_of_a_table_is_looked_at_too(tmp_path: Path) -> None:
    frequency = np.geomspace(1.0, 100.0, 80)
    value = 1.0 + 5.0 / (1.0 - 1j * frequency / 20.0)
    head = "frequency [GHz], permittivity_real, permittivity_imag, permeability_real, permeability_imag\n"
    for sign, verdict in ((1, "passed"), (-1, "failed")):
        rows = [f"{f},9,0,{m.real},{sign * m.imag}" for f, m in zip(frequency, value, strict=True)]
        file = tmp_path / "magnetic.csv"
        file.write_text("# convention: exp(-iwt)\n" + head + "\n".join(rows) + "\n", encoding="utf-8")
        text = 'host.material = "m"\nmaterials.m.table = "magnetic.csv"\n'
        text += 'band = { from = "2 GHz", to = "50 GHz" }'
        for answer in (mixsim.audit(file), audited(tmp_path, text)):
            assert found(answer, "passivity of μ").verdict == verdict
            assert found(answer, "Kramers–Kronig of μ").verdict == verdict
            assert found(answer, "Kramers–Kronig").verdict == "passed"


def test_a_table_in_a_recipe_must_cover_what_is_asked(tmp_path: Path) -> None:
    table(tmp_path, debye())
    text = 'host.material = "m"\nband = { from = "2 GHz", to = "HIGH" }\nmaterials.m.table = "sample.csv"\n'
    assert found(audited(tmp_path, text.replace("HIGH", "50 GHz")), "range").verdict == "passed"
    beyond = found(audited(tmp_path, text.replace("HIGH", "200 GHz")), "range")
    assert beyond.verdict == "failed" and "the table covers 1 GHz to 100 GHz" in beyond.why


def test_electrons_are_those_of_the_plasma_frequency(tmp_path: Path) -> None:
    text = material(
        'density = "5 g/cm^3"\nmolar_mass = "100 g/mol"\npermittivity.infinity = 2.0\n'
        "[materials.m.permittivity.terms.b]\n"
        'model = "lorentz"\nplasma = "10 eV"\nresonance = "5 eV"\ndamping = "0.5 eV"',
        low="0.5 eV",
        high="500 eV",
    )
    sum_rule = found(audited(tmp_path, text), "f-sum")
    plasma = 10.0 * 1.602176634e-19 / 1.054571817e-34
    expected = plasma**2 * VACUUM_PERMITTIVITY * ELECTRON_MASS / ELEMENTARY_CHARGE**2
    assert sum_rule.verdict == "passed"
    assert sum_rule.numbers["terms_electrons_per_m3"] == pytest.approx(expected, rel=1e-8)
    assert sum_rule.numbers["terms_integral_per_m3"] == pytest.approx(expected, rel=1e-3)
    # ωε″ falls as 1/ω² above the band: 500 eV leaves 2/π · 0.5/500 of it, and as much as the sampling
    assert sum_rule.numbers["electrons_per_m3"] == pytest.approx(expected, rel=5e-3)
    per_formula = sum_rule.numbers["electrons_per_m3"] * 0.1 / (5000.0 * 6.02214076e23)
    assert sum_rule.numbers["electrons_per_formula"] == pytest.approx(per_formula, rel=1e-12)
    heavy = audited(tmp_path, text.replace("10 eV", "900 eV"))
    assert found(heavy, "f-sum").verdict == "failed" and "more than any matter" in found(heavy, "f-sum").why


@pytest.mark.parametrize(
    ("step", "verdict"),
    [(2.0, "passed"), (40.0, "failed")],
)
def test_snoek_against_a_stated_saturation(tmp_path: Path, step: float, verdict: str) -> None:
    text = material(
        'permittivity.infinity = 10.0\nsaturation = "14 GHz"\n'
        "[materials.m.permeability]\ninfinity = 1\n[materials.m.permeability.terms.s]\n"
        f'model = "lorentz"\nstep = {step}\nresonance = "2 GHz"\ndamping = "1 GHz"',
        low="0.1 GHz",
        high="20 GHz",
    )
    finding = found(audited(tmp_path, text), "Snoek product")
    assert finding.verdict == verdict
    assert finding.numbers["product_hz"] == pytest.approx(step * finding.numbers["resonance_hz"], rel=1e-12)
    assert finding.numbers["limit_hz"] == pytest.approx(14e9 * 2.0 / 3.0)


def test_snoek_of_a_precession_is_its_saturation(tmp_path: Path) -> None:
    """ω_m/ω₀ · ω₀ = ω_m: grains across whose field is driven, which two thirds of powder grains are."""
    text = material(
        "permittivity.infinity = 10.0\npermeability.infinity = 1\n[materials.m.permeability.terms.s]\n"
        'model = "landau-lifshitz-gilbert"\nsaturation = "14 GHz"\nresonance = "3 GHz"\n'
        "gilbert_damping = 0.02",
        low="0.1 GHz",
        high="20 GHz",
    )
    finding = found(audited(tmp_path, text), "Snoek product")
    assert finding.verdict == "passed" and "aligned" in finding.why
    assert finding.numbers["product_hz"] == pytest.approx(14e9, rel=2e-2)


def test_levels(tmp_path: Path) -> None:
    index = 'index = { model = "cauchy", a = 1.5, b = "0.004 µm^2" }\n'
    unknown = audited(tmp_path, material(index, low="400 nm", high="700 nm"))
    assert found(unknown, "levels").verdict == "could not tell"
    stated = material(f"{index}static = 2.4\nhigh_frequency = 2.2", low="400 nm", high="700 nm")
    level = found(audited(tmp_path, stated), "levels")
    assert (level.verdict, level.numbers) == ("passed", {"static": 2.4, "high_frequency": 2.2})
    below = audited(tmp_path, material("permittivity.infinity = 0.5"))
    assert found(below, "levels").verdict == "failed"
    assert found(below, "Kramers–Kronig").verdict == "failed"
    term = "[materials.m.permittivity.terms.c]\nmodel = 'conduction'\nconductivity = '1 S/m'"
    conducting = material(f"permittivity.infinity = 3\n{term}")
    assert found(audited(tmp_path, conducting), "levels").numbers["conductivity_s_per_m"] == pytest.approx(
        1.0
    )


def test_an_index_that_falls_fails(tmp_path: Path) -> None:
    text = material('index = { model = "cauchy", a = 1.5, b = "-0.004 µm^2" }', low="400 nm", high="700 nm")
    answer = audited(tmp_path, text)
    assert found(answer, "clear windows").verdict == "failed"


def test_of_a_resonance_without_damping_nothing_can_be_told(tmp_path: Path) -> None:
    line = '{ model = "lorentz", step = 1.0, resonance = "10 GHz", damping = "0 GHz" }'
    answer = audited(tmp_path, material(f"permittivity.infinity = 2.0\npermittivity.terms.t = {line}"))
    assert found(answer, "Kramers–Kronig").verdict == "could not tell"
    assert answer.passed


def test_what_is_none_of_the_three() -> None:
    with pytest.raises(BadInput, match="did you mean 'gold'"):
        mixsim.audit("golf")
    with pytest.raises(BadInput, match="no such file"):
        mixsim.audit("none.csv")
    with pytest.raises(BadInput, match="are for a recipe"):
        mixsim.audit("gold", {"mixing.rule": "bruggeman"})


def test_bad_tables_are_bad_input(tmp_path: Path) -> None:
    file = tmp_path / "x.csv"
    file.write_text("frequency [GHz], n\n1, 2\n", encoding="utf-8")
    with pytest.raises(BadInput, match="no convention"):
        mixsim.audit(file)
