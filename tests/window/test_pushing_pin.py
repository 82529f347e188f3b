"""The pin that only pushes: in the sheet, on the board, in words."""

from __future__ import annotations

from dataclasses import replace

from PySide6.QtWidgets import QPushButton
from pytestqt.qtbot import QtBot

from screenapp.model.part import (
    CircleHole,
    FixedSupport,
    PinSupport,
    RollerSupport,
    SymmetrySupport,
)
from screenapp.report.page import support_words
from screenapp.window.board.support_marks import support_mark
from screenapp.window.sheet.held_paragraph import HeldParagraph
from tests.window.board_kit import Hand, plate
from tests.window.window_kit import pick, shown_sheet


def test_it_is_chosen_in_the_sheet_for_a_hole_only(qtbot: QtBot) -> None:
    supports = (FixedSupport("s1", "h1"), FixedSupport("s2", "e4"))
    sheet = shown_sheet(qtbot, replace(plate(), supports=supports))
    paragraph = next(p for p in sheet.paragraphs if isinstance(p, HeldParagraph))
    row = paragraph.list.row("s1")
    pick(row.sentence.field("kind"), "held by a pin that only pushes")
    assert sheet.document.part.supports[0] == PinSupport("s1", "h1")
    assert row.sentence.text == (
        "held by a pin that only pushes; it fits without play and friction"
    )
    pick(row.sentence.field("kind"), "held by a pin all round")
    assert row.sentence.text == "held by a pin all round, so that it can turn on it"
    assert sheet.document.part.supports[0] == RollerSupport("s1", "h1")
    edge = paragraph.list.row("s2").sentence.field("kind").piece
    keys = [c.key for c in edge.choices()]
    assert keys == ["fixed", "normal", "symmetry", "angle", "weld", "springs", "moved"]
    pick(paragraph.list.row("s2").sentence.field("kind"), "on a line of symmetry")
    assert sheet.document.part.supports[1] == SymmetrySupport("s2", "e4")


def test_a_line_of_symmetry_has_its_own_symbol(qtbot: QtBot) -> None:
    hand = Hand(plate())
    qtbot.addWidget(hand.board)
    hand.type("H")
    hand.click(0.0, 20.0)
    buttons = hand.canvas.placing.popover.findChildren(QPushButton)
    next(b for b in buttons if b.text() == "Symmetry").click()
    hand.enter()
    (support,) = hand.part.supports
    assert support == SymmetrySupport("s1", "e4")
    mark = support_mark(hand.canvas.drawn, hand.canvas.frame_now, support)
    assert len(mark.lines) == 5
    assert "line of symmetry" in support_words(support)


def test_it_is_put_on_a_hole_by_the_board(qtbot: QtBot) -> None:
    hand = Hand(plate())
    qtbot.addWidget(hand.board)
    hand.type("H")
    hand.click(50.0, 40.0)
    buttons = hand.canvas.placing.popover.findChildren(QPushButton)
    button = next(b for b in buttons if b.text() == "Pushing pin")
    assert button.width() >= button.sizeHint().width()  # its words are not cut off
    button.click()
    hand.enter()
    (support,) = hand.part.supports
    assert support == PinSupport("s1", "h1")
    assert isinstance(hand.part.holes[0], CircleHole)
    mark = support_mark(hand.canvas.drawn, hand.canvas.frame_now, support)
    assert mark.circles
    assert len(mark.lines) > 4
    assert "only pushes" in support_words(support)
