"""The part on the board: its fill under the results, its outline, centre lines and lit places."""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from PySide6.QtCore import QLineF, QPointF, QRectF, Qt
from PySide6.QtGui import QColor, QPainter, QPainterPath, QPen, QPolygonF

from screenapp.window import theme
from screenapp.window.board.drawn_part import DrawnPart
from screenapp.window.board.frame import Floats, Frame, polygon
from screenapp.window.board.ring import Ring, flatten
from screenapp.window.board.screen_item import Z_FILL, Z_OUTLINE, ScreenItem
from screenapp.window.board.still_picture import StillPicture, stretches_in, thinned

SAGITTA_PX = 0.15
"""Arcs are flattened to within this [px]."""

FARTHEST_PAN = 2000.0
"""Lines are worked out afresh after a pan of this length [px]."""

FARTHEST_SEEN = 8000.0
"""Rings wholly farther out than this [px] are not drawn: no view and pan reaches them."""


def mixed(a: str, b: str, share: float) -> QColor:
    """Colour `a` with a `share` of colour `b` in it."""
    one, two = QColor(a), QColor(b)
    pairs = ((one.red(), two.red()), (one.green(), two.green()), (one.blue(), two.blue()))
    red, green, blue = (round(p + (q - p) * share) for p, q in pairs)
    return QColor(red, green, blue)


@dataclass(frozen=True)
class RingLine:
    """A ring in pixels: its points (n, 2) and the box round them."""

    points: Floats
    box: QRectF

    @cached_property
    def polygon(self) -> QPolygonF:
        """All points."""
        return polygon(self.points)

    def thinned(self, view: QRectF) -> QPolygonF:
        """A polygon that fills a view [px] as the whole does."""
        points = thinned(self.points, view)
        return polygon(points) if len(points) else QPolygonF()


class PartPaths:
    """The part's lines in pixels, shared by fill and outline, kept while the view only pans."""

    def __init__(self) -> None:
        self._for: tuple[DrawnPart, Frame] | None = None
        self._features: dict[str, list[QPolygonF]] = {}
        self._frame: Frame | None = None
        self._kept: dict[int, tuple[Ring, RingLine | None]] = {}
        self._whole: QPainterPath | None = None
        self.rings: list[RingLine] = []

    def settle(self, drawn: DrawnPart, frame: Frame) -> QPointF:
        """Make sure that the lines are of this part and zoom; gives how far they are panned."""
        had = self._for
        if had is None or had[0] is not drawn or not had[1].pans_to(frame, FARTHEST_PAN):
            self._for = had = drawn, frame
            tolerance = tolerance_at(frame)
            self._features = {}
            if self._frame is None or not self._frame.same_as(frame):
                self._frame, self._kept = frame, {}
            kept: dict[int, tuple[Ring, RingLine | None]] = {}
            self.rings = []
            self._whole = None
            for ring in drawn.loops:  # in a drag all rings but one stay as they are
                one = self._kept.get(id(ring)) or (ring, _seen(ring, frame, tolerance))
                kept[id(ring)] = one
                if one[1] is not None:
                    self.rings.append(one[1])
            self._kept = kept
        return had[1].shift_to(frame)

    @property
    def whole(self) -> QPainterPath:
        """All rings as one path; what lies in a hole is outside."""
        if self._whole is None:
            self._whole = _path([ring.polygon for ring in self.rings])
        return self._whole

    def seen_in(self, view: QRectF) -> list[RingLine]:
        """The rings that reach into a view [px], as panned."""
        return [ring for ring in self.rings if ring.box.intersects(view)]

    def feature(self, id_: str) -> list[QPolygonF]:
        """The pieces of an edge, fillet or hole."""
        if id_ not in self._features and self._for is not None:
            drawn, frame = self._for
            self._features[id_] = [
                polygon(frame.pxs(flatten(p.curve, SAGITTA_PX / frame.scale)))
                for p in drawn.pieces_of(id_)
            ]
        return self._features.get(id_, [])


class FillItem(ScreenItem):
    """The wall's face, a shade off the board; results are painted over it."""

    def __init__(self, paths: PartPaths) -> None:
        super().__init__(Z_FILL)
        self.drawn: DrawnPart | None = None
        self.before: DrawnPart | None = None
        self._paths = paths
        self._still = StillPicture()

    def show_part(self, drawn: DrawnPart, before: DrawnPart | None = None) -> None:
        """Paint this part from now on, which a gesture makes of the one `before`."""
        self.drawn, self.before = drawn, before
        self.update()

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Fill the outline, holes left out."""
        if self.drawn is None or self.drawn.part.outline is None:
            return
        palette = theme.current()
        colour = mixed(palette.paper, palette.accent, 0.07)

        def fill(over: QPainter, drawn: DrawnPart, view: QRectF) -> None:
            shift = self._paths.settle(drawn, frame)
            over.translate(shift)
            seen = view.translated(-shift)
            rings = self._paths.seen_in(seen)
            over.fillPath(
                _path([r.polygon if seen.contains(r.box) else r.thinned(seen) for r in rings]),
                colour,
            )
            over.translate(-shift)

        parts = self.before, self.drawn
        self._still.paint(painter, frame, parts, colour.rgba(), fill, tolerance_at(frame))


class OutlineItem(ScreenItem):
    """Outline, holes, centre lines, and whatever is hovered or selected of them."""

    def __init__(self, paths: PartPaths) -> None:
        super().__init__(Z_OUTLINE)
        self.drawn: DrawnPart | None = None
        self.before: DrawnPart | None = None
        self.selected: tuple[str, ...] = ()
        self.hovered: str | None = None
        self.faint = False
        self._paths = paths
        self._still = StillPicture()

    def show_part(self, drawn: DrawnPart, before: DrawnPart | None = None) -> None:
        """Paint this part from now on, which a gesture makes of the one `before`."""
        self.drawn, self.before = drawn, before
        self.update()

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Paint all lines."""
        if self.drawn is None:
            return
        palette = theme.current()
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        ink = QColor(palette.quiet if self.faint else palette.ink)
        if self.faint:
            ink.setAlphaF(0.55)
        pen = _pen(ink, 1.0 if self.faint else 2.0)

        def lines(over: QPainter, drawn: DrawnPart, view: QRectF) -> None:
            shift = self._paths.settle(drawn, frame)
            over.setBrush(Qt.BrushStyle.NoBrush)
            over.setPen(pen)
            over.translate(shift)
            _stroke(over, self._paths, view.translated(-shift).adjusted(-4.0, -4.0, 4.0, 4.0))
            over.translate(-shift)
            if not self.faint:
                _draw_centre_lines(over, drawn, frame, view)

        look = (ink.rgba(), palette.quiet, self.faint)
        parts = self.before, self.drawn
        self._still.paint(painter, frame, parts, look, lines, tolerance_at(frame))
        for id_ in self.selected:
            self._light(painter, frame, id_, QColor(palette.accent), 3.0)
        if self.hovered is not None:
            chosen = self.hovered in self.selected
            colour = QColor(palette.accent) if chosen else QColor(palette.ink)
            self._light(painter, frame, self.hovered, colour, 4.0)

    def _light(
        self, painter: QPainter, frame: Frame, id_: str, colour: QColor, width: float
    ) -> None:
        drawn = self.drawn
        assert drawn is not None
        painter.setPen(_pen(colour, width))
        painter.setBrush(Qt.BrushStyle.NoBrush)
        shift = self._paths.settle(drawn, frame)
        painter.translate(shift)
        for piece in self._paths.feature(id_):
            painter.drawPolyline(piece)
        painter.translate(-shift)
        if (corner := drawn.corners.get(id_)) is not None:
            p = frame.px(corner.at)
            painter.setPen(_pen(colour, 1.5))
            painter.setBrush(QColor(theme.current().paper))
            half = width + 1.0
            painter.drawRect(QRectF(p.x() - half, p.y() - half, 2 * half, 2 * half))


def tolerance_at(frame: Frame) -> float:
    """Sagitta of rings [mm]; the same over a range of zooms, so that their points are kept."""
    return float(2.0 ** math.floor(math.log2(SAGITTA_PX / frame.scale)))


def _path(rings: list[QPolygonF]) -> QPainterPath:
    path = QPainterPath()
    path.setFillRule(Qt.FillRule.OddEvenFill)
    for ring in rings:
        path.addPolygon(ring)
        path.closeSubpath()
    return path


def _stroke(painter: QPainter, paths: PartPaths, view: QRectF) -> None:
    """Draw the rings, of those that leave the view what lies in it."""
    for ring in paths.seen_in(view):  # one by one: a path of many rings is slow to stroke
        if view.contains(ring.box):
            painter.drawPolygon(ring.polygon)
            continue
        for line in stretches_in(ring.points, view):
            painter.drawPolyline(line)


def _draw_centre_lines(painter: QPainter, drawn: DrawnPart, frame: Frame, view: QRectF) -> None:
    pen = QPen(QColor(theme.current().quiet), 1.0)
    pen.setDashPattern([12.0, 3.0, 2.0, 3.0])
    painter.setPen(pen)
    painter.drawLines(_crosses(drawn.crosses, frame, view))


def _seen(ring: Ring, frame: Frame, tolerance: float) -> RingLine | None:
    """A ring in pixels; None if it is empty, or too far away to come into view by a pan."""
    box = ring.box
    if box is not None:
        far = np.abs(frame.pxs([(box[0], box[1]), (box[2], box[3])]))
        outside = np.sign(frame.pxs([(box[0], box[1]), (box[2], box[3])]))
        if np.any((far.min(axis=0) > FARTHEST_SEEN) & (outside[0] == outside[1])):
            return None
    points = frame.pxs(ring.polyline(tolerance))
    if not len(points):
        return None
    if box is not None:  # that of thousands of points takes longer
        (x0, y0), (x1, y1) = np.sort(frame.pxs([(box[0], box[1]), (box[2], box[3])]), axis=0)
    else:
        (x0, y0), (x1, y1) = points.min(axis=0), points.max(axis=0)
    return RingLine(points, QRectF(x0, y0, x1 - x0, y1 - y0))


def _crosses(rows: Floats, frame: Frame, view: QRectF) -> list[QLineF]:
    """Two centre lines for each hole that stand out of it by a third, at least 5 px.

    Holes out of view, or so small that the lines would fill them, have none.
    """
    rows = rows[np.isfinite(rows).all(axis=1)]
    if not len(rows):
        return []
    middle = frame.pxs(rows[:, :2])
    halves = rows[:, 2:4] * frame.scale
    reach = halves + np.clip(halves / 3.0, 5.0, 12.0)
    far = reach.max(axis=1)
    seen = halves.min(axis=1) >= 3.0
    for axis, (low, high) in enumerate(((view.left(), view.right()), (view.top(), view.bottom()))):
        seen &= (middle[:, axis] + far >= low) & (middle[:, axis] - far <= high)
    lines: list[QLineF] = []
    for (x, y), (along, across), angle in zip(
        middle[seen].tolist(), reach[seen].tolist(), rows[seen, 4].tolist(), strict=True
    ):
        c, s = math.cos(angle), math.sin(angle)
        for far_out, dx, dy in ((along, c, -s), (across, -s, -c)):
            # from the middle outwards, so that both dashes cross there
            lines.append(QLineF(x, y, x + far_out * dx, y + far_out * dy))
            lines.append(QLineF(x, y, x - far_out * dx, y - far_out * dy))
    return lines


def _pen(colour: QColor, width: float) -> QPen:
    pen = QPen(colour, width)
    pen.setJoinStyle(Qt.PenJoinStyle.RoundJoin)
    pen.setCapStyle(Qt.PenCapStyle.RoundCap)
    return pen
