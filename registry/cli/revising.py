"""`revise`: a new revision, from an editor, a file or options, with what it does to the numbers."""

from __future__ import annotations

import contextlib
import dataclasses
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
from registry.cli.screen import complain, print_json, say
from registry.errors import BadInput, quote

if TYPE_CHECKING:
    from registry.records import Record


def revise(
    key: Annotated[str, typer.Argument(metavar="KEY", help="Key of a record.")],
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
    """Append a revision of a record.

    Opens it in $EDITOR, and shows what changes in it and in the numbers. Nothing is edited in place, and somebody who
    revised it meanwhile is not overwritten (exit code 4).

    Example: rangebook revise ethanol-antoine-low --set A=8.20417 --reason "misread digit"
    """
    from registry.cli.difference_text import print_preview
    from registry.cli.documents import describe_preview
    from registry.cli.recorded_text import print_recorded
    from registry.cli.rescue import keep_typed
    from registry.exchange.sheets import write_sheet
    from registry.records import REVIEWED

    with open_chosen(library) as book:
        newest = book.newest(key, kind)
        remark = f"position {book.position} of {book.place}"
        text = write_sheet(newest.record, newest.revision, [remark])
        if export:
            _export(text, export, key, as_json)
            return
        expect, record = _change(newest, text, sheet, fields or [], expect)
        if record is None:
            complain("Nothing was recorded: the sheet was left empty or as it was.")
            if as_json:
                print_json({"kind": newest.record.kind, "key": key, "change": None})
            return
        with contextlib.nullcontext() if sheet or fields else keep_typed(record, expect, f"revise {key}"):
            preview = book.preview(record, expect)
            if not as_json:
                print_preview(record, preview)
            if dry_run and as_json:
                print_json(describe_preview(record, preview))
            elif dry_run:
                say("Nothing was recorded (--dry-run).")
            if dry_run:
                return
            reason = reason or _ask_reason()
            if not reason.strip():
                raise BadInput("A revision says why: give --reason. Nothing was recorded.")
            done = book.revise(record, author=name_author(author), reason=reason, expect=expect, accept=accept)
    if not as_json:
        say()
    waits = record.kind in REVIEWED and not accept
    print_recorded("revised and accepted" if accept else "revised", done, as_json, waits=waits)


def _export(text: str, place: str, key: str, as_json: bool) -> None:
    try:
        with open(place, "x", encoding="utf-8") as file:
            file.write(text)
    except FileExistsError:
        raise BadInput(f"{place} exists already; nothing was written. Give another name, or remove it first.") from None
    if as_json:
        print_json({"written": place})
    else:
        say(f"Wrote {place}. Change it, then: rangebook revise {key} --file {place}")


def _change(newest: Any, text: str, sheet: str, fields: list[str], expect: int | None) -> tuple[int, Record | None]:
    """The revision it is made from, and the record as it shall be; None to give up."""
    from registry.cli.editing import edit_record, read_edited
    from registry.cli.recording import read_text_file

    if sheet and fields:
        raise BadInput("Both --file and --set were given. Give one of them.")
    if fields:
        return expect or newest.revision, _set_fields(newest.record, fields)
    if sheet:
        read = read_edited(read_text_file(sheet), "stdin" if sheet == "-" else sheet, newest.record)
        if expect and read.revision and expect != read.revision:
            raise BadInput(f"--expect {expect} was given, but the sheet is of revision {read.revision}.")
        # a sheet that does not say what it was made from is checked against nothing
        return expect or read.revision or newest.revision, read.record
    record = edit_record(text, newest.record)
    return expect or newest.revision, None if record == newest.record else record


def _set_fields(record: Record, fields: list[str]) -> Record:
    """A record with some fields anew; a name that is no field is a coefficient."""
    from registry.exchange.coefficients import parse_coefficients
    from registry.naming import nearest_names, word_kind

    names = {field.name.replace("_", "-"): field.name for field in dataclasses.fields(record)}
    coefficients = dict(getattr(record, "coefficients", {}))
    changed: dict[str, Any] = {}
    for given in fields:
        name, equals, text = given.partition("=")
        field = names.get(name.replace("_", "-"), "")
        if field in ("key", "points"):
            raise BadInput(f"{quote(given)}: {_why_not_set(field)}")
        if not equals:
            raise BadInput(f"{quote(given)} changes no field; FIELD=TEXT is allowed, such as note=seen or A=8.2.")
        if field == "coefficients":
            try:
                coefficients = parse_coefficients(text)
            except ValueError as error:
                raise BadInput(f"--set coefficients: {quote(text)} given; {error}") from None
        elif field:
            changed[field] = text
        elif hasattr(record, "coefficients") and _may_be(record, name):
            coefficients[name] = text
        else:
            near = nearest_names(name, [*names, *coefficients])
            hint = f" Nearest: {', '.join(near)}." if near else ""
            raise BadInput(f"A {word_kind(record.kind)} has no field {quote(name)}.{hint}")
    if hasattr(record, "coefficients"):
        changed["coefficients"] = {name: text for name, text in coefficients.items() if text}
    return dataclasses.replace(record, **changed)


def _why_not_set(field: str) -> str:
    if field == "key":
        return "a key stays. `rangebook record` records something new, `rangebook withdraw` takes out what is wrong."
    return "points are changed in the sheet of the dataset: --export PATH, then --file PATH."


def _may_be(record: Any, name: str) -> bool:
    """True for a coefficient that the form of a correlation may have."""
    from registry.forms.catalogue import FORMS

    allowed = FORMS[record.form].coefficients
    return name in (*allowed.required, *allowed.optional, *allowed.series) or name in record.coefficients


def _ask_reason() -> str:
    from registry.cli.questions import ask_on_terminal, can_ask

    if not can_ask():
        return ""
    try:
        return ask_on_terminal("Why is it revised? ").strip()
    except EOFError:
        return ""
