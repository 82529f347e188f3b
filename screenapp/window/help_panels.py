"""What the program is and is not, in a panel beside the work."""

from __future__ import annotations

from PySide6.QtCore import Qt
from PySide6.QtGui import QFont
from PySide6.QtWidgets import (
    QDialog,
    QLabel,
    QPushButton,
    QScrollArea,
    QVBoxLayout,
    QWidget,
)

from screenapp import __version__
from screenapp.window import theme

CAUTIONS = (
    "A screening, not an approval: local codes and a licensed engineer decide.",
    "Parts are flat, of one wall, linear elastic, loaded in their plane, and move little against "
    "their size. What bends, buckles or yields does not show in these numbers.",
    "A band holds the discretisation only: it does not know whether load, support, material and "
    "drawing are those of the real part.",
    "A stress called rising has no value: a sharp corner, a point load or the end of a support "
    "needs a radius, an area, or a judgement of its own.",
)


class Panel(QDialog):
    """A panel that does not stop the work; Esc puts it away."""

    def __init__(self, title: str, parent: QWidget) -> None:
        super().__init__(parent)
        self.setWindowTitle(title)
        self.setModal(False)
        self.setAttribute(Qt.WidgetAttribute.WA_DeleteOnClose)
        self.page = QWidget()
        self.column = QVBoxLayout(self.page)
        self.column.setContentsMargins(24, 20, 24, 20)
        self.column.setSpacing(8)
        scroll = QScrollArea(self)
        scroll.setWidget(self.page)
        scroll.setWidgetResizable(True)
        scroll.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        away = QPushButton("Close", self)
        away.clicked.connect(self.close)
        outer = QVBoxLayout(self)
        outer.setContentsMargins(0, 0, 0, 12)
        outer.addWidget(scroll, 1)
        foot = QVBoxLayout()
        foot.setContentsMargins(24, 0, 24, 0)
        foot.addWidget(away, 0, Qt.AlignmentFlag.AlignRight)
        outer.addLayout(foot)

    def heading(self, text: str) -> None:
        """A heading."""
        label = QLabel(text)
        label.setFont(theme.font(theme.TEXT_BODY, QFont.Weight.DemiBold))
        label.setContentsMargins(0, 8, 0, 0)
        self.column.addWidget(label)

    def text(self, text: str, quiet: bool = False) -> None:
        """A paragraph of text."""
        label = QLabel(text)
        label.setWordWrap(True)
        label.setProperty("quiet", quiet)
        self.column.addWidget(label)


def about_panel(parent: QWidget) -> Panel:
    """What the program is, and its cautions."""
    panel = Panel("About screenapp", parent)
    title = QLabel("screenapp")
    title.setFont(theme.font(theme.TEXT_HEAD, QFont.Weight.DemiBold))
    panel.column.addWidget(title)
    panel.text(f"Version {__version__}", quiet=True)
    panel.text(
        "Screens flat thin-walled parts for strength, and says of every number how far it can be "
        "trusted."
    )
    panel.heading("Cautions")
    for caution in CAUTIONS:
        panel.text(caution)
    panel.column.addStretch(1)
    panel.resize(480, 420)
    return panel
