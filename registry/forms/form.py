"""What an equation form is.

A form turns printed coefficients into a kernel and its parameters. A kernel
computes in the form's own units; the curve (`registry.curve`) puts the unit
conversions around it.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Any, Protocol

import numpy as np
from numpy.typing import NDArray

from registry.numerals import parse_number

__all__ = ["Array", "Coefficients", "Fold", "Folded", "Form", "Kernel", "Scratch", "Units"]

Array = NDArray[np.float64]
LN10 = float(np.log(10.0))


class Scratch:
    """Reusable working arrays, so that a block is evaluated without allocation."""

    def __init__(self, size: int) -> None:
        self._size = size
        self._arrays: list[Array] = []

    def take(self, index: int, like: NDArray[Any]) -> Array:
        """Working array number `index`, with the shape of a one-dimensional array."""
        while len(self._arrays) <= index:
            self._arrays.append(np.empty(self._size))
        return self._arrays[index][: like.size]


class Kernel(Protocol):
    """The arithmetic of one or several forms, on one-dimensional arrays.

    Scalars go through the same code as arrays of one element: that is what
    makes the two agree bit for bit.
    """

    @property
    def stacks(self) -> bool:
        """True if `fill` also takes its parameters as one array per parameter."""

    def fill(self, t: Array, p: tuple[Any, ...], out: Array, scratch: Scratch) -> None:
        """Write the values at temperatures `t` into `out`."""

    def rate(self, t: Array, p: tuple[Any, ...]) -> Array:
        """The derivative of the value with respect to `t`."""

    def domain(self, p: tuple[Any, ...]) -> tuple[float, float]:
        """The open interval of `t` in which the expression means something."""


@dataclass(frozen=True)
class Units:
    """What a form must know of the units its coefficients are printed in.

    Attributes
    ----------
    factor : float
        SI units in one unit of the value.
    ratio, shift : float
        ``t = ratio * T - shift`` for T in kelvin.
    """

    factor: float = 1.0
    ratio: float = 1.0
    shift: float = 0.0


@dataclass(frozen=True)
class Folded:
    """A kernel with its parameters.

    Attributes
    ----------
    kernel : Kernel
        The arithmetic.
    parameters : tuple
        What the kernel needs, as floats.
    absorbed : bool
        True if the units are already inside the parameters, so that the
        kernel goes from kelvin to SI by itself.
    """

    kernel: Kernel
    parameters: tuple[Any, ...]
    absorbed: bool = False


Fold = Callable[[Mapping[str, float], Units], Folded]

_NUMBERED = re.compile(r"([A-Za-z]+)([1-9][0-9]?)", re.ASCII)


@dataclass(frozen=True)
class Coefficients:
    """Which coefficients a form takes.

    Attributes
    ----------
    required, optional : tuple of str
        Names of single coefficients.
    series : tuple of str
        Stems of numbered coefficients (``n`` for n1, n2 ...), all of the same
        length, at least one.
    chosen : tuple of str
        Those names and stems that are chosen rather than fitted, reference
        points and exponents: exact as printed, the rest is rounded.
    """

    required: tuple[str, ...] = ()
    optional: tuple[str, ...] = ()
    series: tuple[str, ...] = ()
    chosen: tuple[str, ...] = ()

    def __str__(self) -> str:
        parts = [*self.required, *(f"[{name}]" for name in self.optional), *(f"{s}1, {s}2 ..." for s in self.series)]
        return ", ".join(parts)

    def names(self, given: Mapping[str, str]) -> list[str]:
        """The names that are given, in the order in which the form takes them."""
        single = [name for name in (*self.required, *self.optional) if name in given]
        counted = [f"{stem}{i}" for stem in self.series for i in range(1, self._length(stem, given) + 1)]
        return single + [name for name in counted if name not in single]

    def is_rounded(self, name: str) -> bool:
        """True if a coefficient is a fitted number that its source has rounded.

        Examples
        --------
        >>> wagner = Coefficients(("Tc", "pc", "a"), chosen=("Tc", "pc"))
        >>> wagner.is_rounded("Tc"), wagner.is_rounded("a")
        (False, True)
        """
        match = _NUMBERED.fullmatch(name)
        return name not in self.chosen and not (match and match[1] in self.series and match[1] in self.chosen)

    def complaint(self, given: Mapping[str, str]) -> str:
        """What is wrong with these coefficients, or an empty text.

        Examples
        --------
        >>> Coefficients(("A", "B", "C")).complaint({"A": "8.07131", "B": "1730.63"})
        'coefficient C is missing; the form takes A, B, C.'
        """
        missing = [name for name in self.required if name not in given]
        lengths = {stem: self._length(stem, given) for stem in self.series}
        missing += [f"{stem}1" for stem, length in lengths.items() if not length]
        if missing:
            verb = "coefficient {} is" if len(missing) == 1 else "coefficients {} are"
            return f"{verb.format(', '.join(missing))} missing; the form takes {self}."
        late = [n for n in given if (m := _NUMBERED.fullmatch(n)) and int(m[2]) > lengths.get(m[1], 100)]
        if late:
            return f"{', '.join(late)} stands after a gap in the numbers; the form takes {self}."
        if len(set(lengths.values())) > 1:
            return f"{' and '.join(self.series)} must be equally many; the form takes {self}."
        known = {*self.required, *self.optional}
        known |= {f"{stem}{i}" for stem, length in lengths.items() for i in range(1, length + 1)}
        extra = [name for name in given if name not in known]
        if extra:
            return f"{', '.join(extra)} is no coefficient of the form, which takes {self}."
        for name, text in given.items():
            try:
                parse_number(text)
            except ValueError as error:
                return f"coefficient {name}: {error}."
        return ""

    @staticmethod
    def _length(stem: str, given: Mapping[str, str]) -> int:
        numbers = {int(m[2]) for name in given if (m := _NUMBERED.fullmatch(name)) and m[1] == stem}
        count = 0
        while count + 1 in numbers:
            count += 1
        return count


def numbered(c: Mapping[str, float], stem: str, first: int = 1) -> tuple[float, ...]:
    """The values of n1, n2, ... for the stem n; of n0, n1, ... if `first` is 0."""
    values: list[float] = []
    while (name := f"{stem}{first + len(values)}") in c:
        values.append(c[name])
    return tuple(values)


def fold_named(kernel: Kernel, *names: str) -> Fold:
    """A fold whose parameters are the named coefficients as they are."""
    return lambda c, units: Folded(kernel, tuple(c[name] for name in names))


@dataclass(frozen=True)
class Form:
    """An equation form under its published name: one row of the catalogue.

    Attributes
    ----------
    name : str
        The word used in records.
    title : str
        The published name.
    equation : str
        The equation in plain text.
    coefficients : Coefficients
        What it takes.
    fold : callable
        ``fold(coefficients, units)`` gives the kernel and its parameters.
    properties : tuple of str
        What it can be for.
    reference : str
        Where it is published.
    absolute : bool
        True if the temperature must be counted from absolute zero.
    value_unit : str
        The one unit of the value that the equation allows; empty for any.
    """

    name: str
    title: str
    equation: str
    coefficients: Coefficients
    fold: Fold
    properties: tuple[str, ...]
    reference: str
    absolute: bool = True
    value_unit: str = ""
