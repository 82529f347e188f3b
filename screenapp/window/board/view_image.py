"""An item that shows a picture of the view which takes longer to make than a frame.

While the view moves, the last picture is shown moved and scaled with it; once the view has stood
still for a moment a sharp one is made in a thread and replaces it.  A coarse picture of the whole
lies beneath, so that what comes into view during a gesture is not blank.
"""

from __future__ import annotations

import logging
from collections.abc import Callable
from dataclasses import dataclass, replace

import numpy as np
import pyqtgraph as pg
from numpy.typing import NDArray
from PySide6.QtCore import QRectF, Qt, QTimer, Signal, Slot
from PySide6.QtGui import QBrush, QImage, QPainter, QPainterPath, QRegion, QTransform
from PySide6.QtWidgets import QStyleOptionGraphicsItem, QWidget

from screenapp.report.raster import Viewport
from screenapp.window.board.picture_jobs import Picture, PictureJob, Render, Scalars, threads
from screenapp.window.board.screen_item import paint_in_pixels

log = logging.getLogger(__name__)

Words = NDArray[np.uint32]
Colour = Callable[[Scalars], Words]

SETTLED_MS = 80
"""The sharp picture is made when the view has stood still this long [ms]."""

COARSE_PIXELS = 700
"""Longer side of the coarse picture of the whole [px]."""


@dataclass(frozen=True, eq=False)
class Look:
    """How pictures are shown: within which box [mm], cut at which path [mm], in which colours.

    `colour` turns scalars into premultiplied ARGB words.
    """

    bounds: QRectF
    clip: QPainterPath | None
    colour: Colour


class ViewImage(pg.GraphicsObject):  # type: ignore[misc]
    """Shows what `render` makes of the view, coloured by `colour`.

    Signals:
        ready: a sharp picture of the present view is shown.
        failed: the words of a fault that kept a picture from being made.
    """

    ready = Signal()
    failed = Signal(str)

    def __init__(self, z: int) -> None:
        super().__init__()
        self.setZValue(z)
        self.setAcceptedMouseButtons(Qt.MouseButton.NoButton)
        self._render: Render | None = None
        self._wanted: Look | None = None  # of the pictures being made
        self._look: Look | None = None  # of those shown
        self._coarse_wanted = False
        self._shown: list[tuple[Picture, QImage]] = []  # coarse first
        self._asked = 0
        self._running: PictureJob | None = None
        self._stale = False
        self._timer = QTimer(self)
        self._timer.setSingleShot(True)
        self._timer.setInterval(SETTLED_MS)
        self._timer.timeout.connect(self._refresh)

    # --- what to show ---------------------------------------------------------------------

    def set_render(
        self,
        render: Render,
        colour: Colour,
        bounds: QRectF,
        clip: QPainterPath | None = None,
    ) -> None:
        """Show what `render` makes, coloured by `colour`, within `bounds` [mm], cut at `clip` [mm].

        What is shown now stays until the first picture is there.
        """
        self._render = render
        self._wanted = Look(QRectF(bounds), clip, colour)
        self._coarse_wanted = True
        self._asked += 1  # pictures under way belong to the past
        self._refresh()

    def hide_picture(self) -> None:
        """Show nothing."""
        self.prepareGeometryChange()
        self._render = self._wanted = self._look = None
        self._asked += 1
        self._shown = []
        self._timer.stop()
        self.update()

    def set_colour(self, colour: Colour) -> None:
        """Colour pictures by `colour`, those at hand at once; costs no new picture."""
        if self._wanted is not None:
            self._wanted = replace(self._wanted, colour=colour)
        if self._look is not None and not self._coarse_wanted:
            self._look = replace(self._look, colour=colour)
            self._shown = [(picture, self._image(picture)) for picture, _ in self._shown]
            self.update()

    @property
    def blank(self) -> bool:
        """Whether there is nothing to show."""
        return self._render is None

    @property
    def picture(self) -> Picture | None:
        """The sharpest picture at hand."""
        return self._shown[-1][0] if self._shown else None

    @property
    def busy(self) -> bool:
        """Whether a sharper picture is awaited."""
        return self._running is not None or self._timer.isActive()

    # --- making pictures ------------------------------------------------------------------

    def viewport(self) -> Viewport | None:
        """What the view shows now, pixel by pixel; None while it has no size."""
        box, widget = self.getViewBox(), self.getViewWidget()
        if box is None or widget is None:
            return None
        box.updateMatrix()
        transform = self.sceneTransform()
        area = box.sceneBoundingRect().toAlignedRect()
        ratio = widget.devicePixelRatioF()
        sx, sy = transform.m11(), transform.m22()
        if area.width() <= 0 or area.height() <= 0 or sx <= 0 or sy >= 0:
            return None
        return Viewport(
            (area.left() - transform.dx()) / sx,
            (area.top() - transform.dy()) / sy,
            1.0 / (sx * ratio),
            -1.0 / (sy * ratio),
            round(area.width() * ratio),
            round(area.height() * ratio),
        )

    def viewRangeChanged(self, *_args: object) -> None:
        """The view moved: make a sharp picture when it stands still."""
        if self._render is not None:
            self._timer.start()

    def viewTransformChanged(self, *_args: object) -> None:
        """The view was resized: make a sharp picture when it stands still."""
        if self._render is not None:
            self._timer.start()

    def refresh_now(self) -> None:
        """Make the sharp picture here and now, without a thread (to save an image of the board)."""
        view = self.viewport()
        if self._render is None or view is None:
            return
        self._timer.stop()
        self._asked += 1
        self._take([Picture(v, self._render(v)) for v in self._views(view)])

    def _refresh(self) -> None:
        if self._running is not None:
            self._stale = True  # start again as soon as the running one ends
            return
        view = self.viewport()
        if self._render is None or view is None:
            return
        job = PictureJob(self._asked, self._render, self._views(view))
        job.setAutoDelete(False)
        job.bridge.done.connect(self._arrived, Qt.ConnectionType.QueuedConnection)
        self._running = job
        self._stale = False
        threads().start(job)

    def _views(self, view: Viewport) -> tuple[Viewport, ...]:
        """What has to be made: the view, and the whole if it has not been made yet."""
        if self._coarse_wanted and self._wanted is not None:
            return _coarse(self._wanted.bounds), view
        return (view,)

    @Slot(object)
    def _arrived(self, result: tuple[int, list[Picture], str]) -> None:
        number, pictures, fault = result
        self._running = None
        if fault:
            self.failed.emit(fault)
        elif number == self._asked:
            self._take(pictures)
        if self._stale or (number != self._asked and self._render is not None):
            self._refresh()
        elif not self._timer.isActive():
            self.ready.emit()

    def _take(self, pictures: list[Picture]) -> None:
        """Show new pictures: a sharp one over the coarse one at hand, or both."""
        coarse = self._shown[:1] if len(pictures) == 1 and len(self._shown) == 2 else []
        if len(pictures) == 2:
            self._coarse_wanted = False
        self.prepareGeometryChange()
        self._look = self._wanted
        self._shown = coarse + [(picture, self._image(picture)) for picture in pictures]
        self.update()

    def _image(self, picture: Picture) -> QImage:
        assert self._look is not None
        words = np.ascontiguousarray(self._look.colour(picture.scalars))
        height, width = words.shape
        image = QImage(
            words.data, width, height, 4 * width, QImage.Format.Format_ARGB32_Premultiplied
        )
        image.words = words  # type: ignore[attr-defined]  # the image does not own its bytes
        return image

    # --- painting -------------------------------------------------------------------------

    def boundingRect(self) -> QRectF:
        """Where something is shown [mm]."""
        return QRectF() if self._look is None else self._look.bounds

    def paint(
        self, painter: QPainter, _option: QStyleOptionGraphicsItem, _widget: QWidget | None = None
    ) -> None:
        """Show the pictures at hand where the view now has them."""
        paint_in_pixels(self, painter, self._show)

    def _show(self, painter: QPainter, to_screen: QTransform) -> None:
        look = self._look
        if not self._shown or look is None:
            return
        outline = to_screen.map(look.clip if look.clip is not None else _rectangle(look.bounds))
        painter.setRenderHint(QPainter.RenderHint.Antialiasing, look.clip is not None)
        device = painter.device()
        ratio = device.devicePixelRatioF() if device is not None else 1.0
        shown = self._shown
        if _covers(shown[-1][0].view, to_screen, ratio):
            shown = shown[-1:]
        for i, (picture, image) in enumerate(shown):
            place, sharp = _place(picture.view, to_screen, ratio)
            # Rectangles only: a brush repeats past its image, and two pictures that lie over one
            # another would show through where they are painted at reduced strength.
            covered = QRegion(place.mapRect(QRectF(image.rect())).toAlignedRect())
            if i + 1 < len(shown):
                sharper, above = shown[i + 1]
                above_place = _place(sharper.view, to_screen, ratio)[0]
                covered -= QRegion(above_place.mapRect(QRectF(above.rect())).toRect())
            painter.setClipRegion(covered)
            brush = QBrush(image)
            brush.setTransform(place)
            painter.setRenderHint(QPainter.RenderHint.SmoothPixmapTransform, not sharp)
            painter.fillPath(outline, brush)


def _coarse(bounds: QRectF) -> Viewport:
    step = max(bounds.width(), bounds.height()) / COARSE_PIXELS
    margin = 2.0 * step
    return Viewport(
        bounds.left() - margin,
        bounds.bottom() + margin,  # QRectF's bottom is its largest y: the top on the board
        step,
        step,
        int(bounds.width() / step) + 5,
        int(bounds.height() / step) + 5,
    )


def _place(view: Viewport, to_screen: QTransform, ratio: float) -> tuple[QTransform, bool]:
    """Where the image's pixels fall on the screen, and whether pixel meets pixel."""
    sx = view.per_pixel_x * to_screen.m11()
    sy = -view.per_pixel_y * to_screen.m22()
    x = view.left * to_screen.m11() + to_screen.dx()
    y = view.top * to_screen.m22() + to_screen.dy()
    sharp = abs(sx * ratio - 1.0) < 1e-6 and abs(sy * ratio - 1.0) < 1e-6
    if sharp:
        sx = sy = 1.0 / ratio
        x, y = round(x * ratio) / ratio, round(y * ratio) / ratio
    return QTransform(sx, 0.0, 0.0, sy, x, y), sharp


def _covers(view: Viewport, to_screen: QTransform, ratio: float) -> bool:
    """Whether a picture was made for just this place of the view."""
    place, sharp = _place(view, to_screen, ratio)
    return sharp and abs(place.dx()) < 1.0 and abs(place.dy()) < 1.0


def _rectangle(rect: QRectF) -> QPainterPath:
    path = QPainterPath()
    path.addRect(rect)
    return path
