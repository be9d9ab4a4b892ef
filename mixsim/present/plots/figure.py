"""The figure of an answer, whichever question it answers."""

from __future__ import annotations

from typing import TYPE_CHECKING

from mixsim.analysis import Inversion, Prediction

if TYPE_CHECKING:
    from matplotlib.figure import Figure


def figure(answer: Prediction | Inversion) -> Figure:
    """Figure of an answer.

    Parameters
    ----------
    answer
        A prediction, a sweep or an inversion.

    Returns
    -------
    figure
        To be saved; nothing is shown.

    Raises
    ------
    Refusal
        Where a sweep has more than two varied numbers.
    """
    import matplotlib
    from matplotlib.figure import Figure

    from mixsim.present.plots import inversion, prediction, sweep
    from mixsim.present.plots.style import HEIGHT, SETTINGS, WIDTH

    with matplotlib.rc_context(SETTINGS):
        drawn = Figure(figsize=(WIDTH, HEIGHT), layout="constrained")
        if isinstance(answer, Inversion):
            inversion.draw(drawn, answer)
        elif answer.vary:
            sweep.draw(drawn, answer)
        else:
            prediction.draw(drawn, answer)
        drawn.draw_without_rendering()  # lay it out while the settings hold
    return drawn
