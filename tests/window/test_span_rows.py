"""Part of an edge and varying loads in the sheet, on the board and in the record's words."""

from __future__ import annotations

from dataclasses import replace

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from screenapp.model.part import (
    Case,
    FixedSupport,
    ForceLoad,
    LineLoad,
    Part,
    PressureLoad,
    RollerSupport,
    ShearLoad,
)
from screenapp.report.page import load_words, support_words
from screenapp.window.board.load_marks import load_mark
from screenapp.window.board.support_marks import support_mark
from screenapp.window.sheet.held_paragraph import HeldParagraph
from screenapp.window.sheet.loaded_paragraph import LoadedParagraph
from tests.window.board_kit import Hand, plate
from tests.window.window_kit import settle, shown_sheet, type_into


def with_load(load: object) -> Part:
    """100 × 60 mm, e1 below, with one load and e4 fixed."""
    return replace(
        plate(),
        supports=(FixedSupport("s1", "e4"),),
        cases=(Case("k1", "Press", (load,)),),  # type: ignore
    )


def test_a_load_is_put_on_part_of_its_edge(qtbot: QtBot) -> None:
    sheet = shown_sheet(qtbot, with_load(PressureLoad("l1", "e1", 2.0)))
    paragraph = next(p for p in sheet.paragraphs if isinstance(p, LoadedParagraph))
    row = paragraph.block("k1").loads.row("l1")
    assert row.sentence.text.startswith("pressed by 2 MPa · varying · on part of it –")
    QTest.mouseClick(row.sentence.field("span"), Qt.MouseButton.LeftButton)
    settle()
    assert row.sentence.text.startswith("pressed by 2 MPa · varying, from 0 mm to 50 mm along it –")
    type_into(row.sentence.field("start"), "1 in")
    QTest.mouseClick(row.sentence.field("vary"), Qt.MouseButton.LeftButton)
    settle()
    (load,) = sheet.document.part.cases[0].loads
    assert load == PressureLoad("l1", "e1", 2.0, 0.0, 25.4, 50.0)
    type_into(row.sentence.field("end"), "its end")
    type_into(row.sentence.field("end_pressure"), "3")
    text = "pressed by 2 MPa, and at its end 3 MPa, from 25.4 mm to its end along it"
    assert row.sentence.text.startswith(f"{text} –")
    type_into(row.sentence.field("start"), "its start")
    type_into(row.sentence.field("end_pressure"), "the same")
    assert sheet.document.part.cases[0].loads == (PressureLoad("l1", "e1", 2.0),)


def test_a_support_keeps_its_part_when_its_kind_changes(qtbot: QtBot) -> None:
    part = replace(with_load(ForceLoad("l1", "e2", 1.0, 0.0)), supports=(FixedSupport("s1", "e4"),))
    sheet = shown_sheet(qtbot, part)
    paragraph = next(p for p in sheet.paragraphs if isinstance(p, HeldParagraph))
    row = paragraph.list.row("s1")
    QTest.mouseClick(row.sentence.field("span"), Qt.MouseButton.LeftButton)
    settle()
    assert sheet.document.part.supports == (FixedSupport("s1", "e4", 0.0, 30.0),)
    assert row.sentence.text == "fixed in both directions, from 0 mm to 30 mm along it"
    from tests.window.window_kit import pick

    pick(row.sentence.field("kind"), "held across its boundary")
    assert sheet.document.part.supports == (RollerSupport("s1", "e4", None, 0.0, 30.0),)


@pytest.mark.parametrize(
    "load",
    [
        PressureLoad("l", "e1", 2.0, start=20.0, end=40.0),
        ShearLoad("l", "e1", 2.0, start=20.0, end=40.0),
        LineLoad("l", "e1", 0.0, -2.0, start=20.0, end=40.0),
        ForceLoad("l", "e1", 0.0, -2.0, start=20.0, end=40.0),
    ],
)
def test_the_symbol_stands_on_that_part(load, qtbot: QtBot) -> None:  # type: ignore
    hand = Hand(with_load(load))
    qtbot.addWidget(hand.board)
    frame = hand.canvas.frame_now
    mark = load_mark(hand.canvas.drawn, frame, load)
    xs = [x for line in mark.lines for x in line[:, 0]]
    left, right = frame.pxs((20.0, 0.0))[0], frame.pxs((40.0, 0.0))[0]
    assert left - 12.0 < min(xs) < max(xs) < right + 12.0
    hand.canvas.placing.change("l", hand.px(10.0, 10.0))
    hand.enter()
    assert hand.part.cases[0].loads == (load,)


def test_a_varying_load_has_arrows_that_grow(qtbot: QtBot) -> None:
    load = PressureLoad("l", "e3", 1.0, 4.0)  # e3 runs from right to left
    hand = Hand(with_load(load))
    qtbot.addWidget(hand.board)
    mark = load_mark(hand.canvas.drawn, hand.canvas.frame_now, load)
    rail = mark.lines[-1]  # joins the arrows' far ends; y runs down
    assert mark.label == "1 MPa to 4 MPa"
    heights = [y for _, y in sorted((x, y) for x, y in rail)]
    assert heights == sorted(heights)
    assert heights[-1] - heights[0] > 10.0


def test_a_support_symbol_stands_on_its_part(qtbot: QtBot) -> None:
    hand = Hand(with_load(ForceLoad("l1", "e2", 1.0, 0.0)))
    qtbot.addWidget(hand.board)
    frame = hand.canvas.frame_now
    for support in (
        FixedSupport("s", "e1", start=60.0, end=90.0),
        RollerSupport("s", "e1", start=60.0, end=90.0),
    ):
        mark = support_mark(hand.canvas.drawn, frame, support)
        xs = [x for line in mark.lines for x in line[:, 0]]
        assert frame.pxs((60.0, 0.0))[0] - 12.0 < min(xs)
        assert max(xs) < frame.pxs((90.0, 0.0))[0] + 12.0


def test_words_of_the_record() -> None:
    load = PressureLoad("l", "e1", 2.0, 0.5, start=10.0)
    assert load_words(load) == "pressure 2 to 0.5 MPa on e1, from 10 mm to its end"
    line = LineLoad("l", "e1", 1.0, 2.0, end_y=0.0, end=20.0)
    assert load_words(line) == (
        "(1, 2) N/mm along e1, varying to (1, 0) N/mm at its end, from its start to 20 mm"
    )
    support = FixedSupport("s", "e1", 5.0, 20.0)
    assert support_words(support) == "e1, from 5 mm to 20 mm, is fixed in both directions"
