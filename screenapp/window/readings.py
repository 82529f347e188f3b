"""Readings at the foot of the board: every probe in every case, each number with its band."""

from __future__ import annotations

from PySide6.QtCore import Qt
from PySide6.QtGui import QContextMenuEvent, QKeyEvent, QKeySequence
from PySide6.QtWidgets import QHBoxLayout, QLabel, QMenu, QStackedLayout, QToolButton, QWidget

from screenapp.model.combinations import loadings
from screenapp.model.cut_figure import cut_figure
from screenapp.model.edits import rename_cut, rename_probe
from screenapp.model.errors import ScreenappError
from screenapp.model.estimate_text import value_text
from screenapp.model.findings import Estimate, Reading
from screenapp.model.part import Part
from screenapp.window import theme
from screenapp.window.document import Document
from screenapp.window.figure_table import Column, FigureTable, Line
from screenapp.window.icons import icon
from screenapp.window.sheet import changes
from screenapp.window.sheet.field import sentence_of
from screenapp.window.sheet.quantities import Quantities
from screenapp.window.traced import Traced

DASH = "–"
EMPTY = "No readings yet: click the part with the board's probe tool to read the stress there."


class Readings(QWidget):
    """The table of probes, a word while there are none, and a button that copies it."""

    def __init__(self, document: Document, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.document = document
        self.setAccessibleName("Readings")
        self.table = _Table(document, self)
        self.empty = QLabel(EMPTY, self)
        self.empty.setProperty("quiet", True)
        self.empty.setAlignment(Qt.AlignmentFlag.AlignTop)
        self.empty.setWordWrap(True)
        self.empty.setContentsMargins(16, 12, 16, 8)
        self.copy_button = QToolButton(self)
        self.copy_button.setIcon(icon("copy", theme.current().quiet))
        self.copy_button.setToolTip("Copy the table as text")
        self.copy_button.setAccessibleName("Copy the readings as text")
        self.copy_button.clicked.connect(self.table.copy)
        holder = QWidget(self)
        self._stack = QStackedLayout(holder)
        self._stack.addWidget(self.table)
        self._stack.addWidget(self.empty)
        row = QHBoxLayout(self)
        row.setContentsMargins(8, 4, 4, 4)
        row.setSpacing(0)
        row.addWidget(holder, 1)
        row.addWidget(self.copy_button, 0, Qt.AlignmentFlag.AlignTop)
        self.setMinimumHeight(96)
        document.part_changed.connect(self.refresh)
        document.findings_changed.connect(self.refresh)
        theme.notifier.changed.connect(self._colour)
        self.refresh()

    def _colour(self) -> None:
        self.copy_button.setIcon(icon("copy", theme.current().quiet))
        self.update()

    def refresh(self) -> None:
        """Show the document as it now is."""
        document = self.document
        part = document.part
        lines = _lines(document)
        fresh = document.findings is None or document.current
        self.table.show_lines(_columns(part), lines, faded=not fresh)
        self._stack.setCurrentIndex(0 if lines else 1)
        self.copy_button.setVisible(bool(lines))


class _Table(FigureTable):
    """The table itself: names can be written in, Delete removes, Ctrl+C copies."""

    def __init__(self, document: Document, parent: QWidget) -> None:
        super().__init__(document, "Readings", parent)
        self.figures.rename = self._rename
        self.figures.refused = self._refused
        self.line_picked.connect(self._trace)

    def _rename(self, probe: str, name: str) -> None:
        part = self.document.part
        renamed = rename_cut if any(cut.id == probe for cut in part.cuts) else rename_probe
        self.document.apply("rename a reading", renamed(part, probe, name))

    def _trace(self, row: int) -> None:
        cases = loadings(self.document.part)
        if not cases:
            return
        number, id_ = row % len(cases), self.line_at(row).id  # each has a line for every case
        if any(cut.id == id_ for cut in self.document.part.cuts):
            self.document.look(case=number)
            self.document.select(id_)
        else:
            self.document.trace(Traced(cases[number].id, id_))

    def _refused(self, error: ScreenappError) -> None:
        self.document.said.emit(sentence_of(error))

    def remove(self) -> None:
        """Remove the selected probe."""
        index = self.currentIndex()
        if index.isValid() and self.selectionModel().hasSelection():
            changes.remove(self.document, self.line_at(index.row()).id)

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Delete removes, copy copies."""
        if event.key() == Qt.Key.Key_Delete:
            self.remove()
        elif event.matches(QKeySequence.StandardKey.Copy):
            self.copy()
        elif event.key() in (Qt.Key.Key_Return, Qt.Key.Key_Enter) and self.currentIndex().isValid():
            self.edit(self.figures.index(self.currentIndex().row(), 0))
        else:
            super().keyPressEvent(event)

    def contextMenuEvent(self, event: QContextMenuEvent) -> None:
        """Rename, remove, copy."""
        menu = QMenu(self)
        menu.setAttribute(Qt.WidgetAttribute.WA_DeleteOnClose)
        index = self.indexAt(event.pos())
        if index.isValid():
            first = self.figures.index(index.row(), 0)
            menu.addAction("Rename", lambda: self.edit(first))
            menu.addAction("Remove", self.remove)
            menu.addSeparator()
        menu.addAction("Copy the table as text", self.copy)
        menu.popup(event.globalPos())


def _columns(part: Part) -> tuple[Column, ...]:
    q = Quantities(part.display_units)
    length = q.show(1.0, "length").split()[-1]
    stress = q.show(1.0, "stress").split()[-1]
    columns = [
        Column("Reading"),
        Column("Case"),
        Column(f"x, y {length}", number=True, spare=True),
        Column(f"von Mises {stress}", number=True),
        Column("σ₁", number=True, tip="Largest principal stress"),
        Column("σ₂", number=True, tip="Smallest principal stress"),
        Column(f"displaced {length}", number=True, tip="Size of the displacement"),
        Column("Trust", pill=True),
    ]
    return tuple(columns)


def _lines(document: Document) -> tuple[Line, ...]:
    part = document.part
    found: dict[tuple[str, str], Reading] = {}
    if document.findings is not None:
        found = {(r.probe, r.case): r for r in document.findings.readings}
    cases = [(case.id, case.name) for case in loadings(part)] or [("", DASH)]
    lines = []
    q = Quantities(part.display_units)
    length = q.show(1.0, "length").split()[-1]
    for probe in part.readings:
        at = f"{q.bare(probe.at[0], 'length')}, {q.bare(probe.at[1], 'length')}"
        for id_, case_name in cases:
            reading = found.get((probe.id, id_))
            if reading is not None and reading.at != probe.at:
                reading = None  # it was moved since and is being read anew
            texts = (probe.name, case_name, at, *_figures(part, reading))
            place = reading.place if reading else ""
            why = reading.why if reading else "Not read yet: screen the part"
            tip = "\n".join(filter(None, (place, f"at {at} {length}", why)))
            lines.append(Line(probe.id, texts, tip))
    lines += _cut_lines(document, cases)
    return tuple(lines)


def _cut_lines(document: Document, cases: list[tuple[str, str]]) -> list[Line]:
    """A line for each cut under each case: its largest stress; the sheet has the rest."""
    part = document.part
    read = document.findings.cuts if document.findings is not None else ()
    found = {(c.cut, c.case, c.start, c.end): c for c in read}
    lines = []
    for cut in part.cuts:
        for id_, case_name in cases:
            here = found.get((cut.id, id_, cut.start, cut.end))
            if here is None:
                texts = (cut.name, case_name, "cut", *(DASH,) * 5)
                tip = "Not read yet: screen the part, or draw the cut across it"
            else:
                largest = value_text(here.largest, "stress", part.display_units, unit=False)
                texts = (cut.name, case_name, "cut", largest, *(DASH,) * 3, here.trust)
                tip = cut_figure(here, part.display_units).words
            lines.append(Line(cut.id, texts, tip))
    return lines


def _figures(part: Part, reading: Reading | None) -> tuple[str, ...]:
    if reading is None:
        return (DASH,) * 5

    def text(name: str) -> str:
        assert reading is not None
        if name not in reading.values:
            return DASH
        return value_text(reading.values[name], "stress", part.display_units, unit=False)

    return (
        text("von_mises"),
        text("sigma_1"),
        text("sigma_2"),
        _moved(part, reading),
        reading.trust,
    )


def _moved(part: Part, reading: Reading) -> str:
    if not {"u_x", "u_y"} <= reading.values.keys():
        return DASH
    return value_text(size_of(reading), "displacement", part.display_units, unit=False)


def size_of(reading: Reading) -> Estimate:
    """Size of the displacement, with the band that the bands of its components leave.

    The true components lie in their bands, so the true size lies between the smallest and the
    largest size of any vector in that box.
    """
    x, y = reading.values["u_x"], reading.values["u_y"]
    value = (x.value**2 + y.value**2) ** 0.5
    low = (_least(x) ** 2 + _least(y) ** 2) ** 0.5
    high = (_most(x) ** 2 + _most(y) ** 2) ** 0.5
    rank = ("settled", "unsettled", "rising")
    trust = max((x.trust, y.trust), key=rank.index)
    return Estimate(value, low, high, trust)


def _least(e: Estimate) -> float:
    return 0.0 if e.low <= 0.0 <= e.high else min(abs(e.low), abs(e.high))


def _most(e: Estimate) -> float:
    return max(abs(e.low), abs(e.high))
