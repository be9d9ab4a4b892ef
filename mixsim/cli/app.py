"""The program: its commands and its own options."""

from __future__ import annotations

import sys
from collections.abc import Callable
from typing import Annotated

import typer

import mixsim
from mixsim.cli import fitting, questions, reference
from mixsim.cli.status import Command, Program

app = typer.Typer(
    name="mixsim",
    cls=Program,
    add_completion=False,
    rich_markup_mode=None,
    pretty_exceptions_enable=False,
    help="Permittivity and permeability of dielectric mixtures from one recipe: predict, sweep, invert, fit.",
    epilog="\b\nExample:\n  mixsim draft nanoparticle-film --out recipe.toml",
)

# each with the example that its help shows
_COMMANDS: dict[str, tuple[Callable[..., int], str]] = {
    "draft": (reference.draft, "draft nanoparticle-film --out recipe.toml"),
    "predict": (questions.predict, "predict recipe.toml --out film.png --out film.csv"),
    "sweep": (questions.sweep, "sweep recipe.toml --vary inclusions.oxide.volume_fraction 2% 20% 10"),
    "invert": (
        questions.invert,
        "invert recipe.toml --static '3.20 ± 0.01' --free inclusions.oxide.volume_fraction 0% 40%",
    ),
    "fit": (
        fitting.fit,
        "fit recipe.toml sample.csv --free inclusions.oxide.volume_fraction 0% 40% --noise 0.5%",
    ),
    "judge": (
        fitting.judge,
        "judge recipe.toml sample.csv --free inclusions.oxide.volume_fraction 0% 40% --set "
        "\"acceptance={of='inclusions.oxide.volume_fraction', lower='3 %', upper='5 %'}\"",
    ),
    "weigh": (questions.weigh, "weigh recipe.toml --set batch.mass='250 g'"),
    "audit": (questions.audit, "audit gold --out gold.png"),
    "list": (reference.list_, "list rules"),
    "show": (reference.show, "show bruggeman"),
    "schema": (reference.schema, "schema --out recipe.schema.json"),
}
for _name, (_command, _example) in _COMMANDS.items():
    app.command(_name, cls=Command, epilog=f"\b\nExample:\n  mixsim {_example}")(_command)


def _version(wanted: bool) -> None:
    if wanted:
        print(f"mixsim {mixsim.__version__}")
        raise typer.Exit


@app.callback(invoke_without_command=True)
def _program(
    context: typer.Context,
    version: Annotated[
        bool, typer.Option("--version", callback=_version, is_eager=True, help="Show the version and exit.")
    ] = False,
) -> None:
    if context.invoked_subcommand is None:
        print(context.get_help())


def main() -> None:
    """Run the program, of whose commands only the one asked for is built: the others cost a start as much."""
    asked, every = sys.argv[1:2], app.registered_commands
    if asked and asked[0] in _COMMANDS:
        app.registered_commands = [known for known in every if known.name == asked[0]]
    try:
        app()
    finally:
        app.registered_commands = every
