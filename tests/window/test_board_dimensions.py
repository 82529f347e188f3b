"""Dimensions on the board: what is shown, and numbers edited where they stand."""

from __future__ import annotations

import pytest
from PySide6.QtCore import QPoint, Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from screenapp.model import edit_dimensioned, edits
from screenapp.model.edit_dimensions import add_dimension, formula_at, set_dimension, with_formulas
from screenapp.model.part import CircleHole, Corner, Edge, Loop, Part, SlotHole
from tests.window.board_kit import LEFT, NONE, Hand, plate

CONTROL = Qt.KeyboardModifier.ControlModifier
Key = tuple[str, str, str]
WIDTH: Key = ("overall", "", "width")
HEIGHT: Key = ("overall", "", "height")


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    return shown(qtbot, plate())


def shown(qtbot: QtBot, part: Part) -> Hand:
    made = Hand(part)
    qtbot.addWidget(made.board)
    paint(made)
    return made


def paint(hand: Hand) -> None:
    """Numbers are where they were last painted."""
    hand.canvas.grab()
    QApplication.processEvents()


def where(hand: Hand, key: Key) -> QPoint:
    paint(hand)
    placed = hand.canvas.dimensions.item.placed(key)
    assert placed is not None, key
    return placed.middle.toPoint()


def edit(hand: Hand, key: Key, text: str, last: Qt.Key = Qt.Key.Key_Return) -> None:
    """Double-click a number, type over it, press a key."""
    at = where(hand, key)
    view = hand.canvas.viewport()
    QTest.mouseMove(view, at)
    QTest.mouseClick(view, LEFT, NONE, at)
    QTest.mouseDClick(view, LEFT, NONE, at)
    QApplication.processEvents()
    assert hand.canvas.dimensions.editor.isVisible()
    hand.type(text)
    hand.key(last)
    paint(hand)


def keys(hand: Hand) -> set[Key]:
    paint(hand)
    return {m.key for m in hand.canvas.dimensions.item.marks}


def hole(part: Part) -> CircleHole:
    found = part.holes[0]
    assert isinstance(found, CircleHole)
    return found


def places(part: Part) -> list[tuple[float, float]]:
    assert part.outline is not None
    return [c.at for c in part.outline.corners]


def test_overall_sizes_and_what_is_selected(hand: Hand) -> None:
    assert keys(hand) == {WIDTH, HEIGHT}
    hand.click(50.0, 30.0)
    hole_marks = {("place", "h1", "x"), ("place", "h1", "y"), ("diameter", "h1", "diameter")}
    assert keys(hand) == {WIDTH, HEIGHT} | hole_marks
    hand.click(50.0, 0.0)
    assert keys(hand) == {WIDTH, HEIGHT, ("length", "e1", "length")}
    hand.click(100.0, 60.0)
    lengths = {("length", "e2", "length"), ("length", "e3", "length")}
    assert keys(hand) == {WIDTH, HEIGHT} | lengths


def test_a_key_shows_all_and_another_none(hand: Hand) -> None:
    hand.key(Qt.Key.Key_D)
    assert ("diameter", "h1", "diameter") in keys(hand)
    hand.key(Qt.Key.Key_D)
    assert keys(hand) == {WIDTH, HEIGHT}
    hand.key(Qt.Key.Key_D, Qt.KeyboardModifier.ShiftModifier)
    assert keys(hand) == set()
    hand.key(Qt.Key.Key_D, Qt.KeyboardModifier.ShiftModifier)
    assert keys(hand) == {WIDTH, HEIGHT}


def test_results_are_not_covered_but_by_all_dimensions(hand: Hand) -> None:
    hand.document.look(lens="Stress")
    assert keys(hand) == set()
    hand.key(Qt.Key.Key_D)
    assert WIDTH in keys(hand)


def test_alike_holes_and_rounds_are_told_once(qtbot: QtBot) -> None:
    part = plate()
    part = edits.add_circle_hole(part, (20.0, 15.0), 6.0)
    part = edits.add_circle_hole(part, (80.0, 15.0), 6.0)
    for corner in ("c1", "c2"):
        part = edits.set_round(part, corner, 5.0)
    hand = shown(qtbot, part)
    hand.key(Qt.Key.Key_D)
    paint(hand)
    texts = {
        m.key: hand.canvas.dimensions.item.text_of(m) for m in hand.canvas.dimensions.item.marks
    }
    assert texts[("diameter", "h2", "diameter")] == "2 × ⌀\u20096"
    assert ("diameter", "h3", "diameter") not in texts
    assert texts[("radius", "c1", "radius")] == "2 × R\u20095"
    assert ("place", "h3", "y") not in texts  # level with h2


def test_the_overall_width_is_edited_where_it_stands(hand: Hand) -> None:
    edit(hand, WIDTH, "5 in")
    assert places(hand.part) == [(0, 0), (127, 0), (127, 60), (0, 60)]
    assert hand.canvas.hasFocus()
    assert not hand.canvas.dimensions.editor.isVisible()
    hand.document.undo()
    assert places(hand.part)[1] == (100, 0)


def test_hole_sizes_and_places_are_edited(hand: Hand) -> None:
    hand.click(50.0, 30.0)
    edit(hand, ("diameter", "h1", "diameter"), "2*8")
    edit(hand, ("place", "h1", "x"), "40")
    edit(hand, ("place", "h1", "y"), "25")
    assert hand.part.holes == (CircleHole("h1", (40.0, 25.0), 16.0),)


def test_an_edge_is_made_longer_and_what_was_square_stays_so(hand: Hand) -> None:
    hand.click(100.0, 20.0)
    edit(hand, ("length", "e2", "length"), "80")
    assert places(hand.part) == [(0, 0), (100, 0), (100, 80), (0, 80)]


def test_a_radius_is_edited(qtbot: QtBot) -> None:
    hand = shown(qtbot, edits.set_round(plate(), "c3", 12.0))
    hand.document.select("c3")
    edit(hand, ("radius", "c3", "radius"), "15")
    assert hand.part.outline is not None
    assert hand.part.outline.corners[2].round == 15.0


def test_a_slot_is_edited(qtbot: QtBot) -> None:
    slot = SlotHole("h1", (50.0, 30.0), 40.0, 12.0, 0.0)
    hand = shown(qtbot, Part(outline=plate().outline, holes=(slot,)))
    hand.document.select("h1")
    edit(hand, ("size", "h1", "length"), "44")
    edit(hand, ("size", "h1", "width"), "14")
    assert hand.part.holes == (SlotHole("h1", (50.0, 30.0), 44.0, 14.0, 0.0),)


def test_expressions_are_kept_and_followed(qtbot: QtBot) -> None:
    hand = shown(qtbot, add_dimension(plate(), "w", 100.0))
    edit(hand, WIDTH, "w + 20")
    wide = set_dimension(hand.part, "w", 110.0)
    assert places(wide)[1] == (130.0, 0.0)
    hand.click(50.0, 30.0)
    edit(hand, ("place", "h1", "x"), "w/2")
    assert formula_at(hand.part, "holes.h1.centre.0") == "w/2"
    mark = next(m for m in hand.canvas.dimensions.item.marks if m.key == ("place", "h1", "x"))
    assert hand.canvas.dimensions.item.text_of(mark) == "=\u200950"


def test_an_edit_that_would_move_what_an_expression_gives_is_refused(qtbot: QtBot) -> None:
    part = with_formulas(add_dimension(plate(), "w", 100.0), {"outline.corners.c3.at.0": "w"})
    hand = shown(qtbot, part)
    hand.click(50.0, 0.0)
    edit(hand, ("length", "e1", "length"), "90")
    assert hand.part == part
    assert hand.said[-1].startswith("the x of corner c3 is w: change its dimension")
    assert hand.canvas.dimensions.editor.isVisible()
    hand.key(Qt.Key.Key_Escape)
    assert not hand.canvas.dimensions.editor.isVisible()
    assert hand.canvas.hasFocus()


def test_nonsense_is_marked_and_changes_nothing(hand: Hand) -> None:
    before = hand.part
    edit(hand, WIDTH, "12 kN")
    assert "kN is a force" in hand.canvas.dimensions.editor.toolTip()
    hand.key(Qt.Key.Key_Escape)
    edit(hand, WIDTH, "-3")
    assert hand.part == before
    hand.key(Qt.Key.Key_Escape)


def test_by_keys_alone_from_number_to_number(hand: Hand) -> None:
    paint(hand)
    hand.key(Qt.Key.Key_D, CONTROL)
    assert hand.canvas.dimensions.editor.accessibleName() == "Overall width"
    hand.type("120")
    hand.key(Qt.Key.Key_Tab)
    paint(hand)
    assert hand.canvas.dimensions.editor.accessibleName() == "Overall height"
    hand.type("50")
    hand.enter()
    assert places(hand.part) == [(0, 0), (120, 0), (120, 50), (0, 50)]


def test_a_dragged_corner_shows_its_edges_live(hand: Hand) -> None:
    hand.click(100.0, 60.0)
    hand.press(100.0, 60.0)
    hand.go(90.0, 60.0)
    hand.go(80.0, 60.0)
    lengths = {m.key: m.value for m in hand.canvas.dimensions.item.marks if m.what == "length"}
    assert lengths[("length", "e3", "length")] == 80.0
    hand.release(80.0, 60.0)


def test_numbers_follow_the_units(hand: Hand) -> None:
    hand.document.apply("units", edits.set_units(hand.part, "in-lbf-ksi"))
    paint(hand)
    texts = {hand.canvas.dimensions.item.text_of(m) for m in hand.canvas.dimensions.item.marks}
    assert texts == {"3.937", "2.362"}
    edit(hand, WIDTH, "4")
    assert places(hand.part)[1] == (pytest.approx(101.6), 0.0)


def test_overall_size_that_ends_on_an_arc_is_refused_in_words() -> None:
    loop = Loop(
        (Corner("c1", (0.0, 0.0)), Corner("c2", (0.0, 40.0))),
        (Edge("e1", (20.0, 20.0)), Edge("e2")),
    )
    part = Part(outline=loop)
    with pytest.raises(edits.EditError, match="overall width ends on an arc"):
        edit_dimensioned.set_overall(part, 0, 30.0)
    wider = edit_dimensioned.set_arc_radius(part, "e1", 25.0)
    assert wider.outline is not None
    through = wider.outline.edges[0].through
    assert through is not None
    # the rise of an arc of radius 25 over a chord of 40: 25 - √(25² - 20²) = 10
    assert through == pytest.approx((10.0, 20.0))
    with pytest.raises(edits.EditError, match="more than 20 mm"):
        edit_dimensioned.set_arc_radius(part, "e1", 19.0)


def test_a_fitted_part_keeps_its_dimensions_clear_of_the_scale_bar(qtbot: QtBot) -> None:
    hand = shown(qtbot, plate())
    right, high = hand.canvas.scale_bar.REACH
    hand.canvas.fit()
    paint(hand)
    placed = hand.canvas.dimensions.item.placed(WIDTH)
    assert placed is not None
    assert hand.canvas.frame_now.px((0.0, 0.0)).x() < right  # the line would run over the bar
    assert placed.middle.y() < hand.canvas.viewport().height() - high
