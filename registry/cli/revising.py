"""`revise`: a new revision, from an editor, a file or options, with what it does to the numbers."""

from __future__ import annotations

import dataclasses
import os
import shlex
import subprocess
import tempfile
from pathlib import Path
from typing import TYPE_CHECKING, Annotated, Any

import typer

from registry.cli.options import (
    AcceptOption,
    AuthorOption,
    JsonOption,
    KindOption,
    LibraryOption,
    ReasonOption,
    name_author,
    open_chosen,
)
from registry.comparison import SAME

if TYPE_CHECKING:
    from registry.deviation import Deviation
    from registry.difference import Preview
    from registry.library import Library
    from registry.records import Record


def revise(
    key: Annotated[str, typer.Argument(help="Key of a record.")],
    sheet: Annotated[
        str,
        typer.Option("--file", metavar="PATH", help="An edited record sheet; - reads stdin.", show_default=False),
    ] = "",
    fields: Annotated[
        list[str] | None,
        typer.Option(
            "--set", metavar="FIELD=TEXT", help="One field anew, A=8.2 a coefficient; repeatable.", show_default=False
        ),
    ] = None,
    export: Annotated[
        str,
        typer.Option("--export", metavar="PATH", help="Write the record sheet there, and stop.", show_default=False),
    ] = "",
    reason: ReasonOption = "",
    expect: Annotated[
        int | None,
        typer.Option(
            "--expect",
            metavar="N",
            help="Only if N is the newest revision; a sheet says it.",
            show_default=False,
        ),
    ] = None,
    dry_run: Annotated[bool, typer.Option("--dry-run", "-n", help="Show what would change, record nothing.")] = False,
    accept: AcceptOption = False,
    kind: KindOption = "",
    author: AuthorOption = None,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """Revise a record: opens it in $EDITOR, shows what changes in it and in the numbers, and appends a revision.

    Nothing is edited in place. Somebody who revised it meanwhile is not overwritten (exit code 4).

    Example: rangebook revise ethanol-antoine-low --set A=8.20417 --reason "misread digit"
    """
    from registry.cli.recorded_text import print_recorded
    from registry.cli.screen import complain, print_json, say
    from registry.errors import BadInput
    from registry.exchange.sheets import write_sheet
    from registry.records import REVIEWED

    with open_chosen(library) as book:
        newest = book.newest(key, kind)
        remark = f"position {book.position} of {book.place}"
        text = write_sheet(newest.record, newest.revision, [remark])
        if export:
            _export(text, export, as_json)
            return
        expect, record = _change(newest, text, sheet, fields or [], expect)
        if record is None:
            complain("Nothing was recorded: the sheet was left empty or as it was.")
            if as_json:
                print_json({"kind": newest.record.kind, "key": key, "change": None})
            return
        preview = book.preview(record, expect)
        if not as_json:
            _print_preview(book, record, preview)
        if dry_run:
            _print_dry(record, preview, as_json)
            return
        reason = reason or _ask_reason()
        if not reason.strip():
            raise BadInput("A revision says why: give --reason. Nothing was recorded.")
        done = book.revise(record, author=name_author(author), reason=reason, expect=expect, accept=accept)
    if not as_json:
        say()
    waits = record.kind in REVIEWED and not accept
    print_recorded("revised and accepted" if accept else "revised", done, as_json, waits=waits)


def _export(text: str, place: str, as_json: bool) -> None:
    from registry.cli.screen import print_json, say
    from registry.errors import BadInput

    try:
        with open(place, "x", encoding="utf-8") as file:
            file.write(text)
    except FileExistsError:
        raise BadInput(f"{place} exists already; nothing was written. Give another name, or remove it first.") from None
    if as_json:
        print_json({"written": place})
    else:
        say(f"Wrote {place}. Change it, then: rangebook revise KEY --file {place}")


def _change(
    newest: Any, text: str, sheet: str, fields: list[str], expect: int | None
) -> tuple[int, Record | None]:  # fmt: skip
    """The revision it is made from, and the record as it shall be; None to give up."""
    from registry.cli.recording import read_text_file
    from registry.errors import BadInput
    from registry.exchange.sheets import read_sheet

    if sheet and fields:
        raise BadInput("Both --file and --set were given. Give one of them.")
    if fields:
        return expect or newest.revision, _set_fields(newest.record, fields)
    if sheet:
        read = read_sheet(read_text_file(sheet), "stdin" if sheet == "-" else sheet, newest.record.kind)
        _check_key(read.record, newest.record)
        if expect and read.revision and expect != read.revision:
            raise BadInput(f"--expect {expect} was given, but the sheet is of revision {read.revision}.")
        # a sheet that does not say what it was made from is checked against nothing
        return expect or read.revision or newest.revision, read.record
    record = _edit(text, newest.record)
    return expect or newest.revision, None if record == newest.record else record


def _check_key(record: Record, expected: Record) -> None:
    from registry.errors import BadInput

    if record.key != expected.key:
        raise BadInput(f"The sheet is of {record.key}, not of {expected.key}.")


def _set_fields(record: Record, fields: list[str]) -> Record:
    """A record with some fields anew; a name that is no field is a coefficient."""
    from registry.errors import BadInput, quote
    from registry.exchange.coefficients import parse_coefficients
    from registry.naming import nearest_names

    names = {field.name.replace("_", "-"): field.name for field in dataclasses.fields(record)}  # type: ignore[arg-type]
    coefficients = dict(getattr(record, "coefficients", {}))
    changed: dict[str, Any] = {}
    for given in fields:
        name, equals, text = given.partition("=")
        field = names.get(name.replace("_", "-"), "")
        if not equals or field in ("key", "points"):
            raise BadInput(f"{quote(given)} changes no field; FIELD=TEXT is allowed, such as note=seen or A=8.2.")
        if field == "coefficients":
            try:
                coefficients = parse_coefficients(text)
            except ValueError as error:
                raise BadInput(f"--set coefficients: {quote(text)} given; {error}") from None
        elif field:
            changed[field] = text
        elif hasattr(record, "coefficients") and (name in coefficients or name[:1].isalpha()) and _may_be(record, name):
            coefficients[name] = text
        else:
            near = nearest_names(name, [*names, *coefficients])
            hint = f" Nearest: {', '.join(near)}." if near else ""
            raise BadInput(f"A {record.kind} has no field {quote(name)}.{hint}")
    if hasattr(record, "coefficients"):
        changed["coefficients"] = {name: text for name, text in coefficients.items() if text}
    return dataclasses.replace(record, **changed)  # type: ignore[type-var]


def _may_be(record: Any, name: str) -> bool:
    """True for a coefficient that the form of a correlation may have."""
    from registry.forms.catalogue import FORMS

    allowed = FORMS[record.form].coefficients
    return name in (*allowed.required, *allowed.optional, *allowed.series) or name in record.coefficients


def _edit(text: str, record: Record) -> Record:
    """The record as an editor leaves it; on a sheet that cannot be read, the editor opens again."""
    from registry.cli.questions import can_ask
    from registry.cli.screen import complain
    from registry.errors import BadInput
    from registry.exchange.sheets import gives_up, read_sheet

    command = os.environ.get("VISUAL") or os.environ.get("EDITOR") or ("vi" if can_ask() else "")
    if not command:
        raise BadInput("There is no terminal and no $EDITOR. Give --file, --set, or --export to write the sheet first.")
    with tempfile.NamedTemporaryFile("w", suffix=f".{record.key[:40]}.toml", delete=False, encoding="utf-8") as file:
        file.write(text)
    place = Path(file.name)
    while True:
        _run_editor(command, place)
        edited = place.read_text(encoding="utf-8")
        if gives_up(edited) or edited == text:
            place.unlink()
            return record
        try:
            read = read_sheet(edited, str(place), record.kind).record
            _check_key(read, record)
        except BadInput as error:
            if not (can_ask() and _ask_again(str(error))):
                complain(f"What you wrote is kept at {place}.")
                raise
            continue
        place.unlink()
        return read


def _run_editor(command: str, place: Path) -> None:
    from registry.errors import BadInput

    try:
        done = subprocess.run([*shlex.split(command), str(place)], check=False)
    except (OSError, ValueError) as error:
        place.unlink()
        raise BadInput(f"The editor {command!r} cannot be run: {error}. Nothing was recorded.") from None
    if done.returncode:
        raise BadInput(f"The editor ended with {done.returncode}; what you wrote is kept at {place}.")


def _ask_again(why: str) -> bool:
    from registry.cli.questions import ask_on_terminal
    from registry.cli.screen import complain

    complain(why)
    try:
        return ask_on_terminal("Edit again? [Y/n] ").strip().casefold() in ("", "y", "yes")
    except EOFError:
        return False


def _ask_reason() -> str:
    from registry.cli.questions import ask_on_terminal, can_ask

    if not can_ask():
        return ""
    try:
        return ask_on_terminal("Why is it revised? ").strip()
    except EOFError:
        return ""


def _print_preview(book: Library, record: Record, preview: Preview) -> None:
    """What changes in the record, in its values, and in the answers of the library once it is accepted."""
    from registry.cli.past import field_facts, print_numbers
    from registry.cli.screen import emphasize, print_facts, say

    if not preview.fields:
        return
    say(emphasize(f"{record.key}: {record.kind}, revision {preview.before.revision} -> {preview.before.revision + 1}"))
    print_facts(field_facts(preview.fields))
    if preview.own is not None:
        say(_word_own(preview.own))
    if record.kind in ("correlation", "fixed-point", "dataset", "compound"):
        say("What the library answers, once this is in force:")
        print_numbers(preview.numbers)


def _word_own(own: Deviation) -> str:
    """How far a correlation's own values move, over the window that both revisions share."""
    if own.largest_percent is None:
        return "Its values change without a bound in percent: they pass through zero."
    if abs(own.largest_percent) <= SAME:
        return "Its values stay the same where both windows hold."
    mean = "" if own.mean_percent is None else f", {own.mean_percent:.3g} % in the mean"
    return f"Its values change by up to {own.largest_percent:+.4g} % (at {own.at:.6g} K){mean}."


def _print_dry(record: Record, preview: Preview, as_json: bool) -> None:
    from registry.cli.documents import describe_fields
    from registry.cli.past import describe_number
    from registry.cli.screen import print_json, say

    if not as_json:
        say("Nothing was recorded (--dry-run).")
        return
    own = preview.own
    print_json(
        {
            "kind": record.kind, "key": record.key, "revision": preview.before.revision, "dry_run": True,
            "fields": describe_fields(preview.fields),
            "largest_percent": own.largest_percent if own else None, "at_K": own.at if own else None,
            "mean_percent": own.mean_percent if own else None,
            "numbers": [describe_number(change) for change in preview.numbers],
        }
    )  # fmt: skip
