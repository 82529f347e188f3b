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

LEFT, TOP, RIGHT, BOTTOM = 56.0, 88.0, 108.0, 64.0
"""Room round a fitted part [px]: for symbols at its left, choosers and words above, the colour bar
at the right, the scale bar below; none of them ever covers a fitted part."""

LEAST_SHARE = 0.4
"""The part has at least this share of the view, however small that is."""


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
        """Show smallest x, y to largest x, y [mm] clear of what lies over the view's edges; the
        empty board for None."""
        if bounds is None:
            self.view_box.setRange(EMPTY_VIEW, padding=0.0)
            return
        x0, y0, x1, y1 = bounds
        wide, tall = max(float(self.width()), 1.0), max(float(self.height()), 1.0)
        inner_wide = max(wide - LEFT - RIGHT, LEAST_SHARE * wide)
        inner_tall = max(tall - TOP - BOTTOM, LEAST_SHARE * tall)
        scale = min(inner_wide / max(x1 - x0, 1e-3), inner_tall / max(y1 - y0, 1e-3))
        # the middle of the part goes to the middle of the room that is left
        left = (wide - inner_wide) * LEFT / (LEFT + RIGHT)
        top = (tall - inner_tall) * TOP / (TOP + BOTTOM)
        x = 0.5 * (x0 + x1) - (left + 0.5 * inner_wide) / scale
        y = 0.5 * (y0 + y1) + (top + 0.5 * inner_tall) / scale
        self.view_box.setRange(QRectF(x, y - tall / scale, wide / scale, tall / scale), padding=0.0)

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
