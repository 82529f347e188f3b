"""Edits of outlines and loop holes: corners, edges, rounds and arcs."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import replace

from screenapp.model.curves import Arc, Segment, arc_through
from screenapp.model.edit_places import drop_from_places, remove_outline
from screenapp.model.edit_rules import (
    EditError,
    Outcome,
    loop_of,
    must_be_point,
    must_find,
    new_id,
    new_ids,
    settle,
    with_loop,
    without_stale_formulas,
)
from screenapp.model.part import Corner, Edge, Loop, Part, Point
from screenapp.model.shape import edge_curves


def new_loop(
    part: Part,
    corners: Sequence[Point],
    through: Sequence[Point | None] | None = None,
    round_: float = 0.0,
) -> Loop:
    """A loop with fresh ids; `through[i]` is the arc point of the edge from corner i to i + 1.

    Every corner gets a fillet of radius `round_` [mm].

    Raises:
        EditError: too few corners, or a place that is no finite point.
    """
    n = len(corners)
    arcs = list(through) if through is not None else [None] * n
    if len(arcs) != n:
        raise EditError(
            f"there are {n} corners but {len(arcs)} edges", "give one edge for each corner"
        )
    if n < 2 or (n == 2 and not any(arcs)):
        raise EditError(
            f"a loop of {n} corner{'' if n == 1 else 's'} encloses nothing",
            "draw at least three corners, or two with an arc between them",
        )
    c_ids, e_ids = new_ids(part, "c", n), new_ids(part, "e", n)
    return Loop(
        tuple(
            Corner(i, must_be_point(p, f"corner {i}"), float(round_))
            for i, p in zip(c_ids, corners, strict=True)
        ),
        tuple(
            Edge(i, None if p is None else must_be_point(p, f"the arc point of edge {i}"))
            for i, p in zip(e_ids, arcs, strict=True)
        ),
    )


def set_outline(
    part: Part,
    corners: Sequence[Point],
    through: Sequence[Point | None] | None = None,
    round_: float = 0.0,
) -> Outcome:
    """Draw the outline anew; what was on the old outline's edges and corners goes with it."""
    bare = remove_outline(part)
    after = replace(bare.part, outline=new_loop(bare.part, corners, through, round_))
    return Outcome(settle(part, after), bare.lost)


def outline_from_rectangle(part: Part, one: Point, other: Point) -> Outcome:
    """Draw the outline as a rectangle between two opposite corners, counter-clockwise."""
    return set_outline(part, rectangle_corners(one, other))


def rectangle_corners(one: Point, other: Point) -> list[Point]:
    """The four corners of an upright rectangle, counter-clockwise from the lower left."""
    (x0, x1), (y0, y1) = sorted((one[0], other[0])), sorted((one[1], other[1]))
    if not (x1 > x0 and y1 > y0):
        raise EditError("the rectangle has no area", "choose a corner away from the first one")
    return [(x0, y0), (x1, y0), (x1, y1), (x0, y1)]


def move_corner(part: Part, corner: str, to: Point) -> Part:
    """Move one corner; arcs beside it keep the angle they turn through."""
    found = must_find(part, corner, "corner")
    loop = loop_of(part, found.owner)
    moved = moved_loop(loop, {corner: must_be_point(to, f"corner {corner}")})
    return without_stale_formulas(part, with_loop(part, found.owner, moved))


def moved_loop(loop: Loop, to: dict[str, Point]) -> Loop:
    """The loop with some corners elsewhere; each arc follows its chord."""
    old, n = loop.corners, len(loop.corners)
    moved = [i for i, c in enumerate(old) if c.id in to]
    corners, edges = list(old), list(loop.edges)
    for i in moved:
        corners[i] = replace(old[i], at=to[old[i].id])
    for i in {k % n for m in moved for k in (m - 1, m)}:  # the edges on either side
        j = (i + 1) % n
        if (through := edges[i].through) is not None:
            chord, new = (old[i].at, old[j].at), (corners[i].at, corners[j].at)
            edges[i] = replace(edges[i], through=_carried(through, chord, new))
    return Loop(tuple(corners), tuple(edges))


def _carried(through: Point, old: tuple[Point, Point], new: tuple[Point, Point]) -> Point:
    """The arc point after its chord moved: turned and scaled with the chord."""
    a, b, p = complex(*old[0]), complex(*old[1]), complex(*through)
    c, d = complex(*new[0]), complex(*new[1])
    shift = c - a
    if b - a == 0 or abs((d - b) - shift) < 1e-15 * max(1.0, abs(shift)):
        q = p + shift
    else:
        q = c + (p - a) * ((d - c) / (b - a))
    return q.real, q.imag


def set_round(part: Part, corner: str, radius: float) -> Part:
    """Give a corner a fillet of `radius` [mm], in place of a chamfer; 0 makes it sharp.

    A radius that does not fit is kept: the part's faults say so and by how much.
    """
    return _with_cut(part, corner, float(radius), 0.0)


def set_chamfer(part: Part, corner: str, length: float) -> Part:
    """Cut a corner off by a straight chamfer that takes `length` [mm] of both edges; 0: sharp.

    A length that does not fit is kept: the part's faults say so.  A round goes.
    """
    return _with_cut(part, corner, 0.0, float(length))


def _with_cut(part: Part, corner: str, radius: float, chamfer: float) -> Part:
    found = must_find(part, corner, "corner")
    loop = loop_of(part, found.owner)
    corners = tuple(
        replace(c, round=radius, chamfer=chamfer) if c.id == corner else c for c in loop.corners
    )
    return settle(part, with_loop(part, found.owner, replace(loop, corners=corners)))


def set_edge_arc(part: Part, edge: str, through: Point) -> Part:
    """Bend an edge to the arc that passes `through` a point; on the chord it becomes straight."""
    found = must_find(part, edge, "edge")
    loop = loop_of(part, found.owner)
    i = _edge_index(loop, edge)
    point = must_be_point(through, f"the arc point of edge {edge}")
    a, b = loop.corners[i].at, loop.corners[(i + 1) % len(loop.corners)].at
    curve = arc_through(a, point, b)
    straight = isinstance(curve, Segment) and a != b and 0.0 < curve.nearest(point) < 1.0
    return settle(part, _with_edge(part, found.owner, i, None if straight else point))


def straighten(part: Part, edge: str) -> Part:
    """Make an edge straight."""
    found = must_find(part, edge, "edge")
    return settle(
        part, _with_edge(part, found.owner, _edge_index(loop_of(part, found.owner), edge), None)
    )


def _with_edge(part: Part, owner: str, i: int, through: Point | None) -> Part:
    loop = loop_of(part, owner)
    edges = tuple(replace(e, through=through) if k == i else e for k, e in enumerate(loop.edges))
    return with_loop(part, owner, replace(loop, edges=edges))


def insert_corner(part: Part, edge: str, at: Point) -> Part:
    """Split an edge by a sharp corner at its point nearest to `at`.

    The first piece keeps the edge's id, so that what is on the edge stays there; the second piece
    is new.  Both pieces of an arc stay on its circle.  The corner's id is `new_id(part, "c")`.

    Raises:
        EditError: the nearest point is an end of the edge.
    """
    found = must_find(part, edge, "edge")
    loop = loop_of(part, found.owner)
    i = _edge_index(loop, edge)
    curve = edge_curves(loop)[i]
    t = curve.nearest(must_be_point(at, "the new corner")) if curve.length > 0.0 else 0.0
    if min(t, 1.0 - t) * curve.length < 1e-6 * max(1.0, curve.length):
        raise EditError(
            f"there is a corner already at that end of edge {edge}",
            "choose a point between the ends of the edge",
        )
    bent = isinstance(curve, Arc)
    x, y = curve.point(t)
    corner = Corner(new_id(part, "c"), (float(x), float(y)))
    first = Edge(edge, _point(curve, t / 2.0) if bent else None)
    second = Edge(new_id(part, "e"), _point(curve, (1.0 + t) / 2.0) if bent else None)
    corners = (*loop.corners[: i + 1], corner, *loop.corners[i + 1 :])
    edges = (*loop.edges[:i], first, second, *loop.edges[i + 1 :])
    return settle(part, with_loop(part, found.owner, Loop(corners, edges)))


def remove_corner(part: Part, corner: str) -> Outcome:
    """Take a corner out and join its two edges.

    The edge before the corner stays and keeps what is on it; the one after goes with what is on
    it.  Two arcs of one circle stay an arc; otherwise the joined edge is straight.

    Raises:
        EditError: the loop would enclose nothing.
    """
    found = must_find(part, corner, "corner")
    loop = loop_of(part, found.owner)
    n = len(loop.corners)
    i = next(k for k, c in enumerate(loop.corners) if c.id == corner)
    before, after = loop.edges[i - 1], loop.edges[i]
    joined = replace(before, through=_joined_through(loop, i))
    corners = tuple(c for c in loop.corners if c.id != corner)
    edges = tuple(joined if e is before else e for e in loop.edges if e is not after)
    if n <= 2 or (n == 3 and all(e.through is None for e in edges)):
        whole = "zone" if found.inside else "hole" if found.owner else "outline"
        raise EditError(
            f"without corner {corner} the {whole} encloses nothing",
            f"remove the whole {whole}" if found.owner else "draw the outline anew",
        )
    bare = drop_from_places(part, {corner, after.id})
    result = with_loop(bare.part, found.owner, Loop(corners, edges))
    return Outcome(settle(part, result), bare.lost)


def _joined_through(loop: Loop, i: int) -> Point | None:
    """The arc point of the edges beside corner `i` joined, None if they are not of one circle."""
    curves = edge_curves(loop)
    a, b = curves[i - 1], curves[i]
    if not (isinstance(a, Arc) and isinstance(b, Arc)) or a.sweep * b.sweep < 0.0:
        return None
    near = 1e-6 * max(a.radius, b.radius)
    if abs(a.radius - b.radius) > near or math.dist(a.centre, b.centre) > near:
        return None
    return loop.corners[i].at


def _edge_index(loop: Loop, edge: str) -> int:
    return next(k for k, e in enumerate(loop.edges) if e.id == edge)


def _point(curve: Arc | Segment, t: float) -> Point:
    x, y = curve.point(t)
    return float(x), float(y)
