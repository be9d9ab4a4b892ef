"""What a mixing rule takes of its own: leaves and words of the recipe, refused where they have no part."""

from __future__ import annotations

import numpy as np
import pytest

import mixsim
from mixsim.analysis.rules import applicable_rules, lacking_rules
from mixsim.errors import BadInput, Refusal
from mixsim.mixing.power_mean import looyenga, power_law
from mixsim.recipe import Recipe

TEXT = """
host.material = "matrix"
inclusions.grain = { material = "grain", volume_fraction = "20 %" }
materials.matrix.permittivity.infinity = 2.0
materials.grain.permittivity.infinity = 9.0
"""
POWER = TEXT + 'mixing = { rule = "power-law", exponent = "0.5 ± 0.1" }\n'
CUBIC = TEXT + 'mixing = { rule = "rayleigh-cubic", lattice = "body-centered" }\n'
OMEGA = np.array([1e12])


def recipe(text: str, **settings: str) -> Recipe:
    return mixsim.parse(text, settings={k.replace("__", "."): v for k, v in settings.items()})


def refused(text: str, **settings: str) -> str:
    with pytest.raises(BadInput) as caught:
        recipe(text, **settings)
    (fault,) = caught.value.faults
    return f"{fault.path}: {fault.found}; {fault.allowed}; {fault.suggestion}"


def test_a_number_is_a_leaf_that_is_varied_and_freed() -> None:
    loaded = recipe(POWER)
    assert loaded.leaves["mixing.exponent"].std == 0.1
    exponents = np.array([-1.0, 0.0, 1 / 3, 1.0])
    answer = loaded.compile().response({"mixing.exponent": exponents[:, None]}, OMEGA).permittivity
    alone = power_law([2.0, 9.0], fractions=[0.8, 0.2], exponent=exponents)
    assert answer[:, 0, 0] == pytest.approx(alone, rel=1e-14)
    asked = recipe(POWER + 'measured.static = 3.0\nunknowns."mixing.exponent" = [0, 1]\n')
    found = mixsim.invert(asked).estimates["mixing.exponent"].value
    check = asked.compile().limits({"mixing.exponent": found}).static
    assert check == pytest.approx(3.0, rel=1e-9)


def test_a_word_takes_either_spelling() -> None:
    assert recipe(CUBIC).compile().parameters({}) == {"lattice": "body-centred"}


def test_what_a_rule_does_not_take_or_lacks_is_refused_by_name() -> None:
    said = refused(POWER.replace("power-law", "bruggeman"))
    assert said.startswith("mixing.exponent: exponent with the rule bruggeman; bruggeman takes no parameter")
    assert "power-law" in said
    said = refused(POWER.replace(', exponent = "0.5 ± 0.1"', ""))
    assert said.startswith("mixing: exponent is missing; the rule power-law needs it: the power that adds")
    said = refused(CUBIC.replace("body-centered", "body-centrd"))
    assert said.startswith("mixing.lattice: unknown lattice 'body-centrd'") and said.endswith("body-centred")
    assert "at most 1" in refused(POWER, mixing__exponent="1.5")
    assert "room for 0.6802" in refused(CUBIC, inclusions__grain__volume_fraction="70 %")
    assert "rayleigh-cubic takes 2 phases" in refused(CUBIC + "voids.volume_fraction = 0.01\n")


def test_another_rule_drops_what_only_the_former_took() -> None:
    changed = recipe(POWER, mixing__rule="looyenga")
    assert "mixing.exponent" not in changed.leaves
    answer = changed.compile().response({}, OMEGA).permittivity
    assert answer[0] == looyenga([2.0, 9.0], fractions=[0.8, 0.2])
    kept = recipe(TEXT, mixing__rule="power-law", mixing__exponent="0.5")
    assert kept.leaves["mixing.exponent"].value == 0.5


def test_comparisons_leave_out_what_lacks_a_parameter_with_a_word() -> None:
    loaded = recipe(TEXT + 'measured.static = 3.0\nunknowns."inclusions.grain.volume_fraction" = [0, 0.5]\n')
    mixture = loaded.compile()
    assert "power-law" not in applicable_rules(loaded, mixture)
    assert lacking_rules(loaded, mixture)["power-law"] == ("exponent",)
    with pytest.raises(Refusal, match="power-law without exponent"):
        mixture.with_rule("power-law")
    by_rule = {answer.rule: answer.reason for answer in mixsim.invert(loaded).by_rule}
    assert by_rule["power-law"] == "left out: it needs mixing.exponent"
