"""Lets the checks of this folder share `reference` and `evaluator`, and leaves random draws untimed."""

from __future__ import annotations

import sys
from pathlib import Path

from hypothesis import settings

sys.path.insert(0, str(Path(__file__).parent))
settings.register_profile("untimed", deadline=None)
settings.load_profile("untimed")
