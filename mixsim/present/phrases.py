"""Numbers and cautions as every table says them."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING, Any

import numpy as np

from mixsim.present.columns import paragraph

if TYPE_CHECKING:
    from mixsim.analysis import Caution

NONE = "–"
LARGE, HUGE = 1e4, 1e7  # between which a number is written without a power of ten


def number(value: Any, *, digits: int = 4) -> str:
    """A number of a table; a complex one with its imaginary part where it has one."""
    if np.iscomplexobj(value):
        if value.imag != 0.0 and not np.isnan(value):
            return f"{value.real:.{digits}g} + {value.imag:.{digits}g}i"
        value = value.real
    if np.isnan(value):
        return NONE
    text = f"{float(value) + 0.0:.{digits}g}"
    return f"{float(text):.0f}" if LARGE <= abs(float(text)) < HUGE else text


def rounded(text: str) -> str:
    """A shown quantity with four digits, which is all that an interval deserves."""
    digits, _, unit = text.partition(" ")
    return f"{float(digits):.4g} {unit}".rstrip()


def cautions(warnings: Sequence[Caution]) -> list[str]:
    """Each caution as a paragraph."""
    lines = []
    for caution in warnings:
        place = f"{caution.path}: " if caution.path else ""
        lines.append(paragraph(f"caution, {caution.kind}: {place}{caution.message}"))
    return lines


def chosen(count: int, rows: int) -> list[int]:
    """Indices spread evenly, both ends among them."""
    return sorted({round(i) for i in np.linspace(0, count - 1, min(rows, count))})
