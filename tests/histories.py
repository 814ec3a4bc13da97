"""A small library with a history of every kind of change; its numbers are invented, as the scenario's are."""

from __future__ import annotations

import dataclasses
from pathlib import Path

from registry.library import Library
from registry.opening import start_library

LOW, HIGH, RIEDEL = "tallowane-antoine-low", "tallowane-antoine-high", "tallowane-riedel"


def tell_history(path: Path, first_note: str = "The first note.") -> Library:
    """Revisions, reviews, withdrawals, preferences and editions over the scenario.

    `first_note` is what an early revision says: with another one the same
    history is told about another record.
    """
    library = start_library(path, "scenario", author="steward")
    library.freeze("as-loaded", author="steward", note="The scenario as it was loaded.")
    _revise(library, LOW, first_note)
    library.review(LOW, accept=True, author="reviewer", note="Compared with the page.")
    library.freeze("Middle-1", author="steward", note="After one revision.")
    _revise(library, LOW, 'The second note, with "quotes", a \\ and an é.')
    library.review(LOW, accept=False, author="reviewer", note="That is not on the page.")
    library.withdraw(HIGH, author="reader", reason="An invented erratum takes it back.", cause="erratum")
    library.review(HIGH, accept=True, author="reviewer", note="The erratum says so.")
    library.prefer(RIEDEL, HIGH, author="steward", reason="Invented: it fits better.")
    library.freeze("after", author="steward", note="After a withdrawal.")
    _revise(library, RIEDEL, "The third note.")
    return library


def _revise(library: Library, key: str, note: str) -> None:
    entry = next(entry for entry in library.correlations() if entry.key == key)
    library.revise(dataclasses.replace(entry.record, note=note), author="author", reason=f"A note on {key}.")
