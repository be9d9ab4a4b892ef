"""Verdicts on pieces as text."""

from __future__ import annotations

from typing import TYPE_CHECKING

from mixsim.present.columns import paragraph, table
from mixsim.present.phrases import cautions, rounded

if TYPE_CHECKING:
    from mixsim.analysis.judging.answer import Judged, Judgement
    from mixsim.analysis.judging.lot import Lot

SEEN = 0.001  # share of the variance from which a source is named
MOST_ROWS = 40  # of a lot
MOST_MEANINGS = 4  # of a label
HANDLING = "a verdict on the material, not on its safety: for that see local codes and safety data sheets"


def judgement(answer: Judgement) -> str:
    """Verdict, number judged, budget, what would decide, what the label may mean."""
    note = f" ({answer.measurand.note})" if answer.measurand.note else ""
    head = f"{answer.measurand.name}{note}: {_limits(answer)} · {_how(answer)} · {answer.rule}"
    parts = [f"{answer.recipe.schema.title or answer.recipe.file}\n{paragraph(head)}"]
    parts += [_piece(answer, piece) for piece in answer.pieces]
    if len(answer.pieces) > 1:
        parts.append(f"all pieces: {answer.decision}")
    if answer.calibrators:
        parts.append(paragraph(f"not judged, as they calibrate: {', '.join(answer.calibrators)}"))
    return "\n\n".join([*parts, *cautions(answer.warnings), paragraph(HANDLING)])


def _limits(answer: Judgement) -> str:
    show = answer.measurand.show
    if answer.lower is None or answer.upper is None:
        end = answer.upper if answer.lower is None else answer.lower
        assert end is not None
        return f"{'at most' if answer.lower is None else 'at least'} {show(end)}"
    return f"{show(answer.lower)} to {show(answer.upper)}"


def _how(answer: Judgement) -> str:
    if answer.coverage_factor == 0.0:
        return "simple acceptance"
    return f"guarded by {answer.coverage_factor:g} standard uncertainties"


def _piece(answer: Judgement, piece: Judged) -> str:
    show = answer.measurand.show
    name = f"{piece.sample}: " if piece.sample else ""
    lines = [f"{name}{piece.decision}"]
    if piece.value is not None and piece.std is not None:
        assert piece.probability is not None
        expanded = show(piece.value, 2.0 * piece.std)
        lines[0] += f", {expanded} (k=2), within the limits with probability {piece.probability:.4g}"
    lines = [paragraph(lines[0]), *(paragraph(reason, indent="  ") for reason in piece.reasons)]
    sources = [source for source in piece.budget if source.share >= SEEN]
    if sources:
        rows = [[s.name, rounded(show(s.std)), f"{100 * s.share:.1f} %"] for s in sources]
        lines += ["", table(["source of doubt", "±", "of variance"], rows)]
    if len(piece.by_rule) > 1:
        rows = [[rule, rounded(show(value))] for rule, value in piece.by_rule.items()]
        lines += ["", table(["under the rule", "value"], rows)]
    if piece.meanings:
        rows = [[m.meaning, rounded(show(m.value)), f"{m.off:.1f}"] for m in piece.meanings[:MOST_MEANINGS]]
        lines += ["", table(["the label, if it is meant", "is", "off, in ±"], rows)]
    return "\n".join(lines)


def lot(answer: Lot) -> str:
    """Counts, then one line for each piece."""
    counts = [f"{word} {count}" for word, count in answer.counts.items() if count]
    note = f" ({answer.measurand.note})" if answer.measurand.note else ""
    head = f"{answer.measurand.name}{note} of {len(answer.rows)} pieces: {', '.join(counts)}"
    rows = []
    for row in answer.rows[:MOST_ROWS]:
        shown = "" if row.value is None else answer.measurand.show(row.value, row.std)
        chance = "" if row.probability is None else f"{row.probability:.4g}"
        rows.append([row.sample, row.decision, shown, chance, row.reason])
    text = table(["piece", "verdict", "value", "probability", "because"], rows, left=2)
    parts = [f"{answer.recipe.schema.title or answer.recipe.file}\n{paragraph(head)}", text]
    if len(answer.rows) > MOST_ROWS:
        parts.append(f"{MOST_ROWS} of {len(answer.rows)} pieces; --out verdicts.csv writes them all")
    return "\n\n".join([*parts, paragraph(HANDLING)])
