"""What can be measured of a boundary: lengths, radii, angles, distances, least distances, areas."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from screenapp.model.boundary_curve import BoundaryCurve, area_under
from screenapp.model.curve_table import CurveTable
from screenapp.model.curves import Arc, Curve, Segment
from screenapp.model.kinds import KindName
from screenapp.model.meetings import closest_approaches, intersections
from screenapp.model.part import Point


@dataclass(frozen=True)
class Measured:
    """One number of a measurement: what it is, its stored value, its kind."""

    name: str
    value: float
    kind: KindName = "length"


@dataclass(frozen=True)
class Measurement:
    """What was measured.

    Attributes:
        title: between what, e.g. "edge e1 and hole h2".
        numbers: the results.
        ends: the two places that the first number joins [mm]; None if it joins none.
        at: where to write it [mm].
    """

    title: str
    numbers: tuple[Measured, ...]
    ends: tuple[Point, Point] | None
    at: Point


def of_curves(curves: Sequence[Curve]) -> tuple[Measured, ...]:
    """Length of a chain of pieces; of one line its angle, of one circle its radius too."""
    long = Measured("length", sum(c.length for c in curves))
    if len(curves) == 1 and isinstance(curves[0], Segment):
        (ax, ay), (bx, by) = curves[0].start, curves[0].end
        angle = math.degrees(math.atan2(by - ay, bx - ax)) % 180.0
        return long, Measured("from +x", angle, "angle")
    arcs = [c for c in curves if isinstance(c, Arc)]
    if len(arcs) == len(curves) and _one_circle(arcs):
        turn = math.degrees(sum(abs(a.sweep) for a in arcs))
        radius, diameter = arcs[0].radius, 2.0 * arcs[0].radius
        if turn > 360.0 - 1e-6:
            around = Measured("round the rim", long.value)
            return Measured("diameter", diameter), Measured("radius", radius), around
        return Measured("radius", radius), Measured("turns", turn, "angle"), long
    return (long,)


def of_ring(curves: Sequence[Curve]) -> tuple[Measured, ...]:
    """Area inside a closed ring of pieces, and its length."""
    area = abs(sum(area_under(c) for c in curves))
    return Measured("area", area, "area"), Measured("round it", sum(c.length for c in curves))


def between_points(a: Point, b: Point) -> tuple[Measured, ...]:
    """Distance, its parts along x and y, and its direction."""
    dx, dy = b[0] - a[0], b[1] - a[1]
    return (
        Measured("distance", math.hypot(dx, dy)),
        Measured("along x", dx),
        Measured("along y", dy),
        Measured("from +x", math.degrees(math.atan2(dy, dx)) % 360.0, "angle"),
    )


def nearest_place(point: Point, curves: Sequence[Curve]) -> tuple[float, Point]:
    """Least distance [mm] from a point to pieces, and the place there [mm]."""
    found = []
    for curve in curves:
        x, y = curve.point(curve.nearest(point))
        at = (float(x), float(y))
        found.append((math.dist(at, point), at))
    return min(found)


def least_distance(
    one: Sequence[BoundaryCurve], other: Sequence[BoundaryCurve]
) -> tuple[float, Point, Point]:
    """Least distance [mm] between two sets of pieces, and the places there; 0 where they cross."""
    table = CurveTable.of((*one, *other))
    i, j = (
        grid.ravel()
        for grid in np.meshgrid(
            np.arange(len(one)), len(one) + np.arange(len(other)), indexing="ij"
        )
    )
    _, crossing = intersections(table, i, j)
    if len(crossing):
        x, y = crossing[0]
        return 0.0, (float(x), float(y)), (float(x), float(y))
    near = closest_approaches(table, i, j)
    best = int(np.argmin(np.hypot(*(near.p_i - near.p_j).T)))
    (ax, ay), (bx, by) = near.p_i[best], near.p_j[best]
    a, b = (float(ax), float(ay)), (float(bx), float(by))
    return math.dist(a, b), a, b


def angle_between(one: Segment, other: Segment) -> float:
    """The angle [deg] of two straight edges: at their common corner, else the acute one."""
    for a in (one, one.reversed()):
        for b in (other, other.reversed()):
            if math.dist(a.start, b.start) <= 1e-9 * max(a.length, b.length):
                return _angle(a, b)
    angle = _angle(one, other)
    return min(angle, 180.0 - angle)


def _angle(a: Segment, b: Segment) -> float:
    ux, uy = a.end[0] - a.start[0], a.end[1] - a.start[1]
    vx, vy = b.end[0] - b.start[0], b.end[1] - b.start[1]
    return math.degrees(abs(math.atan2(ux * vy - uy * vx, ux * vx + uy * vy)))


def _one_circle(arcs: Sequence[Arc]) -> bool:
    first = arcs[0]
    near = 1e-9 * first.radius
    return all(
        abs(a.radius - first.radius) <= near and math.dist(a.centre, first.centre) <= near
        for a in arcs
    )
