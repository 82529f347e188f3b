"""The order in which unknowns are eliminated: nested dissection of the mesh.

The elements are halved again and again; the nodes that two halves share are eliminated after both,
so each half's elimination knows nothing of the other (George 1973, SIAM J. Numer. Anal. 10, from
memory).  Where an element went is a row of bits; the bits that all elements round a node have in
common say at which cut the node stands, so no graph of the nodes is needed.

Each half is sorted along its longer extent and cut where the fewest sides are severed, not far from
the middle: in a part with holes and necks that is where it is narrow.  All parts of one level are
cut at once.
"""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]
Bools = NDArray[np.bool_]

LEAF = 2
"""Elements in a part that is not cut further: as good as one, and a level less."""

WINDOW = 0.2
"""A cut lies within this share of the middle (0.1 and 0.3 gave a little more fill)."""

SWEEPS = 6
"""Times that elements with most neighbours across the cut change sides, to straighten it."""

LEAST_STRAIGHTENED = 16
"""Mean elements in a part below which cuts are left as they are."""


def elimination_order(element_nodes: Ints, positions: Floats, node_of_unknown: Ints) -> Ints:
    """Unknowns in the order in which to eliminate them, (n_unknowns,).

    Args:
        element_nodes: the nodes of each element that carry unknowns, corners first,
            (n_elements, m).
        positions: of the nodes [mm], (n_nodes, 2).
        node_of_unknown: the node that each unknown belongs to, (n_unknowns,).
    """
    bits = _halves(positions[element_nodes[:, :4]].mean(axis=1), _neighbours(element_nodes))
    low = np.full(len(positions), np.iinfo(np.int64).max)
    high = np.full(len(positions), -1, dtype=np.int64)
    np.minimum.at(low, element_nodes, bits[:, None])
    np.maximum.at(high, element_nodes, bits[:, None])
    # frexp counts the bits from the first in which two elements round the node differ
    height = np.frexp((low ^ high).astype(float))[1].astype(np.int64)
    last = (((low >> height) + 1) << height) - 1  # of the part that the node's cut divides
    along = positions.sum(axis=1)
    of = node_of_unknown
    return np.lexsort((along[of], height[of], last[of]))


def _halves(centres: Floats, neighbours: Ints) -> Ints:
    """For each element the sides of the cuts it fell on, first cut in the highest bit, (n,)."""
    n = len(centres)
    pairs = np.stack([np.repeat(np.arange(n), 4), neighbours.ravel()], axis=1)
    pairs = pairs[pairs[:, 0] < pairs[:, 1]]
    bits = np.zeros(n, dtype=np.int64)
    for _ in range(math.ceil(math.log2(max(n / LEAF, 1.0))) + 1):
        order = np.argsort(bits, kind="stable")
        sizes = np.unique(bits, return_counts=True)[1]
        group = np.empty(n, dtype=np.int64)
        group[order] = np.repeat(np.arange(len(sizes)), sizes)
        beyond = _cut(centres, order, sizes, group, pairs)
        if n >= LEAST_STRAIGHTENED * len(sizes):
            beyond = _straighten(beyond, group, neighbours)
        bits = 2 * bits + beyond
    return bits


def _cut(centres: Floats, order: Ints, sizes: Ints, group: Ints, pairs: Ints) -> Bools:
    """Which elements lie beyond the cut of their group, (n,).

    Args:
        centres: (n, 2).
        order: elements by group, (n,); `sizes`: of the groups, (n_groups,).
        group: of each element, (n,).
        pairs: neighbours, (n_pairs, 2).
    """
    n, first = len(centres), np.cumsum(sizes) - sizes
    spread = centres[order]
    extent = np.maximum.reduceat(spread, first) - np.minimum.reduceat(spread, first)
    axis = (extent[:, 1] > extent[:, 0]).astype(np.int64)
    rank = np.empty(n, dtype=np.int64)
    rank[np.lexsort((centres[np.arange(n), axis[group]], group))] = np.arange(n)
    inner = rank[pairs[group[pairs[:, 0]] == group[pairs[:, 1]]]]
    severed = np.cumsum(
        np.bincount(inner.min(axis=1), minlength=n) - np.bincount(inner.max(axis=1), minlength=n)
    )  # by a cut after each place of the ranking
    size = np.repeat(sizes, sizes)
    off = np.abs((np.arange(n) - np.repeat(first, sizes) + 1) / size - 0.5)
    near = off <= np.maximum(WINDOW, 0.5 / size)
    cost = np.where(near, severed * (1.0 + off), np.inf)
    best = np.flatnonzero(cost == np.repeat(np.minimum.reduceat(cost, first), sizes))
    at = np.empty(len(sizes), dtype=np.int64)
    at[group[order][best][::-1]] = best[::-1]  # the first of equals
    return np.asarray(rank > at[group])


def _straighten(beyond: Bools, group: Ints, neighbours: Ints) -> Bools:
    """Let elements follow most of their neighbours, one side's elements after the other's."""
    inner = group[neighbours] == group[:, None]
    for sweep in range(SWEEPS):
        across = (beyond[neighbours] != beyond[:, None]) & inner
        most = 2 * across.sum(axis=1) > (inner & ~_own(neighbours)).sum(axis=1)
        beyond = beyond ^ (most & (beyond == bool(sweep % 2)))
    return beyond


def _own(neighbours: Ints) -> Bools:
    """Sides without a neighbour, which name the element itself, (n, 4)."""
    return np.asarray(neighbours == np.arange(len(neighbours))[:, None])


def _neighbours(element_nodes: Ints) -> Ints:
    """The element over each side, or the element itself where there is none, (n, 4)."""
    n = len(element_nodes)
    start, stop = element_nodes[:, :4], np.roll(element_nodes[:, :4], -1, axis=1)
    key = np.minimum(start, stop).ravel() * (element_nodes.max() + 1)
    key = key + np.maximum(start, stop).ravel()
    order = np.argsort(key, kind="stable")
    same = np.flatnonzero(key[order][1:] == key[order][:-1])
    one, other = order[same], order[same + 1]
    out = np.repeat(np.arange(n), 4)
    out[one], out[other] = other // 4, one // 4
    return out.reshape(n, 4)
