"""Where a click lands: on a point, on an edge, in line with a point, on the grid, or just there."""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator
from functools import lru_cache

import numpy as np

from screenapp.model.curves import Arc
from screenapp.model.part import DisplayUnits, Hole, Loop, LoopHole, Point, SlotHole
from screenapp.window.board.drawn_part import DrawnPart
from screenapp.window.board.frame import Floats, Frame
from screenapp.window.board.grid import grid_step
from screenapp.window.board.ring import Ring
from screenapp.window.board.snap_lines import from_origin, level, level_on_edge, meetings
from screenapp.window.board.snap_record import Snap, SnapKind

__all__ = ["Snap", "SnapKind", "neighbours", "snap", "snap_points", "snap_to_grid"]

POINT_REACH_PX, EDGE_REACH_PX, LINE_REACH_PX = 10.0, 7.0, 5.0
"""How far a point, an edge and a level line through a point draw the cursor [px]."""


def snap(
    drawn: DrawnPart,
    frame: Frame,
    at: Point,
    units: DisplayUnits,
    extra: Iterable[Snap] = (),
    without: frozenset[str] = frozenset(),
    passes_over: frozenset[SnapKind] = frozenset(),
    origin: Point | None = None,
) -> Snap:
    """Where a click at `at` lands: points, then edges, then lines through points, then the grid.

    Args:
        drawn: the part.
        frame: the present zoom.
        at: the cursor [mm].
        units: the grid is round in these.
        extra: further points to offer, e.g. those of a chain being drawn.
        without: ids that must not draw the cursor, e.g. of what is being dragged.
        passes_over: kinds of snap that must not.
        origin: the place that a line is being drawn from, for tangents and perpendiculars.
    """
    reach = POINT_REACH_PX / frame.scale
    extra = tuple(extra)
    points, places = snap_points(drawn)
    near = np.flatnonzero(np.hypot(*(places - at).T) <= reach) if len(points) else ()
    offered = [*extra, *(points[i] for i in near if points[i].id not in without)]
    offered += meetings(drawn.index, at, reach, without)
    if origin is not None:
        offered += from_origin(drawn.index, at, reach, origin, without)
    offered = [
        one for one in offered if one.kind not in passes_over and math.dist(one.at, at) <= reach
    ]
    if offered:
        return min(offered, key=lambda one: math.dist(one.at, at))
    anchors = _anchors(drawn, extra, without)
    line_reach = LINE_REACH_PX / frame.scale
    edge = snap_to_edge(drawn, at, EDGE_REACH_PX / frame.scale, without)
    grid = snap_to_grid(frame, at, units)
    if edge is not None:
        return level_on_edge(drawn.index, at, line_reach, anchors, without) or edge
    found = level(at, line_reach, anchors, grid)
    return grid if found is None or found.kind in passes_over else found


def _anchors(
    drawn: DrawnPart, extra: tuple[Snap, ...], without: frozenset[str]
) -> tuple[list[Snap], Floats]:
    """Corners and centres that a place may be level with, and the same as places (n, 2) [mm]."""
    points, places = anchor_points(drawn)
    if without:
        keep = [i for i, p in enumerate(points) if p.id not in without]
        points, places = tuple(points[i] for i in keep), places[keep]
    more = np.array([p.at for p in extra], dtype=float).reshape(-1, 2)
    return [*points, *extra], np.concatenate([places, more])


def snap_to_edge(
    drawn: DrawnPart, at: Point, reach: float, without: frozenset[str] = frozenset()
) -> Snap | None:
    """The nearest place on the exact boundary within `reach` [mm]."""
    foot = drawn.index.nearest(at, without)
    if foot is None or foot.far > reach:
        return None
    dx, dy = foot.piece.curve.tangent(foot.t)
    return Snap("edge", foot.at, foot.piece.feature, math.atan2(dy, dx))


def snap_to_grid(frame: Frame, at: Point, units: DisplayUnits) -> Snap:
    """The nearest crossing of grid lines, written with as few digits as the step needs."""
    step = grid_step(frame.scale, units)
    digits = max(0, 2 - math.floor(math.log10(step)))
    x, y = (round(round(v / step) * step, digits) + 0.0 for v in at)
    return Snap("grid", (x, y))


@lru_cache(maxsize=4)
def anchor_points(drawn: DrawnPart) -> tuple[tuple[Snap, ...], Floats]:
    """The corners and centres among the points of a part, and the same as places (n, 2) [mm]."""
    points, places = snap_points(drawn)
    keep = [i for i, point in enumerate(points) if point.kind != "middle"]
    return tuple(points[i] for i in keep), places[keep]


@lru_cache(maxsize=4)
def snap_points(drawn: DrawnPart) -> tuple[tuple[Snap, ...], Floats]:
    """Corners, centres and middles of a part, and the same as places (n, 2) [mm]."""
    points = [Snap("corner", corner.at, corner.id) for corner in drawn.corners.values()]
    for hole in drawn.cut_holes:
        points += [Snap("centre", at, hole.id) for at in _centres_of(hole)]
    for ring in drawn.loops:
        points += _points_of(ring)
    return tuple(points), np.array([p.at for p in points], dtype=float).reshape(-1, 2)


def _centres_of(hole: Hole) -> Iterator[Point]:
    if isinstance(hole, LoopHole):
        return
    yield hole.centre
    if isinstance(hole, SlotHole):
        half = (hole.length - hole.width) / 2.0
        c, s = math.cos(math.radians(hole.angle)), math.sin(math.radians(hole.angle))
        for sign in (-1.0, 1.0):
            yield hole.centre[0] + sign * half * c, hole.centre[1] + sign * half * s


@lru_cache(maxsize=1024)
def _points_of(ring: Ring) -> list[Snap]:
    """Middles of a ring's edges and centres of its arcs."""
    points: list[Snap] = []
    for piece in ring.pieces:
        if piece.kind == "edge":
            x, y = piece.curve.point(0.5)
            dx, dy = piece.curve.tangent(0.5)
            points.append(Snap("middle", (float(x), float(y)), piece.feature, math.atan2(dy, dx)))
        if piece.kind != "hole" and isinstance(piece.curve, Arc):
            points.append(Snap("centre", piece.curve.centre, piece.feature))
    return points


def neighbours(loop: Loop, corner: str) -> frozenset[str]:
    """A corner and the edges that meet in it: what a drag of it must not snap to."""
    ids = [c.id for c in loop.corners]
    if corner not in ids:
        return frozenset()
    i = ids.index(corner)
    return frozenset({corner, loop.edges[i - 1].id, loop.edges[i].id})
