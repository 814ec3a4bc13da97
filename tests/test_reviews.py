"""Recording, revising, reviewing, withdrawing, preferring: who decides what, and what a lookup makes of it."""

from __future__ import annotations

import dataclasses

import pytest

from registry.errors import BadInput, InvalidRecord, RevisedMeanwhile, UnknownKey
from registry.opening import open_library, start_library
from registry.records import Correlation, Dataset, FixedPoint, Point, Review, Source

WHEN = {"author": "ann", "reason": "invented"}
LOOK = {"author": "bob", "note": "invented"}

# invented, not data
SOURCE = Source(key="invented-handbook", type="book", year="2020", citation="Invented handbook; not data")
FIRST = Correlation(
    key="brindovane-new", compound="brindovane", property="vapor-pressure", phase="liquid", form="antoine-log10",
    coefficients={"A": "7.1", "B": "1500", "C": "-40"}, temperature_unit="K", value_unit="mmHg", window_min="300",
    window_max="400", window_unit="K", window_basis="printed", temperature_scale="ITS-90", evidence="standard",
    source="invented-handbook", locator="p. 1", obtained="seen",
)  # fmt: skip


@pytest.fixture
def library(tmp_path):
    """The invented scenario, kept by a team, with one more source."""
    with start_library(tmp_path / "own.db", "scenario", "ann") as opened:
        opened.record(SOURCE, author="ann")
        yield opened


def _with_a(record: Correlation, text: str) -> Correlation:
    return dataclasses.replace(record, coefficients={**record.coefficients, "A": text})


def _answering(library, kelvin: float = 350.0, **options) -> tuple[str, int, str]:
    answer = library.lookup("brindovane", kelvin, **options)
    return answer.correlation.key, answer.revision, answer.standing


def test_a_new_correlation_is_a_draft_until_somebody_else_accepts_it(library):
    """A draft answers only when drafts are asked for, and then says that it is one; its author cannot accept it."""
    done = library.record(FIRST, **WHEN)
    assert (done.revision, done.change.author, done.change.reason) == (1, "ann", "invented")
    with pytest.raises(LookupError):
        library.lookup("brindovane", 330.0)
    answer = library.lookup("brindovane", 330.0, drafts=True)
    assert (answer.correlation.key, answer.standing) == ("brindovane-new", "draft")
    assert any("draft, not accepted" in caution for caution in answer.cautions)
    for author in ("ann", "ANN", " ann "):
        with pytest.raises(BadInput, match="was recorded by ann, and somebody else must review it"):
            library.review("brindovane-new", accept=True, author=author, note="looked")
    library.review("brindovane-new", accept=True, **LOOK)
    assert _answering(library, 330.0) == ("brindovane-new", 1, "accepted")
    with pytest.raises(BadInput, match="Nothing under 'brindovane-new' waits for review"):
        library.review("brindovane-new", accept=True, **LOOK)
    with pytest.raises(BadInput, match="`rangebook withdraw` takes out what is in force"):
        library.review("brindovane-new", accept=False, **LOOK)


def test_an_accepted_revision_stays_in_force_while_a_draft_waits(library):
    """The old value is answered until the revision is accepted, also after another one was declined."""
    library.record(FIRST, **WHEN)
    library.review("brindovane-new", accept=True, **LOOK)
    old = library.lookup("brindovane", 330.0).value
    library.revise(_with_a(FIRST, "7.2"), expect=1, **WHEN)
    assert library.lookup("brindovane", 330.0).value == old
    assert library.lookup("brindovane", 330.0, drafts=True).value == pytest.approx(old * 10**0.1, rel=1e-12)
    assert library.entry("brindovane-new").waiting == 2
    library.review("brindovane-new", accept=False, **LOOK)
    assert _answering(library, 330.0) == ("brindovane-new", 1, "accepted")
    assert library.entry("brindovane-new").waiting == 0
    # a declined revision is no draft
    assert _answering(library, 330.0, drafts=True) == ("brindovane-new", 1, "accepted")
    library.revise(_with_a(FIRST, "7.3"), expect=2, **WHEN)
    library.review("brindovane-new", accept=True, **LOOK)
    assert _answering(library, 330.0) == ("brindovane-new", 3, "accepted")


def test_what_was_declined_may_be_accepted_after_all(library):
    """A reviewer who changes their mind accepts the same revision, and both words stay in the history."""
    library.record(FIRST, **WHEN)
    library.review("brindovane-new", accept=False, **LOOK)
    with pytest.raises(BadInput, match=r"is declined\. To accept after all .*, add --again"):
        library.review("brindovane-new", accept=True, **LOOK)
    library.review("brindovane-new", accept=True, again=True, **LOOK)
    assert [e.what for e in library.history("brindovane-new")] == ["recorded", "declined", "accepted"]


def test_two_revisions_from_the_same_one_do_not_overwrite_each_other(library):
    """The second is refused with both sides, and nothing of it is recorded."""
    library.record(FIRST, **WHEN)
    library.revise(_with_a(FIRST, "7.2"), expect=1, **WHEN)
    before = library.position
    with pytest.raises(RevisedMeanwhile) as caught:
        library.revise(_with_a(FIRST, "7.3"), expect=1, **WHEN)
    assert (caught.value.expected, caught.value.found) == (1, 2)
    assert "yours: A=7.3" in str(caught.value)
    assert "revision 2: A=7.2" in str(caught.value)
    assert library.position == before


def test_a_record_must_fit_the_library(library):
    """What it refers to is there, the key is free or keeps what it is for, and the form gives a value."""
    with pytest.raises(InvalidRecord, match=r"source: 'nobody' given; there is no source with this key\."):
        library.record(dataclasses.replace(FIRST, source="nobody"), **WHEN)
    with pytest.raises(InvalidRecord, match="gives no usable value anywhere"):
        library.record(_with_a(FIRST, "-99999"), **WHEN)
    library.record(FIRST, **WHEN)
    with pytest.raises(BadInput, match="is recorded already, in revision 1"):
        library.record(FIRST, **WHEN)
    with pytest.raises(InvalidRecord, match="the key is recorded for brindovane"):
        library.revise(dataclasses.replace(FIRST, compound="tallowane"), **WHEN)
    with pytest.raises(BadInput, match="is just so already, in revision 1"):
        library.revise(FIRST, **WHEN)
    with pytest.raises(UnknownKey):
        library.revise(dataclasses.replace(FIRST, key="nothing"), **WHEN)
    with pytest.raises(BadInput, match="is not recorded by hand"):
        library.record(Review(of_kind="source", of_key="x", of_revision="1", standing="accepted"), **WHEN)


@pytest.mark.parametrize(
    ("form", "prop", "phase", "unit", "coefficients"),
    [
        ("magnus", "vapor-pressure", "liquid", "kPa", {"p0": "0", "a": "17.27", "b": "237.3"}),
        ("clausius-clapeyron", "vapor-pressure", "liquid", "kPa", {"T0": "300", "p0": "-1", "H": "40000"}),
        ("clapeyron-melting", "melting-pressure", "solid", "MPa", {"T0": "300", "p0": "1", "H": "9000", "dV": "0"}),
        ("kechin", "melting-pressure", "solid", "MPa", {"T0": "300", "a": "0", "b": "1", "c": "1"}),
        ("rackett", "saturated-liquid-density", "liquid", "mol/dm3", {"Tc": "500", "pc": "4", "ZRA": "0"}),
    ],
)
def test_coefficients_without_any_value_are_refused(form, prop, phase, unit, coefficients, library):
    """A logarithm of nothing or a division by zero in a form is a bad record, not a fault of the program."""
    record = dataclasses.replace(
        FIRST, key="without-a-value", form=form, property=prop, phase=phase, value_unit=unit,
        coefficients=coefficients, temperature_unit="K", window_min="300", window_max="400", window_unit="K",
        uncertainty="",
    )  # fmt: skip
    with pytest.raises(InvalidRecord, match="gives no usable value anywhere"):
        library.record(record, **WHEN)


def test_a_withdrawal_waits_and_then_ends_the_answers(library):
    """A proposed withdrawal changes nothing; accepted, the record answers no more; it may be accepted again."""
    done = library.withdraw("brindovane-kirchhoff", cause="erratum", **WHEN)
    assert done.record.cause == "erratum"
    assert _answering(library, 400.0)[0] == "brindovane-kirchhoff"
    with pytest.raises(BadInput, match="waits for review already"):
        library.withdraw("brindovane-kirchhoff", **WHEN)
    library.review("brindovane-kirchhoff", accept=True, **LOOK)
    with pytest.raises(LookupError, match="brindovane-kirchhoff is withdrawn"):
        library.lookup("brindovane", 400.0)
    with pytest.raises(BadInput, match="is withdrawn already"):
        library.withdraw("brindovane-kirchhoff", **WHEN)
    # said twice, a verdict does not undo itself
    with pytest.raises(BadInput, match="add --again"):
        library.review("brindovane-kirchhoff", accept=True, **LOOK)
    library.review("brindovane-kirchhoff", accept=True, again=True, **LOOK)
    assert _answering(library, 400.0)[0] == "brindovane-kirchhoff"
    library.withdraw("brindovane-kirchhoff", **WHEN)
    library.review("brindovane-kirchhoff", accept=False, **LOOK)
    assert _answering(library, 400.0)[0] == "brindovane-kirchhoff"
    assert [e.what for e in library.history("brindovane-kirchhoff")] == [
        "recorded", "accepted", "withdrawal proposed", "withdrawn", "accepted", "withdrawal proposed",
        "withdrawal declined",
    ]  # fmt: skip


@pytest.mark.parametrize(
    ("kind", "key"), [("compound", "brindovane"), ("review", "correlation:brindovane-kirchhoff@1")]
)
def test_what_has_no_standing_is_not_withdrawn(kind, key, library):
    """Naming the kind does not make a withdrawal of what none could take out."""
    with pytest.raises(BadInput, match=f"The {kind} .* is not withdrawn"):
        library.withdraw(key, kind=kind, **WHEN)
    assert library.position == 2


def test_a_draft_over_a_withdrawn_revision_brings_it_back_once_accepted(library):
    """Revising what is withdrawn proposes it anew."""
    library.withdraw("brindovane-kirchhoff", **WHEN)
    library.review("brindovane-kirchhoff", accept=True, **LOOK)
    record = library.newest("brindovane-kirchhoff").record
    library.revise(dataclasses.replace(record, note="invented note"), **WHEN)
    assert library.entry("brindovane-kirchhoff").standing == "withdrawn"
    library.review("brindovane-kirchhoff", accept=True, **LOOK)
    assert _answering(library, 400.0) == ("brindovane-kirchhoff", 2, "accepted")


def test_a_draft_and_a_withdrawal_that_both_wait_are_told_apart(library):
    """The key alone could mean both; the kind says which."""
    record = library.newest("brindovane-kirchhoff").record
    library.revise(dataclasses.replace(record, note="invented note"), **WHEN)
    library.withdraw("brindovane-kirchhoff", **WHEN)
    with pytest.raises(BadInput, match=r"Both wait for review: .*\. Say which with --kind"):
        library.review("brindovane-kirchhoff", accept=True, **LOOK)
    assert library.review("brindovane-kirchhoff", accept=True, kind="withdrawal", **LOOK).record.kind == "withdrawal"
    assert library.review("brindovane-kirchhoff", accept=True, **LOOK).record.kind == "correlation"
    assert _answering(library, 400.0) == ("brindovane-kirchhoff", 2, "accepted")


def test_withdrawing_a_source_takes_along_what_rests_on_it(library):
    """Correlations, fixed points and datasets of a source go and come back with it, in one change."""
    source = library.newest("brindovane-kirchhoff").record.source
    done = library.withdraw(source, cause="retraction", **WHEN)
    resting = {entry.key for entry in library.resting(done.record)}
    assert "brindovane-kirchhoff" in resting
    before = {e.key for e in library.correlations() if e.accepted}
    change = library.review(source, accept=True, **LOOK).change.number
    after = {e.key for e in library.correlations() if e.accepted}
    assert before - after == before & resting
    assert library.at(change - 1).lookup("brindovane", 400.0).correlation.key == "brindovane-kirchhoff"
    with pytest.raises(LookupError, match=f"its source {source} is withdrawn: invented"):
        library.lookup("brindovane", 400.0)
    assert {r.key for r in library.diff(change - 1).records if r.what == "withdrawn"} >= before & resting | {source}
    # what is recorded later on the same source does not answer either
    library.record(dataclasses.replace(FIRST, source=source), **WHEN)
    library.review("brindovane-new", accept=True, **LOOK)
    with pytest.raises(LookupError):
        library.lookup("brindovane", 330.0)
    library.review(source, accept=True, again=True, **LOOK)
    assert _answering(library, 410.0)[0] == "brindovane-kirchhoff"
    assert _answering(library, 330.0)[0] == "brindovane-new"


def test_a_fixed_point_of_a_withdrawn_source_limits_nothing(library):
    """The critical temperature of a withdrawn source is no limit any more."""
    limit = library.coverage("brindovane").limits.upper_point
    library.withdraw(limit.record.source, **WHEN)
    library.review(limit.record.source, accept=True, **LOOK)
    assert library.coverage("brindovane").limits.upper_point is None


def test_a_preference_decides_once_accepted_and_no_more_when_withdrawn(library):
    """A preference is a recorded fact like any other, and a circle of them is refused."""
    library.record(dataclasses.replace(FIRST, window_min="370", window_max="410"), **WHEN)
    library.review("brindovane-new", accept=True, **LOOK)
    assert _answering(library, 400.0)[0] == "brindovane-new"
    done = library.prefer("brindovane-kirchhoff", "brindovane-new", **WHEN)
    assert _answering(library, 400.0)[0] == "brindovane-new"
    with pytest.raises(BadInput, match="is preferred over brindovane-new already"):
        library.prefer("brindovane-kirchhoff", "brindovane-new", **WHEN)
    with pytest.raises(BadInput, match="would go round in a circle"):
        library.prefer("brindovane-new", "brindovane-kirchhoff", **WHEN)
    library.review(done.record.key, accept=True, **LOOK)
    assert _answering(library, 400.0)[0] == "brindovane-kirchhoff"
    library.withdraw(done.record.key, **WHEN)
    library.review(done.record.key, accept=True, **LOOK)
    assert _answering(library, 400.0)[0] == "brindovane-new"
    again = library.prefer("brindovane-new", "brindovane-kirchhoff", **WHEN)
    library.review(again.record.key, accept=True, **LOOK)
    with pytest.raises(BadInput, match="would go round in a circle"):  # reinstating the first one would
        library.review(done.record.key, accept=True, again=True, **LOOK)


def test_a_preference_is_for_one_thing(library):
    """Correlations of two compounds are not preferred over each other."""
    with pytest.raises(InvalidRecord, match="between correlations of one compound, property and phase"):
        library.prefer("brindovane-kirchhoff", "tallowane-wagner", **WHEN)
    with pytest.raises(UnknownKey):
        library.prefer("brindovane-kirchhoff", "nothing", **WHEN)


def test_long_keys_make_a_preference_of_their_own(library):
    """Keys too long for a joined one are told apart by a digest."""
    keys = [f"{'x' * 70}{i}" for i in range(3)]
    for key in keys:
        library.record(dataclasses.replace(FIRST, key=key), **WHEN)
    named = {library.prefer(keys[0], over, **WHEN).record.key for over in keys[1:]}
    assert len(named) == 2
    assert all(len(key) <= 80 for key in named)


def test_one_who_keeps_a_library_alone_says_so_once(tmp_path):
    """In a library kept by one person the author may accept, at once too; a team says so again."""
    with start_library(tmp_path / "solo.db", "scenario", "ann", solo=True) as library:
        library.record(SOURCE, author="ann")
        library.record(FIRST, accept=True, **WHEN)
        assert _answering(library, 330.0) == ("brindovane-new", 1, "accepted")
        library.revise(_with_a(FIRST, "7.2"), **WHEN)
        library.review("brindovane-new", accept=True, author="ann", note="looked")
        library.withdraw("brindovane-new", accept=True, **WHEN)
        with pytest.raises(LookupError):
            library.lookup("brindovane", 330.0)
        assert library.keep(solo=True, author="ann") is None
        assert library.keep(solo=False, author="ann").change.author == "ann"
        with pytest.raises(BadInput, match="is for a library that one person keeps"):
            library.withdraw("brindovane-kirchhoff", accept=True, **WHEN)
        assert library.history("library")[-1].fields[0].after == "team"


def test_a_review_may_name_the_revision_it_looked_at(library):
    """A newer draft than the one looked at is not accepted by mistake."""
    library.record(FIRST, **WHEN)
    library.revise(_with_a(FIRST, "7.2"), **WHEN)
    with pytest.raises(RevisedMeanwhile):
        library.review("brindovane-new", accept=True, expect=1, **LOOK)
    library.review("brindovane-new", accept=True, expect=2, **LOOK)


def test_the_queue_lists_what_waits_oldest_first(library):
    """New drafts, revisions and withdrawals, each until it is decided or a newer draft takes its place."""
    before = [w.record.key for w in library.queue()]
    library.record(FIRST, **WHEN)
    library.withdraw("brindovane-kirchhoff", **WHEN)
    library.revise(_with_a(FIRST, "7.2"), **WHEN)
    added = library.queue()[len(before) :]
    assert [(w.record.key, w.revision, w.what, w.change.author) for w in added] == [
        ("withdrawal:correlation:brindovane-kirchhoff", 1, "withdrawal", "ann"),
        ("brindovane-new", 2, "revision", "ann"),
    ]
    library.review("brindovane-new", accept=False, **LOOK)
    assert [w.record.key for w in library.queue()[len(before) :]] == ["withdrawal:correlation:brindovane-kirchhoff"]
    assert len(library.at(library.position - 1).queue()) == len(before) + 2


def test_a_dataset_and_a_fixed_point_are_reviewed_too(library):
    """What can change an answer is a draft: a critical temperature, points that confirm."""
    point = FixedPoint(
        key="brindovane-tc-new", compound="brindovane", quantity="critical-temperature", value="500", unit="K",
        temperature_scale="ITS-90", evidence="standard", source="invented-handbook", locator="p. 1", obtained="seen",
    )  # fmt: skip
    library.record(point, **WHEN)
    assert library.coverage("brindovane").limits.upper == pytest.approx(618.4)
    library.review("brindovane-tc-new", accept=True, **LOOK)
    assert library.coverage("brindovane").limits.upper == 500.0
    data = Dataset(
        key="brindovane-points", compound="brindovane", property="vapor-pressure", phase="liquid",
        temperature_unit="K", value_unit="kPa", temperature_scale="ITS-90", evidence="measured",
        source="invented-handbook", locator="p. 2", obtained="seen", points=(Point("300", "1"),),
    )  # fmt: skip
    library.record(data, **WHEN)
    assert library.entry("brindovane-points").standing == "draft"


def test_every_decision_is_signed(library):
    """Neither an empty reason nor an empty author is recorded."""
    for author, reason in (("", "why"), ("ann", ""), ("ann", " "), ("a\tb", "why")):
        with pytest.raises(BadInput):
            library.withdraw("brindovane-kirchhoff", author=author, reason=reason)
    assert library.position == 2
    with pytest.raises(InvalidRecord, match="cause"):
        library.withdraw("brindovane-kirchhoff", cause="mood", **WHEN)


def test_a_library_opened_again_stands_where_it_was(library, tmp_path):
    """What was decided is read back by another opening of the file."""
    library.record(FIRST, **WHEN)
    library.review("brindovane-new", accept=True, **LOOK)
    with open_library(tmp_path / "own.db") as again:
        assert _answering(again, 330.0) == ("brindovane-new", 1, "accepted")


def test_a_declined_revision_is_no_draft_once_what_was_in_force_is_withdrawn(library):
    """A word on an older revision does not undo the verdict on the newest one."""
    library.record(FIRST, **WHEN)
    library.review("brindovane-new", accept=True, **LOOK)
    library.revise(_with_a(FIRST, "7.2"), **WHEN)
    library.review("brindovane-new", accept=False, **LOOK)
    library.withdraw("brindovane-new", **WHEN)
    library.review("brindovane-new", kind="withdrawal", accept=True, **LOOK)
    entry = library.entry("brindovane-new")
    assert (entry.revision, entry.standing, entry.waiting) == (1, "withdrawn", 0)
    assert not [item for item in library.queue() if item.record.key == "brindovane-new"]
    assert _answering(library, 330.0, drafts=True)[0] == "brindovane-cox-draft"
    with pytest.raises(BadInput, match="waits for review"):
        library.review("brindovane-new", accept=False, kind="correlation", **LOOK)


def test_a_withdrawal_does_not_take_out_what_was_accepted_after_it(library):
    """It is of the revision that was looked at; the correction accepted since stays in force."""
    library.record(FIRST, **WHEN)
    library.review("brindovane-new", accept=True, **LOOK)
    library.withdraw("brindovane-new", **WHEN)
    library.revise(_with_a(FIRST, "7.2"), **WHEN)
    library.review("brindovane-new", kind="correlation", accept=True, **LOOK)
    with pytest.raises(BadInput, match="is of revision 1 of the correlation brindovane-new; revision 2 was decided on"):
        library.review("brindovane-new", kind="withdrawal", accept=True, **LOOK)
    assert _answering(library, 330.0) == ("brindovane-new", 2, "accepted")
    library.review("brindovane-new", kind="withdrawal", accept=False, **LOOK)
    library.withdraw("brindovane-new", **WHEN)
    library.review("brindovane-new", kind="withdrawal", accept=True, **LOOK)
    assert library.entry("brindovane-new").standing == "withdrawn"


def test_who_starts_a_library_is_signed_like_anybody_else(tmp_path):
    """Blanks around the name are no part of it, as in every later change."""
    with start_library(tmp_path / "own.db", "none", " ann ") as library:
        assert library.change(1).author == "ann"


@pytest.mark.parametrize("same", ["ANN  SMITH", "Ann\u00a0Smith", "Ann\u2003Smith", "\uff21nn Smith"])
def test_a_name_written_another_way_is_the_same_person(same, library):
    """Case, runs and kinds of blanks, and wide letters do not make another reviewer."""
    library.record(FIRST, author="Ann Smith")
    with pytest.raises(BadInput, match="somebody else must review it"):
        library.review(FIRST.key, accept=True, author=same, note="invented")
    library.review(FIRST.key, accept=True, author="Bob Smith", note="invented")


def test_a_history_tells_every_proposal_of_a_preference(library):
    """Also its withdrawal that waits, and that it was proposed again."""
    one, other = "brindovane-kirchhoff", "brindovane-antoine-low"
    name = library.prefer(one, other, author="ann", reason="first").record.key
    library.review(name, accept=True, author="bob", note="looked")
    library.withdraw(name, author="ann", reason="no more")
    library.review(name, kind="withdrawal", accept=True, author="bob", note="looked again")
    library.prefer(one, other, author="cid", reason="second")
    told = [(e.change.author, e.what, e.note) for e in library.history(one) if "preference" in e.what]
    pair = f"{one} over {other}"
    assert told[0] == ("ann", "preference recorded", f"{pair}: first")
    assert told[1][1] == "preference accepted"
    assert told[2] == ("ann", "preference withdrawal proposed", f"{pair}: other: no more")
    assert told[3][1] == "preference withdrawn"
    assert told[4] == ("cid", "preference recorded", f"{pair}: second")
