"""Fits of recipes to invented readings: values, doubt, what cannot be told apart, several samples."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

import mixsim
from mixsim.analysis import Fitted, freed
from mixsim.errors import BadInput
from mixsim.recipe import Recipe

LOADING = "inclusions.oxide.volume_fraction"
PLASMA = "materials.oxide.permittivity.terms.carriers.plasma"
DAMPING = "materials.oxide.permittivity.terms.carriers.damping"
FILM = """
    title = "Invented film"
    band = { from = "500 nm", to = "2500 nm", points = 81 }
    host.material = "clear"
    inclusions.oxide = { material = "oxide", volume_fraction = "4 %" }
    materials.clear.index = { model = "constant", n = 1.5 }
    materials.clear.density = "1.2 g/cm^3"
    [materials.oxide]
    density = "6.6 g/cm^3"
    permittivity.infinity = 4.0
    permittivity.terms.carriers = { model = "drude", plasma = "1.55 eV", damping = "0.12 eV" }
    [unknowns]
"""
CLEAR = 'materials.clear.index = { model = "constant", n = 1.5 }'
BOTH = (
    f'"{LOADING}" = ["0 %", "15 %"]\n"{PLASMA}" = ["0.9 eV", "2.2 eV"]\n"{DAMPING}" = ["0.02 eV", "0.4 eV"]'
)


def written(recipe: Recipe, file: Path, noise: float, seed: int, *, uncertainty: bool = False) -> Path:
    """A spectrum of the recipe with noise on it, as a file."""
    answer = mixsim.predict(recipe)
    random = np.random.default_rng(seed)
    e = answer.permittivity
    std = noise * np.abs(e)
    e = e + std * (random.standard_normal(e.size) + 1j * random.standard_normal(e.size))
    more = ", u(permittivity_real), u(permittivity_imag)" if uncertainty else ""
    lines = ["# convention: exp(-iwt)", f"wavelength [nm], permittivity_real, permittivity_imag{more}"]
    for row in np.stack([answer.axis.shown, e.real, e.imag, std, std], axis=-1).tolist():
        lines.append(", ".join(map(repr, row if uncertainty else row[:3])))
    file.write_text("\n".join(lines), encoding="utf-8")
    return file


@pytest.fixture
def film() -> Recipe:
    return mixsim.parse(FILM + BOTH)


def test_values_come_back(film: Recipe, tmp_path: Path) -> None:
    """With the stated noise: within four uncertainties, reduced sum of squares near one."""
    file = written(film, tmp_path / "read.csv", 2e-3, 1)
    answer = mixsim.fit(film, [file], noise=2e-3)
    truth = {LOADING: film.leaves[LOADING].value, PLASMA: film.leaves[PLASMA].value}
    for path, value in truth.items():
        found = answer.estimates[path]
        assert found.value == pytest.approx(value, abs=4 * found.std)
        assert found.std < 0.01 * value
    assert answer.identifiable
    assert answer.quality.reduced == pytest.approx(1.0, abs=0.3)


def test_noise_is_found_where_none_is_stated(film: Recipe, tmp_path: Path) -> None:
    stated = mixsim.fit(film, [written(film, tmp_path / "a.csv", 2e-3, 2, uncertainty=True)])
    found = mixsim.fit(film, [written(film, tmp_path / "b.csv", 2e-3, 2)])
    assert found.quality.reduced is None and found.quality.noise == pytest.approx(2e-3 * 2.3, rel=0.15)
    assert found.estimates[LOADING].std == pytest.approx(stated.estimates[LOADING].std, rel=0.4)


def test_starts_far_away_reach_the_same(film: Recipe, tmp_path: Path) -> None:
    far = mixsim.parse(FILM + BOTH, settings={LOADING: "14 %", PLASMA: "2.1 eV", DAMPING: "0.35 eV"})
    file = written(film, tmp_path / "read.csv", 1e-3, 3)
    near, other = (mixsim.fit(recipe, [file], noise=1e-3, seed=7) for recipe in (film, far))
    for path in near.estimates:
        assert other.estimates[path].value == pytest.approx(near.estimates[path].value, rel=1e-6)


def test_one_uncertainty_of_a_held_number_is_in_the_answer(film: Recipe, tmp_path: Path) -> None:
    """The ± of the host's index, held: the uncertainty against moving it and fitting again."""
    file = written(film, tmp_path / "read.csv", 1e-4, 4)

    def fitted(n: str) -> Fitted:
        return mixsim.fit(
            mixsim.parse(FILM + BOTH, settings={"materials.clear.index.n": n}),
            [file],
            noise=1e-4,
            starts=1,
        )

    unsure = fitted("1.5 ± 0.001").estimates[LOADING]
    ends = [fitted(n).estimates[LOADING].value for n in ("1.501", "1.499")]
    alone = fitted("1.5").estimates[LOADING]
    assert unsure.std == pytest.approx(np.hypot(alone.std, (ends[0] - ends[1]) / 2), rel=0.02)


def test_what_is_known_beforehand_narrows(film: Recipe, tmp_path: Path) -> None:
    file = written(film, tmp_path / "read.csv", 2e-2, 5)
    text = FILM + BOTH.replace('["0 %", "15 %"]', '{ low = "0 %", high = "15 %", prior = "4.0 % ± 0.01 %" }')
    free, known = (mixsim.fit(recipe, [file], noise=2e-2) for recipe in (film, mixsim.parse(text)))
    assert known.estimates[LOADING].std < 1e-4 < free.estimates[LOADING].std
    assert known.quality.readings == free.quality.readings + 1


def test_dilute_carriers_leave_a_product() -> None:
    """Far above their resonance dilute carriers show f ωp² alone: that is fixed, and what is not is named."""
    recipe = mixsim.parse(
        """
        host.material = "clear"
        [dopants.ion]
        number_density = "1e19 cm^-3"
        terms.line = { model = "lorentz", strength = 0.02, resonance = "1 eV", damping = "0.1 eV" }
        [materials]
        clear.index = { model = "constant", n = 1.5 }
        [measured]
        readings = [
            { at = "1.0 eV", extinction = "2.3e-3 ± 1e-5" },
            { at = "1.1 eV", extinction = "0.6e-3 ± 1e-5" },
        ]
        [unknowns]
        "dopants.ion.number_density" = ["1e18 cm^-3", "1e20 cm^-3"]
        "dopants.ion.terms.line.strength" = [1e-3, 1.0]
        """
    )
    answer = mixsim.fit(recipe)
    assert answer.verdict == "undecided"
    best, worst = answer.combinations
    assert best.fixed and best.std < 0.01
    assert sorted(best.powers.values()) == pytest.approx([1.0, 1.0], abs=1e-3)
    assert not worst.fixed


def test_samples_share_some_and_own_others() -> None:
    """One plasma frequency for two films, a loading for each."""
    recipe = mixsim.parse(
        FILM
        + f'"{PLASMA}" = ["0.9 eV", "2.2 eV"]\n'
        + f"""
        [[samples]]
        name = "thin"
        readings = [
            {{ at = "800 nm", index = "1.4985 ± 0.0005" }}, {{ at = "2000 nm", index = "1.44 ± 0.001" }},
            {{ at = "2300 nm", extinction = "0.20 ± 0.005" }},
        ]
        unknowns."{LOADING}" = ["0 %", "15 %"]
        [[samples]]
        name = "thick"
        set = {{ "materials.clear.index.n" = 1.52 }}
        readings = [
            {{ at = "800 nm", index = "1.515 ± 0.0005" }}, {{ at = "2000 nm", index = "1.41 ± 0.001" }},
            {{ at = "2300 nm", extinction = "0.40 ± 0.005" }},
        ]
        unknowns."{LOADING}" = ["0 %", "15 %"]
        """
    )
    answer = mixsim.fit(recipe)
    assert list(answer.estimates) == [PLASMA, f"samples.thin.{LOADING}", f"samples.thick.{LOADING}"]
    thin, thick = (answer.estimates[f"samples.{name}.{LOADING}"].value for name in ("thin", "thick"))
    assert 0.0 < thin < thick
    assert {met.observation.sample for met in answer.met} == {"thin", "thick"}


def test_density_and_ash_tell_loading_and_voids_apart() -> None:
    """By hand: 30 % oxide of 6 in a host of 1.2 g/cm³ and 5 % voids; the oxide stays, the host leaves 2 %."""
    oxide, voids = 0.30, 0.05
    mass = np.array([0.65 * 1.2, 0.30 * 6.0])
    density, ash = mass.sum(), (0.02 * mass[0] + mass[1]) / mass.sum()
    recipe = mixsim.parse(f"""
        host.material = "resin"
        inclusions.oxide = {{ material = "oxide", volume_fraction = "20 %" }}
        voids.volume_fraction = "1 %"
        materials.resin = {{ density = "1.2 g/cm^3", ash_yield = 0.02, permittivity.infinity = 3.0 }}
        materials.oxide = {{ density = "6 g/cm^3", ash_yield = 1, permittivity.infinity = 30.0 }}
        measured.density = "{density} ± 0.002 g/cm^3"
        measured.ash = "{100 * ash} % ± 0.2 %"
        unknowns."{LOADING}" = ["0 %", "60 %"]
        unknowns."voids.volume_fraction" = ["-5 %", "20 %"]
    """)
    answer = mixsim.fit(recipe)
    assert answer.estimates[LOADING].value == pytest.approx(oxide, abs=1e-9)
    assert answer.estimates["voids.volume_fraction"].value == pytest.approx(voids, abs=1e-9)


def test_negative_voids_are_evidence_not_zero() -> None:
    """A piece denser than its constituents allow: the void content comes out below zero, and is said to."""
    recipe = mixsim.parse("""
        host.material = "resin"
        voids.volume_fraction = "1 %"
        materials.resin = { density = "1.20 g/cm^3", permittivity.infinity = 3.0 }
        measured.density = "1.23 ± 0.01 g/cm^3"
        unknowns."voids.volume_fraction" = ["-10 %", "20 %"]
    """)
    answer = mixsim.fit(recipe)
    assert answer.estimates["voids.volume_fraction"].value == pytest.approx(1.0 - 1.23 / 1.2)
    assert "negative-fraction" in {caution.kind for caution in answer.warnings}


def test_profile_interval_against_a_scan(film: Recipe, tmp_path: Path) -> None:
    file = written(film, tmp_path / "read.csv", 3e-2, 6)
    free = [freed(film, LOADING, "0 %", "15 %"), freed(film, PLASMA, "0.9 eV", "2.2 eV")]
    answer = mixsim.fit(film, [file], free=free, noise=3e-2, profiled=True)
    low, high = answer.estimates[LOADING].interval
    best = answer.quality.reduced * (answer.quality.readings - 2)
    for end in (low, high):
        held = mixsim.parse(FILM + BOTH, settings={LOADING: end})
        other = mixsim.fit(held, [file], free=free[1:], noise=3e-2, starts=2)
        excess = other.quality.reduced * (other.quality.readings - 1) - best
        assert excess == pytest.approx(3.84, abs=0.1)


def test_readings_that_are_out_weigh_less_with_a_robust_loss(film: Recipe, tmp_path: Path) -> None:
    file = written(film, tmp_path / "read.csv", 1e-3, 8)
    lines = file.read_text(encoding="utf-8").splitlines()
    for place in range(10, 80, 14):
        x, real, imag = lines[place].split(", ")
        lines[place] = f"{x}, {float(real) + 0.3}, {imag}"
    file.write_text("\n".join(lines), encoding="utf-8")
    plain, robust = (
        mixsim.fit(film, [file], noise=1e-3, loss=loss).estimates[LOADING].value
        for loss in ("linear", "cauchy")
    )
    truth = film.leaves[LOADING].value
    assert abs(robust - truth) < 0.2 * abs(plain - truth)


@pytest.mark.parametrize(
    ("text", "data", "found"),
    [
        ("", (), "nothing was read"),
        ("", ("missing.csv",), "no such file"),
        ("measured.spectrum = 'gone.csv'", (), "measured.spectrum: 'gone.csv': no such file"),
        ("measured.readings = [{ at = '1 GHz' }]", (), "measured.readings.0: a reading of nothing"),
        ("measured.density = '2 g/cm^3'", (), "density states no ±"),
        ("measured.ash = '20 % ± 1 %'", (), "ash_yield is missing"),
        (
            "measured.static = '3 ± 0.1'\nmaterials.clear.index = { model = 'cauchy', a = 1.5 }",
            (),
            "clear has no static level",
        ),
        (
            "measured.readings = [{ at = '1 eV', index = '1.5 ± 0.1' }, { at = '1 eV', extinction = 0.1 }]",
            (),
            "and other readings do",
        ),
        ("measured.readings = [{ at = '1 eV', index = '1.5 ± 0.1' }]", (), "3 unknowns and 1 readings"),
        (
            "[[samples]]\nname = 'a'\nset = { 'host.material' = 'nothing' }\nstatic = '2 ± 1'",
            (),
            "samples.0.set.host.material: unknown material 'nothing'",
        ),
        ("[[samples]]\nname = 'a'", (), "nothing was read on a"),
        ("[[samples]]\nname = 'a'\nstatic = '2 ± 1'", ("x.csv",), "a file beside several samples"),
    ],
)
def test_what_cannot_be_fitted(text: str, data: tuple[str, ...], found: str) -> None:
    base = FILM.replace('    materials.clear.index = { model = "constant", n = 1.5 }\n', "")
    if "clear.index" not in text:
        base = base.replace("[materials.oxide]", CLEAR + "\n[materials.oxide]")
    before, after = (text, "") if "[[" not in text else ("", text)
    with pytest.raises(BadInput) as error:
        mixsim.fit(mixsim.parse(f"{before}\n{base}\n{BOTH}\n{after}"), data)
    assert found in str(error.value)
