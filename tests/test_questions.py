"""Fields of records as options of a command, and as questions on a terminal."""

from __future__ import annotations

import dataclasses
import inspect
import io
import sys
from typing import Annotated

import pytest
import typer

from registry.cli import vocabulary
from registry.cli.app import main
from registry.cli.commands import COMMANDS, Home
from registry.cli.fields import (
    SHARED,
    build_record_command,
    find_missing,
    list_fields,
    name_option,
    refuse_bad,
    refuse_missing,
)
from registry.cli.questions import ask_on_terminal, ask_record, can_ask
from registry.errors import BadInput, InvalidRecord
from registry.records import KINDS, RECORDED, Compound, CompoundName, Correlation, FixedPoint, Source

CORRELATION = {
    "key": "water-trial", "compound": "water", "property": "vapor-pressure", "phase": "liquid",
    "form": "antoine-log10", "coefficients": "A=8.07131; B=1730.63; C=233.426", "temperature_unit": "degC",
    "value_unit": "mmHg", "window_min": "-1", "window_max": "100", "window_unit": "degC", "window_basis": "printed",
    "temperature_scale": "not-stated", "evidence": "compiled", "uncertainty": "", "source": "a-book",
    "locator": "p. 1", "obtained": "seen", "note": "", "metastable_below": "",
}  # fmt: skip
ASKED = [kind for kind in RECORDED if kind != "dataset"]


# options


@pytest.fixture
def trial(monkeypatch, capsys):
    """Run `rangebook trial KIND ...` with a command for each kind: what `run` was given, exit code, streams."""
    seen: list = []

    def build() -> typer.Typer:
        group = typer.Typer(help="Try.", rich_markup_mode=None)
        for kind in ASKED:
            shared = {**SHARED, "because": (Annotated[str, typer.Option("--because", help="Why.")], "")}
            command = build_record_command(KINDS[kind], lambda *given: seen.append(given), f"Try a {kind}.", shared)
            group.command(kind)(command)
        return group

    monkeypatch.setattr(vocabulary, "trying", build, raising=False)
    monkeypatch.setitem(COMMANDS, "trial", Home("vocabulary", "trying", group=True))

    def call(*words: str):
        seen.clear()
        with pytest.raises(SystemExit) as stopped:
            main(["trial", *words])
        captured = capsys.readouterr()
        return (seen[0] if seen else None), int(stopped.value.code or 0), captured.out, captured.err

    return call


@pytest.mark.parametrize("kind", ASKED)
def test_every_field_is_an_option_with_its_help(kind, trial):
    """One option for each field that a person fills, with what is allowed; the shared ones stand beside them."""
    _, code, out, _ = trial(kind, "--help")
    assert code == 0
    assert f"Try a {kind}." in out
    flat = " ".join(out.split())
    fields = [f.name for f in dataclasses.fields(KINDS[kind]) if "cell" in f.metadata or f.name == "coefficients"]
    assert [field.name for field in list_fields(KINDS[kind])] == fields
    for field in list_fields(KINDS[kind]):
        assert f"{name_option(field.name)} TEXT" in flat
        assert "".join(field.told.split()) in "".join(flat.split())  # long words break at their hyphens
        assert field.told.startswith("optional; ") != field.required
    for option in ("--as NAME", "--library PATH-or-URL", "--json", "--because <str> Why."):
        assert option in flat
    (values_of_nothing, code, _, _) = trial(kind)
    assert (code, values_of_nothing[1]) == (0, {})


def test_what_is_given_reaches_the_command_as_texts(trial):
    """Given fields only, an empty one too; coefficients by name; numbers as typed; a minus is no option."""
    words = [word for name, text in CORRELATION.items() for word in (name_option(name), text)]
    (cls, values, shared), code, out, err = trial("correlation", *words, "--as", "me", "--json", "--because", "b")
    assert (code, out, err) == (0, "", "")
    assert cls is Correlation
    assert values == {**CORRELATION, "coefficients": {"A": "8.07131", "B": "1730.63", "C": "233.426"}}
    assert shared == {"author": "me", "library": None, "as_json": True, "because": "b"}
    assert cls(**values).window_min == "-1"
    (_, values, _), *_ = trial("source", "--key", "a", "--note", "")
    assert values == {"key": "a", "note": ""}


def test_coefficients_that_cannot_be_read_end_the_command(trial):
    """Exit code 2, what was given and what is allowed."""
    seen, code, out, err = trial("correlation", "--coefficients", "A=1, B=2")
    assert (seen, code, out) == (None, 2, "")
    assert err == (
        "--coefficients: 'A=1, B=2' given; coefficients such as A=8.07131; B=1730.63; C=233.426 are allowed, "
        "each once.\n"
    )
    assert trial("correlation", "--coefficients", "")[0][1] == {"coefficients": {}}


def test_an_argument_may_stand_beside_the_fields():
    """Without a default it must be given; a name cannot be both a field and shared."""
    seen = []
    shared = {"which": (Annotated[str, typer.Argument()], inspect.Parameter.empty)}
    app = typer.Typer(add_completion=False)
    app.command()(build_record_command(Source, lambda *given: seen.append(given), "Try.", shared))
    with pytest.raises(SystemExit):
        app(["some-key", "--year", "1990"])
    assert seen == [(Source, {"year": "1990"}, {"which": "some-key"})]
    with pytest.raises(SystemExit) as stopped:
        app(["--year", "1990"])
    assert stopped.value.code == 2
    with pytest.raises(ValueError, match="note would be a field and a shared option"):
        build_record_command(Source, print, "Try.", {"note": (str, "")})


def test_what_is_missing_is_named():
    """Required fields without a text, in order, as the options to give."""
    assert find_missing(Compound, {"key": "a", "name": ""}) == ["name", "formula"]
    with pytest.raises(BadInput) as caught:
        refuse_missing(Compound, {"key": "a", "name": ""})
    assert str(caught.value) == (
        "The compound lacks --name and --formula. Give them as options or in a file; on a terminal they are asked."
    )
    refuse_missing(Compound, {"key": "a", "name": "b", "formula": "H2O"})
    assert find_missing(Correlation, {**CORRELATION, "coefficients": {}}) == ["coefficients"]


def test_what_is_bad_is_told_before_anything_is_asked():
    """Every given field that may not stand, also coefficients that the given form does not take."""
    with pytest.raises(InvalidRecord) as caught:
        refuse_bad(Correlation, {"key": "A b", "phase": "", "form": "antoine-log10", "coefficients": {"A": "1"}})
    assert [problem.field for problem in caught.value.problems] == ["key", "phase", "coefficients"]
    assert caught.value.problems[2].given == "A=1"
    refuse_bad(Correlation, {"coefficients": {"A": "1"}})


# questions


class Person:
    """Answers in order; what was asked and told is kept."""

    def __init__(self, *answers: str) -> None:
        self.answers = list(answers)
        self.heard: list[str] = []
        self.asked: list[str] = []

    def answer(self, prompt: str) -> str:
        self.asked.append(prompt)
        if not self.answers:
            raise EOFError
        return self.answers.pop(0)

    def ask(self, cls, values=()):
        record = ask_record(cls, dict(values), self.answer, self.heard.append)
        assert self.answers == []
        return record


def test_a_record_comes_from_answers_alone():
    """Every field is asked once, in order, with what is allowed; blanks around an answer do not count."""
    person = Person(*(f" {text} \n" for text in CORRELATION.values()))
    expected = {**CORRELATION, "coefficients": {"A": "8.07131", "B": "1730.63", "C": "233.426"}}
    assert person.ask(Correlation) == Correlation(**expected)
    assert person.heard == []
    assert [prompt.split(" (")[0] for prompt in person.asked] == list(CORRELATION)
    assert person.asked[0] == ("key (a key of lower-case letters, digits, '-' and '.', such as water-sr1-86): ")
    assert person.asked[5] == (
        "coefficients (A, B, C of log10 p = A - B/(T + C); coefficients such as A=8.07131; B=1730.63; C=233.426): "
    )
    assert person.asked[14] == (
        "uncertainty (optional; as stated, such as 0.5 %, 0.5 % (k=2) or 1 % up to 260 K; 0.6 %; empty if not stated): "
    )


def test_what_is_given_is_not_asked():
    """Fields of options stand as they are, an empty one too."""
    given = {"key": "a", "type": "book", "citation": "A book.", "note": ""}
    person = Person("", "", "1990", *[""] * 7)
    assert person.ask(Source, given) == Source(key="a", type="book", citation="A book.", year="1990")
    assert [prompt.split(" ")[0] for prompt in person.asked] == [
        "title", "authors", "year", "container", "volume", "page", "publisher", "doi", "isbn", "url",
    ]  # fmt: skip


def test_a_bad_answer_is_told_and_asked_again():
    """An empty one where a text is needed, a word that is not allowed, coefficients that do not fit the form."""
    answers = {name: [text] for name, text in CORRELATION.items()}
    answers["key"] = ["", "Water Trial", "water-trial"]
    answers["value_unit"] = ["mmhg", "mmHg"]
    answers["coefficients"] = ["A=1, B=2", "A=8.07131", CORRELATION["coefficients"]]
    person = Person(*(text for texts in answers.values() for text in texts))
    assert person.ask(Correlation).key == "water-trial"
    assert [line.split(";")[0] for line in person.heard] == [
        "  it is empty", "  'Water Trial' given", "  'A=1, B=2' given", "  'A=8.07131' given", "  'mmhg' given",
    ]  # fmt: skip
    assert "coefficients B, C are missing" in person.heard[3]
    assert "Did you mean mmHg?" in person.heard[4]


def test_fields_that_do_not_fit_each_other_are_asked_once_more():
    """The second round shows the answers; an empty one keeps, a minus empties, given fields stay."""
    given = {"key": "a", "compound": "water", "quantity": "triple-point-pressure", "source": "s", "locator": "p. 1",
             "evidence": "compiled", "obtained": "seen", "uncertainty": ""}  # fmt: skip
    first = ["611.657", "K", "ITS-90", "", "a note"]
    second = ["", "Pa", "-", "-", "-"]
    person = Person(*first, *second[:3], "", "-")
    record = person.ask(FixedPoint, given)
    assert (record.value, record.unit, record.temperature_scale, record.note) == ("611.657", "Pa", "", "")
    assert "  unit: 'K' given; triple-point-pressure is in one of" in person.heard[0]
    assert person.heard[1] == "Once more: an empty answer keeps what stands in brackets, - empties it."
    assert person.asked[5].endswith("[611.657]: ")
    assert person.asked[8] == "qualifier (optional; one of defining, rounded, table-bound): "


def test_coefficients_are_kept_in_the_second_round():
    """They stand in brackets as they are typed; the bound that was given is judged with the one that is asked."""
    values = {name: text for name, text in CORRELATION.items() if name not in ("coefficients", "window_max")}
    person = Person(CORRELATION["coefficients"], "-2", "", "100")
    assert person.ask(Correlation, values).coefficients == {"A": "8.07131", "B": "1730.63", "C": "233.426"}
    assert person.asked[2].endswith(f"[{CORRELATION['coefficients']}]: ")


def test_what_no_answer_can_mend_is_refused():
    """A given field that breaks the record is told instead of asked for ever; one that may not stand, before."""
    with pytest.raises(InvalidRecord, match="formula: 'Xx2' given"):
        Person("a", "b", "", "", "", "", "", "", "").ask(Compound, {"formula": "Xx2"})
    person = Person()
    with pytest.raises(InvalidRecord, match="key: 'A b' given"):
        person.ask(Compound, {"key": "A b"})
    assert person.asked == []


def test_the_end_of_input_gives_up():
    """Nothing is recorded, and the message says where the answers ended."""
    with pytest.raises(BadInput, match=r"^The answers ended at name\. Nothing was recorded\.$"):
        Person("water").ask(CompoundName)
    with pytest.raises(BadInput, match="ended at key"):
        Person("", "").ask(Compound)


class Terminal(io.StringIO):
    """A stream that says it is a terminal."""

    def isatty(self) -> bool:
        return True


def test_questions_are_for_a_terminal(monkeypatch, capsys):
    """Only where both ends are one; the prompt goes to stderr, and stdout stays free for results."""
    monkeypatch.setattr(sys, "stdin", Terminal("water\nlast"))
    assert not can_ask()
    assert [ask_on_terminal("name: "), ask_on_terminal("more: ")] == ["water\n", "last"]
    with pytest.raises(EOFError):
        ask_on_terminal("end: ")
    assert capsys.readouterr() == ("", "name: more: end: \n")
    monkeypatch.setattr(sys, "stderr", Terminal())
    assert can_ask()
    monkeypatch.setattr(sys, "stdin", io.StringIO())
    assert not can_ask()
    monkeypatch.setattr(sys, "stdin", None)
    assert not can_ask()
