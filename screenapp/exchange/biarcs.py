"""Fits ellipses and splines by circular arcs that leave no kink, within a tolerance.

Each span is covered by biarcs (two arcs that meet tangentially; Bolton 1975, Computer Aided Design
7, equal tangent lengths, from memory), each as long as it can be within the tolerance.
"""

from __future__ import annotations

import math
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from screenapp.exchange.bulges import turned_edge
from screenapp.exchange.free_curves import EllipseArc, Spline
from screenapp.model.curves import Arc, Curve, Segment

SAMPLES = 17
"""Places of each span at which the fit is compared with the curve."""

SHARE = 0.8
"""The fit is held to this share of the tolerance at the samples: between them it may be worse."""

SHORTEST = 2.0**24
"""No stretch is shorter than a span over this; a cusp would go on for ever."""

REFINEMENTS = 4
"""Halvings of the doubt about how long a stretch may be."""

FLATTEST = 1e-9
"""An arc whose sagitta is below this share of its chord is drawn straight."""

LONGEST = math.pi * (1.0 + 1e-6)
"""Arcs of one circle are joined up to half a turn."""

Floats = NDArray[np.float64]


def arcs_of(free: EllipseArc | Spline, tolerance: float) -> list[Curve]:
    """The arcs and segments that stand for a free curve, in its direction.

    Args:
        free: the curve [mm].
        tolerance: how far they may lie from it [mm].
    """
    found: list[Curve] = []
    breaks = free.breaks
    for t0, t1 in pairwise(breaks):
        _fit(free, t0, t1, tolerance * SHARE, found)
    return merged_arcs(found, 1e-3 * tolerance)


def _fit(
    free: EllipseArc | Spline, t0: float, t1: float, tolerance: float, out: list[Curve]
) -> None:
    """Cover a span by biarcs, each as long as the tolerance lets it be."""
    least = (t1 - t0) / SHORTEST
    at, step = t0, t1 - t0
    while at < t1:
        step = min(2.0 * step, t1 - at)
        found = _pieces(free, at, at + step, tolerance)
        while found is None and step > least:  # too long: halve
            step *= 0.5
            found = _pieces(free, at, at + step, tolerance)
        low, high = step, min(2.0 * step, t1 - at)
        for _ in range(REFINEMENTS if high > low else 0):  # then as long as it may be
            middle = 0.5 * (low + high)
            longer = _pieces(free, at, at + middle, tolerance)
            if longer is None:
                high = middle
            else:
                low, found = middle, longer
        stop = at + low if t1 - at - low > least else t1
        if found is None or stop != at + low:
            found = _pieces(free, at, stop, tolerance) or [_chord(free, at, stop)]
        out.extend(piece for piece in found if piece.length > 0.0)
        at, step = stop, low


def _pieces(
    free: EllipseArc | Spline, t0: float, t1: float, tolerance: float
) -> list[Curve] | None:
    """The biarc over a stretch, or None if it is farther from the curve than the tolerance."""
    points = free.point(np.linspace(t0, t1, SAMPLES))
    if not float(np.max(np.hypot(*(points - points[0]).T))) > 0.0:
        return [_chord(free, t0, t1)]  # all its control points are in one place
    pieces = _biarc(points[0], _tangent(free, t0, t1), points[-1], -_tangent(free, t1, t0))
    return pieces if pieces and _deviation(pieces, points) <= tolerance else None


def _chord(free: EllipseArc | Spline, t0: float, t1: float) -> Segment:
    (ax, ay), (bx, by) = free.point(t0).tolist(), free.point(t1).tolist()
    return Segment((ax, ay), (bx, by))


def _tangent(free: EllipseArc | Spline, t: float, towards: float) -> Floats:
    """Unit tangent at `t`, pointing towards another parameter, taken from that side."""
    step = towards - t
    chord = free.point(towards) - free.point(t)
    least = 1e-12 * float(np.hypot(*chord)) / abs(step)
    here = free.derivative(t) * math.copysign(1.0, step)
    for share in (1e-9, 1e-6, 1e-4, 1e-2):  # the derivative may vanish at the very end
        d = free.derivative(t + share * step) * math.copysign(1.0, step)
        size = float(np.hypot(*d))
        if size > least:
            # at a corner the derivative in the place itself may be that of the other side
            same = float(np.hypot(*(here - d))) < 1e-6 * size
            return np.asarray(here / float(np.hypot(*here)) if same else d / size)
    return np.asarray(chord / max(float(np.hypot(*chord)), 1e-300))


def _biarc(p0: Floats, t0: Floats, p1: Floats, t1: Floats) -> list[Curve]:
    """Two arcs from p0 to p1 with the unit tangents t0 and t1; empty if there are none."""
    v = p1 - p0
    vv = float(v @ v)
    if vv == 0.0:
        return []
    along = float(v @ (t0 + t1))
    den = 2.0 * (1.0 - float(t0 @ t1))
    if den > 1e-12:
        d = (-along + math.sqrt(along * along + den * vv)) / den
    elif along > 1e-12 * math.sqrt(vv):
        d = vv / (2.0 * along)
    else:
        return []
    if not (math.isfinite(d) and d > 0.0):
        return []
    joint = 0.5 * (p0 + p1 + d * (t0 - t1))
    return [_arc_from(p0, t0, joint), _arc_from(p1, -t1, joint).reversed()]


def _arc_from(start: Floats, tangent: Floats, end: Floats) -> Curve:
    """The arc that leaves `start` along `tangent` and reaches `end`; at most half a turn."""
    chord = end - start
    size = float(np.hypot(*chord))
    left = np.array([-tangent[1], tangent[0]])
    across = float(chord @ left)
    a, b = (float(start[0]), float(start[1])), (float(end[0]), float(end[1]))
    if abs(across) <= 4.0 * FLATTEST * size:
        return Segment(a, b)
    radius = size * size / (2.0 * across)  # signed: positive turns left
    centre = start + radius * left
    sweep = 2.0 * math.atan2(across, float(chord @ tangent))
    begin = math.atan2(start[1] - centre[1], start[0] - centre[0])
    return Arc((float(centre[0]), float(centre[1])), abs(radius), begin, sweep)


def _deviation(pieces: list[Curve], points: Floats) -> float:
    """Largest distance of the points from the nearer of the pieces."""
    return float(np.max(np.min([_distances(piece, points) for piece in pieces], axis=0)))


def _distances(curve: Curve, points: Floats) -> Floats:
    ends = np.asarray([curve.start, curve.end])
    to_ends = np.min(np.hypot(*(points[:, None, :] - ends).transpose(2, 0, 1)), axis=1)
    if isinstance(curve, Segment):
        d = ends[1] - ends[0]
        t = np.clip((points - ends[0]) @ d / max(float(d @ d), 1e-300), 0.0, 1.0)
        return np.asarray(np.hypot(*(points - ends[0] - t[:, None] * d).T))
    rel = points - np.asarray(curve.centre)
    angle = np.arctan2(rel[:, 1], rel[:, 0])
    turned = (angle - curve.begin) * math.copysign(1.0, curve.sweep) % (2.0 * math.pi)
    round_ = np.abs(np.hypot(*rel.T) - curve.radius)
    return np.asarray(np.where(turned <= abs(curve.sweep), round_, to_ends))


def merged_arcs(curves: list[Curve], noise: float) -> list[Curve]:
    """Following arcs of one circle joined into one, as long as it is no more than half a turn."""
    kept: list[Curve] = []
    for curve in curves:
        last = kept[-1] if kept else None
        joined = _joined(last, curve, noise) if last is not None else None
        if joined is not None:
            kept[-1] = joined
        else:
            kept.append(curve)
    return kept


def _joined(a: Curve, b: Curve, noise: float) -> Arc | None:
    """One arc for two that follow one another on the same circle; None if they do not."""
    if not (isinstance(a, Arc) and isinstance(b, Arc)) or a.sweep * b.sweep <= 0.0:
        return None
    if math.dist(a.centre, b.centre) > noise or abs(a.radius - b.radius) > noise:
        return None
    if math.dist(a.end, b.start) > noise or abs(a.sweep + b.sweep) > LONGEST:
        return None
    joined = turned_edge(a.start, b.end, a.sweep + b.sweep)  # keeps both ends where they are
    return joined if isinstance(joined, Arc) else None
