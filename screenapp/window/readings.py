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
from screenapp.model.findings import Reading
from screenapp.model.part import Part
from screenapp.window import theme
from screenapp.window.document import Document
from screenapp.window.figure_table import Column, FigureTable, Line
from screenapp.window.governing import (
    component_of,
    governing_cut,
    governing_reading,
    shows_all_cases,
)
from screenapp.window.icons import icon
from screenapp.window.read_values import size_of
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
        document.view_changed.connect(self._view_changed)
        theme.notifier.changed.connect(self._colour)
        self.refresh()

    def _colour(self) -> None:
        self.copy_button.setIcon(icon("copy", theme.current().quiet))
        self.update()

    def _view_changed(self) -> None:
        """With all cases in the lens, each reading stands in the case that governs there."""
        view = self.document.view
        shown = (component_of(view), shows_all_cases(view, self.document.part))
        if shown != self._shown and (shown[1] or self._shown[1]):
            self.refresh()

    def refresh(self) -> None:
        """Show the document as it now is."""
        document = self.document
        part = document.part
        worst = shows_all_cases(document.view, part)
        self._shown = (component_of(document.view), worst)
        numbered = _lines(document)
        self.table.cases = tuple(case for case, _ in numbered)
        lines = tuple(line for _, line in numbered)
        fresh = document.findings is None or document.current
        self.table.show_lines(_columns(part, worst), lines, faded=not fresh)
        self._stack.setCurrentIndex(0 if lines else 1)
        self.copy_button.setVisible(bool(lines))


class _Table(FigureTable):
    """The table itself: names can be written in, Delete removes, Ctrl+C copies."""

    def __init__(self, document: Document, parent: QWidget) -> None:
        super().__init__(document, "Readings", parent)
        self.figures.rename = self._rename
        self.figures.refused = self._refused
        self.line_picked.connect(self._trace)
        self.cases: tuple[int, ...] = ()  # index of the case of each line

    def _rename(self, probe: str, name: str) -> None:
        part = self.document.part
        renamed = rename_cut if any(cut.id == probe for cut in part.cuts) else rename_probe
        self.document.apply("rename a reading", renamed(part, probe, name))

    def _trace(self, row: int) -> None:
        cases = loadings(self.document.part)
        if not cases:
            return
        number, id_ = self.cases[row], self.line_at(row).id
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


def _columns(part: Part, worst: bool) -> tuple[Column, ...]:
    q = Quantities(part.display_units)
    length = q.show(1.0, "length").split()[-1]
    stress = q.show(1.0, "stress").split()[-1]
    columns = [
        Column("Reading"),
        Column("Governing case", tip="The lens shows all cases: the worst one at each reading")
        if worst
        else Column("Case"),
        Column(f"x, y {length}", number=True, spare=True),
        Column(f"von Mises {stress}", number=True),
        Column("σ₁", number=True, tip="Largest principal stress"),
        Column("σ₂", number=True, tip="Smallest principal stress"),
        Column(f"displaced {length}", number=True, tip="Size of the displacement"),
        Column("Trust", pill=True),
    ]
    return tuple(columns)


def _lines(document: Document) -> list[tuple[int, Line]]:
    """The index of the case of each line, and the line."""
    part, view = document.part, document.view
    worst = shows_all_cases(view, part)
    found: dict[tuple[str, str], Reading] = {}
    if document.findings is not None:
        found = {(r.probe, r.case): r for r in document.findings.readings}
    cases = [(case.id, case.name) for case in loadings(part)] or [("", DASH)]
    lines = []
    q = Quantities(part.display_units)
    length = q.show(1.0, "length").split()[-1]
    for probe in part.readings:
        at = f"{q.bare(probe.at[0], 'length')}, {q.bare(probe.at[1], 'length')}"
        here = [r for (id_, _), r in found.items() if id_ == probe.id and r.at == probe.at]
        only = governing_reading(here, component_of(view)) if worst else None
        for number, (id_, case_name) in enumerate(cases):
            if only is not None and only.case != id_:
                continue
            reading = found.get((probe.id, id_))
            if reading is not None and reading.at != probe.at:
                reading = None  # it was moved since and is being read anew
            texts = (probe.name, case_name, at, *_figures(part, reading))
            place = reading.place if reading else ""
            why = reading.why if reading else "Not read yet: screen the part"
            tip = "\n".join(filter(None, (place, f"at {at} {length}", why)))
            lines.append((number, Line(probe.id, texts, tip)))
    return lines + _cut_lines(document, cases, worst)


def _cut_lines(
    document: Document, cases: list[tuple[str, str]], worst: bool
) -> list[tuple[int, Line]]:
    """A line for each cut under each case, or under the one that governs: its largest stress; the
    sheet has the rest."""
    part = document.part
    read = document.findings.cuts if document.findings is not None else ()
    found = {(c.cut, c.case, c.start, c.end): c for c in read}
    lines = []
    for cut in part.cuts:
        here_now = [c for c in read if c.cut == cut.id and (c.start, c.end) == (cut.start, cut.end)]
        only = governing_cut(here_now) if worst else None
        for number, (id_, case_name) in enumerate(cases):
            if only is not None and only.case != id_:
                continue
            here = found.get((cut.id, id_, cut.start, cut.end))
            if here is None:
                texts = (cut.name, case_name, "cut", *(DASH,) * 5)
                tip = "Not read yet: screen the part, or draw the cut across it"
            else:
                largest = value_text(here.largest, "stress", part.display_units, unit=False)
                texts = (cut.name, case_name, "cut", largest, *(DASH,) * 3, here.trust)
                tip = cut_figure(here, part.display_units).words
            lines.append((number, Line(cut.id, texts, tip)))
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
