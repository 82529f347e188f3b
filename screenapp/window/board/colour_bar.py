"""The quiet colour bar at the board's right edge; its ends can be typed over."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from PySide6.QtCore import QEvent, QObject, QPointF, QRectF, Qt, Signal
from PySide6.QtGui import (
    QFont,
    QFontMetricsF,
    QImage,
    QKeyEvent,
    QPainter,
    QPaintEvent,
    QPen,
    QRegion,
)
from PySide6.QtWidgets import QLineEdit, QPushButton, QWidget

from screenapp.report.colours import Scale
from screenapp.window import theme
from screenapp.window.board.hatching import hatch_brush
from screenapp.window.board.overlay import Anchor
from screenapp.window.board.ticks import end_text, ticks

WIDTH, BAR, MARGIN = 168, 14, 12
LABELS = 52  # room for the figures beside the bar
TAKEN = LABELS + BAR + MARGIN + 8
"""What the bar takes of the board's right edge [px]; only its title reaches further."""

TALLEST, SHORTEST = 320, 140
_HEAD = 36  # room for the title above the bar
_CAP = 10  # height of the hatched cap over a bar that leaves rising values out


@dataclass(frozen=True, eq=False)
class BarContent:
    """What the bar shows.

    Attributes:
        title: what is painted, with its unit.
        scale: the colours, in stored units.
        factor: shown number for each stored unit.
        editable: whether the range can be typed.
        typed: whether the range now is a typed one.
        marks: values [shown units] with texts that are always marked, in bold.
        over: whether values lie above the upper end.
        read: turns a typed text into a stored value; raises ValueError with words for the user.
        beyond: said over a hatched cap where what lies above the upper end has no value; or "".
    """

    title: str
    scale: Scale
    factor: float
    editable: bool
    typed: bool
    marks: tuple[tuple[float, str], ...]
    over: bool
    read: Callable[[str], float]
    beyond: str = ""


class ColourBar(QWidget):
    """Paints the bar and its figures over the canvas.

    Signals:
        range_wanted: lower and upper end [stored units], or None and None for the automatic range.
        said: why a typed text was not taken.
    """

    range_wanted = Signal(object, object)
    said = Signal(str)

    def __init__(self, host: QWidget) -> None:
        super().__init__(host)
        self._host = host
        self._content: BarContent | None = None
        self._editing = 0  # the end that is typed: 0 lower, 1 upper
        self.setAccessibleName("Colour bar")
        self._ends = (self._end_button("Lower"), self._end_button("Upper"))
        for end, button in enumerate(self._ends):
            button.clicked.connect(lambda _checked=False, end=end: self._edit(end))
        self._reset = QPushButton("automatic", self)
        self._reset.setObjectName("barReset")
        self._reset.setAccessibleName("Automatic colour range")
        self._reset.setToolTip("Back to the range of what is painted")
        self._reset.clicked.connect(lambda: self.range_wanted.emit(None, None))
        self._line = QLineEdit(self)
        self._line.setObjectName("inPlace")
        self._line.setAccessibleName("End of the colour range")
        self._line.returnPressed.connect(self._accept)
        self._line.installEventFilter(self)
        self._line.hide()
        self.hide()
        Anchor(host, self.settle, self)
        theme.notifier.changed.connect(self.apply_theme)
        self.apply_theme()

    # --- for others -----------------------------------------------------------------------

    def show_content(self, content: BarContent | None) -> None:
        """Show a scale, or hide."""
        self._content = content
        self._line.hide()
        self.setVisible(content is not None)
        if content is None:
            return
        low, high = self._shown_range(content)
        unit = content.title.rpartition(", ")[2] if "," in content.title else ""
        for button, value, word in zip(self._ends, (low, high), ("Lower", "Upper"), strict=True):
            text = end_text(value, low, high)
            if word == "Upper" and content.over and not content.beyond:
                text = f"≥ {text}"
            button.setText(text)
            button.setEnabled(content.editable)
            button.setFocusPolicy(
                Qt.FocusPolicy.StrongFocus if content.editable else Qt.FocusPolicy.NoFocus
            )
            button.setAccessibleName(f"{word} end of the colour range, {text} {unit}".strip())
            button.setToolTip("Press to type another end of the range" if content.editable else "")
        self._reset.setVisible(content.typed)
        self.setAccessibleDescription(
            f"{content.title}: colours from {self._ends[0].text()} to {self._ends[1].text()}"
            + (f", {content.beyond}" if content.beyond else "")
        )
        self.settle()
        self.update()

    @property
    def content(self) -> BarContent | None:
        """What is shown."""
        return self._content

    def covered(self) -> QRectF:
        """What the bar with its figures and title covers of the host [px]."""
        return QRectF(self.geometry()).intersected(
            QRectF(self.x() + self._bar().left() - 6.0, self.y(), WIDTH, self.height())
        )

    def settle(self) -> None:
        """Take the place at the host's right edge."""
        room = self._host.height() - 2 * MARGIN - 96  # the scale of lengths stands below
        height = int(min(TALLEST, max(SHORTEST, room)))
        self.setGeometry(self._host.width() - WIDTH - MARGIN, 4 * MARGIN, WIDTH, height + 40)
        bar = self._bar()
        left = int(bar.right()) + 6
        for button, y in zip(self._ends, (bar.bottom(), bar.top()), strict=True):
            button.setGeometry(left, int(y) - 10, WIDTH - left, 20)
        beside = QRegion(int(bar.left()) - 6, 24, WIDTH, self.height() - 24)
        title = QRegion(0, 0, WIDTH, 26 + self._lowered())
        self.setMask(beside.united(title))  # the rest is the board's
        self._reset.setGeometry(WIDTH - 80, int(bar.bottom()) + 12, 76, 20)
        self.raise_()

    def apply_theme(self) -> None:
        """Take the colours of the theme in force."""
        p = theme.current()
        self.setFont(theme.font(theme.TEXT_SMALL))
        for widget in (*self._ends, self._reset, self._line):
            widget.setFont(theme.font(theme.TEXT_SMALL))
        base = (
            "min-height: 0; border: 1px solid transparent; background: transparent; padding: 0 2px;"
            "border-radius: 3px; text-align: left;"
        )
        self.setStyleSheet(
            f"QPushButton {{ {base} color: {p.ink}; }}"
            f"QPushButton:disabled {{ {base} color: {p.ink}; }}"
            f"QPushButton:hover:enabled {{ {base} color: {p.accent}; }}"
            f"QPushButton:focus {{ {base} border-color: {p.accent}; }}"
            f"QPushButton#barReset {{ {base} color: {p.accent}; text-align: right; }}"
        )
        self.update()

    # --- typing an end --------------------------------------------------------------------

    def eventFilter(self, watched: QObject, event: QEvent) -> bool:
        """Escape and loss of focus leave the range as it was."""
        if watched is self._line:
            if isinstance(event, QKeyEvent) and event.type() == QEvent.Type.KeyPress:
                if event.key() == Qt.Key.Key_Escape:
                    self._leave()
                    return True
            elif event.type() == QEvent.Type.FocusOut:
                self._line.hide()
        return super().eventFilter(watched, event)

    def _edit(self, end: int) -> None:
        if self._content is None or not self._content.editable:
            return
        self._editing = end
        self._line.setGeometry(self._ends[end].geometry().adjusted(-4, 0, 0, 0))
        self._line.setText(self._ends[end].text().removeprefix("≥ "))
        self._line.show()
        self._line.selectAll()
        self._line.setFocus()

    def _leave(self) -> None:
        self._line.hide()
        self._ends[self._editing].setFocus()

    def _accept(self) -> None:
        content = self._content
        if content is None:
            return
        try:
            value = content.read(self._line.text())
        except ValueError as fault:
            self.said.emit(str(fault))
            return
        low, high = content.scale.low, content.scale.high
        low, high = (value, high) if self._editing == 0 else (low, value)
        if not low < high:
            self.said.emit("The upper end of the colour range must lie above the lower end")
            return
        self._leave()
        self.range_wanted.emit(low, high)

    # --- painting -------------------------------------------------------------------------

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Title, bar, ticks."""
        content = self._content
        if content is None:
            return
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        bar = self._bar()
        painter.setFont(theme.font(theme.TEXT_SMALL))
        metrics = QFontMetricsF(painter.font())
        title = metrics.elidedText(content.title, Qt.TextElideMode.ElideRight, WIDTH - 12)
        wide = metrics.horizontalAdvance(title)
        head = QRectF(WIDTH - wide - 6, 6, wide, 16)
        painter.setPen(Qt.PenStyle.NoPen)
        painter.setBrush(theme.colour("paper", 0.85))  # figures must not mix with what lies beneath
        painter.drawRoundedRect(head.adjusted(-6, -3, 6, 3), 4.0, 4.0)
        painter.drawRoundedRect(QRectF(bar.left() - 6, 24, WIDTH, self.height() - 24), 4.0, 4.0)
        painter.setBrush(Qt.BrushStyle.NoBrush)
        painter.setPen(theme.colour("quiet"))
        painter.drawText(head, Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter, title)
        self._draw_beyond(painter, bar, content)
        painter.drawImage(bar, _strip(content.scale, max(2, round(bar.height() * 2))))
        painter.setPen(QPen(theme.colour("ink", 0.7), 1.0))
        painter.drawRect(bar)
        self._draw_ticks(painter, bar, content)
        painter.end()

    def _draw_ticks(self, painter: QPainter, bar: QRectF, content: BarContent) -> None:
        low, high = self._shown_range(content)
        if not high > low:
            return
        taken = [bar.top(), bar.bottom()]
        bold = theme.font(theme.TEXT_SMALL, QFont.Weight.DemiBold)
        plain_font = theme.font(theme.TEXT_SMALL)
        marks = [(v, t, True) for v, t in content.marks]
        marks += [(v, t, False) for v, t in ticks(low, high, max(2, int(bar.height() / 56)))]
        for value, text, strong in marks:
            y = bar.bottom() - (value - low) / (high - low) * bar.height()
            inside = bar.top() - 0.5 <= y <= bar.bottom() + 0.5
            if not inside or any(abs(y - other) < 16 for other in taken):
                continue
            taken.append(y)
            painter.setPen(QPen(theme.colour("ink" if strong else "quiet"), 1.0))
            start = bar.left() if strong else bar.right()
            painter.drawLine(QPointF(start, y), QPointF(bar.right() + 4, y))
            painter.setFont(bold if strong else plain_font)
            painter.drawText(
                QRectF(bar.right() + 9, y - 10, WIDTH - bar.right() - 9, 20),
                Qt.AlignmentFlag.AlignLeft | Qt.AlignmentFlag.AlignVCenter,
                text,
            )

    def _draw_beyond(self, painter: QPainter, bar: QRectF, content: BarContent) -> None:
        """A hatched cap: the bar ends here, the values do not."""
        if not content.beyond:
            return
        cap = QRectF(bar.left(), bar.top() - _CAP, bar.width(), _CAP)
        colour = theme.colour("bad")
        painter.fillRect(cap, hatch_brush(colour, self.devicePixelRatioF()))
        painter.setPen(QPen(colour, 1.0))
        painter.drawRect(cap)
        painter.drawText(
            QRectF(6, cap.top() - 16, WIDTH - 12, 15),
            Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter,
            content.beyond,
        )

    def _lowered(self) -> int:
        """How far the bar begins lower, for the cap and its words [px]."""
        return 28 if self._content is not None and self._content.beyond else 0

    def _bar(self) -> QRectF:
        head = _HEAD + self._lowered()
        return QRectF(WIDTH - LABELS - BAR, head, BAR, self.height() - head - 40)

    @staticmethod
    def _shown_range(content: BarContent) -> tuple[float, float]:
        return content.scale.low * content.factor, content.scale.high * content.factor

    def _end_button(self, word: str) -> QPushButton:
        button = QPushButton("", self)
        button.setCursor(Qt.CursorShape.IBeamCursor)
        button.setAccessibleName(f"{word} end of the colour range")
        return button


def _strip(scale: Scale, rows: int) -> QImage:
    """The scale as an image one pixel wide, its upper end at the top."""
    share = 1.0 - (np.arange(rows) + 0.5) / rows
    span = scale.high - scale.low
    values = scale.low + share * (span if math.isfinite(span) else 0.0)
    words = np.ascontiguousarray(scale.words(values.astype(np.float32))[:, None])
    image = QImage(words.data, 1, rows, 4, QImage.Format.Format_ARGB32_Premultiplied)
    return image.copy()
