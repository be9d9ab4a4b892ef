"""The evaluator against the bare formula. Run by hand; prints ratios of best times taken in turns.

The bare formula is what a competent user of numpy would write: vectorised, the same dispersion, the same
choice of branch, no blocks and no recipe.
"""

from __future__ import annotations

import time
from collections.abc import Callable
from typing import Any

import numpy as np
from scipy.optimize import root

from mixsim.recipe import parse

REPEATS = 7
MILLION = 1_000_000
LOADING = "inclusions.grain.volume_fraction"
DAMPING = "materials.grain.permittivity.terms.free.damping"
VOIDS = "\nvoids.volume_fraction = 0.1\n"
BANDS = "".join(
    f'\nband{i} = {{ model = "lorentz", plasma = "1e15 rad/s", resonance = "{i}e15 rad/s", '
    f'damping = "3e14 rad/s" }}'
    for i in (1, 2, 3, 4)
)
RECIPE = """
host.material = "matrix"
inclusions.grain = {{ material = "grain", volume_fraction = 0.2 }}
mixing.rule = "{rule}"
materials.matrix.permittivity.infinity = 2.1
materials.grain.permittivity.infinity = 4.0
[materials.matrix.permittivity.terms]
band = {{ model = "lorentz", plasma = "5e14 rad/s", resonance = "1e15 rad/s", damping = "5e13 rad/s" }}
[materials.grain.permittivity.terms]
free = {{ model = "drude", plasma = "3e15 rad/s", damping = "1e14 rad/s" }}
"""


def host(omega: Any) -> Any:
    return 2.1 + (5e14) ** 2 / ((1e15) ** 2 - omega**2 - 1j * 5e13 * omega)


def grain(omega: Any) -> Any:
    return 4.0 - (3e15) ** 2 / (omega**2 + 1j * 1e14 * omega)


def maxwell_garnett(h: Any, g: Any, f: Any) -> Any:
    ratio = f * (g - h) / (g + 2.0 * h)
    return h * (1.0 + 2.0 * ratio) / (1.0 - ratio)


def three_phases(h: Any, g: Any, f: Any, v: Any) -> Any:
    """Maxwell Garnett with spherical voids."""
    ratio = f * (g - h) / (g + 2.0 * h) + v * (1.0 - h) / (1.0 + 2.0 * h)
    return h * (1.0 + 2.0 * ratio) / (1.0 - ratio)


def bruggeman(h: Any, g: Any, f: Any) -> Any:
    """The closed form with the branch proved in mixsim.mixing.bruggeman: Re(S/M) ≥ 0, M the mean."""
    b = (3.0 * f - 1.0) * g + (2.0 - 3.0 * f) * h
    s = np.sqrt(b * b + 8.0 * h * g)
    mean = (2.0 - f) * h + (1.0 + f) * g
    s = np.where((s * np.conj(mean)).real < 0.0, -s, s)
    return (b + s) / 4.0


BARE = {"maxwell-garnett": maxwell_garnett, "bruggeman": bruggeman}


def best(*functions: Callable[[], Any]) -> list[float]:
    """Best time of each, taken in turns."""
    times = [float("inf")] * len(functions)
    for _ in range(REPEATS):
        for i, function in enumerate(functions):
            start = time.perf_counter()
            function()
            times[i] = min(times[i], time.perf_counter() - start)
    return times


def report(name: str, ours: float, other: float, aim: str) -> None:
    print(f"{name:52} {1000 * ours:9.1f} ms {1000 * other:10.1f} ms {ours / other:8.3f}×  ({aim})")


def spectrum(rule: str) -> None:
    mixture, omega = parse(RECIPE.format(rule=rule)).compile(), np.linspace(1e14, 5e15, MILLION)
    bare = BARE[rule]

    def ours() -> Any:
        return mixture.response({}, omega).permittivity

    def by_hand() -> Any:
        return bare(host(omega), grain(omega), 0.2)

    assert np.allclose(ours(), by_hand(), rtol=1e-9)
    report(f"{rule}, 1e6 frequencies", *best(ours, by_hand), "aim: at most 1.3")


def sweep(rule: str) -> None:
    mixture, omega = parse(RECIPE.format(rule=rule)).compile(), np.linspace(1e14, 5e15, 2000)
    loading, bare = np.linspace(0.0, 0.3, 200), BARE[rule]

    def ours() -> Any:
        return mixture.response({LOADING: loading}, omega).permittivity

    def by_hand() -> Any:
        return bare(host(omega), grain(omega), loading[:, np.newaxis])

    assert np.allclose(ours(), by_hand(), rtol=1e-9)
    report(f"{rule}, 200 loadings × 2000 frequencies", *best(ours, by_hand), "aim: at most 1.3")


def with_voids() -> None:
    mixture = parse(VOIDS + RECIPE.format(rule="maxwell-garnett")).compile()
    omega = np.linspace(1e14, 5e15, MILLION)

    def ours() -> Any:
        return mixture.response({}, omega).permittivity

    def by_hand() -> Any:
        return three_phases(host(omega), grain(omega), 0.2, 0.1)

    assert np.allclose(ours(), by_hand(), rtol=1e-9)
    report("maxwell-garnett with voids, 1e6 frequencies", *best(ours, by_hand), "aim: at most 1.3")


def one_term_of_five() -> None:
    """Whoever sweeps one term by hand computes the other four once."""
    mixture = parse(RECIPE.format(rule="maxwell-garnett") + BANDS).compile()
    omega, damping = np.linspace(1e14, 5e15, 20_000), np.linspace(5e13, 5e14, 50)

    def ours() -> Any:
        return mixture.response({DAMPING: damping}, omega).permittivity

    def by_hand() -> Any:
        bands = sum((1e15) ** 2 / ((i * 1e15) ** 2 - omega**2 - 1j * 3e14 * omega) for i in (1, 2, 3, 4))
        free = 4.0 - (3e15) ** 2 / (omega**2 + 1j * damping[:, np.newaxis] * omega)
        return maxwell_garnett(host(omega), free + bands, 0.2)

    assert np.allclose(ours(), by_hand(), rtol=1e-9)
    report("one term of five, 50 dampings × 20000", *best(ours, by_hand), "aim: at most 1.3")


def three_phase_bruggeman() -> None:
    """No closed form to compare with: the time alone."""
    mixture = parse(VOIDS + RECIPE.format(rule="bruggeman")).compile()
    omega = np.linspace(1e14, 5e15, MILLION // 10)
    (ours,) = best(lambda: mixture.response({}, omega))
    print(f"{'bruggeman with voids, 1e5 frequencies':52} {1000 * ours:9.1f} ms")


def root_finding() -> None:
    """scipy one frequency after another, from the Maxwell Garnett value; a thousand points, scaled."""
    mixture, count = parse(RECIPE.format(rule="bruggeman")).compile(), 1000
    omega = np.linspace(1e14, 5e15, MILLION)
    some = omega[:: MILLION // count]

    def looped() -> Any:
        found = []
        for h, g in zip(host(some), grain(some), strict=True):

            def balance(z: Any, h: complex = h, g: complex = g) -> list[float]:
                e = complex(*z)
                value = 0.8 * (h - e) / (h + 2 * e) + 0.2 * (g - e) / (g + 2 * e)
                return [value.real, value.imag]

            start = maxwell_garnett(h, g, 0.2)
            found.append(complex(*root(balance, [start.real, abs(start.imag) + 0.1]).x))
        return found

    ours, other = best(lambda: mixture.response({}, omega), looped)
    factor = other / len(some) / (ours / MILLION)
    name = "bruggeman, against a loop of scipy root finding"
    print(f"{name:52} {factor:9.0f} times faster  (aim: at least 300)")


def main() -> None:
    print(f"{'':52} {'mixsim':>12} {'by hand':>13} {'ratio':>9}")
    for rule in BARE:
        spectrum(rule)
    for rule in BARE:
        sweep(rule)
    with_voids()
    one_term_of_five()
    three_phase_bruggeman()
    root_finding()


if __name__ == "__main__":
    main()
