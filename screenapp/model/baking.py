"""Fillets and chamfers made edges of their own, where something cuts into them."""

from __future__ import annotations

from collections.abc import Sequence

from screenapp.model.arrangement import meets
from screenapp.model.curves import Arc, Curve
from screenapp.model.edit_rules import new_ids
from screenapp.model.loop_curves import corner_cuts, edge_curves
from screenapp.model.part import Corner, Edge, Loop, Part, Point


def baked(loop: Loop, others: Sequence[Curve], part: Part | None = None) -> Loop:
    """The loop with edges for those fillets and chamfers that other curves come upon.

    The corner's id stays on the first of the two corners that take its place.  Ids of what is made
    are new in `part`, empty without one.  Corners of which the cut does not fit become sharp.
    """
    curves = edge_curves(loop)
    cuts = corner_cuts(loop, curves)
    hit = [i for i, c in enumerate(loop.corners) if not c.sharp and _met(i, curves, cuts, others)]
    if not hit:
        return loop
    count = len(hit)
    corner_ids = iter(new_ids(part, "c", count) if part is not None else [""] * count)
    edge_ids = iter(new_ids(part, "e", count) if part is not None else [""] * count)
    corners: list[Corner] = []
    edges: list[Edge] = []
    for i, (corner, edge) in enumerate(zip(loop.corners, loop.edges, strict=True)):
        cut = cuts.get(i)
        if i not in hit or cut is None:
            corners.append(corner if i not in hit else Corner(corner.id, corner.at))
            edges.append(edge)
            continue
        made = cut[0]
        corners += [Corner(corner.id, made.start), Corner(next(corner_ids), made.end)]
        edges += [Edge(next(edge_ids), _middle(made)), edge]
    whole = _arcs_kept(Loop(tuple(corners), tuple(edges)), loop, curves, cuts, set(hit))
    return _without_used_up(whole)


def _without_used_up(loop: Loop) -> Loop:
    """The loop without edges that two full rounds leave no length."""
    curves = edge_curves(loop)
    least = 1e-9 * max(curve.length for curve in curves)
    gone = {i for i, curve in enumerate(curves) if curve.length <= least}
    if not gone:
        return loop
    corners = tuple(c for i, c in enumerate(loop.corners) if i not in gone)
    return Loop(corners, tuple(e for i, e in enumerate(loop.edges) if i not in gone))


def _met(
    i: int,
    curves: list[Curve],
    cuts: dict[int, tuple[Curve, float, float]],
    others: Sequence[Curve],
) -> bool:
    """Whether others come upon a corner's cut or upon what it takes of the edges."""
    if i not in cuts:
        return meets([curves[i - 1], curves[i]], others)
    made, t_before, t_after = cuts[i]
    taken = [made]
    if t_before < 1.0:
        taken.append(curves[i - 1].part(t_before, 1.0))
    if t_after > 0.0:
        taken.append(curves[i].part(0.0, t_after))
    return meets(taken, others)


def _arcs_kept(
    made: Loop,
    old: Loop,
    curves: list[Curve],
    cuts: dict[int, tuple[Curve, float, float]],
    hit: set[int],
) -> Loop:
    """Arc edges shortened by a cut get an arc point between their new ends."""
    n = len(old.edges)
    through: dict[int, Point | None] = {}
    for i, curve in enumerate(curves):
        begin = cuts[i][2] if i in hit and i in cuts else 0.0
        end = cuts[(i + 1) % n][1] if (i + 1) % n in hit and (i + 1) % n in cuts else 1.0
        if isinstance(curve, Arc) and (begin, end) != (0.0, 1.0):
            through[i] = _middle(curve.part(begin, end))
    edges = list(made.edges)
    for i, point in through.items():
        k = next(k for k, e in enumerate(edges) if e is old.edges[i])
        edges[k] = Edge(old.edges[i].id, point)
    return Loop(made.corners, tuple(edges))


def _middle(curve: Curve) -> Point | None:
    if not isinstance(curve, Arc):
        return None
    x, y = curve.point(0.5)
    return float(x), float(y)
