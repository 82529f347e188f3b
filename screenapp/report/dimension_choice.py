"""Which dimensions the record's drawing shows: the board's, and those of patterns and zones."""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import replace

from screenapp.model.curves import Arc
from screenapp.model.dimension_marks import Mark, marks_of
from screenapp.model.features import loops_of
from screenapp.model.members import members
from screenapp.model.part import CircleHole, Part, Point, SlotHole
from screenapp.model.pattern import BoltCircle, GridPattern, RowPattern
from screenapp.model.shape import BoundaryCurve, Shape

DIAMETER = "⌀\u2009"

RIGHT = "chamfer of 45°"
"""Name of the mark of a chamfer that takes as much of two edges at right angles."""


class Outlined:
    """A part with its exact boundary, as the choice of dimensions asks for it."""

    def __init__(self, part: Part, shape: Shape) -> None:
        self._part, self._shape = part, shape

    @property
    def part(self) -> Part:
        """The part."""
        return self._part

    @property
    def exact_bounds(self) -> tuple[float, float, float, float]:
        """Smallest x, y and largest x, y [mm] of the outline."""
        return self._shape.bounds

    def pieces_of(self, feature: str) -> Sequence[BoundaryCurve]:
        """Pieces of an edge, a fillet or a hole."""
        return [self._shape.curves[i] for i in self._shape.pieces_of(feature)]


Group = tuple[Mark, ...]
"""Marks that are alike, of which the drawing shows one: its lead tells their number."""

MOST_ALIKE = 24
"""No more of a group are tried."""


def drawing_marks(part: Part, shape: Shape) -> tuple[Group, ...]:
    """All dimensions of the record's drawing, the most wanted first: overall sizes, places and
    sizes of holes, then patterns, zones and what is done to corners."""
    outlined = Outlined(part, shape)
    marks = [replace(mark, given=False) for mark in marks_of(outlined, (), True)]
    linear = [(mark,) for mark in marks if mark.what in ("overall", "place", "size")]
    return (
        *linear,
        *_holes(part),
        *((mark,) for mark in _patterns(part)),
        *_zones(part),
        *_fillets(part, outlined),
        *_alike((mark for mark in marks if mark.what == "arc"), "R\u2009"),
        *_chamfers(part, outlined),
    )


def _alike(marks: Iterable[Mark], lead: str) -> Iterator[Group]:
    """Marks in groups of one size and name, told with their number: "4 × R 5"."""
    groups: dict[tuple[str, str], list[Mark]] = {}
    for mark in marks:
        groups.setdefault((f"{mark.value:.9g}", mark.name), []).append(mark)
    for same in groups.values():
        told = f"{len(same)} × {lead}" if len(same) > 1 else lead
        yield tuple(replace(mark, lead=told) for mark in same[:MOST_ALIKE])


def _holes(part: Part) -> Iterator[Group]:
    round_ones = (h for hole in part.holes for h in members(hole) if isinstance(h, CircleHole))
    return _alike((_diameter(h.id, h.centre, h.diameter) for h in round_ones), DIAMETER)


def _fillets(part: Part, outlined: Outlined) -> Iterator[Group]:
    """Rounded corners."""

    def marks() -> Iterator[Mark]:
        for _, _, loop in loops_of(part):
            for corner in loop.corners:
                for piece in outlined.pieces_of(corner.id) if corner.round > 0.0 else ():
                    if isinstance(piece.curve, Arc):
                        x, y = map(float, piece.curve.point(0.5))
                        (cx, cy), r = piece.curve.centre, piece.curve.radius
                        out = ((x - cx) / r, (y - cy) / r)
                        ends, name, size = ((cx, cy), (x, y)), "radius", corner.round
                        yield Mark("radius", corner.id, name, size, *ends, out, out, -1)

    return _alike(marks(), "R\u2009")


def _patterns(part: Part) -> Iterator[Mark]:
    """The pitch of rows and grids, and the circle that a bolt circle stands on."""
    for hole in part.holes:
        if not isinstance(hole, CircleHole | SlotHole) or hole.pattern is None:
            continue
        pattern, at = hole.pattern, hole.centre
        if isinstance(pattern, BoltCircle):
            yield _diameter(f"{hole.id} circle", at, 2.0 * pattern.radius)
        elif isinstance(pattern, RowPattern):
            yield _pitch(hole.id, "pitch", at, pattern.count, pattern.pitch, pattern.angle)
        elif isinstance(pattern, GridPattern):
            turn = pattern.angle
            yield _pitch(hole.id, "pitch_x", at, pattern.columns, pattern.pitch_x, turn)
            yield _pitch(hole.id, "pitch_y", at, pattern.rows, pattern.pitch_y, turn + 90.0)


def _pitch(of: str, name: str, at: Point, count: int, pitch: float, angle: float) -> Mark:
    """From the first to the last of a row: "4 × 20"."""
    c, s = math.cos(math.radians(angle)), math.sin(math.radians(angle))
    long = (count - 1) * pitch
    end = at[0] + long * c, at[1] + long * s
    lead = f"{count - 1} × " if count > 2 else ""
    away = (s, -c) if name == "pitch_y" else (-s, c)
    return Mark("size", of, name, pitch, at, end, (c, s), away, 0, lead)


def _zones(part: Part) -> Iterator[Group]:
    forms = (zone.form for zone in part.zones if isinstance(zone.form, CircleHole))
    return _alike((_diameter(f.id, f.centre, f.diameter) for f in forms), f"zone {DIAMETER}")


def _chamfers(part: Part, outlined: Outlined) -> Iterator[Group]:
    """Corners that are cut off: "2 × 15 × 45°" where the corner is a right one."""

    def marks() -> Iterator[Mark]:
        for _, _, loop in loops_of(part):
            ring = [c.at for c in loop.corners]
            for k, corner in enumerate(loop.corners):
                pieces = outlined.pieces_of(corner.id) if corner.chamfer > 0.0 else ()
                for piece in pieces[:1]:
                    right = abs(_cosine(ring[k - 1], ring[k], ring[(k + 1) % len(ring)])) < 1e-6
                    (x, y), (dx, dy) = piece.curve.point(0.5), piece.curve.tangent(0.5)
                    out = (float(dy), -float(dx))  # the material is on the left
                    at, inside = (float(x), float(y)), (float(x) - out[0], float(y) - out[1])
                    name = RIGHT if right else "chamfer"
                    yield Mark("radius", corner.id, name, corner.chamfer, inside, at, out, out, -1)

    for group in _alike(marks(), ""):
        plain = group[0].name != RIGHT
        yield tuple(replace(m, lead=m.lead + "chamfer ") if plain else m for m in group)


def _cosine(before: Point, at: Point, after: Point) -> float:
    """Of the angle between the two edges of a corner."""
    ux, uy, vx, vy = before[0] - at[0], before[1] - at[1], after[0] - at[0], after[1] - at[1]
    return (ux * vx + uy * vy) / (math.hypot(ux, uy) * math.hypot(vx, vy) or 1.0)


def _diameter(of: str, at: Point, diameter: float) -> Mark:
    slant = (math.cos(math.radians(40.0)), math.sin(math.radians(40.0)))
    r = diameter / 2.0
    a, b = ((at[0] + s * r * slant[0], at[1] + s * r * slant[1]) for s in (-1.0, 1.0))
    return Mark("diameter", of, "diameter", diameter, a, b, slant, slant, -1, DIAMETER)


def hole_axes(part: Part) -> Iterator[tuple[Point, float]]:
    """Centre and radius [mm] of every round hole, for its centre lines."""
    for hole in part.holes:
        for one in members(hole):
            if isinstance(one, CircleHole):
                yield one.centre, one.diameter / 2.0


def bolt_circles(part: Part) -> Iterator[tuple[Point, float]]:
    """Centre and radius [mm] of the circles that holes stand on."""
    for hole in part.holes:
        if isinstance(hole, CircleHole | SlotHole) and isinstance(hole.pattern, BoltCircle):
            yield hole.centre, hole.pattern.radius
