"""Terms: naive transcriptions in many digits, low-frequency behaviour, sum rule, Kramers–Kronig."""

from __future__ import annotations

from collections.abc import Callable
from itertools import pairwise
from typing import Any

import mpmath
import numpy as np
import pytest
from scipy.integrate import quad

from mixsim.dispersion import TERMS
from mixsim.dispersion.terms.conduction import conduction
from mixsim.dispersion.terms.oscillators import drude, drude_low, lorentz, lorentz_low
from mixsim.dispersion.terms.relaxation import debye
from mixsim.units import VACUUM_PERMITTIVITY

MP = mpmath.MPContext()  # of our own: the number of digits is global in the shared one
MP.dps = 60
J = MP.mpc(0, 1)

# The textbook fractions, written down term by term and not as the code arranges them.
NAIVE: dict[str, Callable[..., Any]] = {
    "lorentz": lambda w, plasma, resonance, damping: plasma**2 / (resonance**2 - w**2 - J * w * damping),
    "drude": lambda w, plasma, damping: -(plasma**2) / (w**2 + J * damping * w),
    "debye": lambda w, step, relaxation_time: step / (1 - J * w * relaxation_time),
    "conduction": lambda w, conductivity: J * conductivity / (MP.mpf(VACUUM_PERMITTIVITY) * w),
    "cole-cole": lambda w, step, relaxation_time, alpha: (
        step / (1 + MP.power(-J * w * relaxation_time, 1 - alpha))
    ),
    "cole-davidson": lambda w, step, relaxation_time, beta: (
        step / MP.power(1 - J * w * relaxation_time, beta)
    ),
    "havriliak-negami": lambda w, step, relaxation_time, alpha, beta: (
        step / MP.power(1 + MP.power(-J * w * relaxation_time, 1 - alpha), beta)
    ),
    "wide-band-debye": lambda w, step, low, high: (
        step * MP.log((high - J * w) / (low - J * w)) / MP.log(high / low)
    ),
    "jonscher": lambda w, amplitude, exponent, reference_frequency: (
        amplitude * MP.power(-J * w / reference_frequency, exponent - 1)
    ),
    "landau-lifshitz-gilbert": lambda w, saturation, resonance, gilbert_damping: (
        saturation
        * (resonance - J * gilbert_damping * w)
        / ((resonance - J * gilbert_damping * w) ** 2 - w**2)
    ),
    "gaussian": lambda w, amplitude, resonance, width: naive_gaussian(w, amplitude, resonance, width),
    "brendel-bormann": lambda w, plasma, resonance, damping, width: naive_spread(
        w, plasma, resonance, damping, width
    ),
    "tauc-lorentz": lambda w, amplitude, resonance, damping, gap: naive_gap(
        w, amplitude, resonance, damping, gap
    ),
}


def faddeeva(z: Any) -> Any:
    return MP.exp(-z * z) * MP.erfc(-J * z)


def naive_gaussian(w: Any, amplitude: Any, resonance: Any, width: Any) -> Any:
    scale = 2 * MP.sqrt(MP.log(2)) / width
    return J * amplitude * (faddeeva((w - resonance) * scale) - faddeeva((w + resonance) * scale))


def naive_spread(w: Any, plasma: Any, resonance: Any, damping: Any, width: Any) -> Any:
    a = MP.sqrt(w * w + J * damping * w)
    pair = sum(faddeeva((a + sign * resonance) / (MP.sqrt(2) * width)) for sign in (-1, 1))
    return J * MP.sqrt(MP.pi) * plasma**2 / (2 * MP.sqrt(2) * a * width) * pair


def naive_gap(w: Any, amplitude: Any, resonance: Any, damping: Any, gap: Any) -> Any:
    """ε″ as published, ε′ by its Kramers–Kronig integral, the pole taken off it."""

    def loss(x: Any) -> Any:
        if x <= gap:
            return MP.mpf(0)
        below = (x * x - resonance**2) ** 2 + damping**2 * x * x
        return amplitude * resonance * damping * (x - gap) ** 2 / (below * x)

    here = w * loss(w)

    def integrand(x: Any) -> Any:
        return (x * loss(x) - here) / (x * x - w * w) if x != w else MP.mpf(0)

    unit = resonance
    marks = sorted(
        {MP.mpf(0), gap, w, resonance, 0.7 * resonance, 1.4 * resonance, 4 * unit, 30 * unit, 1000 * unit}
    )
    with MP.workdps(25):
        real = 2 / MP.pi * (MP.quad(integrand, marks) + MP.quad(integrand, [marks[-1], MP.inf]))
    return real + J * loss(w)


CASES = {
    "lorentz": [
        {"plasma": 3.0, "resonance": 2.0, "damping": 0.4},
        {"plasma": 3.0, "resonance": 2.0, "damping": 0.0},
        {"plasma": 1.1e14, "resonance": 3.1e15, "damping": 4.2e14},
        {"plasma": 0.0, "resonance": 2.0, "damping": 0.4},
    ],
    "drude": [
        {"plasma": 3.0, "damping": 0.4},
        {"plasma": 3.0, "damping": 0.0},
        {"plasma": 2.4e15, "damping": 1.8e14},
        {"plasma": 0.0, "damping": 0.0},
    ],
    "debye": [{"step": 73.16, "relaxation_time": 8.27e-12}, {"step": 2.0, "relaxation_time": 0.5}],
    "conduction": [{"conductivity": 0.3}, {"conductivity": 0.0}],
    "cole-cole": [{"step": 2.0, "relaxation_time": 0.5, "alpha": a} for a in (0.0, 0.1, 0.6)],
    "cole-davidson": [{"step": 2.0, "relaxation_time": 0.5, "beta": b} for b in (1.0, 0.4)],
    "havriliak-negami": [
        {"step": 2.0, "relaxation_time": 0.5, "alpha": a, "beta": b}
        for a, b in ((0.0, 1.0), (0.3, 1.0), (0.0, 0.7), (0.25, 0.6))
    ],
    "wide-band-debye": [{"step": 0.4, "low": 1e-3, "high": 1e5}, {"step": 0.4, "low": 0.9, "high": 1.1}],
    "jonscher": [{"amplitude": 2.0, "exponent": n, "reference_frequency": 1.0} for n in (0.3, 0.8)],
    "landau-lifshitz-gilbert": [
        {"saturation": 5.0, "resonance": 2.0, "gilbert_damping": a} for a in (0.0, 0.02, 1.5)
    ],
    "gaussian": [
        {"amplitude": 2.0, "resonance": 2.0, "width": 0.3},
        {"amplitude": 2.0, "resonance": 2.0, "width": 3.0},
    ],
    "brendel-bormann": [
        {"plasma": 3.0, "resonance": 2.0, "damping": 0.2, "width": 0.3},
        {"plasma": 3.0, "resonance": 2.0, "damping": 0.01, "width": 1.0},
    ],
    "tauc-lorentz": [
        {"amplitude": 100.0, "resonance": 4.0, "damping": 2.0, "gap": 1.5},
        {"amplitude": 30.0, "resonance": 3.0, "damping": 7.0, "gap": 1.0},
        {"amplitude": 20.0, "resonance": 3.0, "damping": 0.5, "gap": 0.0},
    ],
}
SPECIAL = {"gaussian": 1e-13, "brendel-bormann": 1e-9, "tauc-lorentz": 1e-9}
WITHOUT_STATIC_LIMIT = ("brendel-bormann", "jonscher")
SLOW = ("cole-cole", "havriliak-negami")  # towards the limit as a fractional power of ω
POINTS = [(name, case) for name, cases in CASES.items() for case in cases]


def exact(name: str, omega: Any, case: dict[str, float]) -> Any:
    return NAIVE[name](MP.mpf(omega), **{key: MP.mpf(value) for key, value in case.items()})


def test_every_term_of_the_register_is_transcribed() -> None:
    assert set(NAIVE) == set(CASES) == set(TERMS)


@pytest.mark.parametrize(("name", "case"), POINTS)
def test_term_equals_its_naive_transcription(name: str, case: dict[str, float]) -> None:
    scale = case.get("resonance") or case.get("damping") or 1.0 / case.get("relaxation_time", 1.0)
    for factor in (1e-9, 1e-3, 0.7, 0.999999, 1.000001, 1.6, 1e3, 1e9):
        value = TERMS[name].function(scale * factor, **case)
        truth = complex(exact(name, scale * factor, case))
        if name in SPECIAL:  # special functions and logarithms that cancel far from the band
            assert abs(value - truth) < SPECIAL[name] * max(abs(truth), 1.0), factor
            assert value.imag >= 0.0
            continue
        assert value.real == pytest.approx(truth.real, rel=1e-14, abs=1e-14 * abs(truth)), factor
        assert value.imag == pytest.approx(truth.imag, rel=1e-14, abs=1e-300), factor


@pytest.mark.parametrize(
    ("name", "case"), [p for p in POINTS if p[1].get("damping") != 0.0 or p[0] == "lorentz"]
)
def test_low_is_the_limit_of_zero_frequency(name: str, case: dict[str, float]) -> None:
    rate, plateau = TERMS[name].low(**case)
    if name in WITHOUT_STATIC_LIMIT:
        assert np.isnan(plateau)
        return
    if name in SPECIAL or name in SLOW:
        near = TERMS[name].function(1e-9 if name in SPECIAL else 1e-40, **case)
        assert near.real == pytest.approx(float(plateau), rel=1e-8)
        return
    scale = MP.mpf(case.get("resonance") or case.get("damping") or 1.0)
    # The next order is ω itself, so half of the 60 digits are left to tell the limit by.
    omega = scale * MP.mpf("1e-30")
    value = exact(name, omega, case)
    assert float(MP.im(value) * omega) == pytest.approx(float(rate), rel=1e-15, abs=1e-28 * float(scale))
    assert float(MP.re(value)) == pytest.approx(float(plateau), rel=1e-15, abs=1e-28)


def test_carriers_without_collisions_have_no_finite_rate() -> None:
    rate, plateau = drude_low(plasma=[3.0, 0.0, 3.0, np.nan], damping=[0.0, 0.0, 2.0, 0.0])
    np.testing.assert_array_equal(rate, [np.inf, 0.0, 4.5, np.nan])
    np.testing.assert_array_equal(plateau, [0.0, 0.0, -2.25, np.nan])


@pytest.mark.parametrize(("name", "case"), POINTS)
def test_terms_vanish_at_high_frequency(name: str, case: dict[str, float]) -> None:
    assert abs(TERMS[name].function(1e40, **case)) < 1e-7


@pytest.mark.parametrize(
    "value", [lorentz(3.0, plasma=1.0, resonance=2.0, damping=0.0), drude(3.0, plasma=1.0, damping=0.0)]
)
def test_loss_free_terms_have_a_loss_of_plus_zero(value: complex) -> None:
    assert value.real < 0 and value.imag == 0.0 and not np.signbit(value.imag)
    assert np.sqrt(value).imag > 0  # decays; with -0.0 it would grow


def test_undamped_line_is_not_finite_at_its_resonance_alone() -> None:
    value = lorentz([1.0, 2.0, 3.0], plasma=1.0, resonance=2.0, damping=0.0)
    np.testing.assert_array_equal(np.isfinite(value), [True, False, True])


@pytest.mark.parametrize(
    "wavenumber",
    [215.0],
    ids=["published: Ordal et al., Appl. Opt. 22, 1099 (1983), gold, damping 215 cm^-1"],
)
def test_drude_at_its_own_damping(wavenumber: float) -> None:
    value = drude(wavenumber, plasma=72800.0, damping=wavenumber)
    assert -value.real == pytest.approx(value.imag, rel=1e-14)
    assert value.imag == pytest.approx(57326.6, abs=0.06)  # ωp²/(2γ²) from the published pair
    low = drude_low(plasma=72800.0, damping=wavenumber)
    assert value.real == pytest.approx(low[1] / 2, rel=1e-14)


@pytest.mark.parametrize(
    ("gigahertz", "truth"),
    [(1.0, 78.163 + 3.791j), (2.45, 77.193 + 9.165j), (10.0, 62.806 + 29.933j), (50.0, 14.640 + 24.526j)],
    ids=lambda x: f"memory: Kaatze, J. Chem. Eng. Data 34, 371 (1989), water 25 °C; digits computed {x}",
)
def test_debye_of_water(gigahertz: float, truth: complex) -> None:
    omega = 2e9 * np.pi * gigahertz
    assert 5.2 + debye(omega, step=78.36 - 5.2, relaxation_time=8.27e-12) == pytest.approx(truth, abs=8e-4)


def test_conduction_is_the_loss_that_the_drude_rate_leaves() -> None:
    plasma, damping = 2.4e15, 1.8e14
    sigma = VACUUM_PERMITTIVITY * plasma**2 / damping
    slow = damping * 1e-6
    assert conduction(slow, conductivity=sigma).imag == pytest.approx(
        drude(slow, plasma=plasma, damping=damping).imag, rel=1e-11
    )


LORENTZ = {"plasma": 3.0, "resonance": 2.0, "damping": 0.4}


def moment(power: int, low: float, high: float) -> float:
    """∫ ω^power ε'' dω of the Lorentz term."""
    marks = [x for x in (1.5, 2.0, 2.5) if low < x < high]
    edges = [low, *marks, high]
    return sum(
        quad(lambda w: w**power * lorentz(w, **LORENTZ).imag, a, b, epsabs=1e-12, epsrel=1e-12, limit=200)[0]
        for a, b in pairwise(edges)
    )


def test_f_sum_and_static_step_of_lorentz() -> None:
    assert moment(1, 1e-12, np.inf) == pytest.approx(np.pi / 2 * 9.0, rel=1e-9)
    static = 2 / np.pi * moment(-1, 1e-12, np.inf)
    assert static == pytest.approx(9.0 / 4.0, rel=1e-9)
    assert static == pytest.approx(lorentz_low(**LORENTZ)[1], rel=1e-9)


@pytest.mark.parametrize(
    ("window", "static", "f_sum"),
    [((1e-12, 4.0), 0.9926, 0.923), ((1e-12, 10.0), 0.9996, 0.974), ((0.5, 5.0), 0.963, 0.942)],
    ids=["computed: to twice the resonance", "computed: to five times", "computed: cut at both ends"],
)
def test_a_window_loses_more_of_the_f_sum_than_of_the_step(
    window: tuple[float, float], static: float, f_sum: float
) -> None:
    assert 2 / np.pi * moment(-1, *window) / 2.25 == pytest.approx(static, abs=6e-4)
    assert moment(1, *window) / (np.pi / 2 * 9.0) == pytest.approx(f_sum, abs=6e-4)


@pytest.mark.parametrize("omega", [0.3, 1.9, 2.3, 6.0])
@pytest.mark.parametrize(
    "term",
    [
        lambda w: lorentz(w, **LORENTZ),
        lambda w: debye(w, step=2.0, relaxation_time=0.5),
        *[
            lambda w, n=name, c=cases[-1]: TERMS[n].function(w, **c)
            for name, cases in CASES.items()
            if name not in ("lorentz", "drude", "debye", "conduction", "jonscher", "tauc-lorentz")
        ],
    ],
)
def test_kramers_kronig(term: Callable[[float], complex], omega: float) -> None:
    here = omega * term(omega).imag

    def integrand(x: float) -> float:
        # P∫ dx/(x² − ω²) = 0 from 0 to ∞: taking it off leaves nothing singular.
        return (x * term(x).imag - here) / (x * x - omega * omega) if x != omega else 0.0

    edges = [0.0, omega, 2 * omega + 4.0, np.inf]
    pieces = pairwise(edges)
    total = sum(quad(integrand, a, b, epsabs=1e-10, epsrel=1e-10, limit=400)[0] for a, b in pieces)
    assert 2 / np.pi * total == pytest.approx(term(omega).real, rel=1e-6, abs=1e-7)


@pytest.mark.parametrize("energy", [0.4, 1.4, 1.6, 3.0, 4.0, 7.5])
def test_gap_against_the_published_real_part(energy: float) -> None:
    """memory: Jellison and Modine, Appl. Phys. Lett. 69, 371 (1996), with its logarithms and arctangents."""
    a, e0, c, eg, e = 100.0, 4.0, 2.0, 1.5, energy
    alpha, gamma2 = np.sqrt(4 * e0**2 - c**2), e0**2 - c**2 / 2
    zeta = (e**2 - gamma2) ** 2 + alpha**2 * c**2 / 4
    a_ln = (eg**2 - e0**2) * e**2 + eg**2 * c**2 - e0**2 * (e0**2 + 3 * eg**2)
    a_atan = (e**2 - e0**2) * (e0**2 + eg**2) + eg**2 * c**2
    ratio = (e0**2 + eg**2 + alpha * eg) / (e0**2 + eg**2 - alpha * eg)
    turn = np.pi - np.arctan((2 * eg + alpha) / c) + np.arctan((alpha - 2 * eg) / c)
    angle = np.pi + 2 * np.arctan(2 * (gamma2 - eg**2) / (alpha * c))
    edge = abs(e - eg) * (e + eg) / np.sqrt((e0**2 - eg**2) ** 2 + eg**2 * c**2)
    real = a * c * a_ln / (2 * alpha * e0) * np.log(ratio) - a * a_atan / e0 * turn
    real += 2 * a * e0 / alpha * eg * (e**2 - gamma2) * angle
    real += -a * e0 * c * (e**2 + eg**2) / e * np.log(abs(e - eg) / (e + eg)) + 2 * a * e0 * c * eg * np.log(
        edge
    )
    found = TERMS["tauc-lorentz"].function(e, amplitude=a, resonance=e0, damping=c, gap=eg)
    assert found.real == pytest.approx(real / (np.pi * zeta), rel=1e-10)


@pytest.mark.parametrize("alpha", [0.0, 0.2, 0.5])
def test_cole_cole_lies_on_a_circle(alpha: float) -> None:
    """Centre (Δ/2, −(Δ/2) tan(απ/2)), radius (Δ/2)/cos(απ/2)."""
    values = TERMS["cole-cole"].function(
        np.geomspace(1e-4, 1e4, 41), step=2.0, relaxation_time=1.0, alpha=alpha
    )
    centre = 1.0 - 1j * np.tan(alpha * np.pi / 2)
    assert np.abs(values - centre) == pytest.approx(np.full(41, 1.0 / np.cos(alpha * np.pi / 2)), rel=1e-12)


def test_lyddane_sachs_teller() -> None:
    """ω_L²/ω_T² = ε_s/ε∞ of one undamped band: where ε′ crosses zero above it."""
    infinity, resonance, plasma = 4.0, 2.0, 3.0
    static = infinity + lorentz_low(plasma=plasma, resonance=resonance, damping=0.0)[1]
    longitudinal = resonance * np.sqrt(static / infinity)
    assert infinity + lorentz(
        longitudinal, plasma=plasma, resonance=resonance, damping=0.0
    ).real == pytest.approx(0.0, abs=1e-13)
