"""Lengths and angles typed while drawing keep their expressions where they give the place."""

from __future__ import annotations

import math

import pytest
from PySide6.QtCore import Qt
from pytestqt.qtbot import QtBot

from screenapp.model.edit_dimensions import add_dimension, set_dimension
from screenapp.model.part import Part, Point, SlotHole
from screenapp.window.board.tools.relative import place_expressions
from tests.window.board_kit import Hand, plate


def hand_on(qtbot: QtBot, part: Part) -> Hand:
    for name, value in (("w", 80.0), ("h", 40.0)):
        part = add_dimension(part, name, value)
    part = add_dimension(part, "a", 30.0, "angle")
    made = Hand(part)
    qtbot.addWidget(made.board)
    made.canvas.show_box((-20.0, -20.0, 120.0, 80.0))
    return made


def place(hand: Hand, x: str, y: str) -> None:
    hand.type(x)
    hand.tab()
    hand.type(y)
    hand.enter()


def polar(hand: Hand, length: str, angle: str) -> None:
    """Type length and angle (the third and fourth field) and accept."""
    hand.type("0")
    hand.tab()
    hand.tab()
    hand.type(length)
    if angle:
        hand.tab()
        hand.type(angle)
    hand.enter()


def corners(part: Part) -> list[Point]:
    assert part.outline is not None
    return [c.at for c in part.outline.corners]


def test_level_and_upright_lengths_give_one_coordinate(qtbot: QtBot) -> None:
    hand = hand_on(qtbot, Part())
    hand.type("L")
    hand.go(0.0, 0.0)
    place(hand, "0", "5")
    polar(hand, "=w", "0")
    polar(hand, "h", "90")
    polar(hand, "w/2", "180")
    hand.enter()
    assert corners(hand.part) == [(0, 5), (80, 5), (80, 45), (40, 45)]
    wide = set_dimension(set_dimension(hand.part, "w", 100.0), "h", 20.0)
    assert corners(wide) == [(0, 5), (100, 5), (100, 25), (50, 25)]


def test_a_slanting_line_keeps_length_and_angle(qtbot: QtBot) -> None:
    hand = hand_on(qtbot, Part())
    hand.type("L")
    hand.go(0.0, 0.0)
    place(hand, "0", "0")
    polar(hand, "=w", "=a")
    polar(hand, "=h", "150")
    hand.enter()
    turned = set_dimension(set_dimension(hand.part, "a", 20.0), "h", 10.0)
    c, s = math.cos(math.radians(20.0)), math.sin(math.radians(20.0))
    first = (80.0 * c, 80.0 * s)
    c, s = math.cos(math.radians(150.0)), math.sin(math.radians(150.0))
    want = [(0.0, 0.0), first, (first[0] + 10.0 * c, first[1] + 10.0 * s)]
    for found, wanted in zip(corners(turned), want, strict=True):
        assert found == pytest.approx(wanted, abs=1e-9)


def test_a_length_in_a_direction_of_the_cursor_is_a_number_and_said(qtbot: QtBot) -> None:
    hand = hand_on(qtbot, Part())
    hand.type("L")
    hand.go(0.0, 0.0)
    place(hand, "0", "0")
    hand.go(30.0, 40.0)
    polar(hand, "=w", "")
    assert "kept as a number, 80 mm" in hand.said[-1]
    assert "type the angle too" in hand.said[-1]
    hand.go(60.0, 0.0)
    place(hand, "60", "0")
    hand.enter()
    assert hand.part.formulas == ()


def test_plain_numbers_leave_no_expression(qtbot: QtBot) -> None:
    hand = hand_on(qtbot, Part())
    hand.type("L")
    hand.go(0.0, 0.0)
    place(hand, "0", "0")
    polar(hand, "60", "0")
    polar(hand, "30", "90")
    hand.enter()
    assert corners(hand.part) == [(0, 0), (60, 0), (60, 30)]
    assert hand.part.formulas == ()


def test_a_plain_length_follows_a_place_that_is_given(qtbot: QtBot) -> None:
    hand = hand_on(qtbot, Part())
    hand.type("L")
    hand.go(0.0, 0.0)
    place(hand, "0", "0")
    place(hand, "=w", "0")
    polar(hand, "30", "90")
    hand.enter()
    assert corners(set_dimension(hand.part, "w", 95.0)) == [(0, 0), (95, 0), (95, 30)]


def test_a_slot_by_length_angle_and_width(qtbot: QtBot) -> None:
    hand = hand_on(qtbot, plate())
    hand.type("O")
    hand.go(20.0, 10.0)
    place(hand, "20", "10")
    polar(hand, "=w/4", "0")
    hand.type("=h/10")
    hand.enter()
    wide = set_dimension(set_dimension(hand.part, "w", 120.0), "h", 60.0)
    assert hand.part.holes[-1] == SlotHole("h2", (30.0, 10.0), 24.0, 4.0)
    assert wide.holes[-1] == SlotHole("h2", (35.0, 10.0), 36.0, 6.0)


def test_a_slanting_slot_follows_its_angle(qtbot: QtBot) -> None:
    hand = hand_on(qtbot, plate())
    hand.type("O")
    hand.go(15.0, 8.0)
    place(hand, "15", "8")
    polar(hand, "=w/8", "=a")
    hand.type("4")
    hand.enter()
    turned = set_dimension(set_dimension(hand.part, "a", 45.0), "w", 64.0).holes[-1]
    assert isinstance(turned, SlotHole)
    assert turned.angle == 45.0
    assert turned.length == pytest.approx(12.0)
    reach = 4.0 * math.sqrt(0.5)
    assert turned.centre == pytest.approx((15.0 + reach, 8.0 + reach))


def test_ends_of_a_slot_given_by_coordinates_are_numbers_and_said(qtbot: QtBot) -> None:
    hand = hand_on(qtbot, plate())
    hand.type("O")
    hand.go(20.0, 10.0)
    place(hand, "=w/4", "10")
    place(hand, "=w/2", "10")
    hand.type("5")
    hand.enter()
    assert hand.part.holes[-1] == SlotHole("h2", (30.0, 10.0), 25.0, 5.0)
    assert hand.part.formulas == ()
    assert any("type its length and angle" in said for said in hand.said)


def test_escape_forgets_what_was_typed_for_a_place(qtbot: QtBot) -> None:
    hand = hand_on(qtbot, plate())
    hand.type("O")
    hand.go(20.0, 10.0)
    place(hand, "=w/4", "10")
    hand.key(Qt.Key.Key_Escape)
    hand.click(15.0, 10.0)
    hand.click(35.0, 10.0)
    hand.type("4")
    hand.enter()
    assert hand.part.formulas == ()


def test_what_would_be_too_long_is_a_number_and_said() -> None:
    texts, remark = place_expressions(
        (1.0, 0.0), {"x": "w" + " + w" * 60}, {"length": "h" * 40, "angle": None}, (1.0, 9.0)
    )
    assert texts == {}
    assert "over 200 characters" in remark
