"""The mixing rules by name: what each computes, assumes and can be asked.

A new rule is one module, its test and one entry of `RULES`.
"""

from __future__ import annotations

from collections.abc import Mapping

from mixsim.errors import Refusal, nearest
from mixsim.mixing.bruggeman import bruggeman
from mixsim.mixing.bruggeman import fraction_from as bruggeman_fraction
from mixsim.mixing.bruggeman import inclusion_from as bruggeman_inclusion
from mixsim.mixing.bruggeman import percolation_threshold as bruggeman_threshold
from mixsim.mixing.cubic_arrays import CUBIC_RULE
from mixsim.mixing.layers import LAYER_RULES
from mixsim.mixing.lorentz_lorenz import fraction_from as lorentz_lorenz_fraction
from mixsim.mixing.lorentz_lorenz import inclusion_from as lorentz_lorenz_inclusion
from mixsim.mixing.lorentz_lorenz import lorentz_lorenz
from mixsim.mixing.maxwell_garnett import fraction_from as maxwell_garnett_fraction
from mixsim.mixing.maxwell_garnett import inclusion_from as maxwell_garnett_inclusion
from mixsim.mixing.maxwell_garnett import maxwell_garnett
from mixsim.mixing.power_rules import POWER_RULES
from mixsim.mixing.rule import Rule

_CLAUSIUS_MOSSOTTI = "exact: ε_h (1 + 3 f (ε_i − ε_h)/(ε_i + 2 ε_h)) for spheres"

RULES: Mapping[str, Rule] = {
    rule.name: rule
    for rule in (
        Rule(
            name="maxwell-garnett",
            function=maxwell_garnett,
            summary="separate grains in a host, ellipsoids of any kind, random or aligned",
            equation="(ε − ε_h)/(ε + 2ε_h) = Σ f_k (ε_k − ε_h)/(ε_k + 2ε_h) for spheres",
            assumptions="each grain sits in the host, apart from the others, small against the wavelength",
            dilute_limit=_CLAUSIUS_MOSSOTTI,
            valid_for="low to moderate loading of dispersed grains; too low as strong fillers near touching",
            source="J. C. Maxwell Garnett, Phil. Trans. R. Soc. Lond. A 203, 385 (1904)",
            takes_shapes=True,
            takes_aligned=True,
            symmetric=False,
            additive_only=True,
            homogeneous=True,
            fraction_from=maxwell_garnett_fraction,
            inclusion_from=maxwell_garnett_inclusion,
            percolation=None,
        ),
        Rule(
            name="bruggeman",
            function=bruggeman,
            summary="phases on the same footing, in contact at random; spheres or ellipsoids of any kind",
            equation="Σ f_k (ε_k − ε) <1/(ε + N_k (ε_k − ε))> = 0, host and voids as spheres",
            assumptions="no phase is the host; grains, far below a wavelength, see the mixture around them",
            dilute_limit=_CLAUSIUS_MOSSOTTI,
            valid_for="aggregates, porous bodies, away from the threshold: for spheres 1/3, twice the usual",
            source="D. A. G. Bruggeman, Ann. Phys. 416, 636 (1935)",
            takes_shapes=True,
            takes_aligned=True,
            symmetric=True,
            additive_only=True,
            homogeneous=True,
            fraction_from=bruggeman_fraction,
            inclusion_from=bruggeman_inclusion,
            percolation=1.0 / 3.0,
            threshold_of=bruggeman_threshold,
        ),
        Rule(
            name="lorentz-lorenz",
            function=lorentz_lorenz,
            summary="polarisabilities add in vacuum: solutions and glasses with a measured density",
            equation="(ε − 1)/(ε + 2) = Σ φ_k (ε_k − 1)/(ε_k + 2)",
            assumptions="every constituent keeps its molar refraction; the local field is that of Lorentz",
            dilute_limit="not that of grains in a host: the constituents are mixed molecule by molecule",
            valid_for="index of liquids, solutions, glasses at optical frequencies; not polar liquids below",
            source="H. A. Lorentz, Ann. Phys. 245, 641 (1880); L. Lorenz, Ann. Phys. 247, 70 (1880)",
            takes_shapes=False,
            takes_aligned=False,
            symmetric=True,
            additive_only=False,
            homogeneous=False,
            fraction_from=lorentz_lorenz_fraction,
            inclusion_from=lorentz_lorenz_inclusion,
            percolation=None,
            bounds="none",
            dilute_exact=False,
        ),
        *POWER_RULES,
        *LAYER_RULES,
        CUBIC_RULE,
    )
}


def rule_named(name: str) -> Rule:
    """Rule of this name.

    Parameters
    ----------
    name
        Word as in the recipe.

    Returns
    -------
    rule
        Its entry in `RULES`.

    Raises
    ------
    Refusal
        Where there is no such rule; it names those that there are and the nearest.

    Examples
    --------
    >>> rule_named("bruggeman").percolation
    0.3333333333333333
    """
    try:
        return RULES[name]
    except KeyError:
        raise Refusal(f"rule {name!r}", f"one of {', '.join(RULES)}", nearest(name, RULES)) from None
