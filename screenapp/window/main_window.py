"""The window: board and readings at the left, the check sheet at the right."""

from __future__ import annotations

from collections.abc import Callable
from datetime import datetime
from pathlib import Path

from PySide6.QtCore import Qt, QTimer
from PySide6.QtGui import QCloseEvent, QDragEnterEvent, QDropEvent, QShowEvent
from PySide6.QtWidgets import QDialog, QMainWindow, QSplitter

from screenapp.model import findings_cache
from screenapp.model.combinations import loadings
from screenapp.model.edits import EditError
from screenapp.model.errors import ScreenappError
from screenapp.model.findings import Fields, Findings, PassSummary
from screenapp.model.part import DisplayUnits, Part, StressLimit
from screenapp.model.part_json import screening_key
from screenapp.model.restated import restated
from screenapp.window import theme
from screenapp.window.actions import Actions, keeps_delete
from screenapp.window.ask import DRAWING_SUFFIX, Ask
from screenapp.window.background_jobs import BackgroundJobs
from screenapp.window.board.board import Board
from screenapp.window.board.lens_bar import LensBar
from screenapp.window.board.lens_painter import LensPainter
from screenapp.window.commands import Command
from screenapp.window.commands_panel import READINGS, SHEET, CommandsPanel
from screenapp.window.cut_label import CutLabel
from screenapp.window.document import Document
from screenapp.window.drawing_panel import DrawingPanel
from screenapp.window.drawing_words import not_understood
from screenapp.window.files import Files, with_readings
from screenapp.window.help_panels import about_panel
from screenapp.window.jobs import MakeMesher, Screener, ScreenFunction
from screenapp.window.readings import Readings
from screenapp.window.record_writing import RecordWriter
from screenapp.window.settings import Settings
from screenapp.window.sheet import changes
from screenapp.window.sheet.sheet import Sheet

SHARE_OF_BOARD = 0.62
FIRST_SIZE = (1440, 900)
WARM_UP_MS = 250
SAID_MS, SAID_HEIGHT = 6000, 28


class MainWindow(QMainWindow):
    """Shows one document; everything that could be someone else's is handed in."""

    def __init__(
        self,
        screen: ScreenFunction,
        make_mesher: MakeMesher,
        settings: Settings | None = None,
        ask: Ask | None = None,
    ) -> None:
        super().__init__()
        self.settings = settings or Settings()
        self.document = Document(Part(display_units=self.settings.units), parent=self)
        self.document.look(lens=self.settings.lens)
        self.screener = Screener(screen, make_mesher, self)
        self.drawing_jobs = BackgroundJobs("drawing", not_understood, self)
        ask = ask or Ask()
        self.files = Files(self.document, self.settings, ask, self)
        self.record = RecordWriter(self, ask)
        self.board = Board(self.document)
        self.board.canvas.dimensions.shown = self.settings.dimensions
        self.lens_bar = LensBar(self.document)
        self.board.set_lens_bar(self.lens_bar)
        self.painter = LensPainter(self.document, self.board)
        self.readings = Readings(self.document)
        self.sheet = Sheet(self.document)
        self.files.take_typing = self.sheet.take_typing
        self._read_last: tuple[object, ...] = ()
        self._panels: dict[str, QDialog] = {}
        self._warmed = False
        self._lay_out()
        self.actions_ = Actions(self)
        self._connect()
        self.setAcceptDrops(True)
        self._show_title()

    # --- what the menus ask -------------------------------------------------------------------

    def screen_part(self) -> None:
        """Screen the part as it now is."""
        self._accept_typing()
        blocking = [f for f in self.document.faults if f.blocks]
        if blocking:
            first = blocking[0]
            self._say(f"Not screened: {first.cause}; {first.mend}")
            self.document.select(*first.ids)
            return
        self.sheet.head.notice.hide()
        self.record.cancel()
        self.screener.start(self.document.part)

    def cancel(self) -> None:
        """Stop screening, or writing the record."""
        self.record.cancel()
        if self.screener.busy:
            self.sheet.foot.show_cancelling()
            self.screener.cancel()

    def delete(self) -> None:
        """Delete what is selected."""
        focus = self.focusWidget()
        if keeps_delete(focus) or not self.document.selection:
            return
        try:
            changes.remove(self.document, *self.document.selection)
        except EditError as error:
            self._say(f"{error.cause}: {error.mend}")

    def choose_theme(self, choice: theme.Choice) -> None:
        """Take a theme and remember it."""
        self.settings.theme = choice
        theme.choose(choice)
        self.actions_.refresh()

    def go_to_board(self) -> None:
        """Put the keyboard on the board."""
        self.board.canvas.setFocus(Qt.FocusReason.ShortcutFocusReason)

    def go_to_sheet(self) -> None:
        """Put the keyboard on the sheet's first value that is missing, or its first one."""
        wanted = next((p for p in self.sheet.paragraphs if p.state == "open"), None)
        stops = self.sheet.stops()
        inside = [w for w in stops if wanted is not None and wanted.isAncestorOf(w)]
        target = next(iter(inside or stops), None)
        if target is not None:
            target.setFocus(Qt.FocusReason.ShortcutFocusReason)
            if self.sheet.page.isAncestorOf(target):
                self.sheet.scroll_area.ensureWidgetVisible(target, 0, 40)

    def go_to_readings(self) -> None:
        """Put the keyboard on the readings."""
        table = self.readings.table
        table.setFocus(Qt.FocusReason.ShortcutFocusReason)
        if table.figures.lines and not table.selectionModel().hasSelection():
            table.selectRow(0)

    def show_commands(self) -> None:
        """List every command with its key; the list runs them too."""
        self._show_panel("commands", lambda: CommandsPanel(lambda: self.commands, self))

    @property
    def commands(self) -> tuple[Command, ...]:
        """Everything that can be done by a key, in menus, on the board and in the sheet."""
        return (*self.board.commands, *self.actions_.commands, *SHEET, *READINGS)

    def switch_units(self) -> None:
        """Show the other units."""
        part = self.document.part
        units: DisplayUnits = "mm-N-MPa" if part.display_units != "mm-N-MPa" else "in-lbf-ksi"
        changes.set_units(self.document, units)

    def bring_in(self, path: Path) -> None:
        """Read a drawing and show what would come in; another one that is shown goes."""
        shown = self._panels.get("drawing")
        if shown is not None:
            shown.close()
            self._panels.pop("drawing", None)
        panel = DrawingPanel(path, self.document.part.display_units, self.drawing_jobs, self)

        def take(part: Part, name: str) -> None:
            painted = panel.painted
            if not self.files.take_drawing(part, name):
                return
            panel.close()
            self.board.fit()
            if painted is not None and (count := len(painted.brought.open_chains)):
                self.board.canvas.open_chains.show_chains(painted.chains, painted.open_ends)
                stay = "line stays" if count == 1 else "lines stay"
                self.document.said.emit(
                    f"Brought in {name}; {count} {stay} open, ringed on the board (Shift+L)"
                )

        panel.wanted.connect(take)
        self._show_panel("drawing", lambda: panel)

    def show_about(self) -> None:
        """Say what this is, with the cautions."""
        self._show_panel("about", lambda: about_panel(self))

    # --- laying out -----------------------------------------------------------------------------

    def _lay_out(self) -> None:
        self.left = QSplitter(Qt.Orientation.Vertical)
        self.left.addWidget(self.board)
        self.left.addWidget(self.readings)
        self.left.setStretchFactor(0, 1)
        self.left.setStretchFactor(1, 0)
        self.left.setCollapsible(0, False)
        self.whole = QSplitter(Qt.Orientation.Horizontal)
        self.whole.addWidget(self.left)
        self.whole.addWidget(self.sheet)
        for splitter in (self.left, self.whole):
            splitter.setHandleWidth(1)
            splitter.setChildrenCollapsible(False)
        self.whole.setStretchFactor(0, round(100 * SHARE_OF_BOARD))
        self.whole.setStretchFactor(1, round(100 * (1 - SHARE_OF_BOARD)))
        self.setCentralWidget(self.whole)
        self.said = CutLabel()
        self.said.setContentsMargins(0, 0, 16, 0)
        self.said.setFixedHeight(SAID_HEIGHT)
        self.said.setAlignment(Qt.AlignmentFlag.AlignRight | Qt.AlignmentFlag.AlignVCenter)
        self.menuBar().setCornerWidget(self.said, Qt.Corner.TopRightCorner)
        self._unsay = QTimer(self)
        self._unsay.setSingleShot(True)
        self._unsay.setInterval(SAID_MS)
        self._unsay.timeout.connect(lambda: self.said.setText(""))
        self.resize(*FIRST_SIZE)
        geometry = self.settings.bytes_of("geometry")
        if geometry is not None:
            self.restoreGeometry(geometry)
        self._share_out()

    def _share_out(self) -> None:
        wide, tall = self.width(), self.height()
        self.whole.setSizes([round(wide * SHARE_OF_BOARD), round(wide * (1 - SHARE_OF_BOARD))])
        self.left.setSizes([round(tall * 0.8), round(tall * 0.2)])
        for name, splitter in (("columns", self.whole), ("rows", self.left)):
            state = self.settings.bytes_of(name)
            if state is not None:
                splitter.restoreState(state)

    def _connect(self) -> None:
        document, screener, sheet = self.document, self.screener, self.sheet
        document.said.connect(self._say)
        document.path_changed.connect(self._show_title)
        document.part_changed.connect(self._renew_readings)
        self.board.sample_wanted.connect(lambda path: self.files.open_sample(Path(path)))
        self.files.failed.connect(sheet.head.notice.tell)
        self.files.saved.connect(self._saved)
        self.files.opened.connect(self._opened)
        self.files.drawing_wanted.connect(self.bring_in)
        self.files.restored.connect(self._show_results)
        sheet.head.screen_wanted.connect(self.screen_part)
        sheet.foot.screen_wanted.connect(self.screen_part)
        sheet.foot.cancel_wanted.connect(self.cancel)
        screener.started.connect(self._started)
        screener.progress.connect(sheet.foot.show_step)
        screener.pass_done.connect(self._passed)
        screener.finished.connect(self._finished)
        screener.failed.connect(self._failed)
        screener.cancelled.connect(lambda: self._end("cancelled"))

    # --- screening ------------------------------------------------------------------------------

    def _started(self) -> None:
        self.sheet.foot.begin()
        self.sheet.head.show_screening(True)
        self.actions_.refresh()

    def _show_results(self) -> None:
        """Paint what was found, unless a lens for results is chosen already."""
        findings = self.document.findings
        if findings is not None and self.document.view.lens in ("Shape", "Mesh"):
            worst = findings.governing
            cases = [case.id for case in loadings(self.document.part)]
            self.document.look(
                lens="Utilisation" if _judges_stress(self.document.part) else "Stress",
                case=cases.index(worst.case) if worst is not None and worst.case in cases else 0,
            )

    def _passed(self, fields: Fields, summary: PassSummary) -> None:
        self.sheet.foot.show_pass(summary)
        if self.document.view.lens == "Shape":
            self.document.look(lens="Mesh")
        self.painter.show_pass(fields)

    def _finished(self, findings: Findings, part: Part) -> None:
        findings_cache.store(findings, part)
        self._end("")
        if findings.key != self.document.key:
            self._end("the part changed meanwhile")
            if screening_key(part) == findings.key:
                self.document.set_findings(findings)  # shown, and marked out of date
            return
        self._read_last = _read_places(self.document.part)
        self.document.set_findings(with_readings(self.document.part, findings))
        self._show_results()

    def _failed(self, error: ScreenappError) -> None:
        self._end("not screened")
        self.sheet.head.notice.tell("The screening failed; the part is unharmed", error)
        ids = [id_ for fault in error.faults for id_ in fault.ids]
        if ids:
            self.document.select(*dict.fromkeys(ids))

    def _end(self, how: str) -> None:
        self.painter.show_pass(None)
        self.sheet.foot.end(how)
        self.sheet.head.show_screening(False)
        self.actions_.refresh()

    def _renew_readings(self) -> None:
        """Read changed probes at once, without solving."""
        document, findings = self.document, self.document.findings
        if findings is None or not document.current or not findings.fields:
            return
        if self._read_last != _read_places(document.part):
            self._read_last = _read_places(document.part)
            document.set_findings(with_readings(document.part, findings))

    # --- saying ---------------------------------------------------------------------------------

    def _say(self, text: str) -> None:
        self.said.setText(restated(text, self.document.part.display_units))
        self._unsay.start()

    def _show_title(self) -> None:
        document = self.document
        name = document.path.name if document.path else document.part.title
        self.setWindowTitle(f"{name}[*] · screenapp")
        self.setWindowModified(document.unsaved)

    def _saved(self, when: datetime) -> None:
        self.sheet.head.notice.hide()
        self.sheet.head.note_saved(when)

    def _opened(self) -> None:
        if self.screener.busy:
            self.screener.cancel()
        self.painter.show_pass(None)
        self._read_last = _read_places(self.document.part)
        self.sheet.head.notice.hide()
        self.sheet.foot.end("")
        self.sheet.scroll_area.verticalScrollBar().setValue(0)

    def _show_panel(self, name: str, make: Callable[[], QDialog]) -> None:
        panel = self._panels.get(name)
        if panel is None:
            panel = make()
            self._panels[name] = panel
            panel.destroyed.connect(lambda: self._panels.pop(name, None))
        panel.show()
        panel.raise_()
        panel.activateWindow()

    def _accept_typing(self) -> None:
        """What is still being typed in the sheet counts."""
        focus = self.focusWidget()
        if focus is not None and self.sheet.isAncestorOf(focus):
            self.sheet.foot.button.setFocus(Qt.FocusReason.OtherFocusReason)
            self.sheet.take_typing()

    # --- events ---------------------------------------------------------------------------------

    def showEvent(self, event: QShowEvent) -> None:
        """Share the width out; warm the mesher up once the window stands."""
        super().showEvent(event)
        if not self._warmed:
            self._warmed = True
            self._share_out()
            QTimer.singleShot(WARM_UP_MS, self.screener, self.screener.warm_up)

    def closeEvent(self, event: QCloseEvent) -> None:
        """Ask about unsaved work, remember the window, stop the thread."""
        if not self.files.may_leave():
            event.ignore()
            return
        self.settings.keep_bytes("geometry", self.saveGeometry())
        self.settings.keep_bytes("columns", self.whole.saveState())
        self.settings.keep_bytes("rows", self.left.saveState())
        self.settings.lens = self.document.view.lens
        self.settings.dimensions = self.board.canvas.dimensions.shown
        self.settings.sync()
        self.screener.shut_down()
        self.drawing_jobs.shut_down()
        self.record.shut_down()
        for panel in list(self._panels.values()):
            panel.close()
        super().closeEvent(event)

    def dragEnterEvent(self, event: QDragEnterEvent) -> None:
        """A part file or a drawing may be dropped."""
        if _dropped(event) is not None:
            event.acceptProposedAction()

    def dropEvent(self, event: QDropEvent) -> None:
        """Open the dropped file."""
        path = _dropped(event)
        if path is not None:
            event.acceptProposedAction()
            self.files.open(path)


def _dropped(event: QDropEvent) -> Path | None:
    urls = event.mimeData().urls()
    if len(urls) != 1 or not urls[0].isLocalFile():
        return None
    path = Path(urls[0].toLocalFile())
    return path if path.suffix.lower() in (".json", DRAWING_SUFFIX) else None


def _read_places(part: Part) -> tuple[object, ...]:
    """Everything that is read off the findings."""
    return (*part.readings, *part.cuts)


def _judges_stress(part: Part) -> bool:
    return any(isinstance(limit, StressLimit) for limit in part.limits)
