"""Reading a library at a position: what counts of each key up to it, and what waits.

For each key the newest revision and the newest decision are found by one
search each in an index over key and change, at any position: what is read
does not grow with the history.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from typing import Any, NamedTuple

from sqlalchemy import Connection, TextClause, bindparam, select, text

from registry.store.history import fold_term
from registry.store.rows import COLUMNS, DamagedRow, Row, fetch_rows, restore_row, split_keys
from registry.store.tables import record, standing, term

__all__ = [
    "Decision",
    "State",
    "find_term",
    "read_added",
    "read_current",
    "read_decisions",
    "read_kind",
    "read_linked",
    "read_revisions",
    "read_states",
    "read_terms",
    "read_waiting",
]


class Decision(NamedTuple):
    """What was made of one revision: by which record, and in which change."""

    revision: int
    standing: str
    change: int
    cause: Row


class State(NamedTuple):
    """Where a key stands at a position.

    Attributes
    ----------
    newest : Row
        Its newest revision.
    decided : Row or None
        The revision that the newest acceptance or withdrawal is about.
    decision : Decision or None
        That acceptance or withdrawal.
    latest : Decision or None
        The newest word on the newest revision, a declining one too.
    """

    newest: Row
    decided: Row | None
    decision: Decision | None
    latest: Decision | None


_POSITION: Any = bindparam("position")
_KIND: Any = bindparam("kind")
_KEY: Any = bindparam("key")
_KEYS: Any = bindparam("keys", expanding=True)

# as SQL text: SQLAlchemy takes a millisecond to compile each of these from parts, a tenth of a whole first lookup
_NEWEST = """(
    SELECT other.{column} FROM record AS other
    WHERE other.kind = aim.kind AND other.key = aim.key AND other.change <= :position
    ORDER BY other.change DESC, other.revision DESC LIMIT 1)"""
_WORD = """(
    SELECT standing.id FROM standing
    WHERE standing.kind = aim.kind AND standing.key = aim.key AND standing.change <= :position AND {which}
    ORDER BY standing.change DESC, standing.id DESC LIMIT 1)"""
_NEWEST_ID = _NEWEST.format(column="id")
_DECIDED = _WORD.format(which="standing.standing IN ('accepted', 'withdrawn')")
# no word on a revision is older than it: the search ends there, however many words there are on those before
_LATEST = _WORD.format(which=f"standing.record = {_NEWEST_ID} AND standing.change >= {_NEWEST.format(column='change')}")
_ALL_OF_KIND = "SELECT kind, key FROM record WHERE kind = :kind AND revision = 1 AND change <= :position"
_SOME_OF_KIND = f"{_ALL_OF_KIND} AND key IN :keys"
_LINKED = "SELECT DISTINCT kind, key FROM link WHERE to_kind = :to_kind AND to_key IN :keys AND change <= :position"
_LINKED_OF_KIND = f"{_LINKED} AND kind = :kind"
_NAMED = "SELECT kind, key FROM term WHERE text = :text AND change <= :position"


def _of_aims(aims: str, *columns: str) -> TextClause:
    """Numbers of rows about each kind and key that a statement gives, by kind and key."""
    statement = text(f"SELECT {', '.join(columns)} FROM ({aims}) AS aim ORDER BY aim.kind, aim.key")
    return statement.bindparams(_KEYS) if ":keys" in aims else statement


# statements are built once: building them costs three times their execution
_NEWEST_BY_KIND, _NEWEST_BY_KEYS = _of_aims(_ALL_OF_KIND, _NEWEST_ID), _of_aims(_SOME_OF_KIND, _NEWEST_ID)
_BY_TERM = _of_aims(_NAMED, _NEWEST_ID)
_STATES_BY_KIND, _STATES_BY_KEYS, _STATES_BY_LINK, _STATES_BY_LINK_OF_KIND = (
    _of_aims(aims, _NEWEST_ID, _DECIDED, _LATEST) for aims in (_ALL_OF_KIND, _SOME_OF_KIND, _LINKED, _LINKED_OF_KIND)
)
_TERMS = select(term.c.text, term.c.kind, term.c.key).where(term.c.change <= _POSITION)
_REVISIONS = (
    select(*COLUMNS)
    .where(record.c.kind == _KIND, record.c.key == _KEY, record.c.change <= _POSITION)
    .order_by(record.c.revision)
)
_WORDS = (
    select(standing.c.id)
    .where(standing.c.kind == _KIND, standing.c.key == _KEY, standing.c.change <= _POSITION)
    .order_by(standing.c.id)
)
_ADDED = select(*COLUMNS).where(record.c.change == bindparam("number"), record.c.kind == _KIND).order_by(record.c.place)
_VERDICTS = ("accepted", "declined", "withdrawn")
_other = record.alias("other")
_WAITING = (
    select(record.c.kind, record.c.key)
    .where(
        record.c.kind.in_(bindparam("kinds", expanding=True)),
        record.c.change <= _POSITION,
        ~select(_other.c.id)
        .where(
            _other.c.kind == record.c.kind,
            _other.c.key == record.c.key,
            _other.c.revision == record.c.revision + 1,
            _other.c.change <= _POSITION,
        )
        .exists(),
        ~select(standing.c.id)
        .where(
            standing.c.kind == record.c.kind,
            standing.c.key == record.c.key,
            standing.c.revision == record.c.revision,
            standing.c.standing.in_(_VERDICTS),
            standing.c.change <= _POSITION,
        )
        .exists(),
    )
    .order_by(record.c.id)
)
_DECISION_BY_ID = select(standing).where(standing.c.id.in_(bindparam("ids", expanding=True)))


def _fetch_states(connection: Connection, found: Sequence[Any]) -> list[State]:
    """States from the numbers of their newest record, decision and latest word."""
    words: dict[int, Any] = {}
    for chunk in split_keys(number for _, *pair in found for number in pair if number):
        words.update({word.id: word for word in connection.execute(_DECISION_BY_ID, {"ids": chunk})})
    if not all(newest for newest, _, _ in found):
        raise DamagedRow("what is derived from the records points at a key that is not there")
    wanted = {newest for newest, _, _ in found} | _records_of(words.values())
    rows = fetch_rows(connection, wanted)

    def decide(number: int | None) -> Decision | None:
        return _decide(words[number], rows) if number else None

    return [
        State(rows[newest], rows[words[decision].record] if decision else None, decide(decision), decide(latest))
        for newest, decision, latest in found
    ]


def _records_of(words: Iterable[Any]) -> set[int]:
    """The revisions that words are about, and the records they come from."""
    return {number for word in words for number in (word.record, word.cause)}


def _decide(word: Any, rows: dict[int, Row]) -> Decision:
    """A word on a revision, which the record behind it must have said."""
    judged, cause = rows.get(word.record), rows.get(word.cause)
    about = word.kind, word.key, word.revision
    if judged is None or cause is None or judged[:3] != about or not _says(cause, about, word.standing):
        raise DamagedRow(f"what was decided on the {word.kind} {word.key!r} is not what was recorded")
    return Decision(word.revision, word.standing, word.change, cause)


def _says(cause: Row, about: tuple[str, str, int], verdict: str) -> bool:
    content = cause.content
    said = "withdrawn" if cause.kind == "withdrawal" else content.get("standing")
    return (content.get("of_kind"), content.get("of_key"), content.get("of_revision"), said) == (
        *about[:2], str(about[2]), verdict,
    )  # fmt: skip


def read_added(connection: Connection, number: int, kind: str) -> list[Row]:
    """The records of one kind that a change has added, in order."""
    found = connection.execute(_ADDED, {"number": number, "kind": kind})
    return [restore_row(*columns) for _, *columns in found]


def _newest(connection: Connection, statement: TextClause, **values: Any) -> list[Row]:
    ids = list(connection.execute(statement, values).scalars())
    rows = fetch_rows(connection, ids)
    return [rows[number] for number in ids]


def read_kind(connection: Connection, kind: str, position: int) -> list[Row]:
    """The newest revision of every record of a kind, by key."""
    return _newest(connection, _NEWEST_BY_KIND, kind=kind, position=position)


def read_current(connection: Connection, kind: str, keys: Iterable[str], position: int) -> list[Row]:
    """The newest revisions under some keys of a kind; keys that are not there are passed over."""
    rows: list[Row] = []
    for chunk in split_keys(keys):
        rows += _newest(connection, _NEWEST_BY_KEYS, kind=kind, keys=chunk, position=position)
    return rows


def read_revisions(connection: Connection, kind: str, key: str, position: int) -> list[Row]:
    """Every revision of one record, in order."""
    found = connection.execute(_REVISIONS, {"kind": kind, "key": key, "position": position})
    return [restore_row(*columns) for _, *columns in found]


def read_decisions(connection: Connection, kind: str, key: str, position: int) -> list[Decision]:
    """Every word on the revisions of one record, in order."""
    ids = list(connection.execute(_WORDS, {"kind": kind, "key": key, "position": position}).scalars())
    decisions: list[Decision] = []
    for chunk in split_keys(ids):
        words = sorted(connection.execute(_DECISION_BY_ID, {"ids": chunk}), key=lambda word: word.id)
        rows = fetch_rows(connection, _records_of(words))
        decisions += [_decide(word, rows) for word in words]
    return decisions


def read_states(connection: Connection, position: int, kind: str, keys: Iterable[str] | None = None) -> list[State]:
    """Where the keys of a kind stand, all of them or some, by key."""
    values = {"kind": kind, "position": position}
    if keys is None:
        return _fetch_states(connection, connection.execute(_STATES_BY_KIND, values).all())
    found: list[Any] = []
    for chunk in split_keys(keys):
        found += connection.execute(_STATES_BY_KEYS, {**values, "keys": chunk}).all()
    return _fetch_states(connection, found)


def read_waiting(connection: Connection, kinds: Iterable[str], position: int) -> list[tuple[Row, str]]:
    """Newest revisions without a verdict, oldest first, each with the note on its arrival."""
    found = [tuple(name) for name in connection.execute(_WAITING, {"kinds": list(kinds), "position": position})]
    keys: dict[str, list[str]] = {}
    for kind, key in found:
        keys.setdefault(kind, []).append(key)
    states = [state for kind, of_kind in keys.items() for state in read_states(connection, position, kind, of_kind)]
    by_name = {state.newest[:2]: state for state in states}
    return [(by_name[name].newest, _note_of(by_name[name].latest)) for name in found]


def _note_of(word: Decision | None) -> str:
    return "" if word is None else str(word.cause.content.get("note", ""))


def read_linked(
    connection: Connection, position: int, to_kind: str, to_keys: Iterable[str], kind: str = ""
) -> list[State]:
    """Where the keys stand that refer, or once referred, to some records; of one kind if it is named."""
    found: dict[Any, None] = {}
    statement = _STATES_BY_LINK_OF_KIND if kind else _STATES_BY_LINK
    for chunk in split_keys(to_keys):
        values = {"to_kind": to_kind, "keys": chunk, "position": position, **({"kind": kind} if kind else {})}
        found |= dict.fromkeys(connection.execute(statement, values).all())
    return _fetch_states(connection, list(found))


def find_term(connection: Connection, text: str, position: int) -> list[Row]:
    """The records that a person has ever found under a text, case aside, each in its newest revision."""
    return _newest(connection, _BY_TERM, text=fold_term(text), position=position)


def read_terms(connection: Connection, position: int) -> Sequence[str]:
    """Every text by which something has ever been found."""
    return sorted({row.text for row in connection.execute(_TERMS, {"position": position})})
