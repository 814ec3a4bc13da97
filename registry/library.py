"""The facade: every verb of the job is one method of `Library`.

Here and in `registry.reader` the database and the numeric side meet, and
nowhere else.
"""

from __future__ import annotations

import os
from datetime import UTC, datetime
from pathlib import Path
from typing import Any

from registry.cells import SIGNED, TEXT, complain
from registry.entries import in_force, with_standing
from registry.errors import BadInput, quote
from registry.reader import Reader
from registry.records import KINDS

__all__ = ["Library", "check_signature", "now_utc"]


def now_utc() -> str:
    """The time now, UTC, ISO 8601 with microseconds."""
    return datetime.now(UTC).strftime("%Y-%m-%dT%H:%M:%S.%fZ")


class Library(Reader):
    """A library: reading as `Reader` does, and recording.

    Parameters
    ----------
    file : LibraryFile
        The open database.
    """

    def load(
        self, path: str | os.PathLike[str], *, author: str, reason: str = "", dry_run: bool = False
    ) -> dict[str, Any]:
        """Load a package in one change: all of it or nothing.

        Parameters
        ----------
        path : path
            A folder or .zip in the exchange format.
        author : str
            Who loads it.
        reason : str
            Why; the name of the package if empty.
        dry_run : bool
            Check everything and record nothing.

        Returns
        -------
        dict
            How many records were ``added``, ``revised``, ``reviewed`` and
            ``unchanged``; the number of the ``change`` (0 if there was nothing
            to record); under ``changed`` what was revised or reviewed, a line
            each.

        Raises
        ------
        InvalidPackage
            With every bad cell.
        LibraryBusy
            If another process writes for too long.
        """
        from registry.recording import plan_load

        package = Path(path)
        if dry_run:
            with self._lock, self._reading() as view:
                plan = plan_load(view, package)
                return {**plan.counts, "change": 0, "changed": plan.changed}
        who, why = check_signature(author, reason or f"Loaded {package.name[:200]}")
        with self._lock, self._file.writing() as (view, append):
            plan = plan_load(view, package)
            number = append(who, why, now_utc(), plan.drafts).number if plan.drafts else 0
        return {**plan.counts, "change": number, "changed": plan.changed}

    def dump(self, path: str | os.PathLike[str]) -> dict[str, int]:
        """Write everything that counts as a package.

        Of a record with several revisions the one in force is written: a draft
        that waits over an accepted revision stays behind.

        Parameters
        ----------
        path : path
            A folder that does not exist yet, or a name ending in .zip.

        Returns
        -------
        dict of str to int
            The number of rows of each file, and under ``waiting`` the drafts
            that stayed behind, if any.
        """
        from registry.exchange.dumping import dump_items

        with self._lock, self._reading() as view:
            entries = [e for kind in KINDS if kind != "review" for e in with_standing(view, view.revisions(kind))]
        counting = list(in_force(entries))
        newest = {(e.record.kind, e.key): e.revision for e in entries}
        waiting = sum(newest[e.record.kind, e.key] > e.revision for e in counting)
        rows = dump_items(Path(path), ((e.record, (e.standing, e.standing_note)) for e in counting))
        return {**rows, "waiting": waiting} if waiting else rows


def check_signature(author: str, reason: str) -> tuple[str, str]:
    """Who and why, as they are recorded: plain text without blanks around it."""
    signed = author.strip(), reason.strip()
    for what, option, cell, text in zip(("author", "reason"), ("--as", "--note"), (TEXT, SIGNED), signed, strict=True):
        if why := complain(cell, text, required=True):
            raise BadInput(f"{quote(text)} is no {what} of a change ({option}): {why}")
    return signed
