"""Hold and load a place by clicking it."""

from __future__ import annotations

from typing import ClassVar

from PySide6.QtCore import QPoint, Qt

from screenapp.model.features import find
from screenapp.model.members import whole_id
from screenapp.model.part import Part
from screenapp.window.board.tools.base import Place, Tool


class PlaceTool(Tool):
    """Click an edge, a hole or a sharp corner."""

    snaps: ClassVar[bool] = False

    @property
    def cursor(self) -> Qt.CursorShape:
        """A hand over what can be taken."""
        place = self.canvas.place
        over = place is not None and target_of(place, self.canvas.document.part) is not None
        return Qt.CursorShape.PointingHandCursor if over else Qt.CursorShape.ArrowCursor

    def open_at(self, on: str, near: QPoint) -> None:
        """Open the popover for a place."""
        raise NotImplementedError

    def start(self) -> None:
        """Take up what is selected, so that no mouse is needed."""
        canvas, selection = self.canvas, self.canvas.document.selection
        found = find(canvas.document.part, selection[0]) if len(selection) == 1 else None
        if found is None or found.inside or found.kind not in ("edge", "hole", "corner"):
            return
        at = canvas.drawn.anchor_of(selection[0])
        if at is not None:
            self.open_at(selection[0], canvas.frame_now.px(at).toPoint())

    def stop(self, following: Tool | None) -> None:
        """Settle what is open."""
        self.canvas.placing.settle()

    def step_back(self) -> bool:
        """Close the popover."""
        busy = self.canvas.placing.busy
        self.canvas.placing.drop()
        return busy

    def press(self, place: Place) -> None:
        """Settle what is open and take up the place clicked."""
        self.canvas.placing.settle()
        hit = place.hit
        if hit is not None and hit.kind in ("support", "load"):
            self.canvas.document.select(hit.id)
            self.canvas.placing.change(hit.id, place.px.toPoint())
            return
        on = target_of(place, self.canvas.document.part)
        if on is None:
            self.say("Click an edge, a hole or a sharp corner.")
            return
        self.canvas.document.select(on)
        self.open_at(on, place.px.toPoint())


class HoldTool(PlaceTool):
    """Puts supports."""

    name: ClassVar[str] = "Hold"
    key: ClassVar[str] = "H"
    line: ClassVar[str] = (
        "Click an edge, hole or corner to hold it; with Shift all holes of a pattern. "
        "Several round holes selected before are held together by bolts."
    )
    icon: ClassVar[str] = "hold"

    def start(self) -> None:
        """Take up what is selected; several round holes are held together."""
        canvas, selection = self.canvas, self.canvas.document.selection
        at = canvas.drawn.anchor_of(selection[0]) if len(selection) > 1 else None
        if at is None or not canvas.placing.hold_together(
            tuple(selection), canvas.frame_now.px(at).toPoint()
        ):
            super().start()

    def open_at(self, on: str, near: QPoint) -> None:
        """Choose how it is held."""
        self.canvas.placing.hold(on, near)


class LoadTool(PlaceTool):
    """Puts loads into the present case."""

    name: ClassVar[str] = "Load"
    key: ClassVar[str] = "W"
    line: ClassVar[str] = (
        "Click an edge, hole or corner to load it; with Shift all holes of a pattern."
    )
    icon: ClassVar[str] = "load"

    def open_at(self, on: str, near: QPoint) -> None:
        """Choose how it is loaded."""
        self.canvas.placing.load(on, near)


def target_of(place: Place, part: Part) -> str | None:
    """The edge, hole or sharp corner of the boundary under the cursor; with Shift all holes of a
    pattern."""
    if place.hit is None or place.hit.kind not in ("edge", "hole", "corner"):
        return None
    found = find(part, whole_id(place.hit.id))
    if found is None or found.inside:
        return None
    return whole_id(place.hit.id) if place.shift else place.hit.id
