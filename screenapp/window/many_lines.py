"""Paints hundreds of thousands of straight pieces fast: what falls on one pixel is painted once.

Pieces shorter than two pixels become dots of an image; longer ones are drawn as lines, each pair of
pixels once.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray
from PySide6.QtCore import QLineF, QPointF
from PySide6.QtGui import QColor, QImage, QPainter, QPen

from screenapp.model.curves import Arc, Curve, Segment
from screenapp.window.board.frame import Frame

Floats = NDArray[np.float64]

STEPS = 24
"""Straight pieces of a full turn of an arc."""

SHORT_PX = 2.0
"""Shorter pieces are dots [px]."""

MOST = 20_000
"""So many lines are drawn at once; of more in one view every second, third ... is."""


def straight_pieces(curves: tuple[Curve, ...]) -> Floats:
    """Curves as straight pieces, (n, 2, 2) [mm]."""
    lines = np.array([(c.start, c.end) for c in curves if isinstance(c, Segment)])
    t = np.linspace(0.0, 1.0, STEPS + 1)
    rows = [(*c.centre, c.radius, c.begin, c.sweep) for c in curves if isinstance(c, Arc)]
    found = [lines.reshape(-1, 2, 2)]
    if rows:
        x, y, r, begin, sweep = (column[:, None] for column in np.array(rows).T)
        angle = begin + sweep * t
        points = np.stack([x + r * np.cos(angle), y + r * np.sin(angle)], axis=-1)
        found.append(np.stack([points[:, :-1], points[:, 1:]], axis=2).reshape(-1, 2, 2))
    return np.concatenate(found)


def paint_pieces(
    painter: QPainter, frame: Frame, pieces: Floats, size: tuple[int, int], pen: QPen
) -> None:
    """Paint pieces (n, 2, 2) [mm] into a view of `size` (width, height) [px]."""
    wide, tall = size
    px = frame.pxs(pieces)
    low, high = px.min(axis=1), px.max(axis=1)
    seen = np.all((high >= -1.0) & (low <= (wide + 1, tall + 1)), axis=1)
    px, low, high = px[seen], low[seen], high[seen]
    short = np.all(high - low < SHORT_PX, axis=1)
    if len(px) <= MOST // 4:
        short[:] = False
    if short.any():
        painter.drawImage(QPointF(0.0, 0.0), _dots(px[short], size, pen.color()))
    long_ = _different(px[~short])
    if len(long_) > MOST:
        long_ = long_[:: -(-len(long_) // MOST)]
    painter.setPen(pen)
    painter.drawLines([QLineF(*row) for row in long_.reshape(-1, 4).tolist()])


def _different(px: Floats) -> Floats:
    """One of all pieces that run between the same pixels."""
    if len(px) <= MOST // 4:
        return px
    whole = np.clip(np.round(px), -30_000, 30_000).astype(np.int64).reshape(-1, 4) + 32_768
    key = ((whole[:, 0] * 65_536 + whole[:, 1]) * 65_536 + whole[:, 2]) * 65_536 + whole[:, 3]
    return px[np.unique(key, return_index=True)[1]]


def _dots(px: Floats, size: tuple[int, int], colour: QColor) -> QImage:
    wide, tall = size
    at = np.floor(px.reshape(-1, 2)).astype(np.int64)
    inside = np.all((at >= 0) & (at < (wide, tall)), axis=1)
    x, y = at[inside].T
    pixels = np.zeros((tall, wide), dtype=np.uint32)
    pixels[y, x] = colour.rgba()
    image = QImage(pixels.data, wide, tall, 4 * wide, QImage.Format.Format_ARGB32)
    return image.copy()  # the pixels go with this function
