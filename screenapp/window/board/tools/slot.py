"""A slot by the centres of its two ends and its width."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, ClassVar

import numpy as np
from PySide6.QtCore import QPointF, Qt
from PySide6.QtGui import QPainter

from screenapp.model import edits
from screenapp.model.edit_dimensions import values_of
from screenapp.model.expressions import evaluate, plain_number
from screenapp.model.hole_loops import slot_loop
from screenapp.model.part import Point
from screenapp.window.board import sketch
from screenapp.window.board.frame import Floats, Frame, polygon
from screenapp.window.board.quantity import written
from screenapp.window.board.tools.base import Tool
from screenapp.window.board.tools.drawing import NEXT_FIELDS, PLACE_FIELDS, DrawTool
from screenapp.window.board.tools.relative import place_expressions
from screenapp.window.board.typed_entry import EntryField

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas

WIDTH_FIELDS = (EntryField("width", "width"),)


class SlotTool(DrawTool):
    """Two centres, then the width."""

    name: ClassVar[str] = "Slot"
    key: ClassVar[str] = "O"
    line: ClassVar[str] = "Click the centres of both ends, then the width."
    icon: ClassVar[str] = "slot"

    def __init__(self, canvas: Canvas) -> None:
        super().__init__(canvas)
        self.ends: list[Point] = []
        self._given: list[dict[str, str | None]] = []  # what was typed for each

    def stop(self, following: Tool | None) -> None:
        """Drop the ends."""
        self.ends, self._given = [], []
        self.typed = {}

    def step_back(self) -> bool:
        """Drop the last end."""
        if not self.ends:
            return False
        self.ends.pop()
        self._given.pop()
        return True

    def hint(self) -> str:
        """What the next click does."""
        return (
            "Click the centre of one end.",
            "Click the centre of the other end.",
            "Click where the width reaches.",
        )[len(self.ends)]

    def point_from(self) -> Point | None:
        """The first end."""
        return self.ends[0] if len(self.ends) == 1 else None

    def entry_fields(self) -> tuple[EntryField, ...]:
        """Places, then the width."""
        return (PLACE_FIELDS, NEXT_FIELDS, WIDTH_FIELDS)[len(self.ends)]

    @property
    def width(self) -> float | None:
        """The width that a click would give [mm]: twice the cursor's distance from the axis."""
        if "width" in self.typed:
            return self.typed["width"]
        place = self.canvas.place
        if len(self.ends) < 2 or place is None:
            return None
        (ax, ay), (bx, by) = self.ends
        cross = (bx - ax) * (place.at[1] - ay) - (by - ay) * (place.at[0] - ax)
        return 2.0 * abs(cross) / math.dist(*self.ends)

    def entry_live(self) -> dict[str, float]:
        """Place or width."""
        if len(self.ends) < 2:
            return super().entry_live()
        return {} if self.width is None else {"width": self.width}

    def entry_accept(self, values: dict[str, float]) -> None:
        """Places as ever; a width draws the slot."""
        if len(self.ends) < 2:
            super().entry_accept(values)
            return
        self.typed = dict(values)
        width = self.width
        self.typed = {}
        if width is not None:
            self._draw(width)

    def accept_point(self, at: Point) -> None:
        """Set an end, then the width."""
        if len(self.ends) == 2:
            width = self.width
            if width:
                self._draw(width)
        elif not self.ends or math.dist(self.ends[0], at) > 1e-9:
            self._given.append(self.canvas.entry.taken)
            self.ends.append(at)

    def enter(self) -> None:
        """Take the width under the cursor."""
        if len(self.ends) == 2 and self.width:
            self._draw(self.width)

    def _draw(self, width: float) -> None:
        part, (a, b) = self.canvas.document.part, self.ends
        values = {
            "centre.0": (a[0] + b[0]) / 2.0,
            "centre.1": (a[1] + b[1]) / 2.0,
            "length": math.dist(a, b) + width,
            "width": width,
            "angle": math.degrees(math.atan2(b[1] - a[1], b[0] - a[0])),
        }
        kept = self._expressions((values["centre.0"], values["centre.1"]), width)
        known = values_of(part)
        values |= {name: evaluate(text, known) for name, text in kept.items() if text}
        centre = values["centre.0"], values["centre.1"]
        sizes = values["length"], values["width"], values["angle"]
        if self.ask_ring(slot_loop(centre, *sizes), b, self._drawn):
            return
        if self.apply(
            "draw a slot",
            lambda: edits.add_slot_hole(part, centre, *sizes),
            lambda made: {f"holes.{made.holes[-1].id}.{name}": text for name, text in kept.items()},
        ):
            self._drawn()

    def _expressions(self, centre: Point, width: float) -> dict[str, str | None]:
        """What was typed gives the width, and with a length and angle the rest too."""
        wide = self.canvas.entry.taken.get("width")
        kept: dict[str, str | None] = {"width": wide}
        first, then = self._given
        if not {"length", "angle"} & then.keys():
            if any(first.values()) or any(then.values()):
                self.say("The ends of a slot are kept as numbers: type its length and angle.")
            return kept
        texts, remark = place_expressions(self.ends[0], first, then, centre, 0.5)
        if remark:
            self.say(remark)
            return kept
        long = then.get("length")
        if long or wide:
            between = f"({long})" if long else plain_number(math.dist(*self.ends))
            kept["length"] = f"{between} + " + (f"({wide})" if wide else plain_number(width))
        kept["angle"] = then.get("angle")
        return kept | {f"centre.{axis}": texts.get(name) for axis, name in enumerate("xy")}

    def _drawn(self) -> None:
        self.ends, self._given = [], []

    def paint(self, painter: QPainter, frame: Frame) -> None:
        """The slot as far as it is known."""
        units, at = self.canvas.part.display_units, self.point()
        if len(self.ends) == 1 and at is not None:
            sketch.segment(painter, frame, self.ends[0], at, dashed=True)
            sketch.measure(painter, frame, self.ends[0], at, units)
        if len(self.ends) == 2:
            one, two = self.ends
            sketch.segment(painter, frame, one, two, dashed=True)
            if (width := self.width) is not None:
                rim = slot_rim(one, two, width)
                painter.setPen(sketch.line_pen())
                painter.setBrush(Qt.BrushStyle.NoBrush)
                pixels = frame.pxs(rim)
                painter.drawPolygon(polygon(pixels))
                text = f"{written(width, 'length', units)} wide"
                top = pixels[int(np.argmin(pixels[:, 1]))]
                sketch.label(painter, text, QPointF(float(top[0]), float(top[1]) - 14.0))
        for end in self.ends:
            sketch.dot(painter, frame, end)
        if self.typed and len(self.ends) < 2 and at is not None:
            sketch.dot(painter, frame, at)


def slot_rim(a: Point, b: Point, width: float) -> Floats:
    """The rim of a slot with end centres `a` and `b` as points (n, 2) [mm]."""
    axis = math.atan2(b[1] - a[1], b[0] - a[0])
    half = np.linspace(-math.pi / 2.0, math.pi / 2.0, 25)
    ends = [
        np.asarray(end) + width / 2.0 * np.stack([np.cos(t), np.sin(t)], axis=-1)
        for end, t in ((b, axis + half), (a, axis + math.pi + half))
    ]
    return np.concatenate(ends)
