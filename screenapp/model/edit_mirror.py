"""Mirrored copies: of holes about a line, and of a half outline about one of its edges."""

from __future__ import annotations

import math
from collections.abc import Iterable
from dataclasses import dataclass, replace

from screenapp.model.curves import Arc, Curve, Segment
from screenapp.model.edit_copies import holes_of, with_fresh_ids
from screenapp.model.edit_places import drop_from_places
from screenapp.model.edit_rules import (
    EditError,
    Outcome,
    loop_of,
    must_be_point,
    must_find,
    new_id,
    new_ids,
    settle,
)
from screenapp.model.errors import InvalidPartError
from screenapp.model.loop_curves import edge_curves
from screenapp.model.mirrored_records import Images, with_images
from screenapp.model.part import CircleHole, Corner, Edge, Hole, Loop, LoopHole, Part, Point
from screenapp.model.pattern import BoltCircle, GridPattern, Pattern, RowPattern
from screenapp.model.shape import shape_of


@dataclass(frozen=True)
class MirrorLine:
    """A line by a point [mm] at an angle [deg]."""

    by: Point
    angle: float

    def of(self, p: Point) -> Point:
        """The mirror image of a point."""
        c, s = self._direction
        x, y = p[0] - self.by[0], p[1] - self.by[1]
        along = 2.0 * (x * c + y * s)
        return must_be_point(
            (self.by[0] + along * c - x, self.by[1] + along * s - y), "the mirror image"
        )

    def vector(self, x: float, y: float) -> Point:
        """The mirror image of a vector."""
        c, s = self._direction
        along = 2.0 * (x * c + y * s)
        return along * c - x + 0.0, along * s - y + 0.0

    def turned(self, angle: float) -> float:
        """The mirror image of a direction [deg]."""
        return 2.0 * self.angle - angle

    @property
    def _direction(self) -> Point:
        quarter = self.angle / 90.0
        if quarter == round(quarter):  # exact about an upright or level line
            return ((1.0, 0.0), (0.0, 1.0))[round(quarter) % 2]
        return math.cos(math.radians(self.angle)), math.sin(math.radians(self.angle))


def mirror_line_between(a: Point, b: Point) -> MirrorLine:
    """The line by two points.

    Raises:
        EditError: they are one.
    """
    if math.dist(a, b) <= 1e-9:
        raise EditError("the two points of the mirror line are one", "choose them farther apart")
    return MirrorLine(a, math.degrees(math.atan2(b[1] - a[1], b[0] - a[0])))


def mirror_line_of(part: Part, edge: str) -> MirrorLine:
    """The line of a straight edge.

    Raises:
        EditError: it is an arc.
    """
    found = must_find(part, edge, "edge")
    loop = loop_of(part, found.owner)
    i = [e.id for e in loop.edges].index(edge)
    if loop.edges[i].through is not None:
        raise EditError(f"edge {edge} is an arc", "choose a straight edge to mirror about")
    return mirror_line_between(loop.corners[i].at, loop.corners[(i + 1) % len(loop.corners)].at)


def mirror_holes(part: Part, ids: Iterable[str], line: MirrorLine) -> Part:
    """Add mirrored copies of the named holes.

    Raises:
        EditError: no hole is named.
    """
    holes = holes_of(part, ids)
    if not holes:
        raise EditError("there is no hole in what is selected", "select the holes to mirror")
    for hole in holes:
        copy = with_fresh_ids(part, mirrored_hole(hole, line))
        part = settle(part, replace(part, holes=(*part.holes, copy)))
    return part


def mirrored_hole(hole: Hole, line: MirrorLine) -> Hole:
    """The mirror image of a hole, a pattern too; its ids are the same."""
    if isinstance(hole, LoopHole):
        return LoopHole(hole.id, mirrored_loop(hole.loop, line))
    pattern = None if hole.pattern is None else _mirrored_pattern(hole.pattern, line)
    centre = line.of(hole.centre)
    if isinstance(hole, CircleHole):
        return replace(hole, centre=centre, pattern=pattern)
    return replace(hole, centre=centre, angle=line.turned(hole.angle), pattern=pattern)


def mirrored_loop(loop: Loop, line: MirrorLine) -> Loop:
    """The mirror image of a loop; it runs the other way round."""
    return Loop(
        tuple(replace(c, at=line.of(c.at)) for c in loop.corners),
        tuple(
            replace(e, through=None if e.through is None else line.of(e.through))
            for e in loop.edges
        ),
    )


def _mirrored_pattern(pattern: Pattern, line: MirrorLine) -> Pattern:
    if isinstance(pattern, RowPattern):
        return replace(pattern, angle=line.turned(pattern.angle))
    if isinstance(pattern, GridPattern):
        return replace(pattern, angle=line.turned(pattern.angle), pitch_y=-pattern.pitch_y)
    assert isinstance(pattern, BoltCircle)
    return replace(pattern, start=line.turned(pattern.start))


def mirror_half(part: Part, edge: str) -> Outcome:
    """Make a whole part of a half: outline, holes and zones are mirrored about a straight edge.

    The edge itself goes, with what stands on it.  Where an edge meets the line squarely it runs on
    as one edge with its own id.  Supports and loads are mirrored (`mirrored_records`); weight, spin
    and a change of temperature act on the whole as they are.

    Raises:
        EditError: the edge is not of the outline, or an arc.
    """
    found = must_find(part, edge, "edge")
    if found.group != "outline.edges":
        raise EditError(f"edge {edge} is not of the outline", "choose an edge of the outline")
    line = mirror_line_of(part, edge)
    images = Images()
    after = replace(part, outline=_whole_outline(part, edge, line, images))
    for hole in part.holes:
        copy = with_fresh_ids(after, mirrored_hole(hole, line))
        after = replace(after, holes=(*after.holes, copy))
        images.of.update(_paired(hole, copy))
    for zone in part.zones:
        form = with_fresh_ids(after, mirrored_hole(zone.form, line))
        copy_of = replace(zone, form=replace(form, id=new_id(after, "z")))
        after = replace(after, zones=(*after.zones, copy_of))
        images.zones[zone.id] = copy_of.id
    assert part.outline is not None
    assert after.outline is not None
    bare = drop_from_places(after, _ids(part.outline) - _ids(after.outline))
    try:
        shape = shape_of(bare.part)
    except InvalidPartError:  # its lengths are not known: supports and loads stay on their half
        return Outcome(settle(part, bare.part), bare.lost)
    upright = line.angle / 90.0 == round(line.angle / 90.0)
    whole, lost = with_images(bare.part, shape, images, line.vector, line.turned, upright)
    return Outcome(settle(part, whole), bare.lost + lost)


def _paired(hole: Hole, copy: Hole) -> dict[str, str]:
    """The ids of a hole, its corners and edges, and those of its copy."""
    found = {hole.id: copy.id}
    if isinstance(hole, LoopHole) and isinstance(copy, LoopHole):
        one, other = hole.loop, copy.loop
        found.update({a.id: b.id for a, b in zip(one.corners, other.corners, strict=True)})
        found.update({a.id: b.id for a, b in zip(one.edges, other.edges, strict=True)})
    return found


def _ids(loop: Loop) -> set[str]:
    return {c.id for c in loop.corners} | {e.id for e in loop.edges}


def _whole_outline(part: Part, edge: str, line: MirrorLine, images: Images) -> Loop:
    """The outline of the whole; which of its places mirror which goes into `images`."""
    assert part.outline is not None
    loop = part.outline
    n = len(loop.corners)
    k = [e.id for e in loop.edges].index(edge) + 1
    corners = [*loop.corners[k:], *loop.corners[:k]] if k < n else list(loop.corners)
    edges = [*loop.edges[k:], *loop.edges[: k - 1]] if k < n else list(loop.edges[:-1])
    image = mirrored_loop(loop, line)
    by_id = {c.id: c for c in image.corners}
    c_ids, e_ids = new_ids(part, "c", n), new_ids(part, "e", n)
    others = [replace(by_id[c.id], id=i) for c, i in zip(corners[1:-1], c_ids, strict=False)]
    through = {e.id: e.through for e in image.edges}
    back = [Edge(i, through[e.id]) for e, i in zip(edges, e_ids, strict=False)]
    whole = Loop((*corners, *reversed(others)), (*edges, *reversed(back)))
    for corner in (corners[0], corners[-1]):
        whole = _run_on(whole, corner)
    here = _ids(whole)
    images.of.update({c.id: o.id for c, o in zip(corners[1:-1], others, strict=True)})
    images.of.update({c.id: c.id for c in (corners[0], corners[-1]) if c.id in here})
    for number, (own, twin) in enumerate(zip(edges, back, strict=True)):
        if twin.id in here:
            images.of[own.id] = twin.id
            images.turned.add(own.id)
        else:
            images.of[own.id] = own.id
            images.joined[own.id] = number == 0
    return whole


def _run_on(loop: Loop, corner: Corner) -> Loop:
    """The loop without a corner in which one edge runs straight (or round) on."""
    n = len(loop.corners)
    i = [c.id for c in loop.corners].index(corner.id)
    curves = edge_curves(loop)
    before, after = curves[i - 1], curves[i]
    if n <= 3 or not _one_line(before, after):
        return loop
    kept, gone = loop.edges[i - 1], loop.edges[i]
    if i == 0:  # the original edge runs away from the line here
        kept, gone = gone, kept
    bent = isinstance(before, Arc)
    joined = Edge(kept.id, corner.at if bent else None)
    edges = tuple(joined if e is kept else e for e in loop.edges if e is not gone)
    corners = tuple(c for c in loop.corners if c.id != corner.id)
    if i == 0:  # corner 0 goes: the joined edge ends where the original one ended
        edges = (*edges[1:], edges[0])
    return Loop(corners, edges)


def _one_line(a: Curve, b: Curve) -> bool:
    if a.length == 0.0 or b.length == 0.0:  # two corners at one place, a fault of their own
        return False
    u, v = a.tangent(1.0), b.tangent(0.0)
    if abs(float(u[0] * v[1] - u[1] * v[0])) > 1e-9 or float(u @ v) < 0.0:
        return False
    if isinstance(a, Segment) or isinstance(b, Segment):
        return isinstance(a, Segment) and isinstance(b, Segment)
    near = 1e-9 * a.radius
    alike = abs(a.radius - b.radius) <= near and math.dist(a.centre, b.centre) <= near
    return alike and abs(a.sweep) + abs(b.sweep) < 1.9 * math.pi
