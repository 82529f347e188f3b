"""Misfits of supports: in the sheet, on the board, in words."""

from __future__ import annotations

from dataclasses import replace

from PySide6.QtWidgets import QPushButton
from pytestqt.qtbot import QtBot

from screenapp.model.part import Case, FixedSupport, MisfitLoad, PrescribedSupport
from screenapp.report.page import load_words
from screenapp.window.board.load_marks import load_mark
from screenapp.window.sheet.loaded_paragraph import LoadedParagraph, load_choices
from tests.window.board_kit import Hand, plate
from tests.window.window_kit import settle, shown_sheet, type_into

HELD = (FixedSupport("s1", "e4"), PrescribedSupport("s2", "h1", x=0.0))


def test_a_misfit_is_chosen_and_typed_in_the_sheet(qtbot: QtBot) -> None:
    sheet = shown_sheet(qtbot, replace(plate(), supports=HELD, cases=(Case("k1", "assembled"),)))
    document = sheet.document
    keys = [c.key for c in load_choices(document)]
    assert "misfit s1" in keys
    assert "misfit s2" in keys
    paragraph = next(p for p in sheet.paragraphs if isinstance(p, LoadedParagraph))
    block = paragraph.block("k1")
    block.foot.field("add").piece.act("misfit s2")
    settle()
    (load,) = document.part.cases[0].loads
    assert load == MisfitLoad("l1", "s2", 0.1, 0.0)
    row = block.loads.row("l1")
    type_into(row.sentence.field("size"), "0.2 mm")
    type_into(row.sentence.field("way"), "left")
    assert document.part.cases[0].loads == (MisfitLoad("l1", "s2", -0.2, 0.0),)
    assert row.sentence.text.startswith("off by 0.2 mm, left")


def test_a_misfit_is_put_on_a_held_place_by_the_board(qtbot: QtBot) -> None:
    hand = Hand(replace(plate(), supports=HELD))
    qtbot.addWidget(hand.board)
    hand.type("W")
    hand.click(50.0, 40.0)
    popover = hand.canvas.placing.popover
    buttons = popover.findChildren(QPushButton)
    next(b for b in buttons if b.text() == "Misfit").click()
    hand.type("0.3")
    hand.enter()
    (load,) = hand.part.cases[0].loads
    assert load == MisfitLoad("l1", "s2", 0.3, 0.0)
    mark = load_mark(hand.canvas.drawn, hand.canvas.frame_now, load)
    assert len(mark.lines) == 3
    assert mark.label == "off by 0.3 mm"
    assert load_words(load) == "support s2 is off by (0.3, 0) mm"


def test_the_board_changes_a_misfit(qtbot: QtBot) -> None:
    case = Case("k1", "assembled", (MisfitLoad("l1", "s2", 0.3, 0.0),))
    hand = Hand(replace(plate(), supports=HELD, cases=(case,)))
    qtbot.addWidget(hand.board)
    hand.canvas.placing.change("l1", hand.canvas.rect().center())
    hand.canvas.placing.popover.field("x").setText("0.5 mm")
    hand.canvas.placing.popover._edited("x")
    hand.enter()
    assert hand.part.cases[0].loads == (MisfitLoad("l1", "s2", 0.5, 0.0),)


def test_where_nothing_is_held_no_misfit_is_offered(qtbot: QtBot) -> None:
    hand = Hand(plate())
    qtbot.addWidget(hand.board)
    hand.type("W")
    hand.click(50.0, 40.0)
    words = [b.text() for b in hand.canvas.placing.popover.findChildren(QPushButton)]
    assert "Misfit" not in words
