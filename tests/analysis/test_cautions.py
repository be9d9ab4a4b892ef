"""Each caution is said where it is due and not where it is not."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

import mixsim
from mixsim.analysis import varied

OXIDE = """
host.material = "matrix"
inclusions.grain.material = "grain"
inclusions.grain.volume_fraction = "{loading}"
{extra}
materials.matrix.permittivity.infinity = 2.25
materials.grain.permittivity.infinity = 4.0
materials.grain.permittivity.terms.free = {{ model = "drude", plasma = "1.5 eV", damping = "0.1 eV" }}
{more}
"""
INSULATED = 'inclusions.grain.contact = "insulated"\n'
VISIBLE = 'band = { from = "400 nm", to = "800 nm", points = 41 }\n'


TWO_SHAPES = """
host.material = "matrix"
inclusions.ball = { material = "weak", volume_fraction = "34 %" }
inclusions.rod.material = "strong"
inclusions.rod.volume_fraction = "61 %"
inclusions.rod.shape = { kind = "spheroid", aspect_ratio = 80.0 }
materials.matrix.permittivity.infinity = 2.0
materials.weak.index = { model = "constant", n = 0.0028, k = 2.2297 }
materials.strong.index = { model = "constant", n = 0.0408, k = 7.978 }
band.values = ["1 µm"]
"""


def kinds(text: str) -> list[str]:
    return [caution.kind for caution in mixsim.predict(mixsim.parse(text)).warnings]


def oxide(loading: str = "1 %", extra: str = INSULATED, more: str = VISIBLE) -> str:
    return OXIDE.format(loading=loading, extra=extra, more=more)


def test_nothing_is_said_of_a_sound_recipe() -> None:
    assert kinds(oxide(extra=INSULATED + 'inclusions.grain.diameter = "15 nm"')) == []


@pytest.mark.parametrize(
    ("text", "kind"),
    [
        (oxide(extra=INSULATED + 'inclusions.grain.diameter = "90 nm"'), "quasi-static"),
        (
            oxide(extra=INSULATED + 'inclusions.grain.diameter = "2 µm"', more='band.values = ["20 µm"]\n'),
            "skin-depth",
        ),
        (oxide("70 %"), "packing"),
        (oxide("20 %", extra=""), "contact"),
        (oxide("5 %", extra='inclusions.grain.contact = "touching"'), "contact"),
        (oxide("40 %", more=VISIBLE + 'mixing.rule = "bruggeman"\n'), "contact"),
        (oxide("28 %", extra="", more=VISIBLE + 'mixing.rule = "bruggeman"\n'), "percolation"),
        (oxide("40 %", extra="", more=VISIBLE + 'mixing.rule = "bruggeman"\n'), "no-limit"),
        (oxide("10 %", extra="", more='band.values = ["0.51 eV"]\n'), "rule-spread"),
        ('host.material = "fused-silica"\nband.values = ["9 µm"]\n', "out-of-range"),
        ('host.material = "borosilicate-crown"\nband.values = ["600 nm"]\n', "no-limit"),
        (TWO_SHAPES, "not-passive"),
    ],
)
def test_said_where_due(text: str, kind: str) -> None:
    assert kind in kinds(text)


DYE = """
host.material = "glass"
materials.glass.permittivity.infinity = 2.25
dopants.dye.terms.a = {{ model = "lorentz", step = 0.001, resonance = "2.1 eV", damping = "0.1 eV" }}
dopants.dye.terms.b = {{ model = "lorentz", step = 0.001, resonance = "{resonance}", damping = "0.1 eV" }}
band = {{ from = "400 nm", to = "800 nm", points = 5 }}
"""


def test_wavenumbers_among_visible_light_are_asked_about() -> None:
    found = mixsim.predict(mixsim.parse(DYE.format(resonance="590 cm^-1"))).warnings
    (caution,) = found
    assert (caution.kind, caution.path) == ("unit-suspect", "dopants.dye.terms.b.resonance")
    assert "'590 nm'" in caution.message
    assert "16949.2 nm" in caution.message
    for sound in ("590 nm", "16949 cm^-1", "2.4 eV"):
        assert kinds(DYE.format(resonance=sound)) == []


def test_an_infrared_band_beside_an_infrared_band_is_not_asked_about() -> None:
    text = DYE.format(resonance="590 cm^-1").replace('"2.1 eV"', '"700 cm^-1"')
    assert kinds(text.replace('"400 nm"', '"400 cm^-1"').replace('"800 nm"', '"900 cm^-1"')) == []


def test_a_wide_band_is_not_suspected_of_its_own_other_end() -> None:
    text = """
        host.material = "paraffin"
        band = { from = "0.1 GHz", to = "100 GHz", points = 3 }
    """
    assert "unit-suspect" not in kinds(text)
    assert "unit-suspect" in kinds(text.replace("100 GHz", "1.2 THz").replace("0.1 GHz", "1 GHz"))


def test_sweep_is_judged_at_its_worst() -> None:
    recipe = mixsim.parse(oxide())
    swept = mixsim.sweep(recipe, [varied(recipe, "inclusions.grain.volume_fraction", "1 %", "70 %", 5)])
    assert "packing" in [caution.kind for caution in swept.warnings]
    assert np.all(np.isfinite(swept.permittivity))


def test_audit_asks_about_units_and_lists_faults(tmp_path: object) -> None:
    file = tmp_path / "dye.toml"  # type: ignore[operator]
    file.write_text(DYE.format(resonance="590 cm^-1"))
    report = mixsim.audit(file)
    assert report.passed
    assert [caution.kind for caution in report.warnings] == ["unit-suspect"]
    file.write_text(DYE.format(resonance="590 kg").replace("lorentz", "lorenz"))
    report = mixsim.audit(file)
    assert not report.passed
    assert len(report.faults) == 2
    assert report.to_dict()["faults"][0]["line"] == 4


def test_a_resonance_without_damping_is_said(recwarn: pytest.WarningsRecorder) -> None:
    text = """
        host.material = "m"
        materials.m.permittivity.infinity = 2.0
        band.values = ["1 eV", "2 eV"]
        [materials.m.permittivity.terms.t]
        model = "lorentz"
        step = 1.0
        resonance = "2 eV"
        damping = "0 eV"
    """
    (caution,) = mixsim.predict(mixsim.parse(text)).warnings
    assert (caution.kind, "first at 2 eV" in caution.message) == ("not-finite", True)
    assert not recwarn.list


@pytest.mark.parametrize("rule", ["maxwell-garnett", "bruggeman", "lorentz-lorenz"])
def test_what_loses_nothing_loses_nothing(rule: str) -> None:
    """A loss-free metal by itself: no −0.0 that would turn the wave around, no loss by rounding."""
    text = f"""
        host.material = "m"
        inclusions.i = {{ material = "m", volume_fraction = 0 }}
        mixing.rule = "{rule}"
        materials.m.permittivity.infinity = 2.0
        materials.m.permittivity.terms.t = {{ model = "drude", plasma = "4 eV", damping = "0 eV" }}
        band.values = ["1 eV", "2 eV"]
    """
    found = mixsim.predict(mixsim.parse(text))
    assert np.all(found.permittivity.real < 0)
    assert np.all(found.permittivity.imag == 0)
    assert np.all(found.quantity("extinction") > 0)


def test_the_largest_grain_of_a_sweep_is_judged() -> None:
    recipe = mixsim.parse(oxide(extra=INSULATED + 'inclusions.grain.diameter = "10 nm"'))
    swept = mixsim.sweep(recipe, [varied(recipe, "inclusions.grain.diameter", "10 nm", "300 nm", 3)])
    assert "300 nm" in next(c.message for c in swept.warnings if c.kind == "quasi-static")


def test_a_measured_density_that_no_solution_has_is_asked_about() -> None:
    recipe = mixsim.load("configs/glycerol-coolant.toml", {"mixing.density": "1.5 g/cm^3"})
    assert [caution.kind for caution in mixsim.predict(recipe).warnings] == ["partial-volumes"]
    heavy = mixsim.load("configs/glycerol-coolant.toml", {"materials.glycerol.density": "1261 g/cm^3"})
    assert "unit-suspect" in [caution.kind for caution in mixsim.predict(heavy).warnings]


def test_a_table_of_the_wrong_sign_is_named(tmp_path: Path) -> None:
    (tmp_path / "m.csv").write_text(
        "# convention: exp(+iwt)\nwavelength [nm], n, k\n500,1.5,0.1\n600,1.4,0.1\n"
    )
    (tmp_path / "r.toml").write_text(
        'host.material = "m"\nmaterials.m.table = "m.csv"\nband.values = ["550 nm"]\n'
    )
    found = [c for c in mixsim.predict(mixsim.load(tmp_path / "r.toml")).warnings if c.kind == "not-passive"]
    (caution,) = found
    assert caution.path == "materials.m"
    assert "exp(+iwt)" in caution.message


def test_long_grains_conduct_earlier_and_the_caution_says_by_how_much() -> None:
    """Rods of 20:1 percolate under Bruggeman at 1.5/(1.5 + <1/N>), near 2.87 %; balls at 1/3."""
    rods = 'shape = { kind = "spheroid", aspect_ratio = 20 }\n'
    touching = 'inclusions.grain.contact = "touching"\nmixing.rule = "bruggeman"\n'
    assert "percolation" not in kinds(oxide("2.5 %", touching))
    text = oxide("2.5 %", touching + "inclusions.grain." + rods)
    said = [c.message for c in mixsim.predict(mixsim.parse(text)).warnings if c.kind == "percolation"]
    assert len(said) == 1
    assert "threshold 0.0287 of bruggeman for grains of this shape" in said[0]
    compiled = mixsim.parse(text).compile()
    path = "inclusions.grain.volume_fraction"
    below, above = compiled.limits({path: np.array([0.0285, 0.0290])}).conductivity
    assert below == 0.0 < above


def test_waves_that_count_are_not_cautioned_of_and_where_they_stop_is() -> None:
    """1.5 πd/λ in the matrix: 0.47 for 40 nm at 400 nm, 0.71 for 60 nm."""

    def said(diameter: str, waves: str, more: str = VISIBLE) -> dict[str, str]:
        extra = f'{INSULATED}inclusions.grain.diameter = "{diameter}"\ninclusions.grain.waves = "{waves}"'
        answer = mixsim.predict(mixsim.parse(oxide(extra=extra, more=more)))
        return {caution.kind: caution.message for caution in answer.warnings}

    assert "waves = 'dipole' takes them in" in said("40 nm", "none")["quasi-static"]
    assert said("40 nm", "dipole").keys() == {"no-limit"}
    assert "dipole alone no longer carries" in said("60 nm", "dipole")["quasi-static"]
    far = 'band.values = ["20 µm"]\n'
    assert "waves = 'inside' takes that in" in said("2 µm", "none", far)["skin-depth"]
    assert "skin-depth" not in said("2 µm", "inside", far)


def test_waves_inside_large_strong_grains_and_the_large_ones_of_a_spread() -> None:
    text = """
        band.values = ["3 GHz"]
        host.material = "polyethylene"
        inclusions.grain = { material = "titania-ceramic", volume_fraction = "10 %", diameter = "4 mm" }
    """
    inside = [c.message for c in mixsim.predict(mixsim.parse(text)).warnings if c.kind == "quasi-static"]
    assert len(inside) == 1 and "waves wide inside" in inside[0]
    small = text.replace("4 mm", "2 mm")
    assert "quasi-static" not in kinds(small)
    spread = small.replace('"2 mm"', '"2 mm", diameter_spread = 0.4')
    found = [c.message for c in mixsim.predict(mixsim.parse(spread)).warnings if c.kind == "quasi-static"]
    assert len(found) == 1 and "grains of up to 4.45" in found[0]
