"""The part on the board: its fill under the results, its outline, centre lines and lit places."""

from __future__ import annotations

import math

import numpy as np
from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QColor, QPainter, QPainterPath, QPen

from screenapp.model.part import CircleHole, Point, SlotHole
from screenapp.window import theme
from screenapp.window.board.drawn_part import DrawnPart, flatten
from screenapp.window.board.frame import Frame, polygon
from screenapp.window.board.screen_item import Z_FILL, Z_OUTLINE, ScreenItem

SAGITTA_PX = 0.1
"""Arcs are flattened to within this [px]."""


def mixed(a: str, b: str, share: float) -> QColor:
    """Colour `a` with a `share` of colour `b` in it."""
    one, two = QColor(a), QColor(b)
    pairs = ((one.red(), two.red()), (one.green(), two.green()), (one.blue(), two.blue()))
    red, green, blue = (round(p + (q - p) * share) for p, q in pairs)
    return QColor(red, green, blue)


class _Paths:
    """Painter paths in pixels, kept while part and frame stay the same."""

    def __init__(self) -> None:
        self._for: tuple[DrawnPart, Frame] | None = None
        self._features: dict[str, QPainterPath] = {}
        self._whole = QPainterPath()

    def at(self, drawn: DrawnPart, frame: Frame) -> None:
        if self._for is not None and self._for[0] is drawn and self._for[1].same_as(frame):
            return
        self._for = drawn, frame
        self._features = {}
        self._whole = QPainterPath()
        self._whole.setFillRule(Qt.FillRule.OddEvenFill)
        tolerance = SAGITTA_PX / frame.scale
        for loop in range(len(drawn.loops)):
            points = drawn.polyline(loop, tolerance)
            if len(points):
                self._whole.addPolygon(polygon(frame.pxs(points)))
                self._whole.closeSubpath()

    def whole(self) -> QPainterPath:
        return self._whole

    def feature(self, id_: str) -> QPainterPath:
        """The pieces of an edge, fillet or hole."""
        if id_ not in self._features and self._for is not None:
            drawn, frame = self._for
            path = QPainterPath()
            for piece in drawn.pieces_of(id_):
                points = flatten(piece.curve, SAGITTA_PX / frame.scale)
                path.addPolygon(polygon(frame.pxs(points)))
            self._features[id_] = path
        return self._features[id_]


class FillItem(ScreenItem):
    """The wall's face, a shade off the board; results are painted over it."""

    def __init__(self) -> None:
        super().__init__(Z_FILL)
        self.drawn: DrawnPart | None = None
        self._paths = _Paths()

    def show_part(self, drawn: DrawnPart) -> None:
        """Paint this part from now on."""
        self.drawn = drawn
        self.update()

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Fill the outline, holes left out."""
        if self.drawn is None or self.drawn.part.outline is None:
            return
        self._paths.at(self.drawn, frame)
        palette = theme.current()
        painter.fillPath(self._paths.whole(), mixed(palette.paper, palette.accent, 0.07))


class OutlineItem(ScreenItem):
    """Outline, holes, centre lines, and whatever is hovered or selected of them."""

    def __init__(self) -> None:
        super().__init__(Z_OUTLINE)
        self.drawn: DrawnPart | None = None
        self.selected: tuple[str, ...] = ()
        self.hovered: str | None = None
        self.faint = False
        self._paths = _Paths()

    def show_part(self, drawn: DrawnPart) -> None:
        """Paint this part from now on."""
        self.drawn = drawn
        self.update()

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Paint all lines."""
        if self.drawn is None:
            return
        self._paths.at(self.drawn, frame)
        palette = theme.current()
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        ink = QColor(palette.quiet if self.faint else palette.ink)
        if self.faint:
            ink.setAlphaF(0.55)
        width = 1.0 if self.faint else 2.0
        painter.setBrush(Qt.BrushStyle.NoBrush)
        painter.setPen(_pen(ink, width))
        painter.drawPath(self._paths.whole())
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
        painter.drawPath(self._paths.feature(id_))
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
        pen.setCosmetic(True)
        painter.setPen(pen)
        for hole in self.drawn.part.holes:
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
    pen.setCosmetic(True)
    pen.setJoinStyle(Qt.PenJoinStyle.RoundJoin)
    pen.setCapStyle(Qt.PenCapStyle.RoundCap)
    return pen


def ring_points(centre: Point, radius: float, n: int = 64) -> np.ndarray:
    """A circle as points (n + 1, 2) [mm]."""
    a = np.linspace(0.0, 2.0 * math.pi, n + 1)
    return np.asarray(centre) + radius * np.stack([np.cos(a), np.sin(a)], axis=-1)
