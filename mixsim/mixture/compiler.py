"""From a checked recipe to its mixture: each number of a formula bound to the leaf that holds it."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from typing import Any

from mixsim.composition import number_density_from_mole_fraction, number_density_from_weight_fraction
from mixsim.dispersion import (
    INDEX_MODELS,
    TERMS,
    IndexModel,
    infinity_from_pair,
    step_from_pair,
    width_from_wavelength,
)
from mixsim.dispersion.extension import Extension
from mixsim.dispersion.laws import LAWS
from mixsim.mixing import RULES, log_normal_places, rule_named, value_at
from mixsim.mixture.constituent import Constituent, Size
from mixsim.mixture.inputs import Derived, Fixed, Input, Leafed
from mixsim.mixture.mixture import HOST, Mixture
from mixsim.mixture.nested import InnerDensity, Mixed
from mixsim.mixture.shapes import Shape
from mixsim.mixture.spectra import (
    VACUUM,
    BoundTerm,
    Doped,
    Index,
    IndexWarming,
    Lawful,
    Level,
    LocalIndex,
    LocalPlasma,
    Measured,
    Spectrum,
    TermSum,
    Warmed,
)
from mixsim.parameter import Parameter
from mixsim.recipe import SIZE_STEP, Coating, Recipe, loading_of, shells_of
from mixsim.units import read


def compile_recipe(recipe: Recipe) -> Mixture:
    """The mixture that a recipe describes.

    Parameters
    ----------
    recipe
        A checked recipe.

    Returns
    -------
    mixture
        The evaluator of its numbers.
    """
    return _Compiler(recipe).mixture()


class _Compiler:
    def __init__(self, recipe: Recipe) -> None:
        self.recipe = recipe
        self.schema = recipe.schema

    def mixture(self) -> Mixture:
        name = self.schema.host.material
        densities = {dopant: self._number_density(dopant) for dopant in self.schema.dopants}
        permittivity = self._permittivity(name)
        doping = tuple(
            self._dopant_term(dopant, term, content, permittivity, densities[dopant])
            for dopant, given in self.schema.dopants.items()
            for term, content in given.terms.items()
        )
        return Mixture(
            defaults={path: leaf.value for path, leaf in self.recipe.leaves.items()},
            host=Constituent(
                HOST,
                name,
                Doped(permittivity, doping) if doping else permittivity,
                self._permeability(name),
                self._density(name),
            ),
            inclusions=tuple(self._inclusion(inclusion) for inclusion in self.schema.inclusions),
            voids=self._maybe("voids.volume_fraction"),
            density=self._maybe("mixing.density"),
            rule=rule_named(self.schema.mixing.rule),
            given=self._rule_parameters(),
            number_densities={dopant: given for dopant, given in densities.items() if given is not None},
        )

    def _maybe(self, path: str) -> Input | None:
        return Leafed(path) if path in self.recipe.leaves else None

    def _rule_parameters(self) -> dict[str, Leafed | str]:
        """Whatever the recipe gives of the parameters of rules."""
        given: dict[str, Leafed | str] = {}
        for name in (name for rule in RULES.values() for name in rule.parameters):
            value = getattr(self.schema.mixing, name)
            if value is not None:
                given[name] = value if isinstance(value, str) else Leafed(f"mixing.{name}")
        return given

    def _inclusion(self, name: str) -> Constituent:
        inclusion = self.schema.inclusions[name]
        material, path = inclusion.material, f"inclusions.{name}"
        basis, _ = loading_of(inclusion)
        return Constituent(
            name,
            material,
            self._permittivity(material, self._maybe(f"{path}.diameter")),
            self._permeability(material),
            self._density(material),
            basis,
            Leafed(f"{path}.{basis}"),
            self._shape(name),
            self._maybe(f"{path}.diameter"),
            tuple(self._shell(name, *shell) for shell in shells_of(inclusion)),
            sizes=self._sizes(name),
            waves=inclusion.waves,
        )

    def _sizes(self, name: str) -> tuple[Size, ...]:
        """Grains of every size that the distribution holds; none where they are all alike."""
        path = f"inclusions.{name}"
        if f"{path}.diameter_spread" not in self.recipe.leaves:
            return ()
        given: dict[str, Input] = {
            "median": Leafed(f"{path}.diameter"),
            "spread": Leafed(f"{path}.diameter_spread"),
        }
        found = []
        for place, share in log_normal_places(SIZE_STEP):
            diameter = Derived(value_at, {**given, "place": Fixed(place)})
            permittivity = self._permittivity(self.schema.inclusions[name].material, diameter)
            found.append(Size(share, diameter, permittivity))
        return tuple(found)

    def _shell(self, inclusion: str, key: str, shell: Coating) -> Constituent:
        """A layer around the grains of an inclusion; `key` is its place below the inclusion."""
        return Constituent(
            f"{inclusion}.{key}",
            shell.material,
            self._permittivity(shell.material),
            self._permeability(shell.material),
            self._density(shell.material),
            thickness=Leafed(f"inclusions.{inclusion}.{key}.thickness"),
        )

    def _shape(self, name: str) -> Shape | None:
        inclusion, path = self.schema.inclusions[name], f"inclusions.{name}"
        if inclusion.shape.kind == "sphere":
            return None
        places = {
            **{key: f"{path}.shape.{key}" for key in ("aspect_ratio", "aspect_ratio_spread")},
            **{f"axes.{i}": f"{path}.shape.axes.{i}" for i in range(3)},
            "order_parameter": f"{path}.order_parameter",
        }
        numbers = {key: number for key, place in places.items() if (number := self._maybe(place))}
        ordered = "order_parameter" in numbers
        return Shape(
            inclusion.shape.kind, "ordered" if ordered else inclusion.orientation or "random", numbers
        )

    def _permittivity(self, name: str, diameter: Input | None = None) -> Spectrum:
        """Of a material, at the temperature of the piece, in grains of a diameter where that is given."""
        spectrum, difference = self._described(name, diameter), self._warmer_by(name)
        coefficient = self._maybe(f"materials.{name}.temperature_coefficient")
        if coefficient is None or difference is None:
            return spectrum
        return Warmed(spectrum, coefficient, difference)

    def _warmer_by(self, name: str) -> Input | None:
        """Temperature of the piece less that of a description; None where either is not known."""
        here, own = self._maybe("conditions.temperature"), self._maybe(f"materials.{name}.temperature")
        if here is None or own is None:
            return None
        return Derived(_difference, {"temperature": here, "own": own})

    def _described(self, name: str, diameter: Input | None) -> Spectrum:
        """Permittivity of a material as it is described."""
        material, path = self.schema.materials[name], f"materials.{name}"
        if material.permittivity is not None:
            return self._response(material.permittivity, f"{path}.permittivity", diameter)
        if name in self.recipe.parts:
            return self._part(name)
        stated = self._maybe(f"{path}.static"), self._maybe(f"{path}.high_frequency")
        if material.table is not None:
            return Measured(self.recipe.tables[name], *stated, extension=self._extension(name))
        assert material.index is not None
        permeability = self._permeability(name)
        model = INDEX_MODELS[material.index.model]
        inputs = self._index_inputs(model, material.index, f"{path}.index")
        return Index(
            model,
            inputs,
            None if permeability is VACUUM else permeability,
            *stated,
            in_air=material.index.reference == "air",
            warming=self._index_warming(name, f"{path}.index"),
        )

    def _index_warming(self, name: str, path: str) -> IndexWarming | None:
        difference, index = self._warmer_by(name), self.schema.materials[name].index
        assert index is not None
        if difference is None or (index.dn_dt is None and index.thermo_optic is None):
            return None
        if index.dn_dt is not None:
            return IndexWarming(difference, Leafed(f"{path}.dn_dt"))
        constants = tuple(Leafed(f"{path}.thermo_optic.{i}") for i in range(len(index.thermo_optic)))
        return IndexWarming(difference, thermo_optic=constants)

    def _part(self, name: str) -> Mixed:
        warm = "conditions.temperature" in self.recipe.leaves
        return Mixed(self.recipe.parts[name].compile(), f"materials.{name}.recipe.", warm)

    def _density(self, name: str) -> Input | None:
        """As stated; else that of the recipe that the material is."""
        stated = self._maybe(f"materials.{name}.density")
        if stated is not None or name not in self.recipe.parts:
            return stated
        return InnerDensity(self._part(name))

    def _extension(self, name: str, *, magnetic: bool = False) -> Extension | None:
        wanted = self.schema.materials[name].extension
        return None if wanted is None else Extension(self.recipe.tables[name], magnetic)

    def _permeability(self, name: str) -> Spectrum:
        if name in self.recipe.parts:
            part = self._part(name)
            return replace(part, quantity="permeability") if part.mixture.magnetic else VACUUM
        permeability, table = self.schema.materials[name].permeability, self.recipe.tables.get(name)
        if permeability is None:
            if table is None or table.permeability is None:
                return VACUUM
            return Measured(table, magnetic=True, extension=self._extension(name, magnetic=True))
        return self._response(permeability, f"materials.{name}.permeability")

    def _response(self, response: Any, path: str, diameter: Input | None = None) -> Spectrum:
        if response.value is not None:
            return self._pair(response, path)
        if response.law is not None:
            own = Leafed(f"{path.rpartition('.')[0]}.temperature")
            return Lawful(LAWS[response.law], self._maybe("conditions.temperature") or own)
        susceptibility = self._maybe(f"{path}.susceptibility")
        level: Input = Leafed(f"{path}.infinity")
        if susceptibility is not None:
            level = Derived(_level_from_susceptibility, {"susceptibility": susceptibility})
        shared = self._maybe(f"{path}.plasma")
        terms = (
            self._term(
                content,
                f"{path}.terms.{name}",
                {"plasma": shared}
                if shared and TERMS[content.model].leaves_open("plasma", _given(content))
                else {},
                diameter,
            )
            for name, content in response.terms.items()
        )
        return TermSum(level, tuple(terms))

    def _pair(self, response: Any, path: str) -> Spectrum:
        """A data sheet's pair at one frequency, as a causal spectrum or as a constant."""
        given: dict[str, Input] = {key: Leafed(f"{path}.{key}") for key in ("value", "loss_tangent")}
        if response.model == "constant":
            return Level(Derived(_level_from_pair, given))
        given |= {
            "at": Leafed(f"{path}.at"),
            "low": self._maybe(f"{path}.low") or Fixed(read("1 kHz", "spectral").value),
            "high": self._maybe(f"{path}.high") or Fixed(read("1 THz", "spectral").value),
        }
        ends = {key: given[key] for key in ("low", "high")}
        term = BoundTerm(TERMS["wide-band-debye"], {"step": Derived(step_from_pair, given), **ends})
        return TermSum(Derived(infinity_from_pair, given), (term,))

    def _index_inputs(
        self, model: IndexModel, content: Any, path: str
    ) -> dict[str, Input | tuple[Input, ...]]:
        inputs: dict[str, Input | tuple[Input, ...]] = {}
        for name, parameter in model.parameters.items():
            given = getattr(content, name)
            if given is not None and parameter.is_list:
                inputs[name] = tuple(Leafed(f"{path}.{name}.{i}") for i in range(len(given)))
            elif given is not None or parameter.default is not None:
                inputs[name] = self._number(f"{path}.{name}", parameter)
        return inputs

    def _term(
        self, content: Any, path: str, implied: Mapping[str, Input], diameter: Input | None = None
    ) -> BoundTerm:
        """A term of a recipe; `implied` are parameters that stand elsewhere than in it."""
        term = TERMS[content.model]
        given = _given(content) & term.parameters.keys()
        numbers: dict[str, Input] = {
            name: implied[name] if name in implied else self._number(f"{path}.{name}", parameter)
            for name, parameter in term.parameters.items()
            if name in given or name in implied or parameter.default is not None
        }
        for name in given:
            if self.recipe.leaves[f"{path}.{name}"].dimension == "wavelength width":
                about = {"width": numbers[name], "resonance": numbers["resonance"]}
                numbers[name] = Derived(width_from_wavelength, about)
        routes = term.resolve({*given, *implied})
        inputs = {
            canonical: numbers[route.key]
            if route.function is None
            else Derived(route.function, {name: numbers[name] for name in route.needs})
            for canonical, route in routes.items()
        }
        for canonical, route in term.in_grains.items():
            if route.key in given and diameter is not None:
                assert route.function is not None
                known = {**numbers, canonical: inputs[canonical], "diameter": diameter}
                inputs[canonical] = Derived(route.function, {name: known[name] for name in route.needs})
        return BoundTerm(term, inputs)

    def _number(self, path: str, parameter: Parameter) -> Input:
        if path in self.recipe.leaves:
            return Leafed(path)
        assert parameter.default is not None
        return Fixed(parameter.default)

    def _dopant_term(
        self, dopant: str, name: str, content: Any, host: Spectrum, density: Input | None
    ) -> BoundTerm:
        by_concentration = density is not None and _wants_concentration(content)
        implied: dict[str, Input] = {}
        if by_concentration and density is not None:
            implied["number_density"] = density
        if _given(content) >= {"absorption_peak"} and content.background_index is None:
            place = self._number(
                f"dopants.{dopant}.terms.{name}.resonance", TERMS["lorentz"].parameters["resonance"]
            )
            implied["background_index"] = LocalIndex(place, host)
        bound = self._term(content, f"dopants.{dopant}.terms.{name}", implied)
        if not by_concentration or self.schema.dopants[dopant].local_field == "none":
            return bound
        felt = LocalPlasma(bound.inputs["plasma"], bound.inputs["resonance"], host)
        return BoundTerm(bound.term, {**bound.inputs, "plasma": felt})

    def _number_density(self, name: str) -> Input | None:
        """Ions per volume of host, on whichever basis the recipe gives them."""
        dopant, path = self.schema.dopants[name], f"dopants.{name}"
        if dopant.number_density is not None:
            return Leafed(f"{path}.number_density")
        if dopant.weight_fraction is None and dopant.mole_fraction is None:
            return None
        host = f"materials.{self.schema.host.material}"
        inputs: dict[str, Input] = {
            "density": Leafed(f"{host}.density"),
            "molar_mass": Leafed(f"{path}.molar_mass"),
            "ions_per_formula": self._maybe(f"{path}.ions_per_formula") or Fixed(1.0),
        }
        if dopant.weight_fraction is not None:
            inputs["weight_fraction"] = Leafed(f"{path}.weight_fraction")
            return Derived(number_density_from_weight_fraction, inputs)
        inputs |= {
            "mole_fraction": Leafed(f"{path}.mole_fraction"),
            "host_molar_mass": Leafed(f"{host}.molar_mass"),
        }
        return Derived(number_density_from_mole_fraction, inputs)


def _given(content: Any) -> set[str]:
    """Keys that a term of the recipe gives."""
    return {name for name in type(content).model_fields if getattr(content, name) is not None}


def _wants_concentration(content: Any) -> bool:
    """Whether a dopant's term leaves its strength to the concentration of the dopant."""
    if content.model != "lorentz":
        return False
    return not any((content.plasma, content.step, content.number_density, content.absorption_peak))


def _difference(*, temperature: Any, own: Any) -> Any:
    """ΔT = T − T₀."""
    return temperature - own


def _level_from_susceptibility(*, susceptibility: Any) -> Any:
    """ε∞ = 1 + χ."""
    return 1.0 + susceptibility


def _level_from_pair(*, value: Any, loss_tangent: Any) -> Any:
    """ε = ε′ + iε′ tan δ."""
    return value + 1j * (value * loss_tangent)
