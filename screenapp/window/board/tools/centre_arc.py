"""An arc of a chain about its centre."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, ClassVar

from PySide6.QtGui import QPainter

from screenapp.model.curves import Arc, arc_about
from screenapp.model.part import Point
from screenapp.window.board import sketch
from screenapp.window.board.frame import Frame
from screenapp.window.board.tools.base import Place
from screenapp.window.board.tools.chain import Draft, LinesTool
from screenapp.window.board.tools.drawing import PLACE_FIELDS
from screenapp.window.board.typed_entry import EntryField

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas

CENTRE_FIELDS = (EntryField("x", "centre x"), EntryField("y", "y"))
SWEEP_FIELDS = (EntryField("sweep", "turns by", "angle"),)


class CentreArcTool(LinesTool):
    """Start, centre, then how far it turns; the side is that on which the cursor went round."""

    name: ClassVar[str] = "Centre arc"
    key: ClassVar[str] = "E"
    line: ClassVar[str] = "Click the start, the centre, then where the arc ends."
    icon: ClassVar[str] = "centre-arc"
    group: ClassVar[str] = "arcs"

    def __init__(self, canvas: Canvas, draft: Draft) -> None:
        super().__init__(canvas, draft)
        self.centre: Point | None = None
        self._turned = 0.0

    def stop(self, following: object) -> None:
        """Drop the centre."""
        self.centre = None
        super().stop(following)  # type: ignore[arg-type]

    def step_back(self) -> bool:
        """Drop the centre, or the last place."""
        if self.centre is not None:
            self.centre = None
            return True
        return super().step_back()

    def hint(self) -> str:
        """What the next click does."""
        if not self.draft.points:
            return "Click the start of the arc."
        if self.centre is None:
            return "Click the centre of the arc."
        return "Go round to where the arc ends and click, or type its angle."

    def point_from(self) -> Point | None:
        """Length and angle count while the centre is being given."""
        return None if self.centre is not None else super().point_from()

    def entry_fields(self) -> tuple[EntryField, ...]:
        """A place, the centre, or the angle."""
        if self.centre is not None:
            return SWEEP_FIELDS
        return CENTRE_FIELDS if self.draft.points else PLACE_FIELDS

    def entry_live(self) -> dict[str, float]:
        """With the angle."""
        if self.centre is None:
            return super().entry_live()
        arc = self.arc()
        return {} if arc is None else {"sweep": math.degrees(arc.sweep)}

    def move(self, place: Place) -> None:
        """Keep count of how far the cursor went round the centre, so that both ways are open."""
        if self.centre is None or not self.draft.points:
            return
        (cx, cy), (sx, sy) = self.centre, self.draft.points[-1]
        x, y = place.at
        now = math.atan2(y - cy, x - cx) - math.atan2(sy - cy, sx - cx)
        step = math.remainder(now - self._turned, 2.0 * math.pi)
        self._turned = max(-2.0 * math.pi, min(2.0 * math.pi, self._turned + step))

    def arc(self) -> Arc | None:
        """The arc that a click would make."""
        if self.centre is None or not self.draft.points:
            return None
        start = self.draft.points[-1]
        if "sweep" in self.typed:
            sweep = math.radians(self.typed["sweep"])
            if not 1e-9 < abs(sweep) < 2.0 * math.pi - 1e-9:
                return None
            begin = math.atan2(start[1] - self.centre[1], start[0] - self.centre[0])
            return Arc(self.centre, math.dist(self.centre, start), begin, sweep)
        place = self.canvas.place
        if place is None:
            return None
        made = arc_about(self.centre, start, place.at, left=self._turned >= 0.0)
        return made if isinstance(made, Arc) else None

    def typed_point(self, cursor: Point | None) -> Point | None:
        """Once the centre is set: the arc's end."""
        if self.centre is None:
            return super().typed_point(cursor)
        arc = self.arc()
        return None if arc is None else arc.end

    def press(self, place: Place) -> None:
        """A typed angle counts for a click too."""
        if self.centre is None:
            super().press(place)
            return
        self._finish()
        self.typed = {}
        self.canvas.entry.forget()

    def accept_point(self, at: Point) -> None:
        """The start, the centre, or the end."""
        points = self.draft.points
        if not points:
            super().accept_point(at)
        elif self.centre is None:
            if math.dist(at, points[-1]) > 1e-9:
                self.centre, self._turned = at, 0.0
        else:
            self._finish()

    def entry_accept(self, values: dict[str, float]) -> None:
        """An angle ends the arc."""
        if self.centre is None:
            super().entry_accept(values)
            return
        self.typed = dict(values)
        self._finish()
        self.typed = {}

    def _finish(self) -> None:
        arc = self.arc()
        if arc is None:
            return
        self.centre = None
        x, y = arc.point(0.5)
        through, end = (float(x), float(y)), arc.end
        near = self.canvas.frame_now
        if self.draft.can_close_by_arc and (
            (near.px(end) - near.px(self.draft.points[0])).manhattanLength() < 1.0
        ):
            self.close(through)
        else:
            self.draft.throughs.append(through)
            self.draft.points.append(end)

    def paint(self, painter: QPainter, frame: Frame) -> None:
        """The chain, the centre and the arc."""
        if self.centre is None:
            super().paint(painter, frame)
            return
        for piece in self.draft.edges():
            sketch.curve(painter, frame, piece)
        sketch.segment(painter, frame, self.centre, self.draft.points[-1], dashed=True)
        arc = self.arc()
        if arc is not None:
            sketch.curve(painter, frame, arc)
            sketch.segment(painter, frame, self.centre, arc.end, dashed=True)
            units = self.canvas.part.display_units
            x, y = arc.point(0.5)
            at = frame.px((float(x), float(y)))
            sketch.label(painter, sketch.arc_text(arc, units), at)
        for point in (*self.draft.points, self.centre):
            sketch.dot(painter, frame, point)
