"""Lets the checks of this folder share `reference`, `evaluator` and `open_data`."""

from __future__ import annotations

import sys
from pathlib import Path

sys.path.insert(0, str(Path(__file__).parent))
