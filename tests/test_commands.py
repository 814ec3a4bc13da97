"""The command line: JSON as promised, exit codes, streams, and the ways people type temperatures."""

from __future__ import annotations

import json
import subprocess
import sys

import pytest
import typer
from test_exchange import _edit

from registry.cli.app import main
from registry.cli.commands import COMMANDS, Home
from registry.opening import open_library
from registry.properties import PROPERTIES

ANSWER_KEYS = {
    "temperature_K", "value", "unit", "value_SI", "correlation", "revision", "phase", "window_K", "evidence",
    "counts_as", "standing", "obtained", "uncertainty_percent", "uncertainty", "scale_effects", "mark",
    "percent_per_kelvin", "factor_per_10_K", "source", "chosen_because", "candidates", "cautions",
}  # fmt: skip


@pytest.fixture
def run(published_path, capsys, monkeypatch):
    """Run a command on the published shelf: exit code, stdout, stderr."""
    monkeypatch.setenv("RANGEBOOK_LIBRARY", str(published_path))

    def call(*words: str) -> tuple[int, str, str]:
        with pytest.raises(SystemExit) as stopped:
            main(list(words))
        captured = capsys.readouterr()
        return int(stopped.value.code or 0), captured.out, captured.err

    return call


def _shell(*words: str, stdin: str = "", **environment: str) -> subprocess.CompletedProcess[str]:
    code = "from registry.cli.entry import main; main()"
    return subprocess.run(
        [sys.executable, "-c", code, *words], input=stdin, capture_output=True, text=True, timeout=60,
        env={"PATH": "/usr/bin:/bin", **environment},
    )  # fmt: skip


def test_lookup_json_has_the_promised_shape(run):
    """Answers and refusals stand each in the order asked, with every promised field."""
    code, out, err = run("lookup", "water", "300K", "700K", "25C", "--json")
    document = json.loads(out)
    assert code == 3
    assert err == ""
    assert list(document) == ["compound", "property", "answers", "refusals", "position", "as_of"]
    assert [a["temperature_K"] for a in document["answers"]] == [300.0, 298.15]
    for answer in document["answers"]:
        assert set(answer) == ANSWER_KEYS
        assert answer["standing"] == "accepted"
        assert answer["obtained"] in ("seen", "memory")
        low, high = answer["window_K"]
        assert low <= answer["temperature_K"] <= high
        assert set(answer["source"]) == {"key", "citation", "locator"}
        verdicts = [c["verdict"] for c in answer["candidates"]]
        assert verdicts.count("chosen") == 1
        assert set(verdicts) <= {"chosen", "passed-over", "not-covering", "not-accepted"}
        assert answer["value_SI"] == pytest.approx(answer["value"] * 1000.0, rel=1e-15)
    (refusal,) = document["refusals"]
    assert set(refusal) == {"temperature_K", "reason", "explanation", "nearest"}
    assert refusal["reason"] == "above-critical"
    assert set(refusal["nearest"][0]) == {"correlation", "window_K", "distance_K"}


def test_steepness_is_the_slope_of_the_curve(run, published):
    """percent_per_kelvin is the central difference of the answers around it; the factor is its exponential."""
    import math

    _, out, _ = run("lookup", "ammonia", "300K", "--json")
    (answer,) = json.loads(out)["answers"]
    above, below = (published.lookup("ammonia", 300.0 + d).value for d in (0.01, -0.01))
    difference = 100.0 * math.log(above / below) / 0.02
    assert answer["percent_per_kelvin"] == pytest.approx(difference, rel=1e-6)
    assert answer["factor_per_10_K"] == pytest.approx(math.exp(0.1 * difference), rel=1e-6)


@pytest.mark.parametrize(
    ("words", "kelvin"),
    [
        (("-40C",), [233.15]),
        (("-40", "C"), [233.15]),
        (("\u221240C",), [233.15]),
        (("25 °C",), [298.15]),
        (("25", "°C", "77F"), [298.15, 298.15]),
        (("536.67R", "298.15K", "25degC"), [298.15, 298.15, 298.15]),
    ],
)
def test_temperatures_as_people_type_them(words, kelvin, run):
    """Negative temperatures work unquoted, and a unit may be a word of its own."""
    code, out, _ = run("lookup", "ammonia", *words, "--json")
    assert code == 0
    assert [a["temperature_K"] for a in json.loads(out)["answers"]] == kelvin


def test_temperatures_come_from_stdin(published_path):
    """`-` reads one temperature a line and passes over empty lines."""
    done = _shell(
        "lookup", "water", "20C", "-", "--json", stdin="25C\n\n 300 K\n", RANGEBOOK_LIBRARY=str(published_path)
    )
    assert [a["temperature_K"] for a in json.loads(done.stdout)["answers"]] == [293.15, 298.15, 300.0]


@pytest.mark.parametrize(
    ("words", "unit"),
    [
        (("water", "25C"), "kPa"),
        (("water", "273.16K"), "kPa"),
        (("mercury", "300K"), "Pa"),
        (("water", "600K"), "MPa"),
        (("benzene", "300K", "-p", "enthalpy-of-vaporization"), "kJ/mol"),
        (("water", "300K", "-p", "saturated-liquid-density"), "kg/m3"),
        (("water", "300K", "-u", "psi"), "psi"),
        (("water", "120C", "-u", "barg", "--atmosphere", "1atm"), "bar(g)"),
        (("benzene", "300K", "-p", "enthalpy-of-vaporization", "-u", "J/g"), "J/g"),
    ],
)
def test_the_unit_suits_the_value_or_is_the_one_asked_for(words, unit, run):
    """kPa, but Pa below 100 Pa and MPa above 10 MPa; kJ/mol; kg/m3; else as asked."""
    code, out, _ = run("lookup", *words, "--json")
    assert code == 0
    assert json.loads(out)["answers"][0]["unit"] == unit


@pytest.mark.parametrize("name", ["water", "WATER", "Water", "7732-18-5", "h2o", "r-718"])
def test_a_compound_is_found_by_any_of_its_names(name, run):
    """Key, name, synonym, CAS number and formula do, case aside."""
    code, out, _ = run("lookup", name, "25C", "--json")
    assert code == 0
    assert json.loads(out)["compound"] == "water"


READING = [
    ("list",), ("list", "methyl"), ("show", "ammonia"), ("show", "water-if97"), ("show", "perry-8"),
    ("show", "water-vapor-pressure-crc-73"), ("show", "ammonia-triple-point-temperature-gao-2023"),
    ("show", "water-hardy-1998-at-0-degc"), ("coverage", "water"), ("coverage", "water", "-p", "melting-pressure"),
    ("coverage", "neon"), ("forms",), ("forms", "antoine-ln"), ("lookup", "water", "25C", "--why"),
    ("table", "ethanol", "--from", "0C", "--to", "60C", "--step", "10C"),
    ("restate", "water-goff-gratch-1946", "--pressure", "kPa", "--temperature", "degR"),
]  # fmt: skip


@pytest.mark.parametrize("words", READING, ids=" ".join)
def test_every_reading_command_prints_one_json_object(words, run):
    """With --json there is one object on stdout and nothing else; without, plain lines no wider than the screen."""
    code, out, err = run(*words, "--json")
    assert (code, err) == (0, "")
    assert isinstance(json.loads(out), dict)
    code, out, err = run(*words)
    assert (code, err) == (0, "")
    assert out.strip()
    assert "\x1b" not in out
    assert max(len(line) for line in out.splitlines()) <= 130


def test_show_tells_a_record_as_printed(run):
    """A correlation shows its coefficients, units and bounds as its source prints them, and who recorded it."""
    _, out, _ = run("show", "water-antoine-273-333")
    for text in (
        "A=7.2326; B=1750.286; C=38.1",
        "log10 p = A - B/(T - C)",
        "273 to 333 K (printed)",
        "seen",
        "change 1",
    ):
        assert text in out
    _, out, _ = run("show", "water-antoine-273-333", "--json")
    assert json.loads(out)["coefficients"] == {"A": "7.2326", "B": "1750.286", "C": "38.1"}


def test_coverage_json_tiles_between_its_ends(run):
    """Stretches, gaps and seams of the JSON fit together."""
    _, out, _ = run("coverage", "helium-4", "--json")
    document = json.loads(out)
    first, second = document["stretches"]
    assert first["to_K"] == second["from_K"]
    assert document["seams"][0]["temperature_K"] == 2.1768
    assert abs(document["seams"][0]["jump_percent"]) < 0.01
    assert document["limits"]["not_recorded"] == ["triple-point-temperature"]


def test_a_terminal_without_unicode_gets_plain_marks(published_path):
    """Where the output is ASCII, bars and messages still print."""
    environment = {"RANGEBOOK_LIBRARY": str(published_path), "PYTHONIOENCODING": "ascii", "LC_ALL": "C"}
    done = _shell("coverage", "ethanol", **environment)
    assert (done.returncode, done.stderr) == (0, "")
    assert "#" in done.stdout
    assert done.stdout.isascii()


def test_the_first_lookup_makes_the_default_library(tmp_path):
    """In an empty home the first lookup makes the library with the published shelf; the next one uses it."""
    environment = {"HOME": str(tmp_path), "XDG_DATA_HOME": str(tmp_path / "data")}
    first = _shell("lookup", "water", "25C", **environment)
    path = tmp_path / "data" / "rangebook" / "library.db"
    assert first.returncode == 0
    assert "3.16975" in first.stdout
    assert path.exists()
    before = path.read_bytes()
    second = _shell("lookup", "water", "25C", **environment)
    assert second.stdout == first.stdout
    assert path.read_bytes() == before


def test_two_first_lookups_at_once_make_one_library(tmp_path):
    """Two processes that start together both answer, and leave one library and nothing else."""
    environment = {"PATH": "/usr/bin:/bin", "HOME": str(tmp_path), "XDG_DATA_HOME": str(tmp_path / "data")}
    code = "from registry.cli.entry import main; main()"
    words = [sys.executable, "-c", code, "lookup", "water", "25C", "--json"]
    both = [subprocess.Popen(words, env=environment, stdout=subprocess.PIPE, stderr=subprocess.PIPE) for _ in range(3)]
    results = [process.communicate(timeout=120) for process in both]
    assert [process.returncode for process in both] == [0, 0, 0], results
    assert len({out for out, _ in results}) == 1
    assert [p.name for p in (tmp_path / "data" / "rangebook").iterdir()] == ["library.db"]


def test_an_explicit_library_must_exist(tmp_path):
    """A path given by --library or by the environment is never made by a lookup."""
    missing = tmp_path / "missing.db"
    for words, environment in (
        (("lookup", "water", "25C", "--library", str(missing)), {}),
        (("lookup", "water", "25C"), {"RANGEBOOK_LIBRARY": str(missing)}),
    ):
        done = _shell(*words, **environment, HOME=str(tmp_path))
        assert done.returncode == 5
        assert done.stdout == ""
        assert str(missing) in done.stderr
        assert list(tmp_path.iterdir()) == []


def test_commands_are_the_ones_of_the_job():
    """No command is missing, and none is there that nobody asked for."""
    assert set(COMMANDS) == {
        "lookup", "boil", "table", "slope", "coverage", "list", "show", "restate", "forms", "start", "load", "dump",
        "upgrade",
        "record", "revise", "review", "withdraw", "prefer", "queue", "history", "diff", "freeze", "editions", "verify",
    }  # fmt: skip


@pytest.mark.parametrize("command", COMMANDS)
def test_only_the_command_asked_for_is_imported(command):
    """A command loads its own module of commands and no other."""
    homes = sorted({f"registry.cli.{home.module}" for home in COMMANDS.values()})
    code = (
        "import sys, contextlib; from registry.cli.app import main\n"
        f"with contextlib.suppress(SystemExit): main([{command!r}, '--help'])\n"
        f"print(*[name for name in {homes} if name in sys.modules], file=sys.stderr)"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, timeout=60, check=True)
    assert done.stderr.split() == [f"registry.cli.{COMMANDS[command].module}"]


def test_help_lists_every_command_with_what_it_does(run):
    """With no words or --help, each command stands with the first sentence of its help."""
    _, out, _ = run("--help")
    lines = out[out.index("Commands:") :].splitlines()[1:]
    starts = [line.split()[0] for line in lines if line[2:3].strip()]
    assert starts == list(COMMANDS)
    assert "lookup    Look up a value at one or more temperatures." in out
    assert run() == (2, "", out)


def test_a_mistyped_command_is_answered_with_the_nearest(run):
    """Exit code 2, and the command meant."""
    code, out, err = run("lookpu", "water", "25C")
    assert (code, out) == (2, "")
    assert "No such command 'lookpu'. Did you mean 'lookup'?" in err


def test_completion_offers_commands_and_the_options_of_one():
    """What a shell asks for while somebody types is answered from the same table."""

    def complete(line: str, number: int) -> list[str]:
        done = _shell(_RANGEBOOK_COMPLETE="complete_bash", COMP_WORDS=line, COMP_CWORD=str(number))
        return done.stdout.split()

    assert complete("rangebook l", 1) == ["lookup", "list", "load"]
    assert complete("rangebook lookup --un", 2) == ["--unit"]


def test_a_command_may_have_subcommands(run, monkeypatch):
    """A group is listed, told and run like a command; its subcommands are suggested too."""
    from registry.cli import vocabulary

    def build_group() -> typer.Typer:
        group = typer.Typer(help="Try things.", no_args_is_help=True, rich_markup_mode=None)
        group.command("one")(lambda: print("first"))
        group.command("two")(lambda: print("second"))
        return group

    monkeypatch.setattr(vocabulary, "trying", build_group, raising=False)
    monkeypatch.setitem(COMMANDS, "trial", Home("vocabulary", "trying", group=True))
    assert run("trial", "two") == (0, "second\n", "")
    assert "trial     Try things." in run("--help")[1]
    assert "Usage: rangebook trial [OPTIONS] COMMAND" in run("trial", "-h")[1]
    assert "Did you mean 'two'?" in run("trial", "tow")[2]


def test_a_refusal_tells_distances_and_a_dump_what_waits(own_path, tmp_path, monkeypatch, capsys):
    """distance_K is how far the window is; drafts that a dump leaves behind are counted for a person too."""
    monkeypatch.setenv("RANGEBOOK_LIBRARY", str(own_path))
    with pytest.raises(SystemExit):
        main(["lookup", "water", "700K", "--json"])
    (refusal,) = json.loads(capsys.readouterr().out)["refusals"]
    for near in refusal["nearest"]:
        low, high = near["window_K"]
        assert near["distance_K"] == max(low - 700.0, 700.0 - high) > 50.0
    with open_library(own_path) as library:
        library.dump(tmp_path / "package")
        _edit(tmp_path / "package" / "correlations.csv", "water-august", "note", "a draft")
        _edit(tmp_path / "package" / "correlations.csv", "water-august", "standing", "draft")
        library.load(tmp_path / "package", author="somebody", reason="invented", accept=True)
    with pytest.raises(SystemExit):
        main(["dump", str(tmp_path / "dump")])
    assert "stayed behind: 1. Once they are reviewed" in capsys.readouterr().out


@pytest.mark.parametrize(("value", "unit"), [(99.999, "Pa"), (100.0, "kPa"), (1e7, "kPa"), (1.0001e7, "MPa")])
def test_the_unit_changes_at_100_pa_and_above_10_mpa(value, unit):
    """Pa below 100 Pa, MPa above 10 MPa, kPa at both bounds."""
    from registry.display import suit_unit
    from registry.quantities import UNITS

    assert suit_unit(value, UNITS["Pa"]).name == unit


def test_a_solid_above_its_triple_point_has_melted(scenario, published):
    """A sublimation curve is refused above the triple temperature, with the other property to ask for."""
    from registry.errors import Refused

    with pytest.raises(Refused) as caught:
        published.lookup("carbon-dioxide", 250.0, property="sublimation-pressure")
    assert caught.value.refusal.reason == "above-triple"
    assert "--property vapor-pressure" in caught.value.refusal.explanation


def test_where_no_conversion_reaches_the_answer_says_so(published):
    """A curve on an older scale, asked beyond the published conversions, says so; within them it does not."""
    import dataclasses

    from registry.answers import find_cautions
    from registry.scales import SCALES

    coverage = published.coverage("water")
    candidate = next(c for c in coverage.candidates if c.key == "water-wexler-1976")
    other = dataclasses.replace(candidate, curve=dataclasses.replace(candidate.curve, scale=SCALES["IPTS-48"]))
    said = [any("No published conversion" in c for c in find_cautions(coverage, other, t)) for t in (300.0, 550.0)]
    assert said == [False, True]


def test_json_holds_no_number_that_json_cannot(capsys):
    """Infinity and NaN become null, at any depth."""
    from registry.cli.screen import print_json

    print_json({"a": [float("inf"), {"b": float("nan")}], "c": (1.5,)})
    assert json.loads(capsys.readouterr().out) == {"a": [None, {"b": None}], "c": [1.5]}


def test_list_counts_accepted_correlations_and_gaps_rise(scenario_path, monkeypatch, capsys):
    """Drafts and withdrawn records are not counted; a gap is given from its lower to its upper end."""
    monkeypatch.setenv("RANGEBOOK_LIBRARY", str(scenario_path))

    def read(*words):
        with pytest.raises(SystemExit):
            main([*words, "--json"])
        return json.loads(capsys.readouterr().out)

    gaps = 0
    for row in read("list")["compounds"]:
        for prop, count in row["correlations"].items():
            found = read("coverage", row["key"], "-p", prop)
            assert count == sum(c["standing"] == "accepted" for c in found["candidates"])
            gaps += len(found["gaps_K"])
            assert all(low < high for low, high in found["gaps_K"])
    assert gaps


def test_a_closed_pipe_is_no_error(published_path):
    """A reader that has gone before the first line ends the program quietly, with exit code 0."""
    process = subprocess.Popen(
        [sys.executable, "-c", "from registry.cli.entry import main; main()", "list"], stdout=subprocess.PIPE,
        stderr=subprocess.PIPE, text=True, env={"PATH": "/usr/bin:/bin", "RANGEBOOK_LIBRARY": str(published_path)},
    )  # fmt: skip
    process.stdout.close()
    assert (process.stderr.read(), process.wait(60)) == ("", 0)
    process.stderr.close()


@pytest.mark.parametrize("command", COMMANDS)
def test_help_names_what_each_place_takes(run, command):
    """A place is called by what goes there, not by a type or by the name that the code has for it."""
    text = run(command, "--help")[1]
    usage = text.split("\n\n")[0]
    assert "<str>" not in text
    assert usage.removeprefix(f"Usage: rangebook {command}").upper().strip() == usage.split(command, 1)[1].strip()


def test_help_lists_every_property(run):
    """The commands that take any property name all of them."""
    for command in ("lookup", "table", "coverage"):
        text = run(command, "--help")[1].replace("-\n", "-")
        assert [name for name in PROPERTIES if name not in "".join(text.split())] == []


@pytest.mark.parametrize(("columns", "beneath"), [("60", "obtained  answered by"), ("80", "obtained  answered by")])
def test_numbers_stay_on_a_narrow_screen(run, monkeypatch, columns, beneath):
    """Columns of text stand beneath their row as far as the numbers need the room."""
    monkeypatch.setenv("COLUMNS", columns)
    words = ("25C", "100C") if columns == "60" else ("25+/-0.05C", "100C")
    lines = run("lookup", "water", *words)[1].splitlines()
    assert max(map(len, lines)) <= int(columns)
    assert [line.strip() for line in lines[3:8:2]] == [beneath, "memory    water-if97", "memory    water-if97"]


@pytest.mark.parametrize("command", [("lookup", "water", "100C"), ("table", "water", "--from", "99C", "--to", "101C",
                                                                   "--points", "3")])  # fmt: skip
def test_percentages_beside_gauge_pressures_are_of_the_absolute_one(run, command):
    """0.025 % of 101 kPa is a quarter of the 0.1 kPa that stand there as a gauge pressure: the screen says of what."""
    told = "Percentages and factors are of the absolute pressure, not of the gauge pressure."
    assert told in run(*command, "--unit", "kPag", "--atmosphere", "101.325kPa")[1]
    assert told not in run(*command, "--unit", "kPa")[1]
