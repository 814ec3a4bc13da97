"""The facade: every verb of the job is one method of `Library`.

Here and in the readers below it the database and the numeric side meet, and
nowhere else.
"""

from __future__ import annotations

import os
from collections.abc import Callable, Iterable
from pathlib import Path
from typing import Any

from registry.archive import Archive
from registry.errors import BadInput
from registry.holdings import Holdings
from registry.moments import now_utc
from registry.naming import word_kind
from registry.plan import Plan
from registry.records import Record
from registry.signature import Recorded, check_signature

__all__ = ["Library"]

# a lookup judges and records nothing: what does is imported where it is used


class Library(Archive):
    """A library: reading as `Archive` does, and recording.

    Parameters
    ----------
    file : LibraryFile
        The open database.
    """

    def record(self, record: Record, *, author: str, reason: str = "", accept: bool = False) -> Recorded:
        """Record something under a key that is still free.

        Parameters
        ----------
        record : Record
            A compound, name, source, correlation, fixed point, printed value
            or dataset.
        author : str
            Who records it.
        reason : str
            Why; "Recorded ..." if empty.
        accept : bool
            Accept it in the same change; only in a library that one person
            keeps.

        Returns
        -------
        Recorded
            A correlation, fixed point or dataset is a draft until it is
            reviewed.

        Raises
        ------
        BadInput
            If the key is taken, or the record does not fit the library.
        LibraryBusy
            If another process writes for too long.
        """
        from registry.judgement import accept_at_once
        from registry.recording import plan_record

        why = reason or f"Recorded {word_kind(record.kind)} {record.key}"
        return self._append(author, why, lambda held: plan_record(held, record, accept=accept_at_once(held, accept)))

    def revise(
        self, record: Record, *, author: str, reason: str, expect: int | None = None, accept: bool = False
    ) -> Recorded:
        """Append a revision of a record; nothing is ever edited in place.

        Parameters
        ----------
        record : Record
            As it shall be, under the key that it has.
        author, reason : str
            Who, and why.
        expect : int, optional
            The revision it was made from.
        accept : bool
            Accept it in the same change; only in a library that one person
            keeps.

        Returns
        -------
        Recorded
            An accepted revision stays in force while this one waits.

        Raises
        ------
        RevisedMeanwhile
            If the newest revision is not the expected one; nothing was
            recorded.
        BadInput
            If there is no such record, nothing would change, or the record
            does not fit the library.
        """
        from registry.judgement import accept_at_once
        from registry.recording import plan_revision

        return self._append(
            author, reason, lambda held: plan_revision(held, record, expect, accept=accept_at_once(held, accept))
        )

    def review(
        self, key: str, *, accept: bool, author: str, note: str, kind: str = "", expect: int | None = None,
        again: bool = False,
    ) -> Recorded:  # fmt: skip
        """Accept or decline what waits for review, or accept again what was declined or withdrawn.

        Parameters
        ----------
        key : str
            The key of a correlation, fixed point, dataset or preference; that
            of a record whose withdrawal waits; or of a withdrawn source.
        accept : bool
            True to accept, False to decline.
        author : str
            The reviewer: somebody else than who recorded it, but where one
            person keeps the library.
        note : str
            What the reviewer looked at.
        kind : str
            Needed where several records have the key.
        expect : int, optional
            The revision that was looked at.
        again : bool
            Accept what was declined or withdrawn.

        Returns
        -------
        Recorded
            The record that was reviewed.

        Raises
        ------
        UnknownKey, BadInput
            If nothing waits there, or the reviewer recorded it.
        RevisedMeanwhile
            If a newer revision waits than the one expected.
        """
        from registry.judgement import plan_review

        standing = "accepted" if accept else "declined"

        def plan(held: Holdings) -> Plan:
            return plan_review(
                held, key, standing, note.strip(), author.strip(), kind=kind, expect=expect, again=again
            )  # fmt: skip

        return self._append(author, note, plan)

    def withdraw(
        self, key: str, *, author: str, reason: str, cause: str = "other", kind: str = "", accept: bool = False
    ) -> Recorded:
        """Withdraw a correlation, fixed point, dataset, preference or source, once that is accepted.

        Parameters
        ----------
        key : str
            What to withdraw. With a source goes everything that rests on it.
        author, reason : str
            Who, and why.
        cause : {'erratum', 'retraction', 'superseded', 'other'}
            The kind of reason.
        kind : str
            Needed where several records have the key.
        accept : bool
            Accept it in the same change; only in a library that one person
            keeps.

        Returns
        -------
        Recorded
            The withdrawal, which waits for review like a draft.

        Raises
        ------
        UnknownKey, BadInput
            If there is nothing to withdraw, or its withdrawal waits already.
        """
        from registry.judgement import accept_at_once, plan_withdrawal

        return self._append(
            author,
            reason,
            lambda held: plan_withdrawal(
                held, key, cause, reason.strip(), kind=kind, accept=accept_at_once(held, accept)
            ),
        )

    def prefer(self, key: str, over: str, *, author: str, reason: str, accept: bool = False) -> Recorded:
        """Prefer one correlation over another wherever both cover, once that is accepted.

        Parameters
        ----------
        key, over : str
            Correlations for one property of one compound.
        author, reason : str
            Who, and why.
        accept : bool
            Accept it in the same change; only in a library that one person
            keeps.

        Returns
        -------
        Recorded
            The preference, a draft until it is reviewed.

        Raises
        ------
        UnknownKey, BadInput
            If one of them is not recorded, they are for different things, the
            preference is recorded already, or it would close a circle.
        """
        from registry.judgement import accept_at_once, plan_preference

        return self._append(
            author,
            reason,
            lambda held: plan_preference(held, key, over, reason.strip(), accept=accept_at_once(held, accept)),
        )

    def freeze(self, name: str, *, author: str, note: str) -> Recorded:
        """Name the newest position, with its root and rules version: an edition.

        Parameters
        ----------
        name : str
            Letters, digits, '-', '_' and '.'; not a number and not a date.
        author, note : str
            Who, and what for.

        Returns
        -------
        Recorded
            The edition; it names the position before its own change.

        Raises
        ------
        BadInput
            If there is an edition of that name already.
        """
        from registry.editions import plan_edition

        return self._append(author, note, lambda held: plan_edition(held, name, note.strip()))

    def keep(self, *, solo: bool, author: str) -> Recorded | None:
        """Say that one person keeps the library and reviews their own, or that a team does.

        Parameters
        ----------
        solo : bool
            True for one person.
        author : str
            Who says so.

        Returns
        -------
        Recorded or None
            None if the library says so already.
        """
        from registry.judgement import plan_keeping

        who, why = check_signature(author, f"The library is kept by {'one person' if solo else 'a team'}.")
        with self._lock, self._file.writing() as (view, append):
            planned = plan_keeping(Holdings(view), "one-person" if solo else "team")
            if planned is None:
                return None
            change = append(who, why, now_utc(), planned.drafts)
        return Recorded(change, planned.record, planned.revision)

    def _append(self, author: str, reason: str, plan: Callable[[Holdings], Plan]) -> Recorded:
        """One change: planned and appended under the write lock, whole or not at all."""
        who, why = check_signature(author, reason)
        with self._lock, self._file.writing() as (view, append):
            planned = plan(Holdings(view))
            change = append(who, why, now_utc(), planned.drafts)
        return Recorded(change, planned.record, planned.revision)

    def load(
        self, path: str | os.PathLike[str], *, author: str, reason: str = "", accept: bool = False,
        ours: Iterable[str] = (), theirs: Iterable[str] = (), dry_run: bool = False,
    ) -> dict[str, Any]:  # fmt: skip
        """Load a package in one change: all of it or nothing.

        Parameters
        ----------
        path : path
            A folder or .zip in the exchange format.
        author : str
            Who loads it.
        reason : str
            Why; the name of the package if empty.
        accept : bool
            Review the whole load at once: every record gets the standing that
            the package says. Without, what can change an answer arrives as a
            draft.
        ours, theirs : iterable of str
            Keys that both sides have revised: of ``ours`` what is here stays,
            of ``theirs`` what the package says arrives; ``all`` for the rest.
        dry_run : bool
            Check everything and record nothing.

        Returns
        -------
        dict
            How many records were ``added``, ``revised``, ``reviewed``,
            ``proposed`` (withdrawals that wait), ``kept`` (conflicts in which
            what is here stays) and ``unchanged``; the number of the
            ``change`` (0 if there was nothing to record); under ``changed``
            what was revised, reviewed or proposed, a line each.

        Raises
        ------
        InvalidPackage
            With every bad cell.
        Conflict
            If the package says what is new since an earlier position, both
            sides have revised a record, and it is not named.
        BadInput
            If a key is named that is no conflict.
        LibraryBusy
            If another process writes for too long.
        """
        from registry.arrival import plan_load

        package = Path(path)
        if accept and not reason.strip():
            raise BadInput("Accepting a whole load at once needs a note that says what was looked at.")
        if dry_run:
            with self._lock, self._reading() as view:
                plan = plan_load(view, package, accept=accept, ours=ours, theirs=theirs)
                return {**plan.counts, "change": 0, "changed": plan.changed}
        who, why = check_signature(author, reason or f"Loaded {package.name[:200]}")
        with self._lock, self._file.writing() as (view, append):
            plan = plan_load(view, package, accept=accept, ours=ours, theirs=theirs)
            number = append(who, why, now_utc(), plan.drafts).number if plan.drafts else 0
        return {**plan.counts, "change": number, "changed": plan.changed}
