"""The drawing as it would come in: the part in ink, what is left out faint, open ends in red."""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from PySide6.QtCore import QPointF, Qt
from PySide6.QtGui import QColor, QKeyEvent, QMouseEvent, QPainter, QPen, QWheelEvent
from PySide6.QtWidgets import QWidget

from screenapp.exchange.bringing_in import Brought
from screenapp.model.errors import Fault
from screenapp.model.part import DisplayUnits, Part, Point
from screenapp.model.regions import zone_curves
from screenapp.window import theme
from screenapp.window.board.drawn_part import drawn_part
from screenapp.window.board.faults_item import FaultsItem
from screenapp.window.board.frame import Frame
from screenapp.window.board.grid import GridItem, ScaleBarItem
from screenapp.window.board.open_chains_item import FEW, OpenChainsItem
from screenapp.window.board.part_item import FillItem, OutlineItem, PartPaths
from screenapp.window.board.screen_item import Z_MESH, Z_PREVIEW, ScreenItem
from screenapp.window.board.zoom_view import ZoomView
from screenapp.window.many_lines import paint_pieces, straight_pieces

Floats = NDArray[np.float64]

SHOWN_SHARE = 0.06
"""How much of the drawing is seen round a place that is shown."""


@dataclass(frozen=True, eq=False)
class Painted:
    """What the preview paints.

    Attributes:
        brought: what became of the drawing.
        lines: all lines as straight pieces [mm], (n, 2, 2).
        chains: those of the open chains, likewise.
        faults: what is wrong with the part's shape.
    """

    brought: Brought
    lines: Floats
    chains: Floats
    faults: tuple[Fault, ...] = ()

    @property
    def open_ends(self) -> tuple[Point, ...]:
        """Where chains are open [mm]."""
        return tuple(p for chain in self.brought.open_chains for p in chain.ends)

    @property
    def bounds(self) -> tuple[float, float, float, float] | None:
        """Smallest x, y, largest x, y [mm] of all lines."""
        if not len(self.lines):
            return None
        low, high = self.lines.min(axis=(0, 1)), self.lines.max(axis=(0, 1))
        return float(low[0]), float(low[1]), float(high[0]), float(high[1])


class LinesItem(ScreenItem):
    """Every line of the layers used, faint: what is not under the part's ink is left out."""

    def __init__(self) -> None:
        super().__init__(Z_MESH)
        self.lines: Floats = np.empty((0, 2, 2))

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Paint the lines."""
        pen = QPen(theme.colour("quiet"), 1.0)
        paint_pieces(painter, frame, self.lines, _view_size(self), pen)


class MarksItem(ScreenItem):
    """Zones, gaps closed, and the place that is shown."""

    def __init__(self) -> None:
        super().__init__(Z_PREVIEW)
        self.zones: Floats = np.empty((0, 2, 2))
        self.gaps: list[Point] = []
        self.shown: Point | None = None

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Paint all marks."""
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        doubt = theme.colour("doubt")
        painter.setBrush(Qt.BrushStyle.NoBrush)
        size = _view_size(self)
        paint_pieces(painter, frame, self.zones, size, QPen(theme.colour("accent"), 2.0))
        for at in self.gaps[:FEW]:
            _ring(painter, frame.px(at), 4.0, doubt)
        if self.shown is not None:
            _ring(painter, frame.px(self.shown), 14.0, theme.colour("accent"))


class DrawingPreview(ZoomView):
    """A small board that shows only; drag it, turn the wheel, or use +, − and Home."""

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.setAccessibleName("Preview of the drawing")
        self.setToolTip("Drag to move, turn the wheel to zoom, Home to see all")
        self.bounds: tuple[float, float, float, float] | None = None
        self.grid, self.scale_bar = GridItem(), ScaleBarItem()
        paths = PartPaths()
        self.fill, self.outline = FillItem(paths), OutlineItem(paths)
        self.lines, self.marks, self.faults = LinesItem(), MarksItem(), FaultsItem()
        self.open_chains = OpenChainsItem()
        for item in (
            self.grid,
            self.fill,
            self.lines,
            self.outline,
            self.open_chains,
            self.marks,
            self.faults,
            self.scale_bar,
        ):
            self.view_box.addItem(item, ignoreBounds=True)
        theme.notifier.changed.connect(self.apply_theme)
        self.apply_theme()

    def apply_theme(self) -> None:
        """Take the colours of the present theme."""
        self.setBackground(theme.current().paper)
        self.viewport().update()

    def show_drawing(self, painted: Painted, units: DisplayUnits) -> None:
        """Show another state; the view stays unless the drawing covers another area."""
        brought = painted.brought
        drawn = drawn_part(brought.part or Part())
        self.fill.show_part(drawn)
        self.outline.show_part(drawn)
        self.lines.lines = painted.lines
        marks = self.marks
        self.open_chains.show_chains(painted.chains, painted.open_ends)
        marks.gaps = [p for r in brought.remarks if r.kind == "gap" for p in r.at]
        rims = zone_curves(drawn.part, [])
        marks.zones = straight_pieces(tuple(c.curve for rim in rims for c in rim))
        self.faults.show_faults(drawn, painted.faults)
        marks.shown = None
        self.grid.units = self.scale_bar.units = units
        if painted.bounds != self.bounds:
            self.bounds = painted.bounds
            self.fit()
        self.viewport().update()

    def fit(self) -> None:
        """Show the whole drawing."""
        self.show_box(self.bounds)

    def show_place(self, at: Point) -> None:
        """Bring a place near and ring it."""
        self.marks.shown = at
        x0, y0, x1, y1 = self.bounds or (at[0] - 1, at[1] - 1, at[0] + 1, at[1] + 1)
        half = max(SHOWN_SHARE * math.hypot(x1 - x0, y1 - y0), 1e-3)
        self.show_box((at[0] - half, at[1] - half, at[0] + half, at[1] + half))
        self.viewport().update()

    # events

    def mousePressEvent(self, event: QMouseEvent) -> None:
        """Take the view."""
        self.begin_pan(event.position())
        event.accept()

    def mouseMoveEvent(self, event: QMouseEvent) -> None:
        """Drag the view."""
        if self.panning:
            self.pan_to(event.position())
        event.accept()

    def mouseReleaseEvent(self, event: QMouseEvent) -> None:
        """Let the view go."""
        self.end_pan()
        self.viewport().setCursor(Qt.CursorShape.OpenHandCursor)
        event.accept()

    def wheelEvent(self, event: QWheelEvent) -> None:
        """Zoom about the cursor."""
        self.zoom(1.0015 ** event.angleDelta().y(), event.position())
        event.accept()

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Zoom, or show all."""
        if event.text() == "+":
            self.zoom(1.25)
        elif event.text() == "-":
            self.zoom(0.8)
        elif event.key() == Qt.Key.Key_Home:
            self.fit()
        else:
            event.ignore()  # Escape puts the panel away


def _ring(painter: QPainter, at: QPointF, radius: float, colour: QColor) -> None:
    painter.setPen(QPen(colour, 2.0))
    painter.drawEllipse(at, radius, radius)


def _view_size(item: ScreenItem) -> tuple[int, int]:
    """Width and height of the view [px]."""
    rect = item.getViewBox().rect()
    return math.ceil(rect.width()), math.ceil(rect.height())
