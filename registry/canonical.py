"""Canonical JSON and digests.

What is digested holds text, integers, lists and objects with ASCII keys, so
that plain sorted compact JSON equals RFC 8785.
"""

from __future__ import annotations

import hashlib
import json
from collections.abc import Callable
from json.encoder import encode_basestring
from typing import Any

__all__ = ["digest", "encode", "encode_string", "encode_text", "is_canonical"]

# built once: json.dumps would build one at every call
_ENCODER = json.JSONEncoder(sort_keys=True, separators=(",", ":"), ensure_ascii=False, allow_nan=False)


def encode(content: Any) -> bytes:
    """The canonical JSON of content without floats.

    Examples
    --------
    >>> encode({"B": "1730.63", "A": "8.07131"})
    b'{"A":"8.07131","B":"1730.63"}'
    """
    return encode_text(content).encode()


def encode_text(content: Any) -> str:
    """The canonical JSON as text, before it is UTF-8."""
    return _ENCODER.encode(content)


def is_canonical(text: str, content: Any) -> bool:
    """Whether a text is the canonical JSON of what it was parsed into.

    Parameters
    ----------
    text : str
        JSON.
    content : object
        What it was parsed into.

    Returns
    -------
    bool
        As if the content were encoded again and compared; for objects of
        plain texts at half the cost.

    Examples
    --------
    >>> is_canonical('{"A":"8.07131"}', {"A": "8.07131"}), is_canonical('{"A": "8.07131"}', {"A": "8.07131"})
    (True, False)
    """
    # where nothing is escaped, all that is open is the order of names, blanks and repeated names:
    # the length shows the last two
    if "\\" not in text and type(content) is dict and _plain_length(content) == len(text):
        return True
    return encode_text(content) == text


def _plain_length(content: dict[str, Any]) -> int:
    """Characters of the canonical JSON of an object of texts without escapes; -1 if it is not that, or not sorted."""
    names = tuple(content)
    frame = _FRAMES.get(names)
    if frame is None:
        frame = _measure_frame(names, content)
    length, inner = frame
    values = list(content.values())
    for place in inner:
        value = values.pop(place)
        size = _plain_length(value) if type(value) is dict else -1
        if size < 0:
            return -1
        length += size - 2  # without the quotes that a text would have
    try:
        return length + len("".join(values))
    except TypeError:
        return -1


def _measure_frame(names: tuple[str, ...], content: dict[str, Any]) -> _Frame:
    inner = tuple(place for place, value in enumerate(content.values()) if type(value) is dict)[::-1]
    is_sorted = names == tuple(sorted(names))
    frame = 6 * len(names) + (1 if names else 2) + len("".join(names)) if is_sorted else _NEVER, inner
    if len(_FRAMES) < MOST_FRAMES:
        _FRAMES[names] = frame
    return frame


_Frame = tuple[int, tuple[int, ...]]
_FRAMES: dict[tuple[str, ...], _Frame] = {}
"""By the names of an object: the characters around its values, and which of these are objects, last first.

Most records of a kind have the same names.
"""
MOST_FRAMES = 10_000
_NEVER = -(2**62)


encode_string: Callable[[str], str] = encode_basestring
"""The canonical JSON of a text; anything else is a TypeError."""


def digest(data: bytes) -> str:
    """SHA-256 in hexadecimal."""
    return hashlib.sha256(data).hexdigest()
