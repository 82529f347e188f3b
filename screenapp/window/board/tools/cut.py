"""Put a cut: a straight line along which the stress and the section forces are read."""

from __future__ import annotations

from typing import TYPE_CHECKING, ClassVar

from PySide6.QtGui import QPainter

from screenapp.model import edits
from screenapp.model.part import Point
from screenapp.window.board import sketch
from screenapp.window.board.frame import Frame
from screenapp.window.board.tools.base import Place, Tool
from screenapp.window.board.tools.drawing import NEXT_FIELDS, PLACE_FIELDS, DrawTool
from screenapp.window.board.typed_entry import EntryField

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas


class CutTool(DrawTool):
    """Stays in hand: two places make a cut; the free body is on the left of the way."""

    name: ClassVar[str] = "Cut"
    key: ClassVar[str] = "X"
    line: ClassVar[str] = "Click two places; the stress along the line between them is read."
    icon: ClassVar[str] = "cut"

    def __init__(self, canvas: Canvas) -> None:
        super().__init__(canvas)
        self.first: Point | None = None

    def stop(self, following: Tool | None) -> None:
        """Drop the first place."""
        self.first = None
        self.typed = {}

    def step_back(self) -> bool:
        """Drop the first place."""
        had, self.first = self.first is not None, None
        return had

    def hint(self) -> str:
        """What the next click does."""
        if self.first is None:
            return "Click where the cut begins."
        return "Click where it ends; the part to the left is the free body."

    def entry_fields(self) -> tuple[EntryField, ...]:
        """A place, then a place or length and angle."""
        return PLACE_FIELDS if self.first is None else NEXT_FIELDS

    def point_from(self) -> Point | None:
        """Length and angle count from the first place."""
        return self.first

    def press(self, place: Place) -> None:
        """Take the place, or take up the cut that is there already."""
        hit = place.hit
        if hit is not None and hit.kind == "cut" and self.first is None and not self.typed:
            self.canvas.document.select(hit.id)
            return
        super().press(place)

    def accept_point(self, at: Point) -> None:
        """Set the first place, then put the cut."""
        if self.first is None:
            self.first = at
            return
        part, first = self.canvas.document.part, self.first
        if self.apply("put a cut", lambda: edits.add_cut(part, first, at)):
            self.first = None
            self.canvas.document.select(self.canvas.document.part.cuts[-1].id)

    def enter(self) -> None:
        """Take the place under the cursor."""
        at = self.point()
        if at is not None:
            self.accept_point(at)

    def paint(self, painter: QPainter, frame: Frame) -> None:
        """The line with its length."""
        at = self.point()
        if self.first is None or at is None:
            if self.typed and at is not None:
                sketch.dot(painter, frame, at)
            return
        sketch.segment(painter, frame, self.first, at, dashed=True)
        sketch.measure(painter, frame, self.first, at, self.canvas.part.display_units)
        sketch.dot(painter, frame, self.first)
