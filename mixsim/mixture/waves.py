"""Spheres in which, and around which, waves count: the small homogeneous spheres that they equal."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from typing import Any, Literal

import numpy as np

from mixsim.mixing import dipole_grain, inside_factor
from mixsim.mixture.inputs import Input, Values, paths_of
from mixsim.mixture.spectra import UNKNOWN, Here, Spectrum, held
from mixsim.units import SPEED_OF_LIGHT

Waves = Literal["none", "inside", "dipole"]


@dataclass(frozen=True, eq=False)
class Wave:
    """ε, or μ, of the small sphere that a sphere with waves equals.

    Attributes
    ----------
    permittivity, permeability
        Of the sphere itself.
    host_permittivity, host_permeability
        Around it.
    diameter
        Of the sphere.
    waves
        "inside" for those in the sphere alone; "dipole" for those around it too.
    of_field
        Which of its two responses is meant.
    """

    permittivity: Spectrum
    permeability: Spectrum
    host_permittivity: Spectrum
    host_permeability: Spectrum
    diameter: Input
    waves: Waves
    of_field: Literal["electric", "magnetic"] = "electric"

    @property
    def magnetic(self) -> Wave:
        """Its permeability, which eddy currents and waves make differ from one."""
        return replace(self, of_field="magnetic")

    @property
    def _spectra(self) -> tuple[Spectrum, Spectrum, Spectrum, Spectrum]:
        return self.permittivity, self.permeability, self.host_permittivity, self.host_permeability

    @cached_property
    def paths(self) -> frozenset[str]:
        return paths_of((*self._spectra, self.diameter))

    def at(self, x: Values, omega: Any) -> Any:
        return self._whole(x, omega, [part.at(x, omega) for part in self._spectra])

    def low(self, x: Values) -> tuple[Any, Any]:
        """As of the sphere itself; eddy currents take σ²μR²/(10 ε₀²c²) off the plateau of a conductor."""
        rate, plateau = self.permittivity.low(x)
        magnetic, level = self.permeability.low(x)
        if self.of_field == "magnetic":
            return magnetic, np.where(np.isinf(rate), UNKNOWN, level)
        conducts = np.where(np.isinf(rate), 0.0, rate)
        time = 0.5 * self.diameter(x) / SPEED_OF_LIGHT
        return rate, plateau - (conducts * time) ** 2 * level / 10.0

    def high(self, x: Values) -> Any:
        return UNKNOWN

    def held(self, x: Values, omega: Any, varied: frozenset[str]) -> Here:
        """As a function of the leaves that vary; spectra that do not depend on them are computed now."""
        parts = [held(part, x, omega, varied) for part in self._spectra]
        return lambda x: self._whole(x, omega, [part(x) for part in parts])

    def _whole(self, x: Values, omega: Any, parts: Sequence[Any]) -> Any:
        electric, magnetic, around, around_magnetic = (np.asarray(part, dtype=complex) for part in parts)
        size = 0.5 * omega * self.diameter(x) / SPEED_OF_LIGHT
        inside = inside_factor(np.sqrt(electric) * np.sqrt(magnetic) * size)
        own = inside * (electric if self.of_field == "electric" else magnetic)
        if self.waves == "inside":
            return own
        outside = np.sqrt(around) * np.sqrt(around_magnetic) * size
        host = around if self.of_field == "electric" else around_magnetic
        return dipole_grain(own, host=host, size=outside)
