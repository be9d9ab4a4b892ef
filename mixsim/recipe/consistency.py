"""What must hold between the keys of a recipe: one description of a thing, and all that it needs.

Works on the recipe as parsed, before any number is read, so that its findings stand beside those of
the schema in one pass.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator, Mapping
from typing import Any

from mixsim.composition import BASES
from mixsim.dispersion import INDEX_MODELS, TERMS
from mixsim.errors import Refusal, nearest
from mixsim.mixing import RULES
from mixsim.recipe import library
from mixsim.recipe.faults import Finding
from mixsim.recipe.leaves import join
from mixsim.recipe.schema import NAME_PATTERN
from mixsim.units import read

_PAIR = ("loss_tangent", "at", "model", "low", "high")
CONCENTRATIONS = ("number_density", "weight_fraction", "mole_fraction")


def contradictions(raw: Mapping[str, Any]) -> Iterator[Finding]:
    """Every contradiction and gap, with its path."""
    if isinstance(raw.get("band"), Mapping):
        yield from _band(raw["band"])
    for name, material in _tables(raw, "materials"):
        yield from _material(name, material)
    for name, inclusion in _tables(raw, "inclusions"):
        yield from _inclusion(f"inclusions.{name}", inclusion)
    for name, dopant in _tables(raw, "dopants"):
        yield from _dopant(f"dopants.{name}", dopant, raw)
    yield from _names(raw)
    yield from _rule(raw)
    yield from _densities(raw)


def _table(raw: Mapping[str, Any], key: str) -> Mapping[str, Any]:
    value = raw.get(key)
    return value if isinstance(value, Mapping) else {}


def _tables(raw: Mapping[str, Any], key: str) -> Iterator[tuple[str, Mapping[str, Any]]]:
    for name, value in _table(raw, key).items():
        if isinstance(value, Mapping):
            yield name, value


def _one_of(path: str, node: Mapping[str, Any], keys: tuple[str, ...], what: str) -> Iterator[Finding]:
    present = [key for key in keys if key in node]
    if len(present) > 1:
        times = "twice" if len(present) == 2 else f"{len(present)} times"
        yield (
            join(path, present[1]),
            Refusal(f"{what} is given {times}, by {' and '.join(present)}", "give one of them"),
        )
    elif not present:
        yield path, Refusal(f"{what} is not given", f"give one of {', '.join(keys)}")


def _band(band: Mapping[str, Any]) -> Iterator[Finding]:
    if "values" in band:
        beside = [key for key in ("from", "to", "points", "spacing") if key in band]
        if beside:
            found = f"{' and '.join(beside)} beside values"
            yield f"band.{beside[0]}", Refusal(found, "a band gives values, or from and to")
    else:
        for key in ("from", "to"):
            if key not in band:
                yield "band", Refusal(f"{key} is missing", "a band gives from and to, or values")


def _pair(path: str, response: Mapping[str, Any]) -> Iterator[Finding]:
    """A data sheet's permittivity and loss tangent at one frequency, complete and alone."""
    for key in ("infinity", "susceptibility", "plasma", "terms"):
        if key in response:
            yield f"{path}.{key}", Refusal(f"{key} beside value", "a data sheet's pair stands alone")
    causal = response.get("model") == "wide-band-debye"
    for key in ("loss_tangent", "model", *(("at",) if causal else ())):
        if key not in response:
            allowed = (
                'such as loss_tangent = 0.0025, at = "10 GHz", model = "wide-band-debye" (or "constant")'
            )
            yield path, Refusal(f"value without {key}", allowed)
    for key in ("low", "high"):
        if key in response and not causal:
            yield f"{path}.{key}", Refusal(f"{key} without the wide-band-debye model", "leave it out")


def _terms(path: str, quantity: str, response: Mapping[str, Any]) -> Iterator[Finding]:
    """Terms of one response, with the plasma frequency that some of them may share."""
    sharing = False
    for name, content in _tables(response, "terms"):
        where = f"{path}.terms.{name}"
        term = TERMS.get(str(content.get("model")))
        if term is not None and quantity not in term.of:
            kept = ", ".join(known for known, entry in TERMS.items() if quantity in entry.of)
            yield f"{where}.model", Refusal(f"a {term.name} term in the {quantity}", f"it takes {kept}")
            continue
        shares = term is not None and "plasma" in response and term.leaves_open("plasma", content)
        sharing = sharing or shares
        yield from _term(where, content, ("plasma",) if shares else ())
    if "plasma" in response and not sharing:
        allowed = "it is for terms that give only their strength; leave it out"
        yield f"{path}.plasma", Refusal("a plasma frequency that no term shares", allowed)


def _material(name: str, material: Mapping[str, Any]) -> Iterator[Finding]:
    path = f"materials.{name}"
    if "based_on" not in material:
        yield from _one_of(path, material, ("permittivity", "index", "table"), f"the permittivity of {name}")
    for quantity in ("permittivity", "permeability"):
        response = material.get(quantity)
        if isinstance(response, Mapping):
            if "value" in response:
                yield from _pair(f"{path}.{quantity}", response)
                continue
            yield from _one_of(
                f"{path}.{quantity}",
                response,
                ("infinity", "susceptibility"),
                "the level above all resonances",
            )
            for key in _PAIR:
                if key in response:
                    found = f"{key} without value"
                    yield (
                        f"{path}.{quantity}.{key}",
                        Refusal(found, "a data sheet's pair has value, loss_tangent, at"),
                    )
            yield from _terms(f"{path}.{quantity}", quantity, response)
    if "permittivity" in material:
        for key in ("static", "high_frequency"):
            if key in material:
                allowed = "it is for index models and tables; terms have exact limits of their own"
                yield f"{path}.{key}", Refusal(f"{key} beside permittivity", allowed)
    index = material.get("index")
    model = INDEX_MODELS.get(str(index.get("model"))) if isinstance(index, Mapping) else None
    if isinstance(index, Mapping) and model is not None:
        for key in model.required:
            if key not in index:
                yield f"{path}.index", Refusal(f"{key} is missing", f"a {model.name} index needs {key}")
        given = index.get("coefficients")
        if model.count and isinstance(given, list) and len(given) != model.count:
            found = f"{len(given)} coefficients"
            yield f"{path}.index.coefficients", Refusal(found, f"a {model.name} index takes {model.count}")
        if model.name == "sellmeier":
            both = ("resonance_wavelengths", "resonance_wavelengths_squared")
            yield from _one_of(f"{path}.index", index, both, "the list of resonances")
            for key in both:
                strengths, values = index.get("strengths"), index.get(key)
                if not (isinstance(strengths, list) and isinstance(values, list) and strengths and values):
                    continue
                if len(strengths) != len(values):
                    found = f"{len(values)} resonances for {len(strengths)} strengths"
                    yield f"{path}.index.{key}", Refusal(found, "they pair one to one")


def _term(path: str, content: Mapping[str, Any], implied: tuple[str, ...]) -> Iterator[Finding]:
    term = TERMS.get(str(content.get("model")))
    if term is None:
        return
    given = {key for key in content if key in term.parameters}
    try:
        term.resolve({*given, *(name for name in implied if not given & {"plasma", "step"})})
    except Refusal as refusal:
        yield path, refusal
    if "resonance" not in given:
        for key in given:
            if term.parameters[key].dimension == "rate" and _in_wavelength(content[key]):
                allowed = "give a frequency, energy or wavenumber; a wavelength needs a resonance"
                found = f"width {content[key]!r} in wavelength without a resonance"
                yield f"{path}.{key}", Refusal(found, allowed)


def _in_wavelength(written: Any) -> bool:
    try:
        return isinstance(written, str) and read(written, "rate").dimension == "wavelength width"
    except Refusal:  # the schema says so itself
        return False


def _inclusion(path: str, inclusion: Mapping[str, Any]) -> Iterator[Finding]:
    name = path.split(".")[-1]
    if name in ("host", "voids"):
        yield path, Refusal(f"an inclusion called {name!r}", "answers call a phase so; choose another name")
    yield from _one_of(path, inclusion, tuple(BASES), "the loading")
    shape = inclusion.get("shape")
    if isinstance(shape, Mapping):
        if shape.get("kind") == "spheroid" and "aspect_ratio" not in shape:
            yield (
                f"{path}.shape",
                Refusal("aspect_ratio is missing", "a spheroid needs symmetry axis over cross axis"),
            )
        if shape.get("kind") == "sphere" and "aspect_ratio" in shape:
            yield (
                f"{path}.shape.aspect_ratio",
                Refusal("a sphere with an aspect_ratio", "say kind = 'spheroid'"),
            )
    round_grain = not isinstance(shape, Mapping) or shape.get("kind") == "sphere"
    if inclusion.get("orientation") == "aligned" and round_grain:
        yield f"{path}.orientation", Refusal("aligned spheres", "only spheroids have an orientation")


def _dopant(path: str, dopant: Mapping[str, Any], raw: Mapping[str, Any]) -> Iterator[Finding]:
    present = [key for key in CONCENTRATIONS if key in dopant]
    if len(present) > 1:
        found = f"the concentration is given twice, by {' and '.join(present)}"
        yield join(path, present[1]), Refusal(found, "give one of them")
        return
    weighed = [key for key in present if key != "number_density"]
    if weighed and "molar_mass" not in dopant:
        yield path, Refusal(f"{weighed[0]} without molar_mass", "give molar_mass of the compound weighed in")
    for key in ("molar_mass", "ions_per_formula"):
        if key in dopant and not weighed:
            yield f"{path}.{key}", Refusal(f"{key} without weight_fraction or mole_fraction", "leave it out")
    host = _host(raw)
    where = f"materials.{_host_name(raw)}"
    if weighed and host is not None and "density" not in host:
        yield where, Refusal("density is missing", f"{path}.{present[0]} needs the density of the host")
    if "mole_fraction" in present and host is not None and "molar_mass" not in host:
        yield (
            where,
            Refusal("molar_mass is missing", f"{path}.mole_fraction needs the molar mass of the host"),
        )
    # a term that is not understood may well use the concentration
    terms = _table(dopant, "terms")
    used = not terms or any(
        not isinstance(term, Mapping) or str(term.get("model")) not in TERMS for term in terms.values()
    )
    for name, content in _tables(dopant, "terms"):
        if content.get("model") == "lorentz" and not {"plasma", "step", "number_density"} & set(content):
            if not present:
                allowed = f"give {', '.join(CONCENTRATIONS)} of the dopant, or plasma or step of the term"
                yield f"{path}.terms.{name}", Refusal("neither concentration nor plasma frequency", allowed)
            used = True
        yield from _term(f"{path}.terms.{name}", content, ("number_density",))
    if present and not used:
        found = f"{present[0]} is used by none of the terms"
        yield (
            join(path, present[0]),
            Refusal(found, "leave it out, or give a lorentz term its oscillator strength"),
        )
    if not used and dopant.get("local_field") == "virtual-cavity":
        allowed = "it acts on strengths that come from the concentration; plasma and step are felt already"
        yield f"{path}.local_field", Refusal("virtual-cavity has nothing to act on", allowed)


def _names(raw: Mapping[str, Any]) -> Iterator[Finding]:
    known = (*_table(raw, "materials"), *library.names())
    uses = [("host.material", _table(raw, "host").get("material"))]
    uses += [
        (f"inclusions.{name}.material", node.get("material")) for name, node in _tables(raw, "inclusions")
    ]
    uses += [(f"materials.{name}.based_on", node.get("based_on")) for name, node in _tables(raw, "materials")]
    for path, name in uses:
        if not isinstance(name, str) or not re.match(NAME_PATTERN, name):
            continue  # the schema says so itself
        if path == f"materials.{name}.based_on" and name not in library.names():
            found = f"{name} is based on itself, and no built-in material is called so"
            yield path, Refusal(found, "name another material")
        elif name not in known:
            yield path, unknown_material(name, known)


def unknown_material(name: str, known: Iterable[str]) -> Refusal:
    """The refusal of a material that nobody defines."""
    allowed = f"define [materials.{name}] or name a built-in one, see mixsim list materials"
    return Refusal(f"unknown material {name!r}", allowed, nearest(name, known))


def _rule(raw: Mapping[str, Any]) -> Iterator[Finding]:
    mixing = _table(raw, "mixing")
    name = mixing.get("rule", "maxwell-garnett")
    if not isinstance(name, str):
        return
    rule = RULES.get(name)
    if rule is None:
        yield (
            "mixing.rule",
            Refusal(f"unknown rule {name!r}", f"known are {', '.join(RULES)}", nearest(name, RULES)),
        )
        return
    if "density" in mixing and rule.additive_only:
        free = ", ".join(n for n, r in RULES.items() if not r.additive_only)
        yield (
            "mixing.density",
            Refusal(
                f"a measured density with the rule {name}",
                f"only {free} takes partial volumes that do not add up to one",
            ),
        )
    if "density" in mixing and "voids" in raw and not rule.additive_only:
        allowed = "the density of the mixture says how much is missing already"
        yield "voids", Refusal("voids beside a measured density", allowed)
    for inclusion, node in _tables(raw, "inclusions"):
        shape = node.get("shape")
        if isinstance(shape, Mapping) and shape.get("kind") == "spheroid" and not rule.takes_shapes:
            able = ", ".join(n for n, r in RULES.items() if r.takes_shapes)
            yield (
                f"inclusions.{inclusion}.shape",
                Refusal(f"spheroids with the rule {name}", f"{able} takes them"),
            )


def _densities(raw: Mapping[str, Any]) -> Iterator[Finding]:
    by_weight = [
        f"inclusions.{name}.{key}"
        for name, node in _tables(raw, "inclusions")
        for key in ("weight_fraction", "phr")
        if key in node
    ]
    reason = by_weight[0] if by_weight else "mixing.density" if "density" in _table(raw, "mixing") else ""
    if not reason:
        return
    used = [_host_name(raw), *(node.get("material") for _, node in _tables(raw, "inclusions"))]
    for name in dict.fromkeys(name for name in used if isinstance(name, str)):
        material = _table(_table(raw, "materials"), name) or library.definition(name)
        if material and "density" not in material:
            yield f"materials.{name}", Refusal("density is missing", f"{reason} needs it")


def _host_name(raw: Mapping[str, Any]) -> str:
    return str(_table(raw, "host").get("material", ""))


def _host(raw: Mapping[str, Any]) -> Mapping[str, Any] | None:
    name = _host_name(raw)
    return _table(_table(raw, "materials"), name) or library.definition(name)
