"""A correlation made evaluable: kelvin on ITS-90 in, SI out."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

import numpy as np

from registry.forms.catalogue import FORMS
from registry.forms.form import Array, Kernel, Scratch, Units
from registry.numerals import to_float
from registry.quantities import UNITS
from registry.records import Correlation
from registry.scales import SCALES, Scale

__all__ = ["Curve"]


@dataclass(frozen=True)
class Curve:
    """One correlation as a function of temperature.

    Attributes
    ----------
    kernel, parameters
        The arithmetic of its form, in the units the form takes.
    factor : float
        SI units in one unit of the kernel's value.
    ratio : float
        The kernel's temperature is ``ratio * T``, T in kelvin; forms that may
        count from another zero carry their units in their parameters.
    scale : Scale
        The temperature scale it stands on.
    window : tuple of float
        Where it may answer, K: as printed, cut to where its form means
        something.
    domain : tuple of float
        Where its form means something, K, whatever the window; open below.
    """

    kernel: Kernel
    parameters: tuple[Any, ...]
    factor: float
    ratio: float
    scale: Scale
    window: tuple[float, float]
    domain: tuple[float, float]

    @classmethod
    def of(cls, correlation: Correlation, molar_mass: float, instead: Mapping[str, float] | None = None) -> Curve:
        """The curve of a correlation.

        Parameters
        ----------
        correlation : Correlation
            The record.
        molar_mass : float
            Molar mass of the compound, g/mol; used where the printed unit is
            on the other basis and the source gives no molar mass of its own.
        instead : mapping of str to float, optional
            Coefficients to take in place of the printed ones.

        Returns
        -------
        Curve
            Evaluable in kelvin and SI units.

        Examples
        --------
        >>> from registry.records import Correlation
        >>> record = Correlation(
        ...     key="ethanol-example", compound="ethanol", property="vapor-pressure", phase="liquid",
        ...     form="antoine-ln", coefficients={"A": "16.8958", "B": "3795.17", "C": "230.918"},
        ...     temperature_unit="degC", value_unit="kPa", window_min="3", window_max="96", window_unit="degC",
        ...     window_basis="printed", temperature_scale="not-stated", evidence="compiled",
        ...     source="smith-van-ness-b2", locator="Table B.2", obtained="seen")
        >>> round(Curve.of(record, 46.068).value(323.15), 1)
        29545.0
        """
        unit, temperature = UNITS[correlation.value_unit], UNITS[correlation.temperature_unit]
        c = {name: to_float(text) for name, text in correlation.coefficients.items()}
        c.update(instead or {})
        factor = float(unit.factor) * (c.get("M", molar_mass) if unit.per_molar_mass else 1.0)
        units = Units(factor, float(1 / temperature.factor), float(temperature.shift))
        folded = FORMS[correlation.form].fold(c, units)
        domain = folded.kernel.domain(folded.parameters)
        if folded.absorbed:
            factor, units = 1.0, Units()
        low, high = (bound / units.ratio for bound in domain)
        printed = correlation.window_kelvin()
        # the domain is open at its lower end: a pole or absolute zero
        window = (max(printed[0], float(np.nextafter(low, np.inf))), min(printed[1], high))
        return cls(
            folded.kernel, folded.parameters, factor, units.ratio,
            SCALES[correlation.temperature_scale], window, (low, high),
        )  # fmt: skip

    @property
    def stacks(self) -> bool:
        """True if points of this and other such curves can be evaluated together."""
        return self.kernel.stacks and not self.scale.shifts and self.factor == self.ratio == 1.0

    def fill(self, kelvin: Array, out: Array, scratch: Scratch) -> None:
        """Write the SI values at temperatures (K, one-dimensional) into `out`."""
        self.kernel.fill(self._argument(kelvin), self.parameters, out, scratch)
        if self.factor != 1.0:
            np.multiply(out, self.factor, out)

    def values(self, kelvin: Array) -> Array:
        """The SI values at temperatures, K, any shape; no window is applied."""
        flat = np.ascontiguousarray(kelvin, dtype=float).reshape(-1)
        out = np.empty_like(flat)
        with np.errstate(all="ignore"):
            self.fill(flat, out, Scratch(flat.size))
        return out.reshape(np.shape(kelvin))

    def value(self, kelvin: float) -> float:
        """The SI value at one temperature, K; no window is applied."""
        at, out = np.array([kelvin]), np.empty(1)
        with np.errstate(all="ignore"):
            self.fill(at, out, Scratch(1))
        return out.item()

    def rates(self, kelvin: Array) -> Array:
        """The derivatives of the SI value, per kelvin of ITS-90, any shape."""
        flat = np.ascontiguousarray(kelvin, dtype=float).reshape(-1)
        with np.errstate(all="ignore"):
            rate = self.kernel.rate(self._argument(flat), self.parameters) * (self.factor * self.ratio)
            if self.scale.shifts:
                rate = rate * (1.0 + self.scale.shift(flat)[1])
        return rate.reshape(np.shape(kelvin))

    def log_rate(self, kelvin: float) -> float:
        """d ln value / dT at one temperature, 1/K."""
        at = np.array([kelvin])
        with np.errstate(all="ignore"):
            return float(self.rates(at)[0] / self.values(at)[0])

    def _argument(self, kelvin: Array) -> Array:
        t = kelvin
        if self.scale.shifts:
            t = t + self.scale.shift(t)[0]
        if self.ratio != 1.0:
            t = t * self.ratio
        return t
