"""`table`: values over a span of temperature, as a table in several formats."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Annotated, Any

import typer

from registry.cli.options import (
    REFUSED,
    AsOfOption,
    AtmosphereOption,
    CompoundArgument,
    DraftsOption,
    EditionOption,
    JsonOption,
    LibraryOption,
    MetastableOption,
    PhaseOption,
    PropertyOption,
    look_at,
    open_chosen,
)
from registry.cli.screen import CAUTION, OF_ABSOLUTE, complain, print_json, say
from registry.errors import BadInput, quote

if TYPE_CHECKING:
    from collections.abc import Iterator

    from registry.reports.columns import Columns
    from registry.tables.tabulation import Table
    from registry.tables.tally import Tally

FORMATS = ("text", "csv", "markdown", "json", "xlsx")
SUFFIXES = {".txt": "text", ".csv": "csv", ".md": "markdown", ".markdown": "markdown", ".json": "json",
            ".xlsx": "xlsx"}  # fmt: skip


def table(
    compound: CompoundArgument,
    low: Annotated[
        str,
        typer.Option(
            "--from", metavar="T|P", help="Lower end: 0C, 273.15K; a pressure (1bar) makes a table of temperatures."
        ),
    ],
    high: Annotated[str, typer.Option("--to", metavar="T|P", help="Upper end; the last row if the steps meet it.")],
    step: Annotated[
        str,
        typer.Option(
            "--step",
            metavar="dT|dP",
            help="A difference: 5K, 9F, 10kPa. Without it pressures are 1, 2 and 5 times powers of ten.",
            show_default=False,
        ),
    ] = "",
    points: Annotated[
        int | None,
        typer.Option(
            "--points",
            metavar="N",
            show_default=False,
            help="How many rows: evenly spaced temperatures, or pressures with one ratio between neighbours.",
        ),
    ] = None,
    prop: PropertyOption = "vapor-pressure",
    phase: PhaseOption = "",
    unit: Annotated[
        str, typer.Option("--unit", "-u", metavar="UNIT", help="Unit of the values.", show_default=False)
    ] = "",
    temperature_unit: Annotated[
        str,
        typer.Option(
            "--temperature-unit",
            "-t",
            metavar="UNIT",
            help="Unit of the temperatures; else that of --from, or K.",
            show_default=False,
        ),
    ] = "",
    atmosphere: AtmosphereOption = "",
    one: Annotated[bool, typer.Option("--one", help="One correlation over the whole span, or a refusal.")] = False,
    metastable: MetastableOption = False,
    drafts: DraftsOption = False,
    edition: EditionOption = None,
    as_of: AsOfOption = None,
    form: Annotated[
        str,
        typer.Option(
            "--format",
            "-f",
            metavar="|".join(FORMATS),
            help="Else as the name of --output ends, else text.",
            show_default=False,
        ),
    ] = "",
    output: Annotated[
        Path | None, typer.Option("--output", "-o", metavar="FILE", help="Where to write; else to the screen.")
    ] = None,
    force: Annotated[bool, typer.Option("--force", help="Replace a file that is there.")] = False,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """Tabulate a value over a span of temperature, or temperatures at pressures.

    A line tells where the answering correlation changes and by how much the value jumps. What may not be answered is
    refused row by row (exit code 3); the others are answered.

    Example: rangebook table ethanol --from 0C --to 100C --step 5K
    """
    from registry.cli.spans import read_span
    from registry.reports.columns import Columns

    wanted = _choose_format(form, output, as_json)
    span = read_span(low, high, step, points, atmosphere, prop)
    with open_chosen(library) as book:
        past, label = look_at(book, edition, as_of)
        coverage = past.coverage(compound, property=prop, phase=phase or None, metastable=metastable, drafts=drafts)
        made = span.build(coverage, one)
        columns = Columns(made, *span.choose_units(made, unit, temperature_unit))
        if columns.value.is_gauge and columns.by_temperature:
            made.note = f"{made.note} {OF_ABSOLUTE}".lstrip()
        if output is not None:
            _spare_library(output, book.place)
        # where nothing answers there is no table, but an object that says so
        empty = not made.extremes()[0] and not (as_json and output is None)
        tally = _read_through(made) if empty else _write(columns, wanted, label, output, force)
    if as_json and output is not None:
        print_json(_describe_file(tally, None if empty else output, wanted))
    elif not as_json:
        if output is not None and not empty:
            say(f"{tally.rows:,} rows written to {output}.")
        _complain_refused(tally)
    if tally.refusals:
        raise typer.Exit(REFUSED)


def _choose_format(given: str, output: Path | None, as_json: bool) -> str:
    if given and given not in FORMATS:
        raise BadInput(f"--format {quote(given)} given; {', '.join(FORMATS)} are allowed.")
    if output is None:
        if as_json and given not in ("", "json"):
            raise BadInput(f"Both --json and --format {given} were given. Give one of them, or --output.")
        if given == "xlsx":
            raise BadInput("A workbook is not for the screen. Say where to write it: --output table.xlsx.")
        return "json" if as_json else given or "text"
    if str(output) == "-":
        raise BadInput("--output - names no file. Leave --output out: the table goes to the screen or into a pipe.")
    found = given or SUFFIXES.get(output.suffix.lower(), "")
    if not found:
        raise BadInput(f"{output} ends in none of {', '.join(SUFFIXES)}. Name the format with --format.")
    return found


def _spare_library(output: Path, place: str) -> None:
    """A table never takes the place of the library it is read from."""
    if output.exists() and Path(place).exists() and output.samefile(place):
        raise BadInput(f"{output} is the library itself. Give another name.")


def _read_through(made: Table) -> Tally:
    from registry.tables.tally import Tally

    tally = Tally(made)
    for _ in tally.blocks():
        pass
    return tally


def _write(columns: Columns, form: str, label: str, output: Path | None, force: bool) -> Tally:
    from registry.reports.placement import place_whole
    from registry.reports.workbook import check_workbook, write_workbook
    from registry.tables.tally import Tally

    tally = Tally(columns.table)
    if output is None:
        for part in _make_parts(columns, tally, form, label):
            say(part, end="")
        return tally
    if form == "xlsx":
        check_workbook(len(columns.table))
    with place_whole(output, replace=force) as place:
        if form == "xlsx":
            write_workbook(place, columns, tally, CAUTION)
        else:
            with place.open("x", encoding="utf-8", newline="") as file:
                file.writelines(_make_parts(columns, tally, form, label))
    return tally


def _make_parts(columns: Columns, tally: Tally, form: str, label: str) -> Iterator[str]:
    """The text of a table in parts, each of some thousand rows."""
    if form == "csv":
        from registry.reports.csv_table import write_csv

        return write_csv(columns, tally)
    if form == "markdown":
        from registry.reports.markdown_table import write_markdown

        return write_markdown(columns, tally, CAUTION)
    if form == "json":
        from registry.cli.table_document import write_document

        return write_document(columns, tally, label)
    from registry.cli.table_text import write_text

    return write_text(columns, tally, label)


def _describe_file(tally: Tally, output: Path | None, form: str) -> dict[str, Any]:
    return {
        "compound": tally.table.coverage.dossier.compound.key, "property": tally.table.coverage.property,
        "output": str(output) if output else None, "format": form, "rows": tally.rows, "refused": dict(tally.refused),
        "position": tally.table.coverage.dossier.position,
    }  # fmt: skip


def _complain_refused(tally: Tally) -> None:
    """Why rows were refused, one line a reason."""
    for refusal in tally.refusals:
        count = tally.refused[refusal.reason]
        complain(f"Refused ({refusal.reason}), {count} of {tally.rows} rows; the first: {refusal.explanation}")
