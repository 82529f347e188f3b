"""A rectangle with round corners: two opposite corners, then the radius."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, ClassVar

from PySide6.QtCore import QRectF, Qt
from PySide6.QtGui import QPainter

from screenapp.model import edits
from screenapp.model.part import Point
from screenapp.window.board import sketch
from screenapp.window.board.frame import Frame
from screenapp.window.board.quantity import written
from screenapp.window.board.tools.base import Place, Tool
from screenapp.window.board.tools.rectangle import RectangleTool
from screenapp.window.board.typed_entry import EntryField

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas

RADIUS_FIELDS = (EntryField("radius", "corner radius"),)


class RoundedRectangleTool(RectangleTool):
    """The rounds stay properties of the four corners and can be changed one by one."""

    name: ClassVar[str] = "Rounded rectangle"
    key: ClassVar[str] = "Q"
    line: ClassVar[str] = "Click two opposite corners, then give the corner radius."
    icon: ClassVar[str] = "rounded-rectangle"
    group: ClassVar[str] = "rectangles"

    def __init__(self, canvas: Canvas) -> None:
        super().__init__(canvas)
        self.second: Point | None = None
        self._sizes: dict[str, str | None] = {}

    def stop(self, following: Tool | None) -> None:
        """Drop both corners."""
        self.second = None
        super().stop(following)

    def step_back(self) -> bool:
        """Drop the second corner, then the first."""
        if self.second is not None:
            self.second = None
            return True
        return super().step_back()

    def hint(self) -> str:
        """What the next click does."""
        if self.second is None:
            return super().hint()
        return "Go inwards from a corner and click, or type the corner radius."

    def entry_fields(self) -> tuple[EntryField, ...]:
        """Places, sizes, then the radius."""
        return super().entry_fields() if self.second is None else RADIUS_FIELDS

    @property
    def most(self) -> float:
        """The largest radius that fits [mm]."""
        if self.first is None or self.second is None:
            return 0.0
        return min(abs(a - b) for a, b in zip(self.first, self.second, strict=True)) / 2.0

    @property
    def radius(self) -> float:
        """The radius that a click would give [mm]: how far the cursor is inside the corner."""
        if "radius" in self.typed:
            return self.typed["radius"]
        place = self.canvas.place
        if place is None or self.first is None or self.second is None:
            return 0.0
        corners = edits.rectangle_corners(self.first, self.second)
        gap = min(max(abs(place.at[0] - x), abs(place.at[1] - y)) for x, y in corners)
        return min(gap, self.most)

    def typed_point(self, cursor: Point | None) -> Point | None:
        """Once both corners are set any place will do: only the radius counts."""
        if self.second is None:
            return super().typed_point(cursor)
        return cursor if cursor is not None else self.second

    def entry_live(self) -> dict[str, float]:
        """Place, sizes or radius."""
        return super().entry_live() if self.second is None else {"radius": self.radius}

    def entry_accept(self, values: dict[str, float]) -> None:
        """A radius draws it."""
        if self.second is None:
            super().entry_accept(values)
            return
        self.typed = dict(values)
        self._draw(self.radius)
        self.typed = {}

    def press(self, place: Place) -> None:
        """A typed radius counts for a click too."""
        if self.second is None:
            super().press(place)
            return
        radius = self.radius
        self.typed = {}
        self.canvas.entry.forget()
        self._draw(radius)

    def accept_point(self, at: Point) -> None:
        """The corners, then the radius."""
        if self.first is None:
            super().accept_point(at)
        elif self.second is None:
            if at[0] != self.first[0] and at[1] != self.first[1]:
                self.second, self._sizes = at, self.canvas.entry.taken
        else:
            self._draw(self.radius)

    def enter(self) -> None:
        """Take the corner or radius under the cursor."""
        if self.second is not None:
            self._draw(self.radius)
        else:
            super().enter()

    def _draw(self, radius: float) -> None:
        first, second = self.first, self.second
        if first is None or second is None:
            return
        if not 0.0 <= radius <= self.most * (1.0 + 1e-9):
            units = self.canvas.document.part.display_units
            most = written(self.most, "length", units)
            self.say(f"The radius does not fit: give at most {most}.")
            return
        text = self.canvas.entry.taken.get("radius")
        self._put(first, second, self._sizes, radius, text)

    def _drawn(self) -> None:
        self.second = None
        super()._drawn()

    def paint(self, painter: QPainter, frame: Frame) -> None:
        """The rectangle, then with its rounds."""
        if self.first is None or self.second is None:
            super().paint(painter, frame)
            return
        one, two = frame.px(self.first), frame.px(self.second)
        box = QRectF(one, two).normalized()
        radius = min(max(self.radius, 0.0), self.most)
        painter.setPen(sketch.line_pen())
        painter.setBrush(Qt.BrushStyle.NoBrush)
        far = radius * frame.scale
        painter.drawRoundedRect(box, far, far)
        text = f"R {written(radius, 'length', self.canvas.part.display_units)}"
        away = math.copysign(18.0, two.y() - one.y())
        two.setY(two.y() + away)
        sketch.label(painter, text, two)
