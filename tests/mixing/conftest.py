"""Random draws are not timed: on a busy machine a slow draw is no fault of the formula."""

from __future__ import annotations

from hypothesis import settings

settings.register_profile("untimed", deadline=None)
settings.load_profile("untimed")
