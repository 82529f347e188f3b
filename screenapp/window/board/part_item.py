"""The part on the board: its fill under the results, its outline, centre lines and lit places."""

from __future__ import annotations

import math

from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QColor, QPainter, QPainterPath, QPen, QPolygonF

from screenapp.model.part import CircleHole, Point, SlotHole
from screenapp.window import theme
from screenapp.window.board.drawn_part import DrawnPart
from screenapp.window.board.frame import Frame, polygon
from screenapp.window.board.ring import flatten
from screenapp.window.board.screen_item import Z_FILL, Z_OUTLINE, ScreenItem

SAGITTA_PX = 0.15
"""Arcs are flattened to within this [px]."""

FARTHEST_PAN = 2000.0
"""Lines are worked out afresh after a pan of this length [px]."""


def mixed(a: str, b: str, share: float) -> QColor:
    """Colour `a` with a `share` of colour `b` in it."""
    one, two = QColor(a), QColor(b)
    pairs = ((one.red(), two.red()), (one.green(), two.green()), (one.blue(), two.blue()))
    red, green, blue = (round(p + (q - p) * share) for p, q in pairs)
    return QColor(red, green, blue)


class PartPaths:
    """The part's lines in pixels, shared by fill and outline, kept while the view only pans."""

    def __init__(self) -> None:
        self._for: tuple[DrawnPart, Frame] | None = None
        self._features: dict[str, list[QPolygonF]] = {}
        self.rings: list[QPolygonF] = []
        self.whole = QPainterPath()

    def settle(self, drawn: DrawnPart, frame: Frame) -> QPointF:
        """Make sure that the lines are of this part and zoom; gives how far they are panned."""
        had = self._for
        if had is None or had[0] is not drawn or not had[1].pans_to(frame, FARTHEST_PAN):
            self._for = had = drawn, frame
            tolerance = 2.0 ** math.floor(math.log2(SAGITTA_PX / frame.scale))  # kept over zooms
            self._features = {}
            self.rings = []
            self.whole = QPainterPath()
            self.whole.setFillRule(Qt.FillRule.OddEvenFill)
            for loop in range(len(drawn.loops)):
                points = drawn.polyline(loop, tolerance)
                if len(points):
                    ring = polygon(frame.pxs(points))
                    self.rings.append(ring)
                    self.whole.addPolygon(ring)
                    self.whole.closeSubpath()
        return had[1].shift_to(frame)

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
        self._paths = paths

    def show_part(self, drawn: DrawnPart) -> None:
        """Paint this part from now on."""
        self.drawn = drawn
        self.update()

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Fill the outline, holes left out."""
        if self.drawn is None or self.drawn.part.outline is None:
            return
        painter.translate(self._paths.settle(self.drawn, frame))
        palette = theme.current()
        painter.fillPath(self._paths.whole, mixed(palette.paper, palette.accent, 0.07))


class OutlineItem(ScreenItem):
    """Outline, holes, centre lines, and whatever is hovered or selected of them."""

    def __init__(self, paths: PartPaths) -> None:
        super().__init__(Z_OUTLINE)
        self.drawn: DrawnPart | None = None
        self.selected: tuple[str, ...] = ()
        self.hovered: str | None = None
        self.faint = False
        self._paths = paths

    def show_part(self, drawn: DrawnPart) -> None:
        """Paint this part from now on."""
        self.drawn = drawn
        self.update()

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Paint all lines."""
        if self.drawn is None:
            return
        shift = self._paths.settle(self.drawn, frame)
        palette = theme.current()
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        ink = QColor(palette.quiet if self.faint else palette.ink)
        if self.faint:
            ink.setAlphaF(0.55)
        width = 1.0 if self.faint else 2.0
        painter.setBrush(Qt.BrushStyle.NoBrush)
        painter.setPen(_pen(ink, width))
        painter.translate(shift)
        for ring in self._paths.rings:  # one by one: a path of many rings is slow to stroke
            painter.drawPolygon(ring)
        painter.translate(-shift)
        if not self.faint:
            self._draw_centre_lines(painter, frame)
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

    def _draw_centre_lines(self, painter: QPainter, frame: Frame) -> None:
        assert self.drawn is not None
        colour = QColor(theme.current().quiet)
        pen = QPen(colour, 1.0)
        pen.setDashPattern([12.0, 3.0, 2.0, 3.0])
        painter.setPen(pen)
        for hole in self.drawn.cut_holes:
            if isinstance(hole, CircleHole):
                half = hole.diameter / 2.0
                _cross(painter, frame, hole.centre, half, half, 0.0)
            elif isinstance(hole, SlotHole):
                _cross(painter, frame, hole.centre, hole.length / 2.0, hole.width / 2.0, hole.angle)


def _cross(
    painter: QPainter, frame: Frame, centre: Point, along: float, across: float, angle: float
) -> None:
    """Two centre lines that stand out of the hole by a third, at least 5 px."""
    if not all(math.isfinite(v) for v in (*centre, along, across)):
        return
    if min(along, across) * frame.scale < 3.0:
        return
    middle = frame.px(centre)
    c, s = math.cos(math.radians(angle)), math.sin(math.radians(angle))
    for half, (dx, dy) in ((along, (c, -s)), (across, (-s, -c))):
        reach = half * frame.scale + max(5.0, min(12.0, half * frame.scale / 3.0))
        step = QPointF(dx * reach, dy * reach)
        # from the middle outwards, so that both dashes cross there
        painter.drawLine(middle, middle + step)
        painter.drawLine(middle, middle - step)


def _pen(colour: QColor, width: float) -> QPen:
    pen = QPen(colour, width)
    pen.setJoinStyle(Qt.PenJoinStyle.RoundJoin)
    pen.setCapStyle(Qt.PenCapStyle.RoundCap)
    return pen
