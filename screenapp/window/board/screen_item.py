"""Base of everything on the board that is painted at constant screen size."""

from __future__ import annotations

import logging

import pyqtgraph as pg
from PySide6.QtCore import QRectF
from PySide6.QtGui import QColor, QPainter, QTransform
from PySide6.QtWidgets import QStyleOptionGraphicsItem, QWidget

from screenapp.window.board.frame import Frame

log = logging.getLogger(__name__)

Z_GRID, Z_FILL, Z_FIELD, Z_MESH, Z_OUTLINE, Z_DIMENSIONS, Z_SYMBOLS, Z_PROBES, Z_PREVIEW = (
    0,
    5,
    10,
    20,
    30,
    35,
    40,
    50,
    60,
)


class ScreenItem(pg.GraphicsObject):  # type: ignore[misc]
    """Covers the whole view and paints in pixels, told where millimetres fall.

    An exception while painting would end the program, so it is logged and its words are painted.
    """

    def __init__(self, z: int) -> None:
        super().__init__()
        self.setZValue(z)
        self.setAcceptedMouseButtons(pg.QtCore.Qt.MouseButton.NoButton)

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Paint in pixels; `frame` maps millimetres to them."""
        raise NotImplementedError

    def boundingRect(self) -> QRectF:
        """The whole view [mm]; read afresh, for the view tells of changes before it is settled."""
        view = self.getViewBox()
        return QRectF() if view is None else QRectF(self.mapRectFromItem(view, view.rect()))

    def viewRangeChanged(self, *_args: object) -> None:
        """Cover the view again after a pan, zoom or resize."""
        self._forget()

    def viewTransformChanged(self, *_args: object) -> None:
        """Cover the view again after a pan, zoom or resize."""
        self._forget()

    def paint(
        self, painter: QPainter, _option: QStyleOptionGraphicsItem, _widget: QWidget | None = None
    ) -> None:
        """Paint in pixels."""
        frame = Frame(QTransform(painter.worldTransform()))
        painter.save()
        painter.setWorldTransform(QTransform())
        try:
            self.draw(painter, frame)
        except Exception as fault:
            log.exception("painting %s failed", type(self).__name__)
            painter.setPen(QColor("#b3360f"))
            painter.drawText(12, 24, f"This could not be drawn: {fault}")
        finally:
            painter.restore()

    def _forget(self) -> None:
        self.prepareGeometryChange()
        self.update()
