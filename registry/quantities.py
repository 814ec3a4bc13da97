"""Units and numbers with units, by exact definition.

Every factor is an exact fraction of the SI unit, so a conversion rounds once.
A value in a unit becomes SI as ``(value + shift) * factor``.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, replace
from fractions import Fraction

from registry.errors import BadQuantity, GaugePressure
from registry.numerals import parse_number

__all__ = [
    "UNITS",
    "Unit",
    "convert",
    "find_unit",
    "gauge_unit",
    "is_unit",
    "parse_pressure",
    "parse_temperature",
    "read_quantity",
    "unit_names",
]


@dataclass(frozen=True)
class Unit:
    """A unit of one dimension.

    Attributes
    ----------
    name : str
        The spelling used in records and output.
    dimension : str
        ``temperature``, ``pressure``, ``molar-energy``, ``density`` ...
    factor, shift : fractions.Fraction
        ``SI = (value + shift) * factor``.
    definition : str
        The definition in words.
    aliases : tuple of str
        Other spellings that are understood.
    per_molar_mass : bool
        True if the SI value also needs the molar mass in g/mol as a factor
        (J/g to J/mol, mol/dm3 to kg/m3).
    """

    name: str
    dimension: str
    factor: Fraction
    definition: str
    aliases: tuple[str, ...] = ()
    shift: Fraction = Fraction(0)
    per_molar_mass: bool = False

    @property
    def is_gauge(self) -> bool:
        """True for a pressure that is counted from a local atmosphere."""
        return self.dimension == "pressure" and self.shift != 0

    def to_si(self, value: Fraction) -> Fraction:
        """The exact SI value of an exact value in this unit."""
        return (value + self.shift) * self.factor

    def from_si(self, value: float) -> float:
        """The value in this unit of an SI value, rounded once."""
        return float(Fraction(value) / self.factor - self.shift)


_KGF = Fraction("9.80665")
_LBF = Fraction("0.45359237") * _KGF
_INCH2 = Fraction("0.0254") ** 2
_MMHG = Fraction("13595.1") * _KGF / 1000

_ROWS = (
    Unit("K", "temperature", Fraction(1), "kelvin", ("kelvin",)),
    Unit("degC", "temperature", Fraction(1), "T/K - 273.15", ("C", "°C", "℃", "celsius"), Fraction("273.15")),
    Unit("degF", "temperature", Fraction(5, 9), "9/5 T/K - 459.67", ("F", "°F", "fahrenheit"), Fraction("459.67")),
    Unit("degR", "temperature", Fraction(5, 9), "9/5 T/K", ("R", "°R", "rankine")),
    Unit("Pa", "pressure", Fraction(1), "pascal"),
    Unit("hPa", "pressure", Fraction(100), "100 Pa"),
    Unit("kPa", "pressure", Fraction(1000), "1000 Pa"),
    Unit("MPa", "pressure", Fraction(10**6), "1e6 Pa"),
    Unit("GPa", "pressure", Fraction(10**9), "1e9 Pa"),
    Unit("bar", "pressure", Fraction(10**5), "100000 Pa", ("bara",)),
    Unit("mbar", "pressure", Fraction(100), "100 Pa"),
    Unit("atm", "pressure", Fraction(101325), "101325 Pa"),
    Unit("mmHg", "pressure", _MMHG, "13595.1 kg/m3 x 9.80665 m/s2 x 1 mm", ("mm Hg",)),
    Unit("cmHg", "pressure", 10 * _MMHG, "10 mmHg"),
    Unit("Torr", "pressure", Fraction(101325, 760), "101325/760 Pa", ("torr",)),
    Unit("inHg", "pressure", Fraction("25.4") * _MMHG, "25.4 mmHg"),
    Unit("psi", "pressure", _LBF / _INCH2, "lbf/in2", ("psia", "lbf/in2")),
    Unit("kgf/cm2", "pressure", _KGF * 10**4, "9.80665 N/cm2", ("at", "kgf/cm²", "kg/cm2")),
    Unit("J/mol", "molar-energy", Fraction(1), "joule per mole"),
    Unit("kJ/mol", "molar-energy", Fraction(1000), "1000 J/mol"),
    Unit("cal/mol", "molar-energy", Fraction("4.184"), "4.184 J/mol (thermochemical)"),
    Unit("kcal/mol", "molar-energy", Fraction(4184), "4184 J/mol (thermochemical)"),
    Unit("J/g", "molar-energy", Fraction(1), "joule per gram", ("kJ/kg",), per_molar_mass=True),
    Unit("kg/m3", "density", Fraction(1), "kilogram per cubic metre", ("kg/m³", "g/L")),
    Unit("g/cm3", "density", Fraction(1000), "1000 kg/m3", ("g/cm³", "g/mL", "kg/L", "kg/dm3")),
    Unit("lb/ft3", "density", Fraction("0.45359237") / Fraction("0.3048") ** 3, "pound per cubic foot"),
    Unit("mol/dm3", "density", Fraction(1), "mole per cubic decimetre", ("mol/L", "kmol/m3"), per_molar_mass=True),
    Unit("mol/m3", "density", Fraction(1, 1000), "mole per cubic metre", per_molar_mass=True),
    Unit("g/mol", "molar-mass", Fraction(1), "gram per mole", ("kg/kmol",)),
    Unit("1", "number", Fraction(1), "a pure number"),
)

UNITS: dict[str, Unit] = {unit.name: unit for unit in _ROWS}
_SPELLINGS = {spelling: unit for unit in _ROWS for spelling in (unit.name, *unit.aliases)}
_GAUGE = re.compile(r"(.+?)\s*(?:\(g\)|\(gauge\)|\s+gauge|\s*g|-g|_g)", re.ASCII)
_QUANTITY = re.compile(r"([+-]?[0-9.,_]+(?:[eE][+-]?[0-9]+)?)\s*((?:[^0-9.,_\s+-].*)?)", re.DOTALL)


def unit_names(dimension: str) -> list[str]:
    """The names of all units of one dimension, in the order of the table.

    Examples
    --------
    >>> unit_names("temperature")
    ['K', 'degC', 'degF', 'degR']
    """
    return [unit.name for unit in _ROWS if unit.dimension == dimension]


def find_unit(text: str, dimension: str) -> Unit:
    """The unit with this spelling.

    Parameters
    ----------
    text : str
        A unit name or one of its other spellings.
    dimension : str
        The dimension it must have.

    Returns
    -------
    Unit
        The row of the table.

    Raises
    ------
    BadQuantity
        If there is no such unit, or it is of another dimension.
    GaugePressure
        If it is a gauge unit.

    Examples
    --------
    >>> float(find_unit("mmHg", "pressure").factor)
    133.322387415
    """
    unit = _SPELLINGS.get(text.strip())
    if unit is not None and unit.dimension == dimension:
        return unit
    if dimension == "pressure" and _gauge_base(text):
        raise GaugePressure(text)
    names = unit_names(dimension)
    allowed = f"a {dimension} unit is one of {', '.join(names)}."
    if unit is None and (near := _nearest_spelling(text, dimension)):
        allowed += f" Did you mean {near}?"
    raise BadQuantity(text, allowed)


def is_unit(text: str, dimension: str) -> bool:
    """True if a text is a unit of a dimension; a gauge unit such as barg is one of pressure."""
    unit = _SPELLINGS.get(text.strip()) or (_gauge_base(text) if dimension == "pressure" else None)
    return unit is not None and unit.dimension == dimension


def _nearest_spelling(text: str, dimension: str) -> str:
    import difflib

    known = {s.lower(): u.name for s, u in _SPELLINGS.items() if u.dimension == dimension}
    near = difflib.get_close_matches(text.strip().lower()[:40], known, n=1, cutoff=0.6)
    return known[near[0]] if near else ""


def _gauge_base(text: str) -> Unit | None:
    """The absolute unit behind a gauge spelling such as barg or psi(g)."""
    match = _GAUGE.fullmatch(text.strip()[:40])
    unit = _SPELLINGS.get(match[1]) if match else None
    return unit if unit is not None and unit.dimension == "pressure" else None


def gauge_unit(text: str, atmosphere_pa: Fraction) -> Unit:
    """A gauge pressure unit against a stated local atmosphere.

    Parameters
    ----------
    text : str
        A gauge spelling such as ``barg``, ``psig`` or ``kPa(g)``, or an
        absolute unit, which is returned as it is.
    atmosphere_pa : fractions.Fraction
        The local atmospheric pressure, Pa.

    Returns
    -------
    Unit
        The unit, shifted by the atmosphere.

    Examples
    --------
    >>> gauge_unit("barg", Fraction(100000)).from_si(350000.0)
    2.5
    """
    base = _gauge_base(text)
    if base is None:
        return find_unit(text, "pressure")
    return replace(base, name=f"{base.name}(g)", shift=atmosphere_pa / base.factor)


def read_quantity(
    text: str, dimension: str, example: str, atmosphere_pa: Fraction | None = None
) -> tuple[Fraction, Unit]:
    """The exact number in a text and its unit, not converted; a gauge unit where the atmosphere, Pa, is stated."""
    plain = text.replace("\u2212", "-").strip()
    match = _QUANTITY.fullmatch(plain) if len(plain) <= 100 else None
    if match is None:
        raise BadQuantity(text, f"a {dimension} is a number with a unit, such as {example}.")
    if not match[2]:
        listed = ", ".join(unit_names(dimension))
        raise BadQuantity(text, f"a {dimension} needs its unit ({listed}), such as {example}.")
    try:
        unit = find_unit(match[2], dimension) if atmosphere_pa is None else gauge_unit(match[2], atmosphere_pa)
    except GaugePressure:
        raise
    except BadQuantity as error:
        raise BadQuantity(text, error.allowed) from None
    try:
        return parse_number(match[1]), unit
    except ValueError as error:
        raise BadQuantity(text, f"{error}; a {dimension} looks like {example}.") from None


def parse_temperature(text: str) -> float:
    """A temperature with its unit, in kelvin.

    Parameters
    ----------
    text : str
        Such as ``298.15K``, ``25degC``, ``25 °C``, ``25C``, ``77F`` or
        ``536.67R``; ``-`` and the minus sign U+2212 both do.

    Returns
    -------
    float
        The temperature, K: the double nearest to the exact value.

    Raises
    ------
    BadQuantity
        If the unit is missing or unknown, the number is none, or the
        temperature is not above absolute zero.

    Examples
    --------
    >>> parse_temperature("25 °C")
    298.15
    >>> parse_temperature("77F")
    298.15
    >>> parse_temperature("-40C")
    233.15
    """
    number, unit = read_quantity(text, "temperature", "298.15K or 25C")
    kelvin = unit.to_si(number)
    if kelvin <= 0:
        raise BadQuantity(text, "a temperature lies above absolute zero, 0 K.")
    return float(kelvin)


def parse_pressure(text: str, atmosphere_pa: Fraction | None = None) -> Fraction:
    """A pressure with its unit, in pascal, exact and absolute.

    Parameters
    ----------
    text : str
        Such as ``101.325kPa``, ``1 atm`` or, with an atmosphere, ``2 barg``.
    atmosphere_pa : fractions.Fraction, optional
        The local atmospheric pressure, Pa, to which gauge units are added.

    Returns
    -------
    fractions.Fraction
        The absolute pressure, Pa.

    Raises
    ------
    BadQuantity
        If the unit is missing or unknown, the number is none, or the
        pressure is not above zero.
    GaugePressure
        If it is in a gauge unit and the atmosphere is not given.

    Examples
    --------
    >>> parse_pressure("1 atm")
    Fraction(101325, 1)
    >>> parse_pressure("-0.2 barg", Fraction(101325))
    Fraction(81325, 1)
    """
    number, unit = read_quantity(text, "pressure", "101.325kPa", atmosphere_pa)
    pascal = unit.to_si(number)
    if pascal <= 0:
        raise BadQuantity(text, "an absolute pressure is greater than zero.")
    return pascal


def convert(value: float, source: Unit, target: Unit, molar_mass: float | None = None) -> float:
    """A value in another unit of the same dimension.

    Parameters
    ----------
    value : float
        The value in `source`.
    source, target : Unit
        Units of one dimension.
    molar_mass : float, optional
        Molar mass, g/mol; needed between a molar and a mass basis.

    Returns
    -------
    float
        The value in `target`, rounded once.

    Raises
    ------
    BadQuantity
        If the dimensions differ, or the molar mass is needed and not given.

    Examples
    --------
    >>> convert(1.0, UNITS["atm"], UNITS["mmHg"])
    759.9998917256113
    """
    if source.dimension != target.dimension:
        raise BadQuantity(
            target.name, f"a {source.dimension} unit is one of {', '.join(unit_names(source.dimension))}."
        )
    exact = source.to_si(Fraction(value))
    if source.per_molar_mass != target.per_molar_mass:
        if molar_mass is None:
            raise BadQuantity(target.name, f"it needs the molar mass when the value is in {source.name}.")
        mass = Fraction(molar_mass)
        exact = exact * mass if source.per_molar_mass else exact / mass
    return float(exact / target.factor - target.shift)
