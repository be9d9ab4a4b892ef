"""Whatever stands in a recipe, it loads or is refused in words: nothing else is ever raised."""

from __future__ import annotations

import contextlib
from typing import Any

import tomli
import tomlkit
from broken import SOUND
from hypothesis import given
from hypothesis import strategies as st

from mixsim.errors import BadInput
from mixsim.recipe import parse

WORDS = (
    "drude",
    "lorentz",
    "filler",
    "gold",
    "bruggeman",
    "spheroid",
    "sellmeier",
    "10 %",
    "1 eV",
    "20 nm",
    "",
)
KEYS = ("model", "kind", "material", "based_on", "terms", "index", "table", "values", "phr", "step", "x", "")
SOUND_TREE = tomli.loads(SOUND)

plain = st.one_of(
    st.sampled_from(WORDS),
    st.booleans(),
    st.integers(),
    st.floats(),
    st.dates(),
    st.text("aé ±%.-²", max_size=4),
)
values = st.recursive(
    plain,
    lambda inner: st.one_of(
        st.lists(inner, max_size=3), st.dictionaries(st.sampled_from(KEYS), inner, max_size=3)
    ),
    max_leaves=5,
)


def places(node: Any, path: tuple[str, ...] = ()) -> list[tuple[str, ...]]:
    inside = (
        [place for key, value in node.items() for place in places(value, (*path, key))]
        if isinstance(node, dict)
        else []
    )
    return [path, *inside] if path else inside


@st.composite
def changed(draw: st.DrawFn) -> str:
    """The sound recipe with one to three places replaced, dropped or joined by another key."""
    tree = tomli.loads(SOUND)
    for path in draw(st.lists(st.sampled_from(places(SOUND_TREE)), min_size=1, max_size=3)):
        node: Any = tree
        for key in path[:-1]:
            node = node.get(key) if isinstance(node, dict) else None
        if not isinstance(node, dict):
            continue
        what = draw(st.sampled_from(("replace", "drop", "add")))
        if what == "replace":
            node[path[-1]] = draw(values)
        elif what == "drop":
            node.pop(path[-1], None)
        else:
            node[draw(st.sampled_from(KEYS))] = draw(values)
    return tomlkit.dumps(tree)


@given(
    changed(),
    st.dictionaries(
        st.sampled_from([".".join(p) for p in places(SOUND_TREE)]), st.sampled_from(WORDS), max_size=2
    ),
)
def test_loads_or_is_refused_in_words(text: str, settings: dict[str, str]) -> None:
    try:
        parse(text, file="job.toml", settings=settings)
    except BadInput as refused:
        assert refused.faults
        for fault in refused.faults:
            assert fault.file in ("job.toml", "command line")
            assert fault.found
            assert fault.allowed, str(fault)
            assert fault.line is None or 1 <= fault.line <= text.count("\n") + 1
            assert "nput should" not in str(fault)


@given(st.text(max_size=200))
def test_any_text_is_refused_in_words(text: str) -> None:
    with contextlib.suppress(BadInput):
        parse(text)
