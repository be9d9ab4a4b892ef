"""Weigh sheets against sums by hand: neat, from stocks, coats, prices; and what is refused."""

from __future__ import annotations

import numpy as np
import pytest

import mixsim
from mixsim.errors import BadInput

RECIPE = """
    title = "Invented filled resin"
    host.material = "resin"
    inclusions.oxide = {{ material = "oxide", volume_fraction = "20 %" }}
    voids.volume_fraction = "4 %"
    [materials]
    resin = {{ density = "1.2 g/cm^3", price = "8 EUR/kg", permittivity.infinity = 3.0 }}
    oxide = {{ density = "4 g/cm^3", price = "20 EUR/kg", permittivity.infinity = 10.0 }}
    [batch]
    {batch}
"""


def sheet(batch: str, **settings: object) -> mixsim.analysis.Weighed:
    return mixsim.weigh(mixsim.parse(RECIPE.format(batch=batch), settings=settings))


def grams(answer: mixsim.analysis.Weighed) -> dict[str, float]:
    return {portion.name: 1e3 * portion.mass for portion in answer.portions}


def test_neat_constituents_by_hand() -> None:
    """0.76 × 1.2 = 0.912 g of resin and 0.2 × 4 = 0.8 g of oxide in each cm³."""
    whole = 0.76 * 1.2 + 0.2 * 4.0
    by_mass = sheet('mass = "250 g"\nparts = 10')
    assert grams(by_mass) == pytest.approx({"host": 250 * 0.912 / whole, "oxide": 250 * 0.8 / whole})
    assert by_mass.price == pytest.approx(0.250 * (0.912 * 8 + 0.8 * 20) / whole)
    assert by_mass.to_dict()["price_per_part"] == pytest.approx(by_mass.price / 10)
    by_volume = sheet('volume = "40 cm^3"')
    assert grams(by_volume) == pytest.approx({"host": 40 * 0.912, "oxide": 40 * 0.8})


def test_a_paste_with_solvent_and_its_wet_coat() -> None:
    """A coat of 50 µm on 1 m², the oxide from a paste of 40 % in a solvent of 0.9 g/cm³, 10 % of it resin."""
    answer = sheet(
        'area = "1 m^2"\nthickness = "50 µm"\n'
        "stocks.paste = { contains = { oxide = '40 %', host = '10 %' }, solvent_density = '0.9 g/cm^3' }"
    )
    resin, oxide = 50 * 0.912, 50 * 0.8
    paste = oxide / 0.4
    assert grams(answer) == pytest.approx({"host": resin - 0.1 * paste, "paste": paste})
    assert answer.reached and answer.wet_mass == pytest.approx((resin + oxide + 0.5 * paste) / 1e3)
    assert answer.dry_thickness == pytest.approx(50e-6)
    assert answer.wet_thickness == pytest.approx(50e-6 + 0.5 * paste / 1e3 / 900)
    assert answer.coat_weight == pytest.approx((resin + oxide) / 1e3)


def test_a_thin_masterbatch_cannot_reach_the_loading() -> None:
    """35 % by weight at most: the nearest is nothing but the masterbatch."""
    answer = sheet('mass = "100 g"\nstocks.masterbatch = { contains = { oxide = "35 %", host = "65 %" } }')
    assert not answer.reached
    assert grams(answer)["host"] == 0.0
    brought = {one.name: one.brought for one in answer.constituents}
    assert brought["oxide"] / (brought["oxide"] + brought["host"]) == pytest.approx(0.35)


def test_uncertainties_by_hand() -> None:
    """m_paste = V f ρ / c: relative uncertainties add in quadrature."""
    answer = sheet(
        'volume = "40 cm^3 ± 0.4 cm^3"\nstocks.paste = { contains = { oxide = "40 % ± 0.8 %" } }',
        **{"inclusions.oxide.volume_fraction": "20 % ± 0.3 %", "materials.oxide.density": "4 ± 0.04 g/cm^3"},
    )
    (paste,) = [portion for portion in answer.portions if portion.stock]
    relative = np.sqrt(0.01**2 + (0.3 / 20) ** 2 + 0.01**2 + (0.8 / 40) ** 2)
    assert paste.std / paste.mass == pytest.approx(relative, rel=2e-3)
    assert set(answer.std_from) == {
        "inclusions.oxide.volume_fraction",
        "materials.oxide.density",
        "batch.volume",
        "batch.stocks.paste.contains.oxide",
    }


@pytest.mark.parametrize(
    ("batch", "found"),
    [
        ("parts = 2", "no size for a batch"),
        ('mass = "1 g"\nvolume = "1 cm^3"', "mass and volume for a batch"),
        ('area = "1 m^2"', "area for a batch"),
        ('mass = "1 g"\nstocks.p = { contains = { gold = "1 %" } }', "'gold' is no constituent"),
        ('mass = "1 g"\nstocks.p = { contains = { oxide = "60 %", host = "60 %" } }', "add up to 1.2"),
        ('mass = "1 g"\nstocks.oxide = { contains = { oxide = "60 %" } }', "a stock called 'oxide'"),
        ('mass = "1 g"\nstocks.p = { contains = { oxide = "60 %" }, price = "cheap" }', "is no price"),
        ('mass = "1 g"\nstocks.p = { contains = { oxide = "60 %" }, price = "1 USD/kg" }', "beside one in"),
        ('mass = "1 V"', "batch.mass"),
    ],
)
def test_batches_that_cannot_be_weighed(batch: str, found: str) -> None:
    with pytest.raises(BadInput) as error:
        sheet(batch)
    assert found in str(error.value)


def test_no_batch_and_no_density() -> None:
    with pytest.raises(BadInput, match="no batch to weigh"):
        mixsim.weigh(mixsim.parse(RECIPE.format(batch='mass = "1 g"').split("[batch]")[0]))
    text = RECIPE.format(batch='mass = "1 g"').replace('density = "4 g/cm^3", ', "")
    with pytest.raises(BadInput, match="density is missing"):
        mixsim.weigh(mixsim.parse(text))
