"""What a team records in the state machine's libraries: invented compounds, correlations and sources, no data."""

from __future__ import annotations

import math
from typing import Any

from hypothesis import strategies as st
from plain_register import Name

from registry.records import Correlation, FixedPoint, Preference, Record, Source

MARK = "Invented for a test; not data."
COMPOUNDS = ("inventane", "fictane")
SOURCES = ("source-a", "source-b", "source-c")
PEOPLE = ("Ann", "Bob", "Cid")
CORRELATIONS = {f"{compound}-{letter}": compound for compound in COMPOUNDS for letter in "pqr"}
POINTS = {
    f"{compound}-{name}": (compound, quantity)
    for compound in COMPOUNDS
    for name, quantity in (
        ("critical", "critical-temperature"),
        ("critical-other", "critical-temperature"),
        ("triple", "triple-point-temperature"),
    )
}
NAMES: tuple[Name, ...] = (
    *(("correlation", key) for key in CORRELATIONS), *(("fixed-point", key) for key in POINTS),
    *(("source", key) for key in SOURCES),
)  # fmt: skip
evidence = st.sampled_from(["evaluated", "measured", "compiled"])


@st.composite
def correlations(draw: Any, key: str) -> dict[str, Any]:
    """What a correlation says."""
    celsius = draw(st.booleans())
    return {
        "compound": CORRELATIONS[key],
        "coefficients": (draw(st.integers(58, 66)) / 10.0, 1250.0, 230.0 if celsius else -40.0),
        "temperature_unit": "degC" if celsius else "K",
        "value_unit": draw(st.sampled_from(["kPa", "Torr", "mmHg", "Pa"])),
        "window": (draw(st.sampled_from([250.0, 300.0, 340.0])), draw(st.sampled_from([350.0, 400.0, 460.0]))),
        "evidence": draw(evidence),
        "uncertainty": draw(st.sampled_from([(), ((math.inf, 1.0),), ((350.0, 2.0), (math.inf, 0.5))])),
        "source": draw(st.sampled_from(SOURCES)),
    }


@st.composite
def points(draw: Any, key: str) -> dict[str, Any]:
    """What a fixed point says."""
    compound, quantity = POINTS[key]
    values = [380.0, 400.0, 420.0] if quantity == "critical-temperature" else [262.25, 290.0]
    return {
        "compound": compound, "quantity": quantity, "kelvin": draw(st.sampled_from(values)),
        "rounded": draw(st.booleans()), "evidence": draw(evidence), "source": draw(st.sampled_from(SOURCES)),
    }  # fmt: skip


def contents(name: Name) -> st.SearchStrategy[dict[str, Any]]:
    """What may be said under a key."""
    kind, key = name
    if kind == "source":
        return st.fixed_dictionaries({"year": st.sampled_from([0, 1999, 2008])})
    return correlations(key) if kind == "correlation" else points(key)


def build_record(name: Name, content: dict[str, Any]) -> Record:
    """The record that says so."""
    kind, key = name
    if kind == "source":
        year = str(content["year"] or "")
        return Source(key=key, type="document", citation=f"{MARK} {key}", year=year, note=MARK)
    if kind == "preference":
        return Preference(key=key, **content)
    ground = {
        "key": key, "compound": content["compound"], "temperature_scale": "ITS-90", "evidence": content["evidence"],
        "source": content["source"], "locator": "invented", "obtained": "seen", "note": MARK,
    }  # fmt: skip
    if kind == "fixed-point":
        qualifier = "rounded" if content["rounded"] else ""
        value = str(content["kelvin"])
        return FixedPoint(quantity=content["quantity"], value=value, unit="K", qualifier=qualifier, **ground)
    pieces = [
        f"{percent:g} %" + ("" if math.isinf(upper) else f" up to {upper:g} K")
        for upper, percent in content["uncertainty"]
    ]
    a, b, c = map(str, content["coefficients"])
    low, high = map(str, content["window"])
    return Correlation(
        property="vapor-pressure", phase="liquid", form="antoine-log10", coefficients={"A": a, "B": b, "C": c},
        temperature_unit=content["temperature_unit"], value_unit=content["value_unit"], window_min=low,
        window_max=high, window_unit="K", window_basis="printed", uncertainty="; ".join(pieces), **ground,
    )  # fmt: skip


FIRST: list[tuple[Name, dict[str, Any], str, str]] = [
    *((("source", key), {"year": year}, "", "") for key, year in zip(SOURCES, (1999, 2008, 0), strict=True)),
    *(
        (
            ("correlation", f"{compound}-{letter}"),
            {
                "compound": compound, "coefficients": (a, 1250.0, -40.0), "temperature_unit": "K", "value_unit": "kPa",
                "window": window, "evidence": "compiled", "uncertainty": (), "source": source,
            },
            "accepted",
            "",
        )
        for compound in COMPOUNDS
        for letter, a, window, source in (
            ("p", 6.0, (250.0, 350.0), SOURCES[0]),
            ("q", 6.1, (300.0, 460.0), SOURCES[1]),
        )
    ),
    *(
        (
            ("fixed-point", f"{compound}-critical"),
            {
                "compound": compound, "quantity": "critical-temperature", "kelvin": 420.0, "rounded": False,
                "evidence": "measured", "source": SOURCES[2],
            },
            "accepted",
            "",
        )
        for compound in COMPOUNDS
    ),
    *(
        # over the wider one of the two, which would answer otherwise
        (
            ("preference", f"{compound}-p-over-{compound}-q"),
            {"correlation": f"{compound}-p", "over": f"{compound}-q", "reason": MARK},
            "accepted",
            "",
        )
        for compound in COMPOUNDS
    ),
]  # fmt: skip
"""What every library begins with: all of it accepted."""
