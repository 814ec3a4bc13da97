"""Tables row by row: the same as a lookup, at exact places, with every seam, gap and refusal told."""

from __future__ import annotations

import dataclasses
import math
import tracemalloc
from fractions import Fraction

import numpy as np
import pytest
from inventane import COMPOUND, invent_correlation

from registry.coverage import build_coverage
from registry.dossier import Dossier
from registry.errors import BadInput, Refused, UnknownKey
from registry.numerals import last_digit_unit, parse_number
from registry.quantities import UNITS, convert
from registry.scales import SCALES
from registry.tables.conversion import Conversion
from registry.tables.spacing import space_pressures, space_temperatures
from registry.tables.tabulation import BLOCK, build_table
from registry.tables.tally import Tally
from tests.shelf import FACTS, PUBLISHED, read_rows

SHELVES = ("published", "scenario")


def _subjects(library) -> list[tuple[str, str]]:
    return sorted({(e.record.compound, e.record.property) for e in library.correlations()})


def _look(library, compound, kelvin, **request):
    try:
        return library.lookup(compound, kelvin, **request)
    except Refused as error:
        return error.refusal


def _row_as_looked_up(row, found) -> bool:
    """Whether a row says what a lookup gave."""
    if hasattr(found, "reason"):
        return math.isnan(row.value) and row.correlation == "" and row.note.reason == found.reason
    return (row.value, row.correlation, row.note.reason) == (found.value, found.correlation.key, "")


# against lookup


@pytest.mark.parametrize("shelf", SHELVES)
@pytest.mark.parametrize(("metastable", "drafts"), [(False, False), (True, False), (False, True)])
def test_every_row_is_what_a_lookup_gives(shelf, metastable, drafts, request):
    """Value, correlation, stated uncertainty, reason and explanation, from below every window to above."""
    library = request.getfixturevalue(shelf)
    asked = {"metastable": metastable, "drafts": drafts}
    rows = 0
    for compound, prop in _subjects(library):
        windows = [c.record.window_kelvin() for c in library.coverage(compound, property=prop).candidates]
        low = math.floor(max(1.0, min(w[0] for w in windows) - 7.0))
        high = math.ceil(max(w[1] for w in windows) + 7.0)
        table = library.tabulate(compound, low, high, points=61, property=prop, **asked)
        for row in table:
            found = _look(library, compound, row.temperature, property=prop, **asked)
            assert _row_as_looked_up(row, found), (compound, prop, row)
            if row.note.reason:
                assert table.refusal(row) == found
            else:
                assert row.expanded == found.budget.expanded_percent
                assert ("draft" in row.note.marks) == (found.standing == "draft")
                said = any("metastable" in caution for caution in found.cautions)
                assert ("metastable" in row.note.marks) == said
            rows += 1
    assert rows == 61 * len(_subjects(library))


@pytest.mark.parametrize("shelf", SHELVES)
def test_bounds_and_their_neighbours_are_what_a_lookup_gives(shelf, request):
    """At every edge of a stretch and of a window, and one double beside it, the reason too."""
    library = request.getfixturevalue(shelf)
    for compound, prop in _subjects(library):
        coverage = library.coverage(compound, property=prop)
        edges = {s.low for s in coverage.stretches} | {bound for c in coverage.candidates for bound in c.reach}
        edges |= {coverage.limits.lower, coverage.limits.upper}
        near = {k for e in edges for k in (math.nextafter(e, 0.0), e, math.nextafter(e, math.inf), e - 1e-9, e + 1e-9)}
        usable = sorted(k for k in near if 0.5 < k < 1e5)
        listed = dataclasses.replace(space_pressures(Fraction(1), Fraction(2), UNITS["K"], None, None),
                                     places=tuple(map(Fraction, usable)))  # fmt: skip
        for row in build_table(coverage, listed, usable[0], usable[-1]):
            assert _row_as_looked_up(row, _look(library, compound, row.temperature, property=prop)), (compound, row)


def test_a_view_of_the_past_tabulates_too(published):
    """At a position the table is read at it."""
    table = published.at(1).tabulate("water", 300.0, 310.0, step=5.0)
    assert table.coverage.dossier.position == 1
    assert [row.value for row in table] == [published.lookup("water", t).value for t in (300.0, 305.0, 310.0)]


def test_uncertainties_are_brought_to_coverage_factor_2():
    """A percent stated with k=1 doubles, one with k=3 shrinks, pascals become percent of the value."""
    entry = invent_correlation(0, 300, 60, "measured", "", "seen", "accepted")
    stated = "0.5 % (k=1) up to 320 K; 0.3 % (k=3) up to 340 K; 20 Pa"
    record = dataclasses.replace(entry.record, uncertainty=stated)
    coverage = build_coverage(Dossier(COMPOUND, (dataclasses.replace(entry, record=record),)), "vapor-pressure")
    spacing = space_temperatures(Fraction(310), Fraction(350), Fraction(20), None)
    rows = list(build_table(coverage, spacing, 310.0, 350.0))
    assert [row.expanded for row in rows] == pytest.approx([1.0, 0.2, 2000.0 / rows[2].value], rel=1e-14)


# a published table


def test_the_crc_water_table_is_reproduced(published):
    """CRC Handbook, 73rd ed., vapor pressure of water, 0 to 99 degC, in steps of 1 K.

    Within the printed digits and what IF97 states (0.025 %), once the printed temperatures are read as IPTS-68; as they
    stand, the known deviations. 38 degC is a misprint (facts/known_deviations.csv).
    """
    printed = [p for p in read_rows(PUBLISHED / "points.csv") if p["dataset"] == "water-vapor-pressure-crc-73"]
    known = {
        k["temperature"]: float(k["deviation_percent"]) for k in read_rows(FACTS / "known_deviations.csv")
        if k["key"] == "water-vapor-pressure-crc-73"
    }  # fmt: skip
    rows = {round(r.temperature - 273.15): r for r in published.tabulate("water", 273.15, 373.15, step=1.0)}
    assert len(rows) == 101
    for point in printed:
        row, value = rows[int(point["temperature"])], float(point["value"]) * 1000.0
        half = 500.0 * float(last_digit_unit(point["value"])) / value * 100.0
        deviation = 100.0 * (row.value / value - 1.0)
        if point["temperature"] in known:
            assert deviation == pytest.approx(known[point["temperature"]], abs=1e-4)
        else:
            assert abs(deviation) <= half + 0.025
        if point["temperature"] != "38":
            shift = SCALES["IPTS-68"].to_its90(row.temperature) - row.temperature
            rate = published.lookup("water", row.temperature).log_rate
            assert abs(deviation + 100.0 * rate * shift) <= half + 0.025
    assert len(printed) == 24


# places


def test_steps_do_not_drift(published):
    """0.1 K over 1,000 K: each temperature is the double nearest to its decimal, and the last one is the end."""
    rows = [row.temperature for row in published.tabulate("water", 273.16, 1273.16, step=0.1)]
    assert rows == [float(Fraction(27316 + 10 * i, 100)) for i in range(10001)]
    assert rows[-1] == 1273.16
    added = 273.16
    for _ in range(10000):
        added += 0.1
    assert added != 1273.16  # what adding up would have given


@pytest.mark.parametrize(
    ("high", "step", "last", "count"),
    [(300.0, 5.0, 300.0, 5), (299.9, 5.0, 295.0, 4), (280.3, 0.1, 280.3, 4)],
)
def test_the_end_is_included_where_the_steps_meet_it(high, step, last, count, published):
    """A step that does not divide the span ends below it; numbers count as they are written."""
    rows = list(published.tabulate("ethanol", 280.0, high, step=step))
    assert (len(rows), rows[-1].temperature) == (count, last)


@pytest.mark.parametrize("points", [2, 3, 7, 1001])
def test_points_include_both_ends(points, published):
    """So many rows, the first and the last exactly at the ends, each the double nearest to its place."""
    table = published.tabulate("ethanol", 280.1, 333.3, points=points)
    rows = [row.temperature for row in table]
    assert len(table) == len(rows) == points
    exact = [Fraction("280.1") + Fraction("53.2") * i / (points - 1) for i in range(points)]
    assert rows == [float(place) for place in exact]


def test_fahrenheit_steps_are_exact_in_both_units():
    """9 F are 5 K: from 32 F on, whole numbers of degF and exact kelvins."""
    spacing = space_temperatures(Fraction("273.15"), Fraction("373.15"), 9 * UNITS["degF"].factor, None)
    assert spacing.numbers(0, spacing.count, UNITS["degF"]) == [32.0 + 9.0 * i for i in range(21)]
    assert spacing.numbers(0, spacing.count, UNITS["K"]) == [float(Fraction("273.15") + 5 * i) for i in range(21)]


@pytest.mark.parametrize(
    ("low", "high", "unit", "shown"),
    [
        ("1000", "1000000", "kPa", [1, 2, 5, 10, 20, 50, 100, 200, 500, 1000]),
        ("3", "700", "Pa", [5, 10, 20, 50, 100, 200, 500]),
        ("200000", "200000.5", "bar", [2]),
        ("0.002", "0.06", "kPa", [0.000002, 0.000005, 0.00001, 0.00002, 0.00005]),
    ],
)
def test_round_pressures_are_1_2_5_in_the_unit_asked_for(low, high, unit, shown):
    """Both ends count where they are round; each number is the decimal itself."""
    spacing = space_pressures(Fraction(low), Fraction(high), UNITS[unit], None, None)
    assert spacing.numbers(0, spacing.count, UNITS[unit]) == shown


@pytest.mark.parametrize("unit", ["kPa", "mmHg", "psi", "bar"])
def test_points_of_pressure_end_exactly(unit):
    """Both ends are the doubles nearest to what was asked, in whatever unit."""
    for number in range(1, 200):
        low, high = Fraction(number, 7), Fraction(number * 13, 3)
        ends = low * UNITS[unit].factor, high * UNITS[unit].factor
        spacing = space_pressures(*ends, UNITS[unit], None, 5)
        found = spacing.numbers(0, 5, UNITS[unit])
        assert (found[0], found[-1]) == (float(low), float(high))


def test_points_of_pressure_keep_one_ratio():
    """Four points over three decades are the decades, the ends exact."""
    spacing = space_pressures(Fraction(1000), Fraction(10**6), UNITS["kPa"], None, 4)
    found = spacing.numbers(0, 4, UNITS["kPa"])
    assert (found[0], found[3]) == (1.0, 1000.0)
    assert found == pytest.approx([1.0, 10.0, 100.0, 1000.0], rel=1e-14)


@pytest.mark.parametrize(
    ("unit", "to"),
    [("Pa", u.name) for u in UNITS.values() if u.dimension == "pressure"]
    + [("K", u.name) for u in UNITS.values() if u.dimension == "temperature"]
    + [("J/mol", "J/g"), ("J/mol", "kcal/mol"), ("kg/m3", "mol/dm3"), ("kg/m3", "lb/ft3")],
)
def test_many_values_convert_as_one_does(unit, to):
    """Bit for bit what `convert` gives for each, NaN aside."""
    values = [1e-30, 0.1, 1 / 3, 298.15, 101325.0, 2.2064e7, 1e300 / 7e280, -40.5]
    found = Conversion(UNITS[unit], UNITS[to], 18.015268).many([*values, math.nan])
    assert found[:-1] == [convert(value, UNITS[unit], UNITS[to], 18.015268) for value in values]
    assert math.isnan(found[-1])


# seams and gaps


@pytest.mark.parametrize("step", [0.25, 1.0, 7.0, 33.0, 100.0])
@pytest.mark.parametrize(("shelf", "compound"), [("published", "ethanol"), ("scenario", "tallowane"),
                                                 ("scenario", "dunmarane"), ("published", "helium-4")])  # fmt: skip
def test_each_seam_stands_at_the_first_row_beyond_it(shelf, compound, step, request):
    """Once, on the first row that the upper correlation answers, never before the seam."""
    library = request.getfixturevalue(shelf)
    coverage = library.coverage(compound)
    low, high = coverage.answering[0].curve.window[0], coverage.answering[-1].curve.window[1]
    step = step if compound != "helium-4" else step / 100.0
    rows = [row for row in library.tabulate(compound, low, high, step=step) if row.correlation]
    told = [seam for row in rows for seam in row.note.seams]
    assert told == [s for s in coverage.seams if rows[0].temperature < s.temperature < rows[-1].temperature]
    for before, row in zip(rows, rows[1:], strict=False):
        for seam in row.note.seams:
            assert before.temperature < seam.temperature + 1e-8
            assert seam.temperature <= row.temperature + 1e-8
        if before.correlation != row.correlation:
            assert {"seam", "across-gap"} & set(row.note.marks)
            if row.note.seams:
                assert (row.note.seams[0].below, row.note.seams[-1].above) == (before.correlation, row.correlation)
        assert ("seam" in row.note.marks) == bool(row.note.seams)


def test_a_seam_carries_the_jump_of_its_two_curves(scenario):
    """tallowane at 350 K: one percent of the value below, from its two correlations."""
    (seam,) = [s for row in scenario.tabulate("tallowane", 340.0, 360.0, step=10.0) for s in row.note.seams]
    curves = {c.key: c.curve for c in scenario.coverage("tallowane").candidates}
    jump = 100.0 * (curves[seam.above].value(350.0) / curves[seam.below].value(350.0) - 1.0)
    assert (seam.temperature, seam.jump_percent) == (350.0, jump)


@pytest.mark.parametrize("place", [BLOCK - 1, BLOCK, BLOCK + 1])
def test_a_seam_between_two_blocks_is_not_lost(place, published):
    """The row after a seam may be the last of a block, or the first of the next one."""
    table = published.tabulate("ethanol", 293.005 - 0.01 * place, 300.0, step=0.01)
    assert [i for i, row in enumerate(table) if row.note.seams] == [place]


def test_no_seam_stands_at_the_first_row(published):
    """A table that begins above a seam has not crossed it."""
    assert [row.note.marks for row in published.tabulate("ethanol", 294.0, 300.0, step=1.0)] == [()] * 7


def test_a_reason_changes_where_a_draft_begins_to_cover():
    """Invented: half a nanokelvin below its bound a draft covers already, though the row before has another reason."""
    entries = (
        invent_correlation(0, 350, 50, "measured", "", "seen", "accepted"),
        invent_correlation(1, 300, 30, "measured", "", "seen", "draft"),
    )
    coverage = build_coverage(Dossier(COMPOUND, entries), "vapor-pressure")
    edge = Fraction("299.9999999995")
    rows = list(build_table(coverage, space_temperatures(edge - 1, edge, Fraction(1), None), 0.0, 0.0))
    assert [row.note.reason for row in rows] == ["outside-windows", "not-accepted"]


def test_a_narrow_gap_between_rows_is_told_and_bounds_that_meet_are_none():
    """Invented: windows 0.1 mK apart leave a gap; what lies within the tolerance of two bounds is none."""
    low = invent_correlation(0, 300, 40, "measured", "", "seen", "accepted")
    for start, marks in (("340.0001", ("across-gap",)), ("340.000000001", ("seam",))):
        high = invent_correlation(1, 340, 40, "measured", "", "seen", "accepted")
        high = dataclasses.replace(high, record=dataclasses.replace(high.record, window_min=start))
        coverage = build_coverage(Dossier(COMPOUND, (low, high)), "vapor-pressure")
        spacing = space_temperatures(Fraction(335), Fraction(345), Fraction(10), None)
        rows = list(build_table(coverage, spacing, 335.0, 345.0))
        assert rows[1].note.marks == marks


def test_rows_in_a_gap_are_refused_and_a_gap_between_rows_is_told():
    """Two invented windows, 300 to 340 K and 370 to 400 K: a row between is refused, a step over it is marked."""
    entries = (invent_correlation(0, 300, 40, "measured", "1 %", "seen", "accepted"),
               invent_correlation(1, 370, 30, "measured", "1 %", "seen", "accepted"))  # fmt: skip
    coverage = build_coverage(Dossier(COMPOUND, entries), "vapor-pressure")

    def tabulate(step: int):
        return list(build_table(coverage, space_temperatures(Fraction(330), Fraction(390), Fraction(step), None),
                                330.0, 390.0))  # fmt: skip

    rows = tabulate(10)
    assert [row.note.reason for row in rows] == ["", "", "gap", "gap", "", "", ""]
    assert rows[4].note.marks == ()
    below, above = tabulate(60)
    assert (below.note.marks, above.note.marks) == ((), ("across-gap",))
    _, _, beyond = build_table(
        coverage, space_temperatures(Fraction(290), Fraction(380), Fraction(45), None), 290.0, 380.0
    )
    assert beyond.note.marks == ("across-gap",)  # a row refused earlier does not hide it
    (gap,) = above.note.gaps
    assert (gap.low, gap.high) == pytest.approx((340.0, 370.0), abs=1e-8)


def test_a_tally_counts_what_went_by(scenario):
    """Rows, refusals by reason with the first of each, seams with their rows, who answered."""
    tally = Tally(scenario.tabulate("brindovane", 300.0, 580.0, step=10.0))
    assert sum(len(block.owners) for block in tally.blocks()) == tally.rows == 29
    assert tally.refused == {"not-accepted": 4, "outside-windows": 3}
    assert [(r.reason, r.temperature) for r in tally.refusals] == [("not-accepted", 320.0), ("outside-windows", 560.0)]
    assert [(row, seam.temperature) for row, seam in tally.seams] == [(13, 420.0)]
    keys = ["brindovane-antoine-low", "brindovane-kirchhoff", "brindovane-antoine-high"]
    assert [used.candidate.key for used in tally.used] == keys


def test_cautions_are_those_of_the_first_and_the_last_row_of_a_correlation(published):
    """Over three blocks what is said of the first row, 0.01 K below the triple temperature, is kept."""
    tally = Tally(published.tabulate("water", 273.15, 400.0, points=3 * BLOCK))
    for _ in tally.blocks():
        pass
    (used,) = tally.used
    assert "It lies 0.01 K below the triple temperature, 273.16 K." in used.cautions


@pytest.mark.parametrize("compound", ["ethanol", "helium-4", "nitrogen"])
def test_seams_are_marked_the_other_way_too(compound, published):
    """Temperatures that fall, as those of a melting line may at rising pressures, cross the same seams."""
    from registry.tables.notes import Marker

    coverage = published.coverage(compound)
    (low, high) = coverage.seams[0].temperature - 0.02, coverage.seams[-1].temperature + 0.02
    for kelvin in (np.array([low, high]), np.array([high, low])):
        places = coverage.evaluate(kelvin)[1]
        notes = Marker(coverage).mark(kelvin, places.tolist(), coverage.owners[places].tolist())
        assert {number: note.seams for number, note in notes.items()} == {1: coverage.seams}
        assert notes[1].marks == ("seam",)


# one correlation


def test_one_correlation_answers_throughout_also_where_another_ranks_first(scenario):
    """tallowane from 240 to 500 K: riedel alone covers it; three others rank before it somewhere."""
    table = scenario.tabulate("tallowane", 240.0, 500.0, step=5.0, one=True)
    assert {row.correlation for row in table} == {"tallowane-riedel"}
    assert all(row.note.marks == () for row in table)
    assert table.note == (
        "One correlation was asked for: tallowane-riedel answers throughout; over part of the span "
        "tallowane-antoine-low, tallowane-antoine-high and tallowane-wagner rank before it."
    )
    curve = next(c for c in scenario.coverage("tallowane").candidates if c.key == "tallowane-riedel").curve
    assert [row.value for row in table] == [curve.value(row.temperature) for row in table]


def test_one_correlation_that_ranks_first_anyway_says_no_more(scenario):
    """Where nothing else ranks before it, the note only names it."""
    table = scenario.tabulate("tallowane", 240.0, 300.0, step=5.0, one=True)
    assert table.note == "One correlation was asked for: tallowane-antoine-low answers throughout."


def test_where_none_covers_the_span_those_that_come_closest_are_named(published):
    """Up to three with the share of the span and their windows; the values are those of the shelf's windows."""
    with pytest.raises(Refused) as caught:
        published.tabulate("ethanol", 240.0, 400.0, step=5.0, one=True)
    assert caught.value.refusal.reason == "no-single-correlation"
    assert str(caught.value) == (
        "No accepted correlation answers for vapor-pressure of ethanol over all of 240 to 400 K. "
        "Closest: ethanol-antoine-low answers over 70.7 % of it (216.15 to 353.15 K); "
        "ethanol-poling-5 answers over 66.9 % of it (293 to 513.92 K); "
        "ethanol-himmelblau answers over 61.9 % of it (270 to 369 K). "
        "Ask for a span inside one of these, or for a table with seams."
    )


def test_one_correlation_outside_all_windows(published):
    """No part of the span is covered: nothing comes close."""
    with pytest.raises(Refused, match=r"None answers over any part of it\. `rangebook coverage ethanol"):
        published.tabulate("ethanol", 600.0, 700.0, step=5.0, one=True)
    with pytest.raises(Refused, match="ethanol has no correlation for melting-pressure"):
        published.tabulate("ethanol", 200.0, 210.0, step=5.0, one=True, property="melting-pressure")


def test_a_draft_answers_only_when_asked_for(scenario):
    """brindovane from 300 to 390 K: a draft covers it, is named, and answers marked with drafts."""
    with pytest.raises(Refused, match=r"A draft does, brindovane-cox-draft: --drafts lets it answer\.$"):
        scenario.tabulate("brindovane", 300.0, 390.0, step=5.0, one=True)
    rows = list(scenario.tabulate("brindovane", 300.0, 390.0, step=5.0, one=True, drafts=True))
    assert {(row.correlation, row.note.marks) for row in rows} == {("brindovane-cox-draft", ("draft",))}


def test_one_correlation_is_of_one_phase(scenario):
    """corvexane has two solids that melt between 150 and 158 K; one of them must be named."""
    asked = {"step": 2.0, "one": True, "property": "melting-pressure"}
    with pytest.raises(Refused) as caught:
        scenario.tabulate("corvexane", 150.0, 158.0, **asked)
    assert caught.value.refusal.reason == "several-phases"
    phases = sorted({c.record.phase for c in scenario.coverage("corvexane", property="melting-pressure").candidates})
    assert str(caught.value) == (
        "From 150 to 158 K several phases of corvexane have a melting-pressure, and one correlation is of one phase. "
        f"Name one with --phase: {phases[0]} or {phases[1]}."
    )
    named = scenario.tabulate("corvexane", 150.0, 158.0, phase=phases[0], **asked)
    assert {row.correlation for row in named} == {"corvexane-melting-i"}


@pytest.mark.parametrize(("high", "chosen"), [(330, "inventane-0"), (331, "inventane-1"), (350, "inventane-1")])
def test_the_worst_rank_over_the_span_counts(high, chosen):
    """0.1 % up to 330 K and 5 % above against 1 %: better up to 330 K, worse as soon as the span passes it."""
    stated = {0: "0.1 % up to 330 K; 5 %", 1: "1 %"}
    entries = tuple(invent_correlation(n, 300, 100, "measured", text, "seen", "accepted")
                    for n, text in stated.items())  # fmt: skip
    coverage = build_coverage(Dossier(COMPOUND, entries), "vapor-pressure")
    spacing = space_temperatures(Fraction(310), Fraction(high), Fraction(1), None)
    table = build_table(coverage, spacing, 310.0, float(high), one=True)
    assert {row.correlation for row in table} == {chosen}


def test_a_preference_counts_before_the_rank(scenario):
    """A steward's preference drops the better ranked one from those that cover the whole span."""
    from registry.ranking import choose_throughout

    coverage = scenario.coverage("tallowane")
    both = [c for c in coverage.accepted if c.covers(410.0) and c.covers(430.0)]
    spans = {c.key: (410.0, 430.0) for c in both}
    first = choose_throughout(both, spans, frozenset())
    other = next(c for c in both if c is not first)
    assert first.key == "tallowane-wagner"
    assert choose_throughout(both, spans, frozenset({(other.key, first.key)})).key != first.key


# what cannot be asked


@pytest.mark.parametrize(
    ("arguments", "message"),
    [
        ((300.0, 280.0, 5.0, None), "The table starts at 300 K and ends at 280 K. Give two ends, the lower one first."),
        ((300.0, 300.0, 5.0, None), "The table starts at 300 K and ends at 300 K. Give two ends, the lower one first."),
        ((300.0, 310.0, None, None), "A table needs a step or a number of points. Give one of them."),
        ((300.0, 310.0, 5.0, 3), "Both a step and a number of points were given. Give one of them."),
        ((300.0, 310.0, -5.0, None), "'-5.0' is no step; a finite number above 0 is allowed."),
        ((300.0, 310.0, 0, None), "'0' is no step; a finite number above 0 is allowed."),
        ((0.0, 310.0, 1.0, None), "'0.0' is no temperature; a finite number above 0 is allowed."),
        ((math.nan, 310.0, 1.0, None), "'nan' is no temperature; a finite number above 0 is allowed."),
        ((300.0, math.inf, 1.0, None), "'inf' is no temperature; a finite number above 0 is allowed."),
        (("300", 310.0, 1.0, None), "'300' is no temperature; a finite number above 0 is allowed."),
        ((300.0, None, 1.0, None), "'None' is no temperature; a finite number above 0 is allowed."),
        ((300.0, 310.0, None, 1),
         "A table of 1 points was asked for; at least 2 are needed, one at each end."),
        ((300.0, 310.0, None, 2.5), "'2.5' is no number of points; a whole number is allowed."),
        ((300.0, 310.0, 1e-7, None),
         "That makes 100,000,001 rows; at most 10,000,000 are allowed. Take a larger step."),
        ((300.0, 310.0, None, 10**9), "That makes 1,000,000,000 rows; at most 10,000,000 are allowed. Ask for fewer."),
    ],
)  # fmt: skip
def test_a_span_that_cannot_be_is_refused_with_a_sentence(arguments, message, published):
    """What was given, what is allowed, what to do."""
    low, high, step, points = arguments
    with pytest.raises(BadInput) as caught:
        published.tabulate("water", low, high, step=step, points=points)
    assert str(caught.value) == message


def test_what_is_not_there_is_said_at_once(published):
    """An unknown compound or property is no matter of rows."""
    with pytest.raises(UnknownKey):
        published.tabulate("unobtainium", 300.0, 310.0, step=1.0)
    with pytest.raises(BadInput, match="There is no property"):
        published.tabulate("water", 300.0, 310.0, step=1.0, property="colour")


# memory


def test_a_long_table_takes_no_more_memory_than_a_short_one(published):
    """100,000 rows peak no higher than 1,000, but for a quarter of a megabyte: the block that is held."""

    def peak(points: int) -> int:
        tally = Tally(published.tabulate("ethanol", 240.0, 540.0, points=points))
        tracemalloc.start()
        try:
            for _ in tally.blocks():
                pass
            return tracemalloc.get_traced_memory()[1]
        finally:
            tracemalloc.stop()

    peak(1000)
    short, long = peak(1000), peak(100_000)
    assert long <= short + 250_000


def test_the_numbers_of_a_span_are_read_as_written():
    """The parsed text of a step and its float mean the same places."""
    assert Fraction(str(0.1)) == parse_number("0.1")
