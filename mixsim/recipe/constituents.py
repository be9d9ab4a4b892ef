"""What must hold between the keys of a material and of its terms: one description of each, and its needs."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

from mixsim.dispersion import INDEX_MODELS, TERMS
from mixsim.errors import Refusal
from mixsim.recipe.faults import Finding
from mixsim.recipe.raw import one_of, table, tables
from mixsim.units import read

_DESCRIPTIONS = ("permittivity", "index", "table", "recipe")
_PAIR = ("loss_tangent", "at", "model", "low", "high")


def of_material(name: str, material: Mapping[str, Any]) -> Iterator[Finding]:
    """Contradictions and gaps of one material."""
    path = f"materials.{name}"
    if "based_on" not in material:
        yield from one_of(path, material, _DESCRIPTIONS, f"the permittivity of {name}")
    for quantity in ("permittivity", "permeability"):
        if isinstance(material.get(quantity), Mapping):
            yield from _response(f"{path}.{quantity}", quantity, material[quantity])
    if "recipe" in material and "permeability" in material:
        found = "permeability beside recipe, which has its own"
        yield f"{path}.permeability", Refusal(found, "leave it out")
    if "permittivity" in material or "recipe" in material:
        for key in ("static", "high_frequency"):
            if key in material:
                allowed = "it is for index models and tables; terms have exact limits of their own"
                beside = "permittivity" if "permittivity" in material else "recipe"
                yield f"{path}.{key}", Refusal(f"{key} beside {beside}", allowed)
    unknown_base = "based_on" in material and not material.keys() & set(_DESCRIPTIONS)
    if "extension" in material and "table" not in material and not unknown_base:
        yield f"{path}.extension", Refusal("extension without table", "it continues a measured table")
    yield from _warming(path, material)
    response = table(material, "permittivity")
    if "law" in response and "temperature" not in material and "based_on" not in material:
        found, allowed = "law without temperature", "say at which temperature the substance usually is"
        yield f"{path}.permittivity", Refusal(found, allowed)
    yield from _index(f"{path}.index", table(material, "index"))


def _warming(path: str, material: Mapping[str, Any]) -> Iterator[Finding]:
    """One temperature coefficient, and the temperature that it counts from."""
    index = table(material, "index")
    given = [("temperature_coefficient", "temperature_coefficient" in material)]
    given += [(f"index.{key}", key in index) for key in ("dn_dt", "thermo_optic")]
    present = [key for key, there in given if there]
    if len(present) > 1:
        found = f"the change with temperature is given {len(present)} times, by {' and '.join(present)}"
        yield f"{path}.{present[1]}", Refusal(found, "give one of them")
    if present and "temperature" not in material and "based_on" not in material:
        found = f"{present[0]} without temperature"
        yield f"{path}.{present[0]}", Refusal(found, "say at which temperature the description holds")


def _response(path: str, quantity: str, response: Mapping[str, Any]) -> Iterator[Finding]:
    """ε or μ: a data sheet's pair, or a level and terms."""
    if "law" in response:
        yield from _law(path, quantity, response)
        return
    if "value" in response:
        yield from _pair(path, response)
        return
    yield from one_of(path, response, ("infinity", "susceptibility"), "the level above all resonances")
    for key in _PAIR:
        if key in response:
            allowed = "a data sheet's pair has value, loss_tangent, at"
            yield f"{path}.{key}", Refusal(f"{key} without value", allowed)
    yield from _terms(path, quantity, response)


def _law(path: str, quantity: str, response: Mapping[str, Any]) -> Iterator[Finding]:
    """A substance by its law, alone."""
    if quantity != "permittivity":
        yield f"{path}.law", Refusal("a law of the permeability", "laws are for permittivities")
    for key in response:
        if key != "law":
            yield f"{path}.{key}", Refusal(f"{key} beside law", "a law stands alone")


def _index(path: str, index: Mapping[str, Any]) -> Iterator[Finding]:
    """An index model with all that it needs, its lists of the right length."""
    model = INDEX_MODELS.get(str(index.get("model")))
    if model is None:
        return
    for key in model.required:
        if key not in index:
            yield path, Refusal(f"{key} is missing", f"a {model.name} index needs {key}")
    given = index.get("coefficients")
    if model.count and isinstance(given, list) and len(given) != model.count:
        found = f"{len(given)} coefficients"
        yield f"{path}.coefficients", Refusal(found, f"a {model.name} index takes {model.count}")
    if len(model.one_of) < 2:
        return
    yield from one_of(path, index, model.one_of, "the list of resonances")
    for key in model.one_of:
        strengths, values = index.get("strengths"), index.get(key)
        if not (isinstance(strengths, list) and isinstance(values, list) and strengths and values):
            continue
        if len(strengths) != len(values):
            found = f"{len(values)} resonances for {len(strengths)} strengths"
            yield f"{path}.{key}", Refusal(found, "they pair one to one")


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
    for name, content in tables(response, "terms"):
        where = f"{path}.terms.{name}"
        term = TERMS.get(str(content.get("model")))
        if term is not None and quantity not in term.of:
            kept = ", ".join(known for known, entry in TERMS.items() if quantity in entry.of)
            yield f"{where}.model", Refusal(f"a {term.name} term in the {quantity}", f"it takes {kept}")
            continue
        shares = term is not None and "plasma" in response and term.leaves_open("plasma", content)
        sharing = sharing or shares
        yield from of_term(where, content, ("plasma",) if shares else ())
    if "plasma" in response and not sharing:
        allowed = "it is for terms that give only their strength; leave it out"
        yield f"{path}.plasma", Refusal("a plasma frequency that no term shares", allowed)


def _felt(implied: tuple[str, ...], given: set[str]) -> set[str]:
    """Of what stands elsewhere, that which a term of these parameters needs."""
    if "absorption_peak" in given:
        return {"background_index"} & set(implied) - given
    return set() if given & {"plasma", "step"} else set(implied) - {"background_index"}


def of_term(path: str, content: Mapping[str, Any], implied: tuple[str, ...]) -> Iterator[Finding]:
    """Contradictions and gaps of one term; `implied` are parameters that stand elsewhere than in it."""
    term = TERMS.get(str(content.get("model")))
    if term is None:
        return
    given = {key for key in content if key in term.parameters}
    try:
        term.resolve({*given, *_felt(implied, given)})
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
