"""Selecting, dragging, nudging, removing and editing exactly on the board."""

from __future__ import annotations

from dataclasses import replace

import pytest
from PySide6.QtCore import QPoint, QPointF, Qt
from PySide6.QtGui import QWheelEvent
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from screenapp.model.part import CircleHole, FixedSupport, Probe
from tests.window.board_kit import Hand, plate

CONTROL, SHIFT = Qt.KeyboardModifier.ControlModifier, Qt.KeyboardModifier.ShiftModifier


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    made = Hand(replace(plate(), readings=(Probe("p1", "P1", (20.0, 20.0)),)))
    qtbot.addWidget(made.board)
    return made


def corner(hand: Hand, id_: str) -> tuple[float, float]:
    assert hand.part.outline is not None
    return next(c.at for c in hand.part.outline.corners if c.id == id_)


@pytest.mark.parametrize(
    ("place", "id_"),
    [
        ((100.0, 0.0), "c2"),
        ((50.0, 0.0), "e1"),
        ((60.0, 30.0), "h1"),
        ((50.0, 32.0), "h1"),
        ((20.0, 20.0), "p1"),
    ],
)
def test_a_click_selects_and_a_hover_names(
    hand: Hand, place: tuple[float, float], id_: str
) -> None:
    hand.go(*place)
    assert hand.document.hovered == id_
    assert id_.upper() in hand.canvas.viewport().toolTip().upper()
    hand.click(*place)
    assert hand.document.selection == (id_,)


def test_a_click_on_nothing_clears_and_shift_adds(hand: Hand) -> None:
    hand.click(100.0, 0.0)
    hand.click(50.0, 0.0, SHIFT)
    assert hand.document.selection == ("c2", "e1")
    hand.click(100.0, 0.0, SHIFT)
    assert hand.document.selection == ("e1",)
    hand.click(30.0, 45.0)
    assert hand.document.selection == ()


def test_dragging_a_corner_is_one_step_and_is_seen_on_the_way(hand: Hand) -> None:
    hand.press(100.0, 60.0)
    hand.go(110.0, 64.0)
    hand.go(120.0, 80.0)
    assert hand.canvas.drawn.corners["c3"].at == (120.0, 80.0)
    assert corner(hand, "c3") == (100.0, 60.0)
    hand.release(120.0, 80.0)
    assert corner(hand, "c3") == (120.0, 80.0)
    hand.document.undo()
    assert corner(hand, "c3") == (100.0, 60.0)
    assert not hand.document.history.can_undo


def test_a_hole_is_dragged_by_its_rim_and_a_probe_onto_the_rim_exactly(hand: Hand) -> None:
    hand.drag((60.0, 30.0), (72.0, 38.0))
    assert hand.part.holes[0] == CircleHole("h1", (62.0, 38.0), 20.0)
    hand.document.undo()
    hand.drag((20.0, 20.0), (50.0, 40.3))
    assert hand.part.readings[0].at == pytest.approx((50.0, 40.0), abs=0.2)
    x, y = hand.part.readings[0].at
    assert (x - 50.0) ** 2 + (y - 30.0) ** 2 == pytest.approx(100.0, rel=1e-12)


def test_escape_and_undo_in_mid_drag_leave_the_part_alone(hand: Hand) -> None:
    hand.press(100.0, 60.0)
    hand.go(120.0, 80.0)
    hand.key(Qt.Key.Key_Escape)
    hand.release(120.0, 80.0)
    assert corner(hand, "c3") == (100.0, 60.0)
    hand.drag((100.0, 60.0), (110.0, 70.0))
    hand.press(110.0, 70.0)
    hand.go(130.0, 80.0)
    hand.document.undo()
    hand.go(140.0, 80.0)
    hand.release(140.0, 80.0)
    assert corner(hand, "c3") == (100.0, 60.0)
    assert not hand.canvas.previewing


def test_control_holds_snaps_off(hand: Hand) -> None:
    hand.board.take("Lines")
    hand.go(21.3, 47.1)
    assert hand.canvas.place is not None
    assert hand.canvas.place.snap.kind == "grid"
    QTest.keyPress(hand.canvas, Qt.Key.Key_Control, CONTROL)
    assert hand.canvas.place.snap.kind == "none"
    assert hand.canvas.place.at == hand.canvas.place.raw
    QTest.keyRelease(hand.canvas, Qt.Key.Key_Control)
    assert hand.canvas.place.snap.kind == "grid"


@pytest.mark.parametrize(
    ("place", "kind"),
    [
        ((99.8, 59.9), "corner"),
        ((50.0, 30.2), "centre"),
        ((50.2, 0.1), "middle"),
        ((31.3, 0.4), "edge"),
        ((21.3, 47.1), "grid"),
    ],
)
def test_the_snap_in_force_is_named_in_the_corner(
    hand: Hand, place: tuple[float, float], kind: str
) -> None:
    hand.board.take("Lines")
    hand.go(*place)
    assert hand.canvas.place is not None
    assert hand.canvas.place.snap.kind == kind
    assert f"snap: {kind}" in hand.board.corner_text


def test_arrows_nudge_by_the_grid_step_and_delete_removes(hand: Hand) -> None:
    hand.click(60.0, 30.0)
    hand.key(Qt.Key.Key_Right)
    hole = hand.part.holes[0]
    assert isinstance(hole, CircleHole)
    assert hole.centre == (52.0, 30.0)
    hand.key(Qt.Key.Key_Delete)
    assert hand.part.holes == ()
    hand.click(100.0, 60.0)
    hand.key(Qt.Key.Key_Delete)
    assert hand.part.outline is not None
    assert [c.id for c in hand.part.outline.corners] == ["c1", "c2", "c4"]


def test_an_edge_is_not_removed_by_itself_and_it_is_said(hand: Hand) -> None:
    hand.click(50.0, 0.0)
    before = hand.part
    hand.key(Qt.Key.Key_Delete)
    assert hand.part is before
    assert "cannot be removed by itself" in hand.said[-1]


def test_a_double_click_opens_exact_values(hand: Hand) -> None:
    hand.double(100.0, 60.0)
    assert hand.canvas.entry.edit_of("x").text() == "100 mm"
    hand.type("4 in")
    hand.tab()
    hand.tab()
    hand.type("6")
    assert hand.canvas.drawn.corners["c3"].round == 6.0
    hand.enter()
    assert hand.part.outline is not None
    found = hand.part.outline.corners[2]
    assert found.at == pytest.approx((101.6, 60.0), abs=1e-12)
    assert found.round == 6.0
    assert not hand.canvas.entry.isVisible()


def test_f2_edits_a_hole_and_escape_drops_it(hand: Hand) -> None:
    hand.click(60.0, 30.0)
    hand.key(Qt.Key.Key_F2)
    hand.tab()
    hand.tab()
    hand.type("30")
    hand.key(Qt.Key.Key_Escape)
    hand.key(Qt.Key.Key_Escape)
    assert hand.part.holes[0] == CircleHole("h1", (50.0, 30.0), 20.0)
    assert not hand.canvas.entry.isVisible()
    hand.key(Qt.Key.Key_F2)
    hand.tab()
    hand.tab()
    hand.type("30")
    hand.enter()
    assert hand.part.holes[0] == CircleHole("h1", (50.0, 30.0), 30.0)


def test_a_box_selects_what_is_in_it_and_everything_can_be_removed(hand: Hand) -> None:
    hand.drag((-8.0, -8.0), (40.0, 70.0))
    assert set(hand.document.selection) == {"c1", "c4", "p1"}
    hand.key(Qt.Key.Key_A, CONTROL)
    hand.key(Qt.Key.Key_Delete)
    assert hand.part.outline is None
    assert hand.part.holes == ()


def test_what_goes_with_a_hole_is_said(hand: Hand) -> None:
    hand.document.apply("hold", replace(hand.part, supports=(FixedSupport("s1", "h1"),)))
    hand.click(60.0, 30.0)
    hand.key(Qt.Key.Key_Delete)
    assert hand.part.supports == ()
    assert "s1" in hand.said[-1]


def test_the_wheel_keeps_the_place_under_the_cursor(hand: Hand) -> None:
    spot = hand.px(80.0, 40.0)
    before = hand.canvas.frame_now
    at = before.mm(QPointF(spot))
    event = QWheelEvent(
        QPointF(spot),
        QPointF(hand.canvas.mapToGlobal(spot)),
        QPoint(),
        QPoint(0, 240),
        Qt.MouseButton.NoButton,
        Qt.KeyboardModifier.NoModifier,
        Qt.ScrollPhase.NoScrollPhase,
        False,
    )
    QApplication.sendEvent(hand.canvas.viewport(), event)
    after = hand.canvas.frame_now
    assert after.scale > 1.3 * before.scale
    assert after.mm(QPointF(spot)) == pytest.approx(at, abs=1e-9)


def test_middle_right_and_space_drags_pan(hand: Hand) -> None:
    view = hand.canvas.viewport()
    for button in (Qt.MouseButton.MiddleButton, Qt.MouseButton.RightButton):
        at = hand.canvas.frame_now.mm(QPointF(300.0, 300.0))
        QTest.mousePress(view, button, Qt.KeyboardModifier.NoModifier, QPoint(300, 300))
        QTest.mouseMove(view, QPoint(340, 280))
        QTest.mouseRelease(view, button, Qt.KeyboardModifier.NoModifier, QPoint(340, 280))
        assert hand.canvas.frame_now.mm(QPointF(340.0, 280.0)) == pytest.approx(at, abs=1e-9)
    at = hand.canvas.frame_now.mm(QPointF(300.0, 300.0))
    QTest.keyPress(hand.canvas, Qt.Key.Key_Space)
    QTest.mousePress(view, Qt.MouseButton.LeftButton, pos=QPoint(300, 300))
    QTest.mouseMove(view, QPoint(320, 330))
    QTest.mouseRelease(view, Qt.MouseButton.LeftButton, pos=QPoint(320, 330))
    QTest.keyRelease(hand.canvas, Qt.Key.Key_Space)
    assert hand.canvas.frame_now.mm(QPointF(320.0, 330.0)) == pytest.approx(at, abs=1e-9)
    assert hand.part.holes == plate().holes


def test_keys_zoom_and_fit(hand: Hand) -> None:
    fitted = hand.canvas.frame_now
    hand.type("+")
    assert hand.canvas.frame_now.scale == pytest.approx(1.25 * fitted.scale, rel=1e-9)
    hand.type("-")
    hand.type("-")
    assert hand.canvas.frame_now.scale == pytest.approx(0.8 * fitted.scale, rel=1e-9)
    hand.key(Qt.Key.Key_Home)
    assert hand.canvas.frame_now.scale == pytest.approx(fitted.scale, rel=1e-9)


def test_an_edge_is_dragged_with_both_its_corners(hand: Hand) -> None:
    hand.drag((100.0, 20.0), (110.0, 20.0))
    assert corner(hand, "c2") == (110.0, 0.0)
    assert corner(hand, "c3") == (110.0, 60.0)
    assert hand.document.history.undo_name == "move edge e2"


def test_all_that_is_selected_is_dragged_together(hand: Hand) -> None:
    hand.click(100.0, 60.0)
    hand.click(60.0, 30.0, SHIFT)
    hand.drag((100.0, 60.0), (106.0, 64.0))
    assert corner(hand, "c3") == (106.0, 64.0)
    hole = hand.part.holes[0]
    assert isinstance(hole, CircleHole)
    assert hole.centre == pytest.approx((56.0, 34.0), abs=1e-9)
    assert corner(hand, "c2") == (100.0, 0.0)
    hand.click(106.0, 64.0)
    assert hand.document.selection == ("c3",)


def test_a_double_click_on_an_edge_puts_a_corner_there(hand: Hand) -> None:
    hand.double(100.0, 30.2)  # snaps to the middle
    assert hand.document.selection == ("c5",)
    assert corner(hand, "c5") == (100.0, 30.0)
    hand.type("120")
    hand.enter()
    assert corner(hand, "c5") == (120.0, 30.0)
    assert hand.part.outline is not None
    assert [e.id for e in hand.part.outline.edges] == ["e1", "e2", "e5", "e3", "e4"]
