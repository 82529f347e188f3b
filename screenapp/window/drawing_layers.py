"""The layers of a drawing, each with a tick and what is made of it."""

from __future__ import annotations

from PySide6.QtCore import QSize, Qt, Signal
from PySide6.QtGui import QResizeEvent
from PySide6.QtWidgets import QCheckBox, QComboBox, QGridLayout, QLabel, QSizePolicy, QWidget

from screenapp.exchange.drawing import Layer, Role

ROLES: tuple[tuple[Role, str], ...] = (("shape", "outline, holes"), ("zone", "zones"))

BESIDE_TEXT = 28
"""What the square of a tick and the gap behind it take [px]."""


class LayerTick(QCheckBox):
    """A tick with the name of a layer, shortened to the room there is."""

    def __init__(self, name: str) -> None:
        super().__init__()
        self._name = name
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Fixed)
        self.setText(name.replace("&", "&&"))

    def minimumSizeHint(self) -> QSize:
        """Some letters of the name."""
        return QSize(72, super().minimumSizeHint().height())

    def sizeHint(self) -> QSize:
        """Any width will do."""
        return QSize(72, super().sizeHint().height())

    def resizeEvent(self, event: QResizeEvent) -> None:
        """Shorten the name in its middle: layers often differ in their ends only."""
        super().resizeEvent(event)
        room = self.width() - BESIDE_TEXT
        shown = self.fontMetrics().elidedText(self._name, Qt.TextElideMode.ElideMiddle, room)
        self.setText(shown.replace("&", "&&"))


class LayerList(QWidget):
    """One row for each layer.

    Signals:
        changed: a tick or a role.
    """

    changed = Signal()

    def __init__(self, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._grid = QGridLayout(self)
        self._grid.setContentsMargins(0, 0, 0, 0)
        self._grid.setHorizontalSpacing(12)
        self._grid.setVerticalSpacing(4)
        self._grid.setColumnStretch(0, 1)
        self._rows: dict[str, tuple[QCheckBox, QComboBox]] = {}

    @property
    def roles(self) -> dict[str, Role]:
        """The role of each layer."""
        return {
            name: box.currentData() if tick.isChecked() else "left out"
            for name, (tick, box) in self._rows.items()
        }

    def tick(self, name: str) -> QCheckBox:
        """The tick of a layer."""
        return self._rows[name][0]

    def role(self, name: str) -> QComboBox:
        """The chooser of a layer's role."""
        return self._rows[name][1]

    def fill(self, layers: tuple[Layer, ...]) -> None:
        """Show the layers of another drawing."""
        self._rows.clear()
        while (item := self._grid.takeAt(0)) is not None:
            if (widget := item.widget()) is not None:
                widget.hide()
                widget.deleteLater()
        for number, layer in enumerate(layers):
            self._add(number, layer)

    def _add(self, number: int, layer: Layer) -> None:
        tick = LayerTick(layer.name)
        tick.setChecked(layer.role != "left out")
        tick.setToolTip(f"Layer “{layer.name}”{_why(layer)}")
        tick.setAccessibleName(f"Use layer {layer.name}")
        count = QLabel(f"{layer.curves} line" if layer.curves == 1 else f"{layer.curves} lines")
        count.setProperty("quiet", True)
        box = QComboBox()
        box.setAccessibleName(f"What layer {layer.name} is")
        box.setToolTip("What is made of the closed lines on this layer")
        for role, words in ROLES:
            box.addItem(words, role)
        box.setCurrentIndex(1 if layer.role == "zone" else 0)
        box.setEnabled(tick.isChecked())
        tick.toggled.connect(box.setEnabled)
        tick.toggled.connect(lambda _on: self.changed.emit())
        box.currentIndexChanged.connect(lambda _index: self.changed.emit())
        right = Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter
        self._grid.addWidget(tick, number, 0)
        self._grid.addWidget(count, number, 1, right)
        self._grid.addWidget(box, number, 2)
        self._rows[layer.name] = tick, box


def _why(layer: Layer) -> str:
    """Why a layer is left out at first."""
    if not layer.shown:
        return ": switched off, frozen or never printed in the drawing"
    return ": drawn in dashed lines" if layer.dashed else ""
