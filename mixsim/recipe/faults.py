"""The schema's findings as faults that a person can act on: file, line, path, found, allowed."""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping, Sequence
from typing import Any, Union, get_args, get_origin

from pydantic import BaseModel, ValidationError

from mixsim.dispersion import INDEX_MODELS, TERMS
from mixsim.errors import Fault, Refusal, nearest
from mixsim.recipe.leaves import join
from mixsim.recipe.lines import line_of, lines_of
from mixsim.recipe.schema import INDEX_SECTIONS, LAYERS, ONE_LAYER, TERM_SECTIONS, Coating, Schema
from mixsim.recipe.syntax import as_toml

Finding = tuple[str, Refusal]


class Misspelt(Refusal):
    """A word of the schema that is nearly known: a key, or the name of a model."""

    def __init__(self, found: str, allowed: str, meant: str, *, of_key: bool) -> None:
        super().__init__(found, allowed, meant)
        self.meant = meant
        self.of_key = of_key


def findings_of(error: ValidationError, raw: Mapping[str, Any]) -> list[Finding]:
    """Every finding of the schema with its path in the recipe; what is only misspelt is not missing too."""
    findings = [_finding(dict(line), raw) for line in error.errors(include_url=False)]
    meant = {
        join(path.rpartition(".")[0], refusal.meant)
        for path, refusal in findings
        if isinstance(refusal, Misspelt) and refusal.of_key
    }
    return [
        (path, refusal)
        for path, refusal in findings
        if path not in meant or not refusal.found.endswith("is missing")
    ]


def as_meant(raw: Mapping[str, Any], findings: Iterable[Finding]) -> dict[str, Any] | None:
    """The recipe with its misspelt words put right, to see what is wrong beside them; None without any."""
    slips = [(path, refusal) for path, refusal in findings if isinstance(refusal, Misspelt)]
    if not slips:
        return None
    changed: dict[str, Any] = _copied(raw)
    for path, slip in slips:
        node: Any = changed
        *above, key = path.split(".")
        for part in above:
            node = node.get(part) if isinstance(node, dict) else None
        if not isinstance(node, dict) or key not in node:
            continue
        if not slip.of_key:
            node[key] = slip.meant
        elif slip.meant not in node:
            node[slip.meant] = node.pop(key)
    return changed


def faults_of(
    findings: Iterable[Finding], *, file: str, text: str, settings: Mapping[str, Any]
) -> list[Fault]:
    """Findings as faults, each once, in the order of the file; what was set stands on the command line."""
    lines = lines_of(text)
    unique: dict[tuple[str, str], Fault] = {}
    for path, refusal in findings:
        was_set = any(
            path == known
            or path.startswith(f"{known}.")
            or (known.startswith(f"{path}.") and path not in lines)
            for known in settings
        )
        place = "command line" if was_set else file
        line = None if was_set else line_of(path, lines)
        fault = Fault(place, path, refusal.found, refusal.allowed, refusal.suggestion, line)
        unique.setdefault((path, refusal.found), fault)
    return sorted(unique.values(), key=lambda fault: (fault.line or 0, fault.path))


def _copied(node: Any) -> Any:
    return {key: _copied(value) for key, value in node.items()} if isinstance(node, Mapping) else node


def _finding(line: Mapping[str, Any], raw: Mapping[str, Any]) -> Finding:
    path, section, annotation, above = _place(line["loc"], raw)
    kind, value, context = line["type"], line["input"], line.get("ctx", {})
    where = ".".join(path)
    key = path[-1] if path else ""
    owner = ".".join(path[:-1]) or "a recipe"
    if kind == "refused":
        return where, Refusal(context["found"], context["allowed"], context["suggestion"] or None)
    if kind == "extra_forbidden":
        return where, _unknown_key(key, _keys(section), owner)
    if kind == "missing":
        needed = f"a table [{where}]" if _is_section(annotation) else key
        return where, Refusal(f"{key} is missing", f"{owner} needs {needed}")
    if kind in ("union_tag_invalid", "union_tag_not_found"):
        return _model(where, key, value, above)
    if kind == "literal_error":
        words = re.findall(r"'([^']*)'", context["expected"])
        found, allowed = f"unknown {key} {as_toml(value)}", f"one of {', '.join(words)}"
        return where, Refusal(found, allowed, nearest(value, words) if isinstance(value, str) else None)
    if kind in ("model_type", "dict_type", "model_attributes_type"):
        return where, _no_table(where, key, value, annotation)
    if kind == "string_pattern_mismatch":
        name = str(value)
        better = re.sub(r"[^A-Za-z0-9_-]+", "-", name).strip("-")
        where = ".".join(part for part in path if part != "[key]")
        return where, Refusal(f"name {name!r}", "names are letters, digits, '_' and '-'", better or None)
    return where, _plain_words(kind, value, context, line["msg"])


def _unknown_key(key: str, known: Sequence[str], owner: str) -> Refusal:
    found, allowed = f"unknown key {key!r}", f"{owner} takes {', '.join(known)}"
    meant = nearest(key, known)
    return Misspelt(found, allowed, meant, of_key=True) if meant else Refusal(found, allowed)


def _model(where: str, key: str, value: Any, above: Any) -> Finding:
    """A term or an index without a model, or with one that is not known."""
    known = tuple(INDEX_MODELS if key == "index" else TERMS)
    content = value if isinstance(value, Mapping) else {}
    word = content.get("model")
    if word is not None:
        found, allowed = f"unknown model {as_toml(word)}", f"known are {', '.join(known)}"
        meant = nearest(word, known) if isinstance(word, str) else None
        refusal = Misspelt(found, allowed, meant, of_key=False) if meant else Refusal(found, allowed)
        return f"{where}.model", refusal
    for other in content:
        if nearest(other, ["model"]):
            return f"{where}.{other}", _unknown_key(other, ["model"], where)
    # the change of one inherited term, under a name that is nearly that of another
    beside = [name for name in above if name != key] if isinstance(above, Mapping) else []
    meant = nearest(key, beside) if key != "index" else None
    return where, Refusal("model is missing", f"one of {', '.join(known)}", meant)


def _no_table(where: str, key: str, value: Any, annotation: Any) -> Refusal:
    named = get_origin(annotation) is dict
    if key.isdigit():
        key = ".".join(where.split(".")[-2:])
    if isinstance(value, list) and value and all(isinstance(item, Mapping) for item in value):
        right = f"[{where}.NAME]" if named else f"[{where}]"
        return Refusal("a list of tables", f"one table: {right}, not [[{where}]]")
    if _is_section(annotation):
        takes = f"{key} is a table that takes {', '.join(_keys(annotation))}"
    elif named and get_args(annotation)[0] is str:
        takes = f'{key} is a table of paths: "PATH" = [low, high]'
    elif named:
        takes = f"{key} is a table of names: [{where}.NAME]"
    else:
        takes = f"{key} is a table with model and its numbers"
    return Refusal(f"{as_toml(value)} where a table is needed", takes)


def _plain_words(kind: str, value: Any, context: Mapping[str, Any], message: str) -> Refusal:
    """The kinds of finding that say nothing of the recipe: whole numbers, texts, lists."""
    shown = as_toml(value)
    if kind.startswith("int_"):
        return Refusal(f"{shown} where a whole number is needed", "digits without quotes, such as 401")
    if kind == "greater_than_equal":
        return Refusal(f"{shown} is out of range", f"must be at least {context['ge']}")
    if kind == "less_than_equal":
        return Refusal(f"{shown} is out of range", f"must be at most {context['le']}")
    if kind == "string_type":
        return Refusal(f"{shown} where a text is needed", "one text in quotes")
    if kind == "list_type":
        return Refusal(f"{shown} where a list is needed", "values between [ and ], even where there is one")
    if kind in ("too_short", "too_long") and context["actual_length"] and isinstance(value, list):
        right = context["min_length" if kind == "too_short" else "max_length"]
        return Refusal(f"a list of {context['actual_length']}", f"it holds {right}")
    if kind == "too_short":
        what = "table" if isinstance(value, Mapping) else "list"
        return Refusal(f"an empty {what}", f"it holds {context['min_length']} or more")
    return Refusal(shown, f"{message[0].lower()}{message[1:]}")


def _place(
    location: Sequence[Any], raw: Any
) -> tuple[list[str], type[BaseModel] | None, Any, Mapping[str, Any] | None]:
    """Path in the recipe, without the tags that the schema adds; the section that its last key stands in;
    the type and the table of what it names."""
    path: list[str] = []
    section: type[BaseModel] | None = Schema
    node: Any = raw
    above: Any = None
    annotation: Any = Schema
    for part in location:
        if part in (ONE_LAYER, LAYERS):
            annotation = Coating if part == ONE_LAYER else list[Coating]
            continue
        tagged = isinstance(node, Mapping) and part not in node and node.get("model") == part
        if tagged:
            section = annotation = TERM_SECTIONS.get(part) or INDEX_SECTIONS.get(part)
            continue
        if _is_section(annotation):
            section = annotation
        path.append(str(part))
        annotation = _step(annotation, str(part))
        above, node = node, node.get(part) if isinstance(node, Mapping) else _item(node, part)
    return path, section, annotation, above


def _is_section(annotation: Any) -> bool:
    return isinstance(annotation, type) and issubclass(annotation, BaseModel)


def _item(node: Any, part: Any) -> Any:
    return node[part] if isinstance(node, list) and isinstance(part, int) and part < len(node) else None


def _step(annotation: Any, part: str) -> Any:
    """Type below a key of a section, or below a name of a mapping."""
    if _is_section(annotation):
        for name, field in annotation.model_fields.items():
            if part in (name, field.alias):
                return _plain(field.annotation)
        return None
    if get_origin(annotation) is dict:
        return _plain(get_args(annotation)[1])
    if get_origin(annotation) is list:
        return _plain(get_args(annotation)[0])
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
