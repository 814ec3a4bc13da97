"""Who, when and why: what every change is signed with."""

from __future__ import annotations

from dataclasses import dataclass

from registry.cells import SIGNED, TEXT, complain
from registry.errors import BadInput, quote
from registry.records import Record
from registry.store.history import Change

__all__ = ["Recorded", "check_signature"]


@dataclass(frozen=True)
class Recorded:
    """What a verb has recorded.

    Attributes
    ----------
    change : Change
        The header of the change.
    record : Record
        The record that it is about.
    revision : int
        Its revision.
    """

    change: Change
    record: Record
    revision: int


def check_signature(author: str, reason: str) -> tuple[str, str]:
    """Who and why, as they are recorded: plain text without blanks around it."""
    signed = author.strip(), reason.strip()
    for what, option, cell, text in zip(("author", "reason"), ("--as", "--note"), (TEXT, SIGNED), signed, strict=True):
        if why := complain(cell, text, required=True):
            raise BadInput(f"{quote(text)} is no {what} of a change ({option}): {why}")
    return signed
