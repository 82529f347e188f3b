"""Put a probe: a place whose stress and displacement are read."""

from __future__ import annotations

from typing import ClassVar

from PySide6.QtCore import Qt

from screenapp.model import edits
from screenapp.model.part import Point
from screenapp.window.board.drawn_part import DrawnPart
from screenapp.window.board.snapping import SnapKind
from screenapp.window.board.tools.base import Place
from screenapp.window.board.tools.drawing import PLACE_FIELDS, DrawTool
from screenapp.window.board.typed_entry import EntryField


class ProbeTool(DrawTool):
    """Stays in hand; snaps exactly onto edges, fillets and rims."""

    name: ClassVar[str] = "Probe"
    key: ClassVar[str] = "P"
    line: ClassVar[str] = "Click a place of the part to read its stress and displacement."
    icon: ClassVar[str] = "probe"
    group: ClassVar[str] = "readings"
    passes_over: ClassVar[frozenset[SnapKind]] = frozenset({"centre"})

    @property
    def cursor(self) -> Qt.CursorShape:
        """A hand over a probe that would be taken up; a sign where nothing can be read."""
        place = self.canvas.place
        if place is None:
            return Qt.CursorShape.CrossCursor
        if place.hit is not None and place.hit.kind == "probe":
            return Qt.CursorShape.PointingHandCursor
        reads = on_material(self.canvas.drawn, place.at)
        return Qt.CursorShape.CrossCursor if reads else Qt.CursorShape.ForbiddenCursor

    def entry_fields(self) -> tuple[EntryField, ...]:
        """A place."""
        return PLACE_FIELDS

    def press(self, place: Place) -> None:
        """Put one there, or take up the one that is there already."""
        if place.hit is not None and place.hit.kind == "probe" and not self.typed:
            self.canvas.document.select(place.hit.id)
            return
        super().press(place)

    def double(self, place: Place) -> None:
        """A double-click puts one probe only."""

    def accept_point(self, at: Point) -> None:
        """Put a probe."""
        part = self.canvas.document.part
        if not on_material(self.canvas.drawn, at):
            self.say("There is no material at that place: click on the part.")
            return
        taken = self.canvas.entry.taken
        if self.apply(
            "put a probe",
            lambda: edits.add_probe(part, at),
            lambda made: {
                f"readings.{made.readings[-1].id}.at.{i}": taken.get(name)
                for i, name in enumerate("xy")
            },
        ):
            self.canvas.document.select(self.canvas.document.part.readings[-1].id)


def on_material(drawn: DrawnPart, at: Point) -> bool:
    """Whether a place is on the part; its boundary counts."""
    size = 1.0
    if drawn.bounds is not None:
        x0, y0, x1, y1 = drawn.bounds
        size = max(x1 - x0, y1 - y0)
    for piece in drawn.pieces:
        x, y = piece.curve.point(piece.curve.nearest(at))
        if abs(x - at[0]) + abs(y - at[1]) <= 1e-9 * size:
            return True
    if drawn.part.outline is None or not drawn.inside(at):
        return False
    return not any(
        hole is not None and drawn.inside(at, loop) for loop, hole in enumerate(drawn.hole_ids)
    )
