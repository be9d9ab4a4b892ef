"""An answer as one JSON document."""

from __future__ import annotations

import json
from typing import Any, Protocol


class Answer(Protocol):
    """Whatever a question answers."""

    def to_dict(self) -> dict[str, Any]:
        """As JSON holds it."""


def json_text(answer: Answer) -> str:
    """Text of one JSON document, SI and without NaN, with a line end."""
    return json.dumps(answer.to_dict(), allow_nan=False, ensure_ascii=False) + "\n"
