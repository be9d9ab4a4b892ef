"""Readings found: in the recipe, in its samples, and in files of measured spectra."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.observed.noise import modulus
from mixsim.analysis.observed.observation import LIMITS, OF_PIECE, Observation
from mixsim.analysis.observed.samples import Sample
from mixsim.analysis.uncertainty.inputs import Uncertain, uncertain_leaves
from mixsim.dispersion.table import read_columns
from mixsim.errors import BadInput, Fault, Refusal
from mixsim.mixture import HOST, Mixture
from mixsim.recipe import COMMAND_LINE, Recipe
from mixsim.recipe.recipe import parse
from mixsim.recipe.schema import Measured
from mixsim.recipe.schema import Sample as Measurement
from mixsim.units import Leaf

Floats = NDArray[np.float64]

_REAL = {"permittivity": "permittivity_real", "permeability": "permeability_real"}


def samples_of(recipe: Recipe, files: Sequence[Path] = (), noise: float | None = None) -> tuple[Sample, ...]:
    """Every sample of a recipe with what was read on it.

    Parameters
    ----------
    recipe
        A checked recipe.
    files
        Measured spectra in place of those that the recipe names; for a single sample.
    noise
        Standard uncertainty of a spectrum that states none, as a share of its modulus.

    Returns
    -------
    samples
        Those of `[[samples]]`, or the one of `[measured]`.

    Raises
    ------
    BadInput
        Where nothing was read, or a file or a reading cannot be used.
    """
    schema = recipe.schema
    if not schema.samples:
        measured = schema.measured or Measured()
        found = _sample(recipe, recipe.compile(), measured, "measured", "", files, noise)
        if not found.observations:
            allowed = "name a file of readings, or give readings or spectrum in [measured]"
            raise BadInput([recipe.fault("measured", "nothing was read", allowed)])
        return (found,)
    if files:
        allowed = "each of [[samples]] names its own spectrum"
        raise BadInput([Fault(COMMAND_LINE, str(files[0]), "a file beside several samples", allowed)])
    samples = []
    for place, given in enumerate(schema.samples):
        path = f"samples.{place}"
        changed = _with(recipe, path, given.set)
        own = {name: number for name, number in uncertain_leaves(changed).items() if name in given.set}
        sample = _sample(recipe, changed.compile(), given, path, given.name, (), noise, own)
        if not sample.observations:
            found_nothing = recipe.fault(
                path, f"nothing was read on {given.name}", "give readings or spectrum"
            )
            raise BadInput([found_nothing])
        samples.append(sample)
    return tuple(samples)


def _with(recipe: Recipe, path: str, changed: dict[str, str | float | bool]) -> Recipe:
    """The recipe of one sample; what is wrong with its changes is said where they stand."""
    settings = {**recipe.settings, **changed}
    try:
        return parse(recipe.text, file=recipe.file, folder=recipe.folder, settings=settings)
    except BadInput as error:
        raise BadInput(
            [
                recipe.fault(f"{path}.set.{fault.path}", fault.found, fault.allowed, fault.suggestion)
                if fault.file == COMMAND_LINE
                else fault
                for fault in error.faults
            ]
        ) from None


def _sample(
    recipe: Recipe,
    mixture: Mixture,
    measured: Measured,
    path: str,
    name: str,
    files: Sequence[Path],
    noise: float | None,
    uncertain: Mapping[str, Uncertain] | None = None,
) -> Sample:
    if noise is None and measured.noise is not None:
        noise = measured.noise.value
    observations = [*_levels(measured, name), *_readings(measured, name)]
    named = list(files)
    if not named and measured.spectrum is not None:
        named = [recipe.folder / measured.spectrum]
    for file in named:
        try:
            observations += spectrum_of(file, name, noise)
        except FileNotFoundError:
            raise BadInput([_at(recipe, path, files, file, "no such file")]) from None
        except Refusal as refusal:
            fault = Fault(str(file), "", refusal.found, refusal.allowed, refusal.suggestion)
            raise BadInput([fault]) from None
        except OSError as error:
            reason = (error.strerror or "it cannot be read").lower()
            raise BadInput([_at(recipe, path, files, file, reason)]) from None
    if mixture.aligned:
        allowed = "a reading would have to say along which axis; orientation = 'random' has one level"
        raise BadInput([recipe.fault("inclusions", "aligned grains have a level for each axis", allowed)])
    _can_give(recipe, mixture, observations, path)
    yields = _yields(recipe, mixture, observations, path)
    changed = measured.set if isinstance(measured, Measurement) else {}
    teaches = isinstance(measured, Measurement) and measured.calibrates
    return Sample(name, mixture, tuple(observations), yields, uncertain or {}, frozenset(changed), teaches)


def _at(recipe: Recipe, path: str, files: Sequence[Path], file: Path, found: str) -> Fault:
    allowed = "name a measured spectrum (CSV)"
    if files:
        return Fault(COMMAND_LINE, "DATA", f"{str(file)!r}: {found}", allowed)
    return recipe.fault(f"{path}.spectrum", f"{str(file)!r}: {found}", allowed)


def _levels(measured: Measured, sample: str) -> Iterator[Observation]:
    for quantity in (*LIMITS, *OF_PIECE):
        leaf: Leaf | None = getattr(measured, quantity)
        if leaf is not None:
            yield Observation(quantity, *_one(leaf), None, leaf.written, sample)


def _readings(measured: Measured, sample: str) -> Iterator[Observation]:
    for reading in measured.readings:
        for key in type(reading).model_fields:
            leaf = getattr(reading, key)
            if key != "at" and leaf is not None:
                omega = np.array([reading.at.value])
                written = f"{leaf.written} at {reading.at.written}"
                yield Observation(_REAL.get(key, key), *_one(leaf), omega, written, sample)


def _one(leaf: Leaf) -> tuple[Floats, Floats]:
    return np.array([leaf.value]), np.array([np.nan if leaf.std is None else leaf.std])


def spectrum_of(file: Path, sample: str, noise: float | None) -> list[Observation]:
    """Columns of a measured spectrum as observations.

    The uncertainty is the file's own where it holds one, else `noise` times the modulus of what was read.
    """
    columns = read_columns(file)
    found = []
    for quantity, values in columns.values.items():
        std = columns.stds.get(quantity)
        if std is None:
            std = np.full(len(values), np.nan)
            if noise is not None:
                std = noise * modulus(quantity, columns.values)
        found.append(Observation(quantity, values, std, columns.omega, file.name, sample))
    return found


def _can_give(recipe: Recipe, mixture: Mixture, observations: Sequence[Observation], path: str) -> None:
    """Refuse a reading of a level that a constituent does not have, or of a density that is not known."""
    faults = []
    for one in observations:
        if one.quantity in LIMITS:
            for phase in mixture.phases:
                spectrum, x = phase.permittivity, mixture.defaults
                level = spectrum.low(x)[1] if one.quantity == "static" else spectrum.high(x)
                if np.any(np.isnan(level)):
                    where = f"materials.{phase.material}"
                    found = f"{phase.material} has no {one.quantity} level: it is known over a band only"
                    faults.append(recipe.fault(where, found, f"give [{where}] {one.quantity}"))
        elif one.quantity in OF_PIECE:
            for phase in (mixture.host, *mixture.inclusions):
                if phase.density is None:
                    where = f"materials.{phase.material}"
                    found = f"{phase.material} has no density"
                    faults.append(recipe.fault(where, found, f"{path}.{one.quantity} needs it"))
    if faults:
        raise BadInput(list(dict.fromkeys(faults)))


def _yields(
    recipe: Recipe, mixture: Mixture, observations: Sequence[Observation], path: str
) -> dict[str, str | float]:
    """Where the mass left of each constituent after burn-off stands."""
    if not any(one.quantity == "ash" for one in observations):
        return {}
    found: dict[str, str | float] = {}
    faults = []
    for phase in (mixture.host, *mixture.inclusions):
        where = f"materials.{phase.material}"
        if f"{where}.ash_yield" in recipe.leaves:
            found[phase.name] = f"{where}.ash_yield"
        else:
            who = "the host" if phase.name == HOST else phase.name
            allowed = f"{path}.ash needs what is left of {who}: 0 where it burns away, 1 where it stays"
            faults.append(recipe.fault(where, "ash_yield is missing", allowed))
    if faults:
        raise BadInput(faults)
    return found
