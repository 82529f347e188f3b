"""The exact boundary of a part: every loop as a chain of segments and arcs, rounds worked in.

The material is always on the left: the outline runs counter-clockwise, holes run clockwise,
whichever way the user drew them.  Each piece names the feature it belongs to, so that a mesh edge,
a load and a stress peak can all be told by the same words.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cached_property
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from screenapp.model.curves import Arc, Curve, Segment, arc_through
from screenapp.model.errors import Fault, InvalidPartError
from screenapp.model.part import CircleHole, Hole, Loop, LoopHole, Part, Point, SlotHole


@dataclass(frozen=True)
class BoundaryCurve:
    """One piece of the boundary.

    Attributes:
        feature: id of the edge, of the rounded corner (a fillet) or of the round hole or slot.
        kind: what the id names.
        curve: the piece itself, material on its left.
        loop: index of the loop it belongs to (0 is the outline).
    """

    feature: str
    kind: Literal["edge", "fillet", "hole"]
    curve: Curve
    loop: int


@dataclass(frozen=True)
class Shape:
    """The whole boundary.

    Attributes:
        curves: all pieces; those of one loop follow one another and close.
        loops: for each loop, the range (first, past the last) of its pieces in `curves`.
        hole_ids: the hole's id for each loop, None for the outline.
        sharp_corners: id and place [mm] of each corner that has no round.
    """

    curves: tuple[BoundaryCurve, ...]
    loops: tuple[tuple[int, int], ...]
    hole_ids: tuple[str | None, ...]
    sharp_corners: tuple[tuple[str, Point], ...]

    @property
    def area(self) -> float:
        """Exact area [mm²], holes taken out."""
        return sum(_area_under(c.curve) for c in self.curves)

    @cached_property
    def bounds(self) -> tuple[float, float, float, float]:
        """Smallest x, smallest y, largest x, largest y [mm] of the outline."""
        first, last = self.loops[0]
        xs, ys = zip(*(p for c in self.curves[first:last] for p in _extremes(c.curve)), strict=True)
        return min(xs), min(ys), max(xs), max(ys)

    @property
    def size(self) -> float:
        """Diagonal of the bounding box [mm]."""
        x0, y0, x1, y1 = self.bounds
        return math.hypot(x1 - x0, y1 - y0)

    def pieces_of(self, feature: str) -> tuple[int, ...]:
        """Indices of the pieces that belong to an edge, a fillet or a hole (any kind of hole)."""
        if feature in self.hole_ids:
            first, last = self.loops[self.hole_ids.index(feature)]
            return tuple(range(first, last))
        return tuple(i for i, c in enumerate(self.curves) if c.feature == feature)

    def polyline(self, loop: int, tolerance: float) -> NDArray[np.float64]:
        """The loop as points (n, 2) [mm], arcs flattened to a sagitta of `tolerance` [mm]."""
        first, last = self.loops[loop]
        return np.concatenate([_flatten(c.curve, tolerance) for c in self.curves[first:last]])


def shape_of(part: Part) -> Shape:
    """Work out the exact boundary of a part that has an outline.

    Raises:
        InvalidPartError: no outline, a size that is not positive, or a round that does not fit;
            the faults name corner, hole and field.
    """
    faults: list[Fault] = []
    pieces: list[BoundaryCurve] = []
    loops: list[tuple[int, int]] = []
    hole_ids: list[str | None] = []
    corners: list[tuple[str, Point]] = []
    if part.outline is None:
        raise InvalidPartError.of(
            (Fault("the part has no outline", "draw a closed outline", "outline"),)
        )
    sources: list[tuple[str | None, Loop | Hole]] = [(None, part.outline)]
    sources += [(hole.id, hole) for hole in part.holes]
    for number, (hole_id, source) in enumerate(sources):
        loop = source.loop if isinstance(source, LoopHole) else source
        if isinstance(loop, Loop):
            where = "outline" if hole_id is None else f"holes.{hole_id}"
            curves = loop_curves(loop, where, faults)
            rounded = {c.feature for c in curves if c.kind == "fillet"}
            corners += [(c.id, c.at) for c in loop.corners if c.id not in rounded]
        else:
            curves = _plain_hole(loop, faults)
        if sum(_area_under(c.curve) for c in curves) < 0.0:  # drawn clockwise
            curves = [_turned(c) for c in reversed(curves)]
        if hole_id is not None:
            curves = [_turned(c) for c in reversed(curves)]
        loops.append((len(pieces), len(pieces) + len(curves)))
        pieces += [BoundaryCurve(c.feature, c.kind, c.curve, number) for c in curves]
        hole_ids.append(hole_id)
    if faults:
        raise InvalidPartError.of(tuple(faults))
    return Shape(tuple(pieces), tuple(loops), tuple(hole_ids), tuple(corners))


def edge_curves(loop: Loop) -> list[Curve]:
    """The edges of a loop before any round is worked in, in drawing order."""
    curves: list[Curve] = []
    for i, edge in enumerate(loop.edges):
        start, end = loop.corners[i].at, loop.corners[(i + 1) % len(loop.corners)].at
        if edge.through is None:
            curves.append(Segment(start, end))
        else:
            curves.append(arc_through(start, edge.through, end))
    return curves


def loop_curves(loop: Loop, where: str, faults: list[Fault]) -> list[BoundaryCurve]:
    """Edges and fillets of a loop in drawing order; what does not fit is added to `faults`."""
    n = len(loop.corners)
    curves = edge_curves(loop)
    for edge, curve in zip(loop.edges, curves, strict=True):
        if not (math.isfinite(curve.length) and curve.length > 0.0):
            faults.append(
                Fault(
                    f"edge {edge.id} has no length",
                    "move one of its corners or remove it",
                    f"{where}.edges.{edge.id}",
                    (edge.id,),
                )
            )
            return []
    begin, end = [0.0] * n, [1.0] * n  # what is left of each edge after rounding
    fillets: list[Arc | None] = [None] * n
    for i, corner in enumerate(loop.corners):
        if corner.round == 0.0:
            continue
        field = f"{where}.corners.{corner.id}.round"
        if not (math.isfinite(corner.round) and corner.round > 0.0):
            faults.append(
                Fault(
                    f"the round of corner {corner.id} is {corner.round:g} mm",
                    "give a radius above zero, or 0 for a sharp corner",
                    field,
                    (corner.id,),
                    corner.at,
                )
            )
            continue
        fillet = _fillet(curves[i - 1], curves[i], corner.round)
        if fillet is None:
            faults.append(
                Fault(
                    f"a round of {corner.round:g} mm does not fit at corner {corner.id}",
                    "make the round smaller, or 0",
                    field,
                    (corner.id,),
                    corner.at,
                )
            )
            continue
        arc, t_before, t_after = fillet
        fillets[i] = arc
        end[i - 1], begin[i] = t_before, t_after
    for i, edge in enumerate(loop.edges):
        if end[i] < begin[i] - 1e-9:
            a, b = loop.corners[i], loop.corners[(i + 1) % n]
            spare = curves[i].length
            need = spare * (begin[i] + 1.0 - end[i])
            both = [c for c in (a, b) if c.round > 0.0]
            names = " and ".join(c.id for c in both)
            faults.append(
                Fault(
                    f"the rounds at {names} need {need:.4g} mm of edge {edge.id}, "
                    f"which is {spare:.4g} mm long",
                    f"make the rounds at most {max(c.round for c in both) * spare / need:.4g} mm",
                    f"{where}.corners.{both[0].id}.round",
                    (*(c.id for c in both), edge.id),
                    both[0].at,
                )
            )
    pieces: list[BoundaryCurve] = []
    for i, edge in enumerate(loop.edges):
        if (fillet_arc := fillets[i]) is not None:
            pieces.append(BoundaryCurve(loop.corners[i].id, "fillet", fillet_arc, 0))
        if end[i] - begin[i] > 1e-9:  # an edge may vanish between two full rounds
            rest = curves[i].part(begin[i], end[i])
            pieces.append(BoundaryCurve(edge.id, "edge", rest, 0))
    return pieces


def _fillet(before: Curve, after: Curve, radius: float) -> tuple[Arc, float, float] | None:
    """The arc of `radius` that is tangent to both curves near their common corner.

    Returns the arc, run from `before` to `after`, and the parameters at which it touches each.
    """
    if isinstance(before, Segment) and isinstance(after, Segment):
        return _fillet_of_lines(before, after, radius)
    t_in, t_out = before.tangent(1.0), after.tangent(0.0)
    turn = float(t_in[0] * t_out[1] - t_in[1] * t_out[0])
    if abs(turn) < 1e-7:
        return None
    side = math.copysign(1.0, turn)  # the centre lies on this side of both curves (+: left)
    corner = np.asarray(after.point(0.0))
    best: tuple[float, Arc, float, float] | None = None
    for centre in _offset_crossings(before, after, side * radius):
        t1, t2 = before.nearest(centre), after.nearest(centre)
        p1, p2 = before.point(t1), after.point(t2)
        slack = 1e-7 * max(radius, 1e-9)
        if (
            abs(math.dist(p1, centre) - radius) > slack
            or abs(math.dist(p2, centre) - radius) > slack
        ):
            continue
        begin = math.atan2(p1[1] - centre[1], p1[0] - centre[0])
        stop = math.atan2(p2[1] - centre[1], p2[0] - centre[0])
        sweep = side * ((stop - begin) * side % (2.0 * math.pi))
        if abs(sweep) >= math.pi:
            continue
        far = float(np.hypot(*(np.asarray(centre) - corner)))
        if best is None or far < best[0]:
            best = far, Arc(centre, radius, begin, sweep), t1, t2
    return best[1:] if best else None


def _fillet_of_lines(
    before: Segment, after: Segment, radius: float
) -> tuple[Arc, float, float] | None:
    """The same for two straight edges, in plain floats: a part can have thousands."""
    (ax, ay), (bx, by), (cx, cy) = before.start, before.end, after.end
    len1, len2 = before.length, after.length
    ux, uy, vx, vy = (bx - ax) / len1, (by - ay) / len1, (cx - bx) / len2, (cy - by) / len2
    sine = ux * vy - uy * vx
    if abs(sine) < 1e-7:
        return None
    side = math.copysign(1.0, sine)  # the centre lies on this side of both edges (+: left)
    turn = math.atan2(sine, ux * vx + uy * vy)
    back = radius * math.tan(abs(turn) / 2.0)  # from the corner to where the fillet touches
    if back > min(len1, len2) * (1.0 + 1e-9):
        return None
    begin = math.atan2(-side * ux, side * uy)
    centre = (bx - back * ux - side * radius * uy, by - back * uy + side * radius * ux)
    t_before, t_after = max(0.0, 1.0 - back / len1), min(1.0, back / len2)
    return Arc(centre, radius, begin, turn), t_before, t_after


def _offset_crossings(a: Curve, b: Curve, left: float) -> list[Point]:
    """Points at the signed distance `left` to the left of both curves (extended), one an arc."""
    if isinstance(a, Segment) and isinstance(b, Arc):
        p, d = _offset_line(a, left)
        return _line_circle(p, d, b.centre, _offset_radius(b, left))
    if isinstance(a, Arc) and isinstance(b, Segment):
        p, d = _offset_line(b, left)
        return _line_circle(p, d, a.centre, _offset_radius(a, left))
    assert isinstance(a, Arc)
    assert isinstance(b, Arc)
    return _circle_circle(a.centre, _offset_radius(a, left), b.centre, _offset_radius(b, left))


def _offset_line(s: Segment, left: float) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    d = s.tangent(0.0)
    return np.asarray(s.start) + left * np.array([-d[1], d[0]]), d


def _offset_radius(arc: Arc, left: float) -> float:
    return arc.radius - math.copysign(1.0, arc.sweep) * left


def _line_circle(
    p: NDArray[np.float64], d: NDArray[np.float64], centre: Point, radius: float
) -> list[Point]:
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


def _circle_circle(c1: Point, r1: float, c2: Point, r2: float) -> list[Point]:
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


def _plain_hole(hole: CircleHole | SlotHole, faults: list[Fault]) -> list[BoundaryCurve]:
    """A circle (four quarter arcs) or slot, counter-clockwise."""
    sizes = (
        {"diameter": hole.diameter}
        if isinstance(hole, CircleHole)
        else {"length": hole.length, "width": hole.width}
    )
    for name, value in sizes.items():
        if not (math.isfinite(value) and value > 0.0):
            faults.append(
                Fault(
                    f"the {name} of hole {hole.id} is {value:g} mm",
                    f"give a {name} above zero",
                    f"holes.{hole.id}.{name}",
                    (hole.id,),
                    hole.centre,
                )
            )
            return []
    if isinstance(hole, CircleHole) or hole.length == hole.width:
        radius = (hole.diameter if isinstance(hole, CircleHole) else hole.width) / 2.0
        quarter = math.pi / 2.0
        return [
            BoundaryCurve(hole.id, "hole", Arc(hole.centre, radius, i * quarter, quarter), 0)
            for i in range(4)
        ]
    if hole.length < hole.width:
        faults.append(
            Fault(
                f"slot {hole.id} is {hole.length:g} mm long but {hole.width:g} mm wide",
                "make the overall length at least the width, or turn the slot by 90°",
                f"holes.{hole.id}.length",
                (hole.id,),
                hole.centre,
            )
        )
        return []
    angle, radius = math.radians(hole.angle), hole.width / 2.0
    half = (hole.length - hole.width) / 2.0
    cx, cy, c, s = *hole.centre, math.cos(angle), math.sin(angle)
    far, near = (cx + half * c, cy + half * s), (cx - half * c, cy - half * s)
    quarter = math.pi / 2.0
    ends = [
        Arc(far, radius, angle - quarter, quarter),
        Arc(far, radius, angle, quarter),
        Arc(near, radius, angle + quarter, quarter),
        Arc(near, radius, angle + 2.0 * quarter, quarter),
    ]
    chain: list[Curve] = [
        *ends[:2],
        Segment(ends[1].end, ends[2].start),
        *ends[2:],
        Segment(ends[3].end, ends[0].start),
    ]
    return [BoundaryCurve(hole.id, "hole", curve, 0) for curve in chain]


def _turned(piece: BoundaryCurve) -> BoundaryCurve:
    return BoundaryCurve(piece.feature, piece.kind, piece.curve.reversed(), piece.loop)


def _extremes(curve: Curve) -> list[Point]:
    """Both ends of a curve and the points of an arc that lie farthest along an axis."""
    points = [curve.start, curve.end]
    if isinstance(curve, Arc):
        (x, y), r, way = curve.centre, curve.radius, math.copysign(1.0, curve.sweep)
        for i, (dx, dy) in enumerate(((r, 0.0), (0.0, r), (-r, 0.0), (0.0, -r))):
            if (0.5 * math.pi * i - curve.begin) * way % (2.0 * math.pi) < abs(curve.sweep):
                points.append((x + dx, y + dy))
    return points


def _area_under(curve: Curve) -> float:
    """The curve's share of the area by Green's theorem: half the integral of x dy - y dx [mm²]."""
    (x0, y0), (x1, y1) = curve.start, curve.end
    if isinstance(curve, Segment):
        return 0.5 * (x0 * y1 - x1 * y0)
    (cx, cy), r = curve.centre, curve.radius
    return 0.5 * (r * r * curve.sweep + cx * (y1 - y0) - cy * (x1 - x0))


def _flatten(curve: Curve, tolerance: float) -> NDArray[np.float64]:
    """Points along the curve without its last one (the next piece brings it)."""
    if isinstance(curve, Segment):
        return curve.point([0.0])
    step = 2.0 * math.acos(max(0.0, 1.0 - tolerance / curve.radius))
    n = max(2, math.ceil(abs(curve.sweep) / max(step, 1e-3)))
    return curve.point(np.linspace(0.0, 1.0, n + 1)[:-1])
