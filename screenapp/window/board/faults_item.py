"""What is wrong, marked on the board where it is; thin and tiny places with their size."""

from __future__ import annotations

import math

import numpy as np
from PySide6.QtCore import QPointF, Qt
from PySide6.QtGui import QColor, QPainter, QPen

from screenapp.model.errors import Fault
from screenapp.model.part import DisplayUnits, Point
from screenapp.window import theme
from screenapp.window.board.drawn_part import DrawnPart
from screenapp.window.board.frame import Frame
from screenapp.window.board.quantity import written
from screenapp.window.board.screen_item import Z_PROBES, ScreenItem
from screenapp.window.board.sketch import label

ARROW, HEAD = 16.0, 6.0
"""Length of the arrows that point at a thin place from outside, and of their heads [px]."""

SAID = 3
"""So many sentences stand on the board while something is drawn; the rest is marked only."""

LONGEST = 72
"""Letters of such a sentence; the whole of it is in the sheet."""


class FaultsItem(ScreenItem):
    """A ring round every place where something is wrong; the sentence comes on hover."""

    RADIUS = 13.0

    def __init__(self) -> None:
        super().__init__(Z_PROBES + 2)
        self.spots: list[tuple[tuple[float, float], Fault]] = []
        self.units: DisplayUnits = "mm-N-MPa"
        self.live = False

    def show_faults(self, drawn: DrawnPart, faults: tuple[Fault, ...], live: bool = False) -> None:
        """Mark these faults from now on; `live` ones, of a change under way, with their words."""
        self.spots, self.live = [], live
        self.units = drawn.part.display_units
        for fault in faults:
            if fault.at is not None:
                self.spots.append((fault.at, fault))
                continue
            for id_ in fault.ids:
                if (at := drawn.anchor_of(id_)) is not None:
                    self.spots.append((at, fault))
                    break
        self.update()

    def at(self, px: QPointF, frame: Frame) -> list[Fault]:
        """The faults whose ring is under the cursor."""
        return [
            fault
            for at, fault in self.spots
            if np.hypot(*(frame.pxs(at) - (px.x(), px.y()))) <= self.RADIUS + 2.0
        ]

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Paint the rings: whole for what stops a screening, dashed for a caution."""
        palette = theme.current()
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        said = 0
        for at, fault in self.spots:
            colour = QColor(palette.bad if fault.blocks else palette.doubt)
            pen = QPen(colour, 2.0)
            if not fault.blocks:
                pen.setDashPattern([3.0, 2.5])
            painter.setPen(pen)
            painter.setBrush(Qt.BrushStyle.NoBrush)
            middle = frame.px(at)
            painter.drawEllipse(middle, self.RADIUS, self.RADIUS)
            if fault.span is not None:
                self._draw_span(painter, frame, fault.span, colour)
            if self.live and fault.blocks and said < SAID:
                said += 1
                text = fault.cause if len(fault.cause) <= LONGEST else fault.cause[:LONGEST] + "…"
                label(painter, text, middle + QPointF(0.0, self.RADIUS + 12.0), colour.name())

    def _draw_span(
        self, painter: QPainter, frame: Frame, span: tuple[Point, Point], colour: QColor
    ) -> None:
        """Two arrows that point at the span's ends from outside, and its length beside them."""
        one, two = frame.px(span[0]), frame.px(span[1])
        gap = two - one
        far = math.hypot(gap.x(), gap.y())
        if far < 1e-6:
            return
        way = gap / far
        painter.setPen(QPen(colour, 1.5))
        painter.setBrush(colour)
        painter.drawLine(one, two)
        for tip, out in ((one, -way), (two, way)):
            tail = tip + out * ARROW
            side = QPointF(-out.y(), out.x()) * (0.35 * HEAD)
            neck = tip + out * HEAD
            painter.drawLine(neck, tail)
            painter.drawPolygon([tip, neck + side, neck - side])
        size = written(math.dist(*span), "length", self.units)
        across = QPointF(-way.y(), way.x())
        if across.y() > 0.0:
            across = -across
        beside = self.RADIUS + 10.0 + 22.0 * abs(across.x())  # text is wider than it is high
        label(painter, size, (one + two) / 2.0 + across * beside, colour.name())
