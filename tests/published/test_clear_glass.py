"""Index formulas of glass catalogues at random in their windows: no gain, no limits.

A formula of a window says nothing of dc, so a material described by one has no static limit of its own.
"""

from __future__ import annotations

import evaluator
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

WINDOWS = {"schott": (0.4, 1.6), "conrady": (0.4, 0.8), "herzberger": (1.5, 10.0), "abbe": (0.43, 0.70)}
SIZES = {  # of the coefficients after the first, as glasses and infrared windows have them
    "schott": (0.02, 0.02, 1e-3, 1e-4, 1e-5),
    "conrady": (0.03, 0.002),
    "herzberger": (0.3, 0.1, 1e-3, 1e-6, 1e-9),
}
UNIT = st.floats(-1.0, 1.0)


@st.composite
def indices(draw: st.DrawFn, model: str) -> str:
    """An index of a model as a recipe writes it."""
    n = draw(st.floats(1.3, 2.1))
    if model == "abbe":
        return f'{{ model = "abbe", n = {n!r}, abbe_number = {draw(st.floats(15.0, 95.0))!r} }}'
    first = n * n if model == "schott" else n
    rest = [size * draw(UNIT) for size in SIZES[model]]
    return f'{{ model = "{model}", coefficients = {[first, *rest]!r} }}'


@pytest.mark.parametrize("model", WINDOWS)
@settings(max_examples=40)
@given(data=st.data())
def test_clear_in_its_window_and_without_limits(model: str, data: st.DataObject) -> None:
    text = f'host.material = "glass"\nmaterials.glass.index = {data.draw(indices(model))}\n'
    omega = evaluator.from_um(np.linspace(*WINDOWS[model], 41))
    glass = evaluator.mixture(text)
    alone = glass.response({}, omega).permittivity
    assert np.all(alone.imag == 0.0) and not np.signbit(alone.imag).any()
    assert np.all((alone.real > 1.0) & (alone.real < 9.0))
    limits = glass.limits({})
    assert np.isnan(limits.static) and np.isnan(limits.high_frequency)
    # with grains that absorb: loss, never gain
    text += """
        inclusions.soot = { material = "soot", volume_fraction = "10 %" }
        materials.soot.index = { model = "constant", n = 1.8, k = 0.6 }
    """
    mixed = evaluator.mixture(text).response({}, omega).permittivity
    assert np.all((mixed.imag > 0.0) & (mixed.imag < 2.0 * 1.8 * 0.6))
