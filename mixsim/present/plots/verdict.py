"""The plot of verdicts: each piece with its uncertainty beside the limits and their guard bands."""

from __future__ import annotations

from typing import TYPE_CHECKING

from mixsim.analysis.judging.answer import Judgement
from mixsim.analysis.judging.lot import Lot
from mixsim.errors import Refusal
from mixsim.present.plots.style import DASHED, INK, MUTED, STRONG, headed, path_label
from mixsim.units import to_unit

if TYPE_CHECKING:
    from matplotlib.figure import Figure

MOST_NAMED = 25  # pieces whose names are written
COLOURS = {"pass": STRONG[0], "fail": STRONG[1]}
MARKERS = {"pass": "o", "fail": "X", "undecided": "s", "refused": "d"}


def draw(figure: Figure, answer: Judgement | Lot) -> None:
    """Draw verdicts, one line for each piece."""
    measurand = answer.measurand
    pieces = answer.pieces if isinstance(answer, Judgement) else answer.rows
    shown = [piece for piece in pieces if piece.value is not None and piece.std is not None]
    if not shown:
        raise Refusal("no piece has a value to draw", "write .csv or .json")

    def here(value: float) -> float:
        return float(to_unit(value, measurand.unit, measurand.dimension)) if measurand.unit else value

    axes = figure.subplots()
    for place, piece in enumerate(shown):
        assert piece.value is not None and piece.std is not None
        axes.errorbar(
            here(piece.value),
            place,
            xerr=2.0 * abs(here(piece.value + piece.std) - here(piece.value)),
            fmt=MARKERS[piece.decision],
            color=COLOURS.get(piece.decision, MUTED),
            ms=5,
            capsize=2,
            lw=1.1,
        )
    for end in (answer.lower, answer.upper):
        if end is not None:
            axes.axvline(here(end), color=INK, lw=1.2)
    if isinstance(answer, Judgement) and len(shown) == 1 and shown[0].std is not None:
        guard = answer.coverage_factor * shown[0].std
        for end, sign in ((answer.lower, 1.0), (answer.upper, -1.0)):
            if end is not None and guard > 0.0:
                axes.axvline(here(end + sign * guard), color=MUTED, lw=1.0, ls=DASHED)
    few = len(shown) <= MOST_NAMED
    names = [getattr(piece, "sample", "") or "piece" for piece in shown]
    axes.set_yticks(range(len(shown)) if few else [], names if few else [])
    axes.set_ylim(len(shown) - 0.4, -0.6)
    axes.set_xlabel(path_label(measurand.name, measurand.unit))
    said = "limits drawn full, guard bands dashed; bars are ±2 standard uncertainties"
    headed(figure, answer.recipe.schema.title or "verdict", f"{answer.decision} · {said}")
