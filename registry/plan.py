"""What a verb would append: planned under the write lock, then signed and appended whole."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from registry.records import Record
from registry.store.history import Draft, Effect

__all__ = ["Plan", "draft_of"]


@dataclass(frozen=True)
class Plan:
    """What a decision or a recording would append.

    Attributes
    ----------
    drafts : tuple of Draft
        The records, in order.
    record : Record
        The record it is about.
    revision : int
        Its revision.
    """

    drafts: tuple[Draft, ...]
    record: Record
    revision: int


def draft_of(record: Record, effects: Sequence[Effect] = ()) -> Draft:
    """A record as the store appends it."""
    return Draft(record.kind, record.key, record.content(), record.references(), record.terms(), effects)
