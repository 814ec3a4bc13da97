"""What one field of a record may hold.

Every field is text. A cell says which texts are allowed, in words a steward
can act on; the same table describes the columns of a package.
"""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Callable
from dataclasses import dataclass

from registry.naming import join_names, nearest_names
from registry.numerals import is_number

__all__ = ["Cell", "choice", "complain", "word"]

_BLANK_LETTERS = "\u115f\u1160\u2800\u3164\uffa0"
"""Letters and signs that are drawn as nothing."""

FEW = 12
"""Up to here a message lists the words that are allowed."""

_CONTROL = re.compile(r"[\x00-\x1f\x7f-\x9f\u2028\u2029\ud800-\udfff\ufeff]")


@dataclass(frozen=True)
class Cell:
    """A kind of field.

    Attributes
    ----------
    allowed : str
        What is allowed, in words.
    accepts : callable
        True for a text that is allowed.
    limit : int
        Longest text, in characters.
    values : tuple of str
        All allowed texts, where they are few.
    prose : bool
        True for free text, which must not start like a spreadsheet formula.
    suggest : bool
        False if a word that only looks like an allowed one must not be
        suggested, but for its case.
    """

    allowed: str
    accepts: Callable[[str], bool] = lambda text: True
    limit: int = 200
    values: tuple[str, ...] = ()
    prose: bool = False
    suggest: bool = True

    def fit(self, text: str) -> str:
        """A text made by the program, cut to the longest that may stand here."""
        return text[: self.limit].rstrip()


def complain(cell: Cell, text: str, required: bool) -> str:
    """Why a text may not stand in a cell; an empty text if it may.

    Examples
    --------
    >>> complain(NUMBER, "12,5", required=True)
    'a number with a decimal point, such as 8.07131, is allowed.'
    >>> complain(NUMBER, "12.5", required=True)
    ''
    """
    if not text:
        return f"it is empty; {cell.allowed}" if required else ""
    if len(text) > cell.limit:
        return f"it is longer than {cell.limit} characters."
    if _CONTROL.search(text):
        return "it holds a control character or an unpaired surrogate; plain text is allowed."
    if text != text.strip():
        return "it starts or ends with a blank."
    if cell.prose and text[0] in "=+-@":
        return f"it starts with {text[0]}, which a spreadsheet would run as a formula."
    if unicodedata.normalize("NFC", text) != text:
        return "it is not in Unicode normal form C."
    unseen = next((c for c in text if unicodedata.category(c) == "Cf" or c in _BLANK_LETTERS), "")
    if unseen:
        return f"it holds a character that is not seen (U+{ord(unseen):04X}); plain text is allowed."
    if cell.accepts(text):
        return ""
    near = _suggest(cell, text) if len(cell.values) > FEW else []
    return cell.allowed + (f" Did you mean {join_names(near)}?" if near else "")


def _suggest(cell: Cell, text: str) -> list[str]:
    if cell.suggest:
        return nearest_names(text, cell.values)
    return [value for value in cell.values if value.casefold() == text.casefold().replace(" ", "")]


def choice(*values: str) -> Cell:
    """A cell that holds one of a few words."""
    return Cell(f"one of {', '.join(values)} is allowed.", values.__contains__, values=values)


def word(allowed: str, *values: str, suggest: bool = True) -> Cell:
    """A cell that holds one of many words, which a message does not list."""
    return Cell(allowed, values.__contains__, values=values, suggest=suggest)


def cas_digit_holds(text: str) -> bool:
    """True if a CAS number has its form and its check digit.

    Examples
    --------
    >>> cas_digit_holds("7732-18-5"), cas_digit_holds("7732-18-4")
    (True, False)
    """
    if not re.fullmatch(r"[1-9]\d{1,6}-\d\d-\d", text, re.ASCII):
        return False
    digits = [int(d) for d in reversed(text.replace("-", ""))]
    return sum(i * d for i, d in enumerate(digits)) % 10 == digits[0]


def isbn_digit_holds(text: str) -> bool:
    """True if an ISBN of 10 or 13 digits has its check digit.

    Examples
    --------
    >>> isbn_digit_holds("0-306-40615-2"), isbn_digit_holds("978-0-306-40615-7")
    (True, True)
    """
    plain = text.replace("-", "")
    if re.fullmatch(r"\d{9}[\dX]", plain, re.ASCII):
        return sum((10 - i) * (10 if d == "X" else int(d)) for i, d in enumerate(plain)) % 11 == 0
    if re.fullmatch(r"\d{13}", plain, re.ASCII):
        return sum((1, 3)[i % 2] * int(d) for i, d in enumerate(plain)) % 10 == 0
    return False


def _pattern(allowed: str, expression: str, limit: int = 200) -> Cell:
    compiled = re.compile(expression, re.ASCII)
    return Cell(allowed, lambda text: compiled.fullmatch(text) is not None, limit)


KEY = _pattern(
    "a key of lower-case letters, digits, '-' and '.' is allowed, such as water-sr1-86.",
    r"[a-z0-9][a-z0-9.-]*",
    limit=80,
)
TEXT = Cell("text is allowed.", prose=True)
LONG = Cell("text is allowed.", limit=4000, prose=True)
SIGNED = Cell("text is allowed.", limit=4000)
NUMBER = Cell("a number with a decimal point, such as 8.07131, is allowed.", is_number, limit=60)
YEAR = _pattern("a year of four digits is allowed.", r"[12]\d{3}")
DOI = _pattern("a DOI such as 10.1063/1.555926 is allowed.", r"10\.\d{4,9}/\S+")
URL = _pattern("an http or https address is allowed.", r"https?://[!-~]+")
ISBN = Cell("an ISBN with a right check digit is allowed.", isbn_digit_holds)
CAS = Cell("a CAS number with a right check digit is allowed, such as 7732-18-5.", cas_digit_holds)
FORMULA = _pattern(
    "a formula of element symbols and counts is allowed, such as C2H5OH.",
    r"(?:\[\d{1,3}[A-Z][a-z]?\]\d{0,3}|[A-Z][a-z]?\d{0,3}|\((?:[A-Z][a-z]?\d{0,3})+\)\d{0,3})+",
)
EDITION = _pattern(
    "a name of letters, digits, '-', '_' and '.' is allowed, such as 2026-Q4; no number, no date.",
    r"(?!\d+\Z)(?!\d{4}-\d\d-\d\d)[A-Za-z0-9][A-Za-z0-9._-]*",
    limit=80,
)
ROOT = _pattern(
    "a root such as 12:5dc9... is allowed: the number of changes and 64 hexadecimal digits.", r"\d+:[0-9a-f]{64}"
)
PHASE = _pattern("liquid, solid or a named solid such as ice Ih is allowed.", r"[a-z][A-Za-z0-9 -]{0,39}")
