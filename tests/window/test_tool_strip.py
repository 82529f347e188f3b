"""The strip of tools: groups behind one button, reached by mouse and keys, never cut off."""

from __future__ import annotations

import itertools

import pytest
from PySide6.QtCore import QPoint, Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from screenapp.window.board.tool_strip import GroupButton
from tests.window.board_kit import Hand, plate

LEFT = Qt.MouseButton.LeftButton


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    made = Hand(plate())
    qtbot.addWidget(made.board)
    return made


def names(button: GroupButton) -> list[str]:
    assert button.menu_of_tools is not None
    return [a.text().split("\t")[0] for a in button.menu_of_tools.actions()]


def test_tools_of_a_kind_share_a_button_that_shows_the_last_used(hand: Hand) -> None:
    strip = hand.board.strip
    button = strip.button("Row of holes")
    assert button is strip.button("Round hole") is strip.button("Bolt circle")
    QTest.mouseClick(button, LEFT)
    assert hand.canvas.tool is not None
    assert hand.canvas.tool.name == "Round hole"
    hand.canvas.setFocus()
    hand.type("b")
    assert hand.canvas.tool.name == "Bolt circle"
    assert button.isChecked()
    assert button.accessibleName() == "Bolt circle"
    hand.type("s")
    QTest.mouseClick(button, LEFT)
    assert hand.canvas.tool.name == "Bolt circle"


def test_pressing_the_tool_in_hand_again_opens_its_kind(hand: Hand) -> None:
    button = hand.board.strip.button("Fillet")
    QTest.mouseClick(button, LEFT)
    assert button.menu_of_tools is None
    QTest.mouseClick(button, LEFT)
    assert names(button) == ["Fillet", "Chamfer"]
    assert button.menu_of_tools is not None
    QTest.keyClick(button.menu_of_tools, Qt.Key.Key_Down)
    QTest.keyClick(button.menu_of_tools, Qt.Key.Key_Return)
    assert hand.canvas.tool is not None
    assert hand.canvas.tool.name == "Chamfer"


def test_holding_it_down_opens_and_is_no_click(hand: Hand, qtbot: QtBot) -> None:
    button = hand.board.strip.button("Arc")
    QTest.mousePress(button, LEFT)
    qtbot.waitUntil(lambda: button.menu_of_tools is not None, timeout=2000)
    QTest.mouseRelease(button, LEFT)
    assert names(button) == ["Arc", "Centre arc", "Tangent arc"]
    assert hand.canvas.tool is not None
    assert hand.canvas.tool.name == "Select"
    assert button.menu_of_tools is not None
    button.menu_of_tools.close()


def test_the_right_arrow_opens_for_those_without_a_mouse(hand: Hand) -> None:
    button = hand.board.strip.button("Rectangle")
    button.setFocus()
    QTest.keyClick(button, Qt.Key.Key_Right)
    assert names(button) == ["Rectangle", "Rounded rectangle"]
    assert button.menu_of_tools is not None
    button.menu_of_tools.close()
    single = hand.board.strip.button("Slot")
    single.setFocus()
    QTest.keyClick(single, Qt.Key.Key_Right)
    assert single.menu_of_tools is None


@pytest.mark.parametrize("height", [460, 560, 1000])
def test_no_button_is_cut_off_or_covers_another(hand: Hand, height: int) -> None:
    hand.board.resize(900, height)
    QApplication.processEvents()
    strip = hand.board.strip
    boxes = []
    for tool in hand.board.tools:
        button = strip.button(tool.name)
        top = button.mapTo(strip, QPoint(0, 0)).y()
        box = (top, top + button.height())
        if box not in boxes:
            boxes.append(box)
    boxes.sort()
    assert boxes[0][0] >= 0
    assert boxes[-1][1] <= strip.height()
    assert all(a[1] <= b[0] for a, b in itertools.pairwise(boxes))
