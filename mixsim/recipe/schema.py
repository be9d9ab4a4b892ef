"""The recipe's schema: which keys there are, and what each holds.

Annotations are real here, not text: a model of text is evaluated piece by piece, which costs at start-up.
"""

import math
from collections.abc import Mapping
from functools import reduce
from operator import or_
from typing import TYPE_CHECKING, Annotated, Any, Literal

from pydantic import BaseModel, ConfigDict, Discriminator, Field, Tag, create_model

from mixsim.dispersion import INDEX_MODELS, TERMS
from mixsim.dispersion.laws import LAWS
from mixsim.mixing import RULES
from mixsim.parameter import Choice, Parameter
from mixsim.recipe.leaves import Ends, Number, Span
from mixsim.units import Leaf

NAME_PATTERN = r"^[A-Za-z0-9_-]+$"
Name = Annotated[str, Field(pattern=NAME_PATTERN)]

Susceptibility = Annotated[Leaf, Number("number", minimum=-1.0, exclusive=True)]
Positive = Annotated[Leaf, Number("number", minimum=0.0, exclusive=True)]
Plain = Annotated[Leaf, Number("number")]
NotNegative = Annotated[Leaf, Number("number", minimum=0.0)]
Order = Annotated[Leaf, Number("number", minimum=-0.5, maximum=1.0)]
Parts = Annotated[Leaf, Number("number", minimum=0.0)]
Fraction = Annotated[Leaf, Number("fraction", minimum=0.0, maximum=1.0)]
Spectral = Annotated[Leaf, Number("spectral", minimum=0.0, exclusive=True)]
Temperature = Annotated[Leaf, Number("temperature", minimum=0.0, exclusive=True)]
PerKelvin = Annotated[Leaf, Number("temperature coefficient")]
Mass = Annotated[Leaf, Number("mass", minimum=0.0, exclusive=True)]
Volume = Annotated[Leaf, Number("volume", minimum=0.0, exclusive=True)]
Surface = Annotated[Leaf, Number("surface", minimum=0.0, exclusive=True)]
Length = Annotated[Leaf, Number("length", minimum=0.0, exclusive=True)]
Density = Annotated[Leaf, Number("density", minimum=0.0, exclusive=True)]
Conductivity = Annotated[Leaf, Number("conductivity")]
MolarMass = Annotated[Leaf, Number("molar mass", minimum=0.0, exclusive=True)]
NumberDensity = Annotated[Leaf, Number("number density", minimum=0.0)]


class Section(BaseModel):
    """One table of a recipe."""

    # deferred: only the whole recipe is ever validated, so its parts need no validators of their own
    model_config = ConfigDict(
        extra="forbid", frozen=True, populate_by_name=True, protected_namespaces=(), defer_build=True
    )


class OfIndex(Section):
    """What any index may say beside its model."""

    reference: Literal["vacuum", "air"] | None = Field(
        default=None, description="medium that the index refers to; vacuum if left out"
    )
    dn_dt: PerKelvin | None = Field(default=None, description="change of the index per kelvin")
    thermo_optic: Annotated[list[Plain], Field(min_length=6, max_length=6)] | None = Field(
        default=None, description="D0, D1, D2, E0, E1 and λ_TK of a glass catalogue, for wavelengths in µm"
    )


def _model_section(
    name: str, parameters: Mapping[str, Parameter], summary: str, base: type[Section] = Section
) -> type[Section]:
    """Table of one registered term or index model, made from its registry entry."""
    fields: dict[str, Any] = {"model": (Literal[name], Field(description=summary))}
    fields |= {key: _field(parameter) for key, parameter in parameters.items()}
    return create_model("".join(part.title() for part in name.split("-")), __base__=base, **fields)


def _field(parameter: Parameter) -> Any:
    minimum = -math.inf if parameter.minimum is None else parameter.minimum
    number = Number(
        parameter.dimension, minimum=minimum, maximum=parameter.maximum, exclusive=parameter.exclusive
    )
    kind: Any = Annotated[Leaf, number]
    if parameter.is_list:
        kind = Annotated[list[kind], Field(min_length=1)]
    return (kind | None, Field(default=None, description=parameter.meaning))


TERM_SECTIONS = {n: _model_section(n, t.parameters, t.summary) for n, t in TERMS.items()}
INDEX_SECTIONS = {n: _model_section(n, m.parameters, m.summary, OfIndex) for n, m in INDEX_MODELS.items()}


class OrChanges:
    """Lets an editor take a table without its model: what changes in an inherited one."""

    def __get_pydantic_json_schema__(self, schema: Any, handler: Any) -> dict[str, Any]:
        changes = {"type": "object", "not": {"required": ["model"]}, "description": "of an inherited one"}
        return {"anyOf": [handler(schema), changes]}


if TYPE_CHECKING:
    Term = Any
    Index = Any
else:
    Term = Annotated[reduce(or_, TERM_SECTIONS.values()), Field(discriminator="model"), OrChanges()]
    Index = Annotated[reduce(or_, INDEX_SECTIONS.values()), Field(discriminator="model"), OrChanges()]


class Conditions(Section):
    """In what state the piece is."""

    temperature: Temperature | None = Field(
        default=None, description="of the piece; without it each material is as it was described"
    )


class Band(Section):
    """Where to evaluate; the unit as written decides the axis shown."""

    from_: Spectral | None = Field(default=None, alias="from")
    to: Spectral | None = None
    points: Annotated[int, Field(ge=2, le=10_000_000, strict=True)] | None = None
    spacing: Literal["linear", "log"] | None = None
    values: Annotated[list[Spectral], Field(min_length=1)] | None = None


class Host(Section):
    """The matrix, which takes what the other fractions leave."""

    material: Name


class Shape(Section):
    """Shape of the grains of one inclusion."""

    kind: Literal["sphere", "spheroid", "ellipsoid", "needle", "disc"]
    aspect_ratio: Positive | None = Field(default=None, description="symmetry axis over cross axis")
    aspect_ratio_spread: NotNegative | None = Field(
        default=None,
        description="log-normal: standard deviation of its logarithm, about the median by volume",
    )
    axes: Annotated[list[Positive], Field(min_length=3, max_length=3)] | None = Field(
        default=None, description="of an ellipsoid, in any one measure; only their ratios matter"
    )


class Coating(Section):
    """One layer around every grain of an inclusion."""

    material: Name
    thickness: Length


ONE_LAYER, LAYERS = "one layer", "a list of layers"
if TYPE_CHECKING:
    Coatings = Coating | list[Coating]
else:
    Coatings = Annotated[
        Annotated[Coating, Tag(ONE_LAYER)] | Annotated[list[Coating], Field(min_length=1), Tag(LAYERS)],
        Discriminator(lambda given: LAYERS if isinstance(given, list) else ONE_LAYER),
    ]


class Inclusion(Section):
    """One kind of grain in the host; the basis of its loading is in the key."""

    material: Name
    volume_fraction: Fraction | None = Field(default=None, description="of the whole mixture, voids included")
    volume_fraction_of_solids: Fraction | None = Field(default=None, description="voids excluded")
    weight_fraction: Fraction | None = Field(default=None, description="of the solids")
    phr: Parts | None = Field(default=None, description="parts by weight per hundred parts of host")
    shape: Shape = Shape(kind="sphere")
    orientation: Literal["random", "aligned", "in-plane"] | None = None
    order_parameter: Order | None = Field(
        default=None, description="<3 cos²θ − 1>/2 about the third axis, in place of an orientation"
    )
    diameter: Length | None = Field(
        default=None, description="equivalent-volume diameter; the quasi-static limit is checked against it"
    )
    diameter_spread: NotNegative | None = Field(
        default=None,
        description="log-normal: standard deviation of its logarithm, about the median by volume",
    )
    waves: Literal["none", "inside", "dipole"] = Field(
        default="none",
        description="that count: inside grains (skin effect, eddy currents), or their dipole (scattering)",
    )
    coating: Coatings | None = Field(
        default=None, description="a layer, or a list of them from the core outwards; loading is of the core"
    )
    contact: Literal["insulated", "touching"] | None = Field(
        default=None, description="what the maker knows about conductive grains"
    )


class Dopant(Section):
    """Isolated absorbers in the host; their polarisations add and they take no volume."""

    number_density: NumberDensity | None = None
    weight_fraction: Fraction | None = Field(default=None, description="of the doped host")
    mole_fraction: Fraction | None = Field(default=None, description="of the doped host")
    molar_mass: MolarMass | None = None
    ions_per_formula: Positive | None = None
    local_field: Literal["none", "virtual-cavity"] = "none"
    terms: Annotated[dict[Name, Term], Field(min_length=1)]


class Voids(Section):
    """Spheres of vacuum."""

    volume_fraction: Fraction


class Rule(Section):
    """The rule that makes one medium of many; what rules take of their own stands beside it."""

    rule: str = "maxwell-garnett"
    density: Density | None = Field(
        default=None, description="measured density of the mixture; replaces additive volumes"
    )


def _rule_fields() -> dict[str, Any]:
    """Parameters of all rules; which of them the chosen rule takes is checked with the recipe.

    A name means the same, over the same range, in every rule that takes it; words may differ.
    """
    fields: dict[str, Any] = {}
    for rule in RULES.values():
        for name, parameter in rule.parameters.items():
            said = f"{parameter.meaning}, of the rule {rule.name}"
            if isinstance(parameter, Choice):
                fields[name] = (str | None, Field(default=None, description=said))
            else:
                fields[name] = (_field(parameter)[0], Field(default=None, description=said))
    return fields


if TYPE_CHECKING:
    Mixing = Rule
else:
    Mixing = create_model("Mixing", __base__=Rule, __doc__=Rule.__doc__, **_rule_fields())


class Response(Section):
    """ε or μ of a material: level above all resonances, and terms."""

    infinity: Positive | None = Field(default=None, description="level above all resonances")
    susceptibility: Susceptibility | None = Field(default=None, description="that level less one")
    plasma: Spectral | None = Field(default=None, description="shared by terms that give only strength")
    terms: dict[Name, Term] = {}
    law: Literal[tuple(LAWS)] | None = Field(  # type: ignore[valid-type]
        default=None, description="substance known at every temperature"
    )
    value: Positive | None = Field(default=None, description="of a data sheet, at one frequency")
    loss_tangent: NotNegative | None = Field(default=None, description="beside value")
    at: Spectral | None = Field(default=None, description="the frequency of the two")
    model: Literal["wide-band-debye", "constant"] | None = Field(
        default=None, description="what the pair becomes: causal, or the same everywhere, which is not"
    )
    low: Spectral | None = Field(default=None, description="where the level loss begins; 1 kHz if left out")
    high: Spectral | None = Field(default=None, description="where it ends; 1 THz if left out")


class ValidTemperature(Section):
    """Temperatures at which a material's description holds."""

    from_: Temperature = Field(alias="from")
    to: Temperature


class Valid(Section):
    """Band in which a material's description holds."""

    from_: Spectral = Field(alias="from")
    to: Spectral


class Material(Section):
    """What one constituent is made of."""

    title: str = ""
    source: str = ""
    kind: Literal["published", "memory", "practice", "invented"] | None = None
    check: str = Field(default="", description="what others say of it that it was held to, and how close")
    based_on: Name | None = None
    valid: Valid | None = None
    valid_temperature: ValidTemperature | None = None
    temperature: Temperature | None = Field(default=None, description="at which the description holds")
    temperature_coefficient: PerKelvin | None = Field(
        default=None, description="relative change of the permittivity per kelvin"
    )
    density: Density | None = None
    molar_mass: MolarMass | None = None
    permittivity: Response | None = None
    permeability: Response | None = None
    saturation: Spectral | None = Field(
        default=None,
        description="γ µ₀ M_s of a magnetic material, 28 GHz for each tesla; for audit",
    )
    index: Index | None = None
    table: str | None = None
    recipe: str | dict[str, Any] | None = Field(
        default=None, description="file of a recipe, or a recipe: the material is that mixture"
    )
    extension: Literal["causal"] | None = Field(
        default=None, description="continues a table beyond its ends; without it, nothing is known there"
    )
    static: Positive | None = Field(
        default=None, description="stated static permittivity of an index or table"
    )
    high_frequency: Positive | None = None
    price: str | None = Field(
        default=None, description='such as "12 EUR/kg"; the currency is kept as written'
    )
    ash_yield: NotNegative | None = Field(
        default=None, description="mass left of it after burn-off over its mass: 0 burns away, above 1 gains"
    )


class Reading(Section):
    """What was read on a sample at one frequency."""

    at: Spectral
    permittivity: Plain | None = Field(default=None, description="real part ε′")
    permittivity_imag: Plain | None = Field(default=None, description="loss ε″")
    loss_tangent: Plain | None = Field(default=None, description="ε″/ε′")
    index: Plain | None = Field(default=None, description="refractive index n")
    extinction: Plain | None = Field(default=None, description="extinction coefficient k")
    permeability: Plain | None = Field(default=None, description="real part μ′")
    permeability_imag: Plain | None = Field(default=None, description="loss μ″")
    magnetic_loss_tangent: Plain | None = Field(default=None, description="μ″/μ′")
    conductivity: Conductivity | None = Field(default=None, description="of all loss, ωε₀ε″")


class Measured(Section):
    """What was read on a sample."""

    static: Positive | None = Field(default=None, description="ε′ on the low-frequency plateau")
    high_frequency: Positive | None = Field(default=None, description="ε′ above all resonances named")
    readings: list[Reading] = []
    spectrum: str | None = Field(default=None, description="file of a measured spectrum")
    noise: NotNegative | None = Field(
        default=None, description="standard uncertainty of a spectrum without one, as a share of its modulus"
    )
    density: Density | None = None
    ash: Fraction | None = Field(default=None, description="weight fraction left after burn-off")
    label: str | float | None = Field(
        default=None, description="the loading that the bag says, basis unknown"
    )


class Sample(Measured):
    """One of several samples: what differs from the recipe, and what was read on it."""

    name: Name
    set: dict[str, str | float | bool] = Field(default={}, description="path → value on this sample")
    unknowns: dict[str, Annotated[Span, Ends()]] = Field(default={}, description="of this sample alone")
    calibrates: bool = Field(default=False, description="its loading is known: it teaches the rule")


class Stock(Section):
    """What stands on the shelf: a dispersion, a masterbatch, a raw material."""

    contains: Annotated[dict[Name, Fraction], Field(min_length=1)] = Field(
        description="weight fractions of constituents; the rest is solvent, which leaves"
    )
    solvent_density: Density | None = None
    price: str | None = Field(
        default=None, description='such as "12 EUR/kg"; the currency is kept as written'
    )


class Batch(Section):
    """How much is to be made, and from what."""

    mass: Mass | None = Field(default=None, description="of the dry mixture")
    volume: Volume | None = Field(default=None, description="of the dry mixture, voids included")
    area: Surface | None = Field(default=None, description="to be coated, beside thickness")
    thickness: Length | None = Field(default=None, description="of the dry coat")
    parts: Annotated[int, Field(ge=1, strict=True)] = Field(default=1, description="that the batch makes")
    stocks: dict[Name, Stock] = {}


class Acceptance(Section):
    """What a piece must be to pass."""

    of: str = Field(description="a path, an inclusion's loading on any basis, or a quantity")
    at: Spectral | None = Field(default=None, description="where, for a quantity of a frequency")
    lower: str | float | None = None
    upper: str | float | None = None
    decision: Literal["guarded", "simple"] = "guarded"
    coverage_factor: Positive | None = Field(
        default=None, description="width of the guard band in standard uncertainties; 2 if left out"
    )
    model_uncertainty: Literal["rule-spread", "none"] = "rule-spread"


class Schema(Section):
    """A whole recipe."""

    title: str = ""
    band: Band | None = None
    conditions: Conditions | None = None
    host: Host
    inclusions: dict[Name, Inclusion] = {}
    dopants: dict[Name, Dopant] = {}
    voids: Voids | None = None
    mixing: Mixing = Mixing()
    materials: dict[Name, Material] = {}
    measured: Measured | None = None
    samples: list[Sample] = []
    acceptance: Acceptance | None = None
    batch: Batch | None = None
    unknowns: dict[str, Annotated[Span, Ends()]] = {}
