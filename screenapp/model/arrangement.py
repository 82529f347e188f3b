"""One closed region cut by another or joined with it, exactly: lines stay lines, arcs stay arcs.

The first region is bounded by loops with the material on their left (outline counter-clockwise,
holes clockwise), the second by one loop, counter-clockwise.  Their curves are split where they
meet; each piece is kept or dropped by the side on which it lies of the other region; what is kept
is chained to loops again.
"""

from __future__ import annotations

import itertools
import math
from collections import defaultdict
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from screenapp.model.boundary_curve import BoundaryCurve, area_under
from screenapp.model.curve_table import CurveTable
from screenapp.model.curves import Curve
from screenapp.model.meetings import close_pairs, intersections
from screenapp.model.part import Point

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

Operation = Literal["cut", "join"]

NEAR = 1e-7
"""Points nearer than this share of the whole size are the same."""


@dataclass(frozen=True)
class Side:
    """A piece of one of the curves that were given.

    Attributes:
        source: number of the curve, those of the first region's loops first.
        t0, t1: where on it the piece begins and ends, as it is run: t0 > t1 is backwards.
        curve: the piece as it is run, material on its left.
    """

    source: int
    t0: float
    t1: float
    curve: Curve


@dataclass(frozen=True)
class Ring:
    """A loop of the result; a hole if its area [mm²] is negative."""

    sides: tuple[Side, ...]
    area: float


def combine(
    first: Sequence[Sequence[Curve]], second: Sequence[Curve], operation: Operation
) -> list[Ring]:
    """The loops of the first region with the second cut out of it, or joined to it.

    Args:
        first: its loops; the outline comes first.
        second: the loop of the other region.
        operation: "cut" or "join".
    """
    loops = [*first, second]
    curves = [curve for loop in loops for curve in loop]
    numbers = [n for n, loop in enumerate(loops) for _ in loop]
    pieces = (BoundaryCurve("", "edge", c, n) for c, n in zip(curves, numbers, strict=True))
    table = CurveTable.of(tuple(pieces))
    near = NEAR * float(np.ptp(table.boxes.reshape(-1, 2), axis=0).max())
    i, j = close_pairs(table, near)
    mixed = (table.loop[i] == len(first)) != (table.loop[j] == len(first))
    i, j = i[mixed], j[mixed]
    sides = _split(table, curves, _meeting_parameters(table, i, j, near))
    upon = _lying_upon(table, sides, i, j, near)
    kept = _kept(table, sides, upon, len(first), operation)
    return [
        Ring(tuple(ring), sum(area_under(s.curve) for s in ring)) for ring in _chain(kept, near)
    ]


def meets(first: Sequence[Curve], second: Sequence[Curve]) -> bool:
    """Whether two loops cross, touch or lie upon one another somewhere."""
    pieces = [BoundaryCurve("", "edge", c, 0) for c in first]
    pieces += [BoundaryCurve("", "edge", c, 1) for c in second]
    table = CurveTable.of(tuple(pieces))
    near = NEAR * float(np.ptp(table.boxes.reshape(-1, 2), axis=0).max())
    i, j = close_pairs(table, near)
    mixed = table.loop[i] != table.loop[j]
    return bool(_meeting_parameters(table, i[mixed], j[mixed], near))


def inside(ring: Sequence[Curve], points: Sequence[Point]) -> list[bool]:
    """Which points lie inside a closed ring of curves."""
    table = CurveTable.of(tuple(BoundaryCurve("", "edge", c, 0) for c in ring))
    return [bool(v) for v in table.inside(0, np.asarray(points, dtype=float).reshape(-1, 2))]


def _meeting_parameters(table: CurveTable, i: Ints, j: Ints, near: float) -> dict[int, list[float]]:
    """Where on each curve it meets others: crossings, and ends of one that lie on the other."""
    pair, points = intersections(table, i, j)
    which = [np.concatenate([i[pair], j[pair]])]
    where = [np.concatenate([points, points])]
    for one, other in ((i, j), (j, i)):
        for ends in (table.start[other], table.end[other]):
            foot = table.points(one, table.nearest(one, ends))
            close = np.hypot(*(foot - ends).T) <= near
            which += [one[close], other[close]]
            where += [ends[close], ends[close]]
    curves, places = np.concatenate(which), np.concatenate(where)
    found: dict[int, list[float]] = defaultdict(list)
    for k, t in zip(curves.tolist(), table.nearest(curves, places).tolist(), strict=True):
        found[k].append(t)
    return dict(found)


def _split(table: CurveTable, curves: list[Curve], cuts: dict[int, list[float]]) -> list[Side]:
    """Every curve in the pieces between its meeting places."""
    sides: list[Side] = []
    lengths = table.lengths
    size = float(np.ptp(table.boxes.reshape(-1, 2), axis=0).max())
    for k, curve in enumerate(curves):
        if k not in cuts:
            sides.append(Side(k, 0.0, 1.0, curve))
            continue
        least = 2.0 * NEAR * size / max(float(lengths[k]), 1e-300)
        stops = [0.0]
        for t in sorted(cuts[k]):
            if t - stops[-1] > least and 1.0 - t > least:
                stops.append(t)
        stops.append(1.0)
        whole = len(stops) == 2
        for t0, t1 in itertools.pairwise(stops):
            sides.append(Side(k, t0, t1, curve if whole else curve.part(t0, t1)))
    return sides


def _middles(sides: Sequence[Side]) -> Floats:
    return np.array([s.curve.point(0.5) for s in sides], dtype=float).reshape(-1, 2)


def _lying_upon(
    table: CurveTable, sides: list[Side], i: Ints, j: Ints, near: float
) -> dict[int, int]:
    """Sides (by number) that lie upon a curve of the other region: 1 run alike, -1 against."""
    beside: dict[int, list[int]] = defaultdict(list)
    for a, b in zip(i.tolist(), j.tolist(), strict=True):
        beside[a].append(b)
        beside[b].append(a)
    rows = [(n, b) for n, side in enumerate(sides) for b in beside.get(side.source, ())]
    if not rows:
        return {}
    mine, other = np.array([n for n, _ in rows]), np.array([b for _, b in rows])
    tested = [sides[n] for n in mine]
    points = _middles(tested)
    t = table.nearest(other, points)
    foot = table.points(other, t)
    own = np.array([s.curve.tangent(0.5) for s in tested])
    there = table.tangents(other, t)
    cross = own[:, 0] * there[:, 1] - own[:, 1] * there[:, 0]
    lies = (np.hypot(*(foot - points).T) <= 2.0 * near) & (np.abs(cross) < 1e-4)
    ways = np.sign(np.sum(own * there, axis=1)).astype(int)
    return {int(mine[k]): int(ways[k]) for k in np.flatnonzero(lies)}


def _kept(
    table: CurveTable, sides: list[Side], upon: dict[int, int], second: int, operation: Operation
) -> list[Side]:
    """The sides that bound the result, run with the material on their left."""
    loop = table.loop[[s.source for s in sides]]
    middles = _middles(sides)
    within_second = table.inside(second, middles)
    within_first = table.inside(0, middles)
    for hole in range(1, second):
        box = table.boxes[table.loop == hole]
        low, high = box[:, :2].min(axis=0), box[:, 2:].max(axis=0)
        near = np.flatnonzero(np.all((middles >= low) & (middles <= high), axis=1))
        within_first[near] &= ~table.inside(hole, middles[near])
    kept: list[Side] = []
    for n, side in enumerate(sides):
        of_second = loop[n] == second
        if n in upon:  # one of the two that lie there is enough
            if not of_second and upon[n] == (1 if operation == "join" else -1):
                kept.append(side)
        elif not of_second:
            if not within_second[n]:
                kept.append(side)
        elif operation == "join":
            if not within_first[n]:
                kept.append(side)
        elif within_first[n]:
            kept.append(Side(side.source, side.t1, side.t0, side.curve.reversed()))
    return kept


def _chain(sides: list[Side], near: float) -> list[list[Side]]:
    """The sides as closed rings; where several lead on, the one farthest to the left is taken."""
    nodes = _Nodes(4.0 * near)
    begins: dict[int, list[int]] = defaultdict(list)
    ends: list[int] = []
    for n, side in enumerate(sides):
        begins[nodes.number(side.curve.start)].append(n)
        ends.append(nodes.number(side.curve.end))
    free = set(range(len(sides)))
    rings: list[list[Side]] = []
    for n in range(len(sides)):
        if n not in free:
            continue
        ring = [n]
        free.discard(n)
        while True:
            ways = [m for m in begins[ends[ring[-1]]] if m in free or m == ring[0]]
            if not ways:
                break
            follow = max(ways, key=lambda m: _turn(sides[ring[-1]].curve, sides[m].curve))
            if follow == ring[0]:
                rings.append([sides[m] for m in ring])
                break
            ring.append(follow)
            free.discard(follow)
    return rings


def _turn(arriving: Curve, leaving: Curve) -> float:
    """How far one turns to the left from one curve to the next [rad]."""
    u, v = arriving.tangent(1.0), leaving.tangent(0.0)
    return math.atan2(float(u[0] * v[1] - u[1] * v[0]), float(u[0] * v[0] + u[1] * v[1]))


class _Nodes:
    """Numbers for points; those within `reach` of one another share theirs."""

    def __init__(self, reach: float) -> None:
        self._reach = reach
        self._cells: dict[tuple[int, int], list[tuple[Point, int]]] = defaultdict(list)
        self._count = 0

    def number(self, p: Point) -> int:
        """The number of a point."""
        cx, cy = (math.floor(v / (2.0 * self._reach)) for v in p)
        for x in (cx - 1, cx, cx + 1):
            for y in (cy - 1, cy, cy + 1):
                for at, number in self._cells.get((x, y), ()):
                    if math.dist(at, p) <= self._reach:
                        return number
        self._cells[(cx, cy)].append((p, self._count))
        self._count += 1
        return self._count - 1
