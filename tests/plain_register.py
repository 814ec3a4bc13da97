"""What a library should allow and answer, written down a second time in plain Python.

It shares no code with the program: a state is a dict of keys, a change makes
a new one, and an answer is the pointwise rule of the README at one
temperature. Only what the state machine drives is here: two invented
compounds, Antoine's equation, triple and critical temperatures.
"""

from __future__ import annotations

import math
from typing import Any, NamedTuple

REVIEWED = ("correlation", "fixed-point", "preference", "withdrawal")
EVIDENCE = ("standard", "evaluated", "measured", "compiled", "estimated")
PASCAL = {"Pa": 1.0, "kPa": 1000.0, "Torr": 101325.0 / 760.0, "mmHg": 13595.1 * 9.80665 / 1000.0}
CELSIUS = 273.15

Name = tuple[str, str]
Found = tuple[str, int, float]


class Forbidden(Exception):
    """A verb that must be refused."""


class Kept(NamedTuple):
    """One revision: what it says, whose it is, and its place among all records."""

    content: dict[str, Any]
    author: str
    order: int


class Word(NamedTuple):
    """What was decided about one revision."""

    revision: int
    standing: str
    note: str


class Held(NamedTuple):
    """Everything ever said under one key."""

    kind: str
    revisions: tuple[Kept, ...] = ()
    words: tuple[Word, ...] = ()

    @property
    def newest(self) -> int:
        return len(self.revisions)

    @property
    def last(self) -> dict[str, Any]:
        return self.revisions[-1].content

    @property
    def decision(self) -> Word | None:
        """The newest acceptance or withdrawal."""
        return next((w for w in reversed(self.words) if w.standing in ("accepted", "withdrawn")), None)

    def verdict(self) -> tuple[str, str]:
        """Standing and note of the newest revision."""
        if self.kind not in REVIEWED:
            return self.decision[1:] if self.decision else ("", "")
        said = [w for w in self.words if w.revision == self.newest]
        return said[-1][1:] if said else ("draft", "")

    @property
    def waits(self) -> bool:
        return self.verdict()[0] == "draft"

    def counting(self) -> Word:
        """The revision that counts, with its standing."""
        if self.kind in REVIEWED and self.decision:
            return self.decision
        return Word(self.newest, *self.verdict())

    def counts_as(self, content: dict[str, Any], standing: str, note: str) -> bool:
        """True if just this counts, with just this said about it."""
        number, *said = self.counting()
        return said == [standing, note] and self.revisions[number - 1].content == content


State = dict[Name, Held]


class Register:
    """The states of a library, one a position; position 0 is before anything."""

    def __init__(self, solo: bool) -> None:
        self.history: list[State] = [{}]
        self.editions: dict[str, int] = {}
        self.solo = solo
        self._records = 0

    @property
    def state(self) -> State:
        return self.history[-1]

    @property
    def position(self) -> int:
        return len(self.history) - 1

    # what is appended

    def _add(self, state: State, name: Name, content: dict[str, Any], author: str) -> int:
        held = state.get(name, Held(name[0]))
        self._records += 1
        kept = Kept(content, author, self._records)
        state[name] = held._replace(revisions=(*held.revisions, kept))
        return held.newest + 1

    def _say(self, state: State, name: Name, revision: int, standing: str, note: str) -> None:
        """A review, which is a record too; an accepted withdrawal withdraws what it is about."""
        self._records += 1
        held = state[name]
        state[name] = held._replace(words=(*held.words, Word(revision, standing, note)))
        if name[0] == "withdrawal" and standing == "accepted":
            content = held.revisions[revision - 1].content
            aim = state[content["of"]]
            word = Word(content["revision"], "withdrawn", content["reason"])
            state[content["of"]] = aim._replace(words=(*aim.words, word))

    def _propose(self, state: State, name: Name, revision: int, reason: str, author: str) -> tuple[Name, int]:
        key = ("withdrawal", f"withdrawal:{name[0]}:{name[1]}")
        return key, self._add(state, key, {"of": name, "revision": revision, "reason": reason}, author)

    def _finish(self, state: State) -> None:
        self.history.append(state)

    # the verbs

    def start(self) -> None:
        """The first change: whose library it is."""
        self._records += 1
        self._finish({})

    def record(self, name: Name, content: dict[str, Any], author: str, accept: bool) -> None:
        self._need(self.solo or not accept)
        self._need(name not in self.state)
        self._submit(name, content, author, accept)

    def revise(self, name: Name, content: dict[str, Any], author: str, accept: bool, expect: int | None) -> None:
        self._need(self.solo or not accept)
        self._need(name in self.state)
        held = self.state[name]
        self._need(expect in (None, held.newest))
        self._need(held.last != content)
        self._submit(name, content, author, accept)

    def _submit(self, name: Name, content: dict[str, Any], author: str, accept: bool) -> None:
        state = dict(self.state)
        revision = self._add(state, name, content, author)
        if accept and name[0] in REVIEWED:
            self._say(state, name, revision, "accepted", "")
        self._finish(state)

    def review(self, name: Name, accept: bool, author: str, note: str) -> None:
        self._need(name in self.state)
        held = self.state[name]
        standing = held.verdict()[0]
        again = accept and standing in ("declined", "withdrawn")
        self._need(standing == "draft" or again)
        self._need(self.solo or held.revisions[-1].author != author)
        if accept and name[0] == "preference":
            self._need(not circular(self._pairs() | {(held.last["correlation"], held.last["over"])}))
        if accept and name[0] == "withdrawal":
            # what was accepted after the revision to be withdrawn is not taken out with it
            decision = self.state[held.last["of"]].decision
            self._need(decision is None or decision.revision <= held.last["revision"])
        state = dict(self.state)
        self._say(state, name, held.newest, "accepted" if accept else "declined", note)
        self._finish(state)

    def withdraw(self, name: Name, author: str, reason: str, accept: bool) -> None:
        self._need(self.solo or not accept)
        self._need(name in self.state)
        counting = self.state[name].counting()
        self._need(counting.standing != "withdrawn")
        before = self.state.get(("withdrawal", f"withdrawal:{name[0]}:{name[1]}"))
        self._need(before is None or not before.waits)
        state = dict(self.state)
        key, revision = self._propose(state, name, counting.revision, reason, author)
        if accept:
            self._say(state, key, revision, "accepted", "")
        self._finish(state)

    def prefer(self, one: str, other: str, author: str, reason: str, accept: bool) -> None:
        self._need(self.solo or not accept)
        first, second = self.state.get(("correlation", one)), self.state.get(("correlation", other))
        self._need(first is not None and second is not None and one != other)
        self._need(first.last["compound"] == second.last["compound"])
        name = ("preference", f"{one}-over-{other}")
        if name in self.state:
            self._need(self.state[name].verdict()[0] in ("declined", "withdrawn"))
        self._need(not circular(self._pairs() | {(one, other)}))
        self._submit(name, {"correlation": one, "over": other, "reason": reason}, author, accept)

    def freeze(self, name: str) -> None:
        self._need(name.casefold() not in self.editions)
        self.editions[name.casefold()] = self.position
        self._records += 1
        self._finish(dict(self.state))

    def keep(self, solo: bool) -> None:
        """One change, or none where the library says so already."""
        if solo != self.solo:
            self.solo = solo
            self._records += 1
            self._finish(dict(self.state))

    def load(self, rows: list[tuple[Name, dict[str, Any], str, str]], author: str, accept: bool) -> None:
        """Rows of name, content, standing, note; in the order of a package's files."""
        offered = {name for name, _, standing, _ in rows if standing in ("accepted", "withdrawn")}
        pairs = {
            (content["correlation"], content["over"])
            for name, content, standing, _ in rows
            if name[0] == "preference" and standing in ("accepted", "draft")
        }
        self._need(not pairs or not circular(pairs | self._pairs(offered)))
        for name, content, standing, note in rows if accept else ():
            if (held := self.state.get(name)) and name[0] in REVIEWED:
                before = held.verdict()[0]
                self._need(standing != "accepted" or bool(note) or before not in ("declined", "withdrawn"))
                self._need(standing != "declined" or before != "accepted" or held.last != content)
        state = dict(self.state)
        for row in rows:
            self._load_row(state, *row, author, accept)
        if state != self.state:
            self._finish(state)

    def _load_row(
        self, state: State, name: Name, content: dict[str, Any], standing: str, note: str, author: str, accept: bool
    ) -> None:  # fmt: skip
        held = state.get(name)
        if held is None or held.last != content:
            if held and held.counts_as(content, standing, note):
                return  # a draft over it goes on waiting
            before = ("draft", "")
            revision = self._add(state, name, content, author)
            if not accept and name[0] in REVIEWED and standing in ("declined", "withdrawn"):
                # a note on arrival, which decides nothing
                self._say(state, name, revision, "draft", f"{standing} in the package: {note}")
        else:
            before, revision = held.verdict(), held.newest
        if name[0] not in REVIEWED:
            return
        if accept:
            # what is decided here is not undone by a draft elsewhere; a draft's note is taken over
            decides = (standing, note) != before and (standing != "draft" or before[0] == "draft")
            if decides and standing == "withdrawn":
                key, number = self._propose(state, name, revision, note, author)
                self._say(state, key, number, "accepted", "")
            elif decides:
                self._say(state, name, revision, standing, note)
        elif standing == "withdrawn" and before[0] == "accepted":
            waiting = state.get(("withdrawal", f"withdrawal:{name[0]}:{name[1]}"))
            same = waiting and waiting.last == {"of": name, "revision": revision, "reason": note}
            # nor again where somebody has decided on just that
            if waiting is None or not (waiting.waits or same):
                self._propose(state, name, revision, note, author)

    @staticmethod
    def _need(holds: bool) -> None:
        if not holds:
            raise Forbidden

    def _pairs(self, aside: set[Name] = frozenset()) -> set[tuple[str, str]]:
        """The preferences that count or wait."""
        return {
            (held.last["correlation"], held.last["over"])
            for name, held in self.state.items()
            if name[0] == "preference" and name not in aside and (held.waits or held.counting().standing == "accepted")
        }

    # what it answers

    def queue(self, position: int) -> list[tuple[str, str, int]]:
        """What waits at a position, oldest first."""
        waiting = [(h.revisions[-1].order, *n, h.newest) for n, h in self.history[position].items() if h.waits]
        return [(kind, key, revision) for _, kind, key, revision in sorted(waiting)]

    def standings(self, position: int, compound: str) -> dict[Name, tuple[int, str, int]]:
        """Of each correlation, fixed point and preference: the revision that counts, its standing, what waits."""
        state = self.history[position]
        found = {}
        for name, held in state.items():
            if name[0] not in REVIEWED or name[0] == "withdrawal" or not name[1].startswith(compound):
                continue
            number, standing, _ = held.counting()
            source = held.revisions[number - 1].content.get("source", "")
            if standing in ("accepted", "draft") and source and is_withdrawn(state, source):
                standing = "withdrawn"
            found[name] = (number, standing, held.newest if held.waits and number != held.newest else 0)
        return found

    def answer(self, position: int, compound: str, kelvin: float, drafts: bool = False) -> Found | None:
        """Key, revision and value in Pa, or None where nothing may answer."""
        state = self.history[position]
        low, high = limits(state, compound)
        covering = {}
        for (kind, key), held in state.items():
            if kind != "correlation" or held.last["compound"] != compound:
                continue
            number, standing, _ = held.counting()
            if drafts and held.waits:
                number, standing = held.newest, "accepted"
            content = held.revisions[number - 1].content
            reach = max(content["window"][0], low - 0.05), min(content["window"][1], high)
            inside = reach[0] <= reach[1] and reach[0] - 1e-9 <= kelvin <= reach[1] + 1e-9
            if standing == "accepted" and inside and not is_withdrawn(state, content["source"]):
                covering[key] = (number, content, reach[1] - reach[0])
        dropped = {
            held.last["over"]
            for (kind, _), held in state.items()
            if kind == "preference" and held.counting().standing == "accepted" and held.last["correlation"] in covering
        }
        left = [key for key in covering if key not in dropped]
        if not left:
            return None

        def rank(key: str) -> tuple[int, float, float, int, str]:
            _, content, width = covering[key]
            stated = next((p for upper, p in content["uncertainty"] if kelvin <= upper), math.inf)
            year = state["source", content["source"]].last["year"]
            return EVIDENCE.index(content["evidence"]), stated, -width, -year, key

        best = min(left, key=rank)
        number, content, _ = covering[best]
        return best, number, antoine(content, kelvin)


def is_withdrawn(state: State, source: str) -> bool:
    decision = state["source", source].decision
    return decision is not None and decision.standing == "withdrawn"


def limits(state: State, compound: str) -> tuple[float, float]:
    """Triple and critical temperature in force, K; 0 and infinity without."""
    best: dict[str, list[Any]] = {}
    for (kind, key), held in state.items():
        if kind != "fixed-point" or held.last["compound"] != compound:
            continue
        number, standing, _ = held.counting()
        content = held.revisions[number - 1].content
        if standing != "accepted" or is_withdrawn(state, content["source"]):
            continue
        year = state["source", content["source"]].last["year"]
        rank = content["rounded"], EVIDENCE.index(content["evidence"]), -year, key
        best.setdefault(content["quantity"], []).append((rank, content["kelvin"]))
    points = {quantity: min(ranked)[1] for quantity, ranked in best.items()}
    return points.get("triple-point-temperature", 0.0), points.get("critical-temperature", math.inf)


def antoine(content: dict[str, Any], kelvin: float) -> float:
    """Antoine's equation as it stands, in Pa."""
    t = kelvin - CELSIUS if content["temperature_unit"] == "degC" else kelvin
    a, b, c = content["coefficients"]
    return 10.0 ** (a - b / (t + c)) * PASCAL[content["value_unit"]]


def circular(pairs: set[tuple[str, str]]) -> bool:
    """True if the pairs cannot be put in an order: taking away those that nothing is over leaves some."""
    left = set(pairs)
    while left:
        below = {over for _, over in left}
        rest = {pair for pair in left if pair[0] in below}
        if rest == left:
            return True
        left = rest
    return False
