"""Questions to the one evaluator: predict, sweep, invert, audit."""

from __future__ import annotations

from mixsim.analysis.auditing import Audit, audit
from mixsim.analysis.band import Axis, Varied, axis_of, varied
from mixsim.analysis.caution import Caution
from mixsim.analysis.inversion import Estimate, Inversion, Reading, Unknown
from mixsim.analysis.inverting import invert
from mixsim.analysis.prediction import Prediction, predict, sweep
from mixsim.analysis.readings import freed

__all__ = [
    "Audit",
    "Axis",
    "Caution",
    "Estimate",
    "Inversion",
    "Prediction",
    "Reading",
    "Unknown",
    "Varied",
    "audit",
    "axis_of",
    "freed",
    "invert",
    "predict",
    "sweep",
    "varied",
]
