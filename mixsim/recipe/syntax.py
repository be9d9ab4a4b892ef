"""The text of a recipe as TOML: parsed, or refused in words that help."""

from __future__ import annotations

import re
from collections.abc import Mapping
from datetime import date, time
from pathlib import Path
from typing import Any

import tomli

from mixsim.errors import BadInput, Fault

_SHOWN = 60
_FORM = "key = value, one a line; text stands in quotes, the name of a table in [ ]"


def parsed_toml(text: str, file: str) -> dict[str, Any]:
    """Content of a TOML text.

    Raises
    ------
    BadInput
        With the first fault of its syntax, and the line.
    """
    try:
        return tomli.loads(text)
    except tomli.TOMLDecodeError as error:
        message, line = _message(error)
        found, allowed = _told(message, text, line)
    except RecursionError:
        found, allowed, line = "nested too deeply", "a recipe is a few tables deep", None
    except ValueError:  # Python reads no integer of more than some thousand digits
        found, allowed, line = "an integer of thousands of digits", "write it with an exponent", None
    raise BadInput([Fault(file, "", f"TOML syntax: {found}", allowed, line=line)])


def as_toml(value: Any) -> str:
    """A value much as it stood in the file, shortened where it is long."""
    text = _written(value)
    return text if len(text) <= _SHOWN else f"{text[: _SHOWN - 2]}…{text[-1]}"


def _message(error: tomli.TOMLDecodeError) -> tuple[str, int | None]:
    """What the parser says, and the line; older ones of its versions hold both in one text."""
    text = re.sub(r" \(at [^()]*\)$", "", str(error))
    stated = re.search(r"\(at line (\d+), [^()]*\)$", str(error))
    return text, getattr(error, "lineno", int(stated[1]) if stated else None)


def _told(message: str, text: str, line: int | None) -> tuple[str, str]:
    """What is wrong with the syntax, and what would be right."""
    if twice := re.fullmatch(r"Cannot declare \((.*)\) twice", message):
        name = ".".join(re.findall(r"'([^']*)'", twice[1]))
        return f"[{name}] stands twice", "each table stands once; put its keys together"
    if message == "Cannot overwrite a value":
        written = text.splitlines()[line - 1] if line else ""
        key = written.split("=")[0].strip() or "a key"
        return f"{key} stands twice", "each key stands once in its table"
    if message == "Invalid value":
        return (
            "a value without quotes",
            "text and numbers with a unit stand in quotes; true and false are written small",
        )
    if message.startswith("Expected newline or end of document after a statement"):
        return (
            "something follows the value",
            "one key = value a line; numbers with a unit stand in quotes, decimals take a point",
        )
    if message in ("Illegal character '\\n'", "Unterminated string", 'Expected "\'"'):
        return "a text without its closing quote", "text stands between two quotes"
    return message[0].lower() + message[1:], _FORM


def _written(value: Any) -> str:
    if isinstance(value, bool):
        return "true" if value else "false"
    if isinstance(value, date | time):
        return value.isoformat()
    if isinstance(value, Mapping):
        return "{" + ", ".join(f"{key} = {_written(item)}" for key, item in value.items()) + "}"
    if isinstance(value, list):
        return "[" + ", ".join(_written(item) for item in value) + "]"
    return repr(value)


def text_of(file: Path) -> str:
    """Text of a recipe file.

    Raises
    ------
    BadInput
        Where it cannot be read, is binary or empty.
    """

    def fault(found: str, allowed: str) -> BadInput:
        return BadInput([Fault(str(file), "", found, allowed)])

    try:
        text = file.read_bytes().decode("utf-8-sig")
    except FileNotFoundError:
        raise fault("no such file", "name a recipe (TOML) that can be read") from None
    except OSError as error:
        reason = (error.strerror or "it cannot be read").lower()
        raise fault(reason, "name a recipe (TOML) that can be read") from None
    except UnicodeDecodeError:
        raise fault("the file is not UTF-8 text", "a recipe is a TOML file") from None
    if "\x00" in text:
        raise fault("the file is binary", "a recipe is a TOML file")
    if not text.strip():
        raise fault("the file is empty", "mixsim draft writes a starter recipe")
    return text
