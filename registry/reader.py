"""Reading a library: lookups and coverage."""

from __future__ import annotations

import threading
from typing import TYPE_CHECKING, Any, overload

import numpy as np
from numpy.typing import ArrayLike, NDArray

from registry.answers import Answer, Batch
from registry.collection import Collection
from registry.coverage import Coverage, build_coverage
from registry.errors import BadInput, NotALibrary, Refused, quote
from registry.naming import join_names
from registry.properties import find_property
from registry.refusals import Refusal
from registry.store.library_file import LibraryFile
from registry.verdicts import refuse

# a lookup needs no slope
if TYPE_CHECKING:
    from registry.boundary import PhaseBoundary, SaturationBatch
    from registry.saturation import Saturation

__all__ = ["Reader", "answer_one"]


class Reader(Collection):
    """Reading a library: what is recorded, and what it answers.

    Parameters
    ----------
    file : LibraryFile
        The open database.
    position : int, optional
        The change up to which everything is read; the newest one if none is
        given.
    lock : RLock, optional
        Of the reader that this one is a view of, and that owns the file.
    """

    def __init__(self, file: LibraryFile, position: int | None = None, lock: threading.RLock | None = None) -> None:
        super().__init__(file, position, lock)
        self._coverages: dict[tuple[str, str, str, bool, bool], Coverage] = {}
        self._boundaries: dict[Coverage, PhaseBoundary] = {}

    def _forget(self) -> None:
        super()._forget()
        self._coverages = {}
        self._boundaries = {}

    @overload
    def lookup(
        self, compound: str, temperature: float, *, property: str = ..., phase: str | None = ...,
        metastable: bool = ..., drafts: bool = ...,
    ) -> Answer: ...  # fmt: skip

    @overload
    def lookup(
        self, compound: str, temperature: ArrayLike, *, property: str = ..., phase: str | None = ...,
        metastable: bool = ..., drafts: bool = ...,
    ) -> Batch: ...  # fmt: skip

    def lookup(
        self, compound: str, temperature: Any, *, property: str = "vapor-pressure", phase: str | None = None,
        metastable: bool = False, drafts: bool = False,
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
        drafts : bool
            Let the newest drafts of correlations answer; such an answer says
            that it is a draft.

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
        coverage = self.coverage(compound, property=property, phase=phase, metastable=metastable, drafts=drafts)
        if isinstance(temperature, float):
            return answer_one(coverage, temperature)
        kelvin = _as_kelvin(temperature)
        if kelvin.ndim == 0:
            return answer_one(coverage, float(kelvin))
        return Batch(kelvin, *coverage.evaluate(kelvin), coverage)

    @overload
    def slope(
        self, compound: str, temperature: float, *, property: str = ..., phase: str | None = ...,
        metastable: bool = ..., drafts: bool = ...,
    ) -> Saturation: ...  # fmt: skip

    @overload
    def slope(
        self, compound: str, temperature: ArrayLike, *, property: str = ..., phase: str | None = ...,
        metastable: bool = ..., drafts: bool = ...,
    ) -> SaturationBatch: ...  # fmt: skip

    def slope(
        self, compound: str, temperature: Any, *, property: str = "vapor-pressure", phase: str | None = None,
        metastable: bool = False, drafts: bool = False,
    ) -> Saturation | SaturationBatch:  # fmt: skip
        """The slope of an equilibrium line, and the enthalpy that Clapeyron's equation makes of it.

        Parameters
        ----------
        compound : str
            As for `lookup`.
        temperature : float or array_like of float
            Temperature on ITS-90, K.
        property : str
            ``vapor-pressure``, ``sublimation-pressure`` or
            ``melting-pressure``.
        phase, metastable, drafts
            As for `lookup`.

        Returns
        -------
        Saturation or SaturationBatch
            For one temperature with the methods that were used; for an array
            arrays, NaN where nothing may answer.

        Raises
        ------
        Refused
            As for `lookup`.
        UnknownKey
            If the compound is unknown or ambiguous.
        BadInput
            If the property is another one or a temperature is not above 0 K.

        Examples
        --------
        >>> import registry
        >>> with registry.open_library("shelf.db") as library:
        ...     library.slope("ammonia", [200.0, 300.0, 400.0]).enthalpies.round(-2)
        array([25200., 20200.,  6600.])
        """
        from registry.boundary import PhaseBoundary, require_boundary
        from registry.saturation import Saturation

        require_boundary(find_property(property).name)
        coverage = self.coverage(compound, property=property, phase=phase, metastable=metastable, drafts=drafts)
        boundary = self._boundaries.get(coverage) or self._boundaries.setdefault(coverage, PhaseBoundary(coverage))
        kelvin = _as_kelvin(temperature)
        if kelvin.ndim == 0:
            return Saturation(answer_one(coverage, float(kelvin)), boundary)
        return boundary.evaluate(kelvin)

    def coverage(
        self, compound: str, *, property: str = "vapor-pressure", phase: str | None = None, metastable: bool = False,
        drafts: bool = False,
    ) -> Coverage:  # fmt: skip
        """The map from temperature to the correlation that answers there.

        Parameters
        ----------
        compound, property, phase, metastable, drafts
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
        request = (compound, property, phase or "", metastable, drafts)
        # one thread at a time: they share one connection
        with self._lock:
            self._refresh()
            found = self._coverages.get(request)
            if found is None:
                found = self._coverages[request] = self._build_coverage(*request)
            return found

    def _build_coverage(self, compound: str, prop: str, phase: str, metastable: bool, drafts: bool) -> Coverage:
        row = find_property(prop)
        dossier = self.dossier(compound, drafts=drafts)
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


def _as_kelvin(temperature: Any) -> NDArray[np.float64]:
    """Numbers as an array of float; a masked element is no temperature."""
    given = np.ma.filled(temperature, np.nan) if isinstance(temperature, np.ma.MaskedArray) else np.asarray(temperature)
    if given.dtype.kind not in "fiu" and given.size:
        raise BadInput(f"{quote(temperature)} is no temperature; numbers in kelvin are allowed.")
    return given.astype(float, copy=False)


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
