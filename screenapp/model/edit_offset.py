"""Moving an edge along its own normal, its neighbours made longer or shorter to meet it."""

from __future__ import annotations

from dataclasses import replace

from screenapp.model.carriers import carrier_meeting
from screenapp.model.curves import Arc, Curve, Segment, arc_about
from screenapp.model.edit_rules import (
    EditError,
    loop_of,
    must_be_point,
    must_find,
    settle,
    with_loop,
)
from screenapp.model.loop_curves import edge_curves, runs_clockwise
from screenapp.model.part import Loop, Part, Point


def offset_edge(part: Part, edge: str, distance: float) -> Part:
    """Move an edge by a distance [mm], outwards (more material) if it is positive.

    Straight edges stay parallel, arcs concentric; the edges beside it keep their own line or
    circle.  All ids stay.

    Raises:
        EditError: an arc would have no radius left, or a neighbour does not meet the moved edge.
    """
    found = must_find(part, edge, "edge")
    loop = loop_of(part, found.owner)
    n = len(loop.corners)
    i = [e.id for e in loop.edges].index(edge)
    curves = edge_curves(loop)
    outline = found.group == "outline.edges" or found.inside
    material_left = runs_clockwise(loop) != outline
    moved = _moved(curves[i], distance if material_left else -distance, edge)
    ends: list[Point] = []
    for k, corner in ((i - 1, loop.corners[i]), (i + 1, loop.corners[(i + 1) % n])):
        at = carrier_meeting(curves[k % n], moved, corner.at)
        if at is None:
            raise EditError(
                f"edge {loop.edges[k % n].id} would not meet the moved edge {edge}",
                "move it less, or remove the corner between the two",
            )
        ends.append(must_be_point(at, f"corner {corner.id}"))
    corners = list(loop.corners)
    corners[i] = replace(corners[i], at=ends[0])
    corners[(i + 1) % n] = replace(corners[(i + 1) % n], at=ends[1])
    edges = list(loop.edges)
    for k in {(i - 1) % n, i, (i + 1) % n}:
        curve = moved if k == i else curves[k]
        if isinstance(curve, Arc):
            along = arc_about(
                curve.centre, corners[k].at, corners[(k + 1) % n].at, left=curve.sweep > 0.0
            )
            x, y = along.point(0.5)
            edges[k] = replace(edges[k], through=(float(x), float(y)))
    return settle(part, with_loop(part, found.owner, Loop(tuple(corners), tuple(edges))))


def _moved(curve: Curve, right: float, edge: str) -> Curve:
    """The curve moved to its right by a distance [mm]."""
    if isinstance(curve, Segment):
        u = curve.tangent(0.0)
        dx, dy = right * float(u[1]), -right * float(u[0])
        (ax, ay), (bx, by) = curve.start, curve.end
        return Segment((ax + dx, ay + dy), (bx + dx, by + dy))
    radius = curve.radius + (right if curve.sweep > 0.0 else -right)
    if radius <= 0.0:
        raise EditError(
            f"the arc of edge {edge} has a radius of {curve.radius:.4g} mm only",
            "move it by less than that",
        )
    return replace(curve, radius=radius)
