"""What waits for review, oldest first."""

from __future__ import annotations

from dataclasses import dataclass

from registry.entries import restore
from registry.records import REVIEWED, Record, Withdrawal
from registry.store.history import Change
from registry.store.library_file import View

__all__ = ["Waiting", "list_waiting"]


@dataclass(frozen=True)
class Waiting:
    """One revision that waits.

    Attributes
    ----------
    record : Record
        What is proposed.
    revision : int
        Its revision.
    what : str
        ``new``, ``revision`` or ``withdrawal``.
    change : Change
        The change that brought it.
    note : str
        What was said with it on arrival.
    screening : str or None
        Its screening state; None where it was not screened.
    """

    record: Record
    revision: int
    what: str
    change: Change
    note: str = ""
    screening: str | None = None


def list_waiting(view: View) -> list[Waiting]:
    """Every newest revision without a verdict.

    Parameters
    ----------
    view : View
        The library at a position.

    Returns
    -------
    list of Waiting
        In the order in which they were recorded.
    """
    return [
        Waiting(restore(row), row.revision, _name(row.kind, row.revision), view.change(row.change), note)
        for row, note in view.waiting(REVIEWED)
    ]


def _name(kind: str, revision: int) -> str:
    if kind == Withdrawal.kind:
        return "withdrawal"
    return "new" if revision == 1 else "revision"
