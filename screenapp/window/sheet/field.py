"""A value or link inside a sentence: painted like text, reached by Tab, changed in place."""

from __future__ import annotations

from PySide6.QtCore import QEvent, QPoint, QPointF, QRectF, QSize, Qt, QTimer, Signal
from PySide6.QtGui import (
    QEnterEvent,
    QFocusEvent,
    QFont,
    QFontMetrics,
    QKeyEvent,
    QMouseEvent,
    QPainter,
    QPaintEvent,
    QPen,
    QResizeEvent,
)
from PySide6.QtWidgets import QLineEdit, QMenu, QWidget

from screenapp.model.errors import ScreenappError
from screenapp.window import theme
from screenapp.window.sheet.chooser import fill_menu
from screenapp.window.sheet.pieces import Choice, Link, Value

LINE = 20
"""Height of a line of text in the sheet [px]."""

PAD = 2
"""Room left and right of a field's text [px]."""
_OPENERS = (Qt.Key.Key_Return, Qt.Key.Key_Enter, Qt.Key.Key_F2, Qt.Key.Key_Space)


class Field(QWidget):
    """Shows one Value or Link.

    Signals:
        complained: what is wrong with what was typed; empty when that is over.
        resized: it wants another width.
        pointed: the id it speaks of, or "" when the pointer leaves.
        delete_pressed: the Delete key was pressed on it.
    """

    complained = Signal(str)
    resized = Signal()
    pointed = Signal(str)
    delete_pressed = Signal()

    def __init__(self, piece: Value | Link, parent: QWidget) -> None:
        super().__init__(parent)
        self.piece = piece
        self._under = False
        self._editor: QLineEdit | None = None
        self._menu: QMenu | None = None
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.setCursor(Qt.CursorShape.PointingHandCursor)
        self.setFont(theme.font())
        self.show_piece(piece)

    def show_piece(self, piece: Value | Link) -> None:
        """Show another piece in the same place; what is being typed stays."""
        wider = self.piece.text != piece.text
        self.piece = piece
        if isinstance(piece, Value):
            how = "choose" if piece.choices else "type"
            hint = piece.hint or f"Enter or click to {how}"
            given = f" = {piece.formula}" if piece.formula else ""
            self.setToolTip(f"{piece.name}{given}. {hint}")
            self.setAccessibleName(f"{piece.name}: {piece.text}{given}")
        else:
            self.setToolTip(piece.tip or piece.text)
            self.setAccessibleName(piece.text)
        if wider:
            self.resized.emit()
        self.update()

    @property
    def editing(self) -> bool:
        """Whether something is being typed here."""
        return self._editor is not None

    @property
    def editor(self) -> QLineEdit | None:
        """The line being typed in, if any."""
        return self._editor

    @property
    def menu(self) -> QMenu | None:
        """The open chooser, if any."""
        return self._menu

    def sizeHint(self) -> QSize:
        """Room for the text, or for typing."""
        if self._editor is not None:
            wide = self._width(self._editor.text()) + 24
            return QSize(max(88, wide), LINE)
        return QSize(self._width(self.piece.text) + 2 * PAD, LINE)

    def open(self) -> None:
        """Act on the link, or begin to change the value."""
        if self.piece.choices is not None:
            self._open_menu(self.piece.choices())
        elif isinstance(self.piece, Link):
            self.piece.act("")
        else:
            self._begin(None)

    # --- typing -----------------------------------------------------------------------------

    def _begin(self, text: str | None) -> None:
        if self._editor is not None or not isinstance(self.piece, Value):
            return
        shown = self.piece.text if self.piece.typed is None else self.piece.typed
        editor = QLineEdit(shown if text is None else text, self)
        editor.setObjectName("inPlace")
        editor.setFont(self.font())
        editor.setAccessibleName(self.piece.name)
        editor.setTextMargins(0, 0, 0, 0)
        editor.textEdited.connect(self._typed)
        editor.installEventFilter(self)
        self._editor = editor
        self.setFocusProxy(editor)
        editor.setGeometry(self.rect())
        editor.show()
        editor.setFocus(Qt.FocusReason.OtherFocusReason)
        if text is None:
            editor.selectAll()
        self.resized.emit()

    def _typed(self, _text: str) -> None:
        self.complained.emit("")
        self.resized.emit()

    def accept(self) -> bool:
        """Take what was typed; if it will not do, say why and go on typing."""
        if self._editor is None or not isinstance(self.piece, Value):
            return True
        shown = self.piece.text if self.piece.typed is None else self.piece.typed
        text = self._editor.text().strip()
        if text != shown:
            try:
                self.piece.commit(text)
            except ScreenappError as error:
                self.complained.emit(sentence_of(error))
                return False
        self._end()
        return True

    def restore(self) -> None:
        """Forget what was typed."""
        self._end()

    def _end(self) -> None:
        editor, self._editor = self._editor, None
        if editor is None:
            return
        had_focus = editor.hasFocus()
        editor.removeEventFilter(self)
        self.setFocusProxy(None)  # type: ignore[arg-type]
        editor.hide()
        editor.deleteLater()
        if had_focus:
            self.setFocus(Qt.FocusReason.OtherFocusReason)
        self.complained.emit("")
        self.resized.emit()
        self.update()

    def eventFilter(self, watched: object, event: QEvent) -> bool:
        """Enter accepts, Esc restores, leaving accepts if it can."""
        if watched is self._editor and self._editor is not None:
            if event.type() == QEvent.Type.KeyPress and isinstance(event, QKeyEvent):
                if event.key() in (Qt.Key.Key_Return, Qt.Key.Key_Enter):
                    if not event.modifiers() & ~Qt.KeyboardModifier.KeypadModifier:
                        self.accept()
                        return True
                elif event.key() == Qt.Key.Key_Escape:
                    self.restore()
                    return True
            elif event.type() == QEvent.Type.FocusOut and isinstance(event, QFocusEvent):
                passing = (
                    Qt.FocusReason.PopupFocusReason,
                    Qt.FocusReason.ActiveWindowFocusReason,
                )
                if event.reason() not in passing:
                    # after the focus has moved: taking the editor away now would move it again
                    QTimer.singleShot(0, self, self._leave)
        return False

    def _leave(self) -> None:
        if self._editor is not None and not self._editor.hasFocus():
            self.accept()

    # --- choosing ---------------------------------------------------------------------------

    def _open_menu(self, choices: tuple[Choice, ...]) -> None:
        menu = QMenu(self)
        fill_menu(menu, choices, self.piece.text if isinstance(self.piece, Value) else None)
        menu.triggered.connect(lambda action: self._chosen(str(action.data())))
        menu.aboutToHide.connect(self._menu_closed)
        self._menu = menu
        menu.popup(self.mapToGlobal(QPoint(0, self.height() + 2)))

    def _chosen(self, key: str) -> None:
        try:
            if isinstance(self.piece, Value):
                self.piece.commit(key)
            else:
                self.piece.act(key)
        except ScreenappError as error:
            self.complained.emit(sentence_of(error))
        else:
            self.complained.emit("")

    def _menu_closed(self) -> None:
        menu, self._menu = self._menu, None
        if menu is not None:
            menu.deleteLater()
        self.update()

    # --- events -----------------------------------------------------------------------------

    def event(self, event: QEvent) -> bool:
        """Keep Delete for the row that the field stands in."""
        asked = event.type() == QEvent.Type.ShortcutOverride
        if asked and isinstance(event, QKeyEvent) and event.key() == Qt.Key.Key_Delete:
            event.accept()
            return True
        return super().event(event)

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Enter, F2 and Space open it; typing a letter or figure begins a new value."""
        plain = not event.modifiers() & ~(
            Qt.KeyboardModifier.KeypadModifier | Qt.KeyboardModifier.ShiftModifier
        )
        if plain and event.key() in _OPENERS:
            self.open()
        elif event.key() == Qt.Key.Key_Delete:
            self.delete_pressed.emit()
        elif plain and self._is_typed() and event.text().isprintable() and event.text():
            self._begin(event.text())
        else:
            super().keyPressEvent(event)

    def _is_typed(self) -> bool:
        return isinstance(self.piece, Value) and self.piece.choices is None

    def mousePressEvent(self, event: QMouseEvent) -> None:
        """Take the press, so that the row underneath does not."""
        event.accept()

    def mouseReleaseEvent(self, event: QMouseEvent) -> None:
        """A click opens it."""
        inside = self.rect().contains(event.position().toPoint())
        if event.button() == Qt.MouseButton.LeftButton and inside:
            self.open()
        event.accept()

    def enterEvent(self, event: QEnterEvent) -> None:
        """Light what it speaks of."""
        self._under = True
        if self.piece.about:
            self.pointed.emit(self.piece.about)
        self.update()
        super().enterEvent(event)

    def leaveEvent(self, event: QEvent) -> None:
        """Light it no more."""
        self._under = False
        if self.piece.about:
            self.pointed.emit("")
        self.update()
        super().leaveEvent(event)

    def focusInEvent(self, event: QFocusEvent) -> None:
        """Show the focus ring."""
        self.update()
        super().focusInEvent(event)

    def focusOutEvent(self, event: QFocusEvent) -> None:
        """Take the focus ring away."""
        self.update()
        super().focusOutEvent(event)

    def resizeEvent(self, event: QResizeEvent) -> None:
        """The line being typed in fills it."""
        if self._editor is not None:
            self._editor.setGeometry(self.rect())
        super().resizeEvent(event)

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Accent text, underlined if it is a value; a ring when focused."""
        if self._editor is not None:
            return
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        box = QRectF(self.rect()).adjusted(0.5, 0.5, -0.5, -0.5)
        focused = self.hasFocus() or self._menu is not None
        if self._under or focused:
            painter.setPen(Qt.PenStyle.NoPen)
            painter.setBrush(theme.colour("chosen" if focused else "hover"))
            painter.drawRoundedRect(box, 3, 3)
        accent = theme.colour("accent")
        painter.setPen(accent)
        metrics = QFontMetrics(self.font())
        text = metrics.elidedText(
            self.piece.text, Qt.TextElideMode.ElideRight, self.width() - 2 * PAD + 1
        )
        base = baseline(self.font())
        painter.drawText(QPointF(PAD, base), text)
        if isinstance(self.piece, Value) or self._under:
            painter.setPen(QPen(accent, 1))
            y = base + 2.5
            painter.drawLine(QPointF(PAD, y), QPointF(self.width() - PAD, y))
        if focused:
            painter.setBrush(Qt.BrushStyle.NoBrush)
            painter.setPen(QPen(accent, 1.5))
            painter.drawRoundedRect(box.adjusted(0.25, 0.25, -0.25, -0.25), 3, 3)

    def _width(self, text: str) -> int:
        return QFontMetrics(self.font()).horizontalAdvance(text)


def baseline(font: QFont) -> float:
    """Where text stands in a line of LINE px."""
    metrics = QFontMetrics(font)
    return (LINE - metrics.height()) / 2 + metrics.ascent()


def sentence_of(error: ScreenappError) -> str:
    """Cause and mend as two sentences."""
    return f"{capital(error.cause)}. {capital(error.mend)}."


_SHORT_WORDS = ("a", "an", "no", "the", "its", "it", "all", "two", "one", "use", "add", "give")


def capital(text: str) -> str:
    """The sentence with a capital letter and no full stop; units and file names stay as they are.

    Example:
        >>> capital("the wall is thin."), capital("kg is a mass"), capital("a.part.json is cut")
        ('The wall is thin', 'kg is a mass', 'a.part.json is cut')
    """
    text = text.rstrip(".")
    first = text.split(" ")[0]
    if first.isalpha() and (len(first) > 3 or first in _SHORT_WORDS):
        return text[:1].upper() + text[1:]
    return text
