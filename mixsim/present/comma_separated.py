"""Answers as comma-separated text: header with quantity and unit, full precision, empty where nothing is.

The axis and the permittivity carry the names that `mixsim.dispersion.read_table` knows: the first three
columns of a prediction, with the comments above, are a measured table as a material takes one.
"""

from __future__ import annotations

import csv
from collections.abc import Iterator, Sequence
from pathlib import Path
from typing import Any

import numpy as np

from mixsim.analysis import Fitted, Inversion, Judgement, Lot, Prediction, Weighed
from mixsim.analysis.judging.answer import Judged
from mixsim.analysis.plain import provenance
from mixsim.analysis.prediction import CONVENTION
from mixsim.dispersion.table_text import AXES
from mixsim.units import kind_of_axis

_QUANTITIES = (
    ("n", "", "index"),
    ("k", "", "extinction"),
    ("loss_tangent", "", "loss_tangent"),
    ("absorption", " [1/m]", "absorption_coefficient"),
    ("conductivity", " [S/m]", "conductivity"),
)
_CHUNK = 16384  # rows turned into text at a time


def write_csv(answer: Prediction | Inversion | Fitted | Judgement | Lot | Weighed, file: Path) -> None:
    """Write the rows of an answer: one for each frequency (and varied value), or one for each unknown."""
    with file.open("w", encoding="utf-8", newline="") as stream:
        for line in _comments(answer):
            # one line each, whatever line breaks a title holds
            stream.write(f"# {' '.join(line.split())}\n")
        writer = csv.writer(stream, lineterminator="\n")
        if isinstance(answer, Inversion):
            writer.writerows(_inversion(answer))
        elif isinstance(answer, Fitted):
            writer.writerows(_fitted(answer))
        elif isinstance(answer, Judgement | Lot):
            writer.writerows(_verdicts(answer))
        elif isinstance(answer, Weighed):
            writer.writerows(_sheet(answer))
        else:
            for rows in _prediction(answer):
                writer.writerows(rows)


def _comments(answer: Prediction | Inversion | Fitted | Judgement | Lot | Weighed) -> Iterator[str]:
    recipe, origin = answer.recipe, provenance(answer.recipe)
    if recipe.schema.title:
        yield f"title: {recipe.schema.title}"
    yield f"mixsim {origin['version']}, recipe {origin['recipe']}, rule {answer.rule}"
    if isinstance(answer, Inversion):
        yield f"{answer.verdict}, {answer.method}"
        yield from (f"because: {reason}" for reason in answer.reasons)
    elif isinstance(answer, Fitted):
        yield answer.verdict
        yield from (f"because: {reason}" for reason in answer.reasons)
        for name, estimate in answer.estimates.items():
            shown = (
                ""
                if estimate.value is None
                else answer.recipe.show(estimate.path, estimate.value, estimate.std)
            )
            yield f"{name}: {shown or 'not narrowed'}"
        yield f"convention: {CONVENTION}"
    elif isinstance(answer, Judgement | Lot):
        yield f"{answer.measurand.name}: {answer.decision}"
    elif isinstance(answer, Weighed):
        yield "as the recipe asks" if answer.reached else "the stocks cannot make this mixture"
    else:
        yield f"convention: {CONVENTION}"
    yield from (f"caution, {caution.kind}: {caution.message}" for caution in answer.warnings)


def _prediction(answer: Prediction) -> Iterator[list[Sequence[Any]]]:
    """The header, then rows in chunks; the frequency runs fastest."""
    kind = kind_of_axis(answer.axis.unit)
    axis = next(name for name, meant in AXES.items() if meant == kind)
    header = [f"{item.path}{f' [{item.unit}]' if item.unit else ''}" for item in answer.vary]
    header.append(f"{axis} [{answer.axis.unit}]")
    columns = []
    for name, values in _columns(answer):
        header.append(name)
        columns.append(values.reshape(-1, len(answer.omega)))
    yield [header]
    # these repeat in every block: turned into text once
    frequencies = [repr(value) for value in answer.axis.shown.tolist()]
    grid = np.meshgrid(*[_texts(item.shown) for item in answer.vary], indexing="ij")
    varied = [values.reshape(-1).tolist() for values in grid]
    rows, count = columns[0].shape
    step = max(1, _CHUNK // count)
    for start in range(0, rows, step):
        here = slice(start, min(start + step, rows))
        size = here.stop - here.start
        parts = [[text for text in texts[here] for _ in range(count)] for texts in varied]
        parts.append(frequencies * size)
        parts += [_cells(column[here].reshape(-1)) for column in columns]
        yield list(zip(*parts, strict=True))


def _texts(values: Any) -> Any:
    return np.array([repr(value) for value in values.tolist()], dtype=object)


def _cells(values: Any) -> list[Any]:
    """Numbers of a column; empty where there is none."""
    cells: list[Any] = values.tolist()
    if np.isfinite(values).all():
        return cells
    return [cell if there else "" for cell, there in zip(cells, np.isfinite(values).tolist(), strict=True)]


def _columns(answer: Prediction) -> Iterator[tuple[str, Any]]:
    """Every column over frequency, one for each principal axis where there are three."""
    e, m = answer.permittivity, answer.permeability
    parts = [("permittivity_real", "", e.real), ("permittivity_imag", "", e.imag)]
    if answer.magnetic:
        parts += [("permeability_real", "", m.real), ("permeability_imag", "", m.imag)]
    parts += [(name, unit, answer.quantity(quantity)) for name, unit, quantity in _QUANTITIES]
    if e.ndim == len(answer.vary) + 1:
        yield from ((name + unit, values) for name, unit, values in parts)
        return
    for name, unit, values in parts:
        for axis in range(3):
            yield f"{name} axis {axis + 1}{unit}", np.ascontiguousarray(values[..., axis, :])


def _fitted(answer: Fitted) -> Iterator[Sequence[Any]]:
    """One row for each reading."""
    yield ("sample", "quantity", "frequency [Hz]", "measured", "std", "fitted", "off [std]", "from")
    for met in answer.met:
        one = met.observation
        frequencies = [""] * len(one.values) if one.omega is None else (one.omega / (2.0 * np.pi)).tolist()
        columns = one.values.tolist(), _cells(one.std), met.predicted.tolist(), met.standardised.tolist()
        for frequency, *numbers in zip(frequencies, *columns, strict=True):
            yield (one.sample, one.quantity, frequency, *numbers, one.source)


def _sheet(answer: Weighed) -> Iterator[Sequence[Any]]:
    """One row for each portion."""
    yield ("portion", "kind", "mass [g]", "std [g]", f"price [{answer.currency or '-'}]")
    for one in answer.portions:
        price = "" if one.price is None else one.price
        yield (one.name, "stock" if one.stock else "neat", 1e3 * one.mass, 1e3 * one.std, price)


def _verdicts(answer: Judgement | Lot) -> Iterator[Sequence[Any]]:
    """One row for each piece; a list of reasons in one cell."""
    yield ("sample", "verdict", "value", "std", "probability", "as written", "reason")
    for piece in answer.pieces if isinstance(answer, Judgement) else answer.rows:
        numbers = ["" if number is None else number for number in (piece.value, piece.std, piece.probability)]
        said = "" if piece.value is None else answer.measurand.show(piece.value, piece.std)
        reason = "; ".join(piece.reasons) if isinstance(piece, Judged) else piece.reason
        yield (piece.sample, piece.decision, *numbers, said, reason)


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
