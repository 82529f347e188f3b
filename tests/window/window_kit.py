"""A main window with a made-up screening, answers instead of dialogs, and hands for the sheet."""

from __future__ import annotations

import threading
from collections.abc import Callable
from dataclasses import dataclass, field, replace
from pathlib import Path
from typing import Any

from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication, QWidget
from pytestqt.qtbot import QtBot

from screenapp.model.findings import Findings
from screenapp.model.part import Part
from screenapp.model.part_json import screening_key
from screenapp.model.progress import Progress, Step
from screenapp.window.ask import Ask, Unsaved
from screenapp.window.document import Document
from screenapp.window.jobs import OnPass
from screenapp.window.main_window import MainWindow
from screenapp.window.settings import Settings
from screenapp.window.sheet.field import Field
from screenapp.window.sheet.sentence import Sentence
from screenapp.window.sheet.sheet import Sheet
from tests.window import fabricate

LEFT = Qt.MouseButton.LeftButton


def made_up(part: Part, verdict: str = "holds", headline: str = "Holds, 1.04 in hand") -> Findings:
    """Findings of `fabricate.plate()` or a part like it, without arrays."""
    found = fabricate.findings(part, screening_key(part))
    return replace(found, verdict=verdict, headline=headline, reasons=(), fields=())


def shown_sheet(qtbot: QtBot, part: Part, tall: int = 900) -> Sheet:
    """The sheet of a part, on its own."""
    made = Sheet(Document(part))
    qtbot.addWidget(made)
    made.resize(540, tall)
    made.show()
    made.activateWindow()
    settle()
    return made


@dataclass
class FakeMesher:
    """Counts what is asked of it."""

    started: int = 0
    closed: int = 0

    def start(self) -> None:
        """Note it."""
        self.started += 1

    def close(self) -> None:
        """Note it."""
        self.closed += 1


@dataclass
class FakeScreen:
    """A screening that does what it is told; `wait` makes it stay until cancelled or released."""

    find: Callable[[Part], Findings] = made_up
    wait: bool = False
    deaf: bool = False
    error: Exception | None = None
    entered: threading.Event = field(default_factory=threading.Event)
    release: threading.Event = field(default_factory=threading.Event)
    parts: list[Part] = field(default_factory=list)

    def __call__(self, part: Part, mesher: Any, progress: Progress, on_pass: OnPass) -> Findings:
        """Report a step and a pass, then wait, fail or answer."""
        self.parts.append(part)
        progress.report(Step("meshing", 1, 0.25))
        self.entered.set()
        while self.wait and not self.release.wait(0.01):
            if not self.deaf:
                progress.check()
        if self.error is not None:
            raise self.error
        found = self.find(part)
        arrays = fabricate.fields(fabricate.structured(2, 2), max(1, len(part.cases)))
        on_pass(arrays, found.mesh.passes[0])
        return found


@dataclass
class Answers(Ask):
    """Answers in the user's place."""

    open: Path | None = None
    save: Path | None = None
    leave: Unsaved = "discard"
    folder: Path | None = None
    asked: list[str] = field(default_factory=list)

    def path_to_open(self, parent: QWidget, folder: Path) -> Path | None:
        """The file to open."""
        self.asked.append("open")
        return self.open

    def path_to_save(self, parent: QWidget, suggested: Path) -> Path | None:
        """Where to save."""
        self.asked.append(f"save {suggested.name}")
        return self.save

    def folder_for_record(self, parent: QWidget, suggested: Path) -> Path | None:
        """The folder of the record."""
        self.asked.append(f"record {suggested.name}")
        return self.folder

    def unsaved(self, parent: QWidget, title: str) -> Unsaved:
        """What to do with unsaved work."""
        self.asked.append("unsaved")
        return self.leave


def window(
    folder: Path, screen: FakeScreen | None = None, ask: Answers | None = None
) -> MainWindow:
    """A window of its own settings, shown at 1440 × 900."""
    made = MainWindow(
        screen or FakeScreen(), FakeMesher, Settings(folder / "window.ini"), ask or Answers()
    )
    made.resize(1440, 900)
    made.show()
    made.activateWindow()
    settle()
    return made


def settle() -> None:
    """Let everything that was queued happen."""
    for _ in range(3):
        QApplication.processEvents()


def type_into(field_: Field, text: str, key: Qt.Key | None = Qt.Key.Key_Return) -> None:
    """Click a value, type over it, and press a key (None: leave it as typed)."""
    QTest.mouseClick(field_, LEFT)
    editor = field_.editor
    assert editor is not None, "a click opens the value"
    QTest.keyClicks(editor, text)
    if key is not None:
        QTest.keyClick(editor, key)
    settle()


def pick(field_: Field, *lines: str) -> None:
    """Open a chooser by a click and pick a line by its text, through submenus if several."""
    QTest.mouseClick(field_, LEFT)
    menu = field_.menu
    assert menu is not None, "a click opens the chooser"
    settle()
    for number, line in enumerate(lines):
        action = next(a for a in menu.actions() if a.text().split("\t")[0] == line)
        last = number == len(lines) - 1
        menu.setActiveAction(action)
        if last:
            QTest.keyClick(menu, Qt.Key.Key_Return)
        else:
            QTest.keyClick(menu, Qt.Key.Key_Right)
            settle()
            menu = action.menu()
    settle()


def texts(widget: QWidget) -> list[str]:
    """Every sentence that a widget shows."""
    return [s.text for s in widget.findChildren(Sentence) if s.isVisibleTo(widget) and s.text]
