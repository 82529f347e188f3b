"""Cuts by mouse and keys: drawn, taken up, dragged, removed."""

from __future__ import annotations

import pytest
from PySide6.QtCore import Qt
from pytestqt.qtbot import QtBot

from screenapp.model.part import Cut
from tests.window.board_kit import Hand


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    made = Hand()
    qtbot.addWidget(made.board)
    return made


def test_two_clicks_make_a_cut_that_is_selected(hand: Hand) -> None:
    hand.key(Qt.Key.Key_X)
    hand.click(30.0, -10.0)
    hand.click(30.0, 60.0)
    assert [(c.id, c.name) for c in hand.part.cuts] == [("x1", "Cut 1")]
    cut = hand.part.cuts[0]
    assert cut.start == pytest.approx((30.0, -10.0), abs=0.5)
    assert cut.end == pytest.approx((30.0, 60.0), abs=0.5)
    assert hand.document.selection == ("x1",)
    assert hand.document.history.undo_name == "put a cut"


def test_exact_places_are_typed(hand: Hand) -> None:
    hand.key(Qt.Key.Key_X)
    hand.click(30.0, -10.0)
    hand.canvas.place = None
    hand.key(Qt.Key.Key_Tab)
    hand.type("10")
    hand.tab()
    hand.type("20")
    hand.enter()
    assert hand.part.cuts[0].end == (10.0, 20.0)


def test_escape_drops_the_first_place(hand: Hand) -> None:
    hand.key(Qt.Key.Key_X)
    hand.click(30.0, -10.0)
    hand.key(Qt.Key.Key_Escape)
    hand.click(10.0, -10.0)
    assert hand.part.cuts == ()
    hand.click(10.0, 60.0)
    assert hand.part.cuts[0].start == pytest.approx((10.0, -10.0), abs=0.5)


def test_a_cut_is_selected_dragged_and_deleted(hand: Hand) -> None:
    hand.key(Qt.Key.Key_X)
    hand.click(30.0, -10.0)
    hand.click(30.0, 60.0)
    hand.key(Qt.Key.Key_S)
    hand.click(80.0, 70.0)
    assert hand.document.selection == ()
    hand.click(30.0, 57.0)
    assert hand.document.selection == ("x1",)
    before = hand.part.cuts[0]
    hand.drag((30.0, 57.0), (40.0, 57.0))
    after = hand.part.cuts[0]
    moved = (after.start[0] - before.start[0], after.end[0] - before.end[0])
    assert moved == pytest.approx((10.0, 10.0), abs=1.0)
    assert after.start[1] - after.end[1] == pytest.approx(before.start[1] - before.end[1])
    hand.key(Qt.Key.Key_Delete)
    assert hand.part.cuts == ()
    hand.document.undo()
    assert hand.part.cuts == (after,)
    assert isinstance(after, Cut)
