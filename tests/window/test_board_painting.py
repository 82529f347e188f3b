"""What the board paints, by the pixels."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest
from PySide6.QtCore import QPointF
from PySide6.QtGui import QColor, QImage
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from screenapp.model.part import (
    BearingLoad,
    Case,
    FixedSupport,
    ForceLoad,
    LineLoad,
    PressureLoad,
    RollerSupport,
)
from screenapp.window import theme
from screenapp.window.board.screen_item import ScreenItem
from tests.window.board_kit import Hand, plate


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    theme.choose("paper")
    made = Hand(plate())
    qtbot.addWidget(made.board)
    return made


def grabbed(hand: Hand) -> QImage:
    QApplication.processEvents()
    return hand.canvas.viewport().grab().toImage()


def darkest(image: QImage, at: QPointF, around: int = 1) -> int:
    """The smallest lightness within some pixels of a place."""
    x, y = round(at.x()), round(at.y())
    reach = range(-around, around + 1)
    return min(image.pixelColor(x + i, y + j).lightness() for i in reach for j in reach)


@pytest.mark.parametrize("scale", [20.0, 1e3, 9e3])
def test_outline_and_rim_stay_where_they_are_at_any_zoom(hand: Hand, scale: float) -> None:
    for place in ((100.0, 20.0), (50.0 + 10.0 * math.cos(0.3), 30.0 + 10.0 * math.sin(0.3))):
        hand.canvas.fit()
        spot = hand.canvas.frame_now.px(place)
        hand.canvas.zoom(scale / hand.canvas.frame_now.scale, spot)
        image = grabbed(hand)
        assert darkest(image, hand.canvas.frame_now.px(place)) < 60


def test_the_outline_follows_a_pan_without_being_worked_out_again(hand: Hand) -> None:
    grabbed(hand)
    hand.canvas.view_box.translateBy(x=7.0, y=-3.0)
    image = grabbed(hand)
    for place in ((100.0, 20.0), (60.0, 30.0), (30.0, 60.0)):
        assert darkest(image, hand.canvas.frame_now.px(place)) < 60


def test_the_wall_differs_from_board_and_hole(hand: Hand) -> None:
    image, frame = grabbed(hand), hand.canvas.frame_now

    def colour(x: float, y: float) -> QColor:
        return image.pixelColor(frame.px((x, y)).toPoint())

    wall = colour(20.7, 20.7)
    assert wall != colour(53.3, 33.3)
    assert abs(wall.lightness() - colour(-3.3, 30.3).lightness()) < 40


def test_symbols_keep_their_size_and_stand_outside_the_material(hand: Hand) -> None:
    loads = (
        PressureLoad("l1", "e2", 1.0),
        ForceLoad("l2", "e3", 0.0, -1.0),
        LineLoad("l3", "e1", 0.0, 2.0),
    )
    hand.document.apply(
        "all",
        replace(
            hand.part,
            supports=(FixedSupport("s1", "e4"), RollerSupport("s2", "e1")),
            cases=(Case("k1", "a", loads),),
        ),
    )
    reach: dict[str, list[float]] = {}
    for factor in (1.0, 3.0):
        hand.canvas.zoom(factor)
        frame = hand.canvas.frame_now
        for mark in hand.canvas.symbols.marks(frame):
            points = [p for line in (*mark.lines, *mark.fills) for p in line]
            away = []
            for p in points:
                x, y = frame.mm(QPointF(*p))
                out = max(-x, x - 100.0, -y, y - 60.0)
                assert out * frame.scale > -1.0, f"{mark.id} is drawn over the material"
                away.append(out * frame.scale)
            reach.setdefault(mark.id, []).append(max(away))
    for first, second in reach.values():
        assert second == pytest.approx(first, abs=1.0)


def test_a_bearing_force_points_along_its_components(hand: Hand) -> None:
    load = BearingLoad("l1", "h1", -300.0, 400.0)
    hand.document.apply("load", replace(hand.part, cases=(Case("k1", "a", (load,)),)))
    frame = hand.canvas.frame_now
    mark = hand.canvas.symbols.marks(frame)[0]
    assert mark.label == "500 N"
    tip, tail = mark.fills[0][0], frame.pxs((50.0, 30.0))
    way = (tip - tail) / math.dist(tip, tail)
    assert way == pytest.approx([-0.6, -0.8], abs=1e-9)  # y is down on the screen


def test_a_fault_while_painting_is_shown_and_does_not_end_the_program(
    hand: Hand, caplog: pytest.LogCaptureFixture
) -> None:
    class Broken(ScreenItem):
        def draw(self, painter: object, frame: object) -> None:
            raise ValueError("nothing to draw with")

    item = Broken(70)
    hand.canvas.view_box.addItem(item, ignoreBounds=True)
    before = grabbed(hand)
    assert "nothing to draw with" in caplog.text
    hand.canvas.view_box.removeItem(item)
    assert grabbed(hand) != before


def test_the_present_case_is_what_is_shown(hand: Hand) -> None:
    cases = (
        Case("k1", "a", (BearingLoad("l1", "h1", 0.0, -5.0),)),
        Case("k2", "b", (BearingLoad("l2", "h1", 0.0, -7.0),)),
    )
    hand.document.apply("cases", replace(hand.part, cases=cases))
    assert [m.id for m in hand.canvas.symbols.marks(hand.canvas.frame_now)] == ["l1"]
    hand.document.look(case=1)
    assert [m.id for m in hand.canvas.symbols.marks(hand.canvas.frame_now)] == ["l2"]
