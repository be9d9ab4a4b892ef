"""Which check each material of the library has: what the tests run, and the words that its file says.

A material that is not here has none, and its file claims none.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from typing import Protocol

import evaluator
import numpy as np
import open_data
from chemicals import permittivity as handbook
from chemicals import refractivity

from mixsim.recipe import library

Page = tuple[str, str, str]  # shelf, book and page of the open collection of optical constants
YELLOW = 0.5893  # µm


class Check(Protocol):
    """What a material is held to."""

    tolerance: float

    def words(self, name: str) -> str:
        """What the check is and how close it holds, for the file of the material."""

    def deviation(self, name: str) -> float:
        """How far the material is off."""


@dataclass(frozen=True)
class Origin:
    """The page that its source names, computed anew: it shows a slip of ours, not an error of the page."""

    page: Page
    tolerance: float = 5e-7  # the collection is in single precision

    def words(self, name: str) -> str:
        return f"open page of its source, {_short(self.tolerance)} in n"

    def deviation(self, name: str) -> float:
        return _apart(name, self.page)


@dataclass(frozen=True)
class Other:
    """Another author's or maker's numbers of the same substance, wherever both hold."""

    page: Page
    tolerance: float

    def words(self, name: str) -> str:
        low, high = _shared(name, self.page)
        whose = "another maker's glass" if self.page[0] == "specs" else "another author's table"
        return f"{whose}, {_short(self.tolerance)} in n from {low:.2g} to {high:.3g} µm"

    def deviation(self, name: str) -> float:
        return _apart(name, self.page)


@dataclass(frozen=True)
class Fit:
    """The open table of the same fit, whose parameters were written from memory."""

    book: str
    tolerance: float = 3e-4  # the table has five digits of n and of k

    def words(self, name: str) -> str:
        return f"open table of the same fit, {_short(self.tolerance)} in ε over the band"

    def deviation(self, name: str) -> float:
        return _off(name, ("main", self.book, "Rakic-LD"), 0.0, np.inf)


@dataclass(frozen=True)
class Compilation:
    """An open compilation of n and k, between two wavelengths [µm]."""

    page: Page
    low: float
    high: float
    tolerance: float

    def words(self, name: str) -> str:
        span = f"{300 / self.high * 1e3:.2g} to {300 / self.low * 1e3:.4g} GHz"
        return f"open compilation, {self.tolerance:.0%} in ε from {span}"

    def deviation(self, name: str) -> float:
        return _off(name, self.page, self.low, self.high)


@dataclass(frozen=True)
class Static:
    """The static permittivity of a handbook at 25 °C."""

    number: str  # of the substance in the registry of chemical abstracts
    tolerance: float = 0.03

    def words(self, name: str) -> str:
        return f"handbook static level, {self.tolerance:.0%}"

    def deviation(self, name: str) -> float:
        row = handbook.permittivity_data_CRC.loc[self.number].fillna(0.0)
        theirs = handbook.permittivity_CRC(298.15, row["A"], row["B"], row["C"], row["D"])
        static = evaluator.mixture(f'host.material = "{name}"').limits({}).static
        return float(abs(static / theirs - 1.0))


@dataclass(frozen=True)
class Yellow:
    """The refractive index of a handbook for yellow light."""

    number: str
    tolerance: float = 3e-3  # two kelvin, and the fit of the source

    def words(self, name: str) -> str:
        return f"handbook n_D, {_short(self.tolerance)}"

    def deviation(self, name: str) -> float:
        theirs, _ = refractivity.RI(self.number)
        return float(abs(_index(name, np.array([YELLOW]))[0] - theirs))


@dataclass(frozen=True)
class Elsewhere:
    """A test of its own."""

    said: str
    test: str
    tolerance: float = 0.0

    def words(self, name: str) -> str:
        return self.said

    def deviation(self, name: str) -> float:
        return 0.0


def said(name: str) -> str:
    """What the file of a material says of its checks."""
    return "; ".join(check.words(name) for check in CHECKS.get(name, ()))


def _short(tolerance: float) -> str:
    return f"{tolerance:.0e}".replace("e-0", "e-")


def _index(name: str, wavelength: np.ndarray) -> np.ndarray:
    return np.sqrt(evaluator.pure(name, evaluator.from_um(wavelength))).real


def band(name: str) -> tuple[float, float]:
    """Vacuum wavelengths [µm] between which a material holds."""
    low, high = library.band(library.definition(name) or {})
    return tuple(float(evaluator.from_um(1.0) / end) for end in (high, low))  # type: ignore[return-value]


def _shared(name: str, page: Page) -> tuple[float, float]:
    (low, high), (first, last) = band(name), open_data.window(*page)
    return max(low, first), min(high, last)


def _apart(name: str, page: Page) -> float:
    """Largest difference in n between a material and a page where both hold."""
    low, high = _shared(name, page)
    wavelength = np.geomspace(low * 1.0001, high * 0.9999, 60)
    air = np.ones_like(wavelength)
    if page[0] == "specs":  # catalogues are against air of 20 °C; the formula is printed for 15 °C
        excess = np.sqrt(open_data.gas("other", "air", "Ciddor", wavelength)) - 1.0
        air = 1.0 + excess * 288.15 / 293.15
    theirs = open_data.index(*page, wavelength / air) * air
    return float(np.max(np.abs(_index(name, wavelength) - theirs)))


def _off(name: str, page: Page, low: float, high: float) -> float:
    """Largest relative difference in the complex permittivity from a table."""
    wavelength, theirs = open_data.table(*page)
    chosen = (wavelength >= low) & (wavelength <= high)
    ours = evaluator.pure(name, evaluator.from_um(wavelength[chosen]))
    return float(np.max(np.abs(ours / theirs[chosen] - 1.0)))


def _metals(**books: str) -> dict[str, tuple[Check, ...]]:
    return {name: (Fit(book),) for name, book in books.items()}


def _glass(page: str, *others: Check) -> tuple[Check, ...]:
    return (Origin(("specs", "SCHOTT-optical", page)), *others)


def _maker(book: str, page: str, tolerance: float) -> Check:
    return Other(("specs", f"{book}-optical", page), tolerance)


def _crystal(
    book: str, page: str, other: str = "", tolerance: float = 0.0, *, origin: float = 5e-7
) -> tuple[Check, ...]:
    return _paged("main", book, page, other, tolerance, origin)


def _organic(
    book: str, page: str, other: str = "", tolerance: float = 0.0, *, origin: float = 5e-7
) -> tuple[Check, ...]:
    return _paged("organic", book, page, other, tolerance, origin)


def _paged(
    shelf: str, book: str, page: str, other: str, tolerance: float, origin: float
) -> tuple[Check, ...]:
    second = (Other((shelf, book, other), tolerance),) if other else ()
    return (Origin((shelf, book, page), origin), *second)


def _liquid(number: str, checks: Iterable[Check] = (), *, static: float = 0.03) -> tuple[Check, ...]:
    """What a handbook says of a liquid: its static level, and its yellow line where there is an index."""
    optical = tuple(checks)
    yellow = (Yellow(number),) if optical else ()
    return (*optical, *yellow, Static(number, static))


CHECKS: dict[str, tuple[Check, ...]] = {
    # metals
    **_metals(gold="Au", silver="Ag", aluminium="Al", copper="Cu", nickel="Ni", platinum="Pt"),
    **_metals(titanium="Ti", tungsten="W", chromium="Cr", beryllium="Be", palladium="Pd"),
    # water and gases
    "air": (Other(("other", "air", "Ciddor"), 2e-5),),
    "water": (
        Compilation(("main", "H2O", "Segelstein"), 5e3, 3e6, 0.03),
        Elsewhere("standard static level, 0.1", "test_water_static"),
    ),
    "water-terahertz": (Compilation(("main", "H2O", "Segelstein"), 300.0, 3e6, 0.11),),
    "water-visible": (
        *_crystal("H2O", "Daimon-20.0C"),
        Elsewhere("standard index, 3e-5", "test_water_index"),
    ),
    "ice": (Elsewhere("open compilation, 6e-3 in ε′ from 3 to 100 GHz", "test_ice_against_the_compilation"),),
    # liquids, index
    "acetone": _liquid("67-64-1", _organic("acetone", "Chang", "Rheims", 3e-3)),
    "toluene": _liquid("108-88-3", _organic("toluene", "Kedenburg", "Moutzouris", 6e-3)),
    "cyclohexane": _liquid("110-82-7", _organic("cyclohexane", "Kozma", "Kerl-293K", 3e-3)),
    "ethanol-visible": _liquid("64-17-5", _organic("ethanol", "Chang", "Sani-formula", 2e-3)),
    "methanol-visible": _liquid("67-56-1", _organic("methanol", "Chang", "Moutzouris", 5e-3)),
    "1-propanol": _liquid("71-23-8", _organic("propanol", "Chang", "Moutzouris", 3e-3)),
    "isopropanol-visible": _liquid("67-63-0", _organic("propanol", "Sani-formula")),
    "butanol-visible": _liquid("71-36-3", _organic("butanol", "Chang", "Moutzouris-n", 5e-3)),
    "acetonitrile": _liquid("75-05-8", _organic("acetonitrile", "Chang", "Moutzouris", 4e-3)),
    "dimethyl-sulfoxide": _liquid("67-68-5", _organic("dimethyl_sulfoxide", "Kozma", "Li", 3e-2)),
    "tetrahydrofuran": _liquid("109-99-9", _organic("tetrahydrofuran", "Chang", "Li", 1e-2)),
    "xylene": _liquid("106-42-3", _organic("xylene", "Chang", "Li", 1e-2)),
    "hexane": _liquid("110-54-3", _organic("hexane", "Chang", "Kozma", 3e-3)),
    "benzene": _liquid("71-43-2", _organic("benzene", "Chang", "Moutzouris", 5e-3)),
    "dichloromethane": _liquid("75-09-2", _organic("dichloromethane", "Chang", "Li", 1e-2)),
    "chloroform": _liquid("67-66-3", _organic("chloroform", "Chang", "Kedenburg", 2e-3)),
    "ethylene-glycol-visible": _liquid(
        "107-21-1", _organic("ethylene_glycol", "Sani-formula", "Kozma", 1e-2)
    ),
    "glycerol-visible": _liquid("56-81-5", _organic("glycerol", "Rheims", "Gupta", 2e-3), static=0.06),
    # liquids, relaxation
    "ethanol": _liquid("64-17-5"),
    "methanol": _liquid("67-56-1"),
    "1-propanol-radio": _liquid("71-23-8"),
    "isopropanol": _liquid("67-63-0"),
    "ethylene-glycol": _liquid("107-21-1"),
    "glycerol": _liquid("56-81-5", static=0.06),
    "dimethylformamide": _liquid("68-12-2"),
    "dimethyl-sulfoxide-radio": _liquid("67-68-5"),
    "acetonitrile-radio": _liquid("75-05-8"),
    # glasses
    "fused-silica": _crystal("SiO2", "Malitson", "Franta", 1e-3),
    "germania": _crystal("GeO2", "Fleming"),
    "borosilicate-crown": _glass("N-BK7", _maker("CDGM", "H-K9L", 6e-4)),
    "flint": _glass("F2", _maker("CDGM", "F4", 2e-4)),
    "light-flint": _glass("LF5", _maker("HIKARI", "LF5", 2e-4)),
    "dense-flint": _glass("SF10", _maker("CDGM", "ZF4", 5e-4)),
    "heavy-flint": _glass("SF6", _maker("HIKARI", "SF6", 2e-4)),
    "barium-crown": _glass("N-BAK4", _maker("CDGM", "H-BAK7", 5e-4)),
    "dense-crown": _glass("N-SK16", _maker("HIKARI", "SK16", 1e-4)),
    "lanthanum-flint": _glass("N-LASF9", _maker("OHARA", "S-LAH71", 1e-3)),
    "fluor-crown": _glass("N-FK51A"),
    "soda-lime-glass-visible": (
        Origin(("glass", "soda-lime", "Rubin-clear"), 1e-3),
        Other(("glass", "soda-lime", "Vogt-5ppm"), 2e-2),
    ),
    "arsenic-sulfide-glass": _crystal("As2S3", "Rodney", "Synowicki", 1e-2),
    # crystals and films
    "sapphire": _crystal("Al2O3", "Malitson-o", "Malitson", 2e-4),
    "quartz": _crystal("SiO2", "Ghosh-o", "Radhakrishnan-o", 2e-3),
    "rutile": _crystal("TiO2", "Devore-o", "Bond-o", 1e-2),
    "anatase": _crystal("TiO2", "Jolivet-anatase", "Bodurov", 3e-2, origin=1e-4),
    "tantala-film": _crystal("Ta2O5", "Gao", "Cheikh-amorphous-6.75-12-25", 1e-2, origin=1e-3),
    "niobia-film": _crystal("Nb2O5", "Lemarchand", "Franta", 3e-2, origin=1e-4),
    "hafnia-film": _crystal("HfO2", "Al-Kuhaili", "Bright", 2e-1),
    "zirconia": _crystal("ZrO2", "Wood"),
    "yttria": _crystal("Y2O3", "Nigara"),
    "zinc-oxide": _crystal("ZnO", "Bond-o", origin=1e-4),
    "magnesia-visible": _crystal("MgO", "Stephens", "Stephens-vis", 3e-4, origin=5e-4),
    "beryllia-visible": _crystal("BeO", "Edwards-o"),
    "calcite": _crystal("CaCO3", "Ghosh-o"),
    "spinel": _crystal("MgAl2O4", "Tropf", "Chernova", 1e-2),
    "yttrium-aluminium-garnet": _crystal("Y3Al5O12", "Zelmon", "Franta", 5e-4),
    "lithium-niobate": _crystal("LiNbO3", "Zelmon-o"),
    "strontium-titanate": _crystal("SrTiO3", "Bond"),
    "barium-titanate-visible": _crystal("BaTiO3", "Wemple-o", "Johnston-x", 5e-2),
    "tellurium-dioxide": _crystal("TeO2", "Uchida-o"),
    "magnesium-fluoride": _crystal("MgF2", "Dodge-o", "Li-o", 2e-2),
    "calcium-fluoride": _crystal("CaF2", "Malitson", "Daimon-20", 1e-4),
    "barium-fluoride": _crystal("BaF2", "Malitson", "Li", 2e-4),
    "strontium-fluoride": _crystal("SrF2", "Feldman", "Li", 2e-3),
    "lithium-fluoride": _crystal("LiF", "Li"),
    "sodium-chloride": _crystal("NaCl", "Li"),
    "potassium-chloride": _crystal("KCl", "Li", "Querry", 5e-2),
    "potassium-bromide": _crystal("KBr", "Li"),
    "caesium-iodide": _crystal("CsI", "Li", "Rodney", 1e-3),
    "silver-chloride": _crystal("AgCl", "Tilton", origin=2e-4),
    "silver-bromide": _crystal("AgBr", "Polyanskiy"),
    "zinc-selenide": _crystal("ZnSe", "Connolly", "Marple", 2e-2),
    "zinc-sulfide": _crystal("ZnS", "Amotchkina", "Querry", 6e-2),
    "silicon": _crystal("Si", "Salzberg", "Li-293K", 8e-3),
    "germanium": _crystal("Ge", "Burnett", "Li-293K", 2e-2),
    "gallium-arsenide": _crystal("GaAs", "Skauli", "Rakic", 3e-2),
    "gallium-nitride": _crystal("GaN", "Barker-o"),
    "silicon-nitride": _crystal("Si3N4", "Luke", "Philipp", 5e-2),
    "silicon-carbide": _crystal("SiC", "Singh-o", "Wang-4H-o", 3e-3),
    "diamond": _crystal("C", "Peter", "Phillip", 2e-2),
    "aluminium-nitride": _crystal("AlN", "Pastrnak-o"),
    # polymers
    "acrylic": _organic("poly_methyl_methacrylate", "Sultanova", "Szczurowski", 2e-3),
    "polystyrene": _organic("polystyrene", "Sultanova", "Zhang", 5e-3),
    "polycarbonate": _organic("polycarbonate", "Sultanova", "Zhang", 1e-2),
    "polyester": _organic("polyethylene_terephthalate", "Zhang", origin=2e-3),
    "polyvinyl-chloride-visible": _organic("polyvinil_chloride", "Zhang", origin=3e-3),
    "polyether-imide-visible": _organic("polyetherimide", "Zhang", origin=3e-3),
    "polyimide-visible": _paged("other", "Kapton", "French", "Arakawa", 1e-1, 5e-3),
    "polylactic-acid": _organic("polylactic_acid", "Bodurov"),
    "polyvinyl-alcohol": _organic("polyvinyl_alcohol", "Bodurov", "Schnepf", 1e-2),
    "polyvinylpyrrolidone": _organic("polyvinylpyrrolidone", "Konig"),
    "silicone-visible": _organic(
        "polydimethylsiloxane", "Schneider-RTV615", "Schneider-Sylgard184", 2e-3
    ),
    "cyclic-olefin-polymer-visible": _paged("other", "ZeonexE48R", "Sultanova", "", 0.0, 5e-7),
    "styrene-acrylonitrile": _paged("other", "C8H8_n-C3H3N_m", "Sultanova", "", 0.0, 5e-7),
    "epoxy-photoresist": _paged("other", "Microchem_SU8_3000", "specs", "", 0.0, 5e-7),
}  # fmt: skip
