"""Fields of the recipe that hold one number each, and the path of every number."""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING, Any

from pydantic import BaseModel
from pydantic_core import PydanticCustomError, core_schema

from mixsim.errors import Refusal
from mixsim.recipe.syntax import as_toml
from mixsim.units import Leaf, dimension_named, read, written_unit

if TYPE_CHECKING:
    from pydantic import GetCoreSchemaHandler, GetJsonSchemaHandler
    from pydantic.json_schema import JsonSchemaValue
    from pydantic_core import CoreSchema


@dataclass(frozen=True)
class Number:
    """What a field that holds one number takes: its dimension and its range, in SI.

    Stands beside `Leaf` in the annotation of the field, and is kept by the schema, so that what is set,
    varied or freed later can be held to the same range.

    Attributes
    ----------
    dimension
        Name of the dimension.
    minimum, maximum
        Ends of the range.
    exclusive
        Whether `minimum` itself is refused.
    """

    dimension: str
    minimum: float = -math.inf
    maximum: float = math.inf
    exclusive: bool = False

    @property
    def bounded(self) -> bool:
        """Whether anything is refused for its size."""
        return math.isfinite(self.minimum) or math.isfinite(self.maximum)

    def holds(self, value: float) -> bool:
        """Whether an SI value lies in the range."""
        above = value > self.minimum if self.exclusive else value >= self.minimum
        return above and value <= self.maximum

    def to_find(self) -> Number:
        """The range in which it may be looked for: a fraction below zero speaks against a model."""
        return replace(self, minimum=-1.0) if self.dimension == "fraction" else self

    def said(self) -> str:
        """The range in words, to follow "must be"."""
        low = "above" if self.exclusive else "at least"
        if math.isinf(self.maximum):
            return f"{low} {self.minimum:g}"
        return f"{low} {self.minimum:g} and at most {self.maximum:g}"

    def leaf(self, written: Any) -> Leaf:
        """The number as written, read and held to the range.

        Raises
        ------
        Refusal
            Where it is no such number or lies outside.
        """
        dimension = dimension_named(self.dimension)
        like = f"{dimension.said} is written like {dimension.example!r}"
        if isinstance(written, float) and not math.isfinite(written):
            raise Refusal(f"{as_toml(written)} is not a finite number", like)
        if isinstance(written, bool) or not isinstance(written, str | int | float):
            raise Refusal(f"{as_toml(written)} where a number is needed", like)
        number = read(written, self.dimension)
        if not self.holds(number.value):
            per_cent = self.maximum == 1.0 and 1.0 < number.value <= 100.0 and not written_unit(number)
            meant = f"{number.written} %" if per_cent else None
            raise Refusal(f"{number.written!r} is out of range", f"must be {self.said()}", meant)
        return number

    def __get_pydantic_core_schema__(self, source: Any, handler: GetCoreSchemaHandler) -> CoreSchema:
        return core_schema.no_info_plain_validator_function(self._validated)

    def __get_pydantic_json_schema__(
        self, schema: CoreSchema, handler: GetJsonSchemaHandler
    ) -> JsonSchemaValue:
        dimension = dimension_named(self.dimension)
        return {
            "type": ["string", "number"] if dimension.bare else "string",
            "description": f"{self.dimension}, for example {dimension.example!r}",
        }

    def _validated(self, written: Any) -> Leaf:
        if isinstance(written, Leaf):
            return written
        try:
            return self.leaf(written)
        except Refusal as refusal:
            raise refused(refusal) from None


@dataclass(frozen=True)
class Span:
    """The range of an unknown as written: each end is read once the path is known.

    Attributes
    ----------
    low, high
        The ends.
    prior
        What is known of it beforehand, with its ±, or None.
    """

    low: str | float
    high: str | float
    prior: str | float | None = None


class Ends:
    """What a field takes that holds the two ends of a range, and perhaps what is known beforehand."""

    def __get_pydantic_core_schema__(self, source: Any, handler: GetCoreSchemaHandler) -> CoreSchema:
        return core_schema.no_info_plain_validator_function(self._validated)

    def __get_pydantic_json_schema__(
        self, schema: CoreSchema, handler: GetJsonSchemaHandler
    ) -> JsonSchemaValue:
        number: JsonSchemaValue = {"type": ["string", "number"]}
        return {
            "description": "the two ends of the range, for example ['0 %', '30 %']",
            "anyOf": [
                {"type": "array", "items": number, "minItems": 2, "maxItems": 2},
                {
                    "type": "object",
                    "properties": {"low": number, "high": number, "prior": number},
                    "required": ["low", "high"],
                    "additionalProperties": False,
                },
            ],
        }

    def _validated(self, written: Any) -> Span:
        like = "a range is a list of its two ends, such as ['0 %', '30 %']"
        if isinstance(written, Span):
            return written
        if isinstance(written, Mapping) and "low" in written and "high" in written:
            if stray := set(written) - {"low", "high", "prior"}:
                allowed = "low, high and perhaps prior"
                raise refused(Refusal(f"{sorted(stray)[0]} in a range", allowed))
            ends = [written["low"], written["high"], *([written["prior"]] if "prior" in written else [])]
        elif isinstance(written, Mapping) and _single_list(written):
            raise refused(Refusal("a path without quotes", 'its dots stand in quotes: "a.b.c" = [low, high]'))
        elif isinstance(written, list) and len(written) == 2:
            ends = written
        else:
            raise refused(Refusal(f"{as_toml(written)} where a range is needed", like))
        for end in ends:
            if isinstance(end, bool) or not isinstance(end, str | int | float):
                raise refused(Refusal(f"{as_toml(end)} as the end of a range", like))
        return Span(*ends)


def refused(refusal: Refusal) -> PydanticCustomError:
    """The refusal of a lower layer as an error that the schema collects with its path."""
    return PydanticCustomError(
        "refused",
        "{found}; {allowed}",
        {"found": refusal.found, "allowed": refusal.allowed, "suggestion": refusal.suggestion or ""},
    )


def walk(node: Any, path: str = "") -> Iterator[tuple[str, Leaf]]:
    """Every leaf below a validated part of a recipe, with its path, in the order of the schema."""
    if isinstance(node, Leaf):
        yield path, node
    else:
        for name, child in _children(node):
            yield from walk(child, join(path, name))


def ranges(node: Any, path: str = "") -> Iterator[tuple[str, Number]]:
    """What each leaf below a validated part of a recipe may hold, with its path."""
    fields = type(node).model_fields if isinstance(node, BaseModel) else {}
    takes = {field.alias or name: _number(field.annotation, field.metadata) for name, field in fields.items()}
    for name, child in _children(node):
        found, here = takes.get(name), join(path, name)
        if found is None:
            yield from ranges(child, here)
        else:
            yield from ((where, found) for where, _ in walk(child, here))


def join(path: str, name: str) -> str:
    """Path of a child."""
    return f"{path}.{name}" if path else name


def _single_list(node: Any) -> bool:
    while isinstance(node, Mapping) and len(node) == 1:
        node = next(iter(node.values()))
    return isinstance(node, list)


def _children(node: Any) -> Iterator[tuple[str, Any]]:
    if isinstance(node, BaseModel):
        for name, field in type(node).model_fields.items():
            yield field.alias or name, getattr(node, name)
    elif isinstance(node, Mapping):
        yield from node.items()
    elif isinstance(node, list | tuple):
        yield from ((str(position), child) for position, child in enumerate(node))


def _number(annotation: Any, metadata: Any = ()) -> Number | None:
    """The one `Number` in the type of a field, however deep it stands."""
    for item in (*metadata, *getattr(annotation, "__metadata__", ())):
        if isinstance(item, Number):
            return item
    found = (_number(argument) for argument in getattr(annotation, "__args__", ()))
    return next((item for item in found if item is not None), None)
