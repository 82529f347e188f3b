"""What is typed as an expression beside the board is kept in the load or support."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest
from PySide6.QtWidgets import QPushButton
from pytestqt.qtbot import QtBot

from screenapp.model.edit_dimensions import set_dimension
from screenapp.model.part import Dimension, ForceLoad, PressureLoad
from tests.window.board_kit import Hand, plate

PULL = Dimension("pull", 500.0, measures="number")


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    made = Hand(replace(plate(), dimensions=(PULL,)))
    qtbot.addWidget(made.board)
    return made


def put(hand: Hand, way: str, **texts: str) -> None:
    """Load edge e2 in a way, with these texts in its fields."""
    placing = hand.canvas.placing
    placing.load("e2", hand.px(100.0, 30.0))
    buttons = placing.popover.findChildren(QPushButton)
    next(b for b in buttons if b.text() == way and b.isVisible()).click()
    for name, text in texts.items():
        placing.popover.field(name).setText(text)
        placing.popover.field(name).textEdited.emit(text)
    assert placing.accept()


def test_a_size_is_kept_in_both_components(hand: Hand) -> None:
    put(hand, "Force", size="2*pull", angle="30")
    assert [f.text for f in hand.part.formulas] == ["(2*pull)*cos(30)", "(2*pull)*sin(30)"]
    part = set_dimension(hand.part, "pull", 700.0)
    (load,) = part.cases[0].loads
    assert isinstance(load, ForceLoad)
    assert math.hypot(load.x, load.y) == pytest.approx(1400.0)
    hand.document.undo()
    assert hand.part.formulas == ()


def test_so_are_single_values_and_plain_ones_are_plain(hand: Hand) -> None:
    put(hand, "Pressure", pressure="pull/100")
    put(hand, "Force", x="pull", y="3")
    put(hand, "Shear", shear="pull/50")
    put(hand, "Pressure", pressure="4")
    fields = {f.field: f.text for f in hand.part.formulas}
    assert fields == {
        "cases.k1.loads.l1.pressure": "pull/100",
        "cases.k1.loads.l2.x": "pull",
        "cases.k1.loads.l3.per_length": "pull/50",
    }
    assert hand.part.cases[0].loads[3] == PressureLoad("l4", "e2", 4.0)


def test_what_was_typed_and_then_overwritten_is_forgotten(hand: Hand) -> None:
    put(hand, "Force", size="2*pull", x="7")  # a component takes the size away
    assert hand.part.formulas == ()
    assert hand.part.cases[0].loads == (ForceLoad("l1", "e2", 7.0, 0.0),)
