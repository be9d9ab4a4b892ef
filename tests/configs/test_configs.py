"""Every shipped recipe runs, is passive and says something that its trade would recognise."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

import mixsim
from mixsim.mixture import Mixture
from mixsim.units import SPEED_OF_LIGHT

FOLDER = Path(__file__).parents[2] / "configs"
RECIPES = sorted(FOLDER.glob("*.toml"))


def compiled(name: str) -> Mixture:
    return mixsim.load(FOLDER / f"{name}.toml").compile()


def at(name: str, omega: float | np.ndarray) -> np.ndarray:
    return compiled(name).response({}, np.atleast_1d(omega)).permittivity


def nm(wavelength: float | np.ndarray) -> np.ndarray:
    return 2e9 * np.pi * SPEED_OF_LIGHT / np.asarray(wavelength)


def absorption(name: str, wavelength: np.ndarray) -> np.ndarray:
    """Absorption coefficient [1/cm] by vacuum wavelength [nm]."""
    omega = nm(wavelength)
    return 2 * omega / SPEED_OF_LIGHT * np.sqrt(at(name, omega)).imag / 100


def test_the_trades_are_there() -> None:
    assert len(RECIPES) >= 6


@pytest.mark.parametrize("file", RECIPES, ids=lambda file: file.stem)
def test_loads_predicts_and_says_that_its_setting_is_invented(file: Path) -> None:
    recipe = mixsim.load(file)
    prediction = mixsim.predict(recipe)
    assert np.all(np.isfinite(prediction.permittivity))
    assert np.all(prediction.permittivity.imag >= 0)
    assert np.all(prediction.permeability.imag >= 0)
    comment = file.read_text(encoding="utf-8").split("title =")[0]
    assert "invented" in comment


def test_cobalt_glass_is_blue() -> None:
    green, yellow, red, blue = absorption("cobalt-filter-glass", np.array([532.0, 590.0, 646.0, 450.0]))
    assert 4 < green < yellow < 20
    assert 4 < red < 20
    assert blue < 1.5


def test_gold_ruby_and_silver_stain_absorb_where_their_colloids_do() -> None:
    grid = np.arange(400.0, 700.0)
    ruby = absorption("gold-ruby-glass", grid)
    assert 520 < grid[np.argmax(ruby)] < 550
    assert ruby.max() > 3 * ruby[-1]
    grid = np.arange(360.0, 700.0)
    stain = absorption("silver-stain", grid)
    assert 400 < grid[np.argmax(stain)] < 435  # measured 410 to 425; the library's fit lies a little red
    assert stain.max() > 20 * stain[-1]


def test_heat_mirror_is_clear_in_the_visible_and_dark_in_the_infrared() -> None:
    grid = np.arange(450.0, 2500.0, 5.0)
    film = absorption("oxide-heat-mirror-film", grid)
    assert 1500 < grid[np.argmax(film)] < 2200
    assert np.exp(-film[np.abs(grid - 550) < 3].max() * 3e-4) > 0.96  # 3 µm of it
    assert np.exp(-film.max() * 3e-4) < 0.6


def test_laminate_and_absorber_at_ten_gigahertz() -> None:
    laminate = at("ceramic-laminate", 2e10 * np.pi)[0]
    assert laminate.real == pytest.approx(6.0, abs=0.25)
    assert 0.001 < laminate.imag / laminate.real < 0.004
    sheet = compiled("iron-absorber").response({}, np.array([2e9 * np.pi, 2e10 * np.pi]))
    assert 6 < sheet.permittivity[1].real < 12
    assert 1.5 < sheet.permeability[0].real < 3.5
    assert 0.3 < sheet.permeability[1].imag < 2


def test_porous_silica_matches_crown_glass() -> None:
    index = np.sqrt(at("porous-silica-coating", nm(550.0))[0]).real
    assert index == pytest.approx(np.sqrt(1.5185), abs=0.01)


def test_coolant_has_the_index_of_its_table() -> None:
    assert np.sqrt(at("glycerol-coolant", nm(589.3))[0]).real == pytest.approx(1.3841, abs=5e-4)


def test_polarising_glass_darkens_along_the_draw_only() -> None:
    """The longer an axis, the redder its band; in the red only the field along the draw is absorbed."""
    grid = np.arange(400.0, 900.0)
    across, through, along = absorption("polarising-glass", grid)
    assert 600 < grid[np.argmax(along)] < 660
    assert grid[np.argmax(through)] < grid[np.argmax(across)] < 450
    red = int(np.argmax(along))
    assert along[red] > 300 * across[red] > 300 * through[red]


def test_syntactic_foam_is_lighter_and_thinner_than_its_resin() -> None:
    """The glass walls weigh, and raise ε′ above that of so many holes without them."""
    foam = compiled("syntactic-foam")
    assert 640 < float(foam.composition({}).density) < 720
    omega = 2e9 * np.pi * np.array([1.0, 10.0])
    bare = {"inclusions.bubble.coating.thickness": 1e-12}
    with_walls, without = at("syntactic-foam", omega), foam.response(bare, omega).permittivity
    assert np.all((without.real > 1.0) & (without.real < with_walls.real) & (with_walls.real < 2.2))


def test_stable_ceramic_holds_still_where_the_drifts_add_to_nothing() -> None:
    """Where logarithms add, so do drifts: 100 ppm/K of one against 1600 ppm/K of the other, f = 1/17."""
    recipe = mixsim.load(FOLDER / "temperature-stable-ceramic.toml")
    loading = np.array([[0.0], [1 / 17], [0.1]])
    swept = recipe.compile().response(
        {"inclusions.calcium.volume_fraction": loading, "conditions.temperature": np.array([297.15, 299.15])},
        np.array([2e9 * np.pi]),
    )
    cold, warm = swept.permittivity[..., 0].real.T
    drift = np.log(warm / cold) / 2.0 * 1e6  # ppm/K about 25 °C
    assert drift == pytest.approx([100.0, 0.0, -70.0], abs=0.05)
