"""Zones: a rectangle drawn, or a hole filled, with a thickness of its own."""

from __future__ import annotations

from functools import partial
from typing import TYPE_CHECKING, ClassVar

from screenapp.model import edits
from screenapp.model.features import find, loops_of
from screenapp.model.part import Corner, Edge, Loop, Part, Point
from screenapp.window.board.tools.rectangle import RectangleTool
from screenapp.window.commands import Command

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas

UNDRAWN = "Draw the outline first."


class ZoneTool(RectangleTool):
    """Draws a pad of twice the wall; the sheet then changes its thickness and material."""

    name: ClassVar[str] = "Zone"
    key: ClassVar[str] = "Z"
    line: ClassVar[str] = (
        "Click two opposite corners of a pad, pocket or rib; it may reach over the edge."
    )
    icon: ClassVar[str] = "zone"
    group: ClassVar[str] = ""

    def __init__(self, canvas: Canvas) -> None:
        super().__init__(canvas)
        self._commands = (
            Command(
                "Hole into zone, zone into hole",
                "Fills the selected holes with zones, or cuts the selected zones out.",
                ("Shift+Z",),
                self._convert,
                ready=lambda: bool(self._convertible()),
            ),
        )

    def commands(self) -> tuple[Command, ...]:
        """Turning holes into zones and back."""
        return self._commands

    def hint(self) -> str:
        """What the next click does."""
        if self.canvas.document.part.outline is None:
            return UNDRAWN
        if self.first is None:
            return "Click the first corner of the zone."
        return "Click the opposite corner."

    def accept_point(self, at: Point) -> None:
        """Set the first corner, then draw."""
        part = self.canvas.document.part
        if part.outline is None:
            self.say(UNDRAWN)
            return
        taken = self.canvas.entry.taken
        if self.first is None:
            self.first, self._given = at, taken
            return
        first = self.first

        def keep(made: Part) -> dict[str, str | None]:
            where, _, loop = list(loops_of(made))[-1]
            return self._expressions(loop, where, taken, at)

        if self.apply("draw a zone", lambda: _drawn(part, first, at), keep):
            self.first = None
            self.canvas.document.select(self.canvas.document.part.zones[-1].id)
            self.canvas.tool_wanted.emit("Select")

    def _convertible(self) -> list[str]:
        document = self.canvas.document
        found = [(id_, find(document.part, id_)) for id_ in document.selection]
        return [id_ for id_, f in found if f is not None and f.kind in ("hole", "zone")]

    def _convert(self) -> None:
        document, made = self.canvas.document, []
        for id_ in self._convertible():
            if id_ in self.canvas.drawn.zones:
                cut = partial(edits.zone_to_hole, document.part, id_)
                if self.apply(f"zone {id_} into hole", cut):
                    made.append(document.part.holes[-1].id)
            else:
                fill = partial(edits.hole_to_zone, document.part, id_)
                if self.apply(f"hole {id_} into zone", fill):
                    made.append(document.part.zones[-1].id)
        if made:
            document.select(*made)


def _drawn(part: Part, one: Point, other: Point) -> Part:
    """The part with a rectangular zone between two corners.

    Raises:
        EditError: it has no area.
    """
    places = edits.rectangle_corners(one, other)
    corners, edges = edits.new_ids(part, "c", 4), edits.new_ids(part, "e", 4)
    loop = Loop(
        tuple(Corner(id_, at) for id_, at in zip(corners, places, strict=True)),
        tuple(Edge(id_) for id_ in edges),
    )
    return edits.add_zone(part, loop)
