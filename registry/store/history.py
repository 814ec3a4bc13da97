"""Appending to the history: one atomic change at a time."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from sqlalchemy import Connection, func, insert, select

from registry.canonical import digest, encode
from registry.merkle import hash_leaf, new_nodes, root_of
from registry.store.tables import change, link, node, record, term

__all__ = ["Change", "Draft", "append_change", "envelope", "fold_term"]


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
    """

    kind: str
    key: str
    content: Mapping[str, Any]
    links: Sequence[tuple[str, str, str]] = ()
    terms: Sequence[str] = ()


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
    number, last_time = connection.execute(
        select(func.coalesce(func.max(change.c.number), 0), func.max(change.c.recorded_at))
    ).one()
    first_id = connection.execute(select(func.coalesce(func.max(record.c.id), 0))).scalar_one() + 1
    revisions = _latest_revisions(connection, {(draft.kind, draft.key) for draft in drafts})
    rows = list(_number_records(drafts, number + 1, first_id, revisions))
    root = root_of([hash_leaf(bytes.fromhex(row["digest"])) for row in rows]).hex()
    header = Change(number + 1, author, reason, max(recorded_at, last_time or ""), len(rows), root)
    columns = {name: getattr(header, name) for name in header.__dataclass_fields__}
    connection.execute(insert(change), {**columns, "header": header.header().decode()})
    _insert_records(connection, rows, drafts)
    _grow_tree(connection, number, hash_leaf(header.header()))
    return header


def _latest_revisions(connection: Connection, keys: set[tuple[str, str]]) -> dict[tuple[str, str], int]:
    found: dict[tuple[str, str], int] = {}
    if len(keys) > 200:  # one pass over the index beats thousands of searches
        everything = select(record.c.kind, record.c.key, func.max(record.c.revision)).group_by(
            record.c.kind, record.c.key
        )
        return {(kind, key): revision for kind, key, revision in connection.execute(everything)}
    for kind, key in keys:
        latest = select(func.max(record.c.revision)).where(record.c.kind == kind, record.c.key == key)
        found[kind, key] = connection.execute(latest).scalar() or 0
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


def _insert_records(connection: Connection, rows: list[dict[str, Any]], drafts: Sequence[Draft]) -> None:
    if not rows:
        return
    connection.execute(insert(record), rows)
    links = [
        {"record": row["id"], "role": role, "kind": kind, "key": key}
        for row, draft in zip(rows, drafts, strict=True)
        for role, kind, key in draft.links
    ]
    terms = [
        {"record": row["id"], "text": text}
        for row, draft in zip(rows, drafts, strict=True)
        for text in sorted({fold_term(term) for term in draft.terms})
    ]
    if links:
        connection.execute(insert(link), links)
    if terms:
        connection.execute(insert(term), terms)


def _grow_tree(connection: Connection, size: int, leaf: bytes) -> None:
    def node_at(level: int, place: int) -> bytes:
        wanted = select(node.c.hash).where(node.c.level == level, node.c.place == place)
        return bytes.fromhex(connection.execute(wanted).scalar_one())

    added = new_nodes(size, leaf, node_at)
    connection.execute(insert(node), [{"level": a, "place": b, "hash": c.hex()} for a, b, c in added])
