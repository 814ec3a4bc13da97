"""`review`, `withdraw`, `prefer` and `queue`: what people decide about records."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated, Any

import typer

from registry.cli.options import (
    AcceptOption,
    AsOfOption,
    AuthorOption,
    EditionOption,
    JsonOption,
    KindOption,
    LibraryOption,
    ReasonOption,
    look_at,
    name_author,
    open_chosen,
)
from registry.cli.screen import emphasize, name_past, print_json, print_table, say, wrap
from registry.errors import BadInput

if TYPE_CHECKING:
    from registry.library import Library
    from registry.signature import Recorded
    from registry.waiting import Waiting


def review(
    key: Annotated[str, typer.Argument(metavar="KEY", help="What waits: a record, or one whose withdrawal waits.")],
    accept: Annotated[bool | None, typer.Option("--accept/--decline", help="The verdict.", show_default=False)] = None,
    note: Annotated[str, typer.Option("--note", metavar="TEXT", help="What was looked at.", show_default=False)] = "",
    expect: Annotated[
        int | None, typer.Option("--expect", metavar="N", help="The revision that was looked at.", show_default=False)
    ] = None,
    again: Annotated[bool, typer.Option("--again", help="Accept what was declined or withdrawn.")] = False,
    kind: KindOption = "",
    author: AuthorOption = None,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """Accept or decline what waits for review.

    Somebody else than the author reviews, but in a library that one person keeps (rangebook start --solo). With
    --again what was declined or withdrawn is accepted after all.

    Example: rangebook review ethanol-antoine-low --accept --note "checked against the printed table"
    """
    from registry.cli.recorded_text import print_recorded

    if accept is None:
        raise BadInput("No verdict was given. Give --accept or --decline.")
    if not note.strip():
        raise BadInput("A review says what was looked at: give --note.")
    with open_chosen(library) as book:
        done = book.review(
            key, accept=accept, author=name_author(author), note=note, kind=kind, expect=expect, again=again
        )
        resting = book.resting(done.record) if accept else []
        told = _word_verdict(book, done, accept)
    print_recorded("accepted" if accept else "declined", done, as_json, told=told, resting=resting)


def _word_verdict(book: Library, done: Recorded, accept: bool) -> str:
    """What a verdict does: to accept a withdrawal takes a record out, to accept again brings it back."""
    from registry.records import Withdrawal

    if isinstance(done.record, Withdrawal):
        return "withdrawn" if accept else "stays as it was: its withdrawal was declined"
    if not accept:
        return ""
    before = book.at(done.change.number - 1).newest(done.record.key, done.record.kind)
    if before.standing not in ("declined", "withdrawn"):
        return ""
    said = before.standing_note or book.change(before.reviewed_in).reason
    return f"accepted again; it was {before.standing} ({said})"


def withdraw(
    key: Annotated[
        str, typer.Argument(metavar="KEY", help="A correlation, source, fixed point, dataset or preference.")
    ],
    reason: ReasonOption = "",
    cause: Annotated[
        str, typer.Option("--cause", metavar="erratum|retraction|superseded|other", help="The kind of reason.")
    ] = "other",
    accept: AcceptOption = False,
    kind: KindOption = "",
    author: AuthorOption = None,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """Withdraw a record: once reviewed, it answers no more. With a source goes everything that rests on it.

    Example: rangebook withdraw handbook-b --cause erratum --reason "first constant misprinted, errata of 2026"
    """
    from registry.cli.recorded_text import print_recorded

    with open_chosen(library) as book:
        done = book.withdraw(
            key, author=name_author(author), reason=_need(reason), cause=cause, kind=kind, accept=accept
        )
        resting = book.resting(done.record)
    print_recorded("withdrawn" if accept else "to be withdrawn", done, as_json, resting=resting, waits=not accept)


def prefer(
    key: Annotated[str, typer.Argument(metavar="KEY", help="The correlation that shall answer.")],
    over: Annotated[str, typer.Option("--over", metavar="KEY", help="The one it goes before, wherever both cover.")],
    reason: ReasonOption = "",
    accept: AcceptOption = False,
    author: AuthorOption = None,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """Prefer one correlation over another, once that is reviewed.

    Example: rangebook prefer water-if97 --over water-sr1-86 --reason "one equation for the whole plant"
    """
    from registry.cli.recorded_text import print_recorded

    with open_chosen(library) as book:
        done = book.prefer(key, over, author=name_author(author), reason=_need(reason), accept=accept)
    print_recorded("preferred" if accept else "to be preferred", done, as_json, waits=not accept)


def _need(reason: str) -> str:
    if not reason.strip():
        raise BadInput("Every decision says why: give --reason.")
    return reason


def _name_waiting(waiting: Waiting) -> str:
    """The key that `review` takes, with its revision; of a withdrawal what it takes out."""
    from registry.records import Withdrawal

    record = waiting.record
    if isinstance(record, Withdrawal):
        return f"{record.of_key} r{record.of_revision}"
    return f"{record.key} r{waiting.revision}"


def queue(
    edition: EditionOption = None,
    as_of: AsOfOption = None,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """List what waits for review, oldest first.

    Example: rangebook queue
    """
    from registry.cli.documents import describe_change

    with open_chosen(library) as opened:
        book, label = look_at(opened, edition, as_of)
        waiting = book.queue()
        place, position = book.place, book.position
    if as_json:
        rows: list[dict[str, Any]] = [
            {
                "kind": w.record.kind, "key": w.record.key, "revision": w.revision, "what": w.what,
                **describe_change(w.change), "note": w.note or None, "screening": w.screening,
            }
            for w in waiting
        ]  # fmt: skip
        print_json({"library": place, "position": position, "as_of": label or None, "waiting": rows})
        return
    if not waiting:
        say(f"Nothing waits for review{name_past(label)}.")
        return
    screened = any(w.screening for w in waiting)
    say(f"{emphasize(str(len(waiting)))} {'waits' if len(waiting) == 1 else 'wait'} for review{name_past(label)}.")
    say()
    print_table(
        ("since", "by", "what", "key", "screening", "why") if screened else ("since", "by", "what", "key", "why"),
        [
            [
                w.change.recorded_at[:10], w.change.author, w.what, _name_waiting(w),
                *([w.screening or "not screened"] if screened else []),
                w.change.reason + (f" ({w.note})" if w.note else ""),
            ]
            for w in waiting
        ],
    )  # fmt: skip
    say()
    how = "`rangebook history KEY` tells what is proposed; `rangebook review KEY --accept` or `--decline` decides it."
    say(wrap(how, 0))
