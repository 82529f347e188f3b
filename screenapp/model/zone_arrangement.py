"""A boundary and lines drawn over it, cut at each other's junctions and traced into faces.

Curves that cross, touch or lie upon each other are cut where they meet; ends that nearly coincide
become one junction, for which the boundary's own place is kept.  Then every face is walked round,
material on the left.  Junctions are numbered; a half-edge is a piece run one way.
"""

from __future__ import annotations

import itertools
import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.sparse import coo_array
from scipy.sparse.csgraph import connected_components
from scipy.spatial import cKDTree

from screenapp.model.boundary_curve import BoundaryCurve
from screenapp.model.curve_table import CurveTable
from screenapp.model.curves import Curve, Segment, arc_through
from screenapp.model.meetings import close_pairs, closest_approaches, intersections
from screenapp.model.part import Point

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]


@dataclass(frozen=True)
class Cut:
    """A piece of a curve between two junctions.

    Attributes:
        source: index of the curve that it was cut from.
        curve: the piece, its ends exactly on the junctions.
        start, end: junctions.
    """

    source: int
    curve: Curve
    start: int
    end: int


def cut_at_junctions(curves: Sequence[BoundaryCurve], n_boundary: int, near: float) -> list[Cut]:
    """Cut curves where they meet; the first `n_boundary` of them are sound among themselves.

    Curves of one loop are not cut by each other.  What is shorter than `near` [mm] vanishes.
    """
    table = CurveTable.of(tuple(curves))
    i, j = close_pairs(table, near)
    met = (j >= n_boundary) & (table.loop[i] != table.loop[j])
    i, j = i[met], j[met]
    pair, points = intersections(table, i, j)
    approach = closest_approaches(table, i, j)
    alike = np.where(
        table.arc[i] & table.arc[j],
        np.hypot(*(table.centre[i] - table.centre[j]).T) <= near,
        ~table.arc[i] & ~table.arc[j],
    )  # curves that may lie upon each other: only their ends count
    close = approach.gap <= near
    at_end = np.isin(approach.t_i, (0.0, 1.0)) | np.isin(approach.t_j, (0.0, 1.0))
    close &= at_end | ~alike[approach.pair]
    pair = np.concatenate([pair, approach.pair[close]])
    points = np.concatenate([points, approach.p_i[close]])
    curve = np.concatenate([i[pair], j[pair]])
    t = table.nearest(curve, np.concatenate([points, points]))
    every = np.arange(len(table))
    ends = np.concatenate([every, every])
    curve = np.concatenate([ends, curve])
    t = np.concatenate([np.zeros(len(every)), np.ones(len(every)), t])
    at = table.points(curve, t)
    at[: 2 * len(every)] = np.concatenate([table.start, table.end])
    # the boundary's ends come first, then its other points, then the rest
    rank = np.where(curve < n_boundary, np.where((t == 0.0) | (t == 1.0), 0, 1), 2)
    junction, places = _clustered(at, rank, near)
    return _pieces(curves, n_boundary, curve, t, junction, places)


def _clustered(points: Floats, rank: Ints, near: float) -> tuple[Ints, list[Point]]:
    """The cluster of each point, and the place of each cluster: that of its point of least rank."""
    links = cKDTree(points).query_pairs(near, output_type="ndarray")
    n = len(points)
    graph = coo_array((np.ones(len(links)), (links[:, 0], links[:, 1])), shape=(n, n))
    count, cluster = connected_components(graph, directed=False)
    order = np.lexsort((np.arange(n), rank))
    places: list[Point] = [(0.0, 0.0)] * count
    for k in order[::-1]:
        places[cluster[k]] = (float(points[k, 0]), float(points[k, 1]))
    return cluster.astype(np.int64), places


def _pieces(
    curves: Sequence[BoundaryCurve],
    n_boundary: int,
    curve: Ints,
    t: Floats,
    junction: Ints,
    places: list[Point],
) -> list[Cut]:
    order = np.lexsort((t, curve))
    cuts: list[Cut] = []
    for a, b in itertools.pairwise(order):
        k = int(curve[a])
        start, end = int(junction[a]), int(junction[b])
        if k != curve[b]:
            continue
        source = curves[k].curve
        if start == end and (t[b] - t[a]) * source.length < 0.5 * source.length:
            continue  # between two points of one junction
        part = source.part(float(t[a]), float(t[b]))
        if k >= n_boundary:
            middle = part.point(0.5)
            through = (float(middle[0]), float(middle[1]))
            straight = isinstance(part, Segment)
            part = (
                Segment(places[start], places[end])
                if straight
                else arc_through(places[start], through, places[end])
            )
        cuts.append(Cut(k, part, start, end))
    return cuts


def without_doubles(cuts: Sequence[Cut], n_boundary: int, near: float) -> list[Cut]:
    """The cuts without those drawn lines that lie on the boundary or on an earlier drawn line."""
    kept: list[Cut] = []
    taken: dict[tuple[int, int], list[Floats]] = {}
    for cut in cuts:
        ends = (min(cut.start, cut.end), max(cut.start, cut.end))
        middle = cut.curve.point(0.5)
        same = taken.setdefault(ends, [])
        if cut.source >= n_boundary and any(math.dist(middle, m) <= 4.0 * near for m in same):
            continue
        same.append(middle)
        kept.append(cut)
    return kept


@dataclass(frozen=True)
class Step:
    """A half-edge: a cut (by index) run forwards or backwards."""

    cut: int
    forward: bool


def trace_loops(cuts: Sequence[Cut], one_way: Sequence[bool]) -> list[tuple[Step, ...]]:
    """All closed walks with the material on the left.

    Args:
        cuts: pieces between junctions.
        one_way: whether each has material on its left only.
    """
    steps = [Step(k, True) for k in range(len(cuts))]
    steps += [Step(k, False) for k in range(len(cuts)) if not one_way[k]]
    forward, backward = _headings(cuts)
    leaving: dict[int, list[tuple[float, Step]]] = {}
    for step in steps:
        cut = cuts[step.cut]
        at = cut.start if step.forward else cut.end
        heading = (forward if step.forward else backward)[step.cut]
        leaving.setdefault(at, []).append((heading, step))
    loops: list[tuple[Step, ...]] = []
    open_ = set(steps)
    for first in steps:
        if first not in open_:
            continue
        walk: list[Step] = []
        step = first
        while step in open_:
            open_.discard(step)
            walk.append(step)
            cut = cuts[step.cut]
            at = cut.end if step.forward else cut.start
            back = (backward if step.forward else forward)[step.cut]
            # the first way out clockwise from where we came; straight back only if there is none
            step = min(
                leaving.get(at, [(back, first)]),
                key=lambda way: (back - way[0]) % (2.0 * math.pi) or 2.0 * math.pi,
            )[1]
        loops.append(tuple(walk))
    return loops


def _reach(cuts: Sequence[Cut]) -> dict[int, float]:
    """How far from each junction the headings are taken: the same for all that meet there, so
    that of two pieces which leave it alike the one that bends away shows."""
    reach: dict[int, float] = {}
    for cut in cuts:
        for at in (cut.start, cut.end):
            reach[at] = min(reach.get(at, math.inf), 0.05 * cut.curve.length)
    return reach


def _headings(cuts: Sequence[Cut]) -> tuple[list[float], list[float]]:
    """The direction [rad] in which each cut leaves its start, and its end run backwards."""
    table = CurveTable.of(tuple(BoundaryCurve("", "edge", cut.curve, 0) for cut in cuts))
    reach, lengths, every = _reach(cuts), table.lengths, np.arange(len(cuts))
    found: list[list[float]] = []
    for ends, origin, way in (
        ([cut.start for cut in cuts], table.start, 1.0),
        ([cut.end for cut in cuts], table.end, -1.0),
    ):
        t = np.array([reach[at] for at in ends]) / lengths
        away = table.points(every, t if way > 0.0 else 1.0 - t) - origin
        found.append([float(a) for a in np.arctan2(away[:, 1], away[:, 0])])
    return found[0], found[1]
