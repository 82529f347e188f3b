"""Copy and paste, fine nudges, the context menu, and carrying of supports and loads."""

from __future__ import annotations

from dataclasses import replace

import pytest
from PySide6.QtCore import QPoint, Qt
from PySide6.QtGui import QAction, QGuiApplication
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from screenapp.model.part import (
    BearingLoad,
    Case,
    CircleHole,
    FixedSupport,
    ForceLoad,
    LoopHole,
    Probe,
)
from screenapp.model.pattern import RowPattern
from screenapp.model.shape import shape_of
from tests.window.board_kit import Hand, plate, ring

CONTROL, SHIFT = Qt.KeyboardModifier.ControlModifier, Qt.KeyboardModifier.ShiftModifier
RIGHT = Qt.MouseButton.RightButton


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    part = replace(
        plate(),
        supports=(FixedSupport("s1", "e4"),),
        cases=(Case("k1", "pull", (ForceLoad("l1", "e2", 500.0, 0.0),)),),
        readings=(Probe("p1", "P1", (20.0, 20.0)),),
    )
    made = Hand(part)
    qtbot.addWidget(made.board)
    return made


def lines(hand: Hand) -> dict[str, QAction]:
    """The lines of the open menu by their words."""
    assert hand.canvas.context.menu is not None
    found = hand.canvas.context.menu.actions()
    return {a.text().split("\t")[0]: a for a in found if not a.isSeparator()}


def right_click(hand: Hand, x: float, y: float) -> dict[str, QAction]:
    hand.go(x, y)
    QTest.mouseClick(hand.canvas.viewport(), RIGHT, pos=hand.px(x, y))
    QApplication.processEvents()
    return lines(hand)


def choose(hand: Hand, words: str) -> None:
    """Trigger a line and put the menu away."""
    action = lines(hand)[words]
    menu = hand.canvas.context.menu
    assert action.isEnabled()
    action.trigger()
    assert menu is not None
    menu.close()
    QApplication.processEvents()


def test_copy_and_paste_under_the_cursor(hand: Hand) -> None:
    hand.click(50.0, 32.0)
    hand.key(Qt.Key.Key_C, CONTROL)
    hand.go(20.0, 44.0)
    hand.key(Qt.Key.Key_V, CONTROL)
    assert hand.part.holes[1] == CircleHole("h2", (20.0, 44.0), 20.0)
    assert hand.document.selection == ("h2",)
    assert hand.document.history.undo_name == "paste holes"
    hand.key(Qt.Key.Key_X, CONTROL)
    assert [h.id for h in hand.part.holes] == ["h1"]
    hand.go(80.0, 16.0)
    hand.key(Qt.Key.Key_V, CONTROL)
    assert hand.part.holes[1] == CircleHole("h2", (80.0, 16.0), 20.0)


def test_with_no_holes_it_is_said(hand: Hand) -> None:
    QGuiApplication.clipboard().setText("a shopping list")
    hand.key(Qt.Key.Key_V, CONTROL)
    assert "no holes on the clipboard" in hand.said[-1]
    hand.click(100.0, 60.0)
    hand.key(Qt.Key.Key_C, CONTROL)
    assert "no hole in what is selected" in hand.said[-1]


def test_control_and_an_arrow_nudge_by_a_tenth(hand: Hand) -> None:
    hand.click(50.0, 32.0)
    hand.key(Qt.Key.Key_Right)
    coarse = hand.part.holes[0].centre[0] - 50.0  # type: ignore[union-attr]
    hand.key(Qt.Key.Key_Up, CONTROL)
    x, y = hand.part.holes[0].centre  # type: ignore[union-attr]
    assert x == 50.0 + coarse
    assert y == pytest.approx(30.0 + coarse / 10.0)


def test_the_menu_offers_only_what_applies(hand: Hand) -> None:
    assert set(right_click(hand, 100.0, 60.0)) == {
        "Corner c3",
        "Round it",
        "Chamfer it",
        "Hold it",
        "Load it",
        "Exact values",
        "Remove",
    }
    hand.canvas.context.menu.close()  # type: ignore[union-attr]
    edge = right_click(hand, 70.0, 0.0)
    assert {"Put a corner here", "Offset it", "Mirror the half about it"} <= set(edge)
    assert not {"Remove", "Make it straight", "Copy"} & set(edge)
    hand.canvas.context.menu.close()  # type: ignore[union-attr]
    hole = right_click(hand, 50.0, 32.0)
    assert {"Copy", "Cut", "Repeat it in a row", "Remove", "Hold it"} <= set(hole)
    assert "Break the pattern up" not in hole
    hand.canvas.context.menu.close()  # type: ignore[union-attr]
    QGuiApplication.clipboard().setText("")
    board = right_click(hand, 120.0, 70.0)
    assert not board["Paste here"].isEnabled()
    hand.canvas.context.menu.close()  # type: ignore[union-attr]


def test_its_lines_do_what_they_say(hand: Hand) -> None:
    right_click(hand, 70.0, 0.0)
    choose(hand, "Put a corner here")
    assert hand.part.outline is not None
    assert hand.part.outline.corners[1].at == pytest.approx((70.0, 0.0), abs=0.5)
    assert hand.document.history.undo_name == "put a corner here"
    right_click(hand, 100.0, 60.0)
    choose(hand, "Chamfer it")
    hand.type("5")
    hand.enter()
    assert hand.canvas.drawn.corners["c3"].chamfer == 5.0
    right_click(hand, 97.5, 57.5)
    choose(hand, "Make it sharp")
    assert hand.canvas.drawn.corners["c3"].sharp
    right_click(hand, 50.0, 32.0)
    choose(hand, "Exact values")
    assert hand.canvas.entry.isVisible()
    hand.key(Qt.Key.Key_Escape)


def test_a_pattern_is_broken_up_and_a_hole_across_the_edge_is_cut_out(hand: Hand) -> None:
    row = CircleHole("h1", (20.0, 30.0), 8.0, RowPattern(3, 25.0))
    across = LoopHole(
        "h2", ring((90.0, 40.0), (110.0, 40.0), (110.0, 50.0), (90.0, 50.0), first=11)
    )
    hand.document.apply("holes", replace(hand.part, holes=(row, across)))
    right_click(hand, 45.0, 30.0)
    choose(hand, "Break the pattern up")
    assert [h.id for h in hand.part.holes] == ["h1", "h3", "h4", "h2"]
    right_click(hand, 95.0, 45.0)
    choose(hand, "Cut it out of what it crosses")
    assert [h.id for h in hand.part.holes] == ["h1", "h3", "h4"]
    assert shape_of(replace(hand.part, holes=())).area == pytest.approx(5900.0)


def test_the_menu_key_opens_it_for_the_selected_thing(hand: Hand) -> None:
    hand.document.select("h1")
    hand.key(Qt.Key.Key_F10, SHIFT)
    assert "Cut" in lines(hand)
    hand.canvas.context.menu.close()  # type: ignore[union-attr]


def test_a_right_drag_still_moves_the_board(hand: Hand) -> None:
    before = hand.canvas.frame_now.px((0.0, 0.0))
    view = hand.canvas.viewport()
    QTest.mousePress(view, RIGHT, pos=QPoint(300, 300))
    QTest.mouseMove(view, QPoint(340, 330))
    QTest.mouseRelease(view, RIGHT, pos=QPoint(340, 330))
    assert hand.canvas.context.menu is None
    assert (hand.canvas.frame_now.px((0.0, 0.0)) - before).manhattanLength() > 50


def on_symbol(hand: Hand, id_: str) -> tuple[float, float]:
    """A place [mm] on the strokes of a support's or load's symbol, away from the outline."""
    frame = hand.canvas.frame_now
    marks = hand.canvas.symbols.marks(frame)
    mark = next(m for m in marks if m.id == id_)
    line = mark.lines[-1]
    from PySide6.QtCore import QPointF

    x, y = line[0] if id_.startswith("l") else line[-1]
    return frame.mm(QPointF(float(x), float(y)))


def test_a_support_is_carried_to_another_edge(hand: Hand) -> None:
    x, y = on_symbol(hand, "s1")
    assert hand.canvas.place_at(hand.canvas.frame_now.px((x, y))).hit.id == "s1"  # type: ignore[union-attr]
    hand.press(x, y)
    hand.go(x + 5.0, y + 2.0)
    hand.go(30.0, 0.0)
    assert hand.document.hovered == "e1"
    assert hand.canvas.part.supports[0].on == "e1"
    assert hand.part.supports[0].on == "e4"
    hand.release(30.0, 0.0)
    assert hand.part.supports[0] == FixedSupport("s1", "e1")
    assert hand.document.history.undo_name == "move support s1 to edge e1"
    hand.document.undo()
    assert hand.part.supports[0].on == "e4"


def test_a_pin_stays_where_no_round_hole_is_and_it_is_said(hand: Hand) -> None:
    pin = BearingLoad("l1", "h1", 300.0, 0.0)
    hand.document.apply("pin", replace(hand.part, cases=(Case("k1", "pull", (pin,)),)))
    frame = hand.canvas.frame_now
    tip = frame.px((60.0, 30.0))
    tip.setX(tip.x() + 14.0)
    x, y = frame.mm(tip)
    assert hand.canvas.place_at(tip).hit.id == "l1"  # type: ignore[union-attr]
    hand.press(x, y)
    hand.go(x + 4.0, y + 2.0)
    hand.go(30.0, 0.0)
    hand.release(30.0, 0.0)
    assert hand.part.cases[0].loads == (pin,)
    assert "needs a round hole" in hand.said[-1]


def test_escape_in_mid_carry_leaves_it(hand: Hand) -> None:
    x, y = on_symbol(hand, "s1")
    hand.press(x, y)
    hand.go(x + 5.0, y + 2.0)
    hand.go(30.0, 0.0)
    hand.key(Qt.Key.Key_Escape)
    hand.release(30.0, 0.0)
    assert hand.part.supports[0].on == "e4"
    assert not hand.canvas.previewing
