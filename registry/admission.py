"""What a record must fit before it joins a library: what it refers to, what its key is for, whether it has a value.

A record is complete by itself when it is built; here it is held against the
others, wherever it comes from.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator

import numpy as np

from registry.curve import Curve
from registry.errors import Problem
from registry.naming import word_kind
from registry.numerals import parse_number
from registry.properties import PROPERTIES
from registry.quantities import UNITS
from registry.records import Compound, Correlation, Preference, PrintedValue, Record

__all__ = ["Find", "check_identity", "check_kinship", "check_references", "check_value", "find_cycle"]

Find = Callable[[str, str], Record | None]
"""``find(kind, key)`` gives the newest revision of a record, or None."""

_KEPT = ("compound", "property", "phase", "quantity", "correlation", "over")
"""What a key stands for, which no revision changes."""


def check_references(record: Record, find: Find, where: str = "") -> Iterator[Problem]:
    """Everything a record refers to is there."""
    for role, kind, key in record.references():
        if find(kind, key) is None:
            # where others arrive with it, the missing one belongs into the same package
            ahead = "" if where else f" `rangebook record {kind}` records one first."
            yield Problem(role, key, f"there is no {word_kind(kind)} with this key{where}.{ahead}")


def check_identity(record: Record, before: Record | None) -> Iterator[Problem]:
    """A key keeps what it is for: another compound, property or phase needs another key."""
    for field in _KEPT:
        given, owner = getattr(record, field, ""), getattr(before, field, "")
        if owner and owner != given:
            yield Problem(field, given, f"the key is recorded for {owner}; another {field} needs another key.")


def check_kinship(record: Record, find: Find) -> Iterator[Problem]:
    """What must fit the correlations that a record names: units, signs, one compound and property."""
    if isinstance(record, PrintedValue):
        of = find("correlation", record.correlation)
        if isinstance(of, Correlation):
            yield from _check_printed_value(record, of)
    elif isinstance(record, Preference):
        one, two = find("correlation", record.correlation), find("correlation", record.over)
        if isinstance(one, Correlation) and isinstance(two, Correlation):
            yield from _check_preference(one, two)


def _check_preference(one: Correlation, two: Correlation) -> Iterator[Problem]:
    if (one.compound, one.property, one.phase) == (two.compound, two.property, two.phase):
        return
    why = (
        f"it is for {two.property} of {two.compound}, {one.key} for {one.property} of {one.compound}; "
        "a preference is between correlations of one compound, property and phase."
    )
    yield Problem("over", two.key, why)


def _check_printed_value(record: PrintedValue, of: Correlation) -> Iterator[Problem]:
    prop = PROPERTIES[of.property]
    if UNITS[record.value_unit].dimension != prop.dimension:
        yield Problem("value_unit", record.value_unit, f"{prop.name} is in a {prop.dimension} unit.")
    elif prop.positive and parse_number(record.value) <= 0:
        yield Problem("value", record.value, f"a {prop.name} is above zero.")


def check_value(record: Record, find: Find) -> Iterator[Problem]:
    """A correlation gives a usable value somewhere in its window."""
    if not isinstance(record, Correlation):
        return
    compound = find("compound", record.compound)
    if isinstance(compound, Compound) and not _has_value(record, compound.grams_per_mole()):
        given = "; ".join(f"{name}={text}" for name, text in record.coefficients.items())
        why = "with these coefficients and units the form gives no usable value anywhere in the window."
        yield Problem("coefficients", given, why)


def _has_value(record: Correlation, molar_mass: float) -> bool:
    try:
        curve = Curve.of(record, molar_mass)
    except (ValueError, ArithmeticError):
        return False  # a logarithm of nothing, a division by zero: the form has no value at all
    low, high = curve.window
    if not low < high:
        return False
    values = curve.values(np.linspace(low, high, 33))
    return bool((np.isfinite(values) & (values > 0.0)).any())


def find_cycle(pairs: Iterable[tuple[str, str]]) -> list[str]:
    """A chain of preferences that comes back to its start, or an empty list.

    Examples
    --------
    >>> find_cycle([("a", "b"), ("b", "c"), ("c", "a")])
    ['a', 'b', 'c', 'a']
    """
    below: dict[str, list[str]] = {}
    for key, over in pairs:
        below.setdefault(key, []).append(over)
    done: set[str] = set()
    for start in below:
        trail, stack = [start], [iter(below[start])]
        while stack:
            nxt = next(stack[-1], None)
            if nxt is None:
                done.add(trail.pop())
                stack.pop()
            elif nxt in trail:
                return [*trail[trail.index(nxt) :], nxt]
            elif nxt not in done:
                trail.append(nxt)
                stack.append(iter(below.get(nxt, ())))
    return []
