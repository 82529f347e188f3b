"""What every tool is: it is told of presses, moves and keys, and paints its preview."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import TYPE_CHECKING, ClassVar

from PySide6.QtCore import QPointF, Qt
from PySide6.QtGui import QKeyEvent, QPainter

from screenapp.model.edits import EditError, Outcome
from screenapp.model.part import Part, Point
from screenapp.window.board.frame import Frame
from screenapp.window.board.hit_test import Hit
from screenapp.window.board.snapping import Snap, SnapKind
from screenapp.window.commands import Command, run_pressed

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas
    from screenapp.window.board.typed_entry import EntryField


@dataclass(frozen=True)
class Place:
    """Where the cursor is.

    Attributes:
        px: in the view [px].
        raw: on the board [mm].
        snap: where a click lands.
        hit: what lies under the cursor.
        shift: whether Shift is held (adds to the selection).
    """

    px: QPointF
    raw: Point
    snap: Snap
    hit: Hit | None
    shift: bool = False

    @property
    def at(self) -> Point:
        """Where a click lands [mm]."""
        return self.snap.at


class Tool:
    """A drawing tool; the canvas calls these and repaints after each.

    `name`, `key`, `line` and `icon` are what the tool strip shows, tools of one `group` behind one
    button; `snaps` says whether clicks land on snaps, `passes_over` which kinds of snap it does not
    want, `edits_numbers` whether the numbers of dimensions come before what lies under them.
    """

    name: ClassVar[str] = ""
    key: ClassVar[str] = ""
    line: ClassVar[str] = ""
    icon: ClassVar[str] = ""
    group: ClassVar[str] = ""
    snaps: ClassVar[bool] = True
    passes_over: ClassVar[frozenset[SnapKind]] = frozenset()
    edits_numbers: ClassVar[bool] = False

    def __init__(self, canvas: Canvas) -> None:
        self.canvas = canvas

    @property
    def cursor(self) -> Qt.CursorShape:
        """The cursor that says what a click would do now."""
        return Qt.CursorShape.CrossCursor

    def start(self) -> None:
        """It is the tool now."""

    def stop(self, following: Tool | None) -> None:
        """Another tool is taken: drop whatever is half done."""

    def press(self, place: Place) -> None:
        """The left button went down."""

    def move(self, place: Place) -> None:
        """The cursor moved."""

    def release(self, place: Place) -> None:
        """The left button came up."""

    def double(self, place: Place) -> None:
        """A double-click; the first press and release came before."""

    def commands(self) -> tuple[Command, ...]:
        """What its own keys do while it is in hand."""
        return ()

    def key_press(self, event: QKeyEvent) -> bool:
        """A key; True if it was used."""
        return run_pressed(self.commands(), event)

    def step_back(self) -> bool:
        """Escape: drop the last thing half done; False if there was none."""
        return False

    def part_changed(self) -> None:
        """The document's part is another one: drop what refers to the old one."""

    @property
    def snapping(self) -> bool:
        """Whether the snap in force counts now."""
        return self.snaps

    def snap_points(self) -> tuple[Snap, ...]:
        """Further points that the cursor may snap to."""
        return ()

    def point_from(self) -> Point | None:
        """The place that a line is being drawn from [mm]; None if none is."""
        return None

    def lights(self, hit: Hit) -> str:
        """The id that lights up while the cursor is on something."""
        return hit.id

    def unsnapped(self) -> frozenset[str]:
        """Ids that must not draw the cursor."""
        return frozenset()

    def dragged_from(self) -> Part | None:
        """The part before a drag under way: what of it stays draws the cursor; None without one."""
        return None

    def drafted(self) -> Part | None:
        """The part as it would be with what is half drawn; None if that is nothing yet."""
        return None

    def hint(self) -> str:
        """What to do next, one short sentence for the corner of the board."""
        return self.line

    def apply(
        self,
        name: str,
        make: Callable[[], Part | Outcome],
        keep: Callable[[Part], Mapping[str, str | None]] | None = None,
    ) -> bool:
        """Change the part as one undoable step and say what else went with it.

        `keep` names the expressions, by their fields, that give numbers of the changed part.  A
        change that is refused is said and not made; False then.
        """
        document = self.canvas.document
        try:
            made = make()
        except EditError as fault:
            document.said.emit(f"{fault.cause}: {fault.mend}.")
            return False
        part, lost = (made.part, made.lost) if isinstance(made, Outcome) else (made, ())
        with document.keeping(keep(part) if keep is not None else {}):
            document.apply(name, part)
        if lost:
            document.said.emit(f"Went with it: {', '.join(lost)}.")
        return True

    def say(self, text: str) -> None:
        """A sentence for the status line."""
        self.canvas.document.said.emit(text)

    # typed entry

    def entry_fields(self) -> tuple[EntryField, ...]:
        """What may be typed now; none means that typing does nothing."""
        return ()

    def entry_typed(self, values: dict[str, float]) -> None:
        """The typed values changed [mm, deg]; show them in the preview."""

    def entry_live(self) -> dict[str, float]:
        """Present value of every field, shown in those not typed."""
        return {}

    def entry_expressions(self) -> dict[str, str]:
        """The expressions that give those values now, in stored units."""
        return {}

    def entry_accept(self, values: dict[str, float]) -> None:
        """Enter was pressed in the entry row."""

    def entry_closed(self) -> None:
        """The entry row was closed without accepting."""

    def paint(self, painter: QPainter, frame: Frame) -> None:
        """Paint what is half done, in pixels."""
