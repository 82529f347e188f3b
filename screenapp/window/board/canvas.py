"""The drawing board's canvas: pans, zooms, and hands the mouse and keys to the tool in hand."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace

from PySide6.QtCore import QEvent, QPointF, Qt, Signal
from PySide6.QtGui import (
    QContextMenuEvent,
    QFocusEvent,
    QKeyEvent,
    QMouseEvent,
    QResizeEvent,
    QWheelEvent,
)
from PySide6.QtWidgets import QWidget

from screenapp.model.errors import Fault
from screenapp.model.part import Part, Point
from screenapp.window import theme
from screenapp.window.board.context import ContextMenu
from screenapp.window.board.cut_item import CutsItem
from screenapp.window.board.dimensions import Dimensions
from screenapp.window.board.drawn_part import DrawnPart, drawn_part
from screenapp.window.board.faults_item import FaultsItem
from screenapp.window.board.grid import GridItem, ScaleBarItem
from screenapp.window.board.hit_test import hit_test
from screenapp.window.board.labels import LabelsItem
from screenapp.window.board.live_faults import LiveFaults
from screenapp.window.board.naming import name_at
from screenapp.window.board.open_chains_item import OpenChainsItem
from screenapp.window.board.part_item import FillItem, OutlineItem, PartPaths
from screenapp.window.board.placing import Placing
from screenapp.window.board.preview_item import PreviewItem
from screenapp.window.board.resultant_item import ResultantItem
from screenapp.window.board.ring_choice import RingChoice
from screenapp.window.board.snapping import Snap, snap
from screenapp.window.board.symbols import ProbesItem, SymbolsItem
from screenapp.window.board.tools.base import Place, Tool
from screenapp.window.board.typed_entry import EntryRow
from screenapp.window.board.zone_items import ZoneFillItem, ZoneLineItem
from screenapp.window.board.zoom_view import ZoomView
from screenapp.window.document import Document

CLICK_PX = 4.0
"""The right button that moves less than this is a click, not a drag of the board."""

HOLD_OFF = Qt.KeyboardModifier.ControlModifier
"""Held down, nothing snaps."""


class Canvas(ZoomView):
    """One view of the part in mm, y up, for drawing and for results.

    Attributes:
        document: what is shown.
        tool: the tool in hand.
        place: where the cursor is, None while it is elsewhere.
        dimensions: those that are shown, as on a drawing.
        remark_at: what the lens has to say of a place [mm], "" for nothing.
        pressed_first: asked about a press [px] before the tool; answers whether it was taken.

    Signals:
        pointed: `place` or the tool's state changed.
        tool_wanted: a tool asks for another one, by name.
        edit_wanted: the exact editor is wanted on an id, at a viewport position.
    """

    pointed = Signal()
    tool_wanted = Signal(str)
    edit_wanted = Signal(str, QPointF)

    _fitted: tuple[float, float, float, float] | None = None
    """Bounds of the part [mm] when it was fitted; None once the view is moved."""

    def __init__(self, document: Document, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.document = document
        self.tool: Tool | None = None
        self.place: Place | None = None
        self.remark_at: Callable[[Point], str] = lambda at: ""
        self.pressed_first: Callable[[QPointF], bool] = lambda px: False
        self._preview: Part | None = None
        self._space = False
        self._last_px: QPointF | None = None
        self._modifiers = Qt.KeyboardModifier.NoModifier
        self.setAccessibleName("Drawing board")
        self.viewport().setAccessibleName("Drawing board")
        self.grid, self.scale_bar = GridItem(), ScaleBarItem()
        paths = PartPaths()
        self.fill, self.outline = FillItem(paths), OutlineItem(paths)
        self.zone_fill, self.zone_lines = ZoneFillItem(paths), ZoneLineItem(paths)
        self.symbols, self.probes, self.marked = SymbolsItem(), ProbesItem(), FaultsItem()
        self.cuts = CutsItem()
        self.resultants = ResultantItem(document)
        self.dimensions = Dimensions(self)
        self.labels = LabelsItem(self)
        self.open_chains = OpenChainsItem()
        self.preview_item = PreviewItem(self)
        for item in (
            self.grid,
            self.fill,
            self.zone_fill,
            self.zone_lines,
            self.outline,
            self.dimensions.item,
            self.symbols,
            self.cuts,
            self.probes,
            self.labels,
            self.resultants,
            self.marked,
            self.open_chains,
            self.preview_item,
            self.scale_bar,
        ):
            self.view_box.addItem(item, ignoreBounds=True)
        self.entry = EntryRow(self)
        self.placing = Placing(self)
        self.ring_choice = RingChoice(self)
        self.context = ContextMenu(self)
        self.live = LiveFaults(self)
        self._right: QPointF | None = None
        self.apply_theme()

    # what is shown

    @property
    def part(self) -> Part:
        """The part shown: the tool's preview of a change, else the document's."""
        return self._preview if self._preview is not None else self.document.part

    @property
    def drawn(self) -> DrawnPart:
        """The boundary of the part shown."""
        return drawn_part(self.part)

    @property
    def previewing(self) -> bool:
        """Whether a change that is not yet made is shown."""
        return self._preview is not None

    def preview(self, part: Part | None) -> None:
        """Show `part` in place of the document's, or the document's again."""
        if part is not self._preview:
            self._preview = part
            self.show_part()

    def show_part(self) -> None:
        """Paint the part afresh."""
        drawn = self.drawn
        self.grid.units = self.scale_bar.units = self.part.display_units
        before = drawn_part(self.document.part) if self.previewing else None
        self.fill.show_part(drawn, before)
        self.outline.show_part(drawn, before)
        self.zone_fill.show_part(drawn)
        self.zone_lines.labels = self.document.view.lens == "Shape"
        self.zone_lines.show_part(drawn)
        self.symbols.show_part(drawn, self.document.view.case)
        self.cuts.show_part(drawn)
        self.probes.show_part(drawn)
        self.labels.update()
        self.resultants.update()
        self.show_marked()
        self.dimensions.refresh()
        self.grid.update()

    def show_marked(self) -> None:
        """Ring what is wrong."""
        if not self.previewing:  # else the marks of the look before stay until the next one
            self.marked.show_faults(self.drawn, self._marked_faults())
        self.live.poke()

    def show_live(self, faults: tuple[Fault, ...]) -> None:
        """Ring what is wrong with a change under way; without faults what is wrong anyway."""
        shown = faults if faults or self.previewing else self._marked_faults()
        self.marked.show_faults(self.drawn, shown, live=bool(faults))

    def _marked_faults(self) -> tuple[Fault, ...]:
        """The faults to be ringed: cautions are left out where a lens tells what is doubtful."""
        faults = self.document.faults
        if self.document.view.lens in ("Shape", "Mesh") or self.document.findings is None:
            return faults
        return tuple(fault for fault in faults if fault.blocks)

    def show_lit(self) -> None:
        """Light what is selected and hovered."""
        self.dimensions.refresh()
        for item in (
            self.outline,
            self.zone_lines,
            self.symbols,
            self.cuts,
            self.probes,
            self.resultants,
        ):
            item.selected, item.hovered = self.document.selection, self.document.hovered
            item.update()
        self.labels.update()

    def apply_theme(self) -> None:
        """Take the colours of the present theme."""
        self.setBackground(theme.current().paper)
        self.viewport().update()

    # view

    def fit(self) -> None:
        """Show the whole part with room for what stands round it."""
        self.dimensions.fit()
        self._fitted = self.drawn.bounds

    def resizeEvent(self, event: QResizeEvent) -> None:
        """A part that was fitted, and has the same size still, is fitted again."""
        super().resizeEvent(event)
        if self._fitted is not None and self._fitted == self.drawn.bounds:
            self.fit()

    def pan_to(self, px: QPointF) -> None:
        """The view is dragged to a pixel."""
        super().pan_to(px)
        self._fitted = None

    def zoom(self, factor: float, about: QPointF | None = None) -> None:
        """Magnify by `factor`, keeping the place at `about` [px] where it is."""
        super().zoom(factor, about)
        self._fitted = None
        self._refresh_place()

    # tools

    def take(self, tool: Tool) -> None:
        """Put another tool in hand."""
        if tool is self.tool:
            return
        if self.tool is not None:
            self.ring_choice.drop()
            self.tool.stop(tool)
        self.entry.close_row()
        self.tool = tool
        tool.start()
        self._refresh_place()
        self.refresh()

    def refresh(self) -> None:
        """Repaint the preview and bring the cursor, the entry row and the corner up to date."""
        self.preview_item.update()
        self.live.poke()
        if self.tool is not None and not self.panning:
            number = self._last_px is not None and self.dimensions.at(self._last_px) is not None
            beam = Qt.CursorShape.IBeamCursor
            self.viewport().setCursor(beam if number else self.tool.cursor)
        self.entry.sync()
        self.pointed.emit()

    def snap_at(self, at: Point, hold_off: bool = False) -> Snap:
        """Where a click at `at` [mm] lands for the tool in hand."""
        tool = self.tool
        if hold_off or tool is None:
            return Snap("none", at)
        before = tool.dragged_from()
        return snap(
            self.drawn if before is None else drawn_part(before),
            self.frame_now,
            at,
            self.part.display_units,
            tool.snap_points(),
            tool.unsnapped(),
            tool.passes_over,
            tool.point_from(),
        )

    @property
    def held_off(self) -> bool:
        """Whether the key that holds snaps off is down."""
        return bool(self._modifiers & HOLD_OFF)

    def show_snap(self, found: Snap) -> None:
        """Show another snap than the cursor's own, e.g. that of a corner being dragged."""
        if self.place is not None:
            self.place = replace(self.place, snap=found)

    def place_at(
        self, px: QPointF, modifiers: Qt.KeyboardModifier = Qt.KeyboardModifier.NoModifier
    ) -> Place:
        """Where a viewport position [px] is, what it snaps to and what lies under it."""
        frame = self.frame_now
        raw, shift = frame.mm(px), bool(modifiers & Qt.KeyboardModifier.ShiftModifier)
        tool = self.tool
        if self.place is not None and tool is not None and tool.dragged_from() is not None:
            return replace(self.place, px=px, raw=raw, shift=shift)  # the tool snaps what it drags
        found = self.snap_at(raw, bool(modifiers & HOLD_OFF))
        return Place(px, raw, found, hit_test(self.drawn, frame, px, self.symbols), shift)

    def _refresh_place(self) -> None:
        if self._last_px is not None:
            self._set_place(self._last_px, self._modifiers)

    def _set_place(self, px: QPointF, modifiers: Qt.KeyboardModifier) -> Place:
        self._last_px, self._modifiers = px, modifiers
        self.place = self.place_at(px, modifiers)
        hit = self.place.hit
        tool = self.tool
        self.document.hover(None if hit is None else tool.lights(hit) if tool else hit.id)
        faults = self.marked.at(px, self.frame_now)
        number = self.dimensions.at(px)
        tip = name_at(self.document, hit, faults)
        if number is not None:
            tip = f"{number.words}: double-click to change it"
        self.viewport().setToolTip(tip)
        return self.place

    # mouse

    def mousePressEvent(self, event: QMouseEvent) -> None:
        """Begin a pan or hand the press to the tool."""
        self.setFocus(Qt.FocusReason.MouseFocusReason)
        button = event.button()
        pans = button in (Qt.MouseButton.MiddleButton, Qt.MouseButton.RightButton)
        self._right = event.position() if button == Qt.MouseButton.RightButton else None
        if pans or (button == Qt.MouseButton.LeftButton and self._space):
            self.begin_pan(event.position())
        elif button == Qt.MouseButton.LeftButton and self.pressed_first(event.position()):
            self.refresh()
        elif (
            button == Qt.MouseButton.LeftButton and self.dimensions.at(event.position()) is not None
        ):
            pass  # a number is edited by a double-click; a click on it selects nothing else
        elif button == Qt.MouseButton.LeftButton and self.tool is not None:
            self.tool.press(self._set_place(event.position(), event.modifiers()))
            self.refresh()
        event.accept()

    def mouseMoveEvent(self, event: QMouseEvent) -> None:
        """Pan, or tell the tool."""
        if self.panning:
            self._last_px = event.position()
            self.pan_to(event.position())
        else:
            super().mouseMoveEvent(event)
            place = self._set_place(event.position(), event.modifiers())
            if self.tool is not None:
                self.tool.move(place)
            self.refresh()
        event.accept()

    def mouseReleaseEvent(self, event: QMouseEvent) -> None:
        """End a pan, or tell the tool."""
        if self.panning:
            self.end_pan()
            self._set_place(event.position(), event.modifiers())
            right, self._right = self._right, None
            if right is not None and (event.position() - right).manhattanLength() < CLICK_PX:
                self.context.open(event.position())
        elif event.button() == Qt.MouseButton.LeftButton and self.tool is not None:
            self.tool.release(self._set_place(event.position(), event.modifiers()))
            self._refresh_place()  # what was dragged lies under the cursor now
        self.refresh()
        event.accept()

    def contextMenuEvent(self, event: QContextMenuEvent) -> None:
        """The right button opens when it comes up, for it drags the board too."""
        event.accept()

    def mouseDoubleClickEvent(self, event: QMouseEvent) -> None:
        """Edit the number there, or tell the tool."""
        mark = self.dimensions.at(event.position())
        if event.button() == Qt.MouseButton.LeftButton and mark is not None:
            self.dimensions.editor.open_on(mark)
        elif event.button() == Qt.MouseButton.LeftButton and self.tool is not None:
            self.tool.double(self._set_place(event.position(), event.modifiers()))
            self.refresh()
        event.accept()

    def wheelEvent(self, event: QWheelEvent) -> None:
        """Zoom about the cursor."""
        self.dimensions.editor.close_editor()
        self.zoom(1.0015 ** event.angleDelta().y(), event.position())
        self.refresh()
        event.accept()

    def leaveEvent(self, event: QEvent) -> None:
        """Nothing is under the cursor any more."""
        super().leaveEvent(event)
        self.place = self._last_px = None
        self.document.hover(None)
        self.refresh()

    # keys

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Space pans; typing opens the entry row; the rest goes to the tool, then to the board."""
        key = event.key()
        if key == Qt.Key.Key_Space and not event.isAutoRepeat():
            self._space = True
            self.viewport().setCursor(Qt.CursorShape.OpenHandCursor)
            return
        if key == Qt.Key.Key_Control:
            self._modifiers |= HOLD_OFF
            self._refresh_place()
        used = self.entry.begin(event) or (self.tool is not None and self.tool.key_press(event))
        self.refresh()
        event.setAccepted(used)

    def keyReleaseEvent(self, event: QKeyEvent) -> None:
        """End of space and of holding snaps off."""
        if event.key() == Qt.Key.Key_Space and not event.isAutoRepeat():
            self._space = False
        if event.key() == Qt.Key.Key_Control:
            self._modifiers &= ~HOLD_OFF
            self._refresh_place()
        self.refresh()
        event.accept()

    def event(self, event: QEvent) -> bool:
        """Tab opens the entry row while something can be typed."""
        if (
            isinstance(event, QKeyEvent)
            and event.type() == QEvent.Type.KeyPress
            and event.key() == Qt.Key.Key_Tab
            and self.tool is not None
            and self.tool.entry_fields()
        ):
            self.entry.open_row(None)
            return True
        return bool(super().event(event))

    def focusOutEvent(self, event: QFocusEvent) -> None:
        """A key let go elsewhere is not seen."""
        self._space = False
        super().focusOutEvent(event)
