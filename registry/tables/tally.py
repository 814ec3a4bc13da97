"""What a table held, gathered while its rows go by."""

from __future__ import annotations

import math
from collections import Counter
from collections.abc import Iterator
from dataclasses import dataclass

from registry.answers import find_cautions
from registry.candidate import Candidate
from registry.coverage import Seam, Stretch
from registry.grounds import list_grounds
from registry.refusals import Refusal
from registry.tables.tabulation import Block, Row, Table

__all__ = ["Tally", "Used"]


@dataclass(frozen=True)
class Used:
    """A correlation that answers in a table.

    Attributes
    ----------
    candidate : Candidate
        The correlation.
    citation : str
        Its source as a line of text.
    cautions : tuple of str
        What to know before relying on its values.
    """

    candidate: Candidate
    citation: str
    cautions: tuple[str, ...]

    @property
    def title(self) -> str:
        """Its key, revision and standing."""
        entry = self.candidate.entry
        return f"{entry.key}, revision {entry.revision}, {entry.standing}"

    @property
    def grounds(self) -> tuple[tuple[str, str], ...]:
        """Its form, window, evidence and source, a label and a text each."""
        return list_grounds(self.candidate.record, self.candidate.counted.evidence, self.citation)


class Tally:
    """Counts of a table, complete once its blocks have been read through.

    Parameters
    ----------
    table : Table
        What is counted.

    Attributes
    ----------
    rows : int
        Rows that have gone by.
    refused : Counter
        Refused rows by reason.
    refusals : list of Refusal
        The first refusal of each reason.
    seams : list of (int, Seam)
        The seams between rows, each with the number of the row after it.
    gaps : list of (int, Stretch)
        Likewise the gaps in which no row stands.
    """

    def __init__(self, table: Table) -> None:
        self.table = table
        self.rows = 0
        self.refused: Counter[str] = Counter()
        self.refusals: list[Refusal] = []
        self.seams: list[tuple[int, Seam]] = []
        self.gaps: list[tuple[int, Stretch]] = []
        self._seen: dict[int, tuple[float, float]] = {}

    def blocks(self) -> Iterator[Block]:
        """The blocks of the table, counted as they go by."""
        for block in self.table.blocks():
            self._count(block)
            yield block

    @property
    def used(self) -> list[Used]:
        """The correlations that answered, in the order of temperature."""
        return [self._describe(owner, *ends) for owner, ends in sorted(self._seen.items())]

    def _count(self, block: Block) -> None:
        self.rows += len(block.owners)
        for owner in set(block.owners) - {-1}:
            first = block.owners.index(owner)
            last = len(block.owners) - 1 - block.owners[::-1].index(owner)
            ends = float(block.kelvin[first]), float(block.kelvin[last])
            self._seen[owner] = (self._seen.get(owner, ends)[0], ends[1])
        for number, note in block.notes.items():
            self.seams += [(block.start + number, seam) for seam in note.seams]
            self.gaps += [(block.start + number, gap) for gap in note.gaps]
            if note.reason:
                if note.reason not in self.refused:
                    row = Row(float(block.kelvin[number]), float(block.values[number]), None, "", note)
                    self.refusals.append(self.table.refusal(row))
                self.refused[note.reason] += 1

    def _describe(self, owner: int, first: float, last: float) -> Used:
        coverage = self.table.coverage
        candidate = coverage.answering[owner]
        ends = (kelvin for kelvin in (first, last) if math.isfinite(kelvin))
        cautions = dict.fromkeys(caution for t in ends for caution in find_cautions(coverage, candidate, t))
        return Used(candidate, coverage.dossier.cite(candidate.record.source), tuple(cautions))
