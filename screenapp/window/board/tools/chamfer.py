"""A chamfer at a corner."""

from __future__ import annotations

from typing import ClassVar

from screenapp.model import edits
from screenapp.model.part import Corner, Part
from screenapp.window.board.tools.fillet import FilletTool
from screenapp.window.board.typed_entry import EntryField


class ChamferTool(FilletTool):
    """Click a corner, type the length that is cut off both edges."""

    name: ClassVar[str] = "Chamfer"
    key: ClassVar[str] = "K"
    line: ClassVar[str] = "Click a corner and type what is cut off both edges; 0 makes it sharp."
    icon: ClassVar[str] = "chamfer"
    step: ClassVar[str] = "chamfer a corner"
    field: ClassVar[str] = "chamfer"
    fields: ClassVar[tuple[EntryField, ...]] = (EntryField("chamfer", "chamfer"),)
    sign: ClassVar[str] = "C"
    typing: ClassVar[str] = "Type the length; Enter accepts."

    def size_of(self, corner: Corner) -> float:
        """The chamfer that a corner has."""
        return corner.chamfer

    def with_size(self, part: Part, corner: str, size: float) -> Part:
        """The part with another chamfer there."""
        return edits.set_chamfer(part, corner, size)
