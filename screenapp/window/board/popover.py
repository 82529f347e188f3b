"""The small sheet beside a place that is being held or loaded: in what way, and how much."""

from __future__ import annotations

from PySide6.QtCore import QEvent, QObject, QPoint, Qt, Signal
from PySide6.QtGui import QKeyEvent
from PySide6.QtWidgets import (
    QButtonGroup,
    QFrame,
    QGridLayout,
    QLabel,
    QLineEdit,
    QPushButton,
    QVBoxLayout,
    QWidget,
)

from screenapp.model.errors import ScreenappError
from screenapp.model.part import Dimension, DisplayUnits
from screenapp.window import theme
from screenapp.window.board.placing_kinds import Way
from screenapp.window.board.quantity import parse, written

WIDE = 300
"""Least width of the small sheet [px]."""

MOST_IN_A_ROW = 5
"""Of more ways two rows are made."""


class Popover(QFrame):
    """Choose a way, type its values; nothing is modal.

    Signals:
        changed: the way or a value changed; see `way` and `values`.
        accepted, dropped: Enter or the button; Escape.
    """

    changed = Signal()
    accepted = Signal()
    dropped = Signal()

    def __init__(self, parent: QWidget) -> None:
        super().__init__(parent)
        self._host = parent
        self.setObjectName("popover")
        self.setFont(theme.font())
        self.way: Way | None = None
        self.values: dict[str, float] = {}
        self.formulas: dict[str, str] = {}
        self._ways: tuple[Way, ...] = ()
        self._units: DisplayUnits = "mm-N-MPa"
        self._dimensions: tuple[Dimension, ...] = ()
        self._edits: dict[str, QLineEdit] = {}
        self._bad: dict[str, str] = {}
        self._title = QLabel()
        self._title.setObjectName("popoverTitle")
        self._ways_row = QGridLayout()
        self._ways_row.setSpacing(4)
        self._group: QButtonGroup | None = None
        self._grid = QGridLayout()
        self._grid.setHorizontalSpacing(6)
        self._grid.setVerticalSpacing(4)
        self._tip = QLabel()
        self._tip.setWordWrap(True)
        self._tip.setObjectName("popoverTip")
        self._put = QPushButton("Put it there")
        self._put.setObjectName("popoverPut")
        self._put.clicked.connect(self.accepted)
        self._put.installEventFilter(self)
        column = QVBoxLayout(self)
        column.setContentsMargins(12, 8, 12, 12)
        column.setSpacing(8)
        column.addWidget(self._title)
        column.addLayout(self._ways_row)
        column.addLayout(self._grid)
        column.addWidget(self._tip)
        column.addWidget(self._put, 0, Qt.AlignmentFlag.AlignLeft)
        self.setFixedWidth(WIDE)
        self.hide()

    @property
    def sound(self) -> bool:
        """Whether everything typed can be understood."""
        return not self._bad

    def field(self, name: str) -> QLineEdit:
        """The field of a value."""
        return self._edits[name]

    def open(
        self,
        title: str,
        ways: tuple[Way, ...],
        units: DisplayUnits,
        near: QPoint,
        now: tuple[str, dict[str, float]] | None = None,
        dimensions: tuple[Dimension, ...] = (),
    ) -> None:
        """Show the ways for a place, with `now` as (key, values) of what is there already."""
        self._ways, self._units, self._dimensions = ways, units, dimensions
        self._title.setText(title)
        self.setAccessibleName(title)
        self._put.setText("Put it there" if now is None else "Change it")
        self._build_ways()
        key = now[0] if now is not None else ways[0].key
        way = next((w for w in ways if w.key == key), ways[0])
        self._take(way, dict(now[1]) if now is not None else dict(way.start), first=True)
        self._style()
        self._move_to(near)
        self.show()
        self.raise_()
        self._focus()

    def complain(self, text: str) -> None:
        """Say why this cannot be, or how it is meant if nothing is wrong."""
        way = self.way
        shown = text or (way.tip if way is not None else "")
        self._tip.setText(shown)
        self._tip.setProperty("bad", bool(text))
        self._tip.style().unpolish(self._tip)
        self._tip.style().polish(self._tip)
        self._resize()

    def eventFilter(self, watched: QObject, event: QEvent) -> bool:
        """Enter accepts, Escape drops, from any field."""
        if isinstance(event, QKeyEvent):
            if event.type() == QEvent.Type.ShortcutOverride:
                event.accept()
                return True
            if event.type() == QEvent.Type.KeyPress:
                if event.key() in (Qt.Key.Key_Return, Qt.Key.Key_Enter):
                    self.accepted.emit()
                    return True
                if event.key() == Qt.Key.Key_Escape:
                    self.dropped.emit()
                    return True
        return super().eventFilter(watched, event)

    def _build_ways(self) -> None:
        _clear(self._ways_row)
        self._group = QButtonGroup(self)
        many = len(self._ways)
        columns = many if many <= MOST_IN_A_ROW else (many + 1) // 2
        for number, way in enumerate(self._ways):
            button = QPushButton(way.label)
            button.setCheckable(True)
            button.setToolTip(way.tip)
            button.setAccessibleName(way.label)
            button.setProperty("way", way.key)
            button.clicked.connect(lambda _on, w=way: self._take(w, dict(w.start)))
            button.installEventFilter(self)
            self._group.addButton(button)
            self._ways_row.addWidget(button, number // columns, number % columns)

    def _take(self, way: Way, values: dict[str, float], first: bool = False) -> None:
        """Show another way; a vector already typed is kept."""
        had = self.values
        names = {f.name for f in way.fields}
        old = self.way.fields if self.way is not None and not first else ()
        if way.fields and way.fields == old:
            values = had
        else:
            self.formulas = {}
        self.way, self._bad = way, {}
        self.values = {k: v for k, v in values.items() if k in names}
        if self._group is not None:
            for button in self._group.buttons():
                button.setChecked(button.property("way") == way.key)
        self._build_fields(way)
        self.complain("")
        if not first:
            self._focus()
        self.changed.emit()

    def _build_fields(self, way: Way) -> None:
        _clear(self._grid)
        self._edits = {}
        for i, field in enumerate(way.fields):
            label, edit = QLabel(field.label), QLineEdit()
            edit.setAccessibleName(field.label)
            edit.setPlaceholderText(field.empty)
            edit.textEdited.connect(lambda _text, name=field.name: self._edited(name))
            edit.installEventFilter(self)
            label.setBuddy(edit)
            self._grid.addWidget(label, i // 2, 2 * (i % 2))
            self._grid.addWidget(edit, i // 2, 2 * (i % 2) + 1)
            self._edits[field.name] = edit
            label.show()
            edit.show()  # at once, or it could not take the focus
            if field.name in self.values:
                edit.setText(written(self.values[field.name], field.kind, self._units))

    def _edited(self, name: str) -> None:
        assert self.way is not None
        field = next(f for f in self.way.fields if f.name == name)
        edit = self._edits[name]
        text = edit.text().strip()
        self._bad.pop(name, None)
        self.values.pop(name, None)
        self.formulas.pop(name, None)
        if text:
            try:
                typed = parse(text, field.kind, self._units, self._dimensions)
                self.values[name] = typed.value
                if typed.formula is not None:
                    self.formulas[name] = typed.formula
            except ScreenappError as fault:
                self._bad[name] = f"{fault.cause}: {fault.mend}."
            for other in field.excludes:
                self.values.pop(other, None)
                self.formulas.pop(other, None)
                self._bad.pop(other, None)
                self._edits[other].clear()
        for key, one in self._edits.items():
            one.setProperty("bad", key in self._bad)
            one.style().unpolish(one)
            one.style().polish(one)
        self.complain(next(iter(self._bad.values()), ""))
        self.changed.emit()

    def _focus(self) -> None:
        for field in self.way.fields if self.way is not None else ():
            if field.name not in self.values and not field.empty:
                self._edits[field.name].setFocus(Qt.FocusReason.PopupFocusReason)
                return
        if self._edits:
            edit = next(iter(self._edits.values()))
            edit.setFocus(Qt.FocusReason.PopupFocusReason)
            edit.selectAll()
        else:
            self._put.setFocus(Qt.FocusReason.PopupFocusReason)

    def _move_to(self, near: QPoint) -> None:
        self._resize()
        host = self._host
        x = near.x() + 28
        if x + self.width() > host.width() - 8:
            x = near.x() - 28 - self.width()
        y = min(near.y() - 24, host.height() - self.height() - 8)
        self.move(max(8, x), max(8, y))

    def _resize(self) -> None:
        layout = self.layout()
        if layout is not None:
            layout.activate()
            ways = self._ways_row.minimumSize().width() + 28  # no way's word is cut off
            self.setFixedWidth(max(WIDE, ways))
            self.resize(self.width(), layout.totalHeightForWidth(self.width()))

    def _style(self) -> None:
        p = theme.current()
        small, body = theme.TEXT_SMALL, theme.TEXT_BODY
        self.setStyleSheet(
            f"#popover {{ background: {p.sheet}; border: 1px solid {p.quiet};"
            f" border-radius: 6px; }}"
            f"QLabel {{ color: {p.quiet}; font-size: {small}px; }}"
            f"#popoverTitle {{ color: {p.ink}; font-size: {body}px; font-weight: 600; }}"
            f'#popoverTip[bad="true"] {{ color: {p.bad}; }}'
            f"QPushButton {{ color: {p.ink}; background: transparent; font-size: {body}px;"
            f" border: 1px solid {p.faint}; border-radius: 4px; padding: 3px 8px;"
            f" min-height: 18px; }}"
            f"QPushButton:hover {{ background: {p.hover}; }}"
            f"QPushButton:focus {{ border: 1px solid {p.accent}; }}"
            f"QPushButton:checked, #popoverPut {{ background: {p.accent}; color: {p.on_accent};"
            f" border: 1px solid {p.accent}; }}"
            f"#popoverPut:focus {{ border: 1px solid {p.ink}; }}"
            f"QLineEdit {{ color: {p.ink}; background: {p.paper}; border: 1px solid {p.faint};"
            f" border-radius: 2px; padding: 2px 4px; font-size: {body}px;"
            f" selection-background-color: {p.accent}; selection-color: {p.on_accent}; }}"
            f"QLineEdit:focus {{ border: 1px solid {p.accent}; }}"
            f'QLineEdit[bad="true"] {{ border: 1px solid {p.bad}; color: {p.bad}; }}'
        )


def _clear(layout: QGridLayout) -> None:
    while (item := layout.takeAt(0)) is not None:
        if (widget := item.widget()) is not None:
            widget.hide()
            widget.deleteLater()
