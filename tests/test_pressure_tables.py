"""Tables of temperatures at given pressures: published boiling temperatures, round trips, seams, one correlation."""

from __future__ import annotations

import csv
import dataclasses
import io
import itertools
import json
import math
from fractions import Fraction

import numpy as np
import pytest
from inventane import COMPOUND, invent_correlation

from registry.cli.app import main
from registry.coverage import build_coverage
from registry.dossier import Dossier
from registry.errors import BadInput, Refused
from registry.inverse.inversion import Inversion
from registry.properties import PROPERTIES
from registry.quantities import UNITS
from registry.tables.pressure_table import build_pressure_table
from registry.tables.spacing import space_pressures

PRESSURES = [name for name, row in PROPERTIES.items() if row.dimension == "pressure"]


@pytest.fixture
def run(published_path, capsys, monkeypatch):
    """Run `table` on the published shelf: exit code, stdout, stderr."""
    monkeypatch.setenv("RANGEBOOK_LIBRARY", str(published_path))

    def call(*words: str) -> tuple[int, str, str]:
        with pytest.raises(SystemExit) as stopped:
            main(["table", *words])
        captured = capsys.readouterr()
        return int(stopped.value.code or 0), captured.out, captured.err

    return call


def test_boiling_temperatures_of_water_are_those_of_the_standard(published):
    """IAPWS R7-97(2012), Table 36: saturation temperatures at 0.1, 1 and 10 MPa, K, to the nine digits printed."""
    rows = list(published.tabulate_at_pressures("water", 1e5, 1e7, points=3))
    assert [row.value for row in rows] == pytest.approx([1e5, 1e6, 1e7], rel=1e-14)
    printed = [0.372755919e3, 0.453035632e3, 0.584149488e3]
    assert [row.temperature for row in rows] == pytest.approx(printed, abs=5e-7)


@pytest.mark.parametrize("shelf", ["published", "scenario"])
def test_every_row_leads_back_to_its_pressure(shelf, request):
    """A lookup at the temperature found gives the pressure and the correlation; a refused row has its own reason."""
    library = request.getfixturevalue(shelf)
    answered = 0
    for compound, prop in sorted({(e.record.compound, e.record.property) for e in library.correlations()}):
        if prop not in PRESSURES:
            continue
        coverage = library.coverage(compound, property=prop)
        values = [abs(c.curve.value(t)) for c in coverage.answering for t in c.reach]
        usable = [v for v in values if 0.0 < v < math.inf]
        low, high = 0.5 * min(usable), 2.0 * max(usable)
        table = library.tabulate_at_pressures(compound, low, high, points=61, property=prop)
        for row in table:
            if row.note.reason:
                assert math.isnan(row.temperature)
                refusal = table.refusal(row)
                assert row.note.reason == refusal.reason
                assert refusal.explanation
                continue
            found = library.lookup(compound, row.temperature, property=prop)
            assert found.correlation.key == row.correlation
            slope = abs(found.log_rate) * row.temperature
            stated = found.budget.expanded_percent
            spread = None if stated is None else pytest.approx(stated / abs(found.percent_per_kelvin), rel=1e-9)
            assert row.expanded == spread
            assert found.value == pytest.approx(row.value, rel=1e-13 + slope * 1e-12)
            answered += 1
    assert answered > 250


def test_a_pressure_in_the_jump_of_a_seam_is_refused(published):
    """ethanol jumps by 0.605 % at 293 K: pressures between the two values belong to no temperature."""
    (seam,) = published.coverage("ethanol").seams
    curves = {c.key: c.curve for c in published.coverage("ethanol").candidates}
    below, above = curves[seam.below].value(293.0), curves[seam.above].value(293.0)
    rows = list(published.tabulate_at_pressures("ethanol", 5700.0, 5900.0, step=1.0))
    refused = [row.value for row in rows if row.note.reason]
    assert refused == [p for p in np.arange(5700.0, 5901.0) if below < p < above]
    first = next(row for row in rows if row.value > above)
    assert first.note.seams == (seam,)
    assert [row.value for row in rows if row.note.seams] == [first.value]


def test_a_pressure_with_two_temperatures_is_refused(scenario):
    """tallowane falls by 0.672 % at 233.15 K: pressures just below the jump have a temperature on either side."""
    seam = next(s for s in scenario.coverage("tallowane").seams if s.jump_percent < -0.1)
    curves = {c.key: c.curve for c in scenario.coverage("tallowane").candidates}
    above, below = curves[seam.above].value(seam.temperature), curves[seam.below].value(seam.temperature)
    rows = list(scenario.tabulate_at_pressures("tallowane", 0.99 * above, 1.01 * below, points=101))
    inside = [row for row in rows if above * (1 + 1e-6) < row.value < below * (1 - 1e-6)]
    assert len(inside) > 10
    assert all(row.note.marks == ("refused",) for row in inside)
    assert len({row.note.reason for row in inside}) == 1
    outside = [row for row in rows if row.value < above * (1 - 1e-6) or row.value > below * (1 + 1e-6)]
    assert not any(row.note.reason for row in outside)


def test_reasons_differ_within_a_gap_where_a_draft_has_some_of_the_pressures():
    """Two accepted windows with a gap, and a draft over a part of it: each row has the reason of its own pressure."""
    entries = (invent_correlation(0, 300, 40, "measured", "1 %", "seen", "accepted"),
               invent_correlation(0, 350, 5, "measured", "1 %", "seen", "draft"),
               invent_correlation(0, 370, 30, "measured", "1 %", "seen", "accepted"))  # fmt: skip
    keyed = tuple(dataclasses.replace(e, record=dataclasses.replace(e.record, key=f"inventane-{i}"))
                  for i, e in enumerate(entries))  # fmt: skip
    coverage = build_coverage(Dossier(COMPOUND, keyed), "vapor-pressure")
    low, high = (coverage.candidates[0].curve.value(t) for t in (338.0, 372.0))
    spacing = space_pressures(Fraction(low), Fraction(high), UNITS["Pa"], None, 60)
    table = build_pressure_table(Inversion(coverage), spacing, low, high)
    reasons = [row.note.reason for row in table]
    assert [reason for reason, _ in itertools.groupby(reasons)] == ["", "gap", "not-accepted", "gap", ""]
    assert all(row.note.reason == table.refusal(row).reason for row in table if row.note.reason)


def test_a_curve_that_waits_for_a_phase_answers_nowhere(scenario):
    """corvexane has two solids that melt below 158.42 K: no temperature there until one is named."""
    solid = next(c for c in scenario.coverage("corvexane", property="melting-pressure").candidates
                 if c.key == "corvexane-melting-i")  # fmt: skip
    low, high = sorted(solid.curve.value(t) for t in (152.0, 156.0))
    asked = {"points": 9, "property": "melting-pressure"}
    table = scenario.tabulate_at_pressures("corvexane", low, high, **asked)
    assert all(table.coverage.stretch_at(kelvin).candidate for kelvin in table.extremes()[0])
    refused = [row for row in table if row.note.reason == "several-phases"]
    assert len(refused) == 9
    named = scenario.tabulate_at_pressures("corvexane", low, high, phase=solid.record.phase, **asked)
    assert {row.correlation for row in named} == {"corvexane-melting-i"}


@pytest.mark.parametrize(("low", "high", "count"), [(1e-300, 1e300, 7), (1000.0, 2e7, 5), (0.1, 0.3, 4)])
def test_one_ratio_lies_between_neighbours_however_far_the_ends(low, high, count, published):
    """Also where the ratio of the ends is beyond every double; the ends themselves are exact."""
    values = [row.value for row in published.tabulate_at_pressures("water", low, high, points=count)]
    assert (values[0], values[-1], len(values)) == (low, high, count)
    ratios = [after / before for before, after in itertools.pairwise(values)]
    assert ratios == pytest.approx([ratios[0]] * (count - 1), rel=1e-12)


def test_an_inverse_serves_every_table(published_path, monkeypatch):
    """The curves are cut into branches once, for a temperature and for all tables after it."""
    import registry.inverse.inversion
    from registry import open_library

    cut, plain = [], registry.inverse.inversion.cut_branches
    monkeypatch.setattr(registry.inverse.inversion, "cut_branches", lambda *a, **k: cut.append(a) or plain(*a, **k))
    with open_library(published_path) as library:
        first = library.temperature_at("water", 1e5).temperature
        done = len(cut)
        for _ in range(2):
            assert next(iter(library.tabulate_at_pressures("water", 1e5, 1e6))).temperature == first
    assert 0 < done == len(cut)


# one correlation


def test_one_correlation_has_every_pressure(scenario):
    """tallowane-riedel alone from 100 Pa to 1 MPa, though others rank before it: no seam, no refusal."""
    table = scenario.tabulate_at_pressures("tallowane", 2e2, 1e6, one=True)
    rows = list(table)
    assert {row.correlation for row in rows} == {"tallowane-riedel"}
    assert not any(row.note.marks for row in rows)
    assert table.note.startswith("One correlation was asked for: tallowane-riedel answers throughout; over part of ")
    curve = next(c.curve for c in scenario.coverage("tallowane").candidates if c.key == "tallowane-riedel")
    assert [curve.value(row.temperature) for row in rows] == pytest.approx([row.value for row in rows], rel=1e-11)


def test_where_none_has_every_pressure_those_that_come_closest_are_named(published):
    """Shares are of the logarithm of the pressure: a decade is a decade."""
    with pytest.raises(Refused) as caught:
        published.tabulate_at_pressures("ethanol", 1e3, 1e6, one=True)
    assert caught.value.refusal.reason == "no-single-correlation"
    assert str(caught.value) == (
        "No accepted correlation answers for vapor-pressure of ethanol over all of 1000 to 1000000 Pa. "
        "Closest: ethanol-poling-5 answers over 74.5 % of it (5808.61 to 6.132e+06 Pa); "
        "ethanol-himmelblau answers over 73.4 % of it (1226.77 to 194893 Pa); "
        "ethanol-antoine-low answers over 67.8 % of it (7.0638 to 108281 Pa). "
        "Ask for a span inside one of these, or for a table with seams."
    )
    # ln(1e6 / 5808.61) / ln(1000)
    assert math.log(1e6 / 5808.61) / math.log(1e3) == pytest.approx(0.745, abs=5e-4)


def test_a_draft_has_pressures_only_when_asked_for(scenario):
    """The draft of brindovane is named, and answers marked with drafts."""
    draft = next(c for c in scenario.coverage("brindovane").candidates if c.key == "brindovane-cox-draft")
    low, high = draft.curve.value(301.0), draft.curve.value(399.0)
    with pytest.raises(Refused, match=r"A draft does, brindovane-cox-draft: --drafts lets it answer\.$"):
        scenario.tabulate_at_pressures("brindovane", low, high, points=5, one=True)
    rows = list(scenario.tabulate_at_pressures("brindovane", low, high, points=5, one=True, drafts=True))
    assert {(row.correlation, row.note.marks) for row in rows} == {("brindovane-cox-draft", ("draft",))}


# the command


def test_the_command_takes_pressures_for_ends(run, published):
    """Round pressures in their unit first, then temperatures in the unit asked for; the unit of --from is kept."""
    code, out, err = run("water", "--from", "1bar", "--to", "10bar", "-t", "degC", "-f", "csv")
    assert (code, err) == (0, "")
    header, *rows = csv.reader(io.StringIO(out))
    assert header[:3] == ["vapor_pressure_bar", "temperature_degC", "uncertainty_K_k2"]
    assert [float(row[0]) for row in rows] == [1.0, 2.0, 5.0, 10.0]
    found = [row.temperature - 273.15 for row in published.tabulate_at_pressures("water", 1e5, 1e6)]
    assert [float(row[1]) for row in rows] == pytest.approx(found, abs=1e-12)
    _, other, _ = run("water", "--from", "1bar", "--to", "10bar", "-u", "kPa", "--json")
    document = json.loads(other)
    assert (document["unit"], document["temperature_unit"]) == ("kPa", "K")
    assert [r["value"] for r in document["rows"]] == [100.0, 200.0, 500.0, 1000.0]


def test_steps_and_points_of_pressure(run):
    """Steps are even in pressure, points even in its logarithm; the step may be in another unit."""
    _, out, _ = run("water", "--from", "100kPa", "--to", "130kPa", "--step", "0.1bar", "--json")
    assert [r["value"] for r in json.loads(out)["rows"]] == [100.0, 110.0, 120.0, 130.0]
    _, out, _ = run("water", "--from", "1kPa", "--to", "1MPa", "--points", "4", "--json")
    assert [r["value"] for r in json.loads(out)["rows"]] == pytest.approx([1.0, 10.0, 100.0, 1000.0], rel=1e-14)


def test_gauge_pressures_count_from_their_atmosphere(run):
    """0 bar(g) against 1.01325 bar is the normal boiling point; round numbers are round as gauge pressures."""
    words = ("water", "--from", "0barg", "--to", "2barg", "--step", "1bar", "--atmosphere", "1atm", "--json")
    document = json.loads(run(*words)[1])
    assert document["unit"] == "bar(g)"
    assert [r["value"] for r in document["rows"]] == [0.0, 1.0, 2.0]
    # IAPWS R7-97(2012), eq. 31 at 0.101325 MPa: 373.1243 K
    assert document["rows"][0]["temperature_K"] == pytest.approx(373.1243, abs=1e-4)


@pytest.mark.parametrize(("low", "high", "expected"), [
    ("0barg", "20barg", [0, 0.2, 0.5, 1, 2, 5, 10, 20]),
    ("-0.95barg", "2barg", [-0.5, -0.2, -0.1, -0.05, -0.02, 0, 0.02, 0.05, 0.1, 0.2, 0.5, 1, 2]),
    ("-0.5barg", "0barg", [-0.5, -0.2, -0.1, -0.05, -0.02, -0.01, -0.005, 0]),
    ("-0.9barg", "-0.1barg", [-0.5, -0.2, -0.1]),
    ("700Pa", "20MPa", [m * 10**n for n in range(3, 8) for m in (1, 2, 5) if m * 10**n <= 2e7]),
    ("1Pa", "20MPa", [m * 10**n for n in range(8) for m in (1, 2, 5) if m * 10**n <= 2e7]),
])  # fmt: skip
def test_round_pressures_are_all_there(low, high, expected, run):
    """Every 1, 2 and 5 times a power of ten, over any number of decades; gauge pressures from both sides of zero."""
    words = ("water", "--from", low, "--to", high, "--atmosphere", "1atm", "-f", "csv")
    header, *rows = csv.reader(io.StringIO(run(*words)[1]))
    assert header[0] == f"vapor_pressure_{'bar(g)' if low.endswith('g') else 'Pa'}"
    assert [float(row[0]) for row in rows] == expected


def test_refused_pressures_come_with_their_reasons(run):
    """Exit code 3; the row has no temperature; the reason is counted on stderr."""
    code, out, err = run("ethanol", "--from", "1MPa", "--to", "10MPa")
    assert code == 3
    (row,) = [line for line in out.splitlines() if "refused:" in line]
    reason = row.split("refused: ")[1]
    assert row.split() == ["10", "refused:", reason]
    assert err.startswith(f"Refused ({reason}), 1 of 4 rows; the first: ")
    code, out, err = run("ethanol", "--from", "1MPa", "--to", "10MPa", "--json")
    last = json.loads(out)["rows"][-1]
    assert (code, err, last["temperature_K"], last["temperature"], last["value"]) == (3, "", None, None, 10.0)


@pytest.mark.parametrize(
    ("low", "high", "asked", "message"),
    [
        (1e5, 1e4, {}, "The table starts at 100000 Pa and ends at 10000 Pa. Give two ends, the lower one first."),
        (1e5, 1e6, {"step": 1.0, "points": 2}, "Both a step and a number of points were given. Give one of them."),
        (0.0, 1e6, {}, "'0.0' is no pressure; a finite number above 0 is allowed."),
        (1.1, 1.9, {}, "No round number (1, 2 or 5 times a power of ten) lies from 1.1 to 1.9 Pa. "
                       "Give a step or a number of points."),
        (1e5, 1e6, {"property": "enthalpy-of-vaporization"},
         "A temperature is found at a pressure: enthalpy-of-vaporization is none. Ask for vapor-pressure, "
         "sublimation-pressure or melting-pressure."),
    ],
)  # fmt: skip
def test_pressures_that_cannot_be_are_refused_with_a_sentence(low, high, asked, message, published):
    """What was given, what is allowed, what to do."""
    with pytest.raises(BadInput) as caught:
        published.tabulate_at_pressures("ethanol", low, high, **asked)
    assert str(caught.value) == message
