"""Arcs about a centre and tangent, rounded rectangles, chamfers, offsets: by mouse and keys."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest
from PySide6.QtCore import Qt
from pytestqt.qtbot import QtBot

from screenapp.model.curves import Arc
from screenapp.model.part import Loop, LoopHole, Part
from screenapp.model.shape import edge_curves, shape_of
from tests.window.board_kit import Hand, plate


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    made = Hand(plate())
    qtbot.addWidget(made.board)
    return made


@pytest.fixture
def bare(qtbot: QtBot) -> Hand:
    made = Hand(replace(plate(), outline=None, holes=()))
    qtbot.addWidget(made.board)
    made.canvas.show_box((-20.0, -20.0, 120.0, 80.0))
    return made


def outline(hand: Hand) -> Loop:
    assert hand.part.outline is not None
    return hand.part.outline


def test_a_half_disc_by_its_centre(bare: Hand) -> None:
    bare.type("E")
    bare.click(20.0, 20.0)
    bare.click(50.0, 20.0)
    for x, y in ((30.0, 0.0), (50.0, -10.0), (70.0, 0.0), (80.0, 20.0)):
        bare.go(x, y)
    bare.click(80.0, 20.0)
    bare.type("L")
    bare.enter()
    arc = edge_curves(outline(bare))[0]
    assert isinstance(arc, Arc)
    assert arc.centre == pytest.approx((50.0, 20.0))
    assert arc.point(0.5) == pytest.approx((50.0, -10.0))
    assert shape_of(bare.part).area == pytest.approx(450.0 * math.pi)


def test_a_centre_arc_by_a_typed_angle_the_other_way(bare: Hand) -> None:
    bare.type("E")
    bare.click(80.0, 20.0)
    bare.click(50.0, 20.0)
    bare.type("-90")
    bare.enter()
    bare.type("L")
    bare.click(50.0, 20.0)
    bare.enter()
    assert [c.at for c in outline(bare).corners] == [
        pytest.approx((80.0, 20.0)),
        pytest.approx((50.0, -10.0)),
        (50.0, 20.0),
    ]
    assert shape_of(bare.part).area == pytest.approx(225.0 * math.pi)


def test_escape_steps_back_through_a_centre_arc(bare: Hand) -> None:
    bare.type("E")
    bare.click(20.0, 20.0)
    bare.click(50.0, 20.0)
    assert "angle" in bare.canvas.tool.hint()  # type: ignore[union-attr]
    bare.key(Qt.Key.Key_Escape)
    assert "centre" in bare.canvas.tool.hint()  # type: ignore[union-attr]
    bare.key(Qt.Key.Key_Escape)
    assert "start" in bare.canvas.tool.hint()  # type: ignore[union-attr]


def test_a_stadium_of_lines_and_tangent_arcs(bare: Hand) -> None:
    bare.type("L")
    bare.click(20.0, 0.0)
    bare.click(80.0, 0.0)
    bare.type("T")
    bare.click(80.0, 40.0)
    bare.type("L")
    bare.click(20.0, 40.0)
    bare.type("T")
    bare.click(20.0, 0.0)
    arcs = [c for c in edge_curves(outline(bare)) if isinstance(c, Arc)]
    assert [a.radius for a in arcs] == pytest.approx([20.0, 20.0])
    assert shape_of(bare.part).area == pytest.approx(60.0 * 40.0 + 400.0 * math.pi)


def test_a_tangent_arc_needs_an_edge_and_says_so(bare: Hand) -> None:
    bare.type("T")
    assert "straight edge" in bare.canvas.tool.hint()  # type: ignore[union-attr]
    bare.click(20.0, 0.0)
    bare.click(80.0, 0.0)
    assert bare.canvas.tool.hint() == "Click the end of the arc."  # type: ignore[union-attr]


def test_a_rounded_rectangle_as_outline_and_as_hole(bare: Hand) -> None:
    bare.type("Q")
    bare.click(0.0, 0.0)
    bare.click(100.0, 60.0)
    bare.type("8")
    bare.enter()
    assert [c.round for c in outline(bare).corners] == [8.0] * 4
    bare.type("Q")
    bare.click(30.0, 20.0)
    bare.click(60.0, 40.0)
    bare.click(34.0, 24.0)
    hole = bare.part.holes[0]
    assert isinstance(hole, LoopHole)
    assert [c.round for c in hole.loop.corners] == [4.0] * 4
    assert shape_of(bare.part).area == pytest.approx(
        6000.0 - 64.0 * (4.0 - math.pi) - 600.0 + 16.0 * (4.0 - math.pi)
    )


def test_a_radius_that_does_not_fit_a_rounded_rectangle_is_refused(bare: Hand) -> None:
    bare.type("Q")
    bare.click(0.0, 0.0)
    bare.click(100.0, 60.0)
    bare.type("31")
    bare.enter()
    assert bare.part.outline is None
    assert "at most 30 mm" in bare.said[-1]


def test_a_chamfer_by_a_click_and_a_number_in_inches(hand: Hand) -> None:
    hand.type("K")
    hand.click(100.0, 60.0)
    hand.type("0.25 in")
    assert hand.canvas.drawn.corners["c3"].chamfer == pytest.approx(6.35)
    hand.enter()
    assert outline(hand).corners[2].chamfer == pytest.approx(6.35)
    assert hand.document.history.undo_name == "chamfer a corner"
    hand.click(97.0, 57.0)  # on the chamfer itself
    hand.type("0")
    hand.enter()
    assert outline(hand).corners[2].sharp


def test_an_edge_is_offset_by_the_cursor_and_by_a_number(hand: Hand) -> None:
    hand.type("U")
    hand.click(100.0, 20.0)
    hand.go(112.0, 22.0)
    hand.click(112.0, 22.0)
    assert outline(hand).corners[1].at[0] == pytest.approx(112.0, abs=0.6)
    assert outline(hand).corners[1].at[0] == outline(hand).corners[2].at[0]
    hand.document.undo()
    hand.click(100.0, 20.0)
    hand.type("-7.5")
    hand.enter()
    assert outline(hand).corners[1].at == (92.5, 0.0)
    assert hand.document.history.undo_name == "offset edge e2"


def test_an_offset_that_cannot_be_is_said_on_the_board(qtbot: QtBot) -> None:
    from screenapp.model import edits

    part = edits.insert_corner(plate(), "e1", (40.0, 0.0))
    hand = Hand(part)
    qtbot.addWidget(hand.board)
    hand.type("U")
    hand.click(20.0, 0.0)
    hand.type("3")
    hand.enter()
    assert hand.part is part
    assert "would not meet" in hand.said[-1]


def test_escape_drops_an_offset(hand: Hand) -> None:
    hand.type("U")
    hand.click(100.0, 20.0)
    hand.go(112.0, 22.0)
    assert hand.canvas.previewing
    hand.key(Qt.Key.Key_Escape)
    assert not hand.canvas.previewing
    assert hand.part == plate()
    assert isinstance(hand.part, Part)
