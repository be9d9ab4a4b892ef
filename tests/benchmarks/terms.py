"""Every term against its bare numpy or scipy.special expression on a million points; run by hand.

Prints ratios of the best times, taken in turns.
"""

from __future__ import annotations

import time
from collections.abc import Callable, Mapping
from typing import Any

import numpy as np
from scipy.special import dawsn, wofz

from mixsim.dispersion import TERMS
from mixsim.units import VACUUM_PERMITTIVITY

REPEATS, MILLION = 7, 1_000_000
OMEGA = np.linspace(1e14, 1e16, MILLION)


def lorentz(w: Any, plasma: float, resonance: float, damping: float) -> Any:
    return plasma**2 / (resonance**2 - w**2 - 1j * damping * w)


def drude(w: Any, plasma: float, damping: float) -> Any:
    return -(plasma**2) / (w**2 + 1j * damping * w)


def havriliak_negami(w: Any, step: float, relaxation_time: float, alpha: float, beta: float) -> Any:
    return step / (1 + (-1j * w * relaxation_time) ** (1 - alpha)) ** beta


def wide_band_debye(w: Any, step: float, low: float, high: float) -> Any:
    return step * np.log((high - 1j * w) / (low - 1j * w)) / np.log(high / low)


def jonscher(w: Any, amplitude: float, exponent: float, reference_frequency: float) -> Any:
    return amplitude * (-1j * w / reference_frequency) ** (exponent - 1)


def gaussian(w: Any, amplitude: float, resonance: float, width: float) -> Any:
    s = width / (2 * np.sqrt(np.log(2)))
    near, far = (w - resonance) / s, (w + resonance) / s
    loss = np.exp(-(near**2)) - np.exp(-(far**2))
    return amplitude * (2 / np.sqrt(np.pi) * (dawsn(far) - dawsn(near)) + 1j * loss)


def brendel_bormann(w: Any, plasma: float, resonance: float, damping: float, width: float) -> Any:
    a = np.sqrt(w**2 + 1j * w * damping)
    s = np.sqrt(2) * width
    return (
        1j
        * np.sqrt(np.pi)
        * plasma**2
        / (2 * a * s)
        * (wofz((a - resonance) / s) + wofz((a + resonance) / s))
    )


def tauc_lorentz(w: Any, amplitude: float, resonance: float, damping: float, gap: float) -> Any:
    """The real part as published, with its logarithms and arctangents."""
    a, e0, c, eg = amplitude, resonance, damping, gap
    alpha, gamma = np.sqrt(4 * e0**2 - c**2), np.sqrt(e0**2 - c**2 / 2)
    zeta = (w**2 - gamma**2) ** 2 + alpha**2 * c**2 / 4
    a_ln = (eg**2 - e0**2) * w**2 + eg**2 * c**2 - e0**2 * (e0**2 + 3 * eg**2)
    a_atan = (w**2 - e0**2) * (e0**2 + eg**2) + eg**2 * c**2
    real = (
        a
        * c
        / (np.pi * zeta)
        * a_ln
        / (2 * alpha * e0)
        * np.log((e0**2 + eg**2 + alpha * eg) / (e0**2 + eg**2 - alpha * eg))
    )
    real -= (
        a
        / (np.pi * zeta)
        * a_atan
        / e0
        * (np.pi - np.arctan((2 * eg + alpha) / c) + np.arctan((alpha - 2 * eg) / c))
    )
    angle = np.pi + 2 * np.arctan(2 * (gamma**2 - eg**2) / (alpha * c))
    real += 2 * a * e0 / (np.pi * zeta * alpha) * eg * (w**2 - gamma**2) * angle
    real -= a * e0 * c / (np.pi * zeta) * (w**2 + eg**2) / w * np.log(np.abs(w - eg) / (w + eg))
    real += (
        2
        * a
        * e0
        * c
        / (np.pi * zeta)
        * eg
        * np.log(np.abs(w - eg) * (w + eg) / np.sqrt((e0**2 - eg**2) ** 2 + eg**2 * c**2))
    )
    loss = np.where(w > eg, a * e0 * c * (w - eg) ** 2 / ((w**2 - e0**2) ** 2 + c**2 * w**2) / w, 0.0)
    return real + 1j * loss


def landau_lifshitz_gilbert(w: Any, saturation: float, resonance: float, gilbert_damping: float) -> Any:
    damped = resonance - 1j * gilbert_damping * w
    return saturation * damped / (damped**2 - w**2)


LINE = {"plasma": 2e15, "resonance": 3e15, "damping": 2e14}
BARE: Mapping[str, tuple[Callable[..., Any], dict[str, float]]] = {
    "lorentz": (lorentz, LINE),
    "drude": (drude, {"plasma": 2e15, "damping": 2e14}),
    "gaussian": (gaussian, {"amplitude": 0.5, "resonance": 3e15, "width": 5e14}),
    "brendel-bormann": (brendel_bormann, {**LINE, "width": 4e14}),
    "tauc-lorentz": (tauc_lorentz, {"amplitude": 2e17, "resonance": 5e15, "damping": 3e15, "gap": 2e15}),
    "debye": (
        lambda w, step, relaxation_time: step / (1 - 1j * w * relaxation_time),
        {"step": 2.0, "relaxation_time": 1e-15},
    ),
    "cole-cole": (
        lambda w, step, relaxation_time, alpha: havriliak_negami(w, step, relaxation_time, alpha, 1.0),
        {"step": 2.0, "relaxation_time": 1e-15, "alpha": 0.2},
    ),
    "cole-davidson": (
        lambda w, step, relaxation_time, beta: step / (1 - 1j * w * relaxation_time) ** beta,
        {"step": 2.0, "relaxation_time": 1e-15, "beta": 0.6},
    ),
    "havriliak-negami": (
        havriliak_negami,
        {"step": 2.0, "relaxation_time": 1e-15, "alpha": 0.2, "beta": 0.6},
    ),
    "wide-band-debye": (wide_band_debye, {"step": 0.3, "low": 1e12, "high": 1e17}),
    "conduction": (
        lambda w, conductivity: 1j * conductivity / (VACUUM_PERMITTIVITY * w),
        {"conductivity": 1e4},
    ),
    "jonscher": (jonscher, {"amplitude": 0.3, "exponent": 0.7, "reference_frequency": 1e15}),
    "landau-lifshitz-gilbert": (
        landau_lifshitz_gilbert,
        {"saturation": 5e15, "resonance": 2e15, "gilbert_damping": 0.05},
    ),
}


def main() -> None:
    assert set(BARE) == set(TERMS)
    for name, (bare, values) in BARE.items():
        best = [float("inf")] * 2
        answers: list[Any] = [None, None]
        for _ in range(REPEATS):
            for i, function in enumerate((TERMS[name].function, bare)):
                start = time.perf_counter()
                answers[i] = function(OMEGA, **values)
                best[i] = min(best[i], time.perf_counter() - start)
        assert np.allclose(*answers, rtol=1e-7, atol=1e-9 * float(np.abs(answers[1]).max())), name
        ours, other = (1e3 * seconds for seconds in best)
        print(f"{name:26} {ours:8.1f} ms {other:8.1f} ms {ours / other:7.3f}×  (aim: at most 1.5)")


if __name__ == "__main__":
    main()
