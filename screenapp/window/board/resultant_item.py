"""What a load that is pointed at or selected amounts to: a hollow arrow on its line of action.

Loads themselves are drawn with thin arrows and filled heads; a resultant is told from them by its
hollow shaft and the dash-dotted line that it lies on.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from PySide6.QtCore import QPointF, Qt
from PySide6.QtGui import QColor, QPainter, QPen

from screenapp.model.combinations import loadings
from screenapp.model.part import DisplayUnits
from screenapp.model.solution import LoadResultant
from screenapp.model.units import format_quantity
from screenapp.window import theme
from screenapp.window.board.frame import Floats, Frame, polygon
from screenapp.window.board.marks import to_px
from screenapp.window.board.screen_item import Z_PROBES, ScreenItem
from screenapp.window.board.sketch import label
from screenapp.window.document import Document

LONG, HEAD = 58.0, 17.0
"""Length of the arrow and of its head [px]."""

HALF_SHAFT, HALF_HEAD = 3.5, 9.0
"""Half widths [px]."""

BEYOND = 70.0
"""The line of action runs on so far from both ends of the arrow [px]."""

RADIUS = 24.0
"""Of the arrow of a couple [px]."""

COUPLE = 1e-9
"""A moment about the place below this share of force times distance from the origin is rounding."""


@dataclass(frozen=True, eq=False)
class ResultantMark:
    """What is painted [px]: outlines, lines of action as (2, 2), text and its middle."""

    outlines: list[Floats]
    lines: list[Floats]
    text: str
    text_at: Floats


def resultant_mark(found: LoadResultant, at: Floats, units: DisplayUnits) -> ResultantMark | None:
    """The mark of a resultant whose place is `at` [px]; None where nothing is left of it."""
    if found.at is None:
        return None
    outlines: list[Floats] = []
    lines: list[Floats] = []
    texts: list[str] = []
    text_at = at + np.array([0.0, RADIUS + 16.0])
    x, y = found.at
    lever = x * found.y - y * found.x
    couple = found.moment - lever
    scale = abs(x * found.y) + abs(y * found.x) + abs(found.moment)
    way = to_px(found.x, found.y)
    if way is not None:
        outlines.append(_arrow(at, way))
        lines.append(np.array([at - (LONG + BEYOND) * way, at + BEYOND * way]))
        texts.append(format_quantity(math.hypot(found.x, found.y), "force", units))
        text_at = at - (LONG + 14.0) * way + np.array([-34.0 * abs(way[1]), 14.0 * abs(way[0])])
    if abs(couple) > COUPLE * scale:
        outlines.append(_turning(at, couple < 0.0))
        texts.append(format_quantity(couple, "moment", units))
    return ResultantMark(outlines, lines, " and ".join(texts), text_at) if texts else None


def _arrow(tip: Floats, way: Floats) -> Floats:
    """A hollow arrow that ends in `tip`, (8, 2)."""
    side = np.array([-way[1], way[0]])
    neck, tail = tip - HEAD * way, tip - LONG * way
    right = [tail + HALF_SHAFT * side, neck + HALF_SHAFT * side, neck + HALF_HEAD * side]
    left = [neck - HALF_HEAD * side, neck - HALF_SHAFT * side, tail - HALF_SHAFT * side]
    return np.array([*right, tip, *left, right[0]])


def _turning(at: Floats, clockwise: bool) -> Floats:
    """A hollow arrow round a place, three quarters of a turn, closed."""
    sign = 1.0 if clockwise else -1.0  # y runs down
    turn = -0.5 * math.pi + sign * np.linspace(0.0, 1.4 * math.pi, 33)
    rays = np.stack([np.cos(turn), np.sin(turn)], axis=-1)
    end = rays[-1]
    along = sign * np.array([-end[1], end[0]])
    tip = at + RADIUS * end + HEAD * along
    return np.vstack(
        [
            at + (RADIUS + HALF_SHAFT) * rays,
            at + (RADIUS + HALF_HEAD) * end,
            tip,
            at + (RADIUS - HALF_HEAD) * end,
            at + (RADIUS - HALF_SHAFT) * rays[::-1],
            at + (RADIUS + HALF_SHAFT) * rays[:1],
        ]
    )


class ResultantItem(ScreenItem):
    """Paints the resultant of what is pointed at, else of what is selected."""

    def __init__(self, document: Document) -> None:
        super().__init__(Z_PROBES)
        self._document = document
        self.selected: tuple[str, ...] = ()
        self.hovered: str | None = None

    def marks(self, frame: Frame) -> list[ResultantMark]:
        """What is painted: of the load pointed at, else of those selected."""
        document = self._document
        cases = loadings(document.part)
        viewed = cases[document.view.case].id if document.view.case < len(cases) else ""
        made: list[ResultantMark] = []
        for ids in ((self.hovered,) if self.hovered else (), self.selected):
            for id_ in ids:
                found = document.amounts.of(id_, viewed)
                if found is None or found.at is None:
                    continue
                at = frame.pxs(found.at)
                mark = resultant_mark(found, at, document.part.display_units)
                if mark is not None:
                    made.append(mark)
            if made:
                break
        return made

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Paint them."""
        palette = theme.current()
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        colour, paper = QColor(palette.load), QColor(palette.paper)
        for mark in self.marks(frame):
            painter.setPen(QPen(colour, 1.0, Qt.PenStyle.DashDotLine))
            for line in mark.lines:
                painter.drawLine(QPointF(*line[0]), QPointF(*line[1]))
            painter.setPen(QPen(colour, 1.6))
            painter.setBrush(paper)
            for outline in mark.outlines:
                painter.drawPolygon(polygon(outline))
            label(painter, mark.text, QPointF(*mark.text_at), palette.load)
