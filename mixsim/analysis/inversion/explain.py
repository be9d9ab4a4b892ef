"""Why readings cannot be answered, in the words of someone who makes and measures the material."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.inversion.answer import Reading
from mixsim.analysis.inversion.model import ReadingModel, grid
from mixsim.analysis.inversion.scan import crossings
from mixsim.analysis.unknowns import Unknown
from mixsim.errors import Refusal
from mixsim.mixing import hashin_shtrikman, rule_named
from mixsim.mixture import VOIDS, Mixture
from mixsim.recipe import Recipe

Floats = NDArray[np.float64]

CAUSES = {
    ("static", True): (
        "usual causes of a high reading: moisture, ions or electrode polarisation at the frequency read; "
        "more filler than thought; grains that touch; stray capacitance; a thickness taken too large"
    ),
    ("static", False): (
        "usual causes of a low reading: voids, or air under an electrode; less filler than thought, "
        "or settled; a loading in weight read as one in volume; a thickness taken too small"
    ),
    ("high_frequency", True): (
        "usual causes of a high reading: the index was read where a band still lifts it; more filler than "
        "thought, or a denser film; a thickness taken too small in a fit of fringes"
    ),
    ("high_frequency", False): (
        "usual causes of a low reading: voids; less filler than thought; a loading in weight read as one in "
        "volume; the index was read below a band; a thickness taken too large in a fit of fringes"
    ),
}
_ENDLESS = 1e6  # times the lowest: what only a percolation threshold gives
_CONDUCTOR = 1e45  # times the host: stands for a perfect conductor
NAMES = {"static": "static", "high_frequency": "high-frequency"}


def impossible(recipe: Recipe, model: ReadingModel, position: int, levels: Floats) -> tuple[str, ...]:
    """Why one reading lies out of reach of a scan, and what could reach it.

    Parameters
    ----------
    recipe
        What was asked.
    model
        Readings as a function of the unknowns.
    position
        Which reading.
    levels
        That reading over the scan.
    """
    reading = model.readings[position]
    name, value = NAMES[reading.kind], reading.value
    low, high = float(np.nanmin(levels)), float(np.nanmax(levels))
    over = value > high
    ranges = " and ".join(
        f"{u.path} from {recipe.show(u.path, u.low)} to {recipe.show(u.path, u.high)}" for u in model.unknowns
    )
    span = (
        f"rises from {low:.4g} without end"
        if high > _ENDLESS * low
        else f"lies between {low:.4g} and {high:.4g}"
    )
    reasons = [
        f"under {model.mixture.rule.name}, with {ranges}, the {name} permittivity {span}; "
        f"{reading.written} was read"
    ]
    phases = model.phase_levels(grid(len(model.unknowns), 21), reading.kind)
    least = min(float(np.nanmin(level)) for level in phases.values())
    greatest = max(float(np.nanmax(level)) for level in phases.values())
    if value > greatest or value < least:
        reasons.append(
            f"no arrangement of these phases at any loading gives it: on their own they lie between "
            f"{least:.4g} and {_upper(greatest)}"
        )
    else:
        reasons += _elsewhere(recipe, model, position)
        reasons += _bounds(model.mixture, phases, reading, over=over)
    return (*reasons, CAUSES[reading.kind, over])


def _upper(level: float) -> str:
    return "infinity, where a phase conducts" if np.isinf(level) else f"{level:.4g}"


def contradiction(model: ReadingModel, place: Floats) -> tuple[str, ...]:
    """That two readings cannot both be met by one unknown, and by how much the best misses."""
    missed = ", ".join(
        f"{NAMES[r.kind]} {r.written} by {(r.value - float(p)) / r.std:+.1f}"
        for r, p in zip(model.readings, model(place), strict=True)
        if r.std
    )
    path = model.unknowns[0].path
    return (
        f"no {path} meets both readings; the nearest misses, in standard uncertainties, {missed}",
        "one of the readings is wrong, or another number of the recipe is, or the rule does not hold",
    )


def _elsewhere(recipe: Recipe, model: ReadingModel, position: int) -> list[str]:
    """Where beyond its range the one unknown would meet the reading under the same rule."""
    if len(model.unknowns) != 1:
        return []
    path = model.unknowns[0].path
    allowed, here = recipe.ranges[path], model.unknowns[0]
    low = max(allowed.minimum, here.low / 100.0)
    high = min(allowed.maximum, max(here.high, here.low) * 100.0)
    if not (np.isfinite(low) and np.isfinite(high) and low < high):
        return []
    reading = model.readings[position]
    wide = ReadingModel(model.mixture, [Unknown(path, low, high)], [reading])
    line = grid(1, 2001)
    with np.errstate(all="ignore"):
        places = crossings(wide, reading.value, line, wide(line)[..., 0])
    if not len(places):
        return []
    needed = recipe.show(path, float(wide.values(places[0])[0]))
    return [f"under {model.mixture.rule.name} it would take {path} = {needed}"]


def _bounds(mixture: Mixture, phases: dict[str, Floats], reading: Reading, *, over: bool) -> list[str]:
    """The smallest loading of one filler with which any isotropic mixture could reach a reading."""
    if len(mixture.inclusions) != 1 or mixture.aligned or mixture.inclusions[0].shells:
        return []
    grain = mixture.inclusions[0].name
    host = float(np.nanmax(phases["host"]) if over else np.nanmin(phases["host"]))
    filler = float(np.nanmax(phases[grain]) if over else np.nanmin(phases[grain]))
    if host <= 0.0 or filler <= 0.0 or VOIDS in phases or over != (filler > host):
        return []
    if np.isinf(filler):
        return [f"{grain} conducts: where its grains touch, even a small loading could give it"]
    # the bound for loose grains of the weaker phase in the stronger one, solved for the weaker one
    inverse = rule_named("maxwell-garnett").fraction_from
    assert inverse is not None
    least = 1.0 - float(np.real(inverse(reading.value, host=filler, inclusion=host)))
    said = [
        f"the smallest loading of {grain} that could give it, in any isotropic arrangement, is "
        f"{100 * least:.3g} % by volume (Hashin–Shtrikman)"
    ]
    try:
        composition = mixture.composition({}).volume_fractions
        fractions = [float(composition["host"]), float(composition[grain])]
        lower, upper = hashin_shtrikman([host, filler], fractions)
    except Refusal:  # a metallic level, for which there are no such bounds
        return said
    at = f"at the {100 * fractions[1]:.3g} % of the recipe"
    said.append(f"{at} such a mixture lies between {lower:.4g} and {upper:.4g}")
    if over and np.isfinite(most := _ceiling(mixture, host, fractions)) and reading.value > most:
        said.append(f"{at} {mixture.rule.name} gives at most {most:.4g}, with perfectly conducting grains")
    return said


def _ceiling(mixture: Mixture, host: float, fractions: Sequence[float]) -> float:
    """What the rule gives for spheres that conduct perfectly; infinite where they conduct through it."""
    if mixture.inclusions[0].shape is not None:
        return np.inf
    own = mixture.parameters(mixture.defaults)
    most = float(np.real(mixture.rule.function([host, _CONDUCTOR * host], fractions=fractions, **own)))
    return most if most < _CONDUCTOR**0.25 * host else np.inf


def blind(model: ReadingModel, unknown: Unknown) -> str:
    """Why no reading depends on one unknown, and what to measure instead."""
    path, mixture = unknown.path, model.mixture
    kinds = " and ".join(NAMES[reading.kind] for reading in model.readings)
    said = f"the {kinds} permittivity does not depend on {path}"
    if _is_loading(path):
        return (
            f"{said}: no contrast, host and filler have the same permittivity there; read another frequency"
        )
    last = path.rsplit(".", 1)[-1]
    grains = [grain for grain in mixture.inclusions if path in grain.permittivity.paths]
    x, word = mixture.defaults, "plasma frequency" if last == "plasma" else last.replace("_", " ")
    if grains and any(np.any(np.asarray(g.permittivity.low(x)[0]) > 0.0) for g in grains):
        return (
            f"{said}: grains that conduct screen a static field whole, whatever their {word} "
            f"is; measure where the carriers answer instead: their absorption peak or reflection edge in the "
            f"infrared or visible, or the loss at the frequency of their relaxation"
        )
    if last in ("damping", "mobility", "collision_time", "relaxation_time", "relaxation_frequency"):
        return f"{said}: it sets the width or place of the loss, not the levels beside it; read a spectrum"
    if all(reading.kind == "high_frequency" for reading in model.readings):
        return f"{said}: it stands above all bands, whatever their strength; read the static one"
    return f"{said}; read something that does, such as a spectrum over its band"


def curve(model: ReadingModel) -> str:
    """That one reading leaves a curve of pairs."""
    first, second = (unknown.path for unknown in model.unknowns)
    readings = " and ".join(NAMES[r.kind] for r in model.readings)
    return (
        f"one {readings} reading cannot settle two unknowns: it allows every pair of {first} and {second} "
        f"on a curve; give a second reading, or fix one of them"
    )


def several(recipe: Recipe, paths: Sequence[str], solutions: Sequence[Floats]) -> str:
    """That several answers fit equally."""
    shown = "; ".join(
        ", ".join(f"{path} = {recipe.show(path, float(v))}" for path, v in zip(paths, solution, strict=True))
        for solution in solutions
    )
    return f"{len(solutions)} answers fit equally: {shown}; narrow the range to the one that can be"


def _is_loading(path: str) -> bool:
    last = path.rsplit(".", 1)[-1]
    return last in ("volume_fraction", "volume_fraction_of_solids", "weight_fraction", "phr")
