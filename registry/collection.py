"""What a library holds: compounds, sources, correlations, by key and by name."""

from __future__ import annotations

import dataclasses
import threading
from contextlib import AbstractContextManager
from typing import TYPE_CHECKING, Any, Self

from registry.dossier import Dossier, Entry
from registry.entries import enter_all, enter_newest, enter_states, read_dossier, restore
from registry.errors import BadInput, UnknownKey, quote
from registry.naming import nearest_names, word_kind
from registry.records import KINDS, Compound, Correlation
from registry.store.history import Change, fold_term
from registry.store.library_file import LibraryFile, View
from registry.store.rows import Row

# a lookup restates nothing
if TYPE_CHECKING:
    from registry.restating.restatement import Restatement

__all__ = ["Collection"]

_UNNAMED = ("name", "review", "library", "origin")
"""Kinds that nobody looks for by key."""


class Collection:
    """What is recorded, at one position or the newest; sees other processes' changes.

    Parameters
    ----------
    file : LibraryFile
        The open database.
    position : int, optional
        The change up to which everything is read; the newest one if none is
        given.
    lock : RLock, optional
        Of the collection that this one is a view of, and that owns the file.
    """

    def __init__(self, file: LibraryFile, position: int | None = None, lock: threading.RLock | None = None) -> None:
        self._file = file
        self._position = position
        self._owner = lock is None
        self._lock = lock or threading.RLock()
        self._stamp = -1
        self._dossiers: dict[tuple[str, bool], Dossier] = {}

    def __enter__(self) -> Self:
        return self

    def __exit__(self, *_: object) -> None:
        self.close()

    def __repr__(self) -> str:
        return f"<{type(self).__name__} {self.place}>"

    def close(self) -> None:
        """Release the file; a view leaves it to the library that it looks at."""
        if self._owner:
            self._file.close()

    @property
    def place(self) -> str:
        """Where the library is."""
        return str(self._file.path)

    @property
    def position(self) -> int:
        """The number of the change up to which the library is read."""
        with self._lock, self._reading() as view:
            return view.position

    def _reading(self) -> AbstractContextManager[View]:
        return self._file.reading(self._position)

    def _refresh(self) -> None:
        """Forget what was read if anybody has changed the file since."""
        if self._position is not None:
            return  # what is past does not change
        stamp = self._file.read_stamp()
        if stamp != self._stamp:
            self._stamp = stamp
            self._forget()

    def _forget(self) -> None:
        self._dossiers = {}

    def find_compound(self, text: str) -> str:
        """The key of a compound, by key, name, synonym, CAS number or formula.

        Parameters
        ----------
        text : str
            What a person types; case and runs of blanks do not matter.

        Returns
        -------
        str
            The key.

        Raises
        ------
        UnknownKey
            If nothing or more than one compound is meant; carries the nearest
            names or the keys.

        Examples
        --------
        >>> import registry
        >>> with registry.open_library("shelf.db") as library:
        ...     library.find_compound("7664-41-7")
        'ammonia'
        """
        if not isinstance(text, str):
            raise BadInput(f"{quote(text)} is no name of a compound; a text is allowed.")
        with self._lock, self._reading() as view:
            if view.current("compound", [text]):
                return text
            found = {key for row in view.find_term(text) if (key := _named_by(row, text))}
            # a key in other case, before names
            if len(found) != 1 and view.current("compound", [text.casefold()]):
                return text.casefold()
            if len(found) == 1:
                return found.pop()
            if found:
                raise UnknownKey("compound", text, several=sorted(found))
            keys = [row.key for row in view.kind("compound")]
            raise UnknownKey("compound", text, nearest=nearest_names(text, [*keys, *view.terms()]))

    def dossier(self, compound: str, *, drafts: bool = False) -> Dossier:
        """Everything recorded about a compound.

        Parameters
        ----------
        compound : str
            Any of its names.
        drafts : bool
            Let the newest draft of a correlation stand for it.

        Returns
        -------
        Dossier
            Records of every standing, at the position.
        """
        with self._lock:
            self._refresh()
            key = self.find_compound(compound)
            found = self._dossiers.get((key, drafts))
            if found is None:
                with self._reading() as view:
                    found = self._dossiers[key, drafts] = read_dossier(view, key, drafts=drafts)
            return found

    def compounds(self) -> list[Entry[Compound]]:
        """Every compound, by key."""
        with self._lock, self._reading() as view:
            return enter_all(view, "compound")

    def correlations(self) -> list[Entry[Correlation]]:
        """Every correlation, by key, in the revision that counts."""
        with self._lock, self._reading() as view:
            return enter_all(view, "correlation")

    def entry(self, key: str) -> Entry[Any]:
        """The record under a key, of whatever kind; a compound by any name.

        Parameters
        ----------
        key : str
            The key of a record, or a name of a compound.

        Returns
        -------
        Entry
            The revision that counts, with its standing; `waiting` names a
            newer one that waits for review.

        Raises
        ------
        UnknownKey
            If there is none; carries the nearest keys.
        """
        with self._lock, self._reading() as view:
            for kind in KINDS:
                states = view.states(kind, [key])
                if states:
                    return enter_states(view, states)[0]
        try:
            return self.dossier(key).compound
        except UnknownKey as error:
            if error.several:
                raise
        with self._lock, self._reading() as view:
            keys = [row.key for kind in KINDS if kind not in _UNNAMED for row in view.kind(kind)]
            raise UnknownKey("record", key, nearest=nearest_names(key, [*keys, *view.terms()]))

    def newest(self, key: str, kind: str = "") -> Entry[Any]:
        """The newest revision under a key, whether it counts or waits.

        Parameters
        ----------
        key : str
            The key of a record.
        kind : str
            Needed where several kinds of record have the key; by default the
            first that has it.

        Returns
        -------
        Entry
            With its own standing.

        Raises
        ------
        UnknownKey
            If there is none; carries the nearest keys.
        """
        with self._lock, self._reading() as view:
            for each in [kind] if kind else KINDS:
                states = view.states(each, [key])
                if states:
                    return enter_newest(states[0])
            keys = [row.key for each in ([kind] if kind else KINDS) if each not in _UNNAMED for row in view.kind(each)]
            raise UnknownKey(kind or "record", key, nearest=nearest_names(key, keys))

    def restate(
        self, key: str, *, value_unit: str | None = None, temperature_unit: str | None = None, log: str | None = None
    ) -> Restatement:
        """A correlation in the units and the log base that another tool wants; nothing is recorded.

        Parameters
        ----------
        key : str
            The key of a correlation.
        value_unit, temperature_unit : str, optional
            The units; those recorded if none is given.
        log : str, optional
            ``ln`` or ``log10``; the form's own if none is given.

        Returns
        -------
        Restatement
            Of the revision that counts: algebraically the same, with digits
            enough that the value agrees to 1e-12 over the window.

        Raises
        ------
        UnknownKey
            If there is no such record.
        BadInput
            If it is no correlation, a unit is none of the dimension, or the
            form cannot say it, with the reason.

        Examples
        --------
        >>> import registry
        >>> with registry.open_library("shelf.db") as library:
        ...     found = library.restate(
        ...         "water-antoine-1-100", value_unit="kPa", temperature_unit="K", log="ln")
        >>> dict(found.restated.ordered_coefficients())
        {'A': '16.5698929686341', 'B': '3984.9228394883', 'C': '-39.724'}
        """
        from registry.restating.restatement import restate

        entry = self.entry(key)
        if entry.record.kind != "correlation":
            raise BadInput(
                f"{quote(key)} is a {word_kind(entry.record.kind)}; only a correlation can be restated. "
                f"`rangebook show {entry.key}` tells what refers to it."
            )
        mass = self.dossier(entry.record.compound).compound.record.grams_per_mole()
        found = restate(
            entry.record, value_unit=value_unit, temperature_unit=temperature_unit, log=log, molar_mass=mass
        )
        return dataclasses.replace(found, revision=entry.revision, standing=entry.standing)

    def referring(self, kind: str, key: str) -> list[Entry[Any]]:
        """The records that refer to one record.

        Parameters
        ----------
        kind, key : str
            The record referred to.

        Returns
        -------
        list of Entry
            By kind and key, each in the revision that counts.
        """
        with self._lock, self._reading() as view:
            entries = enter_states(view, view.linked(kind, [key]))
            aim = (kind, key)
            return [e for e in entries if aim in ((r.kind, r.key) for r in e.record.references())]

    def source_citation(self, key: str) -> str:
        """The citation of a source.

        Parameters
        ----------
        key : str
            The key of the source.

        Returns
        -------
        str
            Its line of text, or the key if no such source is recorded.
        """
        with self._lock, self._reading() as view:
            rows = view.current("source", [key])
        return str(rows[0].content["citation"]) if rows else key

    def change(self, number: int) -> Change:
        """The header of one change.

        Parameters
        ----------
        number : int
            Its number.

        Returns
        -------
        Change
            Who, when and why.
        """
        with self._lock, self._reading() as view:
            return view.change(number)

    def changes(self) -> list[Change]:
        """The headers of all changes, in order."""
        with self._lock, self._reading() as view:
            return view.changes()


def _named_by(row: Row, text: str) -> str:
    """The compound that a record gives a name to, if it still does."""
    record = restore(row)
    if fold_term(text) not in map(fold_term, record.terms()):
        return ""
    return str(getattr(record, "compound", row.key))
