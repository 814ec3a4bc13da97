"""The Merkle tree of RFC 9162, section 2.1.

A leaf is SHA-256(0x00 || data), a node SHA-256(0x01 || left || right); a tree
is split at the largest power of two below its size.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from hashlib import sha256

__all__ = [
    "EMPTY_ROOT",
    "consistency_holds",
    "consistency_proof",
    "hash_leaf",
    "hash_node",
    "new_nodes",
    "root_from_nodes",
    "root_of",
]

NodeAt = Callable[[int, int], bytes]
"""Gives a complete node by level (0 is leaves) and index."""

EMPTY_ROOT = sha256().digest()
"""The root of the empty tree."""


def hash_leaf(data: bytes) -> bytes:
    """The hash of a leaf."""
    return sha256(b"\x00" + data).digest()


def hash_node(left: bytes, right: bytes) -> bytes:
    """The hash of an inner node."""
    return sha256(b"\x01" + left + right).digest()


def root_of(leaves: Sequence[bytes]) -> bytes:
    """The root over leaf hashes.

    Parameters
    ----------
    leaves : sequence of bytes
        Hashes from `hash_leaf`, in order.

    Returns
    -------
    bytes
        The root, 32 bytes.

    Examples
    --------
    The three-leaf vector of the certificate transparency test data:

    >>> root_of([hash_leaf(d) for d in (b"", b"\\x00", b"\\x10")]).hex()
    'aeb6bcfe274b70a14fb067a5e5578264db0fa9b51af5e0ba159158f329e06e77'
    """
    if not leaves:
        return EMPTY_ROOT
    level = list(leaves)
    while len(level) > 1:
        paired = [hash_node(level[i], level[i + 1]) for i in range(0, len(level) - 1, 2)]
        # an unpaired last node moves up unchanged: the same tree as the recursive definition
        level = paired + level[len(level) & ~1 :]
    return level[0]


def new_nodes(size: int, leaf: bytes, node_at: NodeAt) -> list[tuple[int, int, bytes]]:
    """The complete nodes that one more leaf adds to a tree.

    Parameters
    ----------
    size : int
        Leaves before.
    leaf : bytes
        The hash of the new leaf.
    node_at : callable
        ``node_at(level, index)`` gives a complete node already there.

    Returns
    -------
    list of (level, index, hash)
        The leaf and every node it completes; level 0 is leaves.
    """
    nodes = [(0, size, leaf)]
    level, index, current = 0, size, leaf
    while index & 1:
        current = hash_node(node_at(level, index - 1), current)
        level, index = level + 1, index >> 1
        nodes.append((level, index, current))
    return nodes


def root_from_nodes(size: int, node_at: NodeAt) -> bytes:
    """The root of a tree of `size` leaves from its complete nodes."""
    root, taken = b"", 0
    # the complete subtrees from right to left, as the bits of the size say
    for level in range(size.bit_length()):
        if size >> level & 1:
            index = (size >> level) - 1
            node = node_at(level, index)
            root = hash_node(node, root) if taken else node
            taken += 1
    return root if taken else EMPTY_ROOT


def consistency_proof(first: int, second: int, node_at: NodeAt) -> list[bytes]:
    """What shows that a tree extends a smaller one (RFC 9162, section 2.1.4.1).

    Parameters
    ----------
    first, second : int
        Leaves of the smaller and of the larger tree, 0 <= first <= second.
    node_at : callable
        ``node_at(level, index)`` gives a complete node; of these the proof
        takes about twice as many as the larger size has bits.

    Returns
    -------
    list of bytes
        Hashes in order; none if one tree is empty or both are the same.
    """
    if not 0 <= first <= second:
        raise ValueError(f"a tree of {second} leaves extends none of {first}")
    proof: list[bytes] = []
    start, end, whole = 0, second, True
    while start < first < end:
        middle = start + _left_size(end - start)
        if first <= middle:
            proof.append(_root_between(middle, end, node_at))
            end = middle
        else:
            proof.append(_root_between(start, middle, node_at))
            start, whole = middle, False
    if not whole:
        proof.append(_root_between(start, end, node_at))
    return proof[::-1]


def _left_size(size: int) -> int:
    """The largest power of two below a size."""
    return 1 << (size - 1).bit_length() - 1


def _root_between(start: int, end: int, node_at: NodeAt) -> bytes:
    """The root over some leaves that are one subtree; a complete one is a node."""
    size = end - start
    if size & (size - 1) == 0:
        level = size.bit_length() - 1
        return node_at(level, start >> level)
    middle = start + _left_size(size)
    return hash_node(_root_between(start, middle, node_at), _root_between(middle, end, node_at))


def consistency_holds(first: int, second: int, first_root: bytes, second_root: bytes, proof: Sequence[bytes]) -> bool:
    """Whether a proof shows that a tree extends a smaller one (RFC 9162, section 2.1.4.2).

    Parameters
    ----------
    first, second : int
        Leaves of the smaller and of the larger tree.
    first_root, second_root : bytes
        Their roots.
    proof : sequence of bytes
        From `consistency_proof`.

    Returns
    -------
    bool
        True if the roots and the proof fit; anything else is False.

    Notes
    -----
    The standard leaves out empty and equal trees: the empty tree has one root
    and is extended by every other, and equal trees have equal roots; neither
    takes a proof.
    """
    if not 0 <= first <= second:
        return False
    if first in (0, second):
        known = first_root == EMPTY_ROOT if first == 0 else first_root == second_root
        return known and not proof and (second > 0 or second_root == EMPTY_ROOT)
    if not proof:
        return False
    path = [first_root, *proof] if first & (first - 1) == 0 else list(proof)
    node, last = first - 1, second - 1
    while node & 1:
        node, last = node >> 1, last >> 1
    old = new = path[0]
    for value in path[1:]:
        if last == 0:
            return False
        if node & 1 or node == last:
            old, new = hash_node(value, old), hash_node(value, new)
            while not node & 1 and node != 0:
                node, last = node >> 1, last >> 1
        else:
            new = hash_node(new, value)
        node, last = node >> 1, last >> 1
    return old == first_root and new == second_root and last == 0
