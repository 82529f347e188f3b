"""The faint grid, whose step follows the zoom, and the scale bar in the corner."""

from __future__ import annotations

import math

from PySide6.QtCore import QLineF, QPointF, QRectF, Qt
from PySide6.QtGui import QColor, QPainter, QPen

from screenapp.model.part import DisplayUnits
from screenapp.window import theme
from screenapp.window.board.frame import Frame
from screenapp.window.board.screen_item import Z_GRID, Z_PREVIEW, ScreenItem

INCH = 25.4
"""One inch [mm], exact."""

FINEST_PX = 9.0
"""Grid lines never stand closer than this [px]; snapping uses the same step."""


def round_step(at_least: float) -> float:
    """The smallest of 1, 2, 5 times a power of ten that is not below `at_least`.

    Example:
        >>> round_step(0.7), round_step(1.2), round_step(30.0)
        (1.0, 2.0, 50.0)
    """
    power = 10.0 ** math.floor(math.log10(at_least))
    for factor in (1.0, 2.0, 5.0):
        if factor * power >= at_least * (1.0 - 1e-9):
            return factor * power
    return 10.0 * power


def unit_length(units: DisplayUnits) -> float:
    """The displayed unit of length [mm]."""
    return INCH if units == "in-lbf-ksi" else 1.0


def grid_step(scale: float, units: DisplayUnits) -> float:
    """The grid step [mm] at `scale` [px/mm]: round in the displayed unit, at least FINEST_PX."""
    unit = unit_length(units)
    return round_step(FINEST_PX / scale / unit) * unit


class GridItem(ScreenItem):
    """Grid lines at the snapping step, every fifth or tenth a little stronger, and the axes."""

    def __init__(self) -> None:
        super().__init__(Z_GRID)
        self.units: DisplayUnits = "mm-N-MPa"

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Paint the lines."""
        rect = self.boundingRect()
        if rect.isEmpty():
            return
        painter.setRenderHint(QPainter.RenderHint.Antialiasing, False)
        palette = theme.current()
        step = grid_step(frame.scale, self.units)
        gap = step * frame.scale
        fine = QColor(palette.faint)
        fine.setAlphaF(min(1.0, max(0.0, (gap - FINEST_PX) / 24.0)) * 0.35 + 0.15)
        strong = QColor(palette.faint)
        strong.setAlphaF(0.75)
        every = 5 if str(round(step / unit_length(self.units) * 1e9)).strip("0") == "2" else 10
        for lines, colour in zip(
            self._lines(rect, frame, step, every), (fine, strong), strict=True
        ):
            painter.setPen(QPen(colour, 1.0))
            painter.drawLines(lines)

    @staticmethod
    def _lines(
        rect: QRectF, frame: Frame, step: float, every: int
    ) -> tuple[list[QLineF], list[QLineF]]:
        fine: list[QLineF] = []
        strong: list[QLineF] = []
        low, high = frame.px((rect.left(), rect.top())), frame.px((rect.right(), rect.bottom()))
        for i in range(math.ceil(rect.left() / step), math.floor(rect.right() / step) + 1):
            x = round(frame.px((i * step, 0.0)).x()) + 0.5
            (fine if i % every else strong).append(QLineF(x, low.y(), x, high.y()))
        for i in range(math.ceil(rect.top() / step), math.floor(rect.bottom() / step) + 1):
            y = round(frame.px((0.0, i * step)).y()) + 0.5
            (fine if i % every else strong).append(QLineF(low.x(), y, high.x(), y))
        return fine, strong


class ScaleBarItem(ScreenItem):
    """A bar of round length at the lower left.

    Attributes:
        REACH: how far it comes from the left and the lower edge of the view at most [px].
    """

    REACH = 220.0, 42.0

    def __init__(self) -> None:
        super().__init__(Z_PREVIEW + 5)
        self.units: DisplayUnits = "mm-N-MPa"

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Paint the bar with its length over it."""
        rect = self.boundingRect()
        if rect.isEmpty():
            return
        palette = theme.current()
        unit = unit_length(self.units)
        length = round_step(80.0 / frame.scale / unit)
        if length * unit * frame.scale > 190.0:
            length /= 2.0
        wide = length * unit * frame.scale
        foot = frame.px((rect.left(), rect.top())) + QPointF(20.0, -16.0)
        text = f"{length:.6g} {'in' if unit != 1.0 else 'mm'}"
        painter.setFont(theme.font(theme.TEXT_SMALL))
        ground = QColor(palette.paper)
        ground.setAlphaF(0.8)
        painter.fillRect(QRectF(foot.x() - 8, foot.y() - 24, wide + 16, 34), ground)
        painter.setPen(QPen(QColor(palette.ink), 1.5, c=Qt.PenCapStyle.FlatCap))
        x0, x1, y = foot.x(), foot.x() + wide, foot.y()
        painter.drawLines(
            [QLineF(x0, y, x1, y), QLineF(x0, y - 4, x0, y + 4), QLineF(x1, y - 4, x1, y + 4)]
        )
        painter.setPen(QColor(palette.quiet))
        painter.drawText(
            QRectF(x0, y - 22, max(wide, 60.0), 18), int(Qt.AlignmentFlag.AlignLeft), text
        )
