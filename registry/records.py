"""The records of a library: frozen, complete at construction, text as printed.

Every field is text. A record that breaks an invariant cannot be built:
`InvalidRecord` names all its problems at once. Content read back from a
library was checked when it was recorded and is restored as it is.
"""

from __future__ import annotations

import dataclasses
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from typing import Any, ClassVar, NamedTuple, Self

from registry import cells
from registry.cells import Cell, choice, complain
from registry.errors import BadQuantity, InvalidRecord, Problem
from registry.forms.catalogue import FORMS
from registry.numerals import to_float
from registry.properties import PROPERTIES
from registry.quantities import UNITS, parse_temperature
from registry.scales import SCALES
from registry.uncertainty import parse_uncertainty

__all__ = [
    "KINDS",
    "STANDINGS",
    "Compound",
    "CompoundName",
    "Correlation",
    "Dataset",
    "FixedPoint",
    "Point",
    "Preference",
    "PrintedValue",
    "Record",
    "Reference",
    "Review",
    "Source",
]  # fmt: skip

EVIDENCE = ("standard", "evaluated", "measured", "compiled", "estimated")
STANDINGS = ("draft", "accepted", "declined", "withdrawn")
OBTAINED = ("seen", "memory")
QUANTITIES = {
    "triple-point-temperature": "temperature", "triple-point-pressure": "pressure",
    "normal-boiling-temperature": "temperature", "normal-sublimation-temperature": "temperature",
    "critical-temperature": "temperature", "critical-pressure": "pressure",
    "lambda-point-temperature": "temperature", "lambda-point-pressure": "pressure",
    "acentric-factor": "number", "molar-mass": "molar-mass",
}  # fmt: skip
SOURCE_TYPES = (
    "article-journal", "book", "chapter", "report", "standard", "dataset", "webpage", "entry-encyclopedia",
    "paper-conference", "thesis", "document",
)  # fmt: skip

_UNIT = choice(*UNITS)
_TEMPERATURE_UNIT = choice(*(unit.name for unit in UNITS.values() if unit.dimension == "temperature"))
_SCALE = choice(*SCALES)
_EVIDENCE = choice(*EVIDENCE)
_OBTAINED = choice(*OBTAINED)


class Reference(NamedTuple):
    """What a record refers to: the field, and the record meant."""

    role: str
    kind: str
    key: str


def _entry(cell: Cell, required: bool = True) -> Any:
    return dataclasses.field(default="", metadata={"cell": cell, "required": required})


class Record:
    """What all records share: a key, text fields, references to other records."""

    kind: ClassVar[str]
    key: str

    def __post_init__(self) -> None:
        problems = list(self._cell_problems())
        if not problems:
            problems = list(self._problems())
        if problems:
            raise InvalidRecord(self.kind, self.key, problems)

    def _cell_problems(self) -> Iterator[Problem]:
        for field in dataclasses.fields(self):  # type: ignore[arg-type]
            if "cell" in field.metadata:
                text = getattr(self, field.name)
                if why := complain(field.metadata["cell"], text, field.metadata["required"]):
                    yield Problem(field.name, text, why)

    def _problems(self) -> Iterator[Problem]:
        return iter(())

    def content(self) -> dict[str, Any]:
        """What is recorded and digested: every field that is not empty, but the key."""
        fields = dataclasses.fields(self)  # type: ignore[arg-type]
        return {f.name: value for f in fields if f.name != "key" and (value := getattr(self, f.name))}

    @classmethod
    def restore(cls, key: str, content: Mapping[str, Any]) -> Self:
        """The record behind content that was checked when it was recorded."""
        record = object.__new__(cls)
        for field in dataclasses.fields(cls):  # type: ignore[arg-type]
            default: Any = {} if field.name == "coefficients" else () if field.name == "points" else ""
            object.__setattr__(record, field.name, content.get(field.name, default))
        object.__setattr__(record, "key", key)
        return record

    def references(self) -> tuple[Reference, ...]:
        """The records this one refers to, which must exist in the library."""
        names = {"compound": "compound", "source": "source", "correlation": "correlation", "over": "correlation"}
        pairs = ((role, kind, getattr(self, role, "")) for role, kind in names.items())
        return tuple(Reference(role, kind, key) for role, kind, key in pairs if key)

    def terms(self) -> tuple[str, ...]:
        """Texts under which a person looks for the record, besides its key."""
        return ()


def _source_problems(record: Any) -> Iterator[Problem]:
    """A fact needs its source, a locator and how it was obtained."""
    for name in ("source", "locator", "obtained"):
        if not getattr(record, name):
            yield Problem(name, "", "every fact cites a source with a locator, and says seen or memory.")


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
    key: str = _entry(cells.KEY)
    name: str = _entry(cells.TEXT)
    formula: str = _entry(cells.FORMULA)
    cas: str = _entry(cells.CAS, required=False)
    molar_mass: str = _entry(cells.NUMBER, required=False)
    molar_mass_unit: str = _entry(choice("g/mol"), required=False)
    source: str = _entry(cells.KEY, required=False)
    locator: str = _entry(cells.TEXT, required=False)
    obtained: str = _entry(_OBTAINED, required=False)
    note: str = _entry(cells.LONG, required=False)

    def _problems(self) -> Iterator[Problem]:
        from registry.masses import formula_mass

        try:
            expected = formula_mass(self.formula)
        except ValueError as error:
            yield Problem("formula", self.formula, f"{error}")
            return
        if not self.molar_mass:
            return
        if not self.molar_mass_unit:
            yield Problem("molar_mass_unit", "", "g/mol is allowed.")
        if abs(to_float(self.molar_mass) / expected - 1.0) > 5e-4:
            yield Problem("molar_mass", self.molar_mass, f"{self.formula} makes {expected:.6g} g/mol, within 0.05 %.")
        yield from _source_problems(self)

    def grams_per_mole(self) -> float:
        """The molar mass, g/mol: as recorded, else from the formula."""
        from registry.masses import formula_mass

        return to_float(self.molar_mass) if self.molar_mass else formula_mass(self.formula)

    def terms(self) -> tuple[str, ...]:
        return tuple(term for term in (self.name, self.formula, self.cas) if term)


@dataclass(frozen=True)
class CompoundName(Record):
    """One more name of a compound."""

    kind: ClassVar[str] = "name"
    key: str = ""
    compound: str = _entry(cells.KEY)
    name: str = _entry(cells.TEXT)

    def __post_init__(self) -> None:
        object.__setattr__(self, "key", f"{self.compound}:{self.name.casefold()}")
        super().__post_init__()

    def terms(self) -> tuple[str, ...]:
        return (self.name,)


@dataclass(frozen=True)
class Source(Record):
    """A bibliographic record; field names and types follow CSL."""

    kind: ClassVar[str] = "source"
    key: str = _entry(cells.KEY)
    type: str = _entry(choice(*SOURCE_TYPES))
    title: str = _entry(cells.LONG, required=False)
    authors: str = _entry(cells.LONG, required=False)
    year: str = _entry(cells.YEAR, required=False)
    container: str = _entry(cells.TEXT, required=False)
    volume: str = _entry(cells.TEXT, required=False)
    page: str = _entry(cells.TEXT, required=False)
    publisher: str = _entry(cells.TEXT, required=False)
    doi: str = _entry(cells.DOI, required=False)
    isbn: str = _entry(cells.ISBN, required=False)
    url: str = _entry(cells.URL, required=False)
    citation: str = _entry(cells.LONG)
    note: str = _entry(cells.LONG, required=False)


@dataclass(frozen=True)
class Correlation(Record):
    """One form with coefficients for one compound and property, from one source."""

    kind: ClassVar[str] = "correlation"
    key: str = _entry(cells.KEY)
    compound: str = _entry(cells.KEY)
    property: str = _entry(choice(*PROPERTIES))
    phase: str = _entry(cells.PHASE)
    form: str = _entry(choice(*FORMS))
    coefficients: Mapping[str, str] = dataclasses.field(default_factory=dict)
    temperature_unit: str = _entry(_TEMPERATURE_UNIT)
    value_unit: str = _entry(_UNIT)
    window_min: str = _entry(cells.NUMBER)
    window_max: str = _entry(cells.NUMBER)
    window_unit: str = _entry(_TEMPERATURE_UNIT)
    window_basis: str = _entry(choice("printed", "assumed", "memory"))
    temperature_scale: str = _entry(_SCALE)
    evidence: str = _entry(_EVIDENCE)
    uncertainty: str = _entry(cells.TEXT, required=False)
    source: str = _entry(cells.KEY)
    locator: str = _entry(cells.TEXT)
    obtained: str = _entry(_OBTAINED)
    note: str = _entry(cells.LONG, required=False)
    metastable_below: str = _entry(cells.TEXT, required=False)

    def _problems(self) -> Iterator[Problem]:
        prop, form = PROPERTIES[self.property], FORMS[self.form]
        if self.property not in form.properties:
            yield Problem("form", self.form, f"the form is for {' and '.join(form.properties)}.")
        if why := form.coefficients.complaint(self.coefficients):
            yield Problem("coefficients", "; ".join(f"{k}={v}" for k, v in self.coefficients.items()), why)
        if form.absolute and self.temperature_unit not in ("K", "degR"):
            yield Problem("temperature_unit", self.temperature_unit, "the form counts from absolute zero: K or degR.")
        if form.value_unit and self.value_unit != form.value_unit:
            yield Problem("value_unit", self.value_unit, f"the form gives {form.value_unit}.")
        yield from _phase_problems(self.property, self.phase)
        yield from _value_unit_problems(self.value_unit, prop.dimension)
        low, high = self.window_kelvin()
        if not 0.0 < low < high:
            given = f"{self.window_min} to {self.window_max} {self.window_unit}"
            yield Problem("window_min", given, "the lower bound must lie above 0 K and below the upper bound.")
        try:
            parse_uncertainty(self.uncertainty, prop.dimension)
        except ValueError as error:
            yield Problem("uncertainty", self.uncertainty, str(error))
        if self.metastable_below and (why := _temperature_complaint(self.metastable_below)):
            yield Problem("metastable_below", self.metastable_below, why)

    def window_kelvin(self) -> tuple[float, float]:
        """The printed window, K: each bound the double nearest to its exact value."""
        from registry.numerals import parse_number

        unit = UNITS[self.window_unit]
        return float(unit.to_si(parse_number(self.window_min))), float(unit.to_si(parse_number(self.window_max)))


def _temperature_complaint(text: str) -> str:
    try:
        parse_temperature(text)
    except BadQuantity as error:
        return error.allowed
    return ""


def _value_unit_problems(name: str, dimension: str) -> Iterator[Problem]:
    if UNITS[name].dimension != dimension:
        names = ", ".join(unit.name for unit in UNITS.values() if unit.dimension == dimension)
        yield Problem("value_unit", name, f"one of {names} is allowed.")


def _phase_problems(prop: str, phase: str) -> Iterator[Problem]:
    expected = PROPERTIES[prop].phase
    if (phase == "liquid") != (expected == "liquid"):
        yield Problem("phase", phase, f"{prop} belongs to a {expected}.")


@dataclass(frozen=True)
class FixedPoint(Record):
    """A triple point, boiling point, critical point or acentric factor, with its own source."""

    kind: ClassVar[str] = "fixed-point"
    key: str = _entry(cells.KEY)
    compound: str = _entry(cells.KEY)
    quantity: str = _entry(choice(*QUANTITIES))
    value: str = _entry(cells.NUMBER)
    unit: str = _entry(_UNIT)
    temperature_scale: str = _entry(_SCALE, required=False)
    qualifier: str = _entry(choice("defining", "rounded", "table-bound"), required=False)
    evidence: str = _entry(_EVIDENCE)
    uncertainty: str = _entry(cells.TEXT, required=False)
    source: str = _entry(cells.KEY)
    locator: str = _entry(cells.TEXT)
    obtained: str = _entry(_OBTAINED)
    note: str = _entry(cells.LONG, required=False)

    def _problems(self) -> Iterator[Problem]:
        dimension = QUANTITIES[self.quantity]
        unit = UNITS[self.unit]
        if unit.dimension != dimension:
            names = ", ".join(u.name for u in UNITS.values() if u.dimension == dimension)
            yield Problem("unit", self.unit, f"{self.quantity} is in one of {names}.")
        elif dimension != "number" and self.value_si() <= 0.0:
            yield Problem("value", self.value, f"a {self.quantity} is above zero.")
        try:
            parse_uncertainty(self.uncertainty, dimension)
        except ValueError as error:
            yield Problem("uncertainty", self.uncertainty, str(error))

    def value_si(self) -> float:
        """The value in SI units (K, Pa, g/mol for a molar mass)."""
        from registry.numerals import parse_number

        return float(UNITS[self.unit].to_si(parse_number(self.value)))


@dataclass(frozen=True)
class PrintedValue(Record):
    """A value that a source prints for its own correlation: proves the transcription."""

    kind: ClassVar[str] = "printed-value"
    key: str = _entry(cells.KEY)
    correlation: str = _entry(cells.KEY)
    temperature: str = _entry(cells.NUMBER)
    temperature_unit: str = _entry(_TEMPERATURE_UNIT)
    value: str = _entry(cells.NUMBER)
    value_unit: str = _entry(_UNIT)
    locator: str = _entry(cells.TEXT)
    obtained: str = _entry(_OBTAINED)
    note: str = _entry(cells.LONG, required=False)


@dataclass(frozen=True)
class Point:
    """One point of a dataset, as printed, in the dataset's units."""

    temperature: str = _entry(cells.NUMBER)
    value: str = _entry(cells.NUMBER)
    temperature_uncertainty: str = _entry(cells.NUMBER, required=False)
    value_uncertainty: str = _entry(cells.NUMBER, required=False)
    note: str = _entry(cells.LONG, required=False)


@dataclass(frozen=True)
class Dataset(Record):
    """Points from one source: measurements, or an independent table."""

    kind: ClassVar[str] = "dataset"
    key: str = _entry(cells.KEY)
    compound: str = _entry(cells.KEY)
    property: str = _entry(choice(*PROPERTIES))
    phase: str = _entry(cells.PHASE)
    temperature_unit: str = _entry(_TEMPERATURE_UNIT)
    value_unit: str = _entry(_UNIT)
    temperature_scale: str = _entry(_SCALE)
    evidence: str = _entry(_EVIDENCE)
    uncertainty: str = _entry(cells.TEXT, required=False)
    source: str = _entry(cells.KEY)
    locator: str = _entry(cells.TEXT)
    obtained: str = _entry(_OBTAINED)
    note: str = _entry(cells.LONG, required=False)
    points: tuple[Point, ...] = ()

    def _problems(self) -> Iterator[Problem]:
        dimension = PROPERTIES[self.property].dimension
        yield from _phase_problems(self.property, self.phase)
        yield from _value_unit_problems(self.value_unit, dimension)
        try:
            parse_uncertainty(self.uncertainty, dimension)
        except ValueError as error:
            yield Problem("uncertainty", self.uncertainty, str(error))
        if not self.points:
            yield Problem("points", "", "a dataset has at least one point.")

    def content(self) -> dict[str, Any]:
        rows = [{f.name: v for f in dataclasses.fields(p) if (v := getattr(p, f.name))} for p in self.points]
        return {**super().content(), "points": rows}

    @classmethod
    def restore(cls, key: str, content: Mapping[str, Any]) -> Self:
        record = super().restore(key, content)
        object.__setattr__(record, "points", tuple(Point(**row) for row in content["points"]))
        return record


@dataclass(frozen=True)
class Preference(Record):
    """A steward's preference of one correlation over another."""

    kind: ClassVar[str] = "preference"
    key: str = _entry(cells.KEY)
    correlation: str = _entry(cells.KEY)
    over: str = _entry(cells.KEY)
    reason: str = _entry(cells.LONG)

    def _problems(self) -> Iterator[Problem]:
        if self.correlation == self.over:
            yield Problem("over", self.over, "a correlation cannot be preferred over itself.")


@dataclass(frozen=True)
class Review(Record):
    """A decision on one revision of one record: the standing it gives."""

    kind: ClassVar[str] = "review"
    key: str = ""
    of_kind: str = _entry(cells.TEXT)
    of_key: str = _entry(cells.TEXT)
    of_revision: str = _entry(cells.NUMBER)
    standing: str = _entry(choice(*STANDINGS))
    note: str = _entry(cells.LONG, required=False)

    def __post_init__(self) -> None:
        object.__setattr__(self, "key", self.key_for(self.of_kind, self.of_key, int(self.of_revision)))
        super().__post_init__()

    @staticmethod
    def key_for(kind: str, key: str, revision: int) -> str:
        """The key of the review of one revision."""
        return f"{kind}:{key}@{revision}"

    def references(self) -> tuple[Reference, ...]:
        return (Reference("of", self.of_kind, self.of_key),)


KINDS: dict[str, type[Record]] = {
    cls.kind: cls
    for cls in (Compound, CompoundName, Source, Correlation, FixedPoint, PrintedValue, Dataset, Preference, Review)
}
"""Every kind of record, by its name."""

REVIEWED = ("correlation", "fixed-point", "dataset", "preference")
"""Kinds that can change an answer, and so have a standing."""
