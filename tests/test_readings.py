"""Temperatures as they are read or typed: uncertainty, coverage factor, scale."""

from __future__ import annotations

import pytest

from registry.errors import BadQuantity
from registry.readings import Reading, parse_reading

EXAMPLE = "such as 298.15+/-0.05K"
UNDERSTOOD = (
    ("298.15K", Reading(298.15)),
    ("298.15+/-0.05K", Reading(298.15, 0.05)),
    ("298.15 K +/- 0.05 K", Reading(298.15, 0.05)),
    ("25 ± 0.1 degC (k=2)", Reading(298.15, 0.1, 2.0)),
    ("25+-0.1C (k = 1)", Reading(298.15, 0.1, 1.0)),
    ("-40+/-1C", Reading(233.15, 1.0)),
    ("\u221240+/\u22121 °C", Reading(233.15, 1.0)),
    ("77+/-0.9F", Reading(298.15, 0.5)),
    ("373.15K (ITS-90)", Reading(373.15)),
    ("273.16+/-1K (ice-point-273.16)", Reading(273.16 - 0.01, 1.0, None, "ice-point-273.16", 273.16 - (273.16 - 0.01))),
)

REFUSED = (
    ("25+/-0.1", f"the unit stands behind the uncertainty, {EXAMPLE}."),
    ("25 degC +/- 0.1", f"the unit stands behind the uncertainty, {EXAMPLE}."),
    ("25+/-1C (k=2)(k=3)", "an uncertainty has one coverage factor, such as (k=2)."),
    ("25C (IPTS-68) (IPTS-48)", "a temperature is read on one scale, such as 100 degC (IPTS-68)."),
    ("25C (kelvin)", "what stands in brackets is a temperature scale (ITS-90, IPTS-68, IPTS-48 or ice-point-273.16) "
     "or a coverage factor (k=2)."),
    ("100 degC (ice-point-273.16)", "ice-point-273.16 is about kelvin; degC and degF count from the ice point itself: "
     "leave the scale out."),
    ("25+/-xK", f"an uncertainty is a number above zero, {EXAMPLE}."),
    ("25+/-0K", f"an uncertainty is a number above zero, {EXAMPLE}."),
    ("25+/--1K", f"an uncertainty is a number above zero, {EXAMPLE}."),
    ("25+/-1+/-2K", f"a temperature has one uncertainty, {EXAMPLE}."),
    ("25C (k=2)", f"a coverage factor belongs to an uncertainty, {EXAMPLE} (k=2)."),
    ("25+/-1C (k=0)", "a coverage factor is a number from 1 to 10, not '0'; write it as (k=2)."),
    ("25+/-1C (k=two)", "a coverage factor is a number from 1 to 10, not 'two'; write it as (k=2)."),
    ("25C (ITS-27)", "what stands in brackets is a temperature scale (ITS-90, IPTS-68, IPTS-48 or ice-point-273.16) "
     "or a coverage factor (k=2)."),
    ("500C (IPTS-48)", "no published conversion from IPTS-48 to ITS-90 reaches this temperature."),
    ("-300+/-1C", "a temperature lies above absolute zero, 0 K."),
)  # fmt: skip


@pytest.mark.parametrize(("text", "reading"), UNDERSTOOD, ids=[row[0] for row in UNDERSTOOD])
def test_a_reading_is_understood(text, reading):
    """The number in kelvin, its uncertainty in kelvin, its coverage factor."""
    assert parse_reading(text) == reading


@pytest.mark.parametrize(("text", "why"), REFUSED, ids=[row[0] for row in REFUSED])
def test_a_bad_reading_says_what_is_allowed(text, why):
    """What was given, as typed, and what is allowed."""
    with pytest.raises(BadQuantity) as caught:
        parse_reading(text)
    assert str(caught.value) == f"{text!r} cannot be read: {why}"


@pytest.mark.parametrize(
    ("celsius", "scale", "difference", "digits"),
    [
        # t68 - t90: CRC Handbook table of the differences between the scales, which has t90 - t68
        (-100, "IPTS-68", -0.013, 1e-3), (50, "IPTS-68", 0.013, 5e-4), (100, "IPTS-68", 0.026, 5e-4),
        (200, "IPTS-68", 0.040, 5e-4),
        # t48 - t90, the same table
        (50, "IPTS-48", 0.023, 1e-3), (100, "IPTS-48", 0.026, 5e-4), (200, "IPTS-48", -0.003, 5e-4),
    ],
)  # fmt: skip
def test_a_number_on_an_older_scale_becomes_the_its90_temperature(celsius, scale, difference, digits):
    """A temperature named on IPTS-68 or IPTS-48 shifts by the published difference."""
    reading = parse_reading(f"{celsius} degC ({scale})")
    assert reading.shift == pytest.approx(difference, abs=digits + 1e-4)
    assert reading.kelvin == pytest.approx(celsius + 273.15 - reading.shift, abs=1e-12)
    assert parse_reading(f"{celsius}C ({scale.lower().replace('-', ' ')})") == reading


def test_a_long_text_is_not_searched_for_brackets():
    """Blanks before a bracket cost their square: a text longer than any temperature is refused first."""
    assert parse_reading("25+/-1C" + " " * 150 + "(k=2)") == Reading(298.15, 1.0, 2.0)
    with pytest.raises(BadQuantity, match="a temperature is a number with a unit"):
        parse_reading("25+/-1C" + " " * 200 + "(k=2)")


def test_an_uncertainty_is_brought_to_one_coverage_factor():
    """One standard deviation of 0.1 K is 0.2 K at coverage factor 2; without a factor the number counts as it is."""
    assert parse_reading("25+/-0.1C (k=1)").expanded_uncertainty == pytest.approx(0.2, rel=1e-15)
    assert parse_reading("25+/-0.1C").expanded_uncertainty == 0.1
    assert parse_reading("25C").expanded_uncertainty == 0.0
