"""Predict the mixture of a recipe over its band, and sweep any of its numbers."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from mixsim.analysis.band import Axis, Varied, axis_of, through
from mixsim.analysis.caution import Caution
from mixsim.analysis.cautions import cautions
from mixsim.analysis.plain import complex_parts, plain, provenance
from mixsim.analysis.pushed import Pushed, pushed
from mixsim.analysis.reach import within_tables
from mixsim.errors import BadInput, Fault
from mixsim.mixture import Composition, Limits, Mixture, Response
from mixsim.observables import QUANTITIES
from mixsim.recipe import COMMAND_LINE, Recipe
from mixsim.units import SPEED_OF_LIGHT

LARGEST = 40_000_000  # complex numbers in one answer, 0.6 GB
CONVENTION = "exp(-iwt)"


@dataclass(frozen=True)
class Prediction:
    """Response of a mixture over a band.

    Attributes
    ----------
    recipe
        What was asked.
    rule
        Name of the mixing rule.
    axis
        Frequencies.
    response
        Permittivity and permeability [-].
    limits
        Exact static and high-frequency limits [-].
    composition
        Fractions and density.
    constituents
        Host and inclusions on their own, at the numbers of the recipe, by name.
    warnings
        Cautions.
    magnetic
        Whether any constituent has a permeability other than one.
    vary
        Leaves that vary, one leading axis each; none in a plain prediction.
    pushed
        Uncertainty from the ± of the recipe; None in a sweep, or where it states none.
    """

    recipe: Recipe
    rule: str
    axis: Axis
    response: Response
    limits: Limits
    composition: Composition
    constituents: Mapping[str, Response]
    warnings: tuple[Caution, ...]
    magnetic: bool
    vary: tuple[Varied, ...] = ()
    pushed: Pushed | None = None

    @property
    def omega(self) -> Any:
        """Angular frequencies [rad/s]."""
        return self.axis.omega

    @property
    def permittivity(self) -> Any:
        """Relative permittivity [-]."""
        return self.response.permittivity

    @property
    def permeability(self) -> Any:
        """Relative permeability [-]."""
        return self.response.permeability

    def quantity(self, name: str) -> Any:
        """A quantity of `mixsim.observables.QUANTITIES` by its name, in SI."""
        return QUANTITIES[name].function(self.axis.omega, self.permittivity, self.permeability)

    def to_dict(self) -> dict[str, Any]:
        """As JSON holds it: SI, fractions 0…1, null where there is no value."""
        limits, composition = self.limits, self.composition
        varied = {item.path: plain(item.values) for item in self.vary}
        return {
            "title": self.recipe.schema.title,
            "rule": self.rule,
            "convention": CONVENTION,
            **({"vary": varied} if self.vary else {}),
            "omega_rad_s": plain(self.axis.omega),
            "frequency_hz": plain(self.axis.omega / (2 * np.pi)),
            "wavelength_m": plain(2 * np.pi * SPEED_OF_LIGHT / self.axis.omega),
            "permittivity": complex_parts(self.permittivity),
            "permeability": complex_parts(self.permeability),
            "index": {"n": plain(self.quantity("index")), "k": plain(self.quantity("extinction"))},
            "loss_tangent": plain(self.quantity("loss_tangent")),
            "magnetic_loss_tangent": plain(self.quantity("magnetic_loss_tangent")),
            "absorption_coefficient_per_m": plain(self.quantity("absorption_coefficient")),
            "conductivity_s_per_m": plain(self.quantity("conductivity")),
            "static": complex_parts(limits.static),
            "high_frequency": complex_parts(limits.high_frequency),
            "static_permeability": complex_parts(limits.static_permeability),
            "high_frequency_permeability": complex_parts(limits.high_frequency_permeability),
            "dc": {"conductivity_s_per_m": plain(limits.conductivity), "plateau": plain(limits.plateau)},
            "standard_uncertainty": None
            if self.pushed is None
            else {
                "permittivity": {"real": plain(self.pushed.real), "imag": plain(self.pushed.imag)},
                "permeability": {
                    "real": plain(self.pushed.permeability_real),
                    "imag": plain(self.pushed.permeability_imag),
                },
                "static": plain(self.pushed.static),
                "high_frequency": plain(self.pushed.high_frequency),
                "static_permeability": plain(self.pushed.static_permeability),
                "high_frequency_permeability": plain(self.pushed.high_frequency_permeability),
                "from": list(self.pushed.paths),
            },
            "composition": {
                "volume_fraction": {n: plain(f) for n, f in composition.volume_fractions.items()},
                "weight_fraction": None
                if composition.weight_fractions is None
                else {n: plain(w) for n, w in composition.weight_fractions.items()},
                "density_kg_per_m3": None if composition.density is None else plain(composition.density),
                "number_density_per_m3": {n: plain(d) for n, d in composition.number_densities.items()},
            },
            "warnings": [caution.to_dict() for caution in self.warnings],
            "provenance": provenance(self.recipe),
        }


def predict(recipe: Recipe) -> Prediction:
    """Response of the mixture over the band of its recipe.

    Parameters
    ----------
    recipe
        A checked recipe, with a band.

    Returns
    -------
    prediction
        Spectra, limits, composition and cautions.

    Raises
    ------
    BadInput
        Where the recipe has no band, or a table does not reach.

    Examples
    --------
    >>> import mixsim
    >>> recipe = mixsim.parse('''
    ...     band.values = ["10 GHz"]
    ...     host.material = "polyethylene"
    ... ''')
    >>> print(f"{mixsim.predict(recipe).permittivity[0].real:.2f}")
    2.30
    """
    return _evaluated(recipe, ())


def sweep(recipe: Recipe, vary: Sequence[Varied] | Mapping[str, ArrayLike]) -> Prediction:
    """Response of the mixture over its band, for every combination of some leaves' values.

    Parameters
    ----------
    recipe
        A checked recipe, with a band.
    vary
        Leaves and their values: path → numbers in SI, or as `mixsim.analysis.varied` makes them from text.
        Each adds a leading axis.

    Returns
    -------
    prediction
        With one leading axis for each of them.

    Raises
    ------
    BadInput
        Where a value lies outside its range, the host has no room left, or the grid is too large.

    Examples
    --------
    >>> import mixsim
    >>> recipe = mixsim.parse('''
    ...     band.values = ["10 GHz"]
    ...     host.material = "polyethylene"
    ...     inclusions.filler = { material = "alumina", volume_fraction = "20 %" }
    ... ''')
    >>> swept = mixsim.sweep(recipe, {"inclusions.filler.volume_fraction": [0.0, 0.1, 0.2]})
    >>> print(swept.limits.static.real.round(2))
    [2.3  2.68 3.1 ]
    """
    if isinstance(vary, Mapping):
        vary = [through(recipe, path, values) for path, values in vary.items()]
    paths = [item.path for item in vary]
    if not paths:
        raise BadInput([Fault(COMMAND_LINE, "--vary", "nothing varies", "give --vary PATH FROM TO POINTS")])
    for path in paths:
        if paths.count(path) > 1:
            raise BadInput([Fault(COMMAND_LINE, "--vary", f"{path} varies twice", "one axis for each path")])
    return _evaluated(recipe, tuple(vary))


def _evaluated(recipe: Recipe, vary: tuple[Varied, ...]) -> Prediction:
    mixture, axis = recipe.compile(), axis_of(recipe)
    size = len(axis.omega) * math.prod(len(item.values) for item in vary)
    if size > LARGEST:
        found = f"a grid of {size:.3g} values"
        raise BadInput([Fault(COMMAND_LINE, "--vary", found, f"at most {LARGEST:.3g} in one answer")])
    values = {
        item.path: item.values.reshape((-1, *[1] * (len(vary) - 1 - place)))
        for place, item in enumerate(vary)
    }
    composition = mixture.composition(values)
    _room(mixture, composition, vary)
    within_tables(recipe, mixture, axis.omega)
    response = mixture.response(values, axis.omega)
    constituents = mixture.constituents(axis.omega)
    limits = mixture.limits(values)
    said = cautions(recipe, mixture, axis, response, limits, composition, constituents, vary)
    rule, magnetic = mixture.rule.name, mixture.magnetic
    unsure = None if vary else pushed(recipe, mixture, axis.omega)
    return Prediction(
        recipe, rule, axis, response, limits, composition, constituents, said, magnetic, vary, unsure
    )


def _room(mixture: Mixture, composition: Composition, vary: tuple[Varied, ...]) -> None:
    """Refuse a sweep in which the host has no room left, unless a measured density says otherwise."""
    left = composition.volume_fractions["host"]
    if mixture.density is None and np.any(left < -1e-12):
        where = np.unravel_index(int(np.argmin(left)), left.shape)
        at = ", ".join(
            f"{item.path} = {item.shown[i]:.6g} {item.unit}".rstrip()
            for item, i in zip(vary, where, strict=True)
        )
        found = f"at {at} the volume fractions add up to {1.0 - float(left[where]):.6g}"
        raise BadInput([Fault(COMMAND_LINE, "--vary", found, "the sum is at most 1")])
