"""Every material of the library against what an installed collection, handbook or standard says of it."""

from __future__ import annotations

import checks
import open_data
import pytest
import test_open_data

from mixsim.recipe import library

EACH = [
    pytest.param(name, check, id=f"{name} [published: {type(check).__name__}]")
    for name, own in checks.CHECKS.items()
    for check in own
    if not isinstance(check, checks.Elsewhere)
]


@pytest.mark.parametrize(("name", "check"), EACH)
def test_the_material_holds_to_it(name: str, check: checks.Check) -> None:
    assert check.deviation(name) < check.tolerance


@pytest.mark.parametrize("name", library.names())
def test_what_a_file_claims_is_what_is_checked(name: str) -> None:
    content = library.definition(name)
    assert content is not None
    assert content.get("check", "") == checks.said(name)


def test_every_check_is_of_a_material_and_every_named_test_exists() -> None:
    assert checks.CHECKS.keys() <= set(library.names())
    named = [c for own in checks.CHECKS.values() for c in own if isinstance(c, checks.Elsewhere)]
    assert all(hasattr(test_open_data, check.test) for check in named)


@pytest.mark.parametrize("name", [name for name, _ in library.definitions() if name in checks.CHECKS])
def test_nothing_holds_beyond_the_page_that_it_comes_from(name: str) -> None:
    for check in checks.CHECKS[name]:
        if isinstance(check, checks.Origin):
            (low, high), (first, last) = checks.band(name), open_data.window(*check.page)
            assert low > first * (1 - 1e-5) and high < last * (1 + 1e-5)


@pytest.mark.parametrize("name", [name for name, content in library.definitions() if "index" in content])
def test_an_index_that_claims_a_page_was_read_there(name: str) -> None:
    """What is called published has at least its page; what has none is from memory or practice."""
    content = library.definition(name)
    assert content is not None
    assert (content["kind"] == "published") == any(
        isinstance(check, checks.Origin) for check in checks.CHECKS.get(name, ())
    )


@pytest.mark.parametrize("name", [name for name in library.names() if name != "vacuum"])
def test_a_file_says_what_a_formulator_needs(name: str) -> None:
    content = library.definition(name)
    assert content is not None
    assert {"density", "recipe"} & content.keys(), "grams need a density"
    warm = " ".join((content["title"], content["source"]))
    assert "temperature" in content or "°C" in warm or "room temperature" in warm
    if content["kind"] == "practice":
        assert "±" in str({key: content[key] for key in content if key not in ("title", "source")})
