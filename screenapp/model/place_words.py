"""Words for a place of a part that has no id of its own."""

from __future__ import annotations

from screenapp.model.part import Point
from screenapp.model.shape import Shape

NAUGHT = 1e-6
"""A coordinate below this [mm] is nothing but rounding: it is written as 0."""

NEAR_END = 0.005
"""Nearer to the end of an edge than this share of it, a place is at the corner."""


def point_words(at: Point) -> str:
    """A place by its coordinates.

    Example:
        >>> point_words((8.266e-16, 108.51))
        '(0, 108.5) mm'
    """
    x, y = (0.0 if abs(v) < NAUGHT else v for v in at)
    return f"({x:.4g}, {y:.4g}) mm"


def edge_words(shape: Shape, piece: int, at: Point) -> str:
    """Where on an edge a place is: "edge e5, 30 % from c5 to c6", "edge e5 at c6".

    The share is that of what the roundings of its corners leave of the edge.
    """
    curve = shape.curves[piece]
    begin, end = _corners(shape, piece)
    name = f"edge {curve.feature}"
    share = curve.curve.nearest(at)
    if not begin or not end:
        return f"{name}, {100.0 * share:.0f} % along it"
    if share < NEAR_END:
        return f"{name} at {begin}"
    if share > 1.0 - NEAR_END:
        return f"{name} at {end}"
    return f"{name}, {min(max(100.0 * share, 1.0), 99.0):.0f} % from {begin} to {end}"


def _corners(shape: Shape, piece: int) -> tuple[str, str]:
    """Ids of the corners where an edge begins and ends; "" where there is none."""
    curves = shape.curves
    first, last = shape.loops[curves[piece].loop]
    before = piece - 1 if piece > first else last - 1
    after = piece + 1 if piece + 1 < last else first
    sharp = {point: id_ for id_, point in shape.sharp_corners}
    ends = []
    for neighbour, point in (
        (before, curves[piece].curve.start),
        (after, curves[piece].curve.end),
    ):
        if curves[neighbour].kind in ("fillet", "chamfer"):
            ends.append(curves[neighbour].feature)
        else:
            ends.append(next((id_ for p, id_ in sharp.items() if _same(p, point, shape)), ""))
    return ends[0], ends[1]


def _same(a: Point, b: Point, shape: Shape) -> bool:
    slack = 1e-9 * shape.size
    return abs(a[0] - b[0]) <= slack and abs(a[1] - b[1]) <= slack
