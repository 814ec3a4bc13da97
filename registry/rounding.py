"""What the rounding of printed coefficients leaves open.

A source prints a fitted coefficient to some digits; the number it fitted lies
anywhere within half a unit of the last one. Reference points and exponents are
chosen, not fitted, and exact as printed.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np

from registry.curve import Curve
from registry.forms.catalogue import FORMS
from registry.forms.form import Array
from registry.numerals import last_digit_unit, to_float
from registry.records import Correlation

__all__ = ["Rounding"]


@dataclass(frozen=True)
class Rounding:
    """One correlation with each rounded coefficient half a unit of its last digit higher and lower.

    Attributes
    ----------
    names : tuple of str
        The rounded coefficients.
    pairs : tuple of (Curve, Curve)
        For each the curve with it lower and higher.
    """

    names: tuple[str, ...]
    pairs: tuple[tuple[Curve, Curve], ...]

    @classmethod
    def of(cls, correlation: Correlation, molar_mass: float) -> Rounding:
        """The rounding of a correlation.

        Parameters
        ----------
        correlation : Correlation
            The record.
        molar_mass : float
            Molar mass of the compound, g/mol.

        Returns
        -------
        Rounding
            Nothing in it where every coefficient is exact.

        Examples
        --------
        The Antoine constants of ethanol printed as 8.20417, 1642.89 and
        230.300 leave the value at 50 degC open by 0.0077 % at most:

        >>> from registry.records import Correlation
        >>> record = Correlation(
        ...     key="ethanol-example", compound="ethanol", property="vapor-pressure", phase="liquid",
        ...     form="antoine-log10", coefficients={"A": "8.20417", "B": "1642.89", "C": "230.300"},
        ...     temperature_unit="degC", value_unit="mmHg", window_min="-57", window_max="80", window_unit="degC",
        ...     window_basis="printed", temperature_scale="not-stated", evidence="compiled",
        ...     source="example", locator="Table 1", obtained="seen")
        >>> found = Rounding.of(record, 46.068)
        >>> at = np.array([323.15])
        >>> round(float(found.bounds(at)[0]), 4), round(float(found.standards(at)[0]), 4)
        (0.0077, 0.0028)
        """
        takes = FORMS[correlation.form].coefficients
        names, pairs = [], []
        for name, text in correlation.coefficients.items():
            half, printed = float(last_digit_unit(text)) / 2.0, to_float(text)
            # a coefficient printed as zero says that there is no such term
            if half and printed and takes.is_rounded(name):
                low, high = (Curve.of(correlation, molar_mass, {name: printed + step}) for step in (-half, half))
                names.append(name)
                pairs.append((low, high))
        return cls(tuple(names), tuple(pairs))

    def effects(self, kelvin: Array) -> Array:
        """What half a unit in the last digit of each coefficient does to the value.

        Parameters
        ----------
        kelvin : array of float, one-dimensional
            Temperatures, K.

        Returns
        -------
        array of float, one row for each coefficient
            Percent of the value, without sign.
        """
        rows = np.zeros((len(self.pairs), kelvin.size))
        for row, (low, high) in zip(rows, self.pairs, strict=True):
            one, two = low.values(kelvin), high.values(kelvin)
            with np.errstate(all="ignore"):
                row[:] = 100.0 * np.abs((two - one) / (two + one))
        return rows

    def bounds(self, kelvin: Array) -> Array:
        """The most by which the printed digits leave the value open, percent: every coefficient at its worst."""
        return np.sum(self.effects(kelvin), axis=0)

    def standards(self, kelvin: Array) -> Array:
        """The standard uncertainty from the printed digits, percent.

        Each coefficient lies evenly within its last digit, independently of
        the others (JCGM 100, 4.3.7 and F.2.2.1).
        """
        return np.sqrt(np.sum(self.effects(kelvin) ** 2, axis=0)) / math.sqrt(3.0)
