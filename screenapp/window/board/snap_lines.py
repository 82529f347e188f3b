"""Snaps by construction: where boundaries cross, tangents, perpendiculars, level with a point."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np

from screenapp.model.curves import Arc, Curve, Segment
from screenapp.model.part import Point
from screenapp.model.shape import BoundaryCurve
from screenapp.window.board.boundary_index import BoundaryIndex
from screenapp.window.board.frame import Floats
from screenapp.window.board.snap_record import Snap

Anchors = tuple[list[Snap], Floats]
"""Points to be level with, and their places (n, 2) [mm]."""

_ON = 1e-9
"""How far a place may lie off a piece and still be on it, as a share of the piece's size."""

MOST_NEAR = 12
"""No more pieces than this are crossed with one another at the cursor."""


def meetings(
    index: BoundaryIndex, at: Point, reach: float, without: frozenset[str]
) -> Iterator[Snap]:
    """Where two pieces of the boundary near the cursor cross, apart from their common ends."""
    near = index.within(at, reach, without)[:MOST_NEAR]
    for i, one in enumerate(near):
        for other in near[i + 1 :]:
            for place in crossings(one.curve, other.curve):
                if not _is_end(one.curve, place):
                    yield Snap("intersection", place, one.feature)


def from_origin(
    index: BoundaryIndex, at: Point, reach: float, origin: Point, without: frozenset[str]
) -> Iterator[Snap]:
    """Feet of perpendiculars and tangents from a place onto pieces near the cursor."""
    for piece in index.within(at, reach, without)[:MOST_NEAR]:
        curve = piece.curve
        if isinstance(curve, Segment):
            found = [("perpendicular", _foot(curve, origin))]
        else:
            found = [("perpendicular", p) for p in _radial(curve, origin)]
            found += [("tangent", p) for p in tangent_points(curve, origin)]
        for kind, place in found:
            if math.dist(place, at) <= reach and _on(curve, place) and place != origin:
                yield Snap(kind, place, piece.feature, _direction(piece, place))  # type: ignore[arg-type]


def level(at: Point, reach: float, anchors: Anchors, grid: Snap) -> Snap | None:
    """A place level with a point, above or below one, or both; the grid gives the other number."""
    beside, above = _nearest(at, reach, anchors, 1), _nearest(at, reach, anchors, 0)
    if beside is not None and above is not None:
        place = (above.at[0], beside.at[1])
        return Snap("intersection", place, to=(above.at, beside.at))
    if beside is not None:
        return Snap("horizontal", (grid.at[0], beside.at[1]), beside.id, to=(beside.at,))
    if above is not None:
        return Snap("vertical", (above.at[0], grid.at[1]), above.id, to=(above.at,))
    return None


def level_on_edge(
    index: BoundaryIndex, at: Point, reach: float, anchors: Anchors, without: frozenset[str]
) -> Snap | None:
    """Where the level or upright line through a point crosses a piece under the cursor."""
    far = 1e7
    for axis in (0, 1):
        anchor = _nearest(at, reach, anchors, axis)
        if anchor is None:
            continue
        x, y = anchor.at
        line = (
            Segment((x, y - far), (x, y + far))
            if axis == 0
            else Segment((x - far, y), (x + far, y))
        )
        for piece in index.within(at, reach, without)[:MOST_NEAR]:
            for place in crossings(line, piece.curve):
                exact = (x, place[1]) if axis == 0 else (place[0], y)
                if math.dist(exact, at) <= reach and math.dist(exact, anchor.at) > reach:
                    return Snap("intersection", exact, piece.feature, to=(anchor.at,))
    return None


def crossings(one: Curve, other: Curve) -> list[Point]:
    """The places that two pieces have in common (not where they run along each other)."""
    if isinstance(one, Segment) and isinstance(other, Segment):
        found = _line_line(one, other)
    elif isinstance(one, Segment) and isinstance(other, Arc):
        found = _line_circle(one, other)
    elif isinstance(one, Arc) and isinstance(other, Segment):
        found = _line_circle(other, one)
    else:
        assert isinstance(one, Arc)
        assert isinstance(other, Arc)
        found = _circle_circle(one, other)
    return [p for p in found if _on(one, p) and _on(other, p)]


def tangent_points(arc: Arc, origin: Point) -> list[Point]:
    """Where lines from `origin` touch the whole circle of an arc; none from inside it."""
    (cx, cy), r = arc.centre, arc.radius
    far = math.dist(arc.centre, origin)
    if far <= r:
        return []
    to = math.atan2(origin[1] - cy, origin[0] - cx)
    half = math.acos(r / far)
    return [(cx + r * math.cos(to + s * half), cy + r * math.sin(to + s * half)) for s in (-1, 1)]


def _nearest(at: Point, reach: float, anchors: Anchors, axis: int) -> Snap | None:
    """The nearest of the points that share the number of `axis` with the cursor."""
    points, places = anchors
    if not points:
        return None
    aside = np.abs(places[:, axis] - at[axis])
    near = np.flatnonzero(aside <= reach)
    if not len(near):
        return None
    far = np.hypot(*(places[near] - at).T)
    # of points that are level with one another the nearest, else the one that is level best
    best = near[np.lexsort((far, np.round(aside[near] / max(reach, 1e-12), 3)))[0]]
    return points[int(best)]


def _line_line(one: Segment, other: Segment) -> list[Point]:
    (ax, ay), (bx, by) = one.start, one.end
    (cx, cy), (dx, dy) = other.start, other.end
    ux, uy, vx, vy = bx - ax, by - ay, dx - cx, dy - cy
    cross = ux * vy - uy * vx
    if abs(cross) <= 1e-12 * math.hypot(ux, uy) * math.hypot(vx, vy):
        return []
    t = ((cx - ax) * vy - (cy - ay) * vx) / cross
    return [(ax + t * ux, ay + t * uy)]


def _line_circle(line: Segment, arc: Arc) -> list[Point]:
    (ax, ay), (bx, by) = line.start, line.end
    length = math.hypot(bx - ax, by - ay)
    if length == 0.0:
        return []
    ux, uy = (bx - ax) / length, (by - ay) / length
    px, py = arc.centre[0] - ax, arc.centre[1] - ay
    along, aside = px * ux + py * uy, px * uy - py * ux
    half2 = arc.radius**2 - aside**2
    if half2 < 0.0:
        return []
    half = math.sqrt(half2)
    return [(ax + (along + s * half) * ux, ay + (along + s * half) * uy) for s in (-1.0, 1.0)]


def _circle_circle(one: Arc, other: Arc) -> list[Point]:
    far = math.dist(one.centre, other.centre)
    if far == 0.0:
        return []
    along = (far**2 + one.radius**2 - other.radius**2) / (2.0 * far)
    half2 = one.radius**2 - along**2
    if half2 < 0.0:
        return []
    (ax, ay), (bx, by) = one.centre, other.centre
    ux, uy = (bx - ax) / far, (by - ay) / far
    half = math.sqrt(half2)
    return [(ax + along * ux - s * half * uy, ay + along * uy + s * half * ux) for s in (-1, 1)]


def _foot(line: Segment, origin: Point) -> Point:
    (ax, ay), (bx, by) = line.start, line.end
    dx, dy = bx - ax, by - ay
    square = dx * dx + dy * dy or 1.0
    t = ((origin[0] - ax) * dx + (origin[1] - ay) * dy) / square
    return ax + t * dx, ay + t * dy


def _radial(arc: Arc, origin: Point) -> list[Point]:
    """Where the line from a place through the centre meets the circle."""
    (cx, cy), r = arc.centre, arc.radius
    far = math.dist(arc.centre, origin)
    if far == 0.0:
        return []
    ux, uy = (origin[0] - cx) / far, (origin[1] - cy) / far
    return [(cx + s * r * ux, cy + s * r * uy) for s in (1.0, -1.0)]


def _on(curve: Curve, place: Point) -> bool:
    size = curve.length if isinstance(curve, Segment) else curve.radius
    foot = curve.point(curve.nearest(place))
    return math.dist((float(foot[0]), float(foot[1])), place) <= _ON * max(size, 1.0)


def _is_end(curve: Curve, place: Point) -> bool:
    near = 1e-6 * max(curve.length, 1e-9)
    return min(math.dist(curve.start, place), math.dist(curve.end, place)) <= near


def _direction(piece: BoundaryCurve, place: Point) -> float:
    dx, dy = piece.curve.tangent(piece.curve.nearest(place))
    return math.atan2(dy, dx)
