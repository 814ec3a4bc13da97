"""What stands behind a correlation, in the words that every answer and every table uses."""

from __future__ import annotations

from registry.display import format_plain
from registry.forms.catalogue import FORMS
from registry.records import Correlation

__all__ = ["list_grounds", "word_locator"]

_BASIS = {"printed": "as printed", "assumed": "assumed, not printed", "memory": "from memory"}
_OBTAINED = {"seen": "seen in the source", "memory": "from memory"}


def list_grounds(record: Correlation, counts_as: str, citation: str) -> tuple[tuple[str, str], ...]:
    """The form, the window, the evidence and the source of a correlation.

    Parameters
    ----------
    record : Correlation
        What is told of.
    counts_as : str
        The evidence that it ranks by.
    citation : str
        Its source as a line of text.

    Returns
    -------
    tuple of (str, str)
        A label and a text each.

    Examples
    --------
    >>> import registry
    >>> with registry.open_library("shelf.db") as library:
    ...     answer = library.lookup("ethanol", 300.0)
    >>> dict(list_grounds(answer.correlation, answer.counts_as, answer.citation))["window"]
    '293 to 513.92 K, from memory'
    """
    low, high = record.window_kelvin()
    return (
        ("form", FORMS[record.form].title),
        ("window", f"{format_plain(low)} to {format_plain(high)} K, {_BASIS[record.window_basis]}"),
        ("evidence", _word_evidence(record, counts_as)),
        ("source", f"{citation}; {word_locator(record.locator)}"),
    )


def word_locator(locator: str) -> str:
    """Where in a source something stands, or that this was not recorded."""
    return locator if locator != "not recorded" else "the place in it is not recorded"


def _word_evidence(record: Correlation, counts_as: str) -> str:
    """What it ranks by, and what the record says where that differs."""
    if counts_as == record.evidence:
        return f"{record.evidence}, {_OBTAINED[record.obtained]}"
    return f"{counts_as} (recorded as {record.evidence}, but from memory and unconfirmed)"
