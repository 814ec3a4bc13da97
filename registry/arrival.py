"""From a package to what must be appended: only what is new or different."""

from __future__ import annotations

import dataclasses
from collections import Counter
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from registry.admission import find_cycle
from registry.cells import LONG
from registry.dossier import Entry
from registry.entries import word_source
from registry.errors import CellProblem, Conflict, InvalidPackage, quote
from registry.exchange.loading import Item, read_items
from registry.exchange.package import DESCRIPTOR
from registry.exchange.provenance import PROPERTY, Provenance, read_provenance
from registry.holdings import Holdings
from registry.judgement import judge, propose_withdrawal, withdraw_at_once
from registry.plan import draft_of
from registry.reconciliation import Relation, compare, describe_clash, settle
from registry.records import REVIEWED, Origin, Preference, Record, Source
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
        wait for review), ``kept`` (conflicts in which what is here stays) and
        ``unchanged``.
    changed : tuple of str
        What is revised, reviewed or proposed, a line each.
    """

    drafts: tuple[Draft, ...]
    counts: dict[str, int]
    changed: tuple[str, ...]


def plan_load(
    view: View, package: Path, *, accept: bool = False, ours: Iterable[str] = (), theirs: Iterable[str] = ()
) -> LoadPlan:
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
    ours, theirs : iterable of str
        Keys that both sides have revised: what is here stays, or what the
        package says arrives; ``all`` for the rest.

    Returns
    -------
    LoadPlan
        Empty if everything is there already.

    Raises
    ------
    InvalidPackage
        With every bad cell.
    Conflict
        If both sides have revised a record and nobody said which counts.
    BadInput
        If a key is named that is no conflict.
    """
    holdings = Holdings(view)
    items = read_items(package, holdings.record)
    provenance = read_provenance(package)
    relations = _relate_all(items, holdings, provenance, package, ours, theirs)
    rows = list(zip(items, relations, strict=True))
    coming = [(item, how) for item, how in rows if how not in (Relation.KEPT, Relation.BEHIND)]
    _check_preferences([item for item, _ in coming], holdings, package)
    if accept:
        _check_standings(coming, holdings, package)
    plan = _Plan(holdings, accept, provenance)
    drafts = [draft for item, how in rows for draft in plan.item(item, how)]
    if provenance is not None:
        drafts += plan.withdraw_sources(package)
        if drafts:
            origin = Origin(library=provenance.library, root=provenance.root, since=provenance.since_root)
            drafts.append(draft_of(origin))
    return LoadPlan(tuple(drafts), dict(plan.counts), tuple(plan.told))


def _relate_all(
    items: list[Item], holdings: Holdings, provenance: Provenance | None, package: Path, ours: Iterable[str],
    theirs: Iterable[str],
) -> list[Relation | None]:  # fmt: skip
    """How each row stands to the library; None where the package does not say where it comes from."""
    relations = [compare(holdings, item.record, provenance) if provenance is not None else None for item in items]
    clashes = [
        describe_clash(holdings, item.record)
        for item, how in zip(items, relations, strict=True)
        if how is Relation.CLASH
    ]
    left, kept = settle(clashes, ours, theirs)
    if left:
        raise Conflict(str(package), left)
    return [
        Relation.KEPT if how is Relation.CLASH and item.record.key in kept else how
        for item, how in zip(items, relations, strict=True)
    ]


class _Plan:
    """Row by row, what a load appends."""

    def __init__(self, holdings: Holdings, accept: bool, provenance: Provenance | None) -> None:
        self._holdings = holdings
        self._accept = accept
        self._provenance = provenance
        self._arrived: dict[str, tuple[Record, int]] = {}
        words = ("added", "revised", "reviewed", "proposed", "kept", "unchanged")
        self.counts = Counter(dict.fromkeys(words, 0))
        self.told: list[str] = []

    def item(self, item: Item, how: Relation | None) -> Iterator[Draft]:
        """What one row appends."""
        if how is Relation.KEPT:
            self.counts["kept"] += 1
            return
        record = item.record
        newest = self._holdings.newest(record.kind, record.key)
        counting = self._holdings.counting(record.kind, record.key)
        item = self._part_from_source(item)
        if newest is None or counting is None:
            self.counts["added"] += 1
            yield from self._append(item, 1)
        elif newest.record == record:
            yield from self._review(item, newest)
        elif how in (Relation.COUNTING, Relation.BEHIND):
            yield from self._review(item, counting)
        elif how is None and self._counts_already(item, counting):
            self.counts["unchanged"] += 1  # the draft over it goes on waiting
        else:
            self._tell_fields(newest.record, record)
            yield from self._append(item, newest.revision + 1)
            if how is not None and item.standing == "withdrawn" and not self._accept:
                # else the revision in force here would go on answering, which the origin has withdrawn
                yield from self._propose(
                    item, dataclasses.replace(counting, record=record, revision=newest.revision + 1)
                )

    def _ends_another(self, record: Record) -> bool:
        """True if the load is accepted, and another revision is in force here so far."""
        counting = self._holdings.counting(record.kind, record.key)
        return self._accept and counting is not None and counting.standing == "accepted" and counting.record != record

    def _part_from_source(self, item: Item) -> Item:
        """A row that is withdrawn only because its source is: the withdrawal of the source comes by itself."""
        if self._ends_another(item.record):
            return item  # as a draft it would let the revision before it go on answering
        source = getattr(item.record, "source", "")
        said = self._provenance.withdrawn.get(source) if self._provenance is not None else None
        if said is not None and (item.standing, item.standing_note) == ("withdrawn", word_source(source, said[1])):
            return dataclasses.replace(item, standing="draft", standing_note="")
        return item

    def _append(self, item: Item, revision: int) -> Iterator[Draft]:
        if isinstance(item.record, Source):
            self._arrived[item.record.key] = item.record, revision
        yield draft_of(item.record)
        yield from self._arrive(item, revision)

    def _tell_fields(self, before: Record, after: Record) -> None:
        self.counts["revised"] += 1
        old, new = before.content(), after.content()
        fields = sorted(name for name in {**old, **new} if old.get(name) != new.get(name))
        self.told.append(f"{after.kind} {after.key}: {', '.join(fields)} revised")

    def _counts_already(self, item: Item, counting: Entry[Any]) -> bool:
        if counting.record != item.record:
            return False
        standing = self._holdings.follow_source(counting)
        return (standing.standing, standing.standing_note) == (item.standing, item.standing_note)

    def _arrive(self, item: Item, revision: int) -> Iterator[Draft]:
        """The standing of a revision that is new here."""
        if item.record.kind not in REVIEWED:
            return
        if self._accept:
            yield from self._settle(item, revision, ("draft", ""))
        elif item.standing in ("declined", "withdrawn"):
            said = f"{item.standing} in the package: {item.standing_note}"
            yield judge(item.record, revision, "draft", LONG.fit(said))

    def _review(self, item: Item, entry: Entry[Any]) -> Iterator[Draft]:
        """The standing of a revision that is here already, or of one that follows it here."""
        drafts: list[Draft] = []
        if not self._ends_another(item.record):
            entry = self._holdings.follow_source(entry)
        if item.record.kind in REVIEWED:
            if self._accept and entry.record == item.record:
                drafts = list(self._settle(item, entry.revision, (entry.standing, entry.standing_note)))
                self.counts["reviewed"] += bool(drafts)
                if drafts:
                    self._tell_standing(item, entry)
            elif item.standing == "withdrawn":
                same = entry.record == item.record
                before = "" if same else "an earlier revision is withdrawn in the package: "
                drafts = list(self._propose(item, entry, before))
        self.counts["unchanged"] += not drafts
        yield from drafts

    def _propose(self, item: Item, entry: Entry[Any], before: str = "") -> Iterator[Draft]:
        """The withdrawal of what is in force here, unless that very withdrawal was proposed before."""
        if entry.standing != "accepted":
            return
        reason = LONG.fit(f"{before}{item.standing_note}")
        proposal = propose_withdrawal(entry.record, entry.revision, "other", reason)
        if not self._is_known(proposal):
            self.counts["proposed"] += 1
            self._tell_standing(item, entry, " proposed")
            yield proposal

    def _is_known(self, proposal: Draft) -> bool:
        """Whether a withdrawal waits already, or somebody has decided on that very one."""
        before = self._holdings.newest(proposal.kind, proposal.key)
        return before is not None and (before.standing == "draft" or before.record.content() == proposal.content)

    def _tell_standing(self, item: Item, entry: Entry[Any], how: str = "") -> None:
        self.told.append(f"{item.record.kind} {item.record.key}: {entry.standing} -> {item.standing}{how}")

    def _settle(self, item: Item, revision: int, before: tuple[str, str]) -> Iterator[Draft]:
        """The reviews that give a revision the standing its row says, if it has another one so far."""
        record, standing, note = item.record, item.standing, item.standing_note
        if (standing, note) == before or (standing == "draft" and before[0] != "draft"):
            return  # what is decided here is not undone by a draft elsewhere
        if standing == "withdrawn":
            yield from withdraw_at_once(self._holdings, record, revision, "other", note)
        else:
            yield judge(record, revision, standing, note)

    def withdraw_sources(self, package: Path) -> list[Draft]:
        """The withdrawals of sources that the package brings."""
        assert self._provenance is not None
        found: list[Draft] = []
        for key, (cause, reason) in self._provenance.withdrawn.items():
            here = self._holdings.newest("source", key)
            known = (here.record, here.revision) if here is not None else (None, 0)
            record, revision = self._arrived.get(key) or known
            if record is None:
                why = f"it withdraws the source {quote(key)}, which is neither in the package nor in the library."
                raise InvalidPackage(str(package), [CellProblem(DESCRIPTOR, 0, PROPERTY, "", why)])
            if here is None or here.standing != "withdrawn":
                found += self._withdraw_source(record, revision, cause, reason)
        return found

    def _withdraw_source(self, record: Record, revision: int, cause: str, reason: str) -> list[Draft]:
        if self._accept:
            self.counts["reviewed"] += 1
            self.told.append(f"source {record.key}: withdrawn")
            return withdraw_at_once(self._holdings, record, revision, cause, reason)
        proposal = propose_withdrawal(record, revision, cause, reason)
        if self._is_known(proposal):
            return []
        self.counts["proposed"] += 1
        self.told.append(f"source {record.key}: withdrawn proposed")
        return [proposal]


def _check_preferences(items: list[Item], holdings: Holdings, package: Path) -> None:
    """Refuse preferences that would go round in a circle, with those recorded and those that wait."""
    loaded = [(item.record, item.standing) for item in items if isinstance(item.record, Preference)]
    if not loaded:
        return
    mine = {record.pair for record, standing in loaded if standing in ("accepted", "draft")}
    # what a load accepts or withdraws ends the revisions before it; a draft does not
    ended = [record.key for record, standing in loaded if standing in ("accepted", "withdrawn")]
    pairs = mine | holdings.preferences({key for pair in mine for key in pair}, ended)
    if cycle := find_cycle(sorted(pairs)):
        why = f"the preferences, with those recorded already, go round in a circle: {' over '.join(cycle)}."
        raise InvalidPackage(str(package), [CellProblem("preferences.csv", 0, "", "", why)])


def _check_standings(rows: Sequence[tuple[Item, Relation | None]], holdings: Holdings, package: Path) -> None:
    """A withdrawal or declining is not taken back in silence, and what is in force is not declined."""
    problems: list[CellProblem] = []
    for item, how in rows:
        look = holdings.counting if how is Relation.COUNTING else holdings.newest
        newest = look(item.record.kind, item.record.key)
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
