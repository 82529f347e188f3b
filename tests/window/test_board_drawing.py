"""Drawing on the board with the mouse and the keyboard."""

from __future__ import annotations

import math

import pytest
from PySide6.QtCore import Qt
from pytestqt.qtbot import QtBot

from screenapp.model.part import CircleHole, LoopHole, SlotHole
from screenapp.model.shape import shape_of
from tests.window.board_kit import Hand, plate


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    made = Hand()
    qtbot.addWidget(made.board)
    return made


@pytest.fixture
def on_plate(qtbot: QtBot) -> Hand:
    made = Hand(plate())
    qtbot.addWidget(made.board)
    return made


def corners_of(hand: Hand) -> list[tuple[float, float]]:
    assert hand.part.outline is not None
    return [c.at for c in hand.part.outline.corners]


def test_a_plate_with_a_hole_from_nothing(hand: Hand) -> None:
    hand.type("R")
    hand.click(0.0, 0.0)
    hand.click(100.0, 60.0)
    assert sorted(corners_of(hand)) == [(0, 0), (0, 60), (100, 0), (100, 60)]
    hand.type("C")
    hand.click(50.0, 30.0)
    hand.click(60.0, 30.0)
    assert hand.part.holes == (CircleHole("h1", (50.0, 30.0), 20.0),)
    assert shape_of(hand.part).area == pytest.approx(6000.0 - math.pi * 100.0, rel=1e-12)
    hand.document.undo()
    hand.document.undo()
    assert hand.part.outline is None


def test_lines_close_on_the_first_place(hand: Hand) -> None:
    hand.type("L")
    for place in ((0, 0), (80, 0), (80, 40), (0, 0)):
        hand.click(*place)
    assert corners_of(hand) == [(0, 0), (80, 0), (80, 40)]
    assert hand.canvas.tool is hand.board.tools[0]


def test_lines_close_with_enter_and_escape_drops_one_place(hand: Hand) -> None:
    hand.type("L")
    for place in ((0, 0), (80, 0), (80, 40), (40, 100)):
        hand.click(*place)
    hand.key(Qt.Key.Key_Escape)
    hand.click(0.0, 40.0)
    hand.enter()
    assert corners_of(hand) == [(0, 0), (80, 0), (80, 40), (0, 40)]


def test_exact_places_lengths_and_angles_are_typed(hand: Hand) -> None:
    hand.type("L")
    hand.go(10.0, 10.0)
    hand.type("0")
    hand.tab()
    hand.type("0")
    hand.enter()
    assert hand.canvas.hasFocus()  # Enter hands the keyboard back to the board
    hand.go(30.0, 0.0)
    for _ in range(3):  # the row, y, the length
        hand.key(Qt.Key.Key_Tab)
    hand.type("2 in")
    hand.tab()
    hand.type("0")
    hand.enter()
    hand.type("12.34 mm")
    hand.tab()
    hand.type("30")
    hand.enter()
    hand.enter()
    expected = [(0.0, 0.0), (50.8, 0.0), (12.34, 30.0)]
    for found, wanted in zip(corners_of(hand), expected, strict=True):
        assert found == pytest.approx(wanted, abs=1e-12)


def test_a_typed_value_that_cannot_be_read_is_marked_and_not_taken(hand: Hand) -> None:
    hand.type("L")
    hand.go(10.0, 10.0)
    hand.type("3 kg")
    hand.enter()
    assert hand.canvas.entry.edit_of("x").property("bad") is True
    assert hand.canvas.tool is not None
    assert hand.canvas.snap_at((0.0, 0.0)).kind != "start"
    hand.key(Qt.Key.Key_Escape)
    hand.key(Qt.Key.Key_Escape)
    assert not hand.canvas.entry.isVisible()


def test_an_arc_in_a_chain_by_three_places(hand: Hand) -> None:
    hand.type("L")
    hand.click(0.0, 0.0)
    hand.click(100.0, 0.0)
    hand.type("A")
    hand.click(100.0, 60.0)
    hand.click(130.0, 30.0)
    hand.type("L")
    hand.click(0.0, 60.0)
    hand.enter()
    assert corners_of(hand) == [(0, 0), (100, 0), (100, 60), (0, 60)]
    assert shape_of(hand.part).area == pytest.approx(6000.0 + math.pi * 900.0 / 2.0, rel=1e-12)


def test_an_edge_is_bent_by_its_radius(on_plate: Hand) -> None:
    on_plate.type("A")
    on_plate.click(100.0, 20.0)
    on_plate.go(110.0, 30.0)
    on_plate.key(Qt.Key.Key_Tab)
    on_plate.tab()
    on_plate.tab()
    on_plate.type("50")
    on_plate.enter()
    rise = 50.0 - math.sqrt(50.0**2 - 30.0**2)
    assert on_plate.part.outline is not None
    through = on_plate.part.outline.edges[1].through
    assert through == pytest.approx((100.0 + rise, 30.0), abs=1e-9)


def test_a_ring_inside_is_a_hole_and_one_outside_is_refused(on_plate: Hand) -> None:
    on_plate.type("L")
    for place in ((10, 10), (24, 10), (24, 24)):
        on_plate.click(*place)
    on_plate.enter()
    hole = on_plate.part.holes[-1]
    assert isinstance(hole, LoopHole)
    assert [c.at for c in hole.loop.corners] == [(10, 10), (24, 10), (24, 24)]
    on_plate.type("R")
    before = on_plate.part
    on_plate.click(104.0, 10.0)
    on_plate.click(112.0, 20.0)
    assert on_plate.part is before
    assert "not inside" in on_plate.said[-1]


def test_a_slot_by_two_centres_and_a_typed_width(on_plate: Hand) -> None:
    on_plate.type("O")
    on_plate.click(10.0, 10.0)
    on_plate.click(30.0, 10.0)
    on_plate.type("8")
    on_plate.enter()
    slot = on_plate.part.holes[-1]
    assert isinstance(slot, SlotHole)
    assert (slot.centre, slot.length, slot.width, slot.angle) == ((20.0, 10.0), 28.0, 8.0, 0.0)


def test_a_round_hole_by_a_typed_diameter_in_inches(on_plate: Hand) -> None:
    on_plate.type("C")
    on_plate.click(15.0, 15.0)
    on_plate.type("0.5 in")
    on_plate.enter()
    hole = on_plate.part.holes[-1]
    assert isinstance(hole, CircleHole)
    assert hole.diameter == pytest.approx(12.7, abs=1e-12)


def test_a_fillet_is_previewed_and_then_made(on_plate: Hand) -> None:
    on_plate.type("F")
    on_plate.click(100.0, 60.0)
    on_plate.type("8")
    assert on_plate.canvas.drawn.corners["c3"].round == 8.0
    assert on_plate.part.outline is not None
    assert on_plate.part.outline.corners[2].round == 0.0
    on_plate.enter()
    assert on_plate.part.outline.corners[2].round == 8.0
    assert on_plate.document.history.undo_name == "round a corner"


def test_a_fillet_that_does_not_fit_is_said(on_plate: Hand) -> None:
    on_plate.type("F")
    on_plate.click(100.0, 60.0)
    on_plate.type("90")
    assert any("does not fit" in s or "mm long" in s for s in on_plate.said)
    on_plate.key(Qt.Key.Key_Escape)
    on_plate.key(Qt.Key.Key_Escape)
    assert on_plate.part == plate()


def test_a_tool_left_half_done_leaves_no_trace(on_plate: Hand) -> None:
    on_plate.type("C")
    on_plate.click(15.0, 15.0)
    on_plate.type("S")
    assert on_plate.part == plate()
    assert not on_plate.canvas.previewing


def test_sizes_typed_after_a_typed_place_replace_what_is_shown(hand: Hand) -> None:
    hand.type("R")
    hand.go(50.0, 50.0)
    hand.type("0")
    hand.tab()
    hand.type("0")
    hand.enter()
    hand.type("80 mm")
    hand.tab()
    hand.type("40")
    hand.enter()
    assert corners_of(hand) == [(0, 0), (80, 0), (80, 40), (0, 40)]
