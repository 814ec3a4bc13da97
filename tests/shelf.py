"""The published shelf as the numeric tests read it: straight from its files, with no loader in between."""

from __future__ import annotations

import csv
import dataclasses
from pathlib import Path

from registry.curve import Curve
from registry.records import Compound, Correlation
from registry.scales import SCALES

ROOT = Path(__file__).parents[1]
FACTS = ROOT / "tests" / "facts"
PUBLISHED = ROOT / "seed_demo" / "published"


def read_rows(path: Path) -> list[dict[str, str]]:
    """The rows of one CSV file."""
    with path.open(encoding="utf-8", newline="") as file:
        return list(csv.DictReader(file, strict=True))


def read_coefficients(text: str) -> dict[str, str]:
    """``A=8.07131; B=1730.63`` as names and printed numbers."""
    return dict(part.split("=") for part in text.split("; "))


def _fill(cls: type, row: dict[str, str]) -> dict[str, str]:
    return {field.name: row[field.name] for field in dataclasses.fields(cls) if field.name in row}


def _read_correlation(row: dict[str, str]) -> Correlation:
    return Correlation(**{**_fill(Correlation, row), "coefficients": read_coefficients(row["coefficients"])})


CORRELATIONS = {row["key"]: _read_correlation(row) for row in read_rows(PUBLISHED / "correlations.csv")}
MASSES = {
    row["key"]: Compound(**_fill(Compound, row)).grams_per_mole() for row in read_rows(PUBLISHED / "compounds.csv")
}


def on_own_scale(curve: Curve) -> Curve:
    """The curve fed with temperatures as its source counts them: no scale conversion."""
    return dataclasses.replace(curve, scale=SCALES["ITS-90"])


def own_curve(key: str) -> Curve:
    """The curve of a shelf correlation on its own temperature scale."""
    record = CORRELATIONS[key]
    return on_own_scale(Curve.of(record, MASSES[record.compound]))
