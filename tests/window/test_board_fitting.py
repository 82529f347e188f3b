"""What a fitted view shows, and that it stays fitted when the window changes its size."""

from __future__ import annotations

from dataclasses import replace

import pytest
from PySide6.QtCore import Qt
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from screenapp.model.part import Case, Part, SpinLoad
from tests.window.board_kit import Hand, plate


def hand_on(qtbot: QtBot, part: Part) -> Hand:
    made = Hand(part)
    qtbot.addWidget(made.board)
    made.key(Qt.Key.Key_Home)
    return made


def resized(hand: Hand, wide: int, tall: int) -> None:
    hand.board.resize(wide, tall)
    QApplication.processEvents()


def scale(hand: Hand) -> float:
    return hand.canvas.frame_now.scale


def sees(hand: Hand, x: float, y: float) -> bool:
    return hand.canvas.viewport().rect().contains(hand.px(x, y))


def test_a_fitted_part_is_fitted_again(qtbot: QtBot) -> None:
    hand = hand_on(qtbot, plate())
    before = scale(hand)
    resized(hand, 640, 480)
    assert scale(hand) < 0.8 * before
    assert all(sees(hand, *at) for at in ((0, 0), (100, 0), (100, 60), (0, 60)))
    resized(hand, 1000, 700)
    assert scale(hand) == pytest.approx(before)


def test_a_view_of_ones_own_is_left_alone(qtbot: QtBot) -> None:
    hand = hand_on(qtbot, plate())
    hand.canvas.zoom(4.0, hand.px(50.0, 30.0).toPointF())
    before = scale(hand)
    resized(hand, 640, 480)
    resized(hand, 1000, 700)
    assert scale(hand) == pytest.approx(before, rel=0.02)


@pytest.mark.parametrize(("x", "shown"), [(-60.0, True), (-5000.0, False)])
def test_the_point_of_a_spin_is_in_a_fitted_view_unless_far_off(
    qtbot: QtBot, x: float, shown: bool
) -> None:
    spun = Case("k1", "spun", (SpinLoad("l1", x, 30.0, 3000.0),))
    hand = hand_on(qtbot, replace(plate(), cases=(spun,)))
    assert sees(hand, x, 30.0) == shown
    assert sees(hand, 100.0, 60.0)
