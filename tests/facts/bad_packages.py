"""Bad packages, each with its exact message.

Every expected text is this program's own wording.
"""

from __future__ import annotations

from facts.bad_requests import ABOVE_ZERO, BARE, PRESSURES, TEMPERATURES

NUMBER = "a number with a decimal point, such as 8.07131, is allowed."
KEY = "a key of lower-case letters, digits, '-' and '.' is allowed, such as water-sr1-86."
FORMULA = "a formula of element symbols and counts is allowed, such as C2H5OH."
CONTROL = "it holds a control character or an unpaired surrogate; plain text is allowed."
COEFFICIENTS = "coefficients such as A=8.07131; B=1730.63; C=233.426 are allowed, each once."
UNCERTAINTY = "pieces such as '0.025 % up to 373 K; 0.1 % (k=2)' are allowed."
WINDOW = "the lower bound must lie above 0 K and below the upper bound."
ABOUT_KELVIN = "ice-point-273.16 is about kelvin: K or degR."
NEITHER = "with this key, neither in the package nor in the library."
FILES = (
    "compounds.csv, names.csv, sources.csv, correlations.csv, fixed_points.csv, printed_values.csv, datasets.csv, "
    "points.csv, preferences.csv"
)
BASE = {
    "compounds.csv": ("brindovane", "tallowane"),
    "names.csv": ("brindovane", "tallowane"),
    "sources.csv": (
        "invented-evaluation-c", "invented-handbook-b", "invented-handbook-d", "invented-measurements-a",
        "invented-measurements-e", "invented-measurements-i",
    ),
    "correlations.csv": (
        "brindovane-antoine-low", "brindovane-density", "brindovane-kirchhoff", "tallowane-antoine-high",
        "tallowane-antoine-low", "tallowane-enthalpy",
    ),
    "fixed_points.csv": (
        "brindovane-critical-temperature", "brindovane-triple-point-temperature", "tallowane-acentric-factor",
    ),
    "printed_values.csv": ("brindovane-kirchhoff-at-400",),
    "datasets.csv": ("tallowane-enthalpy-measured",),
    "points.csv": ("tallowane-enthalpy-measured",),
    "preferences.csv": ("tallowane-antoine-high-first",),
}  # fmt: skip
"""The small valid package that every bad one is made from: these rows of the invented scenario, by their first cell.

Line 2 of a file is the first of its rows, and so on.
"""

# how a package is changed: (verb, file, ...), as test_bad_input.EDITS reads them; None leaves the column or file out
_C, _F, _N, _S, _D = "correlations.csv", "fixed_points.csv", "names.csv", "sources.csv", "datasets.csv"
_K, _P, _V, _R = "compounds.csv", "points.csv", "printed_values.csv", "preferences.csv"
_J = "datapackage.json"
_LOW = "A=22.14808; B=3909.70; C=-45.63"


def _in_cell(file: str, line: int, column: str, text: str, why: str, shown: str | None = None) -> tuple:
    """One bad cell: the change and the message at its place."""
    given = f"{text!r} given; " if shown is None else shown
    return (("cell", file, line, column, text),), (f"{file}, line {line}, column {column}: {given}{why}",)


def _described(path: str, why: str) -> tuple:
    """One bad path in the descriptor."""
    return (("paths", _J, path),), (f"{_J}: resource {path!r} {why}",)


_NO_POINTS = (
    "datasets.csv, line 2, column key: 'tallowane-enthalpy-measured' given; "
    "points.csv has no point of it; a dataset has at least one."
)
_NO_ZIP = (
    "it is no folder and no zip that can be read (File is not a zip file). Give the folder that holds datapackage.json."
)
_JSON = f"{_J}: it must be JSON in UTF-8 with a list of resources that have a path."

# what is bad, the changes to the base package, the problems in order
PACKAGES = (
    # compounds
    ("a CAS number with a wrong check digit", *_in_cell(
        _K, 2, "cas", "7732-18-4", "a CAS number with a right check digit is allowed, such as 7732-18-5.")),
    ("a formula that is a word", *_in_cell(_K, 2, "formula", "water", FORMULA)),
    ("a formula that starts with =", *_in_cell(_K, 2, "formula", "=1+1", FORMULA)),
    ("a formula with a charge", *_in_cell(_K, 2, "formula", "Na+", FORMULA)),
    ("a formula with Arabic digits", *_in_cell(_K, 2, "formula", "C\u0662", FORMULA)),
    ("a formula with an unknown element", *_in_cell(
        _K, 2, "formula", "Xx2", "unexpected character 'x'; element symbols and counts are allowed.")),
    ("a formula with a group", *_in_cell(
        _K, 2, "formula", "MeOH", "unknown symbol 'Me'; element symbols and counts are allowed.")),
    ("a formula in capitals", *_in_cell(
        _K, 2, "formula", "WATER", "unknown symbol 'R'; element symbols and counts are allowed.")),
    ("a peptide for a formula", *_in_cell(
        _K, 2, "formula", "AAA", "unknown symbol 'A'; element symbols and counts are allowed.")),
    ("a formula with a count of zero", *_in_cell(
        _K, 2, "formula", "C0", "count is zero; element symbols and counts are allowed.")),
    ("a molar mass that does not fit the formula",
     (("cell", _K, 2, "molar_mass", "18.015"), ("cell", _K, 2, "molar_mass_unit", "g/mol"),
      ("cell", _K, 2, "source", "invented-handbook-b"), ("cell", _K, 2, "locator", "invented table 1"),
      ("cell", _K, 2, "obtained", "seen")),
     ("compounds.csv, line 2, column molar_mass: '18.015' given; C7H10ClFO makes 164.605 g/mol, within 0.05 %.",)),
    ("a molar mass unit that is not g/mol", *_in_cell(
        _K, 2, "molar_mass_unit", "kg/mol", "one of g/mol is allowed.")),
    ("an empty name", *_in_cell(_K, 2, "name", "", "it is empty; text is allowed.", "")),
    ("a name of 201 characters", *_in_cell(
        _K, 2, "name", "x" * 201, "it is longer than 200 characters.", f"'{'x' * 59}... (201 characters) given; ")),
    ("a name of 130 000 characters", *_in_cell(
        _K, 2, "name", "x" * 130000, "it is longer than 200 characters.",
        f"'{'x' * 59}... (130000 characters) given; ")),
    ("a name that starts with =", *_in_cell(
        _K, 2, "name", "=cmd", "it starts with =, which a spreadsheet would run as a formula.")),
    ("a name with a blank at the end", *_in_cell(_K, 2, "name", "fluid ", "it starts or ends with a blank.")),
    ("a name with a no-break blank at the start", *_in_cell(
        _K, 2, "name", "\u00a0fluid", "it starts or ends with a blank.")),
    ("a tab inside a name", *_in_cell(_K, 2, "name", "flu\tid", CONTROL)),
    ("a line break inside a name", *_in_cell(_K, 2, "name", "flu\nid", CONTROL)),
    ("an escape sequence in a name", *_in_cell(_K, 2, "name", "\x1b[31mfluid", CONTROL)),
    ("a name that turns its direction", *_in_cell(
        _K, 2, "name", "flu\u202eid", "it holds a character that is not seen (U+202E); plain text is allowed.")),
    ("a blank of no width in a name", *_in_cell(
        _K, 2, "name", "flu\u200bid", "it holds a character that is not seen (U+200B); plain text is allowed.")),
    ("a soft hyphen in a note", *_in_cell(
        _P, 2, "note", "flu\u00adid", "it holds a character that is not seen (U+00AD); plain text is allowed.")),
    ("a byte order mark inside a name", *_in_cell(_K, 2, "name", "flu\ufeffid", CONTROL)),
    ("a name of a million letters", (("cell", _K, 2, "name", "x" * 10**6),),
     ("compounds.csv, line 2: a cell is longer than 131072 characters.",)),
    ("a note that starts with =", *_in_cell(
        _K, 2, "note", '=HYPERLINK("x")', "it starts with =, which a spreadsheet would run as a formula.")),
    ("a note that starts with @", *_in_cell(
        _K, 2, "note", "@x", "it starts with @, which a spreadsheet would run as a formula.")),
    ("a standing note that starts with +", *_in_cell(
        _C, 2, "standing_note", "+1", "it starts with +, which a spreadsheet would run as a formula.")),
    ("a note of 4001 characters", *_in_cell(
        _K, 2, "note", "n" * 4001, "it is longer than 4000 characters.", f"'{'n' * 59}... (4001 characters) given; ")),
    # keys
    ("a key with a capital", *_in_cell(_K, 2, "key", "Brindovane", KEY)),
    ("a key that starts with =", *_in_cell(_C, 2, "key", "=x", KEY)),
    ("an empty key", *_in_cell(_C, 2, "key", "", f"it is empty; {KEY}", "")),
    ("a key of 81 letters", *_in_cell(
        _K, 2, "key", "k" * 81, "it is longer than 80 characters.", f"'{'k' * 59}... (81 characters) given; ")),
    ("a key twice", (("again", _C, 2),),
     ("correlations.csv, line 8, column key: 'brindovane-antoine-low' given; line 2 has the same key.",)),
    ("a key twice, in capitals", (("again", _K, 2), ("cell", _K, 4, "key", "BRINDOVANE")),
     ("compounds.csv, line 4, column key: 'BRINDOVANE' given; line 2 has the same key.",)),
    ("a name twice", (("again", _N, 2),),
     ("names.csv, line 5, column name: 'brindovane, invented fluid B' given; line 2 has the same key.",)),
    ("a name twice, in capitals", (("again", _N, 2), ("cell", _N, 5, "name", "INVENTED Fluid B")),
     ("names.csv, line 5, column name: 'brindovane, INVENTED Fluid B' given; line 2 has the same key.",)),
    # sources
    ("a DOI with a prefix", *_in_cell(
        _S, 2, "doi", "doi:10.1063/1.555926", "a DOI such as 10.1063/1.555926 is allowed.")),
    ("a DOI as an address", *_in_cell(
        _S, 2, "doi", "https://doi.org/10.1063/1.555926", "a DOI such as 10.1063/1.555926 is allowed.")),
    ("an ISBN with a wrong check digit", *_in_cell(
        _S, 2, "isbn", "0-306-40615-3", "an ISBN with a right check digit is allowed.")),
    ("a year of two digits", *_in_cell(_S, 2, "year", "94", "a year of four digits is allowed.")),
    ("a year with a letter", *_in_cell(_S, 2, "year", "c1994", "a year of four digits is allowed.")),
    ("an address that runs a script", *_in_cell(
        _S, 2, "url", "javascript:alert(1)", "an http or https address is allowed.")),
    ("an unknown type of source", *_in_cell(
        _S, 2, "type", "journal", "one of article-journal, book, chapter, report, standard, dataset, webpage, "
        "entry-encyclopedia, paper-conference, thesis, document is allowed.")),
    ("a source without citation", *_in_cell(_S, 2, "citation", "", "it is empty; text is allowed.", "")),
    # references
    ("a dangling source", *_in_cell(_C, 2, "source", "no-such", f"there is no source {NEITHER}")),
    ("a dangling source of a compound", *_in_cell(_K, 2, "source", "no-such", f"there is no source {NEITHER}")),
    ("a dangling source of a dataset", *_in_cell(_D, 2, "source", "no-such", f"there is no source {NEITHER}")),
    ("a dangling compound", *_in_cell(_C, 2, "compound", "no-such", f"there is no compound {NEITHER}")),
    ("a name of a dangling compound", *_in_cell(_N, 2, "compound", "no-such", f"there is no compound {NEITHER}")),
    ("a printed value of a dangling correlation", *_in_cell(
        _V, 2, "correlation", "no-such", f"there is no correlation {NEITHER}")),
    ("a preference over a dangling correlation", *_in_cell(
        _R, 2, "over", "no-such", f"there is no correlation {NEITHER}")),
    ("a point of a dangling dataset", *_in_cell(
        _P, 3, "dataset", "no-such", "there is no such dataset in datasets.csv.")),
    ("no source of a fact", *_in_cell(_C, 2, "source", "", f"it is empty; {KEY}", "")),
    ("a preference over itself", *_in_cell(
        _R, 2, "over", "tallowane-antoine-high", "a correlation cannot be preferred over itself.")),
    ("a preference across compounds", *_in_cell(
        _R, 2, "over", "brindovane-kirchhoff",
        "it is for vapor-pressure of brindovane, tallowane-antoine-high for vapor-pressure of tallowane; "
        "a preference is between correlations of one compound, property and phase.")),
    ("a preference across properties", *_in_cell(
        _R, 2, "over", "tallowane-enthalpy",
        "it is for enthalpy-of-vaporization of tallowane, tallowane-antoine-high for vapor-pressure of tallowane; "
        "a preference is between correlations of one compound, property and phase.")),
    ("preferences in a circle",
     (("again", _R, 2), ("cell", _R, 3, "key", "back"), ("cell", _R, 3, "correlation", "tallowane-antoine-low"),
      ("cell", _R, 3, "over", "tallowane-antoine-high")),
     ("preferences.csv: the preferences, with those recorded already, go round in a circle: "
      "tallowane-antoine-high over tallowane-antoine-low over tallowane-antoine-high.",)),
    # coefficients
    ("a coefficient under a wrong name", *_in_cell(
        _C, 2, "coefficients", "A=22.14808; B=3909.70; D=-45.63", "coefficient C is missing; the form takes A, B, C.")),
    ("a missing coefficient", *_in_cell(
        _C, 2, "coefficients", "A=22.14808; B=3909.70", "coefficient C is missing; the form takes A, B, C.")),
    ("a coefficient too many", *_in_cell(
        _C, 2, "coefficients", f"{_LOW}; D=0", "D is no coefficient of the form, which takes A, B, C.")),
    ("a coefficient twice", *_in_cell(_C, 2, "coefficients", f"{_LOW}; A=1", COEFFICIENTS)),
    ("colons for equals signs", *_in_cell(_C, 2, "coefficients", "A:22.14808; B:3909.70; C:-45.63", COEFFICIENTS)),
    ("no coefficients", *_in_cell(_C, 2, "coefficients", "", COEFFICIENTS, "")),
    ("coefficients that start with =", *_in_cell(_C, 2, "coefficients", "=1+1", COEFFICIENTS)),
    ("an exponent for each number", *_in_cell(
        _C, 3, "coefficients", "Tc=618.4; c0=436.0; n1=741.8; n2=338.5; t1=1/3",
        "n and t must be equally many; the form takes Tc, c0, n1, n2 ..., t1, t2 ....")),
    ("numbered coefficients with a gap", *_in_cell(
        _C, 3, "coefficients", "Tc=618.4; c0=436.0; n1=741.8; n3=338.5; t1=1/3; t3=2/3",
        "n3, t3 stands after a gap in the numbers; the form takes Tc, c0, n1, n2 ..., t1, t2 ....")),
    ("a coefficient with thousands separated", *_in_cell(
        _C, 2, "coefficients", "A=22.14808; B=3,909.70; C=-45.63",
        "coefficient B: '3,909.70' is not a printed number.")),
    ("commas between coefficients", *_in_cell(
        _C, 2, "coefficients", "A=22.14808, B=3909.70, C=-45.63", COEFFICIENTS)),
    ("a semicolon at the end", *_in_cell(_C, 2, "coefficients", f"{_LOW};", COEFFICIENTS)),
    ("a coefficient with an underscore", *_in_cell(
        _C, 2, "coefficients", "A=22.14808; B=3_909.70; C=-45.63",
        "coefficient B: '3_909.70' is not a printed number.")),
    ("a coefficient that is not a number", *_in_cell(
        _C, 2, "coefficients", "A=nan; B=3909.70; C=-45.63", "coefficient A: 'nan' is not a printed number.")),
    ("an infinite coefficient", *_in_cell(
        _C, 2, "coefficients", "A=inf; B=3909.70; C=-45.63", "coefficient A: 'inf' is not a printed number.")),
    ("a coefficient beyond a double", *_in_cell(
        _C, 2, "coefficients", "A=22.14808; B=1e400; C=-45.63",
        "coefficient B: '1e400' is beyond what a double can hold.")),
    ("coefficients that overflow everywhere", *_in_cell(
        _C, 2, "coefficients", "A=800; B=3909.7; C=-45.63",
        "with these coefficients and units the form gives no usable value anywhere in the window.")),
    # windows
    ("a bound with a decimal comma", *_in_cell(_C, 2, "window_min", "250,5", NUMBER)),
    ("a bound with an underscore", *_in_cell(_C, 2, "window_min", "1_000.5", NUMBER)),
    ("a bound that is not a number", *_in_cell(_C, 2, "window_max", "nan", NUMBER)),
    ("an infinite bound", *_in_cell(_C, 2, "window_max", "inf", NUMBER)),
    ("a bound in Arabic digits", *_in_cell(_C, 2, "window_max", "\u0663\u0661\u0660", NUMBER)),
    ("a hexadecimal bound", *_in_cell(_C, 2, "window_max", "0x136", NUMBER)),
    ("an empty bound", *_in_cell(_C, 2, "window_min", "", f"it is empty; {NUMBER}", "")),
    ("swapped bounds", (("cell", _C, 2, "window_min", "310"), ("cell", _C, 2, "window_max", "250")),
     (f"correlations.csv, line 2, column window_min: '310 to 250 K' given; {WINDOW}",)),
    ("equal bounds", *_in_cell(_C, 2, "window_min", "310", WINDOW, "'310 to 310 K' given; ")),
    ("a window from 0 K", *_in_cell(_C, 2, "window_min", "0", WINDOW, "'0 to 310 K' given; ")),
    ("a window from 0 K in degrees Celsius", *_in_cell(
        _C, 6, "window_min", "-273.15", WINDOW, "'-273.15 to 95 degC' given; ")),
    ("a window in pascal", *_in_cell(_C, 2, "window_unit", "Pa", f"one of {TEMPERATURES} is allowed.")),
    ("a window without basis", *_in_cell(
        _C, 2, "window_basis", "", "it is empty; one of printed, assumed, memory is allowed.", "")),
    ("a metastable limit without unit", *_in_cell(_C, 2, "metastable_below", "273", BARE)),
    ("a metastable limit at 0 K", *_in_cell(_C, 2, "metastable_below", "0 K", ABOVE_ZERO)),
    # what a correlation is for
    ("a unit of another property", *_in_cell(_C, 2, "value_unit", "J/mol", f"one of {PRESSURES} is allowed.")),
    ("a unit by another spelling", *_in_cell(
        _C, 2, "value_unit", "mm Hg", "a unit such as kPa, kJ/mol or kg/m3 is allowed; pressures are absolute. "
        "Did you mean mmHg?")),
    ("degrees Celsius in a form that needs kelvin", *_in_cell(
        _C, 4, "temperature_unit", "degC", "the form counts from absolute zero: K or degR.")),
    ("a temperature unit by another spelling", *_in_cell(
        _C, 2, "temperature_unit", "C", f"one of {TEMPERATURES} is allowed.")),
    ("a solid with a vapour pressure", *_in_cell(_C, 2, "phase", "solid", "vapor-pressure belongs to a liquid.")),
    ("a liquid with a sublimation pressure", (("cell", _C, 2, "property", "sublimation-pressure"),),
     ("correlations.csv, line 2, column phase: 'liquid' given; sublimation-pressure belongs to a solid.",)),
    ("a phase with a capital", *_in_cell(
        _C, 2, "phase", "Liquid", "liquid, solid or a named solid such as ice Ih is allowed.")),
    ("an unknown property", *_in_cell(
        _C, 2, "property", "vapour-pressure", "one of vapor-pressure, sublimation-pressure, melting-pressure, "
        "enthalpy-of-vaporization, saturated-liquid-density is allowed.")),
    ("a form for another property", (("cell", _C, 7, "form", "antoine-ln"), ("cell", _C, 7, "coefficients", _LOW)),
     ("correlations.csv, line 7, column form: 'antoine-ln' given; "
      "the form is for vapor-pressure and sublimation-pressure.",)),
    ("an unknown temperature scale", *_in_cell(
        _C, 2, "temperature_scale", "ITS90",
        "one of ITS-90, IPTS-68, IPTS-48, ice-point-273.16, not-stated is allowed.")),
    ("degrees Celsius on a scale about the zero of kelvin",
     (("cell", _C, 2, "temperature_scale", "ice-point-273.16"), ("cell", _C, 2, "temperature_unit", "degC")),
     (f"correlations.csv, line 2, column temperature_unit: 'degC' given; {ABOUT_KELVIN}",)),
    ("a critical temperature in degrees Fahrenheit on a scale about the zero of kelvin",
     (("cell", _F, 2, "temperature_scale", "ice-point-273.16"), ("cell", _F, 2, "unit", "degF")),
     (f"fixed_points.csv, line 2, column unit: 'degF' given; {ABOUT_KELVIN}",)),
    ("a dataset in degrees Celsius on a scale about the zero of kelvin",
     (("cell", _D, 2, "temperature_scale", "ice-point-273.16"), ("cell", _D, 2, "temperature_unit", "degC")),
     (f"datasets.csv, line 2, column temperature_unit: 'degC' given; {ABOUT_KELVIN}",)),
    ("an unknown evidence", *_in_cell(
        _C, 2, "evidence", "good", "one of standard, evaluated, measured, compiled, estimated is allowed.")),
    ("an unknown standing", *_in_cell(
        _C, 2, "standing", "ok", "one of draft, accepted, declined, withdrawn is allowed.")),
    ("a fact neither seen nor from memory", *_in_cell(_C, 2, "obtained", "read", "one of seen, memory is allowed.")),
    ("no locator", *_in_cell(_C, 2, "locator", "", "it is empty; text is allowed.", "")),
    # uncertainties
    ("an uncertainty in words", *_in_cell(_C, 2, "uncertainty", "about 5 %", UNCERTAINTY)),
    ("an uncertainty without blank", *_in_cell(_C, 2, "uncertainty", "5%", UNCERTAINTY)),
    ("a last piece that ends", *_in_cell(_C, 2, "uncertainty", "5 % up to 300 K", UNCERTAINTY)),
    ("an uncertainty with an underscore", *_in_cell(_C, 2, "uncertainty", "1_0 %", UNCERTAINTY)),
    ("an uncertainty beyond a double", *_in_cell(_C, 2, "uncertainty", "1e400 %", UNCERTAINTY)),
    ("an uncertainty of zero", *_in_cell(
        _C, 2, "uncertainty", "0 %", "an uncertainty is greater than zero; leave it empty if none is stated.")),
    ("an uncertainty in another dimension", *_in_cell(
        _C, 2, "uncertainty", "5 J/mol", f"'J/mol': a pressure unit is one of {PRESSURES}.")),
    ("pieces that fall in temperature", *_in_cell(
        _C, 2, "uncertainty", "5 % up to 300 K; 3 % up to 200 K; 1 %",
        "the pieces of an uncertainty must rise in temperature.")),
    ("a piece up to a bare number", *_in_cell(
        _C, 2, "uncertainty", "5 % up to 300; 1 %", f"'300' cannot be read: {BARE}")),
    # fixed points, printed values, points
    ("a critical temperature below zero", *_in_cell(_F, 2, "value", "-5", "a critical-temperature is above zero.")),
    ("a critical temperature in bar", *_in_cell(
        _F, 2, "unit", "bar", f"critical-temperature is in one of {TEMPERATURES}.")),
    ("a fixed point that is not a number", *_in_cell(_F, 2, "value", "nan", NUMBER)),
    ("an unknown quantity", *_in_cell(
        _F, 2, "quantity", "Tc", "one of triple-point-temperature, triple-point-pressure, normal-boiling-temperature, "
        "normal-sublimation-temperature, critical-temperature, critical-pressure, lambda-point-temperature, "
        "lambda-point-pressure, acentric-factor, molar-mass is allowed.")),
    ("an unknown qualifier", *_in_cell(
        _F, 2, "qualifier", "approx", "one of defining, rounded, table-bound is allowed.")),
    ("a printed value in a unit of another property", *_in_cell(
        _V, 2, "value_unit", "J/mol", "vapor-pressure is in a pressure unit.")),
    ("a printed value below 0 K", *_in_cell(_V, 2, "temperature", "-5", ABOVE_ZERO)),
    ("a printed value at 0 K", *_in_cell(_V, 2, "temperature", "0", ABOVE_ZERO)),
    ("a printed value below zero", *_in_cell(_V, 2, "value", "-475.7", "a vapor-pressure is above zero.")),
    ("a printed value of zero", *_in_cell(_V, 2, "value", "0", "a vapor-pressure is above zero.")),
    ("a point below 0 K", *_in_cell(_P, 2, "temperature", "-5", ABOVE_ZERO)),
    ("points not above zero",
     (("cell", _D, 2, "property", "saturated-liquid-density"), ("cell", _D, 2, "value_unit", "kg/m3"),
      ("cell", _P, 2, "value", "0"), ("cell", _P, 3, "value", "-5")),
     ("points.csv, line 2, column value: '0' given; a saturated-liquid-density is above zero.",
      "points.csv, line 3, column value: '-5' given; a saturated-liquid-density is above zero.")),
    ("a point with an uncertainty below zero", *_in_cell(
        _P, 2, "value_uncertainty", "-0.3", "an uncertainty is above zero; leave it empty if none is stated.")),
    ("a point with an uncertainty of zero kelvin", *_in_cell(
        _P, 2, "temperature_uncertainty", "0", "an uncertainty is above zero; leave it empty if none is stated.")),
    ("a point with a decimal comma", *_in_cell(_P, 2, "value", "35,18", NUMBER)),
    ("a dataset whose points are all bad", (("cell", _P, 2, "value", "35,18"), ("cell", _P, 3, "value", "x")),
     (f"points.csv, line 2, column value: '35,18' given; {NUMBER}",
      f"points.csv, line 3, column value: 'x' given; {NUMBER}")),
    ("a dataset without points", (("file", _P, b"dataset,temperature,value,temperature_uncertainty,"
                                   b"value_uncertainty,note\n"),), (_NO_POINTS,)),
    ("a dataset without its file of points", (("paths", _J, _K, _N, _S, _C, _F, _V, _D, _R),), (_NO_POINTS,)),
    ("points of a dataset file that cannot be read", (("header", _D, "phase", None),),
     ("datasets.csv, line 1, column phase: the column is missing.",)),
    ("a note of a point that starts with =", *_in_cell(
        _P, 2, "note", "=x", "it starts with =, which a spreadsheet would run as a formula.")),
    # several at once
    ("two bad cells in two files", (("cell", _C, 2, "window_min", "x"), ("cell", _S, 2, "year", "94")),
     ("sources.csv, line 2, column year: '94' given; a year of four digits is allowed.",
      f"correlations.csv, line 2, column window_min: 'x' given; {NUMBER}")),
    ("a bad cell behind a dangling reference",
     (("cell", _C, 2, "standing", "x"), ("cell", _N, 2, "compound", "no-such")),
     (f"names.csv, line 2, column compound: 'no-such' given; there is no compound {NEITHER}",
      "correlations.csv, line 2, column standing: 'x' given; "
      "one of draft, accepted, declined, withdrawn is allowed.")),
    ("two bad cells in one row", (("cell", _C, 2, "window_min", "x"), ("cell", _C, 2, "window_max", "y")),
     (f"correlations.csv, line 2, column window_min: 'x' given; {NUMBER}",
      f"correlations.csv, line 2, column window_max: 'y' given; {NUMBER}")),
    ("two bad cells in two rows", (("cell", _C, 3, "standing", "x"), ("cell", _C, 2, "phase", "X")),
     ("correlations.csv, line 2, column phase: 'X' given; liquid, solid or a named solid such as ice Ih is allowed.",
      "correlations.csv, line 3, column standing: 'x' given; "
      "one of draft, accepted, declined, withdrawn is allowed.")),
    # files
    ("a row too long", (("swap", _N, b"invented fluid B", b"invented,fluid B"),),
     ("names.csv, line 2: it has 3 cells, the header has 2.",)),
    ("a row of one cell", (("swap", _N, b"invented fluid B", b"invented fluid B\nbrindovane"),),
     ("names.csv, line 3: it has 1 cell, the header has 2.",)),
    ("an unclosed quote", (("swap", _N, b"invented fluid B", b'"invented fluid B'),),
     ("names.csv, line 2: it is no CSV: unexpected end of data.",)),
    ("a letter behind a quote", (("swap", _N, b"invented fluid B", b'"invented" fluid B'),),
     ("names.csv, line 2: it is no CSV: ',' expected after '\"'.",)),
    ("a NUL", (("swap", _N, b"fluid B", b"fluid\0B"),), ("names.csv, line 2: it holds a NUL character.",)),
    ("Latin-1", (("swap", _N, b"fluid B", b"fl\xfcid B"),),
     ("names.csv, line 2: byte 0xfc is no UTF-8; save the file as UTF-8.",)),
    ("an unpaired surrogate", (("swap", _N, b"fluid B", b"fl\xed\xa0\x80id B"),),
     ("names.csv, line 2: byte 0xed is no UTF-8; save the file as UTF-8.",)),
    ("UTF-16", (("file", _N, "compound,name\n".encode("utf-16")),),
     ("names.csv, line 1: byte 0xff is no UTF-8; save the file as UTF-8.",)),
    ("no UTF-8 in the file others refer to", (("swap", _C, b"brindovane-kirchhoff", b"\xff"),),
     ("correlations.csv, line 4: byte 0xff is no UTF-8; save the file as UTF-8.",)),
    ("a column twice", (("header", _K, "note", "name"),),
     ("compounds.csv, line 1, column name: the column stands twice.",)),
    ("a misspelt column", (("header", _K, "note", "noted"),),
     ("compounds.csv, line 1: 'noted' given; there is no such column. Did you mean note?",)),
    ("an unknown column", (("file", _N, b"compound,name,zzz\n"),),
     ("names.csv, line 1: 'zzz' given; there is no such column.",)),
    ("semicolons between cells", (("file", _N, b"compound;name\nbrindovane;fluid\n"),),
     ("names.csv, line 1: 'compound;name' given; the cells are parted by ';'; save the file with commas.",)),
    ("tabs between cells", (("file", _N, b"compound\tname\nbrindovane\tfluid\n"),),
     ("names.csv, line 1: 'compound\\tname' given; the cells are parted by '\\t'; save the file with commas.",)),
    ("a header that ends in a comma", (("file", _N, b"compound,name,\nbrindovane,fluid,\n"),),
     ("names.csv, line 1: column 3 has no name.",)),
    ("a column in capitals", (("header", _C, "key", "Key"),),
     ("correlations.csv, line 1, column key: the column is missing.",
      "correlations.csv, line 1: 'Key' given; there is no such column. Did you mean key?")),
    ("a missing column", (("header", _C, "source", None),),
     ("correlations.csv, line 1, column source: the column is missing.",)),
    ("an empty file", (("file", _N, b""),),
     ("names.csv, line 1: it is empty; the first line names the columns.",)),
    ("a file that is only a byte order mark", (("file", _N, b"\xef\xbb\xbf"),),
     ("names.csv, line 1: it is empty; the first line names the columns.",)),
    ("a missing file", (("file", _N, None),), ("names.csv: the file is missing.",)),
    # the descriptor
    ("no descriptor", (("file", _J, None),), (f"{_J}: the file is missing.",)),
    ("a descriptor that is no JSON", (("file", _J, b"{"),), (_JSON,)),
    ("a descriptor that is a list", (("file", _J, b"[]"),), (_JSON,)),
    ("a descriptor without resources", (("file", _J, b"{}"),), (_JSON,)),
    ("a descriptor in UTF-16", (("file", _J, '{"resources": []}'.encode("utf-16")),), (_JSON,)),
    ("a descriptor nested 100 000 deep", (("file", _J, b"[" * 100000),), (_JSON,)),
    ("a descriptor with data inside", (("file", _J, b'{"resources": [{"name": "names", "data": []}]}'),), (_JSON,)),
    ("a path that is a number", (("paths", _J, 1),), (f"{_J}: a resource path must be one text, not '1'.",)),
    ("a path that is a list", (("paths", _J, [_N]),),
     (f"{_J}: a resource path must be one text, not \"['names.csv']\".",)),
    ("a path that is an object", (("paths", _J, {"a": 1}),),
     (f"{_J}: a resource path must be one text, not \"{{'a': 1}}\".",)),
    ("an empty path", (("paths", _J, ""),), (f"{_J}: a resource path is empty.",)),
    ("no paths at all", (("paths", _J),), (f"{_J}: it names no file; the files are {FILES}.",)),
    ("a path above the package", *_described("../x.csv", "points outside the package.")),
    ("a path of the system", *_described("/etc/passwd", "points outside the package.")),
    ("a path on a drive", *_described("C:\\x", "points outside the package.")),
    ("a path in a home", *_described("~/x.csv", "points outside the package.")),
    ("a path on a server", *_described("http://server/names.csv", "points outside the package.")),
    ("an unknown file", *_described("other.csv", f"is no file of a library; the files are {FILES}.")),
    ("a file by another spelling", *_described("Names.csv", f"is no file of a library; the files are {FILES}.")),
    ("a file named twice", (("paths", _J, _N, _N),), (f"{_J}: resource 'names.csv' is named twice.",)),
    ("two bad paths", (("paths", _J, "../x", "/y"),),
     (f"{_J}: resource '../x' points outside the package.", f"{_J}: resource '/y' points outside the package.")),
)  # fmt: skip

# into a library that holds the base package already
AGAINST_LIBRARY = (
    ("the key of another compound's correlation", *_in_cell(
        _C, 4, "compound", "tallowane", "the key is recorded for brindovane; another compound needs another key.")),
    ("the key of another compound's fixed point", *_in_cell(
        _F, 2, "compound", "tallowane", "the key is recorded for brindovane; another compound needs another key.")),
    ("the key of another compound's dataset", *_in_cell(
        _D, 2, "compound", "brindovane", "the key is recorded for tallowane; another compound needs another key.")),
    ("a printed value in a wrong unit, for a recorded correlation",
     (("paths", _J, _V), ("cell", _V, 2, "value_unit", "J/mol")),
     ("printed_values.csv, line 2, column value_unit: 'J/mol' given; vapor-pressure is in a pressure unit.",)),
    ("a preference against a recorded one",
     (("cell", _R, 2, "key", "back"), ("cell", _R, 2, "correlation", "tallowane-antoine-low"),
      ("cell", _R, 2, "over", "tallowane-antoine-high")),
     ("preferences.csv: the preferences, with those recorded already, go round in a circle: "
      "tallowane-antoine-high over tallowane-antoine-low over tallowane-antoine-high.",)),
)  # fmt: skip

# what is done to the package on disk (see test_bad_input.DISKS), the problem
ON_DISK = (
    ("a link out of the package", "names.csv: it is a link that may point outside the package."),
    ("a link within the package", "names.csv: it is a link that may point outside the package."),
    ("a descriptor that is a link", "datapackage.json: it is a link that may point outside the package."),
    ("a folder for a file", "names.csv: the file is missing."),
    ("a zip without the descriptor", "datapackage.json: the file is missing."),
    ("a zip without a file", "names.csv: the file is missing."),
    ("a zip entry above the package", "package.zip: entry '../x.csv' points outside the package."),
    ("a zip entry of the system", "package.zip: entry '/etc/x.csv' points outside the package."),
    ("a zip entry with backslashes", "package.zip: entry 'C:\\\\x.csv' points outside the package."),
    ("a zip bomb", "names.csv: it unpacks to more than 200 times its size."),
    ("a zip bomb beyond the limit", "names.csv: it unpacks to more than 64 MiB."),
    ("an encrypted zip", "datapackage.json: it is encrypted."),
    ("a zip with an entry twice", "package.zip: entry 'names.csv' is there twice."),
    ("a zip with a wrong sum",
     "datapackage.json: it cannot be unpacked (Bad CRC-32 for file 'datapackage.json'); make the zip again."),
    ("a zip with damaged data", "datapackage.json: it cannot be unpacked (Error -3 while decompressing data: "
     "invalid block type); make the zip again."),
    ("a zip with another name inside", "datapackage.json: it cannot be unpacked (File name in directory "
     "'datapackage.json' and header b'xyzapackage.json' differ.); make the zip again."),
    ("a zip with an unknown method",
     "datapackage.json: it cannot be unpacked (That compression method is not supported); make the zip again."),
    ("a zip that points beyond its end",
     "datapackage.json: it cannot be unpacked (Truncated file header); make the zip again."),
    ("a zip of a later version",
     "package.zip: it is no folder and no zip that can be read (zip file version 9.0). "
     "Give the folder that holds datapackage.json."),
    ("an empty zip", "datapackage.json: the file is missing."),
    ("a file that is no zip",
     f"package.zip: {_NO_ZIP}"),
    ("half a zip", f"package.zip: {_NO_ZIP}"),
)  # fmt: skip

# what looks bad and is not
ACCEPTED = (
    ("a byte order mark", (("swap", _N, b"compound", b"\xef\xbb\xbfcompound"),)),
    ("lines ended by CR LF", (("lines", _N, b"\r\n"), ("lines", _C, b"\r\n"), ("lines", _P, b"\r\n"))),
    ("a descriptor with a byte order mark", (("swap", _J, b"{", b"\xef\xbb\xbf{"),)),
    ("a missing optional column", (("header", _C, "metastable_below", None), ("header", _K, "note", None))),
    ("a file with a header only", (("file", _V, b"key,correlation,temperature,temperature_unit,value,value_unit,"
                                    b"locator,obtained\n"),)),
    ("columns in another order", (("file", _N, b"name,compound\ninvented fluid B,brindovane\n"),)),
    ("blanks around the equals signs", (("cell", _C, 2, "coefficients", "A = 22.14808; B = 3909.70; C = -45.63"),)),
    ("an isotope in a formula", (("cell", _K, 2, "formula", "D2O"),)),
    ("blank lines at the end", (("file", _N, b"compound,name\nbrindovane,invented fluid B\n\n\n"),)),
)  # fmt: skip
