"""The edges of a loop with its fillets and chamfers worked in, in drawing order."""

from __future__ import annotations

import math
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from screenapp.model.boundary_curve import BoundaryCurve
from screenapp.model.carriers import circle_circle, line_circle
from screenapp.model.curves import Arc, Curve, Segment, arc_through
from screenapp.model.errors import Fault
from screenapp.model.part import Corner, Loop, Point
from screenapp.model.recent_loops import Group, RecentLoops

_RECENT = RecentLoops()

Cut = tuple[Curve, float, float]
"""What takes a corner's place, and the parameters at which it meets the edges before and after."""


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
    """Edges, fillets and chamfers in drawing order; what does not fit is added to `faults`."""
    before = len(faults)
    found = _RECENT.pieces_of(loop, where, faults, _by_edge)
    if found is None:
        found = _by_edge(loop, where, faults)
        if len(faults) == before:
            _RECENT.keep(loop, found)
    return [piece for group in found for piece in group]


def _by_edge(loop: Loop, where: str, faults: list[Fault]) -> list[Group]:
    """For each edge the fillet or chamfer of the corner before it, then what is left of it."""
    n = len(loop.corners)
    curves = edge_curves(loop)
    lengths = [curve.length for curve in curves]
    for edge, length in zip(loop.edges, lengths, strict=True):
        if not 0.0 < length < math.inf:
            faults.append(
                Fault(
                    f"edge {edge.id} has no length",
                    "move one of its corners or remove it",
                    f"{where}.edges.{edge.id}",
                    (edge.id,),
                )
            )
            return []
    begin, end = [0.0] * n, [1.0] * n  # what is left of each edge between its corners
    cuts: list[Curve | None] = [None] * n
    ready = _line_fillets(loop, curves, lengths)
    for i, corner in enumerate(loop.corners):
        if corner.sharp:
            continue
        cut = ready.get(i) or _corner_cut(corner, curves[i - 1], curves[i], where, faults)
        if cut is not None:
            cuts[i], end[i - 1], begin[i] = cut
    _faults_of_used_edges(loop, lengths, begin, end, where, faults)
    groups: list[Group] = []
    for i, edge in enumerate(loop.edges):
        pieces: Group = []
        groups.append(pieces)
        if (made := cuts[i]) is not None:
            corner = loop.corners[i]
            kind: Literal["fillet", "chamfer"] = "fillet" if corner.round > 0.0 else "chamfer"
            pieces.append(BoundaryCurve(corner.id, kind, made, 0))
        if begin[i] == 0.0 and end[i] == 1.0:
            pieces.append(BoundaryCurve(edge.id, "edge", curves[i], 0))
        elif end[i] - begin[i] > 1e-9:  # an edge may vanish between two full rounds
            rest = curves[i].part(begin[i], end[i])
            pieces.append(BoundaryCurve(edge.id, "edge", rest, 0))
    return groups


def runs_clockwise(loop: Loop) -> bool:
    """Whether a loop was drawn clockwise, by the sign of its area before rounding."""
    at = [c.at for c in loop.corners]
    x, y = np.array(at, dtype=float).reshape(-1, 2).T
    double = float(np.sum(x * np.roll(y, -1) - np.roll(x, -1) * y))
    for i, edge in enumerate(loop.edges):
        if edge.through is not None and isinstance(
            arc := arc_through(at[i], edge.through, at[(i + 1) % len(at)]), Arc
        ):
            double += arc.radius**2 * (arc.sweep - math.sin(arc.sweep))
    return double < 0.0


def sharp_places(loop: Loop, pieces: list[BoundaryCurve]) -> list[tuple[str, Point]]:
    """Id and place [mm] of each sharp point of a loop worked out to `pieces`.

    A chamfer has two, named after its corner: "c4.1" where it begins in drawing order, "c4.2".
    """
    ends = {p.feature: p.curve for p in pieces if p.kind == "chamfer"}
    rounded = {p.feature for p in pieces if p.kind == "fillet"}
    places: list[tuple[str, Point]] = []
    for corner in loop.corners:
        if (cut := ends.get(corner.id)) is not None:
            places += [(f"{corner.id}.1", cut.start), (f"{corner.id}.2", cut.end)]
        elif corner.id not in rounded:
            places.append((corner.id, corner.at))
    return places


def corner_cuts(loop: Loop, curves: list[Curve]) -> dict[int, Cut]:
    """The fillets and chamfers that fit, by number of their corner."""
    ready = _line_fillets(loop, curves, [curve.length for curve in curves])
    for i, corner in enumerate(loop.corners):
        if not corner.sharp and i not in ready:
            cut = _corner_cut(corner, curves[i - 1], curves[i], "", [])
            if cut is not None:
                ready[i] = cut
    return ready


def _corner_cut(
    corner: Corner, before: Curve, after: Curve, where: str, faults: list[Fault]
) -> Cut | None:
    """The fillet or chamfer of a corner; what does not fit is added to `faults`."""
    name = "round" if corner.round != 0.0 else "chamfer"
    size = corner.round if corner.round != 0.0 else corner.chamfer
    field = f"{where}.corners.{corner.id}.{name}"
    if corner.round != 0.0 and corner.chamfer != 0.0:
        cause = f"corner {corner.id} has both a round and a chamfer"
        mend = "keep one of the two and set the other to 0"
    elif not (math.isfinite(size) and size > 0.0):
        cause = f"the {name} of corner {corner.id} is {size:g} mm"
        what = "radius" if name == "round" else "length"
        mend = f"give a {what} above zero, or 0 for a sharp corner"
    else:
        cut = (_fillet if name == "round" else _chamfer)(before, after, size)
        if cut is not None:
            return cut
        cause = f"a {name} of {size:g} mm does not fit at corner {corner.id}"
        mend = f"make the {name} smaller, or 0"
    faults.append(Fault(cause, mend, field, (corner.id,), corner.at))
    return None


def _faults_of_used_edges(
    loop: Loop,
    lengths: list[float],
    begin: list[float],
    end: list[float],
    where: str,
    faults: list[Fault],
) -> None:
    """Edges from which the corners at both ends take more than there is."""
    n = len(loop.corners)
    for i, edge in enumerate(loop.edges):
        if end[i] >= begin[i] - 1e-9:
            continue
        both = [c for c in (loop.corners[i], loop.corners[(i + 1) % n]) if not c.sharp]
        need = lengths[i] * (begin[i] + 1.0 - end[i])
        most = max(max(c.round, c.chamfer) for c in both) * lengths[i] / need
        kinds = {"round" if c.round > 0.0 else "chamfer" for c in both}
        words = " and ".join(f"{kind}s" for kind in sorted(kinds, reverse=True))
        first = both[0]
        field = "round" if first.round > 0.0 else "chamfer"
        faults.append(
            Fault(
                f"the {words} at {' and '.join(c.id for c in both)} need {need:.4g} mm of edge "
                f"{edge.id}, which is {lengths[i]:.4g} mm long",
                f"make the {words} at most {most:.4g} mm",
                f"{where}.corners.{first.id}.{field}",
                (*(c.id for c in both), edge.id),
                first.at,
            )
        )


def _chamfer(before: Curve, after: Curve, size: float) -> Cut | None:
    """The straight cut that takes `size` [mm] of both curves at their common corner."""
    len1, len2 = before.length, after.length
    if size > min(len1, len2) * (1.0 + 1e-9):
        return None
    t_before, t_after = max(0.0, 1.0 - size / len1), min(1.0, size / len2)
    (ax, ay), (bx, by) = before.point(t_before), after.point(t_after)
    cut = Segment((float(ax), float(ay)), (float(bx), float(by)))
    return (cut, t_before, t_after) if cut.length > 1e-9 * size else None


def _fillet(before: Curve, after: Curve, radius: float) -> Cut | None:
    """The arc of `radius` that is tangent to both curves near their common corner.

    Returns the arc, run from `before` to `after`, and the parameters at which it touches each.
    Those between two straight edges are made all at once in `_line_fillets`.
    """
    if isinstance(before, Segment) and isinstance(after, Segment):
        return None
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


def _line_fillets(loop: Loop, curves: list[Curve], lengths: list[float]) -> dict[int, Cut]:
    """The fillets that fit between two straight edges, by corner; a part can have thousands."""
    n = len(loop.corners)
    straight = [isinstance(curve, Segment) for curve in curves]
    rows = [
        i
        for i, c in enumerate(loop.corners)
        if 0.0 < c.round < math.inf and c.chamfer == 0.0 and straight[i] and straight[i - 1]
    ]
    if not rows:
        return {}
    at, long = np.array([c.at for c in loop.corners]), np.array(lengths)
    here = np.array(rows)
    before, corner, after = at[here - 1], at[here], at[(here + 1) % n]
    radius = np.array([loop.corners[i].round for i in rows])
    len1, len2 = long[here - 1], long[here]
    u, v = (corner - before) / len1[:, None], (after - corner) / len2[:, None]
    sine, cosine = u[:, 0] * v[:, 1] - u[:, 1] * v[:, 0], np.sum(u * v, axis=1)
    side = np.sign(sine)  # the centre lies on this side of both edges (+: left)
    turn = np.arctan2(sine, cosine)
    back = radius * np.tan(np.abs(turn) / 2.0)  # from the corner to where the fillet touches
    fits = (np.abs(sine) >= 1e-7) & (back <= np.minimum(len1, len2) * (1.0 + 1e-9))
    begin = np.arctan2(-side * u[:, 0], side * u[:, 1])
    normal = np.stack([-u[:, 1], u[:, 0]], axis=1)
    centre = corner - back[:, None] * u + (side * radius)[:, None] * normal
    t_before, t_after = np.maximum(0.0, 1.0 - back / len1), np.minimum(1.0, back / len2)
    columns = (centre, radius, begin, turn, t_before, t_after, fits)
    made: dict[int, Cut] = {}
    for i, (x, y), r, start, sweep, one, other, ok in zip(
        rows, *(column.tolist() for column in columns), strict=True
    ):
        if ok:
            made[i] = Arc((x, y), r, start, sweep), one, other
    return made


def _offset_crossings(a: Curve, b: Curve, left: float) -> list[Point]:
    """Points at the signed distance `left` to the left of both curves (extended), one an arc."""
    if isinstance(a, Segment) and isinstance(b, Arc):
        p, d = _offset_line(a, left)
        return line_circle(p, d, b.centre, _offset_radius(b, left))
    if isinstance(a, Arc) and isinstance(b, Segment):
        p, d = _offset_line(b, left)
        return line_circle(p, d, a.centre, _offset_radius(a, left))
    assert isinstance(a, Arc)
    assert isinstance(b, Arc)
    return circle_circle(a.centre, _offset_radius(a, left), b.centre, _offset_radius(b, left))


def _offset_line(s: Segment, left: float) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    d = s.tangent(0.0)
    return np.asarray(s.start) + left * np.array([-d[1], d[0]]), d


def _offset_radius(arc: Arc, left: float) -> float:
    return arc.radius - math.copysign(1.0, arc.sweep) * left
