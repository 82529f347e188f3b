"""Welds: in the sheet, on the board, in words."""

from __future__ import annotations

from dataclasses import replace

from PySide6.QtWidgets import QPushButton
from pytestqt.qtbot import QtBot

from screenapp.model.part import FixedSupport, WeldSupport
from screenapp.report.page import support_words
from screenapp.window.board.support_marks import support_mark
from screenapp.window.sheet.held_paragraph import HeldParagraph
from tests.window.board_kit import Hand, plate
from tests.window.window_kit import pick, shown_sheet, type_into


def test_a_weld_is_chosen_and_typed_in_the_sheet(qtbot: QtBot) -> None:
    sheet = shown_sheet(qtbot, replace(plate(), supports=(FixedSupport("s1", "e4", 5.0),)))
    paragraph = next(p for p in sheet.paragraphs if isinstance(p, HeldParagraph))
    row = paragraph.list.row("s1")
    pick(row.sentence.field("kind"), "held by a weld")
    type_into(row.sentence.field("throat"), "4 mm")
    assert sheet.document.part.supports[0] == WeldSupport("s1", "e4", 4.0, 5.0)
    assert row.sentence.text.startswith("held by a weld, throat 4 mm")


def test_a_weld_is_put_on_an_edge_by_the_board(qtbot: QtBot) -> None:
    hand = Hand(plate())
    qtbot.addWidget(hand.board)
    hand.type("H")
    hand.click(0.0, 20.0)
    popover = hand.canvas.placing.popover
    next(b for b in popover.findChildren(QPushButton) if b.text() == "Weld").click()
    hand.type("4")
    hand.enter()
    (support,) = hand.part.supports
    assert support == WeldSupport("s1", "e4", 4.0)
    mark = support_mark(hand.canvas.drawn, hand.canvas.frame_now, support)
    assert mark.fills
    assert support_words(support) == "e4 is held by a weld of throat 4 mm"
