"""The record from the window: asked for by key, written in a thread, refused while untrue."""

from __future__ import annotations

import json
import threading
from collections.abc import Iterator
from dataclasses import replace
from pathlib import Path

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from screenapp.meshing.service import Mesher
from screenapp.model.findings import Findings
from screenapp.model.part import Part
from screenapp.model.part_json import part_sha256, read_part, write_part
from screenapp.model.progress import Progress
from screenapp.report import record
from screenapp.screening.screen import screen as screen_part
from screenapp.window.main_window import MainWindow
from tests.window.window_kit import Answers, FakeScreen, settle, window

SAMPLE = Path(__file__).parents[2] / "samples" / "hose-clip.part.json"
CONTROL = Qt.KeyboardModifier.ControlModifier
KEYS = CONTROL | Qt.KeyboardModifier.ShiftModifier


@pytest.fixture(scope="module")
def screened() -> tuple[Part, Findings]:
    part = read_part(SAMPLE)
    with Mesher() as mesher:
        return part, screen_part(part, mesher, fast=True)


@pytest.fixture
def ask(tmp_path: Path) -> Answers:
    return Answers(folder=tmp_path / "out")


@pytest.fixture
def main(
    tmp_path: Path, qtbot: QtBot, ask: Answers, screened: tuple[Part, Findings]
) -> Iterator[MainWindow]:
    """A window on a saved part with its findings."""
    part, findings = screened
    path = tmp_path / "clip.part.json"
    write_part(part, path)
    made = window(tmp_path, FakeScreen(), ask)
    made.files.open(path)
    made.document.set_findings(findings)
    settle()
    yield made
    ask.leave = "discard"
    made.close()
    made.deleteLater()
    settle()


def ask_for_it(main: MainWindow) -> None:
    QTest.keyClick(main, Qt.Key.Key_R, KEYS)


def test_the_key_writes_the_record_and_the_sheet_says_where(
    main: MainWindow, qtbot: QtBot, ask: Answers, tmp_path: Path
) -> None:
    opened: list[Path] = []
    main.record.show_path = opened.append
    with qtbot.waitSignal(main.record.written, timeout=60_000):
        ask_for_it(main)
        assert main.record.busy
        assert main.sheet.foot.stop.isVisible(), "it can be stopped"
    assert ask.asked == [f"record {tmp_path.name}"]
    folder = tmp_path / "out"
    assert {"clip.html", "clip.pdf", "clip.result.json", "clip.png", "clip.vtu"} <= {
        path.name for path in folder.iterdir()
    }
    notice = main.sheet.head.notice
    assert notice.isVisible()
    assert "“out”" in notice.detail.text
    assert notice.toolTip() == str(folder)
    for key, path in (("page", folder / "clip.html"), ("folder", folder)):
        QTest.mouseClick(notice.detail.field(key), Qt.MouseButton.LeftButton)
        assert opened[-1] == path
    assert not main.record.busy
    assert not main.sheet.foot.running
    assert main.document.current


def test_the_record_bears_title_and_hash_of_the_part_as_it_now_is(
    main: MainWindow, qtbot: QtBot, tmp_path: Path
) -> None:
    main.document.apply("title", replace(main.document.part, title="Clip, renamed"))
    with qtbot.waitSignal(main.record.written, timeout=60_000):
        ask_for_it(main)
    kept = json.loads((tmp_path / "out" / "clip.result.json").read_text(encoding="utf-8"))
    again = read_part(tmp_path / "out" / "clip.part.json")
    assert again.title == "Clip, renamed"
    assert kept["part_sha256"] == part_sha256(again)


def test_it_is_refused_with_a_sentence_while_it_would_not_be_true(
    main: MainWindow, ask: Answers, screened: tuple[Part, Findings]
) -> None:
    part, findings = screened
    thicker = replace(part, wall=replace(part.wall, thickness=part.wall.thickness + 1.0))
    for shown, found, words in (
        (thicker, findings, "out of date"),
        (part, replace(findings, fields=()), "only the numbers"),
        (part, None, "not been screened"),
    ):
        main.document.apply("a step", shown)
        main.document.set_findings(found)
        ask_for_it(main)
        assert words in main.said.text()
        assert "Ctrl+Enter" in main.said.text()
    assert ask.asked == []


def test_beside_an_unsaved_part_it_asks_to_save_first(
    main: MainWindow, ask: Answers, tmp_path: Path
) -> None:
    ask.folder = tmp_path
    main.document.apply("notes", replace(main.document.part, notes="not in the file"))
    ask_for_it(main)
    assert "save it first" in main.said.text()
    assert not main.record.busy
    assert not (tmp_path / "clip.html").exists()


def test_thinking_better_of_it_writes_nothing(main: MainWindow, ask: Answers) -> None:
    ask.folder = None
    ask_for_it(main)
    assert not main.record.busy
    assert not main.sheet.foot.running


def test_a_folder_that_cannot_be_written_to_is_told(
    main: MainWindow, qtbot: QtBot, ask: Answers, tmp_path: Path
) -> None:
    (tmp_path / "out").write_text("a file", encoding="utf-8")
    with qtbot.waitSignal(main.record.ended, timeout=60_000):
        ask_for_it(main)
    notice = main.sheet.head.notice
    assert "not written" in notice.headline.text
    assert "Choose another folder" in notice.detail.text
    assert (tmp_path / "out").read_text(encoding="utf-8") == "a file"


def test_a_part_file_of_no_record_is_not_replaced(
    main: MainWindow, qtbot: QtBot, tmp_path: Path
) -> None:
    other = tmp_path / "out" / "clip.part.json"
    other.parent.mkdir()
    other.write_text("mine", encoding="utf-8")
    with qtbot.waitSignal(main.record.ended, timeout=60_000):
        ask_for_it(main)
    assert "belongs to no record" in main.sheet.head.notice.detail.text
    assert other.read_text(encoding="utf-8") == "mine"


def test_it_is_stopped_by_the_key(
    main: MainWindow, qtbot: QtBot, monkeypatch: pytest.MonkeyPatch
) -> None:
    entered, left = threading.Event(), threading.Event()

    def slow(
        part: Part, findings: Findings, folder: Path, source: Path, progress: Progress
    ) -> list[Path]:
        entered.set()
        try:
            while True:
                progress.check()
        finally:
            left.set()

    monkeypatch.setattr(record, "write_record", slow)
    ask_for_it(main)
    qtbot.waitUntil(entered.is_set, timeout=10_000)
    QTest.keyClick(main, Qt.Key.Key_Period, CONTROL)
    assert not main.record.busy
    qtbot.waitUntil(left.is_set, timeout=10_000)
    assert "not finished" in main.said.text()
    assert not main.sheet.head.notice.isVisible()
