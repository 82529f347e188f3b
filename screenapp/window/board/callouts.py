"""Numbers on the board: the largest value and untrusted peaks as ring, leader and card; values of
probes beside their marks."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass

from PySide6.QtCore import QPointF, QRectF, QSizeF, Qt
from PySide6.QtGui import QColor, QFont, QFontMetricsF, QPainter, QPainterPath, QPen

from screenapp.model.findings import Trust
from screenapp.model.history_figure import HistoryFigure
from screenapp.model.part import Point
from screenapp.window import theme
from screenapp.window.board.frame import Frame
from screenapp.window.board.screen_item import Z_PROBES, ScreenItem
from screenapp.window.history_painting import TALL, WIDE, paint_history
from screenapp.window.traced import Traced

RING = 4.5
_PAD_X, _PAD_Y, _LINE = 10.0, 7.0, 16.0
_AROUND_PROBE = QPointF(12.0, 12.0)
_DIRECTIONS = 16
_DISTANCES = (
    44.0,
    72.0,
    108.0,
    156.0,
    216.0,
    300.0,
    400.0,
)  # of the card's nearest point from the ring [px]


@dataclass(frozen=True)
class Callout:
    """A card that points at a place.

    Attributes:
        at: the place as drawn [mm].
        head: the number, in bold.
        detail: place, use, trust.
        trust: decides the colour of ring and frame, and its dashes.
        history: the figure below the words, None for none.
        number: what a click on the card chooses, None for nothing.
    """

    at: Point
    head: str
    detail: str
    trust: Trust
    history: HistoryFigure | None = None
    number: Traced | None = None


class CalloutItem(ScreenItem):
    """Paints callouts, each card where it hides least of the part."""

    def __init__(self) -> None:
        super().__init__(Z_PROBES + 2)
        self._callouts: tuple[Callout, ...] = ()
        self._probes: tuple[Point, ...] = ()
        self._outline = QPainterPath()
        self._kept: list[QPointF] = []  # offsets of the cards from their places [px]
        self._kept_for: object = None
        self._cards: list[QRectF] = []  # as last painted [px]
        self.overlays: Callable[[], list[QRectF]] = list  # where widgets lie over the canvas [px]
        self.right_margin = 0.0  # px at the right edge that the colour bar takes

    def show_callouts(
        self,
        callouts: tuple[Callout, ...],
        probes: tuple[Point, ...],
        outline: QPainterPath,
    ) -> None:
        """Show these; cards avoid `probes` and the part as drawn, `outline` [mm]."""
        if callouts != self._callouts or outline is not self._outline:
            self._kept_for = None
        self._callouts, self._probes, self._outline = callouts, probes, outline
        self.update()

    @property
    def callouts(self) -> tuple[Callout, ...]:
        """What is shown."""
        return self._callouts

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Paint rings, leaders and cards."""
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        area = QRectF(self.getViewBox().sceneBoundingRect())
        area.adjust(8.0, 8.0, -8.0 - self.right_margin, -8.0)
        offsets = self._offsets(frame, area)
        for callout, offset in zip(self._callouts, offsets, strict=True):
            at = frame.px(callout.at)
            card = QRectF(at + offset, _size(callout))
            _paint_leader(painter, at, card, callout)
        self._cards = self.cards(frame)
        for callout, card in zip(self._callouts, self._cards, strict=True):
            _paint_card(painter, card, callout)

    def cards(self, frame: Frame) -> list[QRectF]:
        """Where the cards stand [px]."""
        area = QRectF(self.getViewBox().sceneBoundingRect())
        area.adjust(8.0, 8.0, -8.0 - self.right_margin, -8.0)
        return [
            QRectF(frame.px(callout.at) + offset, _size(callout))
            for callout, offset in zip(self._callouts, self._offsets(frame, area), strict=True)
        ]

    def at(self, px: QPointF) -> Callout | None:
        """The callout whose card is at a pixel, as last painted."""
        shown = zip(self._callouts, self._cards, strict=False)
        return next((callout for callout, card in shown if card.contains(px)), None)

    def _offsets(self, frame: Frame, area: QRectF) -> list[QPointF]:
        """Places of the cards; kept while the view only pans and they stay in it."""
        key = (round(frame.scale, 9), area, tuple(map(_corners, self.overlays())))
        if self._kept_for == key and all(
            area.contains(QRectF(frame.px(c.at) + offset, _size(c)))
            or not area.contains(frame.px(c.at))
            for c, offset in zip(self._callouts, self._kept, strict=True)
        ):
            return self._kept
        outline = frame.transform.map(self._outline)
        taken: list[QRectF] = [
            QRectF(frame.px(c.at) - QPointF(8, 8), frame.px(c.at) + QPointF(8, 8))
            for c in self._callouts
        ]
        taken += [
            QRectF(frame.px(p) - _AROUND_PROBE, frame.px(p) + _AROUND_PROBE) for p in self._probes
        ]
        taken += self.overlays()
        offsets: list[QPointF] = []
        for callout in self._callouts:
            at = frame.px(callout.at)
            size = _size(callout)
            choices = [QRectF(corner, size) for corner in _choices(at, size)]
            best = min(choices, key=lambda card: _cost(card, at, area, outline, taken))
            taken.append(best.adjusted(-4, -4, 4, 4))
            offsets.append(best.topLeft() - at)
        self._kept, self._kept_for = offsets, key
        return offsets


def _corners(box: QRectF) -> tuple[float, float, float, float]:
    return box.left(), box.top(), box.right(), box.bottom()


def _choices(at: QPointF, size: QSizeF) -> list[QPointF]:
    """Upper left corners of cards all round a place."""
    width, height = size.width(), size.height()
    corners: list[QPointF] = []
    for distance in _DISTANCES:
        for k in range(_DIRECTIONS):
            # upper right first: where two places are alike, that is where eyes look
            angle = math.pi / 4 + 2 * math.pi * k / _DIRECTIONS
            reach_x, reach_y = math.cos(angle) * distance, -math.sin(angle) * distance
            x = at.x() + reach_x - (0.5 - 0.5 * math.cos(angle)) * width
            y = at.y() + reach_y - (0.5 + 0.5 * math.sin(angle)) * height
            corners.append(QPointF(x, y))
    return corners


def _cost(
    card: QRectF, at: QPointF, area: QRectF, outline: QPainterPath, taken: list[QRectF]
) -> float:
    """What speaks against a place: leaving the view, hiding cards or the part, a long leader."""
    inside = card.intersected(area)
    lost = 1.0 - max(0.0, inside.width()) * max(0.0, inside.height()) / (
        card.width() * card.height()
    )
    clashes = sum(1.0 for other in taken if other.intersects(card))
    covers = 1.0 if outline.intersects(card) else 0.0
    crosses = 1.0 if covers and outline.contains(card) else 0.0
    nearest = QPointF(
        min(max(at.x(), card.left()), card.right()), min(max(at.y(), card.top()), card.bottom())
    )
    leader = math.hypot(nearest.x() - at.x(), nearest.y() - at.y())
    return 60.0 * lost + 8.0 * clashes + 4.0 * covers + 0.3 * crosses + leader / 100.0


def _colour(trust: Trust) -> QColor:
    return theme.colour({"settled": "ink", "rising": "bad", "unsettled": "doubt"}[trust])


def _fonts() -> tuple[QFont, QFont]:
    return theme.font(theme.TEXT_BODY, QFont.Weight.DemiBold), theme.font(theme.TEXT_SMALL)


def _size(callout: Callout) -> QSizeF:
    head, detail = _fonts()
    width = max(
        QFontMetricsF(head).horizontalAdvance(callout.head),
        QFontMetricsF(detail).horizontalAdvance(callout.detail),
    )
    tall = (2 if callout.detail else 1) * _LINE
    if callout.history is not None:
        note = QFontMetricsF(detail).horizontalAdvance(callout.history.note)
        width = max(width, note, WIDE)
        tall += TALL + _LINE
    return QSizeF(width + 2 * _PAD_X, tall + 2 * _PAD_Y)


def _paint_leader(painter: QPainter, at: QPointF, card: QRectF, callout: Callout) -> None:
    colour = _colour(callout.trust)
    end = QPointF(
        min(max(at.x(), card.left() + 6), card.right() - 6),
        min(max(at.y(), card.top() + 6), card.bottom() - 6),
    )
    length = math.hypot(end.x() - at.x(), end.y() - at.y())
    painter.setPen(QPen(theme.colour("paper"), 4.0))  # a pale seam keeps it seen on dark fields
    start = at + (end - at) * (min(RING, length) / max(length, 1e-9))
    painter.drawLine(start, end)
    painter.drawEllipse(at, RING, RING)
    painter.setPen(QPen(colour, 1.6))
    painter.drawLine(start, end)
    painter.setBrush(theme.colour("paper"))
    painter.drawEllipse(at, RING, RING)
    painter.setBrush(Qt.BrushStyle.NoBrush)


def _paint_card(painter: QPainter, card: QRectF, callout: Callout) -> None:
    head, detail = _fonts()
    frame = theme.colour("quiet", 0.6) if callout.trust == "settled" else _colour(callout.trust)
    style = Qt.PenStyle.DashLine if callout.trust == "unsettled" else Qt.PenStyle.SolidLine
    painter.setPen(QPen(frame, 1.4, style))
    painter.setBrush(theme.colour("sheet"))
    painter.drawRoundedRect(card, 4.0, 4.0)
    painter.setFont(head)
    painter.setPen(theme.colour("ink"))
    line = QRectF(card.left() + _PAD_X, card.top() + _PAD_Y, card.width(), _LINE)
    flags = Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter
    painter.drawText(line, flags, callout.head)
    painter.setFont(detail)
    painter.setPen(theme.colour("quiet"))
    painter.drawText(line.translated(0.0, _LINE), flags, callout.detail)
    if callout.history is not None:
        line = line.translated(0.0, _LINE * (2 if callout.detail else 1))
        box = QRectF(line.left(), line.top(), card.width() - 2 * _PAD_X, TALL)
        paint_history(painter, box, callout.history)
        painter.drawText(line.translated(0.0, TALL), flags, callout.history.note)
