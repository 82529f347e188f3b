"""Where a click lands: on a point, on an edge, on the grid, or just where it is."""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from functools import lru_cache
from typing import Literal

import numpy as np
from PySide6.QtCore import QLineF, QPointF, QRectF, Qt
from PySide6.QtGui import QColor, QPainter, QPen

from screenapp.model.curves import Arc
from screenapp.model.part import DisplayUnits, Hole, Loop, LoopHole, Point, SlotHole
from screenapp.window import theme
from screenapp.window.board.drawn_part import DrawnPart
from screenapp.window.board.frame import Floats, Frame
from screenapp.window.board.grid import grid_step
from screenapp.window.board.ring import Ring

SnapKind = Literal["none", "grid", "corner", "centre", "middle", "edge", "start"]

POINT_REACH_PX, EDGE_REACH_PX = 10.0, 7.0
"""How far a point and an edge draw the cursor [px]."""


@dataclass(frozen=True)
class Snap:
    """Where a click would land.

    Attributes:
        kind: what drew it there.
        at: the place [mm].
        id: id of the corner, edge or hole; "" for grid and nothing.
        along: direction of the edge there [rad], for the sign.
    """

    kind: SnapKind
    at: Point
    id: str = ""
    along: float = 0.0


def snap(
    drawn: DrawnPart,
    frame: Frame,
    at: Point,
    units: DisplayUnits,
    extra: Iterable[Snap] = (),
    without: frozenset[str] = frozenset(),
    passes_over: frozenset[SnapKind] = frozenset(),
) -> Snap:
    """Where a click at `at` lands: points first, then edges, then the grid.

    Args:
        drawn: the part.
        frame: the present zoom.
        at: the cursor [mm].
        units: the grid is round in these.
        extra: further points to offer, e.g. those of a chain being drawn.
        without: ids that must not draw the cursor, e.g. of what is being dragged.
        passes_over: kinds of point that must not.
    """
    reach = POINT_REACH_PX / frame.scale
    points, places = snap_points(drawn)
    near = np.flatnonzero(np.hypot(*(places - at).T) <= reach) if len(points) else ()
    offered = [*extra, *(points[i] for i in near if points[i].id not in without)]
    offered = [
        one for one in offered if one.kind not in passes_over and math.dist(one.at, at) <= reach
    ]
    if offered:
        return min(offered, key=lambda one: math.dist(one.at, at))
    return snap_to_edge(drawn, at, EDGE_REACH_PX / frame.scale, without) or snap_to_grid(
        frame, at, units
    )


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


def draw_snap(painter: QPainter, frame: Frame, found: Snap) -> None:
    """The sign of a snap: each kind has its own form."""
    if found.kind == "none":
        return
    p = frame.px(found.at)
    colour = QColor(theme.current().accent)
    pen = QPen(colour, 2.0)
    pen.setCapStyle(Qt.PenCapStyle.FlatCap)
    painter.setPen(pen)
    painter.setBrush(Qt.BrushStyle.NoBrush)
    if found.kind == "grid":
        pen.setWidthF(1.0)
        painter.setPen(pen)
        painter.drawLines([_line(p, -5, 0, 5, 0), _line(p, 0, -5, 0, 5)])
    elif found.kind == "corner":  # four brackets round the point
        for sx in (-1, 1):
            for sy in (-1, 1):
                x, y = 7 * sx, 7 * sy
                painter.drawLines([_line(p, x, y, x - 4 * sx, y), _line(p, x, y, x, y - 4 * sy)])
    elif found.kind == "centre":
        painter.drawEllipse(p, 7.0, 7.0)
        painter.fillRect(QRectF(p.x() - 1.5, p.y() - 1.5, 3, 3), colour)
    elif found.kind == "middle":  # two bars across, with a gap for the edge
        c, s = math.cos(found.along), -math.sin(found.along)
        for sign in (-1, 1):
            foot = QPointF(p.x() + 3 * sign * c, p.y() + 3 * sign * s)
            painter.drawLine(_line(foot, -7 * s, 7 * c, 7 * s, -7 * c))
    elif found.kind == "edge":  # a thick dash on the edge, with a dot
        c, s = math.cos(found.along), -math.sin(found.along)
        pen.setWidthF(4.0)
        painter.setPen(pen)
        painter.drawLine(_line(p, -8 * c, -8 * s, 8 * c, 8 * s))
    else:  # "start": closes the chain
        painter.setBrush(colour)
        painter.drawEllipse(p, 4.0, 4.0)
        painter.setBrush(Qt.BrushStyle.NoBrush)
        painter.drawEllipse(p, 9.0, 9.0)


def _line(p: QPointF, x0: float, y0: float, x1: float, y1: float) -> QLineF:
    return QLineF(p.x() + x0, p.y() + y0, p.x() + x1, p.y() + y1)
