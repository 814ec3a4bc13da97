"""The Merkle tree of RFC 9162, section 2.1.

A leaf is SHA-256(0x00 || data), a node SHA-256(0x01 || left || right); a tree
is split at the largest power of two below its size.
"""

from __future__ import annotations

import hashlib
from collections.abc import Callable, Sequence

__all__ = ["EMPTY_ROOT", "hash_leaf", "hash_node", "new_nodes", "root_of"]

EMPTY_ROOT = hashlib.sha256().digest()
"""The root of the empty tree."""


def hash_leaf(data: bytes) -> bytes:
    """The hash of a leaf."""
    return hashlib.sha256(b"\x00" + data).digest()


def hash_node(left: bytes, right: bytes) -> bytes:
    """The hash of an inner node."""
    return hashlib.sha256(b"\x01" + left + right).digest()


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


def new_nodes(size: int, leaf: bytes, node_at: Callable[[int, int], bytes]) -> list[tuple[int, int, bytes]]:
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


def root_from_nodes(size: int, node_at: Callable[[int, int], bytes]) -> bytes:
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
