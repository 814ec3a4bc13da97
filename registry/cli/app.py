"""The command `rangebook`: its commands, its one error boundary, its exit codes.

====  ======================================================================
0     done
1     the thing asked about does not hold
2     bad usage or bad input
3     refused: no correlation may answer
4     the library changed under you or is busy
5     the library cannot be read: damaged, no library, or of a newer program
70    a fault in the program itself
====  ======================================================================
"""

from __future__ import annotations

import contextlib
import dataclasses
import re
import sys
from collections.abc import Sequence
from typing import Annotated, Any, NoReturn

import typer

from registry.cli.commands import CommandTable
from registry.cli.screen import complain, print_json
from registry.errors import (
    BadInput,
    Conflict,
    LibraryBusy,
    LibraryUnreadable,
    RangebookError,
    Refused,
    RevisedMeanwhile,
    quote,
)

__all__ = ["main"]

EXIT_CODES = (
    (Refused, 3), (LibraryBusy, 4), (RevisedMeanwhile, 4), (Conflict, 4), (LibraryUnreadable, 5), (RangebookError, 2),
)  # fmt: skip
FAULT = 70
TAKES_NUMBERS = ("lookup", "slope", "boil")

app = typer.Typer(
    name="rangebook",
    cls=CommandTable,
    no_args_is_help=True,
    rich_markup_mode=None,
    pretty_exceptions_enable=False,
    add_completion=True,
    context_settings={"help_option_names": ["-h", "--help"]},
)


def _print_version(wanted: bool) -> None:
    if wanted:
        from registry import __version__
        from registry.rules import VERSION
        from registry.store.tables import SCHEMA

        print(f"rangebook {__version__}, rules {VERSION}, schema {SCHEMA}")
        raise typer.Exit


@app.callback()
def rangebook(
    version: Annotated[
        bool, typer.Option("--version", callback=_print_version, is_eager=True, help="Show the version and exit.")
    ] = False,
    traceback: Annotated[bool, typer.Option("--traceback", help="Show where an error came from.")] = False,
) -> None:
    """A versioned registry of pure-compound temperature correlations.

    Looks up vapour pressures and other properties by the published correlation that covers a temperature, says where
    each number comes from, and refuses where nothing covers it.
    """


def protect_minus(arguments: list[str]) -> list[str]:
    """Negative numbers unquoted where a command takes some: -40C is no option.

    Examples
    --------
    >>> protect_minus(["lookup", "ammonia", "-40C", "-u", "bar"])
    ['lookup', 'ammonia', '−40C', '-u', 'bar']
    """
    if next((word for word in arguments if not word.startswith("-")), "") not in TAKES_NUMBERS:
        return arguments
    return [f"\u2212{word[1:]}" if re.match(r"-[0-9.]", word) else word for word in arguments]


def main(arguments: list[str] | None = None) -> None:
    """Run the command line; never returns."""
    given = sys.argv[1:] if arguments is None else arguments
    try:
        _refuse_surrogates(given)
        app(args=protect_minus(given), prog_name="rangebook")
    except RangebookError as error:
        _stop(given, error, next(code for kind, code in EXIT_CODES if isinstance(error, kind)), str(error))
    except OSError as error:
        place = f"{quote(error.filename, 200)} cannot be used" if error.filename else "Reading or writing failed"
        _stop(given, error, 2, f"{place}: {error.strerror}.")
    except SystemExit as stop:
        if stop.code == 2 and "--json" in given:
            print_json(_describe_error("Usage", "The words of the command are off; stderr says which.", 2))
        raise
    except Exception as error:
        text = f"rangebook failed: {type(error).__name__}: {error}. `rangebook --traceback ...` shows where."
        _stop(given, error, FAULT, text)


def _refuse_surrogates(arguments: list[str]) -> None:
    for word in arguments:
        if not word.isprintable() and any("\ud800" <= c <= "\udfff" for c in word):
            raise BadInput(f"{quote(word)} is no text in UTF-8. Type it again, or set the terminal to UTF-8.")


def _describe_error(kind: str, message: str, code: int, **listed: Sequence[Any]) -> dict[str, Any]:
    described: dict[str, Any] = {"kind": kind, "message": message, "exit_code": code}
    for name, entries in listed.items():
        if entries:
            described[name] = [dataclasses.asdict(entry) for entry in entries]
    return {"error": described}


def _stop(given: list[str], error: Exception, code: int, message: str) -> NoReturn:
    """Say what went wrong and leave with its code."""
    if "--traceback" in given:
        raise error
    if "--json" in given:
        with contextlib.suppress(OSError):  # there may be no room left to say it
            listed = {name: getattr(error, name, ()) for name in ("problems", "conflicts")}
            document = _describe_error(type(error).__name__, message, code, **listed)
            if isinstance(error, RevisedMeanwhile):
                names = ("key", "expected", "found", "mine", "theirs")
                document["error"] |= {"of_kind": error.kind} | {name: getattr(error, name) for name in names}
            print_json(document)
    complain(message)
    sys.exit(code)
