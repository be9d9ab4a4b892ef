"""How every command ends: exit status, and one message for each thing that is wrong."""

from __future__ import annotations

import os
import sys
import traceback
from typing import Any

import typer
from typer.core import TyperCommand, TyperGroup

from mixsim.errors import BadInput, Refusal, nearest

ANSWERED, NO, BAD_INPUT, UNDECIDED, INTERNAL, INTERRUPTED = 0, 1, 2, 3, 70, 130
TRACEBACK = "MIXSIM_TRACEBACK"
SEPARATOR = "\x1f"  # between the words of one option that takes several
_WORDS = {"--vary": 4, "--free": 3}
# the parser's own error, of which only this child is public
_USAGE_ERROR: type[Exception] = typer.BadParameter.__mro__[1]


class Command(TyperCommand):
    """A command whose options may take several words each and be repeated."""

    def parse_args(self, ctx: Any, args: list[str]) -> list[str]:
        """Join the words of each such option into one value, which may then begin with a minus sign."""
        words = list(args)
        joined: list[str] = []
        while words:
            word = words.pop(0)
            option, equals, first = word.partition("=")
            if count := _WORDS.get(option):
                words = [first, *words] if equals else words
                taken, words = words[:count], words[count:]
                joined += [option, SEPARATOR.join(taken)]
            else:
                joined.append(word)
        try:
            return super().parse_args(ctx, joined)
        except _USAGE_ERROR as error:
            known: Any = error
            known.ctx = known.ctx or ctx  # the parser does not always say which command it was
            raise


class Program(TyperGroup):
    """The program: turns whatever happens into an exit status and a message without a traceback."""

    def resolve_command(self, ctx: Any, args: list[str]) -> Any:
        """Find the command that was asked for."""
        if args and args[0] not in self.commands and not args[0].startswith("-"):
            near = nearest(args[0], list(self.commands))
            raise Refusal(f"no such command {args[0]!r}", "mixsim --help lists them", near)
        return super().resolve_command(ctx, args)

    def invoke(self, ctx: Any) -> Any:
        """Run the command that was asked for."""
        try:
            return super().invoke(ctx)
        except BrokenPipeError:
            raise _ReaderLeftError from None  # the parser would end the process with a status of its own

    def main(self, *args: Any, **more: Any) -> Any:
        """Run, and exit."""
        more["standalone_mode"] = False
        if sys.stderr is None:  # closed; or its notes would be printed on standard output
            sys.stderr = open(os.devnull, "w")  # noqa: SIM115 – for as long as the process lasts
        if sys.stdout is None:
            sys.exit(_complain("standard output: it is closed"))
        for stream in (sys.stdout, sys.stderr):
            _speak_utf8(stream)
        try:
            code = super().main(*args, **more)
            sys.stdout.flush()
        except BadInput as error:
            code = _complain(*(str(fault) for fault in error.faults))
        except Refusal as refusal:
            code = _complain(f"command line: {refusal}")
        except _USAGE_ERROR as error:
            code = _complain(f"command line: {_usage(error)}")
        except (KeyboardInterrupt, typer.Abort):
            _complain("interrupted")
            code = INTERRUPTED
        except (_ReaderLeftError, BrokenPipeError):
            # nothing more to say, and nothing to flush at exit
            os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
            code = ANSWERED
        except OSError as error:
            code = _complain(f"standard output: {(error.strerror or str(error)).lower()}")
            os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        except MemoryError:
            code = _complain(
                "command line: the answer does not fit into memory; ask for fewer points or values"
            )
        except Exception as error:
            if os.environ.get(TRACEBACK):
                traceback.print_exc()
            _complain(
                f"internal fault, please report it: {type(error).__name__}: {error} "
                f"({TRACEBACK}=1 shows where)"
            )
            code = INTERNAL
        sys.exit(code if isinstance(code, int) else ANSWERED)


class _ReaderLeftError(Exception):
    """Whoever read our output has left, as `head` does."""


def _speak_utf8(stream: Any) -> None:
    """Write files and pipes in UTF-8, as JSON and TOML must be; a terminal as it can."""
    if hasattr(stream, "reconfigure"):
        encoding = stream.encoding if stream.isatty() else "utf-8"
        stream.reconfigure(encoding=encoding, errors="backslashreplace")


def _complain(*lines: str) -> int:
    for line in lines:
        print(f"mixsim: {line}", file=sys.stderr)
    return BAD_INPUT


def _usage(error: Any) -> str:
    """The message of the parser in one line, in our spelling."""
    context, option = getattr(error, "ctx", None), getattr(error, "option_name", "")
    near = None
    if hasattr(error, "possibilities"):  # an option that is not there
        text = f"no such option: {option}"
        known = [name.lstrip("-") for p in context.command.params for name in p.opts] if context else []
        near = nearest(option.lstrip("-"), [*known, "help"])
    else:
        text = " ".join(str(error.format_message()).split()).rstrip(".")
    command = context.command_path if context else "mixsim"
    allowed = f"{command} --help shows what it takes"
    return str(Refusal(f"{text[:1].lower()}{text[1:]}", allowed, near and f"--{near}"))
