"""Answers as comma-separated text: header with quantity and unit, full precision, empty where nothing is."""

from __future__ import annotations

import csv
from collections.abc import Iterator, Sequence
from pathlib import Path
from typing import Any

import numpy as np

from mixsim.analysis import Inversion, Prediction
from mixsim.analysis.plain import provenance
from mixsim.units import kind_of_axis

_QUANTITIES = (
    ("n", "index"),
    ("k", "extinction"),
    ("loss tangent", "loss_tangent"),
    ("absorption [1/m]", "absorption_coefficient"),
    ("conductivity [S/m]", "conductivity"),
)
_CHUNK = 4096  # rows turned into text at a time


def write_csv(answer: Prediction | Inversion, file: Path) -> None:
    """Write the rows of an answer: one for each frequency (and varied value), or one for each unknown."""
    with file.open("w", encoding="utf-8", newline="") as stream:
        for line in _comments(answer):
            stream.write(f"# {line}\n")
        writer = csv.writer(stream, lineterminator="\n")
        if isinstance(answer, Inversion):
            writer.writerows(_inversion(answer))
        else:
            for rows in _prediction(answer):
                writer.writerows(rows)


def _comments(answer: Prediction | Inversion) -> Iterator[str]:
    recipe = answer.recipe
    if recipe.schema.title:
        yield recipe.schema.title
    origin = provenance(recipe)
    yield f"mixsim {origin['version']}, recipe {origin['recipe']}, rule {answer.rule}"
    if isinstance(answer, Inversion):
        yield f"{answer.verdict}, {answer.method}"
        yield from answer.reasons
    else:
        yield "convention: exp(-iwt)"
    yield from (f"caution, {caution.kind}: {caution.message}" for caution in answer.warnings)


def _prediction(answer: Prediction) -> Iterator[list[Sequence[Any]]]:
    """The header, then rows in chunks; the frequency runs fastest."""
    axis = kind_of_axis(answer.axis.unit).removeprefix("vacuum ")
    header = [f"{item.path}{f' [{item.unit}]' if item.unit else ''}" for item in answer.vary]
    header.append(f"{axis} [{answer.axis.unit}]")
    columns = []
    for name, values in _columns(answer):
        header.append(name)
        columns.append(values.reshape(-1, len(answer.omega)))
    yield [header]
    varied = np.meshgrid(*[item.shown for item in answer.vary], indexing="ij")
    rows, count = columns[0].shape
    step = max(1, _CHUNK // count)
    for start in range(0, rows, step):
        here = slice(start, min(start + step, rows))
        size = here.stop - here.start
        parts = [np.repeat(values.reshape(-1)[here], count) for values in varied]
        parts.append(np.tile(answer.axis.shown, size))
        parts += [column[here].reshape(-1) for column in columns]
        table = np.stack(parts, axis=-1)
        text = table.tolist()
        if not np.isfinite(table).all():
            text = [[cell if np.isfinite(cell) else "" for cell in row] for row in text]
        yield text


def _columns(answer: Prediction) -> Iterator[tuple[str, Any]]:
    """Every column over frequency, one for each principal axis where there are three."""
    e, m = answer.permittivity, answer.permeability
    parts = [("permittivity real", e.real), ("permittivity imag", e.imag)]
    if answer.magnetic:
        parts += [("permeability real", m.real), ("permeability imag", m.imag)]
    parts += [(label, answer.quantity(name)) for label, name in _QUANTITIES]
    if e.ndim == len(answer.vary) + 1:
        yield from parts
        return
    for label, values in parts:
        for axis in range(3):
            yield f"axis {axis + 1} {label}", np.ascontiguousarray(values[..., axis, :])


def _inversion(answer: Inversion) -> Iterator[Sequence[Any]]:
    yield ("rule", "path", "value", "std", "95 % low", "95 % high", "unit", "as written", "note")
    for path, estimate in answer.estimates.items():
        low, high = estimate.interval or ("", "")
        said = "" if estimate.value is None else answer.recipe.show(path, estimate.value, estimate.std)
        value, std = (("" if v is None else v) for v in (estimate.value, estimate.std))
        yield (answer.rule, path, value, std, low, high, estimate.unit, said, estimate.note)
    for found in answer.by_rule[1:]:
        for path, estimate in answer.estimates.items():
            value = "" if found.values is None else found.values[path]
            said = "" if found.values is None else answer.recipe.show(path, found.values[path])
            yield (found.rule, path, value, "", "", "", estimate.unit, said, found.reason)
