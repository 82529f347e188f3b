"""The panel that brings a drawing in: preview at the left, what is made of it at the right.

It does not stop the work; reading and fitting run in a thread, and Esc puts it away.
"""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

from PySide6.QtCore import Qt, QTimer, Signal
from PySide6.QtGui import QFont, QHideEvent
from PySide6.QtWidgets import (
    QDialog,
    QHBoxLayout,
    QLabel,
    QProgressBar,
    QPushButton,
    QScrollArea,
    QSizePolicy,
    QVBoxLayout,
    QWidget,
)

from screenapp.exchange.bringing_in import Brought, bring_in
from screenapp.exchange.choosing import Wishes, unit_factor
from screenapp.exchange.convert import shape_faults
from screenapp.exchange.drawing import Drawing, DrawingError, Remark
from screenapp.exchange.reading_apart import read_apart
from screenapp.model.collecting import look_again, many_records
from screenapp.model.errors import Fault, ScreenappError
from screenapp.model.part import DisplayUnits, Part, Point
from screenapp.model.progress import Progress, Step
from screenapp.model.units import parse_quantity
from screenapp.window import theme
from screenapp.window.background_jobs import BackgroundJobs
from screenapp.window.cut_label import CutLabel
from screenapp.window.drawing_layers import LayerList
from screenapp.window.drawing_preview import DrawingPreview, Painted
from screenapp.window.drawing_words import (
    outline_sentence,
    remark_pieces,
    tolerance_sentence,
    unit_sentence,
)
from screenapp.window.many_lines import straight_pieces
from screenapp.window.sheet.field import PAD, sentence_of
from screenapp.window.sheet.pieces import Link, Piece, Words
from screenapp.window.sheet.sentence import Sentence

FIRST_SIZE = (1088, 620)
SIDE_WIDTH = 420
LAYERS_HEIGHT = 6 * 30
"""More layers than fit in here are scrolled [px]."""

PATIENCE_MS = 250
"""Work that takes longer than this shows its progress [ms]."""

STEPS = 1000


class DrawingPanel(QDialog):
    """Reads one drawing and offers the part in it.

    Signals:
        wanted: the part that was brought in, and the drawing's file name.
    """

    wanted = Signal(object, str)

    def __init__(
        self, path: Path, units: DisplayUnits, jobs: BackgroundJobs, parent: QWidget
    ) -> None:
        super().__init__(parent)
        self.setWindowTitle(f"Bring in a drawing: {path.name}")
        self.setModal(False)
        self.setAttribute(Qt.WidgetAttribute.WA_DeleteOnClose)
        self.path = path
        self.drawing: Drawing | None = None
        self.wishes = Wishes()
        self.painted: Painted | None = None
        self._units = units
        self.jobs = jobs
        self._lay_out()
        jobs.progress.connect(self._show_step)
        jobs.finished.connect(self._finished)
        jobs.failed.connect(self._failed)
        self._listens = True
        self._late = QTimer(self)
        self._late.setSingleShot(True)
        self._late.setInterval(PATIENCE_MS)
        self._late.timeout.connect(lambda: self._show_busy(True))
        self._begin("Reading the drawing")

        def read(progress: Progress) -> Drawing:
            with many_records():
                return read_apart(path, progress)

        self.jobs.start(read)

    # --- laying out -----------------------------------------------------------------------------

    def _lay_out(self) -> None:
        self.preview = DrawingPreview(self)
        self.title = _heading(self.path.name, above=0)
        self.title.setWordWrap(True)
        self.unit, self.tolerance, self.outline = Sentence(self), Sentence(self), Sentence(self)
        self.layers = LayerList(self)
        self.layers.changed.connect(self._layers_changed)
        self.said = QVBoxLayout()
        self.said.setSpacing(4)
        self.rows: list[Sentence] = []
        page = QWidget()
        column = QVBoxLayout(page)
        column.setContentsMargins(20, 16, 16, 16)
        column.setSpacing(4)
        column.addWidget(self.title)
        column.addWidget(self.unit)
        column.addWidget(self.tolerance)
        column.addWidget(self.outline)
        self.layers_heading = _heading("Layers")
        column.addWidget(self.layers_heading)
        self.layer_area = _scrolled(self.layers, self)
        column.addWidget(self.layer_area)
        self.report_heading = _heading("What was found")
        column.addWidget(self.report_heading)
        column.addLayout(self.said)
        column.addStretch(1)
        scroll = _scrolled(page, self)
        scroll.setFixedWidth(SIDE_WIDTH)
        body = QHBoxLayout()
        body.setSpacing(0)
        body.addWidget(self.preview, 1)
        body.addWidget(scroll)
        outer = QVBoxLayout(self)
        outer.setContentsMargins(0, 0, 0, 0)
        outer.setSpacing(0)
        outer.addLayout(body, 1)
        outer.addWidget(self._foot())
        self.resize(*FIRST_SIZE)
        self._show_wishes()

    def _foot(self) -> QWidget:
        foot = QWidget(self)
        self.take = QPushButton("Bring it in", foot)
        self.take.setProperty("main", True)
        self.take.setDefault(True)
        self.take.setEnabled(False)
        self.take.clicked.connect(self._take)
        self.away = QPushButton("Cancel", foot)
        self.away.setAutoDefault(False)
        self.away.setToolTip("Put the drawing away (Esc); the part stays as it is")
        self.away.clicked.connect(self.close)
        self.bar = QProgressBar(foot)
        self.bar.setRange(0, STEPS)
        self.bar.setTextVisible(False)
        self.bar.setAccessibleName("Progress of reading the drawing")
        self.bar.setMinimumWidth(120)
        keep = self.bar.sizePolicy()
        keep.setRetainSizeWhenHidden(True)
        self.bar.setSizePolicy(keep)
        self.stage = CutLabel(foot)
        self.stage.setProperty("quiet", True)
        self.stage.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Preferred)
        row = QHBoxLayout(foot)
        row.setContentsMargins(20, 12, 20, 12)
        row.setSpacing(12)
        row.addWidget(self.bar)
        row.addWidget(self.stage, 1)
        row.addWidget(self.away)
        row.addWidget(self.take)
        return foot

    # --- the work -------------------------------------------------------------------------------

    def _begin(self, stage: str) -> None:
        self.bar.setValue(0)
        self.stage.setText(stage)
        self.take.setEnabled(False)
        self._show_busy(self.bar.isVisible())
        self._late.start()

    def _renew(self) -> None:
        """Make the part anew as wished."""
        drawing, wishes = self.drawing, self.wishes
        if drawing is None:
            return
        self._show_wishes()

        def work(progress: Progress) -> Painted:
            with many_records():
                brought = bring_in(drawing, wishes, progress)
                faults = shape_faults(brought.part) if brought.part is not None else ()
                chains = tuple(curve for chain in brought.open_chains for curve in chain.curves)
                lines = straight_pieces(brought.lines)
                return Painted(brought, lines, straight_pieces(chains), faults)

        self._begin("Making a part of it")
        self.jobs.start(work)

    def _show_step(self, step: Step) -> None:
        self.stage.setText(step.stage.capitalize())
        self.bar.setValue(round(STEPS * min(1.0, max(0.0, step.done))))

    def _show_busy(self, on: bool) -> None:
        self.bar.setVisible(on)
        self.stage.setVisible(on)
        if not on:
            self._late.stop()

    def _finished(self, result: object) -> None:
        if isinstance(result, Drawing):
            self.drawing = result
            self.wishes = Wishes(unit=result.unit)
            self.layers.fill(result.layers)
            tall = self.layers.sizeHint().height()
            self.layer_area.setFixedHeight(min(tall, LAYERS_HEIGHT))
            self._renew()
            return
        assert isinstance(result, Painted)
        if self.wishes.outline is None and len(result.brought.candidates) > 1:
            self._wish(replace(self.wishes, outline=1))  # the largest, until another is chosen
            return
        self._show_busy(False)
        self.painted = result
        self.preview.show_drawing(result, self._units)
        self._show_wishes()
        self._show_report(result.brought, result.faults)
        self.take.setEnabled(result.brought.part is not None)
        self.take.setToolTip(
            "Make it the part on the board (Enter)"
            if result.brought.part is not None
            else "First choose the unit of the drawing"
            if self.wishes.unit is None
            else sentence_of(result.brought.error or _NONE)
        )

    def _failed(self, error: ScreenappError) -> None:
        """The drawing cannot be read at all."""
        self._show_busy(False)
        self._show_report(Brought(None, DrawingError(error.cause, error.mend)), ())

    # --- what is wished -------------------------------------------------------------------------

    def _show_wishes(self) -> None:
        drawing = self.drawing
        for widget in (self.unit, self.tolerance, self.layers_heading, self.layer_area):
            widget.setVisible(drawing is not None)
        candidates = self.painted.brought.candidates if self.painted is not None else ()
        pieces = outline_sentence(candidates, self.wishes.outline, self._outline_chosen)
        self.outline.setVisible(bool(pieces) and drawing is not None)
        self.outline.set(*pieces)
        if drawing is not None:
            self.unit.set(*unit_sentence(drawing, self.wishes.unit, self._unit_chosen))
            tolerance = self.wishes.tolerance
            self.tolerance.set(*tolerance_sentence(tolerance, self._units, self._tolerance_typed))

    def _unit_chosen(self, unit: str) -> None:
        unit_factor(unit)
        self._wish(replace(self.wishes, unit=unit))

    def _tolerance_typed(self, text: str) -> None:
        tolerance = parse_quantity(text, "length", self._units)
        if not tolerance > 0.0:
            raise DrawingError("the tolerance is not above zero", "give one like 0.01 mm")
        self._wish(replace(self.wishes, tolerance=tolerance))

    def _outline_chosen(self, number: str) -> None:
        self._wish(replace(self.wishes, outline=int(number)))

    def _layers_changed(self) -> None:
        self._wish(replace(self.wishes, roles=self.layers.roles, outline=None))

    def _wish(self, wishes: Wishes) -> None:
        if wishes != self.wishes:
            self.wishes = wishes
            self._renew()

    # --- what is said ---------------------------------------------------------------------------

    def _show_report(self, brought: Brought, faults: tuple[Fault, ...]) -> None:
        for row in self.rows:
            row.hide()
            row.deleteLater()
        self.rows = []
        asked_above = self.drawing is not None and self.wishes.unit is None
        if brought.error is not None and not asked_above:
            self._say(Words(f"{sentence_of(brought.error)}", colour="bad"))
        for fault in faults:
            self._say(*self._fault_pieces(fault))
        order = {"open": 0, "branch": 1, "gap": 2, "twice": 3, "note": 4, "ignored": 5}
        for remark in sorted(brought.remarks, key=lambda r: order[r.kind]):
            self._say(*self._remark(remark))
        self.report_heading.setVisible(bool(self.rows))

    def _remark(self, remark: Remark) -> tuple[Piece | str, ...]:
        return remark_pieces(remark, self.preview.show_place, [0])

    def _fault_pieces(self, fault: Fault) -> tuple[Piece | str, ...]:
        text = f"{fault.cause[:1].upper()}{fault.cause[1:]}: {fault.mend}."
        words = Words(text, colour="bad")
        at: Point | None = fault.at
        if at is None:
            return (words,)
        place = at
        show = Link("show", "Show it", lambda _key: self.preview.show_place(place))
        return (words, " ", show)

    def _say(self, *pieces: Piece | str) -> None:
        row = Sentence(self)
        row.set(*pieces)
        self.said.addWidget(row)
        self.rows.append(row)

    # --- its end --------------------------------------------------------------------------------

    def _take(self) -> None:
        part: Part | None = self.painted.brought.part if self.painted is not None else None
        if part is not None and not self.jobs.busy:
            self.wanted.emit(part, self.path.name)

    def hideEvent(self, event: QHideEvent) -> None:
        """Put away: the work is wanted no more, and what it still says is not heard."""
        self.jobs.cancel()
        self._late.stop()
        if self._listens:
            self._listens = False
            self.jobs.progress.disconnect(self._show_step)
            self.jobs.finished.disconnect(self._finished)
            self.jobs.failed.disconnect(self._failed)
            look_again()
        super().hideEvent(event)


_NONE = DrawingError("there is no part in it", "choose other layers")


def _scrolled(page: QWidget, parent: QWidget) -> QScrollArea:
    area = QScrollArea(parent)
    area.setWidget(page)
    area.setWidgetResizable(True)
    area.setHorizontalScrollBarPolicy(Qt.ScrollBarPolicy.ScrollBarAlwaysOff)
    area.setFocusPolicy(Qt.FocusPolicy.NoFocus)
    return area


def _heading(text: str, above: int = 12) -> QLabel:
    label = QLabel(text)
    label.setFont(theme.font(theme.TEXT_BODY, QFont.Weight.DemiBold))
    label.setContentsMargins(PAD, above, 0, 0)
    return label
