"""Answers as text for a terminal, 80 columns wide where nobody says more."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING, Any

import numpy as np

from mixsim.present.audits import findings, headline
from mixsim.present.columns import owned, paragraph, table, width
from mixsim.present.phrases import NONE, cautions, chosen, number, rounded
from mixsim.present.principal import principal_axes
from mixsim.recipe import shells_of
from mixsim.units import kind_of_axis, show

if TYPE_CHECKING:
    from mixsim.analysis import Audit, Estimate, Inversion, Prediction

ROWS = 9  # of a spectrum
MOST_ROWS = 40  # of a sweep
NOISE = 1e-12  # share of |ε| below which a loss is rounding
HIGHEST = "← highest ε″"
VERDICTS = {
    "answered": "answered",
    "impossible": "impossible: no value in the ranges gives this reading",
    "undecided": "undecided: the readings cannot tell",
}


def prediction(answer: Prediction) -> str:
    """A prediction: composition, limits, a choice of the spectrum, cautions."""
    parts = [_head(answer), _composition(answer), _limits(answer), _spectrum(answer)]
    return "\n\n".join([*parts, *cautions(answer.warnings)])


def sweep(answer: Prediction) -> str:
    """A sweep: one row for each combination of the varied values."""
    shape = tuple(len(item.values) for item in answer.vary)
    count = int(np.prod(shape))
    columns = _swept(answer)
    headings = [*[_stacked(item.path, item.unit) for item in answer.vary], *[name for name, _ in columns]]
    rows = []
    for index in chosen(count, MOST_ROWS):
        here = np.unravel_index(index, shape)
        varied = [f"{item.shown[i]:.6g}" for item, i in zip(answer.vary, here, strict=True)]
        rows.append([*varied, *[number(values[here]) for _, values in columns]])
    parts = [_head(answer), table(headings, rows, left=0)]
    if count > MOST_ROWS:
        parts.append(f"{MOST_ROWS} of {count} rows; --out sweep.csv writes them all")
    return "\n\n".join([*parts, *cautions(answer.warnings)])


def _swept(answer: Prediction) -> list[tuple[str, Any]]:
    """Headings and values of what a sweep shows: limits, the middle of the band, the highest loss."""
    e, m, limits = answer.permittivity, answer.permeability, answer.limits
    place = len(answer.omega) // 2
    at = f"{answer.axis.shown[place]:.5g} {answer.axis.unit}"
    if e.ndim == len(answer.vary) + 2:
        columns: list[tuple[str, Any]] = []
        for axis in principal_axes(answer.recipe, e):
            columns.append((f"static\n{axis.sign}", limits.static[..., axis.index]))
            columns.append((f"ε′ {axis.sign} at\n{at}", e[..., axis.index, place].real))
            columns.append((f"ε″ {axis.sign} at\n{at}", e[..., axis.index, place].imag))
        return columns
    columns = [("static", limits.static), ("high-\nfrequency", limits.high_frequency)]
    if np.any(limits.conductivity > 0.0):
        columns = [("static", limits.static), ("dc\n[S/m]", limits.conductivity)]
    columns += [(f"ε′ at\n{at}", e[..., place].real), (f"ε″ at\n{at}", e[..., place].imag)]
    if answer.magnetic:
        return [*columns, (f"μ′ at\n{at}", m[..., place].real), (f"μ″ at\n{at}", m[..., place].imag)]
    loss = e.imag
    peak = np.argmax(np.nan_to_num(loss, nan=-np.inf), axis=-1)
    columns.append(("highest\nε″", np.take_along_axis(loss, peak[..., np.newaxis], axis=-1)[..., 0]))
    return [*columns, (f"at\n[{answer.axis.unit}]", answer.axis.shown[peak])]


def inversion(answer: Inversion) -> str:
    """An inversion: estimates, their doubt, other rules, or why there is no answer."""
    recipe = answer.recipe
    readings = ", ".join(f"{r.kind.replace('_', '-')} {r.written}" for r in answer.readings)
    head = f"read: {readings} · {answer.rule} · {answer.method}"
    parts = ["\n".join([recipe.schema.title or recipe.file, paragraph(head)])]
    parts.append("\n".join([VERDICTS[answer.verdict], *(paragraph(r, indent="  ") for r in answer.reasons)]))
    if answer.verdict != "impossible":
        parts += [f"{path}\n  {_estimate(answer, found)}" for path, found in answer.estimates.items()]
    said = []
    if answer.correlation is not None and len(answer.estimates) > 1:
        said.append(f"correlation of the two {answer.correlation[0, 1]:+.2f}")
    if (check := answer.monte_carlo) is not None:
        word = "confirms" if check.agrees else "does not confirm"
        said.append(f"a Monte Carlo of {check.draws} draws (seed {check.seed}) {word} the ±")
    if answer.pushed:
        said.append(paragraph(f"the ± holds that of the readings and of {', '.join(answer.pushed)}"))
    parts += ["\n".join(said)] if said else []
    parts += _residuals(answer)
    if answer.family is not None:
        parts.append(f"pairs that fit\n{_family(answer)}")
    if len(answer.by_rule) > 1 and any(found.values for found in answer.by_rule):
        parts.append(f"under each rule that could apply\n{_by_rule(answer)}")
    return "\n\n".join([*parts, *cautions(answer.warnings)])


def audit(answer: Audit) -> str:
    """An audit: every fault, or every finding; then every caution."""
    count = len(answer.faults)
    head = f"{answer.file}: {count} fault{'s' if count > 1 else ''}" if count else headline(answer)
    faults = [paragraph(str(fault), indent="  ") for fault in answer.faults]
    return "\n\n".join(["\n".join([head, *faults]), *findings(answer), *cautions(answer.warnings)])


def _head(answer: Prediction) -> str:
    title = answer.recipe.schema.title or answer.recipe.file
    return f"{title}\nrule {answer.rule} · time dependence exp(−iωt), loss positive"


def _composition(answer: Prediction) -> str:
    composition = answer.composition
    materials = {"host": answer.recipe.schema.host.material}
    for name, inclusion in answer.recipe.schema.inclusions.items():
        materials |= {name: inclusion.material}
        materials |= {f"{name}.{key}": shell.material for key, shell in shells_of(inclusion)}
    rows = []
    for name, volume in composition.volume_fractions.items():
        weights = composition.weight_fractions
        weight = NONE if weights is None or np.isnan(weights[name]) else f"{100 * weights[name]:.4g} %"
        rows.append([name, materials.get(name, "vacuum"), f"{100 * float(volume):.4g} %", weight])
    lines = [table(["", "material", "volume", "weight"], rows, left=2)]
    if composition.density is not None:
        lines.append(f"density {show(float(composition.density), 'density', 'g/cm^3')}")
    for name, density in composition.number_densities.items():
        lines.append(f"dopant {name}: {show(float(density), 'number density', 'cm^-3')} of host")
    return "\n".join(lines)


def _limits(answer: Prediction) -> str:
    limits, unsure = answer.limits, answer.pushed
    said = any(caution.kind == "no-limit" for caution in answer.warnings)
    kinds = ["static", "high_frequency"]
    if answer.magnetic:
        kinds += ["static_permeability", "high_frequency_permeability"]
    rows = []
    for kind in kinds:
        name = kind.removesuffix("_permeability").replace("_", "-")
        name += " permeability" if kind.endswith("_permeability") else " permittivity"
        rows.append([name, _axes(answer, getattr(limits, kind), unsure and getattr(unsure, kind))])
    if np.any(limits.conductivity > 0.0):
        rows.append(["conductivity at dc", f"{_axes(answer, limits.conductivity)} S/m"])
        rows.append(["level beside it", _axes(answer, limits.plateau)])
    rows = [[name, "none: see no-limit below" if said and level == NONE else level] for name, level in rows]
    shown = table(["", ""], rows, left=2)
    if unsure is not None and "±" in shown:
        shown += "\n" + paragraph(f"± is one standard uncertainty, from that of {', '.join(unsure.paths)}")
    return shown


def _spectrum(answer: Prediction) -> str:
    """Some rows of the spectrum with the highest loss; along each axis where the grains are aligned."""
    if answer.permittivity.ndim == 1:
        return _along(answer, 0)
    axes = principal_axes(answer.recipe, answer.permittivity)
    return "\n\n".join(f"{axis.said}\n{_along(answer, axis.index)}" for axis in axes)


def _along(answer: Prediction, axis: int) -> str:
    """The spectrum along one principal axis, or that of a mixture which has none."""

    def here(values: Any) -> Any:
        return values[axis] if values.ndim == 2 else values

    e, m = here(answer.permittivity), here(answer.permeability)
    columns: list[tuple[str, Any]] = [("ε′", e.real), ("ε″", e.imag)]
    if answer.magnetic:
        columns += [("μ′", m.real), ("μ″", m.imag)]
    columns += [("n", here(answer.quantity("index"))), ("k", here(answer.quantity("extinction")))]
    if not answer.magnetic:
        columns.append(("tan δ", here(answer.quantity("loss_tangent"))))
    columns.append(("α\n[1/cm]", here(answer.quantity("absorption_coefficient")) / 100.0))
    kind = kind_of_axis(answer.axis.unit).removeprefix("vacuum ")
    headings = [f"{kind}\n[{answer.axis.unit}]", *[name for name, _ in columns], ""]
    loss = e.imag
    peak = int(np.argmax(loss))
    places = set(chosen(len(answer.omega), ROWS))
    marked = loss[peak] > NOISE * abs(e[peak]) and len(answer.omega) > 1
    if marked:
        places.add(peak)
    rows = []
    for i in sorted(places):
        mark = HIGHEST if marked and i == peak else ""
        rows.append([f"{answer.axis.shown[i]:.5g}", *[number(values[i]) for _, values in columns], mark])
    shown = _marked(headings, rows, HIGHEST)
    if marked and max(map(len, shown.splitlines())) > width():
        short = [[*row[:-1], HIGHEST[: len(row[-1]) and 1]] for row in rows]
        shown = f"{_marked(headings, short, HIGHEST[:1])}\n{HIGHEST}"
    return shown


def _marked(headings: Sequence[str], rows: Sequence[Sequence[str]], mark: str) -> str:
    """Numbers to the right, and a mark after some rows to the left."""
    return table(headings, [[*row[:-1], row[-1].ljust(len(mark))] for row in rows], left=0)


def _estimate(answer: Inversion, estimate: Estimate) -> str:
    interval = "" if estimate.interval is None else _interval(answer, estimate.path, estimate.interval)
    if estimate.value is None and answer.solutions:
        values = (answer.recipe.show(estimate.path, found[estimate.path]) for found in answer.solutions)
        return f"either {' or '.join(values)}"
    if estimate.value is None:
        return f"allowed are {interval}" if interval else "no estimate"
    said = [answer.recipe.show(estimate.path, estimate.value, estimate.std)]
    if interval:
        said.append(f"95 % from {interval}")
    if estimate.note:
        said.append(estimate.note)
    return "; ".join(said)


def _interval(answer: Inversion, path: str, interval: tuple[float, float]) -> str:
    ends = [rounded(answer.recipe.show(path, end)) for end in interval]
    ends.sort(key=lambda text: float(text.split(" ")[0]))  # wavelengths fall where frequencies rise
    return " to ".join(ends)


def _residuals(answer: Inversion) -> list[str]:
    """Readings that the answer does not meet."""
    if all(abs(r.measured - r.predicted) <= 1e-9 for r in answer.residuals):
        return []
    rows = []
    for r in answer.residuals:
        off = NONE if r.standardised is None else f"{r.standardised:+.2f} standard uncertainties"
        numbers = (number(r.measured, digits=6), number(r.predicted, digits=6))
        rows.append([r.kind.replace("_", "-"), *numbers, off])
    return [table(["reading", "measured", "predicted", "off by"], rows)]


def _family(answer: Inversion) -> str:
    assert answer.family is not None
    values = list(answer.family.values())
    rows = []
    for i in chosen(len(values[0]), ROWS):
        pairs = zip(answer.family, values, strict=True)
        rows.append([rounded(answer.recipe.show(path, float(column[i]))) for path, column in pairs])
    return table([_stacked(path, "") for path in answer.family], rows, left=0)


def _by_rule(answer: Inversion) -> str:
    rows = []
    for found in answer.by_rule:
        if found.values is None:
            rows.append([found.rule, *["no answer"] * len(answer.estimates)])
        else:
            shown = [rounded(answer.recipe.show(path, value)) for path, value in found.values.items()]
            rows.append([found.rule, *shown])
    return table(["rule", *["\n".join(owned(path)) for path in answer.estimates]], rows)


def _axes(answer: Prediction, value: Any, std: Any = None) -> str:
    """A level, or one for each principal axis, with its uncertainty where there is one."""
    if np.ndim(value):
        axes = principal_axes(answer.recipe, answer.permittivity)
        own = [None if std is None else std[axis.index] for axis in axes]
        parts = [_axes(answer, value[axis.index], u) for axis, u in zip(axes, own, strict=True)]
        if len(axes) == 3:
            return ", ".join(parts)
        return f"{parts[0]} ⊥, {parts[1]} ∥"
    if std is None or not std > 0.0 or np.isnan(value):
        return number(value, digits=6)
    return show(float(np.real(value)), "number", std=float(std))


def _stacked(path: str, unit: str) -> str:
    """Whose number it is, what it is, and its unit, one below the other, as a narrow heading."""
    return "\n".join([*owned(path), *([f"[{unit}]"] if unit else [])])
