"""One piece of a part's boundary, and the feature that it belongs to."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from screenapp.model.curves import Curve, Segment


@dataclass(frozen=True)
class BoundaryCurve:
    """One piece of the boundary.

    Attributes:
        feature: id of the edge, of the rounded or chamfered corner, or of the round hole or slot.
        kind: what the id names.
        curve: the piece itself, material on its left.
        loop: index of the loop it belongs to (0 is the outline).
    """

    feature: str
    kind: Literal["edge", "fillet", "chamfer", "hole"]
    curve: Curve
    loop: int


def turned(piece: BoundaryCurve) -> BoundaryCurve:
    """The same piece run backwards."""
    return BoundaryCurve(piece.feature, piece.kind, piece.curve.reversed(), piece.loop)


def area_under(curve: Curve) -> float:
    """The curve's share of the area by Green's theorem: half the integral of x dy - y dx [mm²]."""
    (x0, y0), (x1, y1) = curve.start, curve.end
    if isinstance(curve, Segment):
        return 0.5 * (x0 * y1 - x1 * y0)
    (cx, cy), r = curve.centre, curve.radius
    return 0.5 * (r * r * curve.sweep + cx * (y1 - y0) - cy * (x1 - x0))
