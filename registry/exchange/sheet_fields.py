"""The fields of a record as a sheet states them: read one by one, complained about together."""

from __future__ import annotations

import dataclasses
import re
from collections.abc import Mapping
from typing import Any

from registry.cells import KEY, complain
from registry.errors import InvalidRecord, Problem
from registry.exchange.coefficients import parse_coefficients
from registry.exchange.toml_text import read_text
from registry.naming import join_names, nearest_names
from registry.records import Point, Record

__all__ = ["build_record", "read_coefficients", "read_fields", "read_points", "tell_allowed", "text_fields"]

_TABLES = ("coefficients", "points")

_PRINTED = "a number as printed, such as 273.15"
_MEANT = {
    "compound": "the key of a compound, such as water",
    "correlation": "the key of a correlation, such as water-sr1-86",
    "source": "the key of a source, such as handbook-a",
    "locator": "where in the source: page, table or equation",
    "citation": "the source as a reader would cite it",
    "uncertainty": "as stated, such as 0.5 %, 0.5 % (k=2) or 1 % up to 260 K; 0.6 %; empty if not stated",
    "window_min": _PRINTED,
    "window_max": _PRINTED,
    "temperature": _PRINTED,
    "value": _PRINTED,
    "molar_mass": "a number as printed, such as 46.068",
    "metastable_below": "a temperature such as 273.16 K, below which the curve is for the metastable liquid",
}
"""What fields are for whose cells say no more than text, number or key."""


def tell_allowed(name: str, allowed: str) -> str:
    """What a field may hold, in words for whoever fills it in.

    Examples
    --------
    >>> tell_allowed("locator", "text is allowed.")
    'where in the source: page, table or equation'
    >>> tell_allowed("unit", "one of g/mol is allowed.")
    'one of g/mol'
    """
    return _MEANT.get(name) or re.sub(r",? (is|are) allowed", "", allowed).removesuffix(".")


def text_fields(cls: Any) -> list[dataclasses.Field[str]]:
    """The fields that a person fills: plain texts, and no derived key."""
    return [field for field in dataclasses.fields(cls) if "cell" in field.metadata]


def read_fields(
    table: Mapping[str, Any], cls: Any, what: str, problems: list[Problem], more: tuple[str, ...] = (), place: str = ""
) -> dict[str, str]:
    """The texts of a table by field; what is no text, and what is no field, goes to `problems`."""
    names = [field.name for field in text_fields(cls)]
    others = [field.name for field in dataclasses.fields(cls) if field.name in _TABLES]
    values = {}
    for name, value in table.items():
        if name in more or name in others:
            continue
        text, why = read_text(value)
        if name not in names:
            near = nearest_names(name, [*names, *others], count=1)
            hint = f"Did you mean {near[0]}?" if near else f"It has {join_names([*names, *others], 'and')}."
            problems.append(Problem(place + name, text, f"a {what} has no such field. {hint}"))
        elif why:
            problems.append(Problem(place + name, text, why))
        else:
            values[name] = text
    return values


def read_coefficients(given: Any, problems: list[Problem]) -> dict[str, str]:
    """The coefficients of a correlation, in a table or in one line."""
    if not isinstance(given, dict):
        return _split_coefficients(*read_text(given), problems)
    found = {}
    for name, value in given.items():
        text, why = read_text(value)
        if why or not text:
            problems.append(Problem(f"coefficients.{name}", text, why or "it is empty; take the line out, or fill it."))
        found[name] = text
    return found


def _split_coefficients(text: str, why: str, problems: list[Problem]) -> dict[str, str]:
    """Coefficients that stand in one line, as in a package."""
    if not why:
        try:
            return parse_coefficients(text)
        except ValueError as error:
            why = str(error)
    problems.append(Problem("coefficients", text, why))
    return {}


def read_points(given: Any, problems: list[Problem]) -> tuple[Point, ...]:
    """The points of a dataset; a problem counts them from one."""
    if not isinstance(given, list) or not given or not all(isinstance(row, dict) for row in given):
        shown = "" if isinstance(given, list) else read_text(given)[0]
        problems.append(Problem("points", shown, "a dataset has at least one table [[points]]."))
        return ()
    rows = (read_fields(row, Point, "point", problems, place=f"points.{n}.") for n, row in enumerate(given, 1))
    return tuple(Point(**row) for row in rows)


def build_record(cls: type[Record], values: Mapping[str, Any], problems: list[Problem]) -> Record | None:
    """The record, or None with its problems added to those that are known."""
    said = {name for problem in problems for name in (problem.field, problem.field.split(".")[0])}
    if values.get("points") == () and not complain(KEY, values.get("key", ""), required=True):
        said.add("key")  # the record reports a dataset without points there
    try:
        return cls(**values)
    except InvalidRecord as error:
        found = (dataclasses.replace(problem, field=_count_from_one(problem.field)) for problem in error.problems)
        problems += [problem for problem in found if problem.field not in said]
        return None


def _count_from_one(field: str) -> str:
    """points.0.value as a person counts: points.1.value."""
    if not field.startswith("points."):
        return field
    _, number, name = field.split(".")
    return f"points.{int(number) + 1}.{name}"
