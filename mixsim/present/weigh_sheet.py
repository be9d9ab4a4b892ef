"""A weigh sheet as text."""

from __future__ import annotations

from typing import TYPE_CHECKING

from mixsim.present.columns import paragraph, table
from mixsim.present.phrases import NONE, cautions
from mixsim.units import show

if TYPE_CHECKING:
    from mixsim.analysis.weighing import Weighed

HANDLING = (
    "handling: fine powders are inhaled and some burn or explode in air, solvents are flammable and toxic; "
    "read the safety data sheet of each constituent first, and follow local codes"
)


def weighed(answer: Weighed) -> str:
    """What to weigh, what it makes, its coat and its price."""
    head = f"{answer.recipe.schema.title or answer.recipe.file}\nbatch of {_mass(answer.dry_mass)} dry"
    head += f", {answer.parts} parts" if answer.parts > 1 else ""
    rows = []
    for portion in answer.portions:
        share = portion.mass / answer.wet_mass
        price = NONE if portion.price is None else f"{portion.price:.4g} {answer.currency}"
        said = show(portion.mass, "mass", "g", portion.std if portion.std > 0.0 else None)
        rows.append([portion.name, "stock" if portion.stock else "neat", said, f"{100 * share:.4g} %", price])
    parts = [head, table(["weigh", "", "mass", "of all", "price"], rows, left=2)]
    if not answer.reached:
        rows = [[one.name, _mass(one.wanted), _mass(one.brought)] for one in answer.constituents]
        text = "these stocks cannot make this mixture; nearest to it they bring"
        parts.append(f"{text}\n{table(['constituent', 'wanted', 'brought'], rows)}")
    facts = _facts(answer)
    if facts:
        parts.append(table(["", ""], facts, left=2))
    if answer.std_from:
        parts.append(paragraph(f"± is one standard uncertainty, from that of {', '.join(answer.std_from)}"))
    return "\n\n".join([*parts, *cautions(answer.warnings), paragraph(HANDLING)])


def _mass(value: float) -> str:
    return show(value, "mass", "g")


def _facts(answer: Weighed) -> list[list[str]]:
    facts = []
    if answer.wet_mass > answer.dry_mass * (1.0 + 1e-9):
        facts.append(["mass with solvent", _mass(answer.wet_mass)])
    if answer.dry_volume is not None:
        facts.append(["volume, dry", show(answer.dry_volume, "volume", "cm^3")])
    if answer.dry_thickness is not None:
        facts.append(["thickness, dry", show(answer.dry_thickness, "length", "µm")])
    if answer.wet_thickness is not None and answer.wet_mass > answer.dry_mass * (1.0 + 1e-9):
        facts.append(["thickness, wet", show(answer.wet_thickness, "length", "µm")])
    if answer.coat_weight is not None:
        facts.append(["coat weight, dry", f"{1e3 * answer.coat_weight:.4g} g/m^2"])
    if answer.parts > 1:
        facts.append(["mass of one part, dry", _mass(answer.dry_mass / answer.parts)])
    if answer.price is not None:
        facts.append(["price of the batch", f"{answer.price:.4g} {answer.currency}"])
        if answer.parts > 1:
            facts.append(["price of one part", f"{answer.price / answer.parts:.4g} {answer.currency}"])
    return facts
