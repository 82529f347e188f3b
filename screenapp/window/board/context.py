"""What can be done with the thing under the cursor: a short menu, only of what applies there."""

from __future__ import annotations

from collections.abc import Callable
from functools import partial
from typing import TYPE_CHECKING

from PySide6.QtCore import QPoint, QPointF, Qt
from PySide6.QtWidgets import QMenu

from screenapp.model import edits
from screenapp.model.edits import EditError, Outcome
from screenapp.model.features import Found, find, name_of
from screenapp.model.members import patterned, whole_id
from screenapp.model.part import Corner, Edge, LoopHole, Part, Point
from screenapp.window.board import clipboard
from screenapp.window.board.grid import grid_step
from screenapp.window.board.hit_test import zone_edge

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas

Make = Callable[[], Part | Outcome]


class ContextMenu:
    """Opens at the cursor by the right button, or at what is selected by the menu key.

    Attributes:
        menu: the one that is open, None if none is.
    """

    def __init__(self, canvas: Canvas) -> None:
        self._canvas = canvas
        self.menu: QMenu | None = None

    def open(self, px: QPointF) -> None:
        """Offer what applies to the thing at a viewport position [px]."""
        canvas = self._canvas
        place = canvas.place_at(px)
        id_ = place.hit.id if place.hit is not None else None
        self._popup(id_, place.at, px.toPoint())

    def open_for_selection(self) -> None:
        """Offer what applies to the selected thing."""
        canvas, selection = self._canvas, self._canvas.document.selection
        id_ = selection[0] if selection else None
        at = canvas.drawn.anchor_of(id_) if id_ is not None else None
        px = canvas.frame_now.px(at) if at is not None else QPointF(canvas.rect().center())
        self._popup(id_, at or canvas.frame_now.mm(px), px.toPoint())

    def actions_for(self, id_: str | None, at: Point, px: QPoint) -> QMenu:
        """The menu for a thing, or for the bare board."""
        menu = QMenu(self._canvas)
        menu.setAttribute(Qt.WidgetAttribute.WA_DeleteOnClose)
        found = find(self._canvas.document.part, id_) if id_ is not None else None
        if found is None:
            self._board(menu, at)
            return menu
        words = name_of(found)
        menu.setAccessibleName(words)
        heading = menu.addAction(words[:1].upper() + words[1:])
        heading.setEnabled(False)
        menu.addSeparator()
        if found.kind == "corner":
            self._corner(menu, found)
        elif found.kind == "edge":
            self._edge(menu, found, at)
        elif found.kind == "hole":
            self._hole(menu, found)
        elif found.kind == "zone":
            self._zone(menu, found.record.id, at)
        if found.kind in ("edge", "hole", "corner") and not found.inside:
            self._placing(menu, found, px)
        self._always(menu, found, px)
        return menu

    # kinds of things

    def _board(self, menu: QMenu, at: Point) -> None:
        canvas = self._canvas
        menu.setAccessibleName("Board")
        paste = menu.addAction("Paste here\tCtrl+V", lambda: self.paste(at))
        paste.setEnabled(clipboard.can_paste())
        menu.addAction("Fit the part in the board\tHome", canvas.fit)

    def _corner(self, menu: QMenu, found: Found) -> None:
        corner = found.record
        if not isinstance(corner, Corner) or "." in corner.id:
            return
        self._tool(menu, "Round it", "Fillet", corner.id)
        self._tool(menu, "Chamfer it", "Chamfer", corner.id)
        if not corner.sharp:
            self._change(menu, "Make it sharp", lambda: edits.set_round(self._part, corner.id, 0.0))

    def _edge(self, menu: QMenu, found: Found, at: Point) -> None:
        edge = found.record
        assert isinstance(edge, Edge)
        self._change(
            menu, "Put a corner here", lambda: edits.insert_corner(self._part, edge.id, at)
        )
        self._tool(menu, "Offset it", "Offset an edge", edge.id)
        if edge.through is not None:
            self._change(menu, "Make it straight", lambda: edits.straighten(self._part, edge.id))
            return
        holes = [h.id for h in edits.holes_of(self._part, self._canvas.document.selection)]
        if holes:
            self._change(
                menu,
                "Mirror the selected holes about it",
                lambda: edits.mirror_holes(
                    self._part, holes, edits.mirror_line_of(self._part, edge.id)
                ),
            )
        if found.group == "outline.edges":
            self._change(
                menu, "Mirror the half about it", lambda: edits.mirror_half(self._part, edge.id)
            )

    def _hole(self, menu: QMenu, found: Found) -> None:
        whole = whole_id(found.record.id)
        hole = next(h for h in self._part.holes if h.id == whole)
        if patterned(hole):
            self._change(
                menu, "Break the pattern up", lambda: edits.break_pattern(self._part, whole)
            )
        elif isinstance(hole, LoopHole):
            bare = edits.remove_hole(self._part, whole).part
            if edits.ring_meets(bare, hole.loop):
                self._change(
                    menu, "Cut it out of what it crosses", lambda: edits.cut(bare, hole.loop)
                )
        else:
            for text, tool in (
                ("Repeat it in a row", "Row of holes"),
                ("Repeat it in a grid", "Grid of holes"),
                ("Repeat it on a bolt circle", "Bolt circle"),
            ):
                self._tool(menu, text, tool, whole)
        if not patterned(hole):
            self._change(menu, "Fill it with a zone", lambda: edits.hole_to_zone(self._part, whole))
        self._tool(menu, "Mirror it", "Mirror", whole)
        document = self._canvas.document
        menu.addAction("Copy\tCtrl+C", lambda: self._with(whole, clipboard.copy, document))
        menu.addAction("Cut\tCtrl+X", lambda: self._with(whole, clipboard.cut, document))

    def _zone(self, menu: QMenu, zone: str, at: Point) -> None:
        canvas = self._canvas
        edge = zone_edge(canvas.drawn, canvas.frame_now, at)
        if edge:
            self._change(
                menu, "Put a corner here", lambda: edits.insert_corner(self._part, edge, at)
            )
        self._change(menu, "Cut it out as a hole", lambda: edits.zone_to_hole(self._part, zone))

    def _placing(self, menu: QMenu, found: Found, px: QPoint) -> None:
        record = found.record
        if (isinstance(record, Corner) and not record.sharp) or found.inside:
            return
        placing, id_ = self._canvas.placing, record.id
        menu.addSeparator()
        member = found.kind == "hole" and bool(found.owner)
        for verb, act in (("Hold", placing.hold), ("Load", placing.load)):
            menu.addAction(f"{verb} it", partial(act, id_, px))
            if member:
                menu.addAction(f"{verb} all of them", partial(act, found.owner, px))

    def _always(self, menu: QMenu, found: Found, px: QPoint) -> None:
        menu.addSeparator()
        record = found.record
        whole = whole_id(record.id) if found.kind == "hole" else record.id
        if found.kind != "edge":
            menu.addAction("Exact values\tF2", lambda: self._edit(whole, px))
        if found.kind != "edge":
            self._change(menu, "Remove\tDel", lambda: edits.remove(self._part, whole))

    # what the lines do

    @property
    def _part(self) -> Part:
        return self._canvas.document.part

    def paste(self, at: Point | None) -> None:
        """Paste the holes of the clipboard, at a place if one is given."""
        canvas = self._canvas
        step = grid_step(canvas.frame_now.scale, canvas.document.part.display_units)
        clipboard.paste(canvas.document, at, 5.0 * step)

    def _edit(self, id_: str, px: QPoint) -> None:
        self._canvas.document.select(id_)
        self._canvas.edit_wanted.emit(id_, QPointF(px))

    def _with(self, id_: str, act: Callable[..., object], *rest: object) -> None:
        self._canvas.document.select(id_)
        act(*rest)

    def _tool(self, menu: QMenu, text: str, tool: str, id_: str) -> None:
        def take() -> None:
            self._canvas.document.select(id_)
            self._canvas.tool_wanted.emit("Select")
            self._canvas.tool_wanted.emit(tool)

        menu.addAction(text, take)

    def _change(self, menu: QMenu, text: str, make: Make) -> None:
        """A line that changes the part; it is greyed, with the reason, where it cannot."""
        action = menu.addAction(text)
        name = text.split("\t")[0]
        name = name[:1].lower() + name[1:]
        try:
            make()
        except EditError as fault:
            action.setEnabled(False)
            action.setToolTip(f"{fault.cause}: {fault.mend}.")
            return
        tool = self._canvas.tool
        if tool is not None:
            action.triggered.connect(lambda _on: tool.apply(name, make))

    def _popup(self, id_: str | None, at: Point, px: QPoint) -> None:
        menu = self.actions_for(id_, at, px)
        menu.setToolTipsVisible(True)
        self.menu = menu
        menu.destroyed.connect(self._closed)
        menu.popup(self._canvas.viewport().mapToGlobal(px))

    def _closed(self) -> None:
        self.menu = None
