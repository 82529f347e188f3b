"""Turns rings of curves into the records of a part: circles, slots, loops with rounded corners.

An arc that touches the straight edges beside it tangentially becomes the round of a corner, so
that its radius stays one editable number; any other arc becomes an edge of its own.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, field, replace

from screenapp.exchange.biarcs import merged_arcs
from screenapp.exchange.rings import Ring, enclosed
from screenapp.model.curves import Arc, Curve, Segment
from screenapp.model.part import CircleHole, Corner, Edge, Loop, LoopHole, Point, SlotHole

TWO_PI = 2.0 * math.pi

LARGEST_TURN = 1.6 * math.pi
"""An arc edge that turns further is drawn as two: its ends would be too near one another."""

ROUND_TURNS = (math.radians(0.5), math.radians(175.0))
"""An arc that turns by less or more than this is no round of a corner."""


@dataclass
class Ids:
    """Fresh ids, c1, c2 ... e1, e2 ... h1, h2 ..."""

    counts: dict[str, int] = field(default_factory=dict)

    def __call__(self, letter: str) -> str:
        """The next id that begins with a letter."""
        self.counts[letter] = self.counts.get(letter, 0) + 1
        return f"{letter}{self.counts[letter]}"


Form = CircleHole | SlotHole | LoopHole


def hole_of(ring: Ring, noise: float, ids: Ids, letter: str = "h") -> Form:
    """The hole (or form of a zone) that a ring bounds; figures may be off by `noise` [mm]."""
    ring = tidy_ring(ring, noise)
    circle = circle_of(ring, noise)
    if circle is not None:
        return CircleHole(ids(letter), circle.centre, 2.0 * circle.radius)
    slot = _slot_of(ring, noise)
    if slot is not None:
        return replace(slot, id=ids(letter))
    return LoopHole(ids(letter), loop_of(ring, noise, ids))


def loop_of(ring: Ring, noise: float, ids: Ids) -> Loop:
    """The loop of a ring, with rounds where arcs touch the edges beside them."""
    curves: Ring = []
    for curve in tidy_ring(ring, noise):
        if isinstance(curve, Arc) and abs(curve.sweep) > LARGEST_TURN:
            curves += [curve.part(0.0, 0.5), curve.part(0.5, 1.0)]
        else:
            curves.append(curve)
    n = len(curves)
    rounds: list[tuple[Point, float] | None] = [
        _round(curves[i - 1], curves[i], curves[(i + 1) % n], noise) for i in range(n)
    ]
    corners, edges = [], []
    for i, curve in enumerate(curves):
        if rounds[i] is not None:
            continue
        before = rounds[i - 1]
        at, radius = before if before is not None else (curve.start, 0.0)
        corners.append(Corner(ids("c"), _plain(at), radius))
        edges.append(Edge(ids("e"), _middle(curve) if isinstance(curve, Arc) else None))
    return Loop(tuple(corners), tuple(edges))


def tidy_ring(ring: Ring, noise: float) -> Ring:
    """The ring run counter-clockwise, with following arcs of one circle joined."""
    if enclosed(ring) < 0.0:
        ring = [curve.reversed() for curve in reversed(ring)]
    # begin where the circle changes, so that no arc is cut by the ring's own beginning
    for i in range(len(ring)):
        if len(merged_arcs([ring[i - 1], ring[i]], noise)) == 2:
            ring = ring[i:] + ring[:i]
            break
    return merged_arcs(ring, noise)


def circle_of(ring: Ring, noise: float) -> Arc | None:
    """The full circle that a ring is, whether of one arc or several."""
    arcs = [curve for curve in ring if isinstance(curve, Arc)]
    if len(arcs) < len(ring):
        return None
    longest = max(arcs, key=lambda arc: arc.length)
    same = all(
        math.dist(arc.centre, longest.centre) <= noise
        and abs(arc.radius - longest.radius) <= noise
        and arc.sweep * longest.sweep > 0.0
        for arc in arcs
    )
    turned = sum(abs(arc.sweep) for arc in arcs)
    if same and abs(turned - TWO_PI) * longest.radius <= max(4.0 * noise, 1e-9 * longest.radius):
        return longest
    return None


def _slot_of(ring: Ring, noise: float) -> SlotHole | None:
    """The slot that a ring of two straight edges and two half circles is."""
    if len(ring) != 4:
        return None
    arcs = [c for c in ring if isinstance(c, Arc)]
    lines = [c for c in ring if isinstance(c, Segment)]
    if len(arcs) != 2 or len(lines) != 2 or isinstance(ring[0], Arc) is isinstance(ring[1], Arc):
        return None
    a, b = arcs
    radius = 0.5 * (a.radius + b.radius)
    far = math.dist(a.centre, b.centre)
    if abs(a.radius - b.radius) > noise or far <= noise or a.sweep < 0.0 or b.sweep < 0.0:
        return None
    ux, uy = (b.centre[0] - a.centre[0]) / far, (b.centre[1] - a.centre[1]) / far
    for arc, way in ((a, 1.0), (b, -1.0)):
        for place, side in ((arc.start, way), (arc.end, -way)):
            ideal = (arc.centre[0] - side * uy * radius, arc.centre[1] + side * ux * radius)
            if math.dist(place, ideal) > noise:
                return None
    centre = (0.5 * (a.centre[0] + b.centre[0]), 0.5 * (a.centre[1] + b.centre[1]))
    angle = math.degrees(math.atan2(uy, ux)) % 180.0
    return SlotHole("", centre, far + 2.0 * radius, 2.0 * radius, angle)


def _round(before: Curve, curve: Curve, after: Curve, noise: float) -> tuple[Point, float] | None:
    """The corner and radius that an arc between two straight edges is the round of."""
    if not (isinstance(before, Segment) and isinstance(curve, Arc) and isinstance(after, Segment)):
        return None
    if not ROUND_TURNS[0] <= abs(curve.sweep) <= ROUND_TURNS[1]:
        return None
    u, v = _direction(before), _direction(after)
    cross = u[0] * v[1] - u[1] * v[0]
    turn = math.atan2(cross, u[0] * v[0] + u[1] * v[1])
    if turn * curve.sweep <= 0.0 or abs(cross) < 1e-6:
        return None
    dx, dy = after.start[0] - before.end[0], after.start[1] - before.end[1]
    along = (dx * v[1] - dy * v[0]) / cross
    corner = (before.end[0] + along * u[0], before.end[1] + along * u[1])
    back = curve.radius * math.tan(0.5 * abs(turn))
    touch_in = (corner[0] - back * u[0], corner[1] - back * u[1])
    touch_out = (corner[0] + back * v[0], corner[1] + back * v[1])
    side = math.copysign(curve.radius, turn)
    centre = (touch_in[0] - side * u[1], touch_in[1] + side * u[0])
    off = max(
        math.dist(touch_in, curve.start),
        math.dist(touch_out, curve.end),
        math.dist(centre, curve.centre),
    )
    return (corner, curve.radius) if off <= noise else None


def _direction(line: Segment) -> Point:
    length = line.length
    return (line.end[0] - line.start[0]) / length, (line.end[1] - line.start[1]) / length


def _middle(arc: Arc) -> Point:
    angle = arc.begin + 0.5 * arc.sweep
    return _plain(
        (
            arc.centre[0] + arc.radius * math.cos(angle),
            arc.centre[1] + arc.radius * math.sin(angle),
        )
    )


def _plain(place: Point) -> Point:
    """Without negative zeros."""
    return place[0] + 0.0, place[1] + 0.0
