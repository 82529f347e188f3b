"""Mirrored copies: of selected holes about a line or edge, or of a half outline about an edge."""

from __future__ import annotations

from collections.abc import Callable
from typing import TYPE_CHECKING, ClassVar

from PySide6.QtCore import Qt
from PySide6.QtGui import QKeyEvent, QPainter

from screenapp.model import edits
from screenapp.model.edit_copies import holes_of
from screenapp.model.edits import EditError, Outcome
from screenapp.model.features import find
from screenapp.model.part import Part, Point
from screenapp.window.board import sketch
from screenapp.window.board.drawn_part import drawn_part
from screenapp.window.board.frame import Frame
from screenapp.window.board.hit_test import LINE_PX, nearest_piece
from screenapp.window.board.tools.base import Place, Tool

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas


class MirrorTool(Tool):
    """With holes selected these are mirrored, else the whole half outline."""

    name: ClassVar[str] = "Mirror"
    key: ClassVar[str] = "I"
    line: ClassVar[str] = "Select holes and click an edge or two places; or click a half's edge."
    icon: ClassVar[str] = "mirror"
    group: ClassVar[str] = "changes"

    def __init__(self, canvas: Canvas) -> None:
        super().__init__(canvas)
        self.first: Point | None = None

    @property
    def ids(self) -> tuple[str, ...]:
        """Ids of the selected holes."""
        document = self.canvas.document
        return tuple(h.id for h in holes_of(document.part, document.selection))

    @property
    def cursor(self) -> Qt.CursorShape:
        """A hand over an edge to mirror about."""
        over = self._edge_at(self.canvas.place) is not None
        return Qt.CursorShape.PointingHandCursor if over else Qt.CursorShape.CrossCursor

    def stop(self, following: Tool | None) -> None:
        """Drop the first place."""
        self._drop()

    def part_changed(self) -> None:
        """Begin anew."""
        self.first = None

    def step_back(self) -> bool:
        """Drop the first place."""
        had = self.first is not None
        self._drop()
        return had

    def hint(self) -> str:
        """What the next click does."""
        if self.first is not None:
            return "Click a second place of the mirror line."
        if self.ids:
            return "Click a straight edge, or the first place of the mirror line."
        return "Click the edge about which the half is mirrored; select holes to mirror these."

    def point_from(self) -> Point | None:
        """The first place."""
        return self.first

    def press(self, place: Place) -> None:
        """Mirror about an edge, or set a place of the line."""
        edge = self._edge_at(place)
        if edge is not None:
            self._about_edge(edge)
        elif not self.ids:
            self.say("Click an edge of the outline, or select the holes to mirror first.")
        elif self.first is None:
            self.first = place.at
        else:
            first, part, ids = self.first, self.canvas.document.part, self.ids
            self._done(
                "mirror holes",
                lambda: edits.mirror_holes(part, ids, edits.mirror_line_between(first, place.at)),
            )

    def move(self, place: Place) -> None:
        """Show what a click would make."""
        edge = self._edge_at(place)
        part = self.canvas.document.part
        try:
            if edge is not None:
                self.canvas.preview(self._made(edge))
            elif self.first is not None and place.at != self.first:
                line = edits.mirror_line_between(self.first, place.at)
                self.canvas.preview(edits.mirror_holes(part, self.ids, line))
            else:
                self.canvas.preview(None)
        except EditError:
            self.canvas.preview(None)

    def key_press(self, event: QKeyEvent) -> bool:
        """Enter mirrors about the edge that is selected (with the holes), without a mouse."""
        if event.key() not in (Qt.Key.Key_Return, Qt.Key.Key_Enter):
            return False
        part = self.canvas.document.part
        found = [find(part, id_) for id_ in self.canvas.document.selection]
        edges = [f.record.id for f in found if f is not None and f.kind == "edge"]
        if edges:
            self._about_edge(edges[0])
        else:
            self.say("Select an edge to mirror about, with Shift and the holes.")
        return True

    def paint(self, painter: QPainter, frame: Frame) -> None:
        """The mirror line."""
        place = self.canvas.place
        if self.first is None or place is None:
            return
        sketch.segment(painter, frame, self.first, place.at, dashed=True)
        sketch.dot(painter, frame, self.first)

    def _edge_at(self, place: Place | None) -> str | None:
        """The edge of the part under the cursor, not of what is previewed."""
        if place is None or self.first is not None:
            return None
        drawn = drawn_part(self.canvas.document.part)
        hit = nearest_piece(drawn, place.raw, LINE_PX / self.canvas.frame_now.scale)
        return hit.id if hit is not None and hit.kind == "edge" else None

    def _made(self, edge: str) -> Part:
        part = self.canvas.document.part
        if self.ids:
            return edits.mirror_holes(part, self.ids, edits.mirror_line_of(part, edge))
        return edits.mirror_half(part, edge).part

    def _about_edge(self, edge: str) -> None:
        part, ids = self.canvas.document.part, self.ids
        if ids:
            self._done(
                "mirror holes",
                lambda: edits.mirror_holes(part, ids, edits.mirror_line_of(part, edge)),
            )
        else:
            self._done("mirror the half", lambda: edits.mirror_half(part, edge))

    def _done(self, name: str, make: Callable[[], Part | Outcome]) -> None:
        if self.apply(name, make):
            self._drop()
            self.canvas.tool_wanted.emit("Select")

    def _drop(self) -> None:
        self.first = None
        self.canvas.preview(None)
