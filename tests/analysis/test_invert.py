"""Inversion: forward and back, with the doubt that the readings leave, and honest refusals."""

from __future__ import annotations

from typing import Any

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

import mixsim
from mixsim.analysis import Inversion, Unknown, freed
from mixsim.analysis.inversion.answer import Reading
from mixsim.analysis.inversion.closed_form import closed_form
from mixsim.units import Leaf, read

MATRIX = """
host.material = "matrix"
materials.matrix.density = "1.2 g/cm^3"
materials.matrix.permittivity.infinity = 2.1
materials.matrix.permittivity.terms.dipoles = { model = "debye", step = 0.4, relaxation_frequency = "1 GHz" }
"""
GRAINS = """
inclusions.grain = { material = "grain", volume_fraction = "10 %" }
materials.grain.density = "5 g/cm^3"
materials.grain.permittivity.infinity = 4.5
"""
BAND = 'materials.grain.permittivity.terms.band = { model = "lorentz", plasma = "1300 cm^-1", '
LATTICE = MATRIX + GRAINS + BAND + 'resonance = "500 cm^-1", damping = "40 cm^-1", strength = 0.9 }\n'
METAL = (
    MATRIX
    + GRAINS
    + 'materials.grain.permittivity.terms.band = { model = "drude", plasma = "1 eV", damping = "0.1 eV" }\n'
)
IONS = 'materials.matrix.permittivity.terms.ions = { model = "conduction", conductivity = "1 mS/m" }\n'
LOADING, PLASMA = "inclusions.grain.volume_fraction", "materials.grain.permittivity.terms.band.plasma"
CM = 2e2 * np.pi * 299792458.0


def bruggeman(text: str) -> str:
    return text + 'mixing.rule = "bruggeman"\n'


def number(written: object) -> Leaf | None:
    return None if written is None else read(written, "number")  # type: ignore[arg-type]


def ask(text: str, *free: tuple[str, Any, Any], static: object = None, high: object = None) -> Inversion:
    recipe = mixsim.parse(text)
    unknowns = [freed(recipe, *one) for one in free]
    return mixsim.invert(recipe, static=number(static), high_frequency=number(high), free=unknowns)


def levels(text: str, **values: Any) -> tuple[float, float]:
    """Static and high-frequency level of a recipe with some numbers changed."""
    limits = mixsim.parse(text).compile().limits(values)
    return float(limits.static.real), float(limits.high_frequency.real)


@pytest.mark.parametrize("rule", ["maxwell-garnett", "bruggeman"])
@settings(max_examples=25)
@given(fraction=st.floats(0.02, 0.38), wavenumber=st.floats(650.0, 1950.0))
def test_loading_and_plasma_frequency_forward_and_back(rule: str, fraction: float, wavenumber: float) -> None:
    text = LATTICE + f'mixing.rule = "{rule}"\n'
    static, high = levels(text, **{LOADING: fraction, PLASMA: wavenumber * CM})
    answer = ask(
        text, (LOADING, "0 %", "40 %"), (PLASMA, "600 cm^-1", "2000 cm^-1"), static=static, high=high
    )
    assert answer.verdict == "answered"
    assert answer.method == "closed form"
    assert answer.estimates[LOADING].value == pytest.approx(fraction, rel=1e-9)
    assert answer.estimates[PLASMA].value == pytest.approx(wavenumber * CM, rel=1e-8)
    assert answer.estimates[PLASMA].std is None
    assert "±" in answer.estimates[PLASMA].note


@settings(max_examples=20)
@given(weight=st.floats(0.05, 0.8), voids=st.floats(0.0, 0.1))
def test_least_squares_forward_and_back_where_there_is_no_closed_form(weight: float, voids: float) -> None:
    text = bruggeman(
        LATTICE.replace('volume_fraction = "10 %"', 'weight_fraction = "20 %"')
        + 'voids.volume_fraction = "1 %"\n'
    )
    path = "inclusions.grain.weight_fraction"
    static, high = levels(text, **{path: weight, "voids.volume_fraction": voids})
    answer = ask(
        text, (path, "0 %", "90 %"), ("voids.volume_fraction", "0 %", "20 %"), static=static, high=high
    )
    assert answer.method == "least squares"
    assert answer.estimates[path].value == pytest.approx(weight, abs=1e-6)
    assert answer.estimates["voids.volume_fraction"].value == pytest.approx(voids, abs=1e-6)


def test_dopant_plasma_frequency_is_the_resonance_times_the_root_of_the_step() -> None:
    """ωp = ω0 √(ε_s − ε∞), in a host without other bands."""
    text = """
        host.material = "glass"
        materials.glass.permittivity.infinity = 2.25
        [dopants.ion]
        terms.band = { model = "lorentz", plasma = "0.2 eV", resonance = "2.0 eV", damping = "0.3 eV" }
    """
    path = "dopants.ion.terms.band.plasma"
    answer = ask(text, (path, "0.01 eV", "1 eV"), static="2.2625 ± 0.0005")
    energy = read("2.0 eV", "spectral").value
    assert answer.method == "closed form"
    assert answer.estimates[path].value == pytest.approx(energy * np.sqrt(0.0125), rel=1e-12)
    # d ωp/dε = ω0/(2√(ε_s − ε∞))
    assert answer.estimates[path].std == pytest.approx(energy / 2 / np.sqrt(0.0125) * 0.0005, rel=1e-6)


def test_dopant_concentration_through_the_virtual_cavity() -> None:
    text = """
        host.material = "glass"
        materials.glass.permittivity.infinity = 2.25
        [dopants.ion]
        number_density = "1e20 cm^-3"
        local_field = "virtual-cavity"
        terms.band = { model = "lorentz", strength = 0.01, resonance = "2.0 eV", damping = "0.3 eV" }
    """
    path = "dopants.ion.number_density"
    static, _ = levels(text, **{path: 3e26})
    answer = ask(text, (path, "1e19 cm^-3", "1e21 cm^-3"), static=static)
    assert answer.estimates[path].value == pytest.approx(3e26, rel=1e-6)


@pytest.mark.parametrize("rule", ["maxwell-garnett", "bruggeman"])
def test_metallic_grains_tell_their_loading(rule: str) -> None:
    """Perfect conductors: ε_h (1 + 2f)/(1 − f), and ε_h/(1 − 3f) below the threshold."""
    answer = ask(METAL + f'mixing.rule = "{rule}"\n', (LOADING, "0 %", "60 %"), static="3.4 ± 0.02")
    expected = (3.4 - 2.5) / (3.4 + 5.0) if rule == "maxwell-garnett" else (1 - 2.5 / 3.4) / 3
    assert answer.estimates[LOADING].value == pytest.approx(expected, rel=1e-9)


def test_closed_form_and_least_squares_agree_under_every_rule() -> None:
    """The search is made to answer what the formula answers, by asking for the loading in weight."""
    by_weight = LATTICE.replace('volume_fraction = "10 %"', 'weight_fraction = "20 %"')
    for rule in ("maxwell-garnett", "bruggeman", "lorentz-lorenz"):
        given = f'mixing.rule = "{rule}"\n'
        direct = ask(LATTICE + given, (LOADING, "0 %", "60 %"), static=3.1)
        searched = ask(by_weight + given, ("inclusions.grain.weight_fraction", "0 %", "95 %"), static=3.1)
        assert (direct.method, searched.method) == ("closed form", "least squares")
        f = direct.estimates[LOADING].value
        assert f is not None
        weight = 5.0 * f / (5.0 * f + 1.2 * (1 - f))
        assert searched.estimates["inclusions.grain.weight_fraction"].value == pytest.approx(weight, rel=1e-8)


def test_uncertainties_and_correlation_by_differences_of_the_closed_form() -> None:
    """(JᵀWJ)⁻¹ against a naive propagation: each reading moved by itself, the answer computed anew."""
    static, high = 3.0, 2.32
    stds = {"static": 0.01, "high_frequency": 0.002}
    free = ((LOADING, "0 %", "40 %"), (PLASMA, "600 cm^-1", "2000 cm^-1"))
    answer = ask(
        LATTICE, *free, static=f"{static} ± {stds['static']}", high=f"{high} ± {stds['high_frequency']}"
    )
    mixture = mixsim.parse(LATTICE).compile()
    unknowns = [Unknown(LOADING, 0.0, 0.4), Unknown(PLASMA, 600 * CM, 2000 * CM)]

    def solved(static: float, high: float) -> np.ndarray:
        readings = [Reading("static", static, None, ""), Reading("high_frequency", high, None, "")]
        found = closed_form(mixture, unknowns, readings)
        assert found is not None
        return found

    step = 1e-6
    columns = [
        (solved(static + step, high) - solved(static - step, high)) / (2 * step) * stds["static"],
        (solved(static, high + step) - solved(static, high - step)) / (2 * step) * stds["high_frequency"],
    ]
    spread = np.sqrt(columns[0] ** 2 + columns[1] ** 2)
    correlation = (columns[0][0] * columns[0][1] + columns[1][0] * columns[1][1]) / spread.prod()
    assert [answer.estimates[path].std for path in (LOADING, PLASMA)] == pytest.approx(spread, rel=1e-5)
    assert answer.correlation is not None
    assert answer.correlation[0, 1] == pytest.approx(correlation, abs=1e-6)
    assert correlation < -0.3
    assert answer.monte_carlo is not None
    assert answer.monte_carlo.agrees


def test_stated_uncertainties_cover_the_truth() -> None:
    """Forward, noise with a fixed seed, back: two thirds within one ±, 95 % in the interval."""
    truth = {LOADING: 0.17, PLASMA: 1200 * CM}
    static, high = levels(LATTICE, **truth)
    random = np.random.default_rng(7)
    free = ((LOADING, "0 %", "40 %"), (PLASMA, "600 cm^-1", "2000 cm^-1"))
    within = {path: [0, 0] for path in truth}
    runs = 120
    for noise in random.standard_normal((runs, 2)).tolist():
        answer = ask(
            LATTICE,
            *free,
            static=f"{static + 0.01 * noise[0]!r} ± 0.01",
            high=f"{high + 0.002 * noise[1]!r} ± 0.002",
        )
        for path, value in truth.items():
            estimate = answer.estimates[path]
            assert estimate.value is not None
            assert estimate.std is not None
            assert estimate.interval is not None
            within[path][0] += abs(estimate.value - value) < estimate.std
            within[path][1] += estimate.interval[0] < value < estimate.interval[1]
    for one, two in within.values():
        assert 0.57 < one / runs < 0.80
        assert two / runs > 0.89


def test_monte_carlo_says_where_first_order_fails() -> None:
    """Just above the level without the band, plasma frequency goes with a square root, not a line."""
    rest = levels(LATTICE, **{PLASMA: 0.0})[0]
    near = ask(LATTICE, (PLASMA, "1 cm^-1", "2000 cm^-1"), static=f"{rest + 0.04!r} ± 0.02")
    assert near.monte_carlo is not None
    assert not near.monte_carlo.agrees
    assert [caution.kind for caution in near.warnings] == ["nonlinear"]


def test_the_same_seed_gives_the_same_answer() -> None:
    recipe = mixsim.parse(LATTICE)
    free = [freed(recipe, LOADING, "0 %", "40 %")]
    reading = read("3.1 ± 0.02", "number")
    first, again, other = (
        mixsim.invert(recipe, static=reading, free=free, seed=seed).to_dict() for seed in (1, 1, 2)
    )
    assert first == again
    assert first["monte_carlo"] != other["monte_carlo"]


def test_other_rules_stand_beside_the_answer() -> None:
    answer = ask(LATTICE, (LOADING, "0 %", "60 %"), static="3.2 ± 0.01")
    by_rule = {found.rule: found.values for found in answer.by_rule}
    assert list(by_rule)[:2] == ["maxwell-garnett", "bruggeman"]
    own, other = by_rule["maxwell-garnett"], by_rule["bruggeman"]
    assert own is not None
    assert other is not None
    assert own[LOADING] == answer.estimates[LOADING].value
    alone = ask(bruggeman(LATTICE), (LOADING, "0 %", "60 %"), static="3.2 ± 0.01")
    assert other[LOADING] == alone.estimates[LOADING].value


def test_two_readings_and_one_unknown_are_weighed() -> None:
    answer = ask(LATTICE, (LOADING, "0 %", "40 %"), static="2.86 ± 0.02", high="2.27 ± 0.005")
    assert answer.verdict == "answered"
    alone = [
        ask(LATTICE, (LOADING, "0 %", "40 %"), **reading).estimates[LOADING]  # type: ignore[arg-type]
        for reading in ({"static": "2.86 ± 0.02"}, {"high": "2.27 ± 0.005"})
    ]
    weights = [1 / one.std**2 for one in alone if one.std is not None]
    mean = sum(w * one.value for w, one in zip(weights, alone, strict=True) if one.value is not None)
    assert answer.estimates[LOADING].value == pytest.approx(mean / sum(weights), rel=0.01)
    assert answer.estimates[LOADING].std == pytest.approx(sum(weights) ** -0.5, rel=0.02)


def test_readings_that_contradict_each_other_are_said_to() -> None:
    free = (LOADING, "0 %", "40 %")
    apart = ask(LATTICE, free, static="2.8 ± 0.002", high="2.4 ± 0.002")
    assert apart.verdict == "impossible"
    assert apart.estimates[LOADING].value is None
    assert "meets both readings" in apart.reasons[0]
    assert len(apart.residuals) == 2
    near = ask(LATTICE, free, static="2.86 ± 0.02", high="2.305 ± 0.005")
    assert near.verdict == "answered"
    assert [caution.kind for caution in near.warnings] == ["readings-disagree"]
    unsure = ask(LATTICE, free, static="2.8", high="2.4")
    assert [caution.kind for caution in unsure.warnings] == ["readings-disagree"]
    assert "state ±" in unsure.warnings[0].message


def test_what_the_recipe_is_unsure_of_is_in_the_answer() -> None:
    """ε_h with a ± of its own: naive propagation of both, by differences of the closed form."""
    text = LATTICE.replace("infinity = 2.1", 'infinity = "2.1 ± 0.03"')
    answer = ask(text, (LOADING, "0 %", "40 %"), static="3.0 ± 0.01")
    plain = ask(LATTICE, (LOADING, "0 %", "40 %"), static="3.0 ± 0.01")
    assert answer.pushed == ("materials.matrix.permittivity.infinity",)
    assert plain.pushed == ()
    moved = [
        ask(LATTICE.replace("infinity = 2.1", f"infinity = {level}"), (LOADING, "0 %", "40 %"), static="3.0")
        for level in (2.13, 2.07)
    ]
    half = 0.5 * (moved[0].estimates[LOADING].value - moved[1].estimates[LOADING].value)  # type: ignore[operator]
    alone = plain.estimates[LOADING].std
    assert alone is not None
    assert answer.estimates[LOADING].std == pytest.approx(np.hypot(alone, half), rel=1e-3)
    assert answer.monte_carlo is not None
    assert answer.monte_carlo.agrees


def test_the_static_level_rises_without_end_towards_percolation() -> None:
    """f = (1 − ε_h/ε)/3, however near the threshold; by weight, so that the search has to find it."""
    text = bruggeman(METAL.replace('volume_fraction = "10 %"', 'weight_fraction = "10 %"'))
    path = "inclusions.grain.weight_fraction"
    for level in (50.0, 3e4, 1e6):
        answer = ask(text, (path, "0 %", "90 %"), static=level)
        f = (1 - 2.5 / level) / 3
        assert answer.estimates[path].value == pytest.approx(5 * f / (5 * f + 1.2 * (1 - f)), rel=1e-6)
    low = ask(text, (path, "0 %", "90 %"), static=1.2)
    assert "rises from 2.5 without end" in low.reasons[0]


def test_one_reading_leaves_a_curve_of_two_unknowns() -> None:
    answer = ask(LATTICE, (LOADING, "0 %", "40 %"), (PLASMA, "600 cm^-1", "2000 cm^-1"), static="3.2 ± 0.01")
    assert answer.verdict == "undecided"
    assert answer.family is not None
    static = mixsim.parse(LATTICE).compile().limits(answer.family).static.real
    assert len(static) > 50
    assert static == pytest.approx(np.full(len(static), 3.2), rel=1e-9)
    for path, values in answer.family.items():
        estimate = answer.estimates[path]
        assert estimate.value is None
        assert estimate.interval is not None
        assert estimate.interval[0] <= values.min() <= values.max() <= estimate.interval[1]
    assert "second reading" in answer.reasons[0]


def test_plasma_frequency_of_metallic_grains_cannot_be_read_at_dc() -> None:
    answer = ask(METAL, (PLASMA, "0.5 eV", "2 eV"), static="3.0 ± 0.01")
    assert answer.verdict == "undecided"
    assert answer.estimates[PLASMA].value is None
    assert "screen" in answer.reasons[0]
    assert "absorption peak" in answer.reasons[0]


def test_what_the_readings_can_tell_is_told_beside_what_they_cannot() -> None:
    static, high = levels(METAL, **{LOADING: 0.12})
    answer = ask(
        METAL,
        (LOADING, "0 %", "40 %"),
        (PLASMA, "0.5 eV", "2 eV"),
        static=f"{static!r} ± 0.02",
        high=f"{high!r} ± 0.01",
    )
    assert answer.verdict == "undecided"
    assert answer.estimates[LOADING].value == pytest.approx(0.12, rel=1e-6)
    assert answer.estimates[PLASMA].value is None


@pytest.mark.parametrize(
    ("text", "free", "readings", "said"),
    [
        (
            MATRIX + GRAINS.replace("4.5", "2.5"),
            (LOADING, "0 %", "40 %"),
            {"static": "2.5 ± 0.01"},
            "contrast",
        ),
        (LATTICE, (PLASMA, "600 cm^-1", "2000 cm^-1"), {"high": "2.3 ± 0.01"}, "above all bands"),
        (
            LATTICE,
            (PLASMA.replace("plasma", "damping"), "1 cm^-1", "90 cm^-1"),
            {"static": "2.9 ± 0.01"},
            "read a spectrum",
        ),
        (LATTICE, (LOADING, "0 %", "1 %"), {"static": "2.51 ± 0.03"}, "no further than the range"),
        (
            METAL + IONS,
            (LOADING, "0 %", "40 %"),
            {"static": "3.0 ± 0.01"},
            "conducts over the whole range",
        ),
    ],
)
def test_readings_that_cannot_tell(text: str, free: tuple[str, str, str], readings: Any, said: str) -> None:
    answer = ask(text, free, **readings)
    assert answer.verdict == "undecided"
    assert answer.estimates[free[0]].value is None
    assert said in " ".join(answer.reasons)


def test_several_answers_are_all_given() -> None:
    """A flake and a grain of rice lift the static level alike."""
    text = LATTICE.replace('"10 %" }', '"10 %", shape = { kind = "spheroid", aspect_ratio = 2.0 } }')
    path = "inclusions.grain.shape.aspect_ratio"
    static, _ = levels(text, **{path: 3.0})
    answer = ask(text, (path, 0.1, 10), static=f"{static!r} ± 0.002")
    assert answer.verdict == "undecided"
    found = sorted(solution[path] for solution in answer.solutions)
    assert len(found) == 2
    assert found[0] < 1.0
    assert found[1] == pytest.approx(3.0, rel=1e-6)
    narrow = ask(text, (path, 1, 10), static=f"{static!r} ± 0.002")
    assert narrow.estimates[path].value == pytest.approx(3.0, rel=1e-6)
    assert answer.estimates[path].interval is None


def test_impossible_because_no_loading_of_these_phases_gives_it() -> None:
    answer = ask(LATTICE, (LOADING, "0 %", "40 %"), static="25.0 ± 0.1")
    assert answer.verdict == "impossible"
    assert answer.estimates[LOADING].value is None
    assert any("no arrangement of these phases" in reason for reason in answer.reasons)
    assert "moisture" in answer.reasons[-1]


def test_impossible_in_the_range_names_the_loading_it_would_take() -> None:
    """The rule and the bound beyond it, each against its own closed form."""
    answer = ask(LATTICE, (LOADING, "0 %", "20 %"), static="4.0 ± 0.02")
    assert answer.verdict == "impossible"
    grain = 4.5 + 0.9 * (1300 / 500) ** 2
    taken = (4.0 - 2.5) / (4.0 + 5.0) * (grain + 5.0) / (grain - 2.5)
    bound = 1 - (grain - 4.0) / (4.0 + 2 * grain) * (2.5 + 2 * grain) / (grain - 2.5)
    said = " ".join(answer.reasons)
    assert f"{100 * taken:.3f}" in said
    assert f"{100 * bound:.3g} % by volume (Hashin–Shtrikman)" in said


def test_impossible_for_any_strength_of_a_band_at_this_loading() -> None:
    answer = ask(LATTICE, (PLASMA, "600 cm^-1", "2000 cm^-1"), static="3.6 ± 0.02")
    assert answer.verdict == "impossible"
    assert f"gives at most {2.5 * 1.2 / 0.9:.4g}" in " ".join(answer.reasons)


def test_a_reading_just_outside_is_held_at_the_end_of_the_range() -> None:
    answer = ask(LATTICE, (LOADING, "0 %", "40 %"), static="2.49 ± 0.02")
    estimate = answer.estimates[LOADING]
    assert answer.verdict == "answered"
    assert estimate.value == 0.0
    assert estimate.std is None
    assert "end of its range" in estimate.note
    assert estimate.interval is not None
    assert estimate.interval[0] == 0.0
    assert 0.002 < estimate.interval[1] < 0.02


@pytest.mark.parametrize(
    ("text", "free", "readings", "place", "found"),
    [
        (LATTICE, [(LOADING, "0 %", "40 %")], {}, "measured", "no reading"),
        (LATTICE, [], {"static": 3.0}, "unknowns", "nothing to find"),
        (LATTICE, [(LOADING, "0 %", "40 %")], {"static": -3.0}, "--static", "-3.0"),
        (LATTICE, [(LOADING, "0 %", "40 %")], {"static": "3 ± 0"}, "--static", "no uncertainty"),
        (LATTICE, [(LOADING, "0 %", "40 %")], {"static": 2.1, "high": 2.2}, "--static", "is below"),
        (LATTICE, [(LOADING, "0 %", "40 %")] * 2, {"static": 3.0}, "--free", "freed twice"),
        (
            LATTICE,
            [
                (LOADING, 0, 0.4),
                (PLASMA, "1 eV", "2 eV"),
                ("materials.matrix.permittivity.infinity", 1, 3),
            ],
            {"static": 3.0},
            "unknowns",
            "3 unknowns",
        ),
        (LATTICE, [(LOADING, "4 %", "4 %")], {"static": 3.0}, "--free", "is empty"),
        (LATTICE, [(LOADING, "0 nm", "4 nm")], {"static": 3.0}, "--free", "nm"),
        (LATTICE, [("inclusions.grains.volume_fraction", 0, 1)], {"static": 3.0}, "--free", "unknown path"),
        (
            'host.material = "borosilicate-crown"\n' + GRAINS,
            [(LOADING, "0 %", "40 %")],
            {"static": 3.0},
            "materials.borosilicate-crown",
            "no static level",
        ),
        (
            LATTICE.replace(
                '"10 %" }',
                '"10 %", orientation = "aligned", shape = { kind = "spheroid", aspect_ratio = 2.0 } }',
            ),
            [(LOADING, "0 %", "40 %")],
            {"static": 3.0},
            "inclusions",
            "for each axis",
        ),
    ],
)
def test_questions_that_cannot_be_asked(
    text: str, free: Any, readings: dict[str, Any], place: str, found: str
) -> None:
    with pytest.raises(mixsim.BadInput) as refused:
        ask(text, *free, **readings)
    (fault,) = refused.value.faults
    assert fault.path == place
    assert found in fault.found
    assert fault.allowed
