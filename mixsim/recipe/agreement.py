"""What must hold between the numbers of a recipe: order of a band, room for every constituent, readings."""

from __future__ import annotations

import re
from collections.abc import Collection, Iterator, Mapping

from mixsim.composition import BASES, Basis, Loading, volume_fractions
from mixsim.dispersion.descriptions import width_from_wavelength
from mixsim.errors import Refusal, nearest
from mixsim.mixing import RULES
from mixsim.parameter import Choice
from mixsim.recipe.faults import Finding
from mixsim.recipe.layers import coating_of
from mixsim.recipe.leaves import Number, Span
from mixsim.recipe.schema import Inclusion, Measured, Schema
from mixsim.units import Leaf, kind_of_axis, read, written_unit

OF_MIXTURE = "name one that the mixture depends on, not one of the band, of a validity or of the readings"
_ROUNDING = 1e-12
_ASIDE = (
    "band.",
    "measured.",
    "samples.",
    "acceptance.",
    "batch.",
)  # tables that the mixture does not depend on


def disagreements(
    schema: Schema, leaves: Mapping[str, Leaf], ranges: Mapping[str, Number]
) -> Iterator[Finding]:
    """Every disagreement between numbers, with its path."""
    band = schema.band
    if band is not None and band.from_ is not None and band.to is not None:
        yield from _in_order(band.from_, band.to, "band")
    for name, material in schema.materials.items():
        if material.valid is not None:
            yield from _in_order(material.valid.from_, material.valid.to, f"materials.{name}.valid")
        if material.valid_temperature is not None:
            low, high = material.valid_temperature.from_, material.valid_temperature.to
            if low.value >= high.value:
                found = f"from {low.written!r} to {high.written!r}"
                yield f"materials.{name}.valid_temperature", Refusal(found, "from is the lower one")
        if material.static is not None and material.high_frequency is not None:
            yield from _levels(material.static, material.high_frequency, f"materials.{name}.static")
    yield from _flakes(schema)
    yield from _widths(leaves)
    yield from _doped(schema)
    yield from _room(schema)
    yield from _unknowns(schema, leaves, ranges)
    yield from _readings(schema)


def loading_of(inclusion: Inclusion) -> tuple[Basis, Leaf]:
    """Basis and amount of an inclusion's loading."""
    given: Iterator[tuple[Basis, Leaf | None]] = ((basis, getattr(inclusion, basis)) for basis in BASES)
    return next((basis, amount) for basis, amount in given if amount is not None)


def path_or_nearest(path: str, paths: Collection[str]) -> str | None:
    """Known path that a misspelt or shortened one most likely means."""
    ends = [known for known in paths if known.endswith("." + path)]
    return ends[0] if len(ends) == 1 else nearest(path, paths)


def of_mixture(path: str) -> bool:
    """Whether the mixture depends on the number at a path, so that it can be varied or found."""
    return not path.startswith(_ASIDE) and not re.match(
        r"materials\.[^.]+\.(valid\.|valid_temperature\.|saturation$)", path
    )


def _in_order(start: Leaf, end: Leaf, path: str) -> Iterator[Finding]:
    written = f"from {start.written!r} to {end.written!r}"
    if start.value == end.value:
        yield path, Refusal(f"{written} is a single point", "a band has a width; one point goes into values")
        return
    unit = written_unit(start)
    falls = (start.value > end.value) != (kind_of_axis(unit) == kind_of_axis("nm"))
    if unit == written_unit(end) and falls:
        yield path, Refusal(f"{written} runs backwards", "from is the smaller number")


def _room(schema: Schema) -> Iterator[Finding]:
    """The host must have room left, unless a measured density says what the volumes are."""
    weights = sum(i.weight_fraction.value for i in schema.inclusions.values() if i.weight_fraction)
    if weights > 1.0 + _ROUNDING:
        yield "inclusions", Refusal(f"weight fractions add up to {weights:.6g}", "the sum is at most 1")
        return
    host = schema.materials[schema.host.material].density
    loadings = []
    for inclusion in schema.inclusions.values():
        basis, amount = loading_of(inclusion)
        density = schema.materials[inclusion.material].density
        coat = coating_of(inclusion, schema.materials)
        loadings.append(Loading(basis, amount.value, density.value if density else None, *coat))
    voids = schema.voids.volume_fraction.value if schema.voids else 0.0
    measured = schema.mixing.density
    fractions = volume_fractions(
        loadings,
        host_density=host.value if host else None,
        voids=voids,
        mixture_density=measured.value if measured else None,
    )
    if measured is not None:
        if fractions[0] < -_ROUNDING:
            found = f"the inclusions alone weigh more than {measured.written!r}"
            yield "mixing.density", Refusal(found, "the density of the whole mixture, the host included")
        return
    filled = 1.0 - float(fractions[0])
    if filled > 1.0 + _ROUNDING:
        what = "inclusions and voids" if schema.voids else "inclusions"
        if any(inclusion.coating for inclusion in schema.inclusions.values()):
            what = what.replace("inclusions", "coated inclusions")
        yield (
            "inclusions",
            Refusal(f"volume fractions of {what} add up to {filled:.6g}", "the sum is at most 1"),
        )
        return
    rule = RULES[schema.mixing.rule]
    if rule.densest is not None:
        words = {
            n: p.meant(getattr(schema.mixing, n)) for n, p in rule.parameters.items() if isinstance(p, Choice)
        }
        densest = rule.densest(**words)
        if filled > densest:
            found = f"a loading of {filled:.6g} with the rule {rule.name}"
            yield (
                "inclusions",
                Refusal(found, f"its structure has room for {densest:.4f}, where grains touch"),
            )


def _unknowns(schema: Schema, leaves: Mapping[str, Leaf], ranges: Mapping[str, Number]) -> Iterator[Finding]:
    """Ranges of unknowns, those of single samples among them, and what is known beforehand."""
    spans = [(f"unknowns.{path}", path, span) for path, span in schema.unknowns.items()]
    for place, sample in enumerate(schema.samples):
        where = f"samples.{place}.unknowns"
        spans += [(f"{where}.{path}", path, span) for path, span in sample.unknowns.items()]
        for path in set(sample.unknowns) & set(schema.unknowns):
            found = f"{path} is an unknown of all samples and of {sample.name}"
            yield f"{where}.{path}", Refusal(found, "one of the two")
    for where, path, span in spans:
        if not of_mixture(path):
            yield where, Refusal(f"{path} is no number of the mixture", OF_MIXTURE)
            continue
        if path not in leaves:
            suggestion = path_or_nearest(path, [known for known in leaves if of_mixture(known)])
            yield where, Refusal(f"unknown path {path!r}", "a path of a number in the recipe", suggestion)
            continue
        yield from _span(where, span, leaves[path].dimension, ranges[path].to_find())


def _span(where: str, span: Span, dimension: str, allowed: Number) -> Iterator[Finding]:
    try:
        low, high = (read(end, dimension) for end in (span.low, span.high))
        prior = None if span.prior is None else read(span.prior, dimension)
    except Refusal as refusal:
        yield where, refusal
        return
    for end in (low, high):
        if not allowed.holds(end.value):
            yield where, Refusal(f"{end.written!r} is out of range", f"must be {allowed.said()}")
    if low.value == high.value:
        yield where, Refusal(f"range {low.written!r} to {high.written!r} is empty", "the two ends differ")
    if prior is not None and not prior.std:
        found = f"{prior.written!r} as what is known beforehand"
        yield where, Refusal(found, "it needs a ± above zero")


def _readings(schema: Schema) -> Iterator[Finding]:
    given: list[tuple[str, Measured]] = [("measured", schema.measured)] if schema.measured is not None else []
    given += [(f"samples.{place}", sample) for place, sample in enumerate(schema.samples)]
    for path, measured in given:
        if measured.static is not None and measured.high_frequency is not None:
            yield from _levels(measured.static, measured.high_frequency, f"{path}.static")
        for place, reading in enumerate(measured.readings):
            if len(reading.model_fields_set) < 2:
                allowed = "name what was read there, such as permittivity"
                yield f"{path}.readings.{place}", Refusal("a reading of nothing", allowed)
    names = [sample.name for sample in schema.samples]
    for place, name in enumerate(names):
        if name in names[:place]:
            yield f"samples.{place}.name", Refusal(f"{name!r} stands twice", "each sample has its own name")


def _levels(static: Leaf, high_frequency: Leaf, path: str) -> Iterator[Finding]:
    if static.value < high_frequency.value:
        found = f"static {static.written!r} is below high_frequency {high_frequency.written!r}"
        yield path, Refusal(found, "a passive medium has its static level at or above the other")


def _widths(leaves: Mapping[str, Leaf]) -> Iterator[Finding]:
    """A width in wavelength must leave a band about its resonance."""
    for path, leaf in leaves.items():
        resonance = leaves.get(f"{path.rpartition('.')[0]}.resonance")
        if leaf.dimension == "wavelength width" and resonance is not None:
            try:
                width_from_wavelength(leaf.value, resonance=resonance.value)
            except Refusal as refusal:
                yield path, refusal


def _flakes(schema: Schema) -> Iterator[Finding]:
    """Flakes whose symmetry axes lie in a plane stand on edge, which is hardly what is meant."""
    for name, inclusion in schema.inclusions.items():
        ratio = inclusion.shape.aspect_ratio
        if inclusion.orientation == "in-plane" and ratio is not None and ratio.value < 1.0:
            found = f"flakes of aspect ratio {ratio.written} with their axes in a plane"
            allowed = "flakes that lie flat are 'aligned'; for flakes on edge give an ellipsoid's axes"
            yield f"inclusions.{name}.orientation", Refusal(found, allowed, "aligned")


def _doped(schema: Schema) -> Iterator[Finding]:
    """Dopants said by weight or by mole must leave some of the host."""
    for key in ("weight_fraction", "mole_fraction"):
        given = (getattr(dopant, key) for dopant in schema.dopants.values())
        total = sum(leaf.value for leaf in given if leaf is not None)
        if total > 1.0 + _ROUNDING:
            what = f"{key.replace('_', ' ')}s of dopants"
            yield "dopants", Refusal(f"{what} add up to {total:.6g}", "the sum is at most 1")
