"""Boundary pieces that cross, touch, fold back or are too short, and holes in wrong places.

The mesher hangs on such shapes without a word, so they must be found before.  Two pieces touch
when they come nearer than one millionth of the part's size without being neighbours.
"""

from __future__ import annotations

import numpy as np
import shapely
from numpy.typing import NDArray

from screenapp.model.curve_table import CurveTable
from screenapp.model.errors import Fault
from screenapp.model.meetings import (
    close_pairs,
    closest_approaches,
    following_pieces,
    intersections,
)
from screenapp.model.members import whole_id
from screenapp.model.shape import BoundaryCurve, Shape

TOUCH = 1e-6
"""Pieces nearer than this share of the part's size touch."""

MOST = 20
"""No more faults of one kind are listed: a badly drawn outline can have thousands."""

NARROWEST_ANGLE = 1.0
"""Neighbouring pieces that enclose a smaller angle [deg] run back over one another."""

Ints = NDArray[np.int64]
Floats = NDArray[np.float64]


def boundary_faults(shape: Shape, table: CurveTable) -> list[Fault]:
    """All that is wrong with the boundary as a whole; every fault blocks."""
    touch = TOUCH * shape.size
    faults = _short_pieces(shape, table, touch)
    if faults:
        return faults
    faults += _folds(shape, table)
    meeting, crossed = _meetings(shape, table, touch)
    faults += meeting
    return faults + _misplaced_holes(shape, table, crossed)


def piece_name(piece: BoundaryCurve) -> str:
    """The words for a piece: "edge e3", "fillet c2", "hole h1"."""
    return f"{piece.kind} {piece.feature}"


def _short_pieces(shape: Shape, table: CurveTable, touch: float) -> list[Fault]:
    faults = []
    for k in np.flatnonzero(table.lengths < 2.0 * touch)[:MOST]:
        piece = shape.curves[k]
        x, y = piece.curve.point(0.5)
        faults.append(
            Fault(
                f"{piece_name(piece)} is only {table.lengths[k]:.3g} mm long",
                "make it longer or remove it"
                if piece.kind != "edge"
                else "make it longer, make the corners at its ends sharper, or remove it",
                _field(shape, piece),
                (piece.feature,),
                (float(x), float(y)),
                span=(piece.curve.start, piece.curve.end),
            )
        )
    return faults


def _folds(shape: Shape, table: CurveTable) -> list[Fault]:
    """Neighbours that leave no angle between them."""
    there = following_pieces(shape)
    t_in, t_out = table.ways_out, table.ways_in[there]
    cosine = np.sum(t_in * t_out, axis=1)
    cross = t_in[:, 0] * t_out[:, 1] - t_in[:, 1] * t_out[:, 0]
    between = 180.0 - np.degrees(np.abs(np.arctan2(cross, cosine)))
    faults = []
    for k in np.flatnonzero(between < NARROWEST_ANGLE)[:MOST]:
        a, b = shape.curves[k], shape.curves[there[k]]
        x, y = table.end[k]
        faults.append(
            Fault(
                f"{piece_name(a)} and {piece_name(b)} enclose an angle of {between[k]:.2g}° "
                f"at ({x:.4g}, {y:.4g})",
                f"move a corner so that they enclose at least {NARROWEST_ANGLE:g}°",
                _field(shape, b),
                (a.feature, b.feature),
                (float(x), float(y)),
            )
        )
    return faults


def _meetings(shape: Shape, table: CurveTable, touch: float) -> tuple[list[Fault], set[int]]:
    """Faults for pieces that cross or touch, and the loops that they spoil."""
    i, j = close_pairs(table, touch)
    plain = np.array([shape.curves[first].kind == "hole" for first, _ in shape.loops])
    same_plain = (table.loop[i] == table.loop[j]) & plain[table.loop[i]]  # sound by making
    open_ = ~same_plain & ~_meet_only_at_joint(shape, table, i, j)
    i, j = i[open_], j[open_]
    pair, points, crosses = _meeting_points(shape, table, i, j, touch)
    faults: list[Fault] = []
    spoilt: set[int] = set()
    said: set[tuple[str, str]] = set()
    for k, point, cross in zip(pair, points, crosses, strict=True):
        a, b = shape.curves[i[k]], shape.curves[j[k]]
        if a.loop != b.loop:
            spoilt |= {a.loop, b.loop} - {0}
        names = (_loop_name(shape, a, b), _loop_name(shape, b, a))
        if names in said or len(faults) >= MOST:
            continue
        said.add(names)
        faults.append(_meeting_fault(shape, a, b, names, point, bool(cross)))
    return faults, spoilt


def _meet_only_at_joint(shape: Shape, table: CurveTable, i: Ints, j: Ints) -> NDArray[np.bool_]:
    """Neighbours that cannot meet again: two straight edges, or an edge and an arc tangent to it.

    Most pairs of a boundary are such, so they are set aside cheaply.
    """
    following = following_pieces(shape)
    u, v = table.ways_out, table.ways_in[following]
    smooth = (np.abs(u[:, 0] * v[:, 1] - u[:, 1] * v[:, 0]) < 1e-6) & (np.sum(u * v, axis=1) > 0.0)
    forward, backward = following[i] == j, following[j] == i
    joint = np.where(forward, i, j)
    straight = ~table.arc[i] & ~table.arc[j]
    one_arc = table.arc[i] ^ table.arc[j]
    return np.asarray((forward ^ backward) & (straight | (one_arc & smooth[joint])))


def _meeting_points(
    shape: Shape, table: CurveTable, i: Ints, j: Ints, touch: float
) -> tuple[Ints, Floats, NDArray[np.bool_]]:
    """Pairs that meet elsewhere than at their common ends: pair, point, and whether they cross."""
    pair, points = intersections(table, i, j)
    a, b = i[pair], j[pair]
    t_a, t_b = table.nearest(a, points), table.nearest(b, points)
    u, v = table.tangents(a, t_a), table.tangents(b, t_b)
    skew = np.abs(u[:, 0] * v[:, 1] - u[:, 1] * v[:, 0]) > 1e-6
    inner = np.ones(len(pair), dtype=bool)  # away from corners; the joints of holes are smooth
    plain = np.array([c.kind == "hole" for c in shape.curves])
    for which in (a, b):
        for end in (table.start[which], table.end[which]):
            inner &= plain[which] | (np.hypot(*(points - end).T) > touch)
    near = closest_approaches(table, i, j)
    close = near.gap <= touch
    pair = np.concatenate([pair, near.pair[close]])
    points = np.concatenate([points, 0.5 * (near.p_i + near.p_j)[close]])
    crosses = np.concatenate([skew & inner, np.zeros(int(close.sum()), dtype=bool)])
    foreign = ~_at_common_end(shape, table, i[pair], j[pair], points, touch)
    pair, points, crosses = pair[foreign], points[foreign], crosses[foreign]
    order = np.lexsort((~crosses, pair))
    return pair[order], points[order], crosses[order]


def _at_common_end(
    shape: Shape, table: CurveTable, i: Ints, j: Ints, points: Floats, touch: float
) -> NDArray[np.bool_]:
    """Whether each point is where the one curve follows the other.

    Where a curve leaves its neighbour tangentially, they stay close for a while: the reach of the
    common end is there sqrt(2 R gap) for the smaller radius R.
    """
    following = following_pieces(shape)
    common = np.zeros(len(points), dtype=bool)
    for first, second in ((i, j), (j, i)):
        follows = following[first] == second
        corner = table.end[first]
        u, v = table.ways_out[first], table.ways_in[second]
        turn = np.arctan2(np.abs(u[:, 0] * v[:, 1] - u[:, 1] * v[:, 0]), np.sum(u * v, axis=1))
        curved = np.where(
            table.arc[first] | table.arc[second],
            np.minimum(
                np.where(table.arc[first], table.radius[first], np.inf),
                np.where(table.arc[second], table.radius[second], np.inf),
            ),
            0.0,
        )
        smooth = np.where(turn < 1e-3, 2.0 * np.sqrt(2.0 * curved * touch) + 3.0 * touch, 0.0)
        reach = np.maximum(3.0 * touch / np.maximum(np.sin(turn), 1e-2), smooth)
        common |= follows & (np.hypot(*(points - corner).T) <= reach)
    return common


def _loop_name(shape: Shape, piece: BoundaryCurve, other: BoundaryCurve) -> str:
    """A piece by name, or its whole hole where two loops meet."""
    hole = shape.hole_ids[piece.loop]
    if hole is None or piece.loop == other.loop:
        return piece_name(piece)
    return f"hole {hole}"


def _meeting_fault(
    shape: Shape,
    a: BoundaryCurve,
    b: BoundaryCurve,
    names: tuple[str, str],
    point: Floats,
    cross: bool,
) -> Fault:
    x, y = float(point[0]), float(point[1])
    word = "cross" if cross else "touch"
    if a.loop == b.loop:
        loop = "outline" if a.loop == 0 else "hole"
        mend = f"move a corner so that the {loop} does not {word} itself"
        ids: tuple[str, ...] = (a.feature, b.feature)
        field = _field(shape, a)
    else:
        hole = shape.hole_ids[b.loop]
        other = "the outline" if a.loop == 0 else names[0]
        mend = f"move hole {hole} or make it smaller, so that it stays clear of {other}"
        ids = (shape.hole_ids[a.loop] or a.feature, hole or b.feature)
        field = f"holes.{whole_id(hole or '')}"
    return Fault(
        f"{names[0]} and {names[1]} {word} at ({x:.4g}, {y:.4g})", mend, field, ids, (x, y)
    )


def _misplaced_holes(shape: Shape, table: CurveTable, spoilt: set[int]) -> list[Fault]:
    """Holes outside the outline or inside one another; `spoilt` ones are reported already."""
    holes = [n for n in range(1, len(shape.loops)) if n not in spoilt]
    if not holes:
        return []
    firsts = table.start[[shape.loops[n][0] for n in holes]]
    faults: list[Fault] = []
    inside = table.inside(0, firsts)
    drawn = table.start[:1]
    for n, point, ok in zip(holes, firsts, inside, strict=True):
        if not ok and len(faults) < MOST:
            hole = shape.hole_ids[n] or ""
            around = bool(table.inside(n, drawn)[0])
            faults.append(
                Fault(
                    f"hole {hole} surrounds the whole outline"
                    if around
                    else f"hole {hole} lies outside the outline",
                    "make the hole smaller or remove it"
                    if around
                    else "move the hole into the outline or remove it",
                    f"holes.{whole_id(hole)}",
                    (hole,),
                    (float(point[0]), float(point[1])),
                )
            )
    return faults + _nested_holes(shape, table, holes)


def _nested_holes(shape: Shape, table: CurveTable, holes: list[int]) -> list[Fault]:
    boxes = table.loop_boxes(shape)
    size = np.prod(boxes[:, 2:] - boxes[:, :2], axis=1)
    order = np.array(sorted(holes, key=lambda n: -size[n]))
    points = table.start[[shape.loops[n][0] for n in order]]
    x, y = points.T
    tree = shapely.STRtree(shapely.box(*boxes[order].T))
    inner, outer = tree.query(shapely.points(points))  # ranks in the order, larger holes first
    around = np.sort(np.unique(outer[inner > outer]))
    faults: list[Fault] = []
    for rank in around:
        low, high = boxes[order[rank], :2], boxes[order[rank], 2:]
        near = np.sort(inner[(outer == rank) & (inner > rank)])
        near = near[np.all((points[near] > low) & (points[near] < high), axis=1)]
        for k in near[table.inside(int(order[rank]), points[near])]:
            within, outside = shape.hole_ids[order[k]] or "", shape.hole_ids[order[rank]] or ""
            if len(faults) < MOST:
                faults.append(
                    Fault(
                        f"hole {within} lies inside hole {outside}",
                        "move it out or remove one of the two",
                        f"holes.{whole_id(within)}",
                        (within, outside),
                        (float(x[k]), float(y[k])),
                    )
                )
    return faults


def _field(shape: Shape, piece: BoundaryCurve) -> str:
    hole = shape.hole_ids[piece.loop]
    where = "outline" if hole is None else f"holes.{whole_id(hole)}"
    if piece.kind == "edge":
        return f"{where}.edges.{piece.feature}"
    if piece.kind == "hole":
        return where
    size = "round" if piece.kind == "fillet" else "chamfer"
    return f"{where}.corners.{piece.feature}.{size}"
