"""The command `table`: every format read back by an outside reader, files placed whole, nothing run as a formula."""

from __future__ import annotations

import csv
import dataclasses
import io
import json
import os
import re
import shutil
import subprocess
import sys
from pathlib import Path

import openpyxl
import pytest
from facts import bad_tables
from test_bad_input import ids, snapshot

from registry.cli.app import main
from registry.cli.screen import CAUTION
from registry.quantities import UNITS, convert
from registry.reports.csv_table import guard_text
from registry.reports.markdown_table import escape
from registry.reports.workbook import MOST_ROWS, check_workbook

ETHANOL = ("ethanol", "--from", "280K", "--to", "520K", "--step", "8K")
NAMES = ["temperature_K", "vapor_pressure_kPa", "uncertainty_percent_k2", "correlation", "revision", "mark"]
CODE = "from registry.cli.entry import main; main()"


@pytest.fixture
def run(published_path, capsys, monkeypatch):
    """Run `table` on the published shelf: exit code, stdout, stderr."""
    monkeypatch.setenv("RANGEBOOK_LIBRARY", str(published_path))

    def call(*words: str) -> tuple[int, str, str]:
        with pytest.raises(SystemExit) as stopped:
            main(["table", *words])
        captured = capsys.readouterr()
        return int(stopped.value.code or 0), captured.out, captured.err

    return call


def _expect(library, *span, **asked):
    """What the rows of a table must hold, from lookups' own table: kelvin, kPa, correlation."""
    return [
        (row.temperature, convert(row.value, UNITS["Pa"], UNITS["kPa"]) if row.correlation else None, row.correlation)
        for row in library.tabulate(*span, **asked)
    ]


# formats, each read back


def test_csv_reads_back_with_every_digit(run, published):
    """csv.reader gives the same doubles; refused cells are empty; lines end in CR LF; one header."""
    code, out, err = run(*ETHANOL, "--format", "csv")
    assert code == 3
    header, *rows = csv.reader(io.StringIO(out, newline=""), strict=True)
    assert header == NAMES
    assert out.count("\r\n") == out.count("\n") == 32
    expected = _expect(published, "ethanol", 280.0, 520.0, step=8.0)
    assert [(float(r[0]), float(r[1]) if r[1] else None, r[3]) for r in rows] == expected
    assert rows[2][3:] == ["ethanol-poling-5", "1", "seam at 293 K: +0.605 %"]
    assert rows[-1][1:] == ["", "", "", "", "refused: above-critical"]
    assert err.startswith("Refused (above-critical), 1 of 31 rows; the first: 520 K lies above the critical")
    assert err.count("\n") == 1


def test_json_is_one_object_with_the_names_of_a_lookup(run, published):
    """Rows, seams, correlations, refusals and position; messages are in it, so stderr is empty."""
    code, out, err = run(*ETHANOL, "--json")
    document = json.loads(out)
    assert (code, err) == (3, "")
    assert list(document) == [
        "compound", "property", "phase", "unit", "temperature_unit", "coverage_factor", "note", "rows", "seams", "gaps",
        "correlations", "refusals", "position", "as_of",
    ]  # fmt: skip
    assert [(r["temperature_K"], r["value"], r["correlation"] or "") for r in document["rows"]] == _expect(
        published, "ethanol", 280.0, 520.0, step=8.0
    )
    assert document["rows"][-1]["reason"] == document["refusals"][0]["reason"] == "above-critical"
    assert document["refusals"][0]["rows"] == 1
    (seam,) = document["seams"]
    found = published.coverage("ethanol").seams[0]
    assert seam == {"row": 2, "temperature_K": 293.0, "below": found.below, "above": found.above,
                    "jump_percent": found.jump_percent}  # fmt: skip
    assert document["rows"][2]["marks"] == ["seam"]
    assert [c["correlation"] for c in document["correlations"]] == [found.below, found.above]
    assert document["correlations"][1]["source"]["key"] == "poling-prausnitz-oconnell-5"
    assert run(*ETHANOL, "--format", "json")[1] == out


def test_json_answers_also_where_everything_is_refused(run):
    """One object with its rows, exit code 3."""
    code, out, err = run("water", "--from", "700K", "--to", "710K", "--step", "5K", "--json")
    document = json.loads(out)
    assert (code, err, document["correlations"]) == (3, "", [])
    assert [(r["value"], r["reason"]) for r in document["rows"]] == [(None, "above-critical")] * 3


def _read_pipes(text: str) -> list[list[str]]:
    """The cells of a pipe table, by GFM's rule: a pipe with a backslash before it is no border."""
    lines = text.splitlines()[: text.splitlines().index("")]
    return [[c.strip().replace("\\|", "|") for c in re.split(r"(?<!\\)\|", line)[1:-1]] for line in lines]


def test_markdown_is_a_pipe_table_with_its_sources_beneath(run, published):
    """Every line has the same number of cells; six digits; sources, position and caution follow."""
    code, out, _ = run("ethanol", "--from", "280K", "--to", "300K", "--step", "5K", "--format", "markdown")
    header, rule, *rows = _read_pipes(out)
    assert code == 0
    assert header == ["temperature, K", "vapour pressure, kPa", "uncertainty, % (k=2)", "answered by", "mark"]
    assert all(re.fullmatch(":?-{3,}:?", cell) for cell in rule)
    assert {len(row) for row in rows} == {5}
    expected = _expect(published, "ethanol", 280.0, 300.0, step=5.0)
    assert [(float(r[0]), float(r[1]), r[3]) for r in rows] == [
        (t, pytest.approx(v, rel=5e-6), who) for t, v, who in expected
    ]
    assert rows[3][4] == "seam at 293 K: +0.605 %"
    assert "ethanol-poling-5, revision 1, accepted; form: Wagner 2.5-5; window: 293 to 513.92 K, from memory; " in out
    assert out.endswith(f"ethanol, library position 1.\n\n{CAUTION}\n")


def test_a_workbook_holds_numbers_and_texts(run, published, tmp_path):
    """openpyxl reads numbers, to the 16 digits that a sheet keeps; a second sheet tells what stands behind them."""
    place = tmp_path / "table.xlsx"
    assert run(*ETHANOL, "--output", str(place))[:2] == (3, f"31 rows written to {place}.\n")
    book = openpyxl.load_workbook(place)
    assert book.sheetnames == ["table", "sources"]
    header, *rows = book["table"].iter_rows(values_only=True)
    assert list(header) == NAMES
    expected = _expect(published, "ethanol", 280.0, 520.0, step=8.0)
    assert [(r[0], r[3] or "") for r in rows] == [(t, who) for t, _, who in expected]
    assert [r[1] for r in rows] == [v and pytest.approx(v, rel=1e-15) for _, v, _ in expected]
    assert rows[2][3:] == ("ethanol-poling-5", 1, "seam at 293 K: +0.605 %")
    assert rows[-1][1:] == (None, None, None, None, "refused: above-critical")
    told = [tuple(row) for row in book["sources"].iter_rows(values_only=True)]
    assert told[0] == ("compound", "ethanol (ethanol)")
    assert ("correlation", "ethanol-poling-5, revision 1, accepted") in told
    assert ("seam", "at 293 K: +0.605 %, ethanol-antoine-low -> ethanol-poling-5") in told
    assert any(label == "position" and text.startswith("1 ") for label, text in told)
    assert told[-1] == ("caution", CAUTION)


def test_text_has_aligned_columns_and_a_line_at_the_seam(run):
    """Numbers end where their head ends; the seam stands between the rows it parts; sources and caution follow."""
    code, out, err = run("ethanol", "--from", "0C", "--to", "60C", "--step", "10C")
    assert (code, err) == (0, "")
    lines = out.splitlines()
    names, units, *rows = lines[2:12]
    assert (names.split(), units.split()) == (
        ["temperature", "vapour", "pressure", "uncertainty", "answered", "by"], ["degC", "kPa", "%", "(k=2)"]
    )  # fmt: skip
    for name, unit in (("temperature", "degC"), ("vapour pressure", "kPa"), ("uncertainty", "% (k=2)")):
        end = names.index(name) + len(name)
        assert units.index(unit) + len(unit) == end
        assert all(row[end - 1] != " " and row[end : end + 2].strip() == "" for row in rows if "--" not in row)
    assert rows[2] == "  -- seam at 19.85 degC: +0.605 %, ethanol-antoine-low -> ethanol-poling-5"
    assert rows[3].split() == ["20", "5.86132", "none", "ethanol-poling-5"]
    assert "source    B. E. Poling" in out
    assert " ".join(out.split()).endswith(CAUTION)
    assert "\x1b" not in out


@pytest.mark.parametrize(("shelf", "compound", "prop"), [
    ("published", "water", "vapor-pressure"), ("published", "mercury", "vapor-pressure"),
    ("scenario", "tallowane", "saturated-liquid-density"), ("scenario", "corvexane", "sublimation-pressure"),
    ("published", "water", "melting-pressure"),
])  # fmt: skip
def test_columns_are_as_wide_as_they_need(shelf, compound, prop, request, capsys):
    """Whatever the sizes of the values, every row keeps to its columns."""
    library = request.getfixturevalue(shelf)
    windows = [c.curve.window for c in library.coverage(compound, property=prop).accepted]
    words = ["table", compound, "-p", prop, "--from", f"{min(w[0] for w in windows):.6f}K", "--to",
             f"{max(w[1] for w in windows):.6f}K", "--points", "200"]  # fmt: skip
    with pytest.raises(SystemExit):
        main([*words, "--library", str(request.getfixturevalue(f"{shelf}_path"))])
    out = capsys.readouterr().out
    names, _, *rows = out.split("\n\n")[1].splitlines()
    at = names.index("answered by")
    assert len([row for row in rows if not row.startswith("  --")]) == 200
    assert all(row[at - 2 : at] == "  " and row[at] != " " for row in rows if not row.startswith("  --"))


def test_units_are_those_asked_for(run):
    """Fahrenheit from --from, psi by --unit, degC by --temperature-unit; kelvins stay exact."""
    _, out, _ = run("water", "--from", "32F", "--to", "212F", "--step", "9F", "--unit", "psi", "--json")
    document = json.loads(out)
    assert (document["unit"], document["temperature_unit"]) == ("psi", "degF")
    assert [r["temperature"] for r in document["rows"]] == [32.0 + 9.0 * i for i in range(21)]
    assert [r["temperature_K"] for r in document["rows"]] == [float(f"{273.15 + 5 * i:.2f}") for i in range(21)]
    # NIST SP 811: 1 psi is 6.894757 kPa; IAPWS-IF97, eq. 30 at 373.15 K: 0.101418 MPa
    assert document["rows"][-1]["value"] == pytest.approx(101.418 / 6.894757, rel=1e-5)
    _, other, _ = run("water", "--from", "32F", "--to", "212F", "--step", "5C", "-t", "degC", "-f", "csv")
    header, *rows = csv.reader(io.StringIO(other))
    assert header[0] == "temperature_degC"
    assert [float(r[0]) for r in rows] == [5.0 * i for i in range(21)]


@pytest.mark.parametrize(
    ("words", "unit"),
    [
        (("water", "--from", "0C", "--to", "370C"), "kPa"),
        (("mercury", "--from", "300K", "--to", "310K"), "Pa"),
        (("water", "--from", "600K", "--to", "640K"), "MPa"),
        (("benzene", "--from", "300K", "--to", "310K", "-p", "enthalpy-of-vaporization"), "kJ/mol"),
    ],
)
def test_one_unit_suits_the_whole_column(words, unit, run):
    """Pa below 100 Pa, MPa above 10 MPa, kPa where rows would differ."""
    code, out, _ = run(*words, "--points", "3", "--json")
    assert (code, json.loads(out)["unit"]) == (0, unit)


def test_a_gauge_unit_with_its_atmosphere(run):
    """bar(g) against 1 bar: the absolute value less one."""
    _, out, _ = run("water", "--from", "100C", "--to", "120C", "--step", "20K", "-u", "barg", "--atmosphere", "1bar",
                    "--json")  # fmt: skip
    _, plain, _ = run("water", "--from", "100C", "--to", "120C", "--step", "20K", "-u", "bar", "--json")
    gauge, absolute = json.loads(out), json.loads(plain)
    assert gauge["unit"] == "bar(g)"
    assert [r["value"] for r in gauge["rows"]] == pytest.approx([r["value"] - 1.0 for r in absolute["rows"]], abs=1e-14)


def test_one_correlation_says_so_in_every_format(run, tmp_path):
    """The note stands in the heading of the text, beneath Markdown, in JSON and on the second sheet."""
    words = ("ethanol", "--from", "280K", "--to", "310K", "--step", "10K", "--one")
    said = "One correlation was asked for: ethanol-antoine-low answers throughout"
    for form in ("text", "markdown", "json"):
        code, out, err = run(*words, "--format", form)
        assert (code, err) == (0, "")
        assert said in out
    run(*words, "-o", str(tmp_path / "a.xlsx"))
    told = dict(openpyxl.load_workbook(tmp_path / "a.xlsx")["sources"].iter_rows(values_only=True))
    assert told["note"].startswith(said)


@pytest.mark.parametrize("minus", ["-", "\u2212"])
def test_negative_ends_need_no_quotes(minus, run):
    """-40C after --from is a temperature and no option; with the sign of a word processor too."""
    code, out, err = run("ammonia", "--from", f"{minus}40C", "--to", f"{minus}4F", "--step", "9F", "--json")
    rows = json.loads(out)["rows"]
    assert (code, err) == (0, "")
    # -40 degC is -40 degF; -4 degF is -20 degC
    assert [row["temperature"] for row in rows] == [-40.0, -35.0, -30.0, -25.0, -20.0]


def test_a_refused_table_names_its_reason_to_programs(run):
    """With --json the reason stands beside the message, as in a refusal of one temperature."""
    words = ("ethanol", "--from", "250K", "--to", "500K", "--step", "5K", "--one")
    code, out, err = run(*words, "--json")
    error = json.loads(out)["error"]
    assert (code, error["kind"], error["exit_code"], error["reason"]) == (3, "Refused", 3, "no-single-correlation")
    assert err == f"{error['message']}\n"
    assert error["message"].startswith("Refused (no-single-correlation): No accepted correlation answers for ")


@pytest.mark.parametrize(("compound", "kelvin", "prop"), [
    ("ethanol", "300K", "vapor-pressure"), ("water", "260K", "sublimation-pressure"),
    ("water", "300K", "melting-pressure"), ("nitrogen", "70K", "melting-pressure"),
])  # fmt: skip
def test_a_correlation_is_told_as_a_lookup_tells_it(compound, kelvin, prop, run, capsys, tmp_path):
    """Title, form, window, evidence and source in the same words, in every format that has room for them."""
    with pytest.raises(SystemExit):
        main(["lookup", compound, kelvin, "-p", prop])
    story = capsys.readouterr().out.split("\n\n")[2].split("    chosen ")[0]
    words = (compound, "--from", kelvin, "--to", f"{int(kelvin[:-1]) + 1}K", "--points", "2", "-p", prop)
    assert f"\n\n{story}" in run(*words)[1]
    title, *facts = re.split(r"\n    (?=[a-z])", story.strip())
    told = [(fact[:8].strip(), " ".join(fact[10:].split())) for fact in facts]
    assert [label for label, _ in told] == ["form", "window", "evidence", "source"]
    line = "; ".join([title, *(f"{label}: {text}" for label, text in told)])
    assert f"- {escape(line)}" in run(*words, "-f", "markdown")[1]
    run(*words, "-o", str(tmp_path / "a.xlsx"))
    rows = list(openpyxl.load_workbook(tmp_path / "a.xlsx")["sources"].iter_rows(values_only=True))
    start = rows.index(("correlation", title))
    assert rows[start + 1 : start + 5] == told


def test_drafts_and_metastable_values_are_marked(scenario_path, published_path, capsys):
    """In the text in capitals beside the key, elsewhere as a mark."""

    def call(*words: str) -> str:
        with pytest.raises(SystemExit):
            main(["table", *words])
        return capsys.readouterr().out

    draft = ("brindovane", "--from", "320K", "--to", "340K", "--step", "10K", "--drafts", "--library",
             str(scenario_path))  # fmt: skip
    assert call(*draft).count("brindovane-cox-draft (DRAFT)\n") == 3
    assert call(*draft, "-f", "csv").count(",draft\r\n") == 3
    cold = ("water", "--from", "250K", "--to", "260K", "--step", "5K", "--metastable", "--library", str(published_path))
    assert call(*cold).count("water-hardy-1998 (METASTABLE)\n") == 3
    assert [r["marks"] for r in json.loads(call(*cold, "--json"))["rows"]] == [["metastable"]] * 3


def test_a_table_of_the_past_says_so(run):
    """The heading and the JSON name the position."""
    words = ("water", "--from", "0C", "--to", "10C", "--step", "5K", "--as-of", "1")
    assert run(*words)[1].startswith("water: vapour pressure, as of change 1\n")
    assert json.loads(run(*words, "--json")[1])["as_of"] == "change 1"


# files


@pytest.mark.parametrize("suffix", [".txt", ".csv", ".md", ".markdown", ".json"])
def test_a_file_holds_what_the_screen_shows(suffix, run, tmp_path):
    """The suffix chooses the format; nothing on stdout; nothing else is left in the folder."""
    words = ("ethanol", "--from", "280K", "--to", "300K", "--step", "5K")
    form = {".txt": "text", ".md": "markdown", ".markdown": "markdown"}.get(suffix, suffix[1:])
    place = tmp_path / f"table{suffix}"
    assert run(*words, "--output", str(place)) == (0, f"5 rows written to {place}.\n", "")
    assert place.read_bytes().decode() == run(*words, "--format", form)[1]
    assert list(tmp_path.iterdir()) == [place]


def test_json_with_a_file_describes_the_file(run, tmp_path):
    """One object on stdout that says what was written."""
    place = tmp_path / "table.csv"
    code, out, err = run(*ETHANOL, "--output", str(place), "--json")
    assert (code, err) == (3, "")
    assert json.loads(out) == {
        "compound": "ethanol", "property": "vapor-pressure", "output": str(place), "format": "csv", "rows": 31,
        "refused": {"above-critical": 1}, "position": 1,
    }  # fmt: skip
    assert place.exists()


def test_a_file_is_replaced_only_by_force(run, tmp_path):
    """Without it what is there stays byte for byte; with it the link's own file is replaced."""
    place, link = tmp_path / "table.csv", tmp_path / "link.csv"
    place.write_text("mine", encoding="utf-8")
    link.symlink_to(place)
    words = ("ethanol", "--from", "280K", "--to", "300K", "--step", "5K")
    for there in (place, link):
        assert run(*words, "-o", str(there))[0] == 2
        assert place.read_text(encoding="utf-8") == "mine"
    assert run(*words, "-o", str(link), "--force")[0] == 0
    assert link.is_symlink()
    assert place.read_text(encoding="utf-8").startswith("temperature_K")


def test_a_table_never_takes_the_place_of_its_library(own_path, tmp_path, capsys):
    """Not by force, and not through a link."""
    (tmp_path / "link.csv").symlink_to(own_path)
    before = own_path.read_bytes()
    for place in (own_path, tmp_path / "link.csv"):
        with pytest.raises(SystemExit) as stopped:
            main(["table", *ETHANOL, "-o", str(place), "-f", "csv", "--force", "--library", str(own_path)])
        assert (stopped.value.code, capsys.readouterr().err) == (
            2, f"{place} is the library itself. Give another name.\n",
        )  # fmt: skip
    assert own_path.read_bytes() == before


def test_a_dangling_link_is_not_written_through(run, tmp_path):
    """It is something that is there."""
    (tmp_path / "link.csv").symlink_to(tmp_path / "none.csv")
    assert run(*ETHANOL, "-o", str(tmp_path / "link.csv"))[0] == 2
    assert [p.name for p in tmp_path.iterdir()] == ["link.csv"]


@pytest.mark.parametrize("suffix", [".csv", ".xlsx", ".json"])
def test_nothing_is_left_of_a_table_that_breaks_off(suffix, run, tmp_path, monkeypatch):
    """An error in the middle of the rows: no file, also none beside its place; an old file stays."""
    from registry.reports.columns import Columns

    plain = Columns.lines

    def break_off(self, block):
        yield from list(plain(self, block))[:3]
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(Columns, "lines", break_off)
    place = tmp_path / f"table{suffix}"
    for there in (None, b"old"):
        if there:
            place.write_bytes(there)
        code, out, err = run(*ETHANOL, "-o", str(place), "--force")
        assert (code, out, err) == (2, "", "Reading or writing failed: No space left on device.\n")
        assert [p.read_bytes() for p in tmp_path.iterdir()] == ([there] if there else [])


@pytest.mark.skipif(sys.platform == "win32", reason="the size of files cannot be limited")
def test_a_workbook_without_room_for_its_rows_leaves_nothing(published_path, tmp_path):
    """Room runs out in the working files: one message, no table, and no working file is left."""
    work, place = tmp_path / "work", tmp_path / "there"
    work.mkdir()
    place.mkdir()
    words = ("table", *ETHANOL[:5], "--points", "1200", "-o", str(place / "table.xlsx"), "--library")
    code = f"import resource; resource.setrlimit(resource.RLIMIT_FSIZE, (20000, 20000)); {CODE}"
    done = subprocess.run(
        [sys.executable, "-c", code, *words, str(published_path)], capture_output=True, text=True,
        env={**os.environ, "TMPDIR": str(work)}, timeout=60, check=False,
    )  # fmt: skip
    assert (done.returncode, done.stdout) == (2, "")
    assert done.stderr == "Reading or writing failed: File too large.\n"
    assert not [*work.iterdir(), *place.iterdir()]


def test_a_workbook_without_room_for_its_archive_leaves_nothing(run, tmp_path, monkeypatch):
    """An archive that cannot be written fails like any other file, and does not complain once more when let go."""
    import gc
    import tempfile
    import zipfile

    def fill(self, *words, **named):
        self.fp.write(b"half of it")
        self._didModify = True
        raise OSError(28, "No space left on device")

    complaints = []
    monkeypatch.setattr(sys, "unraisablehook", complaints.append)
    monkeypatch.setattr(zipfile.ZipFile, "write", fill)
    (tmp_path / "work").mkdir()
    monkeypatch.setattr(tempfile, "tempdir", str(tmp_path / "work"))
    code, out, err = run(*ETHANOL, "-o", str(tmp_path / "table.xlsx"))
    gc.collect()
    assert (code, out, err) == (2, "", "Reading or writing failed: No space left on device.\n")
    assert [p.name for p in tmp_path.rglob("*")] == ["work"]
    assert not complaints


def test_a_file_made_meanwhile_is_not_replaced(tmp_path):
    """Whoever takes the name while a table is written keeps it."""
    from registry.errors import BadInput
    from registry.reports.placement import place_whole

    place = tmp_path / "table.csv"
    with pytest.raises(BadInput, match="is there already"), place_whole(place) as fresh:
        fresh.write_text("ours", encoding="utf-8")
        place.write_text("theirs", encoding="utf-8")
    assert [p.read_text(encoding="utf-8") for p in tmp_path.iterdir()] == ["theirs"]


def test_a_workbook_without_its_library_says_what_to_install(run, tmp_path, monkeypatch):
    """Before anything is made; every other format works without it."""
    monkeypatch.setitem(sys.modules, "xlsxwriter", None)
    code, out, err = run(*ETHANOL, "-o", str(tmp_path / "table.xlsx"))
    assert (code, out, err) == (
        2, "", "An .xlsx file needs the package XlsxWriter, which is not installed. "
        "`pip install XlsxWriter`, where rangebook is installed, adds it; csv needs nothing.\n",
    )  # fmt: skip
    assert list(tmp_path.iterdir()) == []
    assert run(*ETHANOL, "-o", str(tmp_path / "table.csv"))[0] == 3


def test_a_sheet_holds_so_many_rows_and_no_more():
    """1,048,576 lines with the header (ECMA-376)."""
    from registry.errors import BadInput

    check_workbook(MOST_ROWS)
    with pytest.raises(BadInput, match="A sheet holds 1,048,575 rows; the table has 1,048,576"):
        check_workbook(MOST_ROWS + 1)


# hostile text


@pytest.mark.parametrize("text", ["=1+1", "+1", "-1", "@SUM(A1)", "\t=1", "\r=1"])
def test_a_text_that_a_spreadsheet_would_run_is_kept_as_text(text):
    """The apostrophe makes it one."""
    assert guard_text(text) == f"'{text}"


@pytest.mark.parametrize("text", ["a|b", "a\\|b", "<b>x</b>", "*x* _y_ `z`", "[x](http://y)", "a\nb", "#1 ~~x~~"])
def test_markdown_shows_a_text_as_it_is(text):
    """No special character is left without its backslash, no line is broken."""
    escaped = escape(text)
    assert "\n" not in escaped
    assert re.sub(r"\\(.)", r"\1", escaped) == " ".join(text.split())
    assert not re.search(r"(?<!\\)(?:\\\\)*[|<>*_`\[\]#~]", escaped)


def test_hostile_citations_stay_text_in_every_format(own_path, tmp_path, capsys, monkeypatch):
    """A source that is called like a formula, with pipes and tags: text in the sheet, escaped in Markdown."""
    import registry.tables.tally as tallying

    hostile = '=HYPERLINK("http://x","y")|<script>'
    plain = tallying.Tally._describe
    monkeypatch.setattr(
        tallying.Tally, "_describe", lambda self, *a: dataclasses.replace(plain(self, *a), citation=hostile)
    )
    words = ["table", *ETHANOL, "--library", str(own_path)]
    with pytest.raises(SystemExit):
        main([*words, "-o", str(tmp_path / "a.xlsx")])
    with pytest.raises(SystemExit):
        main([*words, "-f", "markdown"])
    out = capsys.readouterr().out
    cells = [c for row in openpyxl.load_workbook(tmp_path / "a.xlsx")["sources"].iter_rows() for c in row]
    assert {c.data_type for c in cells} == {"s"}
    assert any(str(c.value).startswith(hostile) for c in cells)
    assert "\\|\\<script\\>" in out
    assert "<script>" not in out.replace("\\<script\\>", "")


# long tables


# VmHWM is the peak of this program alone; ru_maxrss starts from that of the process which forked it
RSS = f"""
import sys
sys.stdout = open(sys.argv.pop(1), "w", newline="")
try:
    {CODE.split("; ")[0]}
    main()
finally:
    with open("/proc/self/status") as file:
        print(next(line.split()[1] for line in file if line.startswith("VmHWM")), file=sys.stderr)
"""

LINUX = pytest.mark.skipif(sys.platform != "linux", reason="the peak of memory is read from /proc")


def _measure(path: Path, place: Path, points: int, form: str) -> tuple[int, int]:
    """Lines that a process wrote, and its peak resident set in KiB."""
    words = ["table", "ethanol", "--from", "240K", "--to", "510K", "--points", str(points), "-f", form]
    done = subprocess.run([sys.executable, "-c", RSS, str(place), *words, "--library", str(path)], capture_output=True,
                          text=True, timeout=120)  # fmt: skip
    assert done.returncode == 0, done.stderr
    with place.open(newline="") as file:
        return sum(1 for _ in file), int(done.stderr.split()[-1])


@LINUX
@pytest.mark.parametrize("form", ["csv", "json", "text", "markdown"])
def test_100000_rows_take_no_more_memory_than_1000(form, published_path, tmp_path):
    """The whole process, from start to end, within 2 MB of the short one."""
    lines, short = _measure(published_path, tmp_path / "short", 1_000, form)
    more, long = _measure(published_path, tmp_path / "long", 100_000, form)
    assert more - lines == 99_000
    assert long <= short + 2_000


@LINUX
def test_a_long_workbook_keeps_no_rows(published_path, tmp_path):
    """50,000 rows against 500: the peak of the process within 3 MB."""

    def measure(points: int) -> int:
        words = ["table", "ethanol", "--from", "240K", "--to", "510K", "--points", str(points), "-o",
                 str(tmp_path / f"{points}.xlsx"), "--library", str(published_path)]  # fmt: skip
        done = subprocess.run([sys.executable, "-c", RSS, os.devnull, *words], capture_output=True, text=True,
                              timeout=120)  # fmt: skip
        assert done.returncode == 0, done.stderr
        return int(done.stderr.split()[-1])

    assert measure(50_000) <= measure(500) + 3_000


def test_a_reader_that_has_gone_ends_the_table_quietly(published_path):
    """`| head` is no error."""
    words = ["table", "water", "--from", "0C", "--to", "370C", "--points", "200000", "-f", "csv"]
    process = subprocess.Popen([sys.executable, "-c", CODE, *words, "--library", str(published_path)],
                               stdout=subprocess.PIPE, stderr=subprocess.PIPE)  # fmt: skip
    assert process.stdout.readline().startswith(b"temperature_degC,")
    process.stdout.close()
    assert (process.stderr.read(), process.wait(60)) == (b"", 0)
    process.stderr.close()


# bad requests


@pytest.mark.parametrize(("shelf", "arguments", "code", "message"), [r[1:] for r in bad_tables.REQUESTS],
                         ids=ids(bad_tables.REQUESTS))  # fmt: skip
def test_a_bad_request_is_answered_with_one_exact_message(shelf, arguments, code, message, request, tmp_path, capsys):
    """The message on stderr, nothing on stdout, no file made or changed."""
    path = Path(shutil.copy(request.getfixturevalue(f"{shelf}_path"), tmp_path / "library.db"))
    (tmp_path / "taken.csv").write_text("mine", encoding="utf-8")
    before = snapshot(tmp_path)
    arguments = [text.replace("{folder}", str(tmp_path)) for text in arguments]
    with pytest.raises(SystemExit) as stopped:
        main(["table", *arguments, "--library", str(path)])
    written = capsys.readouterr()
    assert (stopped.value.code, written.out, written.err) == (
        code,
        "",
        message.replace("{folder}", str(tmp_path)) + "\n",
    )
    assert snapshot(tmp_path) == before


@pytest.mark.parametrize(("arguments", "message"), [r[1:] for r in bad_tables.USAGE], ids=ids(bad_tables.USAGE))
def test_bad_usage_ends_in_one_sentence(arguments, message, capsys):
    """Exit code 2; the last line on stderr says what is wrong."""
    with pytest.raises(SystemExit) as stopped:
        main(list(arguments))
    written = capsys.readouterr()
    assert (stopped.value.code, written.out, written.err.splitlines()[-1]) == (2, "", message)
