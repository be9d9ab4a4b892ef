"""The figure of an answer, whichever question it answers."""

from __future__ import annotations

from typing import TYPE_CHECKING

from mixsim.analysis import Audit, Fitted, Inversion, Judgement, Lot, Prediction

if TYPE_CHECKING:
    from matplotlib.figure import Figure


def figure(answer: Prediction | Inversion | Fitted | Judgement | Lot | Audit) -> Figure:
    """Figure of an answer.

    Parameters
    ----------
    answer
        A prediction, a sweep, an inversion, a fit, verdicts or an audit.

    Returns
    -------
    figure
        To be saved; nothing is shown.

    Raises
    ------
    Refusal
        Where a sweep has more than two varied numbers, or principal axes; or an audit looked at no spectrum.
    """
    from matplotlib.figure import Figure
    from matplotlib.layout_engine import ConstrainedLayoutEngine

    from mixsim.present.plots import audit, fit, inversion, prediction, sweep, verdict
    from mixsim.present.plots.style import HEIGHT, WIDTH, settings

    with settings():
        drawn = Figure(figsize=(WIDTH, HEIGHT), layout=ConstrainedLayoutEngine(w_pad=0.07, wspace=0.03))
        if isinstance(answer, Audit):
            audit.draw(drawn, answer)
        elif isinstance(answer, Inversion):
            inversion.draw(drawn, answer)
        elif isinstance(answer, Fitted):
            fit.draw(drawn, answer)
        elif isinstance(answer, Judgement | Lot):
            verdict.draw(drawn, answer)
        elif answer.vary:
            sweep.draw(drawn, answer)
        else:
            prediction.draw(drawn, answer)
        drawn.align_ylabels()
        drawn.draw_without_rendering()  # lay it out while the settings hold
    return drawn
