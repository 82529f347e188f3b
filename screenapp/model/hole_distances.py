"""Distances from a round hole to what lies round it, from the exact boundary."""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np

from screenapp.model.curves import Arc, Curve
from screenapp.model.joint_rules import ABSENT
from screenapp.model.part import CircleHole, Point
from screenapp.model.shape import Shape


@dataclass(frozen=True)
class Ahead:
    """What a line from a hole's centre meets first.

    Attributes:
        distance: along the line [mm].
        square: from the centre to the tangent of the boundary there, square to it [mm].
        piece: index of the boundary piece.
        pitch: to the centre of the round hole that it meets [mm]; None for any other boundary.
    """

    distance: float
    square: float
    piece: int
    pitch: float | None


@dataclass(frozen=True)
class HoleDistances:
    """Round a hole, in the direction of a force and across it [mm]; `ABSENT` for what is not there.

    Attributes:
        e1: centre to the edge that the force points at, square to that edge.
        e2: the same across the force, the nearer of the two sides.
        p1, p2: centre to the centre of a round hole that is met instead.
        clear: rim to what lies ahead, along the force.
        net: wall on both sides of the hole together, across the force.
        feature: of the boundary ahead: id of an edge, fillet or hole.
        beside: the same of the nearer side.
    """

    e1: float
    e2: float
    p1: float
    p2: float
    clear: float
    net: float
    feature: str
    beside: str


def hole_distances(shape: Shape, hole: CircleHole, towards: Point) -> HoleDistances:
    """The distances round a hole for a force in a direction (any length above zero)."""
    x, y = towards
    size = math.hypot(x, y)
    ways = ((x / size, y / size), (-y / size, x / size), (y / size, -x / size))
    ahead, left, right = (_first(shape, hole, way) for way in ways)
    r = hole.diameter / 2.0
    sides = (left, right)
    edges = [s.square for s in sides if s.pitch is None]
    pitches = [s.pitch for s in sides if s.pitch is not None]
    nearer = min(sides, key=lambda s: s.distance)
    return HoleDistances(
        e1=ahead.square if ahead.pitch is None else ABSENT,
        e2=min(edges, default=ABSENT),
        p1=ABSENT if ahead.pitch is None else ahead.pitch,
        p2=min(pitches, default=ABSENT),
        clear=ahead.distance - r,
        net=left.distance + right.distance - 2.0 * r,
        feature=shape.curves[ahead.piece].feature,
        beside=shape.curves[nearer.piece].feature,
    )


def _first(shape: Shape, hole: CircleHole, way: Point) -> Ahead:
    own = next(i for i, id_ in enumerate(shape.hole_ids) if id_ == hole.id)
    best: tuple[float, int] = (math.inf, -1)
    for i, piece in enumerate(shape.curves):
        if piece.loop != own:
            far = _meets(piece.curve, hole.centre, way)
            best = min(best, (far, i))
    far, i = best
    curve = shape.curves[i].curve
    at = (hole.centre[0] + far * way[0], hole.centre[1] + far * way[1])
    tx, ty = curve.tangent(curve.nearest(at))
    pitch = None
    loop = shape.curves[i].loop
    if loop > 0 and isinstance(curve, Arc) and curve.sweep < 0.0 and _round(shape, loop):
        pitch = math.dist(curve.centre, hole.centre)
    return Ahead(far, far * abs(float(ty * way[0] - tx * way[1])), i, pitch)


def _round(shape: Shape, loop: int) -> bool:
    """Whether a loop is one circle."""
    first, last = shape.loops[loop]
    arcs = {
        (c.curve.centre, c.curve.radius) if isinstance(c.curve, Arc) else None
        for c in shape.curves[first:last]
    }
    return len(arcs) == 1 and None not in arcs


def _meets(curve: Curve, start: Point, way: Point) -> float:
    """Distance [mm] along a ray at which it first meets a curve; infinite if it does not."""
    dx, dy = way
    if isinstance(curve, Arc):
        cx, cy = curve.centre[0] - start[0], curve.centre[1] - start[1]
        along, off = cx * dx + cy * dy, cx * dy - cy * dx
        under = curve.radius**2 - off**2
        if under < 0.0:
            return math.inf
        hits = [along - math.sqrt(under), along + math.sqrt(under)]
        slack = 1e-9 * curve.radius
        return min(
            (s for s in hits if s > 0.0 and _on(curve, start, way, s, slack)), default=np.inf
        )
    ax, ay = curve.start[0] - start[0], curve.start[1] - start[1]
    bx, by = curve.end[0] - curve.start[0], curve.end[1] - curve.start[1]
    cross = dx * by - dy * bx
    if abs(cross) <= 1e-12 * curve.length:
        return math.inf
    t = -(dx * ay - dy * ax) / cross
    s = (ax * by - ay * bx) / cross
    return s if s > 0.0 and -1e-9 <= t <= 1.0 + 1e-9 else math.inf


def _on(curve: Arc, start: Point, way: Point, s: float, slack: float) -> bool:
    at = (start[0] + s * way[0], start[1] + s * way[1])
    return math.dist(tuple(curve.point(curve.nearest(at))), at) <= max(slack, 1e-9 * s)
