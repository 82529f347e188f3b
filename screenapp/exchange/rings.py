"""Rings: curves that follow one another and close; each ends exactly where the next begins."""

from __future__ import annotations

from collections.abc import Iterable

from screenapp.model.boundary_curve import area_under
from screenapp.model.curves import Curve

Ring = list[Curve]


def enclosed(curves: Iterable[Curve]) -> float:
    """The area [mm²] that curves in a row enclose, positive if they run counter-clockwise."""
    return sum(area_under(curve) for curve in curves)
