"""Where curves meet and where they come closest: exact, for many pairs of curves at once.

Pairs are two index arrays `i`, `j` into a `CurveTable`.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import shapely
from numpy.typing import NDArray

from screenapp.model.curve_table import CurveTable
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]
Bools = NDArray[np.bool_]


@dataclass(frozen=True, eq=False)
class Approaches:
    """Candidates for the closest approach of pairs of curves.

    Attributes:
        pair: index into the pairs asked for, (m,).
        t_i, t_j: parameters on both curves, (m,).
        p_i, p_j: the two points [mm], (m, 2).
    """

    pair: Ints
    t_i: Floats
    t_j: Floats
    p_i: Floats
    p_j: Floats

    @property
    def gap(self) -> Floats:
        """Distance between the two points of each candidate [mm], (m,)."""
        return np.asarray(np.hypot(*(self.p_j - self.p_i).T))


def following_pieces(shape: Shape) -> Ints:
    """The piece that follows each piece on its loop, (n,)."""
    following = np.arange(1, len(shape.curves) + 1)
    for first, last in shape.loops:
        following[last - 1] = first
    return following


def close_pairs(table: CurveTable, within: float) -> tuple[Ints, Ints]:
    """Pairs i < j of curves whose bounding boxes come nearer than `within` [mm]."""
    boxes = table.boxes
    half = within / 2.0
    grown = shapely.box(
        boxes[:, 0] - half, boxes[:, 1] - half, boxes[:, 2] + half, boxes[:, 3] + half
    )
    i, j = shapely.STRtree(grown).query(grown)
    keep = i < j
    return i[keep].astype(np.int64), j[keep].astype(np.int64)


def closest_approaches(table: CurveTable, i: Ints, j: Ints) -> Approaches:
    """Six candidates for each pair, among them every local closest approach without a crossing.

    A local closest approach of two segments or arcs has an end of one of them, or lies on the line
    through the centre of an arc that is normal to the other curve.
    """
    n = len(i)
    t_i: list[Floats] = []
    t_j: list[Floats] = []
    for swap in (False, True):
        a, b = (j, i) if swap else (i, j)
        zero, one = np.zeros(n), np.ones(n)
        # for a segment b this third start is the middle of b seen from a: harmless
        middle = np.where(
            table.arc[b, None], table.centre[b], 0.5 * (table.start[b] + table.end[b])
        )
        for t_a in (zero, one, table.nearest(a, middle)):
            t_b = table.nearest(b, table.points(a, t_a))
            t_i.append(t_b if swap else t_a)
            t_j.append(t_a if swap else t_b)
    pair = np.tile(np.arange(n), 6)
    ti, tj = np.concatenate(t_i), np.concatenate(t_j)
    return Approaches(pair, ti, tj, table.points(i[pair], ti), table.points(j[pair], tj))


def intersections(table: CurveTable, i: Ints, j: Ints) -> tuple[Ints, Floats]:
    """Points in which pairs of curves cross or touch: index of the pair, (m,), and point, (m, 2).

    Curves that lie upon each other give no point; their ends show in `closest_approaches`.
    """
    arc_i, arc_j = table.arc[i], table.arc[j]
    found: list[tuple[Ints, Floats]] = []
    both_straight = np.flatnonzero(~arc_i & ~arc_j)
    found += _line_line(table, i, j, both_straight)
    found += _line_circle(table, i, j, np.flatnonzero(~arc_i & arc_j))
    found += _line_circle(table, j, i, np.flatnonzero(arc_i & ~arc_j))
    found += _circle_circle(table, i, j, np.flatnonzero(arc_i & arc_j))
    pair = np.concatenate([f[0] for f in found])
    points = np.concatenate([f[1] for f in found])
    return pair, points


def _line_line(table: CurveTable, i: Ints, j: Ints, rows: Ints) -> list[tuple[Ints, Floats]]:
    p, d = table.start[i[rows]], table.end[i[rows]] - table.start[i[rows]]
    q, e = table.start[j[rows]], table.end[j[rows]] - table.start[j[rows]]
    cross = d[:, 0] * e[:, 1] - d[:, 1] * e[:, 0]
    scale = np.hypot(*d.T) * np.hypot(*e.T)
    skew = np.abs(cross) > 1e-12 * scale
    safe = np.where(skew, cross, 1.0)
    gap = q - p
    s = (gap[:, 0] * e[:, 1] - gap[:, 1] * e[:, 0]) / safe
    t = (gap[:, 0] * d[:, 1] - gap[:, 1] * d[:, 0]) / safe
    hit = skew & (s >= 0.0) & (s <= 1.0) & (t >= 0.0) & (t <= 1.0)
    return [(rows[hit], (p + s[:, None] * d)[hit])]


def _line_circle(
    table: CurveTable, line: Ints, circle: Ints, rows: Ints
) -> list[tuple[Ints, Floats]]:
    a, b = line[rows], circle[rows]
    d = table.end[a] - table.start[a]
    length = np.hypot(*d.T)
    unit = d / np.maximum(length, 1e-300)[:, None]
    gap = table.start[a] - table.centre[b]
    along = -np.sum(gap * unit, axis=1)
    foot = gap + along[:, None] * unit
    half2 = table.radius[b] ** 2 - np.sum(foot * foot, axis=1)
    half = np.sqrt(np.maximum(half2, 0.0))
    found = []
    for sign in (-1.0, 1.0):
        s = along + sign * half
        point = table.start[a] + s[:, None] * unit
        hit = (half2 >= 0.0) & (s >= 0.0) & (s <= length) & _on_arc(table, b, point)
        found.append((rows[hit], point[hit]))
    return found


def _circle_circle(table: CurveTable, i: Ints, j: Ints, rows: Ints) -> list[tuple[Ints, Floats]]:
    a, b = i[rows], j[rows]
    gap = table.centre[b] - table.centre[a]
    far = np.hypot(*gap.T)
    apart = far > 1e-12 * (table.radius[a] + table.radius[b])
    safe = np.where(apart, far, 1.0)
    along = (far**2 + table.radius[a] ** 2 - table.radius[b] ** 2) / (2.0 * safe)
    half2 = table.radius[a] ** 2 - along**2
    half = np.sqrt(np.maximum(half2, 0.0))
    unit = gap / safe[:, None]
    across = np.stack([-unit[:, 1], unit[:, 0]], axis=1)
    found = []
    for sign in (-1.0, 1.0):
        point = table.centre[a] + along[:, None] * unit + (sign * half)[:, None] * across
        hit = apart & (half2 >= 0.0) & _on_arc(table, a, point) & _on_arc(table, b, point)
        found.append((rows[hit], point[hit]))
    return found


def _on_arc(table: CurveTable, which: Ints, points: Floats) -> Bools:
    """Whether points of an arc's circle lie on the arc itself."""
    nearest = table.points(which, table.nearest(which, points))
    return np.asarray(np.hypot(*(points - nearest).T) <= 1e-9 * table.radius[which])
