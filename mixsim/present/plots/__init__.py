"""Plots of answers, fit for a report. Loads matplotlib only when a plot is made."""

from __future__ import annotations

from mixsim.present.plots.figure import figure

__all__ = ["figure"]
