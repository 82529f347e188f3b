"""Random clicks, drags, keys and undos: nothing breaks, and every step can be undone."""

from __future__ import annotations

import random

import pytest
from PySide6.QtCore import QPoint, Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from screenapp.model.part import Part
from tests.window.board_kit import LEFT, NONE, Hand, plate

KEYS = (
    Qt.Key.Key_Escape,
    Qt.Key.Key_Return,
    Qt.Key.Key_Tab,
    Qt.Key.Key_Delete,
    Qt.Key.Key_F2,
    Qt.Key.Key_Left,
    Qt.Key.Key_PageDown,
    Qt.Key.Key_Home,
)
TOOLS = "SLARCOFHWP"
EVENTS = 150


def act(hand: Hand, dice: random.Random) -> None:
    """One random thing that a user may do."""
    view = hand.canvas.viewport()
    spot = QPoint(dice.randrange(view.width()), dice.randrange(view.height()))
    if dice.random() < 0.5:  # near something
        point = dice.choice([(0, 0), (100, 0), (100, 60), (0, 60), (60, 30), (50, 30), (100, 20)])
        spot = hand.px(*point) + QPoint(dice.randrange(-3, 4), dice.randrange(-3, 4))
    what = dice.random()
    if what < 0.35:
        QTest.mouseMove(view, spot)
        QTest.mouseClick(view, LEFT, NONE, spot)
    elif what < 0.45:
        QTest.mouseDClick(view, LEFT, NONE, spot)
    elif what < 0.6:
        QTest.mousePress(view, LEFT, NONE, spot)
        QTest.mouseMove(view, spot + QPoint(40, 25))
        if dice.random() < 0.2:
            hand.document.undo()
        QTest.mouseRelease(view, LEFT, NONE, spot + QPoint(40, 25))
    elif what < 0.75:
        hand.key(dice.choice(KEYS))
    elif what < 0.85:
        hand.type(dice.choice(TOOLS))
    elif what < 0.95:
        hand.type(dice.choice(["12", "-3.5", "0", "1e9", "2 in", "x", "7 kg"]))
    else:
        dice.choice([hand.document.undo, hand.document.redo])()
    QApplication.processEvents()


@pytest.mark.parametrize("seed", range(4))
def test_random_use_breaks_nothing_and_can_be_undone(qtbot: QtBot, seed: int) -> None:
    start = plate() if seed % 2 else Part()
    hand = Hand(start)
    qtbot.addWidget(hand.board)
    dice = random.Random(seed)
    for _ in range(EVENTS):
        act(hand, dice)
    hand.board.grab()
    while hand.document.history.can_undo:
        hand.document.undo()
    assert hand.part == start
    asking = hand.canvas.placing.busy or hand.canvas.ring_choice.busy
    assert not hand.canvas.previewing or asking
