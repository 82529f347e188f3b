"""A fillet at a corner."""

from __future__ import annotations

from typing import TYPE_CHECKING, ClassVar

from PySide6.QtCore import QPoint, Qt
from PySide6.QtGui import QPainter

from screenapp.model import edits
from screenapp.model.errors import InvalidPartError
from screenapp.model.part import Corner, Part
from screenapp.model.shape import shape_of
from screenapp.window.board import sketch
from screenapp.window.board.frame import Frame
from screenapp.window.board.quantity import written
from screenapp.window.board.tools.base import Place, Tool
from screenapp.window.board.typed_entry import EntryField

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas


class FilletTool(Tool):
    """Click a corner, type the radius."""

    name: ClassVar[str] = "Fillet"
    key: ClassVar[str] = "F"
    line: ClassVar[str] = "Click a corner and type its radius; 0 makes it sharp."
    icon: ClassVar[str] = "fillet"
    group: ClassVar[str] = "corners"
    snaps: ClassVar[bool] = False
    step: ClassVar[str] = "round a corner"
    field: ClassVar[str] = "round"
    fields: ClassVar[tuple[EntryField, ...]] = (EntryField("radius", "radius"),)
    sign: ClassVar[str] = "R"
    typing: ClassVar[str] = "Type the radius; Enter accepts."

    def __init__(self, canvas: Canvas) -> None:
        super().__init__(canvas)
        self.corner: str | None = None
        self.radius = 0.0
        self._last = 5.0

    @property
    def cursor(self) -> Qt.CursorShape:
        """A hand over a corner."""
        place = self.canvas.place
        over = place is not None and corner_of(place) is not None
        return Qt.CursorShape.PointingHandCursor if over else Qt.CursorShape.ArrowCursor

    def start(self) -> None:
        """Take up the corner that is selected, so that no mouse is needed."""
        selection, canvas = self.canvas.document.selection, self.canvas
        if len(selection) == 1 and selection[0] in canvas.drawn.corners:
            at = canvas.frame_now.px(canvas.drawn.corners[selection[0]].at).toPoint()
            self._take_up(selection[0], at + sketch.OFFSET)

    def stop(self, following: Tool | None) -> None:
        """Drop the radius being typed."""
        self._drop()

    def part_changed(self) -> None:
        """The corner may be gone."""
        self.corner = None

    def step_back(self) -> bool:
        """Drop the radius being typed."""
        had = self.corner is not None
        self._drop()
        return had

    def hint(self) -> str:
        """What comes next."""
        return "Click a corner." if self.corner is None else self.typing

    def press(self, place: Place) -> None:
        """Take up a corner; what was typed for the one before is accepted."""
        if self.corner is not None:
            self.canvas.entry.forget()
            self._accept()
        corner = corner_of(place)
        if corner is None:
            return
        self.canvas.document.select(corner)
        self._take_up(corner, None)

    def size_of(self, corner: Corner) -> float:
        """The radius that a corner has."""
        return corner.round

    def with_size(self, part: Part, corner: str, size: float) -> Part:
        """The part with another radius there."""
        return edits.set_round(part, corner, size)

    def _take_up(self, corner: str, near: QPoint | None) -> None:
        """Show the corner with the radius it has, or the one last given."""
        self.corner = corner
        self._try(self.size_of(self.canvas.drawn.corners[corner]) or self._last)
        self.canvas.entry.open_row(None, near)

    def entry_fields(self) -> tuple[EntryField, ...]:
        """The radius."""
        return self.fields if self.corner is not None else ()

    def entry_live(self) -> dict[str, float]:
        """The radius shown."""
        return {self.fields[0].name: self.radius}

    def entry_typed(self, values: dict[str, float]) -> None:
        """Show it."""
        if self.corner is not None and self.fields[0].name in values:
            self._try(values[self.fields[0].name])

    def entry_accept(self, values: dict[str, float]) -> None:
        """Make it."""
        if self.fields[0].name in values:
            self.radius = values[self.fields[0].name]
        self._accept()

    def paint(self, painter: QPainter, frame: Frame) -> None:
        """Name the radius at the corner."""
        if self.corner is None or self.corner not in self.canvas.drawn.corners:
            return
        at = frame.px(self.canvas.drawn.corners[self.corner].at)
        text = f"{self.sign} {written(self.radius, 'length', self.canvas.part.display_units)}"
        at.setY(at.y() - 18.0)
        sketch.label(painter, text, at)

    def _try(self, radius: float) -> None:
        """Show the part with this radius; if it does not fit, say why."""
        assert self.corner is not None
        self.radius = radius
        try:
            part = self.with_size(self.canvas.document.part, self.corner, radius)
        except edits.EditError as fault:
            self.say(f"{fault.cause}: {fault.mend}.")
            return
        self.canvas.preview(part)
        if why := misfit(part, self.corner):
            self.say(why)

    def _accept(self) -> None:
        corner, radius = self.corner, self.radius
        assert corner is not None
        part = self.canvas.document.part
        found = edits.find(part, corner)
        text = self.canvas.entry.taken.get(self.fields[0].name)
        if self.apply(
            self.step,
            lambda: self.with_size(part, corner, radius),
            lambda _made: {} if found is None else {f"{found.field}.{self.field}": text},
        ):
            self._last = radius or self._last
            self._drop()

    def _drop(self) -> None:
        self.corner = None
        self.canvas.preview(None)
        self.canvas.entry.close_row()


def corner_of(place: Place) -> str | None:
    """The corner, fillet or chamfer under the cursor."""
    if place.hit is not None and place.hit.kind in ("corner", "fillet", "chamfer"):
        return place.hit.id
    return None


def misfit(part: Part, corner: str) -> str:
    """Why the round of a corner does not fit; "" if it does."""
    try:
        shape_of(part)
    except InvalidPartError as error:
        for fault in error.faults:
            if corner in fault.ids:
                return f"{fault.cause}: {fault.mend}."
    return ""
