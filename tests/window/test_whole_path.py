"""The whole path with real mouse and key events: draw, hold, load, screen, read, save, reopen."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from screenapp.meshing.service import Mesher
from screenapp.model.part import CircleHole, FixedSupport, ForceLoad
from screenapp.screening.screen import screen
from screenapp.window.main_window import MainWindow
from screenapp.window.settings import Settings
from tests.window.board_kit import Hand
from tests.window.window_kit import Answers, pick, settle, type_into

CONTROL = Qt.KeyboardModifier.ControlModifier

WIDTH, DIAMETER, THICKNESS, FORCE = 40.0, 8.0, 2.0, 4000.0

HOWLAND = 3.14
"""Largest stress over the gross stress of a strip with a hole of a fifth of its width
(Howland 1930, Phil. Trans. A 229; from memory)."""


class WindowHand(Hand):
    """A hand on the board of a whole window."""

    def __init__(self, window: MainWindow) -> None:
        self.document = window.document
        self.board = window.board
        self.canvas = window.board.canvas
        self._window = window
        self.said: list[str] = []
        self.document.said.connect(self.said.append)

    def take(self, letter: str) -> None:
        """Go to the board and take a tool, by keys."""
        QTest.keyClick(self._window, Qt.Key.Key_B, CONTROL)
        self.type(letter)


@pytest.fixture
def answers(tmp_path: Path) -> Answers:
    """The user opens and saves one file."""
    path = tmp_path / "strip.part.json"
    return Answers(open=path, save=path)


@pytest.fixture
def main(tmp_path: Path, qtbot: QtBot, answers: Answers) -> Iterator[MainWindow]:
    """A window with the true screening."""
    made = MainWindow(screen, Mesher, Settings(tmp_path / "window.ini"), answers)
    made.resize(1440, 900)
    made.show()
    made.activateWindow()
    settle()
    yield made
    answers.leave = "discard"
    made.close()
    made.deleteLater()
    settle()


def test_a_strip_with_a_hole_from_nothing_to_its_reading_and_back(
    main: MainWindow, qtbot: QtBot, answers: Answers
) -> None:
    draw_hold_and_load(main)
    screen_it(main, qtbot)
    line = probe_the_hole(main)
    save_and_reopen(main)
    assert main.readings.table.figures.lines[0].texts == line
    assert main.document.current
    assert answers.asked == ["save untitled-part.part.json", "open"]


def draw_hold_and_load(main: MainWindow) -> None:
    """Board for the shape, support and load; sheet for wall, material and limit."""
    hand = WindowHand(main)
    hand.take("R")
    hand.click(0.0, 0.0)
    hand.click(160.0, WIDTH)
    hand.take("C")
    hand.click(80.0, WIDTH / 2.0)
    hand.type(f"{DIAMETER:g} mm")
    hand.enter()
    hand.take("H")
    hand.click(0.0, 12.0)
    hand.enter()
    hand.take("W")
    hand.click(160.0, 12.0)
    hand.type("4 kN")
    hand.tab()
    hand.type("0")
    hand.enter()
    settle()
    wall, limits = main.sheet.paragraph(2), main.sheet.paragraph(5)
    type_into(wall.wall.field("thickness"), f"{THICKNESS:g}")  # type: ignore[attr-defined]
    pick(wall.missing.field("choose"), "S355J2 plate")
    QTest.mouseClick(limits.missing.field("stress"), Qt.MouseButton.LeftButton)
    settle()
    part = main.document.part
    assert part.holes == (CircleHole("h1", (80.0, 20.0), DIAMETER),)
    assert part.supports == (FixedSupport("s1", "e4"),)
    assert part.cases[0].loads == (ForceLoad("l1", "e2", FORCE, 0.0),)
    assert [p.state for p in main.sheet.paragraphs[:6]] == ["set"] * 6


def screen_it(main: MainWindow, qtbot: QtBot) -> None:
    """Press the key; every pass is painted before the findings stand in the sheet."""
    passes: list[int] = []
    main.screener.pass_done.connect(lambda _fields, summary: passes.append(summary.elements))
    with qtbot.waitSignal(main.screener.idle, timeout=120_000):
        QTest.keyClick(main, Qt.Key.Key_Return, CONTROL)
        assert main.sheet.foot.running
    settle()
    findings = main.document.findings
    assert findings is not None
    assert main.document.current
    assert len(passes) == len(findings.mesh.passes) >= 3
    assert main.sheet.paragraph(7).state == "set"


def probe_the_hole(main: MainWindow) -> tuple[str, ...]:
    """Put a probe at the crown of the hole by its exact place and compare what is read."""
    hand = WindowHand(main)
    hand.take("P")
    hand.go(100.0, 10.0)
    hand.type("80")
    hand.tab()
    hand.type(f"{WIDTH / 2 + DIAMETER / 2:g}")
    hand.enter()
    settle()
    assert main.document.findings is not None
    reading = main.document.findings.readings[0]
    assert reading.at == (80.0, 24.0)
    gross = FORCE / (WIDTH * THICKNESS)
    read = reading.values["von_mises"]
    assert read.trust == "settled"
    assert read.value / gross == pytest.approx(HOWLAND, rel=0.01)
    assert read.low <= read.value <= read.high
    line = main.readings.table.figures.lines[0].texts
    assert "±" in line[3]
    return line


def save_and_reopen(main: MainWindow) -> None:
    """Save, show a new part, open the file again, all by keys."""
    QTest.keyClick(main, Qt.Key.Key_S, CONTROL)
    assert not main.document.unsaved
    QTest.keyClick(main, Qt.Key.Key_N, CONTROL)
    assert main.document.findings is None
    assert main.readings.empty.isVisible()
    QTest.keyClick(main, Qt.Key.Key_O, CONTROL)
    QApplication.processEvents()
