"""A table as one JSON object, written while its rows are made."""

from __future__ import annotations

import json
import math
from collections.abc import Iterator
from typing import Any

from registry.cli.boiling_text import describe_inverse_refusal
from registry.cli.documents import describe_refusal
from registry.inverse.refusals import InverseRefusal
from registry.refusals import Refusal
from registry.reports.columns import Columns, Line
from registry.tables.tabulation import Block
from registry.tables.tally import Tally, Used
from registry.uncertainty import COVERAGE_FACTOR

__all__ = ["write_document"]


def write_document(columns: Columns, tally: Tally, label: str) -> Iterator[str]:
    """The table as the text of one JSON object, block by block.

    Parameters
    ----------
    columns : Columns
        The units.
    tally : Tally
        The rows, which it counts.
    label : str
        How the position is called that is looked at; empty for the newest.

    Yields
    ------
    str
        A part of the text.
    """
    head = _dump(_describe_head(columns))[:-1]
    yield f'{head},\n"rows": ['
    comma = ""
    for block in tally.blocks():
        rows = ",\n".join(_dump(row) for row in _describe_rows(columns, block))
        yield f"{comma}\n{rows}"
        comma = ","
    tail = ",\n".join(f'"{name}": {_dump(told)}' for name, told in _describe_tail(columns, tally, label).items())
    yield f"\n],\n{tail}}}\n"


def _dump(content: Any) -> str:
    return json.dumps(content, ensure_ascii=False, allow_nan=False)


def _finite(number: float) -> float | None:
    return number if math.isfinite(number) else None


def _describe_head(columns: Columns) -> dict[str, Any]:
    coverage = columns.table.coverage
    return {
        "compound": coverage.dossier.compound.key, "property": coverage.property, "phase": coverage.phase or None,
        "unit": columns.value.name, "temperature_unit": columns.temperature.name, "coverage_factor": COVERAGE_FACTOR,
        "note": columns.table.note or None,
    }  # fmt: skip


def _describe_rows(columns: Columns, block: Block) -> Iterator[dict[str, Any]]:
    for kelvin, line in zip(block.kelvin.tolist(), columns.lines(block), strict=True):
        yield _describe_row(columns, kelvin, line)


def _describe_row(columns: Columns, kelvin: float, line: Line) -> dict[str, Any]:
    temperature, value = (line.given, line.found) if columns.by_temperature else (line.found, line.given)
    return {
        "temperature_K": _finite(kelvin),
        "temperature": _finite(temperature),
        "value": _finite(value),
        "expanded_percent" if columns.by_temperature else "expanded_K": _finite(line.expanded),
        "correlation": line.correlation or None,
        "revision": line.revision,
        "marks": line.note.marks,
        "reason": line.note.reason or None,
    }


def _describe_tail(columns: Columns, tally: Tally, label: str) -> dict[str, Any]:
    return {
        "seams": [
            {"row": row, "temperature_K": s.temperature, "below": s.below, "above": s.above,
             "jump_percent": _finite(s.jump_percent)}
            for row, s in tally.seams
        ],
        "gaps": [{"row": row, "from_K": gap.low, "to_K": gap.high} for row, gap in tally.gaps],
        "correlations": [_describe_used(used) for used in tally.used],
        "refusals": [{"rows": tally.refused[r.reason], **_describe_refusal(r)} for r in tally.refusals],
        "position": columns.table.coverage.dossier.position,
        "as_of": label or None,
    }  # fmt: skip


def _describe_refusal(refusal: Refusal) -> dict[str, Any]:
    return describe_inverse_refusal(refusal) if isinstance(refusal, InverseRefusal) else describe_refusal(refusal)


def _describe_used(used: Used) -> dict[str, Any]:
    candidate, record = used.candidate, used.candidate.record
    return {
        "correlation": record.key, "revision": candidate.entry.revision, "phase": record.phase,
        "window_K": list(record.window_kelvin()), "evidence": record.evidence,
        "counts_as": candidate.counted.evidence, "standing": candidate.entry.standing, "obtained": record.obtained,
        "source": {"key": record.source, "citation": used.citation, "locator": record.locator},
        "cautions": list(used.cautions),
    }  # fmt: skip
