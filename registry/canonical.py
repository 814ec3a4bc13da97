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
        plain texts at a third of the cost.

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
        frame = _measure_frame(names)
    texts = [value for value in content.values() if type(value) is str]
    length = frame + len("".join(texts))
    if len(texts) < len(names):
        for value in content.values():
            if type(value) is dict:
                inner = _plain_length(value)
                if inner < 0:
                    return -1
                length += inner - 2  # without the quotes that a text would have
            elif type(value) is not str:
                return -1
    return length if frame > 0 else -1


def _measure_frame(names: tuple[str, ...]) -> int:
    """Characters around the values of an object whose names are sorted; -1 if they are not."""
    frame = 6 * len(names) + 1 + len("".join(names)) if names == tuple(sorted(names)) else -1
    if len(_FRAMES) < 10_000:
        _FRAMES[names] = frame
    return frame


_FRAMES: dict[tuple[str, ...], int] = {(): 2}
"""Of the objects met so far: most records of a kind have the same names."""


encode_string: Callable[[str], str] = encode_basestring
"""The canonical JSON of a text; anything else is a TypeError."""


def digest(data: bytes) -> str:
    """SHA-256 in hexadecimal."""
    return hashlib.sha256(data).hexdigest()
