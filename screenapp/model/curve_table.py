"""Many boundary curves as arrays, for questions that go over all of them at once.

Index arrays pick curves out of the table; points are (n, 2) [mm].  All answers are exact for
segments and circular arcs: nothing is flattened.
"""

from __future__ import annotations

from dataclasses import dataclass, fields
from functools import cached_property
from typing import TYPE_CHECKING, Any

import numpy as np
import shapely
from numpy.typing import NDArray

from screenapp.model.boundary_curve import BoundaryCurve
from screenapp.model.curves import Arc

if TYPE_CHECKING:
    from screenapp.model.shape import Shape

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]
Bools = NDArray[np.bool_]

TWO_PI = 2.0 * np.pi


def alike_at_ends(
    were: tuple[BoundaryCurve, ...], are: tuple[BoundaryCurve, ...]
) -> tuple[int, int]:
    """How many curves are the same records at the beginning and, of the rest, at the end."""
    most = min(len(were), len(are))
    head = next((i for i, (a, b) in enumerate(zip(were, are, strict=False)) if a is not b), most)
    rest = most - head
    pairs = zip(reversed(were), reversed(are), strict=False)
    tail = next((i for i, (a, b) in enumerate(pairs) if a is not b), rest)
    return head, min(tail, rest)


@dataclass(frozen=True, eq=False)
class CurveTable:
    """Curves as arrays of length n.

    Attributes:
        arc: whether the curve is an arc.
        start, end: its ends [mm], (n, 2).
        centre, radius: of arcs [mm]; zero and one for segments.
        begin, sweep: start angle and signed sweep of arcs [rad]; zero and one for segments.
        loop: loop it belongs to.
    """

    arc: Bools
    start: Floats
    end: Floats
    centre: Floats
    radius: Floats
    begin: Floats
    sweep: Floats
    loop: Ints

    @classmethod
    def of(cls, curves: tuple[BoundaryCurve, ...]) -> CurveTable:
        """The table of boundary pieces, in their order."""
        rows = [
            (1.0, *c.centre, c.radius, c.begin, c.sweep, 0.0, 0.0, 0.0, 0.0, piece.loop)
            if isinstance(c := piece.curve, Arc)
            else (0.0, 0.0, 0.0, 1.0, 0.0, 1.0, *c.start, *c.end, piece.loop)
            for piece in curves
        ]
        data = np.array(rows, dtype=float).reshape(len(rows), 11)
        arc = data[:, 0] > 0.0
        centre, radius, begin, sweep = data[:, 1:3], data[:, 3], data[:, 4], data[:, 5]
        start, end = data[:, 6:8].copy(), data[:, 8:10].copy()
        for ends, angle in ((start, begin), (end, begin + sweep)):
            on_circle = centre + radius[:, None] * np.stack([np.cos(angle), np.sin(angle)], axis=1)
            ends[arc] = on_circle[arc]
        return cls(arc, start, end, centre, radius, begin, sweep, data[:, 10].astype(np.int64))

    @classmethod
    def patched(
        cls, table: CurveTable, are: tuple[BoundaryCurve, ...], common: tuple[int, int]
    ) -> CurveTable:
        """The table of `are`, of which the first and last so many are as in another table."""
        head, tail = common
        made = cls.of(are[head : len(are) - tail])
        kept = len(table) - tail

        def joined(old: NDArray[Any], new: NDArray[Any]) -> NDArray[Any]:
            return np.concatenate([old[:head], new, old[kept:]])

        whole = cls(*(joined(getattr(table, f.name), getattr(made, f.name)) for f in fields(cls)))
        if "boxes" in table.__dict__:
            whole.__dict__["boxes"] = joined(table.boxes, made.boxes)
        return whole

    def __len__(self) -> int:
        return len(self.arc)

    @property
    def lengths(self) -> Floats:
        """Length of each curve [mm]."""
        chord = np.hypot(*(self.end - self.start).T)
        return np.where(self.arc, self.radius * np.abs(self.sweep), chord)

    @cached_property
    def boxes(self) -> Floats:
        """Bounding box of each curve: smallest x, y, largest x, y [mm], (n, 4)."""
        low = np.minimum(self.start, self.end)
        high = np.maximum(self.start, self.end)
        for quarter in range(4):  # the four points where a circle is widest
            angle = quarter * np.pi / 2.0
            reached = self.arc & self._sweeps_over(np.arange(len(self)), np.full(len(self), angle))
            way = np.array([np.cos(angle), np.sin(angle)])
            extreme = self.centre + self.radius[:, None] * way
            low = np.where(reached[:, None], np.minimum(low, extreme), low)
            high = np.where(reached[:, None], np.maximum(high, extreme), high)
        return np.concatenate([low, high], axis=1)

    def loop_boxes(self, shape: Shape) -> Floats:
        """Bounding box of each loop of the shape that the table is of, (n_loops, 4)."""
        boxes = self.boxes
        starts = [first for first, _ in shape.loops]
        low = np.minimum.reduceat(boxes[:, :2], starts, axis=0)
        high = np.maximum.reduceat(boxes[:, 2:], starts, axis=0)
        return np.concatenate([low, high], axis=1)

    def points(self, which: Ints, t: Floats) -> Floats:
        """Points [mm] of the picked curves at parameters `t` in [0, 1], (k, 2)."""
        angle = self.begin[which] + t * self.sweep[which]
        round_ = self.centre[which] + self.radius[which, None] * np.stack(
            [np.cos(angle), np.sin(angle)], axis=-1
        )
        straight = self.start[which] * (1.0 - t[:, None]) + self.end[which] * t[:, None]
        return np.asarray(np.where(self.arc[which, None], round_, straight))

    def tangents(self, which: Ints, t: Floats) -> Floats:
        """Unit tangents of the picked curves at parameters `t`, (k, 2)."""
        angle = self.begin[which] + t * self.sweep[which]
        round_ = np.sign(self.sweep[which])[:, None] * np.stack(
            [-np.sin(angle), np.cos(angle)], axis=-1
        )
        d = self.end[which] - self.start[which]
        straight = d / np.maximum(np.hypot(*d.T), 1e-300)[:, None]
        return np.asarray(np.where(self.arc[which, None], round_, straight))

    @cached_property
    def ways_in(self) -> Floats:
        """Unit tangent of each curve where it begins, (n, 2)."""
        return self.tangents(np.arange(len(self)), np.zeros(len(self)))

    @cached_property
    def ways_out(self) -> Floats:
        """Unit tangent of each curve where it ends, (n, 2)."""
        return self.tangents(np.arange(len(self)), np.ones(len(self)))

    def nearest(self, which: Ints, points: Floats) -> Floats:
        """Parameters in [0, 1] of the points of the picked curves that lie nearest, (k,)."""
        d = self.end[which] - self.start[which]
        along = np.sum((points - self.start[which]) * d, axis=1)
        straight = np.clip(along / np.maximum(np.sum(d * d, axis=1), 1e-300), 0.0, 1.0)
        gap = points - self.centre[which]
        turned = self._turned(which, np.arctan2(gap[:, 1], gap[:, 0]))
        span = np.abs(self.sweep[which])
        nearer_end = np.where(turned - span < TWO_PI - turned, 1.0, 0.0)
        round_ = np.where(turned <= span, turned / span, nearer_end)
        return np.asarray(np.where(self.arc[which], round_, straight))

    def inside(self, loop: int, points: Floats) -> Bools:
        """Which points lie inside a sound loop, whichever way it runs, (k,).

        Away from the arcs the polygon of the chords decides; beside them the winding number.
        """
        mine = np.flatnonzero(self.loop == loop)
        if len(mine) * len(points) < 20_000:
            return self._wound_by(mine, points)
        ring = shapely.polygons(self.start[mine])
        shapely.prepare(ring)
        within = np.asarray(shapely.contains_xy(ring, points), dtype=bool)
        arcs = mine[self.arc[mine]]
        if len(arcs):
            boxes = shapely.box(*self.boxes[arcs].T)
            near, _ = shapely.STRtree(boxes).query(shapely.points(points))
            beside = np.unique(near)
            within[beside] = self._wound_by(mine, points[beside])
        return within

    def _wound_by(self, mine: Ints, points: Floats) -> Bools:
        """Whether the curves `mine` wind round each point.

        The winding number is the sum of the angles under which a point sees the chords, and one
        turn more for each arc whose circular segment (between arc and chord) holds the point.
        """
        winding = np.zeros(len(points))
        step = max(1, 500_000 // max(1, len(mine)))
        for first in range(0, len(points), step):
            p = points[first : first + step, None, :]
            a, b = self.start[mine] - p, self.end[mine] - p
            cross = a[..., 0] * b[..., 1] - a[..., 1] * b[..., 0] + 0.0  # no negative zeros
            dot = a[..., 0] * b[..., 0] + a[..., 1] * b[..., 1]
            total = np.arctan2(cross, dot).sum(axis=1) / TWO_PI
            arcs = self.arc[mine]
            way = np.sign(self.sweep[mine[arcs]])
            beyond = np.where(way > 0.0, cross[:, arcs] < 0.0, cross[:, arcs] >= 0.0)
            centre, radius = self.centre[mine[arcs]], self.radius[mine[arcs]]
            within = np.sum((p - centre) ** 2, axis=2) < radius**2
            winding[first : first + step] = total + np.sum(
                np.where(within & beyond, way, 0.0), axis=1
            )
        return np.abs(winding) > 0.5

    def _turned(self, which: Ints, angles: Floats) -> Floats:
        """How far each picked arc turns before it points at `angles` [rad], in [0, 2π)."""
        turned = (angles - self.begin[which]) * np.sign(self.sweep[which]) % TWO_PI
        return np.where(turned > TWO_PI - 1e-12, 0.0, turned)

    def _sweeps_over(self, which: Ints, angles: Floats) -> Bools:
        return self._turned(which, angles) <= np.abs(self.sweep[which])
