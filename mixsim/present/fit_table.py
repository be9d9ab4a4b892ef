"""A fit as text: estimates with their doubt, what the data fix, how well the readings are met."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from mixsim.present.columns import owned, paragraph, table
from mixsim.present.phrases import cautions, number, rounded

if TYPE_CHECKING:
    from mixsim.analysis import Estimate, Fitted
    from mixsim.analysis.fitting.answer import Met, Quality
    from mixsim.analysis.fitting.doubt import Combination

VERDICTS = {"answered": "answered", "undecided": "undecided: the data cannot tell"}
MOST_CORRELATED = 8  # unknowns up to which the correlations are shown
SEEN = 0.005  # share of the variance from which a source of doubt is named


def fit(answer: Fitted) -> str:
    """The whole answer."""
    count = answer.quality.readings
    samples = len({met.observation.sample for met in answer.met})
    what = f"{count} numbers read on {samples} samples" if samples > 1 else f"{count} numbers read"
    head = f"{what} · {len(answer.unknowns)} unknowns · {answer.rule}".replace(" 1 unknowns", " 1 unknown")
    parts = [f"{answer.recipe.schema.title or answer.recipe.file}\n{head}"]
    verdict = VERDICTS[answer.verdict]
    parts.append("\n".join([verdict, *(paragraph(reason, indent="  ") for reason in answer.reasons)]))
    parts += [f"{name}\n  {_estimate(answer, found)}" for name, found in answer.estimates.items()]
    parts.append(_quality(answer.quality))
    parts.append(_met(answer.met))
    parts += _doubt(answer)
    if len(answer.solutions) > 1:
        parts.append(f"sets of values that fit\n{_solutions(answer)}")
    if answer.by_rule:
        parts.append(f"under each rule that could apply, best first\n{_by_rule(answer)}")
    return "\n\n".join([*parts, *cautions(answer.warnings)])


def _estimate(answer: Fitted, estimate: Estimate) -> str:
    recipe, interval = answer.recipe, ""
    if estimate.interval is not None:
        ends = [_end(answer, estimate, end) for end in estimate.interval]
        ends.sort(key=lambda text: float(text.split(" ")[0]))  # wavelengths fall where frequencies rise
        interval = " to ".join(ends)
    if estimate.value is None:
        return f"not narrowed: {interval}"
    said = [recipe.show(estimate.path, estimate.value, estimate.std)]
    said += [f"95 % from {interval}"] if interval else []
    return "; ".join([*said, *([estimate.note] if estimate.note else [])])


def _end(answer: Fitted, estimate: Estimate, end: float) -> str:
    """End of an interval with the digits of the uncertainty, or four where there is none."""
    if not estimate.std:
        return rounded(answer.recipe.show(estimate.path, end))
    text = answer.recipe.show(estimate.path, end, estimate.std)
    first, _, rest = text.partition(" ± ")
    return f"{first} {rest.partition(' ')[2]}".rstrip()


def _quality(quality: Quality) -> str:
    freedom = quality.readings - quality.unknowns
    if quality.reduced is not None:
        return f"reduced χ² {quality.reduced:.3g} at {freedom} degrees of freedom"
    if quality.noise is not None:
        text = f"no ± was stated: the residuals scatter by {quality.noise:.3g}, which the ± above rest on"
        return paragraph(text)
    return "as many unknowns as readings: nothing is left over to check the fit"


def _met(columns: tuple[Met, ...]) -> str:
    """One line for each column of readings; the reading itself where there is but one."""
    rows = []
    for met in columns:
        one, off = met.observation, met.standardised
        worst = int(np.argmax(np.abs(off)))
        if len(one.values) == 1:
            numbers = [number(one.values[0], digits=6), number(met.predicted[0], digits=6)]
        else:
            numbers = [f"{len(one.values)} points", f"rms off {np.sqrt(np.mean(off**2)):.2f}"]
        rows.append([one.label, one.source, *numbers, f"{off[worst]:+.2f}"])
    return table(["reading", "from", "measured", "fitted", "most off, in ±"], rows, left=2)


def _doubt(answer: Fitted) -> list[str]:
    parts = []
    names = list(answer.estimates)
    if len(names) > 1:
        lines = [_combined(one, names) for one in answer.combinations]
        parts.append("\n".join(["what the data fix, best first", *lines]))
    if answer.correlation is not None and 1 < len(names) <= MOST_CORRELATED:
        rows = [
            [" ".join(owned(name)), *[f"{answer.correlation[i, j]:+.2f}" for j in range(i)]]
            + [""] * (len(names) - 1 - i)
            for i, name in enumerate(names)
            if i
        ]
        heads = ["correlation with", *["\n".join(owned(name)) for name in names[:-1]]]
        parts.append(table(heads, rows))
    said = []
    for name, shares in answer.shares.items():
        held = {source: share for source, share in shares.items() if share > SEEN}
        if set(held) - {"readings"}:
            told = ", ".join(f"{source} {share:.0%}" for source, share in sorted(held.items(), key=_less))
            said.append(paragraph(f"the variance of {name} comes from {told}"))
    return [*parts, *(["\n".join(said)] if said else [])]


def _less(item: tuple[str, float]) -> float:
    return -item[1]


def _combined(one: Combination, names: list[str]) -> str:
    """A product of powers and how well it is fixed."""
    factors = []
    for name in names:
        if name in one.powers:
            power = one.powers[name]
            short = " ".join(owned(name)).replace("_", " ")
            factors.append(short if f"{power:.2g}" == "1" else f"({short})^{power:.2g}")
    if not np.isfinite(one.std):
        level = "not at all"
    elif one.fixed:
        level = f"to {100.0 * one.std:.2g} %"
    else:
        level = f"within a factor of {np.exp(min(one.std, 50.0)):.3g}, which is little"
    return paragraph(f"{' · '.join(factors)}: {level}", indent="  ")


def _solutions(answer: Fitted) -> str:
    rows = []
    for solution in answer.solutions:
        pairs = zip(answer.estimates.values(), solution.values(), strict=True)
        rows.append([rounded(answer.recipe.show(estimate.path, value)) for estimate, value in pairs])
    return table(["\n".join(owned(name)) for name in answer.estimates], rows, left=0)


def _by_rule(answer: Fitted) -> str:
    best = answer.by_rule[0].quality.aicc
    rows = []
    for one in answer.by_rule:
        pairs = zip(answer.estimates.values(), one.values.values(), strict=True)
        shown = [rounded(answer.recipe.show(estimate.path, value)) for estimate, value in pairs]
        level = one.quality.reduced if one.quality.reduced is not None else one.quality.noise
        rows.append([one.rule, *shown, number(level), f"{one.quality.aicc - best:.1f}"])
    left = "reduced\nχ²" if answer.by_rule[0].quality.reduced is not None else "scatter"
    heads = ["rule", *["\n".join(owned(name)) for name in answer.estimates], left, "AICc above\nthe best"]
    return table(heads, rows)
