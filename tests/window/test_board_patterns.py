"""Rows, grids and bolt circles on the board: drawn, selected, dragged and loaded as one."""

from __future__ import annotations

from dataclasses import replace

import pytest
from PySide6.QtCore import Qt
from pytestqt.qtbot import QtBot

from screenapp.model.dimension_marks import marks_of
from screenapp.model.part import CircleHole, FixedSupport, SlotHole
from screenapp.model.pattern import BoltCircle, GridPattern, RowPattern
from tests.window.board_kit import Hand, plate

SHIFT = Qt.KeyboardModifier.ShiftModifier
ROW = CircleHole("h1", (20.0, 20.0), 8.0, RowPattern(3, 30.0))


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    made = Hand(replace(plate(), holes=()))
    qtbot.addWidget(made.board)
    return made


@pytest.fixture
def row(qtbot: QtBot) -> Hand:
    made = Hand(replace(plate(), holes=(ROW,)))
    qtbot.addWidget(made.board)
    return made


def only(hand: Hand) -> CircleHole:
    (hole,) = hand.part.holes
    assert isinstance(hole, CircleHole)
    return hole


def test_a_row_by_two_clicks_and_the_arrow_keys(hand: Hand) -> None:
    hand.type("N")
    hand.click(10.0, 10.0)
    hand.key(Qt.Key.Key_Right)
    hand.key(Qt.Key.Key_Right)
    hand.key(Qt.Key.Key_Left)
    hand.click(70.0, 10.0)
    assert only(hand) == CircleHole("h1", (10.0, 10.0), 6.0, RowPattern(4, 20.0))
    assert hand.document.selection == ("h1",)
    assert hand.document.history.undo_name == "draw a row of holes"
    hand.document.undo()
    assert hand.part.holes == ()


def test_a_row_by_typed_numbers(hand: Hand) -> None:
    hand.type("N")
    hand.click(10.0, 10.0)
    hand.type("5")
    hand.tab()
    hand.type("0.5 in")
    hand.tab()
    hand.type("90")
    hand.tab()
    hand.type("7")
    hand.enter()
    assert hand.said == []
    assert only(hand) == CircleHole(
        "h1", (10.0, 10.0), 7.0, RowPattern(5, pytest.approx(12.7), 90.0)
    )


def test_half_a_hole_is_refused(hand: Hand) -> None:
    hand.type("N")
    hand.click(10.0, 10.0)
    hand.type("2.5")
    hand.enter()
    assert hand.part.holes == ()
    assert "no whole number" in hand.said[-1]


def test_a_grid(hand: Hand) -> None:
    hand.type("G")
    hand.click(20.0, 14.0)
    hand.key(Qt.Key.Key_Up)
    hand.click(80.0, 46.0)
    assert only(hand).pattern == GridPattern(3, 3, 30.0, 16.0)


def test_a_bolt_circle(hand: Hand) -> None:
    hand.type("B")
    hand.click(50.0, 30.0)
    hand.click(50.0, 50.0)
    assert only(hand) == CircleHole("h1", (50.0, 30.0), 6.0, BoltCircle(6, 20.0, 90.0))


def test_a_hole_that_is_selected_is_repeated(hand: Hand) -> None:
    slot = SlotHole("h1", (20.0, 20.0), 12.0, 5.0, 90.0)
    held = FixedSupport("s1", "h1")
    hand.document.apply("slot", replace(hand.part, holes=(slot,), supports=(held,)))
    hand.click(20.0, 20.0)
    hand.type("N")
    hand.click(60.0, 20.0)
    assert hand.part.holes == (replace(slot, pattern=RowPattern(3, 20.0, 0.0)),)
    assert hand.part.supports[0].on == "h1.1"


def test_a_selected_hole_goes_round_a_centre(hand: Hand) -> None:
    hole = CircleHole("h1", (50.0, 45.0), 6.0)
    hand.document.apply("hole", replace(hand.part, holes=(hole,)))
    hand.click(50.0, 45.0)
    hand.type("B")
    hand.click(50.0, 30.0)
    assert only(hand) == replace(hole, centre=(50.0, 30.0), pattern=BoltCircle(6, 15.0, 90.0))


def test_a_click_selects_all_and_a_second_one_the_member(row: Hand) -> None:
    row.go(50.0, 20.0)
    assert row.document.hovered == "h1"
    row.click(50.0, 20.0)
    assert row.document.selection == ("h1",)
    row.click(50.0, 20.0)
    assert row.document.selection == ("h1.2",)
    row.click(20.0, 20.0)
    assert row.document.selection == ("h1",)


def test_any_member_drags_the_whole(row: Hand) -> None:
    row.drag((54.0, 20.0), (58.0, 28.0))
    assert only(row).centre == (24.0, 28.0)
    assert only(row).pattern == ROW.pattern
    row.document.undo()
    assert only(row) == ROW
    row.key(Qt.Key.Key_Right)
    assert only(row).centre == (22.0, 20.0)
    row.key(Qt.Key.Key_Delete)
    assert row.part.holes == ()


def test_a_member_does_not_go_alone(row: Hand) -> None:
    row.click(50.0, 20.0)
    row.click(50.0, 20.0)
    row.key(Qt.Key.Key_Delete)
    assert only(row) == ROW
    assert "one of pattern h1" in row.said[-1]


def test_a_box_takes_a_pattern_only_whole(row: Hand) -> None:
    row.drag((10.0, 10.0), (60.0, 30.0))
    assert row.document.selection == ()
    row.drag((10.0, 10.0), (90.0, 30.0))
    assert row.document.selection == ("h1",)


def test_holding_a_member_or_with_shift_all(row: Hand) -> None:
    row.type("H")
    row.click(80.0, 24.0)
    row.enter()
    assert row.part.supports[-1].on == "h1.3"
    row.click(80.0, 24.0, SHIFT)
    row.enter()
    assert row.part.supports[-1].on == "h1"
    marks = row.canvas.symbols.marks(row.canvas.frame_now)
    assert [m.id for m in marks] == ["s1", "s2", "s2", "s2"]


def test_f2_changes_count_and_pitch(row: Hand) -> None:
    row.click(50.0, 20.0)
    row.key(Qt.Key.Key_F2)
    entry = row.canvas.entry
    assert entry.edit_of("count").text() == "3"
    for _ in range(3):
        row.tab()
    row.type("2")
    assert len(row.canvas.drawn.cut_holes) == 2
    row.tab()
    row.type("40")
    row.enter()
    assert only(row).pattern == RowPattern(2, 40.0)


def test_the_diameter_of_a_bolt_circle_stands_at_a_hole(hand: Hand) -> None:
    circle = CircleHole("h1", (50.0, 30.0), 6.0, BoltCircle(6, 20.0, 0.0))
    hand.document.apply("circle", replace(hand.part, holes=(circle,)))
    hand.document.select("h1")
    marks = marks_of(hand.canvas.drawn, ("h1",), False)
    mark = next(m for m in marks if m.what == "diameter")
    middle = (mark.a[0] + mark.b[0]) / 2.0, (mark.a[1] + mark.b[1]) / 2.0
    assert middle == pytest.approx((70.0, 30.0))


def test_the_cursor_tells_pattern_and_member(row: Hand) -> None:
    row.go(34.0, 44.0)
    row.go(50.0, 20.0)
    assert row.canvas.viewport().toolTip() == "hole h1.2, ⌀ 8 mm, one of row of holes h1"
    row.key(Qt.Key.Key_PageDown)
    while row.document.selection != ("h1",):
        row.key(Qt.Key.Key_PageDown)
    assert row.said[-1] == "Selected: row of holes h1, 3 holes, each ⌀ 8 mm."
