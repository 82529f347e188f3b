"""Lines and arcs: a chain of places that closes to the outline or to a hole of any form."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, ClassVar

from PySide6.QtGui import QPainter

from screenapp.model import edits
from screenapp.model.curves import Curve, Segment, arc_through
from screenapp.model.edit_dimensions import values_of
from screenapp.model.expressions import evaluate
from screenapp.model.features import loops_of
from screenapp.model.hole_loops import ring_loop
from screenapp.model.part import Loop, Part, Point
from screenapp.window.board import sketch
from screenapp.window.board.frame import Frame
from screenapp.window.board.snapping import Snap
from screenapp.window.board.tools.base import Tool
from screenapp.window.board.tools.drawing import NEXT_FIELDS, PLACE_FIELDS, DrawTool
from screenapp.window.board.tools.relative import place_expressions
from screenapp.window.board.typed_entry import EntryField

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas

OUTSIDE = (
    "The part has its outline already, and this ring is not inside it: "
    "draw inside it for a hole, or remove the outline first."
)


@dataclass
class Draft:
    """A chain half drawn, shared by the tools for lines and for arcs.

    Attributes:
        points: places set.
        throughs: for each edge between them, the place its arc passes, None if straight.
        end: end of an arc whose place to pass is still to be given.
        given: for each place set by typing, the expressions of x and y.
    """

    points: list[Point] = field(default_factory=list)
    throughs: list[Point | None] = field(default_factory=list)
    end: Point | None = None
    given: dict[Point, dict[str, str | None]] = field(default_factory=dict)

    def clear(self) -> None:
        """Nothing is drawn."""
        self.points, self.throughs, self.end = [], [], None
        self.given = {}

    def expressions(self, loop: Loop, field_: str) -> dict[str, str | None]:
        """By field, the expressions that give the corners of the loop drawn."""
        return {
            f"{field_}.corners.{corner.id}.at.{axis}": texts[name]
            for corner in loop.corners
            for axis, name in enumerate("xy")
            if (texts := self.given.get(corner.at, {})).get(name)
        }

    def step_back(self) -> bool:
        """Drop the last thing set; False if there was none."""
        if self.end is not None:
            self.end = None
        elif self.points:
            self.points.pop()
            if self.throughs:
                self.throughs.pop()
        else:
            return False
        return True

    @property
    def can_close(self) -> bool:
        """Whether a straight edge back to the start would close a ring."""
        n = len(self.points)
        return n >= 3 or (n == 2 and self.throughs[0] is not None)

    @property
    def can_close_by_arc(self) -> bool:
        """Whether an arc back to the start would close a ring."""
        return len(self.points) >= 2

    def edges(self) -> list[Curve]:
        """The edges set so far."""
        return [
            Segment(a, b) if through is None else arc_through(a, through, b)
            for a, b, through in zip(self.points, self.points[1:], self.throughs, strict=False)
        ]


class LinesTool(DrawTool):
    """Click, click, ... and close on the first place or with Enter."""

    name: ClassVar[str] = "Lines"
    key: ClassVar[str] = "L"
    line: ClassVar[str] = "Click corner after corner; close on the first one or press Enter."
    icon: ClassVar[str] = "lines"

    def __init__(self, canvas: Canvas, draft: Draft) -> None:
        super().__init__(canvas)
        self.draft = draft
        self._drafted: tuple[object, Part] | None = None

    def stop(self, following: Tool | None) -> None:
        """The draft goes on if the following tool draws chains too."""
        self.typed = {}
        if not isinstance(following, LinesTool):
            self.draft.clear()

    def step_back(self) -> bool:
        """Drop the last place."""
        return self.draft.step_back()

    def hint(self) -> str:
        """What the next click does."""
        if not self.draft.points:
            return "Click the first corner."
        if self.draft.can_close:
            return "Click the next corner; Enter closes the ring."
        return "Click the next corner."

    def snap_points(self) -> tuple[Snap, ...]:
        """The places set; the first closes the ring."""
        closes = self.draft.can_close and self.draft.end is None
        return tuple(
            Snap("start" if i == 0 and closes else "corner", p)
            for i, p in enumerate(self.draft.points)
        )

    def point_from(self) -> Point | None:
        """The last place set."""
        return self.draft.points[-1] if self.draft.points else None

    def entry_fields(self) -> tuple[EntryField, ...]:
        """A place, or from the second on also a length and an angle."""
        return NEXT_FIELDS if self.draft.points else PLACE_FIELDS

    def accept_point(self, at: Point) -> None:
        """Set the next place, or close."""
        points = self.draft.points
        if points and math.dist(at, points[0]) < 1e-9 and self.draft.can_close:
            self.close(None)
        elif not points or math.dist(at, points[-1]) > 1e-9:
            if points:
                self.draft.throughs.append(None)
            points.append(self.keep(at))

    def keep(self, at: Point) -> Point:
        """Remember what gives a place that is about to follow the last one; the place as that
        gives it, to the last digit."""
        taken, points = self.canvas.entry.taken, self.draft.points
        texts: dict[str, str | None] = dict(taken)
        if points:
            given = self.draft.given.get(points[-1], {})
            texts, remark = place_expressions(points[-1], given, taken, at)
            if remark:
                self.say(remark)
        known = values_of(self.canvas.document.part)
        x, y = (
            evaluate(t, known) if (t := texts.get(n)) else v for n, v in zip("xy", at, strict=True)
        )
        self.draft.given[(x, y)] = texts
        return x, y

    def enter(self) -> None:
        """Close the ring."""
        if self.draft.can_close:
            self.close(None)
        elif self.draft.points:
            self.say("A ring needs at least three corners, or two with an arc.")

    def drafted(self) -> Part | None:
        """With the ring closed straight, so that it is seen where it would cross itself."""
        draft, part = self.draft, self.canvas.document.part
        if not draft.can_close or draft.end is not None:
            return None
        key = part, tuple(draft.points), tuple(draft.throughs)
        if self._drafted is None or self._drafted[0] != key:
            throughs = [*draft.throughs, None]
            try:
                made = (
                    edits.set_outline(part, draft.points, throughs).part
                    if part.outline is None
                    else edits.add_loop_hole(part, draft.points, throughs)
                )
            except edits.EditError:
                made = part
            self._drafted = key, made
        return self._drafted[1]

    def _expressions(self, made: Part) -> dict[str, str | None]:
        """Those typed for the corners of the loop that was just drawn."""
        where, _, loop = list(loops_of(made))[-1]
        return self.draft.expressions(loop, where)

    def close(self, through: Point | None) -> None:
        """Make the chain the outline, or a hole in it."""
        part = self.canvas.document.part
        points, throughs = list(self.draft.points), [*self.draft.throughs, through]
        if part.outline is None:
            done = self.apply(
                "draw the outline",
                lambda: edits.set_outline(part, points, throughs),
                self._expressions,
            )
        elif self.fits_inside(ring := ring_loop(points, throughs)):
            done = self.apply(
                "draw a hole",
                lambda: edits.add_loop_hole(part, points, throughs),
                self._expressions,
            )
        elif self.ask_ring(ring, points[-1], self._closed):
            return
        else:
            self.say(OUTSIDE)
            return
        if done:
            self._closed()

    def _closed(self) -> None:
        self.draft.clear()
        self.canvas.tool_wanted.emit("Select")

    def paint(self, painter: QPainter, frame: Frame) -> None:
        """The chain, and the edge that a click would add."""
        units = self.canvas.part.display_units
        for piece in self.draft.edges():
            sketch.curve(painter, frame, piece)
        at = self.point()
        if self.draft.points and at is not None:
            self.paint_next(painter, frame, at)
            sketch.measure(painter, frame, self.draft.points[-1], at, units)
        for point in self.draft.points:
            sketch.dot(painter, frame, point)
        if self.typed and at is not None:
            sketch.dot(painter, frame, at)

    def paint_next(self, painter: QPainter, frame: Frame, at: Point) -> None:
        """The edge that a click would add."""
        sketch.segment(painter, frame, self.draft.points[-1], at, dashed=True)
