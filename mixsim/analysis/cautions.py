"""Cautions beside a prediction or a sweep: validity, doubt, passivity."""

from __future__ import annotations

from collections.abc import Collection, Iterator, Mapping, Sequence
from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.band import Axis, Varied
from mixsim.analysis.caution import Caution
from mixsim.analysis.rules import applicable_rules, conducts, threshold
from mixsim.analysis.sizes import sizes
from mixsim.analysis.suspicion import suspicions
from mixsim.mixture import HOST, VOIDS, Composition, Limits, Mixture, Response
from mixsim.mixture.nested import Mixed
from mixsim.mixture.spectra import Measured, described
from mixsim.recipe import Recipe
from mixsim.units import show

RANDOM_PACKING = 0.64  # of equal hard spheres, common practice
TOUCHING = 0.16  # volume fraction at which random hard spheres percolate, common practice
SAME_TEMPERATURE = 1.0  # K, within which a description may be taken as it is
DECADE = 2.0  # ratio of the ends of a band over which a constant loss is still handy
SPREAD = 0.2  # share by which other rules may differ before it is said
CONTRACTION = 0.1  # of the volume on mixing, which no common solution reaches; common practice
CAUSAL = 0.05  # of 1 + |ε|: misfit of a table to Kramers–Kronig from which nothing follows beyond its ends
PASSIVE = 1e-9  # share of |ε| below which a negative loss is rounding


def cautions(
    recipe: Recipe,
    mixture: Mixture,
    axis: Axis,
    response: Response,
    limits: Limits,
    composition: Composition,
    constituents: Mapping[str, Response],
    vary: Sequence[Varied],
) -> tuple[Caution, ...]:
    """Every caution about one prediction, or about the worst corner of a sweep."""
    largest = {item.path: float(item.values.max()) for item in vary}
    found = [
        *suspicions(recipe),
        *_ranges(recipe, mixture, axis),
        *_temperatures(recipe, mixture, vary),
        *extended(mixture, axis.omega),
        *sizes(recipe, axis, constituents, largest),
        *_not_finite(axis, response),
        *_not_causal(recipe, mixture, axis),
        *_crowding(recipe, mixture, composition),
        *_no_limit(mixture, limits),
        *_not_passive(recipe, mixture, axis, response, constituents),
        *_rule_spread(recipe, mixture, axis, response),
    ]
    return tuple(dict.fromkeys(found))


def _ranges(recipe: Recipe, mixture: Mixture, axis: Axis) -> Iterator[Caution]:
    for name, part in recipe.parts.items():
        for caution in _ranges(part, part.compile(), axis):
            yield replace(caution, path=f"materials.{name}.recipe.{caution.path}")
    low, high = float(axis.omega.min()), float(axis.omega.max())
    for name in dict.fromkeys(phase.material for phase in mixture.phases if phase.name != VOIDS):
        valid = recipe.schema.materials[name].valid
        if valid is None:
            continue
        ends = sorted((valid.from_.value, valid.to.value))
        slack = 1e-9
        if low < ends[0] * (1 - slack) or high > ends[1] * (1 + slack):
            yield Caution(
                "out-of-range",
                f"materials.{name}",
                f"{name} is described from {valid.from_.written} to {valid.to.written}; the band "
                f"{_span(axis)} leaves that",
            )


def _temperatures(recipe: Recipe, mixture: Mixture, vary: Sequence[Varied]) -> Iterator[Caution]:
    """Temperatures beyond those of a description, and materials that are taken as they are at any."""
    path = "conditions.temperature"
    if path not in recipe.leaves:
        return
    swept = [item.values for item in vary if item.path == path]
    temperatures = swept[0] if swept else np.array([recipe.leaves[path].value])
    unmoved = []
    for name in dict.fromkeys(phase.material for phase in mixture.phases if phase.name != VOIDS):
        material = recipe.schema.materials[name]
        if path not in _paths_of(mixture, name):
            own = material.temperature
            if own is None or np.any(np.abs(temperatures - own.value) > SAME_TEMPERATURE):
                unmoved.append(name if own is None else f"{name} ({own.written})")
        valid = material.valid_temperature
        if valid is not None and np.any((temperatures < valid.from_.value) | (temperatures > valid.to.value)):
            yield Caution(
                "out-of-range",
                f"materials.{name}",
                f"{name} is described from {valid.from_.written} to {valid.to.written}; the temperature "
                f"leaves that",
            )
    if unmoved:
        yield Caution(
            "temperature",
            path,
            f"without a temperature coefficient, and taken as described: {', '.join(unmoved)}",
        )


def _paths_of(mixture: Mixture, material: str) -> frozenset[str]:
    """Leaves that the permittivity of a material depends on."""
    phases = (phase.permittivity.paths for phase in mixture.phases if phase.material == material)
    return frozenset().union(*phases)


def extended(mixture: Mixture, omega: NDArray[np.float64], under: str = "") -> Iterator[Caution]:
    """Tables that are asked for beyond their ends, and how well they obey causality themselves.

    Those of a material that is a recipe of its own, too: `under` is where it stands.
    """
    for phase in mixture.phases:
        spectra = [described(spectrum) for spectrum in (phase.permittivity, phase.permeability)]
        if isinstance(spectra[0], Mixed):
            yield from extended(spectra[0].mixture, omega, f"{under}materials.{phase.material}.recipe.")
            continue
        asked = [part.extension for part in spectra if isinstance(part, Measured) and part.extension]
        if not asked or not asked[0].beyond(omega):
            continue
        share = max(extension.completion.misfit for extension in asked)
        tied = f"it is tied to the data, which obey Kramers–Kronig to {100 * share:.1g} % of 1 + |ε|"
        if share > CAUSAL:
            tied = (
                f"even near them it means little, as the data miss Kramers–Kronig by {share:.0%} of 1 + |ε|"
            )
        else:
            tied = f"near the ends {tied}"
        yield Caution(
            "extended",
            f"{under}materials.{phase.material}",
            f"{phase.material} was measured from {asked[0].table.range_written}; beyond, a causal and "
            f"passive continuation stands in its place: {tied}; far from them it is one of many that are "
            f"possible",
        )


def _span(axis: Axis) -> str:
    first, last = (show(float(axis.omega[i]), "spectral", axis.unit) for i in (0, -1))
    return f"from {first} to {last}" if len(axis.omega) > 1 else f"at {first}"


def _crowding(recipe: Recipe, mixture: Mixture, composition: Composition) -> Iterator[Caution]:
    """Loading against packing, percolation and what is said of contact."""
    volumes = composition.volume_fractions
    fractions = {
        grain.name: float(np.max(sum(volumes[part.name] for part in (grain, *grain.shells))))
        for grain in mixture.inclusions
    }
    total = sum(fractions.values())
    if mixture.density is not None:
        yield from _partial_volumes(composition)
    elif mixture.rule.homogeneous and total > RANDOM_PACKING:
        yield Caution(
            "packing",
            "inclusions",
            f"a loading of {show(total, 'fraction', '%')} lies above {RANDOM_PACKING:.0%}, the random close "
            f"packing of equal spheres: it takes a mix of sizes or pressing",
        )
    rule = mixture.rule
    conducting = {grain.name for grain in mixture.inclusions if conducts(mixture, grain.name)}
    if not conducting or conducts(mixture, HOST):
        return
    starts_at = threshold(mixture, {name: fractions[name] for name in conducting})
    filled = sum(fractions[name] for name in conducting)
    what, percent = " and ".join(sorted(conducting)), show(filled, "fraction", "%")
    contacts = {name: recipe.schema.inclusions[name].contact for name in sorted(conducting)}
    if starts_at is not None and filled > 0.75 * starts_at:
        yield Caution(
            "percolation",
            "mixing.rule",
            f"{percent} of conducting {what} is near or above the threshold {starts_at:.3g} of {rule.name}"
            f"{_by_shape(mixture, conducting)}, "
            f"where small changes of loading change everything; real spheres percolate from {TOUCHING:g} on",
        )
    for name, contact in contacts.items():
        path = f"inclusions.{name}.contact"
        if contact == "touching" and starts_at is None:
            yield Caution(
                "contact", path, f"{name} is said to touch, while {rule.name} keeps its grains apart"
            )
        elif contact == "insulated" and starts_at is not None and filled > starts_at:
            yield Caution(
                "contact", path, f"{name} is said to be insulated, while {rule.name} lets it conduct here"
            )
        elif contact is None and starts_at is None and filled > TOUCHING:
            yield Caution(
                "contact",
                path,
                f"{percent} of conducting {what}: random grains touch from about {TOUCHING:.0%} on, and "
                f"{rule.name} keeps them apart; say contact = 'insulated' or 'touching'",
            )


def _by_shape(mixture: Mixture, names: Collection[str]) -> str:
    """A word where it is the shape of grains that sets the threshold."""
    shaped = any(grain.shape is not None for grain in mixture.inclusions if grain.name in names)
    return " for grains of this shape" if shaped else ""


def _partial_volumes(composition: Composition) -> Iterator[Caution]:
    """A measured density far from that of the pure constituents is rather a slip than a contraction."""
    totals = np.atleast_1d(sum(composition.volume_fractions.values()))
    worst = float(totals.flat[int(np.argmax(np.abs(totals - 1.0)))])
    if abs(worst - 1.0) > CONTRACTION:
        yield Caution(
            "partial-volumes",
            "mixing.density",
            f"with this density the pure constituents would fill {100 * worst:.4g} % of the volume: a change "
            f"beyond {CONTRACTION:.0%} on mixing is rather a slip in a density or a weight",
        )


def _not_causal(recipe: Recipe, mixture: Mixture, axis: Axis) -> Iterator[Caution]:
    """Losses that are the same everywhere, and levels below one that a wide band of loss leaves."""
    for name in dict.fromkeys(phase.material for phase in mixture.phases if phase.name != VOIDS):
        material = recipe.schema.materials[name]
        for quantity in ("permittivity", "permeability"):
            response = getattr(material, quantity)
            lossy = (
                response is not None and response.model == "constant" and response.loss_tangent.value > 0.0
            )
            if lossy and len(axis.omega) > 1 and axis.omega.max() > DECADE * axis.omega.min():
                yield Caution(
                    "not-causal",
                    f"materials.{name}.{quantity}",
                    f"the same loss {_span(axis)} is not causal; the wide-band-debye model is",
                )


def _not_finite(axis: Axis, response: Response) -> Iterator[Caution]:
    """Frequencies at which a constituent without loss is at its resonance."""
    lost = ~np.isfinite(response.permittivity) | ~np.isfinite(response.permeability)
    if np.any(lost):
        places = lost.reshape(-1, lost.shape[-1]).any(axis=0)
        first = show(float(axis.omega[int(np.argmax(places))]), "spectral", axis.unit)
        yield Caution(
            "not-finite",
            "",
            f"no value at {int(places.sum())} of {places.size} frequencies, first at {first}: a band without "
            f"damping, or the resonance of an index formula, lies there",
        )


def _no_limit(mixture: Mixture, limits: Limits) -> Iterator[Caution]:
    x = mixture.defaults
    lacking: dict[str, list[str]] = {}
    for phase in mixture.phases:
        levels = {"static": phase.permittivity.low(x)[1], "high_frequency": phase.permittivity.high(x)}
        words = [word for word, level in levels.items() if np.isnan(level)]
        if words:
            lacking[phase.material] = words
    for name, words in lacking.items():
        yield Caution(
            "no-limit",
            f"materials.{name}",
            f"{name} is known over a band only, so the mixture has no {' and no '.join(words)} limit; "
            f"state {' and '.join(words)} of the material where known",
        )
    if np.any(limits.conductivity > 0.0):
        yield Caution(
            "no-limit",
            "",
            "the mixture conducts, so ε has no static limit: conductivity and level at dc stand instead",
        )


def _not_passive(
    recipe: Recipe, mixture: Mixture, axis: Axis, response: Response, constituents: Mapping[str, Response]
) -> Iterator[Caution]:
    """Gain in a constituent; or, where all are passive, in what the rule makes of them."""
    materials = {phase.name: phase.material for phase in mixture.phases}
    found = False
    for name, part in constituents.items():
        where = _gain(axis, part)
        if where:
            found = True
            table = recipe.tables.get(materials[name])
            sign = f"; its table states {table.convention}, does its sign of k agree?" if table else ""
            message = f"{where}, as no passive medium has{sign}"
            yield Caution("not-passive", f"materials.{materials[name]}", message)
    where = "" if found else _gain(axis, response)
    if where:
        message = f"{where}, as no passive medium has; several kinds of grain, not all spheres, can do that"
        yield Caution("not-passive", "mixing.rule", message)


def _gain(axis: Axis, part: Response) -> str:
    """Where ε″ or μ″ is negative beyond rounding, in words; empty where nowhere."""
    for symbol, value in (("ε″", part.permittivity), ("μ″", part.permeability)):
        gain = value.imag < -PASSIVE * np.abs(value)
        if np.any(gain):
            first = int(np.flatnonzero(gain.reshape(-1, gain.shape[-1]).any(axis=0))[0])
            where = show(float(axis.omega[first]), "spectral", axis.unit)
            return f"{symbol} is negative, first at {where}"
    return ""


def _rule_spread(recipe: Recipe, mixture: Mixture, axis: Axis, response: Response) -> Iterator[Caution]:
    """How far the other applicable rules lie, at the numbers of the recipe."""
    if not mixture.inclusions and mixture.voids is None:
        return
    if response.permittivity.ndim > 1 + mixture.aligned:
        return
    for name in applicable_rules(recipe, mixture):
        other = mixture.with_rule(name).response({}, axis.omega).permittivity
        share = np.nan_to_num(np.abs(other - response.permittivity) / np.abs(response.permittivity))
        worst = int(np.argmax(share.reshape(-1, share.shape[-1]).max(axis=0)))
        if (most := float(share.max())) > SPREAD:
            where = show(float(axis.omega[worst]), "spectral", axis.unit)
            yield Caution(
                "rule-spread",
                "mixing.rule",
                f"{name} differs from {mixture.rule.name} by up to {_share(most)} of |ε|, most at {where}",
            )


def _share(part: float) -> str:
    return f"{part:.0%}" if part < 10.0 else f"{part:.2g} times"
