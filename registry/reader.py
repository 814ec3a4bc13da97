"""Reading a library: lookups, coverage, and what is recorded."""

from __future__ import annotations

import threading
from contextlib import AbstractContextManager
from typing import Any, Self, overload

import numpy as np
from numpy.typing import ArrayLike, NDArray

from registry.answers import Answer, Batch
from registry.coverage import Coverage, build_coverage
from registry.dossier import Dossier, Entry
from registry.entries import entry_of, in_force, read_dossier, with_standing
from registry.errors import BadInput, NotALibrary, Refused, UnknownKey, quote
from registry.naming import join_names, nearest_names
from registry.properties import find_property
from registry.records import KINDS, Compound, Correlation
from registry.refusals import Refusal
from registry.store.history import Change
from registry.store.library_file import LibraryFile, View
from registry.verdicts import refuse

__all__ = ["Reader", "answer_one"]


class Reader:
    """Reading a library at its newest position; sees other processes' changes.

    Parameters
    ----------
    file : LibraryFile
        The open database.
    position : int, optional
        The change up to which everything is read; the newest one if none is
        given.
    """

    def __init__(self, file: LibraryFile, position: int | None = None) -> None:
        self._file = file
        self._position = position
        self._lock = threading.RLock()
        self._stamp = -1
        self._coverages: dict[tuple[str, str, str, bool], Coverage] = {}
        self._dossiers: dict[str, Dossier] = {}

    def __enter__(self) -> Self:
        return self

    def __exit__(self, *_: object) -> None:
        self.close()

    def __repr__(self) -> str:
        return f"<{type(self).__name__} {self.place}>"

    def close(self) -> None:
        """Release the file."""
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

    @overload
    def lookup(
        self, compound: str, temperature: float, *, property: str = ..., phase: str | None = ..., metastable: bool = ...
    ) -> Answer: ...

    @overload
    def lookup(
        self, compound: str, temperature: ArrayLike, *, property: str = ..., phase: str | None = ...,
        metastable: bool = ...,
    ) -> Batch: ...  # fmt: skip

    def lookup(
        self, compound: str, temperature: Any, *, property: str = "vapor-pressure", phase: str | None = None,
        metastable: bool = False,
    ) -> Answer | Batch:  # fmt: skip
        """The value of a property at one temperature, or at many.

        Parameters
        ----------
        compound : str
            Key, name, synonym, CAS number or formula, case aside.
        temperature : float or array_like of float
            Temperature on ITS-90, K.
        property : str
            What is asked for.
        phase : str, optional
            The phase; needed only where several cover a temperature.
        metastable : bool
            Let the metastable ranges answer that records state.

        Returns
        -------
        Answer or Batch
            An answer for one temperature. For an array a batch, whose
            `values` are NaN where nothing may answer.

        Raises
        ------
        Refused
            For one temperature where no correlation may answer; carries the
            refusal.
        UnknownKey
            If the compound is unknown or ambiguous.
        BadInput
            If the property is unknown or a temperature is not above 0 K.

        Examples
        --------
        >>> import registry
        >>> with registry.open_library("shelf.db") as library:
        ...     library.lookup("ammonia", [200.0, 300.0, 500.0]).values.round(1)
        array([   8610.9, 1061291.3,       nan])
        >>> with registry.open_library("shelf.db") as library:
        ...     library.lookup("water", 700.0)
        Traceback (most recent call last):
        ...
        registry.errors.Refused: 700 K lies above the critical temperature of water, ...
        """
        coverage = self.coverage(compound, property=property, phase=phase, metastable=metastable)
        if isinstance(temperature, float):
            return answer_one(coverage, temperature)
        kelvin = _as_kelvin(temperature)
        if kelvin.ndim == 0:
            return answer_one(coverage, float(kelvin))
        return Batch(kelvin, *coverage.evaluate(kelvin), coverage)

    def coverage(
        self, compound: str, *, property: str = "vapor-pressure", phase: str | None = None, metastable: bool = False
    ) -> Coverage:
        """The map from temperature to the correlation that answers there.

        Parameters
        ----------
        compound, property, phase, metastable
            As for `lookup`.

        Returns
        -------
        Coverage
            Its stretches tile the axis above 0 K.

        Examples
        --------
        >>> import registry
        >>> with registry.open_library("shelf.db") as library:
        ...     [seam.temperature for seam in library.coverage("helium-4").seams]
        [2.1768]
        """
        request = (compound, property, phase or "", metastable)
        # one thread at a time: they share one connection
        with self._lock:
            self._refresh()
            found = self._coverages.get(request)
            if found is None:
                found = self._coverages[request] = self._build_coverage(*request)
            return found

    def _refresh(self) -> None:
        """Forget what was read if anybody has changed the file since."""
        stamp = self._file.read_stamp()
        if stamp != self._stamp:
            self._coverages, self._dossiers, self._stamp = {}, {}, stamp

    def _build_coverage(self, compound: str, prop: str, phase: str, metastable: bool) -> Coverage:
        row = find_property(prop)
        dossier = self.dossier(compound)
        phases = {_plain(e.record.phase): e.record.phase for e in dossier.for_property(row.name)}
        if phase and phases and _plain(phase) not in phases:
            have = f"it has {join_names(sorted(phases.values()), 'and')}."
            raise BadInput(f"{dossier.compound.key} has no {row.name} of a phase {quote(phase)}; {have}")
        named = phases.get(_plain(phase), phase)
        try:
            return build_coverage(dossier, row.name, named, metastable=metastable)
        except (ValueError, KeyError, TypeError) as error:
            # every record was checked when it was recorded: it has been changed since
            raise NotALibrary(self.place, f"a record of {dossier.compound.key} is damaged ({error})") from error

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
            found = {str(row.content.get("compound", row.key)) for row in view.find_term(text)}
            # a key in other case, before names
            if len(found) != 1 and view.current("compound", [text.casefold()]):
                return text.casefold()
            if len(found) == 1:
                return found.pop()
            if found:
                raise UnknownKey("compound", text, several=sorted(found))
            keys = [row.key for row in view.kind("compound")]
            raise UnknownKey("compound", text, nearest=nearest_names(text, [*keys, *view.terms()]))

    def dossier(self, compound: str) -> Dossier:
        """Everything recorded about a compound.

        Parameters
        ----------
        compound : str
            Any of its names.

        Returns
        -------
        Dossier
            Records of every standing, at the newest position.
        """
        with self._lock:
            self._refresh()
            key = self.find_compound(compound)
            if key not in self._dossiers:
                with self._reading() as view:
                    self._dossiers[key] = read_dossier(view, key)
            return self._dossiers[key]

    def compounds(self) -> list[Entry[Compound]]:
        """Every compound, by key."""
        with self._lock, self._reading() as view:
            return [entry_of(row) for row in view.kind("compound")]

    def correlations(self) -> list[Entry[Correlation]]:
        """Every correlation, by key, in its newest revision."""
        with self._lock, self._reading() as view:
            return with_standing(view, view.kind("correlation"))

    def entry(self, key: str) -> Entry[Any]:
        """The record under a key, of whatever kind; a compound by any name.

        Parameters
        ----------
        key : str
            The key of a record, or a name of a compound.

        Returns
        -------
        Entry
            The newest revision, with its standing.

        Raises
        ------
        UnknownKey
            If there is none; carries the nearest keys.
        """
        with self._lock, self._reading() as view:
            for kind in KINDS:
                rows = view.current(kind, [key])
                if rows:
                    return with_standing(view, rows)[0]
        try:
            return self.dossier(key).compound
        except UnknownKey as error:
            if error.several:
                raise
        with self._lock, self._reading() as view:
            keys = [row.key for kind in KINDS if kind not in ("name", "review") for row in view.kind(kind)]
            raise UnknownKey("record", key, nearest=nearest_names(key, [*keys, *view.terms()]))

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
            rows = [row for row in view.linked(kind, key) if row.kind != "review"]
            return list(in_force(with_standing(view, rows)))

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

    def changes(self) -> list[Change]:
        """The headers of all changes, in order."""
        with self._lock, self._reading() as view:
            return view.changes()


def _as_kelvin(temperature: Any) -> NDArray[np.float64]:
    """Numbers as an array of float; a masked element is no temperature."""
    given = np.ma.filled(temperature, np.nan) if isinstance(temperature, np.ma.MaskedArray) else np.asarray(temperature)
    if given.dtype.kind not in "fiu" and given.size:
        raise BadInput(f"{quote(temperature)} is no temperature; numbers in kelvin are allowed.")
    return given.astype(float)


def _plain(phase: str) -> str:
    """A phase as it is compared: case and hyphens aside."""
    return phase.casefold().replace("-", " ")


def answer_one(coverage: Coverage, kelvin: float) -> Answer:
    """The answer at one temperature, K; raises `Refused` where there is none."""
    value, candidate = coverage.value_at(kelvin)
    if candidate is None:
        raise Refused(_refuse_one(coverage, kelvin))
    return Answer(kelvin, value, candidate, coverage)


def _refuse_one(coverage: Coverage, kelvin: float) -> Refusal:
    """The refusal at one temperature, which must be a temperature."""
    refusal = refuse(coverage, kelvin)
    if refusal.reason == "not-a-temperature":
        raise BadInput(refusal.explanation)
    return refusal
