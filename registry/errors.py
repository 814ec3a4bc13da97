"""What can go wrong, as one small tree.

::

    RangebookError
    |-- BadInput (ValueError)          what was given cannot be used
    |   |-- BadQuantity                a number with a unit that cannot be read
    |   |   `-- GaugePressure          a gauge unit without the local atmosphere
    |   |-- InvalidRecord              a record that breaks its invariants
    |   |-- InvalidPackage             a package with bad cells or bad files
    |   |-- InvalidSheet               a record sheet with bad fields
    |   `-- UnknownKey (LookupError)   no record under that key or name
    |-- Refused (LookupError)          no correlation may answer
    |-- LibraryBusy (TimeoutError)     another writer holds the library
    |-- Conflict                       records of a package that both sides have revised
    |-- RevisedMeanwhile               somebody else has revised a record since it was read
    `-- LibraryUnreadable (OSError)    there is no library that can be read
        |-- NoLibrary                  nothing is there
        |-- NotALibrary                a file, but no library, or damaged
        |-- NewerLibrary               made by a newer program
        `-- OlderLibrary               must be upgraded first

Every class carries its facts as fields; the text says what was given, what is
allowed and what to do next.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from registry.moments import show_time
from registry.naming import word_kind
from registry.refusals import Refusal


def quote(text: object, limit: int = 60) -> str:
    """Text as given, quoted and shortened so that no message floods a screen."""
    shown = repr(str(text))
    return shown if len(shown) <= limit else f"{shown[:limit]}... ({len(str(text))} characters)"


class RangebookError(Exception):
    """Anything the program says no to."""


class BadInput(RangebookError, ValueError):
    """What was given cannot be used."""


class BadQuantity(BadInput):
    """A number with a unit that cannot be read.

    Attributes
    ----------
    given : str
        The text as given.
    allowed : str
        What would have been understood.
    """

    def __init__(self, given: str, allowed: str) -> None:
        self.given = given
        self.allowed = allowed
        super().__init__(f"{quote(given)} cannot be read: {allowed}")


class GaugePressure(BadQuantity):
    """A gauge unit, which means nothing without the local atmosphere."""

    def __init__(self, given: str) -> None:
        super().__init__(
            given,
            "it is a gauge unit, and only absolute pressures are kept here. "
            "Use the absolute unit, or state the local atmosphere (--atmosphere 101.325kPa).",
        )


@dataclass(frozen=True)
class Problem:
    """One thing wrong with one field of a record; no field where it is the whole."""

    field: str
    given: str
    allowed: str

    def __str__(self) -> str:
        if not self.field:
            return self.allowed
        # of an empty text the reason says that it is empty
        given = f"{quote(self.given)} given; " if self.given else ""
        return f"{self.field}: {given}{self.allowed}"


class InvalidRecord(BadInput):
    """A record that breaks its invariants; all its problems at once."""

    def __init__(self, kind: str, key: str, problems: Sequence[Problem]) -> None:
        self.kind = kind
        self.key = key
        self.problems = tuple(problems)
        listed = " ".join(f"{problem}" for problem in self.problems)
        super().__init__(f"The {word_kind(kind)} {quote(key)} cannot be recorded. {listed}")


@dataclass(frozen=True)
class CellProblem:
    """One bad place in a package: file, line (1 is the header), column."""

    file: str
    line: int
    column: str
    given: str
    allowed: str

    def __str__(self) -> str:
        place = self.file + (f", line {self.line}" if self.line else "")
        if self.column:
            place += f", column {self.column}"
        given = f"{quote(self.given)} given; " if self.given else ""
        return f"{place}: {given}{self.allowed}"


SHOWN_PROBLEMS = 100
"""Bad places that a message lists; the rest are counted."""


class InvalidPackage(BadInput):
    """A package that cannot be loaded; every bad place at once."""

    def __init__(self, place: str, problems: Sequence[CellProblem]) -> None:
        self.place = place
        self.problems = tuple(problems)
        super().__init__(_list_problems(f"{place} cannot be loaded", self.problems))


def _list_problems(head: str, problems: Sequence[CellProblem | Problem]) -> str:
    count = len(problems)
    first = f"{head}: {count} problem{'s' if count != 1 else ''}; nothing was changed."
    shown = [f"  {problem}" for problem in problems[:SHOWN_PROBLEMS]]
    more = [f"  ... and {count - SHOWN_PROBLEMS} more"] if count > SHOWN_PROBLEMS else []
    return "\n".join([first, *shown, *more])


class InvalidSheet(BadInput):
    """A record sheet that cannot be used; every bad field at once."""

    def __init__(self, place: str, problems: Sequence[Problem]) -> None:
        self.place = place
        self.problems = tuple(problems)
        super().__init__(_list_problems(f"{place} cannot be used", self.problems))


class UnknownKey(BadInput, LookupError):
    """No record under that key or name, or several."""

    def __init__(self, kind: str, given: str, nearest: Sequence[str] = (), several: Sequence[str] = ()) -> None:
        self.kind = kind
        self.given = given
        self.nearest = tuple(nearest)
        self.several = tuple(several)
        if self.several:
            text = f"{quote(given)} may mean {' or '.join(self.several)}. Use one of these keys."
        elif self.nearest:
            text = f"There is no {word_kind(kind)} {quote(given)}. Nearest: {', '.join(self.nearest)}."
        else:
            listed = "editions" if kind == "edition" else "list"
            text = f"There is no {word_kind(kind)} {quote(given)}. `rangebook {listed}` shows what there is."
        super().__init__(text)


class Refused(RangebookError, LookupError):
    """No correlation may answer; carries the refusal with the reason."""

    def __init__(self, refusal: Refusal) -> None:
        self.refusal = refusal
        super().__init__(refusal.explanation)


class LibraryBusy(RangebookError, TimeoutError):
    """Another writer holds the library for longer than this one waits."""

    def __init__(self, place: str) -> None:
        self.place = place
        super().__init__(f"{place} is being written by another process. Nothing was changed; try again.")


class RevisedMeanwhile(RangebookError):
    """Somebody else has revised a record since it was read; nothing was recorded.

    Attributes
    ----------
    kind, key : str
        The record.
    expected, found : int
        The revision it was read in, and the newest one.
    mine, theirs : mapping
        What was to be recorded, and what the newest revision says.
    """

    def __init__(
        self, kind: str, key: str, expected: int, found: int, mine: Mapping[str, object], theirs: Mapping[str, object]
    ) -> None:
        self.kind = kind
        self.key = key
        self.expected = expected
        self.found = found
        self.mine = dict(mine)
        self.theirs = dict(theirs)
        head = (
            f"The {word_kind(kind)} {key} was read in revision {expected}, but revision {found} is the newest now. "
            "Nothing was recorded. Take over what is right in it, and say that revision (in a sheet: revision = "
            f"{found}; else --expect {found})."
        )
        super().__init__("\n".join([head, *put_side_by_side(self.mine, self.theirs, f"revision {found}")]))


@dataclass(frozen=True)
class Clash:
    """A record that two libraries have revised, each its own way.

    Attributes
    ----------
    kind, key : str
        The record.
    mine, theirs : mapping
        What the newest revision here says, and what the package says.
    revision : int
        The newest revision here.
    author, recorded_at : str
        Who recorded it, and when (UTC).
    """

    kind: str
    key: str
    mine: Mapping[str, object]
    theirs: Mapping[str, object]
    revision: int
    author: str
    recorded_at: str


SHOWN_CLASHES = 20
"""Conflicts that a message shows; the rest are counted."""


class Conflict(RangebookError):
    """A package with records that both sides have revised; nothing was loaded.

    Attributes
    ----------
    place : str
        The package.
    conflicts : tuple of Clash
        Every such record, by kind and key.
    """

    def __init__(self, place: str, conflicts: Sequence[Clash]) -> None:
        self.place = place
        self.conflicts = tuple(conflicts)
        count = len(self.conflicts)
        what = "1 record was" if count == 1 else f"{count} records were"
        lines = [
            f"{place} cannot be loaded as it is: {what} revised on both sides; nothing was loaded. "
            "Say which counts, with a key or `all`: --ours KEY keeps what is here, "
            "--theirs KEY takes what the package says, as a draft."
        ]
        for clash in self.conflicts[:SHOWN_CLASHES]:
            when = show_time(clash.recorded_at)
            lines.append(
                f"The {word_kind(clash.kind)} {clash.key}, here in revision {clash.revision} by {clash.author}, {when}:"
            )
            lines += put_side_by_side(clash.mine, clash.theirs, "the package")
        if count > SHOWN_CLASHES:
            lines.append(f"... and {count - SHOWN_CLASHES} more")
        super().__init__("\n".join(lines))


def put_side_by_side(mine: Mapping[str, object], theirs: Mapping[str, object], whose: str) -> list[str]:
    """Two contents field by field, where they differ, as indented lines."""
    lines: list[str] = []
    for name in dict.fromkeys([*mine, *theirs]):
        if mine.get(name) != theirs.get(name):
            lines += [
                f"  {name}",
                f"    yours: {_shorten(mine.get(name))}",
                f"    {whose}: {_shorten(theirs.get(name))}",
            ]
    return lines


def _shorten(value: object, limit: int = 200) -> str:
    if isinstance(value, Mapping):
        value = "; ".join(f"{name}={text}" for name, text in value.items())
    text = "nothing" if value in (None, "") else str(value)
    return text if len(text) <= limit else f"{text[:limit]}... ({len(text)} characters)"


class LibraryUnreadable(RangebookError, OSError):
    """There is no library here that this program can read."""

    def __init__(self, place: str, text: str) -> None:
        self.place = place
        super().__init__(text)


class NoLibrary(LibraryUnreadable):
    """Nothing is there."""

    def __init__(self, place: str) -> None:
        super().__init__(place, f"There is no library at {place}. Make one with `rangebook start --library {place}`.")


class NotALibrary(LibraryUnreadable):
    """A file that is no library, or a damaged one."""

    def __init__(self, place: str, why: str) -> None:
        self.why = why
        super().__init__(place, f"{place} cannot be read as a library: {why}. Nothing was changed.")


class NewerLibrary(LibraryUnreadable):
    """Made by a newer program."""

    def __init__(self, place: str, found: int, known: int) -> None:
        self.found = found
        self.known = known
        super().__init__(
            place,
            f"{place} has schema {found}, made by a newer rangebook; this one reads up to {known}. "
            "Install a newer rangebook; nothing was changed.",
        )


class OlderLibrary(LibraryUnreadable):
    """Made by an older program; it is upgraded only when asked."""

    def __init__(self, place: str, found: int, known: int) -> None:
        self.found = found
        self.known = known
        super().__init__(
            place,
            f"{place} has schema {found}; this rangebook needs {known}. "
            "`rangebook upgrade` brings it up to date, after a backup.",
        )
