"""Positions: editions, dates and changes, and what a lookup there answers for ever."""

from __future__ import annotations

import dataclasses
from datetime import UTC, date, datetime, timedelta, timezone

import numpy as np
import pytest

from registry import rules
from registry.errors import BadInput, InvalidRecord, UnknownKey
from registry.merkle import hash_leaf, root_of
from registry.opening import open_library, start_library

WHEN = {"author": "ann", "reason": "invented"}
LOOK = {"author": "bob", "note": "invented"}
KEY = "brindovane-kirchhoff"


@pytest.fixture
def library(tmp_path):
    """The invented scenario."""
    with start_library(tmp_path / "own.db", "scenario", "ann") as opened:
        yield opened


def _revise(library, text: str) -> None:
    record = library.newest(KEY).record
    changed = dataclasses.replace(record, coefficients={**record.coefficients, "A": text})
    library.revise(changed, **WHEN)
    library.review(KEY, accept=True, **LOOK)


def test_an_edition_names_the_position_before_its_own_change(library):
    """It holds the number of changes, the RFC 9162 root over their headers, and the rules version."""
    _revise(library, "16.5")
    edition = library.freeze("2026-Q4", author="ann", note="invented").record
    headers = [change.header() for change in library.changes()[:3]]
    assert edition.root == f"3:{root_of([hash_leaf(header) for header in headers]).hex()}"
    assert (edition.position, edition.rules) == ("3", str(rules.VERSION))
    assert library.find_position("2026-Q4") == 3
    assert library.position == 4
    assert [(e.name, c.number) for e, c in library.editions()] == [("2026-Q4", 4)]


def test_an_edition_answers_the_same_whatever_comes_later(library, tmp_path):
    """Bit for bit the value, and the choice, through revisions, withdrawals, preferences and fixed points."""
    temperatures = [250.0, 280.0, 310.0, 335.0, 400.0, 420.0, 450.0, 600.0]
    library.freeze("first", author="ann", note="invented")

    def look(view) -> list:
        batch = view.lookup("brindovane", temperatures)
        chosen = [(batch.correlations[i].key if i >= 0 else "") for i in batch.chosen]
        return [value.hex() for value in batch.values.tolist()] + chosen

    before = look(library)
    _revise(library, "16.5")
    library.withdraw("brindovane-antoine-low", **WHEN)
    library.review("brindovane-antoine-low", accept=True, **LOOK)
    library.withdraw("invented-handbook-d", **WHEN)
    library.review("invented-handbook-d", accept=True, **LOOK)
    assert look(library) != before
    assert look(library.at("first")) == look(library.at("FIRST")) == look(library.at(1)) == before
    with open_library(tmp_path / "own.db") as again:
        assert look(again.at("first")) == before


def test_an_edition_is_never_moved(library):
    """The same name, in whatever case, is refused; so is a name that could be a change or a date."""
    library.freeze("first", author="ann", note="invented")
    for name in ("first", "First"):
        with pytest.raises(BadInput, match="There is an edition first already, frozen at change 1"):
            library.freeze(name, author="ann", note="invented")
    for name in ("12", "2026-12-01", "", "a b", "-x", "ä", "2026-12-01T00:00Z"):
        with pytest.raises(InvalidRecord, match=r"a name of letters|it is empty"):
            library.freeze(name, author="ann", note="invented")
    with pytest.raises(UnknownKey, match="Nearest: first"):
        library.at("frist")


def test_an_edition_of_other_rules_is_not_answered(library, monkeypatch):
    """A program that does not have the rules of an edition says so rather than answer differently."""
    library.freeze("first", author="ann", note="invented")
    monkeypatch.setattr(rules, "VERSION", 2)
    with pytest.raises(BadInput, match="stands on rules 1; this program has rules 2"):
        library.at("first")


def test_a_date_means_the_last_change_at_or_before_its_end(library):
    """Days in UTC, moments to the microsecond, numbers of changes; nothing before the first change."""
    times = ("2030-01-01T10:00:00.000000Z", "2030-01-01T23:59:59.999999Z", "2030-01-02T00:00:00.000000Z")
    for number, time in enumerate(times):
        with library._file.writing() as (_, append):
            assert append("ann", f"invented {number}", time, []).number == number + 2
    expected = {
        "2029-12-31": 1, "2030-01-01": 3, "2030-01-02": 4, "2999-01-01": 4, 2: 2, "3": 3,
        "2030-01-01T10:00Z": 2, "2030-01-01T09:59:59.999999Z": 1, "2030-01-01T23:59:59Z": 2,
        date(2030, 1, 1): 3, datetime(2030, 1, 1, 10): 2, datetime(2030, 1, 2, tzinfo=UTC): 4,
        datetime(2030, 1, 2, 1, tzinfo=timezone(timedelta(hours=2))): 2,
    }  # fmt: skip
    assert {place: library.find_position(place) for place in expected} == expected
    with pytest.raises(BadInput, match="Nothing was recorded by 1999-01-01"):
        library.at("1999-01-01")
    for bad in (0, 5, -1, "0", "99", "2030-02-30", "2030-01-01T25:00Z", True):
        with pytest.raises(BadInput):
            library.at(bad)


def test_dates_at_the_ends_of_the_calendar(library):
    """The last day there is means the newest change; years before 1000 are before any change."""
    for late in ("9999-12-31", "9999-12-31T23:59:59.999999Z", date.max, datetime.max):
        assert library.find_position(late) == library.position
    west = timezone(timedelta(hours=-5))
    for early in ("0001-01-01", "0300-01-01", "0999-12-31", "0999-12-31T12:00Z", date.min, datetime.min):
        with pytest.raises(BadInput, match="Nothing was recorded by"):
            library.find_position(early)
    with pytest.raises(BadInput, match="is no time"):
        library.find_position(datetime.max.replace(tzinfo=west))


@pytest.mark.parametrize("place", [None, 1.5, b"1", [1], True])
def test_what_is_no_position_is_told(place, library):
    """Only an edition, a change or a date is a position; a whole number of NumPy is a change."""
    with pytest.raises(BadInput, match="is no position; an edition, a change or a date is allowed"):
        library.at(place)
    assert library.find_position(np.int64(1)) == 1


def test_a_view_only_reads_and_ends_with_its_library(library):
    """Closing a view leaves the library open; it has no verb that records."""
    with library.at(1) as view:
        assert not hasattr(view, "revise")
        assert view.position == 1
    assert library.lookup("brindovane", 400.0).correlation.key == KEY
    view = library.at(1)
    library.close()
    with pytest.raises(BadInput, match="is closed"):
        view.lookup("brindovane", 400.0)


def test_a_mass_from_a_formula_is_frozen_with_the_rules(monkeypatch):
    """Another table of atomic weights in the package that reads formulas changes no mass; isotopes come from it."""
    import molmass

    from registry.masses import formula_mass

    # frozen as molmass 2026.1.8 has them
    assert formula_mass("H2O") == pytest.approx(2 * 1.007941 + 15.999405, rel=1e-15)
    for formula in ("H2O", "C2H5OH", "CaCO3", "[3He]", "D2O"):
        assert formula_mass(formula) == pytest.approx(molmass.Formula(formula, parse_groups=False).mass, rel=1e-6)
    before = formula_mass("C2H5OH")
    monkeypatch.setattr(molmass.ELEMENTS["C"], "mass", 99.0)
    assert formula_mass("C2H5OH") == before


def test_names_are_found_as_they_were(library):
    """A compound that was renamed is found by its old name at an earlier position, and by the new one now."""
    compound = library.newest("brindovane").record
    library.revise(dataclasses.replace(compound, name="invented newname"), **WHEN)
    assert library.find_compound("invented newname") == "brindovane"
    with pytest.raises(UnknownKey):
        library.find_compound(compound.name)
    with pytest.raises(UnknownKey):
        library.at(1).find_compound("invented newname")
    assert library.at(1).find_compound(compound.name) == "brindovane"


def test_a_difference_says_first_what_it_means_in_numbers(library):
    """A coefficient that moves every value by a known percent, an answer that ends, and the records behind it."""
    record = library.newest("brindovane-antoine-low").record
    library.revise(dataclasses.replace(record, coefficients={**record.coefficients, "A": "22.15808"}), **WHEN)
    library.review("brindovane-antoine-low", accept=True, **LOOK)
    library.withdraw(KEY, **WHEN)
    library.review(KEY, accept=True, **LOOK)
    found = library.diff(1)
    told = [(n.compound, n.property, n.kind, n.low, n.high) for n in found.numbers]
    assert ("brindovane", "vapor-pressure", "changes", 250.0, 310.0) in told
    # from 280 degF on another one takes over
    assert ("brindovane", "vapor-pressure", "disappears", 360.0, 410.92777778) in told
    assert ("brindovane", "vapor-pressure", "changes", 410.92777778, 420.0) in told
    change = next(n for n in found.numbers if n.kind == "changes" and n.low == 250.0)
    # ln p = A - B/(T + C): 0.01 more in A is a factor of exp(0.01) everywhere
    assert change.largest_percent == pytest.approx(1.0050167084168, rel=1e-9)
    assert change.mean_percent == pytest.approx(1.0050167084168, rel=1e-9)
    records = {(r.kind, r.key): r for r in found.records}
    assert records["correlation", KEY].what == "withdrawn"
    revised = records["correlation", "brindovane-antoine-low"]
    assert [(f.name, f.before, f.after) for f in revised.fields] == [("A", "22.14808", "22.15808")]
    back = library.diff(library.position, 1)
    assert {n.kind for n in back.numbers} <= {"appears", "changes"}
    assert library.diff(1, 1).numbers == library.diff(1, 1).records == ()


def test_a_preview_tells_the_numbers_before_anything_is_recorded(library):
    """What a revision would do to its own values and to the answers, and nothing is recorded by asking."""
    record = library.newest("brindovane-antoine-low").record
    found = library.preview(dataclasses.replace(record, coefficients={**record.coefficients, "A": "22.15808"}))
    assert found.own.largest_percent == pytest.approx(1.0050167084168, rel=1e-9)
    assert [(n.kind, n.low, n.high) for n in found.numbers] == [("changes", 250.0, 310.0)]
    assert library.position == 1
    cut = library.preview(dataclasses.replace(record, window_max="300"))
    assert [(n.kind, n.low, n.high) for n in cut.numbers] == [("disappears", 300.0, 310.0)]
