"""What a person has typed, kept in a file where it cannot be recorded."""

from __future__ import annotations

import contextlib
import tempfile
from collections.abc import Iterator

from registry.cli.screen import complain
from registry.errors import RangebookError
from registry.exchange.sheets import write_sheet
from registry.records import Record

__all__ = ["keep_typed", "tell_kept"]


@contextlib.contextmanager
def keep_typed(record: Record, revision: int, command: str) -> Iterator[None]:
    """Write a record to a sheet of its own if what follows refuses it.

    Parameters
    ----------
    record : Record
        As a person typed it.
    revision : int
        The revision it was made from; 0 for a new one.
    command : str
        What takes the sheet, such as ``record source``.
    """
    try:
        yield
    except RangebookError:
        with tempfile.NamedTemporaryFile("w", suffix=".toml", delete=False, encoding="utf-8") as file:
            file.write(write_sheet(record, revision))
        tell_kept(file.name, command)
        raise


def tell_kept(place: str, command: str) -> None:
    """Say where it is and what takes it."""
    complain(f"What you wrote is kept at {place}. Correct it, then: rangebook {command} --file {place}")
