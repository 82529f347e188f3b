"""Expressions on the board: typed while drawing and while editing, kept, and not dragged away."""

from __future__ import annotations

import pytest
from PySide6.QtCore import Qt
from pytestqt.qtbot import QtBot

from screenapp.model.edit_dimensions import add_dimension, formula_at, set_dimension, with_formulas
from screenapp.model.part import CircleHole, Part
from tests.window.board_kit import Hand, plate


def given() -> Part:
    """The plate with a dimension of 100 mm that gives its right side."""
    part = add_dimension(plate(), "width", 100.0)
    sides = {f"outline.corners.{c}.at.0": "width" for c in ("c2", "c3")}
    return with_formulas(part, sides)


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    made = Hand(given())
    qtbot.addWidget(made.board)
    return made


def typed(hand: Hand, *values: str) -> None:
    for i, value in enumerate(values):
        if i:
            hand.tab()
        hand.type(value)
    hand.enter()


def test_a_hole_is_drawn_by_expressions_and_follows_them(hand: Hand) -> None:
    hand.type("C")
    hand.go(20.0, 20.0)
    typed(hand, "=width/5", "2*7,5 mm")
    assert hand.canvas.hasFocus()
    typed(hand, "=width/20 + 1")
    assert hand.part.holes[-1] == CircleHole("h2", (20.0, 15.0), 6.0)
    wide = set_dimension(hand.part, "width", 120.0)
    assert wide.holes[-1] == CircleHole("h2", (24.0, 15.0), 7.0)


def test_a_rectangle_is_drawn_by_expressions(qtbot: QtBot) -> None:
    hand = Hand(add_dimension(add_dimension(Part(), "w", 80.0), "h", 50.0))
    qtbot.addWidget(hand.board)
    hand.type("R")
    hand.go(0.0, 0.0)
    typed(hand, "0", "-5")
    hand.go(30.0, 30.0)
    typed(hand, "=w", "h")
    wide = set_dimension(set_dimension(hand.part, "w", 90.0), "h", 20.0)
    assert wide.outline is not None
    assert [c.at for c in wide.outline.corners] == [(0, -5), (90, -5), (90, 15), (0, 15)]


def test_corners_of_a_chain_keep_what_was_typed(qtbot: QtBot) -> None:
    hand = Hand(add_dimension(Part(), "w", 80.0))
    qtbot.addWidget(hand.board)
    hand.type("L")
    hand.go(0.0, 0.0)
    typed(hand, "0", "0")
    typed(hand, "=w", "0")
    typed(hand, "=w/2", "w/4")
    hand.enter()
    wide = set_dimension(hand.part, "w", 100.0)
    assert wide.outline is not None
    assert [c.at for c in wide.outline.corners] == [(0, 0), (100, 0), (50, 25)]


def test_editing_shows_the_expression_and_keeps_it(hand: Hand) -> None:
    hand.double(100.0, 60.0)
    entry = hand.canvas.entry
    assert entry.edit_of("x").text() == "width"
    hand.enter()
    assert formula_at(hand.part, "outline.corners.c3.at.0") == "width"
    hand.double(100.0, 60.0)
    typed(hand, "width - 10")
    assert hand.part.outline is not None
    assert hand.part.outline.corners[2].at == (90.0, 60.0)
    assert formula_at(hand.part, "outline.corners.c3.at.0") == "width - 10"
    hand.double(90.0, 60.0)
    typed(hand, "95")
    assert formula_at(hand.part, "outline.corners.c3.at.0") is None


def test_a_broken_expression_is_marked_and_says_why(hand: Hand) -> None:
    hand.double(100.0, 60.0)
    before = hand.part
    typed(hand, "widht/2")
    edit = hand.canvas.entry.edit_of("x")
    assert edit.property("bad")
    assert 'did you mean "width"' in edit.toolTip()
    assert edit.hasFocus()
    assert hand.part == before


def test_what_an_expression_gives_is_not_dragged_nor_nudged(hand: Hand) -> None:
    before = hand.part
    hand.go(100.0, 60.0)
    assert hand.canvas.viewport().cursor().shape() == Qt.CursorShape.ForbiddenCursor
    hand.drag((100.0, 60.0), (80.0, 50.0))
    assert hand.part == before
    assert hand.said[-1] == (
        "The x of corner c3 is width: change width, or type a number in its place."
    )
    hand.click(100.0, 30.0)  # the edge between both
    hand.key(Qt.Key.Key_Right)
    assert hand.part == before
    hand.drag((0.0, 60.0), (0.0, 70.0))
    assert hand.part.outline is not None
    assert hand.part.outline.corners[3].at == (0.0, 70.0)
