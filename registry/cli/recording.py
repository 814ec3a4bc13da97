"""`record`: something new, from options, from a file, or by answering questions."""

from __future__ import annotations

import contextlib
import sys
from collections.abc import Callable
from pathlib import Path
from typing import Annotated, Any

import typer

from registry.cli.fields import SHARED, build_record_command, find_missing, refuse_missing
from registry.cli.options import AcceptOption, ReasonOption, name_author, open_chosen
from registry.cli.questions import ask_on_terminal, ask_record, can_ask
from registry.cli.recorded_text import print_recorded
from registry.cli.rescue import keep_typed
from registry.cli.screen import complain, print_json, say
from registry.errors import BadInput, quote
from registry.exchange.sheets import read_sheet, write_template
from registry.records import KINDS, RECORDED, REVIEWED, Dataset, Record

__all__ = ["build_record_group", "read_text_file"]

FileOption = Annotated[
    str, typer.Option("--file", metavar="PATH", help="A record sheet; - reads stdin.", show_default=False)
]
TemplateOption = Annotated[
    bool, typer.Option("--template", help="Print a record sheet with what is given, and record nothing.")
]

_ADDED: dict[str, tuple[Any, Any]] = {
    "sheet": (FileOption, ""),
    "template": (TemplateOption, False),
    "why": (ReasonOption, ""),
    "accept": (AcceptOption, False),
    **SHARED,
}

_EXAMPLES = {
    "compound": "--key water --name water --formula H2O --cas 7732-18-5",
    "name": "--compound water --name steam",
    "source": '--key handbook-a --type book --year 2026 --citation "Handbook A, 1st ed."',
    "correlation": "--file ethanol.toml",
    "fixed-point": "--file critical.toml",
    "printed-value": "--file check.toml",
    "dataset": "--file points.toml",
}


def build_record_group() -> typer.Typer:
    """`record` with a subcommand for each kind that people record."""
    group = typer.Typer(
        no_args_is_help=True,
        rich_markup_mode=None,
        pretty_exceptions_enable=False,
        add_completion=False,
        help=(
            "Record something new.\n\n"
            "From options, from a file, or by answering questions on a terminal.\n\n"
            "Each kind has its own options and takes --json: rangebook record correlation --help.\n\n"
            "Example: rangebook record correlation --template"
        ),
        context_settings={"help_option_names": ["-h", "--help"]},
    )
    for kind in RECORDED:
        group.command(kind)(_build(kind))
    return group


def _build(kind: str) -> Callable[..., None]:
    article = "a draft until it is reviewed" if kind in REVIEWED else "in force at once"
    text = f"Record a {kind.replace('-', ' ')}; it is {article}.\n\nExample: rangebook record {kind} {_EXAMPLES[kind]}"
    return build_record_command(KINDS[kind], _run, text, _ADDED)


def _run(cls: type[Record], values: dict[str, Any], shared: dict[str, Any]) -> None:
    if shared["template"]:
        _print_template(cls.kind, values, shared["as_json"])
        return
    record, typed = _make(cls, values, shared["sheet"])
    kept = keep_typed(record, 0, f"record {cls.kind}") if typed else contextlib.nullcontext()
    with kept, open_chosen(shared["library"]) as book:
        done = book.record(record, author=name_author(shared["author"]), reason=shared["why"], accept=shared["accept"])
    waits = cls.kind in REVIEWED and not shared["accept"]
    what = "recorded and accepted" if shared["accept"] and cls.kind in REVIEWED else "recorded"
    print_recorded(what, done, shared["as_json"], waits=waits)


def _print_template(kind: str, values: dict[str, Any], as_json: bool) -> None:
    text = write_template(kind, values)
    if as_json:
        print_json({"kind": kind, "sheet": text})
    else:
        say(text.rstrip("\n"))


def _make(cls: type[Record], values: dict[str, Any], sheet: str) -> tuple[Record, bool]:
    """The record: of a file, of options, or of answers where something is missing; and whether it was answered."""
    if sheet:
        if values:
            raise BadInput("Both --file and fields were given. Write the fields into the file.")
        return read_sheet(read_text_file(sheet), "stdin" if sheet == "-" else sheet, cls.kind).record, False
    if cls is Dataset:
        raise BadInput("A dataset has points: write a sheet (--template), and give it with --file.")
    if find_missing(cls, values):
        if can_ask():
            return ask_record(cls, values, ask_on_terminal, complain), True
        refuse_missing(cls, values)
    return cls(**values), False


def read_text_file(place: str) -> str:
    """The text of a file; - stands for stdin.

    Raises
    ------
    BadInput
        If there is no such file, or it is no UTF-8 text.
    """
    try:
        if place == "-":
            return sys.stdin.read() if sys.stdin is not None else ""
        return Path(place).read_text(encoding="utf-8")
    except UnicodeDecodeError as error:
        raise BadInput(f"{place} is no UTF-8 text ({error.reason}).") from None
    except (FileNotFoundError, IsADirectoryError, ValueError) as error:
        why = error.strerror if isinstance(error, OSError) else str(error)
        raise BadInput(f"{quote(place, 200)} cannot be read: {why}.") from None
