"""The whole drawing path without a mouse."""

from __future__ import annotations

import pytest
from PySide6.QtCore import Qt
from pytestqt.qtbot import QtBot

from screenapp.model.part import BearingLoad, CircleHole, FixedSupport
from tests.window.board_kit import Hand


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    made = Hand()
    qtbot.addWidget(made.board)
    return made


def typed(hand: Hand, *values: str) -> None:
    """Fill the fields of the entry row one after another and accept."""
    for i, value in enumerate(values):
        if i:
            hand.tab()
        hand.type(value)
    hand.enter()


def select(hand: Hand, id_: str) -> None:
    """Go on to a thing by keys."""
    hand.canvas.setFocus()
    hand.type("S")
    for _ in range(40):
        hand.key(Qt.Key.Key_PageDown)
        if hand.document.selection == (id_,):
            return
    raise AssertionError(f"{id_} is not reached")


def test_a_bracket_is_drawn_held_loaded_and_probed_by_keys_alone(hand: Hand) -> None:
    hand.type("R")
    hand.tab()
    typed(hand, "0", "0")
    typed(hand, "80", "50")
    hand.type("C")
    hand.tab()
    typed(hand, "60", "25")
    typed(hand, "12")
    assert hand.part.holes == (CircleHole("h1", (60.0, 25.0), 12.0),)
    select(hand, "c3")
    hand.type("F")
    typed(hand, "5")
    assert hand.part.outline is not None
    assert hand.part.outline.corners[2].round == 5.0
    select(hand, "e4")
    hand.type("H")
    hand.enter()
    assert hand.part.supports == (FixedSupport("s1", "e4"),)
    select(hand, "h1")
    hand.type("W")
    hand.type("1 kN")
    hand.enter()
    assert hand.part.cases[0].loads == (BearingLoad("l1", "h1", 0.0, -1000.0),)
    hand.type("P")
    hand.tab()
    typed(hand, "0", "25")
    assert hand.part.readings[0].at == (0.0, 25.0)


def test_what_is_reached_by_keys_is_said(hand: Hand) -> None:
    hand.type("R")
    hand.tab()
    typed(hand, "0", "0")
    typed(hand, "80", "50")
    hand.key(Qt.Key.Key_PageDown)
    assert hand.document.selection == ("c1",)
    assert hand.said[-1] == "Selected: corner c1."
    hand.key(Qt.Key.Key_PageUp)
    assert hand.document.selection == ("e4",)
