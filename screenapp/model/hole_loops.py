"""Round holes and slots as loops of corners and edges, and loops run backwards."""

from __future__ import annotations

import math
from collections.abc import Sequence

from screenapp.model.part import CircleHole, Corner, Edge, Hole, Loop, LoopHole, Point


def loop_of_hole(hole: Hole) -> Loop:
    """The rim of a plain hole as a loop; corners and edges that it makes have no ids yet.

    A circle becomes two half circles, a slot two straight edges and two half circles.
    """
    if isinstance(hole, LoopHole):
        return hole.loop
    if isinstance(hole, CircleHole) or hole.length <= hole.width:
        width = hole.diameter if isinstance(hole, CircleHole) else hole.width
        return circle_loop(hole.centre, width)
    return slot_loop(hole.centre, hole.length, hole.width, hole.angle)


def circle_loop(centre: Point, diameter: float) -> Loop:
    """A circle as two half circles, counter-clockwise."""
    (x, y), r = centre, diameter / 2.0
    return Loop(
        (Corner("", (x + r, y)), Corner("", (x - r, y))),
        (Edge("", (x, y + r)), Edge("", (x, y - r))),
    )


def slot_loop(centre: Point, length: float, width: float, angle: float) -> Loop:
    """A slot as two straight edges and two half circles, counter-clockwise."""
    (x, y), r, half = centre, width / 2.0, (length - width) / 2.0
    c, s = math.cos(math.radians(angle)), math.sin(math.radians(angle))

    def at(along: float, across: float) -> Point:
        return x + along * c - across * s, y + along * s + across * c

    corners = [at(half, -r), at(half, r), at(-half, r), at(-half, -r)]
    through = [at(half + r, 0.0), None, at(-half - r, 0.0), None]
    return Loop(tuple(Corner("", p) for p in corners), tuple(Edge("", t) for t in through))


def reversed_loop(loop: Loop) -> Loop:
    """The same loop run the other way round; it begins in the same corner."""
    return Loop((loop.corners[0], *loop.corners[:0:-1]), loop.edges[::-1])


def ring_loop(
    points: Sequence[Point], through: Sequence[Point | None] | None = None, round_: float = 0.0
) -> Loop:
    """A loop without ids: corners, the arc point of the edge after each, one round for all."""
    arcs = through if through is not None else [None] * len(points)
    return Loop(tuple(Corner("", p, round_) for p in points), tuple(Edge("", arc) for arc in arcs))
