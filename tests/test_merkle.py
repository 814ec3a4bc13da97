"""Consistency proofs of RFC 9162: as defined there, checked as said there, and false for anything else."""

from __future__ import annotations

import hashlib

import pytest
from test_store import LEAVES, ROOTS, _root_by_definition

from registry.merkle import EMPTY_ROOT, consistency_holds, consistency_proof, hash_leaf, new_nodes, root_of

LARGEST = 70
DATA = [number.to_bytes(2, "big") for number in range(LARGEST)]

# Proofs of the certificate-transparency Merkle test data over the eight leaves of test_store, from memory; they
# close against the definition below.
PROOFS = {
    (1, 1): [],
    (1, 8): [
        "96a296d224f285c67bee93c30f8a309157f0daa35dc5b87e410b78630a09cfc7",
        "5f083f0a1a33ca076a95279832580db3e0ef4584bdff1f54c8a360f50de3031e",
        "6b47aaf29ee3c2af9af889bc1fb9254dabd31177f16232dd6aab035ca39bf6e4",
    ],
    (6, 8): [
        "0ebc5d3437fbe2db158b9f126a1d118e308181031d0a949f8dededebc558ef6a",
        "ca854ea128ed050b41b35ffc1b87b8eb2bde461e9e3b5596ece6b9d5975a0ae0",
        "d37ee418976dd95753c1c73862b9398fa2a2cf9b4ff0fdfe8b30cd95209614b7",
    ],
    (2, 5): [
        "5f083f0a1a33ca076a95279832580db3e0ef4584bdff1f54c8a360f50de3031e",
        "bc1a0643b12e4d2d7c77918f44e0f4f79a838b6cf9ec5b5c283e1f4d88599e6b",
    ],
}


def _nodes(data: list[bytes]) -> dict[tuple[int, int], bytes]:
    nodes: dict[tuple[int, int], bytes] = {}
    for size, leaf in enumerate(data):
        for level, place, value in new_nodes(size, hash_leaf(leaf), lambda a, b: nodes[a, b]):
            nodes[level, place] = value
    return nodes


def _proof_by_definition(m: int, data: list[bytes], whole: bool = True) -> list[bytes]:
    """SUBPROOF of RFC 9162, section 2.1.4.1, word for word."""
    if m == len(data):
        return [] if whole else [_root_by_definition(data)]
    k = 1
    while 2 * k < len(data):
        k *= 2
    if m <= k:
        return [*_proof_by_definition(m, data[:k], whole), _root_by_definition(data[k:])]
    return [*_proof_by_definition(m - k, data[k:], False), _root_by_definition(data[:k])]


@pytest.mark.parametrize("sizes", PROOFS)
def test_proofs_are_the_published_ones(sizes):
    """Proofs over the published leaves equal the published vectors, and hold between the published roots."""
    first, second = sizes
    nodes = _nodes(LEAVES)
    proof = consistency_proof(first, second, lambda a, b: nodes[a, b])
    assert [value.hex() for value in proof] == PROOFS[sizes]
    roots = [bytes.fromhex(ROOTS[size - 1]) for size in sizes]
    assert consistency_holds(first, second, *roots, proof)


def test_every_proof_is_the_defined_one_and_holds():
    """For all sizes up to 70 the proof from complete nodes equals the recursive definition, and holds."""
    nodes = _nodes(DATA)
    roots = [_root_by_definition(DATA[:size]) for size in range(LARGEST + 1)]
    for second in range(LARGEST + 1):
        for first in range(second + 1):
            asked: list[tuple[int, int]] = []

            def node_at(level: int, place: int, asked: list = asked, size: int = second) -> bytes:
                assert (place + 1) << level <= size  # no node that the tree does not have yet
                asked.append((level, place))
                return nodes[level, place]

            proof = consistency_proof(first, second, node_at)
            assert proof == (_proof_by_definition(first, DATA[:second]) if first else [])
            assert len(asked) <= 2 * second.bit_length()
            assert consistency_holds(first, second, roots[first], roots[second], proof)


def test_nothing_else_holds():
    """A changed byte in a root or a proof, hashes out of order, one too many or too few, other sizes: all are False."""
    nodes = _nodes(DATA)
    tried = 0
    for second in range(1, 36):
        for first in range(1, second):
            roots = root_of([hash_leaf(d) for d in DATA[:first]]), root_of([hash_leaf(d) for d in DATA[:second]])
            proof = consistency_proof(first, second, lambda a, b: nodes[a, b])
            for bad in _other_proofs(proof):
                assert not consistency_holds(first, second, *roots, bad)
                tried += 1
            assert not consistency_holds(first, second, _flip(roots[0], first), roots[1], proof)
            assert not consistency_holds(first, second, roots[0], _flip(roots[1], second), proof)
            assert not consistency_holds(first, second, roots[1], roots[0], proof)
            assert not consistency_holds(second, first, *roots, proof)
    assert tried > 5000


def _flip(value: bytes, place: int) -> bytes:
    at = place % len(value)
    return value[:at] + bytes([value[at] ^ 1]) + value[at + 1 :]


def _other_proofs(proof: list[bytes]):
    for number, value in enumerate(proof):
        yield [*proof[:number], _flip(value, number * 7), *proof[number + 1 :]]
        yield [*proof[:number], *proof[number + 1 :]]
        if number and proof[number - 1] != value:
            yield [*proof[: number - 1], value, proof[number - 1], *proof[number + 1 :]]
    yield [*proof, hashlib.sha256(b"one more").digest()]
    yield []


def test_empty_and_equal_trees_take_no_proof():
    """The empty tree is extended by every tree, and a tree by itself, without a proof and with the right roots only."""
    one, two = hash_leaf(b"1"), hash_leaf(b"2")
    assert consistency_holds(0, 0, EMPTY_ROOT, EMPTY_ROOT, [])
    assert consistency_holds(0, 1, EMPTY_ROOT, one, [])
    assert consistency_holds(1, 1, one, one, [])
    assert not consistency_holds(0, 1, one, one, [])
    assert not consistency_holds(0, 0, EMPTY_ROOT, one, [])
    assert not consistency_holds(1, 1, one, two, [])
    assert not consistency_holds(1, 1, one, one, [two])
    assert not consistency_holds(-1, 1, one, one, [])
    with pytest.raises(ValueError, match="extends none"):
        consistency_proof(3, 2, lambda level, place: b"")
