"""The check sheet: head, eight numbered paragraphs, foot; it reads like a calculation note."""

from __future__ import annotations

from collections.abc import Iterator

from PySide6.QtCore import QEvent, QPoint, Qt, QTimer
from PySide6.QtGui import QPainter, QPaintEvent, QPen
from PySide6.QtWidgets import QLayout, QScrollArea, QVBoxLayout, QWidget

from screenapp.window import theme
from screenapp.window.document import Document
from screenapp.window.sheet.field import Field
from screenapp.window.sheet.findings_paragraph import FindingsParagraph
from screenapp.window.sheet.foot import Foot
from screenapp.window.sheet.head import Head
from screenapp.window.sheet.held_paragraph import HeldParagraph
from screenapp.window.sheet.limits_paragraph import LimitsParagraph
from screenapp.window.sheet.loaded_paragraph import LoadedParagraph
from screenapp.window.sheet.mesh_paragraph import MeshParagraph
from screenapp.window.sheet.notes import NotesEdit
from screenapp.window.sheet.paragraph import Paragraph
from screenapp.window.sheet.part_paragraph import PartParagraph
from screenapp.window.sheet.sentence import Sentence
from screenapp.window.sheet.verdict_paragraph import VerdictParagraph
from screenapp.window.sheet.wall_paragraph import WallParagraph

KINDS: tuple[type[Paragraph], ...] = (
    PartParagraph,
    WallParagraph,
    HeldParagraph,
    LoadedParagraph,
    LimitsParagraph,
    MeshParagraph,
    FindingsParagraph,
    VerdictParagraph,
)


class _Page(QWidget):
    """The paper that the paragraphs stand on."""

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Paper."""
        QPainter(self).fillRect(self.rect(), theme.colour("sheet"))


class Sheet(QWidget):
    """Shows one document as a calculation note and lets its values be changed in place."""

    def __init__(self, document: Document, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self.document = document
        self.setAccessibleName("Check sheet")
        self.setMinimumWidth(360)
        self.head = Head(document, self)
        self.foot = Foot(document, self)
        self.page = _Page()
        self.paragraphs = tuple(kind(document, self.page) for kind in KINDS)
        column = QVBoxLayout(self.page)
        column.setContentsMargins(0, 0, 0, 0)
        column.setSpacing(0)
        for paragraph in self.paragraphs:
            column.addWidget(paragraph)
        column.addStretch(1)
        self.scroll_area = QScrollArea(self)
        self.scroll_area.setWidget(self.page)
        self.scroll_area.setWidgetResizable(True)
        self.scroll_area.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
        self.scroll_area.setFocusPolicy(Qt.FocusPolicy.NoFocus)
        whole = QVBoxLayout(self)
        whole.setContentsMargins(0, 0, 0, 0)
        whole.setSpacing(0)
        whole.addWidget(self.head)
        whole.addWidget(self.scroll_area, 1)
        whole.addWidget(self.foot)
        self._soon = QTimer(self)
        self._soon.setSingleShot(True)
        self._soon.setInterval(0)
        self._soon.timeout.connect(self.refresh)
        document.part_changed.connect(self._soon.start)
        document.findings_changed.connect(self._soon.start)
        theme.notifier.changed.connect(self._repaint)
        self.refresh()

    def refresh(self) -> None:
        """Show the document as it now is; asked for often, done once a turn of the event loop."""
        self._soon.stop()
        for paragraph in self.paragraphs:
            paragraph.refresh()

    def paragraph(self, number: int) -> Paragraph:
        """A paragraph by its number, 1 to 8."""
        return self.paragraphs[number - 1]

    def take_typing(self) -> None:
        """Accept whatever is still being typed."""
        self.head.title.accept()
        for field in self.findChildren(Field):
            field.accept()
        for notes in self.findChildren(NotesEdit):
            notes.accept()

    # --- keyboard -----------------------------------------------------------------------------

    def stops(self) -> list[QWidget]:
        """Everything that Tab stops at, in reading order."""
        return [w for w in _in_order(self) if _takes_tab(w)]

    def focusNextPrevChild(self, forward: bool) -> bool:
        """Tab moves as the sheet is read, whenever its widgets were made."""
        window = self.window()
        now = window.focusWidget()
        stops = self.stops()
        here = next((i for i, w in enumerate(stops) if now is not None and _holds(w, now)), None)
        if here is not None:
            there = here + (1 if forward else -1)
            if 0 <= there < len(stops):
                self._step_to(stops[there], forward)
                return True
        outside = self._outside(forward)
        if outside is None:
            return False
        outside.setFocus(_reason(forward))
        return True

    def _step_to(self, widget: QWidget, forward: bool) -> None:
        widget.setFocus(_reason(forward))
        if self.page.isAncestorOf(widget):
            self.scroll_area.ensureWidgetVisible(widget, 0, 40)

    def _outside(self, forward: bool) -> QWidget | None:
        """The stop beyond the sheet's end."""
        widget: QWidget | None = self
        while widget is not None:
            widget = widget.nextInFocusChain() if forward else widget.previousInFocusChain()
            if widget is None or widget is self:
                return None
            if not self.isAncestorOf(widget) and _takes_tab(widget):
                return widget
        return None

    # --- painting -----------------------------------------------------------------------------

    def _repaint(self) -> None:
        for child in self.findChildren(QWidget):
            child.update()

    def changeEvent(self, event: QEvent) -> None:
        """Another style is another paper."""
        self.update()
        super().changeEvent(event)

    def paintEvent(self, _event: QPaintEvent) -> None:
        """Paper, and a pale line under the head and over the foot."""
        painter = QPainter(self)
        painter.fillRect(self.rect(), theme.colour("sheet"))
        painter.setPen(QPen(theme.colour("faint"), 1))
        for y in (self.head.geometry().bottom(), self.foot.geometry().top()):
            painter.drawLine(QPoint(0, y), QPoint(self.width(), y))


def _reason(forward: bool) -> Qt.FocusReason:
    return Qt.FocusReason.TabFocusReason if forward else Qt.FocusReason.BacktabFocusReason


def _takes_tab(widget: QWidget) -> bool:
    return bool(
        widget.focusPolicy().value & Qt.FocusPolicy.TabFocus.value
        and widget.isEnabled()
        and widget.isVisible()
    )


def _holds(widget: QWidget, now: QWidget) -> bool:
    return widget is now or widget.isAncestorOf(now)


def _in_order(widget: QWidget) -> Iterator[QWidget]:
    """A widget's descendants and itself in the order in which they are read."""
    if isinstance(widget, Sentence):
        yield from widget.fields_in_order()
    elif isinstance(widget, Field):
        yield widget
    elif isinstance(widget, QScrollArea):
        if (page := widget.widget()) is not None:
            yield from _in_order(page)
    else:
        if (layout := widget.layout()) is not None:
            yield from _in_layout(layout)
        yield widget


def _in_layout(layout: QLayout) -> Iterator[QWidget]:
    for i in range(layout.count()):
        item = layout.itemAt(i)
        if item is None:
            continue
        if (widget := item.widget()) is not None:
            yield from _in_order(widget)
        elif (inner := item.layout()) is not None:
            yield from _in_layout(inner)
