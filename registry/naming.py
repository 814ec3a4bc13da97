"""Names in sentences: several of them, and those nearest to one that was not found."""

from __future__ import annotations

from collections.abc import Iterable

__all__ = ["join_names", "nearest_names", "word_kind"]


def nearest_names(text: str, names: Iterable[str], count: int = 3) -> list[str]:
    """Up to `count` names that look like a text, best first, case aside.

    Examples
    --------
    >>> nearest_names("amonia", ["ammonia", "argon", "Water"])
    ['ammonia']
    """
    import difflib

    folded = {name.casefold(): name for name in names}
    given = text.casefold()[:60]
    near = difflib.get_close_matches(given, folded, n=count, cutoff=0.6)
    starts = [name for name in folded if len(given) >= 3 and name.startswith(given)]
    return [folded[name] for name in dict.fromkeys([*near, *sorted(starts)])][:count]


def join_names(names: Iterable[str], word: str = "or") -> str:
    """Names as a sentence lists them.

    Examples
    --------
    >>> join_names(["a", "b", "c"])
    'a, b or c'
    """
    *rest, last = list(names)
    return f"{', '.join(rest)} {word} {last}" if rest else last


def word_kind(kind: str) -> str:
    """A kind of record as a sentence says it.

    Examples
    --------
    >>> word_kind("fixed-point")
    'fixed point'
    """
    return kind.replace("-", " ")
