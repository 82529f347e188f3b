"""The foot of the sheet: the button that screens, how far it is, and the one that stops it."""

from __future__ import annotations

from PySide6.QtCore import Signal
from PySide6.QtWidgets import QHBoxLayout, QProgressBar, QPushButton, QWidget

from screenapp.model.findings import PassSummary
from screenapp.model.progress import Step
from screenapp.window.cut_label import CutLabel
from screenapp.window.document import Document
from screenapp.window.sheet.quantities import grouped

STEPS = 1000

BESIDE_TEXT = 40 + 3 * 12 + 48
"""What margins, spaces and the shortest bar take beside buttons and words [px]."""


class Foot(QWidget):
    """Screens, shows progress, cancels.

    Signals:
        screen_wanted, cancel_wanted: a button was pressed.
    """

    screen_wanted = Signal()
    cancel_wanted = Signal()

    def __init__(self, document: Document, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._document = document
        self._running = False
        self._pass = ""
        self._ended = ""
        self.setObjectName("sheetFoot")
        self.button = QPushButton("Screen the part", self)
        self.button.setProperty("main", True)
        self.button.setAccessibleName("Screen the part")
        self.button.clicked.connect(self.screen_wanted)
        self.stop = QPushButton("Cancel", self)
        self.stop.setToolTip("Stop (Ctrl+.); the part stays as it is")
        self.stop.clicked.connect(self.cancel_wanted)
        self.bar = QProgressBar(self)
        self.bar.setRange(0, STEPS)
        self.bar.setTextVisible(False)
        self.bar.setAccessibleName("Progress of the screening")
        self.bar.setMinimumWidth(48)
        self.text = CutLabel(self)
        self.text.setProperty("quiet", True)
        row = QHBoxLayout(self)
        row.setContentsMargins(20, 12, 20, 12)
        row.setSpacing(12)
        row.addWidget(self.button)
        row.addWidget(self.bar, 1)
        row.addWidget(self.text, 0)
        row.addStretch(0)
        row.addWidget(self.stop)
        document.part_changed.connect(self.refresh)
        document.findings_changed.connect(self.refresh)
        self.refresh()

    @property
    def running(self) -> bool:
        """Whether a screening runs."""
        return self._running

    def begin(self) -> None:
        """A screening has begun."""
        self._running = True
        self._pass = ""
        self._ended = ""
        self.bar.setValue(0)
        self.text.setText("Beginning")
        self.refresh()

    def show_step(self, step: Step) -> None:
        """Show stage, pass and share done."""
        number = f"pass {step.number}: " if step.number else ""
        stage = f"{number}{step.stage}".capitalize()
        whole = stage + self._pass
        used = (self.button, self.stop)
        room = self.width() - sum(w.sizeHint().width() for w in used) - BESIDE_TEXT
        fits = self.text.fontMetrics().horizontalAdvance(whole) <= room
        self.text.setText(whole if fits else stage)
        self.text.setToolTip(whole)
        self.bar.setValue(round(STEPS * min(1.0, max(0.0, step.done))))

    def show_pass(self, summary: PassSummary) -> None:
        """Keep the size of the last pass beside the stage."""
        self._pass = f" · {grouped(summary.elements)} elements"

    def show_cancelling(self) -> None:
        """The user's wish is under way."""
        self.text.setText("Stopping")
        self.stop.setEnabled(False)

    def end(self, how: str) -> None:
        """The screening ended; `how` is said unless findings say it better."""
        self._running = False
        self._ended = how
        self.refresh()

    def refresh(self) -> None:
        """Show the document as it now is."""
        document = self._document
        self.stop.setVisible(self._running)
        self.stop.setEnabled(True)
        if self._running:
            self.button.setEnabled(True)
            self.button.setText("Screen again")
            self.button.setToolTip("Stop, and begin anew with the part as it now is")
            self._dress(False)
            self.bar.show()
            return
        blocking = [f for f in document.faults if f.blocks]
        self.button.setText("Screen the part")
        self.button.setEnabled(not blocking)
        self.button.setToolTip(
            f"First: {blocking[0].cause}; {blocking[0].mend}"
            if blocking
            else "Mesh, solve and judge the part (Ctrl+Enter)"
        )
        findings = document.findings
        fresh = document.current and findings is not None
        self._dress(fresh)
        self.bar.setVisible(fresh)
        if fresh and findings is not None:
            self.bar.setValue(STEPS)
            total = findings.timing.get("total")
            took = f"{total:.1f} s · " if total is not None else ""
            self.text.setText(f"{took}up to date")
        elif self._ended:
            self.text.setText(self._ended)
        elif findings is not None:
            self.text.setText("out of date")
        elif blocking:
            n = len(blocking)
            self.text.setText("1 thing is open" if n == 1 else f"{n} things are open")
        else:
            self.text.setText("ready")

    def _dress(self, done: bool) -> None:
        if self.bar.property("done") != done:
            self.bar.setProperty("done", done)
            self.bar.style().unpolish(self.bar)
            self.bar.style().polish(self.bar)
