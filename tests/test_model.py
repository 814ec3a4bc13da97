"""Whatever people record and decide, every past position answers what the plain register says, after every step.

The compounds, correlations and sources are invented and no data.
"""

from __future__ import annotations

import functools
import hashlib
import shutil
import tempfile
from collections.abc import Callable
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from hypothesis import HealthCheck, settings
from hypothesis import strategies as st
from hypothesis.stateful import (
    RuleBasedStateMachine,
    initialize,
    invariant,
    precondition,
    rule,
    run_state_machine_as_test,
)
from invented_team import COMPOUNDS, CORRELATIONS, FIRST, MARK, NAMES, PEOPLE, POINTS, SOURCES, build_record, contents
from plain_register import Forbidden, Name, Register

from registry.archive import Archive
from registry.errors import BadInput, Refused, RevisedMeanwhile
from registry.exchange.dumping import dump_items
from registry.library import Library
from registry.opening import open_library, start_library
from registry.records import Compound

# at every bound that can be drawn, beside it, between them, and beyond all
KELVIN = (
    240.0, 249.999, 250.0, 262.2, 262.25, 270.0, 289.9, 289.95, 299.999, 300.0 - 5e-10, 300.0 - 2e-9, 300.0, 320.0,
    340.0, 340.0 - 2e-9, 350.0, 350.5, 380.0, 380.0 + 2e-9, 390.0, 400.0, 400.001, 410.0, 420.0, 440.0, 460.0, 461.0,
)  # fmt: skip

people = st.sampled_from(PEOPLE)
at_once = st.sampled_from([False, False, True])
notes = st.sampled_from(["Looked at it.", "Against the invented page."])
seldom = st.integers(0, 9)  # 9, or what lies just below, is the odd case
letters = st.sampled_from(sorted(CORRELATIONS))

Row = tuple[Name, dict[str, Any], str, str]


@functools.cache
def first_library(solo: bool) -> bytes:
    """A library file that begins with the first records."""
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        compounds = [(Compound(key=key, name=f"{key} (invented)", formula="C4H10"), ("", "")) for key in COMPOUNDS]
        write_rows(folder / "first", FIRST, compounds)
        with start_library(folder / "first.db", "none", solo=solo) as library:
            library.load(folder / "first", author=PEOPLE[0], reason=MARK, accept=True)
        return (folder / "first.db").read_bytes()


def write_rows(path: Path, rows: list[Row], others: Any = ()) -> Path:
    """A package with these rows."""
    dump_items(path, [*others, *((build_record(name, content), (word, note)) for name, content, word, note in rows)])
    return path


class TeamsLibrary(RuleBasedStateMachine):
    """People record, decide and freeze; a library and the plain register are told the same."""

    @initialize(solo=st.booleans())
    def start(self, solo: bool) -> None:
        self.folder = Path(tempfile.mkdtemp(prefix="model-"))
        self.path = self.folder / "team.db"
        self.path.write_bytes(first_library(solo))
        self.library: Library = open_library(self.path)
        self.model = Register(solo)
        self.model.start()
        self.model.load(FIRST, PEOPLE[0], accept=True)
        self.expected: list[Any] = []
        self.checked = b""
        self.packages = 0

    def teardown(self) -> None:
        if hasattr(self, "library"):
            self.library.close()
            shutil.rmtree(self.folder)

    def both(self, ask: Callable[[], object], expect: Callable[[], object]) -> None:
        """One verb: done by both, or refused by both."""
        try:
            expect()
            refused = False
        except Forbidden:
            refused = True
        try:
            ask()
            done = True
        except (BadInput, RevisedMeanwhile):
            done = False
        assert done is not refused

    # what people do

    @rule(data=st.data(), key=letters, author=people, accept=at_once, odd=seldom)
    def submit_correlation(self, data: Any, key: str, author: str, accept: bool, odd: int) -> None:
        self.submit(("correlation", key), data.draw(contents(("correlation", key))), author, accept, odd)

    @rule(data=st.data(), key=st.sampled_from(sorted(POINTS)), author=people, accept=at_once, odd=seldom)
    def submit_fixed_point(self, data: Any, key: str, author: str, accept: bool, odd: int) -> None:
        self.submit(("fixed-point", key), data.draw(contents(("fixed-point", key))), author, accept, odd)

    @rule(data=st.data(), key=st.sampled_from(SOURCES), author=people, odd=seldom)
    def revise_source(self, data: Any, key: str, author: str, odd: int) -> None:
        """Its year ranks correlations, and is not reviewed."""
        self.submit(("source", key), data.draw(contents(("source", key))), author, False, odd)

    def submit(self, name: Name, content: dict[str, Any], author: str, accept: bool, odd: int) -> None:
        """Record what is new and revise what is there; seldom the other way round, or from an old revision."""
        accept = accept and (self.model.solo or odd == 6)
        record, there = build_record(name, content), name in self.model.state
        if there == (odd < 9):
            newest = self.model.state[name].newest if there else 0
            expect = {7: newest, 8: newest - 1}.get(odd)
            self.both(
                lambda: self.library.revise(record, author=author, reason=MARK, expect=expect, accept=accept),
                lambda: self.model.revise(name, content, author, accept, expect),
            )
        else:
            self.both(
                lambda: self.library.record(record, author=author, reason=MARK, accept=accept),
                lambda: self.model.record(name, content, author, accept),
            )
        self.settle(name, odd in (1, 2, 3, 4))

    def settle(self, name: Name, wanted: bool) -> None:
        """Somebody else accepts at once what now waits."""
        if wanted and name in self.model.state and self.model.state[name].waits:
            self.review(name, True, False, "Looked at it.")

    def review(self, name: Name, accept: bool, own: bool, note: str, again: bool = False) -> None:
        kind, key = name
        recorded_by = self.model.state[name].revisions[-1].author
        author = recorded_by if own else next(person for person in PEOPLE if person != recorded_by)
        self.both(
            lambda: self.library.review(key, accept=accept, author=author, note=note, kind=kind, again=again),
            lambda: self.model.review(name, accept, author, note),
        )

    @precondition(lambda self: self.model.queue(self.model.position))
    @rule(data=st.data(), accept=st.sampled_from([True, True, False]), own=seldom, note=notes)
    def review_what_waits(self, data: Any, accept: bool, own: int, note: str) -> None:
        """Accept or decline something of the queue: refused where one reviews one's own."""
        kind, key, _ = data.draw(st.sampled_from(self.model.queue(self.model.position)))
        self.review((kind, key), accept, own == 9, note)

    @precondition(lambda self: self.ended())
    @rule(data=st.data(), odd=seldom, own=seldom, note=notes)
    def review_what_was_decided(self, data: Any, odd: int, own: int, note: str) -> None:
        """Accept again what was declined or withdrawn; seldom something else, which is refused."""
        names = self.ended() if odd < 8 else list(self.model.state)
        self.review(data.draw(st.sampled_from(names)), odd < 9, own == 9, note, again=True)

    def ended(self) -> list[Name]:
        return [name for name, held in self.model.state.items() if held.verdict()[0] in ("declined", "withdrawn")]

    @rule(data=st.data(), author=people, accept=at_once, reason=notes, settled=st.booleans())
    def withdraw(self, data: Any, author: str, accept: bool, reason: str, settled: bool) -> None:
        """Withdraw a correlation, fixed point, preference or source."""
        kinds = sorted({name[0] for name in self.model.state} - {"withdrawal"})
        among = data.draw(st.sampled_from(kinds))
        kind, key = name = data.draw(st.sampled_from([name for name in self.model.state if name[0] == among]))
        accept = accept and self.model.solo
        self.both(
            lambda: self.library.withdraw(key, author=author, reason=reason, kind=kind, accept=accept),
            lambda: self.model.withdraw(name, author, reason, accept),
        )
        self.settle(("withdrawal", f"withdrawal:{kind}:{key}"), settled)

    @rule(data=st.data(), odd=seldom, author=people, accept=at_once, settled=st.booleans())
    def prefer(self, data: Any, odd: int, author: str, accept: bool, settled: bool) -> None:
        """Prefer one correlation over another; refused across compounds, in a circle, twice."""
        there = [key for key in CORRELATIONS if ("correlation", key) in self.model.state]
        one = data.draw(st.sampled_from(there))
        near = [key for key in there if CORRELATIONS[key] == CORRELATIONS[one] and key != one]
        other = data.draw(letters if odd == 9 else st.sampled_from(near))
        accept = accept and (self.model.solo or odd == 8)
        self.both(
            lambda: self.library.prefer(one, other, author=author, reason=MARK, accept=accept),
            lambda: self.model.prefer(one, other, author, MARK, accept),
        )
        self.settle(("preference", f"{one}-over-{other}"), settled)

    @rule(number=st.integers(1, 60), upper=st.booleans(), author=people)
    def freeze(self, number: int, upper: bool, author: str) -> None:
        """Freeze an edition, whose name is taken whatever its case; or one person keeps the library, or a team does."""
        name = f"{'Edition' if upper else 'edition'}-{number}"
        if number % 4:
            self.both(lambda: self.library.freeze(name, author=author, note=MARK), lambda: self.model.freeze(name))
        else:
            solo = self.model.solo is (number % 16 == 0)
            self.both(lambda: self.library.keep(solo=solo, author=author), lambda: self.model.keep(solo))

    @rule(data=st.data(), author=people, accept=st.booleans())
    def load(self, data: Any, author: str, accept: bool) -> None:
        """Load a package: new rows, rows like a revision that is here, standings of every kind, a preference."""
        rows = self.draw_rows(data)
        path = write_rows(self.folder / f"package-{self.packages}", rows)
        self.packages += 1
        self.both(
            lambda: self.library.load(path, author=author, reason=MARK, accept=accept),
            lambda: self.model.load(rows, author, accept),
        )

    def draw_rows(self, data: Any) -> list[Row]:
        rows: list[Row] = []
        for name in data.draw(st.lists(st.sampled_from(NAMES), min_size=1, max_size=3, unique=True)):
            held = self.model.state.get(name)
            known = [st.sampled_from([kept.content for kept in held.revisions])] if held else []
            content = data.draw(st.one_of(contents(name), *known))
            word = data.draw(st.sampled_from(["accepted", "draft", "declined", "withdrawn"]))
            note = data.draw(notes) if word in ("declined", "withdrawn") else ""
            note = data.draw(st.sampled_from(["", "Looked at it."])) if word == "accepted" else note
            rows.append((name, content, *((word, note) if name[0] != "source" else ("", ""))))
        pair = data.draw(st.lists(letters, max_size=2, unique=True))
        known = [("correlation", key) in self.model.state for key in pair]
        if all(known) and len({CORRELATIONS[key] for key in pair}) == 1 and len(pair) == 2:
            content = {"correlation": pair[0], "over": pair[1], "reason": MARK}
            word = data.draw(st.sampled_from(["accepted", "draft"]))
            rows.append((("preference", "-over-".join(pair)), content, word, ""))
        # as the files of a package, and the rows of each, follow each other
        order = ("source", "correlation", "fixed-point", "preference")
        return sorted(rows, key=lambda row: (order.index(row[0][0]), row[0][1]))

    # what must hold after every step

    @invariant()
    def every_position_answers_as_the_register(self) -> None:
        if not hasattr(self, "library"):
            return
        found = hashlib.sha256(self.path.read_bytes()).digest()
        if found == self.checked:
            assert self.model.position == self.library.position
            return  # not one byte of the file was changed since all was compared
        self.checked = found
        assert self.library.position == self.model.position
        for position in range(1, self.model.position + 1):
            self.compare_position(position)
        self.compare_newest()
        earlier = self.model.position * 7 % self.model.position + 1
        self.compare_more(self.library.at(earlier), earlier)
        self.compare_more(self.library, self.model.position)
        for name, position in self.model.editions.items():
            assert self.library.at(name).find_position(position) == position == self.library.find_position(name)
        frozen = [(edition.key, int(edition.position)) for edition, _ in self.library.editions()]
        assert frozen == list(self.model.editions.items())

    def expect(self, position: int) -> Any:
        """What the register says of a position: worked out once, for a past does not change."""
        while len(self.expected) < position + 1:
            at = len(self.expected)
            self.expected.append(
                {
                    compound: (
                        [self.model.answer(at, compound, kelvin) for kelvin in KELVIN],
                        self.model.standings(at, compound),
                    )
                    for compound in COMPOUNDS
                }
                if at > 1
                else {}
            )
        return self.expected[position]

    def compare_position(self, position: int) -> None:
        """Answers and standings of both compounds, read anew."""
        view = self.library.at(position)
        for compound, (answers, standings) in self.expect(position).items():
            self.compare_answers(view, compound, answers)
            dossier = view.dossier(compound)
            entries = [*dossier.correlations, *dossier.fixed_points, *dossier.preferences]
            found = {(e.record.kind, e.key): (e.revision, e.standing, e.waiting) for e in entries}
            assert found == standings, f"standings at position {position}"

    def compare_answers(self, view: Archive, compound: str, expected: list[Any], drafts: bool = False) -> None:
        batch = view.lookup(compound, KELVIN, drafts=drafts)
        revisions = {candidate.key: candidate.entry.revision for candidate in batch.coverage.answering}
        keys = [record.key for record in batch.correlations]
        found = [(keys[at], revisions[keys[at]]) if at >= 0 else None for at in batch.chosen]
        assert found == [answer and answer[:2] for answer in expected], (compound, drafts, view.position)
        wanted = np.array([answer[2] if answer else np.nan for answer in expected])
        np.testing.assert_allclose(batch.values, wanted, rtol=1e-12, atol=0.0)

    def compare_more(self, view: Archive, position: int) -> None:
        """What waits, and what answers where drafts may."""
        waiting = [(item.record.kind, item.record.key, item.revision) for item in view.queue()]
        assert waiting == self.model.queue(position)
        for compound in COMPOUNDS if position > 1 else ():
            answers = [self.model.answer(position, compound, kelvin, drafts=True) for kelvin in KELVIN]
            self.compare_answers(view, compound, answers, drafts=True)

    def compare_newest(self) -> None:
        """One temperature at a time, through the library that was open all along."""
        for compound, (answers, _) in self.expect(self.model.position).items():
            for kelvin, answer in zip(KELVIN, answers, strict=True):
                try:
                    one = self.library.lookup(compound, kelvin)
                except Refused:
                    assert answer is None
                else:
                    assert (one.correlation.key, one.revision) == answer[:2]
                    assert abs(one.value / answer[2] - 1.0) <= 1e-12


def run(examples: int, steps: int) -> None:
    slow = [HealthCheck.too_slow, HealthCheck.data_too_large, HealthCheck.filter_too_much]
    run_state_machine_as_test(
        TeamsLibrary, settings=settings(max_examples=examples, stateful_step_count=steps, suppress_health_check=slow)
    )


def test_every_past_position_answers_as_a_plain_register():
    """Ten libraries of up to fifty steps."""
    run(10, 50)


@pytest.mark.campaign
def test_every_past_position_answers_as_a_plain_register_in_full():
    """Two hundred libraries of up to fifty steps."""
    run(200, 50)
