"""Put a cut: a straight line along which the stress and the section forces are read."""

from __future__ import annotations

from typing import ClassVar

from PySide6.QtGui import QPainter

from screenapp.model import edits
from screenapp.model.part import Point
from screenapp.window.board import sketch
from screenapp.window.board.frame import Frame
from screenapp.window.board.tools.base import Place
from screenapp.window.board.tools.drawing import NEXT_FIELDS
from screenapp.window.board.tools.two_places import TwoPlaceTool
from screenapp.window.board.typed_entry import EntryField


class CutTool(TwoPlaceTool):
    """Stays in hand: two places make a cut; the free body is on the left of the way."""

    name: ClassVar[str] = "Cut"
    key: ClassVar[str] = "X"
    line: ClassVar[str] = "Click two places; the stress along the line between them is read."
    icon: ClassVar[str] = "cut"
    hints: ClassVar[tuple[str, str]] = (
        "Click where the cut begins.",
        "Click where it ends; the part to the left is the free body.",
    )
    second_fields: ClassVar[tuple[EntryField, ...]] = NEXT_FIELDS

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

    def paint_between(self, painter: QPainter, frame: Frame, first: Point, at: Point) -> None:
        """The line with its length."""
        sketch.segment(painter, frame, first, at, dashed=True)
        sketch.measure(painter, frame, first, at, self.canvas.part.display_units)
