"""The command line: parse, call the library, present."""

from __future__ import annotations

from mixsim.cli.app import app, main

__all__ = ["app", "main"]
