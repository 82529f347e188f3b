"""Measure: click one thing or two and read what lies between; nothing of it goes into the part."""

from __future__ import annotations

from typing import TYPE_CHECKING, ClassVar

from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QColor, QFont, QFontMetricsF, QGuiApplication, QPainter, QPen

from screenapp.model.measuring import Measurement
from screenapp.window import theme
from screenapp.window.board import sketch
from screenapp.window.board.frame import Frame
from screenapp.window.board.measurement import Taken, lines_of, measured, taken, text_of
from screenapp.window.board.snap_record import SnapKind
from screenapp.window.board.tools.base import Place, Tool
from screenapp.window.commands import Command

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas

LINE_PX, PAD_PX, OFF_PX = 17.0, 8.0, 18.0


class MeasureTool(Tool):
    """Stays in hand; the result stays on the board until the next click."""

    name: ClassVar[str] = "Measure"
    key: ClassVar[str] = "M"
    line: ClassVar[str] = "Click a thing or the face; click another for what is between them."
    icon: ClassVar[str] = "measure"
    passes_over: ClassVar[frozenset[SnapKind]] = frozenset({"horizontal", "vertical"})

    def __init__(self, canvas: Canvas) -> None:
        super().__init__(canvas)
        self._one: Taken | None = None
        self._other: Taken | None = None
        self._commands = (
            Command(
                "Copy what was measured",
                "Puts the result with its units on the clipboard.",
                ("Ctrl+C",),
                self.copy,
                ready=lambda: self.canvas.tool is self and self.result is not None,
            ),
        )

    @property
    def cursor(self) -> Qt.CursorShape:
        """A cross, or a hand over what can be taken up."""
        place = self.canvas.place
        thing = place is not None and place.hit is not None
        return Qt.CursorShape.PointingHandCursor if thing else Qt.CursorShape.CrossCursor

    @property
    def result(self) -> Measurement | None:
        """What was measured, or would be by a click at the cursor."""
        if self._one is None:
            return None
        other = self._other
        if other is None and self.canvas.place is not None:
            other = taken(self.canvas.drawn, self.canvas.place, first=False)
            if other.kind == "point" and not other.id and self._one.kind != "point":
                other = None  # a bare place is measured to when it is clicked
        return measured(self.canvas.drawn, self._one, other)

    @property
    def settled(self) -> Measurement | None:
        """What was measured by the clicks so far."""
        return None if self._one is None else measured(self.canvas.drawn, self._one, self._other)

    def start(self) -> None:
        """Begin with what is selected, so that no mouse is needed."""
        if 0 < len(self.canvas.document.selection) <= 2:
            self._measure_selected()

    def stop(self, following: Tool | None) -> None:
        """The result goes with the tool."""
        self._one = self._other = None

    def part_changed(self) -> None:
        """Measure the part as it now is; what is gone is not measured."""
        if self._one is not None and self.settled is None:
            self._one = self._other = None

    def step_back(self) -> bool:
        """Drop the second thing, then the first."""
        had = self._one is not None
        self._one = None if self._other is None else self._one
        self._other = None
        return had

    def hint(self) -> str:
        """What a click does now."""
        if self._one is None or self._other is not None:
            return self.line
        return "Click another thing or place for what is between them; Ctrl+C copies."

    def commands(self) -> tuple[Command, ...]:
        """Copy."""
        return self._commands

    def press(self, place: Place) -> None:
        """Take up a thing; a third click begins anew."""
        first = self._one is None or self._other is not None
        found = taken(self.canvas.drawn, place, first)
        if first:
            self._one, self._other = found, None
        else:
            self._other = found
        self._say()

    def copy(self) -> None:
        """Put the result on the clipboard."""
        found = self.settled
        if found is not None:
            units = self.canvas.part.display_units
            QGuiApplication.clipboard().setText(text_of(found, units))
            self.say("Copied what was measured.")

    def _measure_selected(self) -> None:
        drawn = self.canvas.drawn
        things = []
        for id_ in self.canvas.document.selection[:2]:
            at = drawn.anchor_of(id_)
            if at is not None:
                sharp = id_ in drawn.corners and not drawn.pieces_of(id_)
                point = sharp or id_ in drawn.probes
                things.append(Taken("point" if point else "thing", at, id_))
        self._one = things[0] if things else None
        self._other = things[1] if len(things) > 1 else None
        self._say()

    def _say(self) -> None:
        found = self.settled
        if found is not None:
            lines = lines_of(found, self.canvas.part.display_units)
            self.say(f"{found.title}: {', '.join(lines)}.")

    def paint(self, painter: QPainter, frame: Frame) -> None:
        """The line between both, and the results beside it."""
        if self._one is not None and self._one.kind == "point":
            sketch.dot(painter, frame, self._one.at)
        found = self.result
        if found is None:
            return
        if found.ends is not None:
            sketch.segment(painter, frame, *found.ends, dashed=True)
            for end in found.ends:
                sketch.dot(painter, frame, end)
        lines = lines_of(found, self.canvas.part.display_units)
        draw_card(painter, frame.px(found.at), lines, QRectF(self.canvas.viewport().rect()))


def draw_card(painter: QPainter, at: QPointF, lines: list[str], within: QRectF) -> None:
    """Results on a small card beside a pixel, inside the view; the first line is the main one."""
    p = theme.current()
    strong = theme.font(theme.TEXT_BODY, QFont.Weight.DemiBold)
    plain = theme.font(theme.TEXT_SMALL)
    fonts = [strong, *[plain] * (len(lines) - 1)]
    wide = max(
        QFontMetricsF(font).horizontalAdvance(line) for font, line in zip(fonts, lines, strict=True)
    )
    size = (wide + 2 * PAD_PX, LINE_PX * len(lines) + 2 * PAD_PX - 4.0)
    x = min(max(at.x() + OFF_PX, within.left() + 4.0), within.right() - size[0] - 4.0)
    y = min(max(at.y() + OFF_PX, within.top() + 4.0), within.bottom() - size[1] - 4.0)
    ground = QColor(p.sheet)
    ground.setAlphaF(0.95)
    painter.setPen(QPen(QColor(p.accent), 1.0))
    painter.setBrush(ground)
    painter.drawRoundedRect(QRectF(x, y, *size), 4.0, 4.0)
    for number, (font, line) in enumerate(zip(fonts, lines, strict=True)):
        painter.setFont(font)
        painter.setPen(QColor(p.ink if number == 0 else p.quiet))
        painter.drawText(QPointF(x + PAD_PX, y + PAD_PX + 11.0 + LINE_PX * number), line)
