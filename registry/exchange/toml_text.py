"""TOML as a person edits it: texts in quotes, numbers with the digits that were typed.

A TOML reader turns 230.300 into a number and forgets its digits, and stops at
the first word without quotes. Here every value that stands alone after an
equals sign is kept as typed, so that what is wrong can be said of all fields at
once.
"""

from __future__ import annotations

import json
import re
import tomllib
import unicodedata
from typing import Any

from registry.numerals import is_number

__all__ = ["parse_toml", "quote_toml", "read_text"]

_BARE = "\0"
"""Marks a text that stood without quotes; no cell may hold it."""

_LINE = re.compile(r"^([ \t]*[\w.-]+[ \t]*=[ \t]*)([^\s\"'\[{#][^#\n]*?)?([ \t]*(?:#.*)?)$", re.MULTILINE | re.ASCII)
"""name = value without quotes, or with nothing; lists and tables are left to the reader."""

NUMBER_OR_TEXT = "a plain number on a line of its own, or text in quotes, is allowed."


def parse_toml(text: str) -> dict[str, Any]:
    """A TOML text as nested tables, to be asked with `read_text`.

    Parameters
    ----------
    text : str
        With or without a byte order mark, lines ended by LF or CRLF.

    Returns
    -------
    dict
        Tables and lists as the standard has them.

    Raises
    ------
    ValueError
        With the line and column at which the text is no TOML.
    """
    plain = unicodedata.normalize("NFC", text.removeprefix("\ufeff").replace("\r\n", "\n"))
    marked = _LINE.sub(lambda m: f"{m[1]}{quote_toml(_BARE + (m[2] or ''))}{m[3]}", plain)
    try:
        return tomllib.loads(marked, parse_float=lambda typed: _BARE + typed)
    except tomllib.TOMLDecodeError as error:
        raise ValueError(f"it is no TOML: {error}.") from None
    except (ValueError, RecursionError):
        raise ValueError("it is no TOML that a sheet can hold: a number too long, or lists too deep.") from None


def read_text(value: Any) -> tuple[str, str]:
    """The text of a value, and what is wrong with it, if anything.

    Returns
    -------
    tuple of str
        The text as given, and a complaint; an empty one if it may be used.

    Examples
    --------
    >>> table = parse_toml('A = 230.300\\nB = "8.07131"\\nC = liquid\\nD = 0x10\\nE = true')
    >>> [read_text(value)[0] for value in table.values()]
    ['230.300', '8.07131', 'liquid', '0x10', 'true']
    >>> [bool(read_text(value)[1]) for value in table.values()]
    [False, False, True, True, True]
    """
    if not isinstance(value, str):
        return _show(value), NUMBER_OR_TEXT
    if value.startswith(_BARE):
        typed = value.removeprefix(_BARE)
        if not typed or is_number(typed):
            return typed, ""
        return typed, NUMBER_OR_TEXT
    if "\n" in value:
        return value.partition("\n")[0], "a text stands on one line."
    return value, ""


def quote_toml(text: str) -> str:
    """A text in quotes.

    Examples
    --------
    >>> print(quote_toml('a "b" \\\\ c'))
    "a \\"b\\" \\\\ c"
    """
    # JSON escapes as TOML does, but for one control character
    return json.dumps(text, ensure_ascii=False).replace("\x7f", "\\u007f")


def _show(value: Any) -> str:
    """A value that is no text, for a message."""
    if isinstance(value, dict):
        return "a table"
    if isinstance(value, list):
        return "a list"
    return str(value).lower() if isinstance(value, bool) else str(value)
