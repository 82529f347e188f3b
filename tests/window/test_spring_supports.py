"""Beds of springs: in the sheet, on the board, in words."""

from __future__ import annotations

from dataclasses import replace

from PySide6.QtWidgets import QPushButton
from pytestqt.qtbot import QtBot

from screenapp.model.part import ElasticSupport, FixedSupport
from screenapp.report.page import support_words
from screenapp.window.board.support_marks import support_mark
from screenapp.window.sheet.held_paragraph import HeldParagraph
from tests.window.board_kit import Hand, plate
from tests.window.window_kit import pick, shown_sheet, type_into


def test_springs_are_chosen_and_typed_in_the_sheet(qtbot: QtBot) -> None:
    supports = (FixedSupport("s1", "e4", 5.0), FixedSupport("s2", "h1"))
    sheet = shown_sheet(qtbot, replace(plate(), supports=supports))
    paragraph = next(p for p in sheet.paragraphs if isinstance(p, HeldParagraph))
    row = paragraph.list.row("s1")
    pick(row.sentence.field("kind"), "held by springs")
    type_into(row.sentence.field("normal"), "0.25 kN/mm²")
    type_into(row.sentence.field("along"), "free")
    assert sheet.document.part.supports[0] == ElasticSupport("s1", "e4", 250.0, 0.0, 5.0)
    assert "across it 250 N/mm², along it free" in row.sentence.text
    keys = [c.key for c in paragraph.list.row("s2").sentence.field("kind").piece.choices()]
    assert "springs" in keys


def test_springs_are_put_on_an_edge_by_the_board(qtbot: QtBot) -> None:
    hand = Hand(plate())
    qtbot.addWidget(hand.board)
    hand.type("H")
    hand.click(0.0, 20.0)
    popover = hand.canvas.placing.popover
    next(b for b in popover.findChildren(QPushButton) if b.text() == "Springs").click()
    hand.type("80")
    hand.enter()
    (support,) = hand.part.supports
    assert support == ElasticSupport("s1", "e4", 80.0, 0.0)
    mark = support_mark(hand.canvas.drawn, hand.canvas.frame_now, support)
    both = support_mark(hand.canvas.drawn, hand.canvas.frame_now, replace(support, along=5.0))
    assert mark.lines
    assert len(both.lines) > len(mark.lines)
    assert support_words(support) == "e4 is held by springs of 80 N/mm² across it"
