"""What must hold of a material with a model: electrons counted, Snoek's product, levels, range."""

from __future__ import annotations

from collections.abc import Iterator
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.checks import CLEAR, Finding, Subject, Verdict, span
from mixsim.mixture import Constituent
from mixsim.mixture.spectra import VACUUM, BoundTerm, Doped, TermSum
from mixsim.recipe import Recipe
from mixsim.units import show
from mixsim.units.constants import AVOGADRO, ELECTRON_MASS, ELEMENTARY_CHARGE, VACUUM_PERMITTIVITY

if TYPE_CHECKING:
    from mixsim.recipe.schema import Valid

FINITE_SUM = ("lorentz", "drude", "brendel-bormann")  # terms whose f-sum is π/2 of their plasma²
SUM_TOLERANCE = 0.02
SNOEK_TOLERANCE = 0.05
LIGHTEST = 1.008e-3  # kg/mol: hydrogen has the most electrons for its mass, one for each; no matter has more
_RANGE = "range"


def electrons(loss_omega: NDArray[np.float64], loss: NDArray[np.float64]) -> float:
    """Effective number of electrons that a band of loss takes up [1/m^3].

    Notes
    -----
    N_eff = 2ε₀mₑ/(πe²) ∫ ω ε″ dω, by trapezes.
    """
    moment = float(np.trapezoid(loss_omega * loss, loss_omega))
    return 2.0 / np.pi * moment * VACUUM_PERMITTIVITY * ELECTRON_MASS / ELEMENTARY_CHARGE**2


def f_sum(phase: Constituent, subject: Subject, recipe: Recipe) -> Finding:
    """Electrons that the loss of the band takes up, and whether those of all terms are there and can be."""
    name, of, x = "f-sum", subject.of, {path: leaf.value for path, leaf in recipe.leaves.items()}
    if not np.any(subject.values.imag > CLEAR * np.abs(subject.values)):
        return Finding(name, of, "not applicable", {}, "nothing is lost in the band")
    count = electrons(subject.omega, subject.values.imag)
    numbers = {"electrons_per_m3": count}
    material = recipe.schema.materials[phase.material]
    density = None if material.density is None else material.density.value
    said = f"the loss, {subject.span}, takes {count:.3g} electrons per m³"
    if density is not None and material.molar_mass is not None:
        numbers["electrons_per_formula"] = count * material.molar_mass.value / (density * AVOGADRO)
        said += f", {numbers['electrons_per_formula']:.3g} per formula unit"
    total = _total(phase, x)
    if total is not None:
        weight = VACUUM_PERMITTIVITY * ELECTRON_MASS / ELEMENTARY_CHARGE**2
        numbers["terms_electrons_per_m3"] = total * weight
        numbers["terms_integral_per_m3"] = _whole(phase, x)
        said += f"; all terms together {numbers['terms_electrons_per_m3']:.3g}"
        off = (
            abs(numbers["terms_integral_per_m3"] / numbers["terms_electrons_per_m3"] - 1.0) if total else 0.0
        )
        if off > SUM_TOLERANCE:
            why = (
                f"{said}, but the integral over their loss differs from their plasma frequencies by {off:.1%}"
            )
            return Finding(name, of, "failed", numbers, why)
    if density is None:
        return Finding(name, of, "could not tell", numbers, f"{said}; without a density nothing limits that")
    numbers["most_electrons_per_m3"] = density * AVOGADRO / LIGHTEST
    if max(count, numbers.get("terms_electrons_per_m3", 0.0)) > numbers["most_electrons_per_m3"]:
        why = f"{said}: more than any matter of {show(density, 'density', 'g/cm^3')} has"
        return Finding(name, of, "failed", numbers, why)
    return Finding(name, of, "passed", numbers, f"{said}; its density allows that")


def snoek(phase: Constituent, recipe: Recipe, subject: Subject) -> Finding:
    """Static permeability and resonance, against the saturation magnetisation where a term tells it."""
    name, x = "Snoek product", {path: leaf.value for path, leaf in recipe.leaves.items()}
    table = recipe.tables.get(phase.material)
    if table is not None and table.permeability is not None:
        why = "a table holds no static permeability"
        return Finding(name, subject.of, "could not tell", {}, why)
    _, plateau = phase.permeability.low(x)
    step = float(np.real(plateau)) - 1.0
    wide = np.geomspace(subject.omega[0] * 1e-2, subject.omega[-1] * 1e2, 20_001)
    loss = np.imag(phase.permeability.at(x, wide))
    if not (step > 0.0 and np.any(loss > 0.0)):
        return Finding(name, subject.of, "not applicable", {}, "no magnetic loss peak")
    peak = float(wide[int(np.argmax(loss))])
    product = step * peak / (2.0 * np.pi)
    numbers = {"product_hz": product, "static_permeability": step + 1.0, "resonance_hz": peak / (2.0 * np.pi)}
    said = f"(μ_s − 1)·f_r = {step:.4g} × {show(peak, 'spectral', 'GHz')} = {product / 1e9:.3g} GHz"
    saturations = [float(term.inputs["saturation"](x)) for term in _terms(phase.permeability) if _spins(term)]
    if (stated := recipe.schema.materials[phase.material].saturation) is not None:
        saturations = [stated.value]
    if not saturations:
        why = f"{said}; without its saturation nothing limits that"
        return Finding(name, subject.of, "could not tell", numbers, why)
    limit = sum(saturations) / (2.0 * np.pi)
    numbers["limit_hz"] = 2.0 / 3.0 * limit
    held = f"(2/3) γ′M_s is {numbers['limit_hz'] / 1e9:.3g} GHz"
    if product <= (1.0 + SNOEK_TOLERANCE) * numbers["limit_hz"]:
        return Finding(name, subject.of, "passed", numbers, f"{said}; {held}")
    if product <= (1.0 + SNOEK_TOLERANCE) * limit:
        why = f"{said}; {held}, and γ′M_s is that of grains aligned across the field"
        return Finding(name, subject.of, "passed", numbers, why)
    why = f"{said}; {held}: more than Snoek's law lets bulk grains have"
    return Finding(name, subject.of, "failed", numbers, why)


def levels(phase: Constituent, recipe: Recipe, of: str) -> Finding:
    """Static level against the high-frequency one: loss between them can only raise the static one."""
    x = {path: leaf.value for path, leaf in recipe.leaves.items()}
    with np.errstate(all="ignore"):
        rate, plateau = (float(np.real(part)) for part in phase.permittivity.low(x))
        high = float(np.real(phase.permittivity.high(x)))
    if rate > 0.0 or np.isinf(rate):
        conductivity = rate * VACUUM_PERMITTIVITY
        numbers = {"conductivity_s_per_m": conductivity, "high_frequency": high}
        why = f"it conducts at dc, {conductivity:.3g} S/m; high-frequency level {high:.5g}"
        return Finding("levels", of, "not applicable", numbers, why)
    numbers = {"static": plateau, "high_frequency": high}
    if not np.isfinite([plateau, high]).all():
        known = [f"{name} {value:.5g}" for name, value in (("static", plateau), ("high-frequency", high))]
        there = [text for text in known if "nan" not in text] or ["neither level"]
        why = f"{' and '.join(there)} is known; its description says no more"
        return Finding("levels", of, "could not tell", numbers, why)
    said = f"static {plateau:.5g}, high-frequency {high:.5g}"
    if plateau < high * (1.0 - 1e-9):
        return Finding("levels", of, "failed", numbers, f"{said}: loss can only raise the static one")
    if high < 1.0:
        return Finding("levels", of, "failed", numbers, f"{said}: above all resonances nothing is below one")
    return Finding("levels", of, "passed", numbers, said)


def covered(recipe: Recipe, name: str, asked: tuple[float, float] | None, unit: str) -> Finding:
    """Whether the range in which a material is described covers the band asked for, if there is one.

    A table of a material that says where it holds covers that.
    """
    valid: Valid | None = recipe.schema.materials[name].valid
    table = recipe.tables.get(name)
    ends = None if valid is None else sorted((valid.from_.value, valid.to.value))
    holds = "nobody says where its description holds"
    if valid is not None:
        holds = f"it is described from {valid.from_.written} to {valid.to.written}"
    low, high = asked or (ends or (0.0, 0.0))
    wanted = f"; the band is {span(low, high, unit)}" if asked else ""
    if table is not None:
        numbers = {"low_rad_s": float(table.omega[0]), "high_rad_s": float(table.omega[-1])}
        reaches = not (asked or ends) or _within(low, high, *numbers.values())
        verdict: Verdict = "passed" if reaches else "failed"
        said = wanted or (f"; {holds}" if valid is not None else "")
        if not reaches and recipe.schema.materials[name].extension is not None:
            verdict = "could not tell"
            said += "; beyond, a causal continuation stands in its place, which nobody has measured"
        return Finding(_RANGE, name, verdict, numbers, f"the table covers {table.range_written}{said}")
    if ends is None:
        return Finding(_RANGE, name, "could not tell", {}, holds + wanted)
    numbers = {"low_rad_s": ends[0], "high_rad_s": ends[1]}
    if _within(low, high, *ends):
        return Finding(_RANGE, name, "passed", numbers, holds + wanted)
    return Finding(_RANGE, name, "could not tell", numbers, f"{holds}{wanted}, which leaves that")


def _within(low: float, high: float, least: float, most: float) -> bool:
    """Whether a band lies in a range, whose ends came through two units."""
    return least <= low * (1.0 + 1e-9) and high * (1.0 - 1e-9) <= most


def _terms(spectrum: Any) -> Iterator[BoundTerm]:
    if isinstance(spectrum, Doped):
        yield from _terms(spectrum.host)
    if isinstance(spectrum, TermSum | Doped):
        yield from spectrum.terms


def _spins(term: BoundTerm) -> bool:
    return "saturation" in term.inputs


def _total(phase: Constituent, x: Any) -> float | None:
    """Sum of plasma², where every term has one and its f-sum is finite; or None."""
    terms = list(_terms(phase.permittivity))
    if not terms or any(term.term.name not in FINITE_SUM for term in terms):
        return None
    return float(sum(float(np.real(term.inputs["plasma"](x))) ** 2 for term in terms))


def _whole(phase: Constituent, x: Any) -> float:
    """Electrons in the loss of all terms, over all frequencies [1/m^3]."""
    places, widths = [], []
    for term in _terms(phase.permittivity):
        numbers = {
            key: float(term.inputs[key](x)) for key in ("resonance", "damping", "width") if key in term.inputs
        }
        place, width = numbers.get("resonance", 0.0), max(numbers["damping"], numbers.get("width", 0.0))
        places.append(max(place, width))
        widths.append((place, width))
    grid = [np.geomspace(1e-5 * min(min(w for _, w in widths), *places), 1e4 * max(places), 8000)]
    grid += [place + width * np.sinh(np.linspace(-6.0, 6.0, 1201)) / 4.0 for place, width in widths]
    omega = np.unique(np.concatenate(grid))
    omega = omega[omega > 0.0]
    loss = np.imag(phase.permittivity.at(x, omega))
    tail = omega[-1] ** 2 * loss[-1]  # ωε″ falls as 1/ω² out there: what is left is its value times ω
    weight = 2.0 / np.pi * VACUUM_PERMITTIVITY * ELECTRON_MASS / ELEMENTARY_CHARGE**2
    return electrons(omega, loss) + weight * float(tail)


def is_magnetic(phase: Constituent) -> bool:
    """Whether a constituent has a permeability other than one."""
    return phase.permeability is not VACUUM
