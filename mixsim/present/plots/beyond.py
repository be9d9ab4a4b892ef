"""Where a measured table is continued beyond its ends: shaded, and said below the title."""

from __future__ import annotations

from typing import TYPE_CHECKING, Protocol

import numpy as np

from mixsim.present.plots.style import MUTED
from mixsim.units import spectral_to

if TYPE_CHECKING:
    from collections.abc import Iterable

    from matplotlib.axes import Axes

    from mixsim.analysis.caution import Caution
    from mixsim.dispersion import Table
    from mixsim.recipe import Recipe

_WITHIN = ".recipe.materials."


class Answer(Protocol):
    """What has a recipe and cautions."""

    @property
    def recipe(self) -> Recipe:
        """That was asked."""

    @property
    def warnings(self) -> tuple[Caution, ...]:
        """What is said beside the answer."""


def continued(answer: Answer) -> dict[str, Table]:
    """Tables that the answer takes beyond their ends, by the name of the material."""
    found = {}
    for caution in answer.warnings:
        if caution.kind == "extended":
            recipe = answer.recipe
            *within, name = caution.path.removeprefix("materials.").split(_WITHIN)
            for part in within:
                recipe = recipe.parts[part]
            found[name] = recipe.tables[name]
    return found


def shade(panels: Iterable[Axes], answer: Answer, unit: str) -> None:
    """Shade what lies beyond a table, in panels over frequency that hold their curves already."""
    tables = continued(answer).values()
    if not tables:
        return
    ends = np.sort([spectral_to(table.omega[[0, -1]], unit) for table in tables], axis=-1)
    low, high = float(ends[:, 0].max()), float(ends[:, 1].min())
    for axes in panels:
        limits = axes.get_xlim()
        left, right = sorted(limits)
        spans = [(left, min(low, right)), (max(high, left), right)] if low <= high else [(left, right)]
        for start, stop in spans:
            if stop > start:
                axes.axvspan(start, stop, color=MUTED, alpha=0.12, lw=0, zorder=0, gid="beyond")
        axes.set_xlim(limits)


def said(answer: Answer, *, shaded: bool = True) -> str:
    """What to add to the line below the title; empty where every table holds."""
    names = list(continued(answer))
    if not names:
        return ""
    whose = f"{' and '.join(names)} beyond {'its table' if len(names) == 1 else 'their tables'}"
    return f" · shaded: {whose}" if shaded else f" · {whose}"
