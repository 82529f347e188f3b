"""Groups of bolts: in the sheet, on the board, in words and in the findings."""

from __future__ import annotations

from dataclasses import replace

from PySide6.QtWidgets import QPushButton
from pytestqt.qtbot import QtBot

from screenapp.model.findings import CaseFindings, Estimate
from screenapp.model.part import BoltSupport, CircleHole, FixedSupport
from screenapp.model.solution import Balance, BoltForce, Reaction
from screenapp.report.balance_rows import balance_rows
from screenapp.report.page import support_words
from screenapp.window.board.symbols import support_marks
from screenapp.window.sheet.held_paragraph import HeldParagraph
from screenapp.window.sheet.reaction_rows import MOST_BOLTS, reaction_rows
from tests.window.board_kit import Hand, plate
from tests.window.window_kit import pick, settle, shown_sheet, type_into

HOLES = (
    CircleHole("h1", (50.0, 40.0), 12.0),
    CircleHole("h2", (20.0, 15.0), 6.0),
    CircleHole("h3", (80.0, 15.0), 6.0),
)


def test_a_group_is_gathered_in_the_sheet(qtbot: QtBot) -> None:
    part = replace(plate(), holes=HOLES, supports=(FixedSupport("s1", "h1"),))
    sheet = shown_sheet(qtbot, part)
    paragraph = next(p for p in sheet.paragraphs if isinstance(p, HeldParagraph))
    row = paragraph.list.row("s1")
    pick(row.sentence.field("kind"), "held by bolts")
    assert sheet.document.part.supports == (BoltSupport("s1", "h1"),)
    type_into(row.sentence.field("stiffness"), "40 kN/mm")
    more = row.sentence.field("more").piece
    assert [c.key for c in more.choices()] == ["h2", "h3"]
    more.act("h3")
    settle()
    assert sheet.document.part.supports == (BoltSupport("s1", "h1", ("h3",), 40_000.0),)
    assert row.sentence.text.startswith("held by bolts, together with h3, each 40 kN/mm")
    pick(row.sentence.field("also h3"), "leave it out")
    assert sheet.document.part.supports == (BoltSupport("s1", "h1", (), 40_000.0),)


def test_holes_selected_together_are_bolted_together_on_the_board(qtbot: QtBot) -> None:
    hand = Hand(replace(plate(), holes=HOLES))
    qtbot.addWidget(hand.board)
    hand.document.select("h1", "h2", "h3")
    hand.type("H")
    popover = hand.canvas.placing.popover
    assert [b.text() for b in popover.findChildren(QPushButton) if b.isCheckable()] == ["Bolts"]
    hand.enter()
    (support,) = hand.part.supports
    assert support == BoltSupport("s1", "h1", ("h2", "h3"))
    marks = support_marks(hand.canvas.drawn, hand.canvas.frame_now, support)
    assert len(marks) == 3
    assert support_words(support) == (
        "h1 and h2 and h3: held by rigid bolts, without play, on one rigid ground"
    )


def test_the_force_in_each_bolt_is_told() -> None:
    part = replace(plate(), holes=HOLES, supports=(BoltSupport("s1", "h1", ("h2", "h3")),))
    bolts = (BoltForce("h1", 0.0, 300.0), BoltForce("h2", 0.0, 0.0), BoltForce("h3", -400.0, 0.0))
    known = Estimate(10.0, 9.9, 10.1, "settled")
    case = CaseFindings(
        "k1", "pull", (), known, (0.0, 0.0), (0.0, 0.0, 0.0),
        (Reaction("s1", -400.0, 300.0, 0.0, bolts),), Balance(0.0, 0.0),
    )  # fmt: skip
    rows = reaction_rows(part, case, False)
    texts = ["".join(p.text for p in row.pieces) for row in rows]
    assert texts[1] == "its bolt gives 400 N left in pull"
    assert texts[2] == "its bolt gives 300 N up in pull"
    many = replace(
        case.reactions[0], bolts=tuple(BoltForce(f"h{i}", 1.0 + i, 0.0) for i in range(20))
    )
    rows = reaction_rows(part, replace(case, reactions=(many,)), False)
    assert len(rows) == 1 + MOST_BOLTS + 1


def test_the_record_tells_each_bolt_below_its_group() -> None:
    bolts = (BoltForce("h1", 0.0, 300.0), BoltForce("h2", -400.0, 0.0))
    known = Estimate(10.0, 9.9, 10.1, "settled")
    case = CaseFindings(
        "k1", "pull", (), known, (0.0, 0.0), (400.0, -300.0, 0.0),
        (Reaction("s1", -400.0, 300.0, 0.0, bolts),), Balance(0.0, 0.0),
    )  # fmt: skip
    rows = balance_rows(case, "mm-N-MPa")
    assert rows[-2:] == [
        ("its bolt in h1, 300 N", ("0", "300", "")),
        ("its bolt in h2, 400 N", ("−400", "0", "")),
    ]
