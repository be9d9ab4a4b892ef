"""Files written whole or not at all."""

from __future__ import annotations

import os
import tempfile
from collections.abc import Callable
from pathlib import Path

from mixsim.errors import BadInput, Fault, nearest
from mixsim.recipe import COMMAND_LINE


def refuse(file: Path, found: str, allowed: str, suggestion: str | None = None) -> BadInput:
    """The error of a file that cannot be written."""
    return BadInput([Fault(COMMAND_LINE, "--out", f"{str(file)!r}: {found}", allowed, suggestion)])


def check_place(file: Path, suffixes: tuple[str, ...]) -> None:
    """Refuse a file whose suffix is unknown, whose folder is not there, or that is a folder.

    Raises
    ------
    BadInput
        Naming the file and what is allowed.
    """
    if not file.name:
        raise refuse(file, "it names no file", "name a file")
    suffix = file.suffix.lower()
    if suffix not in suffixes:
        found = f"suffix {file.suffix!r}" if file.suffix else "no suffix"
        raise refuse(
            file, found, f"one of {' '.join(suffixes)}", nearest(suffix, suffixes) if suffix else None
        )
    try:
        taken, folder = file.is_dir(), file.parent.is_dir()
    except OSError as error:  # a name too long, a folder that may not be looked into
        raise refuse(file, _why(error), "choose another place") from None
    if taken:
        raise refuse(file, "it is a folder", "name a file")
    if not folder:
        raise refuse(file, f"there is no folder {str(file.parent)!r}", "make it first")
    if not os.access(file.parent, os.W_OK):
        raise refuse(file, f"the folder {str(file.parent)!r} cannot be written to", "choose another one")


def write_whole(file: Path, write: Callable[[Path], None]) -> None:
    """Let a function write a file beside its place, then put it there in one step.

    Parameters
    ----------
    file
        Where it belongs.
    write
        Writes a file at the path that it is given.

    Raises
    ------
    BadInput
        Where the place cannot be written to. Whatever goes wrong, the old file stays as it was.
    """
    try:
        place = file.resolve()  # a link stays one, and the file that it names is replaced
        handle, name = tempfile.mkstemp(dir=place.parent, prefix=".mixsim-", suffix=file.suffix)
    except (OSError, RuntimeError) as error:  # RuntimeError: links in a circle
        raise refuse(file, _why(error), "choose another place") from None
    os.close(handle)
    beside = Path(name)
    try:
        write(beside)
        mask = os.umask(0)
        os.umask(mask)
        beside.chmod(0o666 & ~mask)
        beside.replace(place)
    except OSError as error:
        raise refuse(file, _why(error), "choose another place") from None
    finally:
        beside.unlink(missing_ok=True)


def whole_text(file: Path, text: str, *, suffix: str) -> None:
    """Write a text file whole."""
    check_place(file, (suffix,))
    write_whole(file, lambda beside: _write_text(beside, text))


def new_text(file: Path, text: str, *, suffix: str) -> None:
    """Write a text file that must not be there yet."""
    check_place(file, (suffix,))
    if file.exists():
        raise refuse(file, "the file is there already", "name a new one; a recipe is never overwritten")
    whole_text(file, text, suffix=suffix)


def _why(error: Exception) -> str:
    """What the system says, in small letters."""
    return (getattr(error, "strerror", None) or "cannot be written").lower()


def _write_text(file: Path, text: str) -> None:
    file.write_text(text, encoding="utf-8", newline="\n")
