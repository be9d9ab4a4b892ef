"""Answers as tables for a terminal, 80 columns wide where nobody says more."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from typing import Any

import numpy as np
from rich.console import Console, Group
from rich.table import Table
from rich.text import Text

from mixsim.analysis import Audit, Caution, Inversion, Prediction
from mixsim.analysis.inversion import Estimate
from mixsim.units import kind_of_axis, show

ROWS = 9  # of a spectrum
MOST_ROWS = 40  # of a sweep or a curve
NONE = "–"


def print_answer(answer: Prediction | Inversion | Audit) -> None:
    """Print an answer to standard output."""
    if isinstance(answer, Inversion):
        shown = inversion(answer)
    elif isinstance(answer, Audit):
        shown = audit(answer)
    else:
        shown = sweep(answer) if answer.vary else prediction(answer)
    Console(highlight=False, soft_wrap=False).print(shown)


def print_table(columns: Sequence[str], rows: Iterable[Sequence[str]]) -> None:
    """Print a plain table to standard output."""
    Console(highlight=False).print(plain_table(columns, rows))


def plain_table(columns: Sequence[str], rows: Iterable[Sequence[str]]) -> Table:
    """A table of text, each column to the left."""
    table = Table(box=None, pad_edge=False, padding=(0, 2, 0, 0), header_style="dim")
    for position, name in enumerate(columns):
        table.add_column(Text(name), overflow="fold", no_wrap=position == 0)
    for row in rows:
        table.add_row(*[Text(cell) for cell in row])
    return table


def prediction(answer: Prediction) -> Group:
    """A prediction: composition, limits, a choice of the spectrum, cautions."""
    return Group(
        *_head(answer),
        *_composition(answer),
        *_limits(answer),
        _spectrum(answer),
        *_cautions(answer.warnings),
    )


def sweep(answer: Prediction) -> Group:
    """A sweep: one row for each combination of the varied values."""
    place = len(answer.omega) // 2
    at = show(float(answer.omega[place]), "spectral", answer.axis.unit)
    table = _table(*[_stacked(item.path, item.unit) for item in answer.vary], labels=0)
    headings = ["static", "high-\nfrequency", f"ε′ at\n{at}", f"ε″ at\n{at}", "highest\nε″"]
    for heading in (*headings, f"at\n[{answer.axis.unit}]"):
        table.add_column(Text(heading), justify="right")
    shape = tuple(len(item.values) for item in answer.vary)
    count = int(np.prod(shape))
    for index in _chosen(count, MOST_ROWS):
        here = np.unravel_index(index, shape)
        spectrum = _first_axis(answer.permittivity[here])
        peak = int(np.argmax(spectrum.imag))
        table.add_row(
            *[f"{item.shown[i]:.6g}" for item, i in zip(answer.vary, here, strict=True)],
            _number(_first(answer.limits.static[here])),
            _number(_first(answer.limits.high_frequency[here])),
            _number(spectrum[place].real),
            _number(spectrum[place].imag),
            _number(spectrum[peak].imag),
            f"{answer.axis.shown[peak]:.5g}",
        )
    more = []
    if count > MOST_ROWS:
        more = [Text(f"\n{MOST_ROWS} of {count} rows; --out sweep.csv writes them all")]
    return Group(*_head(answer), Text(""), table, *more, *_cautions(answer.warnings))


def inversion(answer: Inversion) -> Group:
    """An inversion: estimates, their doubt, other rules, or why there is no answer."""
    recipe = answer.recipe
    readings = ", ".join(f"{r.kind.replace('_', '-')} {r.written}" for r in answer.readings)
    parts: list[Any] = [
        Text(recipe.schema.title or recipe.file, style="bold"),
        Text(f"read: {readings} · {answer.rule} · {answer.method}\n"),
    ]
    verdicts = {
        "answered": "answered",
        "impossible": "impossible: no value in the ranges gives this reading",
        "undecided": "undecided: the readings cannot tell",
    }
    parts.append(Text(verdicts[answer.verdict], style="bold"))
    parts += [Text(f"  {reason}") for reason in answer.reasons]
    if answer.verdict != "impossible":
        for estimate in answer.estimates.values():
            parts += [Text(f"\n{estimate.path}"), Text(f"  {_estimate(answer, estimate)}", style="bold")]
    if answer.correlation is not None and len(answer.estimates) > 1:
        parts.append(Text(f"\ncorrelation of the two {answer.correlation[0, 1]:+.2f}"))
    if (check := answer.monte_carlo) is not None:
        word = "confirms" if check.agrees else "does not confirm"
        parts.append(Text(f"a Monte Carlo of {check.draws} draws (seed {check.seed}) {word} the ±"))
    if answer.residuals and any(abs(r.measured - r.predicted) > 1e-9 for r in answer.residuals):
        table = _table("reading", "measured", "predicted", "off by")
        for r in answer.residuals:
            off = NONE if r.standardised is None else f"{r.standardised:+.2f} standard uncertainties"
            table.add_row(
                r.kind.replace("_", "-"), _number(r.measured, digits=6), _number(r.predicted, digits=6), off
            )
        parts += [Text(""), table]
    if answer.family is not None:
        parts += [Text("\npairs that fit"), _family(answer)]
    if len(answer.by_rule) > 1 and any(found.values for found in answer.by_rule):
        parts += [Text("\nunder each rule that could apply"), _by_rule(answer)]
    return Group(*parts, *_cautions(answer.warnings))


def audit(answer: Audit) -> Group:
    """An audit: every fault, then every caution."""
    count = len(answer.faults)
    if answer.passed:
        head = f"{answer.file}: sound, {answer.numbers} numbers, library materials included"
    else:
        head = f"{answer.file}: {count} fault{'s' if count > 1 else ''}"
    faults = [Text(f"  {fault}") for fault in answer.faults]
    return Group(Text(head, style="bold"), *faults, *_cautions(answer.warnings))


def _head(answer: Prediction) -> list[Any]:
    title = answer.recipe.schema.title or answer.recipe.file
    return [Text(title, style="bold"), Text(f"rule {answer.rule} · time dependence exp(−iωt), loss positive")]


def _composition(answer: Prediction) -> list[Any]:
    composition = answer.composition
    table = _table("", "material", "volume", "weight", labels=2)
    materials = {"host": answer.recipe.schema.host.material}
    materials |= {name: inclusion.material for name, inclusion in answer.recipe.schema.inclusions.items()}
    for name, volume in composition.volume_fractions.items():
        weights = composition.weight_fractions
        weight = NONE if weights is None else f"{100 * float(weights[name]):.4g} %"
        table.add_row(name, materials.get(name, "vacuum"), f"{100 * float(volume):.4g} %", weight)
    parts: list[Any] = [Text(""), table]
    if composition.density is not None:
        parts.append(Text(f"density {show(float(composition.density), 'density', 'g/cm^3')}"))
    for name, density in composition.number_densities.items():
        number = show(float(density), "number density", "cm^-3")
        parts.append(Text(f"dopant {name}: {number} of host"))
    return parts


def _limits(answer: Prediction) -> list[Any]:
    limits, table = answer.limits, Table.grid(padding=(0, 2))
    conducts = bool(np.any(limits.conductivity > 0.0))
    rows = [("static permittivity", limits.static), ("high-frequency permittivity", limits.high_frequency)]
    if answer.magnetic:
        rows += [
            ("static permeability", limits.static_permeability),
            ("high-frequency permeability", limits.high_frequency_permeability),
        ]
    for name, value in rows:
        table.add_row(name, _axes(value))
    if conducts:
        table.add_row("conductivity at dc", f"{_axes(limits.conductivity)} S/m")
        table.add_row("level beside it", _axes(limits.plateau))
    return [Text(""), table, Text("")]


def _spectrum(answer: Prediction) -> Table:
    """Some rows of the spectrum, and the highest loss."""
    e, m = answer.permittivity, answer.permeability
    columns: list[tuple[str, Any]] = []
    if answer.response.permittivity.ndim == 2:
        for label, axis in (("⊥", 0), ("∥", 2)):
            n = answer.quantity("index")[axis]
            columns += [(f"ε′ {label}", e[axis].real), (f"ε″ {label}", e[axis].imag), (f"n {label}", n)]
    else:
        columns = [("ε′", e.real), ("ε″", e.imag)]
        if answer.magnetic:
            columns += [("μ′", m.real), ("μ″", m.imag)]
        columns += [("n", answer.quantity("index")), ("k", answer.quantity("extinction"))]
        if not answer.magnetic:
            columns.append(("tan δ", answer.quantity("loss_tangent")))
        columns.append(("α [1/cm]", answer.quantity("absorption_coefficient") / 100.0))
    heading = f"{kind_of_axis(answer.axis.unit).removeprefix('vacuum ')} [{answer.axis.unit}]"
    table = _table(heading, *[name for name, _ in columns], labels=0)
    table.add_column("", justify="left")
    loss = _first_axis(e).imag
    peak = int(np.argmax(loss))
    chosen = set(_chosen(len(answer.omega), ROWS))
    if loss[peak] > 0.0:
        chosen.add(peak)
    for i in sorted(chosen):
        mark = "← top ε″" if i == peak and loss[peak] > 0.0 and len(answer.omega) > 1 else ""
        table.add_row(f"{answer.axis.shown[i]:.5g}", *[_number(values[i]) for _, values in columns], mark)
    return table


def _estimate(answer: Inversion, estimate: Estimate) -> str:
    interval = "" if estimate.interval is None else _interval(answer, estimate.path, estimate.interval)
    if estimate.value is None:
        return f"allowed are {interval}" if interval else "no estimate"
    said = [answer.recipe.show(estimate.path, estimate.value, estimate.std)]
    if interval:
        said.append(f"95 % from {interval}")
    if estimate.note:
        said.append(estimate.note)
    return "; ".join(said)


def _interval(answer: Inversion, path: str, interval: tuple[float, float]) -> str:
    ends = [_round(answer.recipe.show(path, end)) for end in interval]
    ends.sort(key=lambda text: float(text.split(" ")[0]))  # wavelengths fall where frequencies rise
    return " to ".join(ends)


def _round(text: str) -> str:
    """A shown quantity with four digits, which is all that an interval deserves."""
    number, _, unit = text.partition(" ")
    return f"{float(number):.4g} {unit}".rstrip()


def _family(answer: Inversion) -> Table:
    assert answer.family is not None
    table = _table(*answer.family)
    values = list(answer.family.values())
    for i in _chosen(len(values[0]), ROWS):
        shown = zip(answer.family, values, strict=True)
        table.add_row(*[_round(answer.recipe.show(path, float(column[i]))) for path, column in shown])
    return table


def _by_rule(answer: Inversion) -> Table:
    table = _table("rule", *[_short(path) for path in answer.estimates])
    for found in answer.by_rule:
        if found.values is None:
            table.add_row(found.rule, *["no answer"] * len(answer.estimates))
        else:
            shown = [_round(answer.recipe.show(path, value)) for path, value in found.values.items()]
            table.add_row(found.rule, *shown)
    return table


def _cautions(warnings: Sequence[Caution]) -> list[Any]:
    lines = []
    for caution in warnings:
        place = f"{caution.path}: " if caution.path else ""
        lines.append(Text(f"\ncaution, {caution.kind}: {place}{caution.message}"))
    return lines


def _table(*columns: str, labels: int = 1) -> Table:
    table = Table(box=None, pad_edge=False, padding=(0, 2, 0, 0), header_style="dim")
    for position, name in enumerate(columns):
        table.add_column(Text(name), justify="left" if position < labels else "right", no_wrap=labels == 0)
    return table


def _chosen(count: int, rows: int) -> list[int]:
    """Indices spread evenly, both ends among them."""
    return sorted({round(i) for i in np.linspace(0, count - 1, min(rows, count))})


def _first_axis(values: Any) -> Any:
    """A spectrum, along the first principal axis where there are three."""
    return values[0] if values.ndim == 2 else values


def _first(value: Any) -> Any:
    return value[0] if np.ndim(value) else value


def _axes(value: Any) -> str:
    """A level, or one for each principal axis."""
    if np.ndim(value) == 0:
        return _number(value, digits=6)
    return f"{_number(value[0], digits=6)} ⊥, {_number(value[2], digits=6)} ∥"


def _number(value: Any, *, digits: int = 4) -> str:
    """A number of a table; a complex one with its imaginary part where it has one."""
    if np.iscomplexobj(value):
        if value.imag != 0.0 and not np.isnan(value):
            return f"{value.real:.{digits}g} + {value.imag:.{digits}g}i"
        value = value.real
    return NONE if np.isnan(value) else f"{float(value):.{digits}g}"


def _short(path: str) -> str:
    """The last two words of a path."""
    return ".".join(path.split(".")[-2:])


def _stacked(path: str, unit: str) -> str:
    """The last two words of a path and its unit, one below the other, as a narrow heading."""
    return "\n".join([*path.split(".")[-2:], *([f"[{unit}]"] if unit else [])])
