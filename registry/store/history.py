"""Appending to the history: one atomic change at a time."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from sqlalchemy import Connection, bindparam, func, insert, select

from registry.canonical import digest, encode
from registry.merkle import hash_leaf, new_nodes, root_of
from registry.store.tables import change, link, node, record, standing, term

__all__ = ["Change", "Draft", "Effect", "Revision", "append_change", "envelope", "fold_term"]

Revision = tuple[str, str, int]
"""Kind, key and number of a revision."""

Effect = tuple[Revision, str, Revision | None]
"""What a record makes of a revision: which, its standing, and the record that says why if it is another one."""

# statements are built once: building them costs three times their execution
_LAST = select(
    select(func.max(change.c.number)).scalar_subquery().label("number"),
    select(change.c.recorded_at).order_by(change.c.number.desc()).limit(1).scalar_subquery().label("recorded_at"),
    select(func.max(record.c.id)).scalar_subquery().label("record"),
    select(func.max(standing.c.id)).scalar_subquery().label("standing"),
)
_LAST_REVISION = select(func.max(record.c.revision)).where(
    record.c.kind == bindparam("kind"), record.c.key == bindparam("key")
)
_RECORD_ID = select(record.c.id).where(
    record.c.kind == bindparam("kind"), record.c.key == bindparam("key"), record.c.revision == bindparam("revision")
)
_LINKS_OF = select(link.c.role, link.c.to_kind, link.c.to_key).where(
    link.c.kind == bindparam("kind"), link.c.key == bindparam("key")
)
_HAS_TERM = select(func.count()).where(
    term.c.text == bindparam("text"), term.c.kind == bindparam("kind"), term.c.key == bindparam("key")
)
_INSERT_CHANGE, _INSERT_RECORD, _INSERT_NODE = insert(change), insert(record), insert(node)
_INSERT_LINK, _INSERT_TERM, _INSERT_STANDING = insert(link), insert(term), insert(standing)
_NODE = select(node.c.hash).where(node.c.level == bindparam("level"), node.c.place == bindparam("place"))


@dataclass(frozen=True)
class Change:
    """The header of a change.

    Attributes
    ----------
    number : int
        Its place in the history, from 1: a position of the library.
    author, reason : str
        Who, and why.
    recorded_at : str
        UTC time, ISO 8601.
    records : int
        How many records it holds.
    records_root : str
        RFC 9162 root over their digests, hexadecimal.
    """

    number: int
    author: str
    reason: str
    recorded_at: str
    records: int
    records_root: str

    def header(self) -> bytes:
        """The canonical JSON that is a leaf of the history's tree."""
        return encode({name: getattr(self, name) for name in self.__dataclass_fields__})


@dataclass(frozen=True)
class Draft:
    """A record about to be appended.

    Attributes
    ----------
    kind, key : str
        What it is a revision of.
    content : mapping
        Text, integers, lists and objects.
    links : sequence of (role, kind, key)
        What it refers to.
    terms : sequence of str
        Texts by which a person finds it.
    effects : sequence of Effect
        What it makes of other revisions.
    """

    kind: str
    key: str
    content: Mapping[str, Any]
    links: Sequence[tuple[str, str, str]] = ()
    terms: Sequence[str] = ()
    effects: Sequence[Effect] = ()


def fold_term(text: str) -> str:
    """A text as it is compared: case aside, runs of blanks as one."""
    return " ".join(text.casefold().split())


def envelope(kind: str, key: str, revision: int, content: str) -> bytes:
    """What the digest of a record is taken of: canonical JSON around its canonical content.

    Examples
    --------
    >>> envelope("source", "s", 1, '{"citation":"c"}')
    b'{"content":{"citation":"c"},"key":"s","kind":"source","revision":1}'
    """
    # the content is canonical already: encoding it again would cost more than the digest
    rest = encode({"key": key, "kind": kind, "revision": revision}).decode()
    return f'{{"content":{content},{rest[1:]}'.encode()


def append_change(
    connection: Connection, author: str, reason: str, recorded_at: str, drafts: Sequence[Draft]
) -> Change:
    """Append one change with its records.

    Parameters
    ----------
    connection : sqlalchemy.Connection
        Inside a write transaction.
    author, reason : str
        Who, and why.
    recorded_at : str
        UTC time, ISO 8601; never before the last change's.
    drafts : sequence of Draft
        The records, in order; several revisions of one key may follow each other.

    Returns
    -------
    Change
        The header as recorded.
    """
    last = connection.execute(_LAST).one()
    number, last_id, last_standing = last.number or 0, last.record or 0, last.standing or 0
    revisions = _latest_revisions(connection, {(draft.kind, draft.key) for draft in drafts})
    rows = list(_number_records(drafts, number + 1, last_id + 1, revisions))
    root = root_of([hash_leaf(bytes.fromhex(row["digest"])) for row in rows]).hex()
    header = Change(number + 1, author, reason, max(recorded_at, last.recorded_at or ""), len(rows), root)
    columns = {name: getattr(header, name) for name in header.__dataclass_fields__}
    connection.execute(_INSERT_CHANGE, {**columns, "header": header.header().decode()})
    if rows:
        connection.execute(_INSERT_RECORD, rows)
        _insert_links(connection, rows, drafts)
        _insert_terms(connection, rows, drafts)
        _insert_standings(connection, rows, drafts, last_standing)
    _grow_tree(connection, number, hash_leaf(header.header()))
    return header


def _latest_revisions(connection: Connection, keys: set[tuple[str, str]]) -> dict[tuple[str, str], int]:
    found: dict[tuple[str, str], int] = {}
    for kind, key in keys:
        found[kind, key] = connection.execute(_LAST_REVISION, {"kind": kind, "key": key}).scalar() or 0
    return found


def _number_records(
    drafts: Sequence[Draft], number: int, first_id: int, revisions: dict[tuple[str, str], int]
) -> Iterator[dict[str, Any]]:
    for place, draft in enumerate(drafts):
        revision = revisions.get((draft.kind, draft.key), 0) + 1
        revisions[draft.kind, draft.key] = revision
        content = encode(draft.content).decode()
        yield {
            "id": first_id + place, "change": number, "place": place, "kind": draft.kind, "key": draft.key,
            "revision": revision, "content": content,
            "digest": digest(envelope(draft.kind, draft.key, revision, content)),
        }  # fmt: skip


def _insert_links(connection: Connection, rows: Sequence[Mapping[str, Any]], drafts: Sequence[Draft]) -> None:
    """What a key refers to for the first time."""
    new: dict[tuple[str, ...], int] = {}
    for row, draft in zip(rows, drafts, strict=True):
        if not draft.links:
            continue
        known: Iterable[Any] = ()
        if row["revision"] > 1:
            known = connection.execute(_LINKS_OF, {"kind": draft.kind, "key": draft.key}).all()
        for aim in {tuple(aim) for aim in draft.links} - {tuple(aim) for aim in known}:
            new.setdefault((draft.kind, draft.key, *aim), row["change"])
    names = ("kind", "key", "role", "to_kind", "to_key", "change")
    if new:
        connection.execute(_INSERT_LINK, [dict(zip(names, (*of, at), strict=True)) for of, at in sorted(new.items())])


def _insert_terms(connection: Connection, rows: Sequence[Mapping[str, Any]], drafts: Sequence[Draft]) -> None:
    """Texts under which a key is found for the first time."""
    new: dict[tuple[str, str, str], int] = {}
    for row, draft in zip(rows, drafts, strict=True):
        for text in {fold_term(text) for text in draft.terms}:
            wanted = {"text": text, "kind": draft.kind, "key": draft.key}
            if row["revision"] == 1 or not connection.execute(_HAS_TERM, wanted).scalar_one():
                new.setdefault((text, draft.kind, draft.key), row["change"])
    names = ("text", "kind", "key", "change")
    if new:
        connection.execute(_INSERT_TERM, [dict(zip(names, (*of, at), strict=True)) for of, at in sorted(new.items())])


def _insert_standings(
    connection: Connection, rows: Sequence[Mapping[str, Any]], drafts: Sequence[Draft], last: int
) -> None:
    """What the records of a change make of revisions, which may be of the same change."""
    if not any(draft.effects for draft in drafts):
        return
    here = {(row["kind"], row["key"], row["revision"]): row["id"] for row in rows}

    def find(revision: Revision) -> int:
        wanted = dict(zip(("kind", "key", "revision"), revision, strict=True))
        return here.get(revision) or connection.execute(_RECORD_ID, wanted).scalar_one()

    new: list[dict[str, Any]] = []
    for row, draft in zip(rows, drafts, strict=True):
        for (kind, key, revision), word, cause in draft.effects:
            new.append({
                "id": last + len(new) + 1, "kind": kind, "key": key, "revision": revision, "standing": word,
                "record": find((kind, key, revision)), "cause": find(cause) if cause else row["id"],
                "change": row["change"],
            })  # fmt: skip
    connection.execute(_INSERT_STANDING, new)


def _grow_tree(connection: Connection, size: int, leaf: bytes) -> None:
    def node_at(level: int, place: int) -> bytes:
        return bytes.fromhex(connection.execute(_NODE, {"level": level, "place": place}).scalar_one())

    added = new_nodes(size, leaf, node_at)
    connection.execute(_INSERT_NODE, [{"level": a, "place": b, "hash": c.hex()} for a, b, c in added])
