"""A sentence that wraps at any width, with values in it that are changed in place."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass

from PySide6.QtCore import QEvent, QPointF, QSize, Qt, Signal
from PySide6.QtGui import QFont, QFontMetricsF, QPainter, QPaintEvent, QResizeEvent
from PySide6.QtWidgets import QSizePolicy, QWidget

from screenapp.window import theme
from screenapp.window.sheet.field import LINE, PAD, Field, baseline
from screenapp.window.sheet.pieces import Link, Piece, Value, Words, plain_text

_GAP = 1.0
"""Between a field and what stands right after it [px], so that its ring hides no full stop."""


@dataclass(frozen=True)
class _Bit:
    """A word, or the key of a field, that stands in a line."""

    text: str
    words: Words | None
    key: str = ""


class Sentence(QWidget):
    """Shows pieces one after another and keeps the fields of those whose key stays.

    Signals:
        pointed: the id that the piece under the pointer speaks of, or "".
    """

    pointed = Signal(str)

    def __init__(self, parent: QWidget | None = None, size: int = theme.TEXT_BODY) -> None:
        super().__init__(parent)
        self._pieces: tuple[Piece, ...] = ()
        self._fields: dict[str, Field] = {}
        self._groups: list[list[_Bit]] = []
        self._placed: list[tuple[QPointF, str, Words]] = []
        self._complaint = ""
        self._complainer: Field | None = None
        self._size = size
        self._widths: tuple[object, ...] = ()
        self.on_delete: Callable[[], None] | None = None
        self.setFont(theme.font(size))
        policy = QSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Minimum)
        policy.setHeightForWidth(True)
        self.setSizePolicy(policy)
        theme.notifier.changed.connect(self.update)

    def set(self, *pieces: Piece | str) -> None:
        """Show other pieces; a plain str stands for Words."""
        made = tuple(Words(p) if isinstance(p, str) else p for p in pieces)
        if made == self._pieces:
            return
        self._pieces = made
        self._groups = []  # fields ask for room while they change: not before all are there
        wanted = {p.key: p for p in made if isinstance(p, Value | Link)}
        for key in [k for k in self._fields if k not in wanted]:
            self._drop(key)
        for key, piece in wanted.items():
            if key in self._fields:
                self._fields[key].show_piece(piece)
            else:
                self._fields[key] = self._new_field(piece)
        self._groups = _grouped(made)
        self.setAccessibleName(plain_text(made))
        self._settle()

    @property
    def text(self) -> str:
        """What it says."""
        return plain_text(self._pieces)

    @property
    def complaint(self) -> str:
        """What is wrong with what is being typed; empty if nothing is."""
        return self._complaint

    def field(self, key: str) -> Field:
        """The field of a value or link."""
        return self._fields[key]

    def fields_in_order(self) -> list[Field]:
        """The fields as they are read."""
        return [self._fields[p.key] for p in self._pieces if isinstance(p, Value | Link)]

    # --- layout -----------------------------------------------------------------------------

    def hasHeightForWidth(self) -> bool:
        """It does: it wraps."""
        return True

    def heightForWidth(self, width: int) -> int:
        """Height that the lines need at a width [px]."""
        return self._flow(width, place=False)

    def sizeHint(self) -> QSize:
        """All on one line, within reason."""
        wide = 0.0
        for group in self._groups:
            wide += sum(self._width(bit) for bit in group) + self._space()
        width = min(420, max(40, int(wide) + 1 + 2 * PAD))
        return QSize(width, self.heightForWidth(max(width, self.width() or width)))

    def minimumSizeHint(self) -> QSize:
        """Narrow enough for any sheet."""
        return QSize(40, LINE)

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Wrap anew."""
        self._flow(self.width(), place=True)
        super().resizeEvent(event)

    def changeEvent(self, event: QEvent) -> None:
        """Another font wraps anew."""
        if event.type() == QEvent.Type.FontChange:
            self._settle()
        super().changeEvent(event)

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Paint the words; fields paint themselves."""
        painter = QPainter(self)
        for where, text, words in self._placed:
            painter.setFont(self._font_of(words))
            painter.setPen(theme.colour(words.colour or ("quiet" if words.quiet else "ink")))
            painter.drawText(where, text)

    def _settle(self) -> None:
        self._flow(self.width(), place=True)
        widths = (*(tuple(map(self._width, group)) for group in self._groups), self._complaint)
        if widths != self._widths:  # what layouts know of its height holds no more, at any width
            self._widths = widths
            self.updateGeometry()
        self.update()

    def _flow(self, width: int, place: bool) -> int:
        """Set the groups in lines of `width` [px]; returns the height [px]."""
        # lines begin PAD from the left, so that the ring of a field there has room
        x, line, start = float(PAD), 0, float(PAD)
        width -= PAD
        space = self._space()
        placed: list[tuple[QPointF, str, Words]] = []
        base = baseline(self.font())
        groups = [*self._groups]
        complaint_from = len(groups)
        if self._complaint:
            said = Words(self._complaint, colour="bad")
            groups += [[_Bit(word, said)] for word in self._complaint.split()]
        for number, group in enumerate(groups):
            wide = self._group_width(group)
            if (number == complaint_from and number > 0) or (
                x > start and x + space + wide > width
            ):
                x, line = start, line + 1
            elif x > start:
                x += space
            for place_in_group, bit in enumerate(group):
                wide = self._width(bit)
                if bit.words is not None:
                    placed.append((QPointF(x, line * LINE + base), bit.text, bit.words))
                elif place:
                    room = min(wide, max(40.0, width - x)) + 2 * PAD
                    self._fields[bit.key].setGeometry(
                        math.floor(x) - PAD, line * LINE, math.ceil(room), LINE
                    )
                x += wide
                if bit.words is None and place_in_group + 1 < len(group):
                    x += _GAP
        if place:
            self._placed = placed
        return (line + 1) * LINE if groups else 0

    def _group_width(self, group: list[_Bit]) -> float:
        gaps = sum(_GAP for bit in group[:-1] if bit.words is None)
        return sum(self._width(bit) for bit in group) + gaps

    def _width(self, bit: _Bit) -> float:
        if bit.words is None:
            return float(self._fields[bit.key].sizeHint().width() - 2 * PAD)
        return QFontMetricsF(self._font_of(bit.words)).horizontalAdvance(bit.text)

    def _space(self) -> float:
        return QFontMetricsF(self.font()).horizontalAdvance(" ")

    def _font_of(self, words: Words) -> QFont:
        if not words.strong:
            return self.font()
        return theme.font(self._size, QFont.Weight.DemiBold)

    # --- fields -----------------------------------------------------------------------------

    def _new_field(self, piece: Value | Link) -> Field:
        made = Field(piece, self)
        made.resized.connect(self._settle)
        made.pointed.connect(self.pointed)
        made.delete_pressed.connect(self._delete)
        made.complained.connect(lambda text: self._complain(made, text))
        made.show()
        return made

    def _delete(self) -> None:
        if self.on_delete is not None:
            self.on_delete()

    def _drop(self, key: str) -> None:
        gone = self._fields.pop(key)
        if gone is self._complainer:
            self._complain(gone, "")
        if gone.hasFocus() or (gone.editor is not None and gone.editor.hasFocus()):
            self.setFocus(Qt.FocusReason.OtherFocusReason)
        gone.hide()
        gone.deleteLater()

    def _complain(self, field: Field, text: str) -> None:
        if not text and self._complainer is not field:
            return
        self._complainer = field if text else None
        if text != self._complaint:
            self._complaint = text
            self._settle()


def _grouped(pieces: tuple[Piece, ...]) -> list[list[_Bit]]:
    """Bits that stand together: lines break only where a space was written."""
    groups: list[list[_Bit]] = []
    open_group = False
    for piece in pieces:
        if not isinstance(piece, Words):
            bit = _Bit(piece.text, None, piece.key)
            if open_group:
                groups[-1].append(bit)
            else:
                groups.append([bit])
            open_group = True
            continue
        for number, word in enumerate(piece.text.split(" ")):
            if number > 0:
                open_group = False
            if not word:
                continue
            if open_group:
                groups[-1].append(_Bit(word, piece))
            else:
                groups.append([_Bit(word, piece)])
            open_group = True
    return groups
