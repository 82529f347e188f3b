"""Select, drag, nudge, delete, and edit exactly."""

from __future__ import annotations

from typing import TYPE_CHECKING, ClassVar

from PySide6.QtCore import QPointF, QRectF, Qt
from PySide6.QtGui import QColor, QKeyEvent, QPainter

from screenapp.model import edits
from screenapp.model.features import find, loops_of, place_name
from screenapp.model.part import Part, Point
from screenapp.window import theme
from screenapp.window.board import sketch
from screenapp.window.board.exact import exact_fields, exact_paths, exact_values, with_exact
from screenapp.window.board.frame import Frame
from screenapp.window.board.grid import grid_step
from screenapp.window.board.hit_test import Hit, zone_edge
from screenapp.window.board.naming import described
from screenapp.window.board.quantity import written
from screenapp.window.board.tools.base import Place, Tool
from screenapp.window.board.tools.carry import Carry
from screenapp.window.board.tools.choosing import all_of, in_box, meant, next_after
from screenapp.window.board.tools.drag import Drag, grip_of
from screenapp.window.board.tools.select_commands import select_commands
from screenapp.window.board.typed_entry import EntryField
from screenapp.window.commands import Command, run_pressed

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas

DRAG_FROM = 4.0
"""How far the cursor must go with the button down before it drags [px]."""


class SelectTool(Tool):
    """Picks what is under the cursor and moves it; drags a box from empty board."""

    name: ClassVar[str] = "Select"
    key: ClassVar[str] = "S"
    line: ClassVar[str] = "Click to select, drag to move, double-click to edit or to put a corner."
    icon: ClassVar[str] = "select"
    snaps: ClassVar[bool] = False
    edits_numbers: ClassVar[bool] = True

    def __init__(self, canvas: Canvas) -> None:
        super().__init__(canvas)
        self._pressed: Place | None = None
        self._drag: Drag | None = None
        self._at: Point | None = None
        self._box: QPointF | None = None
        self._carry: Carry | None = None
        self._again = False
        self.editing: str | None = None
        self._commands = select_commands(self)

    @property
    def cursor(self) -> Qt.CursorShape:
        """A hand over what can be dragged."""
        if self._drag is not None or self._carry is not None:
            return Qt.CursorShape.ClosedHandCursor
        place = self.canvas.place
        if place is None or place.hit is None:
            return Qt.CursorShape.ArrowCursor
        grip = grip_of(self.canvas.drawn, place.hit.id)
        if grip is not None:
            drag = Drag(self.canvas.document.part, (place.hit.id,), grip, grip)
            held = bool(drag.held_by())
            return Qt.CursorShape.ForbiddenCursor if held else Qt.CursorShape.OpenHandCursor
        return Qt.CursorShape.PointingHandCursor

    def stop(self, following: Tool | None) -> None:
        """Drop the drag and the exact editor."""
        self._drop()
        self.canvas.placing.settle()

    def part_changed(self) -> None:
        """Whatever was dragged or edited may be gone."""
        self._pressed = self._drag = self._at = self._box = self._carry = None
        self.editing = None

    def step_back(self) -> bool:
        """Drop the drag, the box or the exact editor."""
        busy = self.canvas.placing.busy or self._box is not None
        busy = busy or self._drag is not None or self.editing is not None
        busy = busy or self._carry is not None
        self.canvas.placing.drop()
        self._drop()
        return busy

    def lights(self, hit: Hit) -> str:
        """Of a pattern the whole."""
        return meant(hit, self.canvas.document.selection)

    def unsnapped(self) -> frozenset[str]:
        """What is dragged must not draw the cursor to itself."""
        return frozenset() if self._drag is None else self._drag.unsnapped

    def dragged_from(self) -> Part | None:
        """The part before a drag."""
        return None if self._drag is None else self._drag.part

    @property
    def snapping(self) -> bool:
        """Only a drag snaps."""
        return self._drag is not None

    # mouse

    def press(self, place: Place) -> None:
        """Select, and get ready to drag."""
        self.canvas.placing.settle()
        if self.editing is not None:
            self._drop()
        document, hit = self.canvas.document, place.hit
        if hit is None:
            self._box = place.px
            if not place.shift:
                document.select()
            return
        id_ = meant(hit, document.selection)
        if place.shift:
            rest = tuple(i for i in document.selection if i != id_)
            document.select(*(rest if id_ in document.selection else (*rest, id_)))
            return
        self._again = id_ in document.selection
        if not self._again:
            document.select(id_)
        self._pressed = place

    def move(self, place: Place) -> None:
        """Drag live."""
        pressed = self._pressed
        if self._carried(place):
            return
        if pressed is not None and pressed.hit is not None and self._drag is None:
            gap = place.px - pressed.px
            grip = grip_of(self.canvas.drawn, meant(pressed.hit, self.canvas.document.selection))
            if grip is not None and gap.manhattanLength() >= DRAG_FROM:
                document = self.canvas.document
                drag = Drag(document.part, document.selection, grip, pressed.raw)
                if why := drag.held_by():
                    self._pressed = None
                    self.say(why)
                else:
                    self._drag = drag
        if self._drag is not None:
            self._drag_to(place, self._drag)

    def release(self, place: Place) -> None:
        """End of a drag: one undoable step; a click on one of several selects it alone."""
        drag, at, pressed = self._drag, self._at, self._pressed
        box, carry = self._box, self._carry
        self._pressed = self._drag = self._at = self._box = self._carry = None
        if carry is not None:
            self._put_down(carry)
        elif drag is not None and at is not None:
            self.apply(drag.name, lambda: drag.moved(at))
            self.canvas.preview(None)
        elif box is not None:
            self._select_box(QRectF(box, place.px).normalized(), place.shift)
        elif pressed is not None and pressed.hit is not None:
            selection = self.canvas.document.selection
            alone = self._again and selection == (meant(pressed.hit, selection),)
            self.canvas.document.select(pressed.hit.id if alone else meant(pressed.hit, selection))

    def _carried(self, place: Place) -> bool:
        """Carry a support or load that was taken by its symbol."""
        pressed = self._pressed
        if self._carry is None and pressed is not None and pressed.hit is not None:
            far = (place.px - pressed.px).manhattanLength()
            if pressed.hit.kind in ("support", "load") and far >= DRAG_FROM:
                self._carry = Carry.of(self.canvas, pressed.hit.id)
        if self._carry is None:
            return False
        self._carry.move(place)
        return True

    def _put_down(self, carry: Carry) -> None:
        self.canvas.preview(None)
        if carry.on:
            self.apply(carry.name, carry.made)
        else:
            self.say(f"{carry.why or 'Let it go on an edge, a hole or a sharp corner'}.")

    def double(self, place: Place) -> None:
        """Edit exactly what is there; on an edge, put a corner there and edit that."""
        hit = place.hit
        if hit is None:
            return
        if hit.kind == "edge":
            at = place.snap.at if place.snap.id == hit.id else hit.at
            self._split(hit.id, at, place.px)
            return
        if hit.kind == "zone" and (
            edge := zone_edge(self.canvas.drawn, self.canvas.frame_now, hit.at)
        ):
            self._split(edge, hit.at, place.px)
            return
        id_ = meant(hit, self.canvas.document.selection)
        self.canvas.document.select(id_)
        self.edit(id_, place.px)

    # keys

    def commands(self) -> tuple[Command, ...]:
        """Select, remove, nudge, edit, and go from one thing to the next."""
        return self._commands

    def key_press(self, event: QKeyEvent) -> bool:
        """Its commands."""
        return run_pressed(self._commands, event)

    def select_all(self) -> None:
        """Select every corner, hole and probe."""
        self.canvas.document.select(*all_of(self.canvas.drawn))

    def edit_selected(self) -> None:
        """Open the exact editor on the first thing selected."""
        first = self.canvas.document.selection[0]
        at = self.canvas.drawn.anchor_of(first)
        self.edit(first, None if at is None else self.canvas.frame_now.px(at))

    # exact editor

    def edit(self, id_: str, px: QPointF | None) -> None:
        """Open the exact editor on a corner, hole, probe, support or load."""
        found = find(self.canvas.document.part, id_)
        if found is None:
            return
        spot = px.toPoint() if px is not None else self.canvas.rect().center()
        if found.kind in ("support", "load"):
            self.canvas.placing.change(id_, spot)
        elif exact_fields(found):
            self.editing = id_
            self.canvas.entry.open_row(None, spot + sketch.OFFSET)
        else:
            self.say(f"The {found.kind} follows its corners: drag or edit those.")

    def entry_fields(self) -> tuple[EntryField, ...]:
        """The values of what is being edited."""
        found = find(self.canvas.document.part, self.editing) if self.editing else None
        return exact_fields(found) if found is not None else ()

    def entry_live(self) -> dict[str, float]:
        """Its present values."""
        found = find(self.canvas.part, self.editing) if self.editing else None
        return exact_values(found) if found is not None else {}

    def entry_expressions(self) -> dict[str, str]:
        """Those that give its present values."""
        part = self.canvas.document.part
        found = find(part, self.editing) if self.editing else None
        if found is None or not part.formulas:
            return {}
        given = {f.field: f.text for f in part.formulas}
        return {n: given[path] for n, path in exact_paths(found).items() if path in given}

    def entry_typed(self, values: dict[str, float]) -> None:
        """Show what they would make."""
        if self.editing is None or not values:
            self.canvas.preview(None)
            return
        try:
            self.canvas.preview(with_exact(self.canvas.document.part, self.editing, values))
        except edits.EditError as fault:
            self.say(f"{fault.cause}: {fault.mend}.")

    def entry_accept(self, values: dict[str, float]) -> None:
        """Make it."""
        id_, part = self.editing, self.canvas.document.part
        if id_ is None:
            return
        if values:
            taken, found = self.canvas.entry.taken, find(part, id_)
            paths = exact_paths(found) if found is not None else {}
            done = self.apply(
                f"change {place_name(part, id_)}",
                lambda: with_exact(part, id_, values),
                lambda _made: {paths[n]: text for n, text in taken.items() if n in paths},
            )
            if not done:
                return
        self._drop()

    def entry_closed(self) -> None:
        """Escape in the row ends the edit."""
        self._drop()

    # painting

    def paint(self, painter: QPainter, frame: Frame) -> None:
        """The box, or where the dragged thing stands."""
        if self._box is not None and self.canvas.place is not None:
            ground = QColor(theme.current().accent)
            ground.setAlphaF(0.1)
            painter.setPen(sketch.line_pen(1.0, dashed=True))
            painter.setBrush(ground)
            painter.drawRect(QRectF(self._box, self.canvas.place.px).normalized())
        if self._drag is not None and self._at is not None:
            units = self.canvas.part.display_units
            x, y = (written(v, "length", units) for v in self._at)
            p = frame.px(self._at)
            sketch.label(painter, f"x {x}   y {y}", QPointF(p.x(), p.y() - 24.0))

    # steps

    def _drag_to(self, place: Place, drag: Drag) -> None:
        found = self.canvas.snap_at(drag.aim(place), self.canvas.held_off)
        self.canvas.show_snap(found)
        self._at = found.at
        try:
            self.canvas.preview(drag.moved(found.at))
        except edits.EditError as fault:
            self.say(f"{fault.cause}: {fault.mend}.")

    def _split(self, edge: str, at: Point, px: QPointF) -> None:
        part = self.canvas.document.part
        corner = edits.new_id(part, "c")
        if self.apply(f"put a corner on edge {edge}", lambda: edits.insert_corner(part, edge, at)):
            self.canvas.document.select(corner)
            self.edit(corner, px)

    def _drop(self) -> None:
        self._pressed = self._drag = self._at = self._box = self._carry = None
        self.editing = None
        self.canvas.preview(None)
        self.canvas.entry.close_row()

    def paste(self) -> None:
        """Add the holes of the clipboard under the cursor."""
        place = self.canvas.place
        # Control is down for the key itself, so the place is snapped anew
        at = self.canvas.snap_at(place.raw).at if place is not None else None
        self.canvas.context.paste(at)

    def open_context(self) -> None:
        """Open the menu of the selected thing."""
        self.canvas.context.open_for_selection()

    def remove_selected(self) -> None:
        """Take out what is selected and say what went with it."""
        part, selection = self.canvas.document.part, self.canvas.document.selection
        ids = tuple(i for i in selection if find(part, i) is not None)
        loose = tuple(i for i in ids if i not in edges_of(part))
        if self.apply("remove", lambda: edits.remove(part, *(loose or ids))):
            self.canvas.document.select()

    def nudge(self, dx: float, dy: float) -> None:
        """Move what is selected by so many grid steps."""
        part, selection = self.canvas.document.part, self.canvas.document.selection
        step = grid_step(self.canvas.frame_now.scale, part.display_units)
        if why := Drag(part, selection, (0.0, 0.0), (0.0, 0.0)).held_by():
            self.say(why)
            return
        self.apply("nudge", lambda: edits.move(part, selection, dx * step, dy * step))

    def select_next(self, step: int) -> None:
        """Select the thing after or before the selected one, and say what it is."""
        document = self.canvas.document
        chosen = next_after(document.part, document.view.case, document.selection, step)
        if chosen is not None:
            document.select(chosen.record.id)
            self.say(f"Selected: {described(document.part, chosen)}.")

    def _select_box(self, box: QRectF, add: bool) -> None:
        if box.width() < DRAG_FROM and box.height() < DRAG_FROM:
            return
        inside = in_box(self.canvas.drawn, self.canvas.frame_now, box)
        had = self.canvas.document.selection if add else ()
        self.canvas.document.select(*had, *(i for i in inside if i not in had))


def edges_of(part: Part) -> frozenset[str]:
    """Ids of all edges: they go with their corners, not by themselves."""
    return frozenset(e.id for _, _, loop in loops_of(part) for e in loop.edges)
