"""Between millimetres on the board and pixels on the screen."""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import ArrayLike, NDArray
from pyqtgraph.functions import arrayToQPolygonF
from PySide6.QtCore import QPointF
from PySide6.QtGui import QPolygonF, QTransform

from screenapp.model.part import Point

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class Frame:
    """Maps places [mm, y up] to pixels of the view [px, y down] and back."""

    transform: QTransform

    @cached_property
    def scale(self) -> float:
        """Pixels for each millimetre."""
        t = self.transform
        return math.sqrt(abs(t.m11() * t.m22() - t.m12() * t.m21()))

    def px(self, at: Point) -> QPointF:
        """A place [mm] as a pixel position."""
        return self.transform.map(QPointF(at[0], at[1]))

    def pxs(self, points: ArrayLike) -> Floats:
        """Places (n, 2) [mm] as pixel positions (n, 2)."""
        p = np.asarray(points, dtype=float)
        t = self.transform
        x = t.m11() * p[..., 0] + t.m21() * p[..., 1] + t.dx()
        y = t.m12() * p[..., 0] + t.m22() * p[..., 1] + t.dy()
        return np.stack([x, y], axis=-1)

    def mm(self, px: QPointF) -> Point:
        """A pixel position as a place [mm]."""
        inverse, _ = self.transform.inverted()
        p = inverse.map(px)
        return float(p.x()), float(p.y())

    def pans_to(self, other: Frame, at_most: float) -> bool:
        """Whether the other is this one panned, by no more than `at_most` px."""
        a, b = self.transform, other.transform
        ones, others = (a.m11(), a.m22()), (b.m11(), b.m22())
        if not all(math.isclose(p, q, rel_tol=1e-9) for p, q in zip(ones, others, strict=True)):
            return False
        return self.shift_to(other).manhattanLength() <= at_most

    def shift_to(self, other: Frame) -> QPointF:
        """How far the other is panned from this one [px]."""
        a, b = self.transform, other.transform
        return QPointF(b.dx() - a.dx(), b.dy() - a.dy())

    def same_as(self, other: Frame | None) -> bool:
        """Whether both map alike."""
        return other is not None and self.transform == other.transform


def polygon(points: ArrayLike) -> QPolygonF:
    """Points (n, 2) as a polygon of Qt."""
    p = np.ascontiguousarray(points, dtype=float)
    made: QPolygonF = arrayToQPolygonF(p[:, 0], p[:, 1])
    return made
