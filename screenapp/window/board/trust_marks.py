"""Marks that say how far the number at a place can be trusted, told apart by shape and hatch, and
the legend that says what they mean."""

from __future__ import annotations

from PySide6.QtCore import QPointF, QRectF, QSize, Qt
from PySide6.QtGui import QFontMetricsF, QPainter, QPainterPath, QPaintEvent, QPen, QPolygonF
from PySide6.QtWidgets import QWidget

from screenapp.model.findings import Trust
from screenapp.model.part import Point
from screenapp.window import theme
from screenapp.window.board.frame import Frame
from screenapp.window.board.hatching import hatch_brush
from screenapp.window.board.screen_item import Z_PROBES, ScreenItem

COLOURS: dict[Trust, str] = {"settled": "ink", "rising": "bad", "unsettled": "doubt"}

_SWATCH = QSize(22, 14)
_ROW, _GAP, _BETWEEN = 20, 6, 16


def paint_mark(painter: QPainter, at: QPointF, trust: Trust) -> None:
    """A dot where a number is settled, a triangle where it rises, a diamond where it is open."""
    painter.setPen(QPen(theme.colour("paper"), 1.6))
    painter.setBrush(theme.colour(COLOURS[trust]))
    x, y = at.x(), at.y()
    if trust == "settled":
        painter.drawEllipse(at, 4.0, 4.0)
    elif trust == "rising":
        corners = ((x, y - 6.0), (x + 5.6, y + 4.0), (x - 5.6, y + 4.0))
        painter.drawPolygon(QPolygonF([QPointF(*c) for c in corners]))
    else:
        corners4 = ((x, y - 6.0), (x + 6.0, y), (x, y + 6.0), (x - 6.0, y))
        painter.drawPolygon(QPolygonF([QPointF(*c) for c in corners4]))


class TrustMarkItem(ScreenItem):
    """A mark at every peak of the case."""

    def __init__(self) -> None:
        super().__init__(Z_PROBES - 2)
        self.marks: tuple[tuple[Point, Trust], ...] = ()

    def show_marks(self, marks: tuple[tuple[Point, Trust], ...]) -> None:
        """Show these and no others."""
        self.marks = marks
        self.update()

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Paint the marks, the doubtful ones over the others."""
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        for at, trust in sorted(self.marks, key=lambda mark: mark[1] != "settled"):
            paint_mark(painter, frame.px(at), trust)


class TrustLegend(QWidget):
    """What each hatch and mark means, with how many there are, in a line (or more if it must)."""

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.entries: tuple[tuple[Trust, str], ...] = ()
        self._most = 400  # width it may take [px]
        self.setAttribute(Qt.WidgetAttribute.WA_TransparentForMouseEvents)
        self.setAccessibleName("What hatches and marks mean")
        self.hide()

    def show_entries(self, entries: tuple[tuple[Trust, str], ...]) -> None:
        """Show these; nothing hides it."""
        self.entries = entries
        self.setVisible(bool(entries))
        self.setAccessibleDescription("; ".join(text for _, text in entries))
        self.updateGeometry()
        self.update()

    def keep_within(self, most: int) -> None:
        """Take no more than this width [px]."""
        if most != self._most:
            self._most = most
            self.updateGeometry()
            self.update()

    def sizeHint(self) -> QSize:
        """As wide as its entries, within what it may take."""
        places = self._places()
        right = max((x + self._wide(text) for x, _, text in places), default=0)
        rows = 1 + max((row for _, row, _ in places), default=0)
        return QSize(round(right) + 8, rows * _ROW + 4)

    def minimumSizeHint(self) -> QSize:
        """The same: it is never cut."""
        return self.sizeHint()

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Swatch and words of each."""
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        painter.setPen(Qt.PenStyle.NoPen)
        painter.setBrush(theme.colour("paper", 0.85))
        painter.drawRoundedRect(QRectF(self.rect()), 3.0, 3.0)
        painter.setFont(theme.font(theme.TEXT_SMALL))
        for (trust, text), (x, row, _) in zip(self.entries, self._places(), strict=True):
            top = 2.0 + row * _ROW + (_ROW - _SWATCH.height()) / 2.0
            box = QRectF(x, top, _SWATCH.width(), _SWATCH.height())
            self._paint_swatch(painter, box, trust)
            painter.setPen(theme.colour("ink"))
            painter.drawText(
                QRectF(box.right() + _GAP, 2.0 + row * _ROW, self.width(), _ROW),
                Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter,
                text,
            )
        painter.end()

    def _paint_swatch(self, painter: QPainter, box: QRectF, trust: Trust) -> None:
        """The hatch with its rim as on the part, and the mark on it; a settled place has none."""
        colour = theme.colour(COLOURS[trust])
        if trust != "settled":
            path = QPainterPath()
            path.addRoundedRect(box.adjusted(0.5, 0.5, -0.5, -0.5), 2.0, 2.0)
            painter.fillPath(path, hatch_brush(colour, self.devicePixelRatioF()))
            style = Qt.PenStyle.DashLine if trust == "unsettled" else Qt.PenStyle.SolidLine
            painter.strokePath(path, QPen(colour, 1.2, style))
        paint_mark(painter, box.center(), trust)

    def _places(self) -> list[tuple[float, int, str]]:
        """Left edge, row and text of each entry."""
        places: list[tuple[float, int, str]] = []
        x, row = 4.0, 0
        for _, text in self.entries:
            wide = self._wide(text)
            if places and x + wide > self._most:
                x, row = 4.0, row + 1
            places.append((x, row, text))
            x += wide + _BETWEEN
        return places

    @staticmethod
    def _wide(text: str) -> float:
        metrics = QFontMetricsF(theme.font(theme.TEXT_SMALL))
        return _SWATCH.width() + _GAP + metrics.horizontalAdvance(text)
