"""Manners of the window: cursors, names for screen readers, keys at once, units everywhere."""

from __future__ import annotations

from pathlib import Path

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QScrollArea, QWidget
from pytestqt.qtbot import QtBot

from screenapp.model import edits
from screenapp.model.edit_dimensions import add_dimension
from screenapp.window.main_window import MainWindow
from tests.window.board_kit import Hand, plate
from tests.window.window_kit import settle, texts, window


@pytest.fixture
def main(qtbot: QtBot, tmp_path: Path) -> MainWindow:
    made = window(tmp_path)
    qtbot.addWidget(made)
    made.document.open(add_dimension(plate(), "width", 100.0), None)
    settle()
    return made


def test_keys_draw_as_soon_as_the_window_stands(qtbot: QtBot, tmp_path: Path) -> None:
    made = window(tmp_path)
    qtbot.addWidget(made)
    assert made.focusWidget() is made.board.canvas
    QTest.keyClicks(made.board.canvas, "R")
    assert made.board.canvas.tool is not None
    assert made.board.canvas.tool.name == "Rectangle"


def test_everything_that_takes_the_keyboard_has_a_name(main: MainWindow) -> None:
    nameless = [
        f"{type(w).__name__} {w.objectName()} in {type(w.parent()).__name__}"
        for w in main.findChildren(QWidget)
        if w.focusPolicy().value & Qt.FocusPolicy.TabFocus.value
        and w.isVisible()
        and not isinstance(w, QScrollArea)
        and not w.accessibleName()
        and not getattr(w, "text", lambda: "")()
    ]
    assert nameless == []


def test_faults_are_said_in_the_units_shown(main: MainWindow) -> None:
    part = edits.set_units(edits.set_round(main.document.part, "c3", 254.0), "in-lbf-ksi")
    main.document.apply("round", part)
    settle()
    said = [text for text in texts(main.sheet.paragraph(1)) if "round" in text]
    assert any("10 in" in text for text in said)
    assert not any(" mm" in text for text in said if "units" not in text)
    main.document.said.emit("the part is 25.4 mm wide")
    assert main.said.text() == "the part is 1 in wide"


def test_cursors_tell_what_a_click_would_do(qtbot: QtBot) -> None:
    hand = Hand(edits.add_probe(plate(), (20.0, 20.0)))
    qtbot.addWidget(hand.board)

    def shape(x: float, y: float) -> Qt.CursorShape:
        hand.go(x, y)
        return hand.canvas.viewport().cursor().shape()

    assert shape(100.0, 60.0) == Qt.CursorShape.OpenHandCursor  # drags the corner
    assert shape(20.0, 40.0) == Qt.CursorShape.ArrowCursor
    hand.type("P")
    assert shape(20.0, 20.0) == Qt.CursorShape.PointingHandCursor  # takes the probe up
    assert shape(30.0, 40.0) == Qt.CursorShape.CrossCursor  # puts one
    assert shape(50.0, 27.0) == Qt.CursorShape.ForbiddenCursor  # inside the hole
    hand.type("A")
    assert shape(30.0, 60.0) == Qt.CursorShape.PointingHandCursor  # bends the edge
    assert shape(30.0, 40.0) == Qt.CursorShape.CrossCursor
    hand.type("M")
    assert shape(30.0, 60.0) == Qt.CursorShape.PointingHandCursor
