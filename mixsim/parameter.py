"""What the registers say of the numbers and words that a formula takes from a recipe."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass
from typing import TypeVar


@dataclass(frozen=True, slots=True)
class Parameter:
    """One number (or list of numbers) of a term, an index model or a mixing rule.

    Attributes
    ----------
    name
        Word in the recipe.
    dimension
        Name of its dimension in `mixsim.units`.
    minimum, exclusive
        Least SI value allowed, or None; and whether it is itself refused.
    default
        Value in SI where the recipe may leave it out without changing what is meant, or None.
    meaning
        What it is, for people.
    is_list
        Whether it takes a list of such numbers.
    maximum
        Greatest SI value allowed.
    """

    name: str
    dimension: str
    minimum: float | None
    exclusive: bool
    default: float | None
    meaning: str
    is_list: bool = False
    maximum: float = math.inf


@dataclass(frozen=True, slots=True)
class Choice:
    """One word of a mixing rule, out of a few.

    Attributes
    ----------
    name
        Key in the recipe.
    words
        Words that it takes.
    meaning
        What it is, for people.
    default
        Word where the recipe may leave it out, or None.
    """

    name: str
    words: tuple[str, ...]
    meaning: str
    default: str | None = None

    def meant(self, word: str) -> str | None:
        """The word in the spelling of the register; None where it is not known.

        Examples
        --------
        >>> Choice("lattice", ("simple", "body-centred"), "of the array").meant("body-centered")
        'body-centred'
        """
        spelt = word.replace("centered", "centred")
        return spelt if spelt in self.words else None


Entry = TypeVar("Entry", Parameter, Choice, Parameter | Choice)


def positive(name: str, dimension: str, meaning: str) -> Parameter:
    """Parameter that must be above zero and has no default."""
    return Parameter(name, dimension, minimum=0.0, exclusive=True, default=None, meaning=meaning)


def bounded(name: str, meaning: str, *, least: float, most: float) -> Parameter:
    """Plain number between two ends, both allowed."""
    return Parameter(name, "number", least, False, None, meaning, maximum=most)


def not_negative(name: str, dimension: str, meaning: str, default: float | None = None) -> Parameter:
    """Parameter that must be zero or above."""
    return Parameter(name, dimension, minimum=0.0, exclusive=False, default=default, meaning=meaning)


def by_name(*parameters: Entry) -> Mapping[str, Entry]:
    """Parameters by their names."""
    return {parameter.name: parameter for parameter in parameters}
