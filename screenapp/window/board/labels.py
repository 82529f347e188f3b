"""The texts at supports, loads, probes and cuts, placed so that none covers another."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import TYPE_CHECKING

from PySide6.QtCore import QPointF, QRectF, QSizeF, Qt
from PySide6.QtGui import QColor, QFontMetricsF, QPainter, QPen

from screenapp.model.part import Point
from screenapp.window import theme
from screenapp.window.board.cut_item import name_place
from screenapp.window.board.frame import Frame
from screenapp.window.board.label_placing import Wish, place, round_about, round_text
from screenapp.window.board.screen_item import Z_PROBES, ScreenItem
from screenapp.window.board.sketch import label

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas

LINE = 15.0
RING = 7.0
GAPS = (9.0, 20.0, 36.0, 56.0, 84.0)
"""Distances of a probe's text from its ring [px]; beyond the first a line leads to it."""

MOST_LINES = 300
"""Lines of symbols that are looked at; more stand so close that no text can avoid them."""


@dataclass(frozen=True)
class PointValue:
    """A short text at the mark of a probe at `at` [mm]."""

    at: Point
    text: str


@dataclass(frozen=True)
class _Tag:
    """A text to be painted: what it is at [px], its lines, its colour, whether it has a value."""

    anchor: QPointF
    lines: tuple[str, ...]
    colour: str
    probe: bool

    @property
    def size(self) -> QSizeF:
        """Room that it takes [px]."""
        metrics = QFontMetricsF(theme.font(theme.TEXT_SMALL))
        wide = max(metrics.horizontalAdvance(line) for line in self.lines)
        return QSizeF(wide + 8.0, LINE * len(self.lines))


class LabelsItem(ScreenItem):
    """Paints the texts over the symbols and below the cards.

    Attributes:
        cards: where the cards stand [px].
        overlays: where widgets lie over the canvas [px].
    """

    def __init__(self, canvas: Canvas) -> None:
        super().__init__(Z_PROBES + 1)
        self._canvas = canvas
        self.values: tuple[PointValue, ...] = ()
        self.cards: Callable[[Frame], list[QRectF]] = lambda frame: []
        self.overlays: Callable[[], list[QRectF]] = list
        self._kept: list[QPointF] = []  # offsets from the anchors [px]
        self._kept_for: object = None

    def show_values(self, values: tuple[PointValue, ...]) -> None:
        """Show these values at the probes."""
        self.values = values
        self.update()

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Paint the texts."""
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        tags = self._tags(frame)
        for tag, box in zip(tags, self.boxes(frame, tags), strict=True):
            _paint(painter, tag, box)

    def boxes(self, frame: Frame, tags: list[_Tag] | None = None) -> list[QRectF]:
        """Where the texts stand [px]: symbols first, then probes; kept while the view only pans."""
        tags = self._tags(frame) if tags is None else tags
        view = QRectF(self.getViewBox().sceneBoundingRect()).adjusted(4.0, 4.0, -4.0, -4.0)
        cards, overlays = self.cards(frame), self.overlays()
        origin = frame.px((0.0, 0.0))
        key = (
            round(frame.scale, 9),
            tuple((tag.lines, _rounded(tag.anchor - origin)) for tag in tags),
            tuple(_rounded(card.topLeft() - origin) for card in cards),
            tuple(_rounded(over.bottomRight()) for over in overlays),
        )
        if self._kept_for != key:
            self._kept = self._placed(frame, tags, view, [*cards, *overlays])
            self._kept_for = key
        return [
            QRectF(tag.anchor + offset, tag.size)
            for tag, offset in zip(tags, self._kept, strict=True)
        ]

    def _placed(
        self, frame: Frame, tags: list[_Tag], view: QRectF, taken: list[QRectF]
    ) -> list[QPointF]:
        rings = [
            QRectF(tag.anchor - QPointF(RING, RING), tag.anchor + QPointF(RING, RING))
            for tag in tags
            if tag.probe
        ]
        wishes = [
            Wish(tag.size, round_about(tag.anchor, tag.size, GAPS))
            if tag.probe
            else Wish(tag.size, round_text(tag.anchor, tag.size))
            for tag in tags
        ]
        found = place(wishes, [*taken, *rings], view, self._lines(frame))
        return [box.topLeft() - tag.anchor for box, tag in zip(found, tags, strict=True)]

    def _tags(self, frame: Frame) -> list[_Tag]:
        canvas, palette = self._canvas, theme.current()
        symbols, drawn = canvas.symbols, canvas.drawn
        marks, shift = symbols.marks(frame), symbols.shift(frame)
        tags = [
            _Tag(
                mark.label_at + shift,
                (mark.label,),
                palette.support if mark.kind == "support" else palette.load,
                False,
            )
            for mark in marks
            if mark.label
        ]
        values = {value.at: value.text for value in self.values}
        chosen = canvas.document.selection
        for cut in drawn.part.cuts:
            colour = palette.accent if cut.id in chosen else palette.ink
            tags.append(_Tag(name_place(frame, cut), (cut.name or cut.id,), colour, False))
        for probe in drawn.part.readings:
            lines = tuple(filter(None, (probe.name, *values.get(probe.at, "").split("\n"))))
            colour = palette.accent if probe.id in chosen else palette.ink
            tags.append(_Tag(frame.px(probe.at), lines or (probe.id,), colour, True))
        return tags

    def _lines(self, frame: Frame) -> list[QRectF]:
        """Boxes of the straight strokes of symbols [px]."""
        symbols = self._canvas.symbols
        shift = symbols.shift(frame)
        boxes: list[QRectF] = []
        for mark in symbols.marks(frame):
            for line in (*mark.lines, *mark.fills):
                low, high = line.min(axis=0), line.max(axis=0)
                box = QRectF(low[0] - 1.0, low[1] - 1.0, *(high - low + 2.0))
                boxes.append(box.translated(shift))
        return boxes[:MOST_LINES]


def _rounded(at: QPointF) -> tuple[int, int]:
    return round(at.x()), round(at.y())


def _paint(painter: QPainter, tag: _Tag, box: QRectF) -> None:
    if tag.probe:
        _paint_leader(painter, tag, box)
    if len(tag.lines) > 1:
        painter.setPen(Qt.PenStyle.NoPen)
        painter.setBrush(theme.colour("paper", 0.85))
        painter.drawRoundedRect(box, 3.0, 3.0)
    for i, line in enumerate(tag.lines):
        middle = QPointF(box.center().x(), box.top() + (i + 0.5) * LINE)
        label(painter, line, middle, tag.colour)


def _paint_leader(painter: QPainter, tag: _Tag, box: QRectF) -> None:
    """A thin line from a ring to a text that stands away from it."""
    at = tag.anchor
    end = QPointF(
        min(max(at.x(), box.left()), box.right()), min(max(at.y(), box.top()), box.bottom())
    )
    gap = end - at
    if gap.manhattanLength() <= 1.5 * GAPS[0]:
        return
    length = (gap.x() ** 2 + gap.y() ** 2) ** 0.5
    start = at + gap * (RING / length)
    painter.setPen(QPen(theme.colour("paper"), 3.0))
    painter.drawLine(start, end)
    painter.setPen(QPen(QColor(tag.colour), 1.0))
    painter.drawLine(start, end)
