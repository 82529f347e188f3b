"""Removes lines that lie on other lines: drawn twice, run backwards, or partly covering.

Pieces of one straight line (or of one circle) that cover one another become as few pieces as there
are gaps between them.  Pieces that only touch end to end are left as they were drawn.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace

import numpy as np
import shapely
from numpy.typing import NDArray
from scipy.sparse import coo_array
from scipy.sparse.csgraph import connected_components

from screenapp.exchange.drawing import PlainCurve
from screenapp.exchange.rings import boxes
from screenapp.model.curves import Arc, Segment
from screenapp.model.part import Point
from screenapp.model.progress import SILENT, Progress

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

TWO_PI = 2.0 * math.pi


@dataclass(frozen=True)
class Removed:
    """What was taken away: the middles [mm] of the lines that were there twice."""

    places: tuple[Point, ...] = ()


def without_overlaps(
    curves: list[PlainCurve], tolerance: float, progress: Progress = SILENT
) -> tuple[list[PlainCurve], Removed]:
    """The curves with nothing drawn twice; two lines closer than `tolerance` [mm] are one.

    Args:
        curves: segments and arcs [mm], none without length.
    """
    if len(curves) < 2:
        return curves, Removed()
    first, second = _candidates(curves, tolerance)
    progress.check()
    straight = np.array([isinstance(c.curve, Segment) for c in curves])
    both_straight = straight[first] & straight[second]
    both_round = ~straight[first] & ~straight[second]
    pairs = [
        _covering_segments(curves, first[both_straight], second[both_straight], tolerance),
        _covering_arcs(curves, first[both_round], second[both_round], tolerance),
    ]
    a, b = (np.concatenate([p[k] for p in pairs]) for k in (0, 1))
    if not len(a):
        return curves, Removed()
    progress.check()
    return _united(curves, a, b, tolerance)


def _candidates(curves: list[PlainCurve], tolerance: float) -> tuple[Ints, Ints]:
    """Pairs whose boxes meet."""
    found = boxes(c.curve for c in curves)
    low, high = found[:, :2], found[:, 2:]
    made = shapely.box(
        low[:, 0] - tolerance, low[:, 1] - tolerance, high[:, 0] + tolerance, high[:, 1] + tolerance
    )
    first, second = shapely.STRtree(made).query(made)
    half = first < second
    return first[half], second[half]


def _covering_segments(
    curves: list[PlainCurve], i: Ints, j: Ints, tolerance: float
) -> tuple[Ints, Ints]:
    """Pairs of segments that lie on one line and share more than an end."""
    if not len(i):
        return i, j
    starts = np.array([c.curve.start if isinstance(c.curve, Segment) else (0, 0) for c in curves])
    ends = np.array([c.curve.end if isinstance(c.curve, Segment) else (0, 0) for c in curves])
    lengths = np.hypot(*(ends - starts).T)
    swap = lengths[i] < lengths[j]
    long_, short = np.where(swap, j, i), np.where(swap, i, j)
    u = (ends[long_] - starts[long_]) / lengths[long_][:, None]
    p, q = starts[short] - starts[long_], ends[short] - starts[long_]
    across = np.maximum(np.abs(_cross(u, p)), np.abs(_cross(u, q)))
    s, t = np.sum(u * p, axis=1), np.sum(u * q, axis=1)
    shared = np.minimum(np.maximum(s, t), lengths[long_]) - np.maximum(np.minimum(s, t), 0.0)
    on = (across <= tolerance) & (shared > np.minimum(tolerance, 0.5 * lengths[short]))
    return i[on], j[on]


def _covering_arcs(
    curves: list[PlainCurve], i: Ints, j: Ints, tolerance: float
) -> tuple[Ints, Ints]:
    """Pairs of arcs that lie on one circle and share more than an end."""
    on = np.zeros(len(i), dtype=bool)
    centres = np.array([c.curve.centre if isinstance(c.curve, Arc) else (0, 0) for c in curves])
    radii = np.array([c.curve.radius if isinstance(c.curve, Arc) else 0 for c in curves])
    # circles that differ by more than this have no arcs in common, however short those are
    apart = np.abs(np.hypot(*(centres[i] - centres[j]).T)) + np.abs(radii[i] - radii[j])
    for k in np.flatnonzero(apart <= 0.5 * np.minimum(radii[i], radii[j]) + tolerance).tolist():
        a, b = curves[i[k]].curve, curves[j[k]].curve
        assert isinstance(a, Arc)
        assert isinstance(b, Arc)
        long_, short = (a, b) if a.length >= b.length else (b, a)
        places = short.point(np.linspace(0.0, 1.0, 5))
        off = np.abs(np.hypot(*(places - np.asarray(long_.centre)).T) - long_.radius)
        if float(off.max()) <= tolerance:
            shared = sum(
                max(0.0, min(hi, abs(long_.sweep)) - max(lo, 0.0))
                for lo, hi in _spans(long_, short)
            )
            on[k] = shared * long_.radius > min(tolerance, 0.5 * short.length)
    return i[on], j[on]


def _spans(on: Arc, other: Arc) -> tuple[tuple[float, float], ...]:
    """Where `other` lies along `on` [rad from its beginning], once as it is, once a turn back."""
    way = math.copysign(1.0, on.sweep)
    angle = other.begin if other.sweep * on.sweep > 0.0 else other.begin + other.sweep
    low = (angle - on.begin) * way % TWO_PI
    return (low, low + abs(other.sweep)), (low - TWO_PI, low - TWO_PI + abs(other.sweep))


def _united(
    curves: list[PlainCurve], a: Ints, b: Ints, tolerance: float
) -> tuple[list[PlainCurve], Removed]:
    n = len(curves)
    _, group = connected_components(coo_array((np.ones(len(a)), (a, b)), shape=(n, n)), False)
    members: dict[int, list[int]] = {}
    for k in np.unique(np.concatenate([a, b])).tolist():
        members.setdefault(int(group[k]), []).append(k)
    gone: set[int] = set()
    added: list[PlainCurve] = []
    places: list[Point] = []
    for listed in members.values():
        listed.sort(key=lambda k: -curves[k].curve.length)
        whole = [curves[k] for k in listed]
        pieces = _union_on_line(whole, tolerance)
        gone |= set(listed)
        added += pieces
        for extra in whole[len(pieces) :]:
            assert isinstance(extra.curve, Segment | Arc)
            x, y = extra.curve.point(0.5)
            places.append((float(x), float(y)))
    return [c for k, c in enumerate(curves) if k not in gone] + added, Removed(tuple(places))


def _union_on_line(group: list[PlainCurve], tolerance: float) -> list[PlainCurve]:
    """As few pieces as cover what a group on one line or circle covers; the longest comes first."""
    base = group[0].curve
    if isinstance(base, Segment):
        return _union_on_segment(group, base, tolerance)
    assert isinstance(base, Arc)
    return _union_on_arc(group, base, tolerance)


def _union_on_segment(group: list[PlainCurve], base: Segment, tolerance: float) -> list[PlainCurve]:
    u = base.tangent(0.0)
    ends: list[tuple[float, float, Point, Point, PlainCurve]] = []
    for drawn in group:
        pairs = [
            (float(np.subtract(p, base.start) @ u), p) for p in (drawn.curve.start, drawn.curve.end)
        ]
        (lo, p), (hi, q) = sorted(pairs)
        ends.append((lo, hi, p, q, drawn))
    ends.sort(key=lambda e: (e[0], -e[1]))
    united: list[PlainCurve] = []
    lo, hi, p, q, keeper = ends[0]
    for lo_, hi_, p_, q_, drawn in [*ends[1:], (math.inf, math.inf, p, q, keeper)]:
        if lo_ <= hi + tolerance:
            if hi_ > hi + tolerance:
                hi, q, keeper = hi_, q_, replace(keeper, curve=Segment(p, q_))
            continue
        united.append(keeper)
        lo, hi, p, q, keeper = lo_, hi_, p_, q_, drawn
    return united


def _union_on_arc(group: list[PlainCurve], base: Arc, tolerance: float) -> list[PlainCurve]:
    slack = tolerance / base.radius
    if abs(base.sweep) >= TWO_PI - slack:
        return [replace(group[0], curve=replace(base, sweep=math.copysign(TWO_PI, base.sweep)))]
    spans = sorted(
        (_spans(base, d.curve)[0] for d in group if isinstance(d.curve, Arc)), key=lambda s: s[0]
    )
    united = [spans[0]]
    for low, high in spans[1:]:
        if low <= united[-1][1] + slack:
            united[-1] = united[-1][0], max(high, united[-1][1])
        else:
            united.append((low, high))
    # the last one may run over the turn into the first one
    while len(united) > 1 and united[-1][1] - TWO_PI >= united[0][0] - slack:
        low, high = united[0]
        united = [*united[1:-1], (united[-1][0], max(united[-1][1], high + TWO_PI))]
    way = math.copysign(1.0, base.sweep)
    made = []
    for low, high in united:
        sweep = high - low
        if sweep >= TWO_PI - slack:
            sweep = TWO_PI
        begin = base.begin + way * low
        made.append(replace(group[0], curve=Arc(base.centre, base.radius, begin, way * sweep)))
    return made


def _cross(a: Floats, b: Floats) -> Floats:
    return np.asarray(a[:, 0] * b[:, 1] - a[:, 1] * b[:, 0])
