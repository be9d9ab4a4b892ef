"""The evaluator: shapes, blocks, what is refused and what is computed once."""

from __future__ import annotations

import math
from collections import Counter
from dataclasses import replace
from typing import Any

import numpy as np
import pytest

import mixsim
from mixsim.errors import Refusal
from mixsim.mixing import RULES
from mixsim.mixture import Mixture, blocks
from mixsim.mixture.spectra import BoundTerm

OMEGA = np.linspace(2e14, 4e15, 50)
TEXT = """
host.material = "matrix"
[inclusions.grain]
material = "grain"
volume_fraction = "10 %"
{shape}
[voids]
volume_fraction = "2 %"
[materials.matrix]
permittivity.infinity = 2.25
[materials.grain]
permittivity.infinity = 4.0
permittivity.terms.free = {{ model = "drude", plasma = "1.5 eV", damping = "0.1 eV" }}
permeability.infinity = 1.0
permeability.terms.spin = {{ model = "lorentz", step = 2.0, resonance = "0.8 eV", damping = "0.2 eV" }}
"""
SPHEROID = 'shape = { kind = "spheroid", aspect_ratio = 3.0 }\norientation = "aligned"'
LOADING, PLASMA = "inclusions.grain.volume_fraction", "materials.grain.permittivity.terms.free.plasma"
RATIO = "inclusions.grain.shape.aspect_ratio"


def mixture(shape: str = "") -> Mixture:
    return mixsim.parse(TEXT.format(shape=shape)).compile()


@pytest.mark.parametrize("shape", ["", SPHEROID], ids=["spheres", "aligned"])
@pytest.mark.parametrize(
    ("loading", "plasma"),
    [((), ()), ((4,), ()), ((4,), (4,)), ((3, 1), (1, 5)), ((1, 5), (5,)), ((2, 3, 4), (3, 1))],
)
def test_shapes_and_every_element_by_itself(
    shape: str, loading: tuple[int, ...], plasma: tuple[int, ...]
) -> None:
    compiled, random = mixture(shape), np.random.default_rng(3)
    values = {LOADING: random.uniform(0.0, 0.3, loading), PLASMA: random.uniform(1e15, 4e15, plasma)}
    if shape:
        values[RATIO] = random.uniform(0.3, 3.0, plasma)
    values = {path: np.asarray(value) for path, value in values.items()}
    omega = OMEGA.copy()
    for array in (*values.values(), omega):
        array.setflags(write=False)
    before = {path: value.copy() for path, value in values.items()}
    full = np.broadcast_shapes(loading, plasma)
    axes = (3,) if shape else ()
    answer = compiled.response(values, omega)
    assert answer.permittivity.shape == answer.permeability.shape == (*full, *axes, OMEGA.size)
    limits, composition = compiled.limits(values), compiled.composition(values)
    assert {limit.shape for limit in vars(limits).values()} == {(*full, *axes)}
    assert composition.volume_fractions["grain"].shape == full
    for index in np.ndindex(full):
        one = {path: float(np.broadcast_to(value, full)[index]) for path, value in values.items()}
        alone = compiled.response(one, OMEGA)
        assert np.array_equal(answer.permittivity[index], alone.permittivity)
        assert np.array_equal(answer.permeability[index], alone.permeability)
        for name, limit in vars(compiled.limits(one)).items():
            assert np.array_equal(getattr(limits, name)[index], limit), name
        assert (
            composition.volume_fractions["host"][index] == compiled.composition(one).volume_fractions["host"]
        )
    assert np.array_equal(omega, OMEGA)
    assert all(np.array_equal(values[path], before[path]) for path in values)


@pytest.mark.parametrize("shape", ["", SPHEROID], ids=["spheres", "aligned"])
@pytest.mark.parametrize(
    ("loading", "plasma"), [((7,), ()), ((1, 7), ()), ((3, 2), (2,)), ((3, 1), (1, 4)), ((1, 4), (3, 1))]
)
def test_blocks_change_nothing(
    shape: str, loading: tuple[int, ...], plasma: tuple[int, ...], monkeypatch: pytest.MonkeyPatch
) -> None:
    compiled = mixture(shape)
    values = {
        path: np.linspace(low, high, math.prod(batch)).reshape(batch)
        for path, batch, low, high in ((LOADING, loading, 0.0, 0.3), (PLASMA, plasma, 1e15, 4e15))
    }
    whole = compiled.response(values, OMEGA)
    for size in (1, 7, 50, 120):
        monkeypatch.setattr(blocks, "_BLOCK", size)
        parts = compiled.response(values, OMEGA)
        # a processor may round the last digits of vectors and of their odd ends differently
        assert parts.permittivity == pytest.approx(whole.permittivity, rel=1e-14)
        assert parts.permeability == pytest.approx(whole.permeability, rel=1e-14)


@pytest.mark.parametrize("shape", ["", SPHEROID], ids=["spheres", "aligned"])
@pytest.mark.parametrize(("batch", "frequencies"), [((3,), 40_000), ((1, 700), 60), ((40_000,), 1)])
def test_more_than_a_block(shape: str, batch: tuple[int, ...], frequencies: int) -> None:
    """Batch or band beyond the block as shipped: the last element of each is what it is alone."""
    compiled, omega = mixture(shape), np.linspace(2e14, 4e15, frequencies)
    values = {LOADING: np.linspace(0.0, 0.3, math.prod(batch)).reshape(batch)}
    answer = compiled.response(values, omega).permittivity
    for index in (0, -1):
        one = {LOADING: float(values[LOADING].reshape(-1)[index])}
        alone = compiled.response(one, omega[[index]]).permittivity[..., 0]
        end = answer.reshape(-1, *answer.shape[len(batch) :])[index, ..., index]
        assert end == pytest.approx(alone, rel=1e-14)
    assert np.isfinite(answer).all()


def test_an_empty_batch_or_band_is_an_empty_answer() -> None:
    assert mixture().response({LOADING: np.empty((0, 2))}, OMEGA).permittivity.shape == (0, 2, OMEGA.size)
    assert mixture(SPHEROID).response({}, np.empty(0)).permittivity.shape == (3, 0)


def test_constants_keep_the_shape() -> None:
    constant = mixsim.parse('host.material = "m"\nmaterials.m.permittivity.infinity = 2.0\n').compile()
    answer = constant.response({"materials.m.permittivity.infinity": [[2.0], [3.0]]}, OMEGA)
    assert answer.permittivity.shape == answer.permeability.shape == (2, 1, OMEGA.size)
    assert answer.permittivity.dtype == complex
    assert answer.permittivity[:, 0, -1].tolist() == [2.0, 3.0]
    assert np.all(answer.permeability == 1.0)


@pytest.mark.parametrize("rule", [n for n, r in RULES.items() if r.most_phases is None and not r.needed])
@pytest.mark.parametrize("path", [LOADING, PLASMA, "materials.matrix.permittivity.infinity"])
def test_not_a_number_stays_where_it_is(rule: str, path: str) -> None:
    compiled, holed = mixture().with_rule(rule), OMEGA.copy()
    holed[3] = np.nan
    answer = compiled.response({path: [compiled.defaults[path], np.nan]}, holed).permittivity
    whole = compiled.response({}, OMEGA).permittivity
    assert np.isnan(answer[1]).all()
    assert np.flatnonzero(np.isnan(answer[0])).tolist() == [3]
    assert np.delete(answer[0], 3) == pytest.approx(np.delete(whole, 3), rel=1e-13)
    assert np.isnan(compiled.limits({path: [compiled.defaults[path], np.nan]}).high_frequency).tolist() == (
        [False, path != PLASMA]  # far above the plasma frequency nothing is left of it
    )


def test_aligned_grains_polarise_most_along_their_axis() -> None:
    limits = mixture(SPHEROID).limits({})
    assert limits.static[0] == limits.static[1]
    assert limits.static[2].real > limits.static[0].real
    round_ = mixture(SPHEROID).limits({RATIO: 1.0}).static
    assert round_ == pytest.approx(np.full(3, mixture().limits({}).static), rel=1e-9)


@pytest.mark.parametrize("question", ["response", "limits", "composition"])
def test_values_that_cannot_be_used_are_refused(question: str) -> None:
    def ask(values: dict[str, Any]) -> object:
        function = getattr(mixture(), question)
        return function(values, OMEGA) if question == "response" else function(values)

    with pytest.raises(Refusal, match=r"grian.*did you mean 'inclusions\.grain\.volume_fraction'"):
        ask({"inclusions.grian.volume_fraction": 0.1})
    with pytest.raises(Refusal, match=r"do not broadcast: .*volume_fraction \(3,\).*plasma \(4,\)"):
        ask({LOADING: np.zeros(3), PLASMA: np.ones(4)})
    for value in ("10 %", [[0.1, 0.2], [0.3]], None, 0.1j):
        with pytest.raises(Refusal, match=r"volume_fraction = .*a real number, or an array of them"):
            ask({LOADING: value})


@pytest.mark.parametrize("omega", [OMEGA.reshape(5, 10), 1e15, "1 eV", [1e15, None]])
def test_frequencies_are_one_axis_of_numbers(omega: Any) -> None:
    for ask in (lambda: mixture().response({}, omega), lambda: mixture().constituents(omega)):
        with pytest.raises(Refusal, match="omega"):
            ask()


def counted(compiled: Mixture, calls: Counter[str]) -> Mixture:
    """The same mixture, counting how often the formula of each term of the grain is evaluated."""

    def counting(bound: BoundTerm) -> BoundTerm:
        def function(omega: Any, **parameters: Any) -> Any:
            calls[bound.term.name] += 1
            return bound.term.function(omega, **parameters)

        return replace(bound, term=replace(bound.term, function=function))

    (grain,) = compiled.inclusions
    quantities = {
        name: replace(spectrum, terms=tuple(counting(term) for term in spectrum.terms))
        for name in ("permittivity", "permeability")
        if hasattr(spectrum := getattr(grain, name), "terms")
    }
    return replace(compiled, inclusions=(replace(grain, **quantities),))


def test_what_does_not_vary_is_computed_once(monkeypatch: pytest.MonkeyPatch) -> None:
    """Down to the terms: of a material of which one number is swept, the other terms are not done again."""
    more = """
        [materials.grain.permittivity.terms.slow]
        model = "debye"
        step = 1.0
        relaxation_time = "1 fs"
    """
    compiled = mixsim.parse(TEXT.format(shape="") + more).compile()
    monkeypatch.setattr(blocks, "_BLOCK", 2 * OMEGA.size)
    for path, times in (
        (PLASMA, {"drude": 5, "debye": 1, "lorentz": 1}),  # blocks of two, ten to do
        ("materials.grain.permittivity.infinity", {"drude": 1, "debye": 1, "lorentz": 1}),
        (LOADING, {"drude": 1, "debye": 1, "lorentz": 1}),
    ):
        calls: Counter[str] = Counter()
        swept = compiled.defaults[path] * np.linspace(1.0, 2.0, 10)
        answer = counted(compiled, calls).response({path: swept}, OMEGA).permittivity
        assert calls == times, path
        assert np.array_equal(answer, compiled.response({path: swept}, OMEGA).permittivity)
        assert np.array_equal(answer[-1], compiled.response({path: swept[-1]}, OMEGA).permittivity)


def test_constituents_are_the_materials_on_their_own() -> None:
    compiled = mixture(SPHEROID)
    parts = compiled.constituents(OMEGA)
    assert list(parts) == ["host", "grain"]
    assert parts["host"].permittivity == pytest.approx(np.full(OMEGA.shape, 2.25))
    assert np.all(parts["host"].permeability == 1.0)
    alone = mixsim.parse(TEXT.format(shape="").replace('"matrix"', '"grain"')).compile()
    pure = alone.response({LOADING: 0.0, "voids.volume_fraction": 0.0}, OMEGA)
    assert parts["grain"].permittivity == pytest.approx(pure.permittivity, rel=1e-14)
    assert parts["grain"].permeability == pytest.approx(pure.permeability, rel=1e-14)


@pytest.mark.parametrize("rule", ["bruggeman", "maxwell-garnett"])
def test_another_rule_keeps_the_constituents(rule: str) -> None:
    """Few grains without voids: to first order in the loading both rules give the same."""
    values, plain = {LOADING: 1e-7, "voids.volume_fraction": 0.0}, mixture()
    other = plain.with_rule(rule)
    assert (other.rule.name, other.defaults) == (rule, plain.defaults)
    for one, two in zip(other.constituents(OMEGA).values(), plain.constituents(OMEGA).values(), strict=True):
        assert np.array_equal(one.permittivity, two.permittivity)
    thin, expected = (compiled.response(values, OMEGA).permittivity for compiled in (other, plain))
    assert thin == pytest.approx(expected, rel=1e-9)
    with pytest.raises(Refusal, match="did you mean 'bruggeman'"):
        plain.with_rule("brugeman")


LIQUID = """
host.material = "liquid"
mixing = { rule = "lorentz-lorenz", density = "1.05 g/cm^3" }
materials.liquid = { density = "1.00 g/cm^3", index = { model = "constant", n = 1.333 } }
"""


def test_a_liquid_alone_under_another_density() -> None:
    """The specific refraction (n² − 1)/(n² + 2)/ρ of a liquid stays, in the band and in the limits."""
    compiled = mixsim.parse(LIQUID).compile()
    polarised = 1.05 * (1.333**2 - 1) / (1.333**2 + 2)
    expected = (1 + 2 * polarised) / (1 - polarised)
    assert compiled.response({}, OMEGA).permittivity == pytest.approx(
        np.full(OMEGA.shape, expected), rel=1e-13
    )
    assert compiled.limits({}).high_frequency == pytest.approx(expected, rel=1e-13)


SHARED = """
host.material = "m"
[materials.m.permittivity]
infinity = 1.0
plasma = "9 eV"
[materials.m.permittivity.terms]
free = { model = "drude", strength = 0.7, damping = "0.05 eV" }
band = { model = "lorentz", strength = 0.3, resonance = "3 eV", damping = "0.9 eV" }
own = { model = "lorentz", step = 0.5, resonance = "5 eV", damping = "0.9 eV" }
"""


def test_terms_share_a_plasma_frequency_that_they_do_not_give() -> None:
    """The generalised form: one ωp, strengths; a term that gives its own keeps it."""
    each = SHARED.replace('plasma = "9 eV"\n', "").replace("strength", 'plasma = "9 eV", strength')
    shared, apart = mixsim.parse(SHARED).compile(), mixsim.parse(each).compile()
    assert np.array_equal(shared.response({}, OMEGA).permittivity, apart.response({}, OMEGA).permittivity)
    doubled = shared.response({"materials.m.permittivity.plasma": 2.0}, OMEGA).permittivity
    assert not np.array_equal(doubled, shared.response({}, OMEGA).permittivity)


def test_a_plasma_frequency_that_no_term_shares_is_refused() -> None:
    with pytest.raises(mixsim.BadInput, match="no term shares"):
        mixsim.parse(
            'host.material = "m"\nmaterials.m.permittivity = { infinity = 2.0, plasma = "9 eV", terms = '
            '{ a = { model = "lorentz", step = 0.5, resonance = "5 eV", damping = "0.9 eV" } } }\n'
        )


@pytest.mark.parametrize(
    ("model", "quantity"), [("drude", "permeability"), ("landau-lifshitz-gilbert", "permittivity")]
)
def test_terms_stand_only_where_physics_allows_them(model: str, quantity: str) -> None:
    text = f"""
        host.material = "m"
        materials.m.permittivity.infinity = 2.0
        materials.m.permeability.infinity = 1.0
        materials.m.{quantity}.terms.t.model = "{model}"
    """
    with pytest.raises(mixsim.BadInput, match=f"a {model} term in the {quantity}"):
        mixsim.parse(text)
