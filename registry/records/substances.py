"""Compounds, their names, and the sources that facts cite."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass
from typing import ClassVar

from registry import cells
from registry.cells import choice
from registry.errors import Problem
from registry.numerals import to_float
from registry.records.record import OBTAINED_WORD, Record, entry

SOURCE_TYPES = (
    "article-journal", "book", "chapter", "report", "standard", "dataset", "webpage", "entry-encyclopedia",
    "paper-conference", "thesis", "document",
)  # fmt: skip


@dataclass(frozen=True)
class Compound(Record):
    """A pure substance.

    Examples
    --------
    >>> Compound(key="water", name="water", formula="H2O", cas="7732-18-4")
    Traceback (most recent call last):
    ...
    registry.errors.InvalidRecord: The compound 'water' cannot be recorded. cas: '7732-18-4' given; ...
    """

    kind: ClassVar[str] = "compound"
    key: str = entry(cells.KEY)
    name: str = entry(cells.TEXT)
    formula: str = entry(cells.FORMULA)
    cas: str = entry(cells.CAS, required=False)
    molar_mass: str = entry(cells.NUMBER, required=False)
    molar_mass_unit: str = entry(choice("g/mol"), required=False)
    source: str = entry(cells.KEY, required=False)
    locator: str = entry(cells.TEXT, required=False)
    obtained: str = entry(OBTAINED_WORD, required=False)
    note: str = entry(cells.LONG, required=False)

    def _checks(self) -> tuple[Callable[[], Iterable[Problem]], ...]:
        return (self._mass_problems, self._source_problems)

    def _mass_problems(self) -> Iterator[Problem]:
        from registry.masses import formula_mass

        try:
            expected = formula_mass(self.formula)
        except ValueError as error:
            yield Problem("formula", self.formula, f"{error}")
            return
        if self.molar_mass and abs(to_float(self.molar_mass) / expected - 1.0) > 5e-4:
            yield Problem("molar_mass", self.molar_mass, f"{self.formula} makes {expected:.6g} g/mol, within 0.05 %.")

    def _source_problems(self) -> Iterator[Problem]:
        if not self.molar_mass:
            return
        if not self.molar_mass_unit:
            yield Problem("molar_mass_unit", "", "it is empty; g/mol is allowed.")
        for name in ("source", "locator", "obtained"):
            if not getattr(self, name):
                yield Problem(name, "", "every fact cites a source with a locator, and says seen or memory.")

    def grams_per_mole(self) -> float:
        """The molar mass, g/mol: as recorded, else from the formula."""
        from registry.masses import formula_mass

        return to_float(self.molar_mass) if self.molar_mass else formula_mass(self.formula)

    def terms(self) -> tuple[str, ...]:
        from registry.masses import hill_formula

        return tuple(term for term in (self.name, self.formula, hill_formula(self.formula), self.cas) if term)


@dataclass(frozen=True)
class CompoundName(Record):
    """One more name of a compound."""

    kind: ClassVar[str] = "name"
    key: str = ""
    compound: str = entry(cells.KEY)
    name: str = entry(cells.TEXT)

    def _own_key(self) -> str:
        return f"{self.compound}:{self.name.casefold()}"

    def terms(self) -> tuple[str, ...]:
        return (self.name,)


@dataclass(frozen=True)
class Source(Record):
    """A bibliographic record; field names and types follow CSL."""

    kind: ClassVar[str] = "source"
    key: str = entry(cells.KEY)
    type: str = entry(choice(*SOURCE_TYPES))
    title: str = entry(cells.LONG, required=False)
    authors: str = entry(cells.LONG, required=False)
    year: str = entry(cells.YEAR, required=False)
    container: str = entry(cells.TEXT, required=False)
    volume: str = entry(cells.TEXT, required=False)
    page: str = entry(cells.TEXT, required=False)
    publisher: str = entry(cells.TEXT, required=False)
    doi: str = entry(cells.DOI, required=False)
    isbn: str = entry(cells.ISBN, required=False)
    url: str = entry(cells.URL, required=False)
    citation: str = entry(cells.LONG)
    note: str = entry(cells.LONG, required=False)
