"""Files that are no recipe, tables that cannot be used, broken settings, and several faults at once."""

from __future__ import annotations

from pathlib import Path

import pytest
from broken import GRAIN, SOUND, faults_of

from mixsim.errors import BadInput, Fault
from mixsim.recipe import load
from mixsim.recipe.lines import lines_of


def faults_of_file(file: Path) -> tuple[Fault, ...]:
    with pytest.raises(BadInput) as refused:
        load(file)
    return refused.value.faults


def test_every_fault_of_a_file_in_one_pass_and_in_its_order() -> None:
    text = (
        SOUND.replace('"400 nm"', '"400 kg"')
        .replace('"10 %"', '"140 %"')
        .replace("maxwell-garnett", "maxwell")
        .replace('"2.05 eV"', "2.05")
        .replace('density = "4.0', 'densty = "4.0')
    )
    text += '[materials.more]\nindex = { model = "cauchy", b = "1 µm" }\n'
    faults = faults_of(text)
    assert [(fault.line, fault.path) for fault in faults] == [
        (5, "band.from"),
        (13, f"{GRAIN}.volume_fraction"),
        (17, "dopants.ion.terms.red.resonance"),
        (23, "mixing.rule"),
        (30, "materials.filler.densty"),
        (34, "materials.more.index"),
        (34, "materials.more.index.b"),
    ]
    with pytest.raises(BadInput) as refused:
        raise BadInput(faults)
    assert str(refused.value).splitlines() == [str(fault) for fault in faults]


def test_a_message_in_full() -> None:
    (fault,) = faults_of(SOUND.replace('to = "800 nm"', 'to = "800 nm"\nspacing = "liner"'))
    assert str(fault) == (
        "job.toml:7: band.spacing: unknown spacing 'liner'; one of linear, log (did you mean 'linear'?)"
    )


@pytest.mark.parametrize(
    ("settings", "path", "found", "allowed", "suggestion"),
    [
        (
            {"voids.volume": "1 %"},
            "voids.volume",
            "unknown key 'volume'",
            "volume_fraction",
            "volume_fraction",
        ),
        ({"hots.material": "air"}, "hots", "unknown key 'hots'", "a recipe takes", "host"),
        ({"host": "air"}, "host", "'air' where a table is needed", "takes material", None),
        ({"voids.volume_fraction": "2"}, "voids.volume_fraction", "'2' is out of range", "at most 1", "2 %"),
        ({"voids.volume_fraction": "nan"}, "voids.volume_fraction", "nan is not a finite", "4.0 %", None),
        ({"band.points": "9" * 5000}, "band.points", "where a whole number", "401", None),
        (
            {"host.material.density": "1"},
            "host.material.density",
            "host.material holds a value",
            "tables",
            None,
        ),
        ({"mixing.rule": "brugeman"}, "mixing.rule", "'brugeman'", "lorentz-lorenz", "bruggeman"),
        ({f"{GRAIN}.phr": "20"}, f"{GRAIN}.phr", "given twice", "one of them", None),
        (
            {f"{GRAIN}.shape.kind": "spheroid"},
            f"{GRAIN}.shape",
            "aspect_ratio is missing",
            "cross axis",
            None,
        ),
        (
            {"inclusions.grian.phr": "20"},
            "inclusions.grian.phr",
            "no inclusions.grian in the recipe",
            "it holds inclusions.grain",
            f"{GRAIN}.phr",
        ),
        (
            {"dopants.ions.terms.red.damping": "1 eV"},
            "dopants.ions.terms.red",
            "model is missing",
            "lorentz",
            None,
        ),
        (
            {"dopants.ions.mole_fraction": "1 %"},
            "dopants.ions.mole_fraction",
            "no dopants.ions in the recipe",
            "it holds dopants.ion",
            "dopants.ion.mole_fraction",
        ),
        ({"materials.glod.density": "1 g/cm^3"}, "materials.glod.density", "'glod'", "built-in", "gold"),
        (
            {"materials.fused-silica.index.strengths.3": "1"},
            "materials.fused-silica.index.strengths.3",
            "no item '3'",
            "the list has 3, counted from 0",
            None,
        ),
        (
            {"materials.fused-silica.index.strengths.²": "1"},
            "materials.fused-silica.index.strengths.²",
            "no item '²'",
            "counted from 0",
            None,
        ),
        (
            {"materials.fused-silica.index.strengths.0.x": "1"},
            "materials.fused-silica.index.strengths.0.x",
            "strengths.0 holds a value",
            "tables",
            None,
        ),
        (
            {"materials.fused-silica.index.strengths.9.x": "1"},
            "materials.fused-silica.index.strengths.9.x",
            "strengths.9 is no item of its list",
            "tables",
            None,
        ),
        (
            {"unknowns.voids.volume": '["0 %", "9 %"]'},
            "unknowns.voids.volume",
            "unknown path 'voids.volume'",
            "a path",
            "voids.volume_fraction",
        ),
    ],
)
def test_what_is_set_stands_on_the_command_line(
    settings: dict[str, str], path: str, found: str, allowed: str, suggestion: str | None
) -> None:
    (fault, *others) = faults_of(SOUND, settings)
    assert (fault.file, fault.path, fault.line) == ("command line", path, None)
    assert found in fault.found
    assert allowed in fault.allowed
    assert fault.suggestion == suggestion
    assert all(other.file == "command line" for other in others)


def test_faults_of_the_file_and_of_what_is_set_stand_together() -> None:
    faults = faults_of(SOUND.replace('"400 nm"', '"400 kg"'), {"voids.volume_fraction": "2"})
    assert [(fault.file, fault.path) for fault in faults] == [
        ("command line", "voids.volume_fraction"),
        ("job.toml", "band.from"),
    ]


@pytest.mark.parametrize(
    ("content", "found"),
    [
        (b"", "the file is empty"),
        (b"  \n\n", "the file is empty"),
        (b"\xef\xbb\xbf", "the file is empty"),
        (b"\x00\x01\x02binary", "the file is binary"),
        (b'title = "\xff\xfe"', "the file is not UTF-8 text"),
    ],
)
def test_files_that_are_no_recipe(tmp_path: Path, content: bytes, found: str) -> None:
    file = tmp_path / "job.toml"
    file.write_bytes(content)
    (fault,) = faults_of_file(file)
    assert (fault.file, fault.path, fault.found) == (str(file), "", found)
    assert "recipe" in fault.allowed
    assert str(fault) == f"{file}: {found}; {fault.allowed}"


def test_files_that_are_not_there(tmp_path: Path) -> None:
    for file, found in ((tmp_path / "none.toml", "no such file"), (tmp_path, "is a directory")):
        (fault,) = faults_of_file(file)
        assert (fault.file, fault.found) == (str(file), found)
        assert fault.allowed == "name a recipe (TOML) that can be read"


@pytest.mark.parametrize(
    ("text", "line", "found", "allowed"),
    [
        ("[host]\nmaterial = \n", 2, "a value without quotes", "in quotes"),
        ("[host]\nmaterial = gold\n", 2, "a value without quotes", "in quotes"),
        ('[host]\nmaterial = "gold\n', 2, "a text without its closing quote", "two quotes"),
        ("[a.b]\nc = 5 nm\n", 2, "something follows the value", "with a unit stand in quotes"),
        ("[a.b]\nc = 1,5\n", 2, "something follows the value", "decimals take a point"),
        ("[host]\nmaterial = 'a'\n[band]\n[host]\n", 4, "[host] stands twice", "once"),
        ("[a.b]\nc = 1\n[a.b]\nd = 2\n", 3, "[a.b] stands twice", "once"),
        ("[host]\nmaterial = 'a'\nmaterial = 'b'\n", 3, "material stands twice", "once"),
        ("host\n", 1, "expected '='", "key = value"),
        ("[host\n", 1, "expected ']'", "key = value"),
        (f"a = {'[' * 3000}{']' * 3000}", None, "nested too deeply", "few tables"),
        (f"a = {'1' * 5000}", None, "an integer of thousands of digits", "exponent"),
    ],
)
def test_toml_that_does_not_parse(text: str, line: int | None, found: str, allowed: str) -> None:
    (fault,) = faults_of(text)
    assert fault.found.startswith(f"TOML syntax: {found}")
    assert allowed in fault.allowed
    assert (fault.file, fault.path, fault.line) == ("job.toml", "", line)


HEAD = "# convention: exp(-iwt)\nwavelength [nm], n, k\n"


@pytest.mark.parametrize(
    ("content", "found", "allowed", "suggestion"),
    [
        (None, "no such file 'filler.csv'", "relative to the recipe", None),
        (b"", "filler.csv: line 1: it is empty", "a convention line, a header", None),
        (b"\x00\x01", "filler.csv: line 1: it is binary", "plain text", None),
        (b"\xff\xfe\xfa", "filler.csv: line 1: it is not UTF-8", "plain text", None),
        (b"wavelength [nm], n, k\n500, 1.5, 0\n600, 1.5, 0\n", "line 1: no convention", "exp(-iwt)", None),
        (HEAD.replace("[nm]", "[kg]").encode(), "line 2: unit 'kg'", "nm, µm", None),
        (HEAD.replace("n, k", "n, kk").encode(), "line 2: unknown column 'kk'", "columns are n, k", "k"),
        (HEAD.encode() + b"500, 1.5, 0\n", "line 3: one row", "at least two", None),
        (HEAD.encode() + b"500, 1.5, 0\n400, 1.5, 0\n600, 1.5, 0\n", "line 5: '600'", "rise or fall", None),
        (HEAD.encode() + b"500, 1.5, 0\n500, 1.6, 0\n", "line 4: '500' stands twice", "once", None),
        (HEAD.encode() + b"500; 1,5; 0\n600; 1,5; 0\n", "line 3: 2 cells", "decimals take a point", None),
        (HEAD.encode() + b"500, nan, 0\n600, 1.5, 0\n", "line 3: 'nan'", "leave out the rows", None),
        (HEAD.encode() + b"0, 1.5, 0\n600, 1.5, 0\n", "line 3: '0' on the axis", "above 0", None),
        (HEAD.encode() + b"-500, 1.5, 0\n600, 1.5, 0\n", "line 3: '-500' on the axis", "above 0", None),
    ],
)
def test_tables_that_cannot_be_used(
    tmp_path: Path, content: bytes | None, found: str, allowed: str, suggestion: str | None
) -> None:
    if content is not None:
        (tmp_path / "filler.csv").write_bytes(content)
    old = SOUND[SOUND.index("permittivity.infinity = 4.0") :]
    file = tmp_path / "job.toml"
    file.write_text(SOUND.replace(old, 'table = "filler.csv"\n'))
    (fault,) = faults_of_file(file)
    assert (fault.file, fault.path, fault.line) == (str(file), "materials.filler.table", 31)
    assert found in fault.found
    assert allowed in fault.allowed
    assert fault.suggestion == suggestion


@pytest.mark.parametrize(
    ("name", "found"),
    [("'.'", "is a directory"), (r'"a\u0000b"', "cannot be read"), ("3", "a text is needed")],
)
def test_names_of_tables_that_no_file_can_have(name: str, found: str) -> None:
    (fault,) = faults_of(f"host.material = 'm'\nmaterials.m.table = {name}\n")
    assert (fault.path, fault.line) == ("materials.m.table", 2)
    assert found in fault.found


def test_a_faulty_table_is_not_said_again_of_its_heirs() -> None:
    text = "host.material = 'm'\nmaterials.m.table = 'none.csv'\nmaterials.heir.based_on = 'm'\n"
    (fault,) = faults_of(text)
    assert (fault.path, fault.line) == ("materials.m.table", 2)


def test_a_faulty_table_is_said_beside_other_faults() -> None:
    faults = faults_of("host.material = 'm'\nmaterials.m.table = 'none.csv'\nband.values = ['5 kg']\n")
    assert [fault.path for fault in faults] == ["materials.m.table", "band.values.0"]


def test_lines_of_every_way_to_write_a_path() -> None:
    text = '''
title = """
[band]
from = "in a text"
"""  # a = 1
[band]  # from
values = [
  "500 nm",  # , "x"
  '600 nm', "700 nm",
]
[materials.a.permittivity]
terms."b" = { model = "debye", step = 1, relaxation_time = '1 ps' }
terms.c.model = "debye"
[[samples]]
name = "one"
[[samples]]
name = "two"
[samples.set]
"inclusions.ato.phr" = [1, [2, 3], {x = 4}]
'''
    lines = lines_of(text)
    expected = {
        "title": 2,
        "band": 6,
        "band.values": 7,
        "band.values.0": 8,
        "band.values.2": 9,
        "materials.a": 11,
        "materials.a.permittivity.terms": 12,
        "materials.a.permittivity.terms.b.step": 12,
        "materials.a.permittivity.terms.c": 13,
        "samples.0.name": 15,
        "samples.1.name": 17,
        "samples.1.set": 18,
        "samples.1.set.inclusions.ato.phr.1.1": 19,
        "samples.1.set.inclusions.ato.phr.2.x": 19,
    }
    assert {path: lines.get(path) for path in expected} == expected
    assert "band.from" not in lines
