"""Rings across the part's edge are cut out or joined; mirrored copies."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from screenapp.model.part import CircleHole
from screenapp.model.shape import shape_of
from screenapp.window.board.ring_choice import CUT, JOIN
from tests.window.board_kit import LEFT, Hand, plate

SHIFT = Qt.KeyboardModifier.ShiftModifier
WHOLE = 6000.0 - 100.0 * math.pi


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    made = Hand(plate())
    qtbot.addWidget(made.board)
    return made


def across(hand: Hand) -> None:
    hand.type("R")
    hand.click(90.0, 20.0)
    hand.click(110.0, 40.0)


def test_a_rectangle_across_the_edge_is_asked_for_and_cut_by_a_key(hand: Hand) -> None:
    across(hand)
    assert hand.canvas.ring_choice.busy
    assert hand.canvas.previewing  # what the focused button would make
    assert shape_of(hand.canvas.part).area == pytest.approx(WHOLE - 200.0)
    hand.key(Qt.Key.Key_X)
    assert not hand.canvas.ring_choice.busy
    assert shape_of(hand.part).area == pytest.approx(WHOLE - 200.0)
    assert hand.document.history.undo_name == "cut a ring out"
    assert hand.canvas.tool is not None
    assert hand.canvas.tool.name == "Select"
    hand.document.undo()
    assert hand.part == plate()


def test_it_is_joined_by_the_button_and_previewed_by_tab(hand: Hand) -> None:
    across(hand)
    hand.tab()
    assert shape_of(hand.canvas.part).area == pytest.approx(WHOLE + 200.0)
    QTest.mouseClick(hand.canvas.ring_choice.button(JOIN), LEFT)
    assert shape_of(hand.part).area == pytest.approx(WHOLE + 200.0)
    assert hand.document.history.undo_name == "join a ring"


def test_escape_leaves_the_part_and_the_ring_as_they_were(hand: Hand) -> None:
    across(hand)
    hand.key(Qt.Key.Key_Escape)
    assert not hand.canvas.ring_choice.busy
    assert not hand.canvas.previewing
    assert hand.part == plate()
    hand.click(110.0, 40.0)
    assert hand.canvas.ring_choice.busy


def test_what_cannot_be_is_greyed_and_said(hand: Hand) -> None:
    hand.type("R")
    hand.click(60.0, -4.0)
    hand.click(70.0, 64.0)
    choice = hand.canvas.ring_choice
    assert not choice.button(CUT).isEnabled()
    assert choice.button(JOIN).isEnabled()
    assert choice.button(JOIN).hasFocus()
    hand.key(Qt.Key.Key_X)
    assert hand.part == plate()


def test_a_circle_and_a_slot_across_the_edge_keep_their_arcs(hand: Hand) -> None:
    hand.type("C")
    hand.click(100.0, 30.0)
    hand.type("20")
    hand.enter()
    hand.key(Qt.Key.Key_J)
    assert shape_of(hand.part).area == pytest.approx(WHOLE + 50.0 * math.pi)
    hand.document.undo()
    hand.key(Qt.Key.Key_Escape)
    hand.type("O")
    hand.click(0.0, 50.0)
    hand.click(20.0, 50.0)
    hand.click(20.0, 54.0)
    hand.key(Qt.Key.Key_X)
    assert shape_of(hand.part).area == pytest.approx(WHOLE - 20.0 * 8.0 - 8.0 * math.pi)


def test_a_chain_across_a_hole_opens_it(hand: Hand) -> None:
    hand.type("L")
    for place in ((50.0, 28.0), (80.0, 28.0), (80.0, 32.0), (50.0, 32.0)):
        hand.click(*place)
    hand.enter()
    hand.key(Qt.Key.Key_X)
    assert [h.id for h in hand.part.holes] == ["h1"]
    assert shape_of(hand.part).area < WHOLE - 50.0


def test_holes_are_mirrored_about_an_edge_and_about_two_places(hand: Hand) -> None:
    small = CircleHole("h1", (20.0, 20.0), 8.0)
    hand.document.apply("small", replace(hand.part, holes=(small,)))
    hand.click(20.0, 20.0)
    hand.type("I")
    hand.click(50.0, 4.0)
    hand.go(50.0, 40.0)
    assert len(hand.canvas.part.holes) == 2
    hand.click(50.0, 56.0)
    assert hand.part.holes[1] == CircleHole("h2", (80.0, 20.0), 8.0)
    assert hand.document.history.undo_name == "mirror holes"


def test_a_half_is_mirrored_about_its_edge_with_and_without_a_mouse(hand: Hand) -> None:
    hand.type("I")
    hand.go(100.0, 20.0)
    assert hand.canvas.previewing
    hand.click(100.0, 20.0)
    assert shape_of(hand.part).area == pytest.approx(2.0 * WHOLE)
    hand.document.undo()
    hand.document.select("e3")
    hand.type("I")
    hand.enter()
    assert shape_of(hand.part).area == pytest.approx(2.0 * WHOLE)
    assert hand.document.history.undo_name == "mirror the half"


def test_with_nothing_to_mirror_it_is_said(hand: Hand) -> None:
    hand.type("I")
    hand.click(30.0, 45.0)
    assert "select the holes" in hand.said[-1]
    hand.enter()
    assert "Select an edge" in hand.said[-1]
    assert hand.part == plate()
