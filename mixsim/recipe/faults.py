"""The schema's findings as faults that a person can act on: file, line, path, found, allowed."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from typing import Any, Union, get_args, get_origin

from pydantic import BaseModel, ValidationError

from mixsim.dispersion import INDEX_MODELS, TERMS
from mixsim.errors import Fault, Refusal, nearest
from mixsim.recipe.lines import line_of, lines_of
from mixsim.recipe.schema import INDEX_SECTIONS, TERM_SECTIONS, Schema

Finding = tuple[str, Refusal]


def findings_of(error: ValidationError, raw: Mapping[str, Any]) -> list[Finding]:
    """Every finding of the schema with its path in the recipe."""
    return [_finding(dict(line), raw) for line in error.errors(include_url=False)]


def faults_of(
    findings: Iterable[Finding], *, file: str, text: str, settings: Mapping[str, Any]
) -> list[Fault]:
    """Findings as faults, each once, in the order of the file; what was set stands on the command line."""
    lines = lines_of(text)
    unique: dict[tuple[str, str], Fault] = {}
    for path, refusal in findings:
        was_set = any(path == known or path.startswith(f"{known}.") for known in settings)
        place = "command line" if was_set else file
        line = None if was_set else line_of(path, lines)
        fault = Fault(place, path, refusal.found, refusal.allowed, refusal.suggestion, line)
        unique.setdefault((path, refusal.found), fault)
    return sorted(unique.values(), key=lambda fault: (fault.line or 0, fault.path))


def _finding(line: Mapping[str, Any], raw: Mapping[str, Any]) -> Finding:
    path, section = _place(line["loc"], raw)
    kind, value, context = line["type"], line["input"], line.get("ctx", {})
    where = ".".join(path)
    key = path[-1] if path else ""
    if kind == "refused":
        return where, Refusal(context["found"], context["allowed"], context["suggestion"] or None)
    if kind == "extra_forbidden":
        known = tuple(_keys(section))
        owner = ".".join(path[:-1]) or "a recipe"
        return where, Refusal(
            f"unknown key {key!r}", f"{owner} takes {', '.join(known)}", nearest(key, known)
        )
    if kind == "missing":
        return where, Refusal(f"{key} is missing", "it must be given")
    if kind in ("union_tag_invalid", "union_tag_not_found"):
        known = tuple(INDEX_MODELS if key == "index" else TERMS)
        word = value.get("model") if isinstance(value, Mapping) else None
        if word is None:
            return where, Refusal("model is missing", f"one of {', '.join(known)}")
        where = f"{where}.model"
        return where, Refusal(
            f"unknown model {word!r}", f"known are {', '.join(known)}", nearest(str(word), known)
        )
    if kind == "literal_error":
        words = [word.strip(" '") for word in context["expected"].replace(" or ", ", ").split(",")]
        return where, Refusal(f"{value!r}", f"one of {', '.join(words)}", nearest(str(value), words))
    if kind in ("model_type", "dict_type", "model_attributes_type"):
        return where, Refusal(f"{value!r} where a table is needed", f"{key} is a table of keys")
    if kind == "string_pattern_mismatch":
        name = str(value)
        where = ".".join(part for part in path if part != "[key]")
        return where, Refusal(f"name {name!r}", "names are letters, digits, '_' and '-'")
    return where, Refusal(f"{value!r}", f"{line['msg'][0].lower()}{line['msg'][1:]}")


def _place(location: Sequence[Any], raw: Any) -> tuple[list[str], type[BaseModel] | None]:
    """Path in the recipe, without the tags that the schema adds, and the section that it ends in."""
    path: list[str] = []
    section: type[BaseModel] | None = Schema
    node: Any = raw
    annotation: Any = Schema
    for part in location:
        tagged = isinstance(node, Mapping) and part not in node and node.get("model") == part
        if tagged:
            section = annotation = TERM_SECTIONS.get(part) or INDEX_SECTIONS.get(part)
            continue
        if isinstance(annotation, type) and issubclass(annotation, BaseModel):
            section = annotation
        path.append(str(part))
        annotation = _step(annotation, str(part))
        node = node.get(part) if isinstance(node, Mapping) else _item(node, part)
    return path, section


def _item(node: Any, part: Any) -> Any:
    return node[part] if isinstance(node, list) and isinstance(part, int) and part < len(node) else None


def _step(annotation: Any, part: str) -> Any:
    """Type below a key of a section, or below a name of a mapping."""
    if isinstance(annotation, type) and issubclass(annotation, BaseModel):
        for name, field in annotation.model_fields.items():
            if part in (name, field.alias):
                return _plain(field.annotation)
        return None
    if get_origin(annotation) is dict:
        return _plain(get_args(annotation)[1])
    return None


def _plain(annotation: Any) -> Any:
    """The type inside Annotated and Optional."""
    while True:
        if hasattr(annotation, "__metadata__"):
            annotation = annotation.__origin__
        elif get_origin(annotation) is Union or str(get_origin(annotation)) == "<class 'types.UnionType'>":
            inner = [a for a in get_args(annotation) if a is not type(None)]
            if len(inner) != 1:
                return annotation
            annotation = inner[0]
        else:
            return annotation


def _keys(section: type[BaseModel] | None) -> list[str]:
    return [field.alias or name for name, field in section.model_fields.items()] if section else []
