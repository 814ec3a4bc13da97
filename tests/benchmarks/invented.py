"""Invented compounds to measure on: their numbers are made up and no data.

Beside each record stands the plain NumPy expression that an engineer would
write for it, with no program around it.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from registry.exchange.dumping import dump_items
from registry.records import Compound, Correlation, FixedPoint, Source

Array = NDArray[np.float64]
Plain = Callable[[Array], Array]

MARK = "Invented for the rangebook benchmarks; not data."
SOURCE = Source(key="invented-benchmarks", type="document", citation=f"{MARK} No such publication exists.", note=MARK)
ACCEPTED = ("accepted", "")


def _correlation(key: str, compound: str, form: str, window: tuple[str, str], **coefficients: str) -> Correlation:
    return Correlation(
        key=key, compound=compound, property="vapor-pressure", phase="liquid", form=form, coefficients=coefficients,
        temperature_unit="K", value_unit="Pa", window_min=window[0], window_max=window[1], window_unit="K",
        window_basis="printed", temperature_scale="ITS-90", evidence="compiled", source=SOURCE.key,
        locator="invented", obtained="seen", note=MARK,
    )  # fmt: skip


THREE_FORMS = (
    _correlation(
        "invented-antoine", "invented-three-forms", "antoine-ln", ("300", "400"),
        A="21.1306", B="3214.375", C="-60.202",
    ),
    _correlation(
        "invented-riedel", "invented-three-forms", "riedel", ("400", "500"),
        C1="58.24653", C2="-6419.57", C3="-5.106341", C4="6.623925e-18", C5="6",
    ),
    _correlation(
        "invented-wagner", "invented-three-forms", "wagner-2.5-5", ("500", "600"),
        Tc="600", pc="4.0e6", a="-7.6", b="1.9", c="-2.9", d="-3.4",
    ),
)  # fmt: skip
"""Adjoining windows of three forms, from above the triple point to the critical point."""

FIVE_WINDOWS = tuple(
    _correlation(f"invented-window-{i}", "invented-five-windows", "antoine-ln", window, A=a, B=b, C=c)
    for i, (window, a, b, c) in enumerate(
        (
            (("300", "350"), "21.2690", "3288.908", "-57.1296"),
            (("350", "400"), "20.9870", "3151.075", "-63.2285"),
            (("400", "450"), "21.0618", "3176.500", "-61.7694"),
            (("450", "500"), "21.3302", "3422.563", "-46.8790"),
            (("500", "550"), "22.1753", "4195.941", "2.0157"),
        ),
        1,
    )
)
"""Five adjoining windows of Antoine's equation; the value jumps by some percent at each seam."""


def write_package(path: Path, correlations: Sequence[Correlation]) -> Path:
    """A package with one invented compound, everything accepted."""
    compound = correlations[0].compound
    fixed = (("triple-point-temperature", "290", "K"), ("critical-temperature", "600", "K"))
    records = [
        Compound(key=compound, name=f"{compound} (no substance)", formula="C7H10ClFO", note=MARK),
        SOURCE,
        *correlations,
        *(
            FixedPoint(
                key=f"{compound}-{quantity}", compound=compound, quantity=quantity, value=value, unit=unit,
                temperature_scale="ITS-90", evidence="compiled", source=SOURCE.key, locator="invented",
                obtained="seen", note=MARK,
            )
            for quantity, value, unit in fixed
        ),
    ]  # fmt: skip
    reviewed = (Correlation, FixedPoint)
    dump_items(path, [(record, ACCEPTED if isinstance(record, reviewed) else ("", "")) for record in records])
    return path


def write_plain(record: Correlation) -> Plain:
    """The plain expression of a record: kelvin in, pascal out."""
    c = {name: float(text) for name, text in record.coefficients.items()}
    return {"antoine-ln": _antoine, "riedel": _riedel, "wagner-2.5-5": _wagner}[record.form](**c)


def _antoine(A: float, B: float, C: float) -> Plain:
    return lambda t: np.exp(A - B / (t + C))


def _riedel(C1: float, C2: float, C3: float, C4: float, C5: float) -> Plain:
    return lambda t: np.exp(C1 + C2 / t + C3 * np.log(t) + C4 * t**C5)


def _wagner(Tc: float, pc: float, a: float, b: float, c: float, d: float) -> Plain:
    def plain(t: Array) -> Array:
        tau = 1.0 - t / Tc
        return pc * np.exp((a * tau + b * tau**1.5 + c * tau**2.5 + d * tau**5) * Tc / t)

    return plain
