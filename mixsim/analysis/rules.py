"""Which other rules could apply to a mixture."""

from __future__ import annotations

import numpy as np

from mixsim.mixing import RULES, Rule
from mixsim.mixture import Mixture
from mixsim.recipe import Recipe


def applicable_rules(recipe: Recipe, mixture: Mixture) -> tuple[str, ...]:
    """Names of the rules, other than the mixture's own, that could describe it."""
    others = (rule for rule in RULES.values() if rule is not mixture.rule)
    return tuple(rule.name for rule in others if _applies(rule, recipe, mixture))


def conducts(mixture: Mixture, name: str) -> bool:
    """Whether a constituent conducts at dc, at the numbers of the recipe."""
    phase = next(phase for phase in mixture.phases if phase.name == name)
    return bool(np.any(np.asarray(phase.permittivity.low(mixture.defaults)[0]) > 0.0))


def _applies(rule: Rule, recipe: Recipe, mixture: Mixture) -> bool:
    """Shapes, densities and contact must suit; molecules in vacuum are no alternative to grains in a host."""
    if any(grain.shape is not None for grain in mixture.inclusions) and not rule.takes_shapes:
        return False
    if mixture.density is not None and rule.additive_only:
        return False
    for name, inclusion in recipe.schema.inclusions.items():
        apart = {"insulated": True, "touching": False, None: None}[inclusion.contact]
        if apart is not None and conducts(mixture, name) and apart == (rule.percolation is not None):
            return False
    return rule.homogeneous or not mixture.rule.homogeneous
