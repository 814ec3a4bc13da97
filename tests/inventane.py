"""An invented compound with invented correlations, of four forms, for tests of the rules."""

from __future__ import annotations

from registry.dossier import Entry
from registry.records import Compound, Correlation

COMPOUND = Entry(Compound(key="inventane", name="invented compound", formula="C4H10"), 1, 1)


def invent_correlation(number: int, low: int, width: int, evidence: str, percent: str, obtained: str, standing: str):
    form, coefficients = [
        ("antoine-ln", {"A": f"{16 + number * 0.01:.2f}", "B": "2800", "C": "-40"}),
        ("riedel", {"C1": "60.5", "C2": "-5200", "C3": "-6.1", "C4": "5E-06", "C5": "2"}),
        ("wagner-2.5-5", {"Tc": "620", "pc": "3800", "a": "-7.2", "b": "1.5", "c": "-2.2", "d": "-3.1"}),
        ("cox", {"T0": "350", "p0": "101.325", "A0": "2.8", "A1": "-1.9E-03", "A2": "1.9E-06"}),
    ][number % 4]
    record = Correlation(
        key=f"inventane-{number}", compound="inventane", property="vapor-pressure", phase="liquid", form=form,
        coefficients=coefficients, temperature_unit="K", value_unit="kPa", window_min=str(low),
        window_max=str(low + width), window_unit="K", window_basis="printed", temperature_scale="not-stated",
        evidence=evidence, uncertainty=percent, source="invented", locator="invented", obtained=obtained,
        metastable_below="250 K" if number % 3 == 0 else "",
    )  # fmt: skip
    return Entry(record, 1, 1, standing)
