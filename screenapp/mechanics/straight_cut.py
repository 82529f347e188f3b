"""Where a straight cut runs through the material, and how to integrate along it."""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.model.curve_table import CurveTable
from screenapp.model.curves import Arc, Curve
from screenapp.model.part import Point
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]

POINTS = 33
"""Places along each span: close at its two ends, where the stress is steepest."""

ON_END = 1e-6
"""A cut that ends within this share of the part's size of the boundary ends on it."""


@dataclass(frozen=True, eq=False)
class StraightCut:
    """A cut and the spans of material that it runs through.

    Attributes:
        start: where it begins [mm].
        along: unit vector from start to end.
        normal: unit vector to the right of it, out of the body on its left.
        spans: distances from the start at which material begins and ends [mm], (n, 2); where
            thickness or material changes, one span ends and the next begins.
        zones: index in `Part.zones` of each span, -1 for the wall itself, (n,).
        distances: of the places along the cut [mm], (n, POINTS), rising, ends included.
        weights: of an integral over the cut at these places [mm], (n, POINTS).
    """

    start: Floats
    along: Floats
    normal: Floats
    spans: Floats
    zones: NDArray[np.int64]
    distances: Floats
    weights: Floats

    @property
    def points(self) -> Floats:
        """The places [mm], (n, POINTS, 2)."""
        return self.start + self.distances[..., None] * self.along

    @property
    def length(self) -> float:
        """Length within the material [mm]."""
        return float(np.ptp(self.spans, axis=1).sum())


def straight_cut(shape: Shape, start: Point, end: Point) -> StraightCut:
    """The spans of a cut from `start` to `end`; none if it misses the part.

    A stretch that runs along a straight edge counts as material.
    """
    begin, reach = np.asarray(start), math.dist(start, end)
    along = (np.asarray(end) - begin) / reach
    found: list[tuple[float, float, int]] = []
    for region in shape.parts:
        marks = _crossings(region.shape, begin, along, reach)
        middles = 0.5 * (marks[1:] + marks[:-1])
        within = _inside(region.shape, begin + middles[:, None] * along)
        ends = zip(marks, marks[1:], within, strict=False)
        found += [(float(a), float(b), region.zone) for a, b, ok in ends if ok]
    found = _without_doubles(sorted(found))
    spans = np.array([(a, b) for a, b, _ in found]).reshape(-1, 2)
    unit, weights = clenshaw_curtis(POINTS)
    half, middle = 0.5 * (spans[:, 1] - spans[:, 0]), spans.mean(axis=1)
    return StraightCut(
        begin,
        along,
        np.array([along[1], -along[0]]),
        spans,
        np.array([zone for _, _, zone in found], dtype=np.int64),
        middle[:, None] + half[:, None] * unit,
        half[:, None] * weights,
    )


def _without_doubles(found: list[tuple[float, float, int]]) -> list[tuple[float, float, int]]:
    """A cut along an interface lies in two regions: the first of them speaks."""
    kept: list[tuple[float, float, int]] = []
    for a, b, zone in found:
        if not kept or a >= kept[-1][1] - 1e-9 * max(abs(b), 1.0):
            kept.append((a, b, zone))
    return kept


def clenshaw_curtis(n: int) -> tuple[Floats, Floats]:
    """Places in [-1, 1], rising and with both ends, and weights; exact for degree n - 1.

    Source: Clenshaw & Curtis 1960, Numer. Math. 2 (from memory), by the moments of the Chebyshev
    polynomials: the integral of T_k is 2 / (1 - k²) for even k and zero for odd k.
    """
    angle = np.pi * np.arange(n) / (n - 1)
    k = np.arange(n)
    moments = np.where(k % 2 == 0, 2.0 / (1.0 - np.where(k == 1, 0.0, k * k)), 0.0)
    ends = np.where((k == 0) | (k == n - 1), 0.5, 1.0)
    weights = 2.0 / (n - 1) * ends * (np.cos(np.outer(angle, k)) @ (ends * moments))
    return -np.cos(angle), weights


def _crossings(shape: Shape, begin: Floats, along: Floats, reach: float) -> Floats:
    """Distances from the start at which the cut meets the boundary, with its own ends, rising."""
    near = ON_END * shape.size
    found = [0.0, reach]
    for piece in shape.curves:
        found += _meets(piece.curve, begin, along)
    marks = np.sort([0.0 if abs(d) <= near else reach if abs(d - reach) <= near else d
                     for d in found if -near <= d <= reach + near])  # fmt: skip
    keep = np.concatenate([[True], np.diff(marks) > near])
    return np.asarray(marks[keep])


def _meets(curve: Curve, begin: Floats, along: Floats) -> list[float]:
    """Distances along the line at which it meets a curve."""
    if isinstance(curve, Arc):
        offset = np.asarray(curve.centre) - begin
        foot = float(offset @ along)
        height = float(offset[1] * along[0] - offset[0] * along[1])
        if abs(height) > curve.radius:
            return []
        half = math.sqrt(curve.radius**2 - height**2)
        return [d for d in (foot - half, foot + half) if _on(curve, begin + d * along)]
    side = np.subtract(curve.end, curve.start)
    across = float(along[0] * side[1] - along[1] * side[0])
    length = float(np.hypot(*side))
    gap = np.asarray(curve.start) - begin
    if abs(across) <= 1e-12 * length:
        off = abs(float(along[0] * gap[1] - along[1] * gap[0]))
        if off > 1e-9 * length:
            return []
        return [float(gap @ along), float((np.asarray(curve.end) - begin) @ along)]
    t = (gap[1] * along[0] - gap[0] * along[1]) / -across
    if not -1e-9 <= t <= 1.0 + 1e-9:
        return []
    return [float((gap + t * side) @ along)]


def _on(arc: Arc, point: Floats) -> bool:
    """Whether a point of the arc's circle lies on the arc itself."""
    nearest = arc.point(arc.nearest((float(point[0]), float(point[1]))))
    return float(np.hypot(*(nearest - point))) <= 1e-9 * max(arc.radius, 1.0)


def _inside(shape: Shape, points: Floats) -> NDArray[np.bool_]:
    """Which points (n, 2) lie in the material or on its boundary."""
    if not len(points):
        return np.zeros(0, dtype=bool)
    table = CurveTable.of(shape.curves)
    within = np.asarray(table.inside(0, points))
    for loop in range(1, len(shape.loops)):
        within &= ~table.inside(loop, points)
    everyone = np.arange(len(table))
    for i, point in enumerate(points):
        places = np.broadcast_to(point, (len(table), 2))
        gaps = table.points(everyone, table.nearest(everyone, places)) - point
        within[i] |= np.hypot(*gaps.T).min() <= 1e-9 * shape.size
    return within
