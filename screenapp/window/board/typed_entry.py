"""Exact entry while drawing: a small row of fields near the cursor, filled as one types."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from PySide6.QtCore import QEvent, QObject, QPoint, Qt
from PySide6.QtGui import QKeyEvent
from PySide6.QtWidgets import QFrame, QHBoxLayout, QLabel, QLineEdit

from screenapp.model.errors import ScreenappError
from screenapp.model.kinds import KindName
from screenapp.model.typed_values import Typed, shown_formula
from screenapp.window import theme
from screenapp.window.board.quantity import parse, written

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas

STARTERS = "0123456789.,-(="
"""A key with one of these opens the row; "=" begins an expression and is not itself typed."""


WIDEST = "−1234.5678 mm"
"""The longest live value that a field shows whole."""

TIP = "type a value, with a unit if you like, or an expression; Enter accepts"


@dataclass(frozen=True)
class EntryField:
    """A value that may be typed.

    Attributes:
        name: key of the value.
        label: shown before the field.
        kind: what is measured.
        excludes: names of fields that this one takes the place of.
        empty: what an empty field means; "" if it may not stay empty.
    """

    name: str
    label: str
    kind: KindName = "length"
    excludes: tuple[str, ...] = ()
    empty: str = ""


class EntryRow(QFrame):
    """The row; it asks the canvas's tool what may be typed and tells it what was.

    Attributes:
        taken: of what was last accepted, the expression of each field; None for a plain number.
    """

    def __init__(self, canvas: Canvas) -> None:
        super().__init__(canvas)
        self._canvas = canvas
        self._fields: tuple[EntryField, ...] = ()
        self._edits: dict[str, QLineEdit] = {}
        self._labels: dict[str, QLabel] = {}
        self._typed: dict[str, str] = {}
        self.taken: dict[str, str | None] = {}
        self.setObjectName("entryRow")
        self.setAccessibleName("Exact entry")
        self.setFont(theme.font())
        self._row = QHBoxLayout(self)
        self._row.setContentsMargins(8, 4, 8, 4)
        self._row.setSpacing(6)
        self.hide()

    @property
    def typed(self) -> dict[str, float]:
        """The typed values that can be understood [mm, deg]."""
        values: dict[str, float] = {}
        for field in self._fields:
            if field.name in self._typed:
                try:
                    values[field.name] = self._parsed(field).value
                except ScreenappError:
                    continue
        return values

    def _expressions(self) -> dict[str, str | None]:
        """The expression of each typed field; None for a plain number."""
        texts: dict[str, str | None] = {}
        for field in self._fields:
            if field.name in self._typed:
                try:
                    texts[field.name] = self._parsed(field).formula
                except ScreenappError:
                    continue
        return texts

    def begin(self, event: QKeyEvent) -> bool:
        """Open the row if the key begins a number and the tool has fields."""
        plain = event.modifiers() in (
            Qt.KeyboardModifier.NoModifier,
            Qt.KeyboardModifier.KeypadModifier,
        )
        tool = self._canvas.tool
        if not plain or event.text() == "" or event.text() not in STARTERS:
            return False
        if tool is None or not tool.entry_fields():
            return False
        self.open_row(event.text().replace("=", ""))
        return True

    def open_row(self, first: str | None, near: QPoint | None = None) -> None:
        """Show the row with the tool's fields, `first` typed into the first one."""
        tool = self._canvas.tool
        if tool is None or not tool.entry_fields():
            return
        self._typed = {}
        self._build(tool.entry_fields())
        self._put(near)
        self.show()
        self.raise_()
        name = self._fields[0].name
        edit = self._edits[name]
        edit.setFocus(Qt.FocusReason.ShortcutFocusReason)
        if first is not None:
            edit.setText(first)
            self._edited(name)
        else:
            edit.selectAll()

    def close_row(self) -> None:
        """Hide the row and give the keyboard back to the canvas."""
        self._typed = {}
        if self.isVisible():
            if self.isAncestorOf(self.window().focusWidget() or self._canvas):
                self._canvas.setFocus(Qt.FocusReason.OtherFocusReason)
            self.hide()

    def forget(self) -> None:
        """What was typed is used up; the fields show live values again."""
        self.taken = self._expressions()
        self._typed = {}

    def edit_of(self, name: str) -> QLineEdit:
        """The field called `name`."""
        return self._edits[name]

    def sync(self) -> None:
        """Follow the tool: other fields, or other live values."""
        if not self.isVisible():
            return
        tool = self._canvas.tool
        fields = tool.entry_fields() if tool is not None else ()
        if not fields:
            self.close_row()
        elif fields != self._fields:
            self._typed = {}
            self._build(fields)
            first = self._edits[fields[0].name]
            first.setFocus(Qt.FocusReason.OtherFocusReason)
            first.selectAll()  # typing replaces the live value
        self._show_live()

    def eventFilter(self, watched: QObject, event: QEvent) -> bool:
        """Enter accepts, Escape steps back, Tab goes round."""
        if not isinstance(event, QKeyEvent):
            return False
        if event.type() == QEvent.Type.ShortcutOverride:
            event.accept()
            return True
        if event.type() != QEvent.Type.KeyPress:
            return False
        if event.key() in (Qt.Key.Key_Return, Qt.Key.Key_Enter):
            self._accept()
        elif event.key() == Qt.Key.Key_Escape:
            self._step_back()
        elif event.key() == Qt.Key.Key_Tab:
            self._go(watched, 1)
        elif event.key() == Qt.Key.Key_Backtab:
            self._go(watched, -1)
        else:
            return False
        return True

    def _build(self, fields: tuple[EntryField, ...]) -> None:
        while (item := self._row.takeAt(0)) is not None:
            if (old := item.widget()) is not None:
                old.removeEventFilter(self)
                old.hide()
                old.deleteLater()
        self._fields = fields
        self._edits, self._labels = {}, {}
        for field in fields:
            label = QLabel(field.label)
            edit = QLineEdit()
            edit.setFixedWidth(edit.fontMetrics().horizontalAdvance(WIDEST) + 14)
            edit.setAccessibleName(field.label)
            edit.setToolTip(f"{field.label}: {TIP}")
            edit.textEdited.connect(lambda _text, name=field.name: self._edited(name))
            edit.installEventFilter(self)
            label.setBuddy(edit)
            self._row.addWidget(label)
            self._row.addWidget(edit)
            self._edits[field.name], self._labels[field.name] = edit, label
            label.show()
            edit.show()  # at once, or it could not take the focus
        self._style()
        self._show_live()
        self.adjustSize()

    def _put(self, near: QPoint | None) -> None:
        """Beside the cursor, inside the canvas."""
        canvas = self._canvas
        if near is None:
            place = canvas.place
            px = place.px.toPoint() if place is not None else canvas.rect().center()
            near = px + QPoint(18, 18)
        x = min(max(near.x(), 8), max(8, canvas.width() - self.width() - 8))
        y = min(max(near.y(), 8), max(8, canvas.height() - self.height() - 8))
        self.move(x, y)

    def _parsed(self, field: EntryField) -> Typed:
        part = self._canvas.document.part
        text = self._typed[field.name]
        return parse(text, field.kind, part.display_units, part.dimensions)

    def _edited(self, name: str) -> None:
        """A field was typed into: those it excludes go back to live values."""
        field = next(f for f in self._fields if f.name == name)
        text = self._edits[name].text().strip().removeprefix("=")  # a habit, in any field
        if text:
            self._typed[name] = text
            for other in field.excludes:
                self._typed.pop(other, None)
        else:
            self._typed.pop(name, None)
        self._tell()

    def _tell(self) -> None:
        self._mark_bad()
        if self._canvas.tool is not None:
            self._canvas.tool.entry_typed(self.typed)
        self._canvas.refresh()

    def _mark_bad(self) -> list[str]:
        """Mark what cannot be understood; gives the names."""
        bad: list[str] = []
        for field in self._fields:
            edit = self._edits[field.name]
            edit.setProperty("bad", False)
            edit.setToolTip(f"{field.label}: {TIP}")
            if field.name in self._typed:
                try:
                    self._parsed(field)
                except ScreenappError as fault:
                    bad.append(field.name)
                    edit.setProperty("bad", True)
                    edit.setToolTip(f"{fault.cause}: {fault.mend}")
            edit.style().unpolish(edit)
            edit.style().polish(edit)
        return bad

    def _accept(self) -> None:
        if bad := self._mark_bad():
            self._edits[bad[0]].setFocus()
            self._edits[bad[0]].selectAll()
            return
        tool, values = self._canvas.tool, self.typed
        if tool is None:
            return
        self.forget()
        self.close_row()  # Enter hands the keyboard back to the board; a figure opens the row again
        tool.entry_accept(values)
        self._canvas.refresh()

    def _step_back(self) -> None:
        if self._typed:
            self._typed = {}
            self._tell()
            self._show_live()
        else:
            tool = self._canvas.tool
            self.close_row()
            if tool is not None:
                tool.entry_typed({})
                tool.entry_closed()
            self._canvas.refresh()

    def _go(self, watched: QObject, step: int) -> None:
        names = [f.name for f in self._fields]
        here = next((i for i, n in enumerate(names) if self._edits[n] is watched), 0)
        edit = self._edits[names[(here + step) % len(names)]]
        edit.setFocus(Qt.FocusReason.TabFocusReason)
        edit.selectAll()

    def _show_live(self) -> None:
        tool = self._canvas.tool
        live = tool.entry_live() if tool is not None else {}
        given = tool.entry_expressions() if tool is not None else {}
        part = self._canvas.part
        units = part.display_units
        for field in self._fields:
            if field.name in self._typed or field.name not in live:
                continue
            edit = self._edits[field.name]
            text = written(live[field.name], field.kind, units)
            if field.name in given:
                text = shown_formula(given[field.name], field.kind, units, part.dimensions)
            self._labels[field.name].setText(field.label + (" =" if field.name in given else ""))
            if edit.text() != text:
                edit.setText(text)
                edit.setCursorPosition(0)
                if edit.hasFocus():
                    edit.selectAll()

    def _style(self) -> None:
        p = theme.current()
        self.setStyleSheet(
            f"#entryRow {{ background: {p.sheet}; border: 1px solid {p.accent};"
            f" border-radius: 4px; }}"
            f"QLabel {{ color: {p.quiet}; font-size: {theme.TEXT_SMALL}px; }}"
            f"QLineEdit {{ color: {p.ink}; background: {p.paper}; border: 1px solid {p.faint};"
            f" border-radius: 2px; padding: 2px 4px; font-size: {theme.TEXT_BODY}px;"
            f" selection-background-color: {p.accent}; selection-color: {p.on_accent}; }}"
            f"QLineEdit:focus {{ border: 1px solid {p.accent}; }}"
            f'QLineEdit[bad="true"] {{ border: 1px solid {p.bad}; color: {p.bad}; }}'
        )
