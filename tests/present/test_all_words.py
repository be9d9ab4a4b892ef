"""A term in every unit and description, against numbers worked out here."""

from __future__ import annotations

import math
import re

import pytest

from mixsim.present.all_words import in_all_words
from mixsim.recipe import library


def row(text: str, *words: str) -> list[str]:
    (line,) = [
        line for line in text.splitlines() if re.match(r"\s+".join(map(re.escape, words)) + r"\s{2,}", line)
    ]
    return re.split(r"\s{2,}", line)[len(words) :]


def test_gold_in_every_unit() -> None:
    """√0.760 × 9.03 eV; 1 eV is 241.7989 THz and 8065.544 cm^-1 (CODATA)."""
    text = in_all_words("gold")
    energy = math.sqrt(0.760) * 9.03
    shown = [float(cell) for cell in row(text, "free", "plasma")]
    expected = [energy, 241.7989 * energy, 8065.544 * energy, 1239.842 / energy, 1.519267e15 * energy]
    assert shown == pytest.approx(expected, rel=1e-4)
    assert len(row(text, "free", "damping")) == 4  # a width has no wavelength
    rate = 0.053 * 1.519267e15
    assert float(row(text, "free", "collision time")[0].split()[0]) == pytest.approx(1e15 / rate, rel=1e-3)
    conductivity = 8.8541878e-12 * (energy * 1.519267e15) ** 2 / rate
    assert float(row(text, "free", "dc conductivity")[0].split()[0]) == pytest.approx(conductivity, rel=1e-4)
    step = 0.071 * (9.03 / 2.969) ** 2
    assert float(row(text, "band3", "static step")[0]) == pytest.approx(step, rel=1e-4)


def test_heavy_water_relaxes_at_fifteen_gigahertz() -> None:
    text = in_all_words("heavy-water")
    assert float(row(text, "dipoles", "relaxation")[1]) == pytest.approx(
        1e-12 / (2 * math.pi * 10.4e-12), rel=1e-4
    )
    assert "19.59 mm" in text


@pytest.mark.parametrize("name", library.names())
def test_every_material_is_shown_or_has_no_terms(name: str) -> None:
    content = library.definition(name)
    assert content is not None
    responses = [content.get(quantity, {}) for quantity in ("permittivity", "permeability")]
    terms = any(response.get("terms") or response.get("model") for response in responses)
    assert bool(in_all_words(name)) == bool(terms)
