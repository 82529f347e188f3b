"""From triangles to quads: pairs are joined where that is good, then everything is divided.

A joined pair is divided in four quads, a triangle left over in three, so no triangle remains.  The
triangles are twice as large as the quads are to be.  On the boundary the middle nodes of the
division are those that `boundary_points` placed on the exact curve.

A quad must not have two sides of the boundary on either side of a smooth place: its corner there
would be a straight angle.  So ears (triangles with two sides on the boundary) at such places are
turned before joining, and pairs that would make such a quad are not joined.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

FLATTEST = np.radians(150.0)
"""Largest angle of the boundary that may be a corner of one element [rad]."""


THINNEST = np.radians(5.0)
"""Smallest angle of a triangle that turning may leave [rad]: smoothing opens it later."""

ROUNDS = 4
"""Turning one ear can free the way for, or make, another: looked at again so often."""


def turn_ears(points: Floats, triangles: Ints, angles: Floats) -> Ints:
    """Triangles (m, 3) in which no ear sits at a boundary node of an angle beyond `FLATTEST`.

    The side opposite the node is swapped for the one from the node to the far corner, where both
    new triangles are sound.

    Args:
        points: (n, 2) [mm].
        triangles: counter-clockwise, (m, 3).
        angles: the angle of the material at each boundary node [rad], infinite inside, (n,).
    """
    for _ in range(ROUNDS):
        turned = _turn_ears_once(points, triangles, angles)
        if np.array_equal(turned, triangles):
            break
        triangles = turned
    return triangles


def _turn_ears_once(points: Floats, triangles: Ints, angles: Floats) -> Ints:
    """One round: no triangle is touched twice."""
    triangles = triangles.copy()
    neighbours, across = _neighbours(triangles)
    touched = np.zeros(len(triangles), dtype=bool)
    tip = np.argmax(neighbours >= 0, axis=1)  # side i is opposite no node: see _neighbours
    ears = np.flatnonzero((neighbours < 0).sum(axis=1) == 2)
    for ear in ears:
        side = int(tip[ear])
        other, far = int(neighbours[ear, side]), int(across[ear, side])
        a, b = triangles[ear, side], triangles[ear, (side + 1) % 3]
        node, w = triangles[ear, (side + 2) % 3], triangles[other, far]
        if not FLATTEST < angles[node] < np.inf or touched[ear] or touched[other]:
            continue
        new = np.array([[node, a, w], [node, w, b]], dtype=np.int64)
        if _angles_of(points, new).min() > THINNEST:
            triangles[ear], triangles[other] = new
            touched[ear] = touched[other] = True
    return triangles


def join_pairs(points: Floats, triangles: Ints, angles: Floats, least: float) -> tuple[Ints, Ints]:
    """Join the best pairs first, as long as their quality is at least `least`.

    The quality of a quad is 1 for right angles and 0 where a corner is folded or straight.

    Returns:
        quads (k, 4) and the triangles left over (l, 3), counter-clockwise.
    """
    neighbours, across = _neighbours(triangles)
    first, side = np.nonzero(neighbours >= 0)
    second = neighbours[first, side]
    once = first < second
    first, second, side = first[once], second[once], side[once]
    far = triangles[second, across[first, side]]
    quads = np.stack(
        [
            triangles[first, side],
            far,
            triangles[first, (side + 1) % 3],
            triangles[first, (side + 2) % 3],
        ],
        axis=1,
    )
    quality = _quad_quality(points, quads, angles, _boundary_pairs(triangles, neighbours))
    quality = np.round(quality, 9)  # rounding must not choose among equals
    order = np.argsort(-quality, kind="stable")
    order = order[quality[order] >= least]
    free = np.ones(len(triangles), dtype=bool)
    taken = []
    for pair in order.tolist():
        i, j = first[pair], second[pair]
        if free[i] and free[j]:
            free[i] = free[j] = False
            taken.append(pair)
    return quads[np.array(taken, dtype=np.int64)], triangles[free]


def divide(
    points: Floats, quads: Ints, triangles: Ints, middles: dict[tuple[int, int], int]
) -> tuple[Floats, Ints]:
    """Divide quads in four and triangles in three.

    Args:
        points: (n, 2) [mm].
        quads: (k, 4), and
        triangles: (l, 3), counter-clockwise.
        middles: the node in the middle of each side on the boundary, by its ends, lower first.

    Returns:
        points with the new nodes behind the given ones, and quads (4 k + 3 l, 4).
    """
    sides = np.concatenate([_sides_of(quads), _sides_of(triangles)])
    edges, edge_of = np.unique(np.sort(sides, axis=1), axis=0, return_inverse=True)
    edge_of = edge_of.ravel()
    middle = np.full(len(edges), -1, dtype=np.int64)
    for k, (a, b) in enumerate(edges.tolist()):
        middle[k] = middles.get((a, b), -1)
    new = middle < 0
    n = len(points)
    middle[new] = n + np.arange(int(new.sum()))
    n += int(new.sum())
    made = [points, 0.5 * (points[edges[new, 0]] + points[edges[new, 1]])]
    parts = []
    begin = 0
    for cells in (quads, triangles):
        count = cells.shape[1]
        mine = middle[edge_of[begin : begin + cells.size]].reshape(-1, count)
        begin += cells.size
        centre = n + np.arange(len(cells))
        n += len(cells)
        made.append(points[cells].mean(axis=1))
        for k in range(count):
            parts.append(np.stack([cells[:, k], mine[:, k], centre, mine[:, k - 1]], axis=1))
    return np.concatenate(made), np.concatenate(parts)


def _sides_of(cells: Ints) -> Ints:
    return np.stack([cells, np.roll(cells, -1, axis=1)], axis=2).reshape(-1, 2)


def _neighbours(triangles: Ints) -> tuple[Ints, Ints]:
    """For each side (from corner i to i + 1): the triangle beyond it (-1 on the boundary) and
    the local number of that triangle's corner that is not on the side, both (m, 3)."""
    sides = np.sort(_sides_of(triangles), axis=1)
    order = np.lexsort((sides[:, 1], sides[:, 0]))
    same = np.flatnonzero(np.all(sides[order[1:]] == sides[order[:-1]], axis=1))
    a, b = order[same], order[same + 1]
    beyond = np.full(len(sides), -1, dtype=np.int64)
    far = np.full(len(sides), -1, dtype=np.int64)
    beyond[a], beyond[b] = b // 3, a // 3
    far[a], far[b] = (b % 3 + 2) % 3, (a % 3 + 2) % 3
    return beyond.reshape(-1, 3), far.reshape(-1, 3)


def _boundary_pairs(triangles: Ints, neighbours: Ints) -> tuple[Ints, int]:
    """Keys of the boundary sides in their direction, sorted, and the factor of the key."""
    factor = int(triangles.max()) + 1
    sides = _sides_of(triangles)[neighbours.ravel() < 0]
    return np.sort(sides[:, 0] * factor + sides[:, 1]), factor


def _quad_quality(
    points: Floats, quads: Ints, angles: Floats, boundary: tuple[Ints, int]
) -> Floats:
    """1 less the worst deviation of a corner from 90°, in 90°; -1 where a corner is too flat."""
    keys, factor = boundary
    corner = _angles_of(points, quads)
    following = np.roll(quads, -1, axis=1)
    own = quads * factor + following
    place = np.minimum(np.searchsorted(keys, own), len(keys) - 1)
    on = keys[place] == own
    between = on & np.roll(on, 1, axis=1)  # both sides at the corner lie on the boundary
    corner = np.where(between, angles[quads], corner)
    quality = 1.0 - np.abs(corner - 0.5 * np.pi).max(axis=1) / (0.5 * np.pi)
    flat = (between & (angles[quads] > FLATTEST)).any(axis=1)
    return np.asarray(np.where(flat, -1.0, quality))


def _angles_of(points: Floats, cells: Ints) -> Floats:
    """Angle at each corner of each cell, in [0, 2π): more than π where it is folded inwards."""
    p = points[cells]
    ahead, back = np.roll(p, -1, axis=1) - p, np.roll(p, 1, axis=1) - p
    cross = ahead[..., 0] * back[..., 1] - ahead[..., 1] * back[..., 0]
    dot = (ahead * back).sum(axis=-1)
    return np.asarray(np.arctan2(cross, dot) % (2.0 * np.pi))
