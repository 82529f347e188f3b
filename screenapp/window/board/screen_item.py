"""Base of everything on the board that is painted at constant screen size."""

from __future__ import annotations

import logging
from collections.abc import Callable

import pyqtgraph as pg
from PySide6.QtCore import QRectF
from PySide6.QtGui import QColor, QPainter, QTransform
from PySide6.QtWidgets import QStyleOptionGraphicsItem, QWidget

from screenapp.window.board.drawn_part import DrawnPart
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


def paint_in_pixels(
    item: object, painter: QPainter, draw: Callable[[QPainter, QTransform], None]
) -> None:
    """Let an item paint in pixels, told where millimetres fall.

    An exception while painting would end the program, so it is logged and its words are painted.
    """
    to_screen = QTransform(painter.worldTransform())
    painter.save()
    painter.setWorldTransform(QTransform())
    try:
        draw(painter, to_screen)
    except Exception as fault:
        log.exception("painting %s failed", type(item).__name__)
        painter.setPen(QColor("#b3360f"))
        painter.drawText(12, 24, f"This could not be drawn: {fault}")
    finally:
        painter.restore()


class ScreenItem(pg.GraphicsObject):  # type: ignore[misc]
    """Covers the whole view and paints in pixels, told where millimetres fall."""

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
        paint_in_pixels(self, painter, lambda p, to_screen: self.draw(p, Frame(to_screen)))

    def _forget(self) -> None:
        self.prepareGeometryChange()
        self.update()


class ReadingsItem(ScreenItem):
    """Base of what shows the part's readings: with a part, a selection and what is hovered."""

    def __init__(self, z: int) -> None:
        super().__init__(z)
        self.drawn: DrawnPart | None = None
        self.selected: tuple[str, ...] = ()
        self.hovered: str | None = None

    def show_part(self, drawn: DrawnPart) -> None:
        """Show this part's readings from now on."""
        self.drawn = drawn
        self.update()
