"""A package to records: all bad cells at once, or everything."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass
from pathlib import Path

from registry.cells import KEY, complain
from registry.errors import CellProblem, InvalidPackage, InvalidRecord, Problem
from registry.exchange.coefficients import parse_coefficients
from registry.exchange.layout import FILES, File
from registry.exchange.package import read_package
from registry.exchange.rows import Row, parse_rows
from registry.numerals import parse_number
from registry.properties import PROPERTIES, Property
from registry.quantities import UNITS
from registry.records import Correlation, Dataset, Point, Preference, PrintedValue, Record

__all__ = ["Item", "read_items"]

MOST_PROBLEMS = 10_000
"""Bad cells after which reading stops: a file of nothing but them says so early."""

Known = Callable[[str, str], Record | None]
Points = dict[str, list[tuple[int, Point]]]


@dataclass(frozen=True)
class Item:
    """A record of a package, with its standing where it has one."""

    record: Record
    standing: str
    standing_note: str
    file: str
    line: int


def read_items(path: Path, known: Known) -> list[Item]:
    """The records of a package.

    Parameters
    ----------
    path : Path
        A folder or .zip.
    known : callable
        ``known(kind, key)`` gives a record that the library has already.

    Returns
    -------
    list of Item
        In the order of files and lines.

    Raises
    ------
    InvalidPackage
        With every bad place: file, line, column, what was given and what is
        allowed.
    """
    problems: list[CellProblem] = []
    files = read_package(path)
    rows = {name: parse_rows(FILES[name], data, problems) for name, data in files.items()}
    items = list(_build_items(rows, problems))
    by_key = {(item.record.kind, item.record.key): item for item in items}
    problems += _check_references(items, by_key, known, _find_silent(rows, by_key, problems))
    problems += _check_against_known(items, known)
    if problems:
        problems.sort(key=lambda p: (list(FILES).index(p.file) if p.file in FILES else -1, p.line))
        raise InvalidPackage(str(path), problems)
    return items


def _find_silent(
    rows: Mapping[str, list[Row]], by_key: Mapping[tuple[str, str], Item], problems: list[CellProblem]
) -> Callable[[str, str], bool]:
    """Which references are not reported on top: into a file, row or key that could not be read."""
    unread = {p.file for p in problems if p.file in FILES and (p.column == "key" or not rows.get(p.file))}
    silent_kinds = {FILES[name].kind for name in unread}
    failed = {
        (kind, row.cells.get("key", ""))
        for name, of_file in rows.items()
        for row in of_file
        if (kind := FILES[name].kind) and (kind, row.cells.get("key", "")) not in by_key
    }
    return lambda kind, key: kind in silent_kinds or (kind, key) in failed


def _build_items(rows: Mapping[str, list[Row]], problems: list[CellProblem]) -> Iterator[Item]:
    points = _group_points(rows.get("points.csv", []), problems)
    for name, file in FILES.items():
        if name == "points.csv" or name not in rows:
            continue
        seen: dict[tuple[str, ...], int] = {}
        for row in rows[name]:
            if len(problems) > MOST_PROBLEMS:
                return
            if key_problem := _check_key(file, row, seen):
                problems.append(key_problem)
                continue
            item = _build_item(file, row, points, problems)
            if item is not None:
                yield item
    if any(p.file == "datasets.csv" and p.line <= 1 for p in problems):
        return  # a file that could not be read has no rows to belong to
    known = {row.cells.get("key") for row in rows.get("datasets.csv", [])}
    problems += [
        CellProblem("points.csv", line, "dataset", key, "there is no such dataset in datasets.csv.")
        for key, entries in points.items()
        if key not in known
        for line, _ in entries
    ]


def _check_key(file: File, row: Row, seen: dict[tuple[str, ...], int]) -> CellProblem | None:
    key = tuple(row.cells[name].casefold() for name in file.key)
    if key in seen:
        shown = ", ".join(row.cells[name] for name in file.key)
        return CellProblem(file.name, row.line, file.key[-1], shown, f"line {seen[key]} has the same key.")
    seen[key] = row.line
    return None


def _group_points(rows: list[Row], problems: list[CellProblem]) -> Points:
    """The points of each dataset with their lines."""
    grouped: Points = {}
    for row in rows:
        cells = dict(row.cells)
        dataset = cells.pop("dataset")
        if why := complain(KEY, dataset, required=True):
            problems.append(CellProblem("points.csv", row.line, "dataset", dataset, why))
        else:
            grouped.setdefault(dataset, []).append((row.line, Point(**cells)))
    return grouped


def _build_item(file: File, row: Row, points: Points, problems: list[CellProblem]) -> Item | None:
    before = len(problems)
    fields: dict[str, object] = dict(row.cells)
    standing, note = str(fields.pop("standing", "")), str(fields.pop("standing_note", ""))
    for column in file.columns:
        text = {"standing": standing, "standing_note": note}.get(column.name)
        if text is not None and (why := complain(column.cell, text, column.required)):
            problems.append(CellProblem(file.name, row.line, column.name, text, why))
    if standing in ("withdrawn", "declined") and not note:
        why = f"a record that is {standing} says why: fill standing_note."
        problems.append(CellProblem(file.name, row.line, "standing_note", "", why))
    if file.record is Correlation:
        fields["coefficients"] = _parse_coefficients(file, row, problems)
    lines: list[int] = []
    if file.record is Dataset:
        of_dataset = points.get(row.cells["key"], [])
        lines = [line for line, _ in of_dataset]
        fields["points"] = tuple(point for _, point in of_dataset)
    try:
        record = file.record(**fields)  # type: ignore[arg-type]
    except InvalidRecord as error:
        said = {problem.column for problem in problems[before:]}
        found = (_place_problem(file, row, lines, problem) for problem in error.problems)
        problems += [problem for problem in found if problem.column not in said or problem.file != file.name]
        return None
    assert isinstance(record, Record)
    return Item(record, standing, note, file.name, row.line) if len(problems) == before else None


def _place_problem(file: File, row: Row, lines: list[int], problem: Problem) -> CellProblem:
    """Where a problem of a record stands: in its own row, or in that of one of its points."""
    if problem.field.startswith("points."):
        _, number, column = problem.field.split(".")
        return CellProblem("points.csv", lines[int(number)], column, problem.given, problem.allowed)
    return CellProblem(file.name, row.line, problem.field, problem.given, problem.allowed)


def _parse_coefficients(file: File, row: Row, problems: list[CellProblem]) -> dict[str, str]:
    """Names and texts; empty if they cannot be read."""
    text = row.cells["coefficients"]
    try:
        return parse_coefficients(text)
    except ValueError as error:
        problems.append(CellProblem(file.name, row.line, "coefficients", text, str(error)))
        return {}


def _check_references(
    items: list[Item], by_key: Mapping[tuple[str, str], Item], known: Known, silent: Callable[[str, str], bool]
) -> Iterator[CellProblem]:
    for item in items:
        for role, kind, key in item.record.references():
            if (kind, key) not in by_key and not silent(kind, key) and known(kind, key) is None:
                why = f"there is no {kind} with this key, neither in the package nor in the library."
                yield CellProblem(item.file, item.line, role, key, why)
    yield from _check_kinship(items, by_key, known)


def _check_kinship(items: list[Item], by_key: Mapping[tuple[str, str], Item], known: Known) -> Iterator[CellProblem]:
    """What must fit the correlations that a record names: units, signs, one compound and property."""

    def find(key: str) -> Correlation | None:
        item = by_key.get(("correlation", key))
        record = item.record if item else known("correlation", key)
        return record if isinstance(record, Correlation) else None

    for item in items:
        record = item.record
        if isinstance(record, PrintedValue) and (of := find(record.correlation)):
            yield from _check_printed_value(item, record, PROPERTIES[of.property])
        elif isinstance(record, Preference) and (one := find(record.correlation)) and (two := find(record.over)):
            yield from _check_preference(item, one, two)


def _check_preference(item: Item, one: Correlation, two: Correlation) -> Iterator[CellProblem]:
    if (one.compound, one.property, one.phase) == (two.compound, two.property, two.phase):
        return
    why = (
        f"it is for {two.property} of {two.compound}, {one.key} for {one.property} of {one.compound}; "
        "a preference is between correlations of one compound, property and phase."
    )
    yield CellProblem(item.file, item.line, "over", two.key, why)


def _check_printed_value(item: Item, record: PrintedValue, prop: Property) -> Iterator[CellProblem]:
    if UNITS[record.value_unit].dimension != prop.dimension:
        why = f"{prop.name} is in a {prop.dimension} unit."
        yield CellProblem(item.file, item.line, "value_unit", record.value_unit, why)
    elif prop.positive and parse_number(record.value) <= 0:
        yield CellProblem(item.file, item.line, "value", record.value, f"a {prop.name} is above zero.")


def _check_against_known(items: list[Item], known: Known) -> Iterator[CellProblem]:
    """A key keeps what it is for: another compound, property or phase needs another key."""
    for item in items:
        before = known(item.record.kind, item.record.key)
        for field in ("compound", "property", "phase", "quantity", "correlation", "over"):
            given, owner = getattr(item.record, field, ""), getattr(before, field, "")
            if owner and owner != given:
                why = f"the key is recorded for {owner}; another {field} needs another key."
                yield CellProblem(item.file, item.line, field, given, why)
