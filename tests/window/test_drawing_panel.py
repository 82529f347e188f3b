"""Drawings brought in and exported through the window, by real clicks and keys."""

from __future__ import annotations

import math
import threading
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import pytest
from PySide6.QtCore import QMimeData, QPoint, QPointF, Qt, QUrl
from PySide6.QtGui import QDragEnterEvent, QDropEvent, QGuiApplication
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QComboBox, QWidget
from pytestqt.qtbot import QtBot

from screenapp.model.edits import set_thickness
from screenapp.model.part import CircleHole
from screenapp.model.progress import Progress, Step
from screenapp.model.shape import shape_of
from screenapp.window import drawing_panel, theme
from screenapp.window.drawing_panel import DrawingPanel
from screenapp.window.main_window import MainWindow
from screenapp.window.sheet.sentence import Sentence
from tests.exchange.drawings import SILENT_UNIT, part_from, rectangle, write
from tests.window import fabricate, window_kit
from tests.window.window_kit import Answers, pick, settle, type_into

LEFT = Qt.MouseButton.LeftButton
SHIFT = Qt.KeyboardModifier.ShiftModifier


@dataclass
class DrawingAnswers(Answers):
    """Answers for the choosers of drawings too."""

    drawing: Path | None = None
    export: Path | None = None

    def drawing_to_open(self, parent: QWidget, folder: Path) -> Path | None:
        """The drawing to bring in."""
        self.asked.append("drawing")
        return self.drawing

    def drawing_to_save(self, parent: QWidget, suggested: Path) -> Path | None:
        """Where to write a drawing."""
        self.asked.append(f"export {suggested.name}")
        return self.export


@pytest.fixture
def ask() -> DrawingAnswers:
    """Answers of one test."""
    return DrawingAnswers()


@pytest.fixture
def main(qtbot: QtBot, tmp_path: Path, ask: DrawingAnswers) -> Iterator[MainWindow]:
    """A window with an empty part."""
    made = window_kit.window(tmp_path, ask=ask)
    yield made
    made.document.mark_saved(tmp_path / "part")
    made.close()


def plate(space: Any) -> None:
    """80 × 40 with a hole, a pad, an open chain and a bend line that is dashed."""
    space.doc.layers.add("BEND", linetype="DASHDOT")
    on = {"layer": "CUT"}
    space.add_line((0, 0), (79.96, 0), dxfattribs=on)
    space.add_line((80, 0), (80, 40), dxfattribs=on)
    space.add_line((80, 40), (0, 40), dxfattribs=on)
    space.add_line((0, 40), (0, 0), dxfattribs=on)
    space.add_circle((20, 20), 5, dxfattribs=on)
    space.add_circle((60, 20), 8, dxfattribs={"layer": "PADS"})
    space.add_line((30, 10), (40, 15), dxfattribs=on)
    space.add_line((40, 0), (40, 40), dxfattribs={"layer": "BEND"})


def opened(qtbot: QtBot, window: MainWindow, path: Path) -> DrawingPanel:
    """The panel once the drawing was read and made a part of."""
    window.files.open(path)
    panel = window.findChildren(DrawingPanel)[-1]
    wait(qtbot, panel)
    return panel


def wait(qtbot: QtBot, panel: DrawingPanel) -> None:
    """Until nothing is being worked on."""
    qtbot.waitUntil(lambda: not panel.jobs.busy, timeout=20_000)
    settle()


def said(panel: DrawingPanel) -> str:
    """All sentences of the report."""
    return "\n".join(row.text for row in panel.rows)


def row_with(panel: DrawingPanel, words: str) -> Sentence:
    """The sentence of the report that has some words in it."""
    return next(row for row in panel.rows if words in row.text)


def test_a_drawing_is_chosen_seen_and_brought_in_as_one_step(
    qtbot: QtBot, tmp_path: Path, main: MainWindow, ask: DrawingAnswers
) -> None:
    ask.drawing = write(tmp_path / "base_plate.dxf", plate, setup=True)
    main.document.apply("a thicker wall", set_thickness(main.document.part, 5.0))
    QTest.keyClick(main, Qt.Key.Key_B, Qt.KeyboardModifier.ControlModifier | SHIFT)
    assert ask.asked == ["drawing"]
    panel = main.findChildren(DrawingPanel)[-1]
    wait(qtbot, panel)
    assert panel.isVisible()
    assert not panel.isModal()
    assert panel.unit.text == "It is drawn in mm, as the file says."
    assert not panel.take.isEnabled()
    assert "The lines round the closed ones in base_plate.dxf are open at (" in said(panel)

    type_into(panel.tolerance.field("tolerance"), "0.05 mm")
    wait(qtbot, panel)
    assert panel.take.isEnabled(), said(panel)
    assert "1 gap of 0.04 mm was closed at (79.98, 0)." in said(panel)
    assert "The part has an outline of 4 edges and 2 round holes." in said(panel)

    role = panel.layers.role("PADS")
    role.setFocus()
    QTest.keyClick(role, Qt.Key.Key_Down)
    wait(qtbot, panel)
    assert "1 round hole and 1 zone." in said(panel)

    QTest.mouseClick(panel.take, LEFT)
    settle()
    part = main.document.part
    assert main.findChildren(DrawingPanel) == []
    assert part.title == "Base plate"
    assert part.wall.thickness == 5.0, "what was there stays"
    assert shape_of(part).area == pytest.approx(3200 - 25 * math.pi)
    assert len(part.zones) == 1
    assert main.document.history.undo_name == "bringing in base_plate.dxf"
    main.document.undo()
    assert main.document.part.outline is None
    assert main.document.part.wall.thickness == 5.0


def test_ticks_choose_layers_and_links_show_places(
    qtbot: QtBot, tmp_path: Path, main: MainWindow
) -> None:
    panel = opened(qtbot, main, write(tmp_path / "p.dxf", plate, setup=True))
    assert not panel.layers.tick("BEND").isChecked()
    assert panel.layers.tick("CUT").isChecked()
    whole = panel.preview.view_box.viewRect()
    row = row_with(panel, "is open at")
    link = row.field("show")
    QTest.mouseClick(link, LEFT)
    shown = panel.preview.marks.shown
    assert shown is not None
    near = panel.preview.view_box.viewRect()
    assert near.width() < 0.5 * whole.width()
    assert near.contains(QPointF(*shown))
    QTest.keyClick(link, Qt.Key.Key_Return)
    assert panel.preview.marks.shown not in (None, shown), "the other end"
    QTest.keyClick(panel.preview, Qt.Key.Key_Home)
    assert panel.preview.view_box.viewRect().width() == pytest.approx(whole.width())

    tick = panel.layers.tick("PADS")
    QTest.mouseClick(tick, LEFT, pos=QPoint(6, tick.height() // 2))
    wait(qtbot, panel)
    assert "“PADS” (1 line)" in said(panel)
    assert not panel.layers.role("PADS").isEnabled()


def test_the_unit_is_asked_for_when_the_file_is_silent(
    qtbot: QtBot, tmp_path: Path, main: MainWindow
) -> None:
    path = write(tmp_path / "s.dxf", lambda s: rectangle(s, 0, 0, 4, 2), unit=SILENT_UNIT)
    panel = opened(qtbot, main, path)
    assert panel.unit.text.startswith("The file does not say in which unit it is drawn")
    assert "The lines cover 4 × 2" in said(panel)
    assert not panel.take.isEnabled()
    pick(panel.unit.field("unit"), "in")
    wait(qtbot, panel)
    assert panel.take.isEnabled()
    QTest.keyClick(panel, Qt.Key.Key_Return)
    settle()
    assert shape_of(main.document.part).bounds == pytest.approx((0, 0, 101.6, 50.8))


def test_one_of_several_outlines_is_chosen(qtbot: QtBot, tmp_path: Path, main: MainWindow) -> None:
    def draw(space: Any) -> None:
        rectangle(space, 0, 0, 100, 50)
        rectangle(space, 200, 0, 230, 20)
        space.add_circle((215, 10), 4)

    panel = opened(qtbot, main, write(tmp_path / "two.dxf", draw))
    assert panel.outline.text == "It shows 2 outlines. The part is 100 × 50 mm, 0 holes."
    pick(panel.outline.field("outline"), "30 × 20 mm, 1 hole")
    wait(qtbot, panel)
    QTest.mouseClick(panel.take, LEFT)
    settle()
    (hole,) = main.document.part.holes
    assert isinstance(hole, CircleHole)
    assert hole.centre == pytest.approx((215, 10))


def test_on_a_part_that_is_drawn_it_begins_a_new_one(
    qtbot: QtBot, tmp_path: Path, main: MainWindow, ask: DrawingAnswers
) -> None:
    before = fabricate.plate()
    main.document.apply("drawing", before)
    path = write(tmp_path / "new.dxf", lambda s: rectangle(s, 0, 0, 40, 20))
    panel = opened(qtbot, main, path)
    ask.leave = "stay"
    QTest.mouseClick(panel.take, LEFT)
    settle()
    assert ask.asked == ["unsaved"]
    assert main.document.part == before
    assert panel.isVisible()
    ask.leave = "discard"
    QTest.mouseClick(panel.take, LEFT)
    settle()
    part = main.document.part
    assert shape_of(part).area == pytest.approx(800)
    assert part.supports == ()
    assert main.document.unsaved
    assert main.document.path is None
    main.document.undo()
    assert main.document.part.outline is None


def test_a_drawing_is_dropped_on_the_window(qtbot: QtBot, tmp_path: Path, main: MainWindow) -> None:
    path = write(tmp_path / "DROPPED.DXF", lambda s: rectangle(s, 0, 0, 40, 20))
    data = QMimeData()
    data.setUrls([QUrl.fromLocalFile(str(path))])
    copy, buttons, none = Qt.DropAction.CopyAction, LEFT, Qt.KeyboardModifier.NoModifier
    enter = QDragEnterEvent(QPoint(300, 300), copy, data, buttons, none)
    QGuiApplication.sendEvent(main, enter)
    assert enter.isAccepted()
    QGuiApplication.sendEvent(main, QDropEvent(QPointF(300, 300), copy, data, buttons, none))
    panel = main.findChildren(DrawingPanel)[-1]
    wait(qtbot, panel)
    assert panel.take.isEnabled()
    QTest.keyClick(panel, Qt.Key.Key_Escape)
    settle()
    assert main.findChildren(DrawingPanel) == []
    assert main.document.part.outline is None


def test_a_broken_file_is_told_in_the_panel(qtbot: QtBot, tmp_path: Path, main: MainWindow) -> None:
    path = tmp_path / "letter.dxf"
    path.write_text("Dear all,\n")
    panel = opened(qtbot, main, path)
    assert "letter.dxf is no DXF file" in said(panel)
    assert not panel.take.isEnabled()
    assert not panel.bar.isVisible()
    assert not panel.layers.isVisible()


def test_reading_shows_its_progress_and_is_cancelled(
    qtbot: QtBot, tmp_path: Path, main: MainWindow, monkeypatch: pytest.MonkeyPatch
) -> None:
    """A reading that lasts until it is asked to stop: the window works on meanwhile."""
    entered, left = threading.Event(), threading.Event()

    def slow(path: Path, progress: Progress) -> object:
        entered.set()
        try:
            while True:
                progress.report(Step("reading the drawing", 0, 0.4))
                progress.check()
                left.wait(0.005)
        finally:
            left.set()

    monkeypatch.setattr(drawing_panel, "read_apart", slow)
    main.files.open(tmp_path / "any.dxf")
    panel = main.findChildren(DrawingPanel)[-1]
    qtbot.waitUntil(lambda: panel.bar.isVisible() and panel.bar.value() == 400, timeout=5000)
    assert panel.stage.text() == "Reading the drawing"
    main.document.apply("drawing", fabricate.plate())
    QTest.mouseClick(panel.away, LEFT)
    qtbot.waitUntil(left.is_set, timeout=500)
    assert not main.drawing_jobs.busy
    assert entered.is_set()


def test_faults_of_the_shape_are_told_and_may_be_mended_on_the_board(
    qtbot: QtBot, tmp_path: Path, main: MainWindow
) -> None:
    def draw(space: Any) -> None:
        space.add_lwpolyline([(0, 0), (40, 30), (40, 0), (0, 20)], close=True)

    panel = opened(qtbot, main, write(tmp_path / "x.dxf", draw))
    assert "cross" in said(panel)
    assert panel.take.isEnabled()
    QTest.mouseClick(panel.take, LEFT)
    settle()
    assert any(f.blocks and "cross" in f.cause for f in main.document.faults)


def test_a_part_is_exported_and_comes_back(
    qtbot: QtBot, tmp_path: Path, main: MainWindow, ask: DrawingAnswers
) -> None:
    main.document.apply("drawing", fabricate.plate())
    ask.export = tmp_path / "out.dxf"
    QTest.keyClick(main, Qt.Key.Key_E, Qt.KeyboardModifier.ControlModifier | SHIFT)
    assert ask.asked[0].startswith("export ")
    assert ask.asked[0].endswith(".dxf")
    area = shape_of(main.document.part).area
    assert shape_of(part_from(ask.export)).area == pytest.approx(area, rel=1e-9)
    ask.export = tmp_path / "no folder" / "out.dxf"
    main.files.export_drawing()
    settle()
    assert "cannot be written" in "".join(window_kit.texts(main.sheet.head.notice))


def test_everything_is_reached_by_tab_and_has_a_name(
    qtbot: QtBot, tmp_path: Path, main: MainWindow
) -> None:
    panel = opened(qtbot, main, write(tmp_path / "p.dxf", plate, setup=True))
    panel.activateWindow()
    panel.preview.setFocus()
    met: list[QWidget] = []
    for _ in range(40):
        focus = panel.focusWidget()
        if focus is None or focus in met:
            break
        met.append(focus)
        QTest.keyClick(focus, Qt.Key.Key_Tab)
    names = [w.accessibleName() or getattr(w, "text", str)() for w in met]
    assert all(names), names
    assert "Unit of the drawing" in " ".join(names)
    assert "Use layer CUT" in names
    assert any(isinstance(w, QComboBox) for w in met)
    assert panel.away in met


@pytest.mark.parametrize("name", ["paper", "slate"])
def test_it_is_painted_in_both_themes(
    qtbot: QtBot, tmp_path: Path, main: MainWindow, name: theme.Choice
) -> None:
    had = theme.choice()
    theme.choose(name)
    try:
        panel = opened(qtbot, main, write(tmp_path / "p.dxf", plate, setup=True))
        picture = panel.preview.grab().toImage()
        ground = picture.pixelColor(3, 3).name()
        assert ground == theme.current().paper
    finally:
        theme.choose(had)


def test_lines_that_stay_open_are_ringed_on_the_board(
    qtbot: QtBot, tmp_path: Path, main: MainWindow
) -> None:
    panel = opened(qtbot, main, write(tmp_path / "open.dxf", plate))
    type_into(panel.tolerance.field("tolerance"), "0.05 mm")
    wait(qtbot, panel)
    QTest.mouseClick(panel.take, LEFT)
    settle()
    item = main.board.canvas.open_chains
    ends = {(round(x, 6), round(y, 6)) for x, y in item.ends}
    assert {(30.0, 10.0), (40.0, 15.0)} <= ends
    assert "stay open, ringed on the board" in main.said.text() or "stays open" in main.said.text()
    main.board.fit()
    settle()
    image = main.board.canvas.grab().toImage()
    px = main.board.canvas.frame_now.px((30.0, 10.0)).toPoint()
    ring = [image.pixelColor(px.x() + dx, px.y()) for dx in (-6, -5, -4, 4, 5, 6)]
    bad = theme.colour("bad")
    assert any(abs(c.red() - bad.red()) + abs(c.blue() - bad.blue()) < 60 for c in ring)
    main.board.canvas.setFocus()
    QTest.keyClick(main.board.canvas, Qt.Key.Key_L, Qt.KeyboardModifier.ShiftModifier)
    settle()
    assert not item.ends
    main.document.undo()
    assert main.document.part.outline is None
