"""What an empty board says: how to begin, and three samples to open."""

from __future__ import annotations

from pathlib import Path

from PySide6.QtCore import QSize, Qt, Signal
from PySide6.QtGui import QColor, QIcon, QPainter, QPainterPath, QPen, QPixmap, QTransform
from PySide6.QtWidgets import (
    QFrame,
    QHBoxLayout,
    QLabel,
    QSizePolicy,
    QToolButton,
    QVBoxLayout,
    QWidget,
)

from screenapp.model.part import Part
from screenapp.window import theme
from screenapp.window.board.drawn_part import drawn_part
from screenapp.window.board.frame import polygon
from screenapp.window.samples import read_sample, sample_paths

SENTENCES = (
    "Draw the outline of a flat part with the tools at the left, or open one.",
    "Hold it, load it, and say in the sheet what wall it has and what it must withstand.",
    "Then screen it: each number comes with how far it can be trusted.",
)

PICTURE = QSize(132, 88)
"""Size of a sample's picture [px]."""

SHOWN = 3
"""Samples offered here; File ▸ Samples has them all."""


class EmptyBoard(QFrame):
    """A card in the middle of the canvas.

    Signals:
        sample_wanted: path of the sample clicked.
    """

    sample_wanted = Signal(object)

    def __init__(self, parent: QWidget) -> None:
        super().__init__(parent)
        self._host = parent
        self.setObjectName("emptyBoard")
        self.setAccessibleName("How to begin")
        self.setFont(theme.font())
        self._buttons: list[tuple[QToolButton, Part]] = []
        column = QVBoxLayout(self)
        column.setContentsMargins(32, 24, 32, 28)
        column.setSpacing(8)
        for i, sentence in enumerate(SENTENCES):
            label = QLabel(sentence)
            label.setWordWrap(True)
            label.setObjectName("first" if i == 0 else "more")
            column.addWidget(label)
        column.addSpacing(12)
        row = QHBoxLayout()
        row.setSpacing(12)
        for path in sample_paths():
            if len(self._buttons) < SHOWN and (button := self._sample(path)) is not None:
                row.addWidget(button)
        row.addStretch(1)
        column.addLayout(row)
        self.setFixedWidth(520)
        self.apply_theme()

    @property
    def buttons(self) -> tuple[QToolButton, ...]:
        """The samples' buttons."""
        return tuple(button for button, _ in self._buttons)

    def apply_theme(self) -> None:
        """Take the colours of the present theme."""
        p = theme.current()
        self.setStyleSheet(
            f"#emptyBoard {{ background: {p.sheet}; border: 1px solid {p.faint};"
            f" border-radius: 8px; }}"
            f"QLabel {{ color: {p.quiet}; font-size: {theme.TEXT_BODY}px; }}"
            f"#first {{ color: {p.ink}; font-size: {theme.TEXT_BODY}px; }}"
            f"QToolButton {{ color: {p.ink}; font-size: {theme.TEXT_SMALL}px;"
            f" background: {p.paper}; border: 1px solid {p.faint}; border-radius: 6px;"
            f" padding: 6px; }}"
            f"QToolButton:hover, QToolButton:focus {{ border: 1px solid {p.accent}; }}"
        )
        for button, part in self._buttons:
            button.setIcon(picture(part, self.devicePixelRatioF()))

    def centre(self) -> None:
        """Stand in the middle of the canvas."""
        self.adjustSize()
        x = (self._host.width() - self.width()) // 2
        y = (self._host.height() - self.height()) // 2
        self.move(max(8, x), max(8, y))

    def _sample(self, path: Path) -> QToolButton | None:
        part = read_sample(path)
        if part is None:
            return None
        button = QToolButton()
        button.setText(in_two_lines(part.title))
        button.setSizePolicy(QSizePolicy.Policy.Fixed, QSizePolicy.Policy.Expanding)
        button.setToolTip(f"Open the sample “{part.title}”")
        button.setAccessibleName(f"Sample: {part.title}")
        button.setToolButtonStyle(Qt.ToolButtonStyle.ToolButtonTextUnderIcon)
        button.setIconSize(PICTURE)
        button.setFixedWidth(PICTURE.width() + 14)
        button.clicked.connect(lambda: self.sample_wanted.emit(path))
        self._buttons.append((button, part))
        return button


def in_two_lines(title: str, most: int = 22) -> str:
    """A title broken where its halves come out about equal, if it is longer than `most`."""
    if len(title) <= most:
        return title
    spaces = [i for i, c in enumerate(title) if c == " "]
    if not spaces:
        return title
    at = min(spaces, key=lambda i: abs(2 * i - len(title)))
    return title[:at] + "\n" + title[at + 1 :]


def picture(part: Part, ratio: float) -> QIcon:
    """A part's outline and holes, small, in the theme's ink."""
    pixmap = QPixmap(PICTURE * ratio)
    pixmap.setDevicePixelRatio(ratio)
    pixmap.fill(Qt.GlobalColor.transparent)
    drawn = drawn_part(part)
    if drawn.bounds is None:
        return QIcon(pixmap)
    x0, y0, x1, y1 = drawn.bounds
    scale = min((PICTURE.width() - 8) / (x1 - x0), (PICTURE.height() - 8) / (y1 - y0))
    fit = QTransform.fromTranslate(PICTURE.width() / 2.0, PICTURE.height() / 2.0)
    fit.scale(scale, -scale)
    fit.translate(-(x0 + x1) / 2.0, -(y0 + y1) / 2.0)
    path = QPainterPath()
    path.setFillRule(Qt.FillRule.OddEvenFill)
    for loop in range(len(drawn.loops)):
        path.addPolygon(fit.map(polygon(drawn.polyline(loop, 0.2 / scale))))
        path.closeSubpath()
    painter = QPainter(pixmap)
    painter.setRenderHint(QPainter.RenderHint.Antialiasing)
    painter.setPen(QPen(QColor(theme.current().ink), 1.4))
    ground = QColor(theme.current().accent)
    ground.setAlphaF(0.12)
    painter.setBrush(ground)
    painter.drawPath(path)
    painter.end()
    return QIcon(pixmap)
