"""Where a click lands: on a point, on an edge, in line with a point, on the grid, or just there."""

from __future__ import annotations

import math
from collections.abc import Iterable
from functools import lru_cache

import numpy as np

from screenapp.model.curves import Arc, Segment
from screenapp.model.part import DisplayUnits, Hole, Loop, LoopHole, Point, SlotHole
from screenapp.window.board.drawn_part import DrawnPart, loops_of
from screenapp.window.board.frame import Floats, Frame
from screenapp.window.board.grid import grid_step
from screenapp.window.board.identity import kept_by_identity
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
    offered += meetings(drawn.snap_index, at, reach, without)
    if origin is not None:
        offered += from_origin(drawn.snap_index, at, reach, origin, without)
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
        return level_on_edge(drawn.snap_index, at, line_reach, anchors, without) or edge
    found = level(at, line_reach, anchors, grid)
    return grid if found is None or found.kind in passes_over else found


def _anchors(
    drawn: DrawnPart, extra: tuple[Snap, ...], without: frozenset[str]
) -> tuple[list[Snap], Floats]:
    """Corners and centres that a place may be level with, and the same as places (n, 2) [mm]."""
    points, places = _anchors_left(drawn, without)
    more = np.array([p.at for p in extra], dtype=float).reshape(-1, 2)
    return [*points, *extra], np.concatenate([places, more])


@lru_cache(maxsize=4)
def _anchors_left(drawn: DrawnPart, without: frozenset[str]) -> Points:
    """The anchors of a part without some; a drag leaves out the same ones at every move."""
    points, places = anchor_points(drawn)
    keep = [i for i, p in enumerate(points) if p.id not in without]
    return tuple(points[i] for i in keep), places[keep]


def snap_to_edge(
    drawn: DrawnPart, at: Point, reach: float, without: frozenset[str] = frozenset()
) -> Snap | None:
    """The nearest place on the exact boundary within `reach` [mm]."""
    foot = drawn.snap_index.nearest(at, without)
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
    return _joined(
        [
            *(_corners_of(loop) for loop in loops_of(drawn.part)),
            *(_centres_of(hole) for hole in drawn.cut_holes),
            *(_centres_of(zone.form) for zone in drawn.part.zones),
            *(_points_of(ring)[0] for ring in (*drawn.loops, *drawn.zone_rings)),
        ]
    )


@lru_cache(maxsize=4)
def snap_points(drawn: DrawnPart) -> tuple[tuple[Snap, ...], Floats]:
    """Corners, centres and middles of a part, and the same as places (n, 2) [mm]."""
    rings = (*drawn.loops, *drawn.zone_rings)
    return _joined([anchor_points(drawn), *(_points_of(ring)[1] for ring in rings)])


Points = tuple[tuple[Snap, ...], Floats]
"""Places to snap to, also as an array (n, 2) [mm]."""


def _joined(groups: list[Points]) -> Points:
    filled = [group for group in groups if group[0]]
    points = tuple(point for group in filled for point in group[0])
    places = [group[1] for group in filled]
    return points, np.concatenate(places) if places else np.empty((0, 2))


def _group(points: list[Snap]) -> Points:
    return tuple(points), np.array([p.at for p in points], dtype=float).reshape(-1, 2)


@kept_by_identity(64)
def _corners_of(loop: Loop) -> Points:
    return _group([Snap("corner", corner.at, corner.id) for corner in loop.corners])


@kept_by_identity(8192)
def _centres_of(hole: Hole) -> Points:
    """The centre of a round hole; of a slot those of its ends too."""
    if isinstance(hole, LoopHole):
        return _group([])
    places = [hole.centre]
    if isinstance(hole, SlotHole):
        half = (hole.length - hole.width) / 2.0
        c, s = math.cos(math.radians(hole.angle)), math.sin(math.radians(hole.angle))
        for sign in (-1.0, 1.0):
            places.append((hole.centre[0] + sign * half * c, hole.centre[1] + sign * half * s))
    return _group([Snap("centre", at, hole.id) for at in places])


@kept_by_identity(8192)
def _points_of(ring: Ring) -> tuple[Points, Points]:
    """Centres of a ring's arcs, and middles of its edges."""
    centres: list[Snap] = []
    middles: list[Snap] = []
    for piece in ring.pieces:
        if piece.kind == "edge" and isinstance(piece.curve, Segment):
            (ax, ay), (bx, by) = piece.curve.start, piece.curve.end
            middle = (ax + bx) / 2.0, (ay + by) / 2.0
            middles.append(Snap("middle", middle, piece.feature, math.atan2(by - ay, bx - ax)))
        elif piece.kind == "edge":
            x, y = piece.curve.point(0.5)
            dx, dy = piece.curve.tangent(0.5)
            middles.append(Snap("middle", (float(x), float(y)), piece.feature, math.atan2(dy, dx)))
        if piece.kind != "hole" and isinstance(piece.curve, Arc):
            centres.append(Snap("centre", piece.curve.centre, piece.feature))
    return _group(centres), _group(middles)


def neighbours(loop: Loop, corner: str) -> frozenset[str]:
    """A corner and the edges that meet in it: what a drag of it must not snap to."""
    ids = [c.id for c in loop.corners]
    if corner not in ids:
        return frozenset()
    i = ids.index(corner)
    return frozenset({corner, loop.edges[i - 1].id, loop.edges[i].id})
