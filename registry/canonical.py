"""Canonical JSON and digests.

What is digested holds text, integers, lists and objects with ASCII keys, so
that plain sorted compact JSON equals RFC 8785.
"""

from __future__ import annotations

import hashlib
import json
from json.encoder import encode_basestring
from typing import Any

__all__ = ["digest", "encode", "encode_string", "encode_text"]

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


def encode_string(text: str) -> str:
    """The canonical JSON of a text; anything else is a TypeError."""
    return encode_basestring(text)


def digest(data: bytes) -> str:
    """SHA-256 in hexadecimal."""
    return hashlib.sha256(data).hexdigest()
