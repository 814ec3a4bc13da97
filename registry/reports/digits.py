"""The digits that a person reads in each column of a table."""

from __future__ import annotations

import math

from registry.display import format_number
from registry.properties import PROPERTIES
from registry.reports.columns import Columns, Line

__all__ = ["Digits"]

FOUND_DECIMALS = 3
"""Decimals of a temperature that was found."""


class Digits:
    """How the numbers of a table are shown: enough digits to tell rows apart, six of what was found.

    Parameters
    ----------
    columns : Columns
        The units.
    """

    def __init__(self, columns: Columns) -> None:
        self._columns = columns
        self._by_temperature = columns.by_temperature
        given = columns.temperature if self._by_temperature else columns.value
        self._decimals = columns.table.spacing.decimals(given)
        title = PROPERTIES[columns.table.coverage.property].title
        heads = [("temperature", columns.temperature.name), (title, columns.value.name)]
        self.heads = [
            *(heads if self._by_temperature else heads[::-1]),
            ("uncertainty", "% (k=2)" if self._by_temperature else "K (k=2)"),
        ]

    def show(self, line: Line) -> tuple[str, str, str]:
        """What was given, what was found and the stated uncertainty, as texts."""
        if math.isnan(line.found):
            return self._show_given(line.given), "", ""
        spread = "none" if math.isnan(line.expanded) else f"{line.expanded:.3g}"
        return self._show_given(line.given), self._show_found(line.found), spread

    def widths(self) -> list[int]:
        """Characters that each column takes, its heads too."""
        given = [self._show_given(number) for number in self._columns.ends()]
        # what is found, and its uncertainty, are shorter than their heads
        return [max(map(len, [*head, *texts])) for head, texts in zip(self.heads, (given, [], []), strict=True)]

    def _show_given(self, number: float) -> str:
        return f"{number:.{self._decimals}f}"

    def _show_found(self, number: float) -> str:
        return format_number(number) if self._by_temperature else f"{number:.{FOUND_DECIMALS}f}"
