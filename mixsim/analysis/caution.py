"""What a careful colleague would say unasked."""

from __future__ import annotations

from dataclasses import asdict, dataclass


@dataclass(frozen=True)
class Caution:
    """One warning beside an answer.

    Attributes
    ----------
    kind
        Word by which it is known, such as "quasi-static".
    path
        Path in the recipe that it is about, or empty.
    message
        What is meant, in a sentence or two.
    """

    kind: str
    path: str
    message: str

    def to_dict(self) -> dict[str, str]:
        """As the answer holds it."""
        return asdict(self)
