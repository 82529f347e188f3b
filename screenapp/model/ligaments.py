"""Ligaments: the narrow places where two pieces of the boundary face each other across material.

A ligament is a closest approach of two pieces whose connecting line leaves both into the material,
within 37° of the inward normal: so the two legs of a rounded corner are none, and the gap of a
notch (which lies outside) is none.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.model.curve_table import CurveTable
from screenapp.model.meetings import close_pairs, closest_approaches, following_pieces
from screenapp.model.part import Point
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]
Bools = NDArray[np.bool_]

FACING = 0.8
"""Least cosine between a ligament and the inward normals at its ends."""


@dataclass(frozen=True)
class Ligament:
    """A narrow place.

    Attributes:
        width: [mm].
        ends: its two ends on the boundary [mm].
        between: ids of the features (edge, fillet corner or hole) at its ends.
    """

    width: float
    ends: tuple[Point, Point]
    between: tuple[str, str]

    @property
    def at(self) -> Point:
        """Its middle [mm]."""
        (ax, ay), (bx, by) = self.ends
        return (ax + bx) / 2.0, (ay + by) / 2.0


def ligaments(shape: Shape, below: float, table: CurveTable | None = None) -> list[Ligament]:
    """All ligaments narrower than `below` [mm], narrowest first; one for each pair of features."""
    table = table if table is not None else shape.table
    i, j = close_pairs(table, below)
    following = following_pieces(shape)
    plain = np.array([c.kind == "hole" for c in shape.curves])
    apart = (following[i] != j) & (following[j] != i)
    apart &= ~plain[i] | (table.loop[i] != table.loop[j])  # across a round hole is no material
    i, j = i[apart], j[apart]
    near = closest_approaches(table, i, j)
    a, b, gap = i[near.pair], j[near.pair], near.gap
    keep = np.flatnonzero((gap < below) & (gap > 1e-9 * shape.size))
    a, b, gap = a[keep], b[keep], gap[keep]
    p, q = near.p_i[keep], near.p_j[keep]
    way = (q - p) / gap[:, None]
    faces = _facing(table, following, a, near.t_i[keep], way)
    faces &= _facing(table, following, b, near.t_j[keep], -way)
    order = np.flatnonzero(faces)[np.argsort(gap[faces], kind="stable")]
    found: dict[tuple[str, str], Ligament] = {}
    for k in order:
        one, two = shape.curves[int(a[k])].feature, shape.curves[int(b[k])].feature
        key = (one, two) if one <= two else (two, one)
        if one == two or key in found:
            continue
        ends = (float(p[k, 0]), float(p[k, 1])), (float(q[k, 0]), float(q[k, 1]))
        found[key] = Ligament(float(gap[k]), ends, (one, two))
    return list(found.values())


def narrowest_ligament(shape: Shape) -> Ligament | None:
    """The narrowest place of the part; None where no two pieces face each other (a disc)."""
    table = shape.table
    reach = shape.size / 50.0
    while reach < 4.0 * shape.size:
        found = ligaments(shape, reach, table)
        if found:
            return found[0]
        reach *= 3.0
    return None


def local_thickness(shape: Shape, points: Floats, inward: Floats) -> Floats:
    """Length [mm] of the straight way through the material from boundary points, (n,).

    Args:
        points: on the boundary [mm], (n, 2).
        inward: unit normals into the material there, (n, 2).

    The way ends at the first boundary it meets; infinite if it meets none.
    """
    table = shape.table
    least = 1e-7 * shape.size
    widths = np.full(len(points), np.inf)
    step = max(1, 500_000 // max(1, len(table)))
    for first in range(0, len(points), step):
        rows = slice(first, first + step)
        hits = _ray_hits(table, points[rows], inward[rows])
        widths[rows] = np.where(hits > least, hits, np.inf).min(axis=(1, 2))
    return widths


def _ray_hits(table: CurveTable, points: Floats, ways: Floats) -> Floats:
    """Distances from each point along its way to each curve, (n, m, 2); NaN-free, else infinite."""
    p, u = points[:, None, :], ways[:, None, :]
    d = table.end - table.start
    gap = table.start - p
    cross = u[..., 0] * d[:, 1] - u[..., 1] * d[:, 0]
    safe = np.where(np.abs(cross) > 1e-12 * np.hypot(*d.T), cross, np.inf)
    along = (gap[..., 0] * d[:, 1] - gap[..., 1] * d[:, 0]) / safe
    share = (gap[..., 0] * u[..., 1] - gap[..., 1] * u[..., 0]) / safe
    straight = np.isfinite(safe) & (share >= -1e-12) & (share <= 1.0 + 1e-12) & ~table.arc
    hits = np.full((*cross.shape, 2), np.inf)
    hits[..., 0] = np.where(straight, along, np.inf)
    rel = p - table.centre
    middle = -np.sum(rel * u, axis=-1)
    half2 = table.radius**2 - np.sum(rel * rel, axis=-1) + middle**2
    half = np.sqrt(np.maximum(half2, 0.0))
    for k, sign in enumerate((-1.0, 1.0)):
        s = middle + sign * half
        x = rel + s[..., None] * u
        turned = (np.arctan2(x[..., 1], x[..., 0]) - table.begin) * np.sign(table.sweep)
        on = turned % (2.0 * np.pi) <= np.abs(table.sweep) + 1e-12
        hits[..., k] = np.where(table.arc & (half2 >= 0.0) & on, s, hits[..., k])
    return hits


def _facing(table: CurveTable, following: Ints, which: Ints, t: Floats, way: Floats) -> Bools:
    """Whether a line leaves the boundary into the material, near enough to the normal.

    At a re-entrant corner every direction counts from which neither edge comes nearer.
    """
    tangent = table.tangents(which, t)
    near_normal = way[:, 1] * tangent[:, 0] - way[:, 0] * tangent[:, 1] >= FACING
    leading = np.argsort(following)  # the piece before each piece
    before = np.where(t == 0.0, leading[which], which)
    after = np.where(t == 1.0, following[which], which)
    u, v = table.ways_out[before], table.ways_in[after]
    enters = u[:, 0] * v[:, 1] - u[:, 1] * v[:, 0] < -1e-6
    farther = (np.sum(way * v, axis=1) <= 1e-9) & (np.sum(way * u, axis=1) >= -1e-9)
    at_corner = (t == 0.0) | (t == 1.0)
    return np.asarray(near_normal | (at_corner & enters & farther))
