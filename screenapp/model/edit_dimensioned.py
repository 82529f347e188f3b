"""Edits of what a drawing dimensions as a whole: overall sizes, and lengths and radii of edges."""

from __future__ import annotations

import math

from screenapp.model.curves import Arc
from screenapp.model.edit_holes import move
from screenapp.model.edit_loops import set_edge_arc
from screenapp.model.edit_rules import EditError, loop_of, must_find
from screenapp.model.part import Edge, Part, Point
from screenapp.model.shape import edge_curves, shape_of

NEAR = 1e-9
"""Coordinates that differ by less than this share of the part's size are the same."""

SQUARE = 1e-6
"""The sine by which a corner may differ from a right angle and still be one."""


def far_corners(part: Part, axis: int) -> tuple[str, ...]:
    """The outline's corners at its largest x (axis 0) or y (axis 1).

    Raises:
        EditError: the outline ends there on an arc or a fillet, which no corner moves.
    """
    if part.outline is None:
        raise EditError("the part has no outline", "draw a closed outline")
    shape = shape_of(part)
    far = shape.bounds[2 + axis]
    found = tuple(
        c.id for c in part.outline.corners if abs(c.at[axis] - far) <= NEAR * max(1.0, shape.size)
    )
    if not found:
        raise EditError(
            f"the overall {'height' if axis else 'width'} ends on an arc or a fillet",
            "change that arc, or the corners beside it",
        )
    return found


def set_overall(part: Part, axis: int, size: float) -> Part:
    """Make the outline `size` [mm] wide (axis 0) or high (axis 1): its far side moves.

    Raises:
        EditError: the size is not above zero, or the far side ends on an arc.
    """
    if not size > 0.0:
        raise EditError("an overall size must be above zero", "give a larger one")
    corners = far_corners(part, axis)
    bounds = shape_of(part).bounds
    by = size - (bounds[2 + axis] - bounds[axis])
    return move(part, corners, *((0.0, by) if axis else (by, 0.0)))


def set_edge_length(part: Part, edge: str, length: float) -> Part:
    """Make a straight edge `length` [mm] long: its end moves along it.

    Where the next edge stands square to it, that edge moves as a whole, so that what was square
    stays square.

    Raises:
        EditError: the edge is an arc, or the length is not above zero.
    """
    if not length > 0.0:
        raise EditError(f"edge {edge} cannot be {length:g} mm long", "give a length above zero")
    loop = loop_of(part, must_find(part, edge, "edge").owner)
    n = len(loop.corners)
    i = next(k for k, e in enumerate(loop.edges) if e.id == edge)
    if loop.edges[i].through is not None:
        raise EditError(f"edge {edge} is an arc", "change its radius or its corners")
    start, end, after = (loop.corners[(i + k) % n] for k in range(3))
    old = math.dist(start.at, end.at)
    if old == 0.0:
        raise EditError(f"edge {edge} has no length", "move one of its corners")
    ux, uy = (end.at[0] - start.at[0]) / old, (end.at[1] - start.at[1]) / old
    going = [end.id]
    following = loop.edges[(i + 1) % n]
    if following.through is None and after.id != start.id and _square((ux, uy), end.at, after.at):
        going.append(after.id)
    return move(part, going, (length - old) * ux, (length - old) * uy)


def set_arc_radius(part: Part, edge: str, radius: float) -> Part:
    """Give an edge that is an arc another radius [mm]; its corners and its side stay.

    Raises:
        EditError: the edge is straight, or the radius is less than half its chord.
    """
    loop = loop_of(part, must_find(part, edge, "edge").owner)
    i = next(k for k, e in enumerate(loop.edges) if e.id == edge)
    arc = edge_curves(loop)[i]
    if not isinstance(arc, Arc):
        raise EditError(f"edge {edge} is straight", "bend it with the arc tool first")
    start, end = loop.corners[i].at, loop.corners[(i + 1) % len(loop.corners)].at
    half = math.dist(start, end) / 2.0
    if not radius > half:
        raise EditError(
            f"an arc over a chord of {2.0 * half:.4g} mm cannot have a radius of {radius:.4g} mm",
            f"give more than {half:.4g} mm",
        )
    flat = math.sqrt(radius * radius - half * half)
    rise = radius + flat if abs(arc.sweep) > math.pi else radius - flat
    crown = arc.point(0.5)
    mx, my = (start[0] + end[0]) / 2.0, (start[1] + end[1]) / 2.0
    nx, ny = (start[1] - end[1]) / (2.0 * half), (end[0] - start[0]) / (2.0 * half)
    side = math.copysign(1.0, (float(crown[0]) - mx) * nx + (float(crown[1]) - my) * ny)
    return set_edge_arc(part, edge, (mx + side * rise * nx, my + side * rise * ny))


def edge_of(part: Part, edge: str) -> tuple[Edge, Point, Point]:
    """An edge with the places of its corners [mm]."""
    loop = loop_of(part, must_find(part, edge, "edge").owner)
    i = next(k for k, e in enumerate(loop.edges) if e.id == edge)
    return loop.edges[i], loop.corners[i].at, loop.corners[(i + 1) % len(loop.corners)].at


def _square(along: Point, at: Point, to: Point) -> bool:
    away = math.dist(at, to)
    if away == 0.0:
        return False
    return abs(along[0] * (to[0] - at[0]) + along[1] * (to[1] - at[1])) / away <= SQUARE
