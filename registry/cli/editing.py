"""A record as a person edits its sheet: in an editor, or in a file of their own."""

from __future__ import annotations

import os
import shlex
import subprocess
import tempfile
from pathlib import Path

from registry.cli.questions import ask_on_terminal, can_ask
from registry.cli.rescue import tell_kept
from registry.cli.screen import complain
from registry.errors import BadInput
from registry.exchange.sheets import Sheet, gives_up, read_sheet
from registry.records import Record

__all__ = ["edit_record", "read_edited"]


def read_edited(text: str, place: str, record: Record) -> Sheet:
    """The sheet of a record as it was edited.

    Raises
    ------
    BadInput
        If it cannot be read, or is of another record.
    """
    read = read_sheet(text, place, record.kind)
    if read.record.key != record.key:
        raise BadInput(f"The sheet is of {read.record.key}, not of {record.key}.")
    return read


def edit_record(text: str, record: Record) -> Record:
    """A record as the user's editor leaves its sheet; on one that cannot be read, the editor opens again.

    Raises
    ------
    BadInput
        If there is no editor, it fails, or the sheet cannot be read and nobody is there to mend it.
    """
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
            read = read_edited(edited, str(place), record).record
        except BadInput as error:
            if not (can_ask() and _ask_again(str(error))):
                tell_kept(str(place), f"revise {record.key}")
                raise
            continue
        place.unlink()
        return read


def _run_editor(command: str, place: Path) -> None:
    try:
        done = subprocess.run([*shlex.split(command), str(place)], check=False)
    except (OSError, ValueError) as error:
        place.unlink()
        raise BadInput(f"The editor {command!r} cannot be run: {error}. Nothing was recorded.") from None
    if done.returncode:
        raise BadInput(f"The editor ended with {done.returncode}; what you wrote is kept at {place}.")


def _ask_again(why: str) -> bool:
    complain(why)
    try:
        return ask_on_terminal("Edit again? [Y/n] ").strip().casefold() in ("", "y", "yes")
    except EOFError:
        return False
