"""The drawing board: tool strip, canvas, and the row below with lenses and coordinates."""

from __future__ import annotations

from PySide6.QtCore import QPointF, Qt, Signal
from PySide6.QtGui import QKeyEvent, QResizeEvent, QShowEvent
from PySide6.QtWidgets import QHBoxLayout, QVBoxLayout, QWidget

from screenapp.model.dimension_marks import DimensionsShown
from screenapp.window import theme
from screenapp.window.board.board_commands import board_commands
from screenapp.window.board.canvas import Canvas
from screenapp.window.board.corner_label import CornerLabel
from screenapp.window.board.empty_board import EmptyBoard
from screenapp.window.board.grid import unit_length
from screenapp.window.board.quantity import warm_up
from screenapp.window.board.tool_strip import ToolStrip
from screenapp.window.board.tools.every import every_tool
from screenapp.window.board.tools.select import SelectTool
from screenapp.window.commands import run_pressed
from screenapp.window.document import Document
from screenapp.window.painting import CROSSED


class Board(QWidget):
    """Shows one document and lets it be drawn, held, loaded and probed.

    Attributes:
        document: what is shown.
        canvas: results are painted on `canvas.view_box` too.
        commands: everything that can be done here by a key.

    Signals:
        sample_wanted: path of a sample to open, chosen on the empty board.
    """

    sample_wanted = Signal(object)

    def __init__(self, document: Document, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.document = document
        self.canvas = Canvas(document)
        self.tools = every_tool(self.canvas)
        self.commands = board_commands(self)
        self.strip = ToolStrip(self.tools)
        self._history = document.history
        self._fitted = False
        self._corner = CornerLabel()
        self._corner.setAccessibleName("Cursor and snap")
        self._foot = QWidget()
        self._foot.setObjectName("boardFoot")
        self._foot_row = QHBoxLayout(self._foot)
        self._foot_row.setContentsMargins(12, 4, 12, 4)
        self._foot_row.setSpacing(12)
        self._lens_bar: QWidget = QWidget()
        self._foot_row.addWidget(self._lens_bar)
        self._foot_row.addWidget(self._corner, 1)
        right = QVBoxLayout()
        right.setSpacing(0)
        right.addWidget(self.canvas, 1)
        right.addWidget(self._foot)
        row = QHBoxLayout(self)
        row.setContentsMargins(0, 0, 0, 0)
        row.setSpacing(0)
        row.addWidget(self.strip)
        row.addLayout(right, 1)
        self.empty = EmptyBoard(self.canvas)
        self._connect()
        self.canvas.show_part()
        self.canvas.fit()
        self.take(self.tools[0].name)
        self.apply_theme()

    # for others

    def set_lens_bar(self, widget: QWidget) -> None:
        """Put the row of lenses at the left of the row below the canvas."""
        self._foot_row.replaceWidget(self._lens_bar, widget)
        self._lens_bar.deleteLater()
        self._lens_bar = widget

    def set_outline_faint(self, faint: bool) -> None:
        """Draw the undeformed outline faintly, e.g. while a deformed shape is shown."""
        self.canvas.outline.faint = faint
        self.canvas.outline.update()

    @property
    def corner_text(self) -> str:
        """The words at the right below the canvas: cursor place and snap in force."""
        return self._corner.full

    def take(self, name: str) -> None:
        """Put the tool called `name` in hand."""
        tool = next(t for t in self.tools if t.name == name)
        self.canvas.take(tool)
        self.strip.show_tool(name)
        self._show_empty()

    def take_by_key(self, name: str) -> None:
        """Put a tool in hand and the keyboard on the canvas."""
        self.canvas.setFocus(Qt.FocusReason.ShortcutFocusReason)
        self.take(name)

    def fit(self) -> None:
        """Show the whole part."""
        self.canvas.fit()

    def show_dimensions(self, shown: DimensionsShown) -> None:
        """Show all dimensions or none; if that is so already, overall and selected ones."""
        dimensions = self.canvas.dimensions
        dimensions.shown = "plain" if dimensions.shown == shown else shown
        words = {"plain": "overall and selected", "all": "all", "none": "hidden"}
        self.document.said.emit(f"Dimensions: {words[dimensions.shown]}.")
        dimensions.refresh()
        dimensions.make_room()

    def show_crosses(self) -> None:
        """Show the principal directions, or hide them."""
        shown = not self.document.view.crosses
        self.document.look(crosses=shown)
        where = "" if self.document.view.lens in CROSSED else ", in the lenses Utilisation, Stress"
        state = "shown" if shown else "hidden"
        self.document.said.emit(f"Principal directions: {state}{where}.")

    def zoom_in(self) -> None:
        """Magnify about the middle."""
        self.canvas.zoom(1.25)

    def zoom_out(self) -> None:
        """Show more."""
        self.canvas.zoom(0.8)

    def apply_theme(self) -> None:
        """Take the colours of the present theme."""
        p = theme.current()
        self._foot.setStyleSheet(
            f"#boardFoot {{ background: {p.chrome}; border-top: 1px solid {p.faint}; }}"
        )
        self._corner.setStyleSheet(f"color: {p.quiet};")
        self.strip.apply_theme()
        self.empty.apply_theme()
        self.canvas.apply_theme()

    # events

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Keys that the canvas did not use: tools, zoom, fit, Escape."""
        if run_pressed(self.commands, event):
            self.canvas.refresh()
            event.accept()
        else:
            super().keyPressEvent(event)

    def showEvent(self, event: QShowEvent) -> None:
        """Fit once the size is known."""
        super().showEvent(event)
        if not self._fitted:
            self._fitted = True
            self.canvas.fit()
            self.canvas.setFocus(Qt.FocusReason.OtherFocusReason)  # keys draw at once
            warm_up()

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Keep the card in the middle."""
        super().resizeEvent(event)
        self._show_empty()

    def _show_empty(self) -> None:
        """The card stands while there is nothing and nothing is being drawn."""
        part = self.document.part
        bare = part.outline is None and not part.holes
        self.empty.setVisible(bare and self.canvas.tool is self.tools[0])
        if self.empty.isVisibleTo(self):
            self.empty.centre()

    def step_back(self) -> None:
        """Drop the last thing half done; else put the tool down; else select nothing."""
        tool = self.canvas.tool
        if tool is not None and tool.step_back():
            return
        if tool is not self.tools[0]:
            self.take(self.tools[0].name)
        else:
            self.document.select()

    def _connect(self) -> None:
        document = self.document
        document.part_changed.connect(self._part_changed)
        document.selection_changed.connect(self._show_lit)
        document.hovered_changed.connect(self._show_lit)
        document.view_changed.connect(self.canvas.show_part)
        document.findings_changed.connect(self.canvas.show_marked)
        self.canvas.pointed.connect(self._show_corner)
        self.canvas.tool_wanted.connect(self.take)
        self.canvas.edit_wanted.connect(self._edit)
        self.strip.wanted.connect(self.take)
        self.strip.fit_wanted.connect(self.fit)
        self.empty.sample_wanted.connect(self.sample_wanted)
        theme.notifier.changed.connect(self.apply_theme)

    def _part_changed(self) -> None:
        self.canvas.placing.drop()
        self.canvas.dimensions.editor.close_editor()
        self.canvas.ring_choice.drop()
        if self.canvas.tool is not None:
            self.canvas.tool.part_changed()
        self.canvas.preview(None)
        self.canvas.show_part()
        if self.document.history is not self._history:
            self._history = self.document.history
            self.canvas.open_chains.clear()
            self.canvas.fit()
        self._show_empty()
        self.canvas.refresh()

    def _edit(self, id_: str, px: QPointF) -> None:
        """Open the exact editor on a thing, whatever tool is in hand."""
        select = self.tools[0]
        assert isinstance(select, SelectTool)
        self.take(select.name)
        select.edit(id_, px)

    def _show_lit(self) -> None:
        self.canvas.show_lit()

    def _show_corner(self) -> None:
        place, tool = self.canvas.place, self.canvas.tool
        if place is None:
            self._corner.say(tool.hint() if tool is not None else "")
            return
        units = self.document.part.display_units
        unit = unit_length(units)
        x, y = place.at if tool is not None and tool.snapping else place.raw
        digits, word = (3, "in") if units == "in-lbf-ksi" else (2, "mm")
        at = f"x {x / unit:.{digits}f}   y {y / unit:.{digits}f} {word}"
        snap = f"snap: {place.snap.words}" if tool is not None and tool.snapping else ""
        remarks = " · ".join(filter(None, (self.canvas.remark_at(place.raw), snap)))
        self._corner.say(*filter(None, (at, remarks)))
