"""Questions to the one evaluator: predict, sweep, invert, audit. Each is loaded when it is first asked."""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from mixsim.analysis.auditing import Audit, audit
    from mixsim.analysis.band import Axis, Varied, axis_of, varied
    from mixsim.analysis.caution import Caution
    from mixsim.analysis.checks import Examined, Finding
    from mixsim.analysis.fitting.answer import Fitted
    from mixsim.analysis.fitting.fitting import fit
    from mixsim.analysis.inversion.answer import Estimate, Inversion, Reading
    from mixsim.analysis.inversion.inverting import invert
    from mixsim.analysis.judging.answer import Judgement
    from mixsim.analysis.judging.judging import judge
    from mixsim.analysis.judging.lot import Lot, judge_lot
    from mixsim.analysis.prediction import Prediction, predict, sweep
    from mixsim.analysis.unknowns import Unknown, freed
    from mixsim.analysis.weighing import Weighed, weigh

_HOMES = {
    "Audit": "auditing",
    "Axis": "band",
    "Caution": "caution",
    "Estimate": "inversion.answer",
    "Examined": "checks",
    "Finding": "checks",
    "Fitted": "fitting.answer",
    "Inversion": "inversion.answer",
    "Judgement": "judging.answer",
    "Lot": "judging.lot",
    "Prediction": "prediction",
    "Reading": "inversion.answer",
    "Unknown": "unknowns",
    "Varied": "band",
    "Weighed": "weighing",
    "audit": "auditing",
    "axis_of": "band",
    "fit": "fitting.fitting",
    "freed": "unknowns",
    "invert": "inversion.inverting",
    "judge": "judging.judging",
    "judge_lot": "judging.lot",
    "predict": "prediction",
    "sweep": "prediction",
    "varied": "band",
    "weigh": "weighing",
}

__all__ = [
    "Audit",
    "Axis",
    "Caution",
    "Estimate",
    "Examined",
    "Finding",
    "Fitted",
    "Inversion",
    "Judgement",
    "Lot",
    "Prediction",
    "Reading",
    "Unknown",
    "Varied",
    "Weighed",
    "audit",
    "axis_of",
    "fit",
    "freed",
    "invert",
    "judge",
    "judge_lot",
    "predict",
    "sweep",
    "varied",
    "weigh",
]


def __getattr__(name: str) -> Any:
    if name not in _HOMES:
        raise AttributeError(f"module 'mixsim.analysis' has no attribute {name!r}")
    return getattr(import_module(f"mixsim.analysis.{_HOMES[name]}"), name)
