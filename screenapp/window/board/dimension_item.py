"""Draws dimensions as a drawing does, at constant screen size, and knows where each number is."""

from __future__ import annotations

import math
from dataclasses import dataclass

from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import (
    QColor,
    QFontMetricsF,
    QPainter,
    QPainterPath,
    QPen,
    QPolygonF,
    QTransform,
)

from screenapp.model.dimension_marks import Mark
from screenapp.model.part import DisplayUnits, Point
from screenapp.model.units import format_number
from screenapp.window import theme
from screenapp.window.board.frame import Frame
from screenapp.window.board.screen_item import Z_DIMENSIONS, ScreenItem

FIRST_PX, ROW_PX = 26.0, 22.0
"""From the places to the first dimension line, and from one to the next [px]."""

GAP_PX, BEYOND_PX = 4.0, 5.0
"""An extension line begins so far off its place and ends so far beyond the line [px]."""

ARROW_PX, ARROW_HALF_PX = 9.0, 2.5
PAD_PX = 4.0
LEADER_PX = 22.0
LEAST_PX = 12.0
"""A thing that is smaller on the screen has no dimension of its own [px]."""


def reach_of(rows: int) -> float:
    """How far so many rows of dimensions reach from the part [px], with their text."""
    return FIRST_PX + ROW_PX * max(0, rows - 1) + 12.0


@dataclass(frozen=True)
class Placed:
    """A number as it stands on the screen [px]."""

    mark: Mark
    middle: QPointF
    area: QPolygonF


class DimensionsItem(ScreenItem):
    """The marks that are shown."""

    def __init__(self) -> None:
        super().__init__(Z_DIMENSIONS)
        self.marks: tuple[Mark, ...] = ()
        self.units: DisplayUnits = "mm-N-MPa"
        self.hidden: tuple[str, str, str] | None = None
        self._placed: list[Placed] = []

    def show_marks(self, marks: tuple[Mark, ...], units: DisplayUnits) -> None:
        """Paint these from now on."""
        if marks != self.marks or units != self.units:
            self.marks, self.units = marks, units
            self.update()
        if not marks:
            self._placed = []

    def hide_number(self, key: tuple[str, str, str] | None) -> None:
        """Leave a number out while it is being typed."""
        if key != self.hidden:
            self.hidden = key
            self.update()

    def at(self, px: QPointF) -> Mark | None:
        """The mark whose number is at a pixel."""
        for placed in reversed(self._placed):
            if placed.area.containsPoint(px, Qt.FillRule.WindingFill):
                return placed.mark
        return None

    def placed(self, key: tuple[str, str, str]) -> Placed | None:
        """Where the number of a mark stands."""
        return next((p for p in self._placed if p.mark.key == key), None)

    def text_of(self, mark: Mark) -> str:
        """What is written at a mark: a bare number, as on a drawing."""
        number = format_number(mark.value, mark.kind, self.units)
        return ("=\u2009" if mark.given else "") + mark.lead + number

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Paint all marks."""
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        self._placed = []
        taken: list[QRectF] = []
        for mark in self.marks:
            if mark.row < 0:
                self._draw_leader(painter, frame, mark, taken)
            else:
                self._draw_linear(painter, frame, mark, taken)

    # --- linear -----------------------------------------------------------------------------

    def _draw_linear(
        self, painter: QPainter, frame: Frame, mark: Mark, taken: list[QRectF]
    ) -> None:
        along, away = _flipped(mark.along), _flipped(mark.away)
        a, b = frame.px(mark.a), frame.px(mark.b)
        # both ends on one line beside the farther place
        reach = max(_dot(a, away), _dot(b, away)) + FIRST_PX + ROW_PX * mark.row
        ends = [p + away * (reach - _dot(p, away)) for p in (a, b)]
        long = _dot(ends[1] - ends[0], along)
        if abs(long) < LEAST_PX and mark.what != "overall":
            return
        pen = QPen(QColor(theme.current().quiet), 1.0)
        painter.setPen(pen)
        for place, end in zip((a, b), ends, strict=True):
            from_place = _dot(end - place, away)
            if from_place > GAP_PX:
                painter.drawLine(place + away * GAP_PX, end + away * BEYOND_PX)
        text = self.text_of(mark)
        wide = _width(text) + 2 * PAD_PX
        inside = abs(long) >= wide + 2 * ARROW_PX
        ux = along if long >= 0.0 else -along
        one, two = ends
        middle = (one + two) / 2.0
        if inside:
            painter.drawLine(one, middle - ux * (wide / 2.0))
            painter.drawLine(middle + ux * (wide / 2.0), two)
            _arrow(painter, one, -ux)
            _arrow(painter, two, ux)
        else:  # arrows from outside, the number beyond the second end
            painter.drawLine(one - ux * (2 * ARROW_PX), one)
            painter.drawLine(one, two + ux * (2 * ARROW_PX))
            _arrow(painter, one, ux)
            _arrow(painter, two, -ux)
            middle = two + ux * (2 * ARROW_PX + wide / 2.0)
        self._write(painter, mark, text, middle, ux, taken)

    # --- with a leader ------------------------------------------------------------------------

    def _draw_leader(
        self, painter: QPainter, frame: Frame, mark: Mark, taken: list[QRectF]
    ) -> None:
        """A radius or diameter: an arrow at the arc, the number beyond it."""
        along = _flipped(mark.along)
        a, b = frame.px(mark.a), frame.px(mark.b)
        across = math.hypot(b.x() - a.x(), b.y() - a.y())
        if across < (LEAST_PX / 2.0 if mark.what == "radius" else LEAST_PX):
            return
        painter.setPen(QPen(QColor(theme.current().quiet), 1.0))
        text = self.text_of(mark)
        wide = _width(text) + 2 * PAD_PX
        outward = mark.what == "diameter"
        if outward:
            painter.drawLine(a, b)
            _arrow(painter, a, -along)
            _arrow(painter, b, along)
        else:  # from the middle of the circle, or from no farther than the number needs
            back = min(across, LEADER_PX + ARROW_PX)
            painter.drawLine(b - along * back, b)
            _arrow(painter, b, along)
        side = 1.0 if (along.x() >= 0.0) == outward else -1.0
        knee = b + along * LEADER_PX if outward else b - along * (back + 2.0)
        start = b if outward else b - along * back
        painter.drawLine(start, knee)
        foot = knee + QPointF(side * 4.0, 0.0)
        painter.drawLine(knee, foot)
        middle = foot + QPointF(side * wide / 2.0, 0.0)
        self._write(painter, mark, text, middle, QPointF(1.0, 0.0), taken)

    # --- text -----------------------------------------------------------------------------------

    def _write(
        self,
        painter: QPainter,
        mark: Mark,
        text: str,
        middle: QPointF,
        along: QPointF,
        taken: list[QRectF],
    ) -> None:
        """The number along its line, read from below or from the right."""
        font = theme.font(theme.TEXT_SMALL)
        metrics = QFontMetricsF(font)
        wide, high = metrics.horizontalAdvance(text), metrics.ascent() + metrics.descent()
        angle = math.degrees(math.atan2(along.y(), along.x()))
        if angle > 90.0 - 1e-6:
            angle -= 180.0
        elif angle <= -90.0 - 1e-6:
            angle += 180.0
        turn = QTransform().translate(middle.x(), middle.y()).rotate(angle)
        box = QRectF(-wide / 2.0 - PAD_PX, -high / 2.0, wide + 2 * PAD_PX, high)
        area = turn.map(QPolygonF(box))
        if any(area.boundingRect().intersects(other) for other in taken):
            return  # two numbers on one another are none
        taken.append(area.boundingRect())
        self._placed.append(Placed(mark, middle, area))
        if mark.key == self.hidden:
            return
        foot = QPointF(-wide / 2.0, (metrics.ascent() - metrics.descent()) / 2.0)
        painter.save()
        painter.setWorldTransform(turn, True)
        if mark.row < 0:  # it may stand over lines of the part: a seam keeps it readable
            path = QPainterPath()
            path.addText(foot, font, text)
            seam = QColor(theme.current().paper)
            seam.setAlphaF(0.9)
            pen = QPen(seam, 4.0)
            pen.setJoinStyle(Qt.PenJoinStyle.RoundJoin)
            painter.strokePath(path, pen)
        painter.setFont(font)
        painter.setPen(QColor(theme.current().ink))
        painter.drawText(foot, text)
        painter.restore()


def _arrow(painter: QPainter, tip: QPointF, way: QPointF) -> None:
    """A slender filled head that points along `way`."""
    across = QPointF(-way.y(), way.x()) * ARROW_HALF_PX
    foot = tip - way * ARROW_PX
    path = QPainterPath(tip)
    path.lineTo(foot + across)
    path.lineTo(foot - across)
    path.closeSubpath()
    painter.fillPath(path, painter.pen().color())


def _flipped(way: Point) -> QPointF:
    """A direction of the board on the screen, where y runs down."""
    return QPointF(way[0], -way[1])


def _dot(p: QPointF, q: QPointF) -> float:
    return p.x() * q.x() + p.y() * q.y()


def _width(text: str) -> float:
    return QFontMetricsF(theme.font(theme.TEXT_SMALL)).horizontalAdvance(text)
