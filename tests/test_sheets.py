"""Record sheets: every record survives being written and read, and a slip of the hand is told, all at once."""

from __future__ import annotations

import dataclasses
import tomllib

import pytest
from hypothesis import given
from hypothesis import strategies as st

from registry.cells import complain
from registry.errors import InvalidSheet
from registry.exchange.coefficients import join_coefficients, parse_coefficients
from registry.exchange.loading import read_items
from registry.exchange.sheet_fields import tell_allowed
from registry.exchange.sheets import gives_up, read_sheet, write_sheet, write_template
from registry.exchange.toml_text import quote_toml
from registry.records import KINDS, RECORDED, Compound, CompoundName, Correlation, Dataset, Point, Source
from registry.shelves import find_shelf

WATER = Correlation(
    key="water-trial", compound="water", property="vapor-pressure", phase="liquid", form="antoine-log10",
    coefficients={"A": "8.07131", "B": "1730.630", "C": "233.426"}, temperature_unit="degC", value_unit="mmHg",
    window_min="1", window_max="1.00e2", window_unit="degC", window_basis="printed", temperature_scale="not-stated",
    evidence="compiled", source="a-book", locator="p. 1", obtained="seen",
)  # fmt: skip
POINTS = Dataset(
    key="water-points", compound="water", property="vapor-pressure", phase="liquid", temperature_unit="degC",
    value_unit="kPa", temperature_scale="ITS-90", evidence="measured", source="a-paper", locator="Table 2",
    obtained="seen", points=(Point("10.00", "1.2282"), Point("20", "2.339", note='the "second" run')),
)  # fmt: skip


def _problems(text: str, kind: str = "") -> dict[str, tuple[str, str]]:
    """What is wrong with a sheet: field to what was given and what is allowed."""
    with pytest.raises(InvalidSheet) as caught:
        read_sheet(text, "x.toml", kind)
    assert str(caught.value).startswith("x.toml cannot be used: ")
    fields = [problem.field for problem in caught.value.problems]
    assert len(fields) == len(set(fields))
    return {problem.field: (problem.given, problem.allowed) for problem in caught.value.problems}


def _swap(text: str, old: str, new: str) -> str:
    assert text.count(old) == 1
    return text.replace(old, new)


# there and back


@pytest.mark.parametrize("shelf", ["published", "scenario"])
def test_every_record_of_the_shelves_survives(shelf):
    """Written, read and written again: an equal record and the same text, which any TOML reader takes."""
    items = read_items(find_shelf(shelf), lambda kind, key: None)
    records = [item.record for item in items if item.record.kind in RECORDED]
    for revision, record in enumerate(records):
        text = write_sheet(record, revision, ["position 1"])
        sheet = read_sheet(text, "sheet.toml", record.kind)
        assert (sheet.record, sheet.revision) == (record, revision)
        assert write_sheet(sheet.record, revision, ["position 1"]) == text
        assert tomllib.loads(text)["kind"] == record.kind
    assert {record.kind for record in records} >= {*RECORDED}
    assert len(records) > 80


CELL = st.text(st.characters(exclude_categories=("Cs", "Cc")), max_size=60) | st.text("\"'\\#=[]{}é\u2212 a0.\x7f")


@given(title=CELL, note=CELL)
def test_any_text_that_a_field_takes_survives(title, note):
    """Quotes, backslashes, signs of TOML and other scripts come back as they were."""
    cells = {field.name: field.metadata["cell"] for field in dataclasses.fields(Source)}
    texts = {"title": title, "note": note}
    texts = {name: "" if complain(cells[name], text, False) else text for name, text in texts.items()}
    record = Source(key="a", type="book", citation="A book.", **texts)
    assert read_sheet(write_sheet(record), "x").record == record
    table = tomllib.loads(write_sheet(record))
    assert (table["title"], table["note"]) == (texts["title"], texts["note"])


def test_a_sheet_is_plain_to_read():
    """The top says what it is and how it ends; fields stand in order, empty ones too; the form orders coefficients."""
    shuffled = dataclasses.replace(WATER, coefficients={"C": "233.426", "A": "8.07131", "B": "1730.630"})
    text = write_sheet(shuffled, 3, ["From position 17 of team.db."])
    top = [line for line in text.splitlines() if line.startswith("#")]
    assert top == [
        "# The correlation water-trial, revision 3.",
        "# From position 17 of team.db.",
        "# Change what is wrong, save and close; delete everything to give up.",
        "# Text stands in quotes; numbers as printed, with or without.",
    ]
    names = [line.split(" = ")[0] for line in text.splitlines() if " = " in line]
    fields = [field.name for field in dataclasses.fields(Correlation) if field.name != "coefficients"]
    assert names == ["kind", "revision", *fields, "A", "B", "C"]
    assert 'metastable_below = ""' in text
    assert "revision" not in write_sheet(WATER)
    assert read_sheet(write_sheet(WATER, 0, ["two\nlines\x01\x7f"]), "x").record == WATER


def test_numbers_may_stand_without_quotes_and_keep_their_digits():
    """230.300, 1.00e2, +5, -0 and 110/3 are what was typed, on a line of their own or in a comment's company."""
    text = write_sheet(WATER).replace('"1730.630"', "1730.630  # as printed").replace('"1.00e2"', "1.00e2")
    for typed in ("+5", "-0", "1", "110/3", ".5", "230.", "007", "230.300"):
        changed = _swap(text, 'C = "233.426"', f"C = {typed}")
        record = read_sheet(changed, "x").record
        assert record.coefficients == {"A": "8.07131", "B": "1730.630", "C": typed}
        assert record.window_max == "1.00e2"
    assert read_sheet(_swap(text, 'note = ""', "note ="), "x").record.note == ""


def test_what_editors_add_is_tolerated():
    """A byte order mark, CRLF, letters with their accents apart, comments and blanks."""
    record = dataclasses.replace(WATER, note="Gemessen für Prüfzwecke")
    text = write_sheet(record, 2)
    decomposed = text.replace("ü", "u\u0308")
    assert decomposed != text
    for changed in ("\ufeff" + text, text.replace("\n", "\r\n"), decomposed, text.replace("\n", "  # ja\n", 1)):
        assert read_sheet(changed, "x").record == record
    assert read_sheet(text, "x").revision == 2


def test_a_template_tells_what_each_field_takes():
    """Every field has its comment; empty, it is refused for exactly what must be filled."""
    for kind in RECORDED:
        text = write_template(kind)
        assert tomllib.loads(text)["kind"] == kind
        filled = [f for f in dataclasses.fields(KINDS[kind]) if "cell" in f.metadata]
        for field in filled:
            mark = "" if field.metadata["required"] else "optional: "
            told = tell_allowed(field.name, field.metadata["cell"].allowed)
            assert f'# {mark}{told}\n{field.name} = ""\n' in text
        needed = {field.name for field in filled if field.metadata["required"]}
        assert needed <= set(_problems(text)) <= needed | {"coefficients", "points.1.temperature", "points.1.value"}


def test_a_template_holds_what_is_given_already():
    """Fields stand in their places, and a known form names its coefficients; with the rest filled in it is a record."""
    given = {"form": "clapeyron-melting", "compound": "tin", "coefficients": {"T0": "505"}}
    text = write_template("correlation", given)
    found = tomllib.loads(text)
    assert (found["form"], found["compound"], found["key"]) == ("clapeyron-melting", "tin", "")
    assert found["coefficients"] == {"T0": "505", "p0": "", "H": "", "dV": ""}
    assert "\n# As printed: T0, p0, H, dV of p = p0 + (H/dV) ln(T/T0), H in J/mol, dV in cm3/mol\n[coef" in text
    assert tomllib.loads(write_template("correlation", {"form": "none such"}))["coefficients"] == {}


@given(st.dictionaries(st.from_regex(r"[A-Za-z]\w{0,3}", fullmatch=True), st.from_regex(r"-?\d+\.\d+", fullmatch=True),
                       min_size=1))  # fmt: skip
def test_coefficients_survive_as_one_text(pairs):
    """Joined and parsed, names and digits and their order are what they were."""
    assert list(parse_coefficients(join_coefficients(pairs.items())).items()) == list(pairs.items())


def test_coefficients_may_stand_in_one_line():
    """As in a package, and its complaint is the package's."""
    head, _, _ = write_sheet(WATER).partition("\n[coefficients]")
    assert read_sheet(f'{head}\ncoefficients = "A=8.07131; B=1730.630; C=233.426"', "x").record == WATER
    allowed = "coefficients such as A=8.07131; B=1730.63; C=233.426 are allowed, each once."
    for wrong in ("A=1, B=2", "A=8.07131; B=1730.63; C=233.426; A=8.07131", "A", "A=;B=1", "=1"):
        assert _problems(f'{head}\ncoefficients = "{wrong}"') == {"coefficients": (wrong, allowed)}


# slips


def test_every_bad_field_is_told_at_once():
    """Words without quotes, values of another kind, misspelt names and what the record itself refuses."""
    text = write_sheet(WATER, 1)
    for old, new in (
        ('phase = "liquid"', "phase = liquid"),
        ('window_min = "1"', "window_min = 0x10"),
        ('window_max = "1.00e2"', "window_max = 1_000"),
        ('window_basis = "printed"', "window_basis = true"),
        ('locator = "p. 1"', "locator = 2020-01-01"),
        ('evidence = "compiled"', 'evidnce = "compiled"'),
        ('uncertainty = ""', "uncertainty = nan"),
        ('source = "a-book"', 'source = ["a-book"]'),
        ('note = ""', 'note = """a\nb"""'),
        ('value_unit = "mmHg"', 'value_unit = "mmhg"'),
        ('C = "233.426"', "C = inf"),
    ):
        text = _swap(text, old, new)
    found = _problems(text)
    plain = "a plain number on a line of its own, or text in quotes, is allowed."
    assert {field: found[field] for field in found if found[field][1] == plain} == {
        "phase": ("liquid", plain), "window_min": ("0x10", plain), "window_max": ("1_000", plain),
        "window_basis": ("true", plain), "locator": ("2020-01-01", plain), "uncertainty": ("nan", plain),
        "source": ("a list", plain), "coefficients.C": ("inf", plain),
    }  # fmt: skip
    assert found["evidnce"] == ("compiled", "a correlation has no such field. Did you mean evidence?")
    assert found["note"] == ("a", "a text stands on one line.")
    assert "Did you mean mmHg?" in found["value_unit"][1]
    assert set(found) == {
        "phase", "window_min", "window_max", "window_basis", "locator", "uncertainty", "source", "coefficients.C",
        "evidnce", "evidence", "note", "value_unit",
    }  # fmt: skip


@pytest.mark.parametrize(
    ("text", "place"),
    [
        ('kind = "compound"\nname = "a" b', "end of document after a statement (at line 2, column 12)"),
        ('kind = "compound"\nname = "a', "Unterminated string (at end of document)"),
        ('kind = "compound"\nname = "a\nkey = "b"', "Illegal character '\\n' (at line 2, column 10)"),
        ('kind = "compound"\nname = "\\q"', "(at line 2, column 11)"),
        ('kind = "compound"\nname', "Expected '=' after a key in a key/value pair (at end of document)"),
        ('kind = "compound"\n[coefficients\nA=1', "(at line 2, column 14)"),
        ("a = " + "[" * 5000, "lists too deep"),
        ("a = [" + "1" * 5000 + "]", "a number too long"),
        ('key = "a"\nkey = "b"\n', "Cannot overwrite a value (at line 2"),
    ],
)  # fmt: skip
def test_what_is_no_toml_is_told_with_its_place(text, place):
    """The line and column, and what a line looks like."""
    ((field, (given_text, allowed)),) = _problems(text).items()
    assert (field, given_text) == ("", "")
    assert place in allowed
    assert allowed.endswith('Every field is a line such as key = "water"; text stands in quotes.')


def test_a_number_in_a_list_or_table_is_refused():
    """There its digits would be lost; a float keeps them."""
    head, _, _ = write_sheet(WATER).partition("\n[coefficients]")
    found = _problems(f"{head}\ncoefficients = {{ A = 8, B = 1730.630, C = 233.426 }}")
    assert set(found) == {"coefficients.A"}
    text = f'{head}\ncoefficients = {{ A = "8", B = 1730.630, C = 233.426 }}'
    assert read_sheet(text, "x").record.coefficients == {"A": "8", "B": "1730.630", "C": "233.426"}


def test_odd_ways_of_toml_change_nothing():
    """A name in quotes and a coefficient left empty are judged as any other."""
    text = _swap(write_sheet(WATER), 'locator = "p. 1"', '"locator" = 1_0.5')
    found = _problems(_swap(text, 'C = "233.426"', 'C = ""'))
    assert found == {
        "locator": ("1_0.5", "a plain number on a line of its own, or text in quotes, is allowed."),
        "coefficients.C": ("", "it is empty; take the line out, or fill it."),
    }


@given(st.text())
def test_any_text_can_be_quoted(text):
    """Control characters too, as the standard wants them."""
    assert tomllib.loads(f"a = {quote_toml(text)}") == {"a": text}


def test_points_are_counted_as_a_person_counts():
    """The first point is point 1; bad fields of points are told together with others."""
    text = _swap(write_sheet(POINTS), 'value = "1.2282"', 'valeu = "1.2282"\nvalue = -3')
    found = _problems(_swap(text, 'value = "2.339"', 'value = "2,339"'))
    assert set(found) == {"points.1.valeu", "points.1.value", "points.2.value"}
    assert found["points.1.valeu"][1] == "a point has no such field. Did you mean value?"
    assert found["points.2.value"][0] == "2,339"
    below = _swap(write_sheet(POINTS), 'value = "1.2282"', "value = -3")
    assert _problems(below) == {"points.1.value": ("-3", "a vapor-pressure is above zero.")}
    for none in ("", "points = []", "points = 3", "points = [3]"):
        head, _, _ = write_sheet(POINTS).partition("\n# A point may")
        assert list(_problems(f"{head}\n{none}")) == ["points"]


@pytest.mark.parametrize(
    ("text", "kind", "given_text", "allowed"),
    [
        ("", "", "", f"one of {', '.join(RECORDED)} is allowed."),
        ('kind = "review"', "", "review", f"one of {', '.join(RECORDED)} is allowed."),
        ('kind = "source"', "compound", "source", 'a sheet of a compound is asked for; kind = "compound" is allowed.'),
        ("kind = source", "", "source", "a plain number on a line of its own, or text in quotes, is allowed."),
    ],
)
def test_a_sheet_is_of_the_kind_asked_for(text, kind, given_text, allowed):
    """A kind that is missing, no kind of sheet, or another one."""
    assert _problems(text, kind) == {"kind": (given_text, allowed)}


@pytest.mark.parametrize("typed", ["0", "-1", '"two"', "1.5", "99999999999", "1_0", '"²"'])
def test_a_revision_is_a_counting_number(typed):
    """Anything else is refused, for it guards against a revision in between."""
    text = _swap(write_sheet(WATER, 7), "revision = 7", f"revision = {typed}")
    assert set(_problems(text)) == {"revision"}


def test_a_key_that_follows_from_the_fields_is_not_asked_for():
    """A name has none to fill, and one that is given is refused."""
    text = write_sheet(CompoundName(compound="water", name="oxidane"))
    assert "key =" not in text
    assert set(_problems(text + 'key = "water:oxidane"\n')) == {"key"}


def test_a_kind_may_be_left_to_the_command():
    """A sheet without a kind is taken for the one that is asked for."""
    text = write_sheet(Compound(key="water", name="water", formula="H2O"))
    assert read_sheet(_swap(text, 'kind = "compound"\n', ""), "x", "compound").record.formula == "H2O"


def test_deleting_everything_gives_up():
    """Nothing but comments and blank lines is left."""
    assert gives_up("")
    assert gives_up("\ufeff# only a comment\r\n\r\n  # another\n")
    assert not gives_up('# a\nkey = "b"\n')


def test_problems_of_a_long_sheet_are_counted():
    """A message lists a hundred and says how many more there are."""
    many = dataclasses.replace(POINTS, points=tuple(Point(str(n), "1") for n in range(1, 131)))
    with pytest.raises(InvalidSheet, match=r"130 problems.*(?s:.)*\.\.\. and 30 more"):
        read_sheet(write_sheet(many).replace('value = "1"', 'value = "x"'), "x")
