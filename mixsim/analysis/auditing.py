"""Audit of a recipe, a library material or a table: its faults, and whether its spectra can be."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import asdict, dataclass
from pathlib import Path
from typing import TYPE_CHECKING, Any

from mixsim.analysis.caution import Caution
from mixsim.analysis.suspicion import suspicions
from mixsim.errors import BadInput, Fault, Refusal, nearest
from mixsim.recipe import COMMAND_LINE, Recipe, library, load, parse

if TYPE_CHECKING:
    from mixsim.analysis.checks import Examined, Finding, Subject
    from mixsim.mixture import Constituent

POINTS = 401  # of a model's band
FINER = 8001  # where it has lines narrower than that


@dataclass(frozen=True)
class Audit:
    """What was found.

    Attributes
    ----------
    file
        The recipe or table, or the name of the material.
    kind
        "recipe", "material" or "table".
    faults
        What makes a recipe unusable; nothing else is looked at then.
    warnings
        What a careful colleague would ask about.
    numbers
        How many numbers a recipe holds, library materials included; rows of a table.
    findings
        What was looked at, one after the other.
    spectra
        The spectra looked at, beside what Kramers–Kronig makes of their loss; a mixture comes last.
    """

    file: str
    kind: str
    faults: tuple[Fault, ...]
    warnings: tuple[Caution, ...]
    numbers: int
    findings: tuple[Finding, ...] = ()
    spectra: tuple[Examined, ...] = ()

    @property
    def passed(self) -> bool:
        """Whether nothing failed."""
        return not self.faults and all(finding.verdict != "failed" for finding in self.findings)

    def to_dict(self) -> dict[str, Any]:
        """As JSON holds it."""
        return {
            "file": self.file,
            "kind": self.kind,
            "passed": self.passed,
            "numbers": self.numbers,
            "faults": [asdict(fault) for fault in self.faults],
            "warnings": [caution.to_dict() for caution in self.warnings],
            "findings": [finding.to_dict() for finding in self.findings],
            "spectra": [spectrum.to_dict() for spectrum in self.spectra],
        }


def audit(subject: str | Path, settings: Mapping[str, Any] | None = None) -> Audit:
    """What is wrong with a recipe, a material or a table.

    Parameters
    ----------
    subject
        A recipe (TOML), a table (CSV), or the name of a library material.
    settings
        Values to set before in a recipe, path → text or number.

    Returns
    -------
    audit
        Of a recipe every fault that one pass can see; if there is none, its cautions that need no
        computing, findings on each material that it uses and on the mixture over its band. Else findings
        on the spectrum.

    Raises
    ------
    BadInput
        Where there is nothing of that name to audit, or a table cannot be read.
    """
    name, file = str(subject), Path(subject)
    if not file.is_file() and file.suffix.lower() not in (".toml", ".csv"):
        if settings:
            raise _only_recipes(f"the material {name}")
        if name in library.names():
            return _material(name)
        if not isinstance(subject, Path):
            allowed = "a recipe (.toml), a table (.csv), or a material of the library (mixsim list materials)"
            fault = Fault(COMMAND_LINE, "audit", f"no {name!r}", allowed, nearest(name, library.names()))
            raise BadInput([fault])
    if file.suffix.lower() == ".csv":
        if settings:
            raise _only_recipes(f"the table {name}")
        return _table(file, name)
    try:
        recipe = load(file, settings)
    except BadInput as error:
        if not file.is_file():
            raise
        return Audit(name, "recipe", error.faults, (), 0)
    findings, spectra = _of_recipe(recipe)
    return Audit(name, "recipe", (), suspicions(recipe), len(recipe.leaves), findings, spectra)


def _only_recipes(what: str) -> BadInput:
    found = f"something to set in {what}"
    return BadInput([Fault(COMMAND_LINE, "audit", found, "--set and --rule are for a recipe")])


def _material(name: str) -> Audit:
    """Audit of a library material, over the band in which it holds."""
    recipe = parse(library.alone(name), file=name)
    (phase,) = recipe.compile().phases
    findings, spectra = _of_material(recipe, phase)
    return Audit(
        name, "material", (), suspicions(recipe), len(recipe.leaves), tuple(findings), tuple(spectra)
    )


def _table(file: Path, name: str) -> Audit:
    """Audit of a measured table, at its rows."""
    from mixsim.analysis.checks import Finding, Subject
    from mixsim.dispersion import read_table

    try:
        table = read_table(file)
    except FileNotFoundError:
        raise BadInput([Fault(name, "", "no such file", "name a table (CSV) that can be read")]) from None
    except OSError as error:
        reason = (error.strerror or "it cannot be read").lower()
        raise BadInput([Fault(name, "", reason, "name a table (CSV) that can be read")]) from None
    except Refusal as refusal:
        raise BadInput([Fault(name, "", refusal.found, refusal.allowed, refusal.suggestion)]) from None
    rows = Subject(file.stem, "permittivity", table.omega, table.permittivity, table.unit, measured=True)
    findings, spectra = _of_spectrum(rows)
    if table.permeability is not None:
        magnetic = Subject(
            rows.of, "permeability", table.omega, table.permeability, table.unit, measured=True
        )
        said, seen = _of_spectrum(magnetic)
        findings += said
        spectra += seen
    numbers = {"low_rad_s": float(table.omega[0]), "high_rad_s": float(table.omega[-1])}
    why = f"{table.omega.size} rows from {table.range_written}"
    findings.append(Finding("range", rows.of, "passed", numbers, why))
    findings.append(_electrons(rows))
    return Audit(name, "table", (), (), int(table.omega.size), tuple(findings), tuple(spectra))


def _electrons(rows: Subject) -> Finding:
    from mixsim.analysis.checks import Finding
    from mixsim.analysis.model_checks import electrons

    count = electrons(rows.omega, rows.values.imag)
    why = (
        f"the loss of the table takes {count:.3g} electrons per m³; it tells no density to hold that against"
    )
    return Finding("f-sum", rows.of, "could not tell", {"electrons_per_m3": count}, why)


def _of_spectrum(subject: Subject) -> tuple[list[Finding], list[Examined]]:
    """What must hold of any spectrum."""
    from mixsim.analysis.checks import causality, clear_dispersion, finite, passivity

    if (lost := finite(subject)) is not None:
        return [lost], []
    consistent, examined = causality(subject)
    findings = [passivity(subject), consistent]
    if subject.quantity == "permittivity":
        findings.append(clear_dispersion(subject))
    return findings, [examined] if examined else []


def _of_material(
    recipe: Recipe, phase: Constituent, asked: tuple[float, float] | None = None
) -> tuple[list[Finding], list[Examined]]:
    """Findings on one material: over its own range, or over the band asked for where it has none."""
    import numpy as np

    from mixsim.analysis.checks import Finding, Subject
    from mixsim.analysis.model_checks import covered, f_sum, is_magnetic, levels, snoek
    from mixsim.units import written_unit

    name, table = phase.material, recipe.tables.get(phase.material)
    valid, band = recipe.schema.materials[name].valid, recipe.schema.band
    unit = written_unit(valid.from_) if valid else "GHz"
    if band is not None:
        unit = written_unit(band.values[0] if band.values else _known(band.from_))
    ends = sorted((valid.from_.value, valid.to.value)) if valid else asked
    if table is not None:
        unit, ends = table.unit, (float(table.omega[0]), float(table.omega[-1]))
    if ends is None:
        return [
            Finding("range", name, "could not tell", {}, "neither it nor the recipe says over what band")
        ], []
    subjects = []
    for quantity in ("permittivity", *(["permeability"] if is_magnetic(phase) else [])):
        spectrum = getattr(phase, quantity)
        rows = None if table is None else getattr(table, quantity)
        if table is not None and rows is not None:
            subjects.append(Subject(name, quantity, table.omega, rows, unit, measured=True))
            continue
        omega = np.geomspace(ends[0], ends[1], POINTS if ends[0] < ends[1] else 1)
        subjects.append(_sampled(name, quantity, spectrum, recipe, omega, unit))
    findings, spectra = [], []
    for subject in subjects:
        said, seen = _of_spectrum(subject)
        findings += said
        spectra += seen
    here = subjects[0]
    if np.isfinite(here.values).all() and here.omega.size > 1:
        findings.append(f_sum(phase, here, recipe))
    if is_magnetic(phase):
        findings.append(snoek(phase, recipe, subjects[-1]))
    findings.append(levels(phase, recipe, name))
    findings.append(covered(recipe, name, asked, unit))
    return findings, spectra


def _sampled(name: str, quantity: str, spectrum: Any, recipe: Recipe, omega: Any, unit: str) -> Subject:
    """A model at its frequencies, more of them where it has narrow lines."""
    import numpy as np

    from mixsim.analysis.checks import Subject, narrow

    x = {path: leaf.value for path, leaf in recipe.leaves.items()}

    def at(axis: Any) -> Subject:
        with np.errstate(all="ignore"):
            values = np.asarray(spectrum.at(x, axis), dtype=complex)
        return Subject(name, quantity, axis, values, unit)

    subject = at(omega)
    if omega.size > 1 and narrow(subject):
        subject = at(np.geomspace(omega[0], omega[-1], FINER))
    return subject


def _of_recipe(recipe: Recipe) -> tuple[tuple[Finding, ...], tuple[Examined, ...]]:
    """Findings on each material that a recipe uses, then on the mixture over its band."""
    from mixsim.analysis.band import axis_of

    mixture = recipe.compile()
    axis = axis_of(recipe) if recipe.schema.band is not None else None
    asked = None if axis is None else (float(axis.omega.min()), float(axis.omega.max()))
    findings: list[Finding] = []
    spectra: list[Examined] = []
    used = {phase.material: phase for phase in mixture.phases if phase.name != "voids"}
    for phase in used.values():
        said, seen = _of_material(recipe, phase, asked)
        findings += said
        spectra += seen
    if axis is not None and (len(mixture.phases) > 1 or mixture.number_densities or recipe.schema.dopants):
        said, seen = _of_mixture(mixture, axis)
        findings += said
        spectra += seen
    return tuple(findings), tuple(spectra)


def _of_mixture(mixture: Any, axis: Any) -> tuple[list[Finding], list[Examined]]:
    """Findings on the mixture; along and across the aligned axis where there is one."""
    import numpy as np

    from mixsim.analysis.checks import Finding, Subject

    order = np.argsort(axis.omega)
    try:
        response = mixture.response({}, axis.omega[order])
    except Refusal as refusal:
        why = f"{refusal.found}; {refusal.allowed}"
        return [Finding("range", "mixture", "failed", {}, why)], []
    findings, spectra = [], []
    for quantity in ("permittivity", *(["permeability"] if mixture.magnetic else [])):
        values = getattr(response, quantity)
        parts = _axes(values)
        for of, along in parts:
            said, seen = _of_spectrum(Subject(of, quantity, axis.omega[order], along, axis.unit))
            findings += said
            spectra += seen
    return findings, spectra


def _axes(values: Any) -> Iterator[tuple[str, Any]]:
    if values.ndim == 1:
        yield "mixture", values
    else:
        yield "mixture ⊥", values[0]
        yield "mixture ∥", values[2]


def _known(leaf: Any) -> Any:
    assert leaf is not None
    return leaf
