"""Two panels beside the work: the list of keys, and what the program is and is not."""

from __future__ import annotations

from PySide6.QtCore import Qt
from PySide6.QtGui import QFont
from PySide6.QtWidgets import (
    QDialog,
    QGridLayout,
    QLabel,
    QPushButton,
    QScrollArea,
    QVBoxLayout,
    QWidget,
)

from screenapp import __version__
from screenapp.window import theme

Keys = tuple[tuple[str, str], ...]

SHEET_KEYS: Keys = (
    ("Tab, Shift+Tab", "next value, value before"),
    ("Enter, F2 or Space", "change the value; open a chooser"),
    ("a figure or letter", "type a new value"),
    ("Enter", "accept"),
    ("Esc", "restore"),
    ("Del", "remove the row the value stands in"),
)
READING_KEYS: Keys = (
    ("Up, Down", "line before, next line"),
    ("Enter or F2", "rename the reading"),
    ("Del", "remove it"),
    ("Ctrl+C", "copy the table as text"),
)
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

    def keys(self, keys: Keys) -> None:
        """Keys beside what they do."""
        grid = QGridLayout()
        grid.setContentsMargins(0, 0, 0, 0)
        grid.setHorizontalSpacing(16)
        grid.setVerticalSpacing(4)
        grid.setColumnMinimumWidth(0, 168)
        grid.setColumnStretch(1, 1)
        for row, (key, what) in enumerate(keys):
            grid.addWidget(QLabel(key), row, 0)
            said = QLabel(what)
            said.setProperty("quiet", True)
            grid.addWidget(said, row, 1)
        self.column.addLayout(grid)


def keys_panel(parent: QWidget, window_keys: Keys, board_keys: Keys) -> Panel:
    """Every key of the program."""
    panel = Panel("Keys", parent)
    for title, keys in (
        ("Everywhere", window_keys),
        ("On the board", board_keys),
        ("In the sheet", SHEET_KEYS),
        ("In the readings", READING_KEYS),
    ):
        if keys:
            panel.heading(title)
            panel.keys(keys)
    panel.column.addStretch(1)
    panel.resize(520, 600)
    return panel


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
