"""The coloured field on the part."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray
from PySide6.QtCore import QRectF
from PySide6.QtGui import QPainterPath

from screenapp.report.colours import Scale
from screenapp.report.raster import Image, Viewport, rasterise
from screenapp.window.board.screen_item import Z_FIELD
from screenapp.window.board.view_image import ViewImage

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

GROWN = 2
"""Pixels that the painted field is grown past the mesh before it is cut at the true boundary."""


class FieldItem(ViewImage):
    """Shows nodal scalars on nine-node quads, smooth inside, sharp at the boundary."""

    def __init__(self) -> None:
        super().__init__(Z_FIELD)

    def show_field(
        self, points: Floats, quads: Ints, values: Floats, scale: Scale, clip: QPainterPath
    ) -> None:
        """Show `values`, (n_nodes,) or (n_elements, 9), on nodes at `points` [mm] within `clip`."""

        def render(view: Viewport) -> Image:
            return grow(rasterise(points, quads, values, view), GROWN)

        self.set_render(render, scale.words, bounds_of(points), clip)

    def set_scale(self, scale: Scale) -> None:
        """Colour the field at hand by another range."""
        self.set_colour(scale.words)

    def clear(self) -> None:
        """Show nothing."""
        self.hide_picture()


def bounds_of(points: Floats) -> QRectF:
    """The box round points (n, 2) [mm]."""
    x, y = points[:, 0], points[:, 1]  # by columns: far quicker than along axis 0
    x0, y0 = float(x.min()), float(y.min())
    return QRectF(x0, y0, float(x.max()) - x0, float(y.max()) - y0)


def grow(image: Image, pixels: int) -> Image:
    """The image with its painted part grown by some pixels, each taking its neighbour's value."""
    for _ in range(pixels):
        blank = np.isnan(image)
        source = image.copy()
        for axis, step in ((0, 1), (0, -1), (1, 1), (1, -1)):
            here, there = _shifted(axis, step)
            take = blank[here] & ~np.isnan(source[there])
            image[here][take] = source[there][take]
    return image


def _shifted(axis: int, step: int) -> tuple[tuple[slice, slice], tuple[slice, slice]]:
    """Where each pixel and its neighbour `step` further along `axis` both lie in the image."""
    near, far = slice(None, -1), slice(1, None)
    here, there = (near, far) if step > 0 else (far, near)
    whole = slice(None)
    return ((here, whole), (there, whole)) if axis == 0 else ((whole, here), (whole, there))
