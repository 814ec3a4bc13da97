"""What all records share, and the words that their fields may hold."""

from __future__ import annotations

import dataclasses
from collections.abc import Callable, Iterable, Iterator, Mapping
from dataclasses import dataclass
from typing import Any, ClassVar, NamedTuple, Self

from registry.cells import Cell, choice, complain, word
from registry.errors import InvalidRecord, Problem
from registry.numerals import parse_number
from registry.properties import PROPERTIES
from registry.quantities import UNITS, unit_names
from registry.scales import SCALES
from registry.uncertainty import parse_uncertainty

EVIDENCE = ("standard", "evaluated", "measured", "compiled", "estimated")
"""How good the ground is, best first."""
STANDINGS = ("draft", "accepted", "declined", "withdrawn")
OBTAINED = ("seen", "memory")

# barg looks like bar, and must not be taken for it
UNIT = word("a unit such as kPa, kJ/mol or kg/m3 is allowed; pressures are absolute.", *UNITS, suggest=False)
TEMPERATURE_UNIT = choice(*unit_names("temperature"))
SCALE = choice(*SCALES)
EVIDENCE_WORD = choice(*EVIDENCE)
OBTAINED_WORD = choice(*OBTAINED)

REFERRED = {"compound": "compound", "source": "source", "correlation": "correlation", "over": "correlation"}
"""Fields that name another record, each with the kind of what it names."""


class Reference(NamedTuple):
    """What a record refers to: the field, and the record meant."""

    role: str
    kind: str
    key: str


def entry(cell: Cell, required: bool = True) -> Any:
    """A field of a record: what it may hold, and whether it must be filled."""
    return dataclasses.field(default="", metadata={"cell": cell, "required": required})


@dataclass(frozen=True)
class Record:
    """What all records share: a key, text fields, references to other records."""

    kind: ClassVar[str]
    key: str

    def __post_init__(self) -> None:
        object.__setattr__(self, "key", self._own_key())
        problems = list(cell_problems(self))
        bad = {problem.field for problem in problems}
        for check in self._checks():
            try:
                problems += [problem for problem in check() if problem.field not in bad]
            except (KeyError, ValueError):
                if not bad:  # else the check needs a cell that is bad, and said to be
                    raise
        if problems:
            raise InvalidRecord(self.kind, self.key, problems)

    def _own_key(self) -> str:
        """The key: as given, or made of what the record says."""
        return self.key

    def _checks(self) -> tuple[Callable[[], Iterable[Problem]], ...]:
        """What must hold between fields; each check runs even where another one cannot."""
        return ()

    def content(self) -> dict[str, Any]:
        """What is recorded and digested: every field that is not empty, but the key."""
        fields = dataclasses.fields(self)
        return {f.name: value for f in fields if f.name != "key" and (value := getattr(self, f.name))}

    @classmethod
    def restore(cls, key: str, content: Mapping[str, Any]) -> Self:
        """The record behind content that was checked when it was recorded."""
        record = object.__new__(cls)
        for field in dataclasses.fields(cls):
            default: Any = {} if field.name == "coefficients" else () if field.name == "points" else ""
            object.__setattr__(record, field.name, content.get(field.name, default))
        object.__setattr__(record, "key", key)
        return record

    def references(self) -> tuple[Reference, ...]:
        """The records this one refers to, which must exist in the library."""
        pairs = ((role, kind, getattr(self, role, "")) for role, kind in REFERRED.items())
        return tuple(Reference(role, kind, key) for role, kind, key in pairs if key)

    def terms(self) -> tuple[str, ...]:
        """Texts under which a person looks for the record, besides its key."""
        return ()


def cell_problems(holder: Any, place: str = "") -> Iterator[Problem]:
    """Each field of a dataclass whose text its cell does not allow; `place` goes before its name."""
    for field in dataclasses.fields(holder):
        if "cell" in field.metadata:
            text = getattr(holder, field.name)
            if why := complain(field.metadata["cell"], text, field.metadata["required"]):
                yield Problem(place + field.name, text, why)


def phase_problems(prop: str, phase: str) -> Iterator[Problem]:
    """A property belongs to a liquid or to a solid."""
    expected = PROPERTIES[prop].phase
    if (phase == "liquid") != (expected == "liquid"):
        yield Problem("phase", phase, f"{prop} belongs to a {expected}.")


def value_unit_problems(name: str, dimension: str) -> Iterator[Problem]:
    """A value is in a unit of its property's dimension."""
    if UNITS[name].dimension != dimension:
        yield Problem("value_unit", name, f"one of {', '.join(unit_names(dimension))} is allowed.")


def temperature_problems(field: str, text: str, unit: str) -> Iterator[Problem]:
    """A temperature lies above absolute zero."""
    if UNITS[unit].to_si(parse_number(text)) <= 0:
        yield Problem(field, text, "a temperature lies above absolute zero, 0 K.")


def scale_problems(scale: str, field: str, unit: str) -> Iterator[Problem]:
    """A scale that is about the zero of kelvin has no numbers in degC or degF."""
    if scale and SCALES[scale].absolute and UNITS[unit].shift:
        yield Problem(field, unit, f"{scale} is about kelvin: K or degR.")


def uncertainty_problems(text: str, dimension: str) -> Iterator[Problem]:
    """A stated uncertainty can be read."""
    try:
        parse_uncertainty(text, dimension)
    except ValueError as error:
        yield Problem("uncertainty", text, str(error))
