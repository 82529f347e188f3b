"""How thick the part is in its plane: distances through the material between facing boundaries.

The boundary is sampled; from each sample the nearest point of every other piece is found exactly
(segments and arcs, nothing flattened).  Two places face each other when the line between them
leaves both within 60° of the inward normal.  Samples are added where the wall is thinner than
their spacing, so that a narrow neck between two holes is not passed over.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray

from screenapp.model.curve_table import CurveTable
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]
Bools = NDArray[np.bool_]

FACING = 0.5
"""Cosine of the largest angle between inward normal and connecting line."""

NEAR_CORNER = 0.25
"""Share of the shorter of two pieces that meet at a sharp corner within which they do not count
as facing: towards the tip of a wedge the wall goes to nothing."""

ROUNDS = 12
MOST_SAMPLES = 20_000


@dataclass(frozen=True, eq=False)
class Walls:
    """Samples of the boundary with the wall behind them.

    Attributes:
        points: (n, 2) [mm].
        piece: piece of the shape that each lies on, (n,).
        thickness: distance to the nearest facing boundary [mm], infinite where nothing faces, (n,).
        facing: the point faced (n, 2) [mm]; the sample itself where nothing faces.
        facing_piece: the piece faced, -1 where nothing faces, (n,).
    """

    points: Floats
    piece: Ints
    thickness: Floats
    facing: Floats
    facing_piece: Ints

    @property
    def thinnest(self) -> float:
        """The thinnest wall [mm]; infinite if nothing faces anything."""
        return float(self.thickness.min())


@lru_cache(maxsize=64)
def measure_walls(shape: Shape) -> Walls:
    """Sample the boundary and measure the wall at each sample."""
    table = shape.table
    piece, t = _first_samples(table, shape.size)
    piece, t = _with_critical(table, piece, t)
    found = _measure(table, shape, piece, t)
    for _ in range(ROUNDS):
        new_piece, new_t = _between(table, piece, t, found)
        if not len(new_piece) or len(piece) + len(new_piece) > MOST_SAMPLES:
            break
        extra = _measure(table, shape, new_piece, new_t)
        piece, t = np.concatenate([piece, new_piece]), np.concatenate([t, new_t])
        found = _joined(found, extra)
    return found


def _first_samples(table: CurveTable, size: float) -> tuple[Ints, Floats]:
    """At least every 4 % of the part and every 15°, ends included (just inside the piece)."""
    turn = np.where(table.arc, np.abs(table.sweep) / np.radians(15.0), 0.0)
    counts = np.ceil(np.maximum(np.maximum(table.lengths / (0.04 * size), turn), 4)).astype(int)
    piece = np.repeat(np.arange(len(table)), counts + 1)
    t = np.concatenate([np.linspace(0.0, 1.0, n + 1) for n in counts])
    return piece, t


def _with_critical(table: CurveTable, piece: Ints, t: Floats) -> tuple[Ints, Floats]:
    """Add where two pieces can be nearest: feet of arc centres on all other pieces, and back."""
    arcs = np.flatnonzero(table.arc)
    n = len(table)
    if len(arcs) * n * 2 > MOST_SAMPLES // 2 * 4:
        return piece, t
    a, b = np.repeat(arcs, n), np.tile(np.arange(n), len(arcs))
    a, b = a[a != b], b[a != b]
    foot = table.nearest(b, table.centre[a])
    back = table.nearest(a, table.points(b, foot))
    far = table.nearest(a, 2.0 * table.centre[a] - table.points(b, foot))
    extra_piece, extra_t = np.concatenate([b, a, a]), np.concatenate([foot, back, far])
    inner = (extra_t > 1e-9) & (extra_t < 1.0 - 1e-9)
    both = np.stack([extra_piece[inner], np.round(extra_t[inner], 6)], axis=1)
    both = np.unique(both, axis=0)
    return (
        np.concatenate([piece, both[:, 0].astype(np.int64)]),
        np.concatenate([t, both[:, 1]]),
    )


def _measure(table: CurveTable, shape: Shape, piece: Ints, t: Floats) -> Walls:
    """The nearest facing boundary of each sample, all pieces tried, in chunks."""
    points, normals = table.points(piece, t), _normals(table, piece, t)
    n, m = len(points), len(table)
    thickness = np.full(n, np.inf)
    facing, other = points.copy(), np.full(n, -1, dtype=np.int64)
    step = max(1, 400_000 // m)
    corners = _sharp_joins(table, shape)
    for first in range(0, n, step):
        rows = np.arange(first, min(first + step, n))
        i, j = np.repeat(rows, m), np.tile(np.arange(m), len(rows))
        foot = table.nearest(j, points[i])
        q = table.points(j, foot)
        d = q - points[i]
        length = np.hypot(*d.T)
        floor = 1e-9 * shape.size
        way = d / np.maximum(length, floor)[:, None]
        faces = (length > floor) & (np.sum(normals[i] * way, axis=1) > FACING)
        faces &= np.sum(_normals(table, j, foot) * way, axis=1) < -FACING
        faces &= ~_in_tip(corners, table, piece[i], j, points[i], q)
        length = np.where(faces, length, np.inf).reshape(len(rows), m)
        best = np.argmin(length, axis=1)
        picked = np.arange(len(rows)) * m + best
        thickness[rows] = length.ravel()[picked]
        hit = np.isfinite(thickness[rows])
        facing[rows[hit]] = q[picked[hit]]
        other[rows[hit]] = best[hit]
    return Walls(points, piece, thickness, facing, other)


def _normals(table: CurveTable, piece: Ints, t: Floats) -> Floats:
    """Inward unit normals (material on the left)."""
    tangent = table.tangents(piece, t)
    return np.stack([-tangent[:, 1], tangent[:, 0]], axis=1)


def _sharp_joins(table: CurveTable, shape: Shape) -> dict[tuple[int, int], list[Floats]]:
    """Places where two consecutive pieces of a loop meet at a convex corner, both ways round."""
    joins: dict[tuple[int, int], list[Floats]] = {}
    for first, last in shape.loops:
        for i in range(first, last):
            j = i + 1 if i + 1 < last else first
            before = table.tangents(np.array([i]), np.array([1.0]))[0]
            after = table.tangents(np.array([j]), np.array([0.0]))[0]
            if before[0] * after[1] - before[1] * after[0] > 1e-6 or before @ after < -0.99:
                joins.setdefault((i, j), []).append(table.end[i])
                joins.setdefault((j, i), []).append(table.end[i])
    return joins


def _in_tip(
    joins: dict[tuple[int, int], list[Floats]],
    table: CurveTable,
    a: Ints,
    b: Ints,
    p: Floats,
    q: Floats,
) -> Bools:
    """Pairs on two pieces that meet at a sharp corner with both points close to it."""
    out = np.zeros(len(a), dtype=bool)
    if not joins:
        return out
    m = len(table)
    codes = np.array([i * m + j for i, j in joins])
    hits = np.flatnonzero(np.isin(a * m + b, codes))
    lengths = table.lengths
    for k in hits:
        i, j = int(a[k]), int(b[k])
        reach = NEAR_CORNER * min(lengths[i], lengths[j])
        out[k] = any(
            np.hypot(*(p[k] - c)) < reach and np.hypot(*(q[k] - c)) < reach for c in joins[i, j]
        )
    return out


def _between(table: CurveTable, piece: Ints, t: Floats, found: Walls) -> tuple[Ints, Floats]:
    """New samples halfway between neighbours that stand further apart than the wall is thick."""
    order = np.lexsort((t, piece))
    a, b = order[:-1], order[1:]
    gap = (t[b] - t[a]) * table.lengths[piece[a]]
    thin = np.minimum(found.thickness[a], found.thickness[b])
    split = (piece[a] == piece[b]) & (gap > thin)
    return piece[a[split]], 0.5 * (t[a[split]] + t[b[split]])


def _joined(a: Walls, b: Walls) -> Walls:
    return Walls(
        np.concatenate([a.points, b.points]),
        np.concatenate([a.piece, b.piece]),
        np.concatenate([a.thickness, b.thickness]),
        np.concatenate([a.facing, b.facing]),
        np.concatenate([a.facing_piece, b.facing_piece]),
    )
