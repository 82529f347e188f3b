"""Where the lines and circles meet that edges lie on, beyond the edges' ends."""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

from screenapp.model.curves import Arc, Curve, Segment
from screenapp.model.part import Point


def carrier_meeting(a: Curve, b: Curve, near: Point) -> Point | None:
    """The meeting of the whole lines or circles of two curves that is nearest to a point [mm].

    None if they do not meet, or meet under less than 0.06 degrees.
    """
    if isinstance(a, Segment) and isinstance(b, Segment):
        u, v = a.tangent(0.0), b.tangent(0.0)
        cross = float(u[0] * v[1] - u[1] * v[0])
        if abs(cross) < 1e-3:
            return None
        gap = np.subtract(b.start, a.start)
        along = float(gap[0] * v[1] - gap[1] * v[0]) / cross
        return float(a.start[0] + along * u[0]), float(a.start[1] + along * u[1])
    if isinstance(a, Arc) and isinstance(b, Arc):
        found = circle_circle(a.centre, a.radius, b.centre, b.radius)
    else:
        line, arc = (a, b) if isinstance(a, Segment) else (b, a)
        assert isinstance(line, Segment)
        assert isinstance(arc, Arc)
        found = line_circle(
            np.asarray(line.start, dtype=float), line.tangent(0.0), arc.centre, arc.radius
        )
    return min(found, key=lambda p: math.dist(p, near)) if found else None


def line_circle(
    p: NDArray[np.float64], d: NDArray[np.float64], centre: Point, radius: float
) -> list[Point]:
    """Points in which a line by `p` along the unit vector `d` meets a circle."""
    if radius < 0.0:
        return []
    rel = p - np.asarray(centre)
    along = -float(rel @ d)
    foot = rel + along * d
    half2 = radius * radius - float(foot @ foot)
    if half2 < 0.0:
        return []
    half = math.sqrt(half2)
    return [
        (float(p[0] + (along + h) * d[0]), float(p[1] + (along + h) * d[1])) for h in (-half, half)
    ]


def circle_circle(c1: Point, r1: float, c2: Point, r2: float) -> list[Point]:
    """Points in which two circles meet, the one to the right of the line of centres first."""
    far = math.dist(c1, c2)
    if r1 < 0.0 or r2 < 0.0 or far == 0.0:
        return []
    along = (far * far + r1 * r1 - r2 * r2) / (2.0 * far)
    half2 = r1 * r1 - along * along
    if half2 < 0.0:
        return []
    ux, uy = (c2[0] - c1[0]) / far, (c2[1] - c1[1]) / far
    half = math.sqrt(half2)
    return [(c1[0] + along * ux - h * uy, c1[1] + along * uy + h * ux) for h in (-half, half)]
