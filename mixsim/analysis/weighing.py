"""The weigh sheet: grams of each stock and constituent for a batch, with their ±, coat and price."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import asdict, dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from mixsim.analysis.caution import Caution
from mixsim.analysis.plain import provenance
from mixsim.analysis.suspicion import suspicions
from mixsim.analysis.uncertainty.first_order import halves, pairs
from mixsim.analysis.uncertainty.inputs import Uncertain, uncertain_leaves
from mixsim.composition.stocks import spread, take
from mixsim.errors import BadInput
from mixsim.mixture import HOST, VOIDS, Mixture
from mixsim.recipe import Recipe
from mixsim.recipe.schema import Batch
from mixsim.units import Leaf

Floats = NDArray[np.float64]

_PRICE = re.compile(r"\s*([0-9]+(?:\.[0-9]+)?)\s*([^\s0-9/]{1,5})\s*/\s*(kg|g|t)\s*")
_PER = {"kg": 1.0, "g": 1e3, "t": 1e-3}


@dataclass(frozen=True)
class Portion:
    """One thing to weigh.

    Attributes
    ----------
    name
        Stock, or constituent taken neat.
    stock
        Whether it is a stock.
    mass, std
        To weigh [kg].
    price
        Of that mass, in the currency of the sheet, or None.
    """

    name: str
    stock: bool
    mass: float
    std: float
    price: float | None


@dataclass(frozen=True)
class Brought:
    """One constituent of the dry mixture.

    Attributes
    ----------
    name
        Of the constituent, or of what else a stock brings.
    wanted, brought
        Mass that the recipe asks for, and that the portions bring [kg].
    """

    name: str
    wanted: float
    brought: float


@dataclass(frozen=True, eq=False)
class Weighed:
    """A weigh sheet.

    Attributes
    ----------
    recipe
        What was asked.
    portions
        What to weigh, in the order of the recipe.
    constituents
        What that brings, dry.
    reached
        Whether it is what the recipe asks for.
    dry_mass, wet_mass
        Of the batch without solvent and with it [kg].
    dry_volume, wet_volume
        The same [m³], or None where a density is missing.
    dry_thickness, wet_thickness, coat_weight
        Of a coat [m, m, kg/m²], or None.
    parts
        That the batch makes.
    price, currency
        Of the batch, or None where not every portion has one.
    std_from
        Numbers whose ± is in the masses.
    warnings
        Cautions.
    """

    recipe: Recipe
    portions: tuple[Portion, ...]
    constituents: tuple[Brought, ...]
    reached: bool
    dry_mass: float
    wet_mass: float
    dry_volume: float | None
    wet_volume: float | None
    dry_thickness: float | None
    wet_thickness: float | None
    coat_weight: float | None
    parts: int
    price: float | None
    currency: str
    std_from: tuple[str, ...]
    warnings: tuple[Caution, ...]

    @property
    def rule(self) -> str:
        """Name of the mixing rule, which has no part in it."""
        return self.recipe.schema.mixing.rule

    def to_dict(self) -> dict[str, Any]:
        """As JSON holds it: SI, null where there is no value."""
        return {
            "title": self.recipe.schema.title,
            "portions": [asdict(portion) for portion in self.portions],
            "constituents": [asdict(one) for one in self.constituents],
            "reached": self.reached,
            "dry_mass_kg": self.dry_mass,
            "wet_mass_kg": self.wet_mass,
            "dry_volume_m3": self.dry_volume,
            "wet_volume_m3": self.wet_volume,
            "dry_thickness_m": self.dry_thickness,
            "wet_thickness_m": self.wet_thickness,
            "coat_weight_kg_per_m2": self.coat_weight,
            "parts": self.parts,
            "mass_per_part_kg": self.dry_mass / self.parts,
            "price": self.price,
            "price_per_part": None if self.price is None else self.price / self.parts,
            "currency": self.currency,
            "uncertainty_from": list(self.std_from),
            "warnings": [caution.to_dict() for caution in self.warnings],
            "provenance": provenance(self.recipe),
        }


def weigh(recipe: Recipe) -> Weighed:
    """What to weigh for the batch of a recipe.

    Parameters
    ----------
    recipe
        A checked recipe with `[batch]` and the density of every constituent.

    Returns
    -------
    weighed
        Masses of stocks and neat constituents with their ±, and what they make.

    Raises
    ------
    BadInput
        Where batch, densities or stocks cannot be used.

    Notes
    -----
    The host may always be taken neat; another constituent is where no stock holds it. The ± of a mass is
    first order, from every number of the recipe, of the batch and of the stocks that states one.

    Examples
    --------
    >>> import mixsim
    >>> sheet = mixsim.weigh(mixsim.parse('''
    ...     host.material = "resin"
    ...     inclusions.oxide = { material = "oxide", volume_fraction = "20 %" }
    ...     [materials]
    ...     resin = { density = "1 g/cm^3", permittivity.infinity = 3 }
    ...     oxide = { density = "4 g/cm^3", permittivity.infinity = 9 }
    ...     [batch]
    ...     mass = "100 g"
    ... '''))
    >>> {portion.name: round(1000 * portion.mass, 6) for portion in sheet.portions}
    {'host': 50.0, 'oxide': 50.0}
    """
    batch, mixture = recipe.schema.batch, recipe.compile()
    if batch is None:
        raise BadInput([recipe.fault("batch", "no batch to weigh", 'such as [batch] mass = "250 g"')])
    _complete(recipe, mixture, batch)
    substances, names = _substances(recipe, batch), _portions(recipe, batch)
    given = _Batch(recipe, mixture, batch, substances, names)
    wanted, contents = given.wanted({})[0], given.contents({})[0]
    found = take(wanted, contents)
    inputs = {**uncertain_leaves(recipe), **_doubts(recipe)}
    stds, felt = _stds(given, inputs, found.masses)
    solvents = np.array([1.0 - _held(batch, name) for name in names])
    prices, currency = _prices(recipe, batch, names)
    density = mixture.composition({}).density
    assert density is not None
    dry = float(found.brought.sum())
    dry_volume = dry / float(density) if found.met else None
    wet_volume = _wet(batch, names, found.masses, dry_volume)
    cost = None if any(p is None for p in prices) else float(np.dot(found.masses, [p or 0.0 for p in prices]))
    area = None if batch.area is None else batch.area.value
    return Weighed(
        recipe=recipe,
        portions=tuple(
            Portion(
                name,
                name in batch.stocks,
                float(mass),
                float(std),
                None if price is None else price * float(mass),
            )
            for name, mass, std, price in zip(names, found.masses, stds, prices, strict=True)
        ),
        constituents=tuple(
            Brought(name, float(want), float(got))
            for name, want, got in zip(substances, wanted, found.brought, strict=True)
        ),
        reached=found.met,
        dry_mass=dry,
        wet_mass=dry + float(np.dot(found.masses, solvents)),
        dry_volume=dry_volume,
        wet_volume=wet_volume,
        dry_thickness=None if area is None or dry_volume is None else dry_volume / area,
        wet_thickness=None if area is None or wet_volume is None else wet_volume / area,
        coat_weight=None if area is None else dry / area,
        parts=batch.parts,
        price=cost,
        currency=currency,
        std_from=felt,
        warnings=suspicions(recipe),
    )


@dataclass(frozen=True, eq=False)
class _Batch:
    """What a batch asks for and what its stocks hold, for some numbers."""

    recipe: Recipe
    mixture: Mixture
    batch: Batch
    substances: tuple[str, ...]
    portions: tuple[str, ...]

    def wanted(self, values: Mapping[str, Floats]) -> Floats:
        """Mass of each substance, shape (M, substances) [kg]."""
        of_batch = {name: v for name, v in values.items() if name.startswith("batch.")}
        composition = self.mixture.composition({n: v for n, v in values.items() if n not in of_batch})
        weights, density = composition.weight_fractions, composition.density
        assert weights is not None and density is not None

        def number(key: str) -> Any:
            leaf: Leaf = getattr(self.batch, key)
            return of_batch.get(f"batch.{key}", leaf.value)

        if self.batch.mass is not None:
            whole = number("mass")
        elif self.batch.volume is not None:
            whole = number("volume") * density
        else:
            whole = number("area") * number("thickness") * density
        shape = np.broadcast_shapes(*(np.shape(v) for v in values.values()), (1,))
        columns = [np.broadcast_to(whole * weights.get(name, 0.0), shape) for name in self.substances]
        return np.stack(columns, axis=-1)

    def contents(self, values: Mapping[str, Floats]) -> Floats:
        """Weight fraction of each substance in each portion, shape (M, substances, portions)."""
        shape = np.broadcast_shapes(*(np.shape(v) for v in values.values()), (1,))
        out = np.zeros((*shape, len(self.substances), len(self.portions)))
        for column, name in enumerate(self.portions):
            stock = self.batch.stocks.get(name)
            for row, substance in enumerate(self.substances):
                if stock is None:
                    out[..., row, column] = float(substance == name)
                elif substance in stock.contains:
                    path = f"batch.stocks.{name}.contains.{substance}"
                    out[..., row, column] = values.get(path, stock.contains[substance].value)
        return out


def _stds(given: _Batch, inputs: Mapping[str, Uncertain], masses: Floats) -> tuple[Floats, tuple[str, ...]]:
    """Standard uncertainty of each mass, and the numbers that it comes from."""
    if not inputs:
        return np.zeros(len(masses)), ()
    values = pairs(inputs)
    moved = halves(spread(given.wanted(values), given.contents(values), masses))
    felt = tuple(name for name, row in zip(inputs, moved, strict=True) if np.any(np.abs(row) > 1e-12))
    return np.sqrt(np.sum(moved**2, axis=0)), felt


def _doubts(recipe: Recipe) -> dict[str, Uncertain]:
    """Numbers of the batch and of its stocks with a ±."""
    found = {}
    for path, leaf in recipe.leaves.items():
        if path.startswith("batch.") and leaf.std:
            allowed = recipe.ranges[path]
            found[path] = Uncertain(leaf.value, leaf.std, leaf.rectangular, allowed.minimum, allowed.maximum)
    return found


def _complete(recipe: Recipe, mixture: Mixture, batch: Batch) -> None:
    """Refuse a batch of no or of two sizes, and constituents without a density."""
    ways = [key for key in ("mass", "volume", "area") if getattr(batch, key) is not None]
    if len(ways) != 1 or (batch.area is None) != (batch.thickness is None):
        found = " and ".join([*ways, *(["thickness"] if batch.thickness else [])]) or "no size"
        allowed = "one of mass, volume, or area with thickness"
        raise BadInput([recipe.fault("batch", f"{found} for a batch", allowed)])
    lacking = [phase.material for phase in (mixture.host, *mixture.inclusions) if phase.density is None]
    if lacking:
        raise BadInput(
            [
                recipe.fault(f"materials.{name}", "density is missing", "a weigh sheet needs it")
                for name in dict.fromkeys(lacking)
            ]
        )
    for name, stock in batch.stocks.items():
        total = sum(leaf.value for leaf in stock.contains.values())
        if total > 1.0 + 1e-9:
            path = f"batch.stocks.{name}.contains"
            raise BadInput([recipe.fault(path, f"fractions add up to {total:.6g}", "the sum is at most 1")])


def _substances(recipe: Recipe, batch: Batch) -> tuple[str, ...]:
    """Constituents of the recipe, then what else the stocks bring."""
    names = [HOST, *recipe.compile().composition({}).volume_fractions]
    names = [name for name in dict.fromkeys(names) if name != VOIDS]
    extra = [name for stock in batch.stocks.values() for name in stock.contains if name not in names]
    if extra:
        known = ", ".join(names)
        first = next(s for s, stock in batch.stocks.items() if extra[0] in stock.contains)
        path = f"batch.stocks.{first}.contains.{extra[0]}"
        allowed = f"a constituent of the recipe ({known}); add what stays in the mixture as an inclusion"
        raise BadInput([recipe.fault(path, f"{extra[0]!r} is no constituent", allowed)])
    return tuple(names)


def _portions(recipe: Recipe, batch: Batch) -> tuple[str, ...]:
    """The host neat, constituents that no stock holds, and the stocks."""
    names = _substances(recipe, batch)
    held = {name for stock in batch.stocks.values() for name in stock.contains}
    clash = [name for name in batch.stocks if name in names]
    if clash:
        path = f"batch.stocks.{clash[0]}"
        raise BadInput([recipe.fault(path, f"a stock called {clash[0]!r}", "a name no constituent has")])
    return (*(name for name in names if name == HOST or name not in held), *batch.stocks)


def _held(batch: Batch, name: str) -> float:
    """Share of a portion that stays."""
    stock = batch.stocks.get(name)
    return 1.0 if stock is None else sum(leaf.value for leaf in stock.contains.values())


def _wet(batch: Batch, names: tuple[str, ...], masses: Floats, dry_volume: float | None) -> float | None:
    """Volume with the solvents, where each has its density; solids keep theirs, voids are not there yet."""
    if dry_volume is None:
        return None
    volume = dry_volume
    for name, mass in zip(names, masses, strict=True):
        solvent = float(mass) * (1.0 - _held(batch, name))
        if solvent <= 1e-12 * float(masses.sum()):
            continue
        density = batch.stocks[name].solvent_density
        if density is None:
            return None
        volume += solvent / density.value
    return volume


def _prices(recipe: Recipe, batch: Batch, names: tuple[str, ...]) -> tuple[list[float | None], str]:
    """Price of a kilogram of each portion, and the one currency that they share."""
    materials = {HOST: recipe.schema.host.material}
    materials |= {name: inclusion.material for name, inclusion in recipe.schema.inclusions.items()}
    prices: list[float | None] = []
    currencies: dict[str, str] = {}
    for name in names:
        stock = batch.stocks.get(name)
        where = f"batch.stocks.{name}" if stock else f"materials.{materials.get(name, name)}"
        source = stock if stock else recipe.schema.materials.get(materials.get(name, name))
        text = None if source is None else source.price
        if text is None:
            prices.append(None)
            continue
        match = _PRICE.fullmatch(text)
        if match is None:
            found = f"{text!r} is no price"
            raise BadInput([recipe.fault(f"{where}.price", found, "such as '12 EUR/kg'")])
        prices.append(float(match[1]) * _PER[match[3]])
        currencies[match[2]] = f"{where}.price"
    if len(currencies) > 1:
        first, second, *_ = currencies
        path = currencies[second]
        allowed = "one currency throughout: none is converted"
        raise BadInput([recipe.fault(path, f"a price in {second} beside one in {first}", allowed)])
    return prices, next(iter(currencies), "")
