"""Crosses of constant size on the screen that show the principal directions.

Tension is a full line, compression a broken one between two bars; the larger of the two stresses
has the full length, the other its share of it.  Where elements are too small for a cross each, one
stands for its neighbours.
"""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray
from PySide6.QtCore import QLineF, QRectF, Qt
from PySide6.QtGui import QColor, QPainter, QPen

from screenapp.window import theme
from screenapp.window.board.frame import Frame
from screenapp.window.board.screen_item import Z_MESH, ScreenItem
from screenapp.window.painted import Crosses, Floats

Ints = NDArray[np.int64]

ARM = 10.0
"""Half the length of the larger line [px]."""
BAR = 2.5
"""Half the length of the bars at the ends of compression [px]."""
PITCH = 28.0
"""Crosses are at least about this far apart [px]."""
LEAST_SHARE = 0.05
"""A stress below this share of the other one has no line."""


class CrossesItem(ScreenItem):
    """Shows the crosses of a field."""

    def __init__(self) -> None:
        super().__init__(Z_MESH + 4)
        self.crosses: Crosses | None = None

    def show_crosses(self, crosses: Crosses | None) -> None:
        """Show these, or none."""
        self.crosses = crosses
        self.update()

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Paint those in view, each line on a pale one so that it is seen on every colour."""
        if self.crosses is None:
            return
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        tension, compression, bars = self.lines(frame, QRectF(painter.viewport()))
        p = theme.PAPER  # colours of fields are the same in every theme
        for colour, width in ((p.paper, 3.4), (p.ink, 1.5)):
            pen = QPen(QColor(colour), width)
            pen.setCapStyle(Qt.PenCapStyle.FlatCap)
            painter.setPen(pen)
            painter.drawLines([*tension, *bars])
            if colour == p.ink:
                pen.setDashPattern([2.0, 1.4])
                painter.setPen(pen)
            painter.drawLines(compression)

    def lines(self, frame: Frame, view: QRectF) -> tuple[list[QLineF], list[QLineF], list[QLineF]]:
        """Lines of tension, lines of compression and the bars at their ends [px], of the crosses
        in `view` [px]."""
        crosses = self.crosses
        if crosses is None:
            return [], [], []
        x, y = frame.pxs(crosses.at).T
        seen = (x > view.left() - ARM) & (x < view.right() + ARM)
        seen &= (y > view.top() - ARM) & (y < view.bottom() + ARM)
        inside = np.flatnonzero(seen)
        kept = inside[spread(crosses.at[inside], PITCH / frame.scale)]
        middles = frame.pxs(crosses.at[kept])
        stresses, directions = crosses.stresses[kept], crosses.directions[kept]
        largest = np.abs(stresses).max(axis=1)
        tension: list[QLineF] = []
        compression: list[QLineF] = []
        bars: list[QLineF] = []
        for k in range(2):
            share = np.abs(stresses[:, k]) / np.where(largest > 0.0, largest, 1.0)
            arms = directions[:, k] * (1.0, -1.0) * (ARM * share)[:, None]
            sides = directions[:, k, ::-1] * BAR  # at right angles, y downwards
            for i in np.flatnonzero(share >= LEAST_SHARE):
                a, b = middles[i] - arms[i], middles[i] + arms[i]
                if stresses[i, k] > 0.0:
                    tension.append(QLineF(*a, *b))
                    continue
                compression.append(QLineF(*a, *b))
                bars += [QLineF(*(end - sides[i]), *(end + sides[i])) for end in (a, b)]
        return tension, compression, bars


def spread(at: Floats, apart: float) -> Ints:
    """Indices of places (n, 2), one in each square of a grid as wide as `apart` [mm] or a little
    more.

    The grid is fixed to the part and its width is a power of two, so that the same places are
    kept while the view is moved.
    """
    width = 2.0 ** math.ceil(math.log2(apart))
    squares = np.floor(at / width).astype(np.int64)
    off = ((at / width - squares - 0.5) ** 2).sum(axis=1)
    order = np.lexsort((off, squares[:, 1], squares[:, 0]))  # nearest to its square's middle first
    _, first = np.unique(squares[order], axis=0, return_index=True)
    return np.asarray(np.sort(order[first]))
