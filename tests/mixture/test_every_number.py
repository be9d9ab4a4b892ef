"""Every number of every shipped recipe is at work, and varying it is the same as writing it in the recipe."""

from __future__ import annotations

import re
from pathlib import Path

import numpy as np
import pytest

import mixsim
from mixsim.mixture import Mixture
from mixsim.recipe.agreement import of_mixture

ROOT = Path(__file__).parents[2]
RECIPES = sorted([*ROOT.glob("configs/*.toml"), *ROOT.glob("examples/*/recipe.toml")])
NUMBER = re.compile(r"\d+(\.\d*)?([eE][-+]?\d+)?")


def nudged(written: str) -> str:
    """A quantity one per cent larger, as a person would write it."""
    return NUMBER.sub(lambda n: repr(1.01 * float(n[0]) or 0.01), str(written), count=1)


def answers(compiled: Mixture, values: dict[str, float], omega: np.ndarray) -> dict[str, np.ndarray]:
    composition = compiled.composition(values)
    return {
        **vars(compiled.response(values, omega)),
        **vars(compiled.limits(values)),
        **{f"volume of {name}": value for name, value in composition.volume_fractions.items()},
        **{f"weight of {name}": value for name, value in (composition.weight_fractions or {}).items()},
        **{f"ions of {name}": value for name, value in composition.number_densities.items()},
        "density": np.nan if composition.density is None else composition.density,
    }


def inside(recipe: mixsim.Recipe) -> np.ndarray:
    """A few frequencies of the band, off its very ends, where a table may end too."""
    ends = [leaf.value for path, leaf in recipe.leaves.items() if re.match(r"band\.(from|to|values)", path)]
    return (
        np.geomspace(min(ends) * (1 + 1e-9), max(ends) * (1 - 1e-9), 5) if len(ends) > 1 else np.array(ends)
    )


@pytest.mark.parametrize("file", RECIPES, ids=lambda file: f"{file.parent.name}/{file.stem}")
def test_every_number_does_something_and_is_what_setting_it_gives(file: Path) -> None:
    warm = {"conditions.temperature": "310 K"}  # or what tells of temperature would have nothing to do
    recipe = mixsim.load(file, warm)
    compiled, omega = recipe.compile(), inside(recipe)
    plain, idle = answers(compiled, {}, omega), set()
    for path, leaf in recipe.leaves.items():
        if not of_mixture(path):
            continue
        written = mixsim.load(file, {**warm, path: nudged(leaf.written)})
        varied = answers(compiled, {path: written.leaves[path].value}, omega)
        for name, value in answers(written.compile(), {}, omega).items():
            assert np.array_equal(varied[name], value, equal_nan=True), (path, name)
        if all(np.array_equal(varied[name], value, equal_nan=True) for name, value in plain.items()):
            idle.add(path)
    # a diameter serves the cautions, a molar mass only those who dope by mole
    named = (".diameter", ".molar_mass", "conditions.temperature")
    assert all(path.endswith(named) for path in idle), idle
    if any(dopant.mole_fraction for dopant in recipe.schema.dopants.values()):
        assert f"materials.{recipe.schema.host.material}.molar_mass" not in idle


def test_far_from_every_band_the_response_is_its_limit() -> None:
    """Both limits of the shipped recipes whose materials are formulas without end: no table, no glass."""
    checked = []
    for file in RECIPES:
        recipe = mixsim.load(file)
        if recipe.tables or any(
            m.index and m.index.model != "constant" for m in recipe.schema.materials.values()
        ):
            continue
        checked.append(file.stem)
        compiled = recipe.compile()
        limits, (low, high) = compiled.limits({}), compiled.response({}, np.array([1e-3, 1e30])).permittivity
        assert high == pytest.approx(limits.high_frequency, rel=1e-9), file
        assert low.real == pytest.approx(limits.plateau, rel=1e-9), file
        assert np.isnan(limits.static) or low == pytest.approx(limits.static, rel=1e-9), file
    assert {"iron-absorber", "glycerol-coolant", "ceramic-laminate"} <= set(checked)
