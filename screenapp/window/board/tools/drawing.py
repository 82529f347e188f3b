"""Base of the tools that draw: places from the cursor, overridden by what is typed."""

from __future__ import annotations

import math
from collections.abc import Callable
from typing import TYPE_CHECKING

from PySide6.QtCore import Qt
from PySide6.QtGui import QKeyEvent

from screenapp.model import edits
from screenapp.model.part import Loop, Point
from screenapp.window.board.tools.base import Place, Tool
from screenapp.window.board.typed_entry import EntryField

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas

PLACE_FIELDS = (EntryField("x", "x"), EntryField("y", "y"))
NEXT_FIELDS = (
    EntryField("x", "x", "length", ("length", "angle")),
    EntryField("y", "y", "length", ("length", "angle")),
    EntryField("length", "length", "length", ("x", "y")),
    EntryField("angle", "angle", "angle", ("x", "y")),
)


class DrawTool(Tool):
    """Keeps what is typed and the last place of the cursor."""

    def __init__(self, canvas: Canvas) -> None:
        super().__init__(canvas)
        self.typed: dict[str, float] = {}

    def accept_point(self, at: Point) -> None:
        """A place was clicked or typed."""
        raise NotImplementedError

    def point_from(self) -> Point | None:
        """The place that length and angle are counted from; None before the first one."""
        return None

    def point(self) -> Point | None:
        """The place that a click or Enter would take now."""
        place = self.canvas.place
        return self.typed_point(place.at if place is not None else None)

    def typed_point(self, cursor: Point | None) -> Point | None:
        """A cursor place with the typed values put in; None if too little is known."""
        typed, origin = self.typed, self.point_from()
        if origin is not None and ("length" in typed or "angle" in typed):
            gap = (0.0, 0.0) if cursor is None else (cursor[0] - origin[0], cursor[1] - origin[1])
            length = typed.get("length", math.hypot(*gap))
            angle = math.radians(typed["angle"]) if "angle" in typed else math.atan2(*gap[::-1])
            step = (length * math.cos(angle), length * math.sin(angle))
            # what is level or upright is so to the last digit
            dx, dy = (0.0 if abs(v) <= 1e-12 * length else v for v in step)
            return origin[0] + dx, origin[1] + dy
        if cursor is None:
            return (typed["x"], typed["y"]) if {"x", "y"} <= typed.keys() else None
        return typed.get("x", cursor[0]), typed.get("y", cursor[1])

    def press(self, place: Place) -> None:
        """Take the place."""
        at = self.typed_point(place.at)
        self.typed = {}
        self.canvas.entry.forget()
        if at is not None:
            self.accept_point(at)

    def double(self, place: Place) -> None:
        """Two quick clicks are two clicks."""
        self.press(place)

    def key_press(self, event: QKeyEvent) -> bool:
        """Enter takes the place under the cursor."""
        if event.key() in (Qt.Key.Key_Return, Qt.Key.Key_Enter):
            self.canvas.entry.forget()
            self.enter()
            return True
        return super().key_press(event)

    def fits_inside(self, ring: Loop) -> bool:
        """Whether a ring lies inside the outline and crosses nothing, so that it makes a hole."""
        drawn, part = self.canvas.drawn, self.canvas.document.part
        return drawn.inside(ring.corners[0].at) and not edits.ring_meets(part, ring)

    def ask_ring(self, ring: Loop, at: Point, then: Callable[[], None]) -> bool:
        """Ask whether a ring that crosses the part is cut out or joined; False if it does not."""
        near = self.canvas.frame_now.px(at).toPoint()
        return self.canvas.ring_choice.offer(self, ring, near, then)

    def enter(self) -> None:
        """Enter with nothing typed."""

    def entry_typed(self, values: dict[str, float]) -> None:
        """Keep them for the preview."""
        self.typed = dict(values)

    def entry_live(self) -> dict[str, float]:
        """The place under the cursor, and seen from the last one."""
        at, origin = self.point(), self.point_from()
        if at is None:
            return {}
        live = {"x": at[0], "y": at[1]}
        if origin is not None:
            live["length"] = math.dist(origin, at)
            live["angle"] = math.degrees(math.atan2(at[1] - origin[1], at[0] - origin[0]))
        return live

    def entry_accept(self, values: dict[str, float]) -> None:
        """Take the typed place; with nothing typed, Enter means what it means without the row."""
        self.typed = dict(values)
        at = self.point()
        self.typed = {}
        if not values:
            self.enter()
        elif at is not None:
            self.accept_point(at)
