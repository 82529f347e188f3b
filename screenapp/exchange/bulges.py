"""Arcs by their ends and the angle they turn through, as drawings hold them."""

from __future__ import annotations

import math

from screenapp.model.curves import Arc, Curve, Segment
from screenapp.model.part import Point

STRAIGHTEST = 1e-9
"""A bulge below this is straight: the sagitta is half of it times the chord."""


def bulged_edge(start: Point, end: Point, bulge: float) -> Curve:
    """The arc from `start` to `end` that turns through 4·atan(bulge), left if positive.

    Example:
        >>> arc = bulged_edge((0.0, 0.0), (2.0, 0.0), 1.0)
        >>> arc.radius, round(arc.sweep, 6)
        (1.0, 3.141593)
    """
    if not math.isfinite(bulge):
        raise ValueError("a bulge is not a number")
    if abs(bulge) < STRAIGHTEST:
        return Segment(start, end)
    dx, dy = end[0] - start[0], end[1] - start[1]
    chord = math.hypot(dx, dy)
    off = (1.0 - bulge * bulge) / (4.0 * bulge)  # of the centre, to the left, over the chord
    centre = (0.5 * (start[0] + end[0]) - off * dy, 0.5 * (start[1] + end[1]) + off * dx)
    radius = chord * (1.0 + bulge * bulge) / (4.0 * abs(bulge))
    begin = math.atan2(start[1] - centre[1], start[0] - centre[0])
    return Arc(centre, radius, begin, 4.0 * math.atan(bulge))


def turned_edge(start: Point, end: Point, sweep: float) -> Curve:
    """The arc from `start` to `end` that turns through `sweep` [rad], left if positive."""
    return bulged_edge(start, end, math.tan(0.25 * sweep))
