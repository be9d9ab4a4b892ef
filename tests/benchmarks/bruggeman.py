"""Bruggeman with ellipsoids on a million points against a loop of scipy's root finding; run by hand."""

from __future__ import annotations

import time
from typing import Any

import numpy as np
from scipy.optimize import root

from mixsim.mixing import SPHERE, Depolarisation, bruggeman, ellipsoid_factors, random_grains, random_spheroid

MILLION, LOOPED = 1_000_000, 2000


def balance(parts: Any, each: Any) -> list[float]:
    """Σ f (ε − z)/((1 − N) z + N ε), its two parts."""
    z = parts[0] + 1j * parts[1]
    total = sum(f * (e - z) / ((1 - n) * z + n * e) for e, f, n in each)
    return [total.real, total.imag]


def compare(name: str, spectra: list[Any], fractions: list[float], shapes: list[Depolarisation]) -> None:
    best = np.inf
    for _ in range(3):
        started = time.perf_counter()
        z = bruggeman(spectra, fractions=fractions, depolarisations=shapes)
        best = min(best, time.perf_counter() - started)
    place = np.linspace(0, MILLION - 1, LOOPED).astype(int)
    strayed, started = 0, time.perf_counter()
    for i in place:
        phases = [complex(e) if np.ndim(e) == 0 else complex(e[i]) for e in spectra]
        whole = zip(phases, fractions, shapes, strict=True)
        each = [(e, f * float(w), float(n)) for e, f, shape in whole for n, w in shape]
        found = root(balance, [1.0, 1.0], args=(each,)).x
        strayed += abs(complex(*found) - z[i]) > 1e-6
    loop = (time.perf_counter() - started) / LOOPED * MILLION
    print(
        f"{name}: {best:.2f} s, a loop {loop:.0f} s: {loop / best:.0f} times; {strayed}/{LOOPED} astray in it"
    )


def main() -> None:
    w = np.linspace(0.5, 3.0, MILLION)
    metal, band = 4.0 - 9.0 / (w * (w + 0.3j)), 2.0 + 9.0 / (4.0 - w * w - 0.3j * w)
    compare("rice in a glass", [2.25, metal], [0.8, 0.2], [SPHERE, random_spheroid(3.0)])
    triaxial = random_grains(ellipsoid_factors(4.0, 2.0, 1.0))
    compare(
        "three phases, one of three axes",
        [2.25, metal, band],
        [0.7, 0.2, 0.1],
        [SPHERE, triaxial, random_spheroid(0.2)],
    )


if __name__ == "__main__":
    main()
