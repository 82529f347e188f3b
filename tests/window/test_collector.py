"""The garbage collector may run in the midst of painting; nothing painted may fall to it."""

from __future__ import annotations

import gc

import pytest
from PySide6.QtGui import QPainter
from pytestqt.qtbot import QtBot

from screenapp.window.board.frame import Frame
from screenapp.window.board.grid import GridItem
from tests.window.board_kit import Hand, plate


def test_board_of_a_test_that_has_returned_is_painted_unharmed(
    qtbot: QtBot, monkeypatch: pytest.MonkeyPatch
) -> None:
    """Without the hooks in tests/conftest.py the process ends here with a segmentation fault."""
    draw = GridItem.draw

    def collect_and_draw(self: GridItem, painter: QPainter, frame: Frame) -> None:
        gc.collect()
        draw(self, painter, frame)

    monkeypatch.setattr(GridItem, "draw", collect_and_draw)
    hand = Hand(plate())
    qtbot.addWidget(hand.board)
    hand.board.grab()
    hand.canvas.viewport().update()
    hand.canvas.scene().update()
