"""What a mixture answers."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from numpy.typing import NDArray

Array = NDArray[Any]


@dataclass(frozen=True, eq=False)
class Response:
    """Permittivity and permeability over frequency.

    Attributes
    ----------
    permittivity, permeability
        Relative, complex, in the convention exp(−iωt) [-]; shape: batch, three principal axes where grains
        are aligned, frequency.
    """

    permittivity: Array
    permeability: Array


@dataclass(frozen=True, eq=False)
class Limits:
    """Exact limits of the model; NaN where there is none.

    Attributes
    ----------
    static
        Permittivity as ω → 0 [-]; NaN where the mixture conducts or a constituent has no static limit.
    high_frequency
        Permittivity as ω → ∞ [-]; NaN where a constituent has none.
    conductivity
        Conductivity at dc [S/m]; zero where the mixture insulates.
    plateau
        Real level beside the conduction as ω → 0 [-]; that of the static permittivity where it insulates,
        infinite where conductors in an insulator are at their percolation threshold.
    static_permeability, high_frequency_permeability
        The same limits of the permeability [-].

    Each has the batch shape, followed by the three principal axes where grains are aligned.
    """

    static: Array
    high_frequency: Array
    conductivity: Array
    plateau: Array
    static_permeability: Array
    high_frequency_permeability: Array


@dataclass(frozen=True, eq=False)
class Composition:
    """What stands in a volume of the mixture.

    Attributes
    ----------
    volume_fractions
        By name of the constituent ("host", the inclusions, "voids"), of the whole mixture [-].
    weight_fractions
        By the same names [-]; None where a density is missing.
    density
        Density of the mixture [kg/m^3], or None.
    number_densities
        Absorbing ions per volume of host, by name of the dopant [1/m^3].
    """

    volume_fractions: Mapping[str, Array]
    weight_fractions: Mapping[str, Array] | None
    density: Array | None
    number_densities: Mapping[str, Array]
