"""Base of the tools that take two places: the first one, then what is drawn up to the second."""

from __future__ import annotations

from typing import TYPE_CHECKING, ClassVar

from PySide6.QtGui import QPainter

from screenapp.model.part import Point
from screenapp.window.board import sketch
from screenapp.window.board.frame import Frame
from screenapp.window.board.tools.base import Tool
from screenapp.window.board.tools.drawing import PLACE_FIELDS, DrawTool
from screenapp.window.board.typed_entry import EntryField

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas


class TwoPlaceTool(DrawTool):
    """Keeps the first place; a subclass has its `hints` (for the first place and the second), the
    fields that may be typed for the second, and paints what lies between the two."""

    hints: ClassVar[tuple[str, str]]
    second_fields: ClassVar[tuple[EntryField, ...]]

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
        return self.hints[self.first is not None]

    def entry_fields(self) -> tuple[EntryField, ...]:
        """A place, then what gives the second one."""
        return PLACE_FIELDS if self.first is None else self.second_fields

    def paint(self, painter: QPainter, frame: Frame) -> None:
        """What a click would draw; before the first place only a dot at a typed one."""
        at = self.point()
        if self.first is not None:
            if at is not None:
                self.paint_between(painter, frame, self.first, at)
            sketch.dot(painter, frame, self.first)
        elif self.typed and at is not None:
            sketch.dot(painter, frame, at)

    def paint_between(self, painter: QPainter, frame: Frame, first: Point, at: Point) -> None:
        """Paint what the two places give."""
        raise NotImplementedError
