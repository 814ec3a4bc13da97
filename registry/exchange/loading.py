"""A package to records: all bad cells at once, or everything."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass
from pathlib import Path

from registry.admission import Find, check_identity, check_kinship, check_references, check_value
from registry.cells import KEY, complain
from registry.errors import CellProblem, InvalidPackage, InvalidRecord, Problem
from registry.exchange.coefficients import parse_coefficients
from registry.exchange.layout import FILES, File
from registry.exchange.package import read_package
from registry.exchange.rows import Row, parse_rows
from registry.records import Correlation, Dataset, Point, Record

__all__ = ["Item", "read_items"]

MOST_PROBLEMS = 10_000
"""Bad cells after which reading stops: a file of nothing but them says so early."""

Points = dict[str, list[tuple[int, Point]]]


@dataclass(frozen=True)
class Item:
    """A record of a package, with its standing where it has one."""

    record: Record
    standing: str
    standing_note: str
    file: str
    line: int

    def place(self, problem: Problem) -> CellProblem:
        """Where a problem of the record stands in the package."""
        return CellProblem(self.file, self.line, problem.field, problem.given, problem.allowed)


def read_items(path: Path, known: Find) -> list[Item]:
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

    def find(kind: str, key: str) -> Record | None:
        """A record of the package, else of the library."""
        item = by_key.get((kind, key))
        return item.record if item is not None else known(kind, key)

    problems += _check_together(items, find, known, _find_silent(rows, by_key, problems))
    if not problems:
        problems += (item.place(problem) for item in items for problem in check_value(item.record, find))
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


def _check_together(
    items: list[Item], find: Find, known: Find, silent: Callable[[str, str], bool]
) -> Iterator[CellProblem]:
    """Each record held against the others."""
    where = ", neither in the package nor in the library"
    for item in items:
        kinds = {(role, key): kind for role, kind, key in item.record.references()}
        for problem in check_references(item.record, find, where):
            if not silent(kinds[problem.field, problem.given], problem.given):
                yield item.place(problem)
        yield from (item.place(problem) for problem in check_kinship(item.record, find))
        before = known(item.record.kind, item.record.key)
        yield from (item.place(problem) for problem in check_identity(item.record, before))
