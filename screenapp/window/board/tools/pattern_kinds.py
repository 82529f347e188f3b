"""The row, the grid and the bolt circle."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, ClassVar

from PySide6.QtCore import Qt
from PySide6.QtGui import QPainter

from screenapp.model.part import CircleHole, Point, SlotHole
from screenapp.model.pattern import BoltCircle, GridPattern, Pattern, RowPattern
from screenapp.window.board import sketch
from screenapp.window.board.frame import Frame
from screenapp.window.board.tools.base import Tool
from screenapp.window.board.tools.pattern import PatternTool
from screenapp.window.board.typed_entry import EntryField

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas


class RowTool(PatternTool):
    """The first hole, then the last."""

    name: ClassVar[str] = "Row of holes"
    key: ClassVar[str] = "N"
    line: ClassVar[str] = "Click the first hole, then the last; left and right change the count."
    icon: ClassVar[str] = "row"
    word: ClassVar[str] = "row of holes"
    counts: ClassVar[dict[str, int]] = {"count": 3}
    keys: ClassVar[dict[Qt.Key, tuple[str, int]]] = {
        Qt.Key.Key_Right: ("count", 1),
        Qt.Key.Key_Left: ("count", -1),
    }
    fields: ClassVar[tuple[EntryField, ...]] = (
        EntryField("count", "holes", "number"),
        EntryField("pitch", "pitch"),
        EntryField("angle", "angle", "angle"),
    )

    def hint(self) -> str:
        """What the next click does."""
        if self.centre is None:
            return "Click where the first hole stands."
        return f"Click where the last of {self.count('count')} holes stands; ← → change how many."

    def point_from(self) -> Point | None:
        """The first hole."""
        return self.centre

    def pattern_to(self, at: Point) -> RowPattern:
        """Evenly from the first hole to the last one at a place."""
        x, y = self.centre if self.centre is not None else at
        n = self.count("count")
        far = math.dist((x, y), at)
        pitch = self.typed.get("pitch", far / max(1, n - 1))
        angle = self.typed.get("angle", math.degrees(math.atan2(at[1] - y, at[0] - x)))
        return RowPattern(n, pitch, angle)

    def paint_guide(self, painter: QPainter, frame: Frame, pattern: Pattern) -> None:
        """The line of the row with its pitch."""
        assert isinstance(pattern, RowPattern)
        assert self.centre is not None
        a, (x, y) = math.radians(pattern.angle), self.centre
        far = pattern.pitch * (pattern.count - 1)
        end = (x + far * math.cos(a), y + far * math.sin(a))
        sketch.segment(painter, frame, self.centre, end, dashed=True)
        text = f"{pattern.count} × {self.words(pattern.pitch)}"
        sketch.label(painter, text, sketch.beside(frame.px(self.centre), frame.px(end), 22.0))


class GridTool(PatternTool):
    """The first hole, then the one at the opposite corner."""

    name: ClassVar[str] = "Grid of holes"
    key: ClassVar[str] = "G"
    line: ClassVar[str] = "Click two opposite holes; the arrows change columns and rows."
    icon: ClassVar[str] = "grid"
    word: ClassVar[str] = "grid of holes"
    counts: ClassVar[dict[str, int]] = {"columns": 3, "rows": 2}
    keys: ClassVar[dict[Qt.Key, tuple[str, int]]] = {
        Qt.Key.Key_Right: ("columns", 1),
        Qt.Key.Key_Left: ("columns", -1),
        Qt.Key.Key_Up: ("rows", 1),
        Qt.Key.Key_Down: ("rows", -1),
    }
    fields: ClassVar[tuple[EntryField, ...]] = (
        EntryField("columns", "columns", "number"),
        EntryField("rows", "rows", "number"),
        EntryField("pitch_x", "pitch x"),
        EntryField("pitch_y", "pitch y"),
    )

    def hint(self) -> str:
        """What the next click does."""
        if self.centre is None:
            return "Click where the first hole stands."
        return "Click where the opposite hole stands; the arrows change columns and rows."

    def pattern_to(self, at: Point) -> GridPattern:
        """Evenly from the first hole to the one at the opposite corner."""
        x, y = self.centre if self.centre is not None else at
        columns, rows = self.count("columns"), self.count("rows")
        one = self.typed.get("pitch_x", (at[0] - x) / max(1, columns - 1))
        other = self.typed.get("pitch_y", (at[1] - y) / max(1, rows - 1))
        return GridPattern(columns, rows, one or 1.0, other or 1.0)

    def paint_guide(self, painter: QPainter, frame: Frame, pattern: Pattern) -> None:
        """Both pitches."""
        assert isinstance(pattern, GridPattern)
        assert self.centre is not None
        x, y = self.centre
        right = (x + pattern.pitch_x * (pattern.columns - 1), y)
        up = (x, y + pattern.pitch_y * (pattern.rows - 1))
        for end, count, pitch in (
            (right, pattern.columns, pattern.pitch_x),
            (up, pattern.rows, pattern.pitch_y),
        ):
            sketch.segment(painter, frame, self.centre, end, dashed=True)
            text = f"{count} × {self.words(abs(pitch))}"
            sketch.label(painter, text, sketch.beside(frame.px(self.centre), frame.px(end), 22.0))


class BoltCircleTool(PatternTool):
    """The centre, then where one of the holes stands."""

    name: ClassVar[str] = "Bolt circle"
    key: ClassVar[str] = "B"
    line: ClassVar[str] = (
        "Click the centre, then one of the holes; left and right change the count."
    )
    icon: ClassVar[str] = "bolt-circle"
    word: ClassVar[str] = "bolt circle"
    counts: ClassVar[dict[str, int]] = {"count": 6}
    keys: ClassVar[dict[Qt.Key, tuple[str, int]]] = {
        Qt.Key.Key_Right: ("count", 1),
        Qt.Key.Key_Left: ("count", -1),
    }
    fields: ClassVar[tuple[EntryField, ...]] = (
        EntryField("count", "holes", "number"),
        EntryField("radius", "circle radius"),
        EntryField("start", "first at", "angle"),
    )

    def __init__(self, canvas: Canvas) -> None:
        super().__init__(canvas)
        self.rim: Point | None = None

    def take_up(self, hole: CircleHole | SlotHole) -> None:
        """The hole stands on the circle; its centre is still to be given."""
        self.rim = hole.centre

    def stop(self, following: Tool | None) -> None:
        """Drop what is half done."""
        self.rim = None
        super().stop(following)

    def step_back(self) -> bool:
        """Drop the hole that is repeated too."""
        self.rim = None
        return super().step_back()

    def hint(self) -> str:
        """What the next click does."""
        if self.centre is None:
            return "Click the centre of the bolt circle."
        return f"Click where one of {self.count('count')} holes stands; ← → change how many."

    def point_from(self) -> Point | None:
        """The centre."""
        return self.centre

    def accept_point(self, at: Point) -> None:
        """The centre; with a hole in hand that is all that is needed."""
        if self.centre is None and self.rim is not None:
            if math.dist(at, self.rim) > 1e-9:
                self.centre = at
                self._draw(self.pattern_to(self.rim))
                self.centre = self.rim = None
            return
        super().accept_point(at)

    def pattern_to(self, at: Point) -> BoltCircle:
        """The circle with its first hole at a place."""
        x, y = self.centre if self.centre is not None else at
        radius = self.typed.get("radius", math.dist((x, y), at))
        start = self.typed.get("start", math.degrees(math.atan2(at[1] - y, at[0] - x)))
        return BoltCircle(self.count("count"), radius, start)

    def paint_guide(self, painter: QPainter, frame: Frame, pattern: Pattern) -> None:
        """The circle that the holes stand on, with its radius."""
        assert isinstance(pattern, BoltCircle)
        assert self.centre is not None
        if not math.isfinite(pattern.radius):
            return
        painter.setPen(sketch.line_pen(1.0, dashed=True))
        painter.setBrush(Qt.BrushStyle.NoBrush)
        far = abs(pattern.radius) * frame.scale
        painter.drawEllipse(frame.px(self.centre), far, far)
        sketch.dot(painter, frame, self.centre)
        text = f"{pattern.count} on R {self.words(pattern.radius)}"
        middle = frame.px(self.centre)
        middle.setY(middle.y() - 16.0)
        sketch.label(painter, text, middle)
