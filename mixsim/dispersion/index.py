"""The register of index models.

A new index model is one function in `index_formulas`, its test and one entry of `INDEX_MODELS`.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Any

from mixsim.dispersion.index_formulas import abbe, cauchy, conrady, constant, herzberger, schott, sellmeier
from mixsim.parameter import Parameter, by_name, not_negative, positive


@dataclass(frozen=True, slots=True)
class IndexModel:
    """One registered index model.

    Attributes
    ----------
    name
        Word in the recipe.
    function
        ``function(omega, **parameters)``: complex refractive index.
    parameters
        Every parameter that a recipe may write, by name.
    one_of
        Parameters of which exactly one must be given.
    count
        How many numbers its list of coefficients holds; 0 where any number will do.
    constant
        Whether its square is its limit both at ω → 0 and at ω → ∞; the others have no limits.
    summary, equation, source
        What a person wants to know of it, as text.
    """

    name: str
    function: Callable[..., Any]
    parameters: Mapping[str, Parameter]
    summary: str
    equation: str
    source: str
    one_of: tuple[str, ...] = ()
    count: int = 0
    constant: bool = False

    @property
    def required(self) -> tuple[str, ...]:
        """Parameters that must always be given."""
        return tuple(
            p.name for p in self.parameters.values() if p.default is None and p.name not in self.one_of
        )

    @property
    def lists(self) -> tuple[str, ...]:
        """Parameters that take a list."""
        return tuple(p.name for p in self.parameters.values() if p.is_list)


_COEFFICIENTS = Parameter(
    "coefficients",
    "number",
    None,
    False,
    None,
    "plain numbers, in their order, for wavelengths in µm",
    is_list=True,
)
_RESONANCES = ("resonance_wavelengths", "resonance_wavelengths_squared")

INDEX_MODELS: Mapping[str, IndexModel] = {
    model.name: model
    for model in (
        IndexModel(
            name="constant",
            function=constant,
            parameters=by_name(
                positive("n", "number", "refractive index"),
                not_negative("k", "number", "extinction coefficient", default=0.0),
            ),
            summary="one index at every frequency",
            equation="n + ik",
            source="common practice",
            constant=True,
        ),
        IndexModel(
            name="cauchy",
            function=cauchy,
            parameters=by_name(
                positive("a", "number", "index at long wavelengths"),
                Parameter("b", "area", None, False, 0.0, "coefficient of 1/λ²"),
                Parameter("c", "fourth power of length", None, False, 0.0, "coefficient of 1/λ⁴"),
            ),
            summary="power series in 1/λ² for a clear window",
            equation="n = a + b/λ² + c/λ⁴",
            source="A. L. Cauchy, Mémoire sur la dispersion de la lumière, 1836",
        ),
        IndexModel(
            name="sellmeier",
            function=sellmeier,
            parameters=by_name(
                Parameter("strengths", "number", None, False, None, "strengths B_j", is_list=True),
                Parameter(
                    _RESONANCES[0], "length", 0.0, False, None, "resonance wavelengths λ_j", is_list=True
                ),
                Parameter(_RESONANCES[1], "area", 0.0, False, None, "their squares λ_j²", is_list=True),
            ),
            one_of=_RESONANCES,
            summary="loss-free resonances on either side of a clear window",
            equation="n² = 1 + Σ B_j λ²/(λ² − λ_j²)",
            source="W. Sellmeier, Ann. Phys. 223, 386 (1872)",
        ),
        IndexModel(
            name="schott",
            function=schott,
            parameters=by_name(_COEFFICIENTS),
            count=6,
            summary="polynomial of older glass catalogues",
            equation="n² = A₀ + A₁λ² + A₂λ⁻² + A₃λ⁻⁴ + A₄λ⁻⁶ + A₅λ⁻⁸, λ in µm",
            source="common form of glass catalogues",
        ),
        IndexModel(
            name="conrady",
            function=conrady,
            parameters=by_name(_COEFFICIENTS),
            count=3,
            summary="three readings in the visible",
            equation="n = A + B/λ + C/λ^3.5, λ in µm",
            source="A. E. Conrady, Applied Optics and Optical Design, Part II, 1960",
        ),
        IndexModel(
            name="herzberger",
            function=herzberger,
            parameters=by_name(_COEFFICIENTS),
            count=6,
            summary="infrared windows",
            equation="n = A + BL + CL² + Dλ² + Eλ⁴ + Fλ⁶, L = 1/(λ² − 0.028), λ in µm",
            source="M. Herzberger, C. D. Salzberg, J. Opt. Soc. Am. 52, 420 (1962)",
        ),
        IndexModel(
            name="abbe",
            function=abbe,
            parameters=by_name(
                positive("n", "number", "refractive index at the yellow helium line, 587.6 nm"),
                positive("abbe_number", "number", "Abbe number V_d"),
            ),
            summary="index and Abbe number of a glass, for the visible",
            equation="n = n_d + B (1/λ² − 1/λ_d²), B from n_F − n_C = (n_d − 1)/V_d",
            source="definition of the Abbe number, ISO 7944",
        ),
    )
}
