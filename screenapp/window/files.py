"""Opening and saving: nothing is lost, and what goes wrong is told with its cause and mend."""

from __future__ import annotations

import logging
from collections.abc import Callable
from dataclasses import replace
from datetime import datetime
from pathlib import Path

from PySide6.QtCore import QObject, Signal
from PySide6.QtWidgets import QWidget

from screenapp.exchange.dxf_writing import write_dxf
from screenapp.model import findings_cache
from screenapp.model.errors import InvalidPartError, ScreenappError
from screenapp.model.findings import Findings
from screenapp.model.part import Part
from screenapp.model.part_json import read_part, write_part
from screenapp.model.regions import shape_with_zones
from screenapp.screening.cuts import read_cuts
from screenapp.screening.probes import read_probes
from screenapp.window.ask import DRAWING_SUFFIX, SUFFIX, Ask
from screenapp.window.document import Document
from screenapp.window.settings import Settings

log = logging.getLogger(__name__)


class Files(QObject):
    """The file side of one window; `take_typing` is called first, so that what is typed counts.

    Signals:
        failed: a lead sentence and a ScreenappError.
        saved: the part stands in its file, since this time.
        opened: another part is shown.
        restored: its findings were kept and are shown.
        drawing_wanted: path of a drawing to bring in.
    """

    failed = Signal(str, object)
    saved = Signal(object)
    opened = Signal()
    restored = Signal()
    drawing_wanted = Signal(object)

    def __init__(self, document: Document, settings: Settings, ask: Ask, window: QWidget) -> None:
        super().__init__(window)
        self._document = document
        self._settings = settings
        self._ask = ask
        self._window = window
        self.take_typing: Callable[[], None] = lambda: None
        self._before = (document.history, document.part.display_units)
        document.part_changed.connect(self._note_units)

    def new(self) -> bool:
        """Show an empty part."""
        if not self.may_leave():
            return False
        self._document.open(Part(display_units=self._settings.units), None)
        self.opened.emit()
        return True

    def _note_units(self) -> None:
        """The units that are chosen for a part are those that new ones begin in."""
        document = self._document
        history, units = self._before
        self._before = (document.history, document.part.display_units)
        if document.history is history and document.part.display_units != units:
            self._settings.units = document.part.display_units

    def choose_and_open(self) -> bool:
        """Ask for a file and open it."""
        path = self._ask.path_to_open(self._window, self._settings.folder)
        return path is not None and self.open(path)

    def open(self, path: Path) -> bool:
        """Open a part file, or begin to bring a drawing in.

        The present part stays if the file cannot be read.
        """
        if path.suffix.lower() == DRAWING_SUFFIX:
            self.drawing_wanted.emit(path)
            return True
        return self._open(path, lambda part: (part, path))

    def open_sample(self, path: Path) -> bool:
        """Open a sample as a new part without a file, so that saving asks where to."""
        return self._open(path, lambda part: (part, None))

    def _open(self, path: Path, place: Callable[[Part], tuple[Part, Path | None]]) -> bool:
        try:
            part, where = place(read_part(path))
        except ScreenappError as error:
            self.failed.emit(f"{path.name} was not opened", error)
            return False
        if not self.may_leave():
            return False
        self._document.open(part, where)
        if where is not None:
            self._settings.note_recent(where)
            self.saved.emit(datetime.fromtimestamp(where.stat().st_mtime))
        self.opened.emit()
        self._restore()
        self._document.said.emit(f"Opened {path.name}")
        return True

    def choose_drawing(self) -> bool:
        """Ask for a drawing and bring it in."""
        path = self._ask.drawing_to_open(self._window, self._settings.folder)
        if path is not None:
            self._settings.note_folder(path.parent)
            self.drawing_wanted.emit(path)
        return path is not None

    def take_drawing(self, drawn: Part, name: str) -> bool:
        """Make a brought-in part the present one: as one step if nothing is drawn yet, else anew.

        On an empty board wall, limits and whatever else is there stay.
        """
        document = self._document
        now = document.part
        step = f"bringing in {name}"
        if now.outline is None and not now.holes and not now.zones:
            self.take_typing()
            now = document.part
            title = drawn.title if now.title == Part().title else now.title
            lines = replace(
                now, title=title, outline=drawn.outline, holes=drawn.holes, zones=drawn.zones
            )
            document.apply(step, lines)
        else:
            if not self.may_leave():
                return False
            document.open(Part(display_units=drawn.display_units), None)
            self.opened.emit()
            document.apply(step, drawn)
        document.said.emit(f"Brought in {name}")
        return True

    def export_drawing(self) -> bool:
        """Ask where to write the part's boundary as a drawing."""
        self.take_typing()
        part, path = self._document.part, self._document.path
        stem = path.name.removesuffix(SUFFIX) if path is not None else file_name(part)
        folder = path.parent if path is not None else self._settings.folder
        target = self._ask.drawing_to_save(self._window, folder / (stem + DRAWING_SUFFIX))
        if target is None:
            return False
        try:
            write_dxf(part, target)
        except ScreenappError as error:
            self.failed.emit("The drawing was not written", error)
            return False
        self._document.said.emit(f"Wrote {target.name}")
        return True

    def save(self) -> bool:
        """Save where the part came from, or ask."""
        self.take_typing()
        path = self._document.path
        return self.save_as() if path is None else self._write(path)

    def save_as(self) -> bool:
        """Ask where to save."""
        self.take_typing()
        document = self._document
        suggested = document.path or self._settings.folder / (file_name(document.part) + SUFFIX)
        path = self._ask.path_to_save(self._window, suggested)
        return path is not None and self._write(path)

    def may_leave(self) -> bool:
        """Whether the present part may go: it is saved, or the user said so."""
        self.take_typing()
        if not self._document.unsaved:
            return True
        answer = self._ask.unsaved(self._window, self._document.part.title)
        if answer == "save":
            return self.save()
        return answer == "discard"

    def _write(self, path: Path) -> bool:
        try:
            write_part(self._document.part, path)
        except ScreenappError as error:
            self.failed.emit("The part was not saved", error)
            return False
        self._document.mark_saved(path)
        self._settings.note_recent(path)
        self.saved.emit(datetime.now())
        self._document.said.emit(f"Saved {path.name}")
        return True

    def _restore(self) -> None:
        """Show findings that were kept for this very part."""
        document = self._document
        kept = findings_cache.load(document.key)
        if kept is not None:
            document.set_findings(with_readings(document.part, kept))
            self.restored.emit()


def with_readings(part: Part, findings: Findings) -> Findings:
    """The findings with the readings of the part's present probes and cuts."""
    try:
        shape = shape_with_zones(part)
        return read_cuts(part, shape, read_probes(part, shape, findings))
    except InvalidPartError as error:  # findings are only of sound parts: worth a line in the log
        log.warning("readings could not be renewed: %s", error.cause)
        return findings


def file_name(part: Part) -> str:
    """A file name made of the title.

    Example:
        >>> file_name(Part(title="Cable tray bracket, rev. B"))
        'cable-tray-bracket-rev-b'
    """
    kept = "".join(c if c.isalnum() else " " for c in part.title.lower())
    return "-".join(kept.split()) or "part"
