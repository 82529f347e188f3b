"""Carrying a support or load to another place by its symbol."""

from __future__ import annotations

from typing import TYPE_CHECKING

from screenapp.model import edits
from screenapp.model.edits import EditError
from screenapp.model.features import find, place_name
from screenapp.model.members import whole_id
from screenapp.model.part import BodyLoad, Part
from screenapp.window.board.drawn_part import drawn_part
from screenapp.window.board.hit_test import hit_test
from screenapp.window.board.tools.base import Place

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas


class Carry:
    """A support or load on its way.

    Attributes:
        id: of the support or load.
        on: the place under the cursor that it can stand on, "" if there is none.
        why: why it cannot stand on what is there; "" if it can or nothing is there.
    """

    def __init__(self, canvas: Canvas, id_: str) -> None:
        self._canvas = canvas
        self._before = canvas.document.part
        self.id = id_
        self.on = ""
        self.why = ""

    @classmethod
    def of(cls, canvas: Canvas, id_: str) -> Carry | None:
        """What is carried when a drag begins on a symbol; None for weight, which has no place."""
        found = find(canvas.document.part, id_)
        if found is None or found.kind not in ("support", "load"):
            return None
        return None if isinstance(found.record, BodyLoad) else cls(canvas, id_)

    def move(self, place: Place) -> None:
        """Light the place under the cursor and show the symbol there."""
        hit = hit_test(drawn_part(self._before), self._canvas.frame_now, place.px)
        on = hit.id if hit is not None and hit.kind in ("edge", "hole", "corner") else ""
        if on and hit is not None and hit.kind == "hole" and place.shift:
            on = whole_id(on)
        self.on, self.why = "", ""
        if on:
            try:
                self._canvas.preview(edits.put_on(self._before, self.id, on))
                self.on = on
            except EditError as fault:
                self.why = f"{fault.cause}: {fault.mend}"
        if not self.on:
            self._canvas.preview(None)
        self._canvas.document.hover(on or None)

    def made(self) -> Part:
        """The part with it on its new place."""
        return edits.put_on(self._before, self.id, self.on)

    @property
    def name(self) -> str:
        """The name of the step."""
        part = self._before
        return f"move {place_name(part, self.id)} to {place_name(part, self.on)}"
