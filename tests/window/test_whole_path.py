"""The whole path with real mouse and key events: draw, hold, load, screen, read, save, reopen.

Nothing here calls the document but to see what came of the clicks and keys.
"""

from __future__ import annotations

import os
import signal
from collections.abc import Iterator
from pathlib import Path

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QPushButton
from pytestqt.qtbot import QtBot

from screenapp.meshing.service import Mesher
from screenapp.model.findings import Reading
from screenapp.model.part import (
    CircleHole,
    FixedSupport,
    ForceLoad,
    RollerSupport,
    StressLimit,
)
from screenapp.screening.screen import screen
from screenapp.window.jobs import ScreenFunction
from screenapp.window.main_window import MainWindow
from screenapp.window.settings import Settings
from tests.window import slow_mesher
from tests.window.board_kit import Hand
from tests.window.window_kit import Answers, FakeScreen, pick, settle, type_into

CONTROL = Qt.KeyboardModifier.ControlModifier
LEFT = Qt.MouseButton.LeftButton

LENGTH, WIDTH, DIAMETER, THICKNESS = 200.0, 100.0, 20.0, 4.0
FORCE = 40_000.0

HOWLAND = 3.14
"""Largest stress over the gross stress of a strip with a central hole of a fifth of its width
(Howland 1930, Phil. Trans. A 229; from memory)."""

TOLERANCE = 0.02
"""What the part asks for, and so what a settled number promises."""

CANCEL_MS = 500
"""Within so long the window promises to be free again."""


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

    def way(self, label: str) -> None:
        """Click a way of holding or loading in the popover."""
        buttons = self.canvas.placing.popover.findChildren(QPushButton)
        button = next(b for b in buttons if b.text() == label and b.isVisible())
        QTest.mouseClick(button, LEFT)
        settle()


class Windows:
    """Opens windows that share settings, cache and the file they save to."""

    def __init__(self, folder: Path) -> None:
        path = folder / "plate.part.json"
        self.answers = Answers(open=path, save=path)
        self.meshers: list[Mesher] = []
        self._settings = folder / "window.ini"
        self._open: list[MainWindow] = []

    def new(self, screening: ScreenFunction = screen) -> MainWindow:
        """A window with the true mesher and, unless told otherwise, the true screening."""
        made = MainWindow(screening, self._mesher, Settings(self._settings), self.answers)
        made.resize(1440, 900)
        made.show()
        made.activateWindow()
        settle()
        self._open.append(made)
        return made

    def close(self, window: MainWindow) -> None:
        """Close one for good."""
        self._open.remove(window)
        window.close()
        window.deleteLater()
        settle()

    def close_all(self) -> None:
        """Close what is still open."""
        self.answers.leave = "discard"
        for window in list(self._open):
            self.close(window)

    def _mesher(self) -> Mesher:
        self.meshers.append(Mesher(work=slow_mesher.WORK))
        return self.meshers[-1]


@pytest.fixture
def sign(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """The mesher hangs while this file is there; at first it is not."""
    path = tmp_path / "hang"
    monkeypatch.setenv(slow_mesher.VARIABLE, str(path))
    return path


@pytest.fixture
def windows(
    tmp_path: Path, sign: Path, monkeypatch: pytest.MonkeyPatch, qtbot: QtBot
) -> Iterator[Windows]:
    """Windows with a cache of their own."""
    monkeypatch.setenv("SCREENAPP_CACHE", str(tmp_path / "cache"))
    made = Windows(tmp_path)
    yield made
    made.close_all()


def test_a_plate_with_a_hole_from_nothing_to_its_reading_and_back(
    windows: Windows, qtbot: QtBot
) -> None:
    first = windows.new()
    draw(first)
    say_what_it_is_made_of(first)
    hold(first)
    load(first)
    limit(first)
    screen_it(first, qtbot)
    reading = probe_the_rim(first)
    line = first.readings.table.figures.lines[0].texts
    QTest.keyClick(first, Qt.Key.Key_S, CONTROL)
    assert not first.document.unsaved
    verdict = first.document.findings.verdict if first.document.findings else ""
    windows.close(first)

    never = FakeScreen()
    second = windows.new(never)
    QTest.keyClick(second, Qt.Key.Key_O, CONTROL)
    settle()
    findings = second.document.findings
    assert findings is not None
    assert second.document.current
    assert findings.readings[0] == reading
    assert findings.verdict == verdict
    assert second.readings.table.figures.lines[0].texts == line
    assert never.parts == [], "kept findings are shown without screening"
    assert windows.answers.asked == ["save untitled-part.part.json", "open"]


def test_an_edited_corner_puts_the_findings_out_of_date_until_it_is_undone(
    windows: Windows, qtbot: QtBot
) -> None:
    main = windows.new()
    draw_all(main)
    screen_it(main, qtbot)
    probe_the_rim(main)
    sheet, table = main.sheet, main.readings.table.figures
    assert not table.faded

    hand = WindowHand(main)
    hand.take("S")
    hand.drag((LENGTH, WIDTH), (LENGTH - 20.0, WIDTH - 10.0))
    settle()
    assert main.document.part.outline is not None
    assert main.document.part.outline.corners[2].at != (LENGTH, WIDTH)
    assert not main.document.current
    assert main.document.findings is not None, "what was found is still shown, as old"
    assert sheet.head.verdict.standing == "out of date"
    assert "Out of date" in sheet.head.verdict.headline.text
    assert {sheet.paragraph(n).state for n in (6, 7, 8)} == {"out of date"}
    assert sheet.foot.text.text() == "out of date"
    assert table.faded

    QTest.keyClick(main, Qt.Key.Key_Z, CONTROL)
    settle()
    assert main.document.current
    assert sheet.head.verdict.standing != "out of date"
    assert not table.faded


def test_a_running_screening_is_cancelled_within_half_a_second(
    windows: Windows, qtbot: QtBot, sign: Path
) -> None:
    main = windows.new()
    draw_all(main)
    part = main.document.part
    process = hang(main, windows, qtbot, sign)
    assert main.sheet.foot.stop.isVisible()
    with qtbot.waitSignal(main.screener.cancelled, timeout=CANCEL_MS):
        QTest.mouseClick(main.sheet.foot.stop, LEFT)
    settle()
    assert not main.screener.busy
    assert main.document.findings is None
    assert main.document.part is part
    assert main.sheet.foot.text.text() == "cancelled"
    assert not main.sheet.head.notice.isVisible(), "the user's own wish is no error"
    qtbot.waitUntil(lambda: windows.meshers[0].process_id != process, timeout=10_000)
    sign.unlink()
    screen_it(main, qtbot)


def test_a_killed_mesher_is_told_and_the_part_can_be_screened_again(
    windows: Windows, qtbot: QtBot, sign: Path
) -> None:
    main = windows.new()
    draw_all(main)
    part = main.document.part
    process = hang(main, windows, qtbot, sign)
    with qtbot.waitSignal(main.screener.failed, timeout=10_000):
        os.kill(process, signal.SIGTERM)
    settle()
    notice = main.sheet.head.notice
    assert notice.isVisible()
    assert "the part is unharmed" in notice.headline.text
    assert "meshing process ended unexpectedly" in notice.detail.text
    assert "try again" in notice.detail.text
    assert main.document.part is part
    assert main.document.findings is None
    assert main.sheet.foot.button.isEnabled()
    sign.unlink()
    screen_it(main, qtbot)
    assert not notice.isVisible()
    assert windows.meshers[0].process_id != process


# --- what the user does -------------------------------------------------------------------------


def draw_all(main: MainWindow) -> None:
    """Everything that a screening needs."""
    draw(main)
    say_what_it_is_made_of(main)
    hold(main)
    load(main)
    limit(main)


def draw(main: MainWindow) -> None:
    """A rectangle by typed places and sizes, a hole by its place and diameter."""
    hand = WindowHand(main)
    hand.take("R")
    hand.go(50.0, 50.0)
    for first, second in (("0", "0"), (f"{LENGTH:g} mm", f"{WIDTH:g}")):
        hand.type(first)
        hand.tab()
        hand.type(second)
        hand.enter()
    hand.key(Qt.Key.Key_Home)
    hand.take("C")
    hand.click(LENGTH / 2.0, WIDTH / 2.0)
    hand.type(f"{DIAMETER:g} mm")
    hand.enter()
    assert main.document.part.outline is not None
    assert main.document.part.outline.corners[2].at == (LENGTH, WIDTH)
    assert main.document.part.holes == (CircleHole("h1", (100.0, 50.0), DIAMETER),)


def say_what_it_is_made_of(main: MainWindow) -> None:
    """Thickness and material, in the sheet's second paragraph."""
    wall = main.sheet.paragraph(2)
    type_into(wall.wall.field("thickness"), f"{THICKNESS:g}")  # type: ignore[attr-defined]
    pick(wall.missing.field("choose"), "Steel grades", "S355J2 plate")
    assert main.document.part.wall.thickness == THICKNESS
    assert main.document.part.wall.material == "S355J2 plate"


def hold(main: MainWindow) -> None:
    """A roller on the left edge lets it contract; its lower corner keeps it from sliding."""
    hand = WindowHand(main)
    hand.take("H")
    hand.click(0.0, 30.0)
    hand.way("Roller")
    hand.enter()
    hand.click(0.0, 0.0)
    hand.enter()
    assert main.document.part.supports == (RollerSupport("s1", "e4"), FixedSupport("s2", "c1"))


def load(main: MainWindow) -> None:
    """The right edge is pulled along x."""
    hand = WindowHand(main)
    hand.take("W")
    hand.click(LENGTH, 30.0)
    hand.type(f"{FORCE / 1000:g} kN")
    hand.tab()
    hand.type("0")
    hand.enter()
    assert main.document.part.cases[0].loads == (ForceLoad("l1", "e2", FORCE, 0.0),)


def limit(main: MainWindow) -> None:
    """The link in the fifth paragraph sets a stress limit; then nothing is open."""
    QTest.mouseClick(main.sheet.paragraph(5).missing.field("stress"), LEFT)
    settle()
    assert isinstance(main.document.part.limits[0], StressLimit)
    assert [p.state for p in main.sheet.paragraphs[:6]] == ["set"] * 6
    assert main.document.part.mesh.tolerance == TOLERANCE


def screen_it(main: MainWindow, qtbot: QtBot) -> None:
    """Press the key; every pass is painted before the findings stand in the sheet."""
    passes: list[int] = []
    note = main.screener.pass_done.connect(lambda _, summary: passes.append(summary.elements))
    with qtbot.waitSignal(main.screener.idle, timeout=120_000):
        QTest.keyClick(main, Qt.Key.Key_Return, CONTROL)
        assert main.sheet.foot.running
    main.screener.pass_done.disconnect(note)
    settle()
    findings = main.document.findings
    assert findings is not None
    assert main.document.current
    assert len(passes) == len(findings.mesh.passes) >= 3
    assert main.sheet.paragraph(7).state == "set"
    assert findings.verdict in ("holds", "does not hold"), findings.reasons
    assert {limit.case for limit in findings.limits} == {main.document.part.cases[0].id}


def probe_the_rim(main: MainWindow) -> Reading:
    """Click the crown of the hole, where the pull is turned aside, and compare what is read."""
    hand = WindowHand(main)
    hand.take("P")
    hand.click(LENGTH / 2.0, WIDTH / 2.0 + DIAMETER / 2.0)
    settle()
    assert main.document.findings is not None
    (reading,) = main.document.findings.readings
    assert reading.at == pytest.approx((100.0, 60.0), abs=0.5)
    gross = FORCE / (WIDTH * THICKNESS)
    read = reading.values["sigma_x"]
    assert read.trust == "settled"
    assert read.value / gross == pytest.approx(HOWLAND, rel=TOLERANCE)
    assert read.low <= read.value <= read.high
    assert read.high - read.low <= 2.0 * TOLERANCE * read.value
    assert abs(reading.values["sigma_y"].value) < TOLERANCE * read.value, "the rim is free"
    assert "±" in main.readings.table.figures.lines[0].texts[3]
    return reading


def hang(main: MainWindow, windows: Windows, qtbot: QtBot, sign: Path) -> int:
    """Begin a screening whose mesher hangs; the id of its process."""
    sign.touch()
    QTest.mouseClick(main.sheet.foot.button, LEFT)
    qtbot.waitUntil(lambda: sign.read_text(encoding="utf-8") == "hanging", timeout=30_000)
    assert main.screener.busy
    process = windows.meshers[0].process_id
    assert process is not None
    return process
