"""Batch axes of an evaluation, and the blocks in which it is done."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from functools import cached_property
from itertools import product
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from mixsim.errors import Refusal

_BLOCK = 16384  # complex numbers a pass: an array of them and its temporaries stay in the cache

Row = tuple[slice, ...]


class Axes:
    """Leaves with batch axes, shaped so that they broadcast with the frequency axis.

    Parameters
    ----------
    defaults
        Every leaf by its path.
    values
        Those that differ, numbers or arrays.
    principal
        Whether three principal axes stand before the frequency axis.
    """

    def __init__(
        self, defaults: Mapping[str, float], values: Mapping[str, ArrayLike], *, principal: bool
    ) -> None:
        given = {path: numbers(path, value) for path, value in values.items()}
        try:
            self.batch: tuple[int, ...] = np.broadcast_shapes(*(array.shape for array in given.values()))
        except ValueError:
            shapes = ", ".join(f"{path} {array.shape}" for path, array in given.items())
            raise Refusal(f"shapes that do not broadcast: {shapes}", "one batch shape for all") from None
        self.trail = 2 if principal else 1
        self.shape = (*self.batch, 3) if principal else self.batch
        self.scalars = {**defaults, **{path: float(a) for path, a in given.items() if a.ndim == 0}}
        self._arrays = {path: array for path, array in given.items() if array.ndim}

    @cached_property
    def varied(self) -> frozenset[str]:
        """Leaves that hold arrays."""
        return frozenset(self._arrays)

    def values(self, row: Row | None = None) -> Mapping[str, Any]:
        """Every leaf in one block of the batch, or in all of it."""
        if not self._arrays:
            return self.scalars
        extra = (np.newaxis,) * self.trail
        picked = {
            path: (array if row is None else self._picked(array, row))[(..., *extra)]
            for path, array in self._arrays.items()
        }
        return {**self.scalars, **picked}

    def _picked(self, array: Any, row: Row) -> Any:
        own = row[len(row) - array.ndim :]
        spread = (slice(None) if size == 1 else part for size, part in zip(array.shape, own, strict=True))
        return array[tuple(spread)]


def numbers(name: str, value: ArrayLike) -> NDArray[np.float64]:
    """A value as an array of floats.

    Raises
    ------
    Refusal
        Where it is no number and no array of real numbers.
    """
    try:
        array = np.asarray(value)
    except ValueError:  # lists of unequal length
        array = np.asarray(None)
    if array.dtype.kind not in "biuf":
        raise Refusal(f"{name} = {value!r}", "a real number, or an array of them")
    return array.astype(float, copy=False)


def blocks(batch: tuple[int, ...], frequencies: int, *, principal: bool) -> Iterator[tuple[slice, list[Row]]]:
    """Windows of the frequency axis, each with the blocks of the batch to do in it.

    Parameters
    ----------
    batch
        Shape of the batch.
    frequencies
        Length of the frequency axis.
    principal
        Whether three principal axes stand before it; a rule answers all three at once.

    Yields
    ------
    window, rows
        A slice of the frequency axis, and a tuple of slices of the batch axes for each block.

    Examples
    --------
    >>> [(window, len(rows)) for window, rows in blocks((2,), 20000, principal=False)]
    [(slice(0, 16384, None), 2), (slice(16384, 20000, None), 2)]
    """
    room = _BLOCK // 3 if principal else _BLOCK
    parts: list[list[slice]] = []
    for size in (frequencies, *reversed(batch)):
        step = max(1, min(size, room))
        room //= step
        parts.append([slice(start, min(start + step, size)) for start in range(0, size, step)])
    windows, *others = parts
    rows = [tuple(reversed(block)) for block in product(*others)]
    for window in windows:
        yield window, rows
