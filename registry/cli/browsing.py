"""`list`, `show` and `coverage`: what is in the library."""

from __future__ import annotations

from collections import Counter
from typing import Annotated, Any

import typer

from registry.cli.options import (
    AsOfOption,
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
from registry.cli.screen import emphasize, name_past, print_json, print_table, say


def list_records(
    search: Annotated[str, typer.Argument(metavar="[TEXT]", help="Only compounds with this in a name.")] = "",
    edition: EditionOption = None,
    as_of: AsOfOption = None,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """List the compounds and what is recorded for each.

    Example: rangebook list
    """
    from registry.properties import PROPERTIES

    with open_chosen(library) as opened:
        book, label = look_at(opened, edition, as_of)
        wanted = search.casefold()
        compounds = [
            entry.record
            for entry in book.compounds()
            if any(
                wanted in text.casefold()
                for text in (entry.key, entry.record.name, entry.record.formula, entry.record.cas)
            )
        ]
        counts = Counter((e.record.compound, e.record.property) for e in book.correlations() if e.accepted)
        place, position = book.place, book.position
    if as_json:
        rows: list[dict[str, Any]] = [
            {
                "key": c.key, "name": c.name, "formula": c.formula, "cas": c.cas or None,
                "molar_mass_g_per_mol": c.grams_per_mole(),
                "correlations": {prop: counts[c.key, prop] for prop in PROPERTIES if counts[c.key, prop]},
            }
            for c in compounds
        ]  # fmt: skip
        print_json({"library": place, "position": position, "as_of": label or None, "compounds": rows})
        return
    short = ("vapour", "sublim.", "melting", "enthalpy", "density")
    where = f"{place}, position {position}{name_past(label)}"
    word = "compound" if len(compounds) == 1 else "compounds"
    say(f"{emphasize(str(len(compounds)))} {word} in {where}; accepted correlations for each.")
    say()
    table = [
        [c.key, c.formula, c.cas, f"{c.grams_per_mole():.4f}", *(str(counts[c.key, p] or "") for p in PROPERTIES)]
        for c in compounds
    ]
    print_table(("compound", "formula", "CAS", "g/mol", *short), table, right=(False, False, True, *([True] * 6)))


def show(
    key: Annotated[
        str, typer.Argument(metavar="KEY", help="Key of a compound, source, correlation, dataset or fixed point.")
    ],
    edition: EditionOption = None,
    as_of: AsOfOption = None,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """Show everything recorded under a key, as printed in its source.

    Example: rangebook show water-if97
    """
    from registry.cli.documents import describe_change, describe_entry
    from registry.cli.record_text import print_record

    with open_chosen(library) as opened:
        book, label = look_at(opened, edition, as_of)
        entry = book.entry(key)
        related = book.referring(entry.record.kind, entry.key)
        changes = {number: book.change(number) for number in (entry.change, entry.reviewed_in) if number}
        if as_json:
            document = {**describe_entry(entry), "recorded": describe_change(changes[entry.change])}
            if entry.reviewed_in:
                document["reviewed"] = describe_change(changes[entry.reviewed_in])
            if getattr(entry.record, "source", ""):
                document["citation"] = book.source_citation(entry.record.source)
            print_json({**document, "referred_to_by": [describe_entry(other) for other in related]})
            return
        print_record(book, label, entry, related, changes)


def coverage(
    compound: CompoundArgument,
    prop: PropertyOption = "vapor-pressure",
    phase: PhaseOption = "",
    metastable: MetastableOption = False,
    drafts: DraftsOption = False,
    edition: EditionOption = None,
    as_of: AsOfOption = None,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """Map temperature to who answers there, with gaps and seams.

    Example: rangebook coverage ethanol
    """
    from registry.cli.coverage_text import print_coverage
    from registry.cli.documents import describe_coverage

    with open_chosen(library) as opened:
        book, label = look_at(opened, edition, as_of)
        found = book.coverage(compound, property=prop, phase=phase or None, metastable=metastable, drafts=drafts)
        if as_json:
            print_json({**describe_coverage(found), "position": found.dossier.position, "as_of": label or None})
        else:
            print_coverage(found, label)
