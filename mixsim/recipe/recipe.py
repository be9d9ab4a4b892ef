"""A recipe: read, completed from the library, checked, and its numbers by path."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property
from pathlib import Path
from typing import TYPE_CHECKING, Any

from pydantic import ValidationError

from mixsim.dispersion import Table
from mixsim.errors import BadInput, Fault, Refusal
from mixsim.recipe.agreement import OF_MIXTURE, disagreements, of_mixture, path_or_nearest
from mixsim.recipe.completion import complete, once, tables
from mixsim.recipe.consistency import contradictions
from mixsim.recipe.faults import Finding, as_meant, faults_of, findings_of
from mixsim.recipe.leaves import Number, ranges, walk
from mixsim.recipe.nesting import adopted, densities, parts, settings_inside
from mixsim.recipe.schema import Schema
from mixsim.recipe.settings import COMMAND_LINE, apply, drop_foreign_parameters, parsed
from mixsim.recipe.syntax import parsed_toml, text_of
from mixsim.units import Leaf, show, written_unit

if TYPE_CHECKING:
    from mixsim.mixture import Mixture


@dataclass(frozen=True)
class Recipe:
    """A checked recipe.

    Attributes
    ----------
    schema
        The recipe as validated, library materials included.
    leaves
        Every number by its path, value in SI.
    ranges
        What each of them may hold.
    tables
        Measured spectra by the name of the material that holds them.
    file
        Name to show in messages.
    text
        The recipe as written.
    settings
        What the command line changed, path → value.
    folder
        Where the files that it names are looked for.
    parts
        Recipes of those of its materials that have one, by their names.
    """

    schema: Schema
    leaves: Mapping[str, Leaf]
    ranges: Mapping[str, Number]
    tables: Mapping[str, Table]
    file: str
    text: str
    settings: Mapping[str, Any]
    folder: Path
    parts: Mapping[str, Recipe]

    @cached_property
    def digest(self) -> str:
        """Short hash of the recipe as written and of what was set, to tell one answer's origin."""
        import hashlib

        content = self.text + repr(sorted(self.settings.items()))
        content += "".join(part.digest for part in self.parts.values())
        return hashlib.sha256(content.encode()).hexdigest()[:16]

    def leaf(self, path: str, *, option: str) -> Leaf:
        """The number at a path that an option names.

        Raises
        ------
        BadInput
            Where there is none, with the nearest path, or where the mixture does not depend on it.
        """
        if path in self.leaves and not of_mixture(path):
            found = f"{path} is no number of the mixture"
            raise BadInput([Fault(COMMAND_LINE, option, found, OF_MIXTURE)])
        if path not in self.leaves:
            allowed = f"a path of a number in {self.file} (mixsim show {self.file} lists them)"
            suggestion = path_or_nearest(path, [known for known in self.leaves if of_mixture(known)])
            raise BadInput([Fault(COMMAND_LINE, option, f"unknown path {path!r}", allowed, suggestion)])
        return self.leaves[path]

    def fault(self, path: str, found: str, allowed: str, suggestion: str | None = None) -> Fault:
        """A fault of this recipe found after it was read, with its line."""
        (fault,) = faults_of(
            [(path, Refusal(found, allowed, suggestion))],
            file=self.file,
            text=self.text,
            settings=self.settings,
        )
        return fault

    def read(self, path: str, written: str | float, *, option: str, to_find: bool = False) -> Leaf:
        """A number that an option gives for the leaf at a path, held to its dimension and range.

        An end of a range in which to look for it (`to_find`) may lie below what the recipe itself takes.

        Raises
        ------
        BadInput
            Where it cannot be used there.
        """
        self.leaf(path, option=option)
        try:
            allowed = self.ranges[path].to_find() if to_find else self.ranges[path]
            return allowed.leaf(parsed(written))
        except Refusal as refusal:
            found = f"{path}: {refusal.found}"
            fault = Fault(COMMAND_LINE, option, found, refusal.allowed, refusal.suggestion)
            raise BadInput([fault]) from None

    def show(self, path: str, value: float, std: float | None = None) -> str:
        """A value of the leaf at a path, in the unit that the recipe uses there."""
        here = self.leaves[path]
        return show(value, here.dimension, written_unit(here) or None, std)

    def compile(self) -> Mixture:
        """The mixture that this recipe describes, as a function of its numbers and a frequency axis."""
        from mixsim.mixture import compile_recipe

        return compile_recipe(self)


def load(path: str | Path, settings: Mapping[str, Any] | None = None) -> Recipe:
    """Read a recipe from a TOML file.

    Parameters
    ----------
    path
        The file.
    settings
        Values to set before it is checked, path → text or number.

    Returns
    -------
    recipe
        The checked recipe.

    Raises
    ------
    BadInput
        With every fault that one pass can see.
    """
    file = Path(path)
    text = text_of(file)
    within = (str(file.resolve()),)
    return _parsed(text, file=str(path), folder=file.parent, settings=settings or {}, within=within)


def parse(
    text: str,
    *,
    file: str = "recipe",
    folder: Path | None = None,
    settings: Mapping[str, Any] | None = None,
) -> Recipe:
    """Read a recipe from TOML text; as `load`, with `folder` for the files that it names."""
    return _parsed(text, file=file, folder=folder or Path(), settings=settings or {}, within=())


def _parsed(
    text: str | None,
    *,
    file: str,
    folder: Path,
    settings: Mapping[str, Any],
    within: tuple[str, ...],
    raw: dict[str, Any] | None = None,
) -> Recipe:
    """A recipe from its text, or from what stands in a material; `within` are the files around it."""
    raw = parsed_toml(text or "", file) if raw is None else raw
    text = text or ""
    changed = dict(settings)
    own, inside = settings_inside(raw, changed)
    findings: list[Finding] = []
    for path, value in own.items():
        findings += apply(raw, path, value, own)
    if "mixing.rule" in own:
        drop_foreign_parameters(raw, own)
    findings += complete(raw)
    found, wrong, faults = parts(
        raw, inside, parse=_parsed, file=file, folder=folder, text=text, within=within
    )
    findings += wrong
    from_parts = {name: density for name, density in densities(found).items() if _undensed(raw, name)}
    for name, density in from_parts.items():
        raw["materials"][name]["density"] = density
    schema = None
    try:
        schema = Schema.model_validate(raw)
    except ValidationError as error:
        findings += findings_of(error, raw)
    gaps = list(contradictions(raw))
    if (meant := as_meant(raw, findings)) is not None:  # a word put right fills the gap that it leaves
        real = {(path, refusal.found) for path, refusal in contradictions(meant)}
        gaps = [(path, refusal) for path, refusal in gaps if (path, refusal.found) in real]
    spectra, wrong = tables(raw, folder)
    findings = once([*findings, *gaps, *wrong], raw)
    if schema is None or findings or faults:
        raise BadInput([*faults_of(findings, file=file, text=text, settings=own), *faults])

    leaves, allowed = dict(walk(schema)), dict(ranges(schema))
    for name in from_parts:  # it follows from the numbers inside
        del leaves[f"materials.{name}.density"]
    more, more_allowed = adopted(found, warm="conditions.temperature" in leaves)
    leaves, allowed = {**leaves, **more}, {**allowed, **more_allowed}
    if wrong := list(disagreements(schema, leaves, allowed)):
        raise BadInput(faults_of(wrong, file=file, text=text, settings=changed))
    return Recipe(schema, leaves, allowed, spectra, file, text, changed, folder, found)


def _undensed(raw: Mapping[str, Any], name: str) -> bool:
    """Whether a material of the recipe states no density of its own."""
    return "density" not in raw["materials"][name]
