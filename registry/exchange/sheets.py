"""A record as a small text file that a person edits, and back.

The file is TOML: `kind`, `key`, the revision it was written from, then every
field of the record, empty ones too; coefficients and points stand in tables of
their own at the end.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from types import MappingProxyType
from typing import Any

from registry.errors import InvalidSheet, Problem
from registry.exchange.sheet_fields import (
    build_record,
    read_coefficients,
    read_fields,
    read_points,
    tell_allowed,
    text_fields,
)
from registry.exchange.toml_text import parse_toml, quote_toml, read_text
from registry.forms.catalogue import FORMS
from registry.naming import join_names, word_kind
from registry.records import KINDS, RECORDED, Correlation, Dataset, Point, Record

__all__ = ["Sheet", "gives_up", "read_sheet", "write_sheet", "write_template"]

NOTHING: Mapping[str, Any] = MappingProxyType({})
HOW_TO_END = "save and close; delete everything to give up."
HOW_TO_WRITE = "Text stands in quotes; numbers as printed, with or without."


@dataclass(frozen=True)
class Sheet:
    """What a sheet says.

    Attributes
    ----------
    record : Record
        The record.
    revision : int
        The revision it was written from; 0 if it states none.
    """

    record: Record
    revision: int


def write_sheet(record: Record, revision: int = 0, remark: Sequence[str] = ()) -> str:
    """A record as a sheet.

    Parameters
    ----------
    record : Record
        Of a kind in `RECORDED`.
    revision : int
        Its revision; 0 for a record that has none yet.
    remark : sequence of str
        More lines for the top, such as the position of the library.

    Returns
    -------
    str
        TOML; `read_sheet` gives an equal record.

    Examples
    --------
    >>> from registry.records import CompoundName
    >>> print(write_sheet(CompoundName(compound="water", name="oxidane"), revision=1))
    # The name water:oxidane, revision 1.
    # Change what is wrong, save and close; delete everything to give up.
    # Text stands in quotes; numbers as printed, with or without.
    <BLANKLINE>
    kind = "name"
    revision = 1
    compound = "water"
    name = "oxidane"
    <BLANKLINE>
    """
    told = f", revision {revision}" if revision else ""
    top = (
        f"The {word_kind(record.kind)} {record.key}{told}.",
        *remark,
        f"Change what is wrong, {HOW_TO_END}",
        HOW_TO_WRITE,
    )
    lines = [*_comments(top), "", *_head(record.kind, revision)]
    lines += [_line(field.name, getattr(record, field.name)) for field in text_fields(type(record))]
    if isinstance(record, Correlation):
        lines += ["", "[coefficients]", *(_line(name, text) for name, text in record.ordered_coefficients())]
    if isinstance(record, Dataset):
        lines += ["", *_comments([_tell_points()]), *_point_lines(record.points)]
    return "\n".join(lines) + "\n"


def write_template(kind: str, given: Mapping[str, Any] = NOTHING) -> str:
    """A sheet to be filled in, that says of every field what is allowed.

    Parameters
    ----------
    kind : str
        One of `RECORDED`.
    given : mapping of str to str
        What is known already; coefficients as a mapping of texts. A known form
        makes the sheet name its coefficients.

    Returns
    -------
    str
        TOML.
    """
    cls = KINDS[kind]
    top = (f"A new {word_kind(kind)}.", f"Fill it in, {HOW_TO_END}", HOW_TO_WRITE, 'What is optional may stay "".')
    lines = [*_comments(top), "", *_head(kind, 0), *_empty_lines(cls, given)]
    if cls is Correlation:
        lines += ["", *_coefficient_lines(given)]
    if cls is Dataset:
        lines += ["", *_comments(["One such table for each point."]), "[[points]]", *_empty_lines(Point)]
    return "\n".join(lines) + "\n"


def _head(kind: str, revision: int) -> list[str]:
    return [_line("kind", kind), *([f"revision = {revision}"] if revision else [])]


def _line(name: str, text: str) -> str:
    return f"{name} = {quote_toml(text)}"


def _comments(lines: Iterable[str]) -> list[str]:
    # a comment holds no control characters
    return ["# " + "".join(c if c.isprintable() else " " for c in part) for line in lines for part in line.splitlines()]


def _coefficient_lines(given: Mapping[str, Any]) -> Iterator[str]:
    """What a form takes, with what is given of it."""
    known: Mapping[str, str] = given.get("coefficients", {})
    form = FORMS.get(given.get("form", ""))
    if form is None:
        yield from _comments(['As printed, such as A = "8.07131"; `rangebook forms NAME` tells what a form takes.'])
    else:
        yield from _comments([f"As printed: {form.coefficients} of {form.equation}"])
    yield "[coefficients]"
    for name in dict.fromkeys((*(form.coefficients.required if form else ()), *known)):
        yield _line(name, known.get(name, ""))


def _empty_lines(cls: Any, given: Mapping[str, Any] = NOTHING) -> Iterator[str]:
    for field in text_fields(cls):
        optional = "" if field.metadata["required"] else "optional: "
        yield from _comments([optional + tell_allowed(field.name, field.metadata["cell"].allowed)])
        yield _line(field.name, given.get(field.name, ""))


def _tell_points() -> str:
    optional = [field.name for field in text_fields(Point) if not field.metadata["required"]]
    return f"A point may also have {join_names(optional, 'and')}."


def _point_lines(points: Sequence[Point]) -> Iterator[str]:
    """Each point with what it must have, and what any point has."""
    names = [f.name for f in text_fields(Point) if f.metadata["required"] or any(getattr(p, f.name) for p in points)]
    for number, point in enumerate(points):
        yield from ("", "[[points]]") if number else ("[[points]]",)
        yield from (_line(name, getattr(point, name)) for name in names)


def gives_up(text: str) -> bool:
    """True if nothing is left of a sheet but comments: whoever edited it wants nothing recorded.

    Examples
    --------
    >>> gives_up("# A new compound.\\n\\n"), gives_up('kind = "compound"')
    (True, False)
    """
    return not any(
        line.strip() and not line.lstrip().startswith("#") for line in text.removeprefix("\ufeff").splitlines()
    )


def read_sheet(text: str, place: str, kind: str = "") -> Sheet:
    """The record that a sheet holds.

    Parameters
    ----------
    text : str
        What a person saved; a byte order mark and CRLF are allowed.
    place : str
        The name of the file, for messages.
    kind : str
        The kind that is expected; a sheet that states none is taken for it.

    Returns
    -------
    Sheet
        The record, and the revision that the sheet was written from.

    Raises
    ------
    InvalidSheet
        With every bad field: what was given and what is allowed.

    Examples
    --------
    >>> read_sheet('kind = "name"\\ncompound = "water"\\nname = "oxidane"', "water.toml").record.key
    'water:oxidane'
    """
    try:
        table = parse_toml(text)
    except ValueError as error:
        why = f"{error} Every field is a line such as {_line('key', 'water')}; text stands in quotes."
        raise InvalidSheet(place, [Problem("", "", why)]) from None
    problems: list[Problem] = []
    found = _read_kind(table, kind, problems)
    if not found:
        raise InvalidSheet(place, problems)
    revision = _read_revision(table, problems)
    cls = KINDS[found]
    values = read_fields(table, cls, found, problems, ("kind", "revision"))
    tables: dict[str, Any] = {}
    if cls is Correlation:
        tables["coefficients"] = read_coefficients(table.get("coefficients", {}), problems)
    if cls is Dataset:
        tables["points"] = read_points(table.get("points", []), problems)
    record = build_record(cls, {**values, **tables}, problems)
    if record is None or problems:
        raise InvalidSheet(place, problems)
    return Sheet(record, revision)


def _read_kind(table: Mapping[str, Any], expected: str, problems: list[Problem]) -> str:
    given, why = read_text(table.get("kind", expected))
    if not why and given in RECORDED and expected in ("", given):
        return given
    allowed = (
        f"a sheet of a {word_kind(expected)} is asked for; {_line('kind', expected)} is allowed."
        if expected
        else f"one of {', '.join(RECORDED)} is allowed."
    )
    problems.append(Problem("kind", given, why or allowed))
    return ""


def _read_revision(table: Mapping[str, Any], problems: list[Problem]) -> int:
    given, why = read_text(table.get("revision", ""))
    if not given:
        return 0
    if why or not given.isascii() or not given.isdigit() or not 0 < int(given[:10]) < 10**9:
        allowed = "the number of the revision that the sheet was written from is allowed; leave it as it was."
        problems.append(Problem("revision", given, allowed))
        return 0
    return int(given)
