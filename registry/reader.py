"""Reading a library: lookups and coverage."""

from __future__ import annotations

import threading
from typing import TYPE_CHECKING, Any, overload

import numpy as np
from numpy.typing import ArrayLike, NDArray

from registry.answering import answer_many, answer_one
from registry.answers import Answer
from registry.collection import Collection
from registry.conditions import make_conditions
from registry.coverage import Coverage, build_coverage
from registry.errors import BadInput, NotALibrary, quote
from registry.naming import join_names
from registry.properties import PROPERTIES, find_property
from registry.readings import Reading
from registry.store.library_file import LibraryFile
from registry.values import Value

# a lookup of one temperature needs none
if TYPE_CHECKING:
    from registry.batches import Batch
    from registry.equilibrium.boundary import PhaseBoundary, SaturationBatch
    from registry.equilibrium.saturation import Saturation
    from registry.inverse.inversion import Inversion
    from registry.inverse.temperatures import Temperatures

__all__ = ["Reader"]


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
        self._inversions: dict[Coverage, Inversion] = {}

    def _forget(self) -> None:
        super()._forget()
        self._coverages = {}
        self._boundaries = {}
        self._inversions = {}

    @overload
    def lookup(
        self, compound: str, temperature: float | Reading, *, property: str = ..., phase: str | None = ...,
        metastable: bool = ..., drafts: bool = ..., within: float | None = ..., beyond: float = ...,
    ) -> Answer: ...  # fmt: skip

    @overload
    def lookup(
        self, compound: str, temperature: float | Reading, *, property: str = ..., phase: str | None = ...,
        metastable: bool = ..., drafts: bool = ..., within: float | None = ..., beyond: float = ..., estimate: str,
    ) -> Value: ...  # fmt: skip

    @overload
    def lookup(
        self, compound: str, temperature: ArrayLike, *, property: str = ..., phase: str | None = ...,
        metastable: bool = ..., drafts: bool = ..., within: float | None = ..., beyond: float = ...,
        estimate: str = ...,
    ) -> Batch: ...  # fmt: skip

    def lookup(
        self, compound: str, temperature: Any, *, property: str = "vapor-pressure", phase: str | None = None,
        metastable: bool = False, drafts: bool = False, within: float | None = None, beyond: float = 0.0,
        estimate: str = "",
    ) -> Value | Batch:  # fmt: skip
        """The value of a property at one temperature, or at many.

        Parameters
        ----------
        compound : str
            Key, name, synonym, CAS number or formula, case aside.
        temperature : float, Reading or array_like of float
            Temperature on ITS-90, K; `parse_reading` reads one with its
            uncertainty or on another scale.
        property : str
            What is asked for.
        phase : str, optional
            The phase; needed only where several cover a temperature.
        metastable : bool
            Let the metastable ranges answer that records state.
        drafts : bool
            Let the newest drafts of correlations answer; such an answer says
            that it is a draft.
        within : float, optional
            Refuse what does not state an uncertainty within this percentage
            (at coverage factor 2, with that of the temperature).
        beyond : float
            Extrapolate where nothing covers, at most so many kelvin beyond
            the nearest accepted window; such a value is marked.
        estimate : str
            ``lee-kesler`` or ``ambrose-walton``: estimate where nothing else
            answers; such a value is marked.

        Returns
        -------
        Answer, Value or Batch
            An answer for one temperature; with `estimate` it may be an
            estimate, which no correlation stands behind. For an array a
            batch, whose `values` are NaN where nothing may answer.

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
        conditions = make_conditions(within, beyond, estimate)
        if isinstance(temperature, float):
            return answer_one(coverage, temperature, None, conditions)
        if isinstance(temperature, Reading):
            return answer_one(coverage, temperature.kelvin, temperature, conditions)
        kelvin = _as_numbers(temperature, "temperature", "kelvin")
        if kelvin.ndim == 0:
            return answer_one(coverage, float(kelvin), None, conditions)
        return answer_many(coverage, kelvin, conditions)

    @overload
    def temperature_at(
        self, compound: str, pressure: float, *, property: str = ..., phase: str | None = ...,
        metastable: bool = ..., drafts: bool = ...,
    ) -> Answer: ...  # fmt: skip

    @overload
    def temperature_at(
        self, compound: str, pressure: ArrayLike, *, property: str = ..., phase: str | None = ...,
        metastable: bool = ..., drafts: bool = ...,
    ) -> Temperatures: ...  # fmt: skip

    def temperature_at(
        self, compound: str, pressure: Any, *, property: str = "vapor-pressure", phase: str | None = None,
        metastable: bool = False, drafts: bool = False,
    ) -> Answer | Temperatures:  # fmt: skip
        """The temperature at one pressure, or at many: where a liquid boils, a solid sublimes or melts.

        Parameters
        ----------
        compound : str
            As for `lookup`.
        pressure : float or array_like of float
            Absolute pressure, Pa.
        property : str
            The pressure it is: ``vapor-pressure``, ``sublimation-pressure`` or
            ``melting-pressure``.
        phase, metastable, drafts
            As for `lookup`.

        Returns
        -------
        Answer or Temperatures
            An answer for one pressure: its `temperature` is what was found,
            its `value` the pressure asked. For an array its temperatures, NaN
            where none has the pressure or several have.

        Raises
        ------
        Refused
            For one pressure that no temperature has, or several have; carries
            an `InverseRefusal` with both sides.
        UnknownKey
            If the compound is unknown or ambiguous.
        BadInput
            If the property is no pressure, or a pressure not above 0 Pa (a
            melting pressure may be).

        Examples
        --------
        >>> import registry
        >>> with registry.open_library("shelf.db") as library:
        ...     answer = library.temperature_at("water", 101325.0)
        >>> round(answer.temperature, 4), answer.correlation.key
        (373.1243, 'water-if97')
        >>> with registry.open_library("shelf.db") as library:
        ...     library.temperature_at("water", [1e5, 1e6, 1e8]).temperatures.round(4)
        array([372.7559, 453.0356,      nan])
        """
        coverage = self.coverage(compound, property=property, phase=phase, metastable=metastable, drafts=drafts)
        from registry.inverse.temperatures import require_pressure, solve_many, solve_one

        require_pressure(PROPERTIES[coverage.property])
        pascal = _as_numbers(pressure, "pressure", "pascal")
        inversion = self._invert(coverage)
        return solve_one(inversion, float(pascal)) if pascal.ndim == 0 else solve_many(inversion, pascal)

    @overload
    def slope(
        self, compound: str, temperature: float | Reading, *, property: str = ..., phase: str | None = ...,
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
        temperature : float, Reading or array_like of float
            Temperature on ITS-90, K; or as it was read, on a scale.
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
        from registry.equilibrium.boundary import PhaseBoundary, require_boundary
        from registry.equilibrium.saturation import find_saturation

        require_boundary(find_property(property).name)
        coverage = self.coverage(compound, property=property, phase=phase, metastable=metastable, drafts=drafts)
        boundary = self._boundaries.get(coverage) or self._boundaries.setdefault(coverage, PhaseBoundary(coverage))
        if isinstance(temperature, Reading):
            return find_saturation(boundary, temperature.kelvin, temperature)
        kelvin = _as_numbers(temperature, "temperature", "kelvin")
        return find_saturation(boundary, float(kelvin)) if kelvin.ndim == 0 else boundary.evaluate(kelvin)

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

    def _invert(self, coverage: Coverage) -> Inversion:
        """The inverse of a coverage, kept as long as it."""
        from registry.inverse.inversion import Inversion

        return self._inversions.get(coverage) or self._inversions.setdefault(coverage, Inversion(coverage))

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


def _as_numbers(given: Any, word: str, unit: str) -> NDArray[np.float64]:
    """Numbers as an array of float; a masked element is no number."""
    found = np.ma.filled(given, np.nan) if isinstance(given, np.ma.MaskedArray) else np.asarray(given)
    if found.dtype.kind not in "fiu" and found.size:
        raise BadInput(f"{quote(given)} is no {word}; numbers in {unit} are allowed.")
    return found.astype(float, copy=False)


def _plain(phase: str) -> str:
    """A phase as it is compared: case and hyphens aside."""
    return phase.casefold().replace("-", " ")
