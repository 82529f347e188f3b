"""The head of the sheet: title, what the part is in brief, the verdict, and notices."""

from __future__ import annotations

from collections.abc import Iterable
from datetime import datetime

from PySide6.QtCore import QRectF, Qt, Signal
from PySide6.QtGui import QFont, QKeyEvent, QPainter, QPaintEvent
from PySide6.QtWidgets import QHBoxLayout, QLabel, QLineEdit, QVBoxLayout, QWidget

from screenapp.model.errors import ScreenappError
from screenapp.model.features import find
from screenapp.window import theme
from screenapp.window.document import Document
from screenapp.window.sheet import changes
from screenapp.window.sheet.field import sentence_of
from screenapp.window.sheet.mark import Standing, StandingShape, colour_of
from screenapp.window.sheet.pieces import Link, Piece, Words
from screenapp.window.sheet.quantities import Quantities
from screenapp.window.sheet.reasons import reasons_in_head
from screenapp.window.sheet.rows import Cross
from screenapp.window.sheet.sentence import Sentence

MOST_LINES = 4
"""Faults of a file told one by one; the rest are counted."""

GROUNDS: dict[Standing, str] = {
    "holds": "good_ground",
    "does not hold": "bad_ground",
    "undecided": "doubt_ground",
    "not screened": "chrome",
    "out of date": "chrome",
}


class TitleEdit(QLineEdit):
    """The title; Enter accepts, Esc restores."""

    def __init__(self, document: Document, parent: QWidget) -> None:
        super().__init__(parent)
        self._document = document
        self.setObjectName("title")
        self.setFont(theme.font(theme.TEXT_HEAD, QFont.Weight.DemiBold))
        self.setFixedHeight(32)
        self.setAccessibleName("Title of the part")
        self.setToolTip("Title of the part")
        self.editingFinished.connect(self.accept)

    def keyPressEvent(self, event: QKeyEvent) -> None:
        """Esc restores."""
        if event.key() == Qt.Key.Key_Escape and self.isModified():
            self.show_title()
            self.selectAll()
            return
        super().keyPressEvent(event)

    def show_title(self) -> None:
        """Show the part's title, unless another is being typed."""
        self.setText(self._document.part.title)
        self.setModified(False)
        self.setCursorPosition(0)

    def accept(self) -> None:
        """Take the title that was typed."""
        if not self.isModified():
            return
        self.setModified(False)
        changes.set_title(self._document, self.text())
        self.show_title()


class Banner(QWidget):
    """A bar, a shape and sentences on a tinted ground."""

    def __init__(self, parent: QWidget) -> None:
        super().__init__(parent)
        self._standing: Standing = "not screened"
        self.shape = StandingShape(self)
        self.headline = Sentence(self)
        self.detail = Sentence(self)
        self.column = QVBoxLayout()
        self.column.setContentsMargins(0, 0, 0, 0)
        self.column.setSpacing(0)
        self.column.addWidget(self.headline)
        self.column.addWidget(self.detail)
        self.line = QHBoxLayout(self)
        self.line.setContentsMargins(16, 10, 12, 10)
        self.line.setSpacing(12)
        self.line.addWidget(self.shape, 0, Qt.AlignmentFlag.AlignTop)
        self.line.addLayout(self.column, 1)
        theme.notifier.changed.connect(self.update)

    @property
    def standing(self) -> Standing:
        """What it says by shape and colour."""
        return self._standing

    def show_standing(
        self, standing: Standing, headline: str, detail: tuple[Piece | str, ...]
    ) -> None:
        """Show a verdict."""
        self._standing = standing
        self.shape.show_standing(standing)
        self.headline.set(Words(headline, strong=True))
        self.detail.set(*detail)
        self.detail.setVisible(bool(detail))
        self.setAccessibleName(f"Verdict: {headline}")
        self.update()

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Ground and bar."""
        painter = QPainter(self)
        painter.fillRect(self.rect(), theme.colour(GROUNDS[self._standing]))
        painter.fillRect(QRectF(0, 0, 4, self.height()), colour_of(self._standing))


class Notice(Banner):
    """What went wrong (the cause, the mend, every fault) or was done; it goes when it is read."""

    def __init__(self, document: Document, parent: QWidget) -> None:
        super().__init__(parent)
        self._document = document
        self._rows: list[Sentence] = []
        self.cross = Cross(self)
        self.cross.setToolTip("Put this notice away")
        self.cross.setAccessibleName("Put this notice away")
        self.cross.clicked.connect(self.hide)
        self.line.addWidget(self.cross, 0, Qt.AlignmentFlag.AlignTop)
        self.faults = QVBoxLayout()
        self.faults.setContentsMargins(0, 4, 0, 0)
        self.faults.setSpacing(0)
        self.column.addLayout(self.faults)
        self.hide()

    def say(self, lead: str, *pieces: Piece | str) -> None:
        """Say that something was done, and what can be done with it."""
        self._empty()
        self.show_standing("not screened", lead, pieces)
        self.setAccessibleName(lead)
        self.show()

    def tell(self, lead: str, error: ScreenappError) -> None:
        """Say what went wrong; `lead` begins, e.g. "The file was not opened"."""
        several = len(error.faults) > 1
        said = f"{len(error.faults)} things are wrong:" if several else sentence_of(error)
        self.show_standing("does not hold", lead, (said,))
        self._empty()
        for fault in error.faults[:MOST_LINES] if several else ():
            line = f"Line {fault.line}: " if fault.line is not None else ""
            where = "" if fault.field in fault.cause else f" ({fault.field})"
            text = f"{line}{fault.cause}{where}; {fault.mend}."
            self._add(text, fault.ids)
        rest = len(error.faults) - MOST_LINES
        if several and rest > 0:
            self._add(f"And {rest} more.", ())
        self.setAccessibleName(f"{lead}. {sentence_of(error)}")
        self.show()

    def _empty(self) -> None:
        """Take away what was told last."""
        self.setToolTip("")
        for row in self._rows:
            self.faults.removeWidget(row)
            row.hide()
            row.deleteLater()
        self._rows = []

    def _add(self, text: str, ids: tuple[str, ...]) -> None:
        known = all(find(self._document.part, id_) is not None for id_ in ids)
        show = Link("show", "Show it", lambda _key: self._document.select(*ids))
        row = Sentence(self)
        row.set(text, *((" ", show) if ids and known else ()))
        self.faults.addWidget(row)
        self._rows.append(row)


class Head(QWidget):
    """Title, brief line, verdict and notice.

    Signals:
        screen_wanted: the link in the verdict was pressed.
    """

    screen_wanted = Signal()

    def __init__(self, document: Document, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._document = document
        self._saved_at: datetime | None = None
        self._screening = False
        self.title = TitleEdit(document, self)
        self.brief = QLabel(self)
        self.brief.setProperty("quiet", True)
        self.brief.setContentsMargins(4, 0, 0, 0)
        self.verdict = Banner(self)
        self.notice = Notice(document, self)
        column = QVBoxLayout(self)
        column.setContentsMargins(20, 16, 20, 16)
        column.setSpacing(4)
        column.addWidget(self.title)
        column.addWidget(self.brief)
        column.addSpacing(4)
        column.addWidget(self.verdict)
        column.addWidget(self.notice)
        document.part_changed.connect(self.refresh)
        document.findings_changed.connect(self.refresh)
        document.path_changed.connect(self.refresh)
        self.refresh()

    def note_saved(self, when: datetime) -> None:
        """The part was saved or opened at this time."""
        self._saved_at = when
        self.refresh()

    def show_screening(self, on: bool) -> None:
        """Whether a screening runs."""
        self._screening = on
        self.refresh()

    def refresh(self) -> None:
        """Show the document as it now is."""
        document = self._document
        if not (self.title.hasFocus() and self.title.isModified()):
            self.title.show_title()
        self.brief.setText(" · ".join(self._brief()))
        self.verdict.show_standing(*self._verdict())
        self.verdict.setVisible(document.part.outline is not None or document.findings is not None)

    def _brief(self) -> list[str]:
        document = self._document
        part = document.part
        wall = Quantities(part.display_units).show(part.wall.thickness, "length")
        parts = [f"{wall} wall"]
        if part.material is not None:
            parts.append(part.material.name)
        if document.unsaved:
            parts.append("not saved")
        elif document.path is None:
            parts.append("new")
        elif self._saved_at is not None:
            parts.append(f"saved {self._saved_at:%H:%M}")
        else:
            parts.append(document.path.name)
        return parts

    def _verdict(self) -> tuple[Standing, str, tuple[Piece | str, ...]]:
        document = self._document
        findings = document.findings
        screen = Link("screen", "Screen it", lambda _key: self.screen_wanted.emit())
        if self._screening:
            return "not screened", "Being screened", ("Passes are painted as they come.",)
        if findings is None:
            blocking = [f for f in document.faults if f.blocks]
            if blocking:
                n = len(blocking)
                things = "one thing is" if n == 1 else f"{n} things are"
                return "not screened", "Not screened yet", (f"Before it can be, {things} open.",)
            return "not screened", "Not screened yet", ("All is set. ", screen, ".")
        if not document.current:
            again = Link("screen", "Screen it again", lambda _key: self.screen_wanted.emit())
            was = f"The part has changed since. It was: {findings.headline}. "
            return "out of date", "Out of date", (was, again, ".")
        reasons = reasons_in_head(findings)
        headline, mend = _parted(findings.headline)
        said = _sentences(filter(None, (mend, *reasons)))
        return findings.verdict, headline, (said,) if said else ()


def _parted(headline: str) -> tuple[str, str]:
    """A headline that says what to do as well, in two: the verdict with its cause, and the mend."""
    verdict, _, rest = headline.partition(": ")
    cause, _, mend = rest.partition(": ")
    return (f"{verdict}: {cause}", mend) if mend else (headline, "")


def _sentences(texts: Iterable[str]) -> str:
    return " ".join(f"{t[:1].upper()}{t[1:].rstrip('.')}." for t in texts)
