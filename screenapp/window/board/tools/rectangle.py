"""A rectangle by two opposite corners."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, ClassVar

from PySide6.QtCore import QRectF, Qt
from PySide6.QtGui import QPainter

from screenapp.model import edits
from screenapp.model.expressions import plain_number
from screenapp.model.features import loops_of
from screenapp.model.hole_loops import ring_loop
from screenapp.model.part import Loop, Part, Point
from screenapp.window.board import sketch
from screenapp.window.board.frame import Frame
from screenapp.window.board.quantity import written
from screenapp.window.board.tools.chain import OUTSIDE
from screenapp.window.board.tools.two_places import TwoPlaceTool
from screenapp.window.board.typed_entry import EntryField

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas

SIZE_FIELDS = (EntryField("width", "width"), EntryField("height", "height"))


class RectangleTool(TwoPlaceTool):
    """The outline if there is none, else a hole."""

    name: ClassVar[str] = "Rectangle"
    key: ClassVar[str] = "R"
    line: ClassVar[str] = "Click two opposite corners, or type width and height."
    icon: ClassVar[str] = "rectangle"
    group: ClassVar[str] = "rectangles"
    hints: ClassVar[tuple[str, str]] = ("Click the first corner.", "Click the opposite corner.")
    second_fields: ClassVar[tuple[EntryField, ...]] = SIZE_FIELDS

    def __init__(self, canvas: Canvas) -> None:
        super().__init__(canvas)
        self._given: dict[str, str | None] = {}

    def typed_point(self, cursor: Point | None) -> Point | None:
        """The opposite corner lies on the cursor's side, at the typed sizes."""
        if self.first is None:
            return super().typed_point(cursor)
        sizes = self.typed.get("width"), self.typed.get("height")
        if cursor is None and None in sizes:
            return None
        away = (
            (1.0, 1.0)
            if cursor is None
            else (
                cursor[0] - self.first[0],
                cursor[1] - self.first[1],
            )
        )
        x, y = (
            start + (gap if size is None else math.copysign(size, gap))
            for start, gap, size in zip(self.first, away, sizes, strict=True)
        )
        return x, y

    def _expressions(
        self, loop: Loop, where: str, sizes: dict[str, str | None], at: Point
    ) -> dict[str, str | None]:
        """By field, what gives the corners: the first one's place, and from there the sizes."""
        assert self.first is not None
        kept: dict[str, str | None] = {}
        for corner in loop.corners:
            for axis, (name, size) in enumerate((("x", "width"), ("y", "height"))):
                start, text = self.first[axis], self._given.get(name)
                if corner.at[axis] != start:
                    begin = text or ("" if start == 0.0 else plain_number(start))
                    wide, sign = sizes.get(size), "+" if at[axis] > start else "-"
                    if wide and (begin or sign == "-"):
                        text = f"{begin} {sign} ({wide})".strip()
                    else:
                        text = wide
                kept[f"{where}.corners.{corner.id}.at.{axis}"] = text
        return kept

    def entry_live(self) -> dict[str, float]:
        """Place or sizes."""
        at = self.point()
        if self.first is None or at is None:
            return super().entry_live()
        return {"width": abs(at[0] - self.first[0]), "height": abs(at[1] - self.first[1])}

    def accept_point(self, at: Point) -> None:
        """Set the first corner, then draw."""
        taken = self.canvas.entry.taken
        if self.first is None:
            self.first, self._given = at, taken
            return
        if self.first[0] == at[0] or self.first[1] == at[1]:
            self.say("The rectangle has no area: choose a corner away from the first one.")
            return
        self._put(self.first, at, taken)

    def _put(
        self,
        first: Point,
        at: Point,
        sizes: dict[str, str | None],
        radius: float = 0.0,
        radius_text: str | None = None,
    ) -> None:
        """Draw the outline or a hole, or ask what a ring across the part's edge is to be."""
        part, corners = self.canvas.document.part, edits.rectangle_corners(first, at)

        def keep(made: Part) -> dict[str, str | None]:
            where, _, loop = list(loops_of(made))[-1]
            kept = self._expressions(loop, where, sizes, at)
            return kept | {f"{where}.corners.{c.id}.round": radius_text for c in loop.corners}

        ring = ring_loop(corners, None, radius)
        if part.outline is None:
            done = self.apply(
                "draw the outline", lambda: edits.set_outline(part, corners, None, radius), keep
            )
        elif self.fits_inside(ring):
            done = self.apply(
                "draw a hole", lambda: edits.add_loop_hole(part, corners, None, radius), keep
            )
        elif self.ask_ring(ring, at, self._drawn):
            return
        else:
            self.say(OUTSIDE)
            return
        if done:
            self._drawn()

    def _drawn(self) -> None:
        self.first = None
        self.canvas.tool_wanted.emit("Select")

    def enter(self) -> None:
        """Take the corner under the cursor."""
        at = self.point()
        if self.first is not None and at is not None:
            self.accept_point(at)

    def paint_between(self, painter: QPainter, frame: Frame, first: Point, at: Point) -> None:
        """The rectangle with its sizes."""
        painter.setPen(sketch.line_pen())
        painter.setBrush(Qt.BrushStyle.NoBrush)
        box = QRectF(frame.px(first), frame.px(at)).normalized()
        painter.drawRect(box)
        units = self.canvas.part.display_units
        wide, high = (abs(b - a) for a, b in zip(first, at, strict=True))
        for size, a, b in (
            (wide, box.topLeft(), box.topRight()),
            (high, box.topRight(), box.bottomRight()),
        ):
            sketch.label(painter, written(size, "length", units), sketch.beside(a, b, 14.0))
