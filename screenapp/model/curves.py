"""Straight segments and circular arcs, parametrised by t in [0, 1] at constant speed.

Both kinds share one interface: `length`, `point(t)`, `tangent(t)`, `curvature`, `nearest(p)`,
`part(t0, t1)` and `reversed()`.  `t` may be a scalar or an array of any shape; points come back
with a last axis of 2.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from screenapp.model.part import Point

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class Segment:
    """A straight segment from `start` to `end` [mm]."""

    start: Point
    end: Point

    @property
    def length(self) -> float:
        """Length [mm]."""
        return math.dist(self.start, self.end)

    @property
    def curvature(self) -> float:
        """Signed curvature [1/mm]: zero."""
        return 0.0

    def point(self, t: ArrayLike) -> Floats:
        """Points [mm] at parameters `t`, shape `t.shape + (2,)`."""
        t = np.asarray(t, dtype=float)[..., None]
        return np.asarray(np.asarray(self.start) * (1.0 - t) + np.asarray(self.end) * t)

    def tangent(self, t: ArrayLike) -> Floats:
        """Unit tangents at `t`, shape `t.shape + (2,)`."""
        d = np.subtract(self.end, self.start) / self.length
        return np.broadcast_to(d, (*np.shape(t), 2)).astype(float)

    def nearest(self, p: Point) -> float:
        """The parameter in [0, 1] of the point nearest to `p`."""
        d = np.subtract(self.end, self.start)
        return float(np.clip(np.dot(np.subtract(p, self.start), d) / np.dot(d, d), 0.0, 1.0))

    def part(self, t0: float, t1: float) -> Segment:
        """The piece from parameter `t0` to `t1`."""
        (ax, ay), (bx, by) = self.start, self.end
        s0, s1 = 1.0 - t0, 1.0 - t1
        return Segment(
            (ax * s0 + bx * t0, ay * s0 + by * t0), (ax * s1 + bx * t1, ay * s1 + by * t1)
        )

    def reversed(self) -> Segment:
        """The same segment run backwards."""
        return Segment(self.end, self.start)


@dataclass(frozen=True)
class Arc:
    """A circular arc.

    Attributes:
        centre: [mm].
        radius: [mm], positive.
        begin: angle of the start point [rad].
        sweep: signed angle run through [rad]; positive is counter-clockwise; at most 2π.
    """

    centre: Point
    radius: float
    begin: float
    sweep: float

    @property
    def start(self) -> Point:
        """First point [mm]."""
        return self._at(self.begin)

    @property
    def end(self) -> Point:
        """Last point [mm]."""
        return self._at(self.begin + self.sweep)

    @property
    def length(self) -> float:
        """Length [mm]."""
        return self.radius * abs(self.sweep)

    @property
    def curvature(self) -> float:
        """Signed curvature [1/mm], positive where the arc turns left."""
        return math.copysign(1.0 / self.radius, self.sweep)

    def point(self, t: ArrayLike) -> Floats:
        """Points [mm] at parameters `t`, shape `t.shape + (2,)`."""
        a = self.begin + self.sweep * np.asarray(t, dtype=float)
        return np.asarray(self.centre) + self.radius * np.stack([np.cos(a), np.sin(a)], axis=-1)

    def tangent(self, t: ArrayLike) -> Floats:
        """Unit tangents at `t`, shape `t.shape + (2,)`."""
        a = self.begin + self.sweep * np.asarray(t, dtype=float)
        return math.copysign(1.0, self.sweep) * np.stack([-np.sin(a), np.cos(a)], axis=-1)

    def nearest(self, p: Point) -> float:
        """The parameter in [0, 1] of the point nearest to `p`."""
        angle = math.atan2(p[1] - self.centre[1], p[0] - self.centre[0])
        turned = (angle - self.begin) * math.copysign(1.0, self.sweep) % (2.0 * math.pi)
        span = abs(self.sweep)
        if turned <= span:
            return turned / span
        return 1.0 if turned - span < 2.0 * math.pi - turned else 0.0

    def part(self, t0: float, t1: float) -> Arc:
        """The piece from parameter `t0` to `t1`."""
        return Arc(self.centre, self.radius, self.begin + t0 * self.sweep, (t1 - t0) * self.sweep)

    def _at(self, angle: float) -> Point:
        """The point of the circle at an angle [rad], in plain floats: asked for very often."""
        (x, y), r = self.centre, self.radius
        return x + r * math.cos(angle), y + r * math.sin(angle)

    def reversed(self) -> Arc:
        """The same arc run backwards."""
        return Arc(self.centre, self.radius, self.begin + self.sweep, -self.sweep)


Curve = Segment | Arc


def tangent_arc(start: Point, direction: float, end: Point) -> Curve:
    """The arc that leaves `start` in a direction [rad] and ends in `end`; a segment straight on.

    It turns through twice the angle between the direction and the chord (inscribed angle).

    Example:
        >>> round(tangent_arc((0.0, 0.0), 0.0, (1.0, 1.0)).radius, 12)
        1.0
    """
    (ax, ay), (bx, by) = start, end
    chord = math.hypot(bx - ax, by - ay)
    half = math.remainder(math.atan2(by - ay, bx - ax) - direction, 2.0 * math.pi)
    if chord == 0.0 or abs(half) < 1e-9 or math.pi - abs(half) < 1e-9:
        return Segment(start, end)
    radius = chord / (2.0 * abs(math.sin(half)))
    side = math.copysign(1.0, half)
    normal = direction + side * math.pi / 2.0
    centre = (ax + radius * math.cos(normal), ay + radius * math.sin(normal))
    return Arc(centre, radius, normal + math.pi, 2.0 * half)


def arc_about(centre: Point, start: Point, towards: Point, left: bool) -> Curve:
    """The arc about a centre from `start` to the direction of a place, left-handed or not."""
    begin = math.atan2(start[1] - centre[1], start[0] - centre[0])
    stop = math.atan2(towards[1] - centre[1], towards[0] - centre[0])
    sweep = (stop - begin) % (2.0 * math.pi) if left else -((begin - stop) % (2.0 * math.pi))
    radius = math.dist(centre, start)
    if radius == 0.0 or sweep == 0.0:
        return Segment(start, start)
    return Arc(centre, radius, begin, sweep)


def arc_through(start: Point, through: Point, end: Point) -> Curve:
    """The arc from `start` by `through` to `end`; a segment when the three lie on one line.

    Example:
        >>> arc_through((1.0, 0.0), (0.0, 1.0), (-1.0, 0.0)).sweep > 0
        True
    """
    (ax, ay), (bx, by), (cx, cy) = start, through, end
    bx, by, cx, cy = bx - ax, by - ay, cx - ax, cy - ay
    cross = bx * cy - by * cx
    scale = max(math.hypot(bx, by), math.hypot(cx, cy), 1e-300)
    if abs(cross) <= 1e-9 * scale * scale:
        return Segment(start, end)
    b2, c2 = bx * bx + by * by, cx * cx + cy * cy
    ux = (cy * b2 - by * c2) / (2.0 * cross)
    uy = (bx * c2 - cx * b2) / (2.0 * cross)
    centre = (ax + ux, ay + uy)
    begin = math.atan2(-uy, -ux)
    turn = math.atan2(end[1] - centre[1], end[0] - centre[0]) - begin
    left = cross > 0.0  # start, through, end turn left: the arc runs counter-clockwise
    sweep = turn % (2.0 * math.pi) if left else -(-turn % (2.0 * math.pi))
    return Arc(centre, math.hypot(ux, uy), begin, sweep)
