"""A round hole by its centre and radius."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, ClassVar

from PySide6.QtCore import QPointF, Qt
from PySide6.QtGui import QPainter

from screenapp.model import edits
from screenapp.model.hole_loops import circle_loop
from screenapp.model.part import Point
from screenapp.window.board import sketch
from screenapp.window.board.frame import Frame
from screenapp.window.board.quantity import written
from screenapp.window.board.tools.base import Place, Tool
from screenapp.window.board.tools.drawing import PLACE_FIELDS, DrawTool
from screenapp.window.board.typed_entry import EntryField

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas

SIZE_FIELDS = (
    EntryField("diameter", "diameter", "length", ("radius",)),
    EntryField("radius", "or radius", "length", ("diameter",)),
)


class CircleTool(DrawTool):
    """Stays in hand, for holes seldom come alone."""

    name: ClassVar[str] = "Round hole"
    key: ClassVar[str] = "C"
    line: ClassVar[str] = "Click the centre, then the rim; or type the diameter."
    icon: ClassVar[str] = "circle"
    group: ClassVar[str] = "holes"

    def __init__(self, canvas: Canvas) -> None:
        super().__init__(canvas)
        self.centre: Point | None = None
        self._given: dict[str, str | None] = {}
        self._exact: float | None = None

    def stop(self, following: Tool | None) -> None:
        """Drop the centre."""
        self.centre = None
        self.typed = {}

    def step_back(self) -> bool:
        """Drop the centre."""
        had, self.centre = self.centre is not None, None
        return had

    def hint(self) -> str:
        """What the next click does."""
        return "Click the centre of the hole." if self.centre is None else "Click the rim."

    def entry_fields(self) -> tuple[EntryField, ...]:
        """A place, then a size."""
        return PLACE_FIELDS if self.centre is None else SIZE_FIELDS

    @property
    def radius(self) -> float | None:
        """The radius that a click would give [mm]."""
        if "radius" in self.typed:
            return self.typed["radius"]
        if "diameter" in self.typed:
            return self.typed["diameter"] / 2.0
        place = self.canvas.place
        return None if self.centre is None or place is None else math.dist(self.centre, place.at)

    def entry_accept(self, values: dict[str, float]) -> None:
        """Take the size as it was typed."""
        self._exact = values.get("diameter")
        if "radius" in values:
            self._exact = 2.0 * values["radius"]
        super().entry_accept(values)
        self._exact = None

    def typed_point(self, cursor: Point | None) -> Point | None:
        """Once the centre is set: a place on the rim."""
        if self.centre is None:
            return super().typed_point(cursor)
        radius = self.radius
        return None if radius is None else (self.centre[0] + radius, self.centre[1])

    def entry_live(self) -> dict[str, float]:
        """Place or sizes."""
        if self.centre is None:
            return super().entry_live()
        radius = self.radius
        return {} if radius is None else {"diameter": 2.0 * radius, "radius": radius}

    def accept_point(self, at: Point) -> None:
        """Set the centre, then the size."""
        taken = self.canvas.entry.taken
        if self.centre is None:
            self.centre, self._given = at, taken
            return
        part, centre = self.canvas.document.part, self.centre
        diameter = self._exact if self._exact is not None else 2.0 * (at[0] - centre[0])
        if diameter > 0.0 and self.ask_ring(circle_loop(centre, diameter), at, self._drawn):
            return
        radius = taken.get("radius")
        texts = {
            "centre.0": self._given.get("x"),
            "centre.1": self._given.get("y"),
            "diameter": f"2*({radius})" if radius else taken.get("diameter"),
        }
        if self.apply(
            "draw a hole",
            lambda: edits.add_circle_hole(part, centre, diameter),
            lambda made: {f"holes.{made.holes[-1].id}.{k}": text for k, text in texts.items()},
        ):
            self._drawn()

    def _drawn(self) -> None:
        self.centre = None

    def press(self, place: Place) -> None:
        """A second click on the centre itself is no size."""
        if self.centre is not None and not self.typed and self.radius == 0.0:
            return
        super().press(place)

    def enter(self) -> None:
        """Take the size under the cursor."""
        at = self.point()
        if self.centre is not None and at is not None:
            self.accept_point(at)

    def paint(self, painter: QPainter, frame: Frame) -> None:
        """The circle with its sizes."""
        radius, at = self.radius, self.point()
        if self.centre is None:
            if self.typed and at is not None:
                sketch.dot(painter, frame, at)
            return
        middle = frame.px(self.centre)
        if radius is not None:
            painter.setPen(sketch.line_pen())
            painter.setBrush(Qt.BrushStyle.NoBrush)
            wide = radius * frame.scale
            painter.drawEllipse(middle, wide, wide)
            units = self.canvas.part.display_units
            text = f"⌀ {written(2.0 * radius, 'length', units)}"
            sketch.label(painter, text, middle + QPointF(0.0, -wide - 14.0))
        sketch.dot(painter, frame, self.centre)
