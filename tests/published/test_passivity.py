"""No model and no rule makes light: ε″ ≥ 0 and μ″ ≥ 0 for any passive constituents, through the evaluator.

Spheres of any number of kinds, and one kind of spheroid, are safe. Maxwell Garnett for *several* kinds of
metallic grain in one host, not all of them spheres, is no structure that could be built, and can turn loss
into gain, even where two metals share one shape.
"""

from __future__ import annotations

import evaluator
import numpy as np
import pytest

from mixsim.dispersion import INDEX_MODELS, TERMS
from mixsim.dispersion.registry import Term
from mixsim.mixing import RULES

DRAWS = 120
SPANS = {  # decades of the SI value
    "shape": (-2, 0),
    "spectral": (9, 16), "rate": (8, 16), "number": (-3, 2), "time": (-15, -8), "conductivity": (-8, 7),
    "number density": (22, 29), "electron masses": (-1, 1), "mobility": (-5, 0),
    "length": (-7, -5), "area": (-14, -10),
}  # fmt: skip
UNITS = {
    "spectral": "rad/s", "rate": "rad/s", "time": "s", "conductivity": "S/m", "number density": "m^-3",
    "mobility": "m^2/V/s", "length": "m", "area": "m^2", "fourth power of length": "m^4",
}  # fmt: skip
OMEGA = np.geomspace(1e8, 1e17, 181)
# of several kinds of sphere
MANY = [name for name, rule in RULES.items() if rule.passive and rule.most_phases is None]


def route_of(term: Term) -> list[str]:
    """Parameters of the plainest way to give a term."""
    return list(dict.fromkeys(name for routes in term.canonical.values() for name in routes[0].needs))


def terms_of(path: str) -> tuple[str, dict[str, str]]:
    """TOML of a response with every registered term in it, and the dimension of each number by its path."""
    lines, dimensions = [f"{path}.infinity = 1.5"], {f"{path}.infinity": "number"}
    for name, term in TERMS.items():
        if path.rsplit(".", 1)[1] not in term.of:
            continue
        lines.append(f'{path}.terms.{name}.model = "{name}"')
        for key in route_of(term):
            parameter = term.parameters[key]
            unit = UNITS.get(parameter.dimension)
            lines.append(f"{path}.terms.{name}.{key} = " + (f'"1 {unit}"' if unit else "0.5"))
            shape = np.isfinite(parameter.maximum)
            dimensions[f"{path}.terms.{name}.{key}"] = "shape" if shape else parameter.dimension
    return "\n".join(lines), dimensions


def drawn(dimensions: dict[str, str], random: np.random.Generator) -> dict[str, np.ndarray]:
    values = {}
    for path, dimension in dimensions.items():
        low, high = SPANS[dimension]
        values[path] = 10.0 ** random.uniform(low, high, DRAWS)
        if dimension == "shape":
            values[path] = random.uniform(0.05, 0.95, DRAWS)
        if path.endswith(".infinity"):
            values[path] = random.uniform(1.0, 20.0, DRAWS)
    return values


def passive(response: np.ndarray) -> bool:
    return bool(np.all(np.isfinite(response)) and np.all(response.imag >= -1e-12 * np.abs(response)))


@pytest.mark.parametrize("rule", MANY)
@pytest.mark.parametrize("model", TERMS)
def test_one_model_under_each_rule(model: str, rule: str) -> None:
    """Three kinds of sphere and voids, one model each, 120 draws over many decades, 181 frequencies."""
    text, values = 'host.material = "m0"\n', {}
    random = np.random.default_rng(1935)
    quantity = TERMS[model].of[0]
    for name in ("m0", "m1", "m2"):
        path = f"materials.{name}.{quantity}"
        text += f"materials.{name}.permittivity.infinity = 2.0\n" if quantity == "permeability" else ""
        body, dimensions = terms_of(path)
        chosen = (f"{path}.infinity", f"{path}.terms.{model}.")
        text += "\n".join(line for line in body.splitlines() if line.startswith(chosen)) + "\n"
        values |= drawn({p: d for p, d in dimensions.items() if p.startswith(chosen)}, random)
    answer = evaluator.mixture(text + SPHERES + evaluator.mixing(rule)).response(
        values | fractions(random), OMEGA
    )
    assert passive(getattr(answer, quantity))


@pytest.mark.parametrize("rule", MANY)
def test_all_models_at_once_for_permittivity_and_permeability(rule: str) -> None:
    random = np.random.default_rng(1904)
    text, values = everything(("m0", "m1", "m2"), random)
    answer = evaluator.mixture(text + SPHERES + evaluator.mixing(rule)).response(
        values | fractions(random), OMEGA
    )
    assert passive(answer.permittivity)
    assert passive(answer.permeability)


@pytest.mark.parametrize("orientation", ["random", "aligned"])
@pytest.mark.parametrize("rule", [name for name, rule in RULES.items() if rule.takes_shapes])
def test_one_kind_of_spheroid(rule: str, orientation: str) -> None:
    random = np.random.default_rng(1945)
    text, values = everything(("m0", "m1"), random)
    text += f"""
        [inclusions.g1]
        material = "m1"
        volume_fraction = 0.1
        orientation = "{orientation}"
        shape = {{ kind = "spheroid", aspect_ratio = 2.0 }}
        [mixing]
        rule = "{rule}"
    """
    values["inclusions.g1.volume_fraction"] = random.uniform(0.0, 1.0, DRAWS)
    values["inclusions.g1.shape.aspect_ratio"] = 10.0 ** random.uniform(-2, 2, DRAWS)
    answer = evaluator.mixture(text).response(values, OMEGA)
    assert passive(answer.permittivity)
    assert passive(answer.permeability)


@pytest.mark.parametrize("rule", MANY)
def test_index_models_with_absorbing_grains(rule: str) -> None:
    """Clear index models and an absorbing constant index; a Sellmeier host is metallic inside its bands."""
    random = np.random.default_rng(1880)
    text = """
        host.material = "m0"
        materials.m1.index = { model = "constant", n = 1.5, k = 0.1 }
        materials.m2.index = { model = "cauchy", a = 1.5, b = "0.005 µm^2" }
        materials.m0.index.model = "sellmeier"
        materials.m0.index.strengths = [1.0, 0.5]
        materials.m0.index.resonance_wavelengths = ["100 nm", "9 µm"]
    """
    clear = {"schott", "conrady", "herzberger", "abbe"}  # real n by their formulas, as cauchy
    assert set(INDEX_MODELS) == {"sellmeier", "constant", "cauchy"} | clear, "draw the new one here too"
    values = {
        "materials.m0.index.strengths.0": random.uniform(0.1, 3.0, DRAWS),
        "materials.m0.index.strengths.1": random.uniform(0.0, 2.0, DRAWS),
        "materials.m1.index.n": random.uniform(0.05, 5.0, DRAWS),
        "materials.m1.index.k": 10.0 ** random.uniform(-6, 1, DRAWS),
        "materials.m2.index.b": random.uniform(0.0, 1e-14, DRAWS),
    }
    omega = evaluator.from_um(np.geomspace(0.2, 50.0, 101))
    assert passive(
        evaluator.permittivity(text + SPHERES + evaluator.mixing(rule), omega, values | fractions(random))
    )


SPHERES = """
inclusions.g1 = { material = "m1", volume_fraction = 0.1 }
inclusions.g2 = { material = "m2", volume_fraction = 0.1 }
voids.volume_fraction = 0.05
"""


def everything(materials: tuple[str, ...], random: np.random.Generator) -> tuple[str, dict[str, np.ndarray]]:
    """Materials with every registered term in both ε and μ, and draws of all their numbers."""
    text, values = f'host.material = "{materials[0]}"\n', {}
    for name in materials:
        for quantity in ("permittivity", "permeability"):
            body, dimensions = terms_of(f"materials.{name}.{quantity}")
            text += body + "\n"
            values |= drawn(dimensions, random)
    return text, values


def fractions(random: np.random.Generator) -> dict[str, np.ndarray]:
    parts = random.dirichlet([1.0, 1.0, 1.0, 0.5], DRAWS).T
    return {
        "inclusions.g1.volume_fraction": parts[1],
        "inclusions.g2.volume_fraction": parts[2],
        "voids.volume_fraction": parts[3],
    }
