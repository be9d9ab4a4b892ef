"""Which other rules could apply to a mixture."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np

from mixsim.mixing import RULES, SPHERE, Rule
from mixsim.mixture import Mixture
from mixsim.recipe import Recipe

STRONG = 10.0  # contrast beyond which rules that miss the dilute limit are no alternative


def applicable_rules(recipe: Recipe, mixture: Mixture) -> tuple[str, ...]:
    """Names of the rules, other than the mixture's own, that could describe it."""
    return tuple(rule.name for rule in _others(recipe, mixture) if not mixture.lacking(rule))


def lacking_rules(recipe: Recipe, mixture: Mixture) -> Mapping[str, tuple[str, ...]]:
    """Rules that could describe the mixture, were the recipe to give what they need: name → parameters."""
    missing = {rule.name: mixture.lacking(rule) for rule in _others(recipe, mixture)}
    return {name: parameters for name, parameters in missing.items() if parameters}


def _others(recipe: Recipe, mixture: Mixture) -> list[Rule]:
    others = (rule for rule in RULES.values() if rule is not mixture.rule)
    return [rule for rule in others if _applies(rule, recipe, mixture)]


def conducts(mixture: Mixture, name: str) -> bool:
    """Whether a constituent conducts at dc where it is touched, at the numbers of the recipe."""
    phase = next(phase for phase in mixture.phases if phase.name == name)
    phase = phase.shells[-1] if phase.shells else phase
    return bool(np.any(np.asarray(phase.permittivity.low(mixture.defaults)[0]) > 0.0))


def threshold(mixture: Mixture, fractions: Mapping[str, float]) -> float | None:
    """Fraction from which some conducting inclusions conduct through the mixture, by their shapes.

    Parameters
    ----------
    mixture
        The mixture; its rule and its shapes, at the numbers of the recipe.
    fractions
        Volume fraction of each conducting inclusion, by name.

    Returns
    -------
    threshold
        Of the sum of these fractions [-]; None under a rule that keeps grains apart. Along the principal
        axis that conducts first, where there are any.
    """
    rule = mixture.rule
    if rule.percolation is None or rule.threshold_of is None:
        return rule.percolation
    grains = [grain for grain in mixture.inclusions if grain.name in fractions]
    shapes = [SPHERE if grain.shape is None else grain.shape(mixture.defaults) for grain in grains]
    with np.errstate(divide="ignore"):
        each = [1.0 / rule.threshold_of(shape) for shape in shapes]
    parts = [fractions[grain.name] for grain in grains]
    if not sum(parts) > 0.0:
        parts = [1.0] * len(grains)
    inverse = sum((part * one for part, one in zip(parts, each, strict=True)), start=np.asarray(0.0))
    return float(np.min(sum(parts) / inverse))


def _strong(mixture: Mixture) -> bool:
    """Whether a phase conducts, or stands so far off the host that a mean of powers says nothing."""
    x = mixture.defaults
    levels = []
    for phase in mixture.phases:
        rate, low = phase.permittivity.low(x)
        if np.any(np.asarray(rate) != 0.0):
            return True
        levels.append([complex(np.ravel(level)[0]) for level in (low, phase.permittivity.high(x))])
    host, *others = np.abs(np.array(levels))
    with np.errstate(divide="ignore", invalid="ignore"):
        apart = [np.maximum(other / host, host / other) for other in others]
    return any(bool(np.nanmax(ratio, initial=1.0) > STRONG) for ratio in apart)


def _applies(rule: Rule, recipe: Recipe, mixture: Mixture) -> bool:
    """Shapes, densities and contact must suit; molecules in vacuum are no alternative to grains in a host."""
    if any(grain.shape is not None for grain in mixture.inclusions) and not rule.takes_shapes:
        return False
    if mixture.density is not None and rule.additive_only:
        return False
    if rule.ordered and not mixture.rule.ordered:
        return False
    if not rule.dilute_exact and rule.homogeneous and _strong(mixture):
        return False
    if rule.most_phases is not None and len(mixture.phases) > rule.most_phases:
        return False
    for name, inclusion in recipe.schema.inclusions.items():
        apart = {"insulated": True, "touching": False, None: None}[inclusion.contact]
        if apart is not None and conducts(mixture, name) and apart == (rule.percolation is not None):
            return False
    return rule.homogeneous or not mixture.rule.homogeneous
