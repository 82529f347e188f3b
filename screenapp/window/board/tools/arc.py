"""Arcs: as edges of a chain, or an edge of the part bent to one."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, ClassVar

from PySide6.QtCore import Qt
from PySide6.QtGui import QPainter

from screenapp.model import edits
from screenapp.model.curves import Arc, arc_through
from screenapp.model.features import loops_of
from screenapp.model.part import Part, Point
from screenapp.window.board import sketch
from screenapp.window.board.frame import Frame
from screenapp.window.board.tools.base import Tool
from screenapp.window.board.tools.chain import Draft, LinesTool
from screenapp.window.board.typed_entry import EntryField

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas

THROUGH_FIELDS = (
    EntryField("x", "through x", "length", ("radius",)),
    EntryField("y", "y", "length", ("radius",)),
    EntryField("radius", "or radius", "length", ("x", "y")),
)


RADIUS_KEPT = "The radius of an arc is kept as a number: an arc stands by the places it passes."


class ArcTool(LinesTool):
    """An arc by three places: its ends, then a place it passes; or turns an edge into an arc."""

    name: ClassVar[str] = "Arc"
    key: ClassVar[str] = "A"
    line: ClassVar[str] = "Click both ends, then a place it passes; or click an edge to bend it."
    icon: ClassVar[str] = "arc"
    group: ClassVar[str] = "arcs"

    def __init__(self, canvas: Canvas, draft: Draft) -> None:
        super().__init__(canvas, draft)
        self.bending: str | None = None

    @property
    def cursor(self) -> Qt.CursorShape:
        """A hand over an edge that a click would take up to bend."""
        place = self.canvas.place
        over = place is not None and place.hit is not None and place.hit.kind == "edge"
        free = self.bending is None and not self.draft.points
        return Qt.CursorShape.PointingHandCursor if over and free else Qt.CursorShape.CrossCursor

    def stop(self, following: Tool | None) -> None:
        """Drop a bend half done."""
        self.bending = None
        self.draft.end = None
        super().stop(following)

    def part_changed(self) -> None:
        """The edge may be gone."""
        self.bending = None

    def step_back(self) -> bool:
        """Drop the bend, or the last place."""
        if self.bending is not None:
            self.bending = None
            return True
        return super().step_back()

    def hint(self) -> str:
        """What the next click does."""
        if self.bending is not None or self.draft.end is not None:
            return "Click a place that the arc passes, or type its radius."
        return "Click the end of the arc." if self.draft.points else self.line

    def unsnapped(self) -> frozenset[str]:
        """An edge being bent must not draw the cursor onto itself."""
        return frozenset() if self.bending is None else frozenset({self.bending})

    def ends(self) -> tuple[Point, Point] | None:
        """The ends of the arc whose third place is being given."""
        if self.bending is not None:
            return ends_of(self.canvas.document.part, self.bending)
        if self.draft.end is not None:
            return self.draft.points[-1], self.draft.end
        return None

    def point_from(self) -> Point | None:
        """Length and angle count only while the end is being given."""
        return None if self.ends() is not None else super().point_from()

    def entry_fields(self) -> tuple[EntryField, ...]:
        """A place, or the radius once both ends are set."""
        return THROUGH_FIELDS if self.ends() is not None else super().entry_fields()

    def typed_point(self, cursor: Point | None) -> Point | None:
        """The third place may be given by a radius."""
        ends = self.ends()
        if ends is not None and "radius" in self.typed:
            return crown(*ends, self.typed["radius"], cursor)
        return super().typed_point(cursor)

    def entry_live(self) -> dict[str, float]:
        """With the radius."""
        live, ends, at = super().entry_live(), self.ends(), self.point()
        if ends is not None and at is not None:
            arc = arc_through(ends[0], at, ends[1])
            if isinstance(arc, Arc):
                live["radius"] = arc.radius
        return live

    def accept_point(self, at: Point) -> None:
        """An end, or the place passed."""
        ends, place = self.ends(), self.canvas.place
        if self.bending is not None:
            edge, self.bending = self.bending, None
            part = self.canvas.document.part
            if self.apply("bend an edge", lambda: edits.set_edge_arc(part, edge, at)):
                self.canvas.tool_wanted.emit("Select")
        elif ends is not None:
            self._set_through(at)
        elif self.draft.points:
            if math.dist(at, self.draft.points[-1]) > 1e-9:
                self.draft.end = self.keep(at)
        elif place is not None and place.hit is not None and place.hit.kind == "edge":
            self.bending = place.hit.id
        else:
            self.draft.points.append(self.keep(at))

    def _set_through(self, at: Point) -> None:
        if self.canvas.entry.taken.get("radius"):
            self.say(RADIUS_KEPT)
        end = self.draft.end
        assert end is not None
        self.draft.end = None
        if math.dist(end, self.draft.points[0]) < 1e-9:
            self.close(at)
        else:
            self.draft.throughs.append(at)
            self.draft.points.append(end)

    def paint(self, painter: QPainter, frame: Frame) -> None:
        """The chain, and the arc as a click would make it."""
        ends, at = self.ends(), self.point()
        if ends is None or at is None:
            super().paint(painter, frame)
            return
        for piece in self.draft.edges():
            sketch.curve(painter, frame, piece)
        arc = arc_through(ends[0], at, ends[1])
        sketch.curve(painter, frame, arc)
        middle = frame.px((float(arc.point(0.5)[0]), float(arc.point(0.5)[1])))
        chord = (frame.px(ends[0]) + frame.px(ends[1])) / 2.0
        away = middle - chord
        far = math.hypot(away.x(), away.y())
        text = sketch.arc_text(arc, self.canvas.part.display_units)
        if far > 1.0:
            middle += away * (22.0 / far)
        sketch.label(painter, text, middle)
        for point in (*self.draft.points, *ends):
            sketch.dot(painter, frame, point)


def crown(a: Point, b: Point, radius: float, towards: Point | None) -> Point | None:
    """The middle of the arc of `radius` [mm] from `a` to `b`, on the side of `towards`.

    The shorter arc is taken unless `towards` lies farther out than half the chord; None if the
    radius is less than half the chord.
    """
    half = math.dist(a, b) / 2.0
    if radius < half or half == 0.0:
        return None
    nx, ny = (a[1] - b[1]) / (2.0 * half), (b[0] - a[0]) / (2.0 * half)
    mx, my = (a[0] + b[0]) / 2.0, (a[1] + b[1]) / 2.0
    out = half if towards is None else (towards[0] - mx) * nx + (towards[1] - my) * ny
    flat = math.sqrt(radius * radius - half * half)
    rise = radius + flat if abs(out) > half * (1.0 + 1e-9) else radius - flat
    rise = math.copysign(rise, out) if out else rise
    return mx + rise * nx, my + rise * ny


def ends_of(part: Part, edge: str) -> tuple[Point, Point] | None:
    """The corners that an edge joins [mm]; None if there is no such edge."""
    for _, _, loop in loops_of(part):
        for i, e in enumerate(loop.edges):
            if e.id == edge:
                return loop.corners[i].at, loop.corners[(i + 1) % len(loop.corners)].at
    return None
