"""Cautions about the size of grains: against the wave around them, the wave in them, and its skin."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

import numpy as np

from mixsim.analysis.band import Axis
from mixsim.analysis.caution import Caution
from mixsim.mixture import HOST, Response
from mixsim.observables import complex_index
from mixsim.recipe import Recipe, shells_of
from mixsim.units import SPEED_OF_LIGHT, show, written_unit

SIZE_PARAMETER = 0.3  # πdn/λ outside: scattering and retardation enter at its square, here a tenth
INSIDE = 1.0  # the same inside: the ε that a sphere shows then differs by θ²/10, a tenth, after Lewin (1947)
DIPOLE = 0.6  # πdn/λ outside up to which the dipole holds 98 % of the exact series of Mie, away from ε = −3/2
LARGE = 2.0  # standard deviations of a spread of sizes that count as its large grains


def sizes(
    recipe: Recipe, axis: Axis, constituents: Mapping[str, Response], largest: Mapping[str, float]
) -> Iterator[Caution]:
    """What the size of grains makes doubtful, at the largest diameters asked for."""
    host = constituents[HOST]
    around = complex_index(axis.omega, host.permittivity, host.permeability).real
    for name, inclusion in recipe.schema.inclusions.items():
        if inclusion.diameter is None:
            continue
        path, unit = f"inclusions.{name}.diameter", written_unit(inclusion.diameter)
        core = largest.get(path, inclusion.diameter.value)
        if inclusion.diameter_spread is not None:
            core *= float(np.exp(LARGE * inclusion.diameter_spread.value))
        layers = sum(shell.thickness.value for _, shell in shells_of(inclusion))
        whole = core + 2.0 * layers
        most = "grains of up to" if inclusion.diameter_spread is not None else "grains of"
        grains = f"{most} {show(whole, 'length', unit)}"
        yield from _outside(path, grains, inclusion.waves, axis, _phase(whole, around, axis))
        if inclusion.waves == "none":
            grain = constituents[name]
            index = complex_index(axis.omega, grain.permittivity, grain.permeability)
            yield from _inside(path, f"{most} {show(core, 'length', unit)}", axis, core, index)
        else:
            yield Caution(
                "no-limit",
                f"inclusions.{name}.waves",
                "waves in the grains leave no high-frequency limit: there a grain is many waves wide",
            )


def _phase(size: float, index: Any, axis: Axis) -> Any:
    """π d n/λ."""
    return 0.5 * size * index * axis.omega / SPEED_OF_LIGHT


def _outside(path: str, grains: str, waves: str, axis: Axis, parameter: Any) -> Iterator[Caution]:
    worst = int(np.argmax(parameter))
    where = show(float(axis.omega[worst]), "spectral", axis.unit)
    said = f"{grains} reach a size parameter πdn/λ of {parameter[worst]:.2g} at {where}"
    if waves == "dipole" and parameter[worst] > DIPOLE:
        said += f": above {DIPOLE:g} the dipole alone no longer carries what a sphere does"
        yield Caution("quasi-static", path, said)
    elif waves != "dipole" and parameter[worst] > SIZE_PARAMETER:
        said += ": scattering and retardation, which the rule leaves out, matter above "
        advice = "" if waves == "inside" or parameter[worst] > DIPOLE else "; waves = 'dipole' takes them in"
        yield Caution("quasi-static", path, f"{said}{SIZE_PARAMETER:g}{advice}")


def _inside(path: str, grains: str, axis: Axis, size: float, index: Any) -> Iterator[Caution]:
    phase = _phase(size, index.real, axis)
    with np.errstate(divide="ignore", invalid="ignore"):
        skin = 2.0 * _phase(size, index.imag, axis)
    worst = int(np.argmax(skin))
    if skin[worst] > 1.0:
        depth = show(size / float(skin[worst]), "length")
        where = show(float(axis.omega[worst]), "spectral", axis.unit)
        yield Caution(
            "skin-depth",
            path,
            f"{grains} are thicker than the skin depth {depth} at {where}: "
            f"the field does not fill them as the rule assumes; waves = 'inside' takes that in for spheres",
        )
        return
    worst = int(np.argmax(phase))
    if phase[worst] > INSIDE:
        where = show(float(axis.omega[worst]), "spectral", axis.unit)
        yield Caution(
            "quasi-static",
            path,
            f"{grains} are {phase[worst] / np.pi:.2g} waves wide inside at {where}: their own resonances, "
            f"which the rule leaves out, matter from a third on; waves = 'inside' takes them in for spheres",
        )
