"""A number of a dimension edited where it stands on the board."""

from __future__ import annotations

from typing import TYPE_CHECKING

from PySide6.QtCore import QEvent, Qt
from PySide6.QtGui import QFocusEvent, QKeyEvent
from PySide6.QtWidgets import QLineEdit

from screenapp.model import edit_dimensioned, edits
from screenapp.model.dimension_marks import Mark
from screenapp.model.edit_dimensions import formula_at, formulas_lost, with_formulas
from screenapp.model.errors import ScreenappError
from screenapp.model.expressions import plain_number
from screenapp.model.features import find
from screenapp.model.field_names import field_words
from screenapp.model.part import CircleHole, Part, SlotHole
from screenapp.model.typed_values import Typed, shown_formula
from screenapp.window import theme
from screenapp.window.board.dimension_item import DimensionsItem
from screenapp.window.board.exact import exact_paths
from screenapp.window.board.quantity import parse, written

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas


class DimensionEditor(QLineEdit):
    """Enter accepts and hands the keyboard back, Tab goes to the next number, Escape leaves."""

    def __init__(self, canvas: Canvas, item: DimensionsItem) -> None:
        super().__init__(canvas)
        self._canvas = canvas
        self._item = item
        self._mark: Mark | None = None
        self.setAlignment(Qt.AlignmentFlag.AlignCenter)
        self.setFont(theme.font(theme.TEXT_SMALL))
        self.hide()

    @property
    def mark(self) -> Mark | None:
        """What is being edited."""
        return self._mark

    def open_on(self, mark: Mark) -> None:
        """Edit a mark that is shown."""
        placed = self._item.placed(mark.key)
        if placed is None:
            return
        part = self._canvas.document.part
        path = _path_of(part, mark)
        formula = formula_at(part, path) if path else None
        units = part.display_units
        text = written(mark.value, mark.kind, units)
        if formula is not None:
            text = shown_formula(formula, mark.kind, units, part.dimensions)
        self._mark = mark
        self.setAccessibleName(mark.words)
        self._complain("")
        self.setText(text)
        wide = max(92, self.fontMetrics().horizontalAdvance(text) + 28)
        self.setFixedSize(wide, 24)
        canvas = self._canvas
        x = min(max(round(placed.middle.x()) - wide // 2, 4), canvas.width() - wide - 4)
        y = min(max(round(placed.middle.y()) - 12, 4), canvas.height() - 28)
        self.move(x, y)
        self._item.hide_number(mark.key)
        self.show()
        self.raise_()
        self.setFocus(Qt.FocusReason.OtherFocusReason)
        self.selectAll()

    def close_editor(self) -> None:
        """Leave the number as it is."""
        self._mark = None
        self._item.hide_number(None)
        if self.isVisible():
            had = self.hasFocus()
            self.hide()
            if had:
                self._canvas.setFocus(Qt.FocusReason.OtherFocusReason)

    def event(self, event: QEvent) -> bool:
        """Tab and Shift+Tab go from number to number; keys typed here are no shortcuts."""
        if isinstance(event, QKeyEvent):
            if event.type() == QEvent.Type.ShortcutOverride:
                event.accept()
                return True
            if event.type() == QEvent.Type.KeyPress and event.key() in (
                Qt.Key.Key_Tab,
                Qt.Key.Key_Backtab,
            ):
                self._go(1 if event.key() == Qt.Key.Key_Tab else -1)
                return True
        return super().event(event)

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Enter accepts, Escape leaves."""
        if event.key() in (Qt.Key.Key_Return, Qt.Key.Key_Enter):
            if self._accept():
                self.close_editor()
        elif event.key() == Qt.Key.Key_Escape:
            self.close_editor()
        else:
            super().keyPressEvent(event)

    def focusOutEvent(self, event: QFocusEvent) -> None:
        """A click elsewhere accepts what can be accepted."""
        super().focusOutEvent(event)
        passing = (Qt.FocusReason.PopupFocusReason, Qt.FocusReason.ActiveWindowFocusReason)
        if self._mark is not None and event.reason() not in passing:
            self._accept()
            self.close_editor()

    def _go(self, step: int) -> None:
        mark = self._mark
        if mark is None or not self._accept():
            return
        self._item.hide_number(None)
        keys = [m.key for m in self._item.marks]
        here = keys.index(mark.key) if mark.key in keys else 0
        for further in range(1, len(keys) + 1):
            following = self._item.marks[(here + step * further) % len(keys)]
            if self._item.placed(following.key) is not None:
                self.open_on(following)
                return

    def _accept(self) -> bool:
        """Put what was typed into the part; False, with the reason shown, if it will not do."""
        mark, document = self._mark, self._canvas.document
        if mark is None or not self.isModified():
            return True
        part = document.part
        try:
            typed = parse(self.text(), mark.kind, part.display_units, part.dimensions)
            made = changed(part, mark, typed)
        except ScreenappError as error:
            self._complain(f"{error.cause}: {error.mend}.")
            document.said.emit(f"{error.cause}: {error.mend}.")
            return False
        document.apply(f"{mark.words[:1].lower()}{mark.words[1:]}", made)
        self.setModified(False)
        return True

    def _complain(self, why: str) -> None:
        self.setToolTip(why or "A value, with a unit if you like, or an expression; Enter accepts")
        p = theme.current()
        colour = p.bad if why else p.accent
        self.setStyleSheet(
            f"QLineEdit {{ color: {p.bad if why else p.ink}; background: {p.sheet};"
            f" border: 1px solid {colour}; border-radius: 3px; padding: 0 4px; }}"
        )


def changed(part: Part, mark: Mark, typed: Typed) -> Part:
    """The part with another value of a dimension.

    Raises:
        ScreenappError: the value makes no sense, or an expression gives what would have to move.
    """
    made, texts = _made(part, mark, typed)
    lost = [f for f in formulas_lost(part, made) if f.field not in texts]
    if lost:
        first = lost[0]
        raise edits.EditError(
            f"the {field_words(first.field)} is {first.text}",
            "change its dimension in the sheet, or type a number in its place there",
        )
    return with_formulas(made, texts)


def _made(part: Part, mark: Mark, typed: Typed) -> tuple[Part, dict[str, str | None]]:
    """The changed part, and the expressions that give the numbers changed."""
    value, text = typed.value, typed.formula
    if mark.what == "overall":
        axis = 0 if mark.name == "width" else 1
        corners = edit_dimensioned.far_corners(part, axis)
        texts = {f"outline.corners.{c}.at.{axis}": _from(mark.a[axis], text) for c in corners}
        return edit_dimensioned.set_overall(part, axis, value), texts
    if mark.what == "length":
        return edit_dimensioned.set_edge_length(part, mark.of, value), {}
    if mark.what == "arc":
        return edit_dimensioned.set_arc_radius(part, mark.of, value), {}
    path = _path_of(part, mark)
    if mark.what == "radius":
        return edits.set_round(part, mark.of, value), {path: text}
    if mark.what == "place":
        found = find(part, mark.of)
        hole = found.record if found is not None else None
        assert isinstance(hole, CircleHole | SlotHole)
        axis = 0 if mark.name == "x" else 1
        at = mark.a[axis] + value
        to = (at, hole.centre[1]) if axis == 0 else (hole.centre[0], at)
        return edits.move_hole(part, mark.of, to), {path: _from(mark.a[axis], text)}
    return edits.resize_hole(part, mark.of, **{mark.name: value}), {path: text}


def _from(start: float, text: str | None) -> str | None:
    """The expression of a place that lies `text` from where a dimension begins."""
    if text is None or start == 0.0:
        return text
    return f"{plain_number(start)} + ({text})"


def _path_of(part: Part, mark: Mark) -> str:
    """The field of the part that a mark's number is, "" if it is none by itself."""
    found = find(part, mark.of) if mark.of else None
    if found is None or mark.what in ("length", "arc"):
        return ""
    name = "round" if mark.what == "radius" else mark.name
    return exact_paths(found).get(name, "")
