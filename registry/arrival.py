"""From a package to what must be appended: only what is new or different."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from registry.admission import find_cycle
from registry.dossier import Entry
from registry.errors import CellProblem, InvalidPackage
from registry.exchange.loading import Item, read_items
from registry.holdings import Holdings, draft_of
from registry.judgement import judge, propose_withdrawal, withdraw_at_once
from registry.records import REVIEWED, Preference, Withdrawal
from registry.store.history import Draft
from registry.store.library_file import View

__all__ = ["LoadPlan", "plan_load"]


@dataclass(frozen=True)
class LoadPlan:
    """What a load would append.

    Attributes
    ----------
    drafts : tuple of Draft
        The records, in order.
    counts : mapping
        ``added``, ``revised``, ``reviewed``, ``proposed`` (withdrawals that
        wait for review) and ``unchanged``.
    changed : tuple of str
        What is revised, reviewed or proposed, a line each.
    """

    drafts: tuple[Draft, ...]
    counts: dict[str, int]
    changed: tuple[str, ...]


def plan_load(view: View, package: Path, *, accept: bool = False) -> LoadPlan:
    """Read a package and compare it with the library.

    Parameters
    ----------
    view : View
        The library, inside a write transaction.
    package : Path
        The package.
    accept : bool
        Review the whole load at once: give every record the standing that
        the package says. Without, what can change an answer arrives as a
        draft.

    Returns
    -------
    LoadPlan
        Empty if everything is there already.
    """
    holdings = Holdings(view)
    items = read_items(package, holdings.record)
    _check_preferences(items, holdings, package)
    if accept:
        _check_standings(items, holdings, package)
    plan = _Plan(holdings, accept)
    drafts = [draft for item in items for draft in plan.item(item)]
    return LoadPlan(tuple(drafts), dict(plan.counts), tuple(plan.told))


class _Plan:
    """Row by row, what a load appends."""

    def __init__(self, holdings: Holdings, accept: bool) -> None:
        self._holdings = holdings
        self._accept = accept
        self.counts = Counter({"added": 0, "revised": 0, "reviewed": 0, "proposed": 0, "unchanged": 0})
        self.told: list[str] = []

    def item(self, item: Item) -> Iterator[Draft]:
        """What one row appends."""
        record = item.record
        newest = self._holdings.newest(record.kind, record.key)
        if newest is None:
            self.counts["added"] += 1
            yield draft_of(record)
            yield from self._arrive(item, 1)
        elif newest.record == record:
            yield from self._review(item, newest)
        elif self._counts_already(item):
            self.counts["unchanged"] += 1  # the draft over it goes on waiting
        else:
            self.counts["revised"] += 1
            before, after = newest.record.content(), record.content()
            fields = sorted(name for name in {**before, **after} if before.get(name) != after.get(name))
            self.told.append(f"{record.kind} {record.key}: {', '.join(fields)} revised")
            yield draft_of(record)
            yield from self._arrive(item, newest.revision + 1)

    def _counts_already(self, item: Item) -> bool:
        counting = self._holdings.counting(item.record.kind, item.record.key)
        if counting is None or counting.record != item.record:
            return False
        return (counting.standing, counting.standing_note) == (item.standing, item.standing_note)

    def _arrive(self, item: Item, revision: int) -> Iterator[Draft]:
        """The standing of a revision that is new here."""
        if item.record.kind not in REVIEWED:
            return
        if self._accept:
            yield from self._settle(item, revision, ("draft", ""))
        elif item.standing in ("declined", "withdrawn"):
            said = f"{item.standing} in the package: {item.standing_note}"
            yield judge(item.record, revision, "draft", said)

    def _review(self, item: Item, newest: Entry[Any]) -> Iterator[Draft]:
        """The standing of a revision that is here already."""
        drafts: list[Draft] = []
        if item.record.kind in REVIEWED:
            if self._accept:
                drafts = list(self._settle(item, newest.revision, (newest.standing, newest.standing_note)))
                self.counts["reviewed"] += bool(drafts)
            elif item.standing == "withdrawn" and newest.standing == "accepted" and not self._is_proposed(item):
                drafts = [propose_withdrawal(item.record, newest.revision, "other", item.standing_note)]
                self.counts["proposed"] += 1
        if drafts:
            how = "" if self._accept else " proposed"
            self.told.append(f"{item.record.kind} {item.record.key}: {newest.standing} -> {item.standing}{how}")
        else:
            self.counts["unchanged"] += 1
        yield from drafts

    def _is_proposed(self, item: Item) -> bool:
        """True if a withdrawal waits already, so that loading again adds nothing."""
        before = self._holdings.newest(Withdrawal.kind, Withdrawal.key_for(item.record.kind, item.record.key))
        return before is not None and before.standing == "draft"

    def _settle(self, item: Item, revision: int, before: tuple[str, str]) -> Iterator[Draft]:
        """The reviews that give a revision the standing its row says, if it has another one so far."""
        record, standing, note = item.record, item.standing, item.standing_note
        if (standing, note) == before or (standing == "draft" and before[0] != "draft"):
            return  # what is decided here is not undone by a draft elsewhere
        if standing == "withdrawn":
            yield from withdraw_at_once(self._holdings, record, revision, "other", note)
        else:
            yield judge(record, revision, standing, note)


def _check_preferences(items: list[Item], holdings: Holdings, package: Path) -> None:
    """Refuse preferences that would go round in a circle, with those recorded and those that wait."""
    loaded = [item for item in items if isinstance(item.record, Preference)]
    if not loaded:
        return
    mine = {_pair(item) for item in loaded if item.standing in ("accepted", "draft")}
    # what a load accepts or withdraws ends the revisions before it; a draft does not
    ended = [item.record.key for item in loaded if item.standing in ("accepted", "withdrawn")]
    pairs = mine | holdings.preferences({key for pair in mine for key in pair}, ended)
    if cycle := find_cycle(sorted(pairs)):
        why = f"the preferences, with those recorded already, go round in a circle: {' over '.join(cycle)}."
        raise InvalidPackage(str(package), [CellProblem("preferences.csv", 0, "", "", why)])


def _pair(item: Item) -> tuple[str, str]:
    assert isinstance(item.record, Preference)
    return item.record.correlation, item.record.over


def _check_standings(items: list[Item], holdings: Holdings, package: Path) -> None:
    """A withdrawal or declining is not taken back in silence, and what is in force is not declined."""
    problems: list[CellProblem] = []
    for item in items:
        newest = holdings.newest(item.record.kind, item.record.key)
        if newest is None or item.record.kind not in REVIEWED:
            continue
        if item.standing == "accepted" and not item.standing_note and newest.standing in ("withdrawn", "declined"):
            why = f"the library has it {newest.standing}; to accept it again say why in standing_note."
            problems.append(CellProblem(item.file, item.line, "standing", "accepted", why))
        if item.standing == "declined" and newest.standing == "accepted" and newest.record == item.record:
            why = "the library has it accepted; what is in force is withdrawn, not declined."
            problems.append(CellProblem(item.file, item.line, "standing", "declined", why))
    if problems:
        raise InvalidPackage(str(package), problems)
