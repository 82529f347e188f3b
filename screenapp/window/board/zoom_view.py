"""A view in mm, y up, that pans, zooms and fits."""

from __future__ import annotations

import pyqtgraph as pg
from PySide6.QtCore import QPointF, QRectF, Qt, Signal
from PySide6.QtWidgets import QFrame, QWidget

from screenapp.window.board.frame import Frame

EMPTY_VIEW = QRectF(-20.0, -20.0, 240.0, 160.0)
"""What an empty board shows [mm]."""

FARTHEST, NEAREST = 1e-2, 1e4
"""Bounds of the zoom [px/mm]."""

ROOM = 0.16
"""Room left round a fitted part, relative to its size."""


class ZoomView(pg.GraphicsView):  # type: ignore[misc]
    """A pyqtgraph view whose one view box is moved by this class alone.

    Attributes:
        view_box: everything painted is added to it.

    Signals:
        view_moved: after a pan, zoom, fit or resize.
    """

    view_moved = Signal()

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent, background=None)
        self._pan_from: QPointF | None = None
        self.setFrameShape(QFrame.Shape.NoFrame)
        self.setMouseTracking(True)
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.setAntialiasing(True)
        self.setMinimumSize(240, 180)
        self.view_box = pg.ViewBox(lockAspect=True, enableMenu=False, enableMouse=False)
        self.view_box.setDefaultPadding(0.0)
        self.view_box.disableAutoRange()
        self.setCentralItem(self.view_box)
        self.view_box.setRange(EMPTY_VIEW, padding=0.0)
        self.view_box.sigRangeChanged.connect(lambda *_: self.view_moved.emit())

    @property
    def frame_now(self) -> Frame:
        """The present mapping between mm and px."""
        self.view_box.updateMatrix()
        scene = self.view_box.childGroup.sceneTransform()
        return Frame(scene * self.viewportTransform())

    def show_box(self, bounds: tuple[float, float, float, float] | None) -> None:
        """Show smallest x, y to largest x, y [mm] with some room; the empty board for None."""
        if bounds is None:
            self.view_box.setRange(EMPTY_VIEW, padding=0.0)
            return
        x0, y0, x1, y1 = bounds
        room = ROOM * max(x1 - x0, y1 - y0, 1e-3)
        box = QRectF(x0 - room, y0 - room, x1 - x0 + 2 * room, y1 - y0 + 2 * room)
        self.view_box.setRange(box, padding=0.0)

    def zoom(self, factor: float, about: QPointF | None = None) -> None:
        """Magnify by `factor`, keeping the place at `about` [px] where it is."""
        frame = self.frame_now
        factor = min(max(factor, FARTHEST / frame.scale), NEAREST / frame.scale)
        if about is None:
            about = QPointF(self.viewport().rect().center())
        x, y = frame.mm(about)
        self.view_box.scaleBy((1.0 / factor, 1.0 / factor), center=pg.Point(x, y))

    @property
    def panning(self) -> bool:
        """Whether the view is being dragged."""
        return self._pan_from is not None

    def begin_pan(self, px: QPointF) -> None:
        """The view is taken at a pixel."""
        self._pan_from = px
        self.viewport().setCursor(Qt.CursorShape.ClosedHandCursor)

    def pan_to(self, px: QPointF) -> None:
        """The view is dragged to a pixel."""
        if self._pan_from is None:
            return
        frame = self.frame_now
        (x0, y0), (x1, y1) = frame.mm(self._pan_from), frame.mm(px)
        self.view_box.translateBy(x=x0 - x1, y=y0 - y1)
        self._pan_from = px

    def end_pan(self) -> None:
        """The view is let go."""
        self._pan_from = None
