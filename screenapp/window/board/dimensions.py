"""The board's dimensions: which are shown, where their numbers are, and the number being edited."""

from __future__ import annotations

from typing import TYPE_CHECKING

from PySide6.QtCore import QPointF, QRectF

from screenapp.model.dimension_marks import DimensionsShown, Mark, marks_of, rows_of
from screenapp.model.part import SpinLoad
from screenapp.window.board.dimension_editor import DimensionEditor
from screenapp.window.board.dimension_item import ROW_PX, DimensionsItem, reach_of
from screenapp.window.board.drawn_part import DrawnPart
from screenapp.window.board.zoom_view import BOTTOM

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas

FARTHEST_SPIN = 2.0
"""A point that the part turns about is shown with it where it makes the view at most so many times
as large."""

FREE_ROWS = 2
"""Rows of dimensions that stand in the room that is left round the part anyway."""


class Dimensions:
    """Keeps the marks of a canvas up to date.

    Attributes:
        shown: overall sizes and those of what is selected ("plain"), all of them, or none.
        item: paints them and knows where each number is.
        editor: the field for a number that is edited where it stands.
    """

    def __init__(self, canvas: Canvas) -> None:
        self._canvas = canvas
        self.shown: DimensionsShown = "plain"
        self.item = DimensionsItem()
        self._state: tuple[object, ...] | None = None
        self.editor = DimensionEditor(canvas, self.item)

    def refresh(self) -> None:
        """Show what is wanted of the part; results are covered by all dimensions only."""
        canvas, shown = self._canvas, self.shown
        state = (canvas.drawn, canvas.document.selection, shown, canvas.document.view.lens)
        if self._state is not None and all(a is b for a, b in zip(state, self._state, strict=True)):
            return  # asked for whenever something else lights up
        self._state = state
        drawing = shown == "all" or (shown == "plain" and canvas.document.view.lens == "Shape")
        selection = canvas.document.selection
        marks = marks_of(canvas.drawn, selection, shown == "all") if drawing else ()
        self.item.show_marks(marks, canvas.part.display_units)

    def at(self, px: QPointF) -> Mark | None:
        """The number at a pixel, for a tool that lets numbers be edited."""
        tool = self._canvas.tool
        if tool is None or not tool.edits_numbers or self._canvas.panning:
            return None
        return self.item.at(px)

    def edit_first(self) -> None:
        """Edit the first number that stands on the screen; Tab goes on from there."""
        for mark in self.item.marks:
            if self.item.placed(mark.key) is not None:
                self.editor.open_on(mark)
                return
        self._canvas.document.said.emit("No dimension is shown: draw something, or press D.")

    def fit(self) -> None:
        """Show the whole part with room for its symbols, and for rows of dimensions."""
        canvas = self._canvas
        bounds = with_spin(canvas.drawn)
        canvas.show_box(bounds)
        rows = rows_of(self.item.marks)
        if bounds is None or not max(rows):
            return
        down, left = (max(0, n - FREE_ROWS) * ROW_PX for n in rows)
        if rows[0] and canvas.frame_now.px(bounds[:2]).x() < canvas.scale_bar.REACH[0]:
            down = max(down, reach_of(rows[0]) + canvas.scale_bar.REACH[1] - BOTTOM)
        if max(down, left) <= 0.0:
            return
        for _ in range(3):  # room in pixels is worth more millimetres the farther off one stands
            scale = canvas.frame_now.scale
            x0, y0, x1, y1 = bounds
            canvas.show_box((x0 - left / scale, y0 - down / scale, x1, y1))

    def make_room(self) -> None:
        """Fit again where rows of dimensions reach beyond the view and the part does not."""
        bounds = self._canvas.drawn.exact_bounds
        if bounds is None or not self.item.marks:
            return
        frame, view = self._canvas.frame_now, QRectF(self._canvas.viewport().rect())
        low, high = frame.px(bounds[:2]), frame.px(bounds[2:])
        below, beside = rows_of(self.item.marks)
        outer = low + QPointF(-reach_of(beside), reach_of(below))
        if view.contains(low) and view.contains(high) and not view.contains(outer):
            self._canvas.fit()


def with_spin(drawn: DrawnPart) -> tuple[float, float, float, float] | None:
    """What a fitted view shows [mm]: all that is drawn, and the points that the part turns about
    unless they are far off."""
    if drawn.bounds is None:
        return None
    x0, y0, x1, y1 = drawn.bounds
    size = max(x1 - x0, y1 - y0)
    for case in drawn.part.cases:
        for load in case.loads:
            if isinstance(load, SpinLoad):
                box = min(x0, load.x), min(y0, load.y), max(x1, load.x), max(y1, load.y)
                if max(box[2] - box[0], box[3] - box[1]) <= FARTHEST_SPIN * size:
                    x0, y0, x1, y1 = box
    return x0, y0, x1, y1
