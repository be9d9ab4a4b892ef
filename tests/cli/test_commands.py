"""What each command prints, writes and exits with."""

from __future__ import annotations

import json
import re
import shlex
from pathlib import Path

import jsonschema
import numpy as np
import pytest
import tomli

import mixsim
from mixsim.dispersion import INDEX_MODELS, TERMS
from mixsim.mixing import RULES
from mixsim.observables import QUANTITIES
from mixsim.recipe import drafts, library

from .conftest import Run

COMMANDS = ("draft", "predict", "sweep", "invert", "fit", "judge", "weigh", "audit", "list", "show", "schema")
LOADING = "inclusions.filler.volume_fraction"
CONFIGS = sorted((Path(__file__).parents[2] / "configs").glob("*.toml"))


def no_constant(name: str) -> None:
    raise AssertionError(f"{name} is no JSON")


def answer(run: Run, *arguments: str) -> dict[str, object]:
    result = run(*arguments, "--json")
    assert result.exit_code in (0, 1, 3), result.stderr
    return json.loads(result.stdout, parse_constant=no_constant)  # type: ignore[no-any-return]


@pytest.mark.parametrize("file", CONFIGS, ids=lambda file: file.stem)
def test_every_config_answers_in_json_without_nan(run: Run, file: Path) -> None:
    held = answer(run, "predict", str(file))
    assert held["title"]
    assert len(held["omega_rad_s"]) == np.shape(held["permittivity"]["real"])[-1]  # type: ignore[arg-type,index]


def test_predict_says_composition_limits_and_spectrum(run: Run) -> None:
    result = run("predict", "recipe.toml")
    assert result.exit_code == 0
    assert result.stderr == ""
    held = answer(run, "predict", "recipe.toml")
    for said in (
        "Filled resin, invented",
        "rule maxwell-garnett",
        "filler  filler      20 %",
        "density 1.76 g/cm^3",
    ):
        assert said in result.stdout
    assert f"static permittivity          {held['static']['real']:.6g}" in result.stdout  # type: ignore[index]
    assert len(result.stdout.splitlines()) < 30
    assert max(map(len, result.stdout.splitlines())) <= 80


def test_set_and_rule_change_the_answer(run: Run) -> None:
    plain = answer(run, "predict", "recipe.toml")
    changed = answer(run, "predict", "recipe.toml", "--set", f"{LOADING}=30%", "--rule", "bruggeman")
    assert changed["rule"] == "bruggeman"
    assert changed["composition"]["volume_fraction"]["filler"] == 0.3  # type: ignore[index]
    assert changed["provenance"]["recipe"] != plain["provenance"]["recipe"]  # type: ignore[index]
    later = answer(run, "predict", "recipe.toml", "--set", f"{LOADING}=30%", "--set", f"{LOADING}=20%")
    assert later["permittivity"] == plain["permittivity"]


def test_sweep_makes_a_grid_in_the_units_given(run: Run) -> None:
    options = [
        "--vary",
        LOADING,
        "1%",
        "100 %",
        "3",
        "--vary",
        "materials.filler.permittivity.terms.band.plasma",
    ]
    held = answer(run, "sweep", "recipe.toml", *options, "600 cm^-1", "1000 cm^-1", "2", "--log")
    assert held["vary"][LOADING] == pytest.approx([0.01, 0.1, 1.0])  # type: ignore[index]
    assert np.shape(held["permittivity"]["real"]) == (3, 2, 5)  # type: ignore[index]
    result = run("sweep", "recipe.toml", "--vary", LOADING, "0%", "60%", "100")
    assert "40 of 100 rows" in result.stdout


def test_invert_answers_from_recipe_or_options(run: Run) -> None:
    result = run("invert", "recipe.toml")
    assert result.exit_code == 0
    assert re.search(r"\d+\.\d+ ± \d\.\d+ %; 95 % from", result.stdout)
    assert "bruggeman" in result.stdout
    other = run("invert", "recipe.toml", "--static", "4.3 +/- 0.02 (k=2)", "--free", LOADING, "0", "0.9")
    assert "static 4.3 +/- 0.02 (k=2)" in other.stdout
    assert run("invert", "recipe.toml", "--seed", "3").stdout.count("seed 3") == 1


def test_invert_exits_by_its_verdict(run: Run) -> None:
    impossible = run("invert", "recipe.toml", "--static", "40 ± 0.1")
    assert impossible.exit_code == 1
    assert "impossible" in impossible.stdout
    voids = "voids.volume_fraction"
    both = ["--free", LOADING, "0%", "60%", "--free", voids, "0", "9%", "--set", f"{voids}=0"]
    undecided = run("invert", "recipe.toml", *both)
    assert undecided.exit_code == 3
    assert "pairs that fit" in undecided.stdout
    held = answer(run, "invert", "recipe.toml", "--static", "40 ± 0.1")
    assert held["verdict"] == "impossible"
    assert held["estimates"][LOADING]["value"] is None  # type: ignore[index]


def test_negative_numbers_are_no_options(run: Run) -> None:
    result = run("sweep", "recipe.toml", "--vary", LOADING, "-5%", "5%", "3")
    assert result.exit_code == 2
    assert "'-5%' is out of range" in result.stderr


def test_audit_lists_everything(run: Run) -> None:
    assert run("audit", "recipe.toml").stdout.startswith("recipe.toml: sound, ")
    broken = run("audit", "recipe.toml", "--set", "mixing.rule=bruggman", "--set", f"{LOADING}=3")
    assert broken.exit_code == 1
    assert broken.stdout.startswith("recipe.toml: 2 faults")
    assert "bruggeman" in broken.stdout
    held = answer(run, "audit", "recipe.toml", "--set", f"{LOADING}=3")
    assert held["faults"][0]["path"] == LOADING  # type: ignore[index]


def test_strict_takes_cautions_as_errors_and_writes_nothing(run: Run) -> None:
    crowded = ["--set", f"{LOADING}=70%", "--rule", "maxwell-garnett"]
    assert run("predict", "recipe.toml", *crowded).exit_code == 0
    result = run("predict", "recipe.toml", *crowded, "--strict", "--out", "film.csv")
    assert result.exit_code == 2
    assert "caution, packing" in result.stderr
    assert result.stdout == ""
    assert not Path("film.csv").exists()


@pytest.mark.parametrize("kind", drafts.names())
def test_every_draft_loads_predicts_and_inverts_where_it_asks_for_it(run: Run, kind: str) -> None:
    assert run("draft", kind, "--out", "new.toml").exit_code == 0
    assert run("audit", "new.toml").exit_code == 0
    assert run("predict", "new.toml").exit_code == 0
    text = Path("new.toml").read_text(encoding="utf-8")
    if tomli.loads(text).get("measured"):
        assert run("invert", "new.toml").exit_code == 0
    assert re.search("^# .*the safety data sheets and local rules come first", text, re.MULTILINE)
    assert run("draft", kind).stdout == text
    assert kind in run("draft").stdout
    assert "placeholder" in text
    assert len(text.splitlines()) > 15


@pytest.mark.parametrize("kind", drafts.names())
def test_what_a_draft_leaves_out_works_when_put_in(run: Run, kind: str) -> None:
    text = run("draft", kind).stdout
    whole = re.sub(r'^# (?!values)(?=\[|[\w."-]+ = )', "", text, flags=re.MULTILINE)
    Path("whole.toml").write_text(whole, encoding="utf-8")
    assert run("audit", "whole.toml").stdout.startswith("whole.toml: sound")
    assert run("predict", "whole.toml").exit_code == 0
    if "[measured]" in whole:
        result = run("invert", "whole.toml")
        assert (result.exit_code, result.stderr) == (0, "")


@pytest.mark.parametrize(
    ("kind", "names"),
    [
        ("rules", RULES),
        ("models", [*TERMS, *INDEX_MODELS]),
        ("materials", library.names()),
        ("quantities", QUANTITIES),
    ],
)
def test_everything_is_listed_and_shown(run: Run, kind: str, names: list[str]) -> None:
    listed = run("list", kind).stdout
    for name in names:
        assert re.search(rf"^{re.escape(name)} ", listed, re.MULTILINE)
        shown = run("show", name)
        assert shown.exit_code == 0
        assert shown.stdout.startswith(f"{name} (")
        assert len(shown.stdout.splitlines()) >= 3


def test_show_tells_a_rule_a_term_and_a_material(run: Run) -> None:
    assert "1/3" not in run("show", "maxwell-garnett").stdout
    assert "percolates from: 0.3333 by volume" in run("show", "bruggeman").stdout
    lorentz = run("show", "lorentz").stdout
    assert "plasma with strength, or step with resonance, or number_density with strength" in lorentz.replace(
        "\n  ", " "
    )
    gold = run("show", "gold").stdout
    assert "kind of evidence: memory" in gold
    assert "permittivity.plasma" in gold


def test_show_tells_every_number_of_a_recipe(run: Run) -> None:
    shown = run("show", "recipe.toml").stdout
    assert re.search(rf"^{LOADING} +20 % +0.2 +at least 0 and at most 1$", shown, re.MULTILINE)
    assert re.search(r"^materials.filler.density +4.0 g/cm\^3 +4000 kg/m\^3 +above 0$", shown, re.MULTILINE)
    assert re.search(r"^measured.static +4.10 ± 0.03 +4.1 ± 0.03 ", shown, re.MULTILINE)
    for number in shown.splitlines()[1:]:
        path, written = re.split(r"  +", number)[:2]
        options = [] if path.startswith("measured") else ["--set", f"{path}={written}"]
        assert run("predict", "recipe.toml", *options).exit_code == 0, path


def test_schema_is_one_that_takes_the_recipe(run: Run) -> None:
    schema = json.loads(run("schema").stdout)
    jsonschema.Draft202012Validator.check_schema(schema)
    jsonschema.validate(tomli.loads(Path("recipe.toml").read_text()), schema)
    assert run("schema", "--out", "s.json").exit_code == 0
    assert json.loads(Path("s.json").read_text()) == schema


def test_files_of_every_kind(run: Run) -> None:
    files = ["a.png", "a.svg", "a.pdf", "a.csv", "a.json", "a.npz"]  # in the order in which they are written
    options = [word for file in files for word in ("--out", file)]
    result = run("predict", "recipe.toml", *options)
    assert result.exit_code == 0
    assert result.stderr.splitlines() == [f"mixsim: wrote {file}" for file in files]
    for file in files:
        assert Path(file).stat().st_size > 500
    assert json.loads(Path("a.json").read_text()) == answer(run, "predict", "recipe.toml")


def test_examples_of_the_helps_run_one_after_the_other(run: Run) -> None:
    Path("recipe.toml").unlink()
    for command in ("", *COMMANDS):
        text = run(*command.split(), "--help").stdout
        (example,) = re.findall(r"^    mixsim (.*)$", text, re.MULTILINE)
        asked = shlex.split(example)
        assert command in ("", asked[0])
        if asked[0] == "draft":
            Path("recipe.toml").unlink(missing_ok=True)
        if "sample.csv" in asked:
            _measured(Path("sample.csv"))
        result = run(*asked)
        assert result.exit_code == 0, (example, result.stderr)


def _measured(file: Path) -> None:
    """What an invented spectrometer reads on the recipe as it stands, without noise."""
    read = mixsim.predict(mixsim.load("recipe.toml"))
    rows = np.stack([read.axis.shown, read.permittivity.real, read.permittivity.imag], axis=-1).tolist()
    heading = f"wavelength [{read.axis.unit}], permittivity_real, permittivity_imag"
    lines = ["# convention: exp(-iwt)", heading, *(", ".join(map(repr, row)) for row in rows)]
    file.write_text("\n".join(lines), encoding="utf-8")


def test_help_says_each_command_in_one_whole_line(run: Run) -> None:
    listed = run("--help").stdout.split("Commands:\n")[1].split("\n\n")[0].splitlines()
    assert len(listed) == len(COMMANDS)
    for line in listed:
        assert line.endswith(".") and not line.endswith("...")


def test_an_equals_sign_may_join_an_option_of_several_words(run: Run) -> None:
    plain = answer(run, "sweep", "recipe.toml", "--vary", LOADING, "0%", "9%", "3")
    assert answer(run, "sweep", "recipe.toml", f"--vary={LOADING}", "0%", "9%", "3") == plain


def test_the_program_alone_shows_its_help_and_version(run: Run) -> None:
    result = run()
    assert result.exit_code == 0
    for command in COMMANDS:
        assert command in result.stdout
    assert run("--version").stdout == f"mixsim {mixsim.__version__}\n"


def test_materials_are_listed_by_evidence_place_and_word(run: Run) -> None:
    def names(*options: str) -> set[str]:
        shown = run("list", "materials", *options).stdout.splitlines()[1:]
        return {line.split("  ")[0] for line in shown if not line.startswith(" ")}

    every = names()
    assert len(every) == len(library.names()) >= 190
    published = names("--evidence", "published")
    assert "fused-silica" in published
    assert "gold" not in published
    microwave = names("--at", "10 GHz")
    assert "epoxy" in microwave
    assert "silicon" not in microwave
    ferrites = {"nickel-zinc-ferrite", "manganese-zinc-ferrite", "barium-hexaferrite"}
    assert ferrites < names("--text", "FERRITE") < every
    assert names("--text", "dry", "--at", "1 GHz") < names("--at", "1 GHz")
    assert "nylon" in names("--text", "checked: none")
    assert "gold" in every - names("--text", "checked: none")
    assert "gold" in names("--text", "open table of the same fit")
    assert "checked against: none\n" in run("show", "nylon").stdout
    assert (
        "checked against: open table of the same fit, 3e-4 in ε over the band" in run("show", "gold").stdout
    )


def test_a_material_is_drawn_over_its_band(run: Run) -> None:
    assert run("show", "gold", "--out", "gold.csv").exit_code == 0
    lines = [line for line in Path("gold.csv").read_text().splitlines() if not line.startswith("#")]
    assert len(lines) == 402
    assert float(lines[1].split(",")[0]) == pytest.approx(0.248)


def test_audit_of_a_table_and_of_a_material(run: Run) -> None:
    done = run("audit", "gold", "--out", "gold.csv", "--out", "gold.json", "--out", "gold.png")
    assert done.exit_code == 0 and done.stdout.startswith("gold: material, ")
    assert "of,finding,verdict,why" in Path("gold.csv").read_text(encoding="utf-8")
    assert json.loads(Path("gold.json").read_text(encoding="utf-8"))["passed"] is True
    assert Path("gold.png").stat().st_size > 10_000
    rows = "".join(f"{f},4,{-0.5 * f / 10}\n" for f in range(1, 21))
    head = "# convention: exp(-iwt)\nfrequency [GHz], permittivity_real, permittivity_imag\n"
    Path("gain.csv").write_text(head + rows, encoding="utf-8")
    gain = run("audit", "gain.csv")
    assert gain.exit_code == 1 and "negative first at 1 GHz" in re.sub(r"\s+", " ", gain.stdout)
    assert answer(run, "audit", "gain.csv")["passed"] is False
    assert run("audit", "goold").exit_code == 2
    broken = run("audit", "recipe.toml", "--set", "mixing.rule=bruggman", "--out", "x.png", "--out", "x.json")
    assert broken.exit_code == 1 and "bruggeman" in broken.stdout
    assert Path("x.json").exists() and not Path("x.png").exists()
    refused = run("audit", "gold", "--out", "gold.npz")
    assert refused.exit_code == 2 and not Path("gold.npz").exists()
