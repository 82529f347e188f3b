"""Rings: curves that follow one another and close; each ends exactly where the next begins."""

from __future__ import annotations

from collections.abc import Iterable

import numpy as np
from numpy.typing import NDArray

from screenapp.model.boundary_curve import BoundaryCurve, area_under
from screenapp.model.curve_table import CurveTable
from screenapp.model.curves import Curve

Ring = list[Curve]


def enclosed(curves: Iterable[Curve]) -> float:
    """The area [mm²] that curves in a row enclose, positive if they run counter-clockwise."""
    return sum(area_under(curve) for curve in curves)


def boxes(curves: Iterable[Curve]) -> NDArray[np.float64]:
    """Smallest x, y and largest x, y [mm] of each curve, (n, 4)."""
    return CurveTable.of(tuple(BoundaryCurve("", "edge", c, 0) for c in curves)).boxes
