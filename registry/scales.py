"""Temperature scales: the number an older scale gives to an ITS-90 temperature.

A correlation recorded on IPTS-68 or IPTS-48 is evaluated at the number its own
scale gives. These conversions belong to the rules version: they never change
under an edition.

References
----------
.. [1] H. Preston-Thomas, Metrologia 27, 3 (1990), with the t90 - t68
   polynomial of the BIPM supplementary information (1997 edition),
   -200 to 630 degC: stated 1.5 mK below 0 degC, 1 mK above.
.. [2] R. L. Rusby, R. P. Hudson, M. Durieux, Metrologia 31, 149 (1994),
   630.615 to 1064.18 degC.
.. [3] Supplementary information for the ITS-90, 13.8 to 83.8 K (from memory;
   checked at 14, 20, 54.358 and 83.8 K).
.. [4] N. P. Fofonoff, H. Bryden, J. Mar. Res. 33 Suppl., 69 (1975): t68 and
   t48, 0 to 100 degC (from memory; -0.011 at 50 degC).
.. [5] t90 - t48 and t90 - t68 columns of the CRC Handbook: -100, 200 and
   250 degC. The values between -180 and 0 degC are the table of the IPTS-68
   text, Metrologia 5, 35 (1969), from memory; it meets the CRC column at
   -100 degC.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from registry.polynomial import polynomial_and_slope

__all__ = ["SCALES", "Scale"]

Array = NDArray[np.float64]
Branch = Callable[[Array], tuple[Array, Array]]

ICE_POINT = 273.15

# [1], in powers of t90/630
_A = (0.0, -0.148759, -0.267408, 1.080760, 1.269056, -4.089591, -1.871251, 7.438081, -3.536296)
# [2], in powers of t90
_B = (7.8687209e1, -4.7135991e-1, 1.0954715e-3, -1.2357884e-6, 6.7736583e-10, -1.4458081e-13)
# [3], in powers of (T90 - 40)/40
_C = (
    -0.005903, 0.008174, -0.061924, -0.193388, 1.490793, 1.252347, -9.835868,
    1.411912, 25.277595, -19.183815, -18.437089, 27.000895, -8.716324,
)  # fmt: skip
# [5]: t68 - t48 against t/degC
_T48 = (-180, -170, -160, -150, -140, -130, -120, -110, -100, -90, -80, -70, -60, -50, -40, -30, -20, -10, 0)
_D48 = (
    0.012, 0.007, -0.005, -0.013, -0.013, -0.006, 0.003, 0.013, 0.022, 0.029, 0.033, 0.034, 0.032, 0.029, 0.024,
    0.018, 0.012, 0.006, 0.0,
)  # fmt: skip


def _middle_68(kelvin: Array) -> tuple[Array, Array]:
    value, slope = polynomial_and_slope(_A, (kelvin - ICE_POINT) / 630.0)
    return -value, -slope / 630.0


def _high_68(kelvin: Array) -> tuple[Array, Array]:
    value, slope = polynomial_and_slope(_B, kelvin - ICE_POINT)
    return -value, -slope


def _low_68(kelvin: Array) -> tuple[Array, Array]:
    value, slope = polynomial_and_slope(_C, (kelvin - 40.0) / 40.0)
    return -value, -slope / 40.0


def _radiation_68(kelvin: Array) -> tuple[Array, Array]:
    # ITS-90 supplementary information: t90 - t68 = -0.25 (T90/1337.33)^2 above the gold point
    x = kelvin / 1337.33
    return 0.25 * x * x, 0.5 * x / 1337.33


def _fofonoff_48(t68: Array) -> tuple[Array, Array]:
    """t48 - t68 from t68 = t48 - k t48 (100 - t48), the stable root."""
    k = 4.4e-6
    linear = 1.0 - 100.0 * k
    root = np.sqrt(linear * linear + 4.0 * k * t68)
    t48 = 2.0 * t68 / (linear + root)
    return t48 - t68, 1.0 / root - 1.0


def _table_48(temperatures: tuple[float, ...], differences: tuple[float, ...]) -> Branch:
    x, y = np.array(temperatures, float), np.array(differences, float)
    rates = np.diff(y) / np.diff(x)

    def branch(t68: Array) -> tuple[Array, Array]:
        cell = np.clip(np.searchsorted(x, t68, side="right") - 1, 0, len(rates) - 1)
        return -(y[cell] + rates[cell] * (t68 - x[cell])), -rates[cell]

    return branch


@dataclass(frozen=True)
class Scale:
    """A temperature scale.

    Attributes
    ----------
    name : str
        The word used in records.
    title : str
        What the name means.
    branches : tuple
        ``(lower, upper, branch)`` in kelvin; a branch gives the number on the
        scale less the ITS-90 number, and its rate, for temperatures in K.
    absolute : bool
        True if it is about the zero of kelvin: degC and degF count from the
        ice point itself.
    """

    name: str
    title: str
    branches: tuple[tuple[float, float, Branch], ...] = ()
    absolute: bool = False

    @property
    def shifts(self) -> bool:
        """True if the scale gives other numbers than ITS-90."""
        return bool(self.branches)

    def shift(self, kelvin: Array) -> tuple[Array, Array]:
        """The number on this scale less the ITS-90 number, and its rate.

        Parameters
        ----------
        kelvin : array of float, any shape
            Temperatures on ITS-90, K.

        Returns
        -------
        tuple of array
            The difference in K and its derivative with respect to the ITS-90
            temperature; zero where no published conversion reaches.

        Examples
        --------
        100 degC on ITS-90 is 100.0256 degC on IPTS-68 [1]_:

        >>> round(float(SCALES["IPTS-68"].shift(np.array([373.15]))[0][0]), 4)
        0.0256
        """
        kelvin = np.asarray(kelvin, dtype=float)
        value, rate = np.zeros_like(kelvin), np.zeros_like(kelvin)
        for lower, upper, branch in self.branches:
            inside = (kelvin >= lower) & (kelvin < upper)
            if inside.any():
                value[inside], rate[inside] = branch(kelvin[inside])
        return value, rate

    def to_its90(self, number: float) -> float:
        """The ITS-90 temperature, K, to which this scale gives a number.

        Examples
        --------
        >>> round(SCALES["IPTS-68"].to_its90(373.15), 4)
        373.1244
        """
        kelvin = np.array([number])
        for _ in range(4):  # the shift changes by less than a thousandth of itself in a kelvin
            kelvin = number - self.shift(kelvin)[0]
        return float(kelvin[0])

    def reaches(self, kelvin: float) -> bool:
        """True if the conversion is defined at this ITS-90 temperature, K."""
        return not self.branches or any(lower <= kelvin < upper for lower, upper, _ in self.branches)


def _after_68(branch: Branch, low: float, high: float) -> tuple[float, float, Branch]:
    """An IPTS-48 branch, given in t68/degC, as one in ITS-90 kelvin."""

    def chained(kelvin: Array) -> tuple[Array, Array]:
        first, first_rate = _middle_68(kelvin)
        second, second_rate = branch(kelvin - ICE_POINT + first)
        return first + second, first_rate + second_rate * (1.0 + first_rate)

    return ICE_POINT + low, ICE_POINT + high, chained


def _constant(shift: float) -> Branch:
    return lambda kelvin: (np.full_like(kelvin, shift), np.zeros_like(kelvin))


_ROWS = (
    Scale("ITS-90", "International Temperature Scale of 1990"),
    Scale(
        "IPTS-68",
        "International Practical Temperature Scale of 1968",
        (
            (13.8, 83.8, _low_68),
            (83.8, ICE_POINT + 630.615, _middle_68),
            (ICE_POINT + 630.615, ICE_POINT + 1064.18, _high_68),
            (ICE_POINT + 1064.18, 4000.0, _radiation_68),
        ),
    ),
    Scale(
        "IPTS-48",
        "International Practical Temperature Scale of 1948",
        (
            _after_68(_table_48(_T48, _D48), -180.0, 0.0),
            _after_68(_fofonoff_48, 0.0, 100.0),
            _after_68(_table_48((100.0, 200.0, 250.0), (0.0, 0.043, 0.061)), 100.0, 250.0),
        ),
    ),
    Scale(
        "ice-point-273.16",
        "kelvin counted from an ice point of 273.16 K, as before 1954",
        ((0.0, 1e4, _constant(0.01)),),
        absolute=True,
    ),
    Scale("not-stated", "the source does not state its scale; the number is taken as it is"),
)

SCALES: dict[str, Scale] = {row.name: row for row in _ROWS}
