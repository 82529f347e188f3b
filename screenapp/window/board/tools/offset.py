"""Moving an edge parallel to itself, by a distance."""

from __future__ import annotations

from typing import TYPE_CHECKING, ClassVar

from PySide6.QtCore import QPoint, Qt
from PySide6.QtGui import QPainter

from screenapp.model import edits
from screenapp.model.curves import Curve
from screenapp.model.features import find
from screenapp.model.part import Point
from screenapp.window.board import sketch
from screenapp.window.board.drawn_part import drawn_part
from screenapp.window.board.frame import Frame
from screenapp.window.board.grid import grid_step
from screenapp.window.board.quantity import written
from screenapp.window.board.tools.base import Place, Tool
from screenapp.window.board.typed_entry import EntryField

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas

FIELDS = (EntryField("distance", "outwards by"),)


class OffsetTool(Tool):
    """Click an edge, then where it goes, or type the distance; outwards is more material."""

    name: ClassVar[str] = "Offset an edge"
    key: ClassVar[str] = "U"
    line: ClassVar[str] = "Click an edge, then how far it moves; its neighbours follow."
    icon: ClassVar[str] = "offset"
    group: ClassVar[str] = "changes"
    snaps: ClassVar[bool] = False

    def __init__(self, canvas: Canvas) -> None:
        super().__init__(canvas)
        self.edge: str | None = None
        self.distance = 0.0
        self._typed = False
        self._why = ""

    @property
    def cursor(self) -> Qt.CursorShape:
        """A hand over an edge."""
        if self.edge is not None:
            return Qt.CursorShape.SizeAllCursor
        over = _edge_at(self.canvas.place)
        return Qt.CursorShape.PointingHandCursor if over else Qt.CursorShape.ArrowCursor

    def start(self) -> None:
        """Take up the edge that is selected, so that no mouse is needed."""
        canvas, selection = self.canvas, self.canvas.document.selection
        found = find(canvas.document.part, selection[0]) if len(selection) == 1 else None
        if found is not None and found.kind == "edge":
            at = canvas.drawn.anchor_of(selection[0])
            near = None if at is None else canvas.frame_now.px(at).toPoint() + sketch.OFFSET
            self._take_up(selection[0], near)

    def stop(self, following: Tool | None) -> None:
        """Drop the edge."""
        self._drop()

    def part_changed(self) -> None:
        """The edge may be gone."""
        self.edge = None

    def step_back(self) -> bool:
        """Drop the edge."""
        had = self.edge is not None
        self._drop()
        return had

    def hint(self) -> str:
        """What comes next."""
        if self.edge is None:
            return "Click an edge."
        return "Click where the edge goes, or type how far outwards it moves."

    def press(self, place: Place) -> None:
        """Take up an edge, then put it there."""
        if self.edge is not None:
            self._accept()
            return
        edge = _edge_at(place)
        if edge is None:
            self.say("Click an edge of the outline or of a hole.")
            return
        self.canvas.document.select(edge)
        self._take_up(edge, None)

    def move(self, place: Place) -> None:
        """The edge follows the cursor in steps of the grid; with Control held, freely."""
        if self.edge is None or self._typed:
            return
        drawn = drawn_part(self.canvas.document.part)  # not what is previewed
        pieces = [p.curve for p in drawn.pieces_of(self.edge)]
        if not pieces:
            return
        curve = min(pieces, key=lambda c: abs(_outwards(c, place.raw)))
        far = _outwards(curve, place.raw)
        step = grid_step(self.canvas.frame_now.scale, self.canvas.part.display_units) / 10.0
        self._try(far if self.canvas.held_off else round(far / step) * step)

    def entry_fields(self) -> tuple[EntryField, ...]:
        """The distance."""
        return FIELDS if self.edge is not None else ()

    def entry_live(self) -> dict[str, float]:
        """The distance shown."""
        return {"distance": self.distance}

    def entry_typed(self, values: dict[str, float]) -> None:
        """Show it."""
        self._typed = "distance" in values
        if self.edge is not None and self._typed:
            self._try(values["distance"])

    def entry_accept(self, values: dict[str, float]) -> None:
        """Make it."""
        if "distance" in values:
            self._try(values["distance"])
        self._accept()

    def paint(self, painter: QPainter, frame: Frame) -> None:
        """The distance beside the edge."""
        if self.edge is None:
            return
        at = self.canvas.drawn.anchor_of(self.edge)
        if at is None:
            return
        text = written(self.distance, "length", self.canvas.part.display_units)
        px = frame.px(at)
        px.setY(px.y() - 18.0)
        sketch.label(painter, self._why or f"outwards {text}", px)

    def _take_up(self, edge: str, near: QPoint | None) -> None:
        self.edge, self.distance, self._typed = edge, 0.0, False
        if near is not None:
            self.canvas.entry.open_row(None, near)

    def _try(self, distance: float) -> None:
        assert self.edge is not None
        self._why = ""
        self.distance = distance
        try:
            self.canvas.preview(
                edits.offset_edge(self.canvas.document.part, self.edge, distance)
                if distance
                else None
            )
        except edits.EditError as fault:
            self.canvas.preview(None)
            self._why = f"{fault.cause}: {fault.mend}"
            self.say(f"{self._why}.")

    def _accept(self) -> None:
        edge, distance = self.edge, self.distance
        assert edge is not None
        if distance == 0.0:
            return
        part = self.canvas.document.part
        if self.apply(f"offset edge {edge}", lambda: edits.offset_edge(part, edge, distance)):
            self._drop()

    def _drop(self) -> None:
        self.edge, self._why, self._typed = None, "", False
        self.canvas.preview(None)
        self.canvas.entry.close_row()


def _edge_at(place: Place | None) -> str | None:
    if place is not None and place.hit is not None and place.hit.kind == "edge":
        return place.hit.id
    return None


def _outwards(curve: Curve, at: Point) -> float:
    """How far a place lies to the right of a curve, which is away from the material [mm]."""
    t = curve.nearest(at)
    (fx, fy), (ux, uy) = curve.point(t), curve.tangent(t)
    return float((at[0] - fx) * uy - (at[1] - fy) * ux)
