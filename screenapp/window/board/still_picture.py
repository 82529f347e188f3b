"""Pictures of what stays in a gesture: only where the part changed is it painted afresh."""

from __future__ import annotations

from collections.abc import Callable, Hashable
from functools import lru_cache

import numpy as np
from PySide6.QtCore import QRect, QRectF, Qt
from PySide6.QtGui import QPainter, QPixmap, QPolygonF, QRegion

from screenapp.window.board.drawn_part import DrawnPart
from screenapp.window.board.frame import Floats, Frame, polygon
from screenapp.window.board.ring import Ring

BEYOND = 12.0
"""How far beyond the clip lines are drawn [px]."""

AROUND_PX = 20.0
"""Lines, joins and centre lines of a ring stay within this of it [px]."""

SEAM_PX = 4.0
"""Half of the widest line and more [px]: a stretch that ends so far out of view ends unseen."""

Draw = Callable[[QPainter, DrawnPart, QRectF], None]
"""Paints of a part what lies in a view [px]."""


class StillPicture:
    """The part as a gesture found it, painted once by one item, and mended at each frame.

    The picture is exact where nothing changed, and what changed is painted as without a picture.
    """

    def __init__(self) -> None:
        self._key: Hashable = None
        self._picture, self._area = QPixmap(), QRect()

    def paint(
        self,
        painter: QPainter,
        frame: Frame,
        parts: tuple[DrawnPart | None, DrawnPart],
        look: Hashable,
        draw: Draw,
        tolerance: float,
    ) -> None:
        """Paint a part in pixels.

        Args:
            painter: of the viewport.
            frame: the view.
            parts: the part before the gesture, None without one, and the part to be shown.
            look: whatever else decides how it looks.
            draw: paints it.
            tolerance: sagitta to which the rings are flattened [mm].
        """
        base, drawn = parts
        view = painter.viewport()
        if base is None or base is drawn:
            self._key, self._picture = None, QPixmap()
            draw(painter, drawn, QRectF(view))
            return
        changed = _in_view(changed_box(base, drawn, tolerance), frame, view)
        if 2 * changed.width() * changed.height() > view.width() * view.height():
            draw(painter, drawn, QRectF(view))
            return
        self._settle(painter, frame, base, look, draw)
        painter.save()
        # one rectangle after the other: clipping to a region of many is slow
        for rect in QRegion(self._area) - QRegion(changed):  # type: ignore[attr-defined]
            painter.setClipRect(rect)
            painter.drawPixmap(self._area.topLeft(), self._picture)
        painter.restore()
        if not changed.isEmpty():
            painter.save()
            painter.setClipRect(changed)
            # what is left out of lines must end well outside the clip, caps and joins with it
            draw(painter, drawn, QRectF(changed).adjusted(-BEYOND, -BEYOND, BEYOND, BEYOND))
            painter.restore()

    def _settle(
        self, painter: QPainter, frame: Frame, base: DrawnPart, look: Hashable, draw: Draw
    ) -> None:
        """Make sure that the picture is of this part, view and look."""
        view, ratio = painter.viewport(), painter.device().devicePixelRatioF()
        t = frame.transform
        at = (t.m11(), t.m22(), t.dx(), t.dy())
        key = (id(base), at, look, view.width(), view.height(), ratio)
        if key == self._key:
            return
        self._key = key
        self._area = _in_view(base.bounds, frame, view)
        self._picture = QPixmap(self._area.size() * ratio)
        self._picture.setDevicePixelRatio(ratio)
        self._picture.fill(Qt.GlobalColor.transparent)
        over = QPainter(self._picture)
        over.setRenderHints(painter.renderHints())
        over.translate(-self._area.topLeft())
        draw(over, base, QRectF(self._area))
        over.end()


Box = tuple[float, float, float, float]
"""Smallest x, y and largest x, y [mm]."""


def _in_view(box: Box | None, frame: Frame, view: QRect) -> QRect:
    """The pixels of a view in which lines of a box [mm] may lie."""
    if box is None:
        return QRect()
    corners = frame.pxs([(box[0], box[1]), (box[2], box[3])])
    (x0, y0), (x1, y1) = corners.min(axis=0) - AROUND_PX, corners.max(axis=0) + AROUND_PX
    return (QRectF(x0, y0, x1 - x0, y1 - y0) & QRectF(view)).toAlignedRect() & view


@lru_cache(maxsize=2)
def changed_box(was: DrawnPart, now: DrawnPart, tolerance: float) -> Box | None:
    """The box [mm] in which two parts differ, None if they are alike.

    Rings that an edit leaves as they are stay the same objects.
    """
    before, after = {id(r) for r in was.loops}, {id(r) for r in now.loops}
    gone = [r for r in was.loops if id(r) not in after]
    come = [r for r in now.loops if id(r) not in before]
    if gone and come and gone[0] is was.loops[0] and come[0] is now.loops[0]:
        places = [*_differing(gone[0], come[0], tolerance)]
        gone, come = gone[1:], come[1:]
    else:
        places = []
    places += [ring.polyline(tolerance) for ring in (*gone, *come)]
    points = np.concatenate([np.empty((0, 2)), *places])
    points = points[np.isfinite(points).all(axis=1)]
    if not len(points):
        return None
    (x0, y0), (x1, y1) = points.min(axis=0), points.max(axis=0)
    return float(x0), float(y0), float(x1), float(y1)


def _differing(one: Ring, other: Ring, tolerance: float) -> tuple[Floats, Floats]:
    """What of two rings lies between the stretches that they have in common."""
    a, b = one.flat(tolerance), other.flat(tolerance)
    head, tail = other.common_with(one)
    if head == len(one.pieces) == len(other.pieces):
        return a.points[:0], b.points[:0]
    before, after = (
        flat.points[max(flat.starts[head] - 1, 0) : flat.starts[len(flat.starts) - 1 - tail] + 1]
        for flat in (a, b)
    )
    return before, after


def stretches_in(points: Floats, view: QRectF) -> list[QPolygonF]:
    """The stretches of a closed polyline (n, 2) [px] that run through a view, as open polylines."""
    low, high = np.minimum(points[:-1], points[1:]), np.maximum(points[:-1], points[1:])
    seen = (low[:, 0] <= view.right() + SEAM_PX) & (high[:, 0] >= view.left() - SEAM_PX)
    seen &= (low[:, 1] <= view.bottom() + SEAM_PX) & (high[:, 1] >= view.top() - SEAM_PX)
    steps = np.diff(np.concatenate([[0], seen.astype(np.int8), [0]]))
    runs = list(zip(np.flatnonzero(steps > 0), np.flatnonzero(steps < 0), strict=True))
    pieces = [points[first : last + 1] for first, last in runs]
    if len(pieces) > 1 and seen[0] and seen[-1]:  # one stretch over the place where it closes
        pieces = [np.concatenate([pieces[-1], pieces[0]]), *pieces[1:-1]]
    return [polygon(piece) for piece in pieces]


def thinned(points: Floats, view: QRectF) -> Floats:
    """A closed polyline (n, 2) [px] that fills a view as the given one does, with fewer points.

    Points are left out that lie, with those before and after them, all on one side of the view:
    however the line runs out there, it does not come in.
    """
    x, y = points[:, 0], points[:, 1]
    side = np.zeros(len(points), dtype=np.int8)
    side[y > view.bottom() + SEAM_PX] = 4
    side[y < view.top() - SEAM_PX] = 3
    side[x > view.right() + SEAM_PX] = 2
    side[x < view.left() - SEAM_PX] = 1
    before, after = np.roll(side, 1), np.roll(side, -1)
    left: Floats = points[(side == 0) | (side != before) | (side != after)]
    return left
