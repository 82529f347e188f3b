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
from screenapp.window.board.tools.base import Place
from screenapp.window.board.tools.two_places import TwoPlaceTool
from screenapp.window.board.typed_entry import EntryField

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas

SIZE_FIELDS = (
    EntryField("diameter", "diameter", "length", ("radius",)),
    EntryField("radius", "or radius", "length", ("diameter",)),
)


class CircleTool(TwoPlaceTool):
    """Stays in hand, for holes seldom come alone."""

    name: ClassVar[str] = "Round hole"
    key: ClassVar[str] = "C"
    line: ClassVar[str] = "Click the centre, then the rim; or type the diameter."
    icon: ClassVar[str] = "circle"
    group: ClassVar[str] = "holes"
    hints: ClassVar[tuple[str, str]] = ("Click the centre of the hole.", "Click the rim.")
    second_fields: ClassVar[tuple[EntryField, ...]] = SIZE_FIELDS

    def __init__(self, canvas: Canvas) -> None:
        super().__init__(canvas)
        self._given: dict[str, str | None] = {}
        self._exact: float | None = None

    @property
    def radius(self) -> float | None:
        """The radius that a click would give [mm]."""
        if "radius" in self.typed:
            return self.typed["radius"]
        if "diameter" in self.typed:
            return self.typed["diameter"] / 2.0
        place = self.canvas.place
        return None if self.first is None or place is None else math.dist(self.first, place.at)

    def entry_accept(self, values: dict[str, float]) -> None:
        """Take the size as it was typed."""
        self._exact = values.get("diameter")
        if "radius" in values:
            self._exact = 2.0 * values["radius"]
        super().entry_accept(values)
        self._exact = None

    def typed_point(self, cursor: Point | None) -> Point | None:
        """Once the centre is set: a place on the rim."""
        if self.first is None:
            return super().typed_point(cursor)
        radius = self.radius
        return None if radius is None else (self.first[0] + radius, self.first[1])

    def entry_live(self) -> dict[str, float]:
        """Place or sizes."""
        if self.first is None:
            return super().entry_live()
        radius = self.radius
        return {} if radius is None else {"diameter": 2.0 * radius, "radius": radius}

    def accept_point(self, at: Point) -> None:
        """Set the centre, then the size."""
        taken = self.canvas.entry.taken
        if self.first is None:
            self.first, self._given = at, taken
            return
        part, centre = self.canvas.document.part, self.first
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
        self.first = None

    def press(self, place: Place) -> None:
        """A second click on the centre itself is no size."""
        if self.first is not None and not self.typed and self.radius == 0.0:
            return
        super().press(place)

    def enter(self) -> None:
        """Take the size under the cursor."""
        at = self.point()
        if self.first is not None and at is not None:
            self.accept_point(at)

    def paint_between(self, painter: QPainter, frame: Frame, first: Point, _at: Point) -> None:
        """The circle with its sizes."""
        radius = self.radius
        if radius is None:
            return
        middle, wide = frame.px(first), radius * frame.scale
        painter.setPen(sketch.line_pen())
        painter.setBrush(Qt.BrushStyle.NoBrush)
        painter.drawEllipse(middle, wide, wide)
        text = f"⌀ {written(2.0 * radius, 'length', self.canvas.part.display_units)}"
        sketch.label(painter, text, middle + QPointF(0.0, -wide - 14.0))
