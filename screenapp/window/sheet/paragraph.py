"""A numbered paragraph of the sheet: its mark, its sentences, what is missing and what is wrong."""

from __future__ import annotations

from collections.abc import Iterator

from PySide6.QtCore import Qt
from PySide6.QtGui import QFont, QPainter, QPaintEvent, QPen
from PySide6.QtWidgets import QHBoxLayout, QLabel, QVBoxLayout, QWidget

from screenapp.model.errors import Fault, joined
from screenapp.model.part import DisplayUnits
from screenapp.model.restated import restated
from screenapp.window import theme
from screenapp.window.document import Document
from screenapp.window.sheet.field import LINE, PAD, capital
from screenapp.window.sheet.mark import Mark, State
from screenapp.window.sheet.pieces import Link, Piece, Words
from screenapp.window.sheet.rows import RowOf, Rows
from screenapp.window.sheet.sentence import Sentence


class Paragraph(QWidget):
    """Base of the eight paragraphs; each fills its own body from the document.

    A subclass sets `number`, `title` and `fields` (first names of the file's fields whose faults it
    shows) and implements `fill`, which returns what is missing (empty when nothing is).
    """

    number = 0
    title = ""
    fields: tuple[str, ...] = ()

    def __init__(self, document: Document, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.document = document
        self.state: State = "open"
        self.mark = Mark(self)
        self.body = QVBoxLayout()
        self.body.setContentsMargins(0, 0, 0, 0)
        self.body.setSpacing(4)
        number = QLabel(str(self.number), self)
        number.setProperty("quiet", True)
        number.setFixedSize(20, LINE)
        heading = QLabel(self.title, self)
        heading.setFont(theme.font(theme.TEXT_BODY, QFont.Weight.DemiBold))
        heading.setFixedHeight(LINE)
        heading.setContentsMargins(PAD, 0, 0, 0)
        self.missing = Sentence(self)
        self.missing.hide()
        self._faults = Rows(document, 0, self)
        self.column = column = QVBoxLayout()
        column.setContentsMargins(0, 0, 0, 0)
        column.setSpacing(2)
        column.addWidget(heading)
        column.addLayout(self.body)
        column.addWidget(self.missing)
        column.addWidget(self._faults)
        line = QHBoxLayout(self)
        line.setContentsMargins(20, 10, 20, 12)
        line.setSpacing(4)
        line.addWidget(number, 0, Qt.AlignmentFlag.AlignTop)
        line.addLayout(column, 1)
        line.addSpacing(8)
        line.addWidget(self.mark, 0, Qt.AlignmentFlag.AlignTop)
        self.setAccessibleName(f"Paragraph {self.number}, {self.title}")
        self.build()

    def build(self) -> None:
        """Make the widgets of the body, once."""
        raise NotImplementedError

    def fill(self) -> tuple[Piece | str, ...]:
        """Show the document's state; return the sentence that says what is missing, or ()."""
        raise NotImplementedError

    def outdated(self) -> bool:
        """Whether it shows findings of an older part."""
        return False

    def refresh(self) -> None:
        """Show the document as it now is."""
        missing = self.fill()
        faults = [f for f in self.document.faults if self.owns(f)]
        shown = [f for f in faults if not self.says_already(f)]
        self.missing.set(*missing)
        self.missing.setVisible(bool(missing))
        units = self.document.part.display_units
        groups = enumerate(joined(shown))
        self._faults.set([self._fault_row(f"fault {i}", group, units) for i, group in groups])
        blocked = any(f.blocks for f in faults)
        self.state = "open" if missing or blocked else "set"
        if self.state == "set" and self.outdated():
            self.state = "out of date"
        self.mark.show_state(self.state, self.title)

    def owns(self, fault: Fault) -> bool:
        """Whether a fault belongs to this paragraph."""
        return fault.field.split(".")[0] in self.fields

    def says_already(self, fault: Fault) -> bool:
        """Whether the missing sentence says the same; a subclass may answer."""
        del fault
        return False

    def sentence(self) -> Sentence:
        """A sentence at the end of the body."""
        made = Sentence(self)
        made.pointed.connect(lambda id_: self.document.hover(id_ or None))
        self.body.addWidget(made)
        return made

    def rows(self, first_width: int = 92) -> Rows:
        """A list at the end of the body."""
        made = Rows(self.document, first_width, self)
        self.body.addWidget(made)
        return made

    def _fault_row(self, id_: str, faults: tuple[Fault, ...], units: DisplayUnits) -> RowOf:
        """One sentence for one fault, or for several that are alike."""
        first = faults[0]
        colour = "bad" if first.blocks else "doubt"
        if len(faults) > 1:
            lead = Words(f"{capital(first.alike)}: ", colour=colour)
            return RowOf(id_, (), (lead, *self._fault_links(faults), Words(".", colour=colour)))
        said = restated(f"{capital(first.cause)}: {first.mend.rstrip('.')}.", units)
        mend = (" ", self._show("show", "Show it", first)) if first.ids else ()
        return RowOf(id_, (), (Words(said, colour=colour), *mend))

    def _fault_links(self, faults: tuple[Fault, ...]) -> Iterator[Piece | str]:
        """A link to the place of each fault."""
        for i, fault in enumerate(faults):
            if i:
                yield ", "
            name = fault.ids[0] if len(fault.ids) == 1 else f"{len(fault.ids)} more"
            yield self._show(f"show {i}", name, fault)

    def _show(self, key: str, text: str, fault: Fault) -> Link:
        ids = fault.ids
        about = ids[0] if len(ids) == 1 else ""
        tip = f"Show it: {fault.cause}" if fault.alike else ""
        return Link(key, text, lambda _key: self.document.select(*ids), tip, about=about)

    def paintEvent(self, _event: QPaintEvent) -> None:
        """A pale line at its foot."""
        painter = QPainter(self)
        painter.setPen(QPen(theme.colour("faint"), 1))
        painter.drawLine(0, self.height() - 1, self.width(), self.height() - 1)
