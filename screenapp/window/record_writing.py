"""Writing the record from the window: in a thread of its own, refused while it would be untrue."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace
from pathlib import Path
from typing import TYPE_CHECKING

from PySide6.QtCore import QObject, QUrl, Signal
from PySide6.QtGui import QDesktopServices

from screenapp.model.errors import ScreenappError
from screenapp.model.findings import Findings
from screenapp.model.part import Part
from screenapp.model.part_json import part_sha256
from screenapp.model.progress import Progress
from screenapp.window.ask import SUFFIX, Ask
from screenapp.window.background_jobs import BackgroundJobs
from screenapp.window.document import Document
from screenapp.window.files import file_name
from screenapp.window.sheet.pieces import Link

if TYPE_CHECKING:
    from screenapp.window.main_window import MainWindow


@dataclass(frozen=True)
class Written:
    """The files of a record; its page is the first of them."""

    files: tuple[Path, ...]

    @property
    def page(self) -> Path:
        """The page to read."""
        return self.files[0]


def record_work(
    part: Part, findings: Findings, folder: Path, source: Path
) -> Callable[[Progress], object]:
    """What the thread does: write the record of these findings into `folder`."""

    def work(progress: Progress) -> Written:
        from screenapp.report.record import unowned_part, write_record  # it draws: slow to load

        taken = unowned_part(folder, source)
        if taken is not None:
            raise ScreenappError(
                f"{taken} is there already and belongs to no record: it would be replaced",
                "choose another folder, or move the file away",
            )
        now = replace(findings, part_sha256=part_sha256(part))  # of title and notes as they are
        try:
            return Written(tuple(write_record(part, now, folder, source, progress)))
        except OSError as error:
            raise ScreenappError(
                f"the record cannot be written to {folder}: {error.strerror or error}",
                "choose another folder, or make room there",
            ) from error

    return work


def why_not(document: Document, screening: bool) -> str:
    """Why no record can be written now, with what would mend it; "" if one can."""
    findings = document.findings
    if screening:
        return "the part is being screened: wait until it is done"
    if findings is None:
        return "the part has not been screened: screen it first (Ctrl+Enter)"
    if not document.current:
        return "the findings are out of date: screen the part again (Ctrl+Enter)"
    if findings.last is None:
        return "only the numbers of this screening were kept: screen the part again (Ctrl+Enter)"
    return ""


def source_of(document: Document, folder: Path) -> Path:
    """The file that gives the record its name: the part's own, or one named by its title."""
    return document.path or folder / (file_name(document.part) + SUFFIX)


class RecordWriter(QObject):
    """Asks where to, writes one record at a time, and says in the sheet what became of it.

    `show_path` opens a file or folder with whatever the desktop has for it.

    Signals:
        written: a Written.
        ended: nothing is being written any more, however it ended.
    """

    written = Signal(object)
    ended = Signal()

    def __init__(self, window: MainWindow, ask: Ask) -> None:
        super().__init__(window)
        self._window = window
        self._ask = ask
        self.show_path: Callable[[Path], None] = _open
        self._jobs = BackgroundJobs("record", _unexpected, self)
        self._jobs.progress.connect(lambda step: window.sheet.foot.show_step(step))
        self._jobs.finished.connect(self._finished)
        self._jobs.failed.connect(self._failed)

    @property
    def busy(self) -> bool:
        """Whether a record is being written."""
        return self._jobs.busy

    def choose_and_write(self) -> bool:
        """Write the record of the findings as they now are; whether it was begun."""
        window, document = self._window, self._window.document
        window.files.take_typing()
        reason = why_not(document, window.screener.busy)
        if reason:
            document.said.emit(f"No record written: {reason}")
            return False
        beside = document.path.parent if document.path else window.settings.folder
        folder = self._ask.folder_for_record(window, beside)
        if folder is None:
            return False
        source = source_of(document, folder)
        if document.path is not None and document.unsaved and folder.resolve() == beside.resolve():
            document.said.emit(
                "No record written: beside its part file it needs the part as saved: save it first"
            )
            return False
        findings = document.findings
        assert findings is not None  # why_not has seen to it
        window.sheet.head.notice.hide()
        window.sheet.foot.begin()
        self._jobs.start(record_work(document.part, findings, folder, source))
        window.actions_.refresh()
        return True

    def cancel(self) -> None:
        """Stop; files that stand already stay."""
        if self.busy:
            self._jobs.cancel()
            self._end()
            self._window.document.said.emit(
                "Stopped: the record is not finished; files that stand already stay"
            )

    def shut_down(self) -> None:
        """Stop, and wait for the thread to end."""
        self._jobs.shut_down()

    def _finished(self, result: object) -> None:
        assert isinstance(result, Written)
        self._end()
        folder = result.page.parent
        self._window.sheet.head.notice.say(
            "The record is written",
            f"{len(result.files)} files are in the folder “{folder.name}”. ",
            Link("page", "Open the page", lambda _key: self.show_path(result.page)),
            " ",
            Link("folder", "Open the folder", lambda _key: self.show_path(folder)),
        )
        self._window.sheet.head.notice.setToolTip(str(folder))
        self.written.emit(result)

    def _failed(self, error: ScreenappError) -> None:
        self._end()
        self._window.sheet.head.notice.tell("The record was not written", error)

    def _end(self) -> None:
        self._window.sheet.foot.end("")
        self._window.actions_.refresh()
        self.ended.emit()


def _open(path: Path) -> None:
    QDesktopServices.openUrl(QUrl.fromLocalFile(str(path)))


def _unexpected(error: Exception) -> ScreenappError:
    text = str(error).strip().splitlines()
    detail = f": {text[0]}" if text else ""
    return ScreenappError(
        f"the record could not be written ({type(error).__name__}{detail})",
        "the part is unharmed: save it, and report this if it comes back",
    )
