"""Exact limits, conductors included, against high precision, closed forms and the response itself."""

from __future__ import annotations

from pathlib import Path

import mpmath
import numpy as np
import pytest

import mixsim
from mixsim.mixture.static import low_frequency
from mixsim.units import VACUUM_PERMITTIVITY

TWO = """
host.material = "h"
inclusions.g = {{ material = "g", volume_fraction = {fraction} }}
mixing.rule = "{rule}"
[materials.h]
permittivity.infinity = 3.0
permittivity.terms.s = {{ model = "conduction", conductivity = "{host} S/m" }}
[materials.g]
permittivity.infinity = 8.0
permittivity.terms.s = {{ model = "conduction", conductivity = "{grain} S/m" }}
"""


def two(rule: str, fraction: float, host: float, grain: float) -> mixsim.mixture.Mixture:  # type: ignore[name-defined]
    return mixsim.parse(TWO.format(rule=rule, fraction=fraction, host=host, grain=grain)).compile()


def metal(rule: str, fraction: float, host: float, collisions: float) -> mixsim.mixture.Mixture:  # type: ignore[name-defined]
    """Grains of free carriers, by their collision rate in rad/s."""
    carriers = f'{{ model = "drude", plasma = "9 eV", damping = "{collisions} rad/s" }}'
    text = TWO.format(rule=rule, fraction=fraction, host=host, grain=0)
    return mixsim.parse(f"{text}permittivity.terms.carriers = {carriers}\n").compile()


def exact(rule: str, f: float, host: float, grain: float) -> tuple[float, float]:
    """σ_eff and Σ ε_k ∂σ_eff/∂σ_k in fifty digits, the derivative by a small step."""
    with mpmath.workdps(50):

        def mixed(a: mpmath.mpf, b: mpmath.mpf) -> mpmath.mpf:
            if rule == "maxwell-garnett":
                return a + 3 * f * a * (b - a) / (b + 2 * a - f * (b - a))
            c = (3 * mpmath.mpf(f) - 1) * b + (2 - 3 * mpmath.mpf(f)) * a
            return (c + mpmath.sqrt(c * c + 8 * a * b)) / 4

        a, b, step = mpmath.mpf(host), mpmath.mpf(grain), mpmath.mpf(10) ** -20
        level = (mixed(a * (1 + step), b) - mixed(a * (1 - step), b)) / (2 * step * a) * 3
        level += (mixed(a, b * (1 + step)) - mixed(a, b * (1 - step))) / (2 * step * b) * 8
        return float(mixed(a, b)), float(level)


@pytest.mark.parametrize("rule", ["maxwell-garnett", "bruggeman"])
@pytest.mark.parametrize("fraction", [0.05, 0.3, 1 / 3, 0.4, 0.8])
@pytest.mark.parametrize(("host", "grain"), [(1e-3, 2e-3), (1e-6, 1e6), (5.0, 1e-9)])
def test_two_conductors_against_fifty_digits(rule: str, fraction: float, host: float, grain: float) -> None:
    limits = two(rule, fraction, host, grain).limits({})
    conductivity, plateau = exact(rule, fraction, host, grain)
    assert np.isnan(limits.static)
    # at the threshold itself the last digit of 3f − 1 weighs as much as the contrast
    tight = 1e-10 if fraction == 1 / 3 else 1e-12
    assert limits.conductivity == pytest.approx(conductivity, rel=tight)
    assert limits.plateau == pytest.approx(plateau, rel=1e-9)


def test_conducting_grains_in_an_insulator() -> None:
    for fraction in (0.0, 0.1, 0.32):
        garnett = two("maxwell-garnett", fraction, 0, 1.0).limits({})
        assert garnett.static == pytest.approx(3.0 * (1 + 2 * fraction) / (1 - fraction), rel=1e-14)
        assert garnett.static.imag == 0.0
        assert garnett.conductivity == 0.0
        symmetric = two("bruggeman", fraction, 0, 1.0).limits({})
        assert symmetric.static == pytest.approx(3.0 / (1 - 3 * fraction), rel=1e-12)


def test_above_the_threshold_the_mixture_conducts() -> None:
    limits = two("bruggeman", 0.5, 0, 2.0).limits({})
    assert np.isnan(limits.static)
    assert limits.conductivity == pytest.approx(2.0 * (3 * 0.5 - 1) / 2, rel=1e-12)
    # σ_eff = σ_g(3f − 1)/2 + …: the level is ε_g ∂σ/∂σ_g + ε_h ∂σ/∂σ_h at σ_h = 0
    slope_host = (2 - 1.5 + (2 * 0.5 * (2 - 1.5) + 8) / (2 * 0.5)) / 4
    assert limits.plateau == pytest.approx(8.0 * 0.25 + 3.0 * slope_host, rel=1e-9)


@pytest.mark.parametrize("collisions", [1e14, 1e8, 0.0])
def test_at_the_very_threshold_there_is_no_level_and_no_conduction(collisions: float) -> None:
    """ε = √(ε_h ε_g/2) there: with ε_g ∝ i/ω both parts grow as ω^(−1/2), slower than any conduction."""
    compiled = metal("bruggeman", 1 / 3, 0, collisions)
    limits = compiled.limits({})
    assert np.isnan(limits.static)
    assert (limits.conductivity, limits.plateau) == (0.0, np.inf)
    around = {"inclusions.g.volume_fraction": [1 / 3 - 1e-6, 1 / 3 + 1e-6]}
    below, above = compiled.limits(around).static
    assert below.real == pytest.approx(1e6, rel=1e-9)
    assert np.isnan(above)


def test_insulating_grains_in_a_conductor() -> None:
    limits = two("maxwell-garnett", 0.2, 1e-2, 0).limits({})
    assert limits.conductivity == pytest.approx(1e-2 * 2 * 0.8 / (2 + 0.2), rel=1e-12)


@pytest.mark.parametrize("host", [1e-16, 1e-20, 1e-24, 1e-30])
@pytest.mark.parametrize("collisions", [1e14, 1e8])
def test_the_best_insulator_around_a_metal_still_conducts(host: float, collisions: float) -> None:
    """A fluoropolymer leaks 1e-23 S/m or so, forty decades below cold metal, and has no static limit."""
    limits = metal("maxwell-garnett", 0.1, host, collisions).limits({})
    assert np.isnan(limits.static)
    assert limits.conductivity == pytest.approx(host * 1.2 / 0.9, rel=1e-12)
    assert limits.plateau == pytest.approx(3.0 * 1.2 / 0.9, rel=1e-12)


@pytest.mark.parametrize("orientation", ["aligned", "random"])
def test_conducting_spheroids_by_their_factors(orientation: str) -> None:
    """Perfect conductors: ε_h (1 + <1/N> f/(1 − f)), axis by axis where they are aligned."""
    shape = f'shape = {{ kind = "spheroid", aspect_ratio = 3.0 }}, orientation = "{orientation}" }}'
    text = TWO.format(rule="maxwell-garnett", fraction=0.2, host=0, grain=5.0)
    compiled = mixsim.parse(text.replace("0.2 }", f"0.2, {shape}")).compile()
    squared = 1 - 1 / 9
    along = (1 - squared) / squared * (np.arctanh(squared**0.5) / squared**0.5 - 1)
    inverse = np.array([2 / (1 - along), 2 / (1 - along), 1 / along])
    static = 3.0 * (1 + 0.25 * (inverse if orientation == "aligned" else inverse.mean()))
    limits = compiled.limits({})
    assert limits.static == pytest.approx(static, rel=1e-12)
    assert not np.any(limits.conductivity)
    low, high = np.moveaxis(compiled.response({}, np.array([1e-3, 1e30])).permittivity, -1, 0)
    assert low == pytest.approx(limits.static, rel=1e-9)
    assert high == pytest.approx(limits.high_frequency, rel=1e-9)


def test_a_table_has_no_limits_unless_they_are_stated(tmp_path: Path) -> None:
    (tmp_path / "m.csv").write_text(
        "# convention: exp(-iwt)\nwavelength [nm],n,k\n400,1.5,0\n600,1.49,0\n800,1.48,0\n"
    )
    text = 'host.material = "m"\nmaterials.m.table = "m.csv"\n'
    silent = mixsim.parse(text, folder=tmp_path).compile().limits({})
    assert np.isnan([silent.static, silent.high_frequency, silent.plateau]).all()
    assert silent.conductivity == 0.0
    stated = mixsim.parse(f"{text}materials.m.static = 3.0\n", folder=tmp_path).compile().limits({})
    assert stated.static == 3.0
    assert np.isnan(stated.high_frequency)


def test_a_batch_may_conduct_in_part() -> None:
    fractions = np.array([0.1, 0.3, 0.4, 0.9])
    limits = two("bruggeman", 0.1, 0, 1.0).limits({"inclusions.g.volume_fraction": fractions})
    assert np.isnan(limits.static).tolist() == [False, False, True, True]
    assert (limits.conductivity > 0).tolist() == [False, False, True, True]
    some = two("bruggeman", 0.1, 0, 1.0).limits(
        {"materials.g.permittivity.terms.s.conductivity": np.array([0.0, 1.0])}
    )
    assert some.static[0] == pytest.approx(two("bruggeman", 0.1, 0, 0).limits({}).static)
    assert some.static[1] == pytest.approx(3.0 / 0.7)


def test_carriers_without_collisions_screen_too() -> None:
    compiled = metal("bruggeman", 0.2, 0, 0.0)
    assert compiled.limits({}).static == pytest.approx(3.0 / 0.4, rel=1e-12)
    through = compiled.limits({"inclusions.g.volume_fraction": 0.6})
    assert np.isnan(through.static)
    assert through.conductivity == np.inf
    # in a lossy host they are one more perfect conductor
    leaking = metal("maxwell-garnett", 0.2, 1e-3, 0.0).limits({})
    assert leaking.conductivity == pytest.approx(1e-3 * 1.4 / 0.8, rel=1e-12)


@pytest.mark.parametrize("rule", ["maxwell-garnett", "bruggeman"])
@pytest.mark.parametrize(("host", "grain"), [(0, 1.0), (1e-3, 1.0), (0, 0)])
def test_the_response_tends_to_the_limits(rule: str, host: float, grain: float) -> None:
    mixture = two(rule, 0.25, host, grain)
    limits = mixture.limits({})
    low, high = mixture.response({}, np.array([1e-3, 1e30])).permittivity
    if host:
        assert low.imag * 1e-3 * VACUUM_PERMITTIVITY == pytest.approx(limits.conductivity, rel=1e-9)
        assert low.real == pytest.approx(limits.plateau, rel=1e-6)
    else:
        assert low.real == pytest.approx(limits.static.real, rel=1e-9)
    assert high == pytest.approx(limits.high_frequency, rel=1e-9)


@pytest.mark.parametrize(
    ("host", "static", "high"),
    [
        ('index = { model = "constant", n = 1.5 }', 2.25, 2.25),
        ('index = { model = "constant", n = 1.5, k = 0.1 }', (1.5 + 0.1j) ** 2, (1.5 + 0.1j) ** 2),
        ('index = { model = "cauchy", a = 1.5 }', None, None),
        ('index = { model = "cauchy", a = 1.5 }\nstatic = 6.0', 6.0, None),
        ('index = { model = "cauchy", a = 1.5 }\nstatic = 6.0\nhigh_frequency = 2.2', 6.0, 2.2),
        ('index = { model = "constant", n = 2.0 }\npermeability.infinity = 2.0', 2.0, 2.0),
        ('permittivity.susceptibility = 1.5\npermittivity.terms.t = { model = "debye", step = 2.0, '
         'relaxation_time = "1 ps" }', 4.5, 2.5),
    ],
)  # fmt: skip
def test_limits_of_one_material(host: str, static: complex | None, high: complex | None) -> None:
    limits = mixsim.parse(f'host.material = "m"\n[materials.m]\n{host}\n').compile().limits({})
    for found, expected in ((limits.static, static), (limits.high_frequency, high)):
        if expected is None:
            assert np.isnan(found)
        else:
            assert found == pytest.approx(expected, rel=1e-14)


def test_lorentz_lorenz_with_a_conductor() -> None:
    """A perfect conductor counts with (ε − 1)/(ε + 2) = 1."""
    text = TWO.format(rule="lorentz-lorenz", fraction=0.1, host=0, grain=1.0)
    polarised = 0.9 * 2 / 5 + 0.1
    expected = (1 + 2 * polarised) / (1 - polarised)
    assert mixsim.parse(text).compile().limits({}).static == pytest.approx(expected, rel=1e-12)


def test_permeability_has_limits_too() -> None:
    text = """
        host.material = "h"
        inclusions.g = { material = "g", volume_fraction = 0.3 }
        materials.h.permittivity.infinity = 3.0
        materials.g.permittivity.infinity = 8.0
        materials.g.permeability.infinity = 1.0
        [materials.g.permeability.terms.s]
        model = "debye"
        step = 9.0
        relaxation_frequency = "1 GHz"
    """
    limits = mixsim.parse(text).compile().limits({})
    assert limits.static_permeability == pytest.approx(1 + 3 * 0.3 * 9 / (12 - 0.3 * 9), rel=1e-14)
    assert limits.high_frequency_permeability == pytest.approx(1.0)


def test_low_frequency_of_a_plain_mean() -> None:
    """Layers in parallel: everything is a sum, whatever conducts."""
    found = low_frequency(lambda p: 0.5 * p[0] + 0.5 * p[1], [2e9, 0.0], [3.0, 5.0])
    assert np.isnan(found.static)
    assert (float(found.rate), float(found.plateau)) == pytest.approx((1e9, 4.0))
