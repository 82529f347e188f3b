"""The whole window: files, screening, menus, keys, what is kept and what is never lost."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from pathlib import Path

import pytest
from PySide6.QtCore import QMimeData, QPoint, QPointF, Qt, QUrl
from PySide6.QtGui import QDragEnterEvent, QDropEvent
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication, QLabel
from pytestqt.qtbot import QtBot

from screenapp.model import edits
from screenapp.model.errors import MeshingError
from screenapp.model.part import Part
from screenapp.model.part_json import read_part, write_part
from screenapp.window import samples, theme
from screenapp.window.main_window import MainWindow
from screenapp.window.samples import sample_paths
from screenapp.window.settings import Settings
from tests.window.fabricate import plate
from tests.window.window_kit import (
    Answers,
    FakeMesher,
    FakeScreen,
    made_up,
    settle,
    type_into,
    window,
)

CONTROL = Qt.KeyboardModifier.ControlModifier
ALT = Qt.KeyboardModifier.AltModifier


@pytest.fixture
def screen() -> FakeScreen:
    """What stands for the screening."""
    return FakeScreen()


@pytest.fixture
def ask() -> Answers:
    """What stands for the user."""
    return Answers()


@pytest.fixture
def main(tmp_path: Path, qtbot: QtBot, screen: FakeScreen, ask: Answers) -> Iterator[MainWindow]:
    """A window on an empty part."""
    made = window(tmp_path, screen, ask)
    yield made
    screen.release.set()
    ask.leave = "discard"
    made.close()
    made.deleteLater()
    settle()


@pytest.fixture
def file(tmp_path: Path) -> Path:
    """A part file; its title is of this test alone, so that no other test's findings are found."""
    path = tmp_path / "strip.part.json"
    write_part(plate(), path)
    return path


def unlike(part: Part, thickness: float) -> Part:
    """A part with a key of its own."""
    return replace(part, wall=replace(part.wall, thickness=thickness))


# --- files ----------------------------------------------------------------------------------


def test_a_file_is_opened_and_named(main: MainWindow, file: Path, ask: Answers) -> None:
    ask.open = file
    QTest.keyClick(main, Qt.Key.Key_O, CONTROL)
    assert main.document.part == plate()
    assert main.windowTitle().startswith("strip.part.json")
    assert not main.isWindowModified()
    assert main.settings.recent == (file.resolve(),)
    assert "saved" in main.sheet.head.brief.text()


def test_a_change_marks_the_title_and_saving_takes_the_mark_away(
    main: MainWindow, file: Path
) -> None:
    main.files.open(file)
    type_into(main.sheet.paragraph(2).wall.field("thickness"), "6")  # type: ignore[attr-defined]
    assert main.isWindowModified()
    assert "not saved" in main.sheet.head.brief.text()
    QTest.keyClick(main, Qt.Key.Key_S, CONTROL)
    assert not main.isWindowModified()
    assert read_part(file).wall.thickness == 6.0


def test_undo_goes_back_over_saving_and_every_step_has_a_name(main: MainWindow, file: Path) -> None:
    main.files.open(file)
    first = file.read_bytes()
    main.files.save()
    before = file.read_bytes()
    part = main.document.part
    steps = [
        ("round a corner", edits.set_round(part, "c1", 2.0)),
        ("notes", edits.set_notes(part, "x")),
        ("thickness of the wall", edits.set_thickness(part, 7.0)),
    ]
    for name, changed in steps:
        main.document.apply(name, changed)
        main.files.save()
        assert not main.document.unsaved
        assert main.actions_.by_name["undo"].isEnabled()
    for name, _ in reversed(steps):
        assert main.document.history.undo_name == name
        main.actions_.by_name["undo"].trigger()
    assert main.document.unsaved
    main.files.save()
    assert file.read_bytes() == before
    assert first


def test_a_new_part_asks_where_to_be_saved(main: MainWindow, tmp_path: Path, ask: Answers) -> None:
    ask.save = tmp_path / "new.part.json"
    main.document.apply("draw", replace(plate(), title="Clip, left"))
    QTest.keyClick(main, Qt.Key.Key_S, CONTROL)
    assert ask.asked == ["save clip-left.part.json"]
    assert read_part(ask.save).title == "Clip, left"
    assert main.document.path == ask.save


def test_a_file_that_cannot_be_read_leaves_the_part_and_says_every_line(
    main: MainWindow, file: Path, tmp_path: Path
) -> None:
    main.files.open(file)
    text = file.read_text(encoding="utf-8")
    broken = tmp_path / "broken.part.json"
    broken.write_text(
        text.replace('"thickness": 4', '"thickness": "four"').replace('"diameter": 20', '"d": 20'),
        encoding="utf-8",
    )
    assert not main.files.open(broken)
    assert main.document.part == plate()
    assert main.document.path == file
    notice = main.sheet.head.notice
    assert notice.isVisible()
    assert notice.headline.text == "broken.part.json was not opened"
    rows = [notice.faults.itemAt(i).widget().text for i in range(notice.faults.count())]  # type: ignore
    assert len(rows) >= 2
    assert all(row.startswith("Line ") for row in rows)
    QTest.mouseClick(notice.cross, Qt.MouseButton.LeftButton)
    assert not notice.isVisible()


@pytest.mark.parametrize("content", ["", "{", "[]", '{"format": "screenapp part", "version": 99}'])
def test_every_unreadable_file_is_told_not_raised(
    main: MainWindow, tmp_path: Path, content: str
) -> None:
    path = tmp_path / "odd.part.json"
    path.write_text(content, encoding="utf-8")
    assert not main.files.open(path)
    assert main.sheet.head.notice.isVisible()
    assert main.document.part == Part()
    assert not main.files.open(tmp_path / "nowhere.part.json")


def test_saving_where_nothing_can_be_written_is_told_and_nothing_is_lost(
    main: MainWindow, tmp_path: Path, ask: Answers
) -> None:
    main.document.apply("draw", plate())
    ask.save = tmp_path / "no folder" / "x.part.json"
    assert not main.files.save()
    assert main.sheet.head.notice.headline.text == "The part was not saved"
    assert main.document.unsaved
    assert main.document.part == plate()


@pytest.mark.parametrize(("answer", "leaves"), [("discard", True), ("stay", False)])
def test_unsaved_work_is_asked_about(
    main: MainWindow, file: Path, ask: Answers, answer: str, leaves: bool
) -> None:
    main.document.apply("draw", unlike(plate(), 7.0))
    ask.leave = answer  # type: ignore[assignment]
    assert main.files.open(file) is leaves
    assert ask.asked == ["unsaved"]
    assert main.document.part.wall.thickness == (4.0 if leaves else 7.0)


def test_answering_save_saves_first(main: MainWindow, file: Path, ask: Answers) -> None:
    main.files.open(file)
    main.document.apply("thicker", unlike(plate(), 9.0))
    ask.leave = "save"
    QTest.keyClick(main, Qt.Key.Key_N, CONTROL)
    assert read_part(file).wall.thickness == 9.0
    assert main.document.part == Part()
    assert main.document.path is None


def test_the_window_stays_open_if_the_user_stays(main: MainWindow, ask: Answers) -> None:
    main.document.apply("draw", plate())
    ask.leave = "stay"
    main.close()
    assert main.isVisible()


def test_a_dropped_file_is_opened(main: MainWindow, file: Path) -> None:
    data = QMimeData()
    data.setUrls([QUrl.fromLocalFile(str(file))])
    how = (Qt.DropAction.CopyAction, data, Qt.MouseButton.LeftButton, CONTROL)
    over = QDragEnterEvent(QPoint(200, 200), *how)
    QApplication.sendEvent(main, over)
    assert over.isAccepted()
    QApplication.sendEvent(main, QDropEvent(QPointF(200, 200), *how))
    assert main.document.part == plate()


def test_a_sample_is_opened_as_a_new_part(main: MainWindow, file: Path, ask: Answers) -> None:
    main.board.sample_wanted.emit(file)
    assert main.document.part == plate()
    assert main.document.path is None
    assert main.settings.recent == ()


def test_every_sample_is_in_the_menu_and_opens(main: MainWindow) -> None:
    menu = main.actions_.samples
    menu.aboutToShow.emit()
    paths = sample_paths()
    assert len(menu.actions()) == len(paths) == 8
    for place, path in enumerate(paths):
        menu.aboutToShow.emit()
        action = menu.actions()[place]
        sample = read_part(path)
        assert action.text() == f"&{place + 1}  {sample.title}"
        assert action.toolTip().split() == sample.notes.split()
        action.trigger()
        assert main.document.part == sample
        assert main.document.path is None


def test_a_broken_sample_is_left_out_of_the_menu(
    main: MainWindow, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    (tmp_path / "broken.part.json").write_text("{", encoding="utf-8")
    monkeypatch.setattr(samples, "sample_paths", lambda: [tmp_path / "broken.part.json"])
    main.actions_.samples.aboutToShow.emit()
    (only,) = main.actions_.samples.actions()
    assert only.text() == "None found"
    assert not only.isEnabled()


def test_recent_files_are_listed_and_opened(main: MainWindow, file: Path) -> None:
    main.files.open(file)
    main.files.new()
    menu = main.actions_.recent
    menu.aboutToShow.emit()
    first = menu.actions()[0]
    assert file.name in first.text()
    first.trigger()
    assert main.document.path == file


# --- screening ------------------------------------------------------------------------------


def test_the_button_screens_and_the_verdict_stands_in_the_head(
    main: MainWindow, qtbot: QtBot, screen: FakeScreen
) -> None:
    main.document.open(unlike(plate(), 4.1), None)
    with qtbot.waitSignal(main.screener.finished):
        QTest.mouseClick(main.sheet.foot.button, Qt.MouseButton.LeftButton)
    assert screen.parts == [main.document.part]
    assert main.document.current
    assert main.sheet.head.verdict.headline.text == "Holds, 1.04 in hand"
    assert main.document.view.lens == "Utilisation"
    assert not main.sheet.foot.running


def test_progress_and_cancel(main: MainWindow, qtbot: QtBot, screen: FakeScreen) -> None:
    screen.wait = True
    main.document.open(unlike(plate(), 4.2), None)
    before = main.document.part
    QTest.keyClick(main, Qt.Key.Key_Return, CONTROL)
    foot = main.sheet.foot
    qtbot.waitUntil(lambda: foot.bar.value() == 250)
    assert foot.text.text() == "Pass 1: meshing"
    assert foot.stop.isVisible()
    assert main.sheet.head.verdict.headline.text == "Being screened"
    assert main.actions_.by_name["cancel"].isEnabled()
    with qtbot.waitSignal(main.screener.cancelled):
        QTest.mouseClick(foot.stop, Qt.MouseButton.LeftButton)
    assert not foot.stop.isVisible()
    assert foot.text.text() == "cancelled"
    assert main.document.part is before
    assert main.document.findings is None


def test_findings_of_a_part_that_changed_meanwhile_are_out_of_date(
    main: MainWindow, qtbot: QtBot, screen: FakeScreen
) -> None:
    screen.wait = True
    main.document.open(unlike(plate(), 4.3), None)
    main.screen_part()
    assert screen.entered.wait(5.0)
    main.document.apply("thicker", unlike(plate(), 5.3))
    with qtbot.waitSignal(main.screener.finished):
        screen.release.set()
    assert main.document.findings is not None
    assert not main.document.current
    assert main.sheet.head.verdict.standing == "out of date"


def test_a_failure_is_told_and_the_part_unharmed(
    main: MainWindow, qtbot: QtBot, screen: FakeScreen
) -> None:
    screen.error = MeshingError("the meshing process ended", "screen the part again")
    main.document.open(unlike(plate(), 4.4), None)
    before = main.document.part
    with qtbot.waitSignal(main.screener.failed):
        main.screen_part()
    notice = main.sheet.head.notice
    assert notice.isVisible()
    assert "The meshing process ended." in notice.detail.text
    assert main.document.part is before
    assert main.sheet.foot.button.isEnabled()


def test_findings_come_back_when_the_part_is_opened_again(
    main: MainWindow, qtbot: QtBot, tmp_path: Path
) -> None:
    path = tmp_path / "again.part.json"
    write_part(unlike(plate(), 4.5), path)
    main.files.open(path)
    assert main.document.findings is None
    with qtbot.waitSignal(main.screener.finished):
        main.screen_part()
    main.files.new()
    assert main.document.findings is None
    main.files.open(path)
    assert main.document.current
    assert main.sheet.head.verdict.headline.text == "Holds, 1.04 in hand"


def test_a_part_that_cannot_be_screened_is_not(main: MainWindow, screen: FakeScreen) -> None:
    main.document.open(replace(plate(), supports=()), None)
    main.screen_part()
    assert screen.parts == []
    assert "nothing holds the part" in main.said.text()


def test_what_is_still_being_typed_counts(
    main: MainWindow, qtbot: QtBot, screen: FakeScreen
) -> None:
    main.document.open(plate(), None)
    settle()
    type_into(main.sheet.paragraph(2).wall.field("thickness"), "11", None)  # type: ignore
    with qtbot.waitSignal(main.screener.finished):
        QTest.keyClick(main.focusWidget(), Qt.Key.Key_Return, CONTROL)
    assert screen.parts[0].wall.thickness == 11.0


def test_what_is_still_being_typed_is_saved(main: MainWindow, file: Path) -> None:
    main.files.open(file)
    settle()
    type_into(main.sheet.paragraph(2).wall.field("thickness"), "13", None)  # type: ignore
    QTest.keyClick(main.focusWidget(), Qt.Key.Key_S, CONTROL)
    assert read_part(file).wall.thickness == 13.0
    title = main.sheet.head.title
    title.setFocus()
    title.selectAll()
    QTest.keyClicks(title, "Strip, second issue")
    QTest.keyClick(title, Qt.Key.Key_S, CONTROL)
    assert read_part(file).title == "Strip, second issue"


# --- keys, menus, memory --------------------------------------------------------------------


def test_undo_and_redo_are_named(main: MainWindow) -> None:
    main.document.open(plate(), None)
    main.document.apply("thickness of the wall", unlike(plate(), 5.0))
    undo, redo = main.actions_.by_name["undo"], main.actions_.by_name["redo"]
    assert undo.text() == "&Undo thickness of the wall"
    QTest.keyClick(main, Qt.Key.Key_Z, CONTROL)
    assert main.document.part.wall.thickness == 4.0
    assert not undo.isEnabled()
    assert redo.text() == "&Redo thickness of the wall"
    QTest.keyClick(main, Qt.Key.Key_Y, CONTROL)
    assert main.document.part.wall.thickness == 5.0


def test_delete_removes_what_is_selected(main: MainWindow) -> None:
    main.document.open(plate(), None)
    main.go_to_board()
    main.document.select("h1")
    QTest.keyClick(main.focusWidget(), Qt.Key.Key_Delete)
    assert main.document.part.holes == ()
    main.document.select("e1")
    main.delete()  # an edge goes with its corners only
    assert "edge e1" in main.said.text()


def test_lenses_by_menu_and_key(main: MainWindow) -> None:
    main.document.open(plate(), None)
    main.actions_.by_name["lens Stress"].trigger()
    assert main.document.view.lens == "Stress"
    QTest.keyClick(main, Qt.Key.Key_6, ALT)
    assert main.document.view.lens == "Trust"
    assert main.actions_.by_name["lens Trust"].isChecked()


def test_no_two_keys_are_the_same(main: MainWindow) -> None:
    keys = [k.toString() for a in main.actions_.by_name.values() for k in a.shortcuts()]
    assert len(keys) == len(set(keys))


def test_the_keyboard_goes_to_board_sheet_and_readings(main: MainWindow) -> None:
    main.document.open(replace(plate(), supports=()), None)
    settle()
    QTest.keyClick(main, Qt.Key.Key_T, CONTROL)
    focus = main.focusWidget()
    assert main.sheet.paragraph(3).isAncestorOf(focus), "the first open paragraph"
    QTest.keyClick(focus, Qt.Key.Key_R, CONTROL)
    assert main.focusWidget() is main.readings.table
    assert main.document.selection == ("p1",)
    QTest.keyClick(main.focusWidget(), Qt.Key.Key_B, CONTROL)
    assert main.focusWidget() is main.board.canvas


def test_the_cautions_are_told(main: MainWindow) -> None:
    main.show_about()
    words = {label.text() for label in main._panels["about"].findChildren(QLabel)}
    assert any(word.startswith("A screening, not an approval") for word in words)


def test_theme_geometry_and_columns_are_kept(tmp_path: Path, qtbot: QtBot) -> None:
    first = window(tmp_path)
    first.choose_theme("slate")
    first.resize(1300, 760)
    first.whole.setSizes([800, 499])
    first.left.setSizes([500, 230])
    settle()
    sheet = first.sheet.width()
    share = first.board.height() / first.left.height()
    first.close()
    second = MainWindow(FakeScreen(), FakeMesher, Settings(tmp_path / "window.ini"), Answers())
    second.show()
    settle()
    assert second.settings.theme == "slate"
    assert second.height() == 760
    second.resize(1300, 760)  # the screen of the tests is too narrow for the width to come back
    settle()
    assert second.board.height() / second.left.height() == pytest.approx(share, abs=0.02)
    assert sheet == pytest.approx(499, abs=2)
    second.close()
    theme.choose("system")


def test_lens_dimensions_and_units_are_kept(tmp_path: Path, qtbot: QtBot) -> None:
    first = window(tmp_path)
    first.document.look(lens="Stress")
    first.board.show_dimensions("all")
    QTest.keyClick(first, Qt.Key.Key_U, CONTROL)
    first.close()
    second = window(tmp_path)
    qtbot.addWidget(second)
    assert second.document.view.lens == "Stress"
    assert second.board.canvas.dimensions.shown == "all"
    assert second.document.part.display_units == "in-lbf-ksi"
    second.document.open(plate(), None)  # a part of other units is shown in its own
    assert second.document.part.display_units == "mm-N-MPa"
    second.files.new()
    assert second.document.part.display_units == "in-lbf-ksi"


@pytest.mark.parametrize("size", [(1280, 720), (1920, 1080)])
def test_board_and_sheet_share_the_width(main: MainWindow, size: tuple[int, int]) -> None:
    main.resize(*size)
    main._share_out()
    settle()
    assert main.width() == size[0]
    share = main.left.width() / main.width()
    assert share == pytest.approx(0.62, abs=0.02)
    button = main.sheet.foot.button
    corner = button.mapTo(main, QPoint(0, button.height()))
    assert corner.y() <= main.height()


def test_closing_stops_the_thread(tmp_path: Path, qtbot: QtBot) -> None:
    screen = FakeScreen(wait=True)
    made = window(tmp_path, screen)
    made.document.open(plate(), None)
    made.screen_part()
    assert screen.entered.wait(5.0)
    made.close()
    assert not made.screener._thread.isRunning()


def test_a_new_probe_is_read_at_once(main: MainWindow, monkeypatch: pytest.MonkeyPatch) -> None:
    from screenapp.window import main_window
    from tests.window.fabricate import findings

    read: list[int] = []

    def renewed(part: Part, found: object) -> object:
        read.append(len(part.readings))
        return found

    monkeypatch.setattr(main_window, "with_readings", renewed)
    part = plate()
    main.document.open(part, None)
    main.document.set_findings(findings(part, main.document.key))
    probe = replace(part.readings[0], id="p2", at=(30.0, 5.0))
    main.document.apply("probe", replace(part, readings=(*part.readings, probe)))
    main.document.apply("title", replace(main.document.part, title="x"))
    assert read == [2], "read once, for the probe, not for the title"


def test_made_up_findings_are_current() -> None:
    part = plate()
    assert made_up(part).key
